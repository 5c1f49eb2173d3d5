//! The card of a sensitivity.

use super::sensitivity::{ChangedEnds, ChangedRange, Sensitivity, SensitivityInputs, SensitivityOutcome};
use super::vary::Vary;
use crate::card::{
    Card, ChartRow, Check, Column, Explain, Explanation, Figure, Formula, Item, Mark, Method, Reference, Role,
    RowChart, Step, Table,
};
use crate::error::Result;
use crate::units::{Pressure, fixed};
use crate::well::wall::limits::shown;
use crate::well::wall::method;
use crate::well::wall::range::{
    Ends, GovernedPressure, RecommendedRange, pushed_out_above, rule, rule_symbols, signed,
};

impl Explain for Sensitivity {
    const KIND: &'static str = "range-sensitivity";
    /// The ranges rest on iterations.
    const REPLAY_TOLERANCE: f64 = 1e-8;
    type Inputs = SensitivityInputs;
    type Outcome = SensitivityOutcome;

    fn compute(inputs: SensitivityInputs) -> Result<Self> {
        RecommendedRange::compute(inputs.range)?.sensitivity(&inputs.vary)
    }
    fn inputs(&self) -> SensitivityInputs {
        SensitivityInputs { range: self.range.inputs(), vary: self.vary.clone() }
    }
    fn outcome(&self) -> SensitivityOutcome {
        self.outcome.clone()
    }
    fn check(inputs: &SensitivityInputs, outcome: &SensitivityOutcome) -> Vec<Check> {
        super::check::check(inputs, outcome)
    }

    fn explain(&self) -> Explanation {
        let mut inputs = self.range.wall.items();
        inputs.extend(self.range.choices.items());
        inputs.extend(self.vary.iter().map(|vary| vary.item()));
        let mut results = self.range.end_items();
        for (largest, symbol, end) in [(self.largest(0), "Δp_b", "bottom"), (self.largest(1), "Δp_t", "top")] {
            results.extend(largest.map(|(vary, change)| {
                Item::computed(symbol, format!("largest change of the {end}, by {}", vary.symbol()), change)
            }));
        }
        Explanation {
            title: format!("One-at-a-time sensitivity of the range for {}", self.range.wall.place()),
            headline: self.headline(),
            inputs,
            results,
            method: self.method(),
            steps: self.steps(),
            figures: self.figures(),
            notes: self.notes(),
            topics: self.range.wall.topics(&["mud-weight", "limits", "uncertainty", "wall", "elastic"]),
        }
    }

    fn warnings(&self) -> Vec<String> {
        let lost = self.lost();
        if lost.is_empty() || self.range.is_empty() {
            return Vec::new();
        }
        vec![format!("With {} changed by its amount no range is left.", lost.join(", or with "))]
    }

    fn upstream(&self) -> Vec<Card> {
        let mut cards = self.range.upstream();
        cards.push(self.range.card());
        cards
    }
}

impl Sensitivity {
    /// The input that moves an end (0 bottom, 1 top) most, with the change.
    fn largest(&self, end: usize) -> Option<(Vary, Pressure)> {
        let changes = self.ranked().into_iter().filter_map(|(vary, row)| {
            let (bottom, top) = self.largest_changes(&row);
            Some((vary, if end == 0 { bottom } else { top }?))
        });
        changes
            .reduce(|a, b| if b.1.abs() > a.1.abs() { b } else { a })
            .filter(|(_, change)| change.abs() > Pressure::pa(1.0))
    }

    fn headline(&self) -> String {
        let said: Vec<String> = [(self.largest(0), "bottom"), (self.largest(1), "top")]
            .into_iter()
            .map(|(largest, end)| match largest {
                Some((vary, change)) => {
                    format!(
                        "the {end} moves most with {} ± {} (by {})",
                        vary.symbol(),
                        vary.shown(vary.by()),
                        change.abs()
                    )
                }
                None => format!("no input moves the {end}"),
            })
            .collect();
        let lost = self.lost();
        let lost = if lost.is_empty() { String::new() } else { format!("; {} can leave no range", lost.join(", ")) };
        format!("{}{lost}", said.join("; "))
    }

