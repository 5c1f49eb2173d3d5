//! The transverse Mercator projection by Krüger's series to the sixth order in the third flattening.
//!
//! L. Krüger (1912), in the form of C. F. F. Karney (2011) Transverse Mercator with an accuracy of a
//! few nanometers, Journal of Geodesy 85, 475–485, eqs. 7–12, 14, 22–25, 35 (cited from memory; the
//! coefficients are held against PROJ in the tests).

use serde::{Deserialize, Serialize};

use super::grid::{Ellipsoid, MapGrid};
use crate::frames::site::within_half_turn;
use crate::units::{Angle, Length, Quantity};

/// A place on a map grid.
#[derive(Clone, Copy, Debug, PartialEq, Serialize, Deserialize)]
#[non_exhaustive]
pub struct Projected {
    /// The grid convergence: from true north to grid north, east positive.
    pub convergence: Angle,
    /// The point scale: length on the grid over length on the ellipsoid.
    pub scale: f64,
    /// The easting.
    pub easting: Length,
    /// The northing.
    pub northing: Length,
}

/// The series for one ellipsoid.
#[derive(Clone, Copy, Debug)]
pub(super) struct Series {
    /// The eccentricity.
    pub e: f64,
    /// The third flattening f / (2 − f).
    pub n: f64,
    /// The radius of the circle as long as the meridian, metres.
    pub radius: f64,
    /// α₁ … α₆.
    pub alpha: [f64; 6],
}

/// The numbers on the way, for the steps of the card.
#[derive(Clone, Copy, Debug)]
pub(super) struct Working {
    /// Longitude less that of the central meridian, radians.
    pub lambda: f64,
    /// Tangent of the conformal latitude.
    pub tau: f64,
    pub xi: f64,
    pub eta: f64,
    pub p: f64,
    pub q: f64,
    /// The two parts of the convergence.
    pub on_sphere: f64,
    pub by_series: f64,
}

/// The coefficients of n, n², … n⁶ in α₁ … α₆ (Karney 2011, eq. 35).
const ALPHA: [[f64; 6]; 6] = [
    [1.0 / 2.0, -2.0 / 3.0, 5.0 / 16.0, 41.0 / 180.0, -127.0 / 288.0, 7891.0 / 37800.0],
    [0.0, 13.0 / 48.0, -3.0 / 5.0, 557.0 / 1440.0, 281.0 / 630.0, -1_983_433.0 / 1_935_360.0],
    [0.0, 0.0, 61.0 / 240.0, -103.0 / 140.0, 15061.0 / 26880.0, 167_603.0 / 181_440.0],
    [0.0, 0.0, 0.0, 49561.0 / 161_280.0, -179.0 / 168.0, 6_601_661.0 / 7_257_600.0],
    [0.0, 0.0, 0.0, 0.0, 34729.0 / 80640.0, -3_418_889.0 / 1_995_840.0],
    [0.0, 0.0, 0.0, 0.0, 0.0, 212_378_941.0 / 319_334_400.0],
];

impl Series {
    pub fn new(ellipsoid: Ellipsoid) -> Self {
        let f = ellipsoid.flattening();
        let n = f / (2.0 - f);
        let n2 = n * n;
        let radius = ellipsoid.semi_major.si() / (1.0 + n) * (1.0 + n2 / 4.0 + n2 * n2 / 64.0 + n2 * n2 * n2 / 256.0);
        let alpha = ALPHA.map(|row| row.iter().rev().fold(0.0, |sum, c| (sum + c) * n));
        Series { e: (f * (2.0 - f)).sqrt(), n, radius, alpha }
    }

    /// The tangent of the conformal latitude.
    fn conformal(&self, latitude: f64) -> f64 {
        let tau = latitude.tan();
        let root = tau.hypot(1.0);
        let sigma = (self.e * (self.e * tau / root).atanh()).sinh();
        tau * sigma.hypot(1.0) - sigma * root
    }

    /// The distance along the central meridian from the equator, over the radius.
    fn along_meridian(&self, latitude: f64) -> f64 {
        let xi = self.conformal(latitude).atan();
        xi + self.terms(|k, a| a * (k * xi).sin())
    }

    fn terms(&self, term: impl Fn(f64, f64) -> f64) -> f64 {
        self.alpha.iter().enumerate().rev().map(|(j, a)| term(2.0 * (j as f64 + 1.0), *a)).sum()
    }

    /// A latitude and a longitude from the central meridian, in radians.
    pub fn work(&self, latitude: f64, lambda: f64) -> Working {
        let tau = self.conformal(latitude);
        let (sin, cos) = lambda.sin_cos();
        let xi = tau.atan2(cos);
        let eta = (sin / tau.hypot(cos)).asinh();
        let p = 1.0 + self.terms(|k, a| k * a * (k * xi).cos() * (k * eta).cosh());
        let q = self.terms(|k, a| k * a * (k * xi).sin() * (k * eta).sinh());
        let on_sphere = (tau / tau.hypot(1.0) * lambda.tan()).atan();
        Working { lambda, tau, xi, eta, p, q, on_sphere, by_series: q.atan2(p) }
    }
}

/// A place on a grid.
pub(super) fn project(grid: &MapGrid, latitude: f64, longitude: f64) -> Projected {
    let series = Series::new(grid.ellipsoid);
    let lambda = within_half_turn(longitude - grid.central_meridian.si());
    let w = series.work(latitude, lambda);
    let xi = w.xi + series.terms(|k, a| a * (k * w.xi).sin() * (k * w.eta).cosh());
    let eta = w.eta + series.terms(|k, a| a * (k * w.xi).cos() * (k * w.eta).sinh());
    let unit = grid.scale * series.radius;
    let origin = series.along_meridian(grid.latitude_of_origin.si());
    let e_sin = series.e * latitude.sin();
    let on_sphere = (1.0 - e_sin * e_sin).sqrt() * latitude.tan().hypot(1.0) / w.tau.hypot(lambda.cos());
    Projected {
        convergence: Angle::rad(w.on_sphere + w.by_series),
        scale: unit / grid.ellipsoid.semi_major.si() * on_sphere * w.p.hypot(w.q),
        easting: grid.false_easting + Length::m(unit * eta),
        northing: grid.false_northing + Length::m(unit * (xi - origin)),
    }
}
