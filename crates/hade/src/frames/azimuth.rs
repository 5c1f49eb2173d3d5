//! A compass direction with the north it was measured from.

use serde::{Deserialize, Serialize};

use super::Site;
use super::site::{SiteRef, few_decimals};
use super::vector::wrap;
use crate::card::{Card, Check, Explain, Explanation, Formula, Item, Method, Step};
use crate::error::{Error, Result};
use crate::sheet::IntoGiven;
use crate::units::{Angle, Quantity, Uncertain, as_typed, fixed, require_between, with_typed_unit};

/// The north an azimuth was measured from.
#[derive(Clone, Copy, Debug, PartialEq, Eq, Serialize, Deserialize)]
#[serde(rename_all = "snake_case")]
pub enum North {
    /// The meridian through the site.
    True,
    /// The north of a map grid.
    Grid,
    /// The magnetic needle.
    Magnetic,
}

impl North {
    /// "true north", "grid north", "magnetic north".
    pub fn words(self) -> &'static str {
        match self {
            North::True => "true north",
            North::Grid => "grid north",
            North::Magnetic => "magnetic north",
        }
    }
}

/// An azimuth, clockwise from a stated north seen from above. It remembers what was measured and
/// what was added, so that the correction is a step of the record; one that a [`Site`] corrected
/// remembers the site too, and the record gets the card of its declination or convergence.
#[derive(Clone, Copy, Debug, PartialEq, Serialize, Deserialize)]
pub struct Azimuth {
    measured: Angle,
    north: North,
    correction: Option<Angle>,
    turned: Angle,
    #[serde(default, skip_serializing_if = "Option::is_none")]
    site: Option<SiteRef>,
}

impl Azimuth {
    fn measured_from(north: North, measured: Angle) -> Self {
        Azimuth { measured, north, correction: None, turned: Angle::default(), site: None }
    }
    /// An azimuth from true north.
    pub fn from_true_north(angle: Angle) -> Self {
        Azimuth::measured_from(North::True, angle)
    }
    /// An azimuth from the north of a map grid; it needs the grid's convergence before it is used.
    pub fn from_grid_north(angle: Angle) -> Self {
        Azimuth::measured_from(North::Grid, angle)
    }
    /// An azimuth from magnetic north; it needs the declination before it is used.
    pub fn from_magnetic_north(angle: Angle) -> Self {
        Azimuth::measured_from(North::Magnetic, angle)
    }

    /// With the magnetic declination (east positive): true = magnetic + declination.
    ///
    /// # Errors
    /// When the azimuth is not from magnetic north, or the declination is not within ±180°.
    pub fn with_declination(self, declination: Angle) -> Result<Self> {
        self.corrected(North::Magnetic, "the magnetic declination", declination)
    }

    /// With the grid convergence (angle from true north to grid north, east positive): true = grid
    /// + convergence.
    ///
    /// # Errors
    /// When the azimuth is not from grid north, or the convergence is not within ±180°.
    pub fn with_convergence(self, convergence: Angle) -> Result<Self> {
        self.corrected(North::Grid, "the grid convergence", convergence)
    }

    fn corrected(self, from: North, what: &str, correction: Angle) -> Result<Self> {
        if self.north != from {
            let instead = match self.north {
                North::True => "leave it out here",
                North::Grid => {
                    "give the grid's convergence with .with_convergence(angle)?, or use site.true_azimuth(azimuth)? with the site's map grid"
                }
                North::Magnetic => {
                    "give the declination with .with_declination(angle)?, or use site.true_azimuth(azimuth)?"
                }
            };
            return Err(Error::not_physical(
                format!("an azimuth from {}", self.north.words()),
                format!("{what} turns azimuths from {} into true ones; {instead}.", from.words()),
            ));
        }
        require_between(what, correction, Angle::deg(-180.0), Angle::deg(180.0))?;
        Ok(Azimuth { correction: Some(correction), site: None, ..self })
    }

    /// With the correction that a site gives for its north.
    pub(super) fn corrected_at(self, site: Site, correction: Angle) -> Self {
        Azimuth { correction: Some(correction), site: Some(SiteRef::new(site)), ..self }
    }

