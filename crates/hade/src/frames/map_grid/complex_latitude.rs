//! The projection by another route: the distance along a meridian, continued to complex latitudes.
//!
//! A transverse Mercator grid is conformal and true along its central meridian, so northing + i
//! easting is the meridian distance M at the complex latitude Φ whose isometric latitude is
//! ψ(φ) + i λ. With dM/dΦ = ρ and dψ/dΦ = ρ / (ν cos Φ) the derivative of the map is ν(Φ) cos Φ: its
//! argument is minus the convergence, its size over ν(φ) cos φ the scale. No series in the
//! flattening enters; M is an integral along a straight path.

use nalgebra::Complex;

use super::grid::MapGrid;
use crate::frames::site::within_half_turn;
use crate::units::{Angle, Quantity};

type C = Complex<f64>;

/// Convergence (radians), scale, easting and northing (metres) of a place (radians).
pub(super) fn by_complex_latitude(grid: &MapGrid, latitude: Angle, longitude: Angle) -> [f64; 4] {
    let a = grid.ellipsoid.semi_major.si();
    let f = grid.ellipsoid.flattening();
    let square = f * (2.0 - f);
    let e = square.sqrt();
    let latitude = latitude.si();
    let isometric = latitude.tan().asinh() - e * (e * latitude.sin()).atanh();
    let target = C::new(isometric, within_half_turn(longitude.si() - grid.central_meridian.si()));
    // Each round of the inversion gains a factor e²; fourteen reach the last bit.
    let mut phi = gudermann(target);
    for _ in 0..14 {
        phi = gudermann(target + (phi.sin() * e).atanh() * e);
    }
    let slope = |phi: C| phi.cos() / (C::new(1.0, 0.0) - phi.sin() * phi.sin() * square).sqrt() * a;
    let rho = |phi: C| {
        let w = C::new(1.0, 0.0) - phi.sin() * phi.sin() * square;
        C::new(a * (1.0 - square), 0.0) / (w * w.sqrt())
    };
    let here = slope(phi);
    let scale = here.norm() / slope(C::new(latitude, 0.0)).re;
    let map = (integral(rho, phi) - integral(rho, C::new(grid.latitude_of_origin.si(), 0.0))) * grid.scale;
    [-here.arg(), grid.scale * scale, grid.false_easting.si() + map.im, grid.false_northing.si() + map.re]
}

/// The Gudermannian 2 atan(tanh(w/2)): the latitude on a sphere of an isometric latitude.
fn gudermann(w: C) -> C {
    (w * 0.5).tanh().atan() * 2.0
}

/// ∫ f from 0 to `end` along a straight path, by Gauss's rule of five points on eight pieces.
fn integral(f: impl Fn(C) -> C, end: C) -> C {
    let root = (10.0_f64 / 7.0).sqrt();
    let (near, far) = ((5.0 - 2.0 * root).sqrt() / 3.0, (5.0 + 2.0 * root).sqrt() / 3.0);
    let (heavy, light) = ((322.0 + 13.0 * 70.0_f64.sqrt()) / 900.0, (322.0 - 13.0 * 70.0_f64.sqrt()) / 900.0);
    let rule = [(0.0, 128.0 / 225.0), (near, heavy), (-near, heavy), (far, light), (-far, light)];
    const PIECES: usize = 8;
    let step = end / PIECES as f64;
    let mut sum = C::new(0.0, 0.0);
    for piece in 0..PIECES {
        for (place, weight) in rule {
            sum += f(step * (piece as f64 + 0.5 + 0.5 * place)) * (0.5 * weight);
        }
    }
    sum * step
}

#[cfg(test)]
mod tests {
    use super::super::transverse_mercator::project;
    use super::*;
    use crate::prelude::*;

    /// The two routes agree to 10⁻⁷ m and 10⁻¹¹° within 10° of the central meridian, at every
    /// latitude and on the flattest ellipsoid in use.
    #[test]
    fn the_two_routes_agree() {
        for ellipsoid in [Ellipsoid::wgs84(), Ellipsoid::clarke_1880_rgs()] {
            let grid = MapGrid {
                ellipsoid,
                latitude_of_origin: (-31).deg(),
                central_meridian: 177.deg(),
                ..MapGrid::utm(1, true).unwrap()
            };
            for lat in [-89.9, -60.0, -0.1, 0.0, 33.0, 71.0, 89.9] {
                for off in [-10.0, -3.0, 0.0, 0.01, 6.0, 10.0] {
                    let (lat, lon) = (lat.deg(), (177.0 + off).deg());
                    let p = project(&grid, lat.in_rad(), lon.in_rad());
                    let [gamma, scale, easting, northing] = by_complex_latitude(&grid, lat, lon);
                    assert!((p.convergence.in_rad() - gamma).abs() < 2e-13, "{lat} {off}: {gamma}");
                    assert!((p.scale - scale).abs() < 1e-12, "{lat} {off}: {} {scale}", p.scale);
                    assert!((p.easting.in_m() - easting).abs() < 1e-7, "{lat} {off}: {} {easting}", p.easting.in_m());
                    assert!(
                        (p.northing.in_m() - northing).abs() < 1e-7,
                        "{lat} {off}: {} {northing}",
                        p.northing.in_m()
                    );
                }
            }
        }
    }
}
