//! The card of a section's draws.

use super::check::check;
use super::figure::figure;
use super::outcome::SectionEnsembleOutcome;
use super::section_ensemble::{SectionEnsemble, SectionEnsembleInputs};
use crate::card::{Card, Check, Column, Explain, Explanation, Formula, Item, Method, Reference, Step, Table};
use crate::error::Result;
use crate::spread::Draws;
use crate::units::{Density, Quantity as _, fixed};

impl Explain for SectionEnsemble {
    const KIND: &'static str = "section-ensemble";
    /// The limits rest on iterations.
    const REPLAY_TOLERANCE: f64 = 1e-7;
    type Inputs = SectionEnsembleInputs;
    type Outcome = SectionEnsembleOutcome;

    fn compute(inputs: SectionEnsembleInputs) -> Result<Self> {
        SectionEnsemble::from_record(inputs)
    }
    fn inputs(&self) -> SectionEnsembleInputs {
        self.record()
    }
    fn outcome(&self) -> SectionEnsembleOutcome {
        self.outcome.clone()
    }
    fn check(inputs: &SectionEnsembleInputs, outcome: &SectionEnsembleOutcome) -> Vec<Check> {
        check(inputs, outcome)
    }

    fn explain(&self) -> Explanation {
        Explanation {
            title: format!(
                "Chance that one mud weight keeps the section {} of {}",
                self.section.name(),
                self.log.hole()
            ),
            headline: self.headline(),
            inputs: self.items(),
            results: self.results(),
            method: self.method(),
            steps: self.steps(),
            figures: figure(self).into_iter().collect(),
            notes: self.notes(),
            topics: ["mud-weight", "limits", "wall", "elastic", "uncertainty"].map(str::to_owned).to_vec(),
        }
    }

    fn warnings(&self) -> Vec<String> {
        let none = self.best().is_none().then(|| "In no draw has every depth of the section a range.".to_owned());
        none.into_iter().collect()
    }

    fn upstream(&self) -> Vec<Card> {
        self.log.upstream()
    }
}

/// A draw that counts is looked for among so many.
const FEW: u32 = 200;

fn percent(share: f64) -> String {
    format!("{} %", fixed(100.0 * share, 1))
}

fn sg(density: Density) -> String {
    fixed(density.in_sg(), 3)
}

impl SectionEnsemble {
    fn headline(&self) -> String {
        let Some(best) = self.best() else {
            return "in no draw has every depth of the section a range".to_owned();
        };
        let mut words = format!(
            "{} sg keeps the section in {} of the draws when all layers move alike, in {} when each moves by itself",
            fixed(best.mud_weight.in_sg(), 3),
            percent(best.together),
            percent(best.by_layer)
        );
        if let Some(planned) = self.planned() {
            words.push_str(&format!(
                "; the planned mud, with all its states, in {} and {}",
                percent(planned.together),
                percent(planned.by_layer)
            ));
        }
        words
    }

    fn items(&self) -> Vec<Item> {
        let mut items = self.log.input_items();
        items.extend(self.section.items());
        items.extend(self.spreads.iter().map(|spread| spread.deviation_item().chosen()));
        items.extend(self.correlations.iter().map(|pair| {
            let name = format!("rank correlation of {} and {}", pair.one, pair.other);
            Item::typed("r_s", name, pair.rank).chosen()
        }));
        items.push(Item::choice("N_d", "number of draws", self.draws.count.to_string()));
        items.push(Item::choice("", "start of the random numbers", self.draws.start.to_string()));
        items
    }

    fn results(&self) -> Vec<Item> {
        let mut items = Vec::new();
        let share =
            |symbol: &str, words: String, share: f64| Item::new(symbol, words, "share", vec![share], percent(share));
        if let Some(best) = self.best() {
            items.push(Item::computed("ρ_best", "mud weight that keeps the section in most draws", best.mud_weight));
            items.push(share("P_1", "share of draws in which it does, all layers alike".to_owned(), best.together));
            items.push(share("P_2", "share of draws in which it does, each layer by itself".to_owned(), best.by_layer));
        }
        if let Some(planned) = self.planned() {
            let words = |how: &str| format!("share of draws in which the planned mud keeps the section, {how}");
            items.push(share("P_3", words("all layers alike"), planned.together));
            items.push(share("P_4", words("each layer by itself"), planned.by_layer));
        }
        for (symbol, what, three) in
            [("b", "highest bottom", self.outcome.bottom), ("t", "lowest top", self.outcome.top)]
        {
            for (quantile, density) in ["P10", "P50", "P90"].iter().zip(three.into_iter().flatten()) {
                items.push(Item::computed(
                    &format!("ρ_{symbol},{quantile}"),
                    format!("{quantile} of the {what} of the section"),
                    density,
                ));
            }
        }
        items
    }

