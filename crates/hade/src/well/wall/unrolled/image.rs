//! What an image of the wall should show at a pressure: failing arcs, tensile cracks and the plane of
//! weakness on the unrolled wall.

use serde::{Deserialize, Serialize};

use super::trace::Trace;
use crate::card::{Card, Check, Column, Explain, Explanation, Formula, Item, Step, Table};
use crate::error::{Error, Result};
use crate::frames::vector::{add, apply, dot, scale};
use crate::units::{Angle, Length, Pressure, Quantity, fixed, with_typed_unit};
use crate::well::wall::around::{ArcsOutcome, Breakout, check_arcs};
use crate::well::wall::second_route::{ByVectors, bearing_check};
use crate::well::wall::setup::WallSetup;
use crate::well::wall::tension::{CrackArc, CracksOutcome, TensileCracks, crack_method, place_items, worked_tilt};
use crate::well::wall::{Wall, direction, method, pressure_item};

/// The predicted traces on an unrolled image of the wall, over one circumference of hole length: tool
/// face to the right, down the hole downward, seen from inside the hole.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct WallImage {
    pub(super) wall: Wall,
    pub(super) inputs: ImageInputs,
    pub(super) outcome: ImageOutcome,
}

/// The inputs of an image.
#[derive(Clone, Copy, Debug, PartialEq, Serialize, Deserialize)]
pub struct ImageInputs {
    wall: WallSetup,
    pub(super) pressure: Pressure,
    pub(super) hole_diameter: Length,
}

/// The trace of the plane of weakness on the unrolled wall.
#[derive(Clone, Copy, Debug, PartialEq, Serialize, Deserialize)]
#[non_exhaustive]
pub struct PlaneTrace {
    /// Half the height of its wave along the hole, from the middle to the crest; `None` for a plane along
    /// the hole, which leaves two straight lines.
    pub half_height: Option<Length>,
    /// The tool face at which the wave is farthest down the hole, 0–360°; for a plane along the hole that
    /// of one of its lines, 0–180°, the other at +180°; `None` for a plane across the hole.
    pub toolface: Option<Angle>,
    /// The bearing of that tool face; `None` also where it points straight up or down.
    pub bearing: Option<Angle>,
}

/// What came out.
#[derive(Clone, Copy, Debug, PartialEq, Serialize, Deserialize)]
pub struct ImageOutcome {
    pub(super) arcs: ArcsOutcome,
    pub(super) cracks: CracksOutcome,
    pub(super) plane: Option<PlaneTrace>,
}

impl Wall {
    /// What an image of the wall should show at a pressure, on the unrolled wall of a hole of this
    /// diameter and as long as its circumference: the arcs that fail in shear, the tensile cracks with
    /// their tilt, and the plane of weakness.
    ///
    /// # Errors
    /// When the pressure is not a finite number, or the diameter is not above zero.
    pub fn unrolled(&self, pressure: Pressure, hole_diameter: Length) -> Result<WallImage> {
        pressure.finite("wall pressure")?;
        let diameter = hole_diameter.si();
        if !(diameter.is_finite() && diameter > 0.0) {
            return Err(Error::out_of_range("hole diameter", with_typed_unit(hole_diameter), "above zero"));
        }
        let outcome = ImageOutcome {
            arcs: self.arcs_outcome(pressure),
            cracks: self.cracks_outcome(pressure.si()),
            plane: self.plane_trace(0.5 * diameter).map(|trace| {
                let (half_height, theta) = match trace {
                    Trace::Wave { half_height, lowest } => (Some(half_height), lowest),
                    Trace::Along { toolface } => (None, Some(toolface)),
                };
                PlaneTrace {
                    half_height: half_height.map(Length::from_si),
                    toolface: theta.map(Angle::from_si),
                    bearing: theta.and_then(|theta| direction::bearing(self.attitude, theta)),
                }
            }),
        };
        Ok(WallImage { wall: *self, inputs: ImageInputs { wall: self.setup, pressure, hole_diameter }, outcome })
    }

    fn plane_trace(&self, radius: f64) -> Option<Trace> {
        let weak = self.setup.weak_plane?;
        let normal = apply(&self.attitude.matrix().ok()?, weak.plane.axes().ok()?.normal);
        Some(Trace::of(normal, radius))
    }
}

