//! One point of a hole as a depth below another of its levels, as a recorded step.

use serde::{Deserialize, Serialize};

use super::{Datum, DatumTie, Depth, Name};
use crate::card::{Card, Check, Explain, Explanation, Formula, Item, Method, Reference, Step};
use crate::error::Result;
use crate::units::{Length, Quantity, fixed, with_typed_unit};

/// A true vertical depth brought from one level of a hole to another, from [`DatumTie::conversion`]
/// or a position of a survey. Positive down; below mean sea level it may be negative on land.
#[derive(Clone, Debug, PartialEq)]
pub struct DepthConversion {
    inputs: ConversionInputs,
    outcome: ConversionOutcome,
    stands_on: Vec<Card>,
}

/// The inputs of a depth conversion.
#[derive(Clone, Debug, PartialEq, Serialize, Deserialize)]
pub struct ConversionInputs {
    depth: Depth,
    to: Datum,
    tie: DatumTie,
    hole: Option<Name>,
    levels: LevelSource,
}

/// What came out, in metres.
#[derive(Clone, Copy, Debug, PartialEq, Serialize, Deserialize)]
pub struct ConversionOutcome {
    /// The depth below the level asked for.
    tvd: Length,
    /// The elevation of the point above mean sea level; none when the depth already counts from the
    /// level asked for and that level's elevation was not stated.
    elevation: Option<Length>,
}

/// Where the elevations of a hole's levels were stated.
#[derive(Clone, Debug, Default, PartialEq, Eq, Serialize, Deserialize)]
#[serde(tag = "from", rename_all = "snake_case")]
pub enum LevelSource {
    /// In the notebook.
    #[default]
    Typed,
    /// In a data file.
    File {
        /// The path as it was given.
        path: String,
        /// The SHA-256 of what was read.
        sha256: String,
    },
}

/// What two lengths that must be equal may differ by, metres.
const MEET: f64 = 1e-6;

impl DatumTie {
    /// The same point as a depth below another level of this hole, with its card.
    ///
    /// # Errors
    /// When the depth is not finite or one of the levels was not stated.
    pub fn conversion(self, depth: Depth, to: Datum) -> Result<DepthConversion> {
        DepthConversion::compute(ConversionInputs { depth, to, tie: self, hole: None, levels: LevelSource::Typed })
    }
}

impl DepthConversion {
    /// The depth below the level asked for.
    pub fn depth(&self) -> Depth {
        Depth { tvd: self.outcome.tvd, below: self.inputs.to }
    }

    /// The depth it was made from.
    pub fn given(&self) -> Depth {
        self.inputs.depth
    }

    /// The same under the name of its hole.
    pub fn named(&self, hole: &str) -> Self {
        let mut named = self.clone();
        named.inputs.hole = Some(Name::new(hole));
        named
    }

    /// The levels as a file states them.
    pub(crate) fn levels_from(mut self, levels: LevelSource) -> Self {
        self.inputs.levels = levels;
        self
    }

    /// The card the depth came from.
    pub(crate) fn standing_on(mut self, cards: Vec<Card>) -> Self {
        self.stands_on = cards;
        self
    }
}

impl Explain for DepthConversion {
    const KIND: &'static str = "depth-conversion";
    type Inputs = ConversionInputs;
    type Outcome = ConversionOutcome;

    fn compute(inputs: ConversionInputs) -> Result<Self> {
        let depth = inputs.tie.convert(inputs.depth, inputs.to)?;
        let elevation = inputs.tie.elevation(inputs.to).ok().map(|level| level - depth.tvd);
        let outcome = ConversionOutcome { tvd: depth.tvd, elevation };
        Ok(DepthConversion { inputs, outcome, stands_on: Vec::new() })
    }
    fn inputs(&self) -> ConversionInputs {
        self.inputs.clone()
    }
    fn outcome(&self) -> ConversionOutcome {
        self.outcome
    }

