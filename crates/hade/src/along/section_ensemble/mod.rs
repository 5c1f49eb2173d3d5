//! How sure it is that one mud weight keeps a whole section: its depths drawn together.
//!
//! How depths go together decides the answer, so it is said: within a layer every draw moves all depths alike;
//! over the layers the share is given twice, with all layers moved alike, and with each moved by itself. Inputs
//! that are correlated from layer to layer by something between lie between the two where limits run straight in
//! normal inputs (Slepian's inequality).

mod card;
mod check;
mod common;
mod depths;
mod figure;
mod outcome;
#[allow(clippy::module_inception)]
mod section_ensemble;

pub use outcome::{LayerShare, MudShare, PlanShare, SectionEnsembleOutcome};
pub use section_ensemble::{SectionEnsemble, SectionEnsembleInputs};
