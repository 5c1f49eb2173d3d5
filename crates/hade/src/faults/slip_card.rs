//! What the card of one fault says.

use super::figure::{Point, mohr};
use super::slip::{FaultSlip, FaultSlipInputs, FaultState};
use crate::card::{Explanation, Formula, Item, Method, Reference, Step};
use crate::stress::Stress;
use crate::units::{Pressure, as_typed, fixed, with_typed_unit};

/// The method, shared with the ranking of many planes.
pub(super) fn method(words: &str) -> Method {
    Method {
        words: words.to_owned(),
        formulas: vec![
            Formula::new("sigma'_upright(n) = sigma_upright(n) - P_upright(p)", "σ'_n = σ_n − P_p"),
            Formula::new("T_upright(s) = tau / sigma'_upright(n)", "T_s = τ / σ'_n"),
            Formula::new(
                "T_upright(d) = (S_1 - sigma_upright(n)) / (S_1 - S_3)",
                "T_d = (S_1 − σ_n) / (S_1 − S_3)",
            ),
            Formula::new("tau_upright(C) = tau - (C + mu sigma'_upright(n))", "τ_C = τ − (C + μ σ'_n)"),
            Formula::new(
                "P_upright(f) = sigma_upright(n) - (tau - C) / mu , quad P_upright(c) = min(P_upright(f), sigma_upright(n))",
                "P_f = σ_n − (τ − C)/μ, P_c = the smaller of P_f and σ_n",
            ),
        ],
        symbols: vec![
            (
                "rake".to_owned(),
                "direction in which the hanging wall slips, in the plane from the strike azimuth, up dip positive: 0° left-lateral, ±180° right-lateral, −90° normal, 90° reverse".to_owned(),
            ),
            ("along strike, down dip".to_owned(), "the traction's parts along (cos s, sin s, 0) and (−sin s cos d, cos s cos d, sin d)".to_owned()),
            ("T_s".to_owned(), "slip tendency".to_owned()),
            ("T_d".to_owned(), "dilation tendency".to_owned()),
            ("τ_C".to_owned(), "Coulomb stress, the shear stress beyond the strength".to_owned()),
            ("P_f".to_owned(), "pore pressure at which friction and cohesion let go".to_owned()),
            ("P_c".to_owned(), "critical pore pressure, at which the fault slips or opens".to_owned()),
        ],
        references: vec![
            Reference::new(
                "Morris, A., Ferrill, D.A. and Henderson, D.B. (1996) Slip-tendency analysis and fault reactivation, Geology 24, 275–278 (cited from memory)",
            ),
            Reference::new(
                "Ferrill, D.A., Winterle, J., Wittmeyer, G., Sims, D., Colton, S., Armstrong, A. and Morris, A.P. (1999) Stressed rock strains groundwater at Yucca Mountain, Nevada, GSA Today 9(5), 1–8 (dilation tendency; cited from memory)",
            ),
            Reference::new(
                "Jaeger, J.C., Cook, N.G.W. and Zimmerman, R.W. (2007) Fundamentals of Rock Mechanics, 4th ed., Blackwell, ch. 3 (friction and the Coulomb criterion on a plane; cited from memory)",
            ),
        ],
        assumptions: vec![
            "The stress and the pore pressure are those on the fault; slip elsewhere or the fault itself has not turned them.".to_owned(),
            "Slip follows the shear stress on the plane (Wallace and Bott).".to_owned(),
            "The fault bears no tension: it opens where the pore pressure reaches the normal stress.".to_owned(),
        ],
    }
}

/// A ratio as a result.
pub(super) fn ratio(symbol: &str, name: &str, value: f64) -> Item {
    Item::new(symbol, name, "ratio", vec![value], fixed(value, 3))
}

/// A pressure with its sign in words: "9.67 MPa more", "3.20 MPa less".
fn more_or_less(p: Pressure) -> String {
    if p >= Pressure::default() { format!("{p} above") } else { format!("{} below", p.abs()) }
}

