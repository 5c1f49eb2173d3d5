//! The failing zone round a hole in its cross-section, looking down the hole: its right to the right,
//! its top up.

use std::f64::consts::{PI, TAU};

use super::failure_depth::FailureDepth;
use crate::card::{Axis, Figure, Layer, Mark, Role};
use crate::units::{Angle, Quantity, fixed, with_typed_unit};
use crate::well::wall::direction;

/// Degrees from look to look.
const STEP: f64 = 2.0;
/// Every so many of them is hatched.
const STROKE: usize = 2;
/// No more radii than this are drawn to either side.
const MOST: f64 = 6.0;

/// Where a tool face and a distance fall.
fn place(theta: f64, ratio: f64) -> [f64; 2] {
    let (s, c) = theta.sin_cos();
    [ratio * s, ratio * c]
}

impl FailureDepth {
    pub(super) fn figure(&self) -> Figure {
        let deepest = self.outcome.deepest.map_or(1.0, |d| d.radius_ratio);
        let widest = (1.18 * deepest + 0.1).clamp(1.5, MOST);
        let mut layers = if self.far_field_fails() { Vec::new() } else { self.zone(2.0 * widest) };
        if self.far_field_fails() {
            layers.push(Layer::Words {
                text: "the far field is beyond the strength".to_owned(),
                at: [-0.9 * widest, -0.9 * widest],
            });
        }
        layers.push(Layer::Circle {
            label: String::new(),
            role: Role::First,
            centre: [0.0, 0.0],
            radius: 1.0,
            upper_half: false,
        });
        let attitude = self.wall.attitude;
        for (k, name) in ["top", "right", "bottom", "left"].into_iter().enumerate() {
            let theta = k as f64 * 0.5 * PI;
            layers.push(Layer::Points {
                label: direction::mark(attitude, name, Angle::from_si(theta)),
                role: Role::Quiet,
                mark: Mark::Cross,
                points: vec![place(theta, 0.93)],
            });
        }
        if let Some(found) = self.outcome.deepest
            && let Some(toolface) = found.toolface
        {
            let both = [0.0, PI].map(|turn| place(toolface.si() + turn, found.radius_ratio));
            layers.push(Layer::Points {
                label: format!("{} radii", fixed(found.radius_ratio, 3)),
                role: Role::Limit,
                mark: Mark::Diamond,
                points: both.to_vec(),
            });
        }
        let axis = |label: &str| Axis::new(label, -widest, widest);
        Figure {
            caption: format!(
                "Cross-section of the hole looking down it at {} in the hole: rock beyond its strength by the elastic field is hatched. The hole is the circle; distances in hole radii; crosses mark every 90° of tool face with its bearing. {}",
                with_typed_unit(self.inputs.pressure),
                direction::reference(attitude)
            ),
            alt: format!("Circle of the hole with the zone beyond strength round it: {}.", self.headline()),
            x: axis("to the right of the hole's axis (hole radii)"),
            y: axis("above it (hole radii)"),
            equal_scale: true,
            layers,
        }
    }

    /// Hatching and outline of what fails, not drawn beyond a distance.
    fn zone(&self, reach: f64) -> Vec<Layer> {
        let failing = self.wall.shear.failing(self.inputs.pressure.si());
        let mut places: Vec<f64> = (0..(180.0 / STEP) as usize).map(|k| (k as f64 * STEP).to_radians()).collect();
        places.extend(self.outcome.deepest.and_then(|d| d.toolface).map(Angle::si));
        places.sort_by(f64::total_cmp);
        let half: Vec<(f64, Vec<(f64, f64)>)> =
            places.into_iter().map(|theta| (theta, self.stretches(theta))).collect();
        // Everything repeats on the far side.
        let round: Vec<(f64, &Vec<(f64, f64)>)> =
            [0.0, PI].into_iter().flat_map(|turn| half.iter().map(move |(t, s)| (t + turn, s))).collect();
        let edges: Vec<f64> = failing.list().iter().flat_map(|(from, to)| [0.5 * from, 0.5 * to]).collect();
        let mut layers = Vec::new();
        let most = round.iter().map(|(_, s)| s.len()).max().unwrap_or(0);
        for nth in 0..most {
            let list: Vec<(f64, Option<(f64, f64)>)> = round
                .iter()
                .map(|(t, s)| (*t, s.get(nth).map(|(from, to)| (from.min(reach), to.min(reach)))))
                .collect();
            for run in runs(&list) {
                layers.extend(drawn(&run, &edges));
            }
        }
        layers
    }
}

