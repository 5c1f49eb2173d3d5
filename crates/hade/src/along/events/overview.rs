//! Drilling events at a glance.

use super::event::{DrillingEvent, DrillingEvents};
use crate::card::{Column, Table};
use crate::units::{Quantity as _, fixed, with_typed_unit};

/// Events of the short table.
const SHOWN: usize = 12;

impl DrillingEvent {
    /// "losses at MD 3010 m, mud 1.42 sg, circulating 1.47 sg".
    pub(crate) fn words(&self) -> String {
        let circulating =
            self.circulating_density.map_or_else(String::new, |ecd| format!(", circulating {}", with_typed_unit(ecd)));
        format!(
            "{} at MD {}, mud {}{circulating}",
            self.kind.words(),
            with_typed_unit(self.md),
            with_typed_unit(self.mud_weight)
        )
    }
}

impl DrillingEvents {
    /// How many, and from where.
    pub(crate) fn words(&self) -> String {
        let source = self.file.as_ref().map_or_else(|| "typed in the notebook".to_owned(), |(path, _)| path.clone());
        let one = if self.events.len() == 1 { "" } else { "s" };
        format!("{} drilling event{one}, {source}", self.events.len())
    }

    /// Of many the first and the last.
    pub(crate) fn short_table(&self) -> Table {
        let rows = Table::ends(self.events.len(), SHOWN, |k| {
            let Some(event) = self.events.get(k) else { return Vec::new() };
            vec![
                fixed(event.md.si(), 1),
                event.kind.words().to_owned(),
                fixed(event.mud_weight.in_sg(), 3),
                event.circulating_density.map_or_else(|| "–".to_owned(), |ecd| fixed(ecd.in_sg(), 3)),
            ]
        });
        Table {
            caption: "Drilling events".to_owned(),
            columns: vec![
                Column::number("MD", "m"),
                Column::text("event"),
                Column::number("mud weight", "sg"),
                Column::number("ECD", "sg"),
            ],
            rows,
        }
    }
}
