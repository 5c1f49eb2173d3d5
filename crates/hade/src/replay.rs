//! Recomputing a card from its inputs: the table of every kind, used when a record becomes a memo
//! and when a memo is verified.

use crate::along::{GroundState, Hindcast, LimitLog, SectionEnsemble};
use crate::card::{Card, Check, Data, Explain, Json};
use crate::error::{Error, Result};
use crate::faults::{CriticalPlanes, FaultSlip, FrictionLimit, FrictionalBounds, RankedFaults};
use crate::field::{Overburden, PressureAtDepth};
use crate::frames::{
    ApparentDip, Azimuth, BestRotation, CarriedLine, Convergence, Declination, DepthConversion, FittedAxes, Geographic,
    LineAtRake, LowerHemisphere, PlaneThroughLines, PlanesIntersection, RakeOfLine, Route,
};
use crate::rock::{FailureEnvelope, RockMass, StrengthMargin, WeakRock};
use crate::stress::{
    CarriedStress, CarriedTraction, FaultingRegime, HorizontalStresses, Invariants, MohrCircles, Principals, Stress,
    Traction,
};
use crate::well::{
    DirectionMap, Ensemble, FailingArcs, FailureDepth, FieldStress, Limits, MudHeld, MudPressure, Position,
    RadialProfile, RangesBeside, RecommendedRange, Sensitivity, SurveyTable, TensileCracks, WallAround, WallImage,
    WallStress,
};

/// A kind of card: how it is computed and checked.
#[derive(Clone, Copy)]
pub struct Kind {
    /// The kind ([`Explain::KIND`]).
    pub name: &'static str,
    /// The version this library writes.
    pub version: u32,
    /// The relative tolerance of a replay.
    pub tolerance: f64,
    compute: fn(&Json) -> Result<Card>,
    check: fn(&Json, &Json) -> Result<Vec<Check>>,
}

/// What a replay found.
#[derive(Clone, Debug, PartialEq)]
#[non_exhaustive]
pub struct Replayed {
    /// The card as computed now, from the recorded inputs.
    pub card: Card,
    /// Where the recorded outcome differs by more than the tolerance.
    pub difference: Option<String>,
    /// The relative tolerance that was used.
    pub tolerance: f64,
    /// The checks, applied to the recorded outcome.
    pub checks: Vec<Check>,
}

impl Replayed {
    /// Whether the recorded outcome agrees and passes every check.
    pub fn agrees(&self) -> bool {
        self.difference.is_none() && !self.checks.is_empty() && self.checks.iter().all(|c| c.passed)
    }
}

const fn kind<E: Explain>() -> Kind {
    Kind {
        name: E::KIND,
        version: E::VERSION,
        tolerance: E::REPLAY_TOLERANCE,
        compute: |inputs| Ok(E::compute(E::Inputs::read(inputs)?)?.card()),
        check: |inputs, outcome| Ok(E::check(&E::Inputs::read(inputs)?, &E::Outcome::read(outcome)?)),
    }
}

/// Every kind of card there is. A test fails when one is missing.
pub const KINDS: &[Kind] = &[
    kind::<Azimuth>(),
    kind::<Route>(),
    kind::<CarriedLine>(),
    kind::<Declination>(),
    kind::<Convergence>(),
    kind::<PlaneThroughLines>(),
    kind::<PlanesIntersection>(),
    kind::<ApparentDip>(),
    kind::<LineAtRake>(),
    kind::<RakeOfLine>(),
    kind::<FittedAxes>(),
    kind::<BestRotation>(),
    kind::<LowerHemisphere>(),
    kind::<Stress<Geographic>>(),
    kind::<CarriedStress>(),
    kind::<CarriedTraction>(),
    kind::<Principals>(),
    kind::<Traction>(),
    kind::<Invariants>(),
    kind::<HorizontalStresses>(),
    kind::<FaultingRegime>(),
    kind::<MohrCircles>(),
    kind::<FrictionLimit>(),
    kind::<FrictionalBounds>(),
    kind::<FaultSlip>(),
    kind::<CriticalPlanes>(),
    kind::<RankedFaults>(),
    kind::<FailureEnvelope>(),
    kind::<StrengthMargin>(),
    kind::<RockMass>(),
    kind::<WeakRock>(),
    kind::<SurveyTable>(),
    kind::<Position>(),
    kind::<Overburden>(),
    kind::<DepthConversion>(),
    kind::<PressureAtDepth>(),
    kind::<MudPressure>(),
    kind::<WallStress>(),
    kind::<WallAround>(),
    kind::<FailingArcs>(),
    kind::<Limits>(),
    kind::<RecommendedRange>(),
    kind::<FieldStress>(),
    kind::<RadialProfile>(),
    kind::<FailureDepth>(),
    kind::<TensileCracks>(),
    kind::<WallImage>(),
    kind::<MudHeld>(),
    kind::<RangesBeside>(),
    kind::<Sensitivity>(),
    kind::<GroundState>(),
    kind::<LimitLog>(),
    kind::<SectionEnsemble>(),
    kind::<Hindcast>(),
    kind::<DirectionMap>(),
    kind::<Ensemble>(),
];

