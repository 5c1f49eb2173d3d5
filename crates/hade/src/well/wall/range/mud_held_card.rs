//! The card of a mud held against a recommended range.

use super::ends::pushed_out_above;
use super::mud_held::{HeldInputs, HeldOutcome, HeldPressure, MudHeld, MudState, check};
use super::parts::pressure_columns;
use super::recommended::RecommendedRange;
use crate::card::{
    Card, ChartRow, Check, Column, Explain, Explanation, Figure, Formula, Item, Mark, Method, Reference, Role,
    RowChart, Step, Table,
};
use crate::error::Result;
use crate::units::{Density, GRAVITY, Pressure, Quantity, as_typed, fixed, with_typed_unit};
use crate::well::wall::limits::capitalised;
use crate::well::wall::{direction, method};

impl Explain for MudHeld {
    const KIND: &'static str = "mud-held-against-range";
    /// The range rests on iterations.
    const REPLAY_TOLERANCE: f64 = 1e-8;
    type Inputs = HeldInputs;
    type Outcome = HeldOutcome;

    fn compute(inputs: HeldInputs) -> Result<Self> {
        RecommendedRange::compute(inputs.range)?.hold(inputs.plan)
    }
    fn inputs(&self) -> HeldInputs {
        HeldInputs { range: self.range.inputs(), plan: self.plan }
    }
    fn outcome(&self) -> HeldOutcome {
        self.outcome_now()
    }
    fn check(inputs: &HeldInputs, outcome: &HeldOutcome) -> Vec<Check> {
        check(inputs, outcome)
    }

    fn explain(&self) -> Explanation {
        let plan = self.plan;
        let mut inputs = vec![Item::typed("ρ_m", "static mud weight", plan.static_density)];
        inputs.extend(plan.swab.map(|p| Item::typed("Δp_sw", "swab: what pulling pipe takes", p)));
        inputs.extend(plan.circulating_density.map(|d| Item::typed("ρ_c", "equivalent circulating density", d)));
        inputs.extend(plan.surge.map(|p| Item::typed("Δp_su", "surge: what running pipe adds", p)));
        inputs.extend(self.range.end_items());
        inputs.extend(self.range.wall.items());
        inputs.extend(self.range.choices.items());
        let mut results = Vec::new();
        for held in self.held.iter().flatten() {
            let (symbol, name) = (symbol(held.state), held.state.words());
            results.extend([
                Item::computed(&format!("p_{symbol}"), format!("pressure, {name}"), held.pressure),
                Item::computed(&format!("g_{symbol}"), format!("gradient, {name}"), held.gradient),
                Item::computed(&format!("ρ_e{symbol}"), format!("equivalent mud weight, {name}"), held.mud_weight),
            ]);
        }
        Explanation {
            title: format!(
                "Mud of {} held against the recommended range for {}{}",
                with_typed_unit(plan.static_density),
                self.range.wall.place(),
                self.range.raised_words()
            ),
            headline: self.headline(),
            inputs,
            results,
            method: self.method(),
            steps: self.steps(),
            figures: vec![self.figure()],
            notes: self.notes(),
            topics: self.range.wall.topics(&["mud-weight", "limits", "breakout", "wall", "elastic"]),
        }
    }

    fn warnings(&self) -> Vec<String> {
        let outside = |held: &&HeldPressure| !held.is_inside();
        let mut said: Vec<String> = self.held.iter().flatten().filter(outside).map(stands).collect();
        for state in self.not_stated() {
            let end = if state == MudState::Swabbed { "bottom" } else { "top" };
            said.push(format!(
                "{} is not stated, so nothing of it was held against the {end}.",
                capitalised(not_stated(state))
            ));
        }
        if self.range.is_empty() {
            said.push(format!("The range is empty: {}.", self.range.headline()));
        }
        if self.arcs.widest().is_some_and(|arc| arc.whole_wall) {
            said.push("At rest the whole wall fails in shear.".to_owned());
        }
        said
    }

    fn upstream(&self) -> Vec<Card> {
        let mut cards = self.range.upstream();
        cards.push(self.range.card());
        cards
    }
}

/// "Static (30.00 MPa): 1.00 MPa above the bottom; 2.00 MPa below the top."
fn stands(held: &HeldPressure) -> String {
    format!("{} ({}): {}.", capitalised(held.state.words()), held.pressure, verdict(held))
}

/// The subscript of a state's pressure.
fn symbol(state: MudState) -> &'static str {
    match state {
        MudState::Static => "m",
        MudState::Swabbed => "sw",
        MudState::Circulating => "c",
        MudState::Surged => "su",
    }
}

