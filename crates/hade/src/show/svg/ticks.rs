//! Round numbers along an axis.

use crate::card::Axis;
use crate::units::fixed;

/// The most ticks an axis may have; a fixed distance that gives more is not followed.
const MOST: usize = 40;

/// The two ends of an axis in order, apart from each other and finite, whatever was given.
pub(super) fn ends(axis: &Axis) -> (f64, f64) {
    let (a, b) = (axis.min, axis.max);
    if !a.is_finite() || !b.is_finite() || !(b - a).is_finite() {
        return (0.0, 1.0);
    }
    let (low, high) = (a.min(b), a.max(b));
    let least = low.abs().max(high.abs()).max(1e-300) * 1e-9;
    if high - low > least {
        (low, high)
    } else {
        let half = if low == 0.0 { 0.5 } else { low.abs() * 0.05 };
        (low - half, high + half)
    }
}

/// The places of the ticks between two ends, and the distance between them.
pub(super) fn ticks(low: f64, high: f64, fixed_step: Option<f64>, about: f64) -> (Vec<f64>, f64) {
    let span = high - low;
    let step = fixed_step
        .filter(|s| s.is_finite() && *s > 0.0 && span / s <= MOST as f64)
        .unwrap_or_else(|| round_step(span / about.max(2.0)));
    let slack = step * 1e-6;
    let first = ((low - slack) / step).ceil();
    let mut found = Vec::new();
    for i in 0..=MOST {
        let value = (first + i as f64) * step;
        if value > high + slack {
            break;
        }
        found.push(if value.abs() < slack { 0.0 } else { value });
    }
    (found, step)
}

/// 1, 2, 2.5 or 5 times a power of ten, not less than what is asked.
fn round_step(at_least: f64) -> f64 {
    let power = 10_f64.powf(at_least.abs().max(1e-300).log10().floor());
    let lead = at_least / power;
    let round = [1.0, 2.0, 2.5, 5.0].into_iter().find(|r| lead <= r * (1.0 + 1e-9)).unwrap_or(10.0);
    round * power
}

/// A tick's number, with as many decimals as its step needs and a true minus sign.
pub(super) fn label(value: f64, step: f64) -> String {
    let decimals = (0..=6_usize).find(|d| {
        let scaled = step * 10_f64.powi(i32::try_from(*d).unwrap_or(0));
        (scaled - scaled.round()).abs() < 1e-6 * scaled.abs() && scaled.abs() >= 0.999
    });
    let text = match decimals {
        Some(d) if value.abs() < 1e6 => fixed(value, d),
        _ if value == 0.0 => "0".to_owned(),
        _ => {
            let short: f64 = format!("{value:.3e}").parse().unwrap_or(value);
            format!("{short:e}").replacen('e', "·10^", 1)
        }
    };
    text.replace('-', "−")
}

#[cfg(test)]
mod tests {
    use super::*;

    fn labels(low: f64, high: f64, fixed_step: Option<f64>) -> Vec<String> {
        let (places, step) = ticks(low, high, fixed_step, 6.0);
        places.into_iter().map(|v| label(v, step)).collect()
    }

    #[test]
    fn are_round_and_within_the_ends() {
        assert_eq!(labels(0.0, 360.0, Some(90.0)), ["0", "90", "180", "270", "360"]);
        assert_eq!(labels(-12.0, 31.0, None), ["−10", "0", "10", "20", "30"]);
        assert_eq!(labels(0.0, 1.0, None), ["0.0", "0.2", "0.4", "0.6", "0.8", "1.0"]);
        assert_eq!(labels(2.0, 3.1, None), ["2.0", "2.2", "2.4", "2.6", "2.8", "3.0"]);
        assert_eq!(labels(0.0, 2.0e7, None), ["0", "5·10^6", "1·10^7", "1.5·10^7", "2·10^7"]);
    }

    #[test]
    fn no_axis_is_too_poor_for_ticks() {
        for (a, b) in [
            (0.0, 0.0),
            (5.0, 5.0),
            (-3.0, -3.0),
            (f64::NAN, 1.0),
            (0.0, f64::INFINITY),
            (1.0, 0.0),
            (-1e308, 1e308),
            (1e-320, 1e-320),
        ] {
            let (low, high) = ends(&Axis::new("x", a, b));
            assert!(low.is_finite() && high.is_finite() && high > low, "{a} {b}");
            for step in [None, Some(0.0), Some(f64::NAN), Some(1e-12), Some(-1.0)] {
                let (places, step) = ticks(low, high, step, 6.0);
                assert!(places.len() <= MOST + 1);
                assert!(places.iter().all(|p| !label(*p, step).contains("NaN")));
            }
        }
    }
}