    /// Where the computation takes off the difference of the two levels, the checks go by the
    /// elevation of the point above mean sea level.
    fn check(inputs: &ConversionInputs, outcome: &ConversionOutcome) -> Vec<Check> {
        let (from, to) = (inputs.tie.elevation(inputs.depth.below), inputs.tie.elevation(inputs.to));
        let (Ok(from), Ok(to)) = (from, to) else {
            return vec![Check::compare(
                "depth as it was given, in the datum asked for",
                &[outcome.tvd.si()],
                &[if inputs.depth.below == inputs.to { inputs.depth.tvd.si() } else { f64::NAN }],
                0.0,
                "m",
            )];
        };
        let point = from - inputs.depth.tvd;
        let elevation = outcome.elevation.unwrap_or(Length::m(f64::NAN));
        let compare = |what: &str, got: Length, other: Length| {
            Check::compare(what, &[got.si()], &[other.si()], MEET.min(1e-4 * got.abs().si().max(1e-6)), "m")
        };
        vec![
            compare("depth from the elevation of the point above mean sea level", outcome.tvd, to - point),
            compare("elevation of the point above mean sea level, from the depth as it was given", elevation, point),
        ]
    }

    fn explain(&self) -> Explanation {
        let ConversionInputs { depth, to, tie, hole, levels } = &self.inputs;
        let (from, to) = (depth.below, *to);
        let of = hole.map(|name| format!(" of {name}")).unwrap_or_default();
        let (z1, z2) = (depth.tvd, self.outcome.tvd);
        let (e1, e2) = (tie.elevation(from).unwrap_or_default(), tie.elevation(to).unwrap_or_default());
        let metres = |length: Length| fixed(length.si(), 2);
        let mut results = vec![Item::computed(to.symbols().0, tvd_words(to), z2)];
        let mut steps = Vec::new();
        let mut notes = Vec::new();
        if from == to {
            notes.push("The depth counts from that level already; nothing was added.".to_owned());
        } else {
            let difference = e1 - e2;
            steps.push(Step::worked(format!(
                "{} lies {} − ({}) = {} m above {}",
                from.words(),
                metres(e1),
                metres(e2),
                metres(difference),
                to.words()
            )));
            steps.push(Step::worked(format!("z₂ = {} − ({}) = {} m", metres(z1), metres(difference), metres(z2))));
        }
        if let Some(elevation) = self.outcome.elevation {
            results.push(Item::computed("e", "elevation of the point above mean sea level", elevation));
            steps.push(Step::worked(format!(
                "elevation of the point = {} − ({}) = {} m above mean sea level",
                metres(e2),
                metres(z2),
                metres(elevation)
            )));
        }
        if z2.si() < 0.0 {
            notes.push(format!("The point lies above {}: its depth below it is negative.", to.words()));
        }
        Explanation {
            title: format!("TVD {} below {}{of} as a depth below {}", with_typed_unit(z1), from.words(), to.words()),
            headline: format!("TVD {} m below {}", metres(z2), to.words()),
            inputs: {
                let mut items = vec![Item::typed(from.symbols().0, tvd_words(from), z1)];
                items.extend(level_items(*tie, &of, levels, &[from, to]));
                items
            },
            results,
            method: Method {
                words: "Depths count down from a level, elevations up from mean sea level; the difference of two levels is taken off.".to_owned(),
                formulas: vec![
                    Formula::new("z_2 = z_1 - (e_1 - e_2)", "z₂ = z₁ − (e₁ − e₂)"),
                    Formula::new("e = e_2 - z_2", "e = e₂ − z₂"),
                ],
                symbols: vec![
                    ("z₁, z₂".to_owned(), format!("true vertical depth below {} and below {}", from.words(), to.words())),
                    ("e₁, e₂".to_owned(), "elevations of the two levels above mean sea level, whose own is zero".to_owned()),
                ],
                references: vec![Reference::new("The definition of depth and elevation; no source is needed")],
                assumptions: vec!["The elevations are from the same mean sea level, and the same stage of the tide.".to_owned()],
            },
            steps,
            notes,
            topics: vec!["depth".to_owned()],
            ..Explanation::default()
        }
    }

    fn upstream(&self) -> Vec<Card> {
        self.stands_on.clone()
    }
}

