//! Where a hole is at one depth, and how it lies there.

use serde::{Deserialize, Serialize};

use super::arc::ratio_factor;
use super::position_card::explain;
use super::position_check::check;
use super::station::Station;
use super::survey::{Leg, Meta, Survey, SurveySource};
use crate::card::{Card, Check, Explain, Explanation};
use crate::error::{Error, Result};
use crate::frames::vector::{V3, add, wrap};
use crate::frames::{Attitude, Azimuth, Datum, Depth, DepthConversion, LevelSource, NamedAttitude};
use crate::units::{Angle, Length, Quantity, as_typed, with_typed_unit};

/// The position and attitude of a hole at one depth, from [`Survey::at`] or [`Survey::at_tvd`].
#[derive(Clone, Debug, PartialEq)]
#[non_exhaustive]
pub struct Position {
    /// The measured depth, along the hole from the rotary table.
    pub md: Length,
    /// The true vertical depth below the rotary table (below the first station, if the survey was
    /// not tied in).
    pub tvd: Length,
    /// North of the wellhead, true north.
    pub north: Length,
    /// East of the wellhead.
    pub east: Length,
    /// Inclination and azimuth from true north.
    pub attitude: Attitude,
    /// The change of direction from the station above; at a station, from the one before it.
    pub dogleg: Angle,
    /// The dogleg severity between the two stations: change of direction in 30 m of hole.
    pub dogleg_in_30_m: Angle,
    survey: Survey,
    asked: Asked,
    leg: Leg,
}

/// The depth that was asked for.
#[derive(Clone, Copy, Debug, PartialEq, Serialize, Deserialize)]
#[serde(rename_all = "snake_case")]
pub enum Asked {
    /// A measured depth.
    MeasuredDepth(Length),
    /// A true vertical depth below the rotary table.
    TrueVerticalDepth(Length),
}

/// The inputs of a position: the stations down to the one below it (all, when they were typed),
/// and the depth asked for.
#[derive(Clone, Debug, PartialEq, Serialize, Deserialize)]
pub struct PositionInputs {
    pub(super) survey: Meta,
    pub(super) stations: Vec<Station>,
    pub(super) asked: Asked,
}

/// What came out, in metres and radians.
#[derive(Clone, Copy, Debug, PartialEq, Serialize, Deserialize)]
pub struct PositionOutcome {
    pub(super) md: Length,
    pub(super) tvd: Length,
    pub(super) north: Length,
    pub(super) east: Length,
    pub(super) inclination: Angle,
    pub(super) azimuth: Angle,
    pub(super) dogleg: Angle,
    pub(super) dogleg_in_30_m: Angle,
    /// The elevation of the rotary table above mean sea level, where it was stated.
    pub(super) rotary_table: Option<Length>,
    /// The true vertical depth below mean sea level, where that is known.
    pub(super) below_sea: Option<Length>,
}

/// The length of hole a dogleg severity is stated for, metres.
pub(super) const SEVERITY_LENGTH: f64 = 30.0;
/// A card holds no more stations than this.
pub(super) const MOST_ON_A_CARD: usize = 2000;
/// A leg whose ends are both closer than this to a depth runs level along it, metres.
const LEVEL: f64 = 1e-9;
/// Depths closer than this along the hole are one crossing, metres.
const ONE_CROSSING: f64 = 1e-6;

/// Where a hole is at a measured depth, in metres and radians: for logs along it.
#[derive(Clone, Copy, Debug, PartialEq)]
pub(crate) struct Place {
    pub md: f64,
    /// North, east, down.
    pub at: V3,
    pub inclination: f64,
    pub azimuth: f64,
}

impl Place {
    /// How the hole lies there.
    pub fn attitude(&self) -> Attitude {
        Attitude {
            inclination: Angle::from_si(self.inclination),
            azimuth: Azimuth::from_true_north(Angle::from_si(self.azimuth)),
        }
    }
}