impl WallImage {
    /// The arcs that fail in shear, widest first; each repeats at +180°.
    pub fn failing(&self) -> Vec<Breakout> {
        self.outcome.arcs.list().collect()
    }

    /// The arcs that are parted in tension, widest first; each repeats at +180° with the tilt of the
    /// other sign.
    pub fn cracks(&self) -> Vec<CrackArc> {
        self.outcome.cracks.list().collect()
    }

    /// The trace of the plane of weakness; `None` where the wall has none.
    pub fn plane(&self) -> Option<PlaneTrace> {
        self.outcome.plane
    }

    /// The length of hole that is shown: one circumference.
    pub fn length(&self) -> Length {
        Length::from_si(std::f64::consts::PI * self.inputs.hole_diameter.si())
    }

    pub(super) fn trace(&self) -> Option<Trace> {
        self.wall.plane_trace(0.5 * self.inputs.hole_diameter.si())
    }

    fn as_cracks(&self) -> Option<TensileCracks> {
        self.wall.tensile_cracks(self.inputs.pressure).ok()
    }
}

impl Explain for WallImage {
    const KIND: &'static str = "wall-image";
    type Inputs = ImageInputs;
    type Outcome = ImageOutcome;
    // The first place of a second arc is where a smooth function is least, found to half the digits.
    const REPLAY_TOLERANCE: f64 = 1e-7;

    fn compute(inputs: ImageInputs) -> Result<Self> {
        Wall::of(inputs.wall)?.unrolled(inputs.pressure, inputs.hole_diameter)
    }
    fn inputs(&self) -> ImageInputs {
        self.inputs
    }
    fn outcome(&self) -> ImageOutcome {
        self.outcome
    }

    fn check(inputs: &ImageInputs, outcome: &ImageOutcome) -> Vec<Check> {
        let Some(route) = ByVectors::new(&inputs.wall) else { return Vec::new() };
        let pressure = inputs.pressure.si();
        let mut checks = check_arcs(&route, pressure, &outcome.arcs);
        checks.extend(outcome.cracks.checks(&inputs.wall, pressure));
        checks.extend(plane_checks(&route, inputs, outcome.plane));
        checks
    }

    fn explain(&self) -> Explanation {
        let (pressure, diameter) = (self.inputs.pressure, self.inputs.hole_diameter);
        let mut inputs = self.wall.items();
        inputs.push(pressure_item(pressure));
        inputs.push(Item::typed("d_h", "hole diameter", diameter));
        let words = "What an image of the wall should show: the arcs where the elastic stress is beyond the shear strength, the cracks where it is beyond −T₀ with their tilt, and the trace of the plane of weakness.";
        let mut method = method::with_strength(&self.wall, words);
        let cracks = crack_method(&self.wall, words);
        let missing = |f: &Formula, have: &[Formula]| !have.iter().any(|h| h.text == f.text);
        let formulas: Vec<Formula> = cracks.formulas.into_iter().filter(|f| missing(f, &method.formulas)).collect();
        method.formulas.extend(formulas);
        method.symbols = cracks.symbols;
        method.references.extend(cracks.references.into_iter().rev().take(2).rev());
        method.assumptions.extend(cracks.assumptions.last().cloned());
        if self.outcome.plane.is_some() {
            method.formulas.push(Formula::new(
                "z(theta) = -D / (2 n_z) (n_x cos theta + n_y sin theta)",
                "z(θ) = −D / (2 n_z) · (n_x cos θ + n_y sin θ), down the hole, with the plane's normal n in the hole's axes",
            ));
        }
        let mut steps = Vec::new();
        if let Some(cracks) = self.as_cracks()
            && let Some(first) = cracks.first()
        {
            steps.push(Step::words("Where the least stress in the wall is least:"));
            steps.extend(method::worked(&self.wall, first.toolface.si(), pressure.si()));
            steps.push(worked_tilt(&self.wall, &first, pressure.si()));
        }
        steps.extend(self.worked_plane());
        steps.push(Step::Table { table: self.table() });
        let mut notes = method::notes(&self.wall);
        notes.push("Seen from inside the hole, down-hole down: tool face grows to the right. Bands and cracks are where the elastic wall fails at first; how long a crack or a breakout is along the hole, and how far apart, is not predicted: the strokes only show tool face and tilt.".to_owned());
        if self.outcome.plane.is_some() {
            notes.push(
                "The plane of weakness is drawn once, through the middle of the stretch; it recurs as often as the rock has it."
                    .to_owned(),
            );
        }
        Explanation {
            title: format!("Traces on the wall of {} at {}", self.wall.place(), with_typed_unit(pressure)),
            headline: self.headline(),
            inputs,
            results: self.results(),
            method,
            steps,
            figures: vec![self.figure()],
            notes,
            topics: self.wall.topics(&["wall", "breakout", "tensile", "elastic"]),
        }
    }

