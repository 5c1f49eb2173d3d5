//! The rotation that best carries reference directions into measured ones.

use serde::{Deserialize, Serialize};

use super::{PARALLEL, vector_words};
use crate::card::{Card, Check, Column, Explain, Explanation, Formula, Item, Method, Reference, Step, Table};
use crate::error::{Error, Result};
use crate::frames::vector::{M3, V3, add, angle_between_lines, cross, dot, multiply, norm, scale, transpose};
use crate::units::{Angle, Quantity, as_typed, fixed, require_between};

/// A direction in the reference axes, the same one as measured in other axes, and how much the pair
/// counts. Unlike lines, both have a sense: the other end is another direction.
#[derive(Clone, Copy, Debug, PartialEq, Serialize, Deserialize)]
pub struct DirectionPair {
    /// In the reference axes.
    pub reference: [f64; 3],
    /// In the axes of the measurement. The lengths of both count too, as part of the weight: give
    /// unit vectors where only directions were measured.
    pub measured: [f64; 3],
    /// The weight, above zero: 1/σ² of the direction, or 1 for all.
    pub weight: f64,
}

/// The proper rotation R that makes Σ w |m − R r|² least (Wahba's problem): the attitude of a core,
/// a tool or a block from directions known in both axes.
#[derive(Clone, Debug, PartialEq)]
pub struct BestRotation {
    pairs: Vec<DirectionPair>,
    outcome: BestRotationOutcome,
}

/// What came out: R by rows, the angle left between each measured direction and its turned
/// reference, and whether a reflection would fit better.
#[derive(Clone, Debug, PartialEq, Serialize, Deserialize)]
pub struct BestRotationOutcome {
    rotation: [[f64; 3]; 3],
    residuals: Vec<Angle>,
    favours_reflection: bool,
}

/// So many pairs at most; more are averaged first.
const MOST_PAIRS: usize = 1000;
/// So many residuals stand on a card, the largest first when there are more.
const SHOWN: usize = 20;
/// The rotation is unique when the second largest eigenvalue of K keeps this distance from the
/// largest, relative to the sum of the weights.
const UNIQUE: f64 = 1e-6;
/// A reflection fits better when det B is below minus this, relative to the cube of its size.
const REFLECTED: f64 = 1e-12;

impl BestRotation {
    /// The best proper rotation for matched directions.
    ///
    /// # Errors
    /// With fewer than two pairs or more than a thousand, a number that is not finite, a direction
    /// without length, a weight that is not above zero; when the reference or the measured
    /// directions are all within 1° of one line, or two rotations fit equally well.
    pub fn of(pairs: &[DirectionPair]) -> Result<Self> {
        BestRotation::compute(pairs.to_vec())
    }

    /// R by rows: measured = R · reference.
    pub fn matrix(&self) -> [[f64; 3]; 3] {
        self.outcome.rotation
    }
    /// The angle between each measured direction and its turned reference, 0–180°, in the order
    /// given.
    pub fn residuals(&self) -> Vec<Angle> {
        self.outcome.residuals.clone()
    }
    /// Whether a reflection would fit better than any rotation: a sign that one axis is reversed,
    /// that one of the frames is left-handed, or that lines were given as if they had a sense.
    pub fn favours_reflection(&self) -> bool {
        self.outcome.favours_reflection
    }
    /// A direction of the reference axes in the measured ones.
    pub fn turn(&self, reference: [f64; 3]) -> [f64; 3] {
        self.outcome.rotation.map(|row| dot(row, reference))
    }
}

/// B = Σ w m rᵀ.
fn attitude_profile(pairs: &[DirectionPair]) -> M3 {
    let mut b = [[0.0; 3]; 3];
    for pair in pairs {
        for (row, m) in b.iter_mut().zip(pair.measured) {
            *row = add(*row, scale(pair.reference, pair.weight * m));
        }
    }
    b
}

/// Σ w |m| |r|, the size of everything in B.
fn total(pairs: &[DirectionPair]) -> f64 {
    pairs.iter().map(|p| p.weight * norm(p.measured) * norm(p.reference)).sum()
}

