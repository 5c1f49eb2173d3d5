//! Shear against effective normal stress: Mohr's circles, the strength, and planes as points.

use super::slip::FaultState;
use super::strength::FaultStrength;
use crate::card::{Axis, Figure, Layer, Mark, Role};
use crate::frames::Geographic;
use crate::stress::Stress;
use crate::units::{Pressure, fixed};

/// A plane as a point of the figure, with the name that is written beside it (empty for none).
pub(super) struct Point {
    pub name: String,
    pub effective_normal: Pressure,
    pub shear: Pressure,
    pub state: FaultState,
}

/// The figure. `points` come with the worst first.
pub(super) fn mohr(
    stress: &Stress<Geographic>,
    pore: Pressure,
    strength: Option<FaultStrength>,
    points: &[Point],
    caption: String,
    alt: String,
) -> Figure {
    let [s1, s2, s3] = stress.principals().magnitudes().map(|s| (s - pore).in_mpa());
    let span = (s1 - s3).max(0.1 * s1.abs()).max(1e-3);
    let least = points.iter().map(|p| p.effective_normal.in_mpa()).fold(s3.min(0.0), f64::min);
    let left = if least < 0.0 { least - 0.08 * span } else { 0.0 };
    let right = s1.max(0.0) + 0.12 * span;
    let highest = points.iter().map(|p| p.shear.in_mpa()).fold(0.5 * (s1 - s3), f64::max);
    // Room for the line of strength, unless it lies far above every circle.
    let line = strength.map(|s| s.cohesion.in_mpa() + 0.3 * s.friction * right).filter(|y| *y <= right.max(span));
    let top = highest.max(0.25 * (right - left)).max(line.unwrap_or(0.0)) * 1.2;
    let mut layers = Vec::new();
    for (a, b) in [(s1, s3), (s1, s2), (s2, s3)] {
        layers.push(Layer::Circle {
            label: String::new(),
            role: Role::Quiet,
            centre: [0.5 * (a + b), 0.0],
            radius: 0.5 * (a - b),
            upper_half: true,
        });
    }
    if let Some(strength) = strength {
        let (cohesion, friction) = (strength.cohesion.in_mpa(), strength.friction);
        // The line ends at the frame, so that its name stands beside its end.
        let end = right.min((top - cohesion).max(0.0) / friction);
        layers.push(Layer::line(
            &format!("strength, {}", strength.words()),
            Role::Limit,
            [[0.0, cohesion], [end, cohesion + friction * end]],
        ));
    }
    let place = |p: &Point| [p.effective_normal.in_mpa(), p.shear.in_mpa()];
    let groups = [
        (FaultState::Holds, Role::First, Mark::Dot),
        (FaultState::Slips, Role::Failing, Mark::Triangle),
        (FaultState::Open, Role::Failing, Mark::Cross),
    ];
    for (state, role, mark) in groups {
        let unnamed: Vec<[f64; 2]> =
            points.iter().filter(|p| p.state == state && p.name.is_empty()).map(place).collect();
        if !unnamed.is_empty() {
            layers.push(Layer::Points { label: String::new(), role, mark, points: unnamed });
        }
        for point in points.iter().filter(|p| p.state == state && !p.name.is_empty()) {
            layers.push(Layer::Points { label: point.name.clone(), role, mark, points: vec![place(point)] });
        }
    }
    Figure {
        caption,
        alt: format!("{alt} Effective principal stresses {}, {} and {} MPa.", fixed(s1, 2), fixed(s2, 2), fixed(s3, 2)),
        x: Axis::new("effective normal stress (MPa)", left, right),
        y: Axis::new("shear stress (MPa)", 0.0, top),
        equal_scale: true,
        layers,
    }
}
