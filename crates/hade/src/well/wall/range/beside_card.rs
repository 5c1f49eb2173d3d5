//! The card of ranges beside each other.

use super::beside::{BesideInputs, BesideOutcome, RangeBeside, RangesBeside, check, words};
use super::ends::{GovernedPressure, Governs, RangeEnd};
use super::parts::{end_cells, end_item, pressure_columns, rule, rule_symbols, signed};
use super::recommended::RecommendedRange;
use crate::card::{Card, ChartRow, Check, Column, Explain, Explanation, Figure, Method, Role, RowChart, Step, Table};
use crate::error::Result;
use crate::units::Pressure;
use crate::well::wall::{direction, method};

impl Explain for RangesBeside {
    const KIND: &'static str = "ranges-beside";
    /// The ranges rest on iterations.
    const REPLAY_TOLERANCE: f64 = 1e-8;
    type Inputs = BesideInputs;
    type Outcome = BesideOutcome;

    fn compute(inputs: BesideInputs) -> Result<Self> {
        RecommendedRange::compute(inputs.range)?.beside(&inputs.alternatives)
    }
    fn inputs(&self) -> BesideInputs {
        BesideInputs { range: self.range.inputs(), alternatives: self.alternatives.clone() }
    }
    fn outcome(&self) -> BesideOutcome {
        self.outcome.clone()
    }
    fn check(inputs: &BesideInputs, outcome: &BesideOutcome) -> Vec<Check> {
        check(inputs, outcome)
    }

    fn explain(&self) -> Explanation {
        let mut inputs = self.range.wall.items();
        for item in self.alternatives.iter().flat_map(|a| a.items()) {
            // The same number of the same rock stands once.
            if !inputs.iter().any(|known| known.symbol == item.symbol && known.same_value(&item)) {
                inputs.push(item);
            }
        }
        inputs.extend(self.range.choices.items());
        let mut results = Vec::new();
        for (n, row) in (1..).zip(&self.outcome.rows) {
            for (end, at, name) in [(row.bottom, "b", "bottom"), (row.top, "t", "top")] {
                results.extend(end.map(|end| {
                    let name = format!("{name} of range {n}");
                    end_item(self.end(end), &format!("p_{at}{n}"), name, end.pressure, 2)
                }));
            }
        }
        let [highest, lowest] = self.innermost();
        for (end, symbol, name) in [(highest, "p_b*", "highest bottom of all"), (lowest, "p_t*", "lowest top of all")] {
            results.extend(end.map(|end| end_item(end, symbol, name.to_owned(), end.pressure, 2)));
        }
        Explanation {
            title: format!("Ranges by other criteria and walls beside that for {}", self.range.wall.place()),
            headline: self.headline(),
            inputs,
            results,
            method: self.method(),
            steps: self.steps(),
            figures: vec![self.figure()],
            notes: self.notes(),
            topics: self.topics(),
        }
    }

    fn upstream(&self) -> Vec<Card> {
        let mut cards = self.range.upstream();
        cards.push(self.range.card());
        cards
    }
}

impl RangesBeside {
    fn end(&self, end: GovernedPressure) -> RangeEnd {
        RangeEnd::new(end.pressure, end.governed_by, &self.range.choices)
    }

    /// The highest bottom and the lowest top of all, as the ends of the ranges they are.
    fn innermost(&self) -> [Option<RangeEnd>; 2] {
        let of = |stated: Option<Pressure>, ends: Vec<Option<GovernedPressure>>| {
            let found = ends.into_iter().flatten().find(|end| Some(end.pressure) == stated);
            found.map(|end| self.end(end))
        };
        let rows = &self.outcome.rows;
        [
            of(self.outcome.highest_bottom, rows.iter().map(|row| row.bottom).collect()),
            of(self.outcome.lowest_top, rows.iter().map(|row| row.top).collect()),
        ]
    }

    /// "40.18 to 48.00 MPa" or "no range".
    fn row_words(&self, row: &RangeBeside) -> String {
        match (row.bottom, row.top) {
            (Some(b), Some(t)) if !row.is_empty() => {
                let (b, t) = (self.end(b), self.end(t));
                format!("{} to {}", b.inward(b.pressure, 2), t.inward(t.pressure, 2))
            }
            (None, _) => "no range, as no pressure keeps failing arcs within the allowed width".to_owned(),
            (_, None) => "no range, as no pressure is safe at the top".to_owned(),
            _ => "no range, as the bottom is not below the top".to_owned(),
        }
    }

