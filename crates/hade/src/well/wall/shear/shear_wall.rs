//! Shear failure of a wall: the pressures between which the whole wall holds, the worst place at a
//! pressure, the least bad pressure where none is safe.
//!
//! The wall fails where the criterion of its rock, or slip on its plane of weakness, is exceeded.
//! Mohr–Coulomb at an impermeable wall has both ends of the safe pressures of a place in closed form
//! (`ends.rs`); the other criteria, and other walls, are searched (`search.rs`).

use super::closed_form::ClosedForm;
use super::everywhere::everywhere;
use super::excess::Excess;
use super::search::{Look, LowerEnd, Search, lower_end, rise};
use super::slip::PlaneAtWall;
use crate::rock::{Criterion, Law, with_law};
use crate::well::wall::elastic::{AtWall, EffectiveWall, Kirsch};
use crate::well::wall::round::{OnCircle, Peak, STEP, Top, greatest, greatest_beside, on_circle};

/// A wall with its strength and pore pressure, in Pa.
#[derive(Clone, Copy, Debug, PartialEq)]
pub(crate) struct ShearWall {
    /// Total elastic stresses, thermal ones among them.
    pub kirsch: Kirsch,
    pub law: Law,
    pub plane: Option<PlaneAtWall>,
    /// The pore pressure of the formation.
    pub pore: f64,
    /// The share of the pressure above it that passes the wall: 0 impermeable, 1 permeable.
    pub passes: f64,
    /// 2η.
    pub eta2: f64,
    effective: EffectiveWall,
    scale: f64,
}

/// The pressures between which the whole wall holds.
#[derive(Clone, Copy, Debug, PartialEq)]
pub(crate) enum Window {
    /// An end that is `None` is none: the wall holds at any pressure on that side.
    Open { lower: Option<Peak>, upper: Option<Peak> },
    /// At no pressure does the whole wall hold. Where each place does at some, the two ends are
    /// given all the same, lower above upper: (lower, upper).
    Closed { crossed: Option<(f64, f64)> },
}

/// The pressure at which the wall fails least.
#[derive(Clone, Copy, Debug, PartialEq)]
pub(crate) struct LeastBad {
    pub pressure: f64,
    /// By how much the worst place is still beyond what the rock bears.
    pub excess: f64,
    /// φ of the worst place.
    pub phi: f64,
    pub flat: bool,
}

/// An excess within this share of the scale is zero.
const NOISE: f64 = 1e-13;
/// An excess within this share of the scale is near enough to its end to look for the top of its hill.
const NEAR: f64 = 1e-3;
/// A step in φ after which a top is found: Newton doubles the digits.
const ARRIVED: f64 = 1e-7;

impl ShearWall {
    pub fn new(kirsch: Kirsch, law: Law, plane: Option<PlaneAtWall>, pore: f64, passes: f64, eta2: f64) -> Self {
        let scale = (kirsch.scale() + law.size() + pore.abs() + plane.map_or(0.0, |p| p.size())).max(1.0);
        let effective = EffectiveWall::new(&kirsch, pore, passes, eta2);
        ShearWall { kirsch, law, plane, pore, passes, eta2, effective, scale }
    }

    /// The size of the numbers at hand, for tolerances.
    pub fn scale(&self) -> f64 {
        self.scale
    }

    pub fn effective_wall(&self) -> &EffectiveWall {
        &self.effective
    }

    /// The wall in closed form, where there is one.
    pub fn closed_form(&self) -> Option<ClosedForm> {
        match (self.law, self.plane) {
            (Law::MohrCoulomb(line), None) if self.passes == 0.0 => {
                Some(ClosedForm::new(self.kirsch, line, self.pore, self.scale))
            }
            _ => None,
        }
    }

