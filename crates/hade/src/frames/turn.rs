//! One turn of the axes: about one of them, or about any line.

use super::few_decimals;
use super::vector::{M3, V3, norm, scale, transpose, trend_plunge};
use crate::card::Formula;
use crate::units::{Angle, Quantity, fixed};

/// One turn of a chain.
#[derive(Clone, Debug, PartialEq)]
#[non_exhaustive]
pub struct Turn {
    /// The turn in words ("by the azimuth, 120°, about down").
    pub words: String,
    /// The line that stays ("down", "right of hole").
    pub axis: String,
    /// The angle, right-handed about that line.
    pub angle: Angle,
    /// The matrix: rows are the new axes in the axes before the turn.
    pub matrix: [[f64; 3]; 3],
    pub(super) form: Form,
}

/// How the matrix of a turn is written down.
#[derive(Clone, Debug, PartialEq)]
pub(super) enum Form {
    /// About the first, second or third axis (0, 1, 2), by the angle of this symbol.
    About(usize, String),
    /// The same turned back.
    Back(usize, String),
    /// By the rows, explained in words.
    Rows,
}

/// The turn of the axes by an angle about one of them, right-handed.
pub(super) fn about(axis: usize, angle: f64) -> M3 {
    let (s, c) = angle.sin_cos();
    match axis {
        0 => [[1.0, 0.0, 0.0], [0.0, c, s], [0.0, -s, c]],
        1 => [[c, 0.0, -s], [0.0, 1.0, 0.0], [s, 0.0, c]],
        _ => [[c, s, 0.0], [-s, c, 0.0], [0.0, 0.0, 1.0]],
    }
}

impl Turn {
    /// A turn about one of the axes: what the angle is, its symbol, and the name of the axis.
    pub(super) fn about(index: usize, what: &str, symbol: &str, angle: Angle, axis: &str) -> Self {
        Turn {
            words: format!("by {what}, {}°, about {axis}", few_decimals(angle, 4)),
            axis: axis.to_owned(),
            angle,
            matrix: about(index, angle.si()),
            form: Form::About(index, symbol.to_owned()),
        }
    }

    /// A turn given by its rows.
    pub(super) fn by_rows(what: &str, matrix: M3) -> Self {
        let (axis, angle) = in_words(&matrix);
        Turn {
            words: format!("{what} ({}° about {axis})", fixed(angle.in_deg(), 2)),
            axis,
            angle,
            matrix,
            form: Form::Rows,
        }
    }

    /// The turn back.
    pub(super) fn back(self) -> Self {
        let form = match self.form {
            Form::About(axis, symbol) => Form::Back(axis, symbol),
            Form::Back(axis, symbol) => Form::About(axis, symbol),
            Form::Rows => Form::Rows,
        };
        Turn {
            words: format!("undone: {}", self.words),
            matrix: transpose(&self.matrix),
            angle: -self.angle,
            form,
            ..self
        }
    }

    /// As a step of the work.
    pub(super) fn sentence(&self) -> String {
        match self.words.strip_prefix("undone: ") {
            Some(turn) => format!("Undo the turn {turn}."),
            None => format!("Turn {}.", self.words),
        }
    }

