//! A set of named planes: typed in the notebook, or read from a table.

use std::collections::HashSet;
use std::path::Path;
use std::sync::Arc;

use serde::{Deserialize, Serialize};

use super::names::no_such;
use super::strength::{FaultStrength, require_friction};
use crate::card::Item;
use crate::error::{Error, Result};
use crate::frames::{Name, Plane, Site};
use crate::sheet::IntoGiven;
use crate::units::{Pressure, Quantity, require_not_negative};

/// More planes than this are no set of faults but a model.
pub(super) const MOST_PLANES: usize = 100_000;
/// The longest name of a plane, in characters.
pub(super) const LONGEST_NAME: usize = 80;

/// Planes with names: faults, fractures, bedding. Copies are cheap: they share the planes.
#[derive(Clone, Debug, PartialEq)]
pub struct FaultSet {
    data: Arc<SetData>,
}

#[derive(Clone, Debug, PartialEq)]
pub(super) struct SetData {
    pub source: FaultSource,
    pub faults: Vec<Fault>,
}

/// A plane with its name, and its own strength where one was measured.
#[derive(Clone, Copy, Debug, PartialEq, Serialize, Deserialize)]
#[non_exhaustive]
pub struct Fault {
    /// The name, once in its set.
    pub name: Name,
    /// The plane.
    pub plane: Plane,
    /// Its own coefficient of friction.
    pub friction: Option<f64>,
    /// Its own cohesion.
    pub cohesion: Option<Pressure>,
}

/// Where the planes of a set came from.
#[derive(Clone, Debug, PartialEq, Eq, Serialize, Deserialize)]
#[serde(tag = "from", rename_all = "snake_case")]
pub enum FaultSource {
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

impl Fault {
    /// Its strength: its own numbers where it has them, otherwise those stated for the set.
    pub fn strength(&self, stated: FaultStrength) -> FaultStrength {
        FaultStrength {
            friction: self.friction.unwrap_or(stated.friction),
            cohesion: self.cohesion.unwrap_or(stated.cohesion),
        }
    }

    /// With a strike that does not remember the site that corrected it.
    pub(super) fn without_site(self) -> Self {
        Fault { plane: Plane { strike: self.plane.strike.without_site(), ..self.plane }, ..self }
    }

    /// Whether it brings its own friction or cohesion.
    pub(super) fn has_own_strength(&self) -> bool {
        self.friction.is_some() || self.cohesion.is_some()
    }
}

impl FaultSet {
    /// A set of planes typed in the notebook, each with a name of its own.
    ///
    /// # Errors
    /// With no plane or more than 100 000; when a name is empty, longer than 80 characters or
    /// stands twice; when a dip is outside 0–90° or a strike has no true north.
    pub fn from_planes(planes: &[(&str, Plane)]) -> Result<Self> {
        let faults = planes.iter().map(|(name, plane)| Fault {
            name: Name::new(name.trim()),
            plane: *plane,
            friction: None,
            cohesion: None,
        });
        FaultSet::build(FaultSource::Typed, faults.collect())
    }

    /// Reads a set of planes from a CSV file. Lines that begin with `#` above the column names
    /// declare what a table of numbers cannot say; free remarks are allowed:
    ///
    /// ```text
    /// # north: true | grid | magnetic
    /// # north_correction: -1.32             (degrees, east positive; for grid and magnetic)
    /// # angle_unit: deg
    /// # cohesion_unit: MPa                  (where there is a column cohesion)
    /// name,strike,dip                       (or name,dip_direction,dip; also friction, cohesion)
    /// ```
    ///
    /// The correction may stand on the line of the north: `# north: magnetic, declination: 2.5`,
    /// `# north: grid, convergence: -1.32`; where the file does not state it, [`FaultSet::read_csv_at`]
    /// takes it from a site. Strike by the right-hand rule: the plane dips to its
    /// right. Where friction or cohesion is left empty, the strength stated for the set counts.
    /// Further columns are ignored. Read line by line; at most 100 000 planes.
    ///
    /// # Errors
    /// With file, line, column and what to change: no such file, no text, empty, a missing
    /// declaration or column, both strike and dip direction, decimal commas or semicolons, a word
    /// or nothing where a number is needed, a dip outside 0–90°, a name that stands twice.
    pub fn read_csv(path: impl AsRef<Path>) -> Result<Self> {
        super::read::read_csv(path.as_ref())
    }

    pub(super) fn build(source: FaultSource, faults: Vec<Fault>) -> Result<Self> {
        require(&faults)?;
        Ok(FaultSet { data: Arc::new(SetData { source, faults }) })
    }

    /// The planes, in the order they were given.
    pub fn faults(&self) -> Vec<Fault> {
        self.data.faults.clone()
    }

    /// How many there are.
    pub fn len(&self) -> usize {
        self.data.faults.len()
    }

    /// Whether there is none; never true.
    pub fn is_empty(&self) -> bool {
        self.data.faults.is_empty()
    }

    /// The plane of a name.
    ///
    /// # Errors
    /// When no plane of the set has the name.
    pub fn fault(&self, name: &str) -> Result<Fault> {
        let faults = &self.data.faults;
        let found = faults.iter().find(|f| f.name.text() == name).copied();
        found.ok_or_else(|| no_such(name, faults.iter().map(|f| f.name.text()), "of the set"))
    }

