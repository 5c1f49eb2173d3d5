//! The magnetic declination of a site and date.

use serde::{Deserialize, Serialize};

use super::harmonics::field;
use super::models::FieldModel;
use super::potential::field_by_gradient;
use crate::card::{Check, Explain, Explanation};
use crate::error::Result;
use crate::frames::site::{checked_height, checked_place, within_half_turn};
use crate::frames::{Date, Site, Stated};
use crate::units::{Angle, FluxDensity, Length, Quantity, require_between};

/// The magnetic declination of a site and date, from a model of the field or as a survey company
/// stated it: the angle from true north to magnetic north, east positive. True azimuth = magnetic
/// azimuth + declination.
#[derive(Clone, Copy, Debug, PartialEq)]
#[non_exhaustive]
pub struct Declination {
    /// The declination, east positive.
    pub angle: Angle,
    /// One standard deviation of a modelled declination; `None` for a stated one.
    pub one_sd: Option<Angle>,
    /// The field by the model; `None` where a declination was stated for a date without a model.
    pub field: Option<MagneticField>,
    pub(super) inputs: DeclinationInputs,
}

/// The Earth's field by a model, along geodetic north, east and down.
#[derive(Clone, Copy, Debug, PartialEq, Serialize, Deserialize)]
#[non_exhaustive]
pub struct MagneticField {
    /// The declination, east positive.
    pub declination: Angle,
    /// Its standard deviation by the error model of the field.
    pub declination_sd: Angle,
    /// The change of the declination in one year.
    pub declination_per_year: Angle,
    /// The inclination (dip of the needle), positive down.
    pub inclination: Angle,
    /// The horizontal intensity H, which turns a compass.
    pub horizontal: FluxDensity,
    /// The total intensity F.
    pub total: FluxDensity,
    /// The component towards true north, X.
    pub north: FluxDensity,
    /// The component towards east, Y.
    pub east: FluxDensity,
    /// The component down, Z.
    pub down: FluxDensity,
}

/// What a declination is found from.
#[derive(Clone, Copy, Debug, PartialEq, Serialize, Deserialize)]
pub struct DeclinationInputs {
    pub(super) latitude: Angle,
    pub(super) longitude: Angle,
    pub(super) date: Date,
    pub(super) height: Option<Length>,
    pub(super) stated: Option<Stated>,
}

/// What came out.
#[derive(Clone, Copy, Debug, PartialEq, Serialize, Deserialize)]
pub struct DeclinationOutcome {
    declination: Angle,
    field: Option<MagneticField>,
}

/// The WMM2025 error model of the declination: the part that does not depend on the field, degrees,
/// and the part that goes with 1/H, degrees × nT.
const SD_FLOOR: f64 = 0.26;
const SD_WMM: f64 = 5417.0;
/// The standard deviation of ground stations about the IGRF in the north component, the larger of
/// the two horizontal ones, nT.
const STATIONS_IGRF: f64 = 144.0;
/// Below these horizontal intensities (nT) a compass is unreliable, or to be used with care.
pub(super) const BLACKOUT: f64 = 2000.0;
pub(super) const CAUTION: f64 = 6000.0;

impl FieldModel {
    /// The coefficient of 1/H in the standard deviation of the declination, degrees × nT.
    pub(super) fn sd_coefficient(self) -> f64 {
        match self {
            FieldModel::Wmm2025 => SD_WMM,
            FieldModel::Igrf14 => STATIONS_IGRF.to_degrees(),
        }
    }
    pub(super) fn sd_floor() -> f64 {
        SD_FLOOR
    }
}

impl Declination {
    pub(in crate::frames) fn at(site: Site) -> Result<Self> {
        Declination::compute(DeclinationInputs {
            latitude: site.latitude(),
            longitude: site.longitude(),
            date: site.date(),
            height: site.height(),
            stated: site.stated_declination(),
        })
    }

    /// Who stated the declination, in the words of the site; `None` when a model gives it.
    pub fn stated_by(&self) -> Option<&'static str> {
        self.inputs.stated.map(|s| s.source.text())
    }

    /// The model that gives the field on this date: "WMM2025" or "IGRF-14".
    pub fn model(&self) -> Option<&'static str> {
        FieldModel::on(self.inputs.date).ok().map(FieldModel::words)
    }
}

