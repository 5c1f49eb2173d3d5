//! Lines within the frame.

/// A place in pixels.
pub(super) type Px = [f64; 2];

/// An upright rectangle in pixels.
#[derive(Clone, Copy, Debug, PartialEq)]
pub(super) struct Rect {
    pub left: f64,
    pub top: f64,
    pub right: f64,
    pub bottom: f64,
}

impl Rect {
    pub fn width(&self) -> f64 {
        self.right - self.left
    }
    pub fn height(&self) -> f64 {
        self.bottom - self.top
    }
    pub fn grown(&self, by: f64) -> Rect {
        Rect { left: self.left - by, top: self.top - by, right: self.right + by, bottom: self.bottom + by }
    }
    pub fn holds(&self, [x, y]: Px) -> bool {
        x >= self.left && x <= self.right && y >= self.top && y <= self.bottom
    }
    #[cfg(test)]
    pub fn covers(&self, other: &Rect) -> bool {
        other.left >= self.left && other.right <= self.right && other.top >= self.top && other.bottom <= self.bottom
    }
    pub fn meets(&self, other: &Rect) -> bool {
        self.left < other.right && other.left < self.right && self.top < other.bottom && other.top < self.bottom
    }
    /// How far a place is outside, zero inside.
    pub fn distance(&self, [x, y]: Px) -> f64 {
        let dx = (self.left - x).max(x - self.right).max(0.0);
        let dy = (self.top - y).max(y - self.bottom).max(0.0);
        dx.hypot(dy)
    }
}

/// The parts of a line that lie within a rectangle (Liang and Barsky 1984, segment by segment). A
/// place that is not a number ends a part.
pub(super) fn clip(points: &[Px], within: &Rect) -> Vec<Vec<Px>> {
    let mut parts: Vec<Vec<Px>> = Vec::new();
    let mut open: Vec<Px> = Vec::new();
    for pair in points.windows(2) {
        let [a, b] = pair else { continue };
        match segment(*a, *b, within) {
            Some((from, to)) => {
                if open.last() != Some(&from) {
                    if open.len() > 1 {
                        parts.push(std::mem::take(&mut open));
                    }
                    open = vec![from];
                }
                open.push(to);
            }
            None => {
                if open.len() > 1 {
                    parts.push(std::mem::take(&mut open));
                }
                open.clear();
            }
        }
    }
    if open.len() > 1 {
        parts.push(open);
    }
    parts
}

fn segment(a: Px, b: Px, within: &Rect) -> Option<(Px, Px)> {
    if a.iter().chain(&b).any(|v| !v.is_finite()) {
        return None;
    }
    let (dx, dy) = (b[0] - a[0], b[1] - a[1]);
    let (mut from, mut to) = (0.0_f64, 1.0_f64);
    for (step, room) in
        [(-dx, a[0] - within.left), (dx, within.right - a[0]), (-dy, a[1] - within.top), (dy, within.bottom - a[1])]
    {
        if step == 0.0 {
            if room < 0.0 {
                return None;
            }
        } else if step < 0.0 {
            from = from.max(room / step);
        } else {
            to = to.min(room / step);
        }
    }
    if from > to {
        return None;
    }
    let at = |t: f64, end: Px| {
        if t == 0.0 {
            a
        } else if t == 1.0 {
            end
        } else {
            [a[0] + t * dx, a[1] + t * dy]
        }
    };
    Some((at(from, b), at(to, b)))
}

/// Places along a line, not further apart than `step`.
pub(super) fn walk(line: &[Px], step: f64) -> Vec<Px> {
    let mut out: Vec<Px> = line.first().copied().into_iter().collect();
    let mut since = 0.0;
    for pair in line.windows(2) {
        let [a, b] = pair else { continue };
        let length = (b[0] - a[0]).hypot(b[1] - a[1]);
        if !length.is_finite() || length <= 0.0 {
            continue;
        }
        let mut along = step - since;
        while along <= length {
            let t = along / length;
            out.push([a[0] + t * (b[0] - a[0]), a[1] + t * (b[1] - a[1])]);
            along += step;
        }
        since = length - (along - step);
    }
    out.extend(line.last());
    out
}

#[cfg(test)]
mod tests {
    use super::*;

    const FRAME: Rect = Rect { left: 0.0, top: 0.0, right: 10.0, bottom: 10.0 };

    #[test]
    fn keeps_what_is_inside() {
        assert_eq!(clip(&[[-5.0, 5.0], [15.0, 5.0]], &FRAME), vec![vec![[0.0, 5.0], [10.0, 5.0]]]);
        assert_eq!(clip(&[[1.0, 1.0], [2.0, 2.0], [3.0, 1.0]], &FRAME).len(), 1);
        assert!(clip(&[[-5.0, -5.0], [-1.0, 20.0]], &FRAME).is_empty());
        assert!(clip(&[[1.0, 1.0]], &FRAME).is_empty());
    }

    #[test]
    fn a_gap_or_an_excursion_makes_two_parts() {
        assert_eq!(clip(&[[1.0, 1.0], [2.0, 1.0], [f64::NAN, 1.0], [4.0, 1.0], [5.0, 1.0]], &FRAME).len(), 2);
        assert_eq!(clip(&[[1.0, 9.0], [5.0, 20.0], [9.0, 9.0]], &FRAME).len(), 2);
    }

    #[test]
    fn walks_evenly() {
        let places = walk(&[[0.0, 0.0], [3.0, 0.0], [10.0, 0.0]], 2.0);
        assert_eq!(places.len(), 7);
        assert!(places.windows(2).all(|w| (w[1][0] - w[0][0]).abs() <= 2.0 + 1e-12));
    }
}