    pub(super) fn data(&self) -> &SetData {
        &self.data
    }
}

/// Refuses what is no set of planes.
pub(super) fn require(faults: &[Fault]) -> Result<()> {
    if faults.is_empty() || faults.len() > MOST_PLANES {
        return Err(Error::out_of_range(
            "the number of planes in a set",
            faults.len().to_string(),
            format!("between 1 and {MOST_PLANES}"),
        ));
    }
    let mut names = HashSet::with_capacity(faults.len());
    for fault in faults {
        let name = fault.name.text();
        if let Err((why, fix)) = require_name(name) {
            return Err(Error::not_physical("A plane of a set", format!("{why}; {fix}.")));
        }
        if !names.insert(name) {
            return Err(Error::not_physical(
                format!("The name \"{name}\" of a plane"),
                "it stands twice; give each plane a name of its own.",
            ));
        }
        fault.plane.axes()?;
        fault.friction.map(require_friction).transpose()?;
        fault.cohesion.map(|c| require_not_negative("cohesion of the fault", c)).transpose()?;
    }
    Ok(())
}

/// What is wrong with a name and how to mend it.
pub(super) fn require_name(name: &str) -> std::result::Result<(), (String, String)> {
    if name.is_empty() {
        return Err(("the name is missing".to_owned(), "give each plane a name of its own".to_owned()));
    }
    if name.chars().count() > LONGEST_NAME {
        return Err((
            format!("the name \"{}\" is longer than {LONGEST_NAME} characters", crate::lines::shown(name)),
            "shorten it".to_owned(),
        ));
    }
    Ok(())
}

/// The planes as an input of a card: their file, or the planes as they were typed.
pub(super) fn item(source: &FaultSource, faults: &[Fault]) -> Item {
    match source {
        FaultSource::File { path, sha256 } => Item::file("planes", path.clone(), sha256.clone()),
        FaultSource::Typed => planes_item("F", "planes", faults),
    }
}

/// The site that corrected the strikes of a file, when the file does not state their correction.
pub(super) fn corrected_at(source: &FaultSource, faults: &[Fault]) -> Option<Site> {
    faults.first().filter(|_| *source != FaultSource::Typed)?.plane.strike.site()
}

/// Every plane as one value: true strike, dip.
fn planes_item(symbol: &str, name: &str, faults: &[Fault]) -> Item {
    let numbers = faults
        .iter()
        .flat_map(|f| [f.plane.strike.true_north().map_or(f64::NAN, Quantity::si), f.plane.dip.si()])
        .collect();
    let shown = match faults {
        [one] => format!("{}: {}", one.name, one.plane.words()),
        _ => format!("{} planes", faults.len()),
    };
    Item::new(symbol, name, "planes", numbers, shown)
}

impl IntoGiven for FaultSet {
    type Value = FaultSet;
    fn into_given(self, symbol: &str, meaning: &str) -> (FaultSet, Item, Option<(f64, String)>) {
        let item = match &self.data.source {
            FaultSource::File { .. } => Item { name: meaning.to_owned(), ..item(&self.data.source, &self.data.faults) },
            FaultSource::Typed => planes_item(symbol, meaning, &self.data.faults),
        };
        (self, item, None)
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::frames::Azimuth;
    use crate::units::Units;

    fn plane(strike: f64, dip: f64) -> Plane {
        Plane { strike: Azimuth::from_true_north(strike.deg()), dip: dip.deg() }
    }

    #[test]
    fn sets_that_cannot_be_are_refused() {
        let refused = |planes: &[(&str, Plane)]| FaultSet::from_planes(planes).unwrap_err().to_string();
        assert_eq!(refused(&[]), "the number of planes in a set is 0, but it must be between 1 and 100000.");
        assert_eq!(
            refused(&[("A", plane(1.0, 2.0)), ("A", plane(3.0, 4.0))]),
            "The name \"A\" of a plane: it stands twice; give each plane a name of its own."
        );
        assert!(refused(&[(" ", plane(1.0, 2.0))]).contains("name is missing"));
        assert!(refused(&[(&"x".repeat(81), plane(1.0, 2.0))]).contains("longer than 80"));
        assert!(refused(&[("A", plane(1.0, 91.0))]).contains("dip is 91°"));
        let grid = Plane { strike: Azimuth::from_grid_north(1.deg()), dip: 2.deg() };
        assert!(refused(&[("A", grid)]).contains("with_convergence"));
    }

    #[test]
    fn a_plane_is_found_by_its_name() {
        let set = FaultSet::from_planes(&[("A", plane(1.0, 2.0)), ("B", plane(3.0, 4.0))]).unwrap();
        assert_eq!(set.fault("B").unwrap().plane, plane(3.0, 4.0));
        assert_eq!(
            set.fault("C").unwrap_err().to_string(),
            "No plane named \"C\" was found among the 2 of the set; their names are \"A\", \"B\", so ask for one of these."
        );
        assert_eq!((set.len(), set.is_empty()), (2, false));
    }
}
