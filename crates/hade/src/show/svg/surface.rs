//! A quantity over the unit disc: interpolated between its stored values, and cut at levels.

/// A place on the disc (east, north).
pub(super) type Place = [f64; 2];

/// Fine steps in one step of the stored grid.
const FINE: usize = 5;
/// The largest stored grid that is drawn.
const MOST: usize = 120;

/// The quantity on a fine square grid from −1 to 1 each way.
pub(super) struct Surface {
    side: usize,
    values: Vec<Option<f64>>,
    /// Its least value on the disc.
    pub low: f64,
    /// Its largest value on the disc.
    pub high: f64,
}

impl Surface {
    /// From the values of a layer; `None` when they are no square grid or nothing is on the disc.
    pub fn of(side: usize, stored: &[Option<f64>]) -> Option<Surface> {
        if !(2..=MOST).contains(&side) || stored.len() != side * side {
            return None;
        }
        let stored: Vec<Option<f64>> = stored.iter().map(|v| v.filter(|v| v.abs() < 1e100)).collect();
        let all = || stored.iter().flatten().copied();
        let (least, most) = (all().fold(f64::INFINITY, f64::min), all().fold(f64::NEG_INFINITY, f64::max));
        let fine = (side - 1) * FINE + 1;
        let mut out = Surface { side: fine, values: Vec::with_capacity(fine * fine), low: f64::NAN, high: f64::NAN };
        for i in 0..fine * fine {
            // A cubic swings beyond its ends; the quantity does not.
            let value = between(side, &stored, i % fine, i / fine).map(|v| v.clamp(least, most));
            out.values.push(value);
            if let (Some(v), true) = (value, out.inside(i) >= 0.0) {
                out.low = out.low.min(v);
                out.high = out.high.max(v);
            }
        }
        (out.low.is_finite() && out.high.is_finite()).then_some(out)
    }

    fn place(&self, node: usize) -> Place {
        let along = |i: usize| 2.0 * i as f64 / (self.side - 1) as f64 - 1.0;
        [along(node % self.side), along(node / self.side)]
    }

    /// 1 − r²: positive within the circle.
    fn inside(&self, node: usize) -> f64 {
        let [x, y] = self.place(node);
        1.0 - x * x - y * y
    }

    /// The part of the disc where the quantity has a value, and one not below a level: closed
    /// lines, to be filled by the even–odd rule.
    pub fn region(&self, at_least: Option<f64>) -> Vec<Vec<Place>> {
        let span = (self.high - self.low).max(f64::MIN_POSITIVE);
        let field: Vec<Option<f64>> = (0..self.values.len())
            .map(|i| {
                let above = match (self.values[i], at_least) {
                    (None, _) => -1.0,
                    (Some(_), None) => 1.0,
                    (Some(v), Some(level)) => (v - level) / span,
                };
                Some(above.min(self.inside(i)))
            })
            .collect();
        march(self.side, &field)
    }

    /// The lines on the disc where the quantity is a level.
    pub fn lines(&self, level: f64) -> Vec<Vec<Place>> {
        let field: Vec<Option<f64>> = self.values.iter().map(|v| v.map(|v| v - level)).collect();
        march(self.side, &field).iter().flat_map(|line| on_the_disc(line)).collect()
    }
}

/// The value at a fine node: Catmull–Rom cubics each way where their 16 values exist (Catmull, E.
/// and Rom, R. 1974), straight lines beside a gap, none in a gap.
fn between(side: usize, stored: &[Option<f64>], column: usize, row: usize) -> Option<f64> {
    let at = |c: isize, r: isize| {
        let hold = |i: isize| i.clamp(0, side as isize - 1) as usize;
        stored[hold(r) * side + hold(c)]
    };
    let split = |i: usize| ((i / FINE) as isize, (i % FINE) as f64 / FINE as f64);
    let ((c, s), (r, t)) = (split(column), split(row));
    let cubic = |t: f64| {
        [
            0.5 * t * (-1.0 + t * (2.0 - t)),
            0.5 * (2.0 + t * t * (-5.0 + 3.0 * t)),
            0.5 * t * (1.0 + t * (4.0 - 3.0 * t)),
            0.5 * t * t * (t - 1.0),
        ]
    };
    let straight = |t: f64| [0.0, 1.0 - t, t, 0.0];
    weighted(at, (c, r), cubic(s), cubic(t)).or_else(|| weighted(at, (c, r), straight(s), straight(t)))
}

