//! Where the excess ceases as the pressure rises.
//!
//! The excess of a place, and the worst excess of a wall, falls with the pressure, is least, and
//! rises. Every criterion but Mogi–Coulomb states its excess as a convex function of stress, and the
//! stresses are straight lines in the pressure, so the safe pressures are one interval. Newton's
//! method from below never passes its lower end; where it would begin on the other side, tangents
//! from both sides close in, and prove it when no pressure is safe. For Mogi–Coulomb, whose safe
//! stresses are not known to be convex, the bracket is only halved by the sign of the slope.

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

/// How far and how closely to look.
#[derive(Clone, Copy, Debug)]
pub(crate) struct Search {
    pub start: f64,
    /// The size of the pressures at hand: the first step where nothing better is known.
    pub scale: f64,
    /// Nothing is looked for beyond ∓ this.
    pub reach: f64,
    /// An excess within ± this is zero.
    pub noise: f64,
    /// Whether the excess is convex in the pressure.
    pub convex: bool,
}

/// A pressure that fails, with its tangent.
#[derive(Clone, Copy)]
struct Tangent {
    x: f64,
    excess: f64,
    slope: f64,
}

/// The lower end of the safe pressures.
pub(crate) fn lower_end(look: impl Fn(f64) -> Look, search: Search) -> LowerEnd {
    let Search { start, scale, reach, noise, convex } = search;
    // Below everything safe; above everything safe; safe.
    let (mut low, mut high): (Option<Tangent>, Option<Tangent>) = (None, None);
    let mut safe: Option<f64> = None;
    let mut stride = 0.25 * scale;
    let mut x = start;
    for turn in 1..=240 {
        let Look { excess, slope, next } = look(x);
        let falls = slope < 0.0;
        if excess.abs() <= noise && falls {
            return LowerEnd::At(next);
        }
        let here = Tangent { x, excess, slope };
        if excess <= noise {
            safe = Some(safe.map_or(x, |s| s.min(x)));
        } else if falls {
            low = Some(here);
        } else {
            high = Some(here);
        }
        let right = safe.or(high.map(|h| h.x));
        x = match (low, right) {
            // Nothing to the left is known: Newton from a safe pressure, or longer and longer strides.
            (None, Some(right)) => {
                if -right > reach {
                    return if safe.is_some() { LowerEnd::Unbounded } else { LowerEnd::Never };
                }
                stride *= 4.0;
                if falls && next < right && right - next < stride { next } else { right - stride }
            }
            // It fails and falls: Newton, or a stride when it says nothing.
            (Some(_), None) => {
                if x > reach {
                    return LowerEnd::Never;
                }
                stride *= 4.0;
                if next > x && next - x < reach { next } else { x + stride }
            }
            (Some(low), Some(right)) => {
                if right - low.x <= 1e-15 * reach {
                    return safe.map_or(LowerEnd::Never, LowerEnd::At);
                }
                let middle = 0.5 * (low.x + right);
                let inside = |at: f64| if at > low.x && at < right { at } else { middle };
                match (safe, high) {
                    (None, Some(high)) => {
                        let meet = (high.excess - low.excess + low.slope * low.x - high.slope * high.x)
                            / (low.slope - high.slope);
                        if convex && low.excess + low.slope * (meet - low.x) > noise {
                            return LowerEnd::Never;
                        }
                        if convex && turn % 4 != 0 { inside(meet) } else { middle }
                    }
                    _ if falls => inside(next),
                    _ => middle,
                }
            }
            (None, None) => x + scale,
        };
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
        x -= excess / slope;
        if excess.abs() <= noise {
            break;
        }
    }
    x
}

#[cfg(test)]
mod tests {
    use super::*;

    fn end(f: impl Fn(f64) -> (f64, f64), start: f64, convex: bool) -> LowerEnd {
        let look = |x: f64| {
            let (excess, slope) = f(x);
            Look { excess, slope, next: x - excess / slope }
        };
        lower_end(look, Search { start, scale: 5.0, reach: 100.0, noise: 1e-12, convex })
    }

    #[test]
    fn the_lower_end_from_either_side_of_the_safe_pressures() {
        let f = |x: f64| ((x - 3.0) * (x - 3.0) - 4.0, 2.0 * (x - 3.0));
        for start in [-90.0, 0.5, 2.0, 3.0, 4.5, 80.0] {
            for convex in [true, false] {
                let LowerEnd::At(end) = end(f, start, convex) else { panic!("{start}") };
                assert!((end - 1.0).abs() < 1e-9, "{start}: {end}");
            }
        }
    }

    /// Safe pressures as narrow as 2e-6 between tangents of unlike slopes are found.
    #[test]
    fn a_narrow_interval() {
        let f = |x: f64| if x < 7.0 { (7.0 - x - 1e-6, -1.0) } else { (0.3 * (x - 7.0) - 1e-6, 0.3) };
        for start in [-40.0, 30.0] {
            let LowerEnd::At(end) = end(f, start, true) else { panic!("{start}") };
            assert!((end - (7.0 - 1e-6)).abs() < 1e-11, "{start}: {end}");
        }
    }

    #[test]
    fn none_and_no_end() {
        let never = |x: f64| (x * x + 1.0, 2.0 * x);
        let all_below = |x: f64| (x - 3.0, 1.0);
        for convex in [true, false] {
            assert_eq!(end(never, -40.0, convex), LowerEnd::Never);
            assert_eq!(end(all_below, -40.0, convex), LowerEnd::Unbounded);
            assert_eq!(end(all_below, 40.0, convex), LowerEnd::Unbounded);
        }
    }
}