    /// Another angle measured from the same north, with the same correction.
    pub(super) fn with_measured(self, measured: Angle) -> Self {
        Azimuth { measured, ..self }
    }

    /// The same direction by the same correction, which is remembered elsewhere to be a site's.
    pub(crate) fn without_site(self) -> Self {
        Azimuth { site: None, ..self }
    }

    /// The direction at right angles to it, as a line by its end in 0–180° (in a vertical hole,
    /// S_Hmax from the azimuth of breakouts).
    pub fn perpendicular(self) -> Self {
        let bearing = self.true_north().unwrap_or(self.measured).si().rem_euclid(std::f64::consts::PI);
        let other_end = self.true_north().unwrap_or(self.measured).si() - bearing;
        let quarter = if bearing < std::f64::consts::FRAC_PI_2 { 90.0 } else { -90.0 };
        let turned = self.turned_by(Angle::deg(quarter));
        if other_end.abs() > 1.0 { turned.turned_by(Angle::deg(-180.0)) } else { turned }
    }

    /// Turned clockwise.
    pub fn turned_by(self, angle: Angle) -> Self {
        Azimuth { turned: self.turned + angle, ..self }
    }

    /// One standard deviation.
    pub fn give_or_take(self, one_sd: Angle) -> Uncertain<Azimuth, Angle> {
        Uncertain { value: self, give_or_take: one_sd }
    }

    /// The north it was measured from.
    pub fn north(self) -> North {
        self.north
    }

    /// The angle as it was measured, from its own north.
    pub fn measured(self) -> Angle {
        self.measured
    }

    /// The correction to true north, if one was given.
    pub fn correction(self) -> Option<Angle> {
        self.correction
    }

    /// The site that corrected it, if one did.
    pub fn site(self) -> Option<Site> {
        self.site.map(SiteRef::site)
    }

    /// Whether it was corrected or turned since it was measured.
    pub(crate) fn has_history(self) -> bool {
        self.correction.is_some() || self.turned.si() != 0.0
    }

    /// The angle from true north, 0 ≤ a < 360°.
    ///
    /// # Errors
    /// When it was measured from grid or magnetic north and no correction was given, and when the
    /// measured angle is not a number within ±360°.
    pub fn true_north(self) -> Result<Angle> {
        require_between("azimuth", self.measured, Angle::deg(-360.0), Angle::deg(360.0))?;
        self.turned.finite("turn of an azimuth")?;
        let added = match (self.north, self.correction) {
            (North::True, _) => 0.0,
            (_, Some(correction)) => correction.si(),
            (North::Grid, None) => {
                return Err(Error::undeclared(
                    format!("The azimuth {} is from grid north", with_typed_unit(self.measured)),
                    "give the grid convergence with .with_convergence(angle)?, east positive, or use site.true_azimuth(azimuth)? with a site on its map grid.",
                ));
            }
            (North::Magnetic, None) => {
                return Err(Error::undeclared(
                    format!("The azimuth {} is from magnetic north", with_typed_unit(self.measured)),
                    "give the declination of the survey with .with_declination(angle)?, east positive, or use site.true_azimuth(azimuth)? with a site of its place and date.",
                ));
            }
        };
        let whole = self.measured.si() + added + self.turned.si();
        Ok(Angle::from_si(within_a_circle(whole)))
    }

    /// "035.0° from true north" when that is known, otherwise what was measured: "127° from magnetic north".
    pub fn words(self) -> String {
        self.item("", "").shown
    }

    /// The azimuth as an input or a result, by its true bearing when that is known.
    pub(crate) fn item(self, symbol: &str, name: &str) -> Item {
        match self.true_north() {
            Ok(angle) => Item::new(symbol, name, TRUE_AZIMUTH, vec![angle.si()], bearing(angle)),
            Err(_) => self.measured_item(symbol, name),
        }
    }

    fn measured_item(self, symbol: &str, name: &str) -> Item {
        let degrees = as_typed(self.measured.in_deg());
        let figures = if degrees.starts_with('-') { degrees } else { format!("{degrees:0>3}") };
        let shown = format!("{figures}° from {}", self.north.words());
        let kind = format!("azimuth from {}", self.north.words());
        Item::new(symbol, name, kind, vec![within_a_circle(self.measured.si())], shown)
    }

