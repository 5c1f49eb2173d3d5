//! The ground of a projected hemisphere: its circle, compass, ticks and graticule.

use super::canvas::{Canvas, Hold, width};
use super::clip::{Px, Rect};
use super::frame::Frame;
use crate::card::{Figure, Layer, Projection, Role};
use crate::show::theme::{Palette, Pen};

/// The size of the compass letters, of the numbers between them, and of the graticule's.
const SIZES: [f64; 3] = [14.0, 11.0, 10.5];
/// From the circle to the middle of the compass letters.
const OUTSIDE: f64 = 17.0;
/// The length of a tick.
const TICK: f64 = 5.0;
/// The plunges of the graticule, in degrees.
const PLUNGES: [f64; 2] = [30.0, 60.0];

/// The ground of a net.
pub(super) struct Net {
    projection: Projection,
    centre: Px,
    radius: f64,
    /// Whether a quantity fills it, so that the graticule would only disturb.
    filled: bool,
}

impl Net {
    /// The ground of a figure that has one.
    pub fn of(figure: &Figure, frame: &Frame, filled: bool) -> Option<Net> {
        let projection = figure.layers.iter().find_map(|l| match l {
            Layer::Net { projection } => Some(*projection),
            _ => None,
        })?;
        let (centre, rim) = (frame.at([0.0, 0.0]), frame.at([1.0, 0.0]));
        let radius = rim[0] - centre[0];
        // An axis from 0 to 1e308 leaves no circle to draw.
        (centre.iter().all(|c| c.abs() < 1e6) && radius > 1.0 && radius < 1e5).then_some(Net {
            projection,
            centre,
            radius,
            filled,
        })
    }

    /// A place on an azimuth (degrees) at a distance from the centre in pixels.
    fn at(&self, azimuth: f64, distance: f64) -> Px {
        let (s, c) = azimuth.to_radians().sin_cos();
        [self.centre[0] + distance * s, self.centre[1] - distance * c]
    }

    /// The radius of a plunge (degrees) in pixels.
    fn ring(&self, plunge: f64) -> f64 {
        let (s, c) = plunge.to_radians().sin_cos();
        self.projection.place([c, 0.0, s]).map_or(0.0, |[_, y]| y * self.radius)
    }

    fn round(&self, radius: f64) -> Vec<Px> {
        (0..=120).map(|i| self.at(3.0 * f64::from(i), radius)).collect()
    }

    /// The compass texts with their places.
    fn compass(&self) -> Vec<(String, f64, Px)> {
        (0..12)
            .map(|i| {
                let azimuth = 30.0 * f64::from(i);
                let letter = match i {
                    0 => "N",
                    3 => "E",
                    6 => "S",
                    9 => "W",
                    _ => "",
                };
                let (text, size) = if letter.is_empty() {
                    (format!("{azimuth:03.0}"), SIZES[1])
                } else {
                    (letter.to_owned(), SIZES[0])
                };
                // Words are wider than high: those at the sides stand further off.
                let aside = 0.4 * (width(&text, size) - 8.0).max(0.0) * azimuth.to_radians().sin().abs();
                (text, size, self.at(azimuth, self.radius + OUTSIDE + aside))
            })
            .collect()
    }

    /// The numbers of the graticule, right of the south line.
    fn plunges(&self) -> Vec<(String, Px)> {
        if self.filled {
            return Vec::new();
        }
        PLUNGES.map(|p| (format!("{p:.0}°"), [self.centre[0] + 3.0, self.centre[1] + self.ring(p) - 7.0])).to_vec()
    }

    /// What labels keep clear of: the circle, and its own texts.
    pub fn outline(&self) -> (Vec<Px>, Vec<Rect>) {
        let around = |at: Px, wide: f64, high: f64| Rect {
            left: at[0] - wide / 2.0,
            right: at[0] + wide / 2.0,
            top: at[1] - high / 2.0,
            bottom: at[1] + high / 2.0,
        };
        let mut taken: Vec<Rect> =
            self.compass().iter().map(|(text, size, at)| around(*at, width(text, *size), *size)).collect();
        taken.extend(self.plunges().iter().map(|(text, at)| {
            let wide = width(text, SIZES[2]);
            around([at[0] + wide / 2.0, at[1]], wide, SIZES[2])
        }));
        (self.round(self.radius), taken)
    }

    /// Draws the graticule, which everything else stands on.
    pub fn draw_graticule(&self, canvas: &mut Canvas, palette: &Palette) {
        if self.filled {
            return;
        }
        let pen = Pen { line: palette.grid, width: 1.2, dash: &[], ..palette.pen(Role::Quiet) };
        let mut lines: Vec<Vec<Px>> = PLUNGES.map(|p| self.round(self.ring(p))).to_vec();
        let inner = self.ring(PLUNGES[1]);
        for i in 0..12_u32 {
            let azimuth = 30.0 * f64::from(i);
            // Only two lines cross at the centre.
            let from = if i % 3 == 0 { 0.0 } else { inner };
            lines.push(vec![self.at(azimuth, from), self.at(azimuth, self.radius)]);
        }
        canvas.lines(&lines, &pen);
    }

    /// Draws the circle, the ticks and the texts, over a quantity that fills it.
    pub fn draw_circle(&self, canvas: &mut Canvas, palette: &Palette) {
        let pen = Pen { width: 1.5, dash: &[], ..palette.pen(Role::Quiet) };
        let mut lines = vec![self.round(self.radius)];
        for i in 0..12 {
            let azimuth = 30.0 * f64::from(i);
            lines.push(vec![self.at(azimuth, self.radius), self.at(azimuth, self.radius + TICK)]);
        }
        if !self.filled {
            let [x, y] = self.centre;
            lines.push(vec![[x - 4.0, y], [x + 4.0, y]]);
            lines.push(vec![[x, y - 4.0], [x, y + 4.0]]);
        }
        canvas.lines(&lines, &pen);
        for (text, size, at) in self.compass() {
            let ink = if size == SIZES[0] { palette.ink } else { palette.soft };
            canvas.text(&text, at, Hold::Middle, size, ink);
        }
        for (text, at) in self.plunges() {
            canvas.text(&text, at, Hold::Start, SIZES[2], palette.soft);
        }
    }
}