    fn method(&self) -> Method {
        Method {
            words: "At each printed depth of the section the stated inputs are drawn from normal distributions about what the ground says there; a draw moves every depth of a layer by the same number of standard deviations. The bare limits of each wall are found exactly round the hole and turned to mud weights, and the draws counted in which every depth holds.".to_owned(),
            formulas: vec![
                Formula::new("x_i (z) = macron(x)_i (z) + s_i u_i", "x_i(z) = x̄_i(z) + s_i u_i, u_i standard normal, the same at every depth z of a draw"),
                Formula::new("rho_b = max_z p_b / (g z), quad rho_t = min_z p_t / (g z)", "ρ_b = max p_b / (g TVD), ρ_t = min p_t / (g TVD) over the depths"),
                Formula::new("P_1 = n(rho_b <= rho <= rho_t) / N_c", "all layers alike: P₁ = number of draws with ρ_b ≤ ρ ≤ ρ_t, of the N_c that count"),
                Formula::new("P_2 = product_l P_(1,l)", "each layer by itself: P₂ = product of the layers' own shares"),
            ],
            symbols: vec![
                ("x̄_i, s_i".to_owned(), "the ground's value at the depth and the stated standard deviation".to_owned()),
                ("p_b, p_t".to_owned(), "lower shear limit; lowest of upper shear limit, initiation and S_3".to_owned()),
            ],
            references: vec![
                Reference::new("Salmon, J.K. et al. (2011) Parallel random numbers: as easy as 1, 2, 3, Proc. SC '11 (Philox4x64-10; cited from memory)"),
                Reference::new("Slepian, D. (1962) The one-sided barrier problem for Gaussian noise, Bell Syst. Tech. J. 41, 463–501 (correlation raises the chance that all of several normal numbers stay below their bounds; cited from memory)"),
            ],
            assumptions: vec![
                "Depths of one layer are fully correlated: a draw moves each input by as many standard deviations at all of them.".to_owned(),
                "Layers are given twice, fully correlated and independent. Correlations from 0 to 1 between layers lie between the two where the limits run straight in the inputs and one end governs; otherwise the two are no bounds.".to_owned(),
                if self.correlations.is_empty() {
                    "The uncertain inputs of one depth are independent.".to_owned()
                } else {
                    "Pairs of inputs with a rank correlation are joined by a Gaussian copula at each depth; all others are independent.".to_owned()
                },
            ],
        }
    }

    fn steps(&self) -> Vec<Step> {
        let mut steps = self.one_draw();
        if let Some(best) = self.best() {
            let n = self.outcome.counted;
            steps.push(Step::worked(format!(
                "all layers alike at {} sg: {} of the {} draws that count, P_1 = {}",
                fixed(best.mud_weight.in_sg(), 3),
                fixed(best.together * n, 0),
                fixed(n, 0),
                fixed(best.together, 4)
            )));
            let shares: Vec<String> =
                self.outcome.layers.iter().filter_map(|layer| layer.best).map(|share| fixed(share, 4)).collect();
            steps.push(Step::worked(format!(
                "each layer by itself: P_2 = {} = {}",
                shares.join(" · "),
                fixed(best.by_layer, 4)
            )));
            let error = 1.96 * (best.together * (1.0 - best.together) / n).sqrt();
            steps.push(Step::worked(format!(
                "sampling error: with 95 % the share of endlessly many draws lies within ± 1.96 √(P_1 (1 − P_1) / N_c) = ± {}",
                percent(error)
            )));
        }
        steps.push(Step::Table { table: self.layers_table() });
        steps.push(Step::Table { table: self.shares_table() });
        steps
    }

