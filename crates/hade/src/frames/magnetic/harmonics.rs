//! The field of a set of Gauss coefficients by spherical harmonics.
//!
//! V(r, φ', λ) = a Σₙ (a/r)ⁿ⁺¹ Σₘ (gₙᵐ cos mλ + hₙᵐ sin mλ) Pₙᵐ(sin φ'), B = −∇V, with a = 6371.2 km
//! and Schmidt's semi-normalised functions (World Magnetic Model technical report, eqs. 4–17).

use super::models::{Coefficients, HIGHEST};

/// The reference radius of both models, km.
pub(super) const REFERENCE_RADIUS: f64 = 6371.2;
/// Half the long axis of the WGS 84 ellipsoid, km.
pub(super) const SEMI_MAJOR: f64 = 6378.137;
/// The square of its eccentricity, f (2 − f) with 1/f = 298.257 223 563.
pub(super) const ECCENTRICITY_SQUARED: f64 = (2.0 - 1.0 / 298.257_223_563) / 298.257_223_563;

/// A place in geocentric coordinates.
#[derive(Clone, Copy, Debug)]
pub(super) struct Geocentric {
    /// The distance from the Earth's centre, km.
    pub radius: f64,
    /// The geocentric latitude φ', radians.
    pub latitude: f64,
}

/// The geocentric place of a geodetic latitude (radians) and height above the ellipsoid (km).
pub(super) fn geocentric(latitude: f64, height: f64) -> Geocentric {
    let (s, c) = latitude.sin_cos();
    let normal = SEMI_MAJOR / (1.0 - ECCENTRICITY_SQUARED * s * s).sqrt();
    let (p, z) = ((normal + height) * c, (normal * (1.0 - ECCENTRICITY_SQUARED) + height) * s);
    Geocentric { radius: p.hypot(z), latitude: z.atan2(p) }
}

/// The part of each degree n = 1, 2, … in the field: north, east, down along the geocentric axes, nT.
pub(super) fn by_degree(coefficients: &Coefficients, place: Geocentric, longitude: f64) -> Vec<[f64; 3]> {
    // With colatitude θ: cos θ = sin φ', sin θ = cos φ'; the poles are refused before.
    let (cos, sin) = place.latitude.sin_cos();
    let (p, dp) = legendre(cos, sin);
    let ratio = REFERENCE_RADIUS / place.radius;
    let waves: Vec<(f64, f64)> = (0..=coefficients.degree()).map(|m| (longitude * m as f64).sin_cos()).collect();
    (1..=coefficients.degree().min(HIGHEST))
        .map(|n| {
            let factor = ratio.powi(n as i32 + 2);
            let [mut north, mut east, mut down] = [0.0; 3];
            for (m, (sin_m, cos_m)) in waves.iter().enumerate().take(n + 1) {
                let [g, h] = coefficients.pair(n, m);
                let wave = g * cos_m + h * sin_m;
                north += wave * dp[n][m];
                east += m as f64 * (g * sin_m - h * cos_m) * p[n][m] / sin;
                down -= (n as f64 + 1.0) * wave * p[n][m];
            }
            [factor * north, factor * east, factor * down]
        })
        .collect()
}

type Table = [[f64; HIGHEST + 1]; HIGHEST + 1];

/// Schmidt's semi-normalised Pₙᵐ(cos θ) and dPₙᵐ/dθ, by the recursions in the degree.
fn legendre(cos: f64, sin: f64) -> (Table, Table) {
    let (mut p, mut dp): (Table, Table) = ([[0.0; HIGHEST + 1]; HIGHEST + 1], [[0.0; HIGHEST + 1]; HIGHEST + 1]);
    p[0][0] = 1.0;
    for n in 1..=HIGHEST {
        let k = n as f64;
        let step = if n == 1 { 1.0 } else { ((2.0 * k - 1.0) / (2.0 * k)).sqrt() };
        p[n][n] = step * sin * p[n - 1][n - 1];
        dp[n][n] = step * (sin * dp[n - 1][n - 1] + cos * p[n - 1][n - 1]);
        for m in 0..n {
            let order = m as f64;
            let root = (k * k - order * order).sqrt();
            let (two, two_slope, below) = if n >= 2 && m + 2 <= n {
                (p[n - 2][m], dp[n - 2][m], ((k - 1.0).powi(2) - order * order).sqrt())
            } else {
                (0.0, 0.0, 0.0)
            };
            p[n][m] = ((2.0 * k - 1.0) * cos * p[n - 1][m] - below * two) / root;
            dp[n][m] = ((2.0 * k - 1.0) * (cos * dp[n - 1][m] - sin * p[n - 1][m]) - below * two_slope) / root;
        }
    }
    (p, dp)
}

/// A vector along geocentric north, east, down turned to geodetic north, east, down; the angle is
/// geocentric less geodetic latitude.
pub(super) fn to_geodetic([north, east, down]: [f64; 3], angle: f64) -> [f64; 3] {
    let (s, c) = angle.sin_cos();
    [north * c - down * s, east, north * s + down * c]
}

/// The field at a geodetic latitude and longitude (radians) and height (km): north, east, down, nT.
pub(super) fn field(coefficients: &Coefficients, latitude: f64, longitude: f64, height: f64) -> [f64; 3] {
    let place = geocentric(latitude, height);
    let sum = total(&by_degree(coefficients, place, longitude));
    to_geodetic(sum, place.latitude - latitude)
}

/// The sum over the degrees.
pub(super) fn total(parts: &[[f64; 3]]) -> [f64; 3] {
    parts.iter().fold([0.0; 3], |s, p| [s[0] + p[0], s[1] + p[1], s[2] + p[2]])
}

#[cfg(test)]
mod tests {
    use super::*;

    /// Schmidt's functions of degree 3 as printed in textbooks (from memory), and the sum rule
    /// Σₘ (Pₙᵐ)² = 1, which fixes the normalisation of every degree.
    #[test]
    fn functions_are_schmidts() {
        let theta: f64 = 0.7;
        let (s, c) = theta.sin_cos();
        let (p, dp) = legendre(c, s);
        assert!((p[2][1] - 3.0_f64.sqrt() * s * c).abs() < 1e-15);
        assert!((p[3][0] - 0.5 * c * (5.0 * c * c - 3.0)).abs() < 1e-15);
        assert!((p[3][2] - 0.5 * 15.0_f64.sqrt() * s * s * c).abs() < 1e-15);
        assert!((p[3][3] - 0.25 * 10.0_f64.sqrt() * s * s * s).abs() < 1e-15);
        let step = 1e-5;
        let ((up, _), (down, _)) = (
            legendre((theta + step).cos(), (theta + step).sin()),
            legendre((theta - step).cos(), (theta - step).sin()),
        );
        for n in 1..=HIGHEST {
            let sum: f64 = p[n].iter().map(|v| v * v).sum();
            assert!((sum - 1.0).abs() < 1e-13, "degree {n}: {sum}");
            for m in 0..=n {
                let slope = (up[n][m] - down[n][m]) / (2.0 * step);
                assert!((dp[n][m] - slope).abs() < 1e-7, "{n},{m}: {} {slope}", dp[n][m]);
            }
        }
    }
}
