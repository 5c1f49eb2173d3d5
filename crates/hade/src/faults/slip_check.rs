//! The stress on planes by the principal stresses and direction cosines: the second route of every
//! fault's card.

use super::slip::SlipOutcome;
use super::strength::FaultStrength;
use crate::card::Check;
use crate::frames::vector::{V3, add, dot, scale};
use crate::frames::{Geographic, Plane};
use crate::stress::Stress;
use crate::stress::tensor::Eigen;
use crate::units::{Pressure, Quantity};

/// Normal and shear stress on a plane by direction cosines, in Pa.
pub(super) struct ByCosines {
    pub normal: f64,
    pub shear: f64,
    /// S_1 − σ_n.
    pub below_s1: f64,
    /// The shear part of the traction, north, east, down.
    pub drag: V3,
}

/// σ_n = Σ S_k l_k²; τ² = (S_1−S_2)² l²m² + (S_2−S_3)² m²n² + (S_3−S_1)² n²l², which keeps its
/// figures where the shear is small.
pub(super) fn by_cosines(e: &Eigen, normal: V3) -> ByCosines {
    let [l, m, n] = e.axes.map(|v| dot(v, normal));
    let [a, b, c] = e.values;
    let sigma = a * l * l + b * m * m + c * n * n;
    let drag = [(l, a), (m, b), (n, c)]
        .iter()
        .zip(e.axes)
        .fold([0.0; 3], |t, ((cosine, s), axis)| add(t, scale(axis, cosine * (s - sigma))));
    ByCosines {
        normal: sigma,
        shear: ((a - b) * l * m).hypot((b - c) * m * n).hypot((c - a) * n * l),
        below_s1: (a - b) * m * m + (a - c) * n * n,
        drag,
    }
}

/// Every number of every plane against the direction cosines. The planes come with the strength and
/// the outcome that is checked.
pub(super) fn slip_checks(
    stress: &Stress<Geographic>,
    pore: Pressure,
    planes: &[(Plane, FaultStrength, SlipOutcome)],
) -> Vec<Check> {
    let e = stress.tensor().eigen();
    let span = e.values[0] - e.values[2];
    let strongest = planes.iter().fold(0.0_f64, |m, (_, s, _)| m.max(s.cohesion.si()));
    let scale_of = stress.tensor().largest().max(pore.si().abs()).max(strongest).max(1.0);
    let steepest = planes.iter().fold(1.0_f64, |m, (_, s, _)| m.max(s.friction));
    let farthest = planes.iter().fold(scale_of, |m, (.., o)| m.max(o.frictional_pore.si().abs()));
    let mut rows = Rows::default();
    for (plane, strength, got) in planes {
        let Ok(axes) = plane.axes() else { return Vec::new() };
        let other = by_cosines(&e, axes.normal);
        let effective = other.normal - pore.si();
        rows.normal.put([got.normal.si(), got.effective_normal.si()], [other.normal, effective]);
        rows.shear.put([got.shear.si()], [other.shear]);
        // The slip tendency is defined where the plane is pressed together, and only there.
        let pressed = got.effective_normal.si() > 0.0;
        rows.defined += f64::from(u8::from(pressed != got.slip_tendency.is_some()));
        if let Some(tendency) = got.slip_tendency {
            rows.tendency.put([tendency * got.effective_normal.si()], [other.shear]);
        }
        if let Some(tendency) = got.dilation_tendency {
            rows.dilation.put([tendency * span], [other.below_s1]);
        }
        if let Some(rake) = got.rake {
            let (sin, cos) = rake.si().sin_cos();
            let slip = add(scale(axes.along_strike, cos), scale(axes.down_dip, -sin));
            rows.drag.put(scale(slip, other.shear), other.drag);
        }
        // The distance of Mohr's point from the line of strength, drawn up to the shear axis.
        let (sin, cos) = strength.friction.atan().sin_cos();
        let beyond = (other.shear - strength.cohesion.si()) * cos - effective * sin;
        rows.coulomb.put([got.coulomb.si()], [beyond / cos]);
        let borne = strength.cohesion.si() + strength.friction * (other.normal - got.frictional_pore.si());
        rows.let_go.put([borne], [other.shear]);
        rows.critical.put([got.critical_pore.si()], [other.normal.min(got.frictional_pore.si())]);
    }
    let fine = scale_of * 1e-11;
    let mut checks = vec![
        rows.normal.check("total and effective normal stress by direction cosines, Σ S_k l_k²", fine),
        rows.shear.check("shear stress by direction cosines and differences of the principal stresses", fine),
        rows.coulomb.check("Coulomb stress from the distance of Mohr's point to the line of strength", fine * steepest),
        rows.let_go.check("at the pore pressure where friction lets go, the strength equals the shear stress", {
            (farthest * 1e-12).max(fine) * steepest
        }),
        rows.critical.check("critical pore pressure: that one, but not above the normal stress", farthest * 1e-11),
        Check::holds("planes with a slip tendency are those pressed together", rows.defined, 0.0, ""),
    ];
    let defined = [
        (&rows.tendency, "slip tendency times effective normal stress against the shear stress", fine),
        (&rows.dilation, "dilation tendency times S_1 − S_3 against (S_1−S_2) m² + (S_1−S_3) n²", scale_of * 1e-13),
        (
            &rows.drag,
            "slip direction of the rake, as long as the shear stress, against the traction less its normal part",
            fine,
        ),
    ];
    checks.extend(
        defined.iter().filter(|(pairs, ..)| !pairs.got.is_empty()).map(|(pairs, what, t)| pairs.check(what, *t)),
    );
    checks
}

/// Numbers found and expected, in Pa.
#[derive(Default)]
struct Pairs {
    got: Vec<f64>,
    expected: Vec<f64>,
}

impl Pairs {
    fn put<const N: usize>(&mut self, got: [f64; N], expected: [f64; N]) {
        self.got.extend(got);
        self.expected.extend(expected);
    }
    fn check(&self, what: &str, tolerance: f64) -> Check {
        let mpa = |list: &[f64]| list.iter().map(|v| v * 1e-6).collect::<Vec<_>>();
        Check::compare(what, &mpa(&self.got), &mpa(&self.expected), tolerance * 1e-6, "MPa")
    }
}

#[derive(Default)]
struct Rows {
    normal: Pairs,
    shear: Pairs,
    tendency: Pairs,
    dilation: Pairs,
    drag: Pairs,
    coulomb: Pairs,
    let_go: Pairs,
    critical: Pairs,
    /// How many planes lack a slip tendency that they should have, or the other way.
    defined: f64,
}
