//! A quantity over a net: filled steps, labelled lines at round values, and the scale bar.

use super::canvas::{Canvas, Hold, width};
use super::clip::{Px, Rect, walk};
use super::frame::Frame;
use super::labels::{LINE, SIZE, block, wrap};
use super::surface::{Place, Surface, simplified};
use super::ticks::{label, ticks};
use crate::card::{Figure, Layer, Role};
use crate::show::cividis::{colour, ink};
use crate::show::theme::{Palette, Pen};

/// The size of the numbers on the lines.
const NUMBERS: f64 = 11.5;
/// Filled steps between two lines.
const STEPS: f64 = 4.0;
/// From the drawing area to the scale bar, and the bar's width.
const BAR: (f64, f64) = (14.0, 16.0);
/// The widest line of the scale bar's title.
const TITLE: f64 = 130.0;
/// The accuracy of the drawn lines in pixels.
const WITHIN: f64 = 0.2;

/// The quantity, ready to be drawn.
pub(super) struct Contours<'a> {
    title: &'a str,
    surface: Surface,
    /// The values of the lines with their numbers.
    lines: Vec<(f64, String)>,
    /// The ends of the scale bar.
    ends: (f64, f64),
    /// The distance of filled steps; zero when the quantity is the same everywhere.
    step: f64,
}

/// The number on a line.
pub(super) struct Number {
    text: String,
    share: f64,
    pub area: Rect,
}

