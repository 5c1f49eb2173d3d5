//! The failure envelope of the rock with the stresses of the wall on it.

use crate::card::{Axis, Figure, Layer, Mark, Role};
use crate::units::{Quantity, fixed, with_typed_unit};
use crate::well::wall::Wall;

/// Places of the wall that are drawn, every 3° of tool face to 180°.
const PLACES: u32 = 60;

/// σ1' against σ3' at places all round the wall at a pressure (Pa), with what the rock bears in
/// triaxial compression and extension, and the tension at which it parts.
pub(super) fn figure(wall: &Wall, pressure: f64) -> Figure {
    let strength = wall.strength();
    let (mut holds, mut fails) = (Vec::new(), Vec::new());
    for k in 0..PLACES {
        let theta = f64::from(k) * std::f64::consts::PI / f64::from(PLACES);
        let [s1, _, s3] = wall.shear.principal(theta, pressure);
        let point = [s3 * 1e-6, s1 * 1e-6];
        if wall.shear.excess_at(pressure, 2.0 * theta) > 0.0 { fails.push(point) } else { holds.push(point) }
    }
    let all = || holds.iter().chain(&fails);
    let tensile = wall.setup.inputs.rock.tensile_strength.si() * 1e-6;
    let least = all().map(|p| p[0]).fold(f64::INFINITY, f64::min);
    let most = all().map(|p| p[0]).fold(f64::NEG_INFINITY, f64::max);
    let highest = all().map(|p| p[1]).fold(0.0_f64, f64::max);
    let from = (least - 0.1 * (most - least).max(1.0)).min(-1.2 * tensile);
    let to = most + 0.25 * (most - least).max(0.2 * highest);
    let curve = |at: &dyn Fn(f64) -> Option<f64>| -> Vec<[f64; 2]> {
        (0..=60)
            .map(|k| from + (to - from) * f64::from(k) / 60.0)
            .filter_map(|x| at(x * 1e6).map(|y| [x, y * 1e-6]))
            .collect()
    };
    let compression = curve(&|s3| strength.in_compression(s3));
    let extension = curve(&|s3| strength.in_extension(s3));
    let same = compression.len() == extension.len()
        && compression.iter().zip(&extension).all(|(a, b)| (a[1] - b[1]).abs() <= 1e-9 * b[1].abs().max(1e-9));
    let top = 1.08 * compression.last().map_or(highest, |p| p[1].min(2.0 * highest)).max(highest);
    let mut layers =
        vec![Layer::line(if same { "strength" } else { "strength, σ'_2 = σ'_3" }, Role::Limit, compression)];
    if !same && !extension.is_empty() {
        layers.push(Layer::line("strength, σ'_2 = σ'_1", Role::Second, extension));
    }
    layers.push(Layer::line("−T_0", Role::Third, [[-tensile, 0.0], [-tensile, top]]));
    let counts = (holds.len(), fails.len());
    for (label, role, mark, points) in
        [("holds", Role::First, Mark::Dot, holds), ("fails", Role::Failing, Mark::Cross, fails)]
    {
        if !points.is_empty() {
            layers.push(Layer::Points { label: label.to_owned(), role, mark, points });
        }
    }
    let plane = if wall.setup.weak_plane.is_some() {
        " Places that slip on the plane of weakness fail below the envelope of the rock."
    } else {
        ""
    };
    Figure {
        caption: format!(
            "The wall's effective stresses at {} in the hole, one mark every 3° of tool face, against the strength of the rock by {}.{plane}",
            with_typed_unit(crate::units::Pressure::from_si(pressure)),
            strength.name()
        ),
        alt: format!(
            "σ'_1 against σ'_3 round the wall: σ'_3 from {} to {} MPa, σ'_1 up to {} MPa; {} of {PLACES} places hold and {} fail.",
            fixed(least, 2),
            fixed(most, 2),
            fixed(highest, 2),
            counts.0,
            counts.1
        ),
        x: Axis::new("σ'_3 (MPa)", from, to),
        y: Axis::new("σ'_1 (MPa)", 0.0, top),
        equal_scale: false,
        layers,
    }
}