fn det(m: &M3) -> f64 {
    dot(cross(m[0], m[1]), m[2])
}

fn angle_between(a: V3, b: V3) -> f64 {
    norm(cross(a, b)).atan2(dot(a, b))
}

fn accept(pairs: &[DirectionPair]) -> Result<()> {
    if pairs.len() < 2 || pairs.len() > MOST_PAIRS {
        return Err(Error::out_of_range(
            "number of matched directions",
            pairs.len().to_string(),
            format!("between 2 and {MOST_PAIRS} (average repeated readings first)"),
        ));
    }
    for (pair, n) in pairs.iter().zip(1..) {
        for (what, v) in [("reference", pair.reference), ("measured", pair.measured)] {
            let length = norm(v);
            if !(length.is_finite() && length > 0.0) {
                return Err(Error::out_of_range(
                    format!("length of the {what} direction {n}"),
                    length.to_string(),
                    "above zero and finite",
                ));
            }
        }
        require_between(&format!("weight of pair {n}"), pair.weight, f64::MIN_POSITIVE, f64::MAX)?;
    }
    let one_line = |of: fn(&DirectionPair) -> V3| {
        let first = pairs.first().map(of).unwrap_or_default();
        pairs.iter().all(|p| angle_between_lines(first, of(p)) < PARALLEL.to_radians())
    };
    for (what, parallel) in [("reference", one_line(|p| p.reference)), ("measured", one_line(|p| p.measured))] {
        if parallel {
            return Err(Error::not_physical(
                format!("The best rotation from {} matched directions", pairs.len()),
                format!(
                    "the {what} directions all lie within {PARALLEL}° of one line, so the turn about it is not known; add a direction across it."
                ),
            ));
        }
    }
    Ok(())
}

/// Davenport's q-method: the unit quaternion of the best rotation is the eigenvector of the largest
/// eigenvalue of K. Returns the rotation and the distance to the next eigenvalue.
fn by_quaternion(b: &M3) -> Option<(M3, f64)> {
    let trace = b[0][0] + b[1][1] + b[2][2];
    let z = [b[1][2] - b[2][1], b[2][0] - b[0][2], b[0][1] - b[1][0]];
    let k = nalgebra::Matrix4::from_fn(|i, j| match (i, j) {
        (3, 3) => trace,
        (3, n) | (n, 3) => z[n],
        (i, j) => b[i][j] + b[j][i] - if i == j { trace } else { 0.0 },
    });
    let e = nalgebra::SymmetricEigen::try_new(k, f64::EPSILON, 1000)?;
    let mut order = [0, 1, 2, 3];
    order.sort_by(|&i, &j| e.eigenvalues[j].total_cmp(&e.eigenvalues[i]));
    let q = e.eigenvectors.column(order[0]).normalize();
    let (v, w) = ([q[0], q[1], q[2]], q[3]);
    let skew = [[0.0, -v[2], v[1]], [v[2], 0.0, -v[0]], [-v[1], v[0], 0.0]];
    let mut r = [[0.0; 3]; 3];
    for (i, row) in r.iter_mut().enumerate() {
        for (j, cell) in row.iter_mut().enumerate() {
            let same = if i == j { w * w - dot(v, v) } else { 0.0 };
            *cell = same + 2.0 * v[i] * v[j] - 2.0 * w * skew[i][j];
        }
    }
    Some((r, e.eigenvalues[order[0]] - e.eigenvalues[order[1]]))
}

impl Explain for BestRotation {
    const KIND: &'static str = "best-rotation";
    type Inputs = Vec<DirectionPair>;
    type Outcome = BestRotationOutcome;

