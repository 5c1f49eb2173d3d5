//! The greatest value and the zero of a function between two places.

/// The greatest value between two places with one hill between them, and where: Brent's method
/// (Algorithms for Minimization without Derivatives, 1973, ch. 5), parabolas guarded by golden section.
pub(crate) fn highest_between(f: impl Fn(f64) -> f64, mut low: f64, mut high: f64) -> (f64, f64) {
    const SHARE: f64 = 0.381_966_011_250_105;
    let tolerance = 1e-10 * (high - low).abs() + 1e-12;
    let mut x = low + SHARE * (high - low);
    let mut fx = f(x);
    let (mut w, mut fw, mut v, mut fv) = (x, fx, x, fx);
    let (mut step, mut before): (f64, f64) = (0.0, 0.0);
    for _ in 0..100 {
        let middle = 0.5 * (low + high);
        if (x - middle).abs() <= 2.0 * tolerance - 0.5 * (high - low) {
            break;
        }
        let mut golden = true;
        if before.abs() > tolerance {
            let (r, q) = ((x - w) * (fx - fv), (x - v) * (fx - fw));
            let (mut p, mut q) = ((x - v) * q - (x - w) * r, 2.0 * (q - r));
            if q > 0.0 {
                p = -p;
            } else {
                q = -q;
            }
            if p.abs() < (0.5 * q * before).abs() && p > q * (low - x) && p < q * (high - x) {
                before = step;
                step = p / q;
                golden = false;
            }
        }
        if golden {
            before = if x < middle { high - x } else { low - x };
            step = SHARE * before;
        }
        let next = if step.abs() >= tolerance { x + step } else { x + tolerance.copysign(step) };
        let value = f(next);
        if value >= fx {
            if next < x {
                high = x
            } else {
                low = x
            }
            (v, fv, w, fw) = (w, fw, x, fx);
            (x, fx) = (next, value);
        } else {
            if next < x {
                low = next
            } else {
                high = next
            }
            if value >= fw || w == x {
                (v, fv, w, fw) = (w, fw, next, value);
            } else if value >= fv || v == x || v == w {
                (v, fv) = (next, value);
            }
        }
    }
    (x, fx)
}

/// The one zero between two looks of opposite sign: false position that halves the standing side's
/// weight (Illinois), and halving where that is slow.
pub(crate) fn root_between(f: impl Fn(f64) -> f64, a: (f64, f64), b: (f64, f64)) -> f64 {
    let ((mut xa, mut fa), (mut xb, mut fb)) = (a, b);
    for turn in 0..200 {
        if (xb - xa).abs() <= 4e-16 * (1.0 + xb.abs()) {
            break;
        }
        let secant = xb - fb * (xb - xa) / (fb - fa);
        let x = if turn % 8 == 7 || !(secant > xa.min(xb) && secant < xa.max(xb)) { 0.5 * (xa + xb) } else { secant };
        let fx = f(x);
        if fx == 0.0 {
            return x;
        }
        if (fx > 0.0) == (fb > 0.0) {
            fa *= 0.5;
        } else {
            (xa, fa) = (xb, fb);
        }
        (xb, fb) = (x, fx);
    }
    xb
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn hills_and_roots_to_the_last_digits() {
        for at in [0.1, 0.37, 0.999, 0.0, 1.0] {
            let (x, value) = highest_between(|x| 3.0 - (x - at).powi(2), 0.0, 1.0);
            assert!((x - at).abs() < 1e-7 && (value - 3.0).abs() < 1e-13, "{at}: {x}");
            let (x, _) = highest_between(|x: f64| -(x - at).abs(), 0.0, 1.0);
            assert!((x - at).abs() < 1e-9, "tent {at}: {x}");
            if at > 0.0 && at < 1.0 {
                let f = |x: f64| (x - at) * (1.0 + 30.0 * x * x);
                assert!((root_between(f, (0.0, f(0.0)), (1.0, f(1.0))) - at).abs() < 1e-15);
            }
        }
    }
}
