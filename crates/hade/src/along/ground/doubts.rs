//! What of the ground and of a path can be, but seldom is: columns or stations may have been mistaken.

use super::ground::Ground;
use crate::units::{Length, Quantity, fixed};
use crate::well::Survey;

/// A hole seldom turns by more in 30 m, degrees (common practice, no source).
const SEVERE: f64 = 10.0;

impl Ground {
    /// What of its layers is to be looked at again, in sentences; of those that a hole is in.
    pub(crate) fn doubts_of(&self, inside: impl Fn(&str) -> bool) -> Vec<String> {
        let layers = self.inputs.layers.iter().filter(|layer| inside(layer.name()));
        layers
            .flat_map(|layer| layer.rock.doubts().into_iter().map(|doubt| format!("{}: {doubt}", layer.name())))
            .collect()
    }

    /// Whether the mud warms or cools a wall in it.
    pub(crate) fn is_warmed(&self) -> bool {
        self.temperatures.is_some() || self.inputs.layers.iter().any(|layer| layer.thermal.is_some())
    }
}

/// Where a survey turns more sharply than holes mostly do, between two measured depths.
pub(crate) fn doubts_of_path(survey: &Survey, [from, to]: [Length; 2]) -> Vec<String> {
    let sharpest = survey.sharpest_turn(from, to).filter(|(_, _, turn)| turn.in_deg() > SEVERE);
    sharpest
        .map(|(above, below, turn)| {
            format!(
                "Doubtful input: between the stations at MD {} and {} m the hole turns by {}° in 30 m, and holes seldom turn by more than {SEVERE}°; look at the two stations.",
                fixed(above.si(), 1),
                fixed(below.si(), 1),
                fixed(turn.in_deg(), 1)
            )
        })
        .into_iter()
        .collect()
}