    fn compute(inputs: Vec<DirectionPair>) -> Result<Self> {
        accept(&inputs)?;
        let b = attitude_profile(&inputs);
        let found = by_quaternion(&b).filter(|(_, gap)| *gap > UNIQUE * total(&inputs));
        let Some((rotation, _)) = found else {
            return Err(Error::NoSolution {
                what: "single best rotation".to_owned(),
                tried: format!(
                    "for these {} matched directions, because two or more fit equally well; check that the pairs belong together and that no direction is reversed",
                    inputs.len()
                ),
            });
        };
        let residuals = inputs
            .iter()
            .map(|p| Angle::from_si(angle_between(p.measured, rotation.map(|row| dot(row, p.reference)))))
            .collect();
        let favours_reflection = det(&b) < -REFLECTED * total(&inputs).powi(3);
        Ok(BestRotation { pairs: inputs, outcome: BestRotationOutcome { rotation, residuals, favours_reflection } })
    }
    fn inputs(&self) -> Vec<DirectionPair> {
        self.pairs.clone()
    }
    fn outcome(&self) -> BestRotationOutcome {
        self.outcome.clone()
    }

    /// The conditions that only the best rotation meets: R Rᵀ = I, its rows right-handed, Rᵀ B
    /// symmetric (no small turn fits better), and the sum of the two smallest eigenvalues of Rᵀ B
    /// above zero (no large one does). Residuals again by half chords.
    fn check(inputs: &Vec<DirectionPair>, outcome: &BestRotationOutcome) -> Vec<Check> {
        let r = outcome.rotation;
        let size = total(inputs);
        let b = attitude_profile(inputs);
        let gram = multiply(&r, &transpose(&r));
        let s = multiply(&transpose(&r), &b);
        let unit = [[1.0, 0.0, 0.0], [0.0, 1.0, 0.0], [0.0, 0.0, 1.0]];
        let half_chord = |p: &DirectionPair| {
            let turned = r.map(|row| dot(row, p.reference));
            let chord = add(scale(p.measured, 1.0 / norm(p.measured)), scale(turned, -1.0 / norm(turned)));
            // Above 90° from the other end, so that the arc sine keeps its figures.
            let sum = add(scale(p.measured, 1.0 / norm(p.measured)), scale(turned, 1.0 / norm(turned)));
            let (c, o) = (0.5 * norm(chord), 0.5 * norm(sum));
            let angle = if c < o { 2.0 * c.min(1.0).asin() } else { std::f64::consts::PI - 2.0 * o.min(1.0).asin() };
            angle.to_degrees()
        };
        let least = least_pair_of_eigenvalues(&s, size);
        vec![
            Check::compare("R Rᵀ against the unit matrix", gram.as_flattened(), unit.as_flattened(), 1e-12, ""),
            Check::compare(
                "third row of R against the cross product of the first two",
                &r[2],
                &cross(r[0], r[1]),
                1e-12,
                "",
            ),
            Check::compare(
                "Rᵀ B against its transpose, relative to the sum of the weights",
                &[s[0][1] / size, s[1][2] / size, s[0][2] / size],
                &[s[1][0] / size, s[2][1] / size, s[2][0] / size],
                1e-12,
                "",
            ),
            Check::holds("sum of the two smallest eigenvalues of Rᵀ B below zero", -least, 0.0, ""),
            Check::compare(
                "residual angles by half chords",
                &outcome.residuals.iter().map(|a| a.in_deg()).collect::<Vec<_>>(),
                &inputs.iter().map(half_chord).collect::<Vec<_>>(),
                1e-7,
                "°",
            ),
            Check::compare(
                "whether a reflection fits better (1), from the sign of the determinant of Rᵀ B",
                &[f64::from(u8::from(outcome.favours_reflection))],
                &[f64::from(u8::from(det(&s) < -REFLECTED * size.powi(3)))],
                0.0,
                "",
            ),
        ]
    }

