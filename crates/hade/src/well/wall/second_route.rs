//! The second route of the checks: the wall rebuilt from the geographic tensor and the hole's axis
//! vectors, its strength by eigenvalues of the whole tensor, its worst place by looking everywhere.
//!
//! In vectors, with n the direction of the tool face, m the one around and t along the hole:
//! σθ = 3 (tr S − t·S t) − 4 n·S n − p, σz = t·S t − ν (4 n·S n − 2 (tr S − t·S t)), τθz = 2 t·S m.
//! A transposed turn, a tool face of the wrong sense and a mistaken component all show here.

use std::f64::consts::PI;

use super::wall::WallInputs;
use crate::frames::vector::{M3, V3, add, dot, scale};
use crate::stress::tensor::Tensor;
use crate::units::Quantity;

/// A wall by vectors, in Pa and radians.
#[derive(Clone, Copy, Debug)]
pub(super) struct ByVectors {
    far: Tensor,
    top: V3,
    right: V3,
    along: V3,
    poisson: f64,
    pore: f64,
    /// tan(45° + φ/2), from which this route has q and UCS.
    tangent: f64,
    ucs: f64,
}

/// How finely the second route looks round the hole: every half degree.
const LOOKS: u32 = 360;

impl ByVectors {
    pub fn new(inputs: &WallInputs) -> Option<Self> {
        let far = inputs.stress.geographic();
        let [top, right, along] = inputs.stress.attitude()?.matrix().ok()?;
        let (tangent, ucs) = inputs.rock.strength.by_tangent();
        Some(ByVectors {
            far,
            top,
            right,
            along,
            poisson: inputs.rock.poisson,
            pore: inputs.pore.si(),
            tangent,
            ucs: ucs.si(),
        })
    }

    /// A size for tolerances.
    pub fn size(&self) -> f64 {
        (self.far.largest() + self.pore.abs() + self.ucs).max(1.0)
    }

    pub fn direction(&self, theta: f64) -> V3 {
        add(scale(self.top, theta.cos()), scale(self.right, theta.sin()))
    }

    /// Along the hole.
    pub fn direction_along(&self) -> V3 {
        self.along
    }

    fn around(&self, theta: f64) -> V3 {
        add(scale(self.top, -theta.sin()), scale(self.right, theta.cos()))
    }

    /// Radial, hoop, axial and τθz.
    pub fn parts(&self, theta: f64, pressure: f64) -> [f64; 4] {
        let (n, m, t) = (self.direction(theta), self.around(theta), self.along);
        let traction = self.far.times(t);
        let axial = dot(t, traction);
        let [a, b, c, ..] = self.far.0;
        let across = a + b + c - axial;
        let normal = dot(n, self.far.times(n));
        [
            pressure,
            3.0 * across - 4.0 * normal - pressure,
            axial - self.poisson * (4.0 * normal - 2.0 * across),
            2.0 * dot(m, traction),
        ]
    }

    /// The total stress at the wall in north, east, down, as a whole tensor.
    pub fn tensor(&self, theta: f64, pressure: f64) -> Tensor {
        let [radial, hoop, axial, shear] = self.parts(theta, pressure);
        self.put_together(theta, radial, hoop, axial, shear)
    }

    fn put_together(&self, theta: f64, radial: f64, hoop: f64, axial: f64, shear: f64) -> Tensor {
        let axes: M3 = [self.direction(theta), self.around(theta), self.along];
        let plain = Tensor::from_axes([radial, hoop, axial], &axes);
        // τ (m tᵀ + t mᵀ) as two dyads.
        let root = std::f64::consts::FRAC_1_SQRT_2;
        let [n, m, t] = axes;
        let tilted = [n, scale(add(m, t), root), scale(add(m, scale(t, -1.0)), root)];
        plain.add(Tensor::from_axes([0.0, shear, -shear], &tilted))
    }

    /// Effective principal stresses by the whole tensor's eigenvalues.
    pub fn effective(&self, theta: f64, pressure: f64) -> [f64; 3] {
        self.tensor(theta, pressure).eigen().values.map(|v| v - self.pore)
    }

    /// σ1' − q σ3' − UCS.
    pub fn excess(&self, theta: f64, pressure: f64) -> f64 {
        let [s1, _, s3] = self.effective(theta, pressure);
        s1 - self.tangent * self.tangent * s3 - self.ucs
    }

