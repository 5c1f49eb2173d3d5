//! The frame of a figure: how large it is, where a value falls, and its axes.

use super::canvas::{Canvas, Hold, width};
use super::clip::{Px, Rect};
use super::labels::{LINE, SIZE, wrap};
use super::ticks::{ends, label, ticks};
use crate::card::{Figure, Role};
use crate::show::theme::{Palette, Pen};

/// The size of tick numbers in pixels.
const NUMBERS: f64 = 12.0;
/// The blank edge.
const EDGE: f64 = 12.0;
/// The width of a figure, and of one that grows downward.
const WIDTH: (f64, f64) = (720.0, 560.0);
/// The height of the drawing area where the scale does not say it, and of one that grows downward.
const HEIGHT: (f64, f64) = (310.0, 470.0);

/// The greatest height where both scales are equal, and where there are no axes besides.
const TALLEST: (f64, f64) = (500.0, 430.0);

/// What the layout leaves room for beside the axes.
#[derive(Clone, Copy, Debug, Default)]
pub(super) struct Margins {
    /// Labels at the ends of lines, at the right.
    pub right: f64,
    /// Labels of upright bands, in a strip along the side away from the x axis.
    pub strip: f64,
}

/// The frame.
pub(super) struct Frame {
    /// The whole picture.
    pub size: (f64, f64),
    /// The drawing area.
    pub area: Rect,
    /// The ends of the x axis.
    pub x: (f64, f64),
    /// The ends of the y axis.
    pub y: (f64, f64),
    /// Whether y grows downward; then the x axis is at the top.
    pub downward: bool,
    /// Whether the axes are hidden, x and y.
    hidden: (bool, bool),
    x_ticks: Vec<(f64, String)>,
    y_ticks: Vec<(f64, String)>,
    x_title: Vec<String>,
    y_title: Vec<String>,
}

impl Frame {
    pub fn of(figure: &Figure, margins: Margins) -> Frame {
        let (x, mut y) = (ends(&figure.x), ends(&figure.y));
        let downward = figure.y.downward;
        let pick = |(usual, deep)| if downward { deep } else { usual };
        let full_width: f64 = pick(WIDTH);
        let named = |(places, step): (Vec<f64>, f64)| {
            places.into_iter().map(|v| (v, label(v, step))).collect::<Vec<(f64, String)>>()
        };
        let widest = |ticks: &[(f64, String)]| ticks.iter().map(|(_, t)| width(t, NUMBERS)).fold(0.0, f64::max);

        let hidden = (figure.x.hidden, figure.y.hidden);
        let guess = named(ticks(y.0, y.1, figure.y.tick, 6.0));
        let left = if hidden.1 { EDGE } else { EDGE + widest(&guess).max(24.0) + 9.0 };
        let mut wide = full_width - left - (margins.right + EDGE).max(26.0);
        let mut high: f64 = pick(HEIGHT);
        if figure.equal_scale {
            let ratio = (y.1 - y.0) / (x.1 - x.0);
            high = wide * ratio;
            let tallest = if hidden == (true, true) { TALLEST.1 } else { TALLEST.0 };
            if high > tallest {
                high = tallest;
                wide = (high / ratio).max(60.0);
            }
            high = high.max(140.0);
            // Where a limit of size took hold, the axes take in more instead of losing the scale.
            let unit = wide / (x.1 - x.0);
            y.1 = y.1.max(y.0 + high / unit);
        }
        let mut y_ticks = named(ticks(y.0, y.1, figure.y.tick, high / 55.0));
        let room_x = widest(&named(ticks(x.0, x.1, figure.x.tick, 6.0))) + 34.0;
        let mut x_ticks = every_nth(named(ticks(x.0, x.1, figure.x.tick, (wide / room_x).clamp(2.0, 9.0))), wide);
        if hidden.0 {
            x_ticks.clear();
        }
        if hidden.1 {
            y_ticks.clear();
        }

        let right = left + wide;
        let total_width = (right + margins.right + EDGE).max(right + 26.0).max(260.0);
        let text_width = total_width - 2.0 * EDGE;
        let x_title = wrap(&figure.x.label, SIZE, text_width);
        let y_title = wrap(&figure.y.label, SIZE, text_width);
        let y_title_height = y_title.len() as f64 * LINE;
        let x_axis_height = title_gap(hidden.0) + x_title.len() as f64 * LINE;
        let above = y_title_height
            + if hidden.1 && y_title.is_empty() { 0.0 } else { 8.0 }
            + if downward { x_axis_height } else { margins.strip };
        let top = EDGE + above;
        let bottom = top + high;
        let below = if downward { margins.strip + 4.0 } else { x_axis_height };
        Frame {
            size: (total_width.ceil(), (bottom + below + EDGE - 2.0).ceil()),
            area: Rect { left, top, right, bottom },
            x,
            y,
            downward,
            hidden,
            x_ticks,
            y_ticks,
            x_title,
            y_title,
        }
    }

