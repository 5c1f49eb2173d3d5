//! Where the words go: beside what they name, clear of lines and of each other.

use super::canvas::{Hold, width};
use super::clip::{Px, Rect};
use crate::show::theme::Colour;

/// The size of labels in pixels.
pub(super) const SIZE: f64 = 13.0;
/// The height of one line of a label.
pub(super) const LINE: f64 = 16.0;

/// A place that a label may stand beside, and how little it is wanted there.
#[derive(Clone, Copy, Debug)]
pub(super) struct Anchor {
    pub at: Px,
    pub cost: f64,
}

/// A label that looks for its place.
#[derive(Clone, Debug)]
pub(super) struct Wish {
    /// The number of the layer it names.
    pub owner: usize,
    pub text: String,
    pub colour: Colour,
    /// The distance kept from the anchor.
    pub gap: f64,
    /// Whether it may stand further off, tied to its anchor by a thin line.
    pub may_stand_off: bool,
    pub anchors: Vec<Anchor>,
}

/// A label with its place.
#[derive(Clone, Debug)]
pub(super) struct Placed {
    pub lines: Vec<String>,
    pub colour: Colour,
    pub hold: Hold,
    pub area: Rect,
    /// A thin line from what it names, when it stands further off.
    pub leader: Option<[Px; 2]>,
}

/// What labels keep clear of.
#[derive(Debug, Default)]
pub(super) struct Room {
    /// Places along every line, with the number of the layer.
    pub drawn: Vec<(usize, Px)>,
    /// Places along the axes through zero and the edges of bands.
    pub edges: Vec<Px>,
    /// The labels that have their place.
    pub taken: Vec<Rect>,
}

/// Sides of the anchor, best first: left or right, above or below, and how little it is wanted.
const SIDES: [(f64, f64, f64); 8] = [
    (0.0, -1.0, 0.0),
    (1.0, -1.0, 0.5),
    (-1.0, -1.0, 0.7),
    (1.0, 0.0, 1.0),
    (-1.0, 0.0, 1.4),
    (0.0, 1.0, 2.0),
    (1.0, 1.0, 2.2),
    (-1.0, 1.0, 2.4),
];

/// Distances beyond the gap at which a label may stand off, and how little it is wanted there.
const STAND_OFF: [(f64, f64); 4] = [(0.0, 0.0), (18.0, 14.0), (40.0, 20.0), (70.0, 28.0)];

/// The width at which a label is tried in more lines.
const NARROW: f64 = 100.0;

impl Room {
    /// Finds the best place for a label within the frame and takes it.
    pub fn place(&mut self, wish: &Wish, frame: &Rect) -> Option<Placed> {
        let mut shapes = vec![(wrap(&wish.text, SIZE, 0.5 * frame.width()), 0.0)];
        let narrow = wrap(&wish.text, SIZE, NARROW);
        if shapes.iter().all(|(lines, _)| *lines != narrow) {
            shapes.push((narrow, 3.0));
        }
        let far = if wish.may_stand_off { STAND_OFF.len() } else { 1 };
        let mut best: Option<(f64, Placed)> = None;
        for (lines, broken) in shapes {
            let (w, h) = block(&lines, SIZE);
            for anchor in &wish.anchors {
                for (off, reluctance) in STAND_OFF.iter().take(far) {
                    for (sx, sy, dislike) in SIDES {
                        let gap = (wish.gap + off) * if sx != 0.0 && sy != 0.0 { 0.7 } else { 1.0 };
                        let left = anchor.at[0] + sx * (gap + w / 2.0) - w / 2.0;
                        let top = anchor.at[1] + sy * (gap + h / 2.0) - h / 2.0;
                        let area = moved_into(Rect { left, top, right: left + w, bottom: top + h }, frame);
                        let moved = (area.left - left).hypot(area.top - top);
                        let tied = *off > 0.0;
                        let known = broken + anchor.cost + reluctance + dislike + 0.4 * moved;
                        if best.as_ref().is_some_and(|(least, _)| known >= *least) {
                            continue;
                        }
                        let cost = known + self.trouble(wish.owner, &area, tied);
                        if best.as_ref().is_none_or(|(least, _)| cost < *least) {
                            let hold = if sx > 0.0 {
                                Hold::Start
                            } else if sx < 0.0 {
                                Hold::End
                            } else {
                                Hold::Middle
                            };
                            let leader = tied.then(|| leader(anchor.at, &area));
                            best =
                                Some((cost, Placed { lines: lines.clone(), colour: wish.colour, hold, area, leader }));
                        }
                    }
                }
            }
        }
        let (_, placed) = best?;
        self.taken.push(placed.area);
        Some(placed)
    }

    /// What speaks against a place: other labels, lines through it, and, unless it is tied to what
    /// it names, a line of another layer nearer than its own.
    fn trouble(&self, owner: usize, area: &Rect, tied: bool) -> f64 {
        let near = area.grown(2.0);
        let others = self.taken.iter().filter(|t| t.meets(&near)).count() as f64;
        let (mut own, mut foreign) = (f64::INFINITY, f64::INFINITY);
        let mut crossings = 0_u32;
        for (whose, place) in &self.drawn {
            let distance = area.distance(*place);
            crossings += u32::from(distance <= 2.0);
            if *whose == owner {
                own = own.min(distance);
            } else {
                foreign = foreign.min(distance);
            }
        }
        let crossed = if crossings > 0 { 60.0 + 6.0 * f64::from(crossings) } else { 0.0 };
        let edges = self.edges.iter().filter(|p| near.holds(**p)).count() as f64;
        let edged = if edges > 0.0 { 15.0 + 1.5 * edges } else { 0.0 };
        let doubtful = match foreign - own {
            _ if tied => (8.0 - foreign).max(0.0),
            lead if lead < 0.0 => 40.0,
            lead => (12.0 - lead).max(0.0),
        };
        400.0 * others + crossed + edged + doubtful
    }
}