/// How a pressure stands to the ends it is held against, in words.
fn verdict(held: &HeldPressure) -> String {
    let [bottom, top] = held.state.held_against();
    let slack = Pressure::from_si(1e-9 * held.pressure.si().abs());
    let stands = |margin: Option<Pressure>, inside: &str, outside: &str, end: &str| match margin {
        None => format!("OUTSIDE: there is no {end}"),
        Some(margin) if margin < -slack => format!("OUTSIDE: {} {outside} the {end}", -margin),
        Some(margin) if margin.abs() <= slack => format!("at the {end}"),
        Some(margin) => format!("{margin} {inside} the {end}"),
    };
    let mut said = Vec::new();
    if bottom {
        said.push(stands(held.above_bottom, "above", "below", "bottom"));
    }
    if top {
        said.push(stands(held.below_top, "below", "above", "top"));
    }
    said.join("; ")
}

impl MudHeld {
    fn headline(&self) -> String {
        let density = with_typed_unit(self.plan.static_density);
        if self.range.is_empty() {
            return format!("the mud of {density} cannot be inside: with these choices there is no range");
        }
        let outside: Vec<String> = self
            .held
            .iter()
            .flatten()
            .filter(|held| !held.is_inside())
            .map(|held| format!("{} {}", held.state.words(), verdict(held)))
            .collect();
        if !outside.is_empty() {
            return format!("the mud of {density} leaves the range: {}", outside.join("; "));
        }
        let missing = self.not_stated();
        if missing.is_empty() {
            return format!("the mud of {density} stays inside the range, static, swabbed, circulating and surged");
        }
        let missing: Vec<&str> = missing.into_iter().map(not_stated).collect();
        format!("the mud of {density} is inside the range as far as stated; {} not stated", missing.join(", "))
    }

    fn notes(&self) -> Vec<String> {
        let inside = |held: &&HeldPressure| held.is_inside();
        let mut notes: Vec<String> = self.held.iter().flatten().filter(inside).map(stands).collect();
        let ends = [(self.range.bottom, "bottom"), (self.range.top, "top")];
        notes.extend(ends.into_iter().filter_map(|(end, name)| {
            let end = end?;
            Some(format!("At the {name}, {}, {}.", end.words(), end.governed_by.words()))
        }));
        notes.extend(self.range.raised_notes());
        let allowed = with_typed_unit(self.range.choices.allowed_width);
        notes.extend(match self.arcs.widest() {
            None => Some("At rest the mud keeps the whole wall within its shear strength.".to_owned()),
            Some(arc) if arc.whole_wall => None,
            Some(arc) => Some(format!(
                "At rest arcs of up to {} fail in shear, {} the allowed {allowed}: middle at tool face {}, and at +180°.",
                arc.width,
                if arc.width <= self.range.choices.allowed_width { "within" } else { "WIDER than" },
                direction::words(self.range.wall.attitude, arc.centre)
            )),
        });
        notes.extend(method::notes(&self.range.wall));
        notes
    }

    fn method(&self) -> Method {
        Method {
            words: "Static density less swab is held against the bottom of the range, circulating density and surge against the top; the mud at rest is held against both. All refer to true vertical depth below the rotary table.".to_owned(),
            formulas: vec![
                Formula::new("p_upright(m) = rho_upright(m) g \"TVD\"", "p_m = ρ_m g TVD"),
                Formula::new("p_upright(s w) = p_upright(m) - Delta p_upright(s w)", "p_sw = p_m − Δp_sw"),
                Formula::new("p_upright(c) = rho_upright(c) g \"TVD\"", "p_c = ρ_c g TVD"),
                Formula::new("p_upright(s u) = p_upright(m) + Delta p_upright(s u)", "p_su = p_m + Δp_su"),
            ],
            symbols: vec![("g".to_owned(), format!("standard gravity, {GRAVITY} m/s²"))],
            references: vec![
                Reference::new("NIST Special Publication 811 (2008), appendix B.8 (units and standard gravity)"),
                Reference::new(
                    "Bourgoyne, A.T., Millheim, K.K., Chenevert, M.E. and Young, F.S. (1986) Applied Drilling Engineering, SPE Textbook Series 2, ch. 4 (equivalent density, surge and swab; cited from memory)",
                ),
            ],
            assumptions: vec![
                "Swab, circulating density and surge are those at this depth, as stated; they are not computed here.".to_owned(),
                "The mud's density is uniform over the column; temperature and compressibility are left out.".to_owned(),
            ],
        }
    }