impl Survey {
    /// The place at a measured depth, as [`Survey::at`] finds it.
    pub(crate) fn place(&self, md: Length) -> Result<Place> {
        let (leg, share) = find_md(self, md)?;
        let at_bottom = md.si() == leg.bottom.md;
        let part = if at_bottom { leg.arc } else { leg.arc.up_to(share) };
        let at = if at_bottom { leg.end } else { add(leg.start, part.displacement()) };
        let (inclination, azimuth) = attitude(&leg, share, md.si(), part.to);
        Ok(Place { md: md.si(), at, inclination, azimuth })
    }

    /// The first measured depth.
    pub(crate) fn first_md(&self) -> Length {
        Length::m(self.data().direct.first().map_or(0.0, |s| s.md))
    }
}

impl Position {
    pub(super) fn locate(survey: &Survey, asked: Asked) -> Result<Self> {
        let (leg, share, md, tvd) = match asked {
            Asked::MeasuredDepth(md) => {
                let (leg, share) = find_md(survey, md)?;
                (leg, share, md, None)
            }
            Asked::TrueVerticalDepth(tvd) => {
                let (leg, share, md) = find_tvd(survey, tvd)?;
                (leg, share, md, Some(tvd))
            }
        };
        let data = survey.data();
        let used = if data.meta.source == SurveySource::Typed { data.stations.len() } else { leg.above + 2 };
        require_few(used, &format!("down to MD {}", with_typed_unit(md)))?;
        let at_bottom = md.si() == leg.bottom.md;
        let part = if at_bottom { leg.arc } else { leg.arc.up_to(share) };
        let [north, east, down] = if at_bottom { leg.end } else { add(leg.start, part.displacement()) };
        let (i, a) = attitude(&leg, share, md.si(), part.to);
        Ok(Position {
            md,
            tvd: tvd.unwrap_or(Length::m(down)),
            north: Length::m(north),
            east: Length::m(east),
            attitude: Attitude { inclination: Angle::from_si(i), azimuth: Azimuth::from_true_north(Angle::from_si(a)) },
            dogleg: Angle::from_si(part.beta),
            dogleg_in_30_m: Angle::from_si(leg.arc.beta / leg.arc.length * SEVERITY_LENGTH),
            survey: survey.clone(),
            asked,
            leg,
        })
    }

    /// The depth below another level of the hole. [`Position::conversion`] gives the same with a card.
    ///
    /// # Errors
    /// When the survey is not tied in, or the level was not stated.
    pub fn below(&self, datum: Datum) -> Result<Depth> {
        let depth = Depth { tvd: self.tvd, below: self.survey.datum()? };
        if datum == depth.below { Ok(depth) } else { self.survey.tie()?.convert(depth, datum) }
    }

    /// The depth below another level of the hole, with its card; the card of the position comes
    /// before it on a sheet.
    ///
    /// # Errors
    /// When the survey is not tied in, or the elevations of the levels were not stated.
    pub fn conversion(&self, datum: Datum) -> Result<DepthConversion> {
        let conversion = self.survey.tie()?.conversion(self.below(self.survey.datum()?)?, datum)?;
        let meta = &self.survey.data().meta;
        let levels = match &meta.source {
            SurveySource::File { path, sha256 } if meta.tie_in_file => {
                LevelSource::File { path: path.clone(), sha256: sha256.clone() }
            }
            _ => LevelSource::Typed,
        };
        let conversion = match meta.hole {
            Some(hole) => conversion.named(hole.text()),
            None => conversion,
        };
        Ok(conversion.levels_from(levels).standing_on(vec![self.card()]))
    }

    /// The horizontal distance from the wellhead.
    pub fn departure(&self) -> Length {
        Length::m(self.north.si().hypot(self.east.si()))
    }

    /// The dogleg severity in the other usual length: change of direction in 100 ft of hole.
    pub fn dogleg_in_100_ft(&self) -> Angle {
        self.dogleg_in_30_m.scale(Length::ft(100.0).si() / SEVERITY_LENGTH)
    }

    /// The attitude under the name of the hole and the depth asked for ("KF-3 at TVD 2950 m").
    pub fn named_attitude(&self) -> NamedAttitude {
        self.attitude.named(&self.name())
    }

