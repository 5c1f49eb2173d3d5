//! Effective stress for failure: total stress less a named pore pressure.

use serde::{Deserialize, Serialize};

use super::Stress;
use super::tensor::Tensor;
use crate::error::Result;
use crate::frames::Frame;
use crate::units::{Pressure, Quantity};

/// Terzaghi's effective stress (total − pore pressure), as principal values. Strength criteria take
/// nothing else, so a total stress cannot reach them by mistake.
#[derive(Clone, Copy, Debug, PartialEq, Serialize, Deserialize)]
pub struct EffectiveStress {
    principal: [Pressure; 3],
    pore: Pressure,
}

impl EffectiveStress {
    pub(crate) fn of(tensor: Tensor, pore: Pressure) -> Self {
        let values = tensor.eigen().values;
        EffectiveStress { principal: values.map(|v| Pressure::from_si(v - pore.si())), pore }
    }

    /// The effective principal stresses σ1' ≥ σ2' ≥ σ3'.
    pub fn principal(&self) -> [Pressure; 3] {
        self.principal
    }

    /// The pore pressure that was taken off.
    pub fn pore(&self) -> Pressure {
        self.pore
    }
}

impl<F: Frame> Stress<F> {
    /// The effective stress for failure, at a pore pressure that is stated, never assumed.
    ///
    /// # Errors
    /// When the pore pressure is not a finite number.
    pub fn effective(&self, pore: Pressure) -> Result<EffectiveStress> {
        pore.finite("pore pressure")?;
        Ok(EffectiveStress::of(self.tensor().finite("stress")?, pore))
    }
}
