//! The measures of a stress that do not depend on the axes.

use serde::{Deserialize, Serialize};

use super::Stress;
use super::invariants_card::{method, steps};
use super::regime::ties;
use super::tensor::Tensor;
use crate::card::{Card, Check, Explain, Explanation, Item};
use crate::error::Result;
use crate::frames::vector::{M3, cross, dot};
use crate::frames::{Borehole, Geographic};
use crate::units::{Angle, Pressure, Quantity, fixed};

/// The invariants of a stress tensor and what is made of them: the same in every set of axes.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Invariants {
    inputs: InvariantsInputs,
    outcome: InvariantsOutcome,
}

/// The stress, in the axes it was given in.
#[derive(Clone, Copy, Debug, PartialEq, Serialize, Deserialize)]
#[serde(tag = "axes", rename_all = "snake_case")]
#[non_exhaustive]
pub enum InvariantsInputs {
    /// North, east, down.
    NorthEastDown {
        /// The stress.
        stress: Stress<Geographic>,
    },
    /// Top of hole, right, along the hole.
    InHole {
        /// The stress.
        stress: Stress<Borehole>,
    },
}

/// What came out, in SI (Pa, Pa², Pa³, rad). The deviator has the components xx, yy, zz, xy, yz,
/// xz in the axes of the stress.
#[derive(Clone, Copy, Debug, PartialEq, Serialize, Deserialize)]
pub struct InvariantsOutcome {
    pub(super) i1: f64,
    pub(super) i2: f64,
    pub(super) i3: f64,
    pub(super) j2: f64,
    pub(super) j3: f64,
    pub(super) mean: Pressure,
    pub(super) octahedral_shear: Pressure,
    pub(super) von_mises: Pressure,
    pub(super) max_shear: Pressure,
    pub(super) lode: Option<Angle>,
    pub(super) deviator: Tensor,
}

impl Stress<Geographic> {
    /// The invariants: I₁, I₂, I₃ of the tensor, J₂, J₃ of its deviator, mean and octahedral
    /// stresses, von Mises stress, largest shear stress, Lode angle.
    pub fn invariants(&self) -> Invariants {
        Invariants::of(InvariantsInputs::NorthEastDown { stress: *self })
    }
}

impl Stress<Borehole> {
    /// The invariants; the same as of the stress in north, east, down.
    pub fn invariants(&self) -> Invariants {
        Invariants::of(InvariantsInputs::InHole { stress: *self })
    }
}

impl InvariantsInputs {
    fn tensor(&self) -> Tensor {
        match self {
            InvariantsInputs::NorthEastDown { stress } => stress.tensor(),
            InvariantsInputs::InHole { stress } => stress.tensor(),
        }
    }
}

pub(super) const MPA: f64 = 1e-6;

/// Trace, sum of the principal minors, determinant.
pub(super) fn trace_minors_det(m: &M3) -> [f64; 3] {
    let minor = |i: usize, j: usize| m[i][i] * m[j][j] - m[i][j] * m[j][i];
    [m[0][0] + m[1][1] + m[2][2], minor(0, 1) + minor(1, 2) + minor(0, 2), dot(m[0], cross(m[1], m[2]))]
}

impl Invariants {
    fn of(inputs: InvariantsInputs) -> Self {
        let tensor = inputs.tensor();
        let [i1, i2, i3] = trace_minors_det(&tensor.rows());
        let mean = i1 / 3.0;
        let deviator = tensor.add(Tensor([-mean, -mean, -mean, 0.0, 0.0, 0.0]));
        let [xx, yy, zz, xy, yz, xz] = deviator.0;
        let j2 = 0.5 * (xx * xx + yy * yy + zz * zz) + xy * xy + yz * yz + xz * xz;
        let [_, _, j3] = trace_minors_det(&deviator.rows());
        let [s1, s2, s3] = tensor.eigen().values;
        // By the arc tangent: the arc cosine of J₃ loses all figures near 0° and 60°.
        let lode = (ties([s1, s2, s3]) != [true, true])
            .then(|| Angle::from_si((3.0_f64.sqrt() * (s2 - s3)).atan2((s1 - s2) + (s1 - s3))));
        let outcome = InvariantsOutcome {
            i1,
            i2,
            i3,
            j2,
            j3,
            mean: Pressure::from_si(mean),
            octahedral_shear: Pressure::from_si((2.0 * j2 / 3.0).sqrt()),
            von_mises: Pressure::from_si((3.0 * j2).sqrt()),
            max_shear: Pressure::from_si(0.5 * (s1 - s3)),
            lode,
            deviator,
        };
        Invariants { inputs, outcome }
    }