    /// "KF-3 at TVD 2950 m".
    pub(super) fn name(&self) -> String {
        let hole = self.survey.hole().map_or("the hole", |name| name.text());
        format!("{hole} at {}", asked_words(self.asked))
    }

    pub(super) fn survey(&self) -> &Survey {
        &self.survey
    }
    pub(super) fn asked(&self) -> Asked {
        self.asked
    }
    pub(super) fn leg(&self) -> &Leg {
        &self.leg
    }
    /// How many stations the result stands on.
    pub(super) fn used(&self) -> usize {
        self.leg.above + 2
    }
    /// The ratio factor of the arc down to here.
    pub(super) fn ratio_factor(&self) -> f64 {
        ratio_factor(self.dogleg.si())
    }
}

/// "TVD 2950 m".
pub(super) fn asked_words(asked: Asked) -> String {
    match asked {
        Asked::MeasuredDepth(md) => format!("MD {} m", as_typed(md.in_m())),
        Asked::TrueVerticalDepth(tvd) => format!("TVD {} m", as_typed(tvd.in_m())),
    }
}

pub(super) fn require_few(stations: usize, place: &str) -> Result<()> {
    if stations <= MOST_ON_A_CARD {
        return Ok(());
    }
    Err(Error::out_of_range(
        format!("the number of survey stations {place}"),
        stations.to_string(),
        format!("at most {MOST_ON_A_CARD}, so that the record can hold them; keep a station every 10 m or so"),
    ))
}

/// Inclination and azimuth (0–2π): at a station its own numbers; between, from the direction on the
/// arc; where the hole is vertical, the azimuth of the nearer station.
fn attitude(leg: &Leg, share: f64, md: f64, t: V3) -> (f64, f64) {
    if md == leg.bottom.md {
        return (leg.bottom.i, leg.bottom.a);
    }
    if md == leg.top.md {
        return (leg.top.i, leg.top.a);
    }
    let [n, e, d] = t;
    let level = n.hypot(e);
    let azimuth = if level < VERTICAL { nearer_azimuth(leg, share) } else { wrap(e.atan2(n)) };
    (level.atan2(d), azimuth)
}

/// A direction with a smaller horizontal part than this is vertical.
pub(super) const VERTICAL: f64 = 1e-12;

pub(super) fn nearer_azimuth(leg: &Leg, share: f64) -> f64 {
    if share <= 0.5 { leg.top.a } else { leg.bottom.a }
}

fn find_md(survey: &Survey, md: Length) -> Result<(Leg, f64)> {
    md.finite("measured depth")?;
    let first = survey.data().direct.first().map_or(0.0, |s| s.md);
    let outside = || {
        Error::out_of_range(
            "measured depth",
            with_typed_unit(md),
            format!(
                "between {} m and {} m, the first and the last station (nothing is extrapolated)",
                as_typed(first),
                as_typed(survey.last_md().in_m())
            ),
        )
    };
    if md.si() < first || md > survey.last_md() {
        return Err(outside());
    }
    let leg = survey.leg_at(md.si()).ok_or_else(outside)?;
    Ok((leg, (md.si() - leg.top.md) / leg.arc.length))
}

