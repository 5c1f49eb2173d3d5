//! A survey: its stations, where each lies, and what is found between them.

use std::path::Path;
use std::sync::Arc as Shared;

use serde::{Deserialize, Serialize};

use super::arc::Arc;
use super::position::{Asked, Position};
use super::station::{Direct, Station, TieIn, follows};
use crate::card::{Card, Item};
use crate::error::{Error, Result};
use crate::frames::vector::{V3, add};
use crate::frames::{Datum, DatumTie, Name, North, Site};
use crate::sheet::IntoGiven;
use crate::units::{Angle, Length, Quantity, as_typed, with_typed_unit};

/// More stations than this are no survey but a continuous log.
pub(super) const MOST_STATIONS: usize = 100_000;

/// The path of a hole by minimum curvature: stations joined by circular arcs that touch both
/// measured directions (Taylor and Mason 1972; Zaremba 1973).
///
/// Copies are cheap: they share the stations.
#[derive(Clone, Debug, PartialEq)]
pub struct Survey {
    data: Shared<SurveyData>,
}

#[derive(Clone, Debug, PartialEq)]
pub(super) struct SurveyData {
    pub meta: Meta,
    pub stations: Vec<Station>,
    pub direct: Vec<Direct>,
    /// The dogleg down to each station from the one above (zero at the first).
    pub doglegs: Vec<f64>,
    /// North, east, down of each station, metres.
    pub places: Vec<V3>,
}

/// What a survey says about itself besides its stations.
#[derive(Clone, Debug, PartialEq, Serialize, Deserialize)]
pub(super) struct Meta {
    pub hole: Option<Name>,
    pub source: SurveySource,
    /// The levels of the hole.
    pub tie: Option<DatumTie>,
    /// Whether the file itself states the levels.
    pub tie_in_file: bool,
    pub tie_in: Option<TieIn>,
    /// The site whose convergence or declination corrects the stations, where the file states none.
    #[serde(default, skip_serializing_if = "Option::is_none")]
    pub site: Option<Site>,
}

/// Where the stations of a survey came from.
#[derive(Clone, Debug, PartialEq, Eq, Serialize, Deserialize)]
#[serde(tag = "from", rename_all = "snake_case")]
pub enum SurveySource {
    /// They were typed, or computed, in the notebook.
    Typed,
    /// They were read from a file.
    File {
        /// The path as it was given.
        path: String,
        /// The SHA-256 of what was read.
        sha256: String,
    },
}

/// One leg of the hole: from a station to the next.
#[derive(Clone, Copy, Debug, PartialEq)]
pub(super) struct Leg {
    /// The index of the station above.
    pub above: usize,
    pub arc: Arc,
    pub top: Direct,
    pub bottom: Direct,
    /// North, east, down of the station above.
    pub start: V3,
    /// North, east, down of the station below.
    pub end: V3,
}

impl Survey {
    /// A survey from stations, in order of measured depth.
    ///
    /// The first station is the rotary table itself when its measured depth is zero; otherwise
    /// state where it lies with [`Survey::tied_in`]. Without that, north, east and TVD count from
    /// the first station, the cards say so, and [`Survey::at_tvd`] and [`Position::below`] refuse.
    ///
    /// # Errors
    /// With fewer than two stations or more than 100 000; when measured depths are not finite,
    /// negative, repeated or not rising; when an inclination is outside 0–180°; when an azimuth
    /// from grid or magnetic north has no correction; when the hole would turn back on itself.
    pub fn from_stations(stations: &[Station]) -> Result<Self> {
        let meta =
            Meta { hole: None, source: SurveySource::Typed, tie: None, tie_in_file: false, tie_in: None, site: None };
        Survey::build(stations.to_vec(), meta)
    }

    /// Reads a survey from a CSV file. Lines that begin with `#` above the column names declare
    /// what a table of numbers cannot say; keys in any order and case, free remarks allowed:
    ///
    /// ```text
    /// # hole: KF-3                          (optional)
    /// # north: true | grid | magnetic
    /// # north_correction: -1.32             (degrees, east positive; for grid and magnetic)
    /// # depth_unit: m | ft
    /// # angle_unit: deg
    /// # depth_datum: rotary table
    /// # rotary_table_above_msl: 32.4 m      (optional; also ground_above_msl, mudline_above_msl)
    /// # tie_in_north: 0 m                   (with tie_in_east, tie_in_tvd: when MD does not begin at 0)
    /// md,inclination,azimuth
    /// ```
    ///
    /// The correction may stand on the line of the north: `# north: magnetic, declination: 2.5`,
    /// `# north: grid, convergence: -1.32`. Where the file does not state it, [`Survey::read_csv_at`]
    /// takes it from a site.
    ///
    /// Further columns are ignored. Read line by line; at most 100 000 stations.
    ///
    /// # Errors
    /// With file, line, column and what to change: no such file, no text, empty, a missing
    /// declaration or column, decimal commas or semicolons, a word or nothing where a number is
    /// needed, and everything [`Survey::from_stations`] refuses.
    pub fn read_csv(path: impl AsRef<Path>) -> Result<Self> {
        super::read::read_csv(path.as_ref())
    }