    fn upstream(&self) -> Vec<Card> {
        self.wall.upstream()
    }
}

/// A length to the millimetre.
fn length_item(symbol: &str, name: &str, length: Length) -> Item {
    Item::new(symbol, name, Length::KIND, vec![length.si()], format!("{} m", fixed(length.si(), 3)))
}

/// The trace by vectors in north, east, down: its farthest point lies on the plane, and the plane is level
/// there going round.
fn plane_checks(route: &ByVectors, inputs: &ImageInputs, plane: Option<PlaneTrace>) -> Vec<Check> {
    let (Some(plane), Some(weak)) = (plane, inputs.wall.weak_plane) else { return Vec::new() };
    let Ok(axes) = weak.plane.axes() else { return Vec::new() };
    let radius = 0.5 * inputs.hole_diameter.si();
    let theta = plane.toolface.unwrap_or_default().si();
    let outward = route.direction(theta);
    let around = route.direction(theta + std::f64::consts::FRAC_PI_2);
    let (down, level) = match plane.half_height {
        Some(half) => (half.si(), dot(axes.normal, around)),
        None => (0.0, dot(axes.normal, route.direction_along())),
    };
    let off = dot(axes.normal, add(scale(outward, radius), scale(route.direction_along(), down)));
    let mut checks = vec![
        Check::compare(
            "the farthest point of the plane's trace lies on the plane, as a vector in north, east, down",
            &[off],
            &[0.0],
            1e-11 * (radius + down.abs()),
            "m",
        ),
        Check::compare(
            "and the plane is level there going round (along the hole, for a plane along it)",
            &[level],
            &[0.0],
            1e-8,
            "",
        ),
        Check::holds("and it is farther down the hole than the middle", -down, 0.0, "m"),
    ];
    if let Some(bearing) = plane.bearing {
        checks.push(bearing_check(outward, bearing));
    }
    checks
}

impl WallImage {
    pub(super) fn headline(&self) -> String {
        let arcs = match self.outcome.arcs.widest() {
            None => "no arc fails in shear".to_owned(),
            Some(arc) if arc.whole_wall => "the whole wall fails in shear".to_owned(),
            Some(arc) => format!(
                "failing arcs {} wide at tool face {} and +180°",
                arc.width,
                direction::words(self.wall.attitude, arc.centre)
            ),
        };
        let cracks = self.as_cracks().map_or_else(String::new, |cracks| format!("; {}", cracks.words()));
        let plane = match self.outcome.plane {
            None => String::new(),
            Some(PlaneTrace { half_height: None, toolface: Some(at), .. }) => {
                format!("; the plane of weakness runs along the hole at tool face {at} and +180°")
            }
            Some(PlaneTrace { half_height: Some(half), toolface: Some(at), .. }) => format!(
                "; the plane of weakness is a wave {} m from middle to crest, lowest at tool face {}",
                fixed(half.si(), 3),
                direction::words(self.wall.attitude, at)
            ),
            Some(_) => "; the plane of weakness runs straight across".to_owned(),
        };
        format!("{arcs}{cracks}{plane}")
    }

    fn results(&self) -> Vec<Item> {
        let attitude = self.wall.attitude;
        let mut results = vec![
            Item::computed("m", method::margin_name(&self.wall), self.outcome.arcs.least_margin()),
            length_item("L", "length of hole shown: one circumference", self.length()),
        ];
        for (arc, n) in self.failing().into_iter().zip(1..) {
            results.extend(direction::items(
                attitude,
                &format!("the middle of failing arc {n}"),
                &format!("f{n}"),
                arc.centre,
            ));
            results.push(Item::computed(&format!("w_f{n}"), format!("width of failing arc {n}"), arc.width));
        }
        for (arc, n) in self.cracks().into_iter().zip(1..) {
            results.push(Item::computed(&format!("w_t{n}"), format!("width of parted arc {n}"), arc.width));
            if let Some(first) = arc.first {
                let of = format!("the first crack of parted arc {n}");
                results.extend(place_items(&self.wall, &of, &format!("t{n}"), &first));
            }
        }
        if let Some(plane) = self.outcome.plane {
            if let Some(half) = plane.half_height {
                results.push(length_item("h_w", "half-height of the plane's trace along the hole", half));
            }
            if let Some(toolface) = plane.toolface {
                let of = if plane.half_height.is_some() { "the trace's lowest point" } else { "a line of the plane" };
                results.extend(direction::items(attitude, of, "w", toolface));
            }
        }
        results
    }

