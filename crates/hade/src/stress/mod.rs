//! The stress tensor: how it was stated, what it is in other axes, its principal values, what it
//! does on a plane. Compression positive throughout.

mod carried;
mod effective;
mod envelope;
mod horizontals;
mod made;
mod mohr;
mod polar;
mod principals;
mod regime;
mod regime_strip;
#[allow(clippy::module_inception)]
mod stress;
pub(crate) mod tensor;
mod tensor_figure;
mod traction;

pub use carried::{Back, CarriedInputs, Stress6};
pub use effective::EffectiveStress;
pub use horizontals::Horizontals;
pub use made::{Components, Made, StatedInputs};
#[cfg(test)]
pub(crate) use mohr::mohr_samples;
pub use mohr::{MohrCircles, MohrInputs, MohrOutcome};
pub use principals::{PrincipalOutcome, Principals};
pub use regime::Regime;
#[allow(unused_imports)]
pub(crate) use regime_strip::regime_strip;
pub use stress::{AddsTo, Stress};
#[allow(unused_imports)]
pub(crate) use tensor_figure::tensor_figures;
pub use traction::{Traction, TractionInputs, TractionOutcome};
