//! Shaded bands: a tint, the hatching of their role, and their edges.

use super::canvas::Canvas;
use super::clip::{Px, Rect, clip, walk};
use super::frame::Frame;
use crate::card::{Layer, Role};
use crate::show::theme::{Hatch, Palette, Pen};

/// A band of the figure in pixels.
pub(super) struct Band<'a> {
    pub label: &'a str,
    pub role: Role,
    pub area: Rect,
    /// An interval of x over the whole height; otherwise one of y over the whole width.
    pub upright: bool,
}

/// The band that a layer is, if it is one and some of it is within the frame.
pub(super) fn band<'a>(layer: &'a Layer, frame: &Frame) -> Option<Band<'a>> {
    let (label, role, from, to, upright) = match layer {
        Layer::ColumnBand { label, role, from, to } => (label, *role, *from, *to, true),
        Layer::RowBand { label, role, from, to } => (label, *role, *from, *to, false),
        _ => return None,
    };
    if from.is_nan() || to.is_nan() {
        return None;
    }
    let (low, high) = if upright { frame.x } else { frame.y };
    let (from, to) = (from.min(to).clamp(low, high), from.max(to).clamp(low, high));
    let outside = from == to && (from == low || from == high);
    if outside {
        return None;
    }
    let (a, b) = if upright {
        (frame.at([from, frame.y.0]), frame.at([to, frame.y.1]))
    } else {
        (frame.at([frame.x.0, from]), frame.at([frame.x.1, to]))
    };
    let area = Rect { left: a[0].min(b[0]), right: a[0].max(b[0]), top: a[1].min(b[1]), bottom: a[1].max(b[1]) };
    Some(Band { label, role, area, upright })
}

impl Band<'_> {
    /// Draws it, leaving its hatching and its edges out behind labels.
    pub fn draw(&self, canvas: &mut Canvas, palette: &Palette, labels: &[Rect]) {
        let area = self.area;
        let pen = palette.pen(self.role);
        canvas.fill(&area, pen.line, if self.role == Role::Quiet { 0.16 } else { 0.20 });
        let strokes: Vec<Vec<Px>> = match Palette::hatch(self.role) {
            Hatch::Slanted => slanted(&area, 9.0),
            Hatch::Level => level(&area, 7.0),
            Hatch::Plain => Vec::new(),
        };
        let strokes: Vec<Vec<Px>> = strokes.iter().flat_map(|line| around(line, labels)).collect();
        canvas.strokes(&strokes, &Pen { width: 1.1, dash: &[], ..pen }, 0.75);
        let edges: Vec<Vec<Px>> = self.edges().iter().flat_map(|line| around(line, labels)).collect();
        canvas.lines(&edges, &Pen { width: 1.2, dash: &[], ..pen });
    }

    /// Its two long sides.
    pub fn edges(&self) -> Vec<Vec<Px>> {
        let area = self.area;
        let edges = if self.upright {
            [[[area.left, area.top], [area.left, area.bottom]], [[area.right, area.top], [area.right, area.bottom]]]
        } else {
            [[[area.left, area.top], [area.right, area.top]], [[area.left, area.bottom], [area.right, area.bottom]]]
        };
        edges.iter().map(|e| e.to_vec()).collect()
    }
}

fn slanted(area: &Rect, apart: f64) -> Vec<Vec<Px>> {
    let reach = area.height();
    let first = ((area.left - reach) / apart).floor();
    let count = ((area.width() + reach) / apart).ceil().clamp(0.0, 400.0) as usize;
    (0..=count)
        .map(|i| (first + i as f64) * apart)
        .flat_map(|x| clip(&[[x, area.bottom], [x + reach, area.top]], area))
        .collect()
}

fn level(area: &Rect, apart: f64) -> Vec<Vec<Px>> {
    let count = (area.height() / apart).floor().clamp(0.0, 400.0);
    let first = (area.height() - (count - 1.0).max(0.0) * apart) / 2.0;
    (0..count as usize)
        .map(|i| area.top + first + i as f64 * apart)
        .map(|y| vec![[area.left, y], [area.right, y]])
        .collect()
}

/// The pieces of a straight line outside some rectangles.
pub(super) fn around(line: &[Px], keep_clear: &[Rect]) -> Vec<Vec<Px>> {
    if !line.iter().any(|_| keep_clear.iter().any(|k| meets(line, k))) {
        return vec![line.to_vec()];
    }
    let mut pieces = Vec::new();
    let mut open: Option<(Px, Px)> = None;
    for place in walk(line, 1.0) {
        if keep_clear.iter().any(|k| k.grown(2.0).holds(place)) {
            pieces.extend(open.take().map(|(a, b)| vec![a, b]));
        } else {
            open = Some((open.map_or(place, |(a, _)| a), place));
        }
    }
    pieces.extend(open.map(|(a, b)| vec![a, b]));
    pieces
}

fn meets(line: &[Px], area: &Rect) -> bool {
    !clip(line, &area.grown(2.0)).is_empty()
}
