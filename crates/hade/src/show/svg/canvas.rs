//! The drawing surface: shapes by the plotting library's SVG backend, in tenths of a pixel because
//! its places are whole numbers; text, dashes and the frame of the document by this file, because
//! the backend has no subscripts and no dashes.

use std::fmt::Write as _;

use plotters::prelude::{DrawingBackend, RGBAColor, SVGBackend, ShapeStyle};

use super::clip::{Px, Rect};
use crate::show::theme::{Colour, Pen};
use crate::show::typeset::{LOWERED, escape, runs, runs_ems};

/// Steps of the backend in a pixel.
const FINE: f64 = 10.0;

/// Where a text is held.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub(super) enum Hold {
    Start,
    Middle,
    End,
}

/// A picture as it grows.
pub(super) struct Canvas {
    body: String,
}

impl Canvas {
    pub fn new() -> Self {
        Canvas { body: String::new() }
    }

    /// Lines of one pen.
    pub fn lines(&mut self, lines: &[Vec<Px>], pen: &Pen) {
        self.strokes(lines, pen, 1.0);
    }

    /// Lines of one pen, more or less see-through.
    pub fn strokes(&mut self, lines: &[Vec<Px>], pen: &Pen, opacity: f64) {
        let dash = pen.dash.iter().map(|d| tenths(*d).to_string()).collect::<Vec<_>>().join(" ");
        let attributes = if dash.is_empty() {
            " stroke-linejoin=\"round\" stroke-linecap=\"round\"".to_owned()
        } else {
            format!(" stroke-linejoin=\"round\" stroke-dasharray=\"{dash}\"")
        };
        let style = style(pen.line, opacity, pen.width);
        self.group(&attributes, |backend| {
            for line in lines {
                // The backend writes into a string, which cannot fail.
                let _ = backend.draw_path(line.iter().map(|p| grid(*p)), &style);
            }
        });
    }

    /// A filled rectangle.
    pub fn fill(&mut self, area: &Rect, colour: Colour, opacity: f64) {
        let style = style(colour, opacity, 0.0);
        let (a, b) = (grid([area.left, area.top]), grid([area.right, area.bottom]));
        self.group("", |backend| {
            let _ = backend.draw_rect(a, b, &style, true);
        });
    }

    /// Filled dots.
    pub fn dots(&mut self, places: &[Px], radius: f64, colour: Colour) {
        self.circles(places, radius, &style(colour, 1.0, 0.0), true);
    }

    /// Open dots.
    pub fn rings(&mut self, places: &[Px], radius: f64, pen: &Pen) {
        self.circles(places, radius, &style(pen.line, 1.0, pen.width), false);
    }

    fn circles(&mut self, places: &[Px], radius: f64, style: &ShapeStyle, filled: bool) {
        self.group("", |backend| {
            for place in places {
                let _ = backend.draw_circle(grid(*place), u32::try_from(tenths(radius)).unwrap_or(1), style, filled);
            }
        });
    }

    /// The inside of closed lines by the even–odd rule, which the backend does not have.
    pub fn region(&mut self, loops: &[Vec<Px>], colour: Colour) {
        let mut path = String::new();
        for line in loops {
            let mut last = None;
            for place in line {
                let here = grid(*place);
                let _ = match last {
                    None => write!(path, "M{} {}", here.0, here.1),
                    Some(last) if last == here => Ok(()),
                    Some((x, y)) => write!(path, "l{} {}", here.0 - x, here.1 - y),
                };
                last = Some(here);
            }
            if last.is_some() {
                path.push('Z');
            }
        }
        if !path.is_empty() {
            let fill = colour.hex();
            let _ = writeln!(
                self.body,
                "<path transform=\"scale(0.1)\" fill=\"{fill}\" fill-rule=\"evenodd\" d=\"{path}\"/>"
            );
        }
    }

    /// A line of text whose middle is at a height.
    pub fn text(&mut self, text: &str, at: Px, hold: Hold, size: f64, colour: Colour) {
        let [x, y] = at;
        let anchor = match hold {
            Hold::Start => "start",
            Hold::Middle => "middle",
            Hold::End => "end",
        };
        let runs = runs(text);
        // Some readers drop the blank after a subscript unless they are told to keep it.
        let keep = if runs.len() > 1 { " xml:space=\"preserve\"" } else { "" };
        let _ = write!(
            self.body,
            "<text{keep} x=\"{x:.1}\" y=\"{:.1}\" text-anchor=\"{anchor}\" font-size=\"{size}\" fill=\"{}\">",
            y + 0.36 * size,
            colour.hex()
        );
        let mut lowered = false;
        for run in runs {
            let drop = 0.22 * size * if run.lowered { 1.0 } else { -1.0 };
            let text = escape(&run.text);
            let _ = match (run.lowered, lowered) {
                (true, _) => {
                    write!(self.body, "<tspan dy=\"{drop:.1}\" font-size=\"{:.1}\">{text}</tspan>", size * LOWERED)
                }
                (false, true) => write!(self.body, "<tspan dy=\"{drop:.1}\">{text}</tspan>"),
                (false, false) => write!(self.body, "{text}"),
            };
            lowered = run.lowered;
        }
        self.body.push_str("</text>\n");
    }

    /// What one drawing of the backend adds, under the attributes it does not know.
    fn group(&mut self, attributes: &str, draw: impl FnOnce(&mut SVGBackend<'_>)) {
        let mut piece = String::new();
        {
            let mut backend = SVGBackend::with_string(&mut piece, (1, 1));
            draw(&mut backend);
            let _ = backend.present();
        }
        let shapes = piece.split_once(">\n").and_then(|(_, rest)| rest.rsplit_once("</svg>")).map_or("", |(s, _)| s);
        if !shapes.is_empty() {
            let _ = write!(self.body, "<g transform=\"scale(0.1)\"{attributes}>\n{shapes}</g>\n");
        }
    }

    /// The document.
    pub fn finish(self, width: f64, height: f64, title: &str, alt: &str, style: &str) -> String {
        format!(
            "<svg xmlns=\"http://www.w3.org/2000/svg\" role=\"img\" width=\"{width:.0}\" height=\"{height:.0}\" \
             viewBox=\"0 0 {width:.0} {height:.0}\" font-family=\"Inter, Helvetica, Arial, sans-serif\">\n\
             <title>{}</title>\n<desc>{}</desc>\n{style}{}</svg>\n",
            escape(title),
            escape(alt),
            self.body
        )
    }
}

/// An estimate of how wide a text will be, in pixels.
pub(super) fn width(text: &str, size: f64) -> f64 {
    runs_ems(&runs(text)) * size
}

fn style(colour: Colour, opacity: f64, width: f64) -> ShapeStyle {
    ShapeStyle {
        color: RGBAColor(colour.0, colour.1, colour.2, opacity),
        filled: false,
        stroke_width: u32::try_from(tenths(width)).unwrap_or(1),
    }
}

fn grid([x, y]: Px) -> (i32, i32) {
    (tenths(x), tenths(y))
}

/// Rounded to the backend's steps; the cast saturates and takes what is not a number as 0.
fn tenths(value: f64) -> i32 {
    (value * FINE).round() as i32
}
