//! The highest place of a function round the hole without a scan: Newton climbs to a summit, and a polynomial proves
//! that no other place is higher.

use super::wave::Wave;
use crate::rock::Jet;

/// A summit: the function with its derivatives there, and cos φ and sin φ.
pub(crate) struct Summit {
    pub jet: Jet,
    pub c: f64,
    pub s: f64,
}

/// Newton's steps on the slope from a place near the top of a hill; `None` where it is not on one, or does not
/// settle.
#[inline(always)]
pub(crate) fn climbed(jet_at: impl Fn(f64, f64) -> Jet, (mut c, mut s): (f64, f64)) -> Option<Summit> {
    let mut jet = jet_at(c, s);
    for _ in 0..8 {
        if jet.bend >= 0.0 {
            return None;
        }
        let step = -jet.slope / jet.bend;
        if step.abs() > 1.0 {
            return None;
        }
        // Turned by the step; a short one by its series.
        let (sin, cos) = if step.abs() < 1e-3 {
            let square = step * step;
            (step * (1.0 - square / 6.0), 1.0 - square * (0.5 - square / 24.0))
        } else {
            step.sin_cos()
        };
        (c, s) = (c * cos - s * sin, s * cos + c * sin);
        if step.abs() < 1e-9 {
            return Some(Summit { jet, c, s });
        }
        jet = jet_at(c, s);
    }
    None
}

/// Whether two waves f and g are above zero all round and f g − v nowhere below it, when it has a double zero at a
/// place: it is a trigonometric polynomial of degree two, (1 − cos ψ)(A + B cos ψ + C sin ψ) with ψ counted from there,
/// and is nowhere below zero when A ≥ √(B² + C²).
#[inline(always)]
pub(crate) fn only_touches(f: Wave, g: Wave, v_mean: f64, c: f64, s: f64) -> bool {
    let from_there = |w: Wave| [w.mean, w.cos * c + w.sin * s, w.sin * c - w.cos * s];
    let ([f0, f1, f2], [g0, g1, g2]) = (from_there(f), from_there(g));
    let constant = f0 * g0 + 0.5 * (f1 * g1 + f2 * g2) - v_mean;
    let (c2, s2) = (0.5 * (f1 * g1 - f2 * g2), 0.5 * (f1 * g2 + f2 * g1));
    let rest = constant - c2;
    let above = |[mean, cos, sin]: [f64; 3]| mean > 0.0 && mean * mean * (1.0 + 1e-12) >= cos * cos + sin * sin;
    let proved = rest > 0.0 && rest * rest > 4.0 * (c2 * c2 + s2 * s2) * (1.0 + 1e-9);
    proved && above([f0, f1, f2]) && above([g0, g1, g2])
}
