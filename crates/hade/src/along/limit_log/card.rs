//! The card of a log.

use super::check::check;
use super::figure::{against_md, figures};
use super::friction::FrictionAlong;
use super::limit_log::{LimitLog, LogInputs};
use super::row::{LogRow, ends};
use super::steps::{governing, steps, stretch_words, stretches_words};
use super::summary::LogOutcome;
use crate::along::ground::doubts_of_path;
use crate::card::{Card, Check, Explain, Explanation, Figure, Formula, Item, Method};
use crate::error::Result;
use crate::stress::doubts_of_overburden;
use crate::units::{Angle, Quantity, as_typed, fixed};
use crate::well::stated_items;

impl Explain for LimitLog {
    const KIND: &'static str = "limit-log";
    /// The limits rest on iterations.
    const REPLAY_TOLERANCE: f64 = 1e-8;
    type Inputs = LogInputs;
    type Outcome = LogOutcome;

    fn compute(inputs: LogInputs) -> Result<Self> {
        LimitLog::from_record(inputs)
    }
    fn inputs(&self) -> LogInputs {
        self.record().clone()
    }
    fn outcome(&self) -> LogOutcome {
        LogOutcome::of(self.printed().iter().map(|(row, _)| *row).collect(), &self.sections, self.friction)
    }
    fn check(inputs: &LogInputs, outcome: &LogOutcome) -> Vec<Check> {
        check(inputs, outcome)
    }

    fn explain(&self) -> Explanation {
        let outcome = self.outcome();
        let mut inputs = self.input_items();
        inputs.extend(self.sections.iter().flat_map(|section| section.items()));
        let width = self.choices.allowed_width;
        Explanation {
            title: format!(
                "Pressure limits against depth along {}, {}{}",
                self.hole(),
                stretch_words([self.choices.from, self.choices.to]),
                if width > Angle::default() {
                    format!(", arcs up to {}° allowed to fail", as_typed(width.in_deg()))
                } else {
                    String::new()
                }
            ),
            headline: headline(&outcome),
            inputs,
            results: results(&outcome),
            method: self.method(&outcome),
            steps: steps(self, &outcome),
            figures: figures(self, &outcome),
            notes: self.notes(&outcome),
            topics: self.topics(),
        }
    }

    fn warnings(&self) -> Vec<String> {
        let outcome = self.outcome();
        let mut said = self.against_the_plan(&outcome);
        said.extend(self.doubts(&outcome));
        said
    }

    fn upstream(&self) -> Vec<Card> {
        let mut cards = self.survey.upstream();
        cards.extend(self.ground.upstream());
        cards
    }
}

impl LimitLog {
    /// Survey, ground and choices as inputs of a card.
    pub(crate) fn input_items(&self) -> Vec<Item> {
        let mut items = vec![self.survey.item()];
        items.extend(stated_items(&self.survey));
        items.extend(self.ground.items());
        items.extend(self.choices.items());
        items.extend(self.friction.map(FrictionAlong::input));
        items
    }

    /// The figure of mud weights against measured depth.
    pub(crate) fn figure(&self) -> Figure {
        against_md(self, &self.outcome())
    }
}

fn headline(outcome: &LogOutcome) -> String {
    let section = |section: &super::section::SectionRange| match section.common() {
        Some((bottom, top)) => {
            format!("{} {} to {} sg", section.name, fixed(bottom.in_sg(), 3), fixed(top.in_sg(), 3))
        }
        None if section.conflicts.is_empty() => format!("{} no common mud weight", section.name),
        None => format!("{} no common mud weight ({})", section.name, stretches_words(&section.conflicts)),
    };
    let sections: Vec<String> = outcome.sections.iter().map(section).collect();
    match outcome.narrowest {
        Some(narrowest) => format!(
            "narrowest at MD {} m in {}, {} MPa; {}",
            fixed(narrowest.md.si(), 1),
            narrowest.layer,
            fixed(narrowest.breadth.in_mpa(), 2),
            sections.join("; ")
        ),
        None => format!("no range at any depth; {}", sections.join("; ")),
    }
}

