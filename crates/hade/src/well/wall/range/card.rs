//! The card of a recommended range.

use super::ends::{RangeEnd, pushed_out_above};
use super::parts::{end_cells, end_item, pressure_columns, rule, rule_symbols};
use super::recommended::{RangeChoices, RangeInputs, RangeOutcome, RecommendedRange};
use crate::card::{
    Axis, Card, Check, Column, Explain, Explanation, Figure, Formula, Item, Layer, Mark, Reference, Role, Step, Table,
};
use crate::error::Result;
use crate::stress::doubts_of_overburden;
use crate::units::{Angle, GRAVITY, Pressure, Quantity, as_typed, fixed, with_typed_unit};
use crate::well::wall::limits::shown;
use crate::well::wall::{Wall, method};

impl Explain for RecommendedRange {
    const KIND: &'static str = "recommended-range";
    /// The search for an allowed width rests on iterations.
    const REPLAY_TOLERANCE: f64 = 1e-8;
    type Inputs = RangeInputs;
    type Outcome = RangeOutcome;

    fn compute(inputs: RangeInputs) -> Result<Self> {
        let range = Wall::of(inputs.wall)?.recommended(inputs.choices)?;
        inputs.raised.map_or(Ok(range), |raised| range.raised_to(raised.top(), raised.reason()))
    }
    fn inputs(&self) -> RangeInputs {
        RangeInputs { wall: self.wall.setup, choices: self.choices, raised: self.raised }
    }
    fn outcome(&self) -> RangeOutcome {
        RangeOutcome {
            bottom: self.bottom,
            top: self.top,
            computed_top: self.computed_top.filter(|_| self.raised.is_some()),
            at_widths: self.at_widths,
            least_bad: self.least_bad(),
            breadth: self.breadth(),
        }
    }

    fn check(inputs: &RangeInputs, outcome: &RangeOutcome) -> Vec<Check> {
        super::check::check(inputs, outcome)
    }

    fn explain(&self) -> Explanation {
        let mut inputs = self.wall.items();
        inputs.extend(self.choices.items());
        if let Some(raised) = self.raised {
            inputs.push(Item::typed("p_r", "top, raised by the engineer", raised.top).chosen());
            inputs.push(Item::choice("", "reason for the raised top", raised.reason()));
        }
        let mut results = Vec::new();
        for (end, at, name) in [(self.bottom, "b", "bottom"), (self.top, "t", "top")] {
            let Some(end) = end else { continue };
            results.extend([
                end_item(end, &format!("p_{at}"), format!("{name} of the recommended range"), end.pressure, 2),
                end_item(end, &format!("g_{at}"), format!("{name}, gradient from the rotary table"), end.gradient, 2),
                end_item(end, &format!("ρ_{at}"), format!("{name}, mud weight at TVD below rotary"), end.mud_weight, 3),
            ]);
        }
        let mut method = method::with_strength(
            &self.wall,
            "The limits of the wall, with the width of failing arc that is allowed and the margins that were chosen. Pressure, mean gradient and static mud weight refer to true vertical depth below the rotary table.",
        );
        method.formulas.extend(rule());
        method.symbols.extend(rule_symbols());
        method.formulas.push(Formula::new("rho = p / (g \"TVD\")", "ρ = p / (g TVD)"));
        method.references.push(Reference::new(
            "Zoback, M.D. (2007) Reservoir Geomechanics, Cambridge University Press, ch. 10 (mud weights from limits of the wall)",
        ));
        Explanation {
            title: format!("Recommended range of pressure for {}{}", self.wall.place(), self.raised_words()),
            headline: self.headline(),
            inputs,
            results,
            method,
            steps: self.steps(),
            figures: vec![self.figure()],
            notes: self.notes(),
            topics: self.wall.topics(&["mud-weight", "limits", "breakout", "wall", "elastic"]),
        }
    }

    fn warnings(&self) -> Vec<String> {
        let mut said = Vec::new();
        if self.is_empty() {
            said.push("The range is empty: with these choices no mud weight is recommended. Change the hole's direction, the allowed width or a margin, or better the inputs; each is the engineer's decision.".to_owned());
        }
        said.extend(self.raised_past());
        said.extend(self.wall.setup.inputs.rock.doubts());
        said.extend(doubts_of_overburden(&[(self.choices.tvd_below_rotary, self.wall.vertical_stress())]));
        said
    }

    fn upstream(&self) -> Vec<Card> {
        self.wall.upstream()
    }
}

impl RangeChoices {
    /// The choices and the depth as inputs of a card.
    pub(crate) fn items(&self) -> [Item; 4] {
        [
            Item::typed("TVD", "true vertical depth below the rotary table", self.tvd_below_rotary),
            Item::typed("w", "allowed width of a failing arc, per lobe", self.allowed_width).chosen(),
            Item::typed("m_b", "margin over the pore pressure at the bottom", self.margin_bottom).chosen(),
            Item::typed("m_t", "margin under the lowest upper limit at the top", self.margin_top).chosen(),
        ]
    }
}

