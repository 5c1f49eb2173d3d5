//! The stress tensor: how it was stated, what it is in other axes, its principal values, what it
//! does on a plane. Compression positive throughout.

mod carried;
mod carried_traction;
mod combined;
mod effective;
mod horizontals;
mod in_axes;
mod made;
mod mohr;
mod polar;
mod principals;
mod regime;
#[allow(clippy::module_inception)]
mod stress;
pub(crate) mod tensor;
mod traction;

pub use carried::{CarriedInputs, CarriedStress, Stress6};
pub use carried_traction::{CarriedTraction, CarriedTractionInputs, TractionVector};
pub use combined::Parts;
pub use effective::EffectiveStress;
pub use horizontals::Horizontals;
pub use in_axes::AxisComponents;
pub use made::{Components, Made, StatedInputs};
pub use mohr::{MohrCircles, MohrInputs, MohrOutcome};
pub use principals::{PrincipalOutcome, Principals};
pub use regime::Regime;
pub use stress::{AddsTo, Stress};
pub use traction::{Traction, TractionInputs, TractionOutcome};
