//! The stress tensor: how it was stated, what it is in other axes, its principal values, what it
//! does on a plane. Compression positive throughout.

mod carried;
mod effective;
mod horizontals;
mod made;
mod mohr;
mod polar;
mod principals;
mod regime;
#[allow(clippy::module_inception)]
mod stress;
pub(crate) mod tensor;
mod traction;

pub use carried::{Back, CarriedInputs, Stress6};
pub use effective::EffectiveStress;
pub use horizontals::Horizontals;
pub use made::{Components, Made, StatedInputs};
pub use mohr::{MohrCircles, MohrInputs, MohrOutcome};
pub use principals::{PrincipalOutcome, Principals};
pub use regime::Regime;
pub use stress::{AddsTo, Stress};
pub use traction::{Traction, TractionInputs, TractionOutcome};