impl<'a> Contours<'a> {
    /// The first contoured quantity of a figure, if it has one that can be drawn.
    pub fn of(figure: &'a Figure) -> Option<Contours<'a>> {
        figure.layers.iter().find_map(|layer| match layer {
            Layer::Contours { label, side, values } => {
                Surface::of(*side, values).map(|surface| Contours::over(label, surface))
            }
            _ => None,
        })
    }

    fn over(title: &'a str, surface: Surface) -> Contours<'a> {
        let (low, high) = (surface.low, surface.high);
        if high - low <= 1e-9 * low.abs().max(high.abs()) {
            return Contours { title, surface, lines: Vec::new(), ends: (low, high), step: 0.0 };
        }
        let (places, apart) = ticks(low, high, None, 6.0);
        let slack = 1e-6 * (high - low);
        let lines = places
            .into_iter()
            .filter(|v| *v > low + slack && *v < high - slack)
            .map(|v| (v, label(v, apart)))
            .collect();
        let step = apart / STEPS;
        let ends = ((low / step + 1e-6).floor() * step, (high / step - 1e-6).ceil() * step);
        Contours { title, surface, lines, ends, step }
    }

    /// What the scale bar needs to the right of the drawing area.
    pub fn margin(&self) -> f64 {
        let numbers = self.bar_numbers().iter().map(|(_, t)| width(t, NUMBERS)).fold(0.0, f64::max);
        let (title, _) = block(&wrap(self.title, SIZE, TITLE), SIZE);
        BAR.0 + title.max(BAR.1 + 9.0 + numbers)
    }

    fn bar_numbers(&self) -> Vec<(f64, String)> {
        if self.step > 0.0 {
            let apart = self.step * STEPS;
            let (places, _) = ticks(self.ends.0, self.ends.1, Some(apart), 6.0);
            places.into_iter().map(|v| (v, label(v, apart))).collect()
        } else {
            vec![(self.ends.0, label(self.ends.0, self.ends.0.abs().max(1e-3) * 0.01))]
        }
    }

    fn share(&self, value: f64) -> f64 {
        let (low, high) = self.ends;
        if high > low { (value - low) / (high - low) } else { 0.5 }
    }

    /// The filled steps from low to high: the lower end of each, and its share of the scale.
    fn steps(&self) -> Vec<(Option<f64>, f64)> {
        if self.step <= 0.0 {
            return vec![(None, 0.5)];
        }
        let count = ((self.ends.1 - self.ends.0) / self.step).round().clamp(1.0, 200.0) as usize;
        (0..count)
            .map(|i| self.ends.0 + i as f64 * self.step)
            .map(|from| ((from > self.surface.low).then_some(from), self.share(from + 0.5 * self.step)))
            .collect()
    }

    /// Fills the disc: each step over all above it, so that no seam shows.
    pub fn fill(&self, canvas: &mut Canvas, frame: &Frame) {
        for (from, share) in self.steps() {
            canvas.region(&in_pixels(&self.surface.region(from), frame), colour(share));
        }
    }

    /// The places of the numbers on the lines, clear of some places and of each other.
    pub fn numbers(&self, frame: &Frame, keep_clear: &[Rect]) -> Vec<Number> {
        let (centre, rim) = (frame.at([0.0, 0.0]), frame.at([1.0, 0.0]));
        let radius = rim[0] - centre[0];
        let mut out: Vec<Number> = Vec::new();
        for (level, text) in &self.lines {
            let mut longest_first = in_pixels(&self.surface.lines(*level), frame);
            longest_first.sort_by(|a, b| length(b).total_cmp(&length(a)));
            // Two numbers on a level that runs in several parts are enough.
            for line in longest_first.iter().filter(|l| length(l) > 60.0).take(2) {
                let (w, h) = (width(text, NUMBERS) + 4.0, NUMBERS + 2.0);
                let free = |[x, y]: &Px| {
                    let area = Rect { left: x - w / 2.0, right: x + w / 2.0, top: y - h / 2.0, bottom: y + h / 2.0 };
                    let corner = (x - centre[0]).abs() + w / 2.0;
                    let on = corner.hypot((y - centre[1]).abs() + h / 2.0) < radius - 3.0;
                    let clear =
                        keep_clear.iter().chain(out.iter().map(|n| &n.area)).all(|k| !k.meets(&area.grown(3.0)));
                    (on && clear).then_some(area)
                };
                let places = walk(line, 5.0);
                let middle = places.len() / 2;
                let mut order: Vec<usize> = (0..places.len()).collect();
                order.sort_by_key(|i| i.abs_diff(middle));
                if let Some(area) = order.iter().filter_map(|i| places.get(*i)).find_map(free) {
                    out.push(Number { text: text.clone(), share: self.share(*level), area });
                }
            }
        }
        out
    }

    /// Draws the lines, left out behind their numbers, and the numbers.
    pub fn draw_lines(&self, canvas: &mut Canvas, palette: &Palette, frame: &Frame, numbers: &[Number]) {
        let areas: Vec<Rect> = numbers.iter().map(|n| n.area).collect();
        for (level, _) in &self.lines {
            let pen = Pen { line: ink(self.share(*level)), width: 1.0, dash: &[], ..palette.pen(Role::Quiet) };
            let lines = in_pixels(&self.surface.lines(*level), frame);
            let pieces: Vec<Vec<Px>> = lines.iter().flat_map(|l| outside(l, &areas)).collect();
            canvas.strokes(&pieces, &pen, 0.85);
        }
        for number in numbers {
            let area = number.area;
            let at = [(area.left + area.right) / 2.0, (area.top + area.bottom) / 2.0];
            canvas.text(&number.text, at, Hold::Middle, NUMBERS, ink(number.share));
        }
    }

    /// Draws the scale bar to the right of the drawing area.
    pub fn draw_bar(&self, canvas: &mut Canvas, palette: &Palette, frame: &Frame) {
        let title = wrap(self.title, SIZE, TITLE);
        let left = frame.area.right + BAR.0;
        let top = frame.area.top + title.len() as f64 * LINE + 10.0;
        let bar = Rect { left, right: left + BAR.1, top, bottom: frame.area.bottom - 24.0 };
        for (i, line) in title.iter().enumerate() {
            canvas.text(line, [left, frame.area.top + (i as f64 + 0.5) * LINE], Hold::Start, SIZE, palette.ink);
        }
        let steps = self.steps();
        let high = bar.height() / steps.len() as f64;
        for (i, (_, share)) in steps.iter().enumerate() {
            canvas.fill(&Rect { bottom: bar.bottom - i as f64 * high, ..bar }, colour(*share), 1.0);
        }
        let pen = Pen { width: 1.0, dash: &[], ..palette.pen(Role::Quiet) };
        let corners = [[bar.left, bar.top], [bar.right, bar.top], [bar.right, bar.bottom], [bar.left, bar.bottom]];
        let mut lines = vec![corners.iter().chain(&corners[..1]).copied().collect::<Vec<Px>>()];
        for (value, text) in self.bar_numbers() {
            let y = bar.bottom - self.share(value) * bar.height();
            lines.push(vec![[bar.right, y], [bar.right + 4.0, y]]);
            canvas.text(&text, [bar.right + 8.0, y], Hold::Start, NUMBERS, palette.soft);
        }
        canvas.lines(&lines, &pen);
    }
}

fn in_pixels(lines: &[Vec<Place>], frame: &Frame) -> Vec<Vec<Px>> {
    lines.iter().map(|l| simplified(&l.iter().map(|p| frame.at(*p)).collect::<Vec<Px>>(), WITHIN)).collect()
}

fn length(line: &[Px]) -> f64 {
    line.windows(2).map(|w| (w[1][0] - w[0][0]).hypot(w[1][1] - w[0][1])).sum()
}

/// The pieces of a line outside some rectangles.
fn outside(line: &[Px], keep_clear: &[Rect]) -> Vec<Vec<Px>> {
    let near = |p: &Px| keep_clear.iter().any(|k| k.grown(20.0).holds(*p));
    if !walk(line, 20.0).iter().any(near) {
        return vec![line.to_vec()];
    }
    let mut pieces = vec![Vec::new()];
    for place in walk(line, 1.5) {
        if keep_clear.iter().any(|k| k.holds(place)) {
            pieces.push(Vec::new());
        } else if let Some(piece) = pieces.last_mut() {
            piece.push(place);
        }
    }
    pieces.iter().filter(|p| p.len() > 1).map(|p| simplified(p, WITHIN)).collect()
}
