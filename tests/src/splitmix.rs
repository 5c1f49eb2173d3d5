//! The inputs of the reference values that `tests/scripts/tensors.py` makes, operation by operation
//! as there: integers by splitmix64 (Steele, Lea and Flood 2014), and from them floats by sums,
//! products and quotients alone, which IEEE 754 rounds in the same way everywhere.

/// The generator.
pub struct SplitMix64 {
    state: u64,
}

impl SplitMix64 {
    /// From a state.
    pub fn new(state: u64) -> Self {
        SplitMix64 { state }
    }
    fn integer(&mut self) -> u64 {
        self.state = self.state.wrapping_add(0x9E37_79B9_7F4A_7C15);
        let mut z = self.state;
        z = (z ^ (z >> 30)).wrapping_mul(0xBF58_476D_1CE4_E5B9);
        z = (z ^ (z >> 27)).wrapping_mul(0x94D0_49BB_1331_11EB);
        z ^ (z >> 31)
    }
    /// Uniform in [0, 1) in steps of 2⁻⁵³.
    pub fn unit(&mut self) -> f64 {
        (self.integer() >> 11) as f64 * (1.0 / (1_u64 << 53) as f64)
    }
    /// Uniform in [−1, 1).
    pub fn signed(&mut self) -> f64 {
        2.0 * self.unit() - 1.0
    }
}

/// Six components xx, yy, zz, xy, yz, xz, each within the scale.
pub fn components(g: &mut SplitMix64, scale: f64) -> [f64; 6] {
    [0; 6].map(|_| scale * g.signed())
}

/// A tensor with about these principal values, along axes of a random quaternion.
fn built(g: &mut SplitMix64, values: [f64; 3]) -> [f64; 6] {
    let (w, x, y, z, n) = loop {
        let (w, x, y, z) = (g.signed(), g.signed(), g.signed(), g.signed());
        let n = w * w + x * x + y * y + z * z;
        if n > 0.01 {
            break (w, x, y, z, n);
        }
    };
    let axes = [
        [(w * w + x * x - y * y - z * z) / n, 2.0 * (x * y - w * z) / n, 2.0 * (x * z + w * y) / n],
        [2.0 * (x * y + w * z) / n, (w * w - x * x + y * y - z * z) / n, 2.0 * (y * z - w * x) / n],
        [2.0 * (x * z - w * y) / n, 2.0 * (y * z + w * x) / n, (w * w - x * x - y * y + z * z) / n],
    ];
    [(0, 0), (1, 1), (2, 2), (0, 1), (1, 2), (0, 2)].map(|(i, j)| {
        let mut total = 0.0;
        for (value, axis) in values.iter().zip(&axes) {
            total += value * axis[i] * axis[j];
        }
        total
    })
}

/// Two principal values a relative gap apart, the third above, below, or as near again.
fn near(g: &mut SplitMix64, k: usize, gap: f64) -> [f64; 6] {
    let b = 1e7 + 9e7 * g.unit();
    let other = g.unit();
    let third = match k % 3 {
        0 => b * (0.2 + 0.6 * other),
        1 => b * (1.3 + 0.7 * other),
        _ => b * (1.0 - 2.5 * gap),
    };
    built(g, [b, b * (1.0 - gap), third])
}

/// The tensor `k` of twenty families, in pascals: random (0–7), nearly equal values (8–12), closer
/// than any axis can be told (13–14), exactly equal (15–16), tiny, huge, tensile (17–19).
pub fn tensor(g: &mut SplitMix64, k: usize) -> [f64; 6] {
    let (family, round) = (k % 20, k / 20);
    match family {
        0..8 => components(g, 1e8),
        8..13 => near(g, round, [1e-2, 1e-4, 1e-6, 1e-7, 1e-8][family - 8]),
        13..15 => near(g, round, [1e-10, 1e-11, 1e-12, 1e-13, 1e-14, 0.0][round % 6]),
        15 => {
            let (b, c) = (1e8 * g.unit(), 1e8 * g.signed());
            let [xx, yy, zz] = [[b, b, c], [b, c, b], [c, b, b]][round % 3];
            [xx, yy, zz, 0.0, 0.0, 0.0]
        }
        16 => {
            let b = 1e8 * g.signed();
            [b, b, b, 0.0, 0.0, 0.0]
        }
        17 => components(g, 1e-12),
        18 => components(g, 1e20),
        _ => {
            let values = [0; 3].map(|_| -1e8 * (0.1 + g.unit()));
            built(g, values)
        }
    }
}

/// Azimuth and inclination `k` in degrees; every tenth one on the edges of their ranges.
pub fn attitude(g: &mut SplitMix64, k: usize) -> (f64, f64) {
    let (mut azimuth, mut inclination) = (360.0 * g.unit(), 180.0 * g.unit());
    if k.is_multiple_of(10) {
        azimuth = [0.0, 90.0, 180.0, 270.0, 359.999][(k / 10) % 5];
    }
    if k % 20 < 2 {
        inclination = [0.0, 90.0, 180.0, 45.0, 135.0, 1e-7, 89.999_999][(k / 20) % 7];
    }
    (azimuth, inclination)
}

#[cfg(test)]
mod tests {
    use super::*;

    /// The first numbers of splitmix64 from state 1234567, as the authors' C code gives them
    /// (from memory of its published test vector).
    #[test]
    fn is_the_published_generator() {
        let mut g = SplitMix64::new(1_234_567);
        assert_eq!(
            [0; 3].map(|_| g.integer()),
            [6_457_827_717_110_365_317, 3_203_168_211_198_807_973, 9_817_491_932_198_370_423]
        );
    }
}