/// Where the hole passes a depth: every crossing of every leg, each found on the stretch between
/// turning points, where depth only grows or only falls.
fn find_tvd(survey: &Survey, tvd: Length) -> Result<(Leg, f64, Length)> {
    tvd.finite("true vertical depth")?;
    survey.datum()?;
    let mut found: Vec<(Leg, f64, f64)> = Vec::new();
    for leg in survey.legs() {
        let turn = leg.arc.turning_share();
        let ends = [Some(0.0), turn, Some(1.0)];
        let shares: Vec<f64> = ends.into_iter().flatten().collect();
        for pair in shares.windows(2) {
            let [from, to] = pair else { continue };
            for share in crossing(&leg, *from, *to, tvd.si()).into_iter().flatten() {
                let md = leg.top.md + share * leg.arc.length;
                if found.iter().all(|(_, _, other)| (md - other).abs() > ONE_CROSSING) {
                    found.push((leg, share, md));
                }
            }
        }
        if found.len() > 8 {
            break;
        }
    }
    match found.as_slice() {
        [(leg, share, md)] => {
            // A crossing at a station is the station.
            let md = [leg.top.md, leg.bottom.md].into_iter().find(|s| (s - md).abs() < 1e-9).unwrap_or(*md);
            let share = if md == leg.bottom.md { 1.0 } else { *share };
            Ok((*leg, share, Length::m(md)))
        }
        [] => {
            let depths = survey.data().places.iter().map(|p| p[2]);
            let (least, most) = depths.fold((f64::INFINITY, f64::NEG_INFINITY), |(l, m), d| (l.min(d), m.max(d)));
            Err(Error::out_of_range(
                "true vertical depth",
                with_typed_unit(tvd),
                format!(
                    "between {least:.1} m and {most:.1} m, where the stations lie (nothing is extrapolated): ask within them, or survey the hole further"
                ),
            ))
        }
        several => {
            let depths: Vec<String> = several.iter().take(4).map(|(_, _, md)| format!("{md:.1}")).collect();
            Err(Error::not_physical(
                format!("TVD {}", with_typed_unit(tvd)),
                format!(
                    "the hole passes it more than once, at MD {} m{}; ask by measured depth with .at(md)?.",
                    depths.join(", "),
                    if several.len() > 4 { " and more" } else { "" }
                ),
            ))
        }
    }
}

/// The share of a leg at which it passes a depth, between two shares over which depth is monotone;
/// both ends, when the hole runs level along that very depth.
fn crossing(leg: &Leg, from: f64, to: f64, depth: f64) -> [Option<f64>; 2] {
    let gap = |share: f64| {
        let here = if share >= 1.0 { leg.end[2] } else { leg.start[2] + leg.arc.up_to(share).displacement()[2] };
        here - depth
    };
    let (mut low, mut high) = (from, to);
    let (first, last) = (gap(low), gap(high));
    if first.abs() < LEVEL && last.abs() < LEVEL {
        return [Some(from), Some(to)];
    }
    if first == 0.0 {
        return [Some(from), None];
    }
    if last == 0.0 {
        return [Some(to), None];
    }
    if first * last > 0.0 {
        return [None, None];
    }
    for _ in 0..100 {
        let middle = 0.5 * (low + high);
        if middle <= low || middle >= high {
            break;
        }
        if gap(middle) * first > 0.0 { low = middle } else { high = middle }
    }
    [Some(0.5 * (low + high)), None]
}

impl Explain for Position {
    const KIND: &'static str = "survey-position";
    type Inputs = PositionInputs;
    type Outcome = PositionOutcome;

    fn compute(inputs: PositionInputs) -> Result<Self> {
        require_few(inputs.stations.len(), "of this record")?;
        Position::locate(&Survey::build(inputs.stations, inputs.survey)?, inputs.asked)
    }
    fn inputs(&self) -> PositionInputs {
        let data = self.survey.data();
        let used = if data.meta.source == SurveySource::Typed { data.stations.len() } else { self.used() };
        PositionInputs {
            survey: data.meta.clone(),
            stations: data.stations.iter().take(used).copied().collect(),
            asked: self.asked,
        }
    }
    fn outcome(&self) -> PositionOutcome {
        PositionOutcome {
            md: self.md,
            tvd: self.tvd,
            north: self.north,
            east: self.east,
            inclination: self.attitude.inclination,
            azimuth: self.attitude.azimuth.measured(),
            dogleg: self.dogleg,
            dogleg_in_30_m: self.dogleg_in_30_m,
            rotary_table: self.survey.tie().and_then(|t| t.elevation(Datum::RotaryTable)).ok(),
            below_sea: self.below(Datum::MeanSeaLevel).ok().map(|d| d.tvd),
        }
    }
    fn check(inputs: &PositionInputs, outcome: &PositionOutcome) -> Vec<Check> {
        check(inputs, outcome)
    }
    fn explain(&self) -> Explanation {
        explain(self)
    }
    fn upstream(&self) -> Vec<Card> {
        self.survey().upstream()
    }
}

#[cfg(test)]
mod tests {
    use super::super::survey::tests::station;
    use super::*;
    use crate::card::Data;
    use crate::frames::DatumTie;
    use crate::units::Units;
    use crate::well::{Survey, SurveyTable};
    use proptest::prelude::*;

