//! Planes at a glance.

use super::set::{Fault, FaultSet, FaultSource};
use crate::card::{Column, Table};
use crate::frames::three_figures;
use crate::units::{as_typed, fixed, with_typed_unit};

/// Planes of the short table.
const SHOWN: usize = 12;

impl Fault {
    /// "KFF-04: strike 037.0°, dip 62.0°, μ 0.45 of its own".
    pub fn words(&self) -> String {
        let mu = self.friction.map(|mu| format!("μ {}", as_typed(mu)));
        let own: Vec<String> =
            mu.into_iter().chain(self.cohesion.map(|c| format!("C {}", with_typed_unit(c)))).collect();
        let own = if own.is_empty() { String::new() } else { format!(", {} of its own", own.join(", ")) };
        format!("{}: {}{own}", self.name, self.plane.words())
    }
}

impl FaultSet {
    /// "8 planes of data/kestrel-faults.csv, 2 of them with friction or cohesion of their own".
    pub fn words(&self) -> String {
        let data = self.data();
        let from = match &data.source {
            FaultSource::File { path, .. } => format!("of {path}"),
            FaultSource::Typed => "typed in the notebook".to_owned(),
        };
        let planes = if data.faults.len() == 1 { "plane" } else { "planes" };
        let own = match data.faults.iter().filter(|fault| fault.has_own_strength()).count() {
            0 => String::new(),
            own => format!(", {own} of them with friction or cohesion of their own"),
        };
        format!("{} {planes} {from}{own}", data.faults.len())
    }

    /// Its planes, of many the first and the last.
    pub(crate) fn short_table(&self) -> Table {
        let faults = &self.data().faults;
        let rows = Table::ends(faults.len(), SHOWN, |k| {
            let Some(fault) = faults.get(k) else { return Vec::new() };
            vec![
                fault.name.to_string(),
                fault.plane.strike.true_north().map_or_else(|_| "–".to_owned(), three_figures),
                fixed(fault.plane.dip.in_deg(), 1),
                fault.friction.map_or_else(|| "–".to_owned(), as_typed),
                fault.cohesion.map_or_else(|| "–".to_owned(), |c| as_typed(c.in_mpa())),
            ]
        });
        Table {
            caption: "Strikes by the right-hand rule, from true north; – where the strength stated for all counts"
                .to_owned(),
            columns: vec![
                Column::text("plane"),
                Column::number("strike", "°"),
                Column::number("dip", "°"),
                Column::number("own μ", ""),
                Column::number("own C", "MPa"),
            ],
            rows,
        }
    }
}
