//! The unrolled wall as a figure: tool face to the right, down the hole downward, seen from inside.

use super::image::WallImage;
use super::trace::Trace;
use crate::card::{Axis, Figure, Layer, Mark, Role};
use crate::units::{Angle, Quantity, fixed, with_typed_unit};
use crate::well::wall::direction;

/// Strokes of one crack along the stretch.
const STROKES: usize = 5;
/// The length of a stroke as a share of the stretch.
const STROKE: f64 = 0.11;

impl WallImage {
    pub(super) fn figure(&self) -> Figure {
        let length = self.length().si();
        let mut layers = Vec::new();
        for arc in self.failing() {
            if arc.whole_wall {
                layers.push(band(0.0, 360.0, "the whole wall fails"));
                continue;
            }
            let half = 0.5 * arc.width.in_deg();
            for middle in [-180.0, 0.0, 180.0, 360.0].map(|turn| arc.centre.in_deg() + turn) {
                let (from, to) = ((middle - half).max(0.0), (middle + half).min(360.0));
                if to > from {
                    layers.push(band(from, to, "fails"));
                }
            }
        }
        match self.trace() {
            Some(Trace::Along { toolface }) => {
                for turn in [0.0, 180.0] {
                    let x = toolface.to_degrees() + turn;
                    let label = if turn == 0.0 { "plane of weakness" } else { "" };
                    layers.push(Layer::line(label, Role::Second, [[x, 0.0], [x, length]]));
                }
            }
            Some(trace) => {
                let points = (0..=120)
                    .map(|k| f64::from(k) * 3.0)
                    .filter_map(|x| trace.at(x.to_radians()).map(|z| [x, 0.5 * length + z]));
                layers.push(Layer::line("plane of weakness", Role::Second, points));
            }
            None => {}
        }
        layers.extend(self.strokes(length));
        let attitude = self.wall.attitude;
        for (x, name) in [(0.0, "top"), (90.0, "right"), (180.0, "bottom"), (270.0, "left")] {
            layers.push(Layer::Points {
                label: direction::mark(attitude, name, Angle::deg(x)),
                role: Role::Quiet,
                mark: Mark::Triangle,
                points: vec![[x, 0.965 * length]],
            });
        }
        Figure {
            caption: format!(
                "The wall unrolled, seen from inside the hole, over one circumference of a hole {} wide at {} in it: hatched where it fails in shear, strokes for tensile cracks with their tilt{}. Triangles mark every 90° of tool face with its bearing. {}",
                with_typed_unit(self.inputs.hole_diameter),
                with_typed_unit(self.inputs.pressure),
                if self.outcome.plane.is_some() { ", the wave for the plane of weakness" } else { "" },
                direction::reference(attitude)
            ),
            alt: format!(
                "Unrolled wall over tool face 0 to 360° and {} m of hole: {}.",
                fixed(length, 3),
                self.headline()
            ),
            x: Axis::new("tool face (°)", 0.0, 360.0).ticks_every(30.0),
            y: Axis::new("distance down the hole (m)", 0.0, length).downward(),
            equal_scale: false,
            layers,
        }
    }

    /// Strokes at the tool face where each parted arc opens first, and on the far side, tilted as the
    /// cracks are; degrees of tool face are lengths of the circumference, which is as long as the stretch.
    fn strokes(&self, length: f64) -> Vec<Layer> {
        let mut layers: Vec<Layer> = Vec::new();
        for arc in self.cracks() {
            let Some((theta, tilt)) = arc.first.and_then(|first| Some((first.toolface.in_deg(), first.tilt?.si())))
            else {
                continue;
            };
            for (turn, sign) in [(0.0, 1.0), (180.0, -1.0)] {
                let (s, c) = (sign * tilt).sin_cos();
                let (dx, dy) = (-0.5 * STROKE * 360.0 * s, 0.5 * STROKE * length * c);
                for k in 0..STROKES {
                    let y = length * (0.12 + 0.72 * k as f64 / (STROKES - 1) as f64);
                    for over in [-360.0, 0.0, 360.0] {
                        let x = theta + turn + over;
                        if x + dx.abs() < 0.0 || x - dx.abs() > 360.0 {
                            continue;
                        }
                        let label = if layers.is_empty() { "tensile cracks" } else { "" };
                        layers.push(Layer::line(label, Role::Limit, [[x - dx, y - dy], [x + dx, y + dy]]));
                    }
                }
            }
        }
        layers
    }
}

fn band(from: f64, to: f64, label: &str) -> Layer {
    Layer::ColumnBand { label: label.to_owned(), role: Role::Failing, from, to }
}