pub(super) fn explain(slip: &FaultSlip, inputs: &FaultSlipInputs) -> Explanation {
    let strength = inputs.strength;
    Explanation {
        title: format!(
            "Slip and opening{} of the plane {} at a pore pressure of {}",
            inputs.stress.under_name(),
            inputs.plane.words(),
            with_typed_unit(inputs.pore)
        ),
        headline: headline(slip),
        inputs: vec![
            inputs.stress.item("S", "stress in north, east, down"),
            inputs.plane.strike.item("s", "strike of the plane, dip to its right"),
            Item::typed("d", "dip of the plane", inputs.plane.dip),
            Item::typed("P_p", "pore pressure", inputs.pore),
            Item::typed("μ", "coefficient of friction of the fault", strength.friction),
            Item::typed("C", "cohesion of the fault", strength.cohesion),
        ],
        results: results(slip),
        method: method(
            "The traction on the plane is split into normal and shear stress; the shear stress is held against the fault's strength, and the pore pressure is found at which the two are equal.",
        ),
        steps: steps(slip, inputs),
        figures: vec![mohr(
            &inputs.stress,
            inputs.pore,
            Some(strength),
            &[Point {
                name: "plane".to_owned(),
                effective_normal: slip.effective_normal(),
                shear: slip.shear(),
                state: slip.state(),
            }],
            format!("The plane {} in Mohr's circles of effective stress, with its strength.", inputs.plane.words()),
            format!(
                "The plane lies at an effective normal stress of {} and a shear stress of {}; it {}.",
                slip.effective_normal(),
                slip.shear(),
                slip.state().words()
            ),
        )],
        notes: notes(slip, inputs),
        topics: ["stress", "plane", "fault", "friction", "slip"].map(str::to_owned).to_vec(),
    }
}

fn headline(slip: &FaultSlip) -> String {
    let way = if slip.opens_first() { "opens" } else { "slips" };
    let friction = as_typed(slip.strength().friction);
    match (slip.state(), slip.slip_tendency()) {
        (FaultState::Holds, Some(tendency)) => format!(
            "slip tendency {}, friction {friction}: it holds, and {way} at a pore pressure of {}, {} the present one",
            fixed(tendency, 3),
            slip.critical_pore(),
            more_or_less(slip.margin())
        ),
        (FaultState::Slips, Some(tendency)) => format!(
            "slip tendency {}, friction {friction}: it SLIPS; it would hold below a pore pressure of {}",
            fixed(tendency, 3),
            slip.critical_pore()
        ),
        _ => format!(
            "it is OPEN: the pore pressure exceeds the normal stress {} by {}",
            slip.normal(),
            -slip.effective_normal()
        ),
    }
}

fn results(slip: &FaultSlip) -> Vec<Item> {
    let mut items = vec![
        Item::computed("σ_n", "normal stress on the plane", slip.normal()),
        Item::computed("τ", "shear stress on the plane", slip.shear()),
        Item::computed("σ'_n", "effective normal stress on the plane", slip.effective_normal()),
    ];
    if let Some(rake) = slip.rake() {
        items.push(Item::computed("r", "rake of hanging-wall slip, from strike, up dip positive", rake));
    }
    if let Some(tendency) = slip.slip_tendency() {
        items.push(ratio("T_s", "slip tendency", tendency));
    }
    if let Some(tendency) = slip.dilation_tendency() {
        items.push(ratio("T_d", "dilation tendency", tendency));
    }
    items.push(Item::computed("τ_C", "Coulomb stress, shear beyond the strength", slip.coulomb()));
    if slip.opens_first() {
        items.push(Item::computed(
            "P_f",
            "pore pressure at which friction would let go, not reached",
            slip.frictional_pore(),
        ));
    }
    items.push(Item::computed("P_c", "critical pore pressure", slip.critical_pore()));
    items.push(Item::computed("m", "margin of pore pressure, P_c − P_p", slip.margin()));
    items
}

/// What a state is that no rock in the earth keeps.
pub(super) fn below_pore(stress: &Stress, pore: Pressure) -> Option<String> {
    let [.., s3] = stress.principals().magnitudes();
    (s3 < pore).then(|| {
        format!(
            "WARNING: the least stress {s3} is below the pore pressure {}: rock in the earth does not keep that; check both.",
            with_typed_unit(pore)
        )
    })
}