    /// The first draw that counts, at the depth with the highest bottom in it.
    fn one_draw(&self) -> Vec<Step> {
        let depths = self.depths();
        // Fewer draws are the first of more.
        let few = Draws { count: self.draws.count.min(FEW), ..self.draws };
        let all: Vec<_> = depths
            .iter()
            .filter_map(|depth| Some((depth, depth.ensemble(few, &self.spreads, &self.correlations).ok()?)))
            .collect();
        let ends: Vec<Vec<_>> = all.iter().map(|(_, ensemble)| ensemble.ends()).collect();
        let Some(k) =
            (0..few.count as usize).find(|k| ends.iter().all(|ends| ends.get(*k).is_some_and(Option::is_some)))
        else {
            return Vec::new();
        };
        let bottom = |at: usize| -> f64 {
            let here = ends.get(at).and_then(|ends| ends.get(k).copied().flatten()).and_then(|[bottom, _]| bottom);
            here.map_or(f64::INFINITY, |p| depths[at].weight(p))
        };
        let Some(at) = (0..all.len()).reduce(|a, b| if bottom(b) > bottom(a) { b } else { a }) else {
            return Vec::new();
        };
        let Some((depth, ensemble)) = all.get(at) else { return Vec::new() };
        let mut steps = vec![Step::words(format!(
            "In the first draw that counts the highest bottom is that of MD {} m in {}; every other depth and draw goes the same way.",
            fixed(depth.row.md.si(), 2),
            depth.row.layer()
        ))];
        steps.extend(ensemble.worked_draw(k));
        if bottom(at).is_finite() {
            steps.push(Step::worked(format!("as a mud weight {} sg", sg(Density::from_si(bottom(at))))));
        }
        steps
    }

    fn layers_table(&self) -> Table {
        let share = |share: Option<f64>| share.map_or_else(|| "–".to_owned(), |share| fixed(100.0 * share, 1));
        let rows = self.outcome.layers.iter().map(|layer| {
            vec![layer.layer().to_owned(), fixed(layer.depths, 0), share(layer.best), share(layer.planned)]
        });
        Table {
            caption: "Layers: depths that were drawn, and the share of draws that the best mud weight and the planned mud keep".to_owned(),
            columns: vec![
                Column::text("layer"),
                Column::number("depths", ""),
                Column::number("best mud weight", "%"),
                Column::number("planned mud", "%"),
            ],
            rows: rows.collect(),
        }
    }

    fn shares_table(&self) -> Table {
        let rows = self.outcome.curve.iter().map(|place| {
            vec![fixed(place.mud_weight.in_sg(), 3), fixed(100.0 * place.together, 1), fixed(100.0 * place.by_layer, 1)]
        });
        Table {
            caption: "Share of draws in which one mud weight keeps every depth of the section".to_owned(),
            columns: vec![
                Column::number("mud weight", "sg"),
                Column::number("all layers alike", "%"),
                Column::number("each by itself", "%"),
            ],
            rows: rows.collect(),
        }
    }

    fn notes(&self) -> Vec<String> {
        let outcome = &self.outcome;
        let mut notes = Vec::new();
        let left = f64::from(self.draws.count) - outcome.counted;
        if left > 0.0 {
            notes.push(format!(
                "{} of {} draws are left out, because at some depth they have S_Hmax less than S_hmin, a strength below zero or a Poisson's ratio outside 0 to 0.5; where these are many, look at the standard deviations, and at the correlation of S_Hmax and S_hmin.",
                fixed(left, 0),
                self.draws.count
            ));
        }
        notes.push(format!(
            "In {} of the draws that count no mud weight is common to all depths.",
            percent(outcome.without / outcome.counted)
        ));
        if self.log.choices().allowed_width.si() > 0.0 {
            notes.push("The log allows failing arcs and may keep margins; here nothing is allowed to fail and no margin is kept.".to_owned());
        }
        notes.push("Bottom and top are bare limits of shear and parting; balance with the pore pressure is not part of keeping a depth.".to_owned());
        notes.push("Other depths than those printed are not drawn; the log prints those that govern.".to_owned());
        notes.push(
            "The draws say what the stated standard deviations say, no more: where these are guesses, so is every share."
                .to_owned(),
        );
        notes
    }
}