impl DeclinationInputs {
    /// Latitude, longitude (within ±180°), height in km: what the model takes.
    pub(super) fn place(&self) -> (f64, f64, f64) {
        (self.latitude.si(), within_half_turn(self.longitude.si()), self.height.unwrap_or_default().si() * 1e-3)
    }
}

/// Declination, inclination (radians), horizontal and total intensity of north, east, down.
fn elements([north, east, down]: [f64; 3]) -> (f64, f64, f64, f64) {
    let horizontal = north.hypot(east);
    (east.atan2(north), down.atan2(horizontal), horizontal, horizontal.hypot(down))
}

fn modelled(model: FieldModel, inputs: &DeclinationInputs) -> Result<MagneticField> {
    let (latitude, longitude, height) = inputs.place();
    let coefficients = model.coefficients(inputs.date.decimal_year())?;
    let b = field(&coefficients.now, latitude, longitude, height);
    let change = field(&coefficients.per_year, latitude, longitude, height);
    let (declination, inclination, horizontal, total) = elements(b);
    let [north, east, down] = b;
    Ok(MagneticField {
        declination: Angle::rad(declination),
        declination_sd: Angle::deg(SD_FLOOR.hypot(model.sd_coefficient() / horizontal)),
        declination_per_year: Angle::rad((north * change[1] - east * change[0]) / (horizontal * horizontal)),
        inclination: Angle::rad(inclination),
        horizontal: FluxDensity::nt(horizontal),
        total: FluxDensity::nt(total),
        north: FluxDensity::nt(north),
        east: FluxDensity::nt(east),
        down: FluxDensity::nt(down),
    })
}

impl Explain for Declination {
    const KIND: &'static str = "magnetic-declination";
    type Inputs = DeclinationInputs;
    type Outcome = DeclinationOutcome;

    fn compute(inputs: DeclinationInputs) -> Result<Self> {
        checked_place(inputs.latitude, inputs.longitude)?;
        checked_height(inputs.height.unwrap_or_default())?;
        let field = match (FieldModel::on(inputs.date), inputs.stated) {
            (Ok(model), _) => Some(modelled(model, &inputs)?),
            (Err(_), Some(_)) => None,
            (Err(outside), None) => return Err(outside),
        };
        let (angle, one_sd) = match (inputs.stated, field) {
            (Some(stated), _) => {
                require_between("the magnetic declination", stated.angle, Angle::deg(-180.0), Angle::deg(180.0))?;
                (stated.angle, None)
            }
            (None, field) => {
                let field = field.unwrap_or_else(MagneticField::nothing);
                (field.declination, Some(field.declination_sd))
            }
        };
        Ok(Declination { angle, one_sd, field, inputs })
    }
    fn inputs(&self) -> DeclinationInputs {
        self.inputs
    }
    fn outcome(&self) -> DeclinationOutcome {
        DeclinationOutcome { declination: self.angle, field: self.field }
    }

    /// By the gradient of the potential in Cartesian coordinates; the change per year from that field
    /// a little earlier and later.
    fn check(inputs: &DeclinationInputs, outcome: &DeclinationOutcome) -> Vec<Check> {
        let by_model = checks_of_field(inputs, outcome.field);
        let declination = match (inputs.stated, outcome.field) {
            (Some(stated), _) => Check::compare(
                "declination against the one that was stated, as directions",
                &[outcome.declination.si().cos(), outcome.declination.si().sin()],
                &[stated.angle.si().cos(), stated.angle.si().sin()],
                1e-12,
                "",
            ),
            (None, Some(field)) => Check::compare(
                "declination as a direction against the north and east components of the field",
                &[
                    outcome.declination.si().cos() * field.horizontal.in_nt(),
                    outcome.declination.si().sin() * field.horizontal.in_nt(),
                ],
                &[field.north.in_nt(), field.east.in_nt()],
                1e-9 * field.total.in_nt().abs(),
                "nT",
            ),
            (None, None) => Check::compare("declination", &[f64::NAN], &[0.0], 0.0, "°"),
        };
        std::iter::once(declination).chain(by_model).collect()
    }

    fn explain(&self) -> Explanation {
        super::declination_card::explain(self)
    }
}

