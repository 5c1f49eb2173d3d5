//! The rock round a hole at one pressure: its stress, and by how much it is beyond what it bears.

use crate::error::{Error, Result};
use crate::frames::vector::{V3, add, apply, dot, norm, scale};
use crate::rock::Law;
use crate::stress::tensor::Tensor;
use crate::units::{Quantity, with_typed_unit};
use crate::well::wall::elastic::{AtPlace, ElasticField};
use crate::well::wall::{Wall, method};

/// A plane of weakness in the hole's axes.
#[derive(Clone, Copy, Debug)]
struct Weak {
    normal: V3,
    cohesion: f64,
    friction: f64,
}

/// The rock round a hole at one pressure: its stress and by how much it is beyond what it bears. The
/// pore pressure is the formation's everywhere.
#[derive(Clone, Copy, Debug)]
pub(crate) struct RockRound {
    field: ElasticField,
    law: Law,
    weak: Option<Weak>,
    pore: f64,
    pressure: f64,
    scale: f64,
}

impl Wall {
    pub(super) fn elastic_field(&self) -> ElasticField {
        ElasticField::new(self.setup.inputs.stress.tensor(), self.setup.inputs.rock.poisson)
    }

    /// Refuses a wall whose pore pressure or temperature away from the wall is not known.
    pub(crate) fn known_off_the_wall(&self) -> Result<()> {
        let off = |what: &str| {
            Err(Error::not_physical(
                "stress away from the wall",
                format!(
                    "{what}; ask at the wall itself (distance 1 radius), or take a wall that is impermeable and at the temperature of the rock."
                ),
            ))
        };
        if let Some(seepage) = self.setup.seepage.filter(|_| self.shear.passes > 0.0) {
            return off(&format!(
                "fluid passes this wall (sealing {}), and how the pore pressure falls off behind it with distance and time is not known",
                with_typed_unit(seepage.sealing)
            ));
        }
        if self.setup.thermal.is_some() && self.setup.thermal_stress() != 0.0 {
            return off(
                "this wall is cooled or warmed, and how far into the rock the temperature has come is not known",
            );
        }
        Ok(())
    }

    /// The rock round the hole at a pressure.
    pub(crate) fn rock_round(&self, pressure: f64) -> RockRound {
        let weak = self.setup.weak_plane.and_then(|weak| {
            let normal = apply(&self.attitude.matrix().ok()?, weak.plane.axes().ok()?.normal);
            Some(Weak { normal, cohesion: weak.cohesion.si(), friction: weak.friction_angle.si().tan() })
        });
        RockRound {
            field: self.elastic_field(),
            law: self.shear.law,
            weak,
            pore: self.shear.pore,
            pressure,
            scale: self.shear.scale() + pressure.abs(),
        }
    }
}

impl RockRound {
    /// The size of the numbers at hand, for tolerances.
    pub fn scale(&self) -> f64 {
        self.scale
    }

    pub fn at(&self, theta: f64, u: f64) -> AtPlace {
        self.field.at(theta, u, self.pressure)
    }

    /// σ1' ≥ σ2' ≥ σ3'.
    pub fn effective(&self, theta: f64, u: f64) -> [f64; 3] {
        self.at(theta, u).tensor().eigen().values.map(|v| v - self.pore)
    }

    /// τ − c_w − σn' tan φ_w on the plane of weakness; `None` where there is none.
    pub fn slip(&self, theta: f64, u: f64) -> Option<f64> {
        slip_of(self.weak?, theta, self.at(theta, u).tensor(), self.pore)
    }

    /// By how much the rock, or its plane of weakness, is beyond what it bears; negative: it holds.
    pub fn excess(&self, theta: f64, u: f64) -> f64 {
        let tensor = self.at(theta, u).tensor();
        let intact = self.law.excess(tensor.eigen().values.map(|v| v - self.pore));
        match self.weak.and_then(|weak| slip_of(weak, theta, tensor, self.pore)) {
            Some(slip) => intact.max(slip),
            None => intact,
        }
    }

    /// The σ1' that the rock bears at a place, the other two as they are there.
    pub fn bears(&self, theta: f64, u: f64) -> f64 {
        method::borne_by(self.law, self.effective(theta, u), self.scale)
    }
}

fn slip_of(weak: Weak, theta: f64, tensor: Tensor, pore: f64) -> Option<f64> {
    let (s, c) = theta.sin_cos();
    let [x, y, z] = weak.normal;
    let normal = [c * x + s * y, c * y - s * x, z];
    let traction = tensor.times(normal);
    let sigma_n = dot(traction, normal);
    let shear = norm(add(traction, scale(normal, -sigma_n)));
    Some(shear - weak.cohesion - (sigma_n - pore) * weak.friction)
}
