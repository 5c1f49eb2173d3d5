//! The pressure of a static mud column.

use serde::{Deserialize, Serialize};

use crate::card::{Check, Explain, Explanation, Formula, Item, Method, Reference, Step};
use crate::error::{Error, Result};
use crate::units::{
    Density, GRAVITY, Length, Pressure, Quantity, as_typed, fixed, require_not_negative, with_typed_unit,
};

/// A static mud column: its density and the true vertical depth below the rotary table.
#[derive(Clone, Copy, Debug, PartialEq, Serialize, Deserialize)]
pub struct MudColumn {
    /// The mud weight.
    pub density: Density,
    /// The true vertical depth below the rotary table, which mud weights always refer to.
    pub tvd_below_rotary: Length,
}

/// The pressure at the foot of a static mud column.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct MudPressure {
    column: MudColumn,
    pressure: Pressure,
}

impl MudColumn {
    /// Its pressure: ρ g z.
    ///
    /// # Errors
    /// When the density is negative or the depth is not above zero.
    pub fn pressure(self) -> Result<MudPressure> {
        MudPressure::compute(self)
    }
}

impl MudPressure {
    /// The pressure.
    pub fn pressure(&self) -> Pressure {
        self.pressure
    }
}

impl Explain for MudPressure {
    const KIND: &'static str = "mud-pressure";
    type Inputs = MudColumn;
    type Outcome = Pressure;

    fn compute(column: MudColumn) -> Result<Self> {
        require_not_negative("mud weight", column.density)?;
        let depth = column.tvd_below_rotary;
        if !depth.si().is_finite() || depth.si() <= 0.0 {
            return Err(Error::out_of_range(
                "true vertical depth below the rotary table",
                with_typed_unit(depth),
                "above zero",
            ));
        }
        Ok(MudPressure { column, pressure: column.density.column(depth) })
    }
    fn inputs(&self) -> MudColumn {
        self.column
    }
    fn outcome(&self) -> Pressure {
        self.pressure
    }

    /// By the gradient of water in the trade's units: 0.433 527 psi/ft for each unit of sg.
    fn check(column: &MudColumn, pressure: &Pressure) -> Vec<Check> {
        let psi = 0.433_527_504_001 * column.density.in_sg() * column.tvd_below_rotary.in_ft();
        vec![Check::compare(
            "0.4335275 psi/ft · sg · feet",
            &[pressure.in_psi()],
            &[psi],
            1e-6 * psi.abs().max(1.0),
            "psi",
        )]
    }

    fn explain(&self) -> Explanation {
        let MudColumn { density, tvd_below_rotary } = self.column;
        Explanation {
            title: format!("Pressure of a mud of {} at {} below the rotary table", with_typed_unit(density), with_typed_unit(tvd_below_rotary)),
            headline: self.pressure.to_string(),
            inputs: vec![
                Item::typed("ρ_m", "mud weight", density),
                Item::typed("z", "true vertical depth below the rotary table", tvd_below_rotary),
            ],
            results: vec![Item::computed("p_w", "wall pressure of the static mud", self.pressure)],
            method: Method {
                words: "The weight of a static column from the rotary table down. Circulation adds to it, swabbing takes from it.".to_owned(),
                formulas: vec![Formula::new("p_upright(w) = rho_upright(m) g z", "p_w = ρ_m g z")],
                symbols: vec![("g".to_owned(), format!("standard gravity, {GRAVITY} m/s²"))],
                references: vec![Reference::new(
                    "NIST Special Publication 811 (2008), appendix B.8 (units and standard gravity)",
                )],
                assumptions: vec!["The mud's density is uniform over the column; temperature and compressibility are left out.".to_owned()],
            },
            steps: vec![Step::worked(format!(
                "p_w = {} kg/m³ · {GRAVITY} m/s² · {} m = {} MPa",
                as_typed(density.in_kg_m3()),
                as_typed(tvd_below_rotary.in_m()),
                fixed(self.pressure.in_mpa(), 3)
            ))],
            topics: vec!["mud-weight".to_owned()],
            ..Explanation::default()
        }
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::units::Units;

    #[test]
    fn a_column_of_fresh_water_is_the_trades_gradient() {
        let p = MudColumn { density: 1.sg(), tvd_below_rotary: 1000.ft() }.pressure().unwrap();
        // 0.433 psi/ft, common practice, no source; exactly 0.43353 from the definitions.
        assert!((p.pressure().in_psi() - 433.53).abs() < 0.01, "{}", p.pressure().in_psi());
        assert!(p.card().passed());
        assert!(MudColumn { density: (-1).sg(), tvd_below_rotary: 1000.m() }.pressure().is_err());
        assert!(MudColumn { density: 1.sg(), tvd_below_rotary: 0.m() }.pressure().is_err());
    }
}