    /// The effective principal stresses within the wall: the stress across it is put out of the way
    /// of the eigenvalues first.
    fn in_the_wall(&self, theta: f64, pressure: f64) -> [f64; 2] {
        let [_, hoop, axial, shear] = self.parts(theta, pressure);
        let aside = hoop.max(axial) + shear.abs();
        let [_, e1, e2] = self.put_together(theta, aside, hoop, axial, shear).eigen().values;
        [e1 - self.pore, e2 - self.pore]
    }

    /// The greatest value of a function over tool faces 0–180° and where, by looking everywhere and
    /// closing in on every look that is higher than its neighbours and may be beside the greatest.
    pub fn greatest(&self, f: impl Fn(f64) -> f64) -> (f64, f64) {
        let step = PI / f64::from(LOOKS);
        let looks: Vec<(f64, f64)> = (0..LOOKS).map(|k| f64::from(k) * step).map(|t| (f(t), t)).collect();
        let top = looks.iter().fold(f64::NEG_INFINITY, |m, (v, _)| m.max(*v));
        let bottom = looks.iter().fold(f64::INFINITY, |m, (v, _)| m.min(*v));
        let mut best = looks.iter().copied().fold((f64::NEG_INFINITY, 0.0), |a, b| if b.0 > a.0 { b } else { a });
        let cyclic = looks.iter().zip(looks.iter().cycle().skip(1)).zip(looks.iter().cycle().skip(2));
        for (((a, _), (b, t)), (c, _)) in cyclic {
            if b >= a && b >= c && *b > top - 0.01 * (top - bottom) {
                for (low, high) in [(t - step, *t), (*t, t + step)] {
                    let peak = peak_between(&f, low, high);
                    best = if peak.0 > best.0 { peak } else { best };
                }
            }
        }
        best
    }

    /// The worst excess round the hole at a pressure.
    pub fn worst(&self, pressure: f64) -> f64 {
        self.greatest(|theta| self.excess(theta, pressure)).0
    }

    /// The worst excess of one side round the hole: side −1 what too little pressure does (the hole
    /// closes in), +1 what too much does (it is pushed out). Failure within the wall belongs to the
    /// side on which a little more pressure makes it better, or worse.
    pub fn worst_of_side(&self, pressure: f64, side: f64) -> f64 {
        self.greatest(|theta| self.excess_of_side(theta, pressure, side)).0
    }

    fn excess_of_side(&self, theta: f64, pressure: f64, side: f64) -> f64 {
        let nudge = 1e-6 * self.size();
        let q = self.tangent * self.tangent;
        let across = pressure - self.pore;
        let [e1, e2] = self.in_the_wall(theta, pressure);
        let [more1, more2] = self.in_the_wall(theta, pressure + nudge);
        let of_side = if side < 0.0 { e1 - q * across } else { across - q * e2 };
        let within = if ((more1 - q * more2) - (e1 - q * e2)) * side > 0.0 { e1 - q * e2 } else { of_side };
        of_side.max(within) - self.ucs
    }

    /// The least effective principal stress round the hole.
    pub fn least_round(&self, pressure: f64) -> f64 {
        -self.greatest(|theta| -self.effective(theta, pressure)[2]).0
    }

    /// The same within the wall alone, the stress across it put out of the way.
    pub fn least_in_wall_round(&self, pressure: f64) -> f64 {
        -self.greatest(|theta| -self.in_the_wall(theta, pressure)[1]).0
    }

    /// The widest failing arc at a pressure, by looking everywhere, closer where the excess turns, and
    /// halving at the edges; infinite when all looks fail.
    pub fn widest(&self, pressure: f64) -> f64 {
        self.widest_where(|theta| self.excess(theta, pressure))
    }

    /// The widest arc that too little pressure makes fail.
    pub fn widest_closing(&self, pressure: f64) -> f64 {
        self.widest_where(|theta| self.excess_of_side(theta, pressure, -1.0))
    }