    /// The matrix as a formula, under the name of the turn.
    pub(super) fn formula(&self, number: usize) -> Option<Formula> {
        let (axis, symbol, back) = match &self.form {
            Form::About(axis, symbol) => (*axis, symbol, false),
            Form::Back(axis, symbol) => (*axis, symbol, true),
            Form::Rows => return None,
        };
        // Turning back exchanges rows and columns: the signs of the sines.
        let (up, down) = if back { ("−", "") } else { ("", "−") };
        let (sin, cos) = (format!("sin {symbol}"), format!("cos {symbol}"));
        let rows = match axis {
            0 => [["1", "0", "0"], ["0", "c", "s"], ["0", "-s", "c"]],
            1 => [["c", "0", "-s"], ["0", "1", "0"], ["s", "0", "c"]],
            _ => [["c", "s", "0"], ["-s", "c", "0"], ["0", "0", "1"]],
        };
        let text: Vec<String> = rows
            .iter()
            .map(|row| {
                let cells: Vec<String> = row
                    .iter()
                    .map(|c| match *c {
                        "c" => cos.clone(),
                        "s" => format!("{up}{sin}"),
                        "-s" => format!("{down}{sin}"),
                        number => number.to_owned(),
                    })
                    .collect();
                cells.join(", ")
            })
            .collect();
        let text = text.join("; ");
        let math = text.replace('−', "-").replace('θ', "theta");
        let subscript: String =
            number.to_string().chars().filter_map(|c| "₀₁₂₃₄₅₆₇₈₉".chars().nth(c as usize - 48)).collect();
        Some(Formula::new(&format!("Q_{number} = mat({math})"), &format!("Q{subscript} = [{text}]")))
    }
}

/// The line and the right-handed angle (0–π) of a turn of the axes, from its matrix. The angle comes
/// from sine and cosine together, so that it is exact for small and for flat turns.
pub(super) fn axis_and_angle(q: &M3) -> (V3, f64) {
    let w = [q[1][2] - q[2][1], q[2][0] - q[0][2], q[0][1] - q[1][0]];
    let trace = q[0][0] + q[1][1] + q[2][2];
    let angle = norm(w).atan2(trace - 1.0);
    if norm(w) > 1e-6 {
        return (scale(w, 1.0 / norm(w)), angle);
    }
    if trace > 0.0 {
        return ([0.0, 0.0, 1.0], angle);
    }
    // A half turn: Q + I is twice the square of its line.
    let rows = [0, 1, 2].map(|i| {
        let mut row = [q[i][0] + q[0][i], q[i][1] + q[1][i], q[i][2] + q[2][i]];
        row[i] += 2.0;
        row
    });
    let longest = rows.into_iter().fold([0.0; 3], |best, row| if norm(row) > norm(best) { row } else { best });
    (scale(longest, 1.0 / norm(longest)), angle)
}

/// The line of a turn by its lower end, in words, and the right-handed angle about that end.
pub(super) fn in_words(q: &M3) -> (String, Angle) {
    let (axis, angle) = axis_and_angle(q);
    let angle = Angle::from_si(if axis[2] < 0.0 { -angle } else { angle });
    let (trend, plunge) = trend_plunge(axis);
    if plunge.to_degrees() > 89.99 {
        return ("down".to_owned(), angle);
    }
    let trend = super::three_figures(Angle::from_si(trend));
    (format!("the line of trend {trend}°, plunge {}°", fixed(plunge.to_degrees(), 1)), angle)
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn line_and_angle_come_back_for_small_common_and_flat_turns() {
        for axis in 0..3 {
            for angle in [1e-9, 1e-3, 0.4, 2.0, 3.1, std::f64::consts::PI] {
                let (line, found) = axis_and_angle(&about(axis, angle));
                assert!((found - angle).abs() < 1e-12, "{axis} {angle}: {found}");
                if angle > 1e-5 {
                    assert!((line[axis].abs() - 1.0).abs() < 1e-9, "{axis} {angle}: {line:?}");
                }
            }
        }
    }

    #[test]
    fn the_formula_of_a_turn_and_of_the_turn_back() {
        let turn = Turn::about(2, "the azimuth", "a", Angle::deg(120.0), "down");
        assert_eq!(turn.formula(1).unwrap().text, "Q₁ = [cos a, sin a, 0; −sin a, cos a, 0; 0, 0, 1]");
        assert_eq!(turn.formula(1).unwrap().math, "Q_1 = mat(cos a, sin a, 0; -sin a, cos a, 0; 0, 0, 1)");
        assert_eq!(turn.back().formula(2).unwrap().text, "Q₂ = [cos a, −sin a, 0; sin a, cos a, 0; 0, 0, 1]");
    }
}
