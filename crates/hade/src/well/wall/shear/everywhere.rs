//! Whether every place of a wall has pressures that are safe for it.

use std::f64::consts::TAU;

use crate::well::wall::round::{CIRCLE, highest_between};

/// Lower and upper end of the safe pressures at each look round the hole; `None` when a place has none, one between the
/// looks too: there the interval of the narrowest look is followed to where it is narrowest.
pub(super) fn everywhere(interval_at: impl Fn(f64, f64) -> Option<(f64, f64)>) -> Option<Vec<(f64, f64)>> {
    let looks: Option<Vec<(f64, f64)>> = CIRCLE.cos.iter().zip(&CIRCLE.sin).map(|(c, s)| interval_at(*c, *s)).collect();
    let looks = looks?;
    let narrowest = looks.iter().map(|(lower, upper)| upper - lower).enumerate().min_by(|a, b| a.1.total_cmp(&b.1))?;
    let step = TAU / looks.len() as f64;
    let breadth = |phi: f64| {
        let (s, c) = phi.sin_cos();
        interval_at(c, s).map_or(f64::NEG_INFINITY, |(lower, upper)| upper - lower)
    };
    let place = |away: f64| (narrowest.0 as f64 + away) * step;
    let (_, overlap) = highest_between(|phi| -breadth(phi), place(-1.0), place(1.0));
    (overlap <= 0.0).then_some(looks)
}

#[cfg(test)]
mod tests {
    use crate::rock::Strength;
    use crate::stress::tensor::Tensor;
    use crate::units::Units;
    use crate::well::wall::elastic::Kirsch;
    use crate::well::wall::shear::{ShearWall, Window};

    /// With a cohesion of 12.5 MPa every place has a safe pressure, with 11.5 MPa those of two degrees have none, which
    /// lie between two looks.
    #[test]
    fn a_narrow_stretch_without_a_safe_pressure_is_seen() {
        let stress = Tensor([53.5e6, 55.507e6, 75.0094e6, -17.6232e6, -2.5915e6, -0.2584e6]);
        let kirsch = Kirsch::new(stress, 0.33);
        for (cohesion, expected) in [(12.456, true), (11.456, false)] {
            let law = Strength::mohr_coulomb(cohesion.mpa(), 34.4436.deg()).law();
            let wall = ShearWall::new(kirsch, law, None, 22.94e6, 0.0, 0.0);
            let Window::Closed { crossed } = wall.window() else { panic!("{cohesion}: open") };
            let fine = (0..36_000).all(|k| {
                let (s, c) = (f64::from(k) * 0.01_f64.to_radians()).sin_cos();
                wall.interval_at(c, s).is_some()
            });
            assert_eq!((fine, crossed.is_some()), (expected, expected), "{cohesion}: {crossed:?}");
        }
    }
}
