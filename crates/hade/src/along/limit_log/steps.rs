//! The work of a log where it is narrowest, to be redone by hand, and its tables.

use super::limit_log::LimitLog;
use super::row::{LogRow, ends};
use super::section::{SectionEnd, SectionRange};
use super::summary::LogOutcome;
use crate::along::ground::{AtPlace, GroundInHole};
use crate::card::{Column, Explain, Step, Table};
use crate::units::{GRAVITY, Length, Pressure, Quantity, as_typed, fixed};
use crate::well::{GovernedPressure, limit_shown};

pub(super) fn mpa(pressure: Pressure) -> String {
    fixed(pressure.in_mpa(), 4)
}

/// The steps: the ground and the wall where the range is narrowest, then the tables.
pub(super) fn steps(log: &LimitLog, outcome: &LogOutcome) -> Vec<Step> {
    let mut steps = Vec::new();
    if let Some((row, state)) = governing(log, outcome) {
        steps.push(Step::words(format!(
            "Worked at MD {} m in {}, where {}; every other depth goes the same way.",
            fixed(row.md.si(), 2),
            row.layer(),
            if outcome.narrowest.is_some() { "the range is narrowest" } else { "the log begins" }
        )));
        if let Ok(in_hole) = GroundInHole::new(&log.ground, &log.survey) {
            steps.extend(in_hole.worked(&state));
        }
        steps.extend(wall_steps(log, &state));
    }
    steps.extend(outcome.friction.as_ref().and_then(|friction| friction.step(&outcome.rows)));
    steps.push(Step::Table { table: ground_table(outcome) });
    steps.push(Step::Table { table: limits_table(outcome) });
    steps.push(Step::Table { table: sections_table(outcome) });
    if outcome.sections.iter().any(|section| !section.mud.is_empty()) {
        steps.push(Step::Table { table: mud_table(&outcome.sections) });
    }
    steps
}

/// The printed row that is narrowest, or the first, with the ground there.
pub(super) fn governing(log: &LimitLog, outcome: &LogOutcome) -> Option<(LogRow, AtPlace)> {
    let narrowest = |row: &LogRow| {
        outcome.narrowest.is_none_or(|narrowest| row.md == narrowest.md && row.breadth() == Some(narrowest.breadth))
    };
    let in_hole = GroundInHole::new(&log.ground, &log.survey).ok()?;
    let (row, layer) = *log.printed().iter().find(|(row, _)| narrowest(row))?;
    Some((row, in_hole.state(&log.survey.place(row.md).ok()?, layer).ok()?))
}

fn wall_steps(log: &LimitLog, state: &AtPlace) -> Vec<Step> {
    let Ok(found) = ends(state, &log.choices) else { return Vec::new() };
    let (limits, choices) = (found.limits, log.choices);
    let mut steps = limits.explain().steps;
    if let Ok(wall) = state.wall() {
        steps.insert(
            0,
            Step::matrix(
                "S'",
                &wall.inputs.stress.rows_in_mpa(),
                4,
                "MPa",
                "the stress turned into the axes of the hole: top of hole, right, along hole",
            ),
        );
    }
    let stated = |end: Option<GovernedPressure>| end.map_or_else(|| "none".to_owned(), |end| mpa(end.pressure));
    steps.push(Step::worked(format!(
        "p_b = max(lower shear limit at {}° {}, P_p + m_b = {} + {}) = {} MPa",
        as_typed(choices.allowed_width.in_deg()),
        limit_shown(&limits.lower_shear),
        mpa(state.pore),
        as_typed(choices.margin_bottom.in_mpa()),
        stated(found.bottom)
    )));
    steps.push(Step::worked(format!(
        "p_t = min(S_3 {}, p_i {}, p_us {}) − m_t {} = {} MPa",
        limit_shown(&limits.least_stress),
        limit_shown(&limits.initiation),
        limit_shown(&limits.upper_shear),
        as_typed(choices.margin_top.in_mpa()),
        stated(found.top)
    )));
    for (name, end) in [("b", found.bottom), ("t", found.top)] {
        let Some(end) = end else { continue };
        steps.push(Step::worked(format!(
            "ρ_{name} = {} · 10⁶ / ({GRAVITY} · {}) = {} kg/m³",
            mpa(end.pressure),
            fixed(state.tvd.si(), 3),
            fixed(end.pressure.mud_weight_at(state.tvd).in_kg_m3(), 2)
        )));
    }
    steps
}

/// "1.312 (lower shear)".
fn end_cell(row: &LogRow, end: Option<GovernedPressure>) -> String {
    end.map_or_else(
        || "none".to_owned(),
        |end| format!("{} ({})", fixed(row.mud_weight(end.pressure).in_sg(), 3), end.governed_by.short()),
    )
}