fn results(outcome: &LogOutcome) -> Vec<Item> {
    let mut items = Vec::new();
    if let Some(narrowest) = outcome.narrowest {
        items.push(Item::computed("MD_n", "measured depth where the range is narrowest", narrowest.md));
        items.push(Item::computed("Δp_n", "top less bottom there", narrowest.breadth));
    }
    for section in &outcome.sections {
        for (symbol, words, end) in [("ρ_b", "highest bottom", section.bottom), ("ρ_t", "lowest top", section.top)] {
            let Some(end) = end else { continue };
            items.push(Item::computed(symbol, format!("{words} of {}", section.name), end.mud_weight));
        }
        for held in &section.mud {
            let (symbol, against) = if held.against_bottom { ("Δp_mb", "bottom") } else { ("Δp_mt", "top") };
            items.push(Item::computed(
                symbol,
                format!("least left of the mud {} to the {against}, {}", held.state.words(), section.name),
                held.margin,
            ));
        }
    }
    items.extend(outcome.friction.iter().map(FrictionAlong::result));
    items
}

impl LimitLog {
    /// The method of the wall where the log is narrowest, with what the log adds.
    fn method(&self, outcome: &LogOutcome) -> Method {
        let wall = governing(self, outcome).and_then(|(_, state)| ends(&state, &self.choices).ok());
        let mut method = wall.map(|found| found.limits.explain().method).unwrap_or_default();
        method.words = format!(
            "At each depth the survey gives the place and direction of the hole, and the ground the stress, pore pressure and rock there; the wall is worked out as at a single depth. Contacts are looked at on both sides. {}",
            method.words
        );
        let ground = self.ground.method();
        method.formulas.splice(0..0, ground.formulas);
        method.formulas.extend([
            Formula::new("p_b = max(p_(l s)(w), P_p + m_b)", "p_b = max(p_ls(w), P_p + m_b)"),
            Formula::new("p_t = min(S_3, p_i, p_(u s)) - m_t", "p_t = min(S_3, p_i, p_us) − m_t"),
            Formula::new("rho = p / (g \"TVD\")", "ρ = p / (g TVD)"),
        ]);
        if self.friction.is_some() {
            method.formulas.push(Formula::new(
                "(S_1 - P_p) <= (sqrt(mu^2 + 1) + mu)^2 (S_3 - P_p)",
                "friction bears the stress where S_1 − P_p ≤ (√(μ² + 1) + μ)² (S_3 − P_p)",
            ));
        }
        method.references.extend(ground.references);
        method.assumptions.extend(ground.assumptions);
        method
    }

    /// Sections without a common mud weight, depths without a range, muds outside the range, a stress that faults
    /// do not bear, rock that creeps.
    fn against_the_plan(&self, outcome: &LogOutcome) -> Vec<String> {
        let mut said = Vec::new();
        for section in outcome.sections.iter().filter(|section| section.common().is_none()) {
            said.push(match (section.bottom, section.top) {
                (Some(bottom), Some(top)) => format!(
                    "{}: no common mud weight. {} at MD {} m needs {} sg ({}), and {} at MD {} m bears only {} sg ({}); {}.",
                    section.name,
                    bottom.layer,
                    fixed(bottom.md.si(), 1),
                    fixed(bottom.mud_weight.in_sg(), 3),
                    bottom.governed_by.short(),
                    top.layer,
                    fixed(top.md.si(), 1),
                    fixed(top.mud_weight.in_sg(), 3),
                    top.governed_by.short(),
                    stretches_words(&section.conflicts)
                ),
                _ => format!("{}: no common mud weight, because some depth has no range.", section.name),
            });
        }
        if !outcome.empty.is_empty() {
            said.push(format!("No pressure is recommended at {}.", stretches_words(&outcome.empty)));
        }
        for section in &outcome.sections {
            for held in section.mud.iter().filter(|held| held.margin.si() < 0.0) {
                let (side, end) = if held.against_bottom { ("below", "bottom") } else { ("above", "top") };
                said.push(format!(
                    "{}: the planned mud, {}, is {} MPa {side} the {end} of the range at MD {} m, where it misses most.",
                    section.name,
                    held.state.words(),
                    fixed(-held.margin.in_mpa(), 2),
                    fixed(held.md.si(), 1)
                ));
            }
        }
        said.extend(outcome.friction.iter().filter(|friction| friction.is_beyond()).map(FrictionAlong::note));
        for layer in self.ground.layers() {
            if layer.creeps && outcome.rows.iter().any(|row| row.layer == layer.name) {
                said.push(format!(
                    "{} creeps. Elastic limits are NOT VALID in it; its rows only show what an elastic rock would do.",
                    layer.name()
                ));
            }
        }
        said
    }

