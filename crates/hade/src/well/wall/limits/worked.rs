//! A limit with its numbers put in, at the place of the wall that sets it.

use super::card::capitalised;
use super::limit::{Limit, LimitKind};
use super::limits::Limits;
use crate::card::Step;
use crate::units::{Angle, Quantity, as_typed, fixed};
use crate::well::wall::round::on_circle;
use crate::well::wall::{Wall, direction, method};

impl Limits {
    /// One of these limits: the place, the stresses there, and what they meet. Nothing where there is no such
    /// pressure, or where it is the far field's.
    pub(crate) fn worked(&self, limit: &Limit) -> Vec<Step> {
        let (wall, width) = (&self.wall, self.width);
        let kind = limit.kind();
        if matches!(kind, LimitKind::LeastStress | LimitKind::PorePressure) {
            return Vec::new();
        }
        let Some(pressure) = limit.pressure().or(limit.least_bad()) else { return Vec::new() };
        let name = capitalised(kind.words());
        let words = |toolface: Angle| direction::words(wall.attitude, toolface);
        let edges = (kind == LimitKind::LowerShear && width.si() > 0.0 && limit.pressure().is_some())
            .then(|| widest_arc(wall, pressure.si()));
        let (theta, place) = match (edges.flatten(), limit.toolface()) {
            (Some((from, to)), _) => {
                let edge = Angle::from_si(0.5 * to);
                let place = format!(
                    "{name} at {pressure}, {}° allowed: the widest arc that fails runs from tool face {}° to {}°, {}° wide; at its edge, tool face {}, the criterion is just met:",
                    as_typed(width.in_deg()),
                    fixed((0.5 * from).to_degrees(), 4),
                    fixed((0.5 * to).to_degrees(), 4),
                    fixed((0.5 * (to - from)).to_degrees(), 4),
                    words(edge)
                );
                (edge, place)
            }
            (None, Some(toolface)) => (toolface, format!("{name} at {pressure}, tool face {}:", words(toolface))),
            (None, None) => (Angle::default(), format!("{name} at {pressure}, any tool face:")),
        };
        let mut steps = vec![Step::words(place)];
        steps.extend(method::worked(wall, theta.si(), pressure.si()));
        if matches!(kind, LimitKind::Initiation | LimitKind::Reopening) {
            let [.., s3] = limit.effective().unwrap_or_default();
            steps.push(Step::worked(format!(
                "least effective principal stress = {} MPa against −T₀ = −{} MPa",
                fixed(s3.in_mpa(), 4),
                as_typed(wall.setup.inputs.rock.tensile_strength.in_mpa())
            )));
        } else {
            steps.extend(method::worked_strength(wall, theta.si(), pressure.si()));
        }
        steps
    }
}

/// The widest of the arcs that fail at a pressure, by its edges in φ = 2θ; the second within a turn from zero.
fn widest_arc(wall: &Wall, pressure: f64) -> Option<(f64, f64)> {
    let arcs = wall.shear.failing(pressure);
    let widest = arcs.list().iter().copied().reduce(|a, b| if b.1 - b.0 > a.1 - a.0 { b } else { a });
    widest.filter(|_| !arcs.whole).map(|(from, to)| (on_circle(to) - (to - from), on_circle(to)))
}