    fn hole() -> Survey {
        let stations = [
            station(0.0, 0.0, 0.0),
            station(700.0, 0.3, 300.0),
            station(1000.0, 9.0, 115.0),
            station(1900.0, 42.0, 121.0),
            station(2500.0, 41.5, 119.0),
            station(3600.0, 42.3, 120.5),
        ];
        Survey::from_stations(&stations)
            .unwrap()
            .named("X-1")
            .tied(DatumTie::rotary_table_at(32.4.m()).unwrap())
            .unwrap()
    }

    /// Every number of an outcome, moved, turns a check red; unmoved, all are green; and a replay
    /// gives the very same card.
    fn holds<E: Explain>(result: &E) {
        let card: Card = result.card();
        assert!(card.passed(), "{:#?}", card.checks);
        let again = E::compute(E::Inputs::read(&card.inputs).unwrap()).unwrap().card();
        assert_eq!(again, card);
        for (place, value) in card.outcome.numbers() {
            for moved in [value * (1.0 + 1e-5) + 1e-5, value * (1.0 - 1e-5) - 1e-5] {
                let changed = E::Outcome::read(&card.outcome.with_number(&place, moved)).unwrap();
                assert!(E::check(&result.inputs(), &changed).iter().any(|c| !c.passed), "{place} {value} {moved}");
            }
        }
    }

    #[test]
    fn explains_itself_and_notices_every_change() {
        let survey = hole();
        for md in [0.0, 350.0, 700.0, 1234.5, 1900.0, 3599.0, 3600.0] {
            holds(&survey.at(md.m()).unwrap());
        }
        for tvd in [0.0, 10.0, 1500.0, 2950.0] {
            let p = survey.at_tvd(tvd.m()).unwrap();
            assert_eq!(p.tvd, tvd.m());
            assert!((survey.at(p.md).unwrap().tvd.in_m() - tvd).abs() < 1e-9);
            holds(&p);
        }
        holds(&survey.table().unwrap());
        let loose = Survey::from_stations(&[station(100.0, 90.0, 10.0), station(130.0, 100.0, 350.0)]).unwrap();
        holds(&loose.at(117.m()).unwrap());
    }

    #[test]
    fn a_station_keeps_its_own_numbers() {
        let survey = hole();
        let p = survey.at(1900.m()).unwrap();
        assert_eq!(p.attitude.inclination, 42.deg());
        assert_eq!(p.attitude.azimuth.true_north().unwrap(), 121.deg());
        let rows = survey.table().unwrap().rows();
        assert_eq!(rows.iter().map(|r| (r.north, r.east, r.tvd)).nth(3), Some((p.north, p.east, p.tvd)));
        assert_eq!(rows.get(3).map(|r| r.dogleg), Some(p.dogleg));
        assert_eq!(survey.at(0.m()).unwrap().dogleg, 0.deg());
        assert_eq!(p.below(Datum::MeanSeaLevel).unwrap().tvd, p.tvd - 32.4.m());
        assert!(p.below(Datum::Ground).is_err());
        assert_eq!(p.named_attitude().name.text(), "X-1 at MD 1900 m");
        assert!((p.dogleg_in_100_ft().in_deg() / p.dogleg_in_30_m.in_deg() - 1.016).abs() < 1e-12);
    }

    #[test]
    fn nothing_is_extrapolated() {
        let survey = hole();
        assert_eq!(
            survey.at(3601.m()).unwrap_err().to_string(),
            "measured depth is 3601 m, but it must be between 0 m and 3600 m, the first and the last station (nothing is extrapolated)."
        );
        assert!(survey.at((-1).m()).is_err());
        assert!(survey.at(f64::NAN.m()).is_err());
        let said = survey.at_tvd(5000.m()).unwrap_err().to_string();
        assert!(said.starts_with("true vertical depth is 5000 m, but it must be between 0.0 m and "), "{said}");
        assert!(said.ends_with(": ask within them, or survey the hole further."), "{said}");
        assert!(survey.at_tvd(f64::NAN.m()).is_err());
    }