    #[inline(always)]
    pub fn excess<C: Criterion>(&self, criterion: C, pressure: f64) -> Excess<'_, C> {
        Excess { wall: &self.effective, criterion, plane: self.plane.as_ref(), x: pressure - self.pore }
    }

    /// Pressures beyond which nothing is looked for, above and below the pore pressure.
    pub fn reach(&self) -> f64 {
        64.0 * self.scale
    }

    /// By how much one place is beyond what the rock bears (negative: it holds).
    pub fn excess_at(&self, pressure: f64, phi: f64) -> f64 {
        let (s, c) = phi.sin_cos();
        with_law!(self.law, criterion => self.excess(criterion, pressure).value(c, s))
    }

    /// Whether slip on the plane of weakness is what is worst at a place.
    pub fn slips_at(&self, pressure: f64, phi: f64) -> bool {
        let (s, c) = phi.sin_cos();
        let place = self.effective.place(c, s, pressure - self.pore);
        let intact = ShearWall { plane: None, ..*self }.excess_at(pressure, phi);
        self.plane.is_some_and(|plane| plane.slip(c, s, &place) >= intact)
    }

    /// The worst place of the wall at a pressure.
    pub fn worst(&self, pressure: f64) -> Peak {
        with_law!(self.law, criterion => greatest(&self.excess(criterion, pressure), self.scale))
    }

    /// The pressures between which the whole wall holds, exact in the tool face.
    pub fn window(&self) -> Window {
        if let Some(closed) = self.closed_form() {
            return closed.window();
        }
        match self.ends() {
            Some([lower, upper]) => Window::Open { lower, upper },
            None => Window::Closed { crossed: self.crossed() },
        }
    }

    /// Both ends of them, where any pressure is safe for the whole wall; an end that is `None` is none. For loops
    /// over many walls: what it would take where none is safe is not looked for.
    pub fn ends(&self) -> Option<[Option<Peak>; 2]> {
        if let Some(closed) = self.closed_form() {
            return closed.ends().map(|(lower, upper)| [Some(lower), Some(upper)]);
        }
        if !self.is_convex() {
            return self.spans().first().map(|lowest| [lowest.lower, lowest.upper]);
        }
        match (self.searched(-1.0), self.searched(1.0)) {
            (Side::Never, _) | (_, Side::Never) => None,
            (lower, upper) => Some([lower.peak(), upper.peak()]),
        }
    }

    /// The lower end of the safe pressures alone; `None` when there is none or no pressure is safe.
    #[inline]
    pub fn lower(&self) -> Option<f64> {
        if let Some(closed) = self.closed_form() {
            return closed.lower();
        }
        self.searched(-1.0).peak().map(|peak| peak.value)
    }

    /// One end of the safe pressures by search: side −1 the lower, +1 the upper.
    fn searched(&self, side: f64) -> Side {
        with_law!(self.law, criterion => self.searched_by(criterion, side))
    }

    fn searched_by<C: Criterion>(&self, criterion: C, side: f64) -> Side {
        let noise = NOISE * self.scale;
        let worst = std::cell::Cell::new(Peak { phi: 0.0, value: 0.0, flat: false });
        // y = −side · x rises into the safe pressures from either side.
        let at_place = |c: f64, s: f64, y: f64| {
            let x = -side * y;
            let jet = self.excess(criterion, self.pore + x).pressed(c, s, x);
            (jet.value, -side * jet.slope)
        };
        // It begins at the end of the place with the largest hoop stress (the smallest for the upper),
        // and goes to the top of the hill there: mostly the end of the whole wall, so that one look all
        // round confirms it.
        let hoop = self.effective.hoop;
        let crest = if side < 0.0 { hoop.sin.atan2(hoop.cos) } else { (-hoop.sin).atan2(-hoop.cos) };
        let (mut phi, (mut s, mut c)) = (crest, crest.sin_cos());
        let mut start = rise(|y| at_place(c, s, y), -0.25 * self.scale, NEAR * self.scale);
        let mut top = None;
        for _ in 0..12 {
            let here = self.excess(criterion, self.pore - side * start);
            let piece = here.piece_at(c, s);
            let jet = here.jet(piece, c, s);
            let newton = -jet.slope / jet.bend;
            let step = if jet.bend < 0.0 { newton.clamp(-STEP, STEP) } else { STEP.copysign(jet.slope) };
            phi += step;
            (s, c) = phi.sin_cos();
            if step.abs() < ARRIVED && jet.bend < 0.0 {
                start = rise(|y| at_place(c, s, y), start, noise);
                top = Some(Top { piece, phi: on_circle(phi), value: at_place(c, s, start).0 });
                break;
            }
            let (excess, slope) = at_place(c, s, start);
            if slope < 0.0 {
                start -= excess / slope;
            }
        }
        let look = |y: f64| {
            let known = top.filter(|_| y == start);
            let peak = greatest_beside(&self.excess(criterion, self.pore - side * y), self.scale, known);
            let (s, c) = peak.phi.sin_cos();
            let (_, slope) = at_place(c, s, y);
            worst.set(peak);
            Look { excess: peak.value, slope, next: rise(|y| at_place(c, s, y), y, noise) }
        };
        match lower_end(look, self.search_for(&criterion, start)) {
            LowerEnd::At(y) => Side::At(Peak { value: self.pore - side * y, ..worst.get() }),
            LowerEnd::Never => Side::Never,
            LowerEnd::Unbounded => Side::Unbounded,
        }
    }

    fn search_for<C: Criterion>(&self, _: &C, start: f64) -> Search {
        let scale = self.scale;
        Search { start, scale, reach: self.reach(), noise: NOISE * scale, convex: C::CONVEX }
    }

    /// Both ends of the safe pressures of one place, where any is safe there; infinite where there is
    /// no end.
    pub fn interval_at(&self, c: f64, s: f64) -> Option<(f64, f64)> {
        if let Some(closed) = self.closed_form() {
            return closed.interval_at(c, s);
        }
        with_law!(self.law, criterion => {
            let end = |side: f64| {
                let look = |y: f64| {
                    let x = -side * y;
                    let jet = self.excess(criterion, self.pore + x).pressed(c, s, x);
                    let slope = -side * jet.slope;
                    Look { excess: jet.value, slope, next: y - jet.value / slope }
                };
                match lower_end(look, self.search_for(&criterion, -0.25 * self.scale)) {
                    LowerEnd::At(y) => Some(self.pore - side * y),
                    LowerEnd::Unbounded => Some(side * f64::INFINITY),
                    LowerEnd::Never => None,
                }
            };
            Some((end(-1.0)?, end(1.0)?))
        })
    }

    /// Where no pressure is safe for the whole wall but some is for each place: the largest of their
    /// lower ends and the smallest of their upper ones, looked for round the hole.
    fn crossed(&self) -> Option<(f64, f64)> {
        let ends = everywhere(|c, s| self.interval_at(c, s))?;
        let step = std::f64::consts::TAU / ends.len() as f64;
        let closer = |of: &dyn Fn((f64, f64)) -> f64| {
            let (mut best, mut at) = (f64::NEG_INFINITY, 0);
            for (k, interval) in ends.iter().enumerate() {
                if of(*interval) > best {
                    (best, at) = (of(*interval), k);
                }
            }
            let value = |phi: f64| {
                let (s, c) = phi.sin_cos();
                self.interval_at(c, s).map_or(f64::INFINITY, of)
            };
            // Golden section on the hill about the best look.
            let (mut low, mut high) = ((at as f64 - 1.0) * step, (at as f64 + 1.0) * step);
            let ratio = 0.5 * (5.0_f64.sqrt() - 1.0);
            for _ in 0..60 {
                let (a, b) = (high - ratio * (high - low), low + ratio * (high - low));
                if value(a) > value(b) { high = b } else { low = a }
            }
            value(0.5 * (low + high)).max(best)
        };
        let lower = closer(&|(lower, _)| lower);
        let upper = -closer(&|(_, upper)| -upper);
        (lower.is_finite() && upper.is_finite()).then_some((lower, upper))
    }

    /// The pressure at which the worst place is least bad. The sign of the worst excess's slope
    /// decides every step.
    pub fn least_bad(&self) -> LeastBad {
        if !self.is_convex() {
            return self.least_of_spans();
        }
        let reach = self.reach();
        let (mut low, mut high) = (-reach, reach);
        let mut found = LeastBad { pressure: self.pore, excess: f64::INFINITY, phi: 0.0, flat: false };
        for _ in 0..120 {
            let x = 0.5 * (low + high);
            let worst = self.worst(self.pore + x);
            let (s, c) = worst.phi.sin_cos();
            let slope = with_law!(self.law, criterion => self.excess(criterion, self.pore + x).pressed(c, s, x).slope);
            found = LeastBad { pressure: self.pore + x, excess: worst.value, phi: worst.phi, flat: worst.flat };
            if slope < 0.0 {
                low = x;
            } else if slope > 0.0 {
                high = x;
            } else {
                break;
            }
            if high - low <= 1e-16 * reach {
                break;
            }
        }
        found
    }

    /// The pore pressure behind the wall at a pressure in the hole.
    pub fn pore_behind(&self, pressure: f64) -> f64 {
        self.pore + self.passes * (pressure - self.pore)
    }

    /// The total stresses at a tool face, with what seepage adds.
    pub fn at(&self, theta: f64, pressure: f64) -> AtWall {
        let seepage = self.passes * self.eta2 * (pressure - self.pore);
        let at = self.kirsch.at(theta, pressure);
        AtWall { hoop: at.hoop + seepage, axial: at.axial + seepage, ..at }
    }

    /// σ1', σ2', σ3' at a tool face.
    pub fn principal(&self, theta: f64, pressure: f64) -> [f64; 3] {
        let at = self.at(theta, pressure);
        let (e1, e2, _) = at.in_the_wall();
        let pore = self.pore_behind(pressure);
        let mut all = [e1 - pore, e2 - pore, at.radial - pore];
        all.sort_unstable_by(|a, b| b.total_cmp(a));
        all
    }
}

/// One end of the safe pressures.
enum Side {
    At(Peak),
    Never,
    Unbounded,
}

impl Side {
    fn peak(&self) -> Option<Peak> {
        match self {
            Side::At(peak) => Some(*peak),
            Side::Never | Side::Unbounded => None,
        }
    }
}
