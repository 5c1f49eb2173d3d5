//! A layer in pixels: its lines cut to the frame, its marks, its bars.

use super::bands::around;
use super::canvas::Canvas;
use super::clip::{Px, Rect, clip, walk};
use super::frame::Frame;
use crate::card::{Layer, Mark, Role};
use crate::show::theme::{Colour, Palette, Pen};

/// The radius of a dot, and half the side of a square, in pixels.
const DOT: f64 = 4.5;
const HALF: f64 = 4.2;
/// How far the ground shows around what stands on filled steps.
const EDGE: f64 = 1.6;

/// What is drawn of a layer.
pub(super) enum Drawing {
    /// Lines in the dash of their role.
    Lines { role: Role, parts: Vec<Vec<Px>> },
    /// Whole lines.
    Strokes { role: Role, parts: Vec<Vec<Px>> },
    /// Marks.
    Marks { role: Role, mark: Mark, places: Vec<Px> },
    /// A filled rectangle.
    Bar { role: Role, area: Rect },
    /// Nothing here: bands, words, nets and contours are drawn elsewhere.
    None,
}

impl Drawing {
    pub fn of(layer: &Layer, frame: &Frame) -> Drawing {
        let reach = frame.area.grown(0.5);
        match layer {
            Layer::Line { role, points, .. } => {
                let line: Vec<Px> = points.iter().map(|p| frame.at(*p)).collect();
                Drawing::Lines { role: *role, parts: clip(&thinned(line), &reach) }
            }
            Layer::Circle { role, centre, radius, upper_half, .. } => {
                let steps = if *upper_half { 120 } else { 240 };
                let turn = if *upper_half { std::f64::consts::PI } else { std::f64::consts::TAU };
                let line: Vec<Px> = (0..=steps)
                    .map(|i| turn * f64::from(i) / f64::from(steps))
                    .map(|a| frame.at([centre[0] + radius * a.cos(), centre[1] + radius * a.sin()]))
                    .collect();
                Drawing::Lines { role: *role, parts: clip(&line, &reach) }
            }
            Layer::Points { role, mark, points, .. } => {
                let places = points.iter().map(|p| frame.at(*p)).filter(|p| reach.holds(*p)).collect();
                Drawing::Marks { role: *role, mark: *mark, places }
            }
            Layer::Arrow { role, from, to, .. } => {
                let parts = arrow(frame.at(*from), frame.at(*to)).iter().flat_map(|l| clip(l, &reach)).collect();
                Drawing::Strokes { role: *role, parts }
            }
            Layer::Bar { role, from, to } => {
                let (a, b) = (frame.at(*from), frame.at(*to));
                if a.iter().chain(&b).any(|v| v.is_nan()) {
                    return Drawing::None;
                }
                let within = frame.area;
                let (x, y) = (|v: f64| v.clamp(within.left, within.right), |v: f64| v.clamp(within.top, within.bottom));
                let area = Rect {
                    left: x(a[0].min(b[0])),
                    right: x(a[0].max(b[0])),
                    top: y(a[1].min(b[1])),
                    bottom: y(a[1].max(b[1])),
                };
                Drawing::Bar { role: *role, area }
            }
            Layer::ColumnBand { .. }
            | Layer::RowBand { .. }
            | Layer::Words { .. }
            | Layer::Net { .. }
            | Layer::Contours { .. } => Drawing::None,
        }
    }

    /// Draws it; a straight line is left out behind labels.
    pub fn draw(&self, canvas: &mut Canvas, palette: &Palette, labels: &[Rect]) {
        match self {
            Drawing::Lines { role, parts } => {
                let straight = |part: &Vec<Px>| if part.len() == 2 { around(part, labels) } else { vec![part.clone()] };
                canvas.lines(&parts.iter().flat_map(straight).collect::<Vec<_>>(), &palette.pen(*role));
            }
            Drawing::Strokes { role, parts } => {
                // They may run along another line.
                self.draw_edged(canvas, palette);
                canvas.lines(parts, &Pen { dash: &[], ..palette.pen(*role) });
            }
            Drawing::Marks { role, mark, places } => {
                let pen = Pen { width: 2.0, dash: &[], ..palette.pen(*role) };
                draw_marks(canvas, *mark, places, &pen);
            }
            Drawing::Bar { role, area } => {
                let pen = Pen { width: 1.2, dash: &[], ..palette.pen(*role) };
                canvas.fill(area, pen.line, if *role == Role::Quiet { 0.25 } else { 0.55 });
                canvas.lines(&[outline(area)], &pen);
            }
            Drawing::None => {}
        }
    }