    /// Sections that the log does not reach, and input that can be but seldom is.
    fn doubts(&self, outcome: &LogOutcome) -> Vec<String> {
        let mut said = Vec::new();
        for section in &self.sections {
            if section.from < self.choices.from || section.to > self.choices.to {
                said.push(format!(
                    "{} runs from MD {} to {} m, and the log only over {} of it: nothing is said of the rest.",
                    section.name(),
                    fixed(section.from.si(), 1),
                    fixed(section.to.si(), 1),
                    stretch_words([
                        if section.from < self.choices.from { self.choices.from } else { section.from },
                        if section.to > self.choices.to { self.choices.to } else { section.to },
                    ])
                ));
            }
        }
        let overburden: Vec<_> = outcome.rows.iter().map(|row| (row.tvd, row.sv)).collect();
        said.extend(doubts_of_overburden(&overburden));
        said.extend(doubts_of_path(&self.survey, [self.choices.from, self.choices.to]));
        said.extend(self.ground.doubts_of(|name| outcome.rows.iter().any(|row| row.layer() == name)));
        said
    }

    fn notes(&self, outcome: &LogOutcome) -> Vec<String> {
        let mut notes = Vec::new();
        let all: Vec<&LogRow> = outcome.rows.iter().collect();
        let depleted = super::section::stretches(&all, |row| row.depleted);
        if !depleted.is_empty() {
            notes.push(format!(
                "Depleted: {}. The stress path stated for it holds for the state it was measured in.",
                stretches_words(&depleted)
            ));
        }
        notes.extend(outcome.friction.iter().filter(|friction| !friction.is_beyond()).map(FrictionAlong::note));
        if self.ground.is_warmed() {
            notes.push(
                "The wall is warmed or cooled by the mud as stated at every state of the mud, at rest and swabbed too; mud at rest comes towards the temperature of the ground, and a wall that is no longer cooled carries more hoop stress."
                    .to_owned(),
            );
        }
        for layer in self.ground.layers() {
            if let Some(depletion) = layer.depletion {
                notes.push(format!("{}: {}.", layer.name(), depletion.words()));
            }
        }
        if self.looked() > outcome.rows.len() {
            notes.push(format!(
                "{} depths were looked at, {} are printed: those that govern, both sides of contacts, and others at even distances. The whole log is written with .write_csv(path)?.",
                self.looked(),
                outcome.rows.len()
            ));
        }
        if self.choices.margin_top.si() == 0.0 && self.choices.margin_bottom.si() == 0.0 {
            notes.push("No margin is kept at either end: these are bare limits, not a recommendation.".to_owned());
        }
        notes
    }

    fn topics(&self) -> Vec<String> {
        let mut topics = vec!["mud-weight", "limits", "breakout", "wall", "elastic", "survey"];
        let layers = self.ground.layers();
        let mut when = |holds: bool, topic: &'static str| topics.extend(holds.then_some(topic));
        when(self.friction.is_some(), "friction");
        when(layers.iter().any(|layer| layer.depletion.is_some()), "depletion");
        when(layers.iter().any(|layer| layer.creeps), "creep");
        when(layers.iter().any(|layer| layer.seepage.is_some_and(|seepage| seepage.sealing < 1.0)), "permeable-wall");
        when(layers.iter().any(|layer| layer.thermal.is_some() || layer.thermal_properties.is_some()), "thermal");
        when(layers.iter().any(|layer| layer.weak_plane.is_some()), "weak-plane");
        topics.into_iter().map(str::to_owned).collect()
    }
}