    /// The same under the name of its hole.
    pub fn named(&self, hole: &str) -> Self {
        let mut data = (*self.data).clone();
        data.meta.hole = Some(Name::new(hole));
        Survey { data: Shared::new(data) }
    }

    /// With the levels of the hole, so that depths can be turned to other datums.
    ///
    /// # Errors
    /// When the file stated other levels.
    pub fn tied(&self, tie: DatumTie) -> Result<Self> {
        match self.data.meta.tie {
            Some(stated) if stated != tie && self.data.meta.tie_in_file => Err(Error::not_physical(
                format!("The levels of this hole ({})", tie.words()),
                format!("the survey file states others: {}; correct one of the two.", stated.words()),
            )),
            Some(stated) if stated == tie => Ok(self.clone()),
            _ => {
                let mut data = (*self.data).clone();
                data.meta.tie = Some(tie);
                data.meta.tie_in_file = false;
                Ok(Survey { data: Shared::new(data) })
            }
        }
    }

    /// With the place of the first station, for a survey that does not begin at the rotary table.
    ///
    /// # Errors
    /// When the survey was read from a file (which states it), a number is not finite, or a survey that begins at the rotary table is said to begin
    /// elsewhere.
    pub fn tied_in(&self, tie_in: TieIn) -> Result<Self> {
        let mut meta = self.data.meta.clone();
        if meta.source != SurveySource::Typed {
            return Err(Error::not_physical(
                "A tie-in of a survey file",
                "the file itself says where its first station lies; correct it there (tie_in_north, tie_in_east, tie_in_tvd).",
            ));
        }
        meta.tie_in = Some(tie_in);
        Survey::build(self.data.stations.clone(), meta)
    }

    pub(super) fn build(stations: Vec<Station>, meta: Meta) -> Result<Self> {
        if stations.len() < 2 || stations.len() > MOST_STATIONS {
            return Err(Error::out_of_range(
                "the number of survey stations",
                stations.len().to_string(),
                format!("between 2 and {MOST_STATIONS}"),
            ));
        }
        let mut direct: Vec<Direct> = Vec::with_capacity(stations.len());
        let mut doglegs = Vec::with_capacity(stations.len());
        let mut places: Vec<V3> = Vec::with_capacity(stations.len());
        for (station, number) in stations.iter().zip(1_usize..) {
            let here = station.direct()?;
            match (direct.last(), places.last()) {
                (Some(above), Some(place)) => {
                    let beta = follows(above, &here).map_err(|(why, fix)| {
                        Error::not_physical(format!("Survey station {number}"), format!("{why}; {fix}."))
                    })?;
                    let arc = Arc { from: above.t, to: here.t, beta, length: here.md - above.md };
                    places.push(add(*place, arc.displacement()));
                    doglegs.push(beta);
                }
                _ => {
                    places.push(first_place(&here, meta.tie_in)?);
                    doglegs.push(0.0);
                }
            }
            direct.push(here);
        }
        Ok(Survey { data: Shared::new(SurveyData { meta, stations, direct, doglegs, places }) })
    }

    /// The position at a measured depth, on the arc between its two stations.
    ///
    /// # Errors
    /// Outside the stations (nothing is extrapolated), or when more than 2000 stations lead down
    /// to it.
    pub fn at(&self, md: Length) -> Result<Position> {
        Position::locate(self, Asked::MeasuredDepth(md))
    }

    /// The position at a true vertical depth below the rotary table.
    ///
    /// # Errors
    /// When the hole passes that depth never or more than once, when the survey is not tied to the
    /// rotary table, or when more than 2000 stations lead down to it.
    pub fn at_tvd(&self, tvd: Length) -> Result<Position> {
        Position::locate(self, Asked::TrueVerticalDepth(tvd))
    }

    /// The stations.
    pub fn stations(&self) -> Vec<Station> {
        self.data.stations.clone()
    }

    /// The name of the hole, if it has one.
    pub fn hole(&self) -> Option<Name> {
        self.data.meta.hole
    }