fn notes(slip: &FaultSlip, inputs: &FaultSlipInputs) -> Vec<String> {
    let mut notes: Vec<String> = slip.strength().doubt().into_iter().collect();
    match slip.state() {
        FaultState::Open => {
            notes.push(format!(
                "WARNING: the effective normal stress is {}; nothing presses the fault together, so it has no slip tendency. It is open.",
                slip.effective_normal()
            ));
            if !slip.opens_first() {
                notes.push(format!(
                    "Rising pore pressure passes its strength at {}, before it opens at {}.",
                    slip.critical_pore(),
                    slip.normal()
                ));
            }
        }
        FaultState::Slips => notes.push(format!(
            "WARNING: the shear stress exceeds the strength by {}; a fault that has not slipped there is stronger, or the stress or the pore pressure is not as stated.",
            slip.coulomb()
        )),
        FaultState::Holds => {}
    }
    notes.extend(below_pore(&inputs.stress, inputs.pore));
    if slip.opens_first() {
        notes.push(format!(
            "Opens first: the shear stress is below the cohesion, so friction would let go only at {}, above the normal stress; the critical pore pressure is the normal stress.",
            slip.frictional_pore()
        ));
    } else if slip.critical_pore() < Pressure::default() {
        notes.push("The critical pore pressure is negative: the fault would slip dry.".to_owned());
    }
    if slip.rake().is_none() {
        notes.push("There is no shear stress on the plane, so slip has no direction.".to_owned());
    }
    if slip.dilation_tendency().is_none() {
        notes.push("All principal stresses are equal, so the dilation tendency is not defined.".to_owned());
    }
    notes
}

/// The lines of arithmetic for one plane.
pub(super) fn steps(slip: &FaultSlip, inputs: &FaultSlipInputs) -> Vec<Step> {
    let (Ok(axes), Ok(traction)) = (inputs.plane.axes(), inputs.stress.on(inputs.plane)) else { return Vec::new() };
    let n = axes.normal.map(|c| fixed(c, 6));
    let t = traction.vector().map(|c| fixed(c.in_mpa(), 3));
    let mpa = |p: Pressure| fixed(p.in_mpa(), 3);
    let [s1, _, s3] = inputs.stress.principals().magnitudes().map(mpa);
    let (normal, shear, effective) = (mpa(slip.normal()), mpa(slip.shear()), mpa(slip.effective_normal()));
    let (friction, cohesion) = (as_typed(slip.strength().friction), as_typed(slip.strength().cohesion.in_mpa()));
    let mut steps = vec![
        Step::worked(format!(
            "n = (sin s sin d, −cos s sin d, cos d) = ({}, {}, {}), the normal that points down",
            n[0], n[1], n[2]
        )),
        Step::worked(format!("t = S n = ({}, {}, {}) MPa", t[0], t[1], t[2])),
        Step::worked(format!("σ_n = t · n = {normal} MPa")),
        Step::worked(format!(
            "τ along strike {} MPa, down dip {} MPa; τ = √(({0})² + ({1})²) = {shear} MPa",
            mpa(traction.along_strike),
            mpa(traction.down_dip)
        )),
        Step::worked(format!("σ'_n = {normal} − {} = {effective} MPa", as_typed(inputs.pore.in_mpa()))),
    ];
    if let Some(rake) = slip.rake() {
        steps.push(Step::worked(format!(
            "r = atan2(−down dip, along strike) = atan2({}, {}) = {}°",
            mpa(-traction.down_dip),
            mpa(traction.along_strike),
            fixed(rake.in_deg(), 2)
        )));
    }
    if let Some(tendency) = slip.slip_tendency() {
        steps.push(Step::worked(format!("T_s = {shear} / {effective} = {}", fixed(tendency, 4))));
    }
    if let Some(tendency) = slip.dilation_tendency() {
        steps.push(Step::worked(format!("T_d = ({s1} − {normal}) / ({s1} − {s3}) = {}", fixed(tendency, 4))));
    }
    steps.push(Step::worked(format!(
        "τ_C = {shear} − ({cohesion} + {friction} · ({effective})) = {} MPa",
        mpa(slip.coulomb())
    )));
    let capped = if slip.opens_first() { ", above σ_n: P_c = σ_n" } else { ", not above σ_n: P_c = P_f" };
    steps.push(Step::worked(format!(
        "P_f = {normal} − ({shear} − {cohesion}) / {friction} = {} MPa{capped} = {} MPa",
        mpa(slip.frictional_pore()),
        mpa(slip.critical_pore())
    )));
    steps.push(Step::worked(format!(
        "m = {} − {} = {} MPa",
        mpa(slip.critical_pore()),
        as_typed(inputs.pore.in_mpa()),
        mpa(slip.margin())
    )));
    steps
}