impl RecommendedRange {
    /// The pressures of both ends, as far as they are there, as results or inputs.
    pub(crate) fn end_items(&self) -> Vec<Item> {
        let item = |end: RangeEnd, symbol: &str, name: &str| end_item(end, symbol, name.to_owned(), end.pressure, 2);
        let bottom = self.bottom.map(|end| item(end, "p_b", "bottom of the recommended range"));
        let top = self.top.map(|end| item(end, "p_t", "top of the recommended range"));
        bottom.into_iter().chain(top).collect()
    }

    /// ", top raised", for titles.
    pub(super) fn raised_words(&self) -> &'static str {
        if self.raised.is_some() { ", top raised" } else { "" }
    }

    pub(super) fn headline(&self) -> String {
        match (self.bottom, self.top) {
            (Some(bottom), Some(top)) if self.is_empty() => {
                format!("no range: the bottom {} is not below the top {}", bottom.words(), top.words())
            }
            (Some(bottom), Some(top)) => format!("{} to {}", bottom.words(), top.words()),
            (None, _) => "no range: no pressure keeps failing arcs within the allowed width".to_owned(),
            (Some(_), None) => "no range: no pressure is safe against parting or shear at the top".to_owned(),
        }
    }

    fn notes(&self) -> Vec<String> {
        let mut notes = Vec::new();
        if let Some(bottom) = self.bottom {
            notes.push(format!("At the bottom {}.", bottom.governed_by.words()));
        }
        if let Some(top) = self.top {
            notes.push(format!("At the top {}.", top.governed_by.words()));
        }
        notes.extend(self.raised_notes());
        if let Some(least) = self.least_bad() {
            notes.push(format!("The least bad pressure in shear is {least}; arcs wider than allowed fail at it."));
        }
        if self.limits.initiation.pressure().is_none() {
            notes.push("At no pressure is the wall safe from both parting and spalling.".to_owned());
        }
        if self.limits.upper_shear.pressure().is_none() && !self.limits.upper_shear.is_unbounded() {
            notes.push("At no pressure is the whole wall within its shear strength.".to_owned());
            if !self.is_empty() {
                notes.push(
                    "In the range nothing is pushed out, and what fails by closing in stays within the allowed width."
                        .to_owned(),
                );
            }
        }
        notes.push(
            "Hold static density less swab against the bottom, and circulating density and surge against the top."
                .to_owned(),
        );
        notes.extend(method::notes(&self.wall));
        notes
    }

    fn steps(&self) -> Vec<Step> {
        let c = &self.choices;
        let mut steps = self.wall.strength().steps();
        let mpa = |p: Pressure| fixed(p.in_mpa(), 4);
        let governs = |end: Option<RangeEnd>| end.map(|end| end.governed_by);
        steps.extend(self.limits.worked_ends(governs(self.bottom), governs(self.computed_top)));
        steps.push(Step::worked(format!(
            "p_b: lower shear limit at {}° = {}; P_p + m_b = {} + {} = {} MPa",
            as_typed(c.allowed_width.in_deg()),
            shown(&self.limits.lower_shear),
            mpa(self.wall.setup.inputs.pore),
            mpa(c.margin_bottom),
            mpa(self.wall.setup.inputs.pore + c.margin_bottom)
        )));
        steps.push(Step::worked(format!(
            "p_t: S_3 = {}, p_i = {}, p_us = {}; the lowest less m_t = {}",
            shown(&self.limits.least_stress),
            shown(&self.limits.initiation),
            pushed_out_above(&self.limits.upper_shear)
                .map_or_else(|| shown(&self.limits.upper_shear), |p| p.to_string()),
            with_typed_unit(c.margin_top)
        )));
        if let (Some(raised), Some(computed)) = (self.raised, self.computed_top) {
            steps.push(Step::worked(format!(
                "the computed top {} is raised by the engineer to p_t = {} MPa",
                computed.pressure,
                mpa(raised.top)
            )));
        }
        for (end, name) in [(self.bottom, "bottom"), (self.top, "top")] {
            let Some(end) = end else { continue };
            steps.push(Step::worked(format!(
                "{name}: ρ = {} · 10⁶ / ({GRAVITY} · {}) = {} kg/m³ = {}",
                mpa(end.pressure),
                as_typed(c.tvd_below_rotary.in_m()),
                fixed(end.mud_weight.in_kg_m3(), 2),
                end.mud_weight
            )));
        }
        steps.push(Step::Table { table: self.ends_table() });
        steps.push(Step::Table { table: self.widths_table() });
        steps
    }

    fn ends_table(&self) -> Table {
        let row = |name: &str, end: Option<RangeEnd>| {
            let Some(end) = end else {
                return vec![
                    name.to_owned(),
                    "none".to_owned(),
                    "–".to_owned(),
                    "–".to_owned(),
                    "no pressure is safe".to_owned(),
                ];
            };
            let [pressure, gradient, weight] = end_cells(end);
            vec![name.to_owned(), pressure, gradient, weight, end.governed_by.words().to_owned()]
        };
        let [pressure, gradient, weight] = pressure_columns();
        Table {
            caption: if self.is_empty() {
                "Recommended range: EMPTY with these choices".to_owned()
            } else {
                "Recommended range; its ends are rounded into it, the bottom up and the top down".to_owned()
            },
            columns: vec![Column::text("end"), pressure, gradient, weight, Column::text("what governs")],
            rows: vec![row("top", self.top), row("bottom", self.bottom)],
        }
    }

    fn widths_table(&self) -> Table {
        let tvd = self.choices.tvd_below_rotary;
        let mut rows: Vec<(Angle, Option<Pressure>)> = self.lower_shear_at_widths().to_vec();
        let unbounded =
            |width: Angle| self.wall.limits_at_width(width).is_ok_and(|limits| limits.lower_shear.is_unbounded());
        let chosen = self.choices.allowed_width;
        if !rows.iter().any(|(width, _)| *width == chosen) {
            rows.push((chosen, self.limits.lower_shear.pressure()));
            rows.sort_by(|a, b| a.0.si().total_cmp(&b.0.si()));
        }
        let cells = |width: Angle, p: Option<Pressure>| match p {
            Some(p) => [
                fixed(p.in_mpa(), 2),
                fixed(p.gradient_over(tvd).in_mpa_per_km(), 2),
                fixed(p.mud_weight_at(tvd).in_sg(), 3),
            ],
            None => [if unbounded(width) { "any holds" } else { "none" }.to_owned(), "–".to_owned(), "–".to_owned()],
        };
        let [pressure, gradient, weight] = pressure_columns();
        Table {
            caption: "Lower shear limit at widths of failing arc, per lobe".to_owned(),
            columns: vec![Column::number("width", "°"), pressure, gradient, weight, Column::text("choice")],
            rows: rows
                .into_iter()
                .map(|(width, p)| {
                    let [a, b, c] = cells(width, p);
                    let mark = if width == chosen { "allowed" } else { "" };
                    vec![as_typed(width.in_deg()), a, b, c, mark.to_owned()]
                })
                .collect(),
        }
    }

    /// Pressure against allowed width: the lower limit as a curve, the others as levels, the range
    /// as a band.
    fn figure(&self) -> Figure {
        let wall = &self.wall;
        let curve: Vec<[f64; 2]> = (0..=18)
            .map(|k| f64::from(k) * 5.0)
            .filter_map(|degrees| {
                let at = wall.limits_at_width(Angle::deg(degrees)).ok()?;
                Some([degrees, at.lower_shear.pressure()?.in_mpa()])
            })
            .collect();
        let mut levels = vec![("P_p", Role::Quiet, wall.setup.inputs.pore.in_mpa())];
        for (limit, label, role) in [
            (self.limits.least_stress, "S_3", Role::Second),
            (self.limits.initiation, "initiation", Role::Third),
            (self.limits.upper_shear, "upper shear", Role::Fourth),
        ] {
            if let Some(p) = pushed_out_above(&limit) {
                levels.push((label, role, p.in_mpa()));
            }
        }
        let (mut low, mut high) = (f64::INFINITY, f64::NEG_INFINITY);
        for y in curve.iter().map(|[_, y]| *y).chain(levels.iter().map(|(.., y)| *y)) {
            low = low.min(y);
            high = high.max(y);
        }
        let room = 0.08 * (high - low).max(1.0);
        let mut layers = Vec::new();
        if let (Some(bottom), Some(top), false) = (self.bottom, self.top, self.is_empty()) {
            layers.push(Layer::RowBand {
                label: "recommended".to_owned(),
                role: Role::Range,
                from: bottom.pressure.in_mpa(),
                to: top.pressure.in_mpa(),
            });
        }
        for (label, role, y) in levels {
            layers.push(Layer::line(label, role, [[0.0, y], [90.0, y]]));
        }
        if !curve.is_empty() {
            layers.push(Layer::line("lower shear", Role::First, curve));
        }
        let allowed = self.choices.allowed_width.in_deg();
        if let Some(p) = self.limits.lower_shear.pressure().filter(|_| allowed <= 90.0) {
            layers.push(Layer::Points {
                label: "allowed".to_owned(),
                role: Role::Limit,
                mark: Mark::Dot,
                points: vec![[allowed, p.in_mpa()]],
            });
        }
        Figure {
            caption: "Limits of pressure in the hole against the allowed width of a failing arc; the band is the recommended range.".to_owned(),
            alt: format!(
                "Lower shear limit falling with allowed width, other limits as level lines. {}.",
                self.headline()
            ),
            x: Axis::new("allowed width of a failing arc (°)", 0.0, 90.0).ticks_every(30.0),
            y: Axis::new("pressure in the hole (MPa)", low - room, high + room),
            equal_scale: false,
            layers,
        }
    }
}
