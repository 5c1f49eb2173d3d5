//! Any of the criteria, with its constants worked out.

use super::constants::StrengthConstants;
use super::criterion::Criterion;
use super::drucker_prager::DruckerPrager;
use super::hoek_brown::HoekBrownLaw;
use super::modified_lade::ModifiedLade;
use super::mogi_coulomb::MogiCoulomb;
use super::mohr_coulomb::MohrCoulomb;
use crate::units::{Pressure, Quantity};

/// A criterion, whichever it is.
#[derive(Clone, Copy, Debug, PartialEq)]
pub(crate) enum Law {
    MohrCoulomb(MohrCoulomb),
    MogiCoulomb(MogiCoulomb),
    ModifiedLade(ModifiedLade),
    DruckerPrager(DruckerPrager),
    HoekBrown(HoekBrownLaw),
}

/// `with_law!(law, criterion => expression)`: the expression, compiled for the criterion at hand.
macro_rules! with_law {
    ($law:expr, $criterion:ident => $body:expr) => {
        match $law {
            $crate::rock::Law::MohrCoulomb($criterion) => $body,
            $crate::rock::Law::MogiCoulomb($criterion) => $body,
            $crate::rock::Law::ModifiedLade($criterion) => $body,
            $crate::rock::Law::DruckerPrager($criterion) => $body,
            $crate::rock::Law::HoekBrown($criterion) => $body,
        }
    };
}
pub(crate) use with_law;

impl Law {
    /// By how much σ1' ≥ σ2' ≥ σ3' (Pa) exceed what the rock bears; negative where it holds.
    pub fn excess(self, stress: [f64; 3]) -> f64 {
        with_law!(self, c => c.excess(stress))
    }

    /// The two sides of the criterion (see [`Criterion::sides`]).
    pub fn sides(self, stress: [f64; 3]) -> [Option<f64>; 2] {
        with_law!(self, c => c.sides(stress))
    }

    /// The constants.
    pub fn constants(self) -> StrengthConstants {
        let pa = Pressure::from_si;
        match self {
            Law::MohrCoulomb(c) => StrengthConstants::MohrCoulomb { ucs: pa(c.ucs), q: c.q },
            Law::MogiCoulomb(c) => StrengthConstants::MogiCoulomb { a: pa(c.a), b: c.b },
            Law::ModifiedLade(c) => StrengthConstants::ModifiedLade { shift: pa(c.shift), eta: c.eta },
            Law::DruckerPrager(c) => StrengthConstants::DruckerPrager { alpha: c.alpha, k: pa(c.k) },
            Law::HoekBrown(c) => StrengthConstants::HoekBrown { m_b: c.m_b, s: c.s, a: c.a },
        }
    }

    /// The size of its strength, for tolerances.
    pub fn size(self) -> f64 {
        with_law!(self, c => c.size())
    }
}
