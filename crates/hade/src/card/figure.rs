//! A figure as data: axes and layers, without colours or pixels. `show` draws it, light or dark.

use serde::{Deserialize, Serialize};

/// A figure.
#[derive(Clone, Debug, PartialEq, Serialize, Deserialize)]
pub struct Figure {
    /// The caption: one sentence that says what is seen.
    pub caption: String,
    /// The text alternative, for whoever does not see the picture: its message and main numbers.
    pub alt: String,
    /// The horizontal axis.
    pub x: Axis,
    /// The vertical axis.
    pub y: Axis,
    /// Whether one unit is equally long on both axes (circles stay round).
    pub equal_scale: bool,
    /// What is drawn, from back to front.
    pub layers: Vec<Layer>,
}

/// An axis.
#[derive(Clone, Debug, PartialEq, Serialize, Deserialize)]
pub struct Axis {
    /// The label, with the unit.
    pub label: String,
    /// The lower end.
    pub min: f64,
    /// The upper end.
    pub max: f64,
    /// A fixed distance of ticks (30 for angles); otherwise the drawing chooses.
    pub tick: Option<f64>,
    /// Whether the axis grows downward (depth).
    pub downward: bool,
}

impl Axis {
    /// An axis between two ends.
    pub fn new(label: &str, min: f64, max: f64) -> Self {
        Axis { label: label.to_owned(), min, max, tick: None, downward: false }
    }
    /// With a fixed distance of ticks.
    pub fn ticks_every(self, tick: f64) -> Self {
        Axis { tick: Some(tick), ..self }
    }
    /// Growing downward.
    pub fn downward(self) -> Self {
        Axis { downward: true, ..self }
    }
}

/// What a layer stands for; the drawing gives each its colour, dash and weight, so that they differ
/// without colour too.
#[derive(Clone, Copy, Debug, PartialEq, Eq, Serialize, Deserialize)]
#[serde(rename_all = "snake_case")]
pub enum Role {
    /// The first quantity.
    First,
    /// The second quantity.
    Second,
    /// The third quantity.
    Third,
    /// The fourth quantity.
    Fourth,
    /// A strength or a limit that must not be passed.
    Limit,
    /// Where rock fails.
    Failing,
    /// A recommended range.
    Range,
    /// Helping lines.
    Quiet,
}

/// The shape of a point.
#[derive(Clone, Copy, Debug, PartialEq, Eq, Serialize, Deserialize)]
#[serde(rename_all = "snake_case")]
pub enum Mark {
    /// A filled dot.
    Dot,
    /// An upright cross.
    Cross,
    /// An open triangle.
    Triangle,
}

/// One thing drawn.
#[derive(Clone, Debug, PartialEq, Serialize, Deserialize)]
#[serde(tag = "layer", rename_all = "snake_case")]
pub enum Layer {
    /// A line through points.
    Line {
        /// The label written beside it, empty for none.
        label: String,
        /// What it stands for.
        role: Role,
        /// The points, x and y in the axes' units.
        points: Vec<[f64; 2]>,
    },
    /// A circle (drawn as an ellipse when the scales differ).
    Circle {
        /// The label written beside it, empty for none.
        label: String,
        /// What it stands for.
        role: Role,
        /// The centre.
        centre: [f64; 2],
        /// The radius, in x units.
        radius: f64,
        /// Only the half above the x axis.
        upper_half: bool,
    },
    /// A shaded interval of x over the whole height.
    ColumnBand {
        /// The label, empty for none.
        label: String,
        /// What it stands for.
        role: Role,
        /// From x.
        from: f64,
        /// To x.
        to: f64,
    },
    /// A shaded interval of y over the whole width.
    RowBand {
        /// The label, empty for none.
        label: String,
        /// What it stands for.
        role: Role,
        /// From y.
        from: f64,
        /// To y.
        to: f64,
    },
    /// Points with one shape.
    Points {
        /// The label, empty for none.
        label: String,
        /// What they stand for.
        role: Role,
        /// The shape.
        mark: Mark,
        /// The points.
        points: Vec<[f64; 2]>,
    },
    /// Words at a place.
    Words {
        /// The words.
        text: String,
        /// Where they begin.
        at: [f64; 2],
    },
}

impl Layer {
    /// A line through points, rounded to six figures to keep records small.
    pub fn line(label: &str, role: Role, points: impl IntoIterator<Item = [f64; 2]>) -> Self {
        Layer::Line {
            label: label.to_owned(),
            role,
            points: points.into_iter().map(|[x, y]| [six_figures(x), six_figures(y)]).collect(),
        }
    }
}

/// The number to six significant figures.
fn six_figures(value: f64) -> f64 {
    format!("{value:.5e}").parse().unwrap_or(value)
}
