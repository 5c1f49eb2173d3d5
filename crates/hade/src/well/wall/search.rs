//! Where the excess ceases as the pressure rises.
//!
//! The excess of a place, and the worst excess of a wall, falls with the pressure, is least, and
//! rises: for criteria whose safe stresses are a convex set (all but Mogi–Coulomb, for which no proof
//! is known) the safe pressures are one interval. Its lower end is found by Newton's method from
//! below, which for a convex excess never passes it, within a bracket that shrinks by the sign of the
//! slope, so that no step needs a safe pressure to begin with.

/// The lower end of the safe pressures.
#[derive(Clone, Copy, Debug, PartialEq)]
pub(crate) enum LowerEnd {
    At(f64),
    /// No pressure is safe.
    Never,
    /// Every pressure down to the edge of the search is safe.
    Unbounded,
}

/// One look at an excess.
#[derive(Clone, Copy, Debug)]
pub(crate) struct Look {
    pub excess: f64,
    /// Its derivative by the pressure.
    pub slope: f64,
    /// Where the search goes next, when the slope is to be trusted: the pressure at which the place
    /// that is worst here ceases to fail.
    pub next: f64,
}

/// The lower end of the safe pressures between ∓ `reach`, from a start; an excess within ± `noise` is
/// zero.
pub(crate) fn lower_end(look: impl Fn(f64) -> Look, start: f64, reach: f64, noise: f64) -> LowerEnd {
    let (mut low, mut high) = (-reach, reach);
    let mut safe: Option<f64> = None;
    let mut x = start;
    for _ in 0..200 {
        let Look { excess, slope, next } = look(x);
        let falls = slope < 0.0;
        if excess.abs() <= noise && falls {
            return LowerEnd::At(next);
        }
        if excess <= noise {
            safe = Some(x);
        } else if falls {
            low = low.max(x);
        } else {
            high = high.min(x);
        }
        let right = safe.unwrap_or(high);
        if right - low <= 1e-14 * reach {
            return match safe {
                Some(_) if low <= -reach => LowerEnd::Unbounded,
                Some(edge) => LowerEnd::At(edge),
                None => LowerEnd::Never,
            };
        }
        x = if falls && next > low && next < right { next } else { 0.5 * (low + right) };
    }
    safe.map_or(LowerEnd::Never, LowerEnd::At)
}

/// Newton's steps on one place from below, while they rise to its lower end.
#[inline(always)]
pub(crate) fn rise(at: impl Fn(f64) -> (f64, f64), mut x: f64, noise: f64) -> f64 {
    for _ in 0..12 {
        let (excess, slope) = at(x);
        if slope >= 0.0 {
            break;
        }
        let step = -excess / slope;
        x += step;
        if excess.abs() <= noise {
            break;
        }
    }
    x
}

#[cfg(test)]
mod tests {
    use super::*;

    fn newton(f: impl Fn(f64) -> (f64, f64)) -> impl Fn(f64) -> Look {
        move |x| {
            let (excess, slope) = f(x);
            Look { excess, slope, next: x - excess / slope }
        }
    }

    #[test]
    fn the_lower_end_from_either_side_of_the_safe_pressures() {
        let f = |x: f64| ((x - 3.0) * (x - 3.0) - 4.0, 2.0 * (x - 3.0));
        for start in [-90.0, 0.5, 2.0, 4.5, 80.0] {
            let LowerEnd::At(end) = lower_end(newton(f), start, 100.0, 1e-12) else { panic!("{start}") };
            assert!((end - 1.0).abs() < 1e-9, "{start}: {end}");
        }
    }

    #[test]
    fn none_and_no_end() {
        let never = |x: f64| (x * x + 1.0, 2.0 * x);
        assert_eq!(lower_end(newton(never), -40.0, 100.0, 1e-12), LowerEnd::Never);
        let all_below = |x: f64| (x - 3.0, 1.0);
        assert_eq!(lower_end(newton(all_below), -40.0, 100.0, 1e-12), LowerEnd::Unbounded);
    }
}
