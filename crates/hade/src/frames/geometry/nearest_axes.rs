//! The nearest orthonormal set to three measured lines.

use serde::{Deserialize, Serialize};

use super::{line_along, line_inputs, line_results};
use crate::card::{Card, Check, Column, Explain, Explanation, Formula, Item, Method, Reference, Step, Table};
use crate::error::{Error, Result};
use crate::frames::vector::{M3, V3, add, angle_between_lines, cross, dot, norm, scale};
use crate::frames::{Line, three_figures};
use crate::units::{Angle, Quantity, fixed};

/// Three axes as they were measured, such as those of a stress or a strain: lines that should stand
/// at right angles, and do so but for errors of measurement.
#[derive(Clone, Copy, Debug, PartialEq, Serialize, Deserialize)]
pub struct MeasuredAxes {
    /// The three lines.
    pub lines: [Line; 3],
}

/// Three lines at right angles, nearest to measured ones: the sum of the squared differences of
/// their unit vectors is the least there is. The fit treats the three lines alike, in any order and
/// by either end.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct FittedAxes {
    measured: MeasuredAxes,
    axes: M3,
    misfits: [Angle; 3],
}

/// What came out: axes by rows in north, east, down, right-handed; the angle from each measured
/// line to its axis.
#[derive(Clone, Copy, Debug, PartialEq, Serialize, Deserialize)]
pub struct FittedAxesOutcome {
    axes: [[f64; 3]; 3],
    misfits: [Angle; 3],
}

/// Three measured axes made orthonormal, right-handed, with the largest angle from a measured line
/// to its fitted axis in radians.
#[derive(Clone, Copy, Debug)]
pub(crate) struct Fitted {
    pub axes: M3,
    pub misfit: f64,
}

/// More than this from a right angle between two measured axes is refused, in degrees.
const MOST_SKEW: f64 = 15.0;

/// The orthogonal polar factor of the three lines (rows), which no order of the lines changes.
/// Lines have no sign: of a left-handed set one line is turned round.
/// Newton iteration for the polar factor: Higham (1986), SIAM J. Sci. Stat. Comput. 7, 1160–1174.
pub(crate) fn nearest_orthonormal(lines: &M3) -> Result<Fitted> {
    let angles = between(lines);
    if angles.iter().any(|a| 90.0 - a > MOST_SKEW) {
        let words: Vec<String> = angles.iter().map(|a| format!("{}°", fixed(*a, 1))).collect();
        return Err(Error::not_physical(
            format!("The three measured axes stand at {} to each other (1–2, 1–3, 2–3)", words.join(", ")),
            format!("they must be within {MOST_SKEW}° of right angles; check trends and plunges."),
        ));
    }
    let mut x = *lines;
    if is_left_handed(lines) {
        x[2] = scale(x[2], -1.0);
    }
    for _ in 0..60 {
        // The inverse transpose of a matrix by rows has the cross products of its rows over det.
        let det = dot(cross(x[0], x[1]), x[2]);
        let inverse_transpose = [
            scale(cross(x[1], x[2]), 1.0 / det),
            scale(cross(x[2], x[0]), 1.0 / det),
            scale(cross(x[0], x[1]), 1.0 / det),
        ];
        let mut change = 0.0_f64;
        for (row, other) in x.iter_mut().zip(inverse_transpose) {
            for (cell, o) in row.iter_mut().zip(other) {
                let new = 0.5 * (*cell + o);
                change = change.max((new - *cell).abs());
                *cell = new;
            }
        }
        if change < 1e-16 {
            break;
        }
    }
    let misfit = lines.iter().zip(&x).map(|(line, axis)| angle_between_lines(*line, *axis)).fold(0.0, f64::max);
    Ok(Fitted { axes: x, misfit })
}

/// The same by a singular value decomposition (nalgebra), as the second route of the check.
pub(crate) fn by_singular_values(lines: &M3) -> Option<M3> {
    let m = nalgebra::Matrix3::from_fn(|i, j| lines[i][j]);
    let svd = m.svd(true, true);
    let q = svd.u? * svd.v_t?;
    let mut rows = [[0.0; 3]; 3];
    for (i, row) in rows.iter_mut().enumerate() {
        for (j, cell) in row.iter_mut().enumerate() {
            *cell = q[(i, j)];
        }
    }
    if is_left_handed(&rows) {
        rows[2] = scale(rows[2], -1.0);
    }
    Some(rows)
}

fn is_left_handed(rows: &M3) -> bool {
    dot(cross(rows[0], rows[1]), rows[2]) < 0.0
}

