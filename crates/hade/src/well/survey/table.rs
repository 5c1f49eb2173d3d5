//! The whole survey as a table of places.

use serde::{Deserialize, Serialize};

use super::arc::ratio_factor;
use super::position::{SEVERITY_LENGTH, require_few};
use super::position_card::{declarations, method, path, stated_items};
use super::position_check::{metres, places_by_quadrature};
use super::station::Station;
use super::survey::{Meta, Survey};
use crate::card::{Axis, Card, Check, Column, Explain, Explanation, Figure, Item, Layer, Role, Step, Table};
use crate::error::Result;
use crate::frames::three_figures;
use crate::frames::vector::{cross, dot, norm};
use crate::units::{Angle, Length, Quantity, fixed};

/// Every station with its place, from [`Survey::table`].
#[derive(Clone, Debug, PartialEq)]
pub struct SurveyTable {
    survey: Survey,
}

/// One station with its place.
#[derive(Clone, Copy, Debug, PartialEq)]
#[non_exhaustive]
pub struct StationPosition {
    /// The station as it was measured.
    pub station: Station,
    /// North of the wellhead, true north.
    pub north: Length,
    /// East of the wellhead.
    pub east: Length,
    /// The true vertical depth below the rotary table (below the first station, if not tied in).
    pub tvd: Length,
    /// The dogleg from the station above, zero at the first.
    pub dogleg: Angle,
    /// The dogleg severity from the station above: change of direction in 30 m of hole.
    pub dogleg_in_30_m: Angle,
}

/// The inputs of a survey table.
#[derive(Clone, Debug, PartialEq, Serialize, Deserialize)]
pub struct SurveyTableInputs {
    survey: Meta,
    stations: Vec<Station>,
}

/// What came out for one station, in metres and radians.
#[derive(Clone, Copy, Debug, PartialEq, Serialize, Deserialize)]
pub struct TablePlace {
    north: Length,
    east: Length,
    tvd: Length,
    dogleg: Angle,
}

impl Survey {
    /// Every station with its place.
    ///
    /// # Errors
    /// With more than 2000 stations.
    pub fn table(&self) -> Result<SurveyTable> {
        require_few(self.data().stations.len(), "in a table")?;
        Ok(SurveyTable { survey: self.clone() })
    }
}

impl Survey {
    /// As a record holds it.
    pub(crate) fn record(&self) -> SurveyTableInputs {
        SurveyTableInputs { survey: self.data().meta.clone(), stations: self.data().stations.clone() }
    }

    /// From a record.
    pub(crate) fn from_record(record: SurveyTableInputs) -> Result<Self> {
        Survey::build(record.stations, record.survey)
    }
}

impl SurveyTable {
    /// The rows, from the top.
    pub fn rows(&self) -> Vec<StationPosition> {
        let data = self.survey.data();
        let mut above = None;
        let stations = data.stations.iter().zip(&data.places).zip(&data.doglegs);
        stations
            .map(|((station, [north, east, tvd]), dogleg)| {
                let length = above.map_or(f64::INFINITY, |md: f64| station.md.si() - md);
                above = Some(station.md.si());
                StationPosition {
                    station: *station,
                    north: Length::m(*north),
                    east: Length::m(*east),
                    tvd: Length::m(*tvd),
                    dogleg: Angle::from_si(*dogleg),
                    dogleg_in_30_m: Angle::from_si(dogleg / length * SEVERITY_LENGTH),
                }
            })
            .collect()
    }
}

/// The columns of a printed station table.
pub(super) fn station_columns() -> Vec<Column> {
    vec![
        Column::number("MD", "m"),
        Column::number("inclination", "°"),
        Column::number("azimuth, measured", "°"),
        Column::number("azimuth, true", "°"),
        Column::number("β", "°"),
        Column::number("RF", ""),
        Column::number("N", "m"),
        Column::number("E", "m"),
        Column::number("TVD", "m"),
    ]
}

/// The printed rows of the first stations.
pub(super) fn rows(survey: &Survey, stations: usize) -> Vec<Vec<String>> {
    let data = survey.data();
    let lines = data.stations.iter().zip(&data.direct).zip(&data.places).zip(&data.doglegs);
    lines
        .take(stations)
        .map(|(((station, direct), [north, east, tvd]), dogleg)| {
            vec![
                fixed(direct.md, 2),
                fixed(direct.i.to_degrees(), 2),
                fixed(station.azimuth.measured().in_deg(), 2),
                fixed(direct.a.to_degrees(), 2),
                fixed(dogleg.to_degrees(), 3),
                fixed(ratio_factor(*dogleg), 6),
                fixed(*north, 2),
                fixed(*east, 2),
                fixed(*tvd, 2),
            ]
        })
        .collect()
}

