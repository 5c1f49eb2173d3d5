//! Where a wall parts in tension, and how its cracks are tilted, as plain numbers.
//!
//! In the wall's tangent plane the least effective principal stress is e; cracks open where e is
//! beyond −T₀. A crack's normal is the direction of e, so its trace on the wall is tilted from the
//! hole's axis by δ = ½ atan2(−2τθz, σz − σθ): 0 where the least stress is around the hole, ±90° where it
//! is along it.
//!
//! The sign: **positive when the trace is turned clockwise from the hole's axis, as seen from inside the
//! hole looking at the wall with down-hole down**. There the tool face grows to the right, so going
//! down the hole along a trace of positive tilt the tool face falls. On the far side τθz has the other
//! sign, and so has the tilt.

use crate::rock::Jet;
use crate::well::wall::elastic::{AtWall, EffectiveWall};
use crate::well::wall::round::{Below, OnCircle, Peak, edges, highest_between, smallest};
use crate::well::wall::shear::{Arcs, ShearWall, arcs_between};

/// The least effective principal stress in the wall's tangent plane, more by T₀: negative where the wall
/// is parted.
struct Room<'a> {
    wall: &'a EffectiveWall,
    tensile: f64,
    x: f64,
}

impl OnCircle for Room<'_> {
    #[inline(always)]
    fn value(&self, c: f64, s: f64) -> f64 {
        self.wall.place(c, s, self.x).in_the_wall().1 + self.tensile
    }
    #[inline(always)]
    fn jet(&self, _piece: usize, c: f64, s: f64) -> Jet {
        self.wall.round(c, s, self.x).in_the_wall().1 + self.tensile
    }
}

/// Closer stresses than this share of the scale are equal.
const EQUAL: f64 = 1e-11;

impl ShearWall {
    /// The arcs that are parted in tension at a pressure, in the wall's tangent plane.
    pub fn parted(&self, tensile: f64, pressure: f64) -> Arcs {
        let room = Room { wall: self.effective_wall(), tensile, x: pressure - self.pore };
        let scale = self.scale() + tensile + pressure.abs();
        let noise = 4e-12 * scale;
        arcs_between(edges(&Below(room), scale), 0.0, |phi| self.least_in_wall(pressure, phi) + tensile < -noise)
    }

    /// The least effective principal stress in the wall's tangent plane at φ = 2θ.
    pub fn least_in_wall(&self, pressure: f64, phi: f64) -> f64 {
        let (s, c) = phi.sin_cos();
        self.effective_wall().place(c, s, pressure - self.pore).in_the_wall().1
    }

    /// Where it is least.
    pub fn least_of_wall(&self, pressure: f64) -> Peak {
        let room = Room { wall: self.effective_wall(), tensile: 0.0, x: pressure - self.pore };
        smallest(room, self.scale() + pressure.abs())
    }

    /// Where it is least within an arc, φ from–to.
    pub fn least_of_arc(&self, pressure: f64, (from, to): (f64, f64)) -> f64 {
        highest_between(|phi| -self.least_in_wall(pressure, phi), from, to).0
    }

    /// The tilt of a crack at a tool face, in −90° < δ ≤ 90°; `None` where the stress in the wall is the
    /// same in every direction.
    pub fn tilt(&self, theta: f64, pressure: f64) -> Option<f64> {
        let AtWall { hoop, axial, shear, .. } = self.at(theta, pressure);
        let same = EQUAL * (self.scale() + pressure.abs());
        if (axial - hoop).hypot(2.0 * shear) <= same {
            return None;
        }
        let tilt = 0.5 * (-2.0 * shear).atan2(axial - hoop);
        // −90° is the same trace as 90°.
        Some(if tilt <= -std::f64::consts::FRAC_PI_2 + 1e-12 { std::f64::consts::FRAC_PI_2 } else { tilt })
    }
}