    fn explain(&self) -> Explanation {
        let outcome = &self.outcome;
        let worst = outcome.residuals.iter().fold(0.0_f64, |m, a| m.max(a.si()));
        let mut notes = Vec::new();
        if outcome.favours_reflection {
            notes.push("WARNING: a reflection fits these directions better than any rotation. Check the handedness of both frames and the sense of every direction; lines (without sense) must not be fitted as directions.".to_owned());
        }
        let mut order: Vec<usize> = (0..self.pairs.len()).collect();
        if order.len() > SHOWN {
            order.sort_by(|&i, &j| outcome.residuals[j].si().total_cmp(&outcome.residuals[i].si()));
            order.truncate(SHOWN);
        }
        let row = |i: usize| {
            let p = &self.pairs[i];
            vec![
                (i + 1).to_string(),
                vector_words(p.reference),
                vector_words(p.measured),
                as_typed(p.weight),
                fixed(outcome.residuals[i].in_deg(), 2),
            ]
        };
        let all = if self.pairs.len() > SHOWN { ", the largest residuals" } else { "" };
        let list = |of: fn(&DirectionPair) -> V3| self.pairs.iter().flat_map(of).collect::<Vec<f64>>();
        let count = format!("{} directions", self.pairs.len());
        Explanation {
            title: format!("Best rotation from {} matched directions", self.pairs.len()),
            headline: format!("largest residual {}°", fixed(worst.to_degrees(), 2)),
            inputs: vec![
                Item::new("r", "directions in the reference axes", "directions", list(|p| p.reference), count.clone()),
                Item::new("m", "the same directions as measured", "directions", list(|p| p.measured), count),
                Item::new(
                    "w",
                    "weights",
                    "weights",
                    self.pairs.iter().map(|p| p.weight).collect(),
                    format!("{} weights", self.pairs.len()),
                )
                .chosen(),
            ],
            results: vec![
                Item::new(
                    "R",
                    "turn from the reference axes to those of the measurement",
                    "turn",
                    outcome.rotation.as_flattened().to_vec(),
                    "3 × 3 matrix",
                ),
                Item::computed("ε", "largest residual angle", Angle::from_si(worst)),
            ],
            method: Method {
                words: "The proper rotation with the least weighted sum of squared differences. Its unit quaternion (q, q_4) is the eigenvector of the largest eigenvalue of the 4 × 4 matrix K. By hand: put R into the conditions of the checks.".to_owned(),
                formulas: vec![
                    Formula::new("sum_i w_i abs(m_i - R r_i)^2 = min", "Σ w_i |m_i − R r_i|² = min"),
                    Formula::new("B = sum_i w_i m_i r_i^upright(T)", "B = Σ w_i m_i r_iᵀ"),
                    Formula::new(
                        "K = mat(B + B^upright(T) - b I, z; z^upright(T), b), quad b = upright(\"tr\") B, quad z = sum_i w_i m_i times r_i",
                        "K = [B + Bᵀ − b I, z; zᵀ, b], b = tr B, z = Σ w_i m_i × r_i",
                    ),
                    Formula::new(
                        "R = (q_4^2 - q dot q) I + 2 q q^upright(T) - 2 q_4 [q times]",
                        "R = (q_4² − q · q) I + 2 q qᵀ − 2 q_4 [q ×]",
                    ),
                ],
                references: vec![
                    Reference::new("Wahba, G. (1965) A least squares estimate of satellite attitude, SIAM Review 7, 409 (problem 65-1; cited from memory)"),
                    Reference::new("Davenport, P.B. (1968) A vector approach to the algebra of rotations with applications, NASA TN D-4696 (cited from memory)"),
                ],
                assumptions: vec!["The errors of the pairs are independent; only their sizes differ, as the weights say.".to_owned()],
                ..Method::default()
            },
            steps: vec![
                Step::matrix("B", &attitude_profile(&self.pairs), 6, "", "rows: measured axes; columns: reference axes"),
                Step::matrix("R", &outcome.rotation, 6, "", "rows: the measured axes in the reference axes"),
                Step::Table {
                    table: Table {
                        caption: format!("Matched directions and the angle left after the turn{all}"),
                        columns: vec![
                            Column::text("pair"),
                            Column::text("reference"),
                            Column::text("measured"),
                            Column::number("weight", ""),
                            Column::number("residual", "°"),
                        ],
                        rows: order.into_iter().map(row).collect(),
                    },
                },
            ],
            notes,
            topics: vec!["rotation".to_owned()],
            ..Explanation::default()
        }
    }

