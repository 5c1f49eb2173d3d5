//! A survey at a glance.

use super::survey::{Survey, SurveySource};
use crate::card::{Column, Table};
use crate::units::{Length, fixed, with_typed_unit};

/// Stations of the short table.
const SHOWN: usize = 8;

impl Survey {
    /// "KF-3: 42 stations of data/kf3-survey.csv, MD 0 m to 3120 m, TVD 0.0 m to 2976.3 m below the rotary table, …".
    pub fn words(&self) -> String {
        let data = self.data();
        let hole = data.meta.hole.map_or("A hole", |name| name.text());
        let from = match &data.meta.source {
            SurveySource::File { path, .. } => format!("of {path}"),
            SurveySource::Typed => "typed in the notebook".to_owned(),
        };
        let first = Length::m(data.direct.first().map_or(0.0, |s| s.md));
        let tvds = data.places.iter().map(|place| place[2]);
        let (least, most) = tvds.fold((f64::INFINITY, f64::NEG_INFINITY), |(l, m), d| (l.min(d), m.max(d)));
        let below = if self.is_tied_in() { "the rotary table" } else { "the first station" };
        let north = data.stations.first().map_or("", |s| s.azimuth.north().words());
        let tie = data.meta.tie.map_or_else(|| "no levels stated".to_owned(), |tie| tie.words());
        format!(
            "{hole}: {} stations {from}, MD {} to {}, TVD {} to {} below {below}; azimuths measured from {north}; {tie}",
            data.stations.len(),
            with_typed_unit(first),
            with_typed_unit(self.last_md()),
            Length::m(least),
            Length::m(most),
        )
    }

    /// Its first and last stations with their places.
    pub(crate) fn short_table(&self) -> Table {
        let data = self.data();
        let rows = Table::ends(data.direct.len(), SHOWN, |k| {
            let (Some(s), Some([north, east, tvd])) = (data.direct.get(k), data.places.get(k)) else {
                return Vec::new();
            };
            let (i, a) = (s.i.to_degrees(), s.a.to_degrees());
            vec![fixed(s.md, 1), fixed(i, 2), fixed(a, 2), fixed(*north, 1), fixed(*east, 1), fixed(*tvd, 1)]
        });
        let whole = if data.direct.len() <= SHOWN { "Stations" } else { "First and last stations" };
        Table {
            caption: format!("{whole}, azimuths from true north"),
            columns: vec![
                Column::number("MD", "m"),
                Column::number("inclination", "°"),
                Column::number("azimuth", "°"),
                Column::number("north", "m"),
                Column::number("east", "m"),
                Column::number("TVD", "m"),
            ],
            rows,
        }
    }
}