    /// The inputs that leave no range at one side.
    fn lost(&self) -> Vec<&'static str> {
        let empty = |ends: &ChangedEnds| match (ends.bottom, ends.top) {
            (Some(bottom), Some(top)) => bottom.pressure >= top.pressure,
            _ => true,
        };
        let rows = self.ranked();
        rows.iter().filter(|(_, row)| empty(&row.less) || empty(&row.more)).map(|(vary, _)| vary.symbol()).collect()
    }

    fn notes(&self) -> Vec<String> {
        let mut notes = Vec::new();
        let stress: Vec<&str> = self.vary.iter().filter_map(|vary| vary.on_stress()).collect();
        if !stress.is_empty() {
            notes.push(format!(
                "The geographic tensor is changed, whatever it was made of: {}. The rest of it stays.",
                stress.join("; ")
            ));
        }
        notes.extend(self.crossings());
        notes.extend(self.governs());
        notes.push("One input at a time, both ways, everything else as it stands: nothing here says how likely a change is, or what several do together. Inputs that hang together (S_Hmax found from breakouts with this very strength; stresses that follow the pore pressure) do not move alone.".to_owned());
        notes.push("The top is the computed one, without any raise by the engineer.".to_owned());
        notes.extend(method::notes(&self.range.wall));
        notes
    }

    /// Horizontal stresses that a change makes cross.
    fn crossings(&self) -> Vec<String> {
        let stress = self.range.wall.setup.inputs.stress;
        let [nn, ee, _, ne, ..] = stress.geographic().0;
        let apart = 2.0 * (0.5 * (nn - ee)).hypot(ne);
        let crosses = |vary: &&Vary| ["S_Hmax", "S_hmin"].contains(&vary.symbol()) && vary.by() > apart;
        let said = self.vary.iter().filter(crosses).map(|vary| {
            format!(
                "WARNING: {} changed by {} makes the two horizontal stresses exchange their places at one side.",
                vary.symbol(),
                vary.shown(vary.by())
            )
        });
        said.collect()
    }

    /// Where a change lets something else govern.
    fn governs(&self) -> Vec<String> {
        let mut said = Vec::new();
        for (vary, row) in self.ranked() {
            for (sign, ends) in [("−", row.less), ("+", row.more)] {
                for (name, base, now) in
                    [("bottom", self.outcome.bottom, ends.bottom), ("top", self.outcome.top, ends.top)]
                {
                    if let (Some(base), Some(now)) = (base, now)
                        && base.governed_by != now.governed_by
                    {
                        let (now, base) = (now.governed_by.short(), base.governed_by.short());
                        let by = vary.shown(vary.by());
                        said.push(format!(
                            "{} {sign} {by}: {now} governs the {name}, in place of {base}.",
                            vary.symbol()
                        ));
                    }
                }
            }
        }
        said
    }

    fn method(&self) -> Method {
        let mut method = method::with_strength(
            &self.range.wall,
            "Each input is made less and more by its stated amount, alone; the wall is built and the recommended range worked out again, with the same allowed width and margins.",
        );
        method.formulas.push(Formula::new("Delta p = p(x plus.minus Delta x) - p(x)", "Δp = p(x ± Δx) − p(x)"));
        method.formulas.extend(rule());
        method.symbols.extend(rule_symbols());
        method.references.push(Reference::new(
            "Saltelli, A. et al. (2008) Global Sensitivity Analysis: The Primer, Wiley, ch. 1–2 (one factor at a time, and what it leaves out; cited from memory)",
        ));
        method.assumptions.push(
            "The total stresses stay when the pore pressure alone is varied, and all else when any input is."
                .to_owned(),
        );
        method
    }

    fn steps(&self) -> Vec<Step> {
        let mut steps = vec![Step::Table { table: self.table() }, Step::Table { table: self.weights_table() }];
        steps.push(Step::words(
            "Each changed range from its limits; every limit is found as on the card of limits, with the changed input in place of the other:",
        ));
        steps.push(Step::Table { table: self.limits_table() });
        steps.push(Step::words("The larger change of each end that an input moves:"));
        for (vary, row) in self.ranked() {
            let ends = [
                ("p_b", self.outcome.bottom, row.less.bottom, row.more.bottom),
                ("p_t", self.outcome.top, row.less.top, row.more.top),
            ];
            for (symbol, base, less, more) in ends {
                let Some((sign, base, now)) = larger(base, less, more) else { continue };
                steps.push(Step::worked(format!(
                    "{} {sign} {}: Δ{symbol} = {} − {} = {} MPa",
                    vary.symbol(),
                    vary.shown(vary.by()),
                    fixed(now.in_mpa(), 4),
                    fixed(base.in_mpa(), 4),
                    signed((now - base).in_mpa(), 4)
                )));
            }
        }
        steps
    }

    /// "68 ± 4 MPa".
    fn input_words(vary: Vary, row: &ChangedRange) -> String {
        format!("{} ± {}", vary.shown(0.5 * (row.less.value + row.more.value)), vary.shown(vary.by()))
    }

    fn table(&self) -> Table {
        let cell = |end: Option<GovernedPressure>| {
            end.map_or_else(|| "none".to_owned(), |end| fixed(end.pressure.in_mpa(), 2))
        };
        let change = |change: Option<Pressure>| change.map_or_else(|| "–".to_owned(), |p| signed(p.in_mpa(), 2));
        let by = |base, less, more| larger(base, less, more).map_or("–", |(sign, ..)| sign).to_owned();
        let mut rows = vec![vec!["as recommended".to_owned(), String::new()]];
        if let Some(first) = rows.first_mut() {
            let (b, t) = (cell(self.outcome.bottom), cell(self.outcome.top));
            first.extend([b.clone(), b, t.clone(), t]);
            first.extend(vec!["–".to_owned(); 4]);
        }
        for (vary, row) in self.ranked() {
            let (bottom, top) = self.largest_changes(&row);
            rows.push(vec![
                vary.symbol().to_owned(),
                Sensitivity::input_words(vary, &row),
                cell(row.less.bottom),
                cell(row.more.bottom),
                cell(row.less.top),
                cell(row.more.top),
                change(bottom),
                by(self.outcome.bottom, row.less.bottom, row.more.bottom),
                change(top),
                by(self.outcome.top, row.less.top, row.more.top),
            ]);
        }
        Table {
            caption: "Ends of the range with one input less (−) and more (+), the largest effect first. Δ is the larger of the two changes, + where it lifts the end and − where it lowers it; beside it stands which way the input went. To the nearest, not rounded into the range".to_owned(),
            columns: vec![
                Column::text("input"),
                Column::text("value and amount"),
                Column::number("bottom, −", "MPa"),
                Column::number("bottom, +", "MPa"),
                Column::number("top, −", "MPa"),
                Column::number("top, +", "MPa"),
                Column::number("Δ bottom", "MPa"),
                Column::text("with"),
                Column::number("Δ top", "MPa"),
                Column::text("with"),
            ],
            rows,
        }
    }

    /// The larger changes as gradients and mud weights at the depth below the rotary table.
    fn weights_table(&self) -> Table {
        let tvd = self.range.choices.tvd_below_rotary;
        let cells = |change: Option<Pressure>| match change {
            Some(p) => [signed(p.gradient_over(tvd).in_mpa_per_km(), 2), signed(p.mud_weight_at(tvd).in_sg(), 3)],
            None => ["–".to_owned(), "–".to_owned()],
        };
        let rows = self.ranked().into_iter().map(|(vary, row)| {
            let (bottom, top) = self.largest_changes(&row);
            let mut line = vec![format!("{} ± {}", vary.symbol(), vary.shown(vary.by()))];
            line.extend(cells(bottom).into_iter().chain(cells(top)));
            line
        });
        Table {
            caption: "The larger change of each end, signed as above, as gradient and mud weight at TVD below rotary"
                .to_owned(),
            columns: vec![
                Column::text("input"),
                Column::number("Δ bottom", "MPa/km"),
                Column::number("Δ bottom", "sg"),
                Column::number("Δ top", "MPa/km"),
                Column::number("Δ top", "sg"),
            ],
            rows: rows.collect(),
        }
    }

    fn limits_table(&self) -> Table {
        let mut rows = Vec::new();
        for k in self.order() {
            let (Some(vary), Some(ends), Some(row)) = (self.vary.get(k), self.ends.get(k), self.outcome.rows.get(k))
            else {
                continue;
            };
            for (ends, changed) in ends.iter().zip([row.less, row.more]) {
                rows.push(limits_row(*vary, ends, &changed, self.range.choices.margin_bottom));
            }
        }
        Table {
            caption: "Limits behind each changed range".to_owned(),
            columns: vec![
                Column::text("input"),
                Column::text("p_ls at w"),
                Column::text("P_p + m_b"),
                Column::text("S_3"),
                Column::text("p_i"),
                Column::text("p_us"),
                Column::text("what governs"),
            ],
            rows,
        }
    }

    fn figures(&self) -> Vec<Figure> {
        let bottom = self.figure("bottom", self.outcome.bottom, |ends| ends.bottom);
        let top = self.figure("top", self.outcome.top, |ends| ends.top);
        bottom.into_iter().chain(top).collect()
    }

    /// Bars about an end as recommended, the longest first; inputs that do not move it are left out.
    fn figure(
        &self,
        name: &str,
        base: Option<GovernedPressure>,
        end: impl Fn(&ChangedEnds) -> Option<GovernedPressure>,
    ) -> Option<Figure> {
        let base = base?.pressure.in_mpa();
        let mut moved: Vec<(f64, ChartRow)> = Vec::new();
        let mut still = Vec::new();
        for (vary, row) in self.ranked() {
            let [less, more] = [end(&row.less), end(&row.more)].map(|end| end.map(|e| e.pressure.in_mpa()));
            let away = [less, more].into_iter().map(|p| p.map_or(f64::INFINITY, |p| (p - base).abs()));
            let away = away.fold(0.0_f64, f64::max);
            if away < 1e-6 {
                still.push(vary.symbol());
                continue;
            }
            let words = |p: Option<f64>| p.map_or_else(|| "none".to_owned(), |p| fixed(p, 2));
            let sides = [(Role::Second, Mark::Ring, less), (Role::First, Mark::Dot, more)];
            let known = sides.into_iter().filter_map(|(role, mark, p)| Some((role, mark, p?)));
            moved.push((
                away,
                ChartRow {
                    words: format!(
                        "{} {}: {} and {} MPa",
                        vary.symbol(),
                        Sensitivity::input_words(vary, &row),
                        words(less),
                        words(more)
                    ),
                    bars: known.clone().map(|(role, _, p)| (role, base, p)).collect(),
                    marks: known.collect(),
                },
            ));
        }
        moved.sort_by(|a, b| b.0.total_cmp(&a.0));
        if moved.is_empty() {
            return None;
        }
        let unmoved = if still.is_empty() { String::new() } else { format!(" Not moved by {}.", still.join(", ")) };
        let chart = RowChart {
            rows: moved.into_iter().map(|(_, row)| row).collect(),
            levels: vec![("as recommended".to_owned(), Role::Limit, base)],
            band: None,
        };
        Some(chart.figure(
            &format!("{name} of the range (MPa)"),
            format!(
                "How far each input by itself moves the {name} of the range: a ring where it is less by its amount, a dot where it is more.{unmoved}"
            ),
            &format!(
                "Bars about the {name} as recommended, {} MPa; each row with the input less and more.",
                fixed(base, 2)
            ),
        ))
    }
}

