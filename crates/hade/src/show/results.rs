//! Results, each shown by its card.

use super::html::lines_html;
use super::notebook::Show;
use crate::along::{GroundState, Hindcast, LimitLog, SectionEnsemble};
use crate::card::Explain as _;
use crate::faults::{CriticalPlanes, FaultSlip, FrictionLimit, FrictionalBounds, RankedFaults};
use crate::field::{Overburden, PressureAtDepth};
use crate::frames::{
    ApparentDip, Azimuth, BestRotation, CarriedLine, Chain, Convergence, Declination, DepthConversion, Direction,
    FittedAxes, Frame, Geographic, LineAtRake, LowerHemisphere, PlaneThroughLines, PlanesIntersection, RakeOfLine,
    Route, Turned,
};
use crate::rock::{FailureEnvelope, RockMass, StrengthMargin, WeakRock};
use crate::stress::{
    CarriedStress, CarriedTraction, FaultingRegime, HorizontalStresses, Invariants, MohrCircles, Principals, Stress,
    Traction, TractionVector,
};
use crate::well::{
    DirectionMap, Ensemble, FailingArcs, FailureDepth, FieldStress, Limits, MudHeld, MudPressure, Position,
    RadialProfile, RangesBeside, RecommendedRange, Sensitivity, SurveyTable, TensileCracks, WallAround, WallImage,
    WallStress,
};

// By name and not for every `T: Explain`, because then no reference to something that shows itself could show
// itself too: the compiler must know that the two never meet.
macro_rules! shown_by_cards {
    (@ $result:ty; $($generics:tt)*) => {
        impl<$($generics)*> Show for $result {
            fn text(&self) -> String {
                self.card().text()
            }
            fn html(&self) -> String {
                self.card().html()
            }
            fn svg(&self) -> Option<String> {
                self.card().svg()
            }
        }
    };
    ($($result:ident),* $(,)?) => {
        $(shown_by_cards!(@ $result;);)*

        /// The names above, for the test that finds what is missing.
        #[cfg(test)]
        const NAMES: &[&str] = &[$(stringify!($result)),*];
    };
}

shown_by_cards! {
    // Frames.
    ApparentDip, BestRotation, CarriedLine, Convergence, Declination, DepthConversion, FittedAxes, LineAtRake,
    LowerHemisphere, PlaneThroughLines, PlanesIntersection, RakeOfLine, Route,
    // Stress.
    CarriedStress, CarriedTraction, FaultingRegime, HorizontalStresses, Invariants, MohrCircles, Principals, Traction,
    // Rock and faults.
    CriticalPlanes, FailureEnvelope, FaultSlip, FrictionLimit, FrictionalBounds, RankedFaults, RockMass,
    StrengthMargin, WeakRock,
    // The hole and its wall.
    DirectionMap, Ensemble, FailingArcs, FailureDepth, FieldStress, Limits, MudHeld, MudPressure, Position, RadialProfile, RangesBeside,
    RecommendedRange, Sensitivity, SurveyTable, TensileCracks, WallAround, WallImage, WallStress,
    // The field, and along the hole.
    GroundState, Hindcast, LimitLog, Overburden, PressureAtDepth, SectionEnsemble,
}
shown_by_cards!(@ Stress<Geographic>;);
shown_by_cards!(@ Stress<F>; F: Turned);
shown_by_cards!(@ Direction<F>; F: Frame);
shown_by_cards!(@ TractionVector<F>; F: Frame);
shown_by_cards!(@ Chain<From, To>; From: Frame, To: Frame);

/// An azimuth by the card of its correction; one that has no true north yet says what it lacks.
impl Show for Azimuth {
    fn text(&self) -> String {
        match self.true_north() {
            Ok(_) => self.card().text(),
            Err(lacks) => format!("{}\n{lacks}", self.words()),
        }
    }
    fn html(&self) -> String {
        match self.true_north() {
            Ok(_) => self.card().html(),
            Err(_) => lines_html(&self.text()),
        }
    }
}

#[cfg(test)]
mod tests {
    use std::collections::BTreeSet;
    use std::path::Path;

    use super::*;
    use crate::units::Units as _;

    /// What is written out above.
    const BY_HAND: [&str; 3] = ["Azimuth", "Chain", "Stress"];

    #[test]
    fn every_result_of_the_source_is_shown_by_its_card() {
        let mut found = BTreeSet::new();
        results_in(Path::new(concat!(env!("CARGO_MANIFEST_DIR"), "/src")), &mut found);
        let shown: BTreeSet<String> = NAMES.iter().chain(&BY_HAND).map(|name| (*name).to_owned()).collect();
        assert_eq!(found, shown, "results in the source against those of show/results.rs");
    }

    /// The types that implement `Explain`, by name.
    fn results_in(folder: &Path, found: &mut BTreeSet<String>) {
        for entry in std::fs::read_dir(folder).unwrap() {
            let path = entry.unwrap().path();
            if path.is_dir() {
                results_in(&path, found);
            } else if path.extension().is_some_and(|e| e == "rs") && !path.ends_with("show/sample.rs") {
                let text = std::fs::read_to_string(&path).unwrap();
                for line in text.lines().filter(|line| line.starts_with("impl")) {
                    let Some((_, name)) = line.split_once(" Explain for ") else { continue };
                    let name = name.split(|c: char| !c.is_alphanumeric()).next().unwrap();
                    found.insert(name.to_owned());
                }
            }
        }
    }

    #[test]
    fn an_azimuth_without_a_true_north_says_what_it_lacks() {
        let said = Azimuth::from_magnetic_north(127.deg()).text();
        assert!(said.starts_with("127° from magnetic north\n") && said.contains("with_declination"), "{said}");
        assert!(Azimuth::from_true_north(35.deg()).text().contains("035.0° from true north"));
    }
}
