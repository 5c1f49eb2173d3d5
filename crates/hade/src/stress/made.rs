//! How a geographic stress was stated, and the card that says so.

use serde::{Deserialize, Serialize};

use super::Stress;
use super::carried::Stress6;
use super::combined::{self, Parts};
use super::horizontals::Horizontals;
use super::in_axes::{self, AxisComponents};
use super::tensor::Tensor;
use super::tensor_figure::tensor_figures;
use crate::card::{Card, Check, Explain, Explanation, Formula, Item, Method, Reference, Step};
use crate::error::{Error, Result};
use crate::frames::{Axes, Geographic, Line, Name, by_singular_values, chain_card, nearest_orthonormal};
use crate::units::{Pressure, Quantity, fixed};

/// The six components of a stress in north, east, down.
#[derive(Clone, Copy, Debug, PartialEq, Serialize, Deserialize)]
pub struct Components {
    /// North–north.
    pub nn: Pressure,
    /// East–east.
    pub ee: Pressure,
    /// Down–down.
    pub dd: Pressure,
    /// North–east.
    pub ne: Pressure,
    /// North–down.
    pub nd: Pressure,
    /// East–down.
    pub ed: Pressure,
}

/// How a stress came to be.
#[derive(Clone, Copy, Debug, PartialEq, Serialize, Deserialize)]
#[serde(tag = "how", rename_all = "snake_case")]
#[non_exhaustive]
pub enum Made {
    /// From six components, compression positive.
    Components(Components),
    /// From six components given with tension positive, turned at the door.
    TensionPositive(Components),
    /// From a vertical and two horizontal stresses.
    Horizontals(Horizontals),
    /// From three principal stresses and their measured lines.
    Principals {
        /// Magnitude and line of each.
        measured: [(Pressure, Line); 3],
    },
    /// From six components in the axes of a hole, a fault or an instrument.
    InAxes {
        /// The axes.
        axes: Axes,
        /// The components.
        components: AxisComponents,
        /// Whether tension counted positive, so that the signs were turned.
        tension_positive: bool,
    },
    /// By adding or scaling.
    Combined {
        /// What was added, as far as the program remembers.
        parts: Option<Parts>,
    },
}

impl Made {
    /// The tensor in north, east, down that this makes.
    pub(super) fn tensor(self) -> Result<Tensor> {
        Stress::<Geographic>::compute(StatedInputs { made: self, combined: None, label: None }).map(|s| s.tensor)
    }
}

impl Components {
    fn tensor(self) -> Result<Tensor> {
        let [nn, ee, dd, ne, ed, nd] = [
            (self.nn, "stress component nn"),
            (self.ee, "stress component ee"),
            (self.dd, "stress component dd"),
            (self.ne, "stress component ne"),
            (self.ed, "stress component ed"),
            (self.nd, "stress component nd"),
        ]
        .map(|(p, what)| p.finite(what).map(Quantity::si));
        Ok(Tensor([nn?, ee?, dd?, ne?, ed?, nd?]))
    }
    fn negated(self) -> Self {
        Components { nn: -self.nn, ee: -self.ee, dd: -self.dd, ne: -self.ne, nd: -self.nd, ed: -self.ed }
    }
    fn items(self) -> Vec<Item> {
        [
            ("S_nn", "north–north", self.nn),
            ("S_ee", "east–east", self.ee),
            ("S_dd", "down–down", self.dd),
            ("S_ne", "north–east", self.ne),
            ("S_nd", "north–down", self.nd),
            ("S_ed", "east–down", self.ed),
        ]
        .into_iter()
        .map(|(symbol, name, p)| Item::typed(symbol, format!("component {name}"), p))
        .collect()
    }
}

impl Stress<Geographic> {
    /// The tensor of six components in north, east, down, compression positive.
    ///
    /// # Errors
    /// When a component is not a finite number.
    pub fn from_components(given: Components) -> Result<Self> {
        Ok(Stress::of(given.tensor()?, Made::Components(given), None))
    }

    /// The tensor of six components given with tension positive; each changes its sign here, and
    /// the record says so.
    ///
    /// # Errors
    /// When a component is not a finite number.
    pub fn from_tension_positive(given: Components) -> Result<Self> {
        Ok(Stress::of(given.negated().tensor()?, Made::TensionPositive(given), None))
    }