    fn headline(&self) -> String {
        let tightest = self.tightest();
        let (Some(row), Some(wall)) = (self.outcome.rows.get(tightest), self.walls.get(tightest)) else {
            return String::new();
        };
        let shared = match (self.shared(), self.innermost()) {
            (Some(_), [Some(b), Some(t)]) => {
                format!("all share {} to {}", b.inward(b.pressure, 2), t.inward(t.pressure, 2))
            }
            _ => "they share no pressure".to_owned(),
        };
        format!("tightest is {}: {}; {shared}", words(wall), self.row_words(row))
    }

    fn topics(&self) -> Vec<String> {
        let mut topics = self.range.wall.topics(&["mud-weight", "limits", "breakout", "wall", "elastic", "strength"]);
        for topic in self.walls.iter().flat_map(|wall| wall.topics(&[])) {
            if !topics.contains(&topic) {
                topics.push(topic);
            }
        }
        topics
    }

    fn method(&self) -> Method {
        let mut method = method::with_strength(
            &self.range.wall,
            "The recommended range is worked out again with the same stress, pore pressure, allowed width and margins, by another criterion of strength or with another model of the wall, one thing changed at a time. Formulas, sources and assumptions of all of them stand here together.",
        );
        // What not every range assumes is said of those that do.
        let others: Vec<Method> = self.walls.iter().skip(1).map(|wall| method::with_strength(wall, "")).collect();
        for assumption in &mut method.assumptions {
            if !others.iter().all(|other| other.assumptions.contains(assumption)) {
                *assumption = format!("{}: {assumption}", words(&self.range.wall));
            }
        }
        for (wall, other) in self.walls.iter().skip(1).zip(others) {
            for symbol in other.symbols {
                if !method.symbols.contains(&symbol) {
                    method.symbols.push(symbol);
                }
            }
            for formula in other.formulas {
                if !method.formulas.contains(&formula) {
                    method.formulas.push(formula);
                }
            }
            for reference in other.references {
                if !method.references.contains(&reference) {
                    method.references.push(reference);
                }
            }
            for assumption in other.assumptions {
                if !method.assumptions.contains(&assumption) {
                    method.assumptions.push(format!("{}: {assumption}", words(wall)));
                }
            }
        }
        method.formulas.extend(rule());
        method.symbols.extend(rule_symbols());
        method
    }

    fn notes(&self) -> Vec<String> {
        let tightest = self.tightest();
        let mut notes = Vec::new();
        for (k, (row, wall)) in self.outcome.rows.iter().zip(&self.walls).enumerate() {
            let mark = match k {
                _ if k == tightest => " This is the tightest.",
                _ => "",
            };
            let what = if k == 0 { "the recommended range, " } else { "" };
            notes.push(format!("Range {}, {what}{}: {}.{mark}", k + 1, words(wall), self.row_words(row)));
        }
        if self.shared().is_none() {
            notes.push("WARNING: no pressure is recommended by all of them; which criterion and which wall hold here decides, and is the engineer's to say.".to_owned());
        }
        if let (Some(first), true) = (self.outcome.rows.first(), tightest != 0)
            && !first.is_empty()
        {
            notes.push("The recommended range is not the tightest: what makes the rock stronger or the wall drier than the tightest takes it must be known to hold here.".to_owned());
        }
        notes.push("Tops are the computed ones, without any raise by the engineer.".to_owned());
        notes.push("A criterion that gives credit to the intermediate stress allows lower pressures than Mohr–Coulomb with the same numbers; a difference between them is a difference of opinion about the rock, not of arithmetic.".to_owned());
        let mut more: Vec<String> = self.walls.iter().flat_map(|wall| wall.setup.notes()).collect();
        more.dedup();
        notes.extend(more);
        notes.push(direction::reference(self.range.wall.attitude));
        notes
    }

