//! The standard normal distribution and its inverse.

use wide::f64x4;

use crate::lanes::Lanes;

/// Wichura, M.J. (1988) Algorithm AS 241: The percentage points of the normal distribution, Applied Statistics
/// 37, 477–484 (PPND16); numerator and denominator by falling powers, about the middle, the tails and the far
/// tails. Coefficients as Python's `statistics` module prints them.
const MIDDLE: ([f64; 8], [f64; 8]) = (
    [
        2509.0809287301227,
        33430.57558358813,
        67265.7709270087,
        45921.95393154987,
        13731.69376550946,
        1971.5909503065513,
        133.14166789178438,
        3.3871328727963665,
    ],
    [
        5226.495278852854,
        28729.085735721943,
        39307.89580009271,
        21213.794301586597,
        5394.196021424751,
        687.1870074920579,
        42.31333070160091,
        1.0,
    ],
);
const TAIL: ([f64; 8], [f64; 8]) = (
    [
        0.0007745450142783414,
        0.022723844989269184,
        0.2417807251774506,
        1.2704582524523684,
        3.6478483247632045,
        5.769497221460691,
        4.630337846156546,
        1.4234371107496835,
    ],
    [
        1.0507500716444169e-09,
        0.0005475938084995345,
        0.015198666563616457,
        0.14810397642748008,
        0.6897673349851,
        1.6763848301838038,
        2.053191626637759,
        1.0,
    ],
);
const FAR: ([f64; 8], [f64; 8]) = (
    [
        2.0103343992922881e-07,
        2.7115555687434876e-05,
        0.0012426609473880784,
        0.026532189526576124,
        0.29656057182850487,
        1.7848265399172913,
        5.463784911164114,
        6.657904643501103,
    ],
    [
        2.0442631033899397e-15,
        1.421511758316446e-07,
        1.8463183175100548e-05,
        0.0007868691311456133,
        0.014875361290850615,
        0.1369298809227358,
        0.599832206555888,
        1.0,
    ],
);

/// The number below which a share u (above 0, below 1) of a standard normal variable lies; its relative error is
/// about 1e-16.
#[inline]
pub(crate) fn quantile(u: f64) -> f64 {
    let q = u - 0.5;
    if q.abs() <= 0.425 {
        return q * ratio(&MIDDLE, 0.180_625 - q * q);
    }
    let r = (-(if q < 0.0 { u } else { 1.0 - u }).ln()).sqrt();
    let size = if r <= 5.0 { ratio(&TAIL, r - 1.6) } else { ratio(&FAR, r - 5.0) };
    size.copysign(q)
}

/// The same for four shares. Most lie about the middle, so that is worked out for all of them first, without a branch.
#[inline]
pub(crate) fn quantiles(shares: [f64; 4]) -> [f64; 4] {
    let q = f64x4::new(shares) - 0.5;
    let mut all = (q * ratio(&MIDDLE, f64x4::of(0.180_625) - q * q)).to_array();
    for (z, u) in all.iter_mut().zip(shares) {
        if (u - 0.5).abs() > 0.425 {
            *z = quantile(u);
        }
    }
    all
}

#[inline(always)]
fn ratio<N: Lanes>((over, under): &([f64; 8], [f64; 8]), r: N) -> N {
    let at = |list: &[f64; 8]| list.iter().fold(N::of(0.0), |sum, c| sum * r + N::of(*c));
    at(over) / at(under)
}

/// The share of a standard normal variable below z: ½ + φ(z) (z + z³/3 + z⁵/15 + …), to 1e-15 (Marsaglia, G. (2004)
/// Evaluating the normal distribution, J. Stat. Softw. 11(4)).
pub(crate) fn share_below(z: f64) -> f64 {
    if z.abs() > 9.0 {
        return if z > 0.0 { 1.0 } else { 0.0 };
    }
    let (mut term, mut sum, mut odd) = (z, z, 1.0);
    while term.abs() > 1e-18 * sum.abs() {
        odd += 2.0;
        term *= z * z / odd;
        sum += term;
    }
    (0.5 + sum * density(z)).clamp(0.0, 1.0)
}

/// The density of a standard normal variable.
pub(crate) fn density(z: f64) -> f64 {
    (-0.5 * z * z).exp() / (2.0 * std::f64::consts::PI).sqrt()
}

#[cfg(test)]
mod tests {
    use super::*;

    /// scipy 1.17.1, scipy.special.ndtri and ndtr.
    #[test]
    fn quantiles_and_shares_are_those_of_scipy() {
        for (u, z) in [
            (1e-300, -37.0470962993612),
            (1e-12, -7.034483825301131),
            (0.001, -3.090232306167813),
            (0.0749, -1.4402382675279635),
            (0.075, -1.4395314709384563),
            (0.1, -1.2815515655446004),
            (0.3, -0.5244005127080409),
            (0.5, 0.0),
            (0.8, 0.8416212335729143),
            (0.925, 1.4395314709384563),
            (0.95, 1.6448536269514722),
            (0.999999, 4.753424308817087),
        ] {
            assert!((quantile(u) - z).abs() <= 1e-15 * z.abs().max(1.0) * 4.0, "{u}: {}", quantile(u));
        }
        for (z, u) in [
            (-6.0, 9.865876450376946e-10),
            (-3.0, 0.0013498980316300933),
            (-1.0, 0.15865525393145707),
            (-0.25, 0.4012936743170763),
            (0.0, 0.5),
            (0.5, 0.6914624612740131),
            (2.0, 0.9772498680518208),
            (5.0, 0.9999997133484281),
        ] {
            assert!((share_below(z) - u).abs() < 2e-15, "{z}: {}", share_below(z));
        }
    }

    #[test]
    fn four_at_once_are_the_same_four() {
        for k in 0..1000 {
            let shares = [1.0, 250.5, 500.0, 749.5].map(|first| (first + f64::from(k)) % 1000.0 / 1000.0 + 1e-9);
            assert_eq!(quantiles(shares), shares.map(quantile), "{shares:?}");
        }
    }

    #[test]
    fn one_undoes_the_other() {
        for k in 1..400 {
            let u = f64::from(k) / 400.0;
            assert!((share_below(quantile(u)) - u).abs() < 3e-15, "{u}");
        }
    }
}