    /// The tensor of three principal stresses along measured lines. The lines are first replaced
    /// by the nearest orthonormal set (polar factor).
    ///
    /// # Errors
    /// When two lines are more than 15° from a right angle, a line has no true north, or a number
    /// is not finite.
    pub fn from_principals(measured: [(Pressure, Line); 3]) -> Result<Self> {
        let [a, b, c] = measured.map(|(p, line)| Ok::<_, Error>((p.finite("principal stress")?.si(), line.vector()?)));
        let (a, b, c) = (a?, b?, c?);
        let fitted = nearest_orthonormal(&[a.1, b.1, c.1])?;
        let tensor = Tensor::from_axes([a.0, b.0, c.0], &fitted.axes);
        Ok(Stress::of(tensor, Made::Principals { measured }, None))
    }

    /// Its own card, when it is known how the tensor was made.
    pub(crate) fn stated(&self) -> Option<Card> {
        (!matches!(self.made, Made::Combined { parts: None })).then(|| self.card())
    }

    /// Everything it stands on, and its own card.
    pub(crate) fn upstream_with_own(&self) -> Vec<Card> {
        let mut cards = self.upstream();
        cards.extend(self.stated());
        cards
    }
}

/// The inputs of a stated stress: how it was made, and for a combined one its components.
#[derive(Clone, Copy, Debug, PartialEq, Serialize, Deserialize)]
pub struct StatedInputs {
    made: Made,
    combined: Option<Tensor>,
    #[serde(default, skip_serializing_if = "Option::is_none")]
    label: Option<Name>,
}

impl Explain for Stress<Geographic> {
    const KIND: &'static str = "stress-tensor";
    const VERSION: u32 = 2;
    type Inputs = StatedInputs;
    type Outcome = Stress6;

    fn compute(inputs: StatedInputs) -> Result<Self> {
        let stress = match inputs.made {
            Made::Components(given) => Stress::from_components(given),
            Made::TensionPositive(given) => Stress::from_tension_positive(given),
            Made::Horizontals(given) => Stress::from_horizontals(given),
            Made::Principals { measured } => Stress::from_principals(measured),
            Made::InAxes { axes, components, tension_positive } => {
                in_axes::geographic(axes, components, tension_positive)
            }
            Made::Combined { parts } => combined::compute(parts, inputs.combined),
        };
        Ok(stress?.with_label(inputs.label))
    }
    fn inputs(&self) -> StatedInputs {
        let forgotten = matches!(self.made, Made::Combined { parts: None });
        StatedInputs { made: self.made, combined: forgotten.then_some(self.tensor), label: self.label }
    }
    fn outcome(&self) -> Stress6 {
        self.six()
    }

    fn check(inputs: &StatedInputs, outcome: &Stress6) -> Vec<Check> {
        let got = outcome.0;
        let mpa = |c: f64| c * 1e-6;
        let tolerance = got.largest().max(1.0) * 1e-12 * 1e-6;
        match inputs.made {
            Made::Components(c) => vec![Check::compare(
                "tractions on the north, east and down planes against the stated components",
                &[got.times([1.0, 0.0, 0.0]), got.times([0.0, 1.0, 0.0]), got.times([0.0, 0.0, 1.0])]
                    .as_flattened()
                    .iter()
                    .map(|c| mpa(*c))
                    .collect::<Vec<_>>(),
                &[c.nn, c.ne, c.nd, c.ne, c.ee, c.ed, c.nd, c.ed, c.dd].map(Pressure::in_mpa),
                tolerance,
                "MPa",
            )],
            Made::TensionPositive(c) => vec![Check::compare(
                "sum of each stored and each stated component (opposite signs)",
                &got.0.map(mpa),
                &[c.nn, c.ee, c.dd, c.ne, c.ed, c.nd].map(|p| -p.in_mpa()),
                tolerance,
                "MPa",
            )],
            Made::Horizontals(h) => horizontal_checks(h, got),
            Made::Principals { measured } => principal_checks(&measured, got),
            Made::InAxes { axes, components, tension_positive } => {
                in_axes::checks(axes, components, tension_positive, got)
            }
            Made::Combined { parts } => combined::checks(parts, got),
        }
    }

