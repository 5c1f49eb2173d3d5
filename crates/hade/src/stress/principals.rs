//! Principal stresses and their axes.

use serde::{Deserialize, Serialize};

use super::Stress;
use super::tensor::Tensor;
use crate::card::{
    Card, Check, Column, Explain, Explanation, Figure, Formula, Item, Mark, Method, Projection, Reference, Role, Step,
    Table,
};
use crate::error::Result;
use crate::frames::net::Net;
use crate::frames::vector::{M3, V3, dot, scale};
use crate::frames::{Geographic, Line};
use crate::units::{Pressure, Quantity, fixed};

/// Principal stresses S1 ≥ S2 ≥ S3 with their axes, each by its lower end (lines have no sign).
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Principals {
    stress: Stress<Geographic>,
    outcome: PrincipalOutcome,
}

/// What came out: magnitudes in Pa, and axes by rows in north, east, down. An axis whose magnitude
/// equals another's is not defined.
#[derive(Clone, Copy, Debug, PartialEq, Serialize, Deserialize)]
pub struct PrincipalOutcome {
    magnitudes: [Pressure; 3],
    axes: [Option<[f64; 3]>; 3],
}

/// Magnitudes closer than this, relative to the sum of all three sizes, have no axes of their own.
const EQUAL: f64 = 1e-9;

fn solve(tensor: Tensor) -> PrincipalOutcome {
    let e = tensor.eigen();
    let sizes: f64 = e.values.iter().map(|v| v.abs()).sum();
    let equal = |i: usize, j: usize| (e.values[i] - e.values[j]).abs() <= EQUAL * sizes;
    let defined = [!equal(0, 1), !equal(0, 1) && !equal(1, 2), !equal(1, 2)];
    let axes = lower_hemisphere(e.axes);
    PrincipalOutcome {
        magnitudes: e.values.map(Pressure::from_si),
        axes: [0, 1, 2].map(|i| defined[i].then_some(axes[i])),
    }
}

/// Each axis by its lower end.
fn lower_hemisphere(axes: M3) -> M3 {
    axes.map(|v| if v[2] < 0.0 || (v[2] == 0.0 && v[0] < 0.0) { scale(v, -1.0) } else { v })
}

impl Stress<Geographic> {
    /// The principal stresses and their axes.
    pub fn principals(&self) -> Principals {
        Principals { stress: *self, outcome: solve(self.tensor()) }
    }
}

impl Principals {
    /// The magnitudes, S1 ≥ S2 ≥ S3.
    pub fn magnitudes(&self) -> [Pressure; 3] {
        self.outcome.magnitudes
    }

    /// The axes as lines, lower hemisphere. `None` where the magnitude equals another's: then any
    /// direction in their common plane is one.
    pub fn lines(&self) -> [Option<Line>; 3] {
        self.outcome.axes.map(|axis| axis.map(Line::along))
    }

    /// The axes as vectors in north, east, down.
    pub(super) fn axes(&self) -> [Option<V3>; 3] {
        self.outcome.axes
    }

    /// The axes on a net; with two equal magnitudes the one axis and the plane across it; none where
    /// every direction is an axis.
    fn figure(&self) -> Option<Figure> {
        let axes = self.axes();
        let mut net = Net::new(Projection::EqualArea);
        let mut said: Vec<String> = (1..)
            .zip(self.outcome.magnitudes)
            .zip(axes)
            .map(|((n, magnitude), axis)| format!("S_{n} {} MPa, {}", fixed(magnitude.in_mpa(), 2), axes_words(axis)))
            .collect();
        let mut caption = "The principal axes by their lower ends.".to_owned();
        match axes {
            [None, None, None] => return None,
            [Some(axis), None, None] | [None, None, Some(axis)] => {
                let pair = if axes[0].is_some() { "S_2 = S_3" } else { "S_1 = S_2" };
                net = net.plane(pair, Role::Quiet, axis);
                caption =
                    format!("The defined principal axis by its lower end; {pair} in every direction of the plane.");
                said.push(format!("{pair} in the plane across the defined axis"));
            }
            _ => {}
        }
        Some(with_axes(net, axes).figure(caption, format!("{}.", said.join("; "))))
    }
}

/// The defined axes on a net, each with its own mark and name.
pub(super) fn with_axes(net: Net, axes: [Option<V3>; 3]) -> Net {
    let looks = [(Role::First, Mark::Dot), (Role::Second, Mark::Square), (Role::Third, Mark::Triangle)];
    (1..).zip(axes).zip(looks).fold(net, |net, ((n, axis), (role, mark))| match axis {
        Some(axis) => net.line(&format!("S_{n}"), role, mark, axis),
        None => net,
    })
}

/// "trend 035.0°, plunge 12.0°", "vertical", "in any direction".
pub(super) fn axes_words(axis: Option<V3>) -> String {
    match axis.map(Line::along) {
        None => "in any direction".to_owned(),
        Some(line) if line.plunge.in_deg() > 89.95 => "vertical".to_owned(),
        Some(line) => line.words(),
    }
}

impl Explain for Principals {
    const KIND: &'static str = "principal-stresses";
    type Inputs = Stress<Geographic>;
    type Outcome = PrincipalOutcome;

    fn compute(inputs: Stress<Geographic>) -> Result<Self> {
        Ok(inputs.principals())
    }
    fn inputs(&self) -> Stress<Geographic> {
        self.stress
    }
    fn outcome(&self) -> PrincipalOutcome {
        self.outcome
    }