    /// The card of its correction, when there is one to show, after the card of the site's declination
    /// or convergence.
    pub(crate) fn upstream(self) -> Vec<Card> {
        if !self.has_history() || self.true_north().is_err() {
            return Vec::new();
        }
        let mut cards = Explain::upstream(&self);
        cards.push(self.card());
        cards
    }
}

/// 0 ≤ a < 2π; what is already in range keeps its bits, so that the record can follow it.
fn within_a_circle(a: f64) -> f64 {
    if (0.0..std::f64::consts::TAU).contains(&a) { a } else { wrap(a) }
}

/// The kind under which the record holds azimuths from true north.
pub(crate) const TRUE_AZIMUTH: &str = "azimuth from true north";

/// Whether a turn leads to the direction across, as a line.
fn is_quarter(turn: Angle) -> bool {
    (turn.in_deg().rem_euclid(180.0) - 90.0).abs() < 1e-9
}

fn turn_words(turn: Angle) -> &'static str {
    if is_quarter(turn) {
        "turn to the direction across it (as S_Hmax stands across breakouts in a vertical hole, or a strike across its dip direction)"
    } else {
        "turn clockwise"
    }
}

/// "035.0° from true north".
pub(crate) fn bearing(angle: Angle) -> String {
    format!("{}° from true north", three_figures(angle))
}

/// A bearing with three figures before the point: "035.0".
pub(crate) fn three_figures(angle: Angle) -> String {
    let text = format!("{:05.1}", wrap(angle.si()).to_degrees());
    if text == "360.0" { "000.0".to_owned() } else { text }
}

impl IntoGiven for Azimuth {
    type Value = Azimuth;
    fn into_given(self, symbol: &str, meaning: &str) -> (Azimuth, Item, Option<(f64, String)>) {
        // What was measured is the given; its correction is a given of its own, and their sum a card.
        (self, self.measured_item(symbol, meaning), None)
    }
}

impl IntoGiven for Uncertain<Azimuth, Angle> {
    type Value = Azimuth;
    fn into_given(self, symbol: &str, meaning: &str) -> (Azimuth, Item, Option<(f64, String)>) {
        let (value, item, _) = self.value.into_given(symbol, meaning);
        (value, item, Some((self.give_or_take.si(), with_typed_unit(self.give_or_take))))
    }
}

impl Explain for Azimuth {
    const KIND: &'static str = "azimuth-to-true-north";
    type Inputs = Azimuth;
    type Outcome = Angle;

    fn compute(inputs: Azimuth) -> Result<Self> {
        inputs.true_north().map(|_| inputs)
    }
    fn inputs(&self) -> Azimuth {
        *self
    }
    fn outcome(&self) -> Angle {
        self.true_north().unwrap_or(Angle::from_si(f64::NAN))
    }

    /// By another route: the compass direction as a vector, turned step by step.
    fn check(inputs: &Azimuth, outcome: &Angle) -> Vec<Check> {
        let turn = |v: (f64, f64), by: f64| (v.0 * by.cos() - v.1 * by.sin(), v.0 * by.sin() + v.1 * by.cos());
        let correction =
            if inputs.north == North::True { 0.0 } else { inputs.correction.map_or(f64::NAN, Quantity::si) };
        let measured = (inputs.measured.si().cos(), inputs.measured.si().sin());
        let v = turn(turn(measured, correction), inputs.turned.si());
        let mut checks = vec![Check::compare(
            "bearing as a unit vector (north, east), turned step by step",
            &[outcome.si().cos(), outcome.si().sin()],
            &[v.0, v.1],
            1e-12,
            "",
        )];
        if let Some(site) = inputs.site() {
            checks.push(Check::compare(
                "correction against the one found again for the site",
                &[correction],
                &[site.correction(inputs.north).map_or(f64::NAN, Quantity::si)],
                1e-9,
                "rad",
            ));
        }
        checks
    }

