//! The pressures at which the whole wall holds, where they need not be one interval.
//!
//! Mogi–Coulomb counts the intermediate stress, and its safe stresses are not convex: where the stress
//! across the wall rises past the larger one in it, that one becomes the middle stress, and the
//! excess as a function of the pressure has an edge that points up between two hollows. Round a hole
//! with weak stress along it the wall may hold in both hollows and fail between them, so the pressures
//! are looked through and every end is closed in on.

use super::shear_wall::{LeastBad, ShearWall};
use crate::rock::{Criterion, with_law};
use crate::units::{Pressure, Quantity};
use crate::well::wall::round::Peak;

/// Pressures between which the whole wall holds; an end that is `None` is none.
#[derive(Clone, Copy, Debug, PartialEq)]
pub(crate) struct Span {
    pub lower: Option<Peak>,
    pub upper: Option<Peak>,
}

/// Looks on either side of the pore pressure: one every sixtieth part of the scale near it, fewer far
/// off.
const LOOKS: i32 = 128;

impl Span {
    /// "from 67.86 MPa to 83.57 MPa".
    pub fn words(&self) -> String {
        let shown = |end: Option<Peak>, none: &str| {
            end.map_or_else(|| none.to_owned(), |peak| Pressure::from_si(peak.value).to_string())
        };
        format!("from {} to {}", shown(self.lower, "any pressure below"), shown(self.upper, "any pressure above"))
    }
}

/// One look at the worst excess, x above the pore pressure.
#[derive(Clone, Copy)]
struct Seen {
    x: f64,
    excess: f64,
}

fn is_convex<C: Criterion>(_: &C) -> bool {
    C::CONVEX
}

impl ShearWall {
    /// Whether the safe pressures are one interval for certain.
    pub fn is_convex(&self) -> bool {
        with_law!(self.law, criterion => is_convex(&criterion))
    }

    /// Every interval of pressures at which the whole wall holds, from below.
    pub fn spans(&self) -> Vec<Span> {
        let looks = self.looks();
        let mut spans = Vec::new();
        let mut open: Option<Option<Peak>> = looks.first().filter(|look| look.excess <= 0.0).map(|_| None);
        for (before, after) in looks.iter().zip(looks.iter().skip(1)) {
            match (before.excess <= 0.0, after.excess <= 0.0) {
                (false, true) => open = Some(Some(self.end_between(before.x, after.x))),
                (true, false) => {
                    if let Some(lower) = open.take() {
                        spans.push(Span { lower, upper: Some(self.end_between(after.x, before.x)) });
                    }
                }
                _ => {}
            }
        }
        if let Some(lower) = open {
            spans.push(Span { lower, upper: None });
        }
        spans
    }

    /// The pressure at which the worst place is least bad, looking through all.
    pub fn least_of_spans(&self) -> LeastBad {
        let looks = self.looks();
        let least = |a: &&Seen, b: &&Seen| a.excess.total_cmp(&b.excess);
        let x = looks.iter().min_by(least).map_or(0.0, |look| look.x);
        let worst = self.worst(self.pore + x);
        LeastBad { pressure: self.pore + x, excess: worst.value, phi: worst.phi, flat: worst.flat }
    }

    fn see(&self, x: f64) -> Seen {
        Seen { x, excess: self.worst(self.pore + x).value }
    }

    /// Looks at the worst excess from below, the bottom of every hollow and the top of every hill
    /// between them among these.
    fn looks(&self) -> Vec<Seen> {
        let reach = self.reach();
        let at = |k: i32| reach * (6.0 * f64::from(k) / f64::from(LOOKS)).sinh() / 6.0_f64.sinh();
        let plain: Vec<Seen> = (-LOOKS..=LOOKS).map(|k| self.see(at(k))).collect();
        let mut looks: Vec<Seen> = plain.first().copied().into_iter().collect();
        for ((a, b), c) in plain.iter().zip(plain.iter().skip(1)).zip(plain.iter().skip(2)) {
            // A hollow that fails may still hold at its bottom, and a hill that holds may fail on top.
            let turn = if b.excess <= a.excess && b.excess <= c.excess {
                Some(self.turn(a.x, c.x, 1.0))
            } else if b.excess >= a.excess && b.excess >= c.excess {
                Some(self.turn(a.x, c.x, -1.0))
            } else {
                None
            };
            let (before, after) = (turn.filter(|t| t.x < b.x), turn.filter(|t| t.x > b.x));
            looks.extend(before.into_iter().chain([*b]).chain(after));
        }
        looks.extend(plain.last());
        looks
    }

    /// The least (sense 1) or the greatest (−1) of the worst excess between two pressures (golden
    /// section).
    fn turn(&self, mut low: f64, mut high: f64, sense: f64) -> Seen {
        let ratio = 0.5 * (5.0_f64.sqrt() - 1.0);
        let (mut a, mut b) = (self.see(high - ratio * (high - low)), self.see(low + ratio * (high - low)));
        for _ in 0..80 {
            if a.excess * sense <= b.excess * sense {
                high = b.x;
                b = a;
                a = self.see(high - ratio * (high - low));
            } else {
                low = a.x;
                a = b;
                b = self.see(low + ratio * (high - low));
            }
            if high - low <= 1e-14 * self.scale() {
                break;
            }
        }
        if a.excess * sense <= b.excess * sense { a } else { b }
    }

    /// The end between a pressure that fails and one that holds.
    fn end_between(&self, mut fails: f64, mut holds: f64) -> Peak {
        let mut worst = self.worst(self.pore + holds);
        for _ in 0..100 {
            let (s, c) = worst.phi.sin_cos();
            let jet = with_law!(self.law, criterion => self.excess(criterion, self.pore + holds).pressed(c, s, holds));
            // Newton by the place that is worst at the safe side; halving where it leaves the two.
            let newton = holds - jet.value / jet.slope;
            let inside = (newton - fails) * (newton - holds) < 0.0;
            let x = if inside && (newton - holds).abs() < 0.5 * (fails - holds).abs() {
                newton
            } else {
                0.5 * (fails + holds)
            };
            let here = self.worst(self.pore + x);
            let met = here.value.abs() <= 1e-13 * self.scale();
            if met || here.value <= 0.0 {
                (holds, worst) = (x, here);
            } else {
                fails = x;
            }
            if met || (fails - holds).abs() <= 1e-15 * self.scale() {
                break;
            }
        }
        Peak { value: self.pore + holds, ..worst }
    }
}