    #[test]
    fn a_depth_passed_twice_is_refused() {
        let stations = [
            station(0.0, 0.0, 0.0),
            station(1000.0, 90.0, 0.0),
            station(1500.0, 100.0, 0.0),
            station(1800.0, 80.0, 0.0),
            station(1900.0, 80.0, 0.0),
        ];
        let survey = Survey::from_stations(&stations).unwrap();
        let twice = survey.at(1300.m()).unwrap().tvd;
        let e = survey.at_tvd(twice).unwrap_err().to_string();
        assert!(e.contains("more than once") && e.contains(".at(md)"), "{e}");
        // The turning point inside an arc is reached from both sides.
        let level = Survey::from_stations(&[station(0.0, 80.0, 0.0), station(100.0, 100.0, 0.0)]).unwrap();
        let deepest = level.at(50.m()).unwrap().tvd;
        assert!(level.at_tvd(deepest - 0.1.m()).unwrap_err().to_string().contains("more than once"));
        assert!(level.at_tvd(deepest + 0.1.m()).is_err());
        // Level along the depth asked for.
        let flat = Survey::from_stations(&[station(0.0, 90.0, 0.0), station(100.0, 90.0, 0.0)]).unwrap();
        assert!(flat.at_tvd(flat.at(100.m()).unwrap().tvd).is_err());
    }

    #[test]
    fn a_vertical_hole_keeps_the_azimuth_of_the_nearer_station() {
        let survey = Survey::from_stations(&[station(0.0, 0.0, 30.0), station(100.0, 0.0, 123.0)]).unwrap();
        let azimuth = |md: f64| survey.at(md.m()).unwrap().attitude.azimuth.true_north().unwrap().in_deg();
        assert_eq!(
            [azimuth(0.0), azimuth(40.0), azimuth(60.0), azimuth(100.0)].map(f64::round),
            [30.0, 30.0, 123.0, 123.0]
        );
        holds(&survey.at(60.m()).unwrap());
        // The hole leaves the vertical towards the next station at once.
        let leaving = Survey::from_stations(&[station(0.0, 0.0, 30.0), station(100.0, 5.0, 123.0)]).unwrap();
        assert!((leaving.at(1.m()).unwrap().attitude.azimuth.true_north().unwrap().in_deg() - 123.0).abs() < 1e-9);
    }

    #[test]
    fn a_card_holds_a_bounded_number_of_stations() {
        let many: Vec<_> = (0..2500).map(|k| station(f64::from(k), 1.0, 0.0)).collect();
        let survey = Survey::from_stations(&many).unwrap();
        assert!(survey.at(10.m()).unwrap_err().to_string().contains("at most 2000"));
        assert!(survey.table().is_err());
    }

    #[test]
    fn kinds_are_their_own() {
        assert_ne!(Position::KIND, SurveyTable::KIND);
    }

    proptest! {
        /// A station put into a survey where the arc already is changes nothing.
        #[test]
        fn a_station_on_the_arc_changes_nothing(i in 0.0..170.0_f64, a in 0.0..360.0_f64, j in 0.0..170.0_f64, b in 0.0..360.0_f64, share in 0.01..0.99_f64) {
            let ends = [station(0.0, i, a), station(100.0, j, b)];
            let Ok(whole) = Survey::from_stations(&ends) else { return Ok(()) };
            let p = whole.at((100.0 * share).m()).unwrap();
            let middle = Station { md: p.md, inclination: p.attitude.inclination, azimuth: p.attitude.azimuth };
            let split = Survey::from_stations(&[ends[0], middle, ends[1]]).unwrap();
            let (x, y) = (whole.at(100.m()).unwrap(), split.at(100.m()).unwrap());
            let scale = whole.table().unwrap().rows()[1].dogleg.si();
            prop_assume!(scale < 3.0);
            prop_assert!((x.north - y.north).in_m().abs() < 1e-7);
            prop_assert!((x.east - y.east).in_m().abs() < 1e-7);
            prop_assert!((x.tvd - y.tvd).in_m().abs() < 1e-7);
        }
    }
}