impl MagneticField {
    /// Not a number throughout; nothing passes with it.
    fn nothing() -> Self {
        let (angle, b) = (Angle::rad(f64::NAN), FluxDensity::nt(f64::NAN));
        MagneticField {
            declination: angle,
            declination_sd: angle,
            declination_per_year: angle,
            inclination: angle,
            horizontal: b,
            total: b,
            north: b,
            east: b,
            down: b,
        }
    }
}

/// What the differences of the potential leave open, nT.
const GRADIENT: f64 = 1e-5;

fn checks_of_field(inputs: &DeclinationInputs, outcome: Option<MagneticField>) -> Vec<Check> {
    let Ok(model) = FieldModel::on(inputs.date) else {
        // No model holds for the date, and so no field may stand there.
        let stands = if outcome.is_some() { 1.0 } else { 0.0 };
        return vec![Check::holds("no field is given for a date without a model", stands, 0.0, "")];
    };
    let b = outcome.unwrap_or_else(MagneticField::nothing);
    let (latitude, longitude, height) = inputs.place();
    let Ok(coefficients) = model.coefficients(inputs.date.decimal_year()) else { return Vec::new() };
    let at = |years: f64| {
        let then = coefficients.now.plus(years, &coefficients.per_year);
        field_by_gradient(&then, latitude, longitude, height)
    };
    let here = at(0.0);
    let [north, east, down] = here;
    let horizontal = (north * north + east * east).sqrt();
    let total = (horizontal * horizontal + down * down).sqrt();
    let angle = (GRADIENT / horizontal).to_degrees() + 1e-10;
    let declination = 2.0 * east.atan2(horizontal + north);
    let years = 0.05;
    let (later, earlier) = (at(years), at(-years));
    // The turn between two directions from their cross and dot products.
    let turn = (earlier[0] * later[1] - earlier[1] * later[0]).atan2(earlier[0] * later[0] + earlier[1] * later[1]);
    let per_year = (turn / (2.0 * years)).to_degrees();
    // The turn of a vector that moves straight on is not even; near a dip pole, where it is short, that
    // shows between the two dates, by the square of its drift over its length.
    let drift = 0.5 * (later[0] - earlier[0]).hypot(later[1] - earlier[1]) / horizontal;
    vec![
        Check::compare(
            "north, east and down from the gradient of the potential in Cartesian coordinates",
            &[b.north.in_nt(), b.east.in_nt(), b.down.in_nt()],
            &here,
            GRADIENT,
            "nT",
        ),
        Check::compare(
            "horizontal and total intensity from that gradient",
            &[b.horizontal.in_nt(), b.total.in_nt()],
            &[horizontal, total],
            GRADIENT,
            "nT",
        ),
        Check::compare(
            "modelled declination and inclination from that gradient",
            &[b.declination.in_deg(), b.inclination.in_deg()],
            &[declination.to_degrees(), (down / total).asin().to_degrees()],
            angle + 1e-7 * (total / horizontal).min(10.0),
            "°",
        ),
        Check::compare(
            "change of the declination per year from that gradient 0.05 years earlier and later",
            &[b.declination_per_year.in_deg()],
            &[per_year],
            (1e-4 + 4.0 * drift * drift) * per_year.abs() + 1e-8 + angle,
            "°",
        ),
        Check::compare(
            "standard deviation of the declination: the part that goes with 1/H, times H of that gradient",
            &[(b.declination_sd.in_deg().powi(2) - SD_FLOOR * SD_FLOOR).sqrt() * horizontal],
            &[model.sd_coefficient()],
            1e-6 * model.sd_coefficient(),
            "° nT",
        ),
    ]
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::card::Data;
    use crate::prelude::*;

    fn site(lat: f64, lon: f64, date: &str) -> Site {
        Site::at(lat.deg(), lon.deg(), date).unwrap()
    }

    /// Near the dip poles the needle's bearing runs by degrees in a year.
    #[test]
    fn a_place_near_a_dip_pole_passes_its_own_checks() {
        for (lat, lon, date) in
            [(79.943, 253.252, "1995-01-01"), (-64.0, 135.5, "2025-01-01"), (85.8, 139.3, "2025-01-01")]
        {
            let card = site(lat, lon, date).declination().unwrap().card();
            assert!(card.passed(), "{lat} {lon}: {:#?}", card.checks);
        }
    }

    #[test]
    fn longitudes_a_full_turn_apart_are_one_place() {
        let west = site(40.0, -105.0, "2026-05-01").declination().unwrap();
        let east = site(40.0, 255.0, "2026-05-01").declination().unwrap();
        assert!((west.angle - east.angle).abs() < 1e-12.deg());
        assert!(west.angle > 7.deg() && west.angle < 8.deg(), "Colorado lies east: {}", west.angle);
        assert_eq!(west.model(), Some("WMM2025"));
    }

    #[test]
    fn every_number_of_the_outcome_is_checked_to_a_thousandth_of_itself() {
        for place in [
            site(57.2, 1.8, "2026-05-01"),
            site(-33.0, 151.0, "1974-02-28"),
            site(80.0, -95.0, "2027-08-01"),
            site(0.5, 30.0, "1931-06-15").with_height(1100.m()).unwrap(),
        ] {
            let d = place.declination().unwrap();
            let (inputs, outcome) = (d.inputs().write(), d.outcome().write());
            for (pointer, number) in outcome.numbers() {
                for wrong in [number * 1.001, number * 0.999] {
                    let changed = DeclinationOutcome::read(&outcome.with_number(&pointer, wrong)).unwrap();
                    let checks = Declination::check(&DeclinationInputs::read(&inputs).unwrap(), &changed);
                    assert!(checks.iter().any(|c| !c.passed), "{}: {pointer} {number} → {wrong}", place.words());
                }
            }
            assert!(d.card().passed(), "{:#?}", d.card().checks);
        }
    }

    #[test]
    fn weak_horizontal_fields_are_warned_of() {
        let notes = |lat: f64, lon: f64| site(lat, lon, "2026-05-01").declination().unwrap().card().explanation.notes;
        assert!(notes(85.5, 139.0).iter().any(|n| n.contains("blackout")), "{:?}", notes(85.5, 139.0));
        assert!(notes(80.0, -95.0).iter().any(|n| n.contains("caution zone")), "{:?}", notes(80.0, -95.0));
        assert!(notes(57.0, 2.0).iter().all(|n| !n.contains("zone")));
    }

    #[test]
    fn a_stated_declination_goes_first_and_a_slip_of_its_sign_shows() {
        let place = site(57.2, 1.8, "2026-05-01");
        let model = place.declination().unwrap();
        assert!(model.one_sd.unwrap() > 0.26.deg() && model.stated_by().is_none());
        let near = place.with_declination(model.angle + 0.2.deg(), "report KF-3").unwrap().declination().unwrap();
        assert_eq!(near.angle, model.angle + 0.2.deg());
        assert_eq!((near.one_sd, near.stated_by()), (None, Some("report KF-3")));
        assert!(near.card().passed());
        assert!(near.card().explanation.notes.iter().all(|n| !n.contains("WARNING")));
        let far = place.with_declination(12.deg(), "report KF-3").unwrap().declination().unwrap();
        assert!(
            far.card().explanation.notes.iter().any(|n| n.contains("WARNING")),
            "{:?}",
            far.card().explanation.notes
        );
        let canada = site(50.0, -120.0, "2026-05-01");
        let turned = canada.with_declination(-canada.declination().unwrap().angle, "log header").unwrap();
        let notes = turned.declination().unwrap().card().explanation.notes;
        assert!(notes.iter().any(|n| n.contains("opposite sign")), "{notes:?}");
    }

    #[test]
    fn a_date_outside_the_models_is_refused_unless_the_declination_is_stated() {
        for date in ["1899-12-31", "2031-06-01"] {
            let place = site(57.2, 1.8, date);
            let e = place.declination().unwrap_err();
            assert!(e.to_string().contains("with_declination"), "{e}");
            assert!(place.true_azimuth(Azimuth::from_magnetic_north(10.deg())).is_err());
            let stated = place.with_declination((-3).deg(), "report").unwrap().declination().unwrap();
            assert_eq!((stated.angle, stated.field), ((-3).deg(), None));
            let card = stated.card();
            assert!(card.passed(), "{:#?}", card.checks);
            assert_eq!(card.explanation.results.len(), 1);
        }
    }
}
