//! The other route of the checks: every draw as a whole wall, stated anew and carried by the chain of its hole.

use super::ensemble::{EnsembleInputs, Prepared};
use super::numbers::Numbers;
use super::stand::{Left, Stand};
use crate::error::Result;
use crate::frames::vector::{M3, transpose};
use crate::frames::{Attitude, Axes, Azimuth};
use crate::spread::Draw;
use crate::stress::tensor::Tensor;
use crate::stress::{Made, Stress};
use crate::units::{Angle, Pressure, Quantity};
use crate::well::wall::setup::{Seepage, WallSetup};
use crate::well::wall::wall::Wall;

/// The wall of some numbers: the stress from its horizontal and vertical parts along their axes, the rest of the tensor as
/// it was stated.
pub(super) fn wall_of(setup: &WallSetup, base: &Numbers, numbers: &Numbers) -> Result<Wall> {
    let far = setup.inputs.stress.geographic();
    // In the horizontal axes of the stated stress, larger one first.
    let about_down = |angle: f64| -> M3 {
        let (s, c) = angle.sin_cos();
        [[c, s, 0.0], [-s, c, 0.0], [0.0, 0.0, 1.0]]
    };
    let [.., yz, xz] = far.turned(&about_down(base.azimuth)).0;
    let own = Tensor([numbers.larger, numbers.smaller, numbers.sv, 0.0, yz, xz]);
    let far = own.turned(&transpose(&about_down(numbers.azimuth)));
    let name = setup.inputs.stress.name();
    // Past the vertical a hole leans to the other side.
    let turned = std::f64::consts::PI;
    let leaning = numbers.inclination.rem_euclid(2.0 * turned);
    let (i, a) = if leaning > turned {
        (2.0 * turned - leaning, numbers.hole_azimuth + turned)
    } else {
        (leaning, numbers.hole_azimuth)
    };
    let attitude = Attitude { inclination: Angle::from_si(i), azimuth: Azimuth::from_true_north(Angle::from_si(a)) };
    let axes = Axes::Hole { attitude, name };
    let mut changed = *setup;
    let stress = Stress::of(far.turned(&axes.matrix()?), Made::Combined { parts: None }, Some((far, axes)));
    changed.inputs.stress = stress;
    changed.inputs.pore = Pressure::from_si(numbers.pore);
    changed.inputs.rock.poisson = numbers.poisson;
    changed.inputs.rock.tensile_strength = Pressure::from_si(numbers.tensile);
    changed.inputs.rock.strength = numbers.strength;
    changed.seepage = setup.seepage.map(|seepage| Seepage { biot: numbers.biot, ..seepage });
    Wall::of(changed)
}

/// The stand of one draw by its whole wall. What is left out is found by the wall that refuses it, and by eigenvalues.
pub(super) fn stand_by_wall(inputs: &EnsembleInputs, ready: &Prepared, draw: &Draw) -> Stand {
    if let Some(k) = (0..inputs.drawn.len()).find(|k| {
        let value = draw.values().get(*k).copied().unwrap_or(f64::NAN);
        inputs.drawn.get(*k).is_some_and(|one| !one.spread.holds(value))
    }) {
        return Stand::left_out(Left::Outside(k as u8));
    }
    let numbers = inputs.numbers(&ready.base, draw);
    let Ok(wall) = wall_of(&inputs.wall, &ready.base.numbers, &numbers) else {
        return Stand::left_out(Left::Impossible);
    };
    if numbers.smaller > numbers.larger {
        return Stand::left_out(Left::Crossed);
    }
    let [s1, _, s3] = wall.setup.inputs.stress.tensor().eigen().values.map(|s| s - numbers.pore);
    if ready.ratio.is_some_and(|ratio| s3 <= 0.0 || s1 / s3 > ratio) {
        return Stand::left_out(Left::BeyondFriction);
    }
    super::stand::stand_of(&wall.shear, numbers.tensile, s3 + numbers.pore)
}