/// "035.0°/12.0°".
fn short(line: Line) -> String {
    let trend = line.trend.true_north().unwrap_or(line.trend.measured());
    format!("{}°/{:.1}", three_figures(trend), line.plunge)
}

/// The angles between lines 1–2, 1–3, 2–3 in degrees.
fn between(lines: &M3) -> [f64; 3] {
    [(0, 1), (0, 2), (1, 2)].map(|(i, j)| angle_between_lines(lines[i], lines[j]).to_degrees())
}

impl MeasuredAxes {
    /// The nearest three lines at right angles.
    ///
    /// # Errors
    /// When two lines are more than 15° from a right angle, a plunge is outside ±90°, or a trend has
    /// no true north.
    pub fn fitted(self) -> Result<FittedAxes> {
        FittedAxes::compute(self)
    }

    fn vectors(self) -> Result<M3> {
        let [a, b, c] = self.lines.map(Line::vector);
        Ok([a?, b?, c?])
    }
}

impl FittedAxes {
    /// The fitted lines, each by its lower end.
    pub fn lines(&self) -> [Line; 3] {
        self.axes.map(line_along)
    }
    /// The angle from each measured line to its fitted one.
    pub fn misfits(&self) -> [Angle; 3] {
        self.misfits
    }
    /// The largest of the three.
    pub fn misfit(&self) -> Angle {
        self.misfits.into_iter().fold(Angle::default(), |most, m| if m > most { m } else { most })
    }
    /// The axes as unit vectors by rows in north, east, down; right-handed.
    pub fn matrix(&self) -> [[f64; 3]; 3] {
        self.axes
    }
}

impl Explain for FittedAxes {
    const KIND: &'static str = "nearest-orthonormal-axes";
    type Inputs = MeasuredAxes;
    type Outcome = FittedAxesOutcome;

    fn compute(inputs: MeasuredAxes) -> Result<Self> {
        let lines = inputs.vectors()?;
        let axes = nearest_orthonormal(&lines)?.axes;
        let misfits = [0, 1, 2].map(|i| Angle::from_si(angle_between_lines(lines[i], axes[i])));
        Ok(FittedAxes { measured: inputs, axes, misfits })
    }
    fn inputs(&self) -> MeasuredAxes {
        self.measured
    }
    fn outcome(&self) -> FittedAxesOutcome {
        FittedAxesOutcome { axes: self.axes, misfits: self.misfits }
    }

    /// By a singular value decomposition, and the misfits from the chord between line and axis.
    fn check(inputs: &MeasuredAxes, outcome: &FittedAxesOutcome) -> Vec<Check> {
        let Ok(lines) = inputs.vectors() else { return Vec::new() };
        let Some(other) = by_singular_values(&lines) else { return Vec::new() };
        let chord = |line: V3, axis: V3| {
            let sign = if dot(line, axis) < 0.0 { 1.0 } else { -1.0 };
            (2.0 * (0.5 * norm(add(line, scale(axis, sign)))).asin()).to_degrees()
        };
        vec![
            Check::compare(
                "axes by a singular value decomposition",
                outcome.axes.as_flattened(),
                other.as_flattened(),
                1e-10,
                "",
            ),
            Check::compare(
                "misfits from the chords between lines and axes",
                &outcome.misfits.map(Angle::in_deg),
                &[0, 1, 2].map(|i| chord(lines[i], other[i])),
                1e-8,
                "°",
            ),
        ]
    }