/// The sum of 4 × 4 values with their weights; `None` where one with a weight is missing.
fn weighted(
    at: impl Fn(isize, isize) -> Option<f64>,
    (c, r): (isize, isize),
    across: [f64; 4],
    up: [f64; 4],
) -> Option<f64> {
    let mut total = 0.0;
    for (j, v) in (-1..).zip(up) {
        for (i, w) in (-1..).zip(across) {
            if v * w != 0.0 {
                total += v * w * at(c + i, r + j)?;
            }
        }
    }
    Some(total)
}

/// Marching squares: the lines on which a field is zero, between nodes of a square grid over −1 to
/// 1, straight within a cell. A closed line ends where it begins. Lorensen, W.E. and Cline, H.E.
/// (1987), Computer Graphics 21(4), 163–169, in two dimensions.
fn march(side: usize, field: &[Option<f64>]) -> Vec<Vec<Place>> {
    let nodes = side * side;
    // An edge by its lower or left node; upright ones after the level ones.
    let ends = |edge: usize| if edge < nodes { (edge, edge + 1) } else { (edge - nodes, edge - nodes + side) };
    let positive = |node: usize| field[node].is_some_and(|v| v > 0.0);
    let mut next: Vec<Vec<usize>> = vec![Vec::new(); 2 * nodes];
    for row in 0..side - 1 {
        for column in 0..side - 1 {
            let a = row * side + column;
            let corners = [a, a + 1, a + side + 1, a + side];
            if corners.iter().any(|c| field[*c].is_none()) {
                continue;
            }
            // South, east, north, west.
            let [south, east, north, west] = [a, nodes + a + 1, a + side, nodes + a];
            let crossed: Vec<usize> = [south, east, north, west]
                .into_iter()
                .filter(|e| positive(ends(*e).0) != positive(ends(*e).1))
                .collect();
            let mut join = |a: usize, b: usize| {
                next[a].push(b);
                next[b].push(a);
            };
            match crossed.as_slice() {
                [one, other] => join(*one, *other),
                [..] if crossed.len() == 4 => {
                    let middle: f64 = corners.iter().filter_map(|c| field[*c]).sum();
                    // A saddle: the middle goes with the first corner, or with its neighbours.
                    if (middle > 0.0) == positive(a) {
                        join(south, east);
                        join(north, west);
                    } else {
                        join(south, west);
                        join(north, east);
                    }
                }
                _ => {}
            }
        }
    }
    let at = |edge: usize| {
        let (a, b) = ends(edge);
        let (u, v) = (field[a].unwrap_or(0.0), field[b].unwrap_or(0.0));
        let t = if u == v { 0.5 } else { u / (u - v) };
        let along = |i: f64| 2.0 * i / (side - 1) as f64 - 1.0;
        let (c, r) = ((a % side) as f64, (a / side) as f64);
        if edge < nodes { [along(c + t), along(r)] } else { [along(c), along(r + t)] }
    };
    let mut done = vec![false; 2 * nodes];
    let mut lines = Vec::new();
    // Open lines from their ends first, then the closed ones.
    for ends_only in [true, false] {
        for start in 0..2 * nodes {
            if done[start] || next[start].is_empty() || (ends_only && next[start].len() != 1) {
                continue;
            }
            let mut line = vec![at(start)];
            done[start] = true;
            let mut here = start;
            while let Some(on) = next[here].iter().copied().find(|e| !done[*e]) {
                done[on] = true;
                line.push(at(on));
                here = on;
            }
            if !ends_only && next[here].contains(&start) {
                line.push(at(start));
            }
            lines.push(line);
        }
    }
    lines
}

