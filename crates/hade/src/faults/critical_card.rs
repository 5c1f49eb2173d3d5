//! What the card of the planes nearest to slip says.

use super::critical::{CriticalInputs, CriticalOutcome, CriticalPlanes, from_s1};
use super::figure::{Point, mohr};
use super::slip::FaultState;
use super::slip_card::ratio;
use crate::card::{Explanation, Formula, Item, Method, Reference, Step};
use crate::frames::vector::V3;
use crate::units::{Pressure, as_typed, fixed, with_typed_unit};

pub(super) fn explain(planes: &CriticalPlanes, inputs: &CriticalInputs, outcome: &CriticalOutcome) -> Explanation {
    let CriticalInputs { stress, strength, pore } = *inputs;
    Explanation {
            title: format!("Planes nearest to slip{} at a pore pressure of {}", stress.under_name(), with_typed_unit(pore)),
            headline: headline(planes, outcome),
            inputs: vec![
                stress.item("S", "stress in north, east, down"),
                Item::typed("P_p", "pore pressure", pore),
                Item::typed("μ", "coefficient of friction of faults", strength.friction),
                Item::typed("C", "cohesion of faults", strength.cohesion),
            ],
            results: results(planes, outcome),
            method: method(),
            steps: steps(planes, inputs, outcome),
            figures: vec![mohr(
                &stress,
                pore,
                Some(strength),
                &[Point {
                    name: "critical planes".to_owned(),
                    effective_normal: outcome.effective_normal,
                    shear: outcome.shear,
                    state: planes.state(),
                }],
                "Mohr's circles of effective stress with the strength of faults; the point is the pair of planes nearest to slip.".to_owned(),
                format!(
                    "The planes nearest to slip lie at an effective normal stress of {} and a shear stress of {}; they {}.",
                    outcome.effective_normal, outcome.shear, plural(planes.state())
                ),
            )],
            notes: notes(planes, inputs, outcome),
            topics: ["stress", "plane", "fault", "friction", "slip"].map(str::to_owned).to_vec(),
        }
}

/// "hold", "slip", "are open".
fn plural(state: FaultState) -> &'static str {
    match state {
        FaultState::Holds => "hold",
        FaultState::Slips => "slip",
        FaultState::Open => "are open",
    }
}

fn method() -> Method {
    Method {
        words: "Of all planes the Coulomb stress is largest on two that contain S_2 and stand at 45° − φ/2 to S_1, one on each side: there the largest of Mohr's circles reaches farthest beyond, or least short of, a line as steep as friction.".to_owned(),
        formulas: vec![
            Formula::new("phi = arctan mu", "φ = arctan μ"),
            Formula::new(
                "bold(n) = cos(45 degree + phi/2) bold(v)_1 plus.minus sin(45 degree + phi/2) bold(v)_3",
                "n = cos(45° + φ/2) v_1 ± sin(45° + φ/2) v_3",
            ),
            Formula::new(
                "sigma'_upright(n) = (sigma'_1 + sigma'_3)/2 - (sigma'_1 - sigma'_3)/2 sin phi",
                "σ'_n = (σ'_1 + σ'_3)/2 − (σ'_1 − σ'_3)/2 · sin φ",
            ),
            Formula::new("tau = (sigma'_1 - sigma'_3)/2 cos phi", "τ = (σ'_1 − σ'_3)/2 · cos φ"),
            Formula::new("tau_upright(C) = tau - (C + mu sigma'_upright(n))", "τ_C = τ − (C + μ σ'_n)"),
            Formula::new(
                "P_upright(f) = P_upright(p) - tau_upright(C) / mu , quad P_upright(c) = min(P_upright(f), S_3)",
                "P_f = P_p − τ_C/μ, P_c = the smaller of P_f and S_3",
            ),
            Formula::new(
                "T_upright(max) = (sigma'_1 - sigma'_3) / (2 sqrt(sigma'_1 sigma'_3))",
                "T_max = (σ'_1 − σ'_3) / (2 √(σ'_1 σ'_3))",
            ),
        ],
        symbols: vec![("v_1, v_3".to_owned(), "unit axes of S_1 and S_3".to_owned())],
        references: vec![
            Reference::new(
                "Anderson, E.M. (1951) The Dynamics of Faulting and Dyke Formation with Applications to Britain, 2nd ed., Oliver and Boyd (cited from memory)",
            ),
            Reference::new(
                "Jaeger, J.C., Cook, N.G.W. and Zimmerman, R.W. (2007) Fundamentals of Rock Mechanics, 4th ed., Blackwell, ch. 3 (cited from memory)",
            ),
        ],
        assumptions: vec![
            "Faults of one strength may exist in every orientation.".to_owned(),
            "A fault bears no tension: it opens where the pore pressure reaches the normal stress.".to_owned(),
        ],
    }
}

fn headline(planes: &CriticalPlanes, outcome: &CriticalOutcome) -> String {
    let which = match planes.planes() {
        Some([a, b]) => format!("{} and {}", a.words(), b.words()),
        None => "no two planes stand out".to_owned(),
    };
    format!(
        "{which}: Coulomb stress {}, so they {}; the first plane of any orientation fails at a pore pressure of {}",
        outcome.coulomb,
        plural(planes.state()),
        outcome.least_critical_pore
    )
}