    fn steps(&self) -> Vec<Step> {
        let mut steps: Vec<Step> = Vec::new();
        let mut seen: Vec<crate::rock::Strength> = Vec::new();
        for wall in &self.walls {
            if !seen.contains(&wall.strength()) {
                seen.push(wall.strength());
                steps.push(Step::words(format!("{}:", wall.strength().name())));
                steps.extend(wall.strength().steps());
            }
        }
        steps.push(Step::Table { table: self.limits_table() });
        // Range 1 is worked on its own card.
        for (n, (row, wall)) in (1..).zip(self.outcome.rows.iter().zip(&self.walls)).skip(1) {
            let Ok(limits) = wall.limits_at_width(self.range.choices.allowed_width) else { continue };
            let governs = |end: Option<GovernedPressure>| end.map(|end| end.governed_by);
            let worked = limits.worked_ends(governs(row.bottom), governs(row.top));
            if !worked.is_empty() {
                steps.push(Step::words(format!("Range {n}, {}, where the wall sets its ends:", words(wall))));
                steps.extend(worked);
            }
        }
        steps.push(Step::Table { table: self.ranges_table() });
        steps
    }

    fn limits_table(&self) -> Table {
        let cell = |p: Option<Pressure>, governed_by: Governs| match p {
            Some(pressure) => {
                let [cell, ..] = end_cells(self.end(GovernedPressure { pressure, governed_by }));
                cell
            }
            None => "none".to_owned(),
        };
        let s3 = self.range.limits.least_stress.pressure();
        Table {
            caption: "What each range is made of: the lower shear limit at the allowed width, initiation and the upper shear limit; S_3 and the pore pressure are the same for all; rounded to the safe side".to_owned(),
            columns: vec![
                Column::text("range"),
                Column::text("criterion, wall"),
                Column::number("lower shear", "MPa"),
                Column::number("initiation", "MPa"),
                Column::number("upper shear", "MPa"),
                Column::number("S_3", "MPa"),
            ],
            rows: (1..)
                .zip(self.outcome.rows.iter().zip(&self.walls))
                .map(|(n, (row, wall))| {
                    let any = row.lower_shear.is_none() && row.bottom.is_some();
                    vec![
                        format!("{n}"),
                        words(wall),
                        if any { "any holds".to_owned() } else { cell(row.lower_shear, Governs::LowerShear) },
                        cell(row.initiation, Governs::Initiation),
                        cell(row.upper_shear, Governs::UpperShear),
                        cell(s3, Governs::LeastStress),
                    ]
                })
                .collect(),
        }
    }

    fn ranges_table(&self) -> Table {
        let change = |p: Option<Pressure>| p.map_or_else(|| "–".to_owned(), |p| signed(p.in_mpa(), 2));
        let mut rows = Vec::new();
        for (n, row) in (1..).zip(&self.outcome.rows) {
            for (end, by, name) in [(row.top, row.top_change, "top"), (row.bottom, row.bottom_change, "bottom")] {
                let mut cells = vec![format!("{n}, {name}")];
                match end {
                    Some(end) => {
                        cells.extend(end_cells(self.end(end)));
                        cells.extend([change(by), end.governed_by.short().to_owned()]);
                    }
                    None => cells.extend(["none", "–", "–", "–", "no pressure is safe"].map(str::to_owned)),
                }
                rows.push(cells);
            }
        }
        let [pressure, gradient, weight] = pressure_columns();
        Table {
            caption: "Ends of the ranges, rounded into each, and how far each is above that of range 1".to_owned(),
            columns: vec![
                Column::text("range, end"),
                pressure,
                gradient,
                weight,
                Column::number("difference", "MPa"),
                Column::text("what governs"),
            ],
            rows,
        }
    }

    fn figure(&self) -> Figure {
        let rows = (1..).zip(self.outcome.rows.iter().zip(&self.walls)).map(|(n, (row, wall))| {
            let bars = match (row.bottom, row.top) {
                (Some(b), Some(t)) if !row.is_empty() => {
                    let role = if n == 1 { Role::Range } else { Role::First };
                    vec![(role, b.pressure.in_mpa(), t.pressure.in_mpa())]
                }
                _ => Vec::new(),
            };
            let range = self.row_words(row).replace(" MPa to ", "–");
            let range = range.split(", as").next().unwrap_or_default();
            ChartRow { words: format!("{n}: {}: {range}", words(wall)), bars, marks: Vec::new() }
        });
        let mut levels = vec![("P_p".to_owned(), Role::Quiet, self.range.wall.pore().in_mpa())];
        levels
            .extend(self.range.limits.least_stress.pressure().map(|s3| ("S_3".to_owned(), Role::Second, s3.in_mpa())));
        RowChart { rows: rows.collect(), levels, band: None }.figure(
            "pressure in the hole (MPa)",
            "Ranges by other criteria and other walls beside the recommended one (1).".to_owned(),
            "Bars from bottom to top of each range.",
        )
    }
}
