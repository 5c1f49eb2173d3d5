//! What the card of a ranking says.

use super::figure::{Point, mohr};
use super::ranked::{RankedFault, RankedFaults, RankedInputs};
use super::set::{FaultSource, item};
use super::slip::FaultState;
use super::slip_card::{below_pore, method, steps as worked};
use crate::card::{Column, Explain, Explanation, Figure, Item, Projection, Role, Step, Table};
use crate::frames::net::Net;
use crate::frames::vector::{V3, dot, wrap};
use crate::frames::{Azimuth, North, bearing_item, correction_item, few_decimals, three_figures};
use crate::units::{Pressure, Quantity, as_typed, fixed, with_typed_unit};

/// A card prints no more rows than this.
const MOST_ROWS: usize = 80;
/// The planes that are named in the figure.
const NAMED: usize = 5;
/// The planes whose strike, dip and margin are results.
const RESULTS: usize = 5;

pub(super) fn explain(ranked: &RankedFaults, inputs: &RankedInputs) -> Explanation {
    let rows = ranked.rows();
    let strength = inputs.strength;
    Explanation {
        title: format!(
            "{} ranked by their margin of pore pressure{} at {}",
            planes(ranked.planes()),
            inputs.stress.under_name(),
            with_typed_unit(inputs.pore)
        ),
        headline: headline(ranked, &rows),
        inputs: [
            Some(inputs.stress.item("S", "stress in north, east, down")),
            Some(item(&inputs.source, &inputs.faults)),
            inputs.corrected().and_then(|(_, strike)| strike.correction().map(|c| correction_item(strike.north(), c))),
            Some(Item::typed("P_p", "pore pressure", inputs.pore)),
            Some(Item::typed("μ", "coefficient of friction of the planes", strength.friction)),
            Some(Item::typed("C", "cohesion of the planes", strength.cohesion)),
        ]
        .into_iter()
        .flatten()
        .collect(),
        results: results(&rows),
        method: method(
            "On every plane the traction is split into normal and shear stress and held against the strength; the planes are ordered by the pore pressure that each lacks to slip or open. By hand: any row, by the lines that are worked out for the first.",
        ),
        steps: steps(ranked, inputs, &rows),
        figures: figures(inputs, &rows),
        notes: notes(ranked, inputs, &rows),
        topics: ["stress", "plane", "fault", "friction", "slip"].map(str::to_owned).to_vec(),
    }
}

fn planes(count: usize) -> String {
    if count == 1 { "1 plane".to_owned() } else { format!("{count} planes") }
}

fn headline(ranked: &RankedFaults, rows: &[RankedFault]) -> String {
    let Some(worst) = rows.first() else { return String::new() };
    let open = match ranked.open() {
        0 => String::new(),
        n => format!(", {n} open"),
    };
    format!(
        "{} of {} slip{open}; the most critical is {}, which {} at a pore pressure of {} (margin {})",
        ranked.slipping(),
        planes(ranked.planes()),
        worst.fault.name,
        if worst.slip.opens_first() { "opens" } else { "slips" },
        worst.slip.critical_pore(),
        worst.slip.margin()
    )
}

/// The most critical planes, so that a card on one of them finds its strike and dip here.
fn results(rows: &[RankedFault]) -> Vec<Item> {
    let mut items = Vec::new();
    for (row, n) in rows.iter().zip(1..=RESULTS) {
        let (name, slip) = (row.fault.name, row.slip);
        let strike = row.fault.plane.strike.true_north().unwrap_or_default();
        items.push(bearing_item(&format!("s_{n}"), &format!("strike of {name}"), strike));
        items.push(Item::computed(&format!("d_{n}"), format!("dip of {name}"), row.fault.plane.dip));
        if row.fault.has_own_strength() {
            let own = slip.strength();
            items.push(Item::typed(&format!("μ_{n}"), format!("coefficient of friction of {name}"), own.friction));
            items.push(Item::typed(&format!("C_{n}"), format!("cohesion of {name}"), own.cohesion));
        }
        items.push(Item::computed(
            &format!("P_c{n}"),
            format!("critical pore pressure of {name}"),
            slip.critical_pore(),
        ));
        items.push(Item::computed(&format!("m_{n}"), format!("margin of pore pressure of {name}"), slip.margin()));
    }
    items
}

