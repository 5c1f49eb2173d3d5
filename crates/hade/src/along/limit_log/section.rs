//! Sections of the hole, drilled with one mud: the mud weights that all their depths have in common, and
//! a mud held against them.

use serde::{Deserialize, Serialize};

use super::row::LogRow;
use crate::card::Item;
use crate::error::{Error, Result};
use crate::frames::Name;
use crate::units::{Density, Length, Pressure, Quantity, require_not_negative, with_typed_unit};
use crate::well::{Governs, MudPlan, MudState};

/// A section of the hole between two casing points, by measured depth.
#[derive(Clone, Copy, Debug, PartialEq, Serialize, Deserialize)]
pub struct HoleSection {
    pub(super) name: Name,
    pub(super) from: Length,
    pub(super) to: Length,
    pub(super) mud: Option<MudPlan>,
    /// The file it was read from, and its SHA-256.
    #[serde(default, skip_serializing_if = "Option::is_none")]
    pub(super) file: Option<[Name; 2]>,
}

/// More sections than a hole has are a mistake.
pub(super) const MOST_SECTIONS: usize = 20;

impl HoleSection {
    /// A section by its name ("8½ in") and the measured depths it runs between.
    pub fn between(name: &str, from: Length, to: Length) -> Self {
        HoleSection { name: Name::new(name.trim()), from, to, mud: None, file: None }
    }

    /// With the mud it is to be drilled with. Swab and surge are the same pressure at every depth of the
    /// section: state those at its end, where they are largest.
    pub fn with_mud(self, mud: MudPlan) -> Self {
        HoleSection { mud: Some(mud), file: None, ..self }
    }

    /// Sections with their muds from a CSV file, from the top down:
    ///
    /// ```text
    /// # datum: rotary table
    /// # depth_unit: m | ft
    /// # mud_weight_unit: sg | kg/m3 | g/cm3 | ppg | pcf
    /// # pressure_unit: MPa | kPa | Pa | bar | psi       (where swab or surge are stated)
    /// section,from,to,mud_weight,ecd,swab,surge
    /// ```
    ///
    /// The last four columns are optional and their cells may be empty: what is not known is not stated.
    ///
    /// # Errors
    /// With file, line, column and what to change: a missing declaration or column, decimal commas, a row that
    /// does not begin where the one before ends, more than 20 rows, a mud that cannot be.
    pub fn read_csv(path: impl AsRef<std::path::Path>) -> Result<Vec<Self>> {
        super::read_sections::read_csv(path.as_ref())
    }

    pub(crate) fn name(&self) -> &'static str {
        self.name.text()
    }

    pub(crate) fn mud(&self) -> Option<MudPlan> {
        self.mud
    }

    pub(super) fn checked(&self, above: Option<&HoleSection>) -> Result<()> {
        let words =
            format!("The section {} from MD {} to {}", self.name, with_typed_unit(self.from), with_typed_unit(self.to));
        self.from.finite("beginning of a section")?;
        self.to.finite("end of a section")?;
        if self.from >= self.to {
            return Err(Error::not_physical(words, "its end must lie below its beginning."));
        }
        if let Some(above) = above.filter(|above| above.to > self.from) {
            return Err(Error::not_physical(
                words,
                format!(
                    "the section {} before it ends at {}; sort the sections, and let none overlap.",
                    above.name,
                    with_typed_unit(above.to)
                ),
            ));
        }
        let Some(mud) = self.mud else { return Ok(()) };
        require_not_negative("static mud weight", mud.static_density)?;
        for (what, value) in [("swab", mud.swab), ("surge", mud.surge)] {
            value.map_or(Ok(Pressure::default()), |value| require_not_negative(what, value))?;
        }
        if let Some(circulating) = mud.circulating_density {
            require_not_negative("circulating density", circulating)?;
            if circulating < mud.static_density {
                return Err(Error::not_physical(
                    format!("The circulating density {}", with_typed_unit(circulating)),
                    format!(
                        "it is below the static one, {}; friction only adds to it.",
                        with_typed_unit(mud.static_density)
                    ),
                ));
            }
        }
        Ok(())
    }

    /// What was stated of its mud as inputs of a card.
    pub(crate) fn items(&self) -> Vec<Item> {
        let of = |what: &str| format!("{what} of {}", self.name);
        let mut items = vec![
            Item::typed("", of("beginning, measured depth,"), self.from).chosen(),
            Item::typed("", of("end, measured depth,"), self.to).chosen(),
        ];
        if let Some([path, sha256]) = self.file {
            items.push(Item::file(format!("section {} and its mud", self.name), path.text(), sha256.text()));
            return items;
        }
        if let Some(mud) = self.mud {
            items.push(Item::typed("ρ_m", of("static mud weight"), mud.static_density));
            items.extend(mud.swab.map(|swab| Item::typed("Δp_sw", of("swab"), swab)));
            items.extend(mud.circulating_density.map(|d| Item::typed("ECD", of("circulating density"), d)));
            items.extend(mud.surge.map(|surge| Item::typed("Δp_su", of("surge"), surge)));
        }
        items
    }

    /// The rows within it. Of a contact at its very end only the row above is.
    pub(crate) fn rows<'a>(&self, rows: &'a [LogRow]) -> impl Iterator<Item = &'a LogRow> + use<'a> {
        let (from, to) = (self.from, self.to);
        let last = rows.iter().rposition(|row| row.md == to);
        rows.iter().enumerate().filter_map(move |(k, row)| {
            let inside = row.md >= from && row.md <= to;
            let other_side_of_end = Some(k) == last && k > 0 && rows.get(k - 1).is_some_and(|above| above.md == to);
            let other_side_of_beginning = row.md == from && rows.get(k + 1).is_some_and(|below| below.md == from);
            (inside && !other_side_of_end && !other_side_of_beginning).then_some(row)
        })
    }
}