impl Explain for SurveyTable {
    const KIND: &'static str = "survey-table";
    type Inputs = SurveyTableInputs;
    type Outcome = Vec<TablePlace>;

    fn compute(inputs: SurveyTableInputs) -> Result<Self> {
        Survey::from_record(inputs)?.table()
    }
    fn inputs(&self) -> SurveyTableInputs {
        self.survey.record()
    }
    fn outcome(&self) -> Vec<TablePlace> {
        let row = |r: StationPosition| TablePlace { north: r.north, east: r.east, tvd: r.tvd, dogleg: r.dogleg };
        self.rows().into_iter().map(row).collect()
    }

    /// Places by Simpson's rule over the turning direction; doglegs by the vector product.
    fn check(inputs: &SurveyTableInputs, outcome: &Vec<TablePlace>) -> Vec<Check> {
        let Ok(stations) = inputs.stations.iter().map(|s| s.direct()).collect::<Result<Vec<_>>>() else {
            return Vec::new();
        };
        let start = inputs.survey.tie_in.map_or([0.0; 3], |t| [t.north.si(), t.east.si(), t.tvd.si()]);
        let last = stations.last().map_or(0.0, |s| s.md);
        let places = places_by_quadrature(&stations, start, last);
        let got: Vec<f64> = outcome.iter().flat_map(|r| metres(&[r.north, r.east, r.tvd])).collect();
        let angle = |a, b| norm(cross(a, b)).atan2(dot(a, b)).to_degrees();
        let mut doglegs = vec![0.0];
        doglegs.extend(stations.windows(2).filter_map(|pair| match pair {
            [top, bottom] => Some(angle(top.t, bottom.t)),
            _ => None,
        }));
        vec![
            Check::compare(
                "north, east, TVD of every station by Simpson's rule over the turning direction",
                &got,
                places.as_flattened(),
                1e-6,
                "m",
            ),
            Check::compare(
                "doglegs from the vector product of the directions",
                &outcome.iter().map(|r| r.dogleg.in_deg()).collect::<Vec<_>>(),
                &doglegs,
                1e-8,
                "°",
            ),
        ]
    }

    fn explain(&self) -> Explanation {
        let data = self.survey.data();
        let hole = data.meta.hole.map_or("the hole", |name| name.text());
        let [north, east, tvd] = data.places.last().copied().unwrap_or_default();
        let bearing = three_figures(Angle::rad(east.atan2(north)));
        let places = path(&self.survey, data.stations.len());
        let (deep, far) = (
            places.iter().map(|p| p[2]).fold(1.0, f64::max),
            places.iter().map(|p| p[0].hypot(p[1])).fold(1.0, f64::max),
        );
        let shallow = places.iter().map(|p| p[2]).fold(0.0, f64::min);
        let mut inputs = vec![self.survey.item()];
        inputs.extend(stated_items(&self.survey));
        Explanation {
            title: format!("Survey of {hole}, station by station"),
            headline: format!(
                "{} stations, to MD {} and TVD {}",
                data.stations.len(),
                self.survey.last_md(),
                Length::m(tvd)
            ),
            inputs,
            results: vec![
                Item::computed("N", "north of the wellhead at the last station", Length::m(north)),
                Item::computed("E", "east of the wellhead at the last station", Length::m(east)),
                Item::computed("z", "true vertical depth of the last station", Length::m(tvd)),
            ],
            method: method(),
            steps: vec![
                Step::words(declarations(&self.survey)),
                Step::Table {
                    table: Table {
                        caption: format!("Stations of {hole}, each worked from the one above"),
                        columns: station_columns(),
                        rows: rows(&self.survey, data.stations.len()),
                    },
                },
            ],
            figures: vec![Figure {
                caption: format!("{hole}: depth against horizontal distance from the wellhead."),
                alt: format!(
                    "The hole ends at TVD {} m, {} m from the wellhead towards {bearing}°.",
                    fixed(tvd, 1),
                    fixed(north.hypot(east), 1)
                ),
                x: Axis::new("horizontal distance from the wellhead (m)", 0.0, 1.08 * far.max(50.0)),
                y: Axis::new("TVD (m)", 1.05 * shallow, 1.05 * deep).downward(),
                equal_scale: true,
                layers: vec![Layer::line(hole, Role::First, places.iter().map(|p| [p[0].hypot(p[1]), p[2]]))],
            }],
            topics: vec!["survey".to_owned()],
            ..Explanation::default()
        }
    }

    fn upstream(&self) -> Vec<Card> {
        self.survey.upstream()
    }
}
