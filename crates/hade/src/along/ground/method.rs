//! How the stress of the ground comes about, in formulas, with what it assumes.

use super::ground::Ground;
use crate::card::{Formula, Method, Reference};

impl Ground {
    /// Formulas, references and assumptions of stress and pore pressure at a depth.
    pub(crate) fn method(&self) -> Method {
        let mut method = Method {
            formulas: vec![
                Formula::new("K = (S - P_p) / (S_upright(v) - P_p)", "K = (S − P_p) / (S_v − P_p)"),
                Formula::new(
                    "S = P_p + K (S_upright(v) - P_p) - kappa Delta P_p",
                    "S = P_p + K (S_v − P_p) − κ ΔP_p; K straight between points of a layer, held to its contacts",
                ),
            ],
            ..Method::default()
        };
        if self.inputs.layers.iter().any(|layer| layer.depletion.is_some()) {
            method.formulas.push(Formula::new(
                "kappa = alpha (1 - 2 nu) / (1 - nu)",
                "κ = α (1 − 2ν) / (1 − ν) of a wide, thin, elastic layer, where it is not measured",
            ));
            method.references.push(Reference::new(
                "Zoback, M.D. (2007) Reservoir Geomechanics, Cambridge University Press, ch. 12 (stress change with depletion; cited from memory)",
            ));
            method
                .assumptions
                .push("Depletion leaves the vertical stress as it was: no arching over the depleted layer.".to_owned());
        }
        if self.inputs.layers.iter().any(|layer| layer.thermal_properties.is_some()) {
            method.formulas.push(Formula::new(
                "Delta T = T_upright(m) - T_upright(g)",
                "ΔT = T_m − T_g, mud at the wall less ground; it adds E α_T ΔT / (1 − ν) to hoop and axial stress",
            ));
            method.assumptions.push(
                "The wall has the temperature of the mud beside it, and the rock expands as an elastic one.".to_owned(),
            );
        }
        method.assumptions.push(
            "The vertical is a principal direction of the far-field stress at every depth; a profile of another hole holds at equal elevation.".to_owned(),
        );
        method
    }
}
