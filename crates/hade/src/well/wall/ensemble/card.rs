//! The card of an ensemble.

use super::ensemble::{Ensemble, EnsembleInputs};
use super::figures::figures;
use super::first_order::FirstOrder;
use super::outcome::EnsembleOutcome;
use super::tables;
use super::whole::wall_of;
use crate::card::{Card, Check, Explain, Explanation, Formula, Item, Method, Reference, Step};
use crate::error::Result;
use crate::units::{Pressure, as_typed, fixed};
use crate::well::wall::method;
use crate::well::wall::wall::Wall;

/// The first-order estimate is said to depart beyond this share.
const DEPARTS: f64 = 0.05;

impl Explain for Ensemble {
    const KIND: &'static str = "wall-ensemble";
    /// The limits rest on iterations.
    const REPLAY_TOLERANCE: f64 = 1e-7;
    type Inputs = EnsembleInputs;
    type Outcome = EnsembleOutcome;

    fn compute(inputs: EnsembleInputs) -> Result<Self> {
        Ensemble::build(inputs)
    }
    fn inputs(&self) -> EnsembleInputs {
        self.inputs.clone()
    }
    fn outcome(&self) -> EnsembleOutcome {
        self.worked_out().clone()
    }
    fn check(inputs: &EnsembleInputs, outcome: &EnsembleOutcome) -> Vec<Check> {
        super::check::check(inputs, outcome)
    }

    fn explain(&self) -> Explanation {
        let outcome = self.worked_out();
        let wall = self.stated();
        Explanation {
            title: format!(
                "Ensemble of the limits of the wall of {}",
                wall.as_ref().map_or_else(String::new, Wall::place)
            ),
            headline: self.headline(outcome),
            inputs: self.items(),
            results: self.results(outcome),
            method: self.method(wall.as_ref()),
            steps: self.steps(outcome),
            figures: figures(self, outcome),
            notes: self.notes(outcome, wall.as_ref()),
            topics: self
                .inputs
                .wall
                .topics()
                .iter()
                .chain(&["wall", "limits", "uncertainty", "mud-weight", "elastic"])
                .map(|topic| (*topic).to_owned())
                .collect(),
        }
    }

    fn warnings(&self) -> Vec<String> {
        Ensemble::without_an_end(self.worked_out())
    }

    fn upstream(&self) -> Vec<Card> {
        self.stated().map_or_else(Vec::new, |wall| wall.upstream())
    }
}

fn percent(count: f64, of: f64) -> String {
    format!("{} %", fixed(100.0 * count / of, 2))
}

impl Ensemble {
    /// The wall as it was stated.
    fn stated(&self) -> Option<Wall> {
        Wall::of(self.inputs.wall).ok()
    }

    fn headline(&self, outcome: &EnsembleOutcome) -> String {
        let shown = |p: Option<Pressure>| match (p, self.inputs.tvd) {
            (None, _) => "none".to_owned(),
            (Some(p), None) => p.to_string(),
            (Some(p), Some(tvd)) => format!("{p} ({})", p.mud_weight_at(tvd)),
        };
        let mut said = format!(
            "bottom P90 {}, top P10 {}, with draws that have none counted beyond; {} of {} draws have no safe pressure in shear",
            shown(outcome.design_bottom),
            shown(outcome.design_top),
            percent(outcome.without_shear, outcome.counted),
            fixed(outcome.counted, 0)
        );
        if outcome.left_out() > 0.0 {
            said.push_str(&format!("; {} draws left out", fixed(outcome.left_out(), 0)));
        }
        said
    }

    fn items(&self) -> Vec<Item> {
        let inputs = &self.inputs;
        let mut items = inputs.wall.items();
        items.extend(inputs.drawn.iter().map(|one| one.item()));
        for pair in &inputs.correlations {
            let name = format!("rank correlation of {} and {}", pair.one, pair.other);
            items.push(Item::typed("r_s", name, pair.rank).chosen());
        }
        items.extend(inputs.friction.map(|mu| Item::typed("μ", "coefficient of friction of faults", mu).chosen()));
        items.extend(inputs.tvd.map(|tvd| Item::typed("z", "true vertical depth below the rotary table", tvd)));
        items.push(Item::choice("N_d", "number of draws", inputs.draws.count.to_string()));
        items.push(Item::choice("", "start of the random numbers", inputs.draws.start.to_string()));
        items
    }