/// Neighbouring tool faces that fail, each list in rising order; it may pass 360°.
fn runs(list: &[(f64, Option<(f64, f64)>)]) -> Vec<Vec<(f64, f64, f64)>> {
    let Some(sound) = list.iter().position(|(_, s)| s.is_none()) else {
        let all = list.iter().chain(list.first()).enumerate();
        let last = list.len();
        let whole = all.filter_map(|(k, (t, s))| s.map(|(a, b)| (if k == last { t + TAU } else { *t }, a, b)));
        return vec![whole.collect()];
    };
    let mut out: Vec<Vec<(f64, f64, f64)>> = Vec::new();
    let mut open = false;
    let turned = list.iter().skip(sound).map(|(t, s)| (*t, *s));
    let wrapped = list.iter().take(sound).map(|(t, s)| (*t + TAU, *s));
    for (theta, stretch) in turned.chain(wrapped) {
        match stretch {
            None => open = false,
            Some((from, to)) => {
                if !open {
                    out.push(Vec::new());
                }
                open = true;
                if let Some(run) = out.last_mut() {
                    run.push((theta, from, to));
                }
            }
        }
    }
    out
}

/// The outline of one zone and its hatching.
fn drawn(run: &[(f64, f64, f64)], edges: &[f64]) -> Vec<Layer> {
    let (Some(first), Some(last)) = (run.first(), run.last()) else { return Vec::new() };
    // Where the zone ends at the wall, between two looks.
    let step = STEP.to_radians() * 1.001;
    let tip = |theta: f64, sense: f64| {
        let off = |edge: f64| (sense * (edge - theta)).rem_euclid(PI);
        edges
            .iter()
            .map(|edge| off(*edge))
            .filter(|off| *off <= step)
            .fold(None, |m: Option<f64>, o| Some(m.map_or(o, |m| m.min(o))))
    };
    let whole = last.0 - first.0 > TAU - 1e-9;
    let mut outer: Vec<[f64; 2]> = Vec::new();
    if let Some(off) = tip(first.0, -1.0).filter(|_| !whole && first.1 <= 1.0) {
        outer.push(place(first.0 - off, 1.0));
    }
    outer.extend(run.iter().map(|(theta, _, to)| place(*theta, *to)));
    if let Some(off) = tip(last.0, 1.0).filter(|_| !whole && last.1 <= 1.0) {
        outer.push(place(last.0 + off, 1.0));
    }
    let inner = run.iter().rev().map(|(theta, from, _)| place(*theta, *from));
    let mut layers = Vec::new();
    if whole {
        layers.push(Layer::line("", Role::Failing, inner));
        layers.push(Layer::line("", Role::Failing, outer));
    } else {
        let start = outer.first().copied();
        layers.push(Layer::line("", Role::Failing, outer.into_iter().chain(inner).chain(start)));
    }
    // There and back along each radius: strokes with the edges between them.
    let strokes = run.iter().step_by(STROKE).enumerate().flat_map(|(k, (theta, from, to))| {
        let ends = [place(*theta, *from), place(*theta, *to)];
        if k % 2 == 0 { ends } else { [ends[1], ends[0]] }
    });
    layers.push(Layer::line("", Role::Failing, strokes));
    layers
}
