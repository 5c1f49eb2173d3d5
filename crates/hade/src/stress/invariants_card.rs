//! How the invariants of a stress are worked out by hand.

use super::invariants::{InvariantsOutcome, MPA};
use super::tensor::Tensor;
use crate::card::{Formula, Method, Reference, Step};
use crate::units::fixed;

/// The work with the numbers put in.
pub(super) fn steps(o: &InvariantsOutcome, tensor: Tensor) -> Vec<Step> {
    let [xx, yy, zz, xy, yz, xz] = tensor.scale(MPA).0.map(factor);
    let [dxx, dyy, dzz, dxy, dyz, dxz] = o.deviator.scale(MPA).0.map(factor);
    let [s1, s2, s3] = tensor.eigen().values.map(|v| factor(v * MPA));
    let f = |value: f64| fixed(value, 4);
    let j2 = f(o.j2 * MPA * MPA);
    let mut steps = vec![
        Step::matrix("S", &tensor.scale(MPA).rows(), 4, "MPa", "in the axes of the stress"),
        Step::worked(format!("I_1 = {xx} + {yy} + {zz} = {} MPa", f(o.i1 * MPA))),
        Step::worked(format!(
            "I_2 = {xx} · {yy} + {yy} · {zz} + {zz} · {xx} − {xy}² − {yz}² − {xz}² = {} MPa²",
            f(o.i2 * MPA * MPA)
        )),
        Step::worked(format!(
            "I_3 = {xx} · {yy} · {zz} + 2 · {xy} · {yz} · {xz} − {xx} · {yz}² − {yy} · {xz}² − {zz} · {xy}² = {} MPa³",
            f(o.i3 * MPA * MPA * MPA)
        )),
        Step::worked(format!("σ_m = I_1 / 3 = {} MPa", f(o.mean.in_mpa()))),
        Step::matrix(
            "s",
            &o.deviator.scale(MPA).rows(),
            4,
            "MPa",
            "the deviator, S less the mean stress on its diagonal",
        ),
        Step::worked(format!("J_2 = ½ · ({dxx}² + {dyy}² + {dzz}²) + {dxy}² + {dyz}² + {dxz}² = {j2} MPa²")),
        Step::worked(format!(
            "J_3 = {dxx} · {dyy} · {dzz} + 2 · {dxy} · {dyz} · {dxz} − {dxx} · {dyz}² − {dyy} · {dxz}² − {dzz} · {dxy}² = {} MPa³",
            f(o.j3 * MPA * MPA * MPA)
        )),
        Step::worked(format!(
            "τ_oct = √(2 · {j2} / 3) = {} MPa, σ_vM = √(3 · {j2}) = {} MPa",
            f(o.octahedral_shear.in_mpa()),
            f(o.von_mises.in_mpa())
        )),
        Step::worked(format!("principal stresses S_1 = {s1}, S_2 = {s2}, S_3 = {s3} MPa")),
        Step::worked(format!("τ_max = ({s1} − {s3}) / 2 = {} MPa", f(o.max_shear.in_mpa()))),
    ];
    if let Some(lode) = o.lode {
        steps.push(Step::worked(format!(
            "tan θ = √3 · ({s2} − {s3}) / (2 · {s1} − {s2} − {s3}), θ = {}°",
            f(lode.in_deg())
        )));
    }
    steps
}

/// A number with four decimals, in brackets when it is negative.
pub(super) fn factor(value: f64) -> String {
    let text = fixed(value, 4);
    if text.starts_with('-') { format!("({text})") } else { text }
}

/// The formulas and their sources.
pub(super) fn method() -> Method {
    Method {
        words: "The coefficients of the characteristic equation of S and of its deviator s; the stresses on the octahedral plane, whose normal makes equal angles with the principal axes; and the Lode angle by its tangent.".to_owned(),
        formulas: vec![
            Formula::new("S_k^3 - I_1 S_k^2 + I_2 S_k - I_3 = 0", "S_k³ − I_1 S_k² + I_2 S_k − I_3 = 0"),
            Formula::new(
                "I_1 = upright(\"tr\") S, quad I_2 = 1/2 (I_1^2 - upright(\"tr\") S^2), quad I_3 = det S",
                "I_1 = tr S, I_2 = ½ (I_1² − tr S²), I_3 = det S",
            ),
            Formula::new("s = S - 1/3 I_1 I, quad J_2 = 1/2 upright(\"tr\") s^2, quad J_3 = det s", "s = S − ⅓ I_1 I, J_2 = ½ tr s², J_3 = det s"),
            Formula::new(
                "tau_upright(\"oct\") = sqrt(2/3 J_2), quad sigma_upright(\"vM\") = sqrt(3 J_2), quad tau_upright(max) = 1/2 (S_1 - S_3)",
                "τ_oct = √(2 J_2 / 3), σ_vM = √(3 J_2), τ_max = ½ (S_1 − S_3)",
            ),
            Formula::new(
                "tan theta = (sqrt(3) (S_2 - S_3)) / (2 S_1 - S_2 - S_3)",
                "tan θ = √3 (S_2 − S_3) / (2 S_1 − S_2 − S_3)",
            ),
            Formula::new("cos 3 theta = (3 sqrt(3)) / 2 J_3 / sqrt(J_2^3)", "cos 3θ = (3√3 / 2) J_3 / √(J_2³)"),
        ],
        symbols: vec![("I".to_owned(), "unit matrix".to_owned())],
        references: vec![
            Reference::new("Jaeger, J.C., Cook, N.G.W. and Zimmerman, R.W. (2007) Fundamentals of Rock Mechanics, 4th ed., Blackwell, §2.8 (invariants, deviator, octahedral stresses; cited from memory)"),
            Reference::new("Lode, W. (1926) Versuche über den Einfluss der mittleren Hauptspannung auf das Fliessen der Metalle, Z. Phys. 36, 913–939 (cited from memory)"),
        ],
        ..Method::default()
    }
}