    fn explain(&self) -> Explanation {
        let (symbol, name) = match self.north {
            North::True => ("", ""),
            North::Grid => ("γ", "grid convergence, east positive"),
            North::Magnetic => ("D", "magnetic declination, east positive"),
        };
        let mut inputs = vec![self.measured_item("A_0", "azimuth as stated")];
        let mut sum = format!("A = {}°", as_typed(self.measured.in_deg()));
        if let (Some(correction), true) = (self.correction, self.north != North::True) {
            let shown = few_decimals(correction, 3);
            inputs.push(Item::new(symbol, name, Angle::KIND, vec![correction.si()], format!("{shown}°")));
            sum.push_str(&format!(" + ({shown}°)"));
        }
        if self.turned.si() != 0.0 {
            inputs.push(Item::typed("t", turn_words(self.turned), self.turned).chosen());
            sum.push_str(&format!(" + ({}°)", as_typed(self.turned.in_deg())));
        }
        let (math, text) = match (self.north, self.turned.si() != 0.0) {
            (North::True, _) => ("A = A_0 + t", "A = A_0 + t"),
            (North::Grid, false) => ("A = A_0 + gamma", "A = A_0 + γ"),
            (North::Grid, true) => ("A = A_0 + gamma + t", "A = A_0 + γ + t"),
            (North::Magnetic, false) => ("A = A_0 + D", "A = A_0 + D"),
            (North::Magnetic, true) => ("A = A_0 + D + t", "A = A_0 + D + t"),
        };
        let across = if is_quarter(self.turned) { ", and the direction across it" } else { "" };
        let outcome = self.outcome();
        sum.push_str(&format!(" = {}°, counted within 0–360°", three_figures(outcome)));
        Explanation {
            title: format!("Azimuth {}° from {} as a true azimuth{across}", few_decimals(self.measured, 4), self.north.words()),
            headline: bearing(outcome),
            inputs,
            results: vec![Item::new("A", "azimuth from true north", TRUE_AZIMUTH, vec![outcome.si()], bearing(outcome))],
            method: Method {
                words: "East declination and east convergence are positive, so they are added; a turn is clockwise seen from above.".to_owned(),
                formulas: vec![Formula::new(math, text)],
                ..Method::default()
            },
            steps: vec![Step::worked(sum)],
            notes: self.site().map(|site| self.words_of(site)).into_iter().collect(),
            topics: vec!["azimuth".to_owned()],
            ..Explanation::default()
        }
    }

    fn upstream(&self) -> Vec<Card> {
        self.site().and_then(|site| site.correction_card(self.north)).into_iter().collect()
    }
}