    fn worked_plane(&self) -> Vec<Step> {
        let (Some(plane), Some(weak)) = (self.outcome.plane, self.wall.setup.weak_plane) else { return Vec::new() };
        let (Ok(q), Ok(axes)) = (self.wall.attitude.matrix(), weak.plane.axes()) else { return Vec::new() };
        let [x, y, z] = apply(&q, axes.normal).map(|v| fixed(v, 6));
        let ends = match (plane.half_height, plane.toolface) {
            (Some(half), Some(at)) => format!(
                "half-height d_h √(n_x² + n_y²) / (2 |n_z|) = {} m, lowest at tool face {}°",
                fixed(half.si(), 4),
                fixed(at.in_deg(), 3)
            ),
            (None, Some(at)) => format!("n_z is none: lines along the hole at {}° and +180°", fixed(at.in_deg(), 3)),
            _ => "n_x and n_y are none: a straight line across".to_owned(),
        };
        vec![Step::worked(format!("normal of the plane of weakness in the hole's axes: ({x}, {y}, {z}); {ends}"))]
    }

    fn table(&self) -> Table {
        let attitude = self.wall.attitude;
        let mut rows = Vec::new();
        let bearing = |degrees: f64| direction::bearing_cell(attitude, Angle::deg(degrees));
        let round = |degrees: f64| degrees.rem_euclid(360.0);
        let tilt_cell = |tilt: Option<Angle>, sign: f64| tilt.map_or("–".to_owned(), |t| fixed(sign * t.in_deg(), 2));
        for turn in [0.0, 180.0] {
            let sign = if turn == 0.0 { 1.0 } else { -1.0 };
            for arc in self.failing() {
                let (middle, half) = (arc.centre.in_deg() + turn, 0.5 * arc.width.in_deg());
                rows.push(vec![
                    "fails in shear".to_owned(),
                    fixed(round(middle), 2),
                    bearing(middle),
                    fixed(round(middle - half), 2),
                    fixed(round(middle + half), 2),
                    "–".to_owned(),
                ]);
            }
            for arc in self.cracks() {
                let (middle, half) = (arc.centre.in_deg() + turn, 0.5 * arc.width.in_deg());
                let at = arc.first.map(|first| first.toolface.in_deg() + turn);
                rows.push(vec![
                    "tensile crack".to_owned(),
                    at.map_or("–".to_owned(), |at| fixed(round(at), 2)),
                    at.map_or("–".to_owned(), bearing),
                    fixed(round(middle - half), 2),
                    fixed(round(middle + half), 2),
                    tilt_cell(arc.first.and_then(|first| first.tilt), sign),
                ]);
            }
        }
        if let Some(PlaneTrace { half_height, toolface, .. }) = self.outcome.plane {
            let at = toolface.map(Angle::in_deg);
            rows.push(vec![
                match half_height {
                    Some(half) => format!("plane of weakness, lowest, {} m below its middle", fixed(half.si(), 4)),
                    None => "plane of weakness, along the hole".to_owned(),
                },
                at.map_or("–".to_owned(), |at| fixed(at, 2)),
                at.map_or("–".to_owned(), bearing),
                "–".to_owned(),
                "–".to_owned(),
                "–".to_owned(),
            ]);
        }
        if rows.is_empty() {
            rows.push(std::iter::once("nothing").chain(["–"; 5]).map(str::to_owned).collect());
        }
        Table {
            caption: "Traces on the wall, both sides; a tilt is clockwise from the hole's axis seen from inside"
                .to_owned(),
            columns: vec![
                Column::text("trace"),
                Column::number("tool face", "°"),
                Column::number("bearing", "°"),
                Column::number("from", "°"),
                Column::number("to", "°"),
                Column::number("tilt", "°"),
            ],
            rows,
        }
    }
}