    fn results(&self, outcome: &EnsembleOutcome) -> Vec<Item> {
        let mut items = Vec::new();
        for (symbol, name, quantiles) in [("b", "bottom", outcome.bottom), ("t", "top", outcome.top)] {
            for (share, p) in ["P10", "P50", "P90"].iter().zip(quantiles.map(|q| q.all()).into_iter().flatten()) {
                let name = format!("{share} of the {name}, of the draws that have one");
                items.push(Item::computed(&format!("p_{symbol},{share}"), name, p));
            }
        }
        for (symbol, name, p) in [
            ("p_b*", "P90 of the bottom, a draw without one above all", outcome.design_bottom),
            ("p_t*", "P10 of the top, a draw without one below all", outcome.design_top),
        ] {
            items.extend(p.map(|p| Item::computed(symbol, name, p)));
        }
        for (symbol, name, count) in [
            ("N_c", "draws that count", outcome.counted),
            ("N_0", "of them without a safe pressure in shear", outcome.without_shear),
            ("N_r", "of them without a pressure between bottom and top", outcome.without_range),
        ] {
            items.push(Item::new(symbol, name, "count", vec![count], fixed(count, 0)));
        }
        items
    }

    fn method(&self, wall: Option<&Wall>) -> Method {
        let words = "The stated inputs are drawn from their distributions, everything else stays; the limits of the wall of every draw are found exactly round the hole, and counted.";
        let mut method = match wall {
            Some(wall) => method::with_strength(wall, words),
            None => Method { words: words.to_owned(), ..Method::default() },
        };
        method.formulas.extend([
            Formula::new(
                "p_b = p_(l s), quad p_t = min(p_(u s), p_i, S_3)",
                "bottom p_b = p_ls, top p_t = min(p_us, p_i, S_3)",
            ),
            Formula::new("k = (n - 1) P / 100", "k = (n − 1) P/100"),
            Formula::new(
                "s^2 = sum_i sum_j r_(i j) (partial p_b)/(partial x_i) s_i (partial p_b)/(partial x_j) s_j",
                "first order: s² = Σ Σ r_ij (∂p_b/∂x_i) s_i (∂p_b/∂x_j) s_j, at the means",
            ),
        ]);
        method.symbols.push((
            "k".to_owned(),
            "number, from 0, of the quantile of P % among n values in rising order; between two of them interpolated"
                .to_owned(),
        ));
        if self.inputs.friction.is_some() {
            method.formulas.push(Formula::new(
                "(S_1 - P_upright(p)) / (S_3 - P_upright(p)) <= (sqrt(mu^2 + 1) + mu)^2",
                "a draw counts where (S_1 − P_p)/(S_3 − P_p) ≤ (√(μ² + 1) + μ)²",
            ));
        }
        if !self.inputs.correlations.is_empty() {
            method.formulas.push(Formula::new(
                "r_(i j) = 2 sin(pi r_s / 6)",
                "correlation of normal scores for a rank correlation: r_ij = 2 sin(π r_s / 6)",
            ));
        }
        method.references.extend([
            Reference::new("Salmon, J.K. et al. (2011) Parallel random numbers: as easy as 1, 2, 3, Proc. SC '11 (Philox4x64-10; cited from memory)"),
            Reference::new("Hyndman, R.J. and Fan, Y. (1996) Sample quantiles in statistical packages, Am. Stat. 50, 361–365 (definition 7; cited from memory)"),
            Reference::new("Ang, A.H-S. and Tang, W.H. (1984) Probability Concepts in Engineering Planning and Design, vol. 2, Wiley (first-order second-moment estimates; cited from memory)"),
        ]);
        method.assumptions.push(if self.inputs.correlations.is_empty() {
            "The uncertain inputs are independent.".to_owned()
        } else {
            "Pairs with a rank correlation are joined by a Gaussian copula; all others are independent.".to_owned()
        });
        method
    }

