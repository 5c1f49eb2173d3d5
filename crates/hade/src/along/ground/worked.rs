//! How stress and pore pressure at a place are found, with the numbers, to be redone by hand.

use super::at_place::{AtPlace, HorizontalBy};
use super::in_hole::GroundInHole;
use crate::card::Step;
use crate::units::{Pressure, Quantity, as_typed, fixed};

fn mpa(pressure: Pressure) -> String {
    fixed(pressure.in_mpa(), 4)
}

impl GroundInHole<'_> {
    /// The steps to the stresses and the pore pressure at a place.
    pub fn worked(&self, state: &AtPlace) -> Vec<Step> {
        let tvd = state.tvd.si();
        let mut steps = vec![Step::worked(format!(
            "the survey puts MD {} m at TVD {} m below the rotary table; the hole lies there at {}",
            fixed(state.md.si(), 2),
            fixed(tvd, 3),
            state.place.attitude().words()
        ))];
        let [sv, pore] = self.vertical_worked(tvd);
        steps.extend([Step::worked(sv), Step::worked(pore)]);
        let virgin = self.virgin_pore(tvd);
        let effective = state.sv - virgin;
        let drawdown = state.drawdown.unwrap_or_default();
        for ((by, path), (name, total)) in
            state.by.iter().zip(state.paths).zip([("h", state.sh_min), ("H", state.sh_max)])
        {
            let before = total + drawdown * path;
            steps.push(Step::worked(match by {
                HorizontalBy::Ratio(k) => format!(
                    "S_{name} = P_p + K_{name} (S_v − P_p) = {} + {} · {} = {} MPa",
                    mpa(virgin),
                    as_typed(*k),
                    mpa(effective),
                    mpa(before)
                ),
                HorizontalBy::Gradient => format!("S_{name} = {} MPa by its gradient", mpa(before)),
                HorizontalBy::Table { points, ratio } => format!(
                    "K_{name} = {} = {}; S_{name} = P_p + K_{name} (S_v − P_p) = {} + {} · {} = {} MPa",
                    ratio_words(points, tvd),
                    fixed(*ratio, 6),
                    mpa(virgin),
                    fixed(*ratio, 6),
                    mpa(effective),
                    mpa(before)
                ),
            }));
            if state.drawdown.is_some() {
                steps.push(Step::worked(format!(
                    "drawn down by {} MPa: S_{name} − κ ΔP_p = {} − {} · {} = {} MPa",
                    as_typed(drawdown.in_mpa()),
                    mpa(before),
                    fixed(path, 4),
                    as_typed(drawdown.in_mpa()),
                    mpa(total)
                )));
            }
        }
        if state.drawdown.is_some() {
            steps.push(Step::worked(format!(
                "P_p − ΔP_p = {} − {} = {} MPa; S_v stays",
                mpa(virgin),
                as_typed(drawdown.in_mpa()),
                mpa(state.pore)
            )));
        }
        steps.extend(self.temperatures_worked(tvd).into_iter().map(Step::worked));
        if let Some(thermal) = state.layer.thermal.filter(|_| state.layer.thermal_properties.is_some()) {
            steps.push(Step::worked(format!("ΔT = T_m − T_g = {} K", fixed(thermal.warming.in_kelvin(), 3))));
        }
        steps
    }
}

/// "0.7 + (0.8 − 0.7) · (2500 − 2000) / (3000 − 2000)".
fn ratio_words(points: &[Option<(f64, f64)>; 2], tvd: f64) -> String {
    match points {
        [Some((z1, k1)), Some((z2, k2))] => format!(
            "{} + ({} − {}) · ({} − {z}) / ({} − {z})",
            fixed(*k1, 6),
            fixed(*k2, 6),
            fixed(*k1, 6),
            fixed(tvd, 2),
            fixed(*z2, 2),
            z = fixed(*z1, 2)
        ),
        [Some((z, k)), None] | [None, Some((z, k))] => {
            format!("the ratio {} of the one point of the layer on that side, at TVD {} m", fixed(*k, 6), fixed(*z, 2))
        }
        [None, None] => String::new(),
    }
}
