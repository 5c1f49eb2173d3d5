//! The weight of a column of rock from densities at depths: plain arithmetic, without a file.

use crate::error::{Error, Result};
use crate::units::{
    Density, GRAVITY, Length, Pressure, Quantity, require_between, require_not_negative, with_typed_unit,
};

/// Density of sea water, kg/m³: the usual value of the trade (the open ocean's lies between 1020 and
/// 1030; Gill, A.E. (1982) Atmosphere–Ocean Dynamics, Academic Press, cited from memory).
pub(super) const SEA_WATER: f64 = 1025.0;
/// Rock is neither lighter nor heavier than this, kg/m³; beyond it a unit was mistaken.
pub(super) const LIGHTEST: f64 = 500.0;
/// See [`LIGHTEST`].
pub(super) const HEAVIEST: f64 = 6000.0;

/// Densities at depths, with what lies on the first of them.
#[derive(Clone, Debug, PartialEq)]
pub struct DensityColumn {
    /// True vertical depths, rising, from any one datum.
    pub tvd: Vec<Length>,
    /// The bulk density at each of them.
    pub density: Vec<Density>,
    /// The depth of the sea above the rock; zero on land. Counted with 1025 kg/m³.
    pub water_depth: Length,
    /// The vertical stress at the first depth without the sea: the weight of the rock above the
    /// first density. It is never assumed to be zero (a log begins below the surface).
    pub stress_at_top: Pressure,
}

impl DensityColumn {
    /// The total vertical stress at each depth: S_v = stress at top + sea + ∫ ρ g dz, density
    /// running straight between the depths (trapezoids).
    ///
    /// # Errors
    /// When the lists differ in length or hold fewer than two values, depths do not rise, a density
    /// is outside 500–6000 kg/m³, or the water depth or the stress at the top is negative.
    pub fn vertical_stress(&self) -> Result<Vec<Pressure>> {
        if self.tvd.len() != self.density.len() || self.tvd.len() < 2 {
            return Err(Error::not_physical(
                format!("A column of {} depths and {} densities", self.tvd.len(), self.density.len()),
                "give one density for each depth, and at least two.",
            ));
        }
        require_not_negative("water depth", self.water_depth)?;
        require_not_negative("vertical stress at the top of the column", self.stress_at_top)?;
        let mut stress = self.stress_at_top.si() + SEA_WATER * GRAVITY * self.water_depth.si();
        let mut above: Option<(f64, f64)> = None;
        let mut stresses = Vec::with_capacity(self.tvd.len());
        for (tvd, density) in self.tvd.iter().zip(&self.density) {
            let (z, rho) = (tvd.finite("depth")?.si(), require_rock(*density)?.si());
            if let Some((z0, rho0)) = above {
                if z <= z0 {
                    return Err(Error::not_physical(
                        format!("Depth {}", with_typed_unit(*tvd)),
                        format!(
                            "it does not lie below the one before, {}; sort the column by depth.",
                            with_typed_unit(Length::m(z0))
                        ),
                    ));
                }
                stress += 0.5 * (rho0 + rho) * GRAVITY * (z - z0);
            }
            above = Some((z, rho));
            stresses.push(Pressure::from_si(stress));
        }
        Ok(stresses)
    }
}

/// A density that rock can have.
pub(super) fn require_rock(density: Density) -> Result<Density> {
    require_between("bulk density", density, Density::kg_m3(LIGHTEST), Density::kg_m3(HEAVIEST)).map_err(|e| match e {
        Error::OutOfRange { what, allowed, .. } => {
            Error::out_of_range(what, format!("{} kg/m³", crate::units::as_typed(density.si())), allowed)
        }
        other => other,
    })
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::units::Units;

    fn column() -> DensityColumn {
        DensityColumn {
            tvd: vec![100.m(), 200.m(), 400.m()],
            density: vec![2000.kg_m3(), 2200.kg_m3(), 2400.kg_m3()],
            water_depth: 0.m(),
            stress_at_top: 1.96.mpa(),
        }
    }

    #[test]
    fn weighs_the_column() {
        let stress = column().vertical_stress().unwrap();
        let expected = 1.96e6 + (2100.0 * 100.0 + 2300.0 * 200.0) * 9.806_65;
        assert!((stress[2].si() - expected).abs() < 1e-6);
        let sea = DensityColumn { water_depth: 100.m(), ..column() }.vertical_stress().unwrap();
        assert!((sea[0].si() - 1.96e6 - 1025.0 * 9.806_65 * 100.0).abs() < 1e-6);
    }

    #[test]
    fn refuses_what_cannot_be_a_column() {
        let refused = |c: DensityColumn| c.vertical_stress().unwrap_err().to_string();
        assert!(refused(DensityColumn { tvd: vec![1.m()], ..column() }).contains("1 depths and 3 densities"));
        assert!(
            refused(DensityColumn { tvd: vec![100.m(), 100.m(), 400.m()], ..column() }).contains("does not lie below")
        );
        // g/cm³ taken for kg/m³ (a slip of the unit).
        assert!(
            refused(DensityColumn { density: vec![2.0.kg_m3(), 2.2.kg_m3(), 2.4.kg_m3()], ..column() })
                .contains("2 kg/m³")
        );
        assert!(refused(DensityColumn { density: vec![(-2000).kg_m3(); 3], ..column() }).contains("bulk density"));
        assert!(refused(DensityColumn { water_depth: (-1).m(), ..column() }).contains("water depth"));
        assert!(refused(DensityColumn { stress_at_top: f64::NAN.mpa(), ..column() }).contains("stress at the top"));
        assert!(refused(DensityColumn { tvd: vec![f64::NAN.m(); 3], ..column() }).contains("depth"));
    }
}