/// What a mud is called in a state, held at one depth.
pub(crate) fn pressure_of(mud: &MudPlan, state: MudState, tvd: Length) -> Option<Pressure> {
    let still = mud.static_density.column(tvd);
    match state {
        MudState::Static => Some(still),
        MudState::Swabbed => mud.swab.map(|swab| still - swab),
        MudState::Circulating => mud.circulating_density.map(|density| density.column(tvd)),
        MudState::Surged => mud.surge.map(|surge| still + surge),
    }
}

/// An end of the mud weights that a section has in common, and the depth that sets it.
#[derive(Clone, Copy, Debug, PartialEq, Serialize, Deserialize)]
#[non_exhaustive]
pub struct SectionEnd {
    /// The mud weight.
    pub mud_weight: Density,
    /// The measured depth that sets it.
    pub md: Length,
    /// What governs there.
    pub governed_by: Governs,
    pub(super) layer: Name,
}

/// A mud held against one end over a whole section: where it is nearest to it.
#[derive(Clone, Copy, Debug, PartialEq, Serialize, Deserialize)]
#[non_exhaustive]
pub struct SectionMud {
    /// What the mud does.
    pub state: MudState,
    /// Whether it is held against the bottom (otherwise against the top).
    pub against_bottom: bool,
    /// The least that is left to that end; negative: it is passed.
    pub margin: Pressure,
    /// The measured depth where that is.
    pub md: Length,
}

/// The mud weights that a section has in common.
#[derive(Clone, Debug, PartialEq, Serialize, Deserialize)]
#[non_exhaustive]
pub struct SectionRange {
    /// Its name.
    pub name: String,
    /// The measured depths it runs between, as far as the log does.
    pub from: Length,
    /// See `from`.
    pub to: Length,
    /// The highest bottom; `None` where some depth has none.
    pub bottom: Option<SectionEnd>,
    /// The lowest top; `None` where some depth has none.
    pub top: Option<SectionEnd>,
    /// Where, by measured depth, the highest bottom of the section is above the top.
    pub conflicts: Vec<[Length; 2]>,
    /// The mud held against both ends.
    pub mud: Vec<SectionMud>,
}

impl SectionRange {
    /// The lowest and the highest mud weight that all its depths bear; `None` when there is none.
    pub fn common(&self) -> Option<(Density, Density)> {
        let (bottom, top) = (self.bottom?.mud_weight, self.top?.mud_weight);
        (bottom < top).then_some((bottom, top))
    }

    pub(super) fn of(section: &HoleSection, rows: &[LogRow]) -> Option<Self> {
        let rows: Vec<&LogRow> = section.rows(rows).collect();
        let (from, to) = (rows.first()?.md, rows.last()?.md);
        let bottom = extreme(&rows, |row| row.bottom.map(|end| (end.pressure, end.governed_by)), 1.0);
        let top = extreme(&rows, |row| row.top.map(|end| (end.pressure, end.governed_by)), -1.0);
        let conflict = |row: &&LogRow| match (bottom, row.top) {
            (Some(bottom), Some(top)) => bottom.mud_weight >= row.mud_weight(top.pressure),
            _ => row.is_empty(),
        };
        Some(SectionRange {
            name: section.name.text().to_owned(),
            from,
            to,
            bottom,
            top,
            conflicts: stretches(&rows, conflict),
            mud: section.mud.map(|mud| held(&mud, &rows)).unwrap_or_default(),
        })
    }
}

/// The end that all rows have in common: the highest (sign 1) or the lowest mud weight.
fn extreme(rows: &[&LogRow], end: impl Fn(&LogRow) -> Option<(Pressure, Governs)>, sign: f64) -> Option<SectionEnd> {
    let mut found: Option<SectionEnd> = None;
    for row in rows {
        let (pressure, governed_by) = end(row)?;
        let mud_weight = row.mud_weight(pressure);
        if found.is_none_or(|found| (mud_weight - found.mud_weight).si() * sign > 0.0) {
            found = Some(SectionEnd { mud_weight, md: row.md, governed_by, layer: row.layer });
        }
    }
    found
}

/// Runs of rows of which something holds, by the measured depths of their first and last.
pub(super) fn stretches<'a>(rows: &[&'a LogRow], holds: impl Fn(&&'a LogRow) -> bool) -> Vec<[Length; 2]> {
    let mut found: Vec<[Length; 2]> = Vec::new();
    let mut open = false;
    for row in rows {
        let here = holds(row);
        match (here, open, found.last_mut()) {
            (true, true, Some(last)) => last[1] = row.md,
            (true, _, _) => found.push([row.md, row.md]),
            _ => {}
        }
        open = here;
    }
    found
}

fn held(mud: &MudPlan, rows: &[&LogRow]) -> Vec<SectionMud> {
    let states = [
        (MudState::Static, true),
        (MudState::Static, false),
        (MudState::Swabbed, true),
        (MudState::Circulating, false),
        (MudState::Surged, false),
    ];
    let worst = |(state, against_bottom): (MudState, bool)| {
        let margins = rows.iter().filter_map(|row| {
            let pressure = pressure_of(mud, state, row.tvd)?;
            let margin = if against_bottom { pressure - row.bottom?.pressure } else { row.top?.pressure - pressure };
            Some(SectionMud { state, against_bottom, margin, md: row.md })
        });
        margins.reduce(|a, b| if b.margin < a.margin { b } else { a })
    };
    states.into_iter().filter_map(worst).collect()
}