fn kind_of(card: &Card) -> Result<&'static Kind> {
    let known = KINDS.iter().find(|k| k.name == card.kind).ok_or_else(|| Error::Unreadable {
        path: "the record".to_owned(),
        line: None,
        column: None,
        why: format!(
            "the card \"{}\" is of kind \"{}\", which this version of Hade does not know",
            card.title(),
            card.kind
        ),
        fix: "use the version of Hade that wrote it".to_owned(),
    })?;
    if known.version != card.version {
        return Err(Error::Unreadable {
            path: "the record".to_owned(),
            line: None,
            column: None,
            why: format!(
                "the card \"{}\" is version {} of its kind, and this version of Hade has version {}",
                card.title(),
                card.version,
                known.version
            ),
            fix: "use the version of Hade that wrote it, or run the notebook again".to_owned(),
        });
    }
    Ok(known)
}

/// Computes a card again from its recorded inputs and holds the recorded outcome against it.
///
/// # Errors
/// When the kind or its version is unknown, or the inputs are refused.
pub fn replay(card: &Card) -> Result<Replayed> {
    let kind = kind_of(card)?;
    let now = (kind.compute)(&card.inputs)?;
    Ok(Replayed {
        difference: card.outcome.difference(&now.outcome, kind.tolerance),
        checks: (kind.check)(&card.inputs, &card.outcome)?,
        tolerance: kind.tolerance,
        card: now,
    })
}

#[cfg(test)]
mod tests {
    use std::collections::BTreeSet;
    use std::path::Path;

    use super::*;
    use crate::samples::samples;

    #[test]
    fn every_kind_in_the_source_is_in_the_table_and_has_a_sample() {
        let mut found = BTreeSet::new();
        kinds_in(Path::new(concat!(env!("CARGO_MANIFEST_DIR"), "/src")), &mut found);
        let table: BTreeSet<String> = KINDS.iter().map(|k| k.name.to_owned()).collect();
        assert_eq!(found, table, "kinds in the source against kinds in the table");
        assert_eq!(table.len(), KINDS.len(), "a kind stands twice");
        let sampled: BTreeSet<String> = samples().iter().map(|c| c.kind.clone()).collect();
        assert_eq!(sampled, table, "kinds with a sample");
    }

    fn kinds_in(folder: &Path, found: &mut BTreeSet<String>) {
        for entry in std::fs::read_dir(folder).unwrap() {
            let path = entry.unwrap().path();
            if path.is_dir() {
                kinds_in(&path, found);
            } else if path.extension().is_some_and(|e| e == "rs")
                && !path.ends_with("replay.rs")
                && !path.ends_with("sample.rs")
            {
                let text = std::fs::read_to_string(&path).unwrap();
                for rest in text.split("const KIND: &'static str = \"").skip(1) {
                    if text.contains("Explain for") {
                        found.insert(rest.split('"').next().unwrap().to_owned());
                    }
                }
            }
        }
    }

    #[test]
    fn every_card_passes_its_checks_and_replays_from_its_text() {
        for card in samples() {
            assert!(card.passed(), "{}: {:#?}", card.title(), card.checks);
            let text = serde_json::to_string(&card).unwrap();
            let read: Card = serde_json::from_str(&text).unwrap();
            assert_eq!(read, card, "{}", card.title());
            let replayed = replay(&read).unwrap();
            assert!(replayed.agrees(), "{}: {:?}", card.title(), replayed.difference);
            assert_eq!(replayed.card, card, "{}", card.title());
        }
    }

    /// Perturbs every number of every outcome, one at a time, and sees a check go red.
    #[test]
    fn every_perturbed_outcome_turns_a_check_red() {
        for card in samples() {
            let kind = kind_of(&card).unwrap();
            let numbers = card.outcome.numbers();
            assert!(!numbers.is_empty(), "{} has no numbers to check", card.title());
            let largest = numbers.iter().fold(0.0_f64, |m, (_, n)| m.max(n.abs()));
            for (place, number) in numbers {
                // 0.1 % of the number, or of the largest one beside it where it is zero.
                let step = if number.abs() > 1e-6 * largest { 1e-3 * number.abs() } else { 1e-3 * largest };
                for wrong in [number + step, number - step] {
                    let outcome = card.outcome.with_number(&place, wrong);
                    let checks = (kind.check)(&card.inputs, &outcome).unwrap();
                    assert!(
                        checks.iter().any(|c| !c.passed),
                        "{}: {place} {number} → {wrong} passes every check",
                        card.title()
                    );
                    let tampered = Card { outcome: outcome.clone(), ..card.clone() };
                    assert!(!replay(&tampered).unwrap().agrees(), "{}: {place} replays", card.title());
                }
            }
        }
    }

    #[test]
    fn unknown_kinds_and_versions_are_refused() {
        let card = samples().remove(0);
        let unknown = Card { kind: "tea-leaves".to_owned(), ..card.clone() };
        assert!(replay(&unknown).unwrap_err().to_string().contains("does not know"));
        let newer = Card { version: 99, ..card };
        assert!(replay(&newer).unwrap_err().to_string().contains("version 99"));
    }
}
