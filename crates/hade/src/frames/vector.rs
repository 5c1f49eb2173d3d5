//! Three numbers and nine: the arithmetic under every turn.

/// A direction or a vector, in the axes of the frame at hand.
pub type V3 = [f64; 3];
/// A matrix by rows.
pub type M3 = [[f64; 3]; 3];

pub fn dot(a: V3, b: V3) -> f64 {
    a[0] * b[0] + a[1] * b[1] + a[2] * b[2]
}
pub fn cross(a: V3, b: V3) -> V3 {
    [a[1] * b[2] - a[2] * b[1], a[2] * b[0] - a[0] * b[2], a[0] * b[1] - a[1] * b[0]]
}
pub fn norm(a: V3) -> f64 {
    dot(a, a).sqrt()
}
pub fn scale(a: V3, k: f64) -> V3 {
    [a[0] * k, a[1] * k, a[2] * k]
}
pub fn add(a: V3, b: V3) -> V3 {
    [a[0] + b[0], a[1] + b[1], a[2] + b[2]]
}
/// The angle between two lines, 0–90°, in radians; exact for small angles.
pub fn angle_between_lines(a: V3, b: V3) -> f64 {
    norm(cross(a, b)).atan2(dot(a, b).abs())
}
pub fn transpose(q: &M3) -> M3 {
    [[q[0][0], q[1][0], q[2][0]], [q[0][1], q[1][1], q[2][1]], [q[0][2], q[1][2], q[2][2]]]
}
pub fn multiply(a: &M3, b: &M3) -> M3 {
    let columns = transpose(b);
    [apply_rows(a[0], &columns), apply_rows(a[1], &columns), apply_rows(a[2], &columns)]
}
fn apply_rows(row: V3, columns: &M3) -> V3 {
    [dot(row, columns[0]), dot(row, columns[1]), dot(row, columns[2])]
}
/// The line of a trend and plunge (radians) in north, east, down.
pub fn line_vector(trend: f64, plunge: f64) -> V3 {
    [plunge.cos() * trend.cos(), plunge.cos() * trend.sin(), plunge.sin()]
}
/// Trend (0–2π) and plunge (0–π/2) of a line, whatever its sign. A vertical line has trend 0.
pub fn trend_plunge(v: V3) -> (f64, f64) {
    let v = if v[2] < 0.0 { scale(v, -1.0) } else { v };
    let horizontal = v[0].hypot(v[1]);
    let trend = if horizontal == 0.0 { 0.0 } else { wrap(v[1].atan2(v[0])) };
    (trend, v[2].atan2(horizontal))
}
/// An angle brought into 0 ≤ a < 2π.
pub fn wrap(a: f64) -> f64 {
    let full = std::f64::consts::TAU;
    let w = a.rem_euclid(full);
    if w >= full { 0.0 } else { w }
}
/// Q v, rows of Q the new axes in the old frame.
pub fn apply(q: &M3, v: V3) -> V3 {
    [dot(q[0], v), dot(q[1], v), dot(q[2], v)]
}