    fn explain(&self) -> Explanation {
        let mut explanation = match self.made {
            Made::Components(given) => Explanation {
                title: "Stress tensor from six components".to_owned(),
                inputs: given.items(),
                ..Explanation::default()
            },
            Made::TensionPositive(given) => Explanation {
                title: "Stress tensor from six components given tension-positive".to_owned(),
                inputs: given.items(),
                method: Method {
                    words: "The components were given with tension positive; each has changed its sign.".to_owned(),
                    formulas: vec![Formula::new("S = -S_upright(t)", "S = −S_t")],
                    ..Method::default()
                },
                notes: vec![
                    "Signs were turned: tension positive as given, compression positive from here on.".to_owned(),
                ],
                ..Explanation::default()
            },
            Made::Horizontals(given) => explain_horizontals(given),
            Made::Principals { measured } => explain_principals(&measured),
            Made::InAxes { axes, components, tension_positive } => {
                in_axes::explain(self, axes, components, tension_positive)
            }
            Made::Combined { parts } => combined::explain(self, parts),
        };
        if !explanation.title.contains(&self.of_name()) {
            explanation.title =
                explanation.title.replacen("Stress tensor", &format!("Stress tensor{}", self.of_name()), 1);
        }
        let item = self.item("S", "stress in north, east, down");
        explanation.headline.clone_from(&item.shown);
        explanation.results = vec![item];
        explanation.steps.push(Step::matrix(
            "S",
            &self.rows_in_mpa(),
            4,
            "MPa",
            "north, east, down; compression positive",
        ));
        explanation.figures = tensor_figures(self);
        explanation.topics.push("stress".to_owned());
        explanation
    }

    fn upstream(&self) -> Vec<Card> {
        match self.made {
            Made::Horizontals(given) => given.sh_max_azimuth.upstream(),
            Made::Principals { measured } => measured.iter().flat_map(|(_, line)| line.trend.upstream()).collect(),
            Made::InAxes { axes, .. } => chain_card(axes),
            Made::Combined { parts } => combined::upstream(parts),
            Made::Components(_) | Made::TensionPositive(_) => Vec::new(),
        }
    }
}

/// The stated magnitudes read back as normal stresses along the stated directions.
fn horizontal_checks(h: Horizontals, got: Tensor) -> Vec<Check> {
    let Ok(azimuth) = h.sh_max_azimuth.true_north() else { return Vec::new() };
    let (s, c) = azimuth.si().sin_cos();
    let along = [c, s, 0.0];
    let across = [-s, c, 0.0];
    let down = [0.0, 0.0, 1.0];
    let traction = |v| got.times(v);
    let expect = |v: [f64; 3], p: Pressure| v.map(|c| c * p.in_mpa());
    let got = [traction(along), traction(across), traction(down)].map(|t| t.map(|c| c * 1e-6));
    let expected = [expect(along, h.sh_max), expect(across, h.sh_min), expect(down, h.sv)];
    vec![Check::compare(
        "traction across each stated direction is that stress along it, with no shear",
        got.as_flattened(),
        expected.as_flattened(),
        [h.sv, h.sh_max, h.sh_min].iter().fold(1e-6_f64, |m, p| m.max(p.abs().in_mpa())) * 1e-12,
        "MPa",
    )]
}

/// The polar factor by a singular value decomposition, and the stated magnitudes along its axes.
fn principal_checks(measured: &[(Pressure, Line); 3], got: Tensor) -> Vec<Check> {
    let Ok(lines) = measured.iter().map(|(_, line)| line.vector()).collect::<Result<Vec<_>>>() else {
        return Vec::new();
    };
    let Some(axes) = <[_; 3]>::try_from(lines).ok().and_then(|lines| by_singular_values(&lines)) else {
        return Vec::new();
    };
    let got = axes.map(|axis| got.times(axis).map(|c| c * 1e-6));
    let mut expected = axes;
    for (row, (p, _)) in expected.iter_mut().zip(measured) {
        *row = row.map(|c| c * p.in_mpa());
    }
    let largest = measured.iter().fold(1e-6_f64, |m, (p, _)| m.max(p.abs().in_mpa()));
    vec![Check::compare(
        "traction across each axis of the orthonormal set found by singular values",
        got.as_flattened(),
        expected.as_flattened(),
        largest * 1e-11,
        "MPa",
    )]
}