    /// Each axis carries its own stress and no shear; the invariants come out as of the tensor.
    fn check(inputs: &Stress<Geographic>, outcome: &PrincipalOutcome) -> Vec<Check> {
        let s = inputs.tensor();
        let largest = s.largest().max(1.0) * 1e-6;
        let mut got = Vec::new();
        let mut expected = Vec::new();
        let mut lengths = Vec::new();
        for (axis, magnitude) in outcome.axes.iter().zip(outcome.magnitudes) {
            if let Some(v) = axis {
                got.extend(s.times(*v).map(|c| c * 1e-6));
                expected.extend(scale(*v, magnitude.in_mpa()));
                lengths.push(dot(*v, *v));
            }
        }
        let [a, b, c] = outcome.magnitudes.map(Pressure::in_mpa);
        let rows = s.scale(1e-6).rows();
        let minor = |i: usize, j: usize| rows[i][i] * rows[j][j] - rows[i][j] * rows[j][i];
        let det = dot(rows[0], crate::frames::vector::cross(rows[1], rows[2]));
        let mut checks = vec![
            Check::compare(
                "sum of the magnitudes against the trace of S",
                &[a + b + c],
                &[rows[0][0] + rows[1][1] + rows[2][2]],
                largest * 1e-11,
                "MPa",
            ),
            Check::compare(
                "sum of their products two by two against the second invariant of S",
                &[a * b + b * c + c * a],
                &[minor(0, 1) + minor(1, 2) + minor(0, 2)],
                largest * largest * 1e-11,
                "MPa²",
            ),
            Check::compare(
                "their product against the determinant of S",
                &[a * b * c],
                &[det],
                largest * largest * largest * 1e-11,
                "MPa³",
            ),
        ];
        let apart = EQUAL * outcome.magnitudes.iter().map(|m| m.in_mpa().abs()).sum::<f64>();
        let (upper, lower) = (a - b > apart, b - c > apart);
        let due = [upper, upper && lower, lower].map(|there| if there { 1.0 } else { 0.0 });
        checks.push(Check::compare(
            "an axis where its magnitude is its own, none where two are equal",
            &outcome.axes.map(|axis| if axis.is_some() { 1.0 } else { 0.0 }),
            &due,
            0.0,
            "",
        ));
        checks.push(Check::holds("magnitudes in falling order", (b - a).max(c - b), 0.0, "MPa"));
        if !got.is_empty() {
            checks.push(Check::compare(
                "traction across each axis against its stress along the axis (no shear)",
                &got,
                &expected,
                largest * 1e-9,
                "MPa",
            ));
            checks.push(Check::compare("length of each axis", &lengths, &vec![1.0; lengths.len()], 1e-12, ""));
        }
        checks
    }

    fn explain(&self) -> Explanation {
        let lines = self.lines();
        let mut results = Vec::new();
        let mut rows = Vec::new();
        for (i, (magnitude, line)) in self.outcome.magnitudes.iter().zip(lines).enumerate() {
            let n = i + 1;
            results.push(Item::computed(&format!("S_{n}"), format!("principal stress {n}"), *magnitude));
            let (trend, plunge) = match line {
                Some(line) => {
                    let angle = line.trend.true_north().unwrap_or_default();
                    results.push(crate::frames::bearing_item(&format!("T_{n}"), &format!("trend of S_{n}"), angle));
                    results.push(Item::computed(&format!("P_{n}"), format!("plunge of S_{n}"), line.plunge));
                    // A vertical line has no trend of its own.
                    let vertical = line.plunge.in_deg() > 89.95;
                    let trend = if vertical { "–".to_owned() } else { crate::frames::three_figures(angle) };
                    (trend, fixed(line.plunge.in_deg(), 1))
                }
                None => ("any".to_owned(), "any".to_owned()),
            };
            rows.push(vec![format!("S_{n}"), fixed(magnitude.in_mpa(), 3), trend, plunge]);
        }
        let mut notes = Vec::new();
        if lines.iter().all(Option::is_none) {
            notes.push("All three magnitudes are equal: every direction is a principal direction.".to_owned());
        } else if lines.iter().any(Option::is_none) {
            notes.push(
                "Two magnitudes are equal: any direction in the plane across the third axis is a principal direction."
                    .to_owned(),
            );
        }
        let [a, b, c] = self.outcome.magnitudes.map(|m| fixed(m.in_mpa(), 2));
        Explanation {
            title: format!("Principal stresses{}", self.stress.of_name()),
            headline: format!("S_1 {a}, S_2 {b}, S_3 {c} MPa"),
            inputs: vec![self.stress.item("S", "stress in north, east, down")],
            results,
            method: Method {
                words: "Eigenvalues and eigenvectors of the tensor by cyclic Jacobi turns. By hand: put each value into the characteristic equation, and each axis into S v = S_k v.".to_owned(),
                formulas: vec![
                    Formula::new("det(S - S_k I) = 0", "det(S − S_k I) = 0"),
                    Formula::new("S v_k = S_k v_k", "S v_k = S_k v_k"),
                ],
                references: vec![Reference::new(
                    "Golub, G.H. and Van Loan, C.F. (2013) Matrix Computations, 4th ed., Johns Hopkins, §8.5 (Jacobi methods)",
                )],
                ..Method::default()
            },
            steps: vec![
                Step::matrix("S", &self.stress.rows_in_mpa(), 4, "MPa", "north, east, down"),
                Step::Table {
                    table: Table {
                        caption: "Principal stresses; axes by their lower end, trend from true north".to_owned(),
                        columns: vec![
                            Column::text("axis"),
                            Column::number("magnitude", "MPa"),
                            Column::number("trend", "°"),
                            Column::number("plunge", "°"),
                        ],
                        rows,
                    },
                },
            ],
            notes,
            figures: self.figure().into_iter().collect(),
            topics: vec!["stress".to_owned()],
        }
    }

    fn upstream(&self) -> Vec<Card> {
        let mut cards = self.stress.upstream();
        cards.extend(self.stress.stated());
        cards
    }
}