    /// I₁ = tr S, the sum of the normal stresses.
    pub fn i1(&self) -> Pressure {
        Pressure::from_si(self.outcome.i1)
    }
    /// I₂, the sum of the principal minors of S = S₁S₂ + S₂S₃ + S₃S₁, in MPa².
    pub fn i2_in_mpa2(&self) -> f64 {
        self.outcome.i2 * MPA * MPA
    }
    /// I₃ = det S = S₁S₂S₃, in MPa³.
    pub fn i3_in_mpa3(&self) -> f64 {
        self.outcome.i3 * MPA * MPA * MPA
    }
    /// J₂ = ½ s:s of the deviator s, in MPa²; zero or more.
    pub fn j2_in_mpa2(&self) -> f64 {
        self.outcome.j2 * MPA * MPA
    }
    /// J₃ = det s of the deviator s, in MPa³; positive towards triaxial compression.
    pub fn j3_in_mpa3(&self) -> f64 {
        self.outcome.j3 * MPA * MPA * MPA
    }
    /// The mean stress I₁/3, compression positive.
    pub fn mean(&self) -> Pressure {
        self.outcome.mean
    }
    /// The normal stress on the octahedral planes; it is the mean stress.
    pub fn octahedral_normal(&self) -> Pressure {
        self.outcome.mean
    }
    /// The shear stress on the octahedral planes, √(2 J₂ / 3).
    pub fn octahedral_shear(&self) -> Pressure {
        self.outcome.octahedral_shear
    }
    /// The von Mises stress √(3 J₂): S₁ − S₃ of the triaxial test with the same J₂.
    pub fn von_mises(&self) -> Pressure {
        self.outcome.von_mises
    }
    /// The largest shear stress on any plane, (S₁ − S₃) / 2.
    pub fn max_shear(&self) -> Pressure {
        self.outcome.max_shear
    }
    /// The Lode angle, 0–60°: 0° in triaxial compression (S₁ > S₂ = S₃), 30° in pure shear about
    /// the mean, 60° in triaxial extension (S₁ = S₂ > S₃). `None` where all three are equal, because
    /// J₂ is zero.
    pub fn lode(&self) -> Option<Angle> {
        self.outcome.lode
    }
    /// The deviator s = S − (I₁/3) I by rows, in the axes of the stress.
    pub fn deviator(&self) -> [[Pressure; 3]; 3] {
        self.outcome.deviator.rows().map(|row| row.map(Pressure::from_si))
    }
}

impl Explain for Invariants {
    const KIND: &'static str = "stress-invariants";
    type Inputs = InvariantsInputs;
    type Outcome = InvariantsOutcome;

    fn compute(inputs: InvariantsInputs) -> Result<Self> {
        Ok(Invariants::of(inputs))
    }
    fn inputs(&self) -> InvariantsInputs {
        self.inputs
    }
    fn outcome(&self) -> InvariantsOutcome {
        self.outcome
    }