    /// Where a value falls; not a number stays not a number.
    pub fn at(&self, [x, y]: [f64; 2]) -> Px {
        let across = (x - self.x.0) / (self.x.1 - self.x.0);
        let along = (y - self.y.0) / (self.y.1 - self.y.0);
        let up = if self.downward { 1.0 - along } else { along };
        [self.area.left + across * self.area.width(), self.area.bottom - up * self.area.height()]
    }

    /// The middle of the strip for labels of upright bands.
    pub fn strip(&self) -> f64 {
        if self.downward { self.area.bottom + LINE / 2.0 + 3.0 } else { self.area.top - LINE / 2.0 - 3.0 }
    }

    /// The axes through zero, where zero is within the frame. A chart of rows, whose upright axis is hidden, has no line
    /// there: it would run through the words over the bars.
    pub fn zero_lines(&self) -> Vec<Vec<Px>> {
        let area = self.area;
        let [x, y] = self.at([0.0, 0.0]);
        let mut lines = Vec::new();
        if !self.hidden.1 && y > area.top + 1.0 && y < area.bottom - 1.0 {
            lines.push(vec![[area.left, y], [area.right, y]]);
        }
        if self.hidden == (false, false) && x > area.left + 1.0 && x < area.right - 1.0 {
            lines.push(vec![[x, area.top], [x, area.bottom]]);
        }
        lines
    }

    /// Draws the grid, which everything else stands on.
    pub fn draw_grid(&self, canvas: &mut Canvas, palette: &Palette) {
        let area = self.area;
        let grid = Pen { line: palette.grid, word: palette.soft, width: 1.0, dash: &[] };
        let mut lines: Vec<Vec<Px>> = Vec::new();
        for (value, _) in &self.x_ticks {
            let [x, _] = self.at([*value, self.y.0]);
            lines.push(vec![[x, area.top], [x, area.bottom]]);
        }
        for (value, _) in &self.y_ticks {
            let [_, y] = self.at([self.x.0, *value]);
            lines.push(vec![[area.left, y], [area.right, y]]);
        }
        canvas.lines(&lines, &grid);
    }

    /// Draws the axes with ticks, numbers and titles.
    pub fn draw_axes(&self, canvas: &mut Canvas, palette: &Palette) {
        let area = self.area;
        let pen = Pen { dash: &[], width: 1.2, ..palette.pen(Role::Quiet) };
        let (edge, out) = if self.downward { (area.top, -1.0) } else { (area.bottom, 1.0) };
        let mut lines = Vec::new();
        if !self.hidden.1 {
            lines.push(vec![[area.left, area.top], [area.left, area.bottom]]);
        }
        if !self.hidden.0 {
            lines.push(vec![[area.left, edge], [area.right, edge]]);
        }
        lines.extend(self.zero_lines());
        for (value, text) in &self.x_ticks {
            let [x, _] = self.at([*value, self.y.0]);
            lines.push(vec![[x, edge], [x, edge + 4.0 * out]]);
            if !text.is_empty() {
                canvas.text(text, [x, edge + 14.0 * out], Hold::Middle, NUMBERS, palette.soft);
            }
        }
        for (value, text) in &self.y_ticks {
            let [_, y] = self.at([self.x.0, *value]);
            lines.push(vec![[area.left - 4.0, y], [area.left, y]]);
            canvas.text(text, [area.left - 8.0, y], Hold::End, NUMBERS, palette.soft);
        }
        canvas.lines(&lines, &pen);

        for (i, line) in self.y_title.iter().enumerate() {
            let y = EDGE + (i as f64 + 0.5) * LINE;
            canvas.text(line, [EDGE, y], Hold::Start, SIZE, palette.ink);
        }
        let middle = (area.left + area.right) / 2.0;
        for (i, line) in self.x_title.iter().enumerate() {
            let half = width(line, SIZE) / 2.0;
            let x = middle.min(self.size.0 - EDGE - half).max(EDGE + half);
            let y = if self.downward {
                let from_edge = (self.x_title.len() - i) as f64 - 0.5;
                area.top - title_gap(self.hidden.0) - from_edge * LINE
            } else {
                area.bottom + title_gap(self.hidden.0) + (i as f64 + 0.5) * LINE
            };
            canvas.text(line, [x, y], Hold::Middle, SIZE, palette.ink);
        }
    }
}

/// From the x axis to its title: the room of its numbers.
fn title_gap(hidden: bool) -> f64 {
    if hidden { 4.0 } else { 24.0 }
}

/// Blanks the numbers of ticks so that those left do not touch.
fn every_nth(ticks: Vec<(f64, String)>, wide: f64) -> Vec<(f64, String)> {
    let widest = ticks.iter().map(|(_, t)| width(t, NUMBERS)).fold(0.0, f64::max) + 8.0;
    let fit = (wide / widest.max(1.0)).floor().max(1.0);
    let stride = (ticks.len() as f64 / fit).ceil().max(1.0) as usize;
    ticks.into_iter().enumerate().map(|(i, (v, t))| (v, if i % stride == 0 { t } else { String::new() })).collect()
}