fn notes(ranked: &RankedFaults, inputs: &RankedInputs, rows: &[RankedFault]) -> Vec<String> {
    let mut notes: Vec<String> = inputs.strength.doubt().into_iter().collect();
    notes.extend(below_pore(&inputs.stress, inputs.pore));
    if inputs.corrected().is_none() {
        notes.extend(corrected(rows));
    }
    let (slipping, open, all) = (ranked.slipping(), ranked.open(), ranked.planes());
    let pore = with_typed_unit(inputs.pore);
    if slipping + open > 0 {
        notes.push(format!(
            "WARNING: at a pore pressure of {pore}, {slipping} of {all} planes slip and {open} are open. Where such a plane is known not to slip, it is stronger, or the stress or the pore pressure is not as stated."
        ));
    } else {
        notes.push(format!("At a pore pressure of {pore} none of {all} planes slips or is open."));
    }
    if let (Some(left_out), FaultSource::File { path, .. }) = (inputs.left_out, &inputs.source) {
        notes.push(format!(
            "{path} holds {all} planes; this card holds the {} most critical. Of the {} others {} slip, {} are open, and the least margin is {}.",
            rows.len(),
            left_out.planes,
            left_out.slipping,
            left_out.open,
            left_out.least_margin
        ));
    }
    if let Some((site, strike)) = inputs.corrected() {
        notes.push(format!(
            "The strikes were measured from {}; {}° was added to each, the correction of {}.",
            strike.north().words(),
            few_decimals(strike.correction().unwrap_or_default(), 4),
            site.words()
        ));
    }
    let own = rows.iter().filter(|r| r.fault.has_own_strength()).count();
    if own > 0 {
        notes.push(format!(
            "{own} of the planes bring their own friction or cohesion, which count in place of {}.",
            inputs.strength.words()
        ));
    }
    let first_open: Vec<&str> = rows.iter().filter(|r| r.slip.opens_first()).map(|r| r.fault.name.text()).collect();
    if !first_open.is_empty() {
        notes.push(format!(
            "Opens first, before its strength is reached: {}. There the critical pore pressure is the normal stress.",
            some_of(&first_open)
        ));
    }
    notes
}

/// The true strike: to a hundredth of a degree, where a correction was added.
fn strike_figures(strike: Azimuth) -> String {
    let angle = strike.true_north().unwrap_or_default();
    if strike.correction().is_some() {
        return format!("{:0>6}", fixed(wrap(angle.si()).to_degrees(), 2));
    }
    three_figures(angle)
}

/// How the strikes came to true north, where they were stated from another.
fn corrected(rows: &[RankedFault]) -> Option<String> {
    let first = rows.iter().map(|row| row.fault.plane.strike).find(|strike| strike.correction().is_some())?;
    let correction = first.correction()?;
    let same = rows.iter().all(|row| row.fault.plane.strike.correction() == Some(correction));
    let (north, what) = match first.north() {
        North::Magnetic => ("magnetic north", "declination"),
        _ => ("grid north", "convergence"),
    };
    let which = if same { "The strikes were" } else { "Some of the strikes were" };
    Some(format!(
        "{which} stated from {north}: the true strike is the stated one + ({}°), the {what} as the file or the notebook states it. {} was stated as {}°.",
        as_typed(correction.in_deg()),
        rows.first()?.fault.name,
        as_typed(rows.first()?.fault.plane.strike.measured().in_deg())
    ))
}

/// At most eight names.
fn some_of(names: &[&str]) -> String {
    let shown = names.iter().take(8).copied().collect::<Vec<_>>().join(", ");
    if names.len() > 8 { format!("{shown} and {} more", names.len() - 8) } else { shown }
}