    /// The levels of the hole.
    ///
    /// # Errors
    /// When neither the file nor the notebook stated them.
    pub fn tie(&self) -> Result<DatumTie> {
        self.data.meta.tie.ok_or_else(|| {
            Error::undeclared(
                "This survey does not say how high its rotary table is",
                "write \"# rotary_table_above_msl: … m\" into the file, or add .tied(DatumTie::rotary_table_at(…)?)?.",
            )
        })
    }

    /// The deepest measured depth.
    pub fn last_md(&self) -> Length {
        Length::m(self.data.direct.last().map_or(0.0, |s| s.md))
    }

    pub(super) fn data(&self) -> &SurveyData {
        &self.data
    }

    /// Whether places count from the rotary table.
    pub(super) fn is_tied_in(&self) -> bool {
        self.data.meta.tie_in.is_some() || self.data.direct.first().is_some_and(|s| s.md == 0.0)
    }

    /// The levels that TVD can be counted from.
    pub(crate) fn datum(&self) -> Result<Datum> {
        if self.is_tied_in() {
            return Ok(Datum::RotaryTable);
        }
        let first = self.data.direct.first().map_or(0.0, |s| s.md);
        Err(Error::undeclared(
            format!(
                "The survey begins at measured depth {} m, and its true vertical depth there is unknown",
                as_typed(first)
            ),
            "begin with a station at measured depth 0, or state it with .tied_in(TieIn { north, east, tvd })?.",
        ))
    }

    /// The legs in order.
    pub(super) fn legs(&self) -> impl Iterator<Item = Leg> + '_ {
        let d = &self.data;
        let ends = d.direct.windows(2).zip(d.places.windows(2)).zip(d.doglegs.iter().skip(1)).enumerate();
        ends.filter_map(|(above, ((stations, places), beta))| {
            let ([top, bottom], [start, end]) = (stations, places) else { return None };
            let arc = Arc { from: top.t, to: bottom.t, beta: *beta, length: bottom.md - top.md };
            Some(Leg { above, arc, top: *top, bottom: *bottom, start: *start, end: *end })
        })
    }

    /// The two stations between which the hole turns most for its length, where these overlap a stretch of measured
    /// depth, and by how much in 30 m.
    pub(crate) fn sharpest_turn(&self, from: Length, to: Length) -> Option<(Length, Length, Angle)> {
        let inside = self.legs().filter(|leg| leg.bottom.md >= from.si() && leg.top.md <= to.si());
        let turns = inside.map(|leg| (leg.top.md, leg.bottom.md, leg.arc.beta / leg.arc.length * 30.0));
        let sharpest = turns.max_by(|a, b| a.2.total_cmp(&b.2))?;
        Some((Length::m(sharpest.0), Length::m(sharpest.1), Angle::from_si(sharpest.2)))
    }

    /// The leg that holds a measured depth; at a station, the leg above it.
    pub(super) fn leg_at(&self, md: f64) -> Option<Leg> {
        let below = self.data.direct.partition_point(|s| s.md < md).max(1);
        self.leg(below - 1)
    }

    fn leg(&self, above: usize) -> Option<Leg> {
        let d = &self.data;
        let (top, bottom) = (d.direct.get(above)?, d.direct.get(above + 1)?);
        let arc = Arc { from: top.t, to: bottom.t, beta: *d.doglegs.get(above + 1)?, length: bottom.md - top.md };
        Some(Leg {
            above,
            arc,
            top: *top,
            bottom: *bottom,
            start: *d.places.get(above)?,
            end: *d.places.get(above + 1)?,
        })
    }

    /// The survey as an input of a card: its file, or its stations as they were typed.
    pub(crate) fn item(&self) -> Item {
        let d = &self.data;
        match &d.meta.source {
            SurveySource::File { path, sha256 } => Item::file("survey", path.clone(), sha256.clone()),
            SurveySource::Typed => self.stations_item("", "survey stations"),
        }
    }

    /// The north that the site corrects, with the site; `None` when the file or the notebook did.
    pub(super) fn corrected_at(&self) -> Option<(Site, North)> {
        let first = self.data.stations.first()?;
        self.data.meta.site.map(|site| (site, first.azimuth.north()))
    }

    /// The card of the site's convergence or declination, where that corrects the stations.
    pub(crate) fn upstream(&self) -> Vec<Card> {
        self.corrected_at().and_then(|(site, north)| site.correction_card(north)).into_iter().collect()
    }

    /// Every station as one value: measured depth, inclination, true azimuth.
    fn stations_item(&self, symbol: &str, name: &str) -> Item {
        let d = &self.data;
        let numbers = d.direct.iter().flat_map(|s| [s.md, s.i, s.a]).collect();
        let shown = format!("{} stations, to MD {}", d.stations.len(), with_typed_unit(self.last_md()));
        Item::new(symbol, name, "survey stations", numbers, shown)
    }
}

