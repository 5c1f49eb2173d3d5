//! The stress tensor: how it was stated, what it is in other axes, its principal values, what it
//! does on a plane. Compression positive throughout.

mod a_phi;
mod carried;
mod carried_traction;
mod combined;
mod doubts;
mod effective;
mod envelope;
mod horizontal;
mod horizontals;
mod in_axes;
mod invariants;
mod invariants_card;
mod made;
mod mohr;
mod principals;
mod properties;
mod regime;
mod regime_strip;
#[allow(clippy::module_inception)]
mod stress;
pub(crate) mod tensor;
mod tensor_figure;
mod traction;

pub use a_phi::{FaultingRegime, FaultingRegimeOutcome};
pub use carried::{CarriedInputs, CarriedStress, Stress6};
pub use carried_traction::{CarriedTraction, CarriedTractionInputs, TractionVector};
pub use combined::Parts;
pub(crate) use doubts::doubts_of_overburden;
pub use effective::EffectiveStress;
pub use horizontal::{HorizontalOutcome, HorizontalStresses};
pub use horizontals::Horizontals;
pub use in_axes::AxisComponents;
pub use invariants::{Invariants, InvariantsInputs, InvariantsOutcome};
pub use made::{Components, Made, StatedInputs};
pub use mohr::{MohrCircles, MohrInputs, MohrOutcome};
pub use principals::{PrincipalOutcome, Principals};
pub use regime::Regime;
pub use stress::{AddsTo, Stress};
pub use traction::{Traction, TractionInputs, TractionOutcome};
