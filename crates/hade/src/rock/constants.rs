//! The derived constants of a criterion.

use serde::{Deserialize, Serialize};

use crate::units::{Pressure, Quantity};

/// The derived constants of a shear criterion.
#[derive(Clone, Copy, Debug, PartialEq, Serialize, Deserialize)]
#[serde(tag = "criterion", rename_all = "snake_case")]
#[non_exhaustive]
pub enum StrengthConstants {
    /// σ1' = UCS + q σ3'.
    MohrCoulomb {
        /// The uniaxial compressive strength.
        ucs: Pressure,
        /// The slope of σ1' on σ3'.
        q: f64,
    },
    /// τoct = a + b (σ1' + σ3') / 2.
    MogiCoulomb {
        /// The octahedral shear stress borne at zero mean of σ1' and σ3'.
        a: Pressure,
        /// The slope.
        b: f64,
    },
    /// I1³ / I3 = 27 + η on stresses shifted by c / tan φ.
    ModifiedLade {
        /// The shift, c / tan φ (S1 in Ewy 1999).
        shift: Pressure,
        /// η.
        eta: f64,
    },
    /// √J2 = k + α I1, α on I1 = σ1' + σ2' + σ3' (a third of an α on the mean stress).
    DruckerPrager {
        /// The slope on I1.
        alpha: f64,
        /// The √J2 borne at I1 = 0.
        k: Pressure,
    },
    /// σ1' = σ3' + σci (mb σ3' / σci + s)^a.
    HoekBrown {
        /// mb of the rock mass.
        m_b: f64,
        /// s of the rock mass.
        s: f64,
        /// The exponent a.
        a: f64,
    },
}

impl StrengthConstants {
    /// The numbers in SI, with the unit of each.
    pub(super) fn numbers(self) -> Vec<(f64, &'static str)> {
        const PA: &str = "Pa";
        match self {
            StrengthConstants::MohrCoulomb { ucs, q } => vec![(ucs.si(), PA), (q, "")],
            StrengthConstants::MogiCoulomb { a, b } => vec![(a.si(), PA), (b, "")],
            StrengthConstants::ModifiedLade { shift, eta } => vec![(shift.si(), PA), (eta, "")],
            StrengthConstants::DruckerPrager { alpha, k } => vec![(alpha, ""), (k.si(), PA)],
            StrengthConstants::HoekBrown { m_b, s, a } => vec![(m_b, ""), (s, ""), (a, "")],
        }
    }
}
