//! The field by another route: the potential in Cartesian solid harmonics, and its gradient by
//! differences along geodetic north, east and down.
//!
//! The recursion of V. E. Cunningham (1970, Celestial Mechanics 2, 207–216; cited from memory) builds
//! the unnormalised (a/r)ⁿ⁺¹ Pₙᵐ exp(imλ) from x, y, z alone: no angle, no geocentric latitude, no
//! derivative of a Legendre function and no turn of axes enters.

use super::harmonics::{ECCENTRICITY_SQUARED, REFERENCE_RADIUS, SEMI_MAJOR};
use super::models::{Coefficients, HIGHEST};

/// The step of the differences, km.
const STEP: f64 = 20.0;

/// The field at a geodetic latitude and longitude (radians) and height (km): north, east, down, nT.
pub(super) fn field_by_gradient(c: &Coefficients, latitude: f64, longitude: f64, height: f64) -> [f64; 3] {
    let ((sf, cf), (sl, cl)) = (latitude.sin_cos(), longitude.sin_cos());
    let normal = SEMI_MAJOR / (1.0 - ECCENTRICITY_SQUARED * sf * sf).sqrt();
    let at = [
        (normal + height) * cf * cl,
        (normal + height) * cf * sl,
        (normal * (1.0 - ECCENTRICITY_SQUARED) + height) * sf,
    ];
    let axes = [[-sf * cl, -sf * sl, cf], [-sl, cl, 0.0], [-cf * cl, -cf * sl, -sf]];
    axes.map(|axis| {
        let v = |steps: f64| {
            let d = steps * STEP;
            potential(c, [at[0] + d * axis[0], at[1] + d * axis[1], at[2] + d * axis[2]])
        };
        // Central differences of the sixth order.
        let odd = |steps: f64| v(steps) - v(-steps);
        -(45.0 * odd(1.0) - 9.0 * odd(2.0) + odd(3.0)) / (60.0 * STEP)
    })
}

/// The scalar potential, nT km, at a place in Earth-centred Cartesian coordinates, km.
fn potential(c: &Coefficients, [x, y, z]: [f64; 3]) -> f64 {
    let square = x * x + y * y + z * z;
    let (x, y, z, ratio) = (
        x * REFERENCE_RADIUS / square,
        y * REFERENCE_RADIUS / square,
        z * REFERENCE_RADIUS / square,
        REFERENCE_RADIUS * REFERENCE_RADIUS / square,
    );
    let mut sum = 0.0;
    let mut sectoral = [REFERENCE_RADIUS / square.sqrt(), 0.0];
    for m in 0..=c.degree().min(HIGHEST) {
        let order = m as f64;
        if m > 0 {
            let [v, w] = sectoral;
            sectoral = [(2.0 * order - 1.0) * (x * v - y * w), (2.0 * order - 1.0) * (x * w + y * v)];
        }
        let (mut two, mut one) = ([0.0; 2], sectoral);
        for n in m..=c.degree().min(HIGHEST) {
            let k = n as f64;
            if n > m {
                let next = |i: usize| ((2.0 * k - 1.0) * z * one[i] - (k + order - 1.0) * ratio * two[i]) / (k - order);
                (two, one) = (one, [next(0), next(1)]);
            }
            let [g, h] = c.pair(n, m);
            sum += schmidt(n, m) * (g * one[0] + h * one[1]);
        }
    }
    REFERENCE_RADIUS * sum
}

/// Schmidt's factor √((2 − δ) (n − m)! / (n + m)!), δ = 1 for m = 0.
fn schmidt(n: usize, m: usize) -> f64 {
    let quotient: f64 = (n - m + 1..=n + m).map(|k| k as f64).product();
    if m == 0 { 1.0 } else { (2.0 / quotient).sqrt() }
}

#[cfg(test)]
mod tests {
    use super::super::harmonics::field;
    use super::super::models::FieldModel;
    use super::*;

    /// The two routes agree to 10⁻⁶ nT all over the globe, also near the poles.
    #[test]
    fn the_two_routes_agree() {
        let mut largest = 0.0_f64;
        for (model, year) in [(FieldModel::Igrf14, 1962.4), (FieldModel::Igrf14, 2012.0), (FieldModel::Wmm2025, 2027.3)]
        {
            let c = model.coefficients(year).unwrap();
            for lat in [-89.9_f64, -71.0, -33.3, 0.0, 12.0, 58.0, 89.9] {
                for lon in [-170.0_f64, -12.0, 3.0, 144.0] {
                    for height in [-3.0, 0.0, 100.0] {
                        let (lat, lon) = (lat.to_radians(), lon.to_radians());
                        let a = field(&c.now, lat, lon, height);
                        let b = field_by_gradient(&c.now, lat, lon, height);
                        for (a, b) in a.iter().zip(b) {
                            largest = largest.max((a - b).abs());
                        }
                    }
                }
            }
        }
        assert!(largest < 1e-6, "{largest} nT");
        assert!(largest > 0.0);
    }
}