fn first_place(first: &Direct, tie_in: Option<TieIn>) -> Result<V3> {
    let Some(tie_in) = tie_in else { return Ok([0.0; 3]) };
    let tie_in = tie_in.checked()?;
    let place = [tie_in.north.si(), tie_in.east.si(), tie_in.tvd.si()];
    let away = place.iter().fold(0.0_f64, |sum, x| sum.hypot(*x));
    if away > first.md * (1.0 + 1e-9) {
        return Err(Error::not_physical(
            format!("A tie-in {} from the rotary table", with_typed_unit(Length::m(away))),
            format!("it is farther than the hole is long there, {} m; check both.", as_typed(first.md)),
        ));
    }
    Ok(place)
}

impl IntoGiven for Survey {
    type Value = Survey;
    fn into_given(self, symbol: &str, meaning: &str) -> (Survey, Item, Option<(f64, String)>) {
        let item = self.stations_item(symbol, meaning);
        (self, item, None)
    }
}

#[cfg(test)]
pub(super) mod tests {
    use super::*;
    use crate::frames::Azimuth;
    use crate::units::Units;

    pub fn station(md: f64, i: f64, a: f64) -> Station {
        Station { md: md.m(), inclination: i.deg(), azimuth: Azimuth::from_true_north(a.deg()) }
    }

    #[test]
    fn stations_that_cannot_be_a_hole_are_refused() {
        let refused = |stations: &[Station]| Survey::from_stations(stations).unwrap_err().to_string();
        assert_eq!(refused(&[]), "the number of survey stations is 0, but it must be between 2 and 100000.");
        assert!(refused(&[station(0.0, 0.0, 0.0)]).contains("is 1"));
        let top = station(0.0, 0.0, 0.0);
        assert_eq!(
            refused(&[top, station(30.0, 1.0, 0.0), station(30.0, 1.0, 0.0)]),
            "Survey station 3: measured depth 30 m stands twice; keep one station for each depth."
        );
        assert!(refused(&[station(30.0, 0.0, 0.0), top]).contains("not sorted"));
        assert!(refused(&[top, station(30.0, 181.0, 0.0)]).contains("between 0° and 180°"));
        assert!(refused(&[top, station(f64::NAN, 1.0, 0.0)]).contains("measured depth"));
        assert!(refused(&[station(-1.0, 0.0, 0.0), top]).contains("zero or more"));
        assert!(refused(&[top, station(30.0, 180.0, 0.0)]).contains("turn back on itself"));
        let magnetic = Station { azimuth: Azimuth::from_magnetic_north(3.deg()), ..station(30.0, 1.0, 0.0) };
        assert!(refused(&[top, magnetic]).contains("with_declination"));
    }

    #[test]
    fn a_survey_that_begins_below_the_rotary_table_says_so() {
        let loose = Survey::from_stations(&[station(100.0, 10.0, 0.0), station(200.0, 10.0, 0.0)]).unwrap();
        assert_eq!(loose.at(100.m()).unwrap().tvd, 0.m());
        assert!(loose.at_tvd(10.m()).unwrap_err().to_string().contains("tied_in"));
        let tied = loose.tied_in(TieIn { north: 5.m(), east: 0.m(), tvd: 99.m() }).unwrap();
        assert_eq!(tied.at(100.m()).unwrap().tvd, 99.m());
        assert!(tied.at_tvd(120.m()).is_ok());
        assert!(loose.tied_in(TieIn { north: 50.m(), east: 0.m(), tvd: 99.m() }).is_err());
        let zero = Survey::from_stations(&[station(0.0, 0.0, 0.0), station(200.0, 10.0, 0.0)]).unwrap();
        assert!(zero.tied_in(TieIn { north: 5.m(), east: 0.m(), tvd: 0.m() }).is_err());
        assert!(zero.tied_in(TieIn { north: 0.m(), east: 0.m(), tvd: f64::NAN.m() }).is_err());
    }

    #[test]
    fn levels_are_stated_once() {
        let survey = Survey::from_stations(&[station(0.0, 0.0, 0.0), station(200.0, 10.0, 0.0)]).unwrap();
        assert!(survey.tie().unwrap_err().to_string().contains("rotary_table_above_msl"));
        let tie = DatumTie::rotary_table_at(32.4.m()).unwrap();
        assert_eq!(survey.tied(tie).unwrap().tie().unwrap(), tie);
    }
}
