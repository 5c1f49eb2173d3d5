//! The grid convergence of a site.

use serde::{Deserialize, Serialize};

use super::complex_latitude::by_complex_latitude;
use super::grid::{MapGrid, utm_zone};
use super::transverse_mercator::{Projected, project};
use crate::card::{Check, Explain, Explanation};
use crate::error::{Error, Result};
use crate::frames::site::{checked_place, place_words};
use crate::frames::{Site, Stated};
use crate::units::{Angle, Quantity, require_between};

/// The grid convergence of a site, from its map grid or as a survey company stated it: the angle from
/// true north to grid north, east positive. True azimuth = grid azimuth + convergence.
///
/// A grid is defined, not measured, so its convergence has no standard deviation of its own.
#[derive(Clone, Copy, Debug, PartialEq)]
#[non_exhaustive]
pub struct Convergence {
    /// The convergence, east positive.
    pub angle: Angle,
    /// The place on the map grid; `None` where only a convergence was stated.
    pub projected: Option<Projected>,
    pub(super) inputs: ConvergenceInputs,
}

/// What a convergence is found from.
#[derive(Clone, Copy, Debug, PartialEq, Serialize, Deserialize)]
pub struct ConvergenceInputs {
    pub(super) latitude: Angle,
    pub(super) longitude: Angle,
    pub(super) grid: Option<MapGrid>,
    pub(super) stated: Option<Stated>,
}

/// What came out.
#[derive(Clone, Copy, Debug, PartialEq, Serialize, Deserialize)]
pub struct ConvergenceOutcome {
    convergence: Angle,
    projected: Option<Projected>,
}

impl Convergence {
    pub(in crate::frames) fn at(site: Site) -> Result<Self> {
        Convergence::compute(ConvergenceInputs {
            latitude: site.latitude(),
            longitude: site.longitude(),
            grid: site.map_grid(),
            stated: site.stated_convergence(),
        })
    }

    /// Who stated the convergence, in the words of the site; `None` when the grid gives it.
    pub fn stated_by(&self) -> Option<&'static str> {
        self.inputs.stated.map(|s| s.source.text())
    }
}

impl Explain for Convergence {
    const KIND: &'static str = "grid-convergence";
    type Inputs = ConvergenceInputs;
    type Outcome = ConvergenceOutcome;

    fn compute(inputs: ConvergenceInputs) -> Result<Self> {
        checked_place(inputs.latitude, inputs.longitude)?;
        let projected = match inputs.grid {
            Some(grid) => {
                grid.checked(inputs.longitude)?;
                Some(project(&grid, inputs.latitude.si(), inputs.longitude.si()))
            }
            None => None,
        };
        let angle = match (inputs.stated, projected) {
            (Some(stated), _) => {
                require_between("the grid convergence", stated.angle, Angle::deg(-180.0), Angle::deg(180.0))?
            }
            (None, Some(projected)) => projected.convergence,
            (None, None) => {
                let zone = utm_zone(inputs.latitude, inputs.longitude);
                return Err(Error::undeclared(
                    format!("The site {} has no map grid", place_words(inputs.latitude, inputs.longitude)),
                    format!(
                        "state the grid its azimuths count from with .with_utm({zone})? (the zone of this longitude), .with_map_grid(MapGrid {{ … }})?, or its convergence with .with_convergence(angle, source)?."
                    ),
                ));
            }
        };
        Ok(Convergence { angle, projected, inputs })
    }
    fn inputs(&self) -> ConvergenceInputs {
        self.inputs
    }
    fn outcome(&self) -> ConvergenceOutcome {
        ConvergenceOutcome { convergence: self.angle, projected: self.projected }
    }

    /// By the meridian distance at a complex latitude.
    fn check(inputs: &ConvergenceInputs, outcome: &ConvergenceOutcome) -> Vec<Check> {
        let mut checks = Vec::new();
        let other = inputs.grid.map(|grid| by_complex_latitude(&grid, inputs.latitude, inputs.longitude));
        match (inputs.stated, other) {
            (Some(stated), _) => checks.push(Check::compare(
                "convergence against the one that was stated, as directions",
                &[outcome.convergence.si().cos(), outcome.convergence.si().sin()],
                &[stated.angle.si().cos(), stated.angle.si().sin()],
                1e-12,
                "",
            )),
            (None, other) => checks.push(Check::compare(
                "convergence from the derivative of the meridian distance at a complex latitude",
                &[outcome.convergence.in_deg()],
                &[other.map_or(f64::NAN, |[gamma, ..]| gamma.to_degrees())],
                1e-9,
                "°",
            )),
        }
        match (outcome.projected, other) {
            (Some(p), Some([gamma, scale, easting, northing])) => checks.extend([
                Check::compare(
                    "easting and northing from the meridian distance at a complex latitude",
                    &[p.easting.in_m(), p.northing.in_m()],
                    &[easting, northing],
                    1e-4,
                    "m",
                ),
                Check::compare(
                    "convergence and scale of the grid from its derivative",
                    &[p.convergence.in_deg(), p.scale],
                    &[gamma.to_degrees(), scale],
                    1e-9,
                    "",
                ),
            ]),
            (None, None) => {}
            // One has a grid and the other not.
            (one, _) => {
                let stands = if one.is_some() { 1.0 } else { -1.0 };
                checks.push(Check::compare("place on the map grid", &[stands], &[0.0], 0.0, ""));
            }
        }
        checks
    }