/// "true vertical depth below the mudline".
pub(crate) fn tvd_words(below: Datum) -> String {
    format!("true vertical depth below {}", below.words())
}

/// The elevations of some levels as inputs of a card: as they were typed, or the file that states
/// them. Mean sea level has none, and a level that was not stated is left out.
pub(crate) fn level_items(tie: DatumTie, of: &str, levels: &LevelSource, used: &[Datum]) -> Vec<Item> {
    let mut stated: Vec<(Datum, Length)> = Vec::new();
    for datum in used.iter().filter(|d| **d != Datum::MeanSeaLevel) {
        if let (Ok(elevation), false) = (tie.elevation(*datum), stated.iter().any(|(d, _)| d == datum)) {
            stated.push((*datum, elevation));
        }
    }
    match levels {
        LevelSource::File { path, sha256 } if !stated.is_empty() => {
            let words: Vec<String> = stated
                .iter()
                .map(|(d, e)| format!("{} {}", d.words().trim_start_matches("the "), with_typed_unit(*e)))
                .collect();
            let name = format!("levels{of}, above mean sea level: {}", words.join(", "));
            vec![Item::file(name, path.clone(), sha256.clone())]
        }
        _ => stated
            .into_iter()
            .map(|(d, e)| {
                let name = format!("{}{of} above mean sea level", d.words().trim_start_matches("the "));
                Item::typed(d.symbols().1, name, e)
            })
            .collect(),
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::units::Units;

    fn offshore() -> DatumTie {
        DatumTie::rotary_table_at(25.m()).unwrap().with_mudline_at((-300).m()).unwrap()
    }

    #[test]
    fn a_conversion_is_a_card_with_its_elevations() {
        let conversion = offshore().conversion(Depth::below_rotary_table(1000.m()), Datum::Mudline).unwrap();
        assert_eq!(conversion.depth(), Depth::below_mudline(675.m()));
        assert_eq!(conversion.given(), Depth::below_rotary_table(1000.m()));
        let card = conversion.named("X-2").card();
        assert!(card.passed(), "{:#?}", card.checks);
        assert_eq!(card.title(), "TVD 1000 m below the rotary table of X-2 as a depth below the mudline");
        let names: Vec<&str> = card.explanation.inputs.iter().map(|i| i.symbol.as_str()).collect();
        assert_eq!(names, ["z", "e_RT", "e_M"]);
        assert_eq!(card.explanation.results[0].si, [675.0]);
        assert_eq!(card.explanation.results[1].shown, "-975.0 m");
    }

    /// On land a point can lie above the sea: its depth below it is negative, and the card says so.
    #[test]
    fn a_depth_below_sea_level_may_be_negative_on_land() {
        let land = DatumTie::rotary_table_at(432.m()).unwrap().with_ground_at(425.m()).unwrap();
        let conversion = land.conversion(Depth::below_ground(25.m()), Datum::MeanSeaLevel).unwrap();
        assert_eq!(conversion.depth(), Depth::below_mean_sea_level((-400).m()));
        let card = conversion.card();
        assert!(card.passed());
        assert!(card.explanation.notes[0].contains("negative"));
        let back = land.conversion(conversion.depth(), Datum::RotaryTable).unwrap();
        assert_eq!(back.depth(), Depth::below_rotary_table(32.m()));
    }

    #[test]
    fn a_depth_in_the_datum_asked_for_needs_no_level() {
        let tie = DatumTie::rotary_table_at(25.m()).unwrap();
        let conversion = tie.conversion(Depth::below_ground(10.m()), Datum::Ground).unwrap();
        assert_eq!(conversion.depth(), Depth::below_ground(10.m()));
        assert!(conversion.card().passed());
        let e = tie.conversion(Depth::below_ground(10.m()), Datum::RotaryTable).unwrap_err();
        assert!(e.to_string().contains("with_ground_at"), "{e}");
        assert!(tie.conversion(Depth::below_rotary_table(f64::NAN.m()), Datum::MeanSeaLevel).is_err());
    }
}