/// The parts of a line within the unit circle.
fn on_the_disc(line: &[Place]) -> Vec<Vec<Place>> {
    let square = |p: Place| p[0] * p[0] + p[1] * p[1];
    let mut parts: Vec<Vec<Place>> = Vec::new();
    let mut open: Vec<Place> = line.first().filter(|p| square(**p) <= 1.0).into_iter().copied().collect();
    for pair in line.windows(2) {
        let [a, b] = pair else { continue };
        let (u, v) = (square(*a), square(*b));
        if (u <= 1.0) != (v <= 1.0) {
            let t = (1.0 - u) / (v - u);
            open.push([a[0] + t * (b[0] - a[0]), a[1] + t * (b[1] - a[1])]);
        }
        if v <= 1.0 {
            open.push(*b);
        } else if !open.is_empty() {
            parts.push(std::mem::take(&mut open));
        }
    }
    parts.push(open);
    parts.retain(|p| p.len() > 1);
    parts
}

/// A line without the places that lie within a distance of the straight line between those kept
/// (Douglas, D.H. and Peucker, T.K. 1973, The Canadian Cartographer 10, 112–122).
pub(super) fn simplified(line: &[Place], within: f64) -> Vec<Place> {
    let mut keep = vec![false; line.len()];
    let mut spans = vec![(0, line.len().saturating_sub(1))];
    while let Some((a, b)) = spans.pop() {
        for end in [a, b] {
            if let Some(k) = keep.get_mut(end) {
                *k = true;
            }
        }
        if b < a + 2 {
            continue;
        }
        let (p, q) = (line[a], line[b]);
        let (dx, dy) = (q[0] - p[0], q[1] - p[1]);
        let length = dx.hypot(dy);
        let off = |r: Place| {
            let (x, y) = (r[0] - p[0], r[1] - p[1]);
            if length > 0.0 { (dx * y - dy * x).abs() / length } else { x.hypot(y) }
        };
        let farthest = (a + 1..b).map(|i| (i, off(line[i]))).max_by(|x, y| x.1.total_cmp(&y.1));
        if let Some((i, distance)) = farthest
            && distance > within
        {
            spans.extend([(a, i), (i, b)]);
        }
    }
    line.iter().zip(keep).filter_map(|(p, k)| k.then_some(*p)).collect()
}

#[cfg(test)]
mod tests {
    use super::*;

    fn stored(side: usize, f: impl Fn(f64, f64) -> f64) -> Vec<Option<f64>> {
        let along = |i: usize| 2.0 * i as f64 / (side - 1) as f64 - 1.0;
        (0..side * side).map(|i| Some(f(along(i % side), along(i / side)))).collect()
    }

    #[test]
    fn a_level_of_a_cone_is_a_circle_of_that_radius() {
        let surface = Surface::of(23, &stored(23, |x, y| x.hypot(y))).unwrap();
        assert!(surface.low < 0.05 && surface.high > 0.99);
        for level in [0.3, 0.5, 0.9] {
            let lines = surface.lines(level);
            assert_eq!(lines.len(), 1);
            assert_eq!(lines[0].first(), lines[0].last());
            assert!(lines[0].iter().all(|p| (p[0].hypot(p[1]) - level).abs() < 4e-3), "{level}");
        }
        assert!(surface.lines(1.2).is_empty());
    }