/// From beside a mark to the nearest side of its label.
fn leader([x, y]: Px, area: &Rect) -> [Px; 2] {
    let to = [x.clamp(area.left, area.right), y.clamp(area.top + 2.0, area.bottom - 2.0)];
    let length = (to[0] - x).hypot(to[1] - y).max(1e-9);
    let (ux, uy) = ((to[0] - x) / length, (to[1] - y) / length);
    [[x + 7.0 * ux, y + 7.0 * uy], [to[0] - 2.0 * ux, to[1] - 2.0 * uy]]
}

/// A rectangle pushed inside another, as far as it fits.
pub(super) fn moved_into(area: Rect, frame: &Rect) -> Rect {
    let dx = (frame.right - area.right).min(0.0).max(frame.left - area.left);
    let dy = (frame.bottom - area.bottom).min(0.0).max(frame.top - area.top);
    Rect { left: area.left + dx, right: area.right + dx, top: area.top + dy, bottom: area.bottom + dy }
}

/// A text in lines not wider than asked, where it has spaces.
pub(super) fn wrap(text: &str, size: f64, most: f64) -> Vec<String> {
    let mut lines: Vec<String> = Vec::new();
    for word in text.split_whitespace() {
        match lines.last_mut() {
            Some(line) if width(&format!("{line} {word}"), size) <= most => {
                line.push(' ');
                line.push_str(word);
            }
            _ => lines.push(word.to_owned()),
        }
    }
    lines
}

/// Width and height of lines of text.
pub(super) fn block(lines: &[String], size: f64) -> (f64, f64) {
    (lines.iter().map(|l| width(l, size)).fold(0.0, f64::max), lines.len() as f64 * LINE)
}

/// Moves intervals (centre, length) apart along a line between two ends, as little as the order
/// allows; gives the centres in the order they came.
pub(super) fn spread(wanted: &[(f64, f64)], low: f64, high: f64) -> Vec<f64> {
    let mut order: Vec<usize> = (0..wanted.len()).collect();
    let key = |i: &usize| wanted.get(*i).map_or(0.0, |w| w.0);
    order.sort_by(|a, b| key(a).total_cmp(&key(b)));
    let mut sorted: Vec<(f64, f64)> = order.iter().filter_map(|i| wanted.get(*i).copied()).collect();
    let mut floor = low;
    for (centre, length) in &mut sorted {
        *centre = centre.max(floor + *length / 2.0);
        floor = *centre + *length / 2.0;
    }
    let mut ceiling = high;
    for (centre, length) in sorted.iter_mut().rev() {
        *centre = centre.min(ceiling - *length / 2.0);
        ceiling = *centre - *length / 2.0;
    }
    let mut out = vec![0.0; wanted.len()];
    for (place, (centre, _)) in order.into_iter().zip(sorted) {
        if let Some(slot) = out.get_mut(place) {
            *slot = centre;
        }
    }
    out
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn spreads_labels_apart_and_keeps_their_order() {
        assert_eq!(spread(&[(50.0, 10.0), (20.0, 10.0)], 0.0, 100.0), [50.0, 20.0]);
        let close = spread(&[(50.0, 10.0), (51.0, 10.0), (52.0, 10.0)], 0.0, 100.0);
        assert!(close[1] - close[0] >= 10.0 - 1e-9 && close[2] - close[1] >= 10.0 - 1e-9);
        let end = spread(&[(99.0, 10.0), (98.0, 10.0)], 0.0, 100.0);
        assert_eq!(end, [95.0, 85.0]);
    }

    #[test]
    fn wraps_at_spaces() {
        assert_eq!(wrap("one two three", 10.0, 60.0).len(), 2);
        assert_eq!(wrap("undividable", 10.0, 5.0), ["undividable"]);
        assert!(wrap("", 10.0, 5.0).is_empty());
    }

    #[test]
    fn places_a_label_clear_of_lines_and_labels() {
        let frame = Rect { left: 0.0, top: 0.0, right: 300.0, bottom: 200.0 };
        let line: Vec<(usize, Px)> = (0..300).map(|x| (0, [f64::from(x), 100.0])).collect();
        let mut room = Room { drawn: line, ..Room::default() };
        let wish = |owner| Wish {
            owner,
            text: "hoop".into(),
            colour: Colour(0, 0, 0),
            gap: 6.0,
            may_stand_off: false,
            anchors: vec![Anchor { at: [150.0, 100.0], cost: 0.0 }],
        };
        let first = room.place(&wish(0), &frame).unwrap();
        let second = room.place(&wish(0), &frame).unwrap();
        assert!(!first.area.meets(&second.area));
        for placed in [&first, &second] {
            assert!(frame.covers(&placed.area));
            assert!(room.drawn.iter().all(|(_, p)| !placed.area.holds(*p)));
        }
    }
}
