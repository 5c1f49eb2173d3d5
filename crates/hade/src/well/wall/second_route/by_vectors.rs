//! The second route of the checks: the wall rebuilt from the geographic tensor and the hole's axis
//! vectors, its strength by eigenvalues of the whole tensor, its worst place by looking everywhere.
//!
//! In vectors, with n the direction of the tool face, m the one around and t along the hole:
//! σθ = 3 (tr S − t·S t) − 4 n·S n − p, σz = t·S t − ν (4 n·S n − 2 (tr S − t·S t)), τθz = 2 t·S m.
//! A transposed turn, a tool face of the wrong sense and a mistaken component all show here.

use std::f64::consts::PI;

use crate::frames::vector::{M3, V3, add, cross, dot, norm, scale};
use crate::rock::Strength;
use crate::stress::tensor::Tensor;
use crate::units::Quantity;
use crate::well::wall::setup::WallSetup;

/// A wall by vectors, in Pa and radians.
#[derive(Clone, Copy, Debug)]
pub(crate) struct ByVectors {
    far: Tensor,
    top: V3,
    right: V3,
    along: V3,
    poisson: f64,
    pore: f64,
    strength: Strength,
    /// The share of the pressure above the pore pressure that stands behind the wall.
    passes: f64,
    /// What hoop and axial stress gain per unit of that pressure, and by warming.
    seepage: f64,
    thermal: f64,
    weak: Option<(V3, f64, f64)>,
    size: f64,
}

/// How finely the second route looks round the hole: every half degree.
const LOOKS: u32 = 360;

impl ByVectors {
    pub fn new(setup: &WallSetup) -> Option<Self> {
        let inputs = &setup.inputs;
        let far = inputs.stress.geographic();
        let [top, right, along] = inputs.stress.attitude()?.matrix().ok()?;
        let (strength, nu, pore) = (inputs.rock.strength.checked().ok()?, inputs.rock.poisson, inputs.pore.si());
        let weak = match setup.weak_plane {
            Some(weak) => Some((weak.plane.axes().ok()?.normal, weak.cohesion.si(), weak.friction_angle.si().tan())),
            None => None,
        };
        let seepage = setup.seepage.map_or(0.0, |s| (1.0 - s.sealing) * s.biot * (1.0 - nu / (1.0 - nu)));
        let thermal =
            setup.thermal.map_or(0.0, |t| t.youngs_modulus.si() / (1.0 - nu) * (t.expansion.si() * t.warming.si()));
        let size = (far.largest() + pore.abs() + strength.law().size() + thermal.abs()).max(1.0);
        let passes = setup.seepage.map_or(0.0, |s| 1.0 - s.sealing);
        Some(ByVectors { far, top, right, along, poisson: nu, pore, strength, passes, seepage, thermal, weak, size })
    }

    /// A size for tolerances.
    pub fn size(&self) -> f64 {
        self.size
    }

    /// What seepage and warming add to hoop and axial stress.
    pub fn added(&self, pressure: f64) -> f64 {
        self.seepage * (pressure - self.pore) + self.thermal
    }