    fn upstream(&self) -> Vec<Card> {
        Vec::new()
    }
}

/// The sum of the two smallest eigenvalues of the symmetric part of a matrix, relative to a size.
fn least_pair_of_eigenvalues(s: &M3, size: f64) -> f64 {
    let m = nalgebra::Matrix3::from_fn(|i, j| 0.5 * (s[i][j] + s[j][i]) / size);
    let Some(e) = nalgebra::SymmetricEigen::try_new(m, f64::EPSILON, 1000) else { return f64::NAN };
    e.eigenvalues.sum() - e.eigenvalues.max()
}

#[cfg(test)]
mod tests {
    use super::*;

    fn pair(reference: V3, measured: V3) -> DirectionPair {
        DirectionPair { reference, measured, weight: 1.0 }
    }
    const X: V3 = [1.0, 0.0, 0.0];
    const Y: V3 = [0.0, 1.0, 0.0];
    const Z: V3 = [0.0, 0.0, 1.0];

    #[test]
    fn an_exact_turn_comes_back_and_carries_other_directions() {
        // A quarter turn about the third axis: x becomes y, y becomes −x.
        let best = BestRotation::of(&[pair(X, Y), pair(Y, scale(X, -1.0))]).unwrap();
        assert!(best.turn(Z).iter().zip(Z).all(|(a, b)| (a - b).abs() < 1e-15));
        assert!(best.residuals().iter().all(|r| r.in_deg() < 1e-12));
        assert!(!best.favours_reflection());
        assert!(best.card().passed(), "{:#?}", best.card().checks);
    }

    #[test]
    fn a_heavier_pair_is_followed_closer() {
        let off = [5.0_f64.to_radians().cos(), 5.0_f64.to_radians().sin(), 0.0];
        let pairs = [pair(X, off), pair(Y, Y), DirectionPair { weight: 9.0, ..pair(Y, Y) }];
        let r: Vec<f64> = BestRotation::of(&pairs).unwrap().residuals().iter().map(|a| a.in_deg()).collect();
        // Weights 1 and 10 of turns by 5° and 0°.
        assert!((r[1] - 5.0 / 11.0).abs() < 1e-2 && (r[0] - 50.0 / 11.0).abs() < 1e-2, "{r:?}");
    }

    #[test]
    fn what_cannot_be_fitted_is_refused_with_its_reason() {
        let said = |pairs: &[DirectionPair]| BestRotation::of(pairs).unwrap_err().to_string();
        assert!(said(&[pair(X, Y)]).contains("between 2 and 1000"));
        assert!(said(&[pair(X, Y), pair(scale(X, -2.0), Z)]).contains("reference directions all lie within 1°"));
        assert!(said(&[pair(X, Y), pair(Y, [0.0; 3])]).contains("length of the measured direction 2 is 0"));
        assert!(said(&[pair(X, [f64::NAN, 0.0, 0.0]), pair(Y, Y)]).contains("NaN"));
        let weightless = DirectionPair { weight: 0.0, ..pair(X, X) };
        assert!(said(&[weightless, pair(Y, Y)]).starts_with("weight of pair 1 is 0"));
        // All three axes reversed: every half turn fits as badly as any other.
        let reversed = [X, Y, Z].map(|v| pair(v, scale(v, -1.0)));
        assert!(said(&reversed).contains("two or more fit equally well"));
    }

    #[test]
    fn a_reversed_axis_is_reported_as_a_reflection() {
        let pairs = [
            pair(X, X),
            DirectionPair { weight: 2.0, ..pair(Y, Y) },
            DirectionPair { weight: 0.5, ..pair(Z, scale(Z, -1.0)) },
        ];
        let best = BestRotation::of(&pairs).unwrap();
        assert!(best.favours_reflection());
        assert!(best.card().explanation.notes[0].contains("reflection fits these directions better"));
        assert!(best.card().passed(), "{:#?}", best.card().checks);
    }
}
