//! The nearest orthonormal set to three measured lines.

use crate::error::{Error, Result};
use crate::frames::vector::{M3, angle_between_lines, cross, dot, scale};
use crate::units::fixed;

/// Three measured axes made orthonormal, right-handed, with the largest angle from a measured line
/// to its fitted axis in radians.
#[derive(Clone, Copy, Debug)]
pub struct Fitted {
    pub axes: M3,
    pub misfit: f64,
}

/// More than this from a right angle between two measured axes is refused, in degrees.
const MOST_SKEW: f64 = 15.0;

/// The orthogonal polar factor of the three lines (rows), which no order of the lines changes.
/// Lines have no sign: of a left-handed set one line is turned round.
/// Newton iteration for the polar factor: Higham (1986), SIAM J. Sci. Stat. Comput. 7, 1160–1174.
pub fn nearest_orthonormal(lines: &M3) -> Result<Fitted> {
    let angles: Vec<f64> =
        [(0, 1), (0, 2), (1, 2)].iter().map(|&(i, j)| angle_between_lines(lines[i], lines[j]).to_degrees()).collect();
    if angles.iter().any(|a| 90.0 - a > MOST_SKEW) {
        let words: Vec<String> = angles.iter().map(|a| format!("{}°", fixed(*a, 1))).collect();
        return Err(Error::not_physical(
            format!("The measured principal axes stand at {} to each other (1–2, 1–3, 2–3)", words.join(", ")),
            format!("they must be within {MOST_SKEW}° of right angles; check trends and plunges."),
        ));
    }
    let mut x = *lines;
    if dot(cross(x[0], x[1]), x[2]) < 0.0 {
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
pub fn by_singular_values(lines: &M3) -> Option<M3> {
    let m = nalgebra::Matrix3::from_fn(|i, j| lines[i][j]);
    let svd = m.svd(true, true);
    let q = svd.u? * svd.v_t?;
    let mut rows = [[0.0; 3]; 3];
    for (i, row) in rows.iter_mut().enumerate() {
        for (j, cell) in row.iter_mut().enumerate() {
            *cell = q[(i, j)];
        }
    }
    if dot(cross(rows[0], rows[1]), rows[2]) < 0.0 {
        rows[2] = scale(rows[2], -1.0);
    }
    Some(rows)
}