    fn explain(&self) -> Explanation {
        let measured = self.measured.lines;
        let lines = self.lines();
        let vectors = self.measured.vectors().unwrap_or_default();
        let angles = between(&vectors).map(|a| fixed(a, 2));
        let mut inputs = Vec::new();
        let mut results = Vec::new();
        let mut rows = Vec::new();
        for (i, n) in (1..=3).enumerate() {
            let trend = |line: Line| line.trend.true_north().map_or_else(|_| "–".to_owned(), three_figures);
            inputs.extend(line_inputs(measured[i], &format!("_{n}"), &format!("the measured axis {n}")));
            results.extend(line_results(lines[i], &format!("'_{n}"), &format!("the fitted axis {n}")));
            rows.push(vec![
                n.to_string(),
                trend(measured[i]),
                fixed(measured[i].plunge.in_deg(), 1),
                trend(lines[i]),
                fixed(lines[i].plunge.in_deg(), 1),
                fixed(self.misfits[i].in_deg(), 2),
            ]);
        }
        let misfit = format!("{}°", fixed(self.misfit().in_deg(), 2));
        let name = "largest angle from a measured line to its fitted axis";
        results.push(Item::new("m", name, Angle::KIND, vec![self.misfit().si()], misfit.clone()));
        let mut notes = Vec::new();
        if is_left_handed(&vectors) {
            notes.push("In the order given the lines make a left-handed set. Lines have no sign, so this says nothing about the measurement; the third was turned round.".to_owned());
        }
        Explanation {
            title: format!("Nearest axes at right angles to {}", measured.map(short).join(", ")),
            headline: format!("fitted within {misfit} of the measured lines"),
            inputs,
            results,
            method: Method {
                words: "The three measured unit vectors are the rows of L. Its orthogonal polar factor is the set at right angles that is nearest to them all, and treats them alike. By hand: repeat the mean of L and its inverse transpose until it stands still.".to_owned(),
                formulas: vec![
                    Formula::new("X_0 = L, quad X_(k+1) = 1/2 (X_k + X_k^upright(-T))", "X_0 = L, X_(k+1) = ½ (X_k + X_k⁻ᵀ)"),
                    Formula::new("X_k arrow.r V, quad V V^upright(T) = I", "X_k → V, V Vᵀ = I"),
                ],
                references: vec![
                    Reference::new("Higham, N.J. (1986) Computing the polar decomposition, SIAM J. Sci. Stat. Comput. 7, 1160–1174"),
                    Reference::new("Fan, K. and Hoffman, A.J. (1955) Some metric inequalities in the space of matrices, Proc. Amer. Math. Soc. 6, 111–116 (the polar factor is the nearest; cited from memory)"),
                ],
                assumptions: vec!["The three lines were measured equally well.".to_owned()],
                ..Method::default()
            },
            steps: vec![
                Step::matrix("L", &vectors, 6, "", "rows: the measured axes 1, 2, 3 in north, east, down"),
                Step::worked(format!("angles between the measured lines: 1–2 {}°, 1–3 {}°, 2–3 {}°", angles[0], angles[1], angles[2])),
                Step::matrix("V", &self.axes, 6, "", "rows: the fitted axes 1, 2, 3 in north, east, down"),
                Step::Table {
                    table: Table {
                        caption: "Measured and fitted axes, trends from true north".to_owned(),
                        columns: vec![
                            Column::text("axis"),
                            Column::number("measured trend", "°"),
                            Column::number("measured plunge", "°"),
                            Column::number("fitted trend", "°"),
                            Column::number("fitted plunge", "°"),
                            Column::number("misfit", "°"),
                        ],
                        rows,
                    },
                },
            ],
            notes,
            topics: vec!["rotation".to_owned()],
            ..Explanation::default()
        }
    }

    fn upstream(&self) -> Vec<Card> {
        self.measured.lines.iter().flat_map(|line| line.trend.upstream()).collect()
    }
}

#[cfg(test)]
mod tests {
    use crate::prelude::*;

    fn line(trend: f64, plunge: f64) -> Line {
        Line { trend: Azimuth::from_true_north(trend.deg()), plunge: plunge.deg() }
    }

    #[test]
    fn axes_at_right_angles_come_back_unchanged() {
        let lines = [line(35.0, 0.0), line(125.0, 30.0), line(305.0, 60.0)];
        let fitted = MeasuredAxes { lines }.fitted().unwrap();
        assert!(fitted.misfit().in_deg() < 1e-13);
        for (a, b) in lines.iter().zip(fitted.lines()) {
            assert!(a.angle_to(&b).unwrap().in_deg() < 1e-12);
        }
    }

    #[test]
    fn the_error_is_shared_and_shown() {
        // Two horizontal lines 86° apart and a vertical one: 2° each for the two, none for the third.
        let fitted = MeasuredAxes { lines: [line(0.0, 0.0), line(86.0, 0.0), line(10.0, 90.0)] }.fitted().unwrap();
        let [a, b, c] = fitted.misfits().map(|m| m.in_deg());
        assert!((a - 2.0).abs() < 1e-12 && (b - 2.0).abs() < 1e-12 && c < 1e-12, "{a} {b} {c}");
        let card = fitted.card();
        assert!(card.passed(), "{:#?}", card.checks);
        assert_eq!(card.explanation.headline, "fitted within 2.00° of the measured lines");
        assert_eq!(card.explanation.results.last().map(|item| item.shown.as_str()), Some("2.00°"));
    }

    #[test]
    fn axes_far_from_right_angles_are_refused() {
        let said = MeasuredAxes { lines: [line(0.0, 0.0), line(70.0, 0.0), line(0.0, 90.0)] }.fitted().unwrap_err();
        assert!(said.to_string().contains("70.0°, 90.0°, 90.0° to each other"), "{said}");
    }
}