fn explain_horizontals(given: Horizontals) -> Explanation {
    let a = given.sh_max_azimuth.true_north().unwrap_or_default();
    let (s, c) = a.si().sin_cos();
    let (big, small) = (given.sh_max.in_mpa(), given.sh_min.in_mpa());
    Explanation {
        title: "Stress tensor from the vertical and horizontal stresses".to_owned(),
        notes: if given.sv < Pressure::default() && given.sh_min < Pressure::default() {
            vec!["WARNING: the stresses are negative, that is tension; here compression is positive. Was tension positive where they come from?".to_owned()]
        } else {
            Vec::new()
        },
        inputs: vec![
            Item::typed("S_v", "vertical stress", given.sv),
            Item::typed("S_Hmax", "larger horizontal stress", given.sh_max),
            Item::typed("S_hmin", "smaller horizontal stress", given.sh_min),
            given.sh_max_azimuth.item("A", "azimuth of S_Hmax"),
        ],
        method: Method {
            words: "The larger horizontal stress acts along azimuth A, the smaller across it, the third along the vertical.".to_owned(),
            formulas: vec![
                Formula::new("S_(n n) = S_upright(H max) cos^2 A + S_upright(h min) sin^2 A", "S_nn = S_Hmax cos²A + S_hmin sin²A"),
                Formula::new("S_(e e) = S_upright(H max) sin^2 A + S_upright(h min) cos^2 A", "S_ee = S_Hmax sin²A + S_hmin cos²A"),
                Formula::new("S_(n e) = (S_upright(H max) - S_upright(h min)) sin A cos A", "S_ne = (S_Hmax − S_hmin) sin A cos A"),
                Formula::new("S_(d d) = S_upright(v)", "S_dd = S_v"),
            ],
            references: vec![Reference::new(
                "Zoback, M.D. (2007) Reservoir Geomechanics, Cambridge University Press, ch. 1 and 8 (principal stresses and their transformation)",
            )],
            assumptions: vec!["The vertical is a principal direction (stated by giving S_v with two horizontal stresses).".to_owned()],
            ..Method::default()
        },
        steps: vec![
            Step::worked(format!(
                "S_nn = {} · ({})² + {} · ({})² = {} MPa",
                fixed(big, 3), fixed(c, 6), fixed(small, 3), fixed(s, 6), fixed(big * c * c + small * s * s, 4)
            )),
            Step::worked(format!(
                "S_ee = {} · ({})² + {} · ({})² = {} MPa",
                fixed(big, 3), fixed(s, 6), fixed(small, 3), fixed(c, 6), fixed(big * s * s + small * c * c, 4)
            )),
            Step::worked(format!(
                "S_ne = ({} − {}) · ({}) · ({}) = {} MPa",
                fixed(big, 3), fixed(small, 3), fixed(s, 6), fixed(c, 6), fixed((big - small) * s * c, 4)
            )),
        ],
        ..Explanation::default()
    }
}

