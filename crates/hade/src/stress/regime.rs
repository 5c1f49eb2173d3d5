//! The faulting regime of a stress state.

use super::Stress;
use crate::frames::Geographic;

/// Anderson's regimes, by the principal stress nearest to vertical.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
#[non_exhaustive]
pub enum Regime {
    /// The largest stress is nearest to vertical.
    NormalFaulting,
    /// The intermediate one is.
    StrikeSlip,
    /// The smallest one is.
    ReverseFaulting,
    /// All three are equal.
    Isotropic,
}

impl Stress<Geographic> {
    /// The regime, by the principal axis nearest to vertical (Anderson 1951, The Dynamics of
    /// Faulting).
    pub fn regime(&self) -> Regime {
        let e = self.tensor().eigen();
        if e.values[0] - e.values[2] <= 1e-9 * e.values[0].abs().max(e.values[2].abs()) {
            return Regime::Isotropic;
        }
        let steepest = (0..3).max_by(|&i, &j| e.axes[i][2].abs().total_cmp(&e.axes[j][2].abs()));
        match steepest {
            Some(0) => Regime::NormalFaulting,
            Some(1) => Regime::StrikeSlip,
            _ => Regime::ReverseFaulting,
        }
    }
}
