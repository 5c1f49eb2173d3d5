//! The planned path on a map: its directions, reduced to few.

use serde::{Deserialize, Serialize};

use crate::card::Item;
use crate::error::{Error, Result};
use crate::frames::Attitude;
use crate::frames::vector::{V3, cross, dot, norm};
use crate::well::survey::Survey;

/// More directions than these are thinned out.
const MOST: usize = 24;
/// A record holds no more typed stations than these; a file is known by its hash.
const MOST_TYPED: usize = 2000;
/// Directions nearer to each other than this are one, in radians.
const NEAR: f64 = 0.5 * std::f64::consts::PI / 180.0;

/// A path.
#[derive(Clone, Debug, PartialEq, Serialize, Deserialize)]
pub struct Path {
    /// The hole ("KF-3"), where it has a name.
    pub(super) name: Option<String>,
    /// The survey as an input of the card.
    pub(super) items: Vec<Item>,
    /// Inclination and azimuth from true north, radians, downward along the path.
    pub(super) directions: Vec<(f64, f64)>,
}

impl Path {
    pub fn of_survey(survey: &Survey) -> Result<Self> {
        let item = survey.item();
        if item.si.len() > 3 * MOST_TYPED {
            return Err(Error::out_of_range(
                "number of typed stations of a path on a map",
                survey.stations().len().to_string(),
                format!("at most {MOST_TYPED}; read a longer survey from its file with Survey::read_csv"),
            ));
        }
        let all: Result<Vec<(f64, f64)>> =
            survey.stations().iter().map(|station| station.attitude().angles()).collect();
        let directions = reduced(&all?);
        Ok(Path { name: survey.hole().map(|name| name.to_string()), items: vec![item], directions })
    }

    /// What its last direction is.
    pub fn last_words(&self) -> &'static str {
        if self.directions.len() > 1 { "end of the path" } else { "planned direction" }
    }

    pub fn of_attitude(hole: Attitude) -> Result<Self> {
        Ok(Path { name: None, items: hole.items(""), directions: vec![hole.angles()?] })
    }
}

/// Those that differ from the one kept before, closer and closer together until few are left; always the first and
/// the last.
fn reduced(all: &[(f64, f64)]) -> Vec<(f64, f64)> {
    let mut near = NEAR;
    loop {
        let mut kept: Vec<(f64, f64)> = Vec::new();
        for direction in all {
            if kept.last().is_none_or(|last| apart(*last, *direction) >= near) {
                kept.push(*direction);
            }
        }
        if let Some(end) = all.last()
            && kept.last() != Some(end)
        {
            if kept.len() > 1 && kept.last().is_some_and(|last| apart(*last, *end) < 0.5 * near) {
                kept.pop();
            }
            kept.push(*end);
        }
        if kept.len() <= MOST {
            return kept;
        }
        near *= 1.5;
    }
}

/// Along the hole, north, east, down.
pub(super) fn vector((inclination, azimuth): (f64, f64)) -> V3 {
    let ((si, ci), (sa, ca)) = (inclination.sin_cos(), azimuth.sin_cos());
    [si * ca, si * sa, ci]
}

/// The angle between two directions.
pub(super) fn apart(a: (f64, f64), b: (f64, f64)) -> f64 {
    let (a, b) = (vector(a), vector(b));
    norm(cross(a, b)).atan2(dot(a, b))
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn few_directions_stand_for_many_and_the_ends_are_kept() {
        let build: Vec<(f64, f64)> =
            (0..=4000).map(|k| (f64::from(k) * 1.0e-4, 2.0)).chain([(0.4, 2.0); 500]).collect();
        let kept = reduced(&build);
        assert!(kept.len() <= MOST && kept.len() > MOST / 3, "{}", kept.len());
        assert_eq!((kept[0], kept[kept.len() - 1]), ((0.0, 2.0), (0.4, 2.0)));
        assert_eq!(reduced(&[(0.1, 1.0), (0.1, 1.0), (0.1 + 1e-4, 1.0)]).len(), 2);
        assert_eq!(reduced(&[(0.1, 1.0), (0.1, 1.0)]), [(0.1, 1.0)]);
    }
}