    /// Draws its edge in the colour of the ground, on which it stands out from filled steps.
    pub fn draw_edged(&self, canvas: &mut Canvas, palette: &Palette) {
        let edge = |pen: Pen| Pen { line: palette.ground, width: pen.width + 2.0 * EDGE, dash: &[], ..pen };
        match self {
            Drawing::Lines { role, parts } | Drawing::Strokes { role, parts } => {
                canvas.lines(parts, &edge(palette.pen(*role)));
            }
            Drawing::Marks { role, mark, places } => {
                let pen = edge(Pen { width: 2.0, ..palette.pen(*role) });
                match mark {
                    Mark::Dot => canvas.dots(places, DOT + EDGE, pen.line),
                    Mark::Square => draw_squares(canvas, places, HALF + EDGE, pen.line),
                    _ => draw_marks(canvas, *mark, places, &pen),
                }
            }
            Drawing::Bar { .. } | Drawing::None => {}
        }
    }

    /// The places that labels keep clear of.
    pub fn outline(&self) -> Vec<Px> {
        match self {
            Drawing::Lines { parts, .. } | Drawing::Strokes { parts, .. } => {
                parts.iter().flat_map(|p| walk(p, 4.0)).collect()
            }
            Drawing::Marks { places, .. } => places
                .iter()
                .flat_map(|p| {
                    [[0.0, 0.0], [-4.0, 0.0], [4.0, 0.0], [0.0, -4.0], [0.0, 4.0]].map(|d| [p[0] + d[0], p[1] + d[1]])
                })
                .collect(),
            Drawing::Bar { area, .. } => walk(&outline(area), 6.0),
            Drawing::None => Vec::new(),
        }
    }

    /// What its marks and lines cover, for numbers that keep clear of them.
    pub fn covers(&self) -> Vec<Rect> {
        match self {
            Drawing::Marks { places, .. } => places.iter().map(|p| square(*p, DOT + EDGE)).collect(),
            Drawing::Lines { parts, .. } | Drawing::Strokes { parts, .. } => {
                parts.iter().flat_map(|part| walk(part, 4.0)).map(|p| square(p, EDGE)).collect()
            }
            _ => Vec::new(),
        }
    }
}

fn draw_marks(canvas: &mut Canvas, mark: Mark, places: &[Px], pen: &Pen) {
    match mark {
        Mark::Dot => canvas.dots(places, DOT, pen.line),
        Mark::Ring => canvas.rings(places, DOT, pen),
        Mark::Square => draw_squares(canvas, places, HALF, pen.line),
        Mark::Cross => canvas.lines(&shapes(places, &CROSS), pen),
        Mark::Triangle => canvas.lines(&shapes(places, &TRIANGLE), pen),
        Mark::Diamond => canvas.lines(&shapes(places, &DIAMOND), pen),
    }
}

fn draw_squares(canvas: &mut Canvas, places: &[Px], half: f64, colour: Colour) {
    for place in places {
        canvas.fill(&square(*place, half), colour, 1.0);
    }
}

fn square([x, y]: Px, half: f64) -> Rect {
    Rect { left: x - half, right: x + half, top: y - half, bottom: y + half }
}

fn outline(area: &Rect) -> Vec<Px> {
    let Rect { left, right, top, bottom } = *area;
    vec![[left, top], [right, top], [right, bottom], [left, bottom], [left, top]]
}

/// A shaft and a head of two strokes.
fn arrow(from: Px, to: Px) -> Vec<Vec<Px>> {
    let (dx, dy) = (to[0] - from[0], to[1] - from[1]);
    let length = dx.hypot(dy);
    if !(length > 1e-6 && length.is_finite()) {
        return Vec::new();
    }
    let head = 9.0_f64.min(0.6 * length) / length;
    let barb = |turn: f64| {
        let (s, c) = turn.to_radians().sin_cos();
        [to[0] - head * (c * dx - s * dy), to[1] - head * (s * dx + c * dy)]
    };
    vec![vec![from, to], vec![barb(26.0), to, barb(-26.0)]]
}

/// A line without the places that no eye can tell from the one before.
fn thinned(line: Vec<Px>) -> Vec<Px> {
    let mut out: Vec<Px> = Vec::with_capacity(line.len());
    let last = line.last().copied();
    for place in line {
        // Not a number is kept: it makes the gap.
        let near = out.last().is_some_and(|o: &Px| (o[0] - place[0]).hypot(o[1] - place[1]) < 0.3);
        if !near {
            out.push(place);
        }
    }
    if out.last() != last.as_ref() {
        out.extend(last);
    }
    out
}

const CROSS: [&[Px]; 2] = [&[[-5.0, 0.0], [5.0, 0.0]], &[[0.0, -5.0], [0.0, 5.0]]];
const TRIANGLE: [&[Px]; 1] = [&[[-5.0, 4.0], [0.0, -5.0], [5.0, 4.0], [-5.0, 4.0]]];
const DIAMOND: [&[Px]; 1] = [&[[-5.0, 0.0], [0.0, -5.5], [5.0, 0.0], [0.0, 5.5], [-5.0, 0.0]]];

fn shapes(places: &[Px], strokes: &[&[Px]]) -> Vec<Vec<Px>> {
    places
        .iter()
        .flat_map(|p| strokes.iter().map(move |s| s.iter().map(|d| [p[0] + d[0], p[1] + d[1]]).collect()))
        .collect()
}