fn steps(ranked: &RankedFaults, inputs: &RankedInputs, rows: &[RankedFault]) -> Vec<Step> {
    let mut steps = Vec::new();
    if let Some(worst) = rows.first() {
        let (name, plane) = (worst.fault.name, worst.fault.plane);
        steps.push(Step::words(format!("The most critical plane, {name} ({}), line by line:", plane.words())));
        steps.extend(worked(&worst.slip, &worst.slip.inputs()));
    }
    let more = ranked.planes().saturating_sub(MOST_ROWS);
    if more > 0 {
        steps.push(Step::words(format!("{} with more margin are not printed.", planes(more))));
    }
    let mpa = |p: Pressure| fixed(p.in_mpa(), 2);
    let or_dash = |number: Option<String>| number.unwrap_or_else(|| "–".to_owned());
    let table = |row: &RankedFault| {
        let (plane, slip) = (row.fault.plane, row.slip);
        vec![
            row.fault.name.to_string(),
            format!("{}/{}", strike_figures(plane.strike), fixed(plane.dip.in_deg(), 1)),
            mpa(slip.effective_normal()),
            mpa(slip.shear()),
            or_dash(slip.slip_tendency().map(|t| fixed(t, 3))),
            or_dash(slip.dilation_tendency().map(|t| fixed(t, 3))),
            or_dash(slip.rake().map(|r| fixed(r.in_deg(), 1))),
            mpa(slip.critical_pore()),
            mpa(slip.margin()),
            slip.state().words().to_owned(),
        ]
    };
    steps.push(Step::Table {
        table: Table {
            caption: format!(
                "Planes by their margin m = P_c − P_p at a pore pressure of {}; strike from true north and dip",
                with_typed_unit(inputs.pore)
            ),
            columns: vec![
                Column::text("plane"),
                Column::text("strike/dip (°)"),
                Column::number("σ'_n", "MPa"),
                Column::number("τ", "MPa"),
                Column::number("T_s", ""),
                Column::number("T_d", ""),
                Column::number("rake", "°"),
                Column::number("P_c", "MPa"),
                Column::number("m", "MPa"),
                Column::text("state"),
            ],
            rows: rows.iter().take(MOST_ROWS).map(table).collect(),
        },
    });
    if rows.iter().take(MOST_ROWS).any(|r| r.fault.has_own_strength()) {
        let own = |row: &RankedFault| {
            let strength = row.slip.strength();
            vec![row.fault.name.to_string(), as_typed(strength.friction), as_typed(strength.cohesion.in_mpa())]
        };
        steps.push(Step::Table {
            table: Table {
                caption: "Strength of the planes that bring their own".to_owned(),
                columns: vec![Column::text("plane"), Column::number("μ", ""), Column::number("C", "MPa")],
                rows: rows.iter().take(MOST_ROWS).filter(|r| r.fault.has_own_strength()).map(own).collect(),
            },
        });
    }
    steps
}

/// The figures of a ranking, in the order they are shown.
fn figures(inputs: &RankedInputs, rows: &[RankedFault]) -> Vec<Figure> {
    vec![on_the_net(inputs, rows), shear_against_normal(inputs, rows)]
}

/// The poles of the planes over the slip tendency of every plane there could be.
fn on_the_net(inputs: &RankedInputs, rows: &[RankedFault]) -> Figure {
    let (s, pore) = (inputs.stress.tensor(), inputs.pore.si());
    let tendency = |n: V3| {
        let t = s.times(n);
        let normal = dot(n, t);
        let effective = normal - pore;
        if effective <= 0.0 { f64::NAN } else { (dot(t, t) - normal * normal).max(0.0).sqrt() / effective }
    };
    let mut net = Net::new(Projection::EqualArea).contours("slip tendency", tendency);
    for (i, row) in rows.iter().enumerate() {
        let name = if i < NAMED { row.fault.name.text() } else { "" };
        if let Ok(axes) = row.fault.plane.axes() {
            let role = if row.slip.state() == FaultState::Holds { Role::Quiet } else { Role::Limit };
            net = net.pole(name, role, axes.normal);
        }
    }
    let worst: Vec<String> = rows
        .iter()
        .take(NAMED)
        .map(|r| {
            let tendency = r.slip.slip_tendency().map_or_else(|| "open".to_owned(), |t| fixed(t, 2));
            format!("{} {tendency}", r.fault.name)
        })
        .collect();
    net.figure(
        "Poles of the planes (rings) over the slip tendency of every plane without cohesion, by its pole; the most critical are named.",
        format!("Slip tendency over the lower hemisphere of poles. Of the most critical planes: {}.", worst.join(", ")),
    )
}

fn shear_against_normal(inputs: &RankedInputs, rows: &[RankedFault]) -> Figure {
    let points: Vec<Point> = rows
        .iter()
        .enumerate()
        .map(|(i, row)| Point {
            name: if i < NAMED { row.fault.name.to_string() } else { String::new() },
            effective_normal: row.slip.effective_normal(),
            shear: row.slip.shear(),
            state: row.slip.state(),
        })
        .collect();
    let count = |state: FaultState| points.iter().filter(|p| p.state == state).count();
    let own = if rows.iter().any(|r| r.fault.has_own_strength()) {
        " Planes with a strength of their own are not judged by the line drawn."
    } else {
        ""
    };
    let worst: Vec<&str> = rows.iter().take(NAMED).map(|r| r.fault.name.text()).collect();
    let (holds, slips, open) = (count(FaultState::Holds), count(FaultState::Slips), count(FaultState::Open));
    mohr(
        &inputs.stress,
        inputs.pore,
        Some(inputs.strength),
        &points,
        format!(
            "The planes in Mohr's circles of effective stress; dots hold, triangles slip, crosses are open. The most critical are named.{own}"
        ),
        format!("{holds} planes hold, {slips} slip, {open} are open. The most critical: {}.", worst.join(", ")),
    )
}