    fn widest_where(&self, excess: impl Fn(f64) -> f64) -> f64 {
        let step = PI / f64::from(LOOKS);
        let mut looks: Vec<(f64, f64)> = (0..LOOKS).map(|k| f64::from(k) * step).map(|t| (t, excess(t))).collect();
        // An arc, or a sound gap, narrower than a look is at a turning point.
        let mut turns = Vec::new();
        let cyclic = looks.iter().zip(looks.iter().cycle().skip(1)).zip(looks.iter().cycle().skip(2));
        for (((_, a), (t, b)), (_, c)) in cyclic {
            for sign in [1.0, -1.0] {
                if (b - a) * sign >= 0.0 && (b - c) * sign >= 0.0 {
                    let (value, at) = peak_between(&|x| sign * excess(x), t - step, t + step);
                    turns.push((at.rem_euclid(PI), sign * value));
                }
            }
        }
        looks.extend(turns);
        looks.sort_by(|a, b| a.0.total_cmp(&b.0));
        let noise = 1e-11 * self.size();
        let fails = |(_, excess): &(f64, f64)| *excess > noise;
        let Some(sound) = looks.iter().position(|look| !fails(look)) else { return f64::INFINITY };
        looks.rotate_left(sound);
        let edge = |inside: f64, outside: f64| {
            let (mut inside, mut outside) = (inside, outside);
            for _ in 0..60 {
                let middle = 0.5 * (inside + outside);
                if excess(middle) > noise { inside = middle } else { outside = middle }
            }
            0.5 * (inside + outside)
        };
        let (mut widest, mut from) = (0.0_f64, None);
        for (before, now) in looks.iter().zip(looks.iter().cycle().skip(1)) {
            let here = if now.0 < before.0 { now.0 + PI } else { now.0 };
            match (fails(now), from) {
                (true, None) => from = Some(edge(here, before.0)),
                (false, Some(start)) => {
                    let end: f64 = edge(before.0, here);
                    widest = widest.max((end - start).rem_euclid(PI));
                    from = None;
                }
                _ => {}
            }
        }
        widest
    }

    /// The whole elastic field at a tool face and a distance of `ratio` radii, in north, east, down
    /// (Hiramatsu and Oka 1962): the wall's stresses at 1, the far field a long way off.
    pub fn field(&self, theta: f64, ratio: f64, pressure: f64) -> Tensor {
        let component = |a: V3, b: V3| dot(a, self.far.times(b));
        let (h, r, t) = (self.top, self.right, self.along);
        let (x, y, z) = (component(h, h), component(r, r), component(t, t));
        let (xy, yz, xz) = (component(h, r), component(r, t), component(h, t));
        let (s2, c2) = (2.0 * theta).sin_cos();
        let (s, c) = theta.sin_cos();
        let k2 = 1.0 / (ratio * ratio);
        let k4 = k2 * k2;
        let (mean, half) = (0.5 * (x + y), 0.5 * (x - y));
        let wave = half * c2 + xy * s2;
        let radial = mean * (1.0 - k2) + wave * (1.0 + 3.0 * k4 - 4.0 * k2) + pressure * k2;
        let hoop = mean * (1.0 + k2) - wave * (1.0 + 3.0 * k4) - pressure * k2;
        let axial = z - 4.0 * self.poisson * wave * k2;
        let r_hoop = (xy * c2 - half * s2) * (1.0 - 3.0 * k4 + 2.0 * k2);
        let hoop_z = (yz * c - xz * s) * (1.0 + k2);
        let r_z = (xz * c + yz * s) * (1.0 - k2);
        let local = Tensor([radial, hoop, axial, r_hoop, hoop_z, r_z]);
        let axes = [self.direction(theta), self.around(theta), self.along];
        local.turned(&crate::frames::vector::transpose(&axes))
    }

    /// The far field in north, east, down.
    pub fn far(&self) -> Tensor {
        self.far
    }
}

/// The greatest value between two places with one hill between them, and where (golden section).
fn peak_between(f: &impl Fn(f64) -> f64, mut low: f64, mut high: f64) -> (f64, f64) {
    let ratio = 0.5 * (5.0_f64.sqrt() - 1.0);
    for _ in 0..60 {
        let (a, b) = (high - ratio * (high - low), low + ratio * (high - low));
        if f(a) > f(b) { high = b } else { low = a }
    }
    let middle = 0.5 * (low + high);
    (f(middle), middle)
}