impl Azimuth {
    /// Which site the correction belongs to, and how uncertain it is.
    fn words_of(self, site: Site) -> String {
        let sd = match self.north {
            North::Magnetic => site.declination().ok().and_then(|d| d.one_sd),
            _ => None,
        };
        let uncertain = sd.map(|sd| {
            format!(
                "; one standard deviation of the declination is {}°, beside that of the measurement",
                fixed(sd.in_deg(), 2)
            )
        });
        // A map grid does not change with the date.
        let words = site.words();
        let place = match self.north {
            North::Magnetic => words.as_str(),
            _ => words.split(" on ").next().unwrap_or_default(),
        };
        format!("The correction is that of {place}{}.", uncertain.unwrap_or_default())
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::units::Units;

    #[test]
    fn magnetic_azimuth_needs_its_declination() {
        let measured = Azimuth::from_magnetic_north(124.deg());
        assert!(measured.true_north().unwrap_err().to_string().contains("with_declination"));
        let corrected = measured.with_declination((-3.5).deg()).unwrap();
        assert!((corrected.true_north().unwrap().in_deg() - 120.5).abs() < 1e-12);
        assert!(measured.with_convergence(1.deg()).is_err());
    }

    #[test]
    fn wraps_and_keeps_bits_in_range() {
        assert_eq!(Azimuth::from_true_north(35.deg()).true_north().unwrap(), 35.deg());
        let over = Azimuth::from_grid_north(359.5.deg()).with_convergence(1.deg()).unwrap();
        assert!((over.true_north().unwrap().in_deg() - 0.5).abs() < 1e-9);
        assert_eq!(three_figures(359.97.deg()), "000.0");
        assert!(Azimuth::from_true_north(f64::NAN.deg()).true_north().is_err());
    }

    #[test]
    fn wraps_over_north_by_the_correction_and_by_a_turn() {
        let over = |a: f64, d: f64| {
            let azimuth = Azimuth::from_magnetic_north(a.deg()).with_declination(d.deg()).unwrap();
            azimuth.true_north().unwrap().in_deg()
        };
        assert!((over(359.9, 0.2) - 0.1).abs() < 1e-9);
        assert!((over(0.1, -0.2) - 359.9).abs() < 1e-9);
        assert!((over(-0.1, 0.05) - 359.95).abs() < 1e-9);
        assert!((over(360.0, 0.0)).abs() < 1e-9);
        let card = Azimuth::from_magnetic_north(359.9.deg()).with_declination(0.2.deg()).unwrap().card();
        assert_eq!(card.explanation.headline, "000.1° from true north");
        assert!(card.passed());
    }

    #[test]
    fn an_azimuth_beyond_a_full_turn_is_refused() {
        for a in [360.1, -360.1, 725.0, f64::INFINITY, f64::NAN] {
            let e = Azimuth::from_true_north(a.deg()).true_north().unwrap_err();
            assert!(e.is_range() && e.to_string().contains("between -360° and 360°"), "{e}");
        }
        assert!(Azimuth::from_true_north((-360).deg()).true_north().is_ok());
        assert!(Azimuth::from_true_north(10.deg()).turned_by(f64::NAN.deg()).true_north().is_err());
    }

    #[test]
    fn the_wrong_correction_is_told_the_right_method() {
        let grid = Azimuth::from_grid_north(124.deg()).with_declination(1.deg()).unwrap_err().to_string();
        assert!(grid.contains(".with_convergence(angle)?") && grid.contains("site.true_azimuth"), "{grid}");
        let magnetic = Azimuth::from_magnetic_north(124.deg()).with_convergence(1.deg()).unwrap_err().to_string();
        assert!(magnetic.contains(".with_declination(angle)?"), "{magnetic}");
        let straight = Azimuth::from_true_north(124.deg()).with_convergence(1.deg()).unwrap_err().to_string();
        assert!(straight.contains("leave it out"), "{straight}");
        assert!(Azimuth::from_grid_north(1.deg()).with_convergence(f64::NAN.deg()).unwrap_err().is_range());
    }

    #[test]
    fn a_correction_by_a_site_is_followed_from_card_to_card() {
        let site = Site::at(57.2.deg(), 1.8.deg(), "2026-05-01").unwrap().with_utm(31).unwrap();
        for (azimuth, kind) in [
            (Azimuth::from_magnetic_north(127.deg()), "magnetic-declination"),
            (Azimuth::from_grid_north(127.deg()), "grid-convergence"),
        ] {
            let corrected = site.true_azimuth(azimuth).unwrap().perpendicular();
            assert_eq!(corrected.site(), Some(site));
            let cards = corrected.upstream();
            let kinds: Vec<&str> = cards.iter().map(|c| c.kind.as_str()).collect();
            assert_eq!(kinds, [kind, "azimuth-to-true-north"]);
            let taken = &cards[1].explanation.inputs[1];
            assert!(cards[0].explanation.results[0].same_value(taken), "{taken:?}");
            assert_eq!(cards[0].explanation.results[0].symbol, taken.symbol);
            assert!(cards.iter().all(Card::passed), "{cards:#?}");
            // A record that says another correction than its site gives is found out.
            let tampered = Azimuth { correction: Some(2.deg()), ..corrected };
            assert!(!tampered.card().passed());
        }
        let plain = Azimuth::from_true_north(35.deg());
        assert_eq!(site.true_azimuth(plain).unwrap(), plain);
        let stated = Azimuth::from_magnetic_north(35.deg()).with_declination(1.deg()).unwrap();
        assert_eq!(site.true_azimuth(stated).unwrap(), stated, "a correction that was stated stays");
        assert!(site.true_azimuth(Azimuth::from_true_north(f64::NAN.deg())).is_err());
    }
}