    fn steps(&self) -> Vec<Step> {
        let tvd = as_typed(self.range.choices.tvd_below_rotary.in_m());
        let mpa = |p: Pressure| fixed(p.in_mpa(), 4);
        let column = |d: Density, p: Pressure| {
            format!("{} kg/m³ · {GRAVITY} m/s² · {tvd} m = {} MPa", as_typed(d.in_kg_m3()), mpa(p))
        };
        let still = self.held.iter().flatten().next().map_or(Pressure::default(), |held| held.pressure);
        let mut steps = Vec::new();
        for held in self.held.iter().flatten() {
            let p = held.pressure;
            steps.push(Step::worked(match held.state {
                MudState::Static => format!("p_m = {}", column(self.plan.static_density, p)),
                MudState::Circulating => {
                    format!("p_c = {}", column(self.plan.circulating_density.unwrap_or_default(), p))
                }
                MudState::Swabbed => {
                    format!("p_sw = {} − {} = {} MPa", mpa(still), mpa(self.plan.swab.unwrap_or_default()), mpa(p))
                }
                MudState::Surged => {
                    format!("p_su = {} + {} = {} MPa", mpa(still), mpa(self.plan.surge.unwrap_or_default()), mpa(p))
                }
            }));
        }
        steps.push(Step::Table { table: self.table() });
        steps
    }

    fn table(&self) -> Table {
        let left = |p: Option<Pressure>| p.map_or_else(|| "–".to_owned(), |p| fixed(p.in_mpa(), 2));
        let mut rows = Vec::new();
        for (state, held) in MudState::ALL.into_iter().zip(self.held) {
            let Some(held) = held else {
                let mut row = vec![state.words().to_owned()];
                row.extend(vec!["–".to_owned(); 5]);
                row.push("not stated".to_owned());
                rows.push(row);
                continue;
            };
            rows.push(vec![
                state.words().to_owned(),
                fixed(held.pressure.in_mpa(), 2),
                fixed(held.gradient.in_mpa_per_km(), 2),
                fixed(held.mud_weight.in_sg(), 3),
                left(held.above_bottom),
                left(held.below_top),
                if held.is_inside() { "inside" } else { "OUTSIDE" }.to_owned(),
            ]);
        }
        let [pressure, gradient, weight] = pressure_columns();
        Table {
            caption: "Pressures of the mud and what is left to either end of the range".to_owned(),
            columns: vec![
                Column::text("mud"),
                pressure,
                gradient,
                weight,
                Column::number("above the bottom", "MPa"),
                Column::number("below the top", "MPa"),
                Column::text("range"),
            ],
            rows,
        }
    }

    /// The pressures as marks over the range as a band.
    fn figure(&self) -> Figure {
        let limits = self.range.limits;
        let rows = MudState::ALL.into_iter().zip(self.held).map(|(state, held)| match held {
            None => ChartRow { words: format!("{}: not stated", state.words()), ..ChartRow::default() },
            Some(held) => ChartRow {
                words: format!("{} {} ({})", state.words(), held.pressure, held.mud_weight),
                bars: Vec::new(),
                marks: vec![if held.is_inside() {
                    (Role::First, Mark::Dot, held.pressure.in_mpa())
                } else {
                    (Role::Failing, Mark::Cross, held.pressure.in_mpa())
                }],
            },
        });
        let mut levels = vec![("P_p".to_owned(), Role::Quiet, self.range.wall.pore().in_mpa())];
        for (pressure, name, role) in [
            (limits.lower_shear.pressure(), "lower shear", Role::First),
            (limits.least_stress.pressure(), "S_3", Role::Second),
            (limits.initiation.pressure(), "initiation", Role::Third),
            (pushed_out_above(&limits.upper_shear), "upper shear", Role::Fourth),
        ] {
            levels.extend(pressure.map(|p| (name.to_owned(), role, p.in_mpa())));
        }
        let band = match (self.range.bottom, self.range.top) {
            (Some(b), Some(t)) if !self.range.is_empty() => {
                Some(("recommended".to_owned(), b.pressure.in_mpa(), t.pressure.in_mpa()))
            }
            _ => None,
        };
        RowChart { rows: rows.collect(), levels, band }.figure(
            "pressure in the hole (MPa)",
            "Pressures of the mud over the recommended range (band); a cross leaves the range.".to_owned(),
            &format!("Marks over the range. {}.", self.headline()),
        )
    }
}

/// What a plan calls the state that it does not state.
fn not_stated(state: MudState) -> &'static str {
    match state {
        MudState::Static => "static density",
        MudState::Swabbed => "swab",
        MudState::Circulating => "circulating density",
        MudState::Surged => "surge",
    }
}
