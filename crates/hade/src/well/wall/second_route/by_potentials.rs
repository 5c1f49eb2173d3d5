//! A second route to the whole elastic field: complex potentials in x and y across the hole, put into
//! north, east, down by the hole's axis vectors.
//!
//! Muskhelishvili (1953), with the complex place ζ = (r/R) e^(iθ), Γ = (σx + σy)/4 and
//! Γ' = (σy − σx)/2 + iτxy: φ' = Γ + Γ̄'/ζ², ψ' = Γ' − (p − 2Γ)/ζ² + 3Γ̄'/ζ⁴ satisfy the pressure
//! p on the circle, and σx + σy = 4 Re φ', σy − σx + 2iτxy = 2 (ζ̄ φ'' + ψ'). Along the hole,
//! τxz − iτyz = T − T̄/ζ² leaves no shear on it, with T = τxz − iτyz of the far field. The axial
//! stress is what plane strain makes of σx + σy. No stress is written in cylindrical axes here.

use std::ops::{Add, Mul};

use crate::frames::vector::{M3, V3, add, dot, norm, scale};
use crate::rock::Strength;
use crate::stress::tensor::Tensor;
use crate::units::Quantity;
use crate::well::wall::setup::WallSetup;

/// A complex number.
#[derive(Clone, Copy, Debug, PartialEq)]
struct Complex(f64, f64);

impl Add for Complex {
    type Output = Complex;
    fn add(self, o: Complex) -> Complex {
        Complex(self.0 + o.0, self.1 + o.1)
    }
}

impl Mul for Complex {
    type Output = Complex;
    fn mul(self, o: Complex) -> Complex {
        Complex(self.0 * o.0 - self.1 * o.1, self.0 * o.1 + self.1 * o.0)
    }
}

impl Complex {
    fn times(self, k: f64) -> Complex {
        Complex(k * self.0, k * self.1)
    }
    fn conjugate(self) -> Complex {
        Complex(self.0, -self.1)
    }
}

/// The field by complex potentials; Pa and radians.
#[derive(Clone, Copy, Debug)]
pub(crate) struct ByPotentials {
    far: Tensor,
    /// Top, right and along the hole in north, east, down.
    axes: M3,
    poisson: f64,
    pore: f64,
    strength: Strength,
    weak: Option<(V3, f64, f64)>,
}

/// How finely it looks round half the hole, and from far off to the wall.
const ROUND: u32 = 120;
const OUT: u32 = 30;

impl ByPotentials {
    pub fn new(setup: &WallSetup) -> Option<Self> {
        let inputs = &setup.inputs;
        let weak = match setup.weak_plane {
            Some(weak) => Some((weak.plane.axes().ok()?.normal, weak.cohesion.si(), weak.friction_angle.si().tan())),
            None => None,
        };
        Some(ByPotentials {
            far: inputs.stress.geographic(),
            axes: inputs.stress.attitude()?.matrix().ok()?,
            poisson: inputs.rock.poisson,
            pore: inputs.pore.si(),
            strength: inputs.rock.strength.checked().ok()?,
            weak,
        })
    }

    /// The directions of a tool face in north, east, down: outward, around, along.
    pub fn place(&self, theta: f64) -> M3 {
        let [top, right, along] = self.axes;
        let (s, c) = theta.sin_cos();
        [add(scale(top, c), scale(right, s)), add(scale(right, c), scale(top, -s)), along]
    }

    /// The total stress at a tool face, `ratio` radii from the axis, in north, east, down; infinitely
    /// far off it is the far field.
    pub fn tensor(&self, theta: f64, ratio: f64, pressure: f64) -> Tensor {
        let [top, right, along] = self.axes;
        let far = |a: V3, b: V3| dot(a, self.far.times(b));
        let (x, y, z, xy) = (far(top, top), far(right, right), far(along, along), far(top, right));
        let i_zeta = Complex(theta.cos(), -theta.sin()).times(1.0 / ratio);
        let i2 = i_zeta * i_zeta;
        let (gamma, skew) = (0.25 * (x + y), Complex(0.5 * (y - x), xy));
        let phi1 = Complex(gamma, 0.0) + skew.conjugate() * i2;
        // ζ̄ φ'' = −2 Γ̄' ζ̄/ζ · 1/ζ², and ζ̄/ζ is the unit vector of −2θ.
        let back = Complex((2.0 * theta).cos(), -(2.0 * theta).sin());
        let bent = (skew.conjugate() * i2 * back).times(-2.0);
        let psi1 = skew + i2.times(2.0 * gamma - pressure) + (skew.conjugate() * i2 * i2).times(3.0);
        let (sum, apart) = (4.0 * phi1.0, (bent + psi1).times(2.0));
        let t = Complex(far(along, top), -far(along, right));
        let shears = t + (t.conjugate() * i2).times(-1.0);
        let (sx, sy, sxy) = (0.5 * (sum - apart.0), 0.5 * (sum + apart.0), 0.5 * apart.1);
        let sz = z + self.poisson * (sum - x - y);
        let local = Tensor([sx, sy, sz, sxy, -shears.1, shears.0]);
        local.turned(&crate::frames::vector::transpose(&self.axes))
    }

    /// By how much the rock, or its plane of weakness, is beyond what it bears, the pore pressure being
    /// the formation's.
    pub fn excess(&self, theta: f64, ratio: f64, pressure: f64) -> f64 {
        let total = self.tensor(theta, ratio, pressure);
        let pore = self.pore;
        let intact = self.strength.excess_by_tensor(total.add(Tensor([-pore, -pore, -pore, 0.0, 0.0, 0.0])));
        intact.max(self.slip(total).unwrap_or(f64::NEG_INFINITY))
    }

    /// τ − c_w − σn' tan φ_w of a total stress in north, east, down.
    pub fn slip(&self, total: Tensor) -> Option<f64> {
        let (n, cohesion, friction) = self.weak?;
        let traction = total.times(n);
        let normal = dot(n, traction);
        Some(norm(add(traction, scale(n, -normal))) - cohesion - (normal - self.pore) * friction)
    }

    /// Places all over: tool faces 0–180° and distances from the wall to infinity, in radii.
    pub fn everywhere(&self) -> impl Iterator<Item = (f64, f64)> {
        (0..ROUND)
            .map(|k| f64::from(k) * std::f64::consts::PI / f64::from(ROUND))
            .flat_map(|theta| along_ray().map(move |ratio| (theta, ratio)))
    }
}

/// Distances from the wall to infinity, in radii.
pub(crate) fn along_ray() -> impl Iterator<Item = f64> {
    (0..=OUT).map(|k| f64::from(OUT) / f64::from(OUT - k))
}
