//! A stress stated by its components in the axes of a hole, a fault or an instrument.

use serde::{Deserialize, Serialize};

use super::Stress;
use super::made::Made;
use super::tensor::Tensor;
use crate::card::{Check, Explanation, Formula, Item, Method, Reference, Step};
use crate::error::Result;
use crate::frames::vector::{dot, transpose};
use crate::frames::{Axes, Chain, Geographic, Turned};
use crate::units::{Pressure, Quantity};

/// The six components of a stress in axes 1, 2, 3 of some frame: of a hole x top, y right, z along;
/// of a fault along strike, down dip, normal; of local axes as they were stated.
#[derive(Clone, Copy, Debug, PartialEq, Serialize, Deserialize)]
pub struct AxisComponents {
    /// First–first.
    pub xx: Pressure,
    /// Second–second.
    pub yy: Pressure,
    /// Third–third.
    pub zz: Pressure,
    /// First–second.
    pub xy: Pressure,
    /// Second–third.
    pub yz: Pressure,
    /// First–third.
    pub xz: Pressure,
}

impl AxisComponents {
    fn listed(self) -> [(&'static str, [usize; 2], Pressure); 6] {
        [
            ("first–first", [0, 0], self.xx),
            ("second–second", [1, 1], self.yy),
            ("third–third", [2, 2], self.zz),
            ("first–second", [0, 1], self.xy),
            ("second–third", [1, 2], self.yz),
            ("first–third", [0, 2], self.xz),
        ]
    }

    fn tensor(self, tension_positive: bool) -> Result<Tensor> {
        let sign = if tension_positive { -1.0 } else { 1.0 };
        let mut six = [0.0; 6];
        for (slot, (name, _, p)) in six.iter_mut().zip(self.listed()) {
            *slot = sign * p.finite(&format!("stress component {name} axis"))?.si();
        }
        Ok(Tensor(six))
    }
}

impl<F: Turned> Stress<F> {
    /// The stress of six components in the axes that a chain leads to, compression positive. Carry it
    /// by `chain.back()` to have it in north, east, down.
    ///
    /// # Errors
    /// When a component is not a finite number.
    pub fn from_components_in(chain: &Chain<Geographic, F>, given: AxisComponents) -> Result<Self> {
        stated(chain, given, false)
    }