fn results(planes: &CriticalPlanes, outcome: &CriticalOutcome) -> Vec<Item> {
    let mut items = Vec::new();
    for (plane, n) in planes.planes().into_iter().flatten().zip(1..) {
        items.push(plane.strike.item(&format!("s_{n}"), &format!("strike of the critical plane {n}")));
        items.push(Item::computed(&format!("d_{n}"), format!("dip of the critical plane {n}"), plane.dip));
    }
    items.extend([
        Item::computed("σ'_n", "effective normal stress on them", outcome.effective_normal),
        Item::computed("τ", "shear stress on them", outcome.shear),
        Item::computed("τ_C", "largest Coulomb stress of any plane", outcome.coulomb),
        Item::computed("P_f", "pore pressure at which friction lets go on them", outcome.frictional_pore),
        Item::computed("P_c", "least pore pressure at which any plane slips or opens", outcome.least_critical_pore),
    ]);
    if let Some(tendency) = outcome.largest_slip_tendency {
        items.push(ratio("T_max", "largest slip tendency of any plane", tendency));
    }
    items
}

fn steps(planes: &CriticalPlanes, inputs: &CriticalInputs, outcome: &CriticalOutcome) -> Vec<Step> {
    let CriticalInputs { stress, strength, pore } = *inputs;
    let mpa = |p: Pressure| fixed(p.in_mpa(), 3);
    let [s1, _, s3] = stress.principals().magnitudes().map(|s| mpa(s - pore));
    let phi = strength.friction_angle().in_deg();
    let [v1, _, v3] = stress.tensor().eigen().axes;
    let three = |v: V3| v.map(|c| fixed(c, 5)).join(", ");
    let (normal, shear) = (mpa(outcome.effective_normal), mpa(outcome.shear));
    let (mu, pore_mpa) = (as_typed(strength.friction), as_typed(pore.in_mpa()));
    let mut steps = vec![Step::worked(format!(
        "φ = arctan {mu} = {}°; 45° − φ/2 = {}° to S_1",
        fixed(phi, 3),
        fixed(45.0 - 0.5 * phi, 3)
    ))];
    if let Some(pair) = outcome.normals {
        let (sin, cos) = from_s1(phi.to_radians()).sin_cos();
        steps.push(Step::worked(format!("v_1 = ({}), v_3 = ({}), north, east, down", three(v1), three(v3))));
        let [a, b] = pair.map(three);
        steps.push(Step::worked(format!(
            "n = {} v_1 ± {} v_3, turned to point down: ({a}) and ({b})",
            fixed(cos, 5),
            fixed(sin, 5)
        )));
        for (plane, n) in planes.planes().into_iter().flatten().zip(1..) {
            steps.push(Step::worked(format!("plane {n}: {}", plane.words())));
        }
    }
    steps.extend([
        Step::worked(format!(
            "σ'_n = ({s1} + {s3})/2 − ({s1} − {s3})/2 · {} = {normal} MPa",
            fixed(phi.to_radians().sin(), 5)
        )),
        Step::worked(format!("τ = ({s1} − {s3})/2 · {} = {shear} MPa", fixed(phi.to_radians().cos(), 5))),
        Step::worked(format!(
            "τ_C = {shear} − ({} + {mu} · ({normal})) = {} MPa",
            as_typed(strength.cohesion.in_mpa()),
            mpa(outcome.coulomb)
        )),
        Step::worked(format!(
            "P_f = {pore_mpa} − ({}) / {mu} = {} MPa; S_3 = {s3} + {pore_mpa} MPa; P_c = {} MPa",
            mpa(outcome.coulomb),
            mpa(outcome.frictional_pore),
            mpa(outcome.least_critical_pore)
        )),
    ]);
    if let Some(tendency) = outcome.largest_slip_tendency {
        steps.push(Step::worked(format!(
            "T_max = ({s1} − {s3}) / (2 √({s1} · {s3})) = {}, an angle of friction of {}°",
            fixed(tendency, 4),
            fixed(tendency.atan().to_degrees(), 2)
        )));
    }
    steps
}

fn notes(planes: &CriticalPlanes, inputs: &CriticalInputs, outcome: &CriticalOutcome) -> Vec<String> {
    let mut notes: Vec<String> = inputs.strength.doubt().into_iter().collect();
    let [first, _, third] = inputs.stress.principals().lines();
    if outcome.normals.is_none() {
        let degrees = from_s1(inputs.strength.friction.atan()).to_degrees();
        notes.push(match (first, third) {
            (None, None) => "All principal stresses are equal: no plane bears shear.".to_owned(),
            (None, _) => format!(
                "S_1 = S_2: every plane whose normal stands at {}° to S_3 is as near to slip as any.",
                fixed(90.0 - degrees, 1)
            ),
            _ => format!(
                "S_2 = S_3: every plane whose normal stands at {}° to S_1 is as near to slip as any.",
                fixed(degrees, 1)
            ),
        });
    }
    if planes.state() != FaultState::Holds {
        notes.push(format!(
                "WARNING: a fault of this strength along these planes would {}; the stress is outside what such faults allow.",
                if planes.state() == FaultState::Slips { "slip" } else { "be open" }
            ));
    }
    if outcome.least_critical_pore < outcome.frictional_pore {
        notes.push("With this cohesion, planes across S_3 open before any plane slips.".to_owned());
    }
    if outcome.largest_slip_tendency.is_none() {
        notes.push(
            "WARNING: S_3 does not exceed the pore pressure: planes across S_3 are open and have no slip tendency."
                .to_owned(),
        );
    }
    notes
}