    fn explain(&self) -> Explanation {
        super::convergence_card::explain(self)
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::card::Data;
    use crate::prelude::*;

    fn site(lat: f64, lon: f64) -> Site {
        Site::at(lat.deg(), lon.deg(), "2026-05-01").unwrap()
    }

    #[test]
    fn grid_north_leans_to_the_central_meridian_of_the_other_hemisphere() {
        // East of the central meridian and north of the equator grid north lies east of true north.
        let gamma = |lat: f64, lon: f64, zone: u8| site(lat, lon).with_utm(zone).unwrap().convergence().unwrap().angle;
        assert!(gamma(60.0, 5.0, 31) > 1.7.deg() && gamma(60.0, 1.0, 31) < (-1.7).deg());
        assert!(gamma(-60.0, 5.0, 31) < (-1.7).deg() && gamma(-60.0, 1.0, 31) > 1.7.deg());
        assert_eq!(gamma(0.0, 5.0, 31), 0.deg());
        assert_eq!(gamma(45.0, 3.0, 31), 0.deg());
        // Over the date line and with longitudes above 180°.
        assert!((gamma(45.0, -179.8, 60) - gamma(45.0, 180.2, 60)).abs() < 1e-12.deg());
        assert!(gamma(45.0, -179.8, 60) > 2.deg());
    }

    #[test]
    fn every_number_of_the_outcome_is_checked_to_a_thousandth_of_itself() {
        let bng = MapGrid {
            ellipsoid: Ellipsoid::airy_1830(),
            central_meridian: (-2).deg(),
            latitude_of_origin: 49.deg(),
            scale: 0.999_601_271_7,
            false_easting: 400_000.m(),
            false_northing: (-100_000).m(),
        };
        for place in [site(57.2, 1.8).with_utm(31).unwrap(), site(57.2, 1.8).with_map_grid(bng).unwrap()] {
            let c = place.convergence().unwrap();
            let (inputs, outcome) = (c.inputs(), c.outcome().write());
            for (pointer, number) in outcome.numbers() {
                for wrong in [number * 1.001, number * 0.999] {
                    let changed = ConvergenceOutcome::read(&outcome.with_number(&pointer, wrong)).unwrap();
                    let checks = Convergence::check(&inputs, &changed);
                    assert!(checks.iter().any(|c| !c.passed), "{pointer} {number} → {wrong}");
                }
            }
            assert!(c.card().passed(), "{:#?}", c.card().checks);
        }
    }

    #[test]
    fn a_site_without_a_grid_is_told_its_zone() {
        let e = site(57.2, 1.8).convergence().unwrap_err().to_string();
        assert!(e.contains(".with_utm(31)") && e.contains("with_convergence"), "{e}");
        let e = site(57.2, 1.8).true_azimuth(Azimuth::from_grid_north(10.deg())).unwrap_err().to_string();
        assert!(e.contains("no map grid"), "{e}");
    }

    #[test]
    fn an_odd_convergence_gets_a_note() {
        let notes = |site: Site| site.convergence().unwrap().card().explanation.notes;
        let far = site(68.0, 15.5).with_map_grid(MapGrid::utm(31, false).unwrap()).unwrap();
        assert!(far.convergence().unwrap().angle > 10.deg());
        assert!(notes(far).iter().any(|n| n.contains("more than 10°")), "{:?}", notes(far));
        let stated = site(57.2, 1.8).with_convergence((-12).deg(), "plan 7").unwrap();
        assert!(notes(stated).iter().any(|n| n.contains("more than 10°")));
        let usual = site(57.2, 1.8).with_utm(31).unwrap();
        assert!(notes(usual).is_empty(), "{:?}", notes(usual));
        // A slip of the sign shows beside the grid's own value.
        let slip = usual.with_convergence(-usual.convergence().unwrap().angle, "plan 7").unwrap();
        assert!(notes(slip).iter().any(|n| n.contains("opposite sign")), "{:?}", notes(slip));
        assert!(slip.convergence().unwrap().card().passed());
    }
}