/// The larger of the two changes of an end: which way the input went, the end before and after; `None` where an
/// end is missing or does not move.
fn larger(
    base: Option<GovernedPressure>,
    less: Option<GovernedPressure>,
    more: Option<GovernedPressure>,
) -> Option<(&'static str, Pressure, Pressure)> {
    let [base, less, more] = [base?, less?, more?].map(|end| end.pressure);
    let (sign, now) = if (more - base).abs() > (less - base).abs() { ("+", more) } else { ("−", less) };
    ((now - base).abs() > Pressure::pa(1.0)).then_some((sign, base, now))
}

fn limits_row(vary: Vary, ends: &Ends, changed: &ChangedEnds, margin: Pressure) -> Vec<String> {
    let limits = &ends.limits;
    let governs = |end: Option<GovernedPressure>| end.map_or("no safe pressure", |end| end.governed_by.short());
    let balance = limits.pore_pressure.pressure().unwrap_or_default() + margin;
    vec![
        format!("{} = {}", vary.symbol(), vary.shown(changed.value)),
        shown(&limits.lower_shear),
        balance.to_string(),
        shown(&limits.least_stress),
        shown(&limits.initiation),
        pushed_out_above(&limits.upper_shear).map_or_else(|| shown(&limits.upper_shear), |p| p.to_string()),
        format!("{} / {}", governs(changed.bottom), governs(changed.top)),
    ]
}