    /// The pore pressure behind the wall.
    pub fn pore_behind(&self, pressure: f64) -> f64 {
        self.passes * pressure + (1.0 - self.passes) * self.pore
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
        let added = self.added(pressure);
        [
            pressure,
            3.0 * across - 4.0 * normal - pressure + added,
            axial - self.poisson * (4.0 * normal - 2.0 * across) + added,
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
        self.tensor(theta, pressure).eigen().values.map(|v| v - self.pore_behind(pressure))
    }

    /// By how much the rock, or its plane of weakness, is beyond what it bears.
    pub fn excess(&self, theta: f64, pressure: f64) -> f64 {
        let total = self.tensor(theta, pressure);
        let behind = self.pore_behind(pressure);
        let intact = self.strength.excess_by_tensor(total.add(Tensor([-behind, -behind, -behind, 0.0, 0.0, 0.0])));
        intact.max(self.slip(theta, pressure).unwrap_or(f64::NEG_INFINITY))
    }

    /// τ − c_w − σn' tan φ_w on the plane of weakness, where there is one.
    pub fn slip(&self, theta: f64, pressure: f64) -> Option<f64> {
        let (n, cohesion, friction) = self.weak?;
        let traction = self.tensor(theta, pressure).times(n);
        let normal = dot(n, traction);
        let shear = norm(add(traction, scale(n, -normal)));
        Some(shear - cohesion - (normal - self.pore_behind(pressure)) * friction)
    }

    /// The effective principal stresses within the wall: the stress across it is put out of the way
    /// of the eigenvalues first.
    fn in_the_wall(&self, theta: f64, pressure: f64) -> [f64; 2] {
        let [_, hoop, axial, shear] = self.parts(theta, pressure);
        let aside = hoop.max(axial) + shear.abs();
        let [_, e1, e2] = self.put_together(theta, aside, hoop, axial, shear).eigen().values;
        let behind = self.pore_behind(pressure);
        [e1 - behind, e2 - behind]
    }

    /// The greatest value of a function over tool faces 0–180° and where, by looking everywhere and
    /// closing in on every look that is higher than its neighbours and may be beside the greatest. Beside it a narrower
    /// hill may be higher: the looks about it are closer.
    pub fn greatest(&self, f: impl Fn(f64) -> f64) -> (f64, f64) {
        let step = PI / f64::from(LOOKS);
        let looks: Vec<(f64, f64)> = (0..LOOKS).map(|k| f64::from(k) * step).map(|t| (f(t), t)).collect();
        let top = looks.iter().fold(f64::NEG_INFINITY, |m, (v, _)| m.max(*v));
        let bottom = looks.iter().fold(f64::INFINITY, |m, (v, _)| m.min(*v));
        let mut best = looks.iter().copied().fold((f64::NEG_INFINITY, 0.0), |a, b| if b.0 > a.0 { b } else { a });
        let cyclic = looks.iter().zip(looks.iter().cycle().skip(1)).zip(looks.iter().cycle().skip(2));
        for (((a, _), (b, t)), (c, _)) in cyclic {
            if b >= a && b >= c && *b > top - 0.01 * (top - bottom) {
                for (low, high) in [(t - step, *t), (*t, t + step)].into_iter().chain(hills_beside(&f, *t, step)) {
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

    /// The worst excess of one side round the hole: side −1 what too little pressure does (a little
    /// more makes it better), +1 what too much does. Where a place fails on the other side it counts
    /// as holding on this one. What holds counts as holding by a little, so that an edge of the other side does not
    /// count as one of this.
    pub fn worst_of_side(&self, pressure: f64, side: f64) -> f64 {
        self.greatest(|theta| self.excess_of_side(theta, pressure, side)).0
    }

    fn excess_of_side(&self, theta: f64, pressure: f64, side: f64) -> f64 {
        let nudge = 1e-6 * self.size();
        let (here, more) = (self.excess(theta, pressure), self.excess(theta, pressure + nudge));
        match here > 0.0 {
            true if (more - here) * side > 0.0 => here,
            true => -here,
            false => here.min(-1e-10 * self.size()),
        }
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

/// The same wall under another stress, or turned, for the checks of changed walls.
impl ByVectors {
    /// Under another far field.
    pub fn with_far(self, far: Tensor) -> Self {
        ByVectors { far, ..self }
    }

    /// The hole turned about an axis (unit length), clockwise looking along it.
    pub fn with_hole_turned(self, axis: V3, by: f64) -> Self {
        let [top, right, along] = [self.top, self.right, self.along].map(|v| turned_about(v, axis, by));
        ByVectors { top, right, along, ..self }
    }

    /// The plane of weakness turned about an axis.
    pub fn with_plane_turned(self, axis: V3, by: f64) -> Self {
        ByVectors { weak: self.weak.map(|(n, c, f)| (turned_about(n, axis, by), c, f)), ..self }
    }
}

/// Rodrigues: v turned about a unit axis, clockwise looking along it.
fn turned_about(v: V3, axis: V3, by: f64) -> V3 {
    let (s, c) = by.sin_cos();
    add(add(scale(v, c), scale(cross(axis, v), s)), scale(axis, dot(axis, v) * (1.0 - c)))
}

/// About a place, the stretches that hold a hill of their own, by looks a sixteenth of a step apart.
fn hills_beside(f: &impl Fn(f64) -> f64, at: f64, step: f64) -> Vec<(f64, f64)> {
    const CLOSER: i32 = 16;
    let fine = step / f64::from(CLOSER);
    let looks: Vec<(f64, f64)> =
        (-2 * CLOSER..=2 * CLOSER).map(|k| at + f64::from(k) * fine).map(|t| (t, f(t))).collect();
    let hill = |three: &[(f64, f64)]| match three {
        [(low, a), (_, b), (high, c)] if b >= a && b >= c => Some((*low, *high)),
        _ => None,
    };
    looks.windows(3).filter_map(hill).collect()
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

// Tensile cracks.
impl ByVectors {
    /// The least effective principal stress in the wall's tangent plane.
    pub fn least_in_wall(&self, theta: f64, pressure: f64) -> f64 {
        self.in_the_wall(theta, pressure)[1]
    }

    /// What acts on a crack whose trace is the hole's axis turned right-handed by `tilt` about the
    /// outward direction, which seen from inside is clockwise: effective normal stress, and the shear
    /// stress along the trace.
    pub fn on_crack(&self, theta: f64, tilt: f64, pressure: f64) -> (f64, f64) {
        let (outward, along) = (self.direction(theta), self.along);
        let across = crate::frames::vector::cross(outward, along);
        let trace = add(scale(along, tilt.cos()), scale(across, tilt.sin()));
        let normal = crate::frames::vector::cross(trace, outward);
        let traction = self.tensor(theta, pressure).times(normal);
        (dot(traction, normal) - self.pore_behind(pressure), dot(traction, trace))
    }
}