    /// From the principal stresses, which the invariants were not computed from; and the principal
    /// stresses rebuilt from mean, J₂ and Lode angle.
    fn check(inputs: &InvariantsInputs, o: &InvariantsOutcome) -> Vec<Check> {
        let tensor = inputs.tensor();
        let [a, b, c] = tensor.eigen().values.map(|v| v * MPA);
        let largest = tensor.largest().max(1.0) * MPA;
        let mpa = |n: f64| n * MPA;
        let range = (a - c).max(largest * 1e-12);
        let (d12, d23, d13) = (a - b, b - c, a - c);
        let j2 = (d12 * d12 + d23 * d23 + d13 * d13) / 6.0;
        let j3 = (d12 + d13) * (d23 - d12) * (-d13 - d23) / 27.0;
        let mean = o.mean.in_mpa();
        let back = o.deviator.add(Tensor([o.mean.si(), o.mean.si(), o.mean.si(), 0.0, 0.0, 0.0]));
        let octahedral = ((a - mean).powi(2) + (b - mean).powi(2) + (c - mean).powi(2)).sqrt() / 3.0_f64.sqrt();
        let mut checks = vec![
            Check::compare("I₁ from the principal stresses", &[mpa(o.i1)], &[a + b + c], largest * 1e-11, "MPa"),
            Check::compare(
                "I₂ from the principal stresses",
                &[o.i2 * MPA * MPA],
                &[a * b + b * c + c * a],
                largest * largest * 1e-11,
                "MPa²",
            ),
            Check::compare(
                "I₃ from the principal stresses",
                &[o.i3 * MPA * MPA * MPA],
                &[a * b * c],
                largest.powi(3) * 1e-11,
                "MPa³",
            ),
            Check::compare(
                "J₂ from the differences of the principal stresses",
                &[o.j2 * MPA * MPA],
                &[j2],
                range * largest * 1e-11,
                "MPa²",
            ),
            Check::compare(
                "J₃ from the differences of the principal stresses",
                &[o.j3 * MPA * MPA * MPA],
                &[j3],
                range * range * largest * 1e-11,
                "MPa³",
            ),
            Check::compare(
                "deviator and mean stress put together against S",
                &back.0.map(mpa),
                &tensor.0.map(mpa),
                largest * 1e-12,
                "MPa",
            ),
            Check::compare(
                "sum of the normal components of the deviator against zero",
                &[mpa(o.deviator.0[0] + o.deviator.0[1] + o.deviator.0[2])],
                &[0.0],
                largest * 1e-12,
                "MPa",
            ),
            Check::compare(
                "shear on the octahedral plane from its traction in principal axes, and von Mises as 3/√2 of it",
                &[o.octahedral_shear.in_mpa(), o.von_mises.in_mpa()],
                &[octahedral, octahedral * 3.0 / 2.0_f64.sqrt()],
                largest * 1e-10,
                "MPa",
            ),
            Check::compare(
                "largest shear stress from the roots of the characteristic equation",
                &[o.max_shear.in_mpa()],
                &[half_range_by_invariants(tensor) * MPA],
                range * 1e-6 + largest * 1e-12,
                "MPa",
            ),
        ];
        let isotropic = if o.j2 > 0.0 { 1.0 } else { 0.0 };
        let stated = if o.lode.is_some() { 1.0 } else { 0.0 };
        checks.push(Check::compare("a Lode angle unless the deviator is zero", &[stated], &[isotropic], 0.0, ""));
        if let Some(lode) = o.lode {
            let third = std::f64::consts::TAU / 3.0;
            let radius = 2.0 * (o.j2 * MPA * MPA / 3.0).sqrt();
            checks.push(Check::compare(
                "principal stresses rebuilt from mean, J₂ and Lode angle",
                &[0.0, -third, third].map(|turn| mean + radius * (lode.si() + turn).cos()),
                &[a, b, c],
                largest * 1e-10,
                "MPa",
            ));
        }
        checks
    }

    fn explain(&self) -> Explanation {
        let o = &self.outcome;
        let (item, title) = match &self.inputs {
            InvariantsInputs::NorthEastDown { stress } => {
                (stress.item("S", "stress in north, east, down"), stress.of_name())
            }
            InvariantsInputs::InHole { stress } => (
                stress.item("S'", "stress in borehole axes"),
                stress
                    .name()
                    .map(|n| n.to_string())
                    .or_else(|| stress.attitude().map(|a| a.words()))
                    .map(|place| format!(", in the borehole axes of {place}"))
                    .unwrap_or_default(),
            ),
        };
        let (i2, i3) = (self.i2_in_mpa2(), self.i3_in_mpa3());
        let (j2, j3) = (self.j2_in_mpa2(), self.j3_in_mpa3());
        let shown = |value: f64, unit: &str| format!("{} {unit}", fixed(value, 3));
        let mut results = vec![
            Item::computed("I_1", "first invariant, sum of the normal stresses", self.i1()),
            Item::new(
                "I_2",
                "second invariant, sum of the principal minors",
                "pressure squared",
                vec![o.i2],
                shown(i2, "MPa²"),
            ),
            Item::new("I_3", "third invariant, determinant", "pressure cubed", vec![o.i3], shown(i3, "MPa³")),
            Item::new("J_2", "second invariant of the deviator", "pressure squared", vec![o.j2], shown(j2, "MPa²")),
            Item::new("J_3", "third invariant of the deviator", "pressure cubed", vec![o.j3], shown(j3, "MPa³")),
            Item::computed("σ_m", "mean stress, also the octahedral normal stress", o.mean),
            Item::computed("τ_oct", "octahedral shear stress", o.octahedral_shear),
            Item::computed("σ_vM", "von Mises stress", o.von_mises),
            Item::computed("τ_max", "largest shear stress", o.max_shear),
        ];
        if let Some(lode) = o.lode {
            let shown = format!("{}°", fixed(lode.in_deg(), 2));
            results.push(Item {
                shown,
                ..Item::computed("θ", "Lode angle, 0° in triaxial compression, 60° in extension", lode)
            });
        }
        let notes = if o.lode.is_none() {
            vec!["All three principal stresses are equal: there is no shear and no Lode angle.".to_owned()]
        } else {
            Vec::new()
        };
        let lode =
            o.lode.map_or_else(|| "no Lode angle".to_owned(), |l| format!("Lode angle {}°", fixed(l.in_deg(), 1)));
        Explanation {
            title: format!("Stress invariants{title}"),
            headline: format!("mean {}, octahedral shear {}, {lode}", o.mean, o.octahedral_shear),
            inputs: vec![item],
            results,
            method: method(),
            steps: steps(o, self.inputs.tensor()),
            notes,
            topics: vec!["stress".to_owned()],
            ..Explanation::default()
        }
    }