    /// The shear part of a traction over its normal part, at the place of a plane's pole on the
    /// equal-area disc: smooth but for a cone at each principal axis.
    #[test]
    fn between_its_stored_values_a_slip_tendency_keeps_to_one_part_in_a_hundred() {
        let tendency = |x: f64, y: f64| {
            let square = (x * x + y * y).min(2.0);
            let grow = (2.0 - square).sqrt();
            let (s, c) = 0.6_f64.sin_cos();
            let n = [grow * (y * c + x * s), grow * (x * c - y * s), 1.0 - square];
            let (a, b, d) = (27.0, 16.0, 36.0);
            let normal = a * n[0] * n[0] + b * n[1] * n[1] + d * n[2] * n[2];
            let size = a * a * n[0] * n[0] + b * b * n[1] * n[1] + d * d * n[2] * n[2];
            (size - normal * normal).max(0.0).sqrt() / normal
        };
        let side = 29;
        let surface = Surface::of(side, &stored(side, tendency)).unwrap();
        let mut off: Vec<f64> = (0..surface.values.len())
            .filter(|i| surface.inside(*i) >= 0.0)
            .map(|i| (surface.values[i].unwrap() - tendency(surface.place(i)[0], surface.place(i)[1])).abs())
            .collect();
        off.sort_by(f64::total_cmp);
        let range = surface.high - surface.low;
        let at = |share: f64| off[(share * (off.len() - 1) as f64) as usize] / range;
        assert!(at(0.95) < 0.01 && at(0.5) < 1e-3, "{} {}", at(0.95), at(0.5));
        // At the tip of a cone between stored places it is less sharp.
        assert!(at(1.0) < 0.15, "{}", at(1.0));
    }

    #[test]
    fn open_lines_end_on_the_circle_and_regions_close_along_it() {
        let surface = Surface::of(24, &stored(24, |x, _| x)).unwrap();
        let lines = surface.lines(0.25);
        assert_eq!(lines.len(), 1);
        for end in [lines[0].first().unwrap(), lines[0].last().unwrap()] {
            assert!((end[0].hypot(end[1]) - 1.0).abs() < 1e-3, "{end:?}");
        }
        let area = |loops: &[Vec<Place>]| -> f64 {
            loops.iter().flat_map(|l| l.windows(2)).map(|w| 0.5 * (w[0][0] * w[1][1] - w[1][0] * w[0][1])).sum()
        };
        let whole = area(&surface.region(None)).abs();
        assert!((whole - std::f64::consts::PI).abs() < 2e-3, "{whole}");
        // A circular segment beyond x = 1/4: acos(1/4) − 1/4 · √(1 − 1/16).
        let part = area(&surface.region(Some(0.25))).abs();
        assert!((part - (0.25_f64.acos() - 0.25 * 0.9375_f64.sqrt())).abs() < 2e-3, "{part}");
    }

    #[test]
    fn a_gap_stays_blank_and_what_is_no_grid_is_not_drawn() {
        let mut values = stored(24, |x, y| x + y);
        for (i, v) in values.iter_mut().enumerate() {
            if i % 24 < 8 {
                *v = None;
            }
        }
        values[300] = Some(f64::NAN);
        let surface = Surface::of(24, &values).unwrap();
        assert!(surface.lines(-0.5).iter().flatten().all(|p| p[0] > -0.4));
        assert!(surface.region(None).iter().flatten().all(|p| p[0] > -0.4));
        assert!(Surface::of(24, &values[1..]).is_none());
        assert!(Surface::of(0, &[]).is_none() && Surface::of(1, &[Some(1.0)]).is_none());
        assert!(Surface::of(3, &[None; 9]).is_none());
    }

    #[test]
    fn simplifying_keeps_within_its_distance() {
        let line: Vec<Place> = (0..=200).map(|i| f64::from(i) / 30.0).map(|x| [x * 30.0, 20.0 * x.sin()]).collect();
        let short = simplified(&line, 0.2);
        assert!(short.len() < 60 && short.first() == line.first() && short.last() == line.last());
        for p in &line {
            let near = short.windows(2).any(|w| {
                let (dx, dy) = (w[1][0] - w[0][0], w[1][1] - w[0][1]);
                let (x, y) = (p[0] - w[0][0], p[1] - w[0][1]);
                p[0] >= w[0][0] && p[0] <= w[1][0] && (dx * y - dy * x).abs() / dx.hypot(dy) <= 0.2 + 1e-9
            });
            assert!(near, "{p:?}");
        }
        assert!(simplified(&[], 1.0).is_empty());
    }
}