fn ground_table(outcome: &LogOutcome) -> Table {
    let warmed = outcome.rows.iter().any(|row| row.warming.is_some());
    let row = |row: &LogRow| {
        let mpa = |pressure: Pressure| fixed(pressure.in_mpa(), 2);
        let mut cells = vec![
            fixed(row.md.si(), 1),
            fixed(row.tvd.si(), 1),
            format!("{}{}", row.layer(), if row.depleted { " (depleted)" } else { "" }),
            mpa(row.sv),
            mpa(row.sh_max),
            mpa(row.sh_min),
            mpa(row.pore),
        ];
        if warmed {
            cells.push(row.warming.map_or_else(|| "–".to_owned(), |warming| fixed(warming.in_kelvin(), 1)));
        }
        cells
    };
    let mut columns = vec![
        Column::number("MD", "m"),
        Column::number("TVD", "m"),
        Column::text("layer"),
        Column::number("S_v", "MPa"),
        Column::number("S_Hmax", "MPa"),
        Column::number("S_hmin", "MPa"),
        Column::number("P_p", "MPa"),
    ];
    columns.extend(warmed.then(|| Column::number("ΔT", "K")));
    Table {
        caption: "The ground at the printed depths; both sides of a contact are rows of their own".to_owned(),
        columns,
        rows: outcome.rows.iter().map(row).collect(),
    }
}

fn limits_table(outcome: &LogOutcome) -> Table {
    let number = |pressure: Option<Pressure>| pressure.map_or_else(|| "–".to_owned(), |p| fixed(p.in_mpa(), 2));
    let row = |row: &LogRow| {
        vec![
            fixed(row.md.si(), 1),
            number(row.lower_shear),
            number(Some(row.least_stress)),
            number(row.initiation),
            number(row.upper_shear),
            end_cell(row, row.bottom),
            end_cell(row, row.top),
        ]
    };
    Table {
        caption: "Pressure limits against depth, and the ends of the range as mud weights with what governs".to_owned(),
        columns: vec![
            Column::number("MD", "m"),
            Column::number("lower shear", "MPa"),
            Column::number("least stress", "MPa"),
            Column::number("initiation", "MPa"),
            Column::number("upper shear", "MPa"),
            Column::text("bottom, sg"),
            Column::text("top, sg"),
        ],
        rows: outcome.rows.iter().map(row).collect(),
    }
}

/// "MD 2450.0 to 2500.0 m".
pub(super) fn stretch_words([from, to]: [Length; 2]) -> String {
    if from == to {
        return format!("MD {} m", fixed(from.si(), 1));
    }
    format!("MD {} to {} m", fixed(from.si(), 1), fixed(to.si(), 1))
}

/// The first of several stretches in words.
pub(super) fn stretches_words(stretches: &[[Length; 2]]) -> String {
    let shown: Vec<String> = stretches.iter().take(6).map(|stretch| stretch_words(*stretch)).collect();
    let more = if stretches.len() > 6 { format!(" and {} more", stretches.len() - 6) } else { String::new() };
    format!("{}{more}", shown.join(", "))
}

fn sections_table(outcome: &LogOutcome) -> Table {
    let end = |end: Option<SectionEnd>| {
        end.map_or_else(
            || "none".to_owned(),
            |end| {
                format!(
                    "{} ({}, {}, MD {} m)",
                    fixed(end.mud_weight.in_sg(), 3),
                    end.governed_by.short(),
                    end.layer,
                    fixed(end.md.si(), 1)
                )
            },
        )
    };
    let row = |section: &SectionRange| {
        let verdict = match section.common() {
            Some((bottom, top)) => format!("{} to {} sg", fixed(bottom.in_sg(), 3), fixed(top.in_sg(), 3)),
            None if section.conflicts.is_empty() => "no common mud weight".to_owned(),
            None => format!("no common mud weight: {}", stretches_words(&section.conflicts)),
        };
        vec![
            section.name.clone(),
            fixed(section.from.si(), 1),
            fixed(section.to.si(), 1),
            end(section.bottom),
            end(section.top),
            verdict,
        ]
    };
    Table {
        caption: "Mud weights that all depths of a section have in common; where there is none, the depths whose top lies below the highest bottom".to_owned(),
        columns: vec![
            Column::text("section"),
            Column::number("from MD", "m"),
            Column::number("to MD", "m"),
            Column::text("highest bottom, sg"),
            Column::text("lowest top, sg"),
            Column::text("in common"),
        ],
        rows: outcome.sections.iter().map(row).collect(),
    }
}

fn mud_table(sections: &[SectionRange]) -> Table {
    let rows = sections.iter().flat_map(|section| {
        section.mud.iter().map(|held| {
            vec![
                section.name.clone(),
                held.state.words().to_owned(),
                if held.against_bottom { "bottom" } else { "top" }.to_owned(),
                fixed(held.margin.in_mpa(), 2),
                fixed(held.md.si(), 1),
                if held.margin.si() < 0.0 { "exceeded" } else { "kept" }.to_owned(),
            ]
        })
    });
    Table {
        caption: "The mud held against the range, where it is nearest to each end".to_owned(),
        columns: vec![
            Column::text("section"),
            Column::text("mud"),
            Column::text("against"),
            Column::number("left to it", "MPa"),
            Column::number("at MD", "m"),
            Column::text("end"),
        ],
        rows: rows.collect(),
    }
}