    fn upstream(&self) -> Vec<Card> {
        match &self.inputs {
            InvariantsInputs::NorthEastDown { stress } => {
                let mut cards = stress.upstream();
                cards.extend(stress.stated());
                cards
            }
            InvariantsInputs::InHole { stress } => {
                let mut cards = stress.upstream();
                if stress.attitude().is_some() {
                    cards.push(stress.card());
                }
                cards
            }
        }
    }
}

/// (S₁ − S₃)/2 by the trigonometric roots.
fn half_range_by_invariants(tensor: Tensor) -> f64 {
    let [a, _, c] = tensor.values_by_invariants();
    0.5 * (a - c)
}

#[cfg(test)]
mod tests {
    use crate::prelude::*;

    fn diagonal(nn: f64, ee: f64, dd: f64) -> Stress {
        let z = 0.mpa();
        Stress::from_components(Components { nn: nn.mpa(), ee: ee.mpa(), dd: dd.mpa(), ne: z, nd: z, ed: z }).unwrap()
    }

    #[test]
    fn triaxial_states_by_hand() {
        // Triaxial compression 55, 30, 30: J2 = 25²/3, Lode 0°.
        let i = diagonal(30.0, 30.0, 55.0).invariants();
        assert!((i.j2_in_mpa2() - 625.0 / 3.0).abs() < 1e-9);
        assert!((i.von_mises().in_mpa() - 25.0).abs() < 1e-12);
        assert!((i.octahedral_shear().in_mpa() - 25.0 * 2.0_f64.sqrt() / 3.0).abs() < 1e-12);
        assert_eq!(i.lode(), Some(0.deg()));
        assert_eq!(i.max_shear(), 12.5.mpa());
        // Triaxial extension 50, 50, 30, and pure shear about the mean.
        assert!((diagonal(50.0, 30.0, 50.0).invariants().lode().unwrap().in_deg() - 60.0).abs() < 1e-12);
        assert!((diagonal(50.0, 40.0, 30.0).invariants().lode().unwrap().in_deg() - 30.0).abs() < 1e-12);
        assert_eq!(i.deviator()[2][2], 55.mpa() - i.mean());
    }

    #[test]
    fn equal_stresses_have_no_lode_angle() {
        let i = diagonal(40.0, 40.0, 40.0).invariants();
        assert_eq!((i.lode(), i.octahedral_shear(), i.j2_in_mpa2()), (None, 0.mpa(), 0.0));
        let card = i.card();
        assert!(card.passed() && card.explanation.notes[0].contains("no Lode angle"));
        assert!(diagonal(0.0, 0.0, 0.0).invariants().card().passed());
    }

    #[test]
    fn the_same_in_the_axes_of_a_hole() {
        let s = Stress::from_components(Components {
            nn: 52.mpa(),
            ee: 66.mpa(),
            dd: 41.mpa(),
            ne: (-5.4).mpa(),
            nd: (-1.9).mpa(),
            ed: (-2.3).mpa(),
        })
        .unwrap();
        let hole =
            Attitude { inclination: 42.deg(), azimuth: Azimuth::from_true_north(120.deg()) }.named("KF-3 at 2950 m");
        let sh = hole.chain().unwrap().carry(&s);
        let (a, b) = (s.invariants(), sh.invariants());
        assert!((a.i3_in_mpa3() - b.i3_in_mpa3()).abs() < 1e-9 * a.i3_in_mpa3());
        assert!((a.lode().unwrap().in_deg() - b.lode().unwrap().in_deg()).abs() < 1e-10);
        let card = b.card();
        assert!(card.passed(), "{:#?}", card.checks);
        assert!(card.title().ends_with("KF-3 at 2950 m"));
        assert_eq!(b.upstream().last().unwrap().kind, "carried-stress");
    }
}