    fn steps(&self, outcome: &EnsembleOutcome) -> Vec<Step> {
        let mut steps = vec![Step::Table { table: tables::inputs(self, outcome) }];
        steps.extend(self.one_draw());
        steps.push(Step::Table { table: tables::quantiles(self, outcome) });
        steps.extend(self.sampling_error());
        steps.push(Step::Table { table: tables::stable(self, outcome) });
        if let Some(first) = &outcome.first_order {
            let squares: Vec<String> =
                first.by_one_deviation.iter().map(|p| format!("({})²", fixed(p.in_mpa(), 4))).collect();
            let terms = squares.join(" + ");
            let more = if self.inputs.correlations.is_empty() { "" } else { " + the products of the pairs" };
            steps.push(Step::worked(format!(
                "first order: bottom at the means {} MPa; s = √({terms}{more}) = {} MPa",
                fixed(first.mean.in_mpa(), 4),
                fixed(first.deviation.in_mpa(), 4)
            )));
        }
        steps
    }

    /// The first draw that counts, with its numbers put in.
    fn one_draw(&self) -> Vec<Step> {
        let Some(k) = self.stands.iter().position(|stand| stand.left.is_none()) else { return Vec::new() };
        self.worked(k, &format!("Every draw is worked as draw {}", k + 1))
    }

    /// A draw with its numbers put in, after words that begin a sentence.
    pub(super) fn worked(&self, k: usize, begin: &str) -> Vec<Step> {
        let Ok(ready) = self.inputs.prepared() else { return Vec::new() };
        let draw = ready.sampler.draw(k as u64);
        let values: Vec<String> = self
            .inputs
            .drawn
            .iter()
            .zip(draw.values())
            .map(|(one, value)| format!("{} = {}", one.symbol(), one.shown(*value)))
            .collect();
        let mut steps = vec![Step::words(format!("{begin} ({}):", values.join(", ")))];
        let numbers = self.inputs.numbers(&ready.base, &draw);
        if let Ok(wall) = wall_of(&self.inputs.wall, &ready.base.numbers, &numbers) {
            let limits = wall.limits();
            steps.extend(limits.worked_all(&[limits.lower_shear, limits.upper_shear, limits.initiation]));
            let shown = |p: Option<Pressure>| p.map_or_else(|| "none".to_owned(), |p| fixed(p.in_mpa(), 4));
            steps.push(Step::worked(format!(
                "p_b = {} MPa; p_t = the lowest of {}, {} and {} MPa",
                shown(limits.lower_shear.pressure()),
                shown(limits.upper_shear.pressure()),
                shown(limits.initiation.pressure()),
                shown(limits.least_stress.pressure())
            )));
        }
        steps
    }

    /// Between which draws the true P90 of the bottom lies with 95 %.
    fn sampling_error(&self) -> Option<Step> {
        let mut bottoms: Vec<f64> = self.stands.iter().filter(|s| s.left.is_none()).filter_map(|s| s.bottom).collect();
        bottoms.sort_unstable_by(f64::total_cmp);
        let n = bottoms.len() as f64;
        let half = 1.96 * (n * 0.9 * 0.1).sqrt();
        let at = |place: f64| bottoms.get((place.max(0.0) as usize).min(bottoms.len().saturating_sub(1))).copied();
        let (low, high) = (at((0.9 * n - half).floor())?, at((0.9 * n + half).ceil())?);
        Some(Step::worked(format!(
            "sampling error: with 95 % the P90 of the bottom of endlessly many draws lies between values 0.9 n ± 1.96 √(0.09 n) of these n = {}: {} to {} MPa",
            fixed(n, 0),
            fixed(low * 1e-6, 3),
            fixed(high * 1e-6, 3)
        )))
    }