    /// The same from components given with tension positive; each changes its sign here, and the
    /// record says so.
    ///
    /// # Errors
    /// When a component is not a finite number.
    pub fn from_tension_positive_in(chain: &Chain<Geographic, F>, given: AxisComponents) -> Result<Self> {
        stated(chain, given, true)
    }
}

fn stated<F: Turned>(
    chain: &Chain<Geographic, F>,
    components: AxisComponents,
    tension_positive: bool,
) -> Result<Stress<F>> {
    let axes = chain.to();
    let geographic = geographic(axes, components, tension_positive)?;
    Ok(Stress::of(components.tensor(tension_positive)?, geographic.made, Some((geographic.tensor, axes))))
}

impl Stress<Geographic> {
    /// The components as they were stated in some axes, compression positive, if they were.
    pub(super) fn stated_in(&self, wanted: Axes) -> Option<Tensor> {
        match self.made {
            Made::InAxes { axes, components, tension_positive } if axes == wanted => {
                components.tensor(tension_positive).ok()
            }
            _ => None,
        }
    }
}

/// The stress in north, east, down: S = Qᵀ S' Q.
pub(super) fn geographic(axes: Axes, components: AxisComponents, tension_positive: bool) -> Result<Stress<Geographic>> {
    let tensor = components.tensor(tension_positive)?.turned(&transpose(&axes.matrix()?));
    Ok(Stress::of(tensor, Made::InAxes { axes, components, tension_positive }, None))
}

/// The stated components read back: e_j · (S e_k) with the axes by their definitions.
pub(super) fn checks(axes: Axes, components: AxisComponents, tension_positive: bool, got: Tensor) -> Vec<Check> {
    let Ok(e) = axes.by_definition() else { return Vec::new() };
    let sign = if tension_positive { -1.0 } else { 1.0 };
    let stated = components.listed().map(|(_, _, p)| sign * p.in_mpa());
    let back = components.listed().map(|(_, [j, k], _)| dot(e[j], got.times(e[k])) * 1e-6);
    let tolerance = stated.iter().fold(1e-6_f64, |m, p| m.max(p.abs())) * 1e-12;
    vec![Check::compare(
        "components read back along the stated axes, e_j · (S e_k), against those given",
        &back,
        &stated,
        tolerance,
        "MPa",
    )]
}

pub(super) fn explain(
    s: &Stress<Geographic>,
    axes: Axes,
    components: AxisComponents,
    tension_positive: bool,
) -> Explanation {
    let q = axes.matrix().unwrap_or_default();
    let letters = axes.letters();
    let names = axes.axis_names();
    let mut inputs: Vec<Item> = components
        .listed()
        .into_iter()
        .map(|(_, [j, k], p)| {
            let symbol = format!("S_{}{}", letters[j], letters[k]);
            Item::typed(&symbol, format!("component {} – {}", names[j], names[k]), p)
        })
        .collect();
    inputs.push(Item::new(
        "Q",
        format!("turn from north, east, down to {}", axes.title()),
        "turn",
        q.as_flattened().to_vec(),
        "3 × 3 matrix",
    ));
    let given = components.tensor(tension_positive).unwrap_or(Tensor([0.0; 6]));
    let mut notes = Vec::new();
    let mut formulas = vec![Formula::new("S = Q^upright(T) S' Q", "S = Qᵀ S' Q")];
    let mut words = "The tensor was stated in other axes and is turned back into north, east, down.".to_owned();
    if tension_positive {
        notes.push("Signs were turned: tension positive as given, compression positive from here on.".to_owned());
        formulas.insert(0, Formula::new("S' = -S_upright(t)", "S' = −S_t"));
        words = format!("The components were given with tension positive; each has changed its sign. {words}");
    }
    Explanation {
        title: format!("Stress tensor{} from six components in {}", s.of_name(), axes.title()),
        inputs,
        method: Method {
            words,
            formulas,
            references: vec![Reference::new(
                "Brady, B.H.G. and Brown, E.T. (2004) Rock Mechanics for Underground Mining, 3rd ed., Kluwer, ch. 2 (stress transformation)",
            )],
            ..Method::default()
        },
        steps: vec![
            Step::matrix("S'", &given.scale(1e-6).rows(), 4, "MPa", &names.join(", ")),
            Step::matrix("Q", &q, 6, "", &format!("rows: {}", names.join(", "))),
        ],
        notes,
        topics: vec!["rotation".to_owned()],
        ..Explanation::default()
    }
}

#[cfg(test)]
mod tests {
    use crate::prelude::*;

    fn given() -> AxisComponents {
        AxisComponents { xx: 41.mpa(), yy: 30.mpa(), zz: 25.mpa(), xy: 4.mpa(), yz: (-3).mpa(), xz: 2.mpa() }
    }

    #[test]
    fn what_a_cell_measured_in_its_hole_is_read_in_north_east_down() {
        let hole = Attitude { inclination: 95.deg(), azimuth: Azimuth::from_true_north(40.deg()) }.named("KC-2");
        let chain = hole.chain().unwrap();
        let measured = Stress::from_components_in(&chain, given()).unwrap();
        assert_eq!(measured.component(Axis::X, Axis::X), 41.mpa());
        let s = chain.back().carry(&measured);
        assert!(s.card().passed(), "{:?}", s.card().checks);
        assert!(chain.carry(&s).is_close(&measured, 1.pa()));
        assert!(measured.card().passed());
        assert_eq!(s.upstream().len(), 1);
    }

    #[test]
    fn tension_positive_components_change_their_sign_and_say_so() {
        let grid = LocalAxes::mine_grid_with_up("model grid", Azimuth::from_true_north(12.deg())).unwrap();
        let chain = grid.chain().unwrap();
        let s = chain.back().carry(&Stress::from_tension_positive_in(&chain, given()).unwrap());
        assert_eq!(s.component(Axis::Z, Axis::Z).in_mpa().round(), -25.0);
        let card = s.card();
        assert!(card.passed() && card.explanation.notes[0].contains("Signs were turned"));
        assert!(card.title().ends_with("in the axes of model grid"), "{}", card.title());
        let nan = AxisComponents { yz: f64::NAN.mpa(), ..given() };
        let said = Stress::from_components_in(&chain, nan).unwrap_err().to_string();
        assert!(said.contains("second–third"), "{said}");
    }
}