fn explain_principals(measured: &[(Pressure, Line); 3]) -> Explanation {
    let mut inputs = Vec::new();
    for ((p, line), n) in measured.iter().zip(1..) {
        inputs.push(Item::typed(&format!("S_{n}"), format!("principal stress along the axis {n}"), *p));
        inputs.push(line.trend.item(&format!("T_{n}"), &format!("trend of the axis {n}")));
        inputs.push(Item::typed(&format!("P_{n}"), format!("plunge of the axis {n}, down positive"), line.plunge));
    }
    let lines: Option<Vec<_>> = measured.iter().map(|(_, line)| line.vector().ok()).collect();
    let fitted = lines.and_then(|l| <[_; 3]>::try_from(l).ok()).and_then(|l| nearest_orthonormal(&l).ok());
    let mut steps = Vec::new();
    let mut notes = Vec::new();
    if let Some(fitted) = fitted {
        steps.push(Step::matrix("V", &fitted.axes, 6, "", "rows: the fitted axes 1, 2, 3 in north, east, down"));
        notes.push(format!(
            "The measured lines were replaced by the nearest orthonormal set; the largest angle from a measured line to its axis is {}°.",
            fixed(fitted.misfit.to_degrees(), 2)
        ));
    }
    Explanation {
        title: "Stress tensor from principal stresses and measured axes".to_owned(),
        inputs,
        method: Method {
            words: "The three measured lines are replaced by the nearest orthonormal set (polar factor); of a left-handed set one line is turned round, since lines have no sign. The tensor is the sum over its axes.".to_owned(),
            formulas: vec![Formula::new("S = sum_(k=1)^3 S_k v_k v_k^upright(T)", "S = Σ S_k v_k v_kᵀ")],
            references: vec![Reference::new(
                "Higham, N.J. (1986) Computing the polar decomposition, SIAM J. Sci. Stat. Comput. 7, 1160–1174",
            )],
            ..Method::default()
        },
        steps,
        notes,
        ..Explanation::default()
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::frames::Azimuth;
    use crate::units::{Angle, Units};

    fn line(trend: f64, plunge: f64) -> Line {
        Line { trend: Azimuth::from_true_north(trend.deg()), plunge: plunge.deg() }
    }

    #[test]
    fn exchanged_horizontal_stresses_and_nan_are_refused_by_name() {
        let given = Horizontals {
            sv: 60.mpa(),
            sh_max: 40.mpa(),
            sh_min: 55.mpa(),
            sh_max_azimuth: Azimuth::from_true_north(30.deg()),
        };
        let said = Stress::from_horizontals(given).unwrap_err().to_string();
        assert!(said.starts_with("S_Hmax 40 MPa is smaller than S_hmin 55 MPa"), "{said}");
        let said = Stress::from_horizontals(Horizontals { sv: f64::NAN.mpa(), ..given }).unwrap_err().to_string();
        assert!(said.contains("vertical stress S_v is NaN"), "{said}");
        let grid = Horizontals { sh_max: 56.mpa(), sh_max_azimuth: Azimuth::from_grid_north(30.deg()), ..given };
        assert!(Stress::from_horizontals(grid).unwrap_err().to_string().contains("with_convergence"));
    }

    /// Lines have no sign: the other end of a line gives the same tensor.
    #[test]
    fn either_end_of_a_measured_line_gives_the_same_tensor() {
        let measured = [(60.mpa(), line(35.0, 12.0)), (40.mpa(), line(127.0, 8.0)), (20.mpa(), line(250.0, 75.5))];
        let s = Stress::from_principals(measured).unwrap();
        let mut turned = measured;
        turned[2].1 = Line { trend: measured[2].1.trend.turned_by(180.deg()), plunge: -measured[2].1.plunge };
        assert!(Stress::from_principals(turned).unwrap().is_close(&s, 1.pa()));
        assert!(s.card().explanation.notes[0].contains("the largest angle from a measured line"));
    }

    #[test]
    fn axes_too_far_from_right_angles_are_refused_with_the_angles() {
        let said = Stress::from_principals([
            (60.mpa(), line(35.0, 12.0)),
            (40.mpa(), line(105.0, 8.0)),
            (20.mpa(), line(200.0, 72.0)),
        ])
        .unwrap_err()
        .to_string();
        assert!(said.contains("within 15° of right angles") && said.contains("1–2"), "{said}");
        let dip = Line { plunge: Angle::deg(100.0), ..line(0.0, 0.0) };
        assert!(
            Stress::from_principals([(1.mpa(), dip), (1.mpa(), line(90.0, 0.0)), (1.mpa(), line(0.0, 90.0))]).is_err()
        );
    }

    #[test]
    fn tension_positive_components_change_their_sign_and_say_so() {
        let c = Components { nn: (-40).mpa(), ee: (-50).mpa(), dd: (-60).mpa(), ne: 1.mpa(), nd: 2.mpa(), ed: 3.mpa() };
        let s = Stress::from_tension_positive(c).unwrap();
        assert_eq!(s.component(crate::frames::Axis::Z, crate::frames::Axis::Z), 60.mpa());
        assert_eq!(s.component(crate::frames::Axis::X, crate::frames::Axis::Y), (-1).mpa());
        assert!(s.card().explanation.notes[0].contains("Signs were turned"));
    }
}