    /// Draws that are left out, and why.
    fn left_out(&self, outcome: &EnsembleOutcome) -> Vec<String> {
        let all = f64::from(self.inputs.draws.count);
        let mut notes = Vec::new();
        for (one, count) in self.inputs.drawn.iter().zip(&outcome.outside) {
            if *count > 0.0 {
                notes.push(format!(
                    "{} of the draws ({}) have {} outside its stated bounds and are left out.",
                    percent(*count, all),
                    fixed(*count, 0),
                    one.symbol()
                ));
            }
        }
        for (count, why) in [
            (
                outcome.impossible,
                "have a number that no wall has (a negative strength, a Poisson's ratio outside 0–0.5)",
            ),
            (outcome.crossed, "have S_Hmax less than S_hmin"),
            (outcome.beyond_friction, "are beyond the frictional limit of faults"),
        ] {
            if count > 0.0 {
                let share = percent(count, all);
                notes.push(format!("{share} of the draws ({}) {why} and are left out.", fixed(count, 0)));
            }
        }
        notes
    }

    /// Draws without a bottom or a top.
    fn without_an_end(outcome: &EnsembleOutcome) -> Vec<String> {
        let mut said = Vec::new();
        if outcome.without_shear > 0.0 {
            said.push(format!(
                "{} of the draws that count have no pressure that is safe in shear. P10, P50 and P90 are of the others; the starred quantiles count them as above any bottom and below any top.",
                percent(outcome.without_shear, outcome.counted)
            ));
        }
        if outcome.design_bottom.is_none() || outcome.design_top.is_none() {
            said.push(
                "More than 10 % of the draws have no bottom or no top, so that the design quantile is none.".to_owned(),
            );
        }
        said
    }

    fn notes(&self, outcome: &EnsembleOutcome, wall: Option<&Wall>) -> Vec<String> {
        let mut notes = self.left_out(outcome);
        if self.inputs.friction.is_none() {
            notes.push("No coefficient of friction was stated: the drawn stresses are not held against the frictional limit of faults.".to_owned());
        }
        notes.extend(self.departs(outcome));
        notes.push("The stated value of a drawn input plays no part. S_v, S_Hmax and S_hmin are the normal stresses down, along and across the azimuth of S_Hmax; the rest of the tensor stays, and the azimuth turns the whole of it.".to_owned());
        notes.push("Bottom and top are bare limits without margins, and nothing is allowed to fail; balance with the pore pressure is not part of being stable.".to_owned());
        notes.push(
            "The draws say what the stated distributions say, no more: where these are guesses, so is every quantile."
                .to_owned(),
        );
        notes.extend(wall.into_iter().flat_map(method::notes));
        notes
    }

    /// Whether the first-order estimate departs from the draws.
    fn departs(&self, outcome: &EnsembleOutcome) -> Option<String> {
        let Some(FirstOrder { mean, deviation, .. }) = &outcome.first_order else {
            return Some("There is no first-order estimate: the wall of the means has no bottom.".to_owned());
        };
        let [drawn_mean, drawn_deviation] = outcome.bottom_mean?;
        let numbers = format!(
            "first order gives the bottom a mean of {mean} and a standard deviation of {deviation}, the draws {drawn_mean} and {drawn_deviation}"
        );
        let off = ((*mean - drawn_mean) / drawn_deviation).abs();
        let wider = (*deviation / drawn_deviation - 1.0).abs();
        Some(if off > DEPARTS || wider > DEPARTS {
            format!(
                "The limits are no straight lines in the inputs over these spreads: {numbers}. The mean is off by {} % of a standard deviation, the standard deviation by {} %; more than {} % is too much to use it in place of the draws.",
                fixed(100.0 * off, 1),
                fixed(100.0 * wider, 1),
                as_typed(100.0 * DEPARTS)
            )
        } else {
            format!("A first-order estimate agrees within {} %: {numbers}.", as_typed(100.0 * DEPARTS))
        })
    }
}
