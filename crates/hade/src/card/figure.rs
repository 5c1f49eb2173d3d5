//! A figure as data: axes and layers, without colours or pixels. `show` draws it, light or dark.

use serde::{Deserialize, Serialize};

use super::Projection;

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
    /// Whether only its label is drawn: no line, ticks or grid.
    #[serde(default, skip_serializing_if = "std::ops::Not::not")]
    pub hidden: bool,
}

impl Axis {
    /// An axis between two ends.
    pub fn new(label: &str, min: f64, max: f64) -> Self {
        Axis { label: label.to_owned(), min, max, tick: None, downward: false, hidden: false }
    }
    /// With a fixed distance of ticks.
    pub fn ticks_every(self, tick: f64) -> Self {
        Axis { tick: Some(tick), ..self }
    }
    /// Growing downward.
    pub fn downward(self) -> Self {
        Axis { downward: true, ..self }
    }
    /// Without line, ticks and grid.
    pub fn hidden(self) -> Self {
        Axis { hidden: true, ..self }
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
    /// An open dot.
    Ring,
    /// A filled square.
    Square,
    /// An open diamond.
    Diamond,
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
    /// An arrow.
    Arrow {
        /// The label, empty for none.
        label: String,
        /// What it stands for.
        role: Role,
        /// Where it begins.
        from: [f64; 2],
        /// Where its head is.
        to: [f64; 2],
    },
    /// A filled rectangle (named by words beside it).
    Bar {
        /// What it stands for.
        role: Role,
        /// One corner.
        from: [f64; 2],
        /// The opposite corner.
        to: [f64; 2],
    },
    /// The ground of a projected hemisphere, in a figure of equal scale without axes: the circle of
    /// radius 1 about the origin with compass letters, ticks every 30°, and a faint graticule of
    /// trends (30°) and plunges (30°, 60°). Places of the other layers are (east, north) on it.
    Net {
        /// The projection; it says where the graticule runs.
        projection: Projection,
    },
    /// A quantity over the inside of a net's circle: filled steps, labelled lines at round values,
    /// and a scale bar.
    Contours {
        /// What the scale bar says: the quantity with its unit.
        label: String,
        /// The number of values in a row, and of rows.
        side: usize,
        /// The values on a square grid from −1 to 1 each way, row by row from the south, each row
        /// from the west; `None` where there is no value.
        values: Vec<Option<f64>>,
    },
}

impl Layer {
    /// A quantity over the inside of a net's circle, from its value at a place (east, north).
    /// Values are rounded to a thousandth or less of their range, to keep records small; what is
    /// not finite is left out.
    pub fn contours(label: &str, side: usize, value: impl Fn([f64; 2]) -> f64) -> Self {
        let side = side.max(2);
        let along = |i: usize| 2.0 * i as f64 / (side - 1) as f64 - 1.0;
        let values: Vec<f64> = (0..side * side).map(|i| value([along(i % side), along(i / side)])).collect();
        let finite = || values.iter().copied().filter(|v| v.is_finite());
        let range = finite().fold(f64::NEG_INFINITY, f64::max) - finite().fold(f64::INFINITY, f64::min);
        let decimals =
            if range > 0.0 && range.is_finite() { (3.0 - range.log10().floor()).clamp(0.0, 15.0) } else { 6.0 };
        let rounded = |v: f64| format!("{v:.0$}", decimals as usize).parse().unwrap_or(v);
        let values = values.iter().map(|v| v.is_finite().then(|| rounded(*v))).collect();
        Layer::Contours { label: label.to_owned(), side, values }
    }
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
