//! The two roots of a place of a wall, round the hole.

use crate::lanes::Lanes;
use crate::rock::Jet;
use crate::well::wall::round::{OnCircle, SAME, Summit, Touch, Wave, climbed, highest};

/// ½ (x + y) ± √((½ (x − y))² + v), with x, y, v as waves.
#[derive(Clone, Copy, Debug, PartialEq)]
pub(crate) struct Root<N = f64> {
    mean: Wave<N>,
    half: Wave<N>,
    v: Wave<N>,
}

impl<N: Lanes> Root<N> {
    #[inline(always)]
    pub fn new(x: Wave<N>, y: Wave<N>, v: Wave<N>) -> Self {
        Root { mean: x.joined(1.0, y, 0.5), half: x.joined(-1.0, y, 0.5), v }
    }

    /// The root itself. The square of a shear is not negative; its wave may be by a last bit.
    #[inline(always)]
    fn radius(&self, c: N, s: N) -> N {
        let m = self.half.at(c, s);
        (m * m + self.v.at(c, s).larger(N::of(0.0))).sqrt()
    }

    /// The larger and the smaller.
    #[inline(always)]
    pub fn both(&self, c: N, s: N) -> (N, N) {
        let (mean, r) = (self.mean.at(c, s), self.radius(c, s));
        (mean + r, mean - r)
    }

    /// Value, slope and bend of the larger (sign 1) or the smaller (−1).
    #[inline(always)]
    fn jet(&self, sign: f64, c: N, s: N) -> [N; 3] {
        let (zero, half, sign) = (N::of(0.0), N::of(0.5), N::of(sign));
        let (m, m1, m2) = (self.half.at(c, s), self.half.slope(c, s), self.half.bend(c, s));
        let r = self.radius(c, s);
        let inverse = N::where_so(r.above(zero), N::of(1.0) / r, zero);
        let r1 = (m * m1 + half * self.v.slope(c, s)) * inverse;
        let r2 = (m1 * m1 + m * m2 + half * self.v.bend(c, s) - r1 * r1) * inverse;
        [self.mean.at(c, s) + sign * r, self.mean.slope(c, s) + sign * r1, self.mean.bend(c, s) + sign * r2]
    }

    /// Two waves with which, for a value p, (p − x)(p − y) − v is above zero where the larger root is lower than p.
    #[inline(always)]
    fn below(&self, p: N) -> [Wave<N>; 2] {
        [1.0, -1.0].map(|sign| self.mean.joined(sign, self.half, 1.0).scaled(N::of(-1.0), p))
    }

    /// The highest place of the larger root by one climb from the crest of the hoop stress, whose amplitude is `swing`,
    /// and whether it is proved to be that.
    #[inline(always)]
    pub fn climbed(&self, hoop: Wave<N>, swing: N) -> (N, N::Mask) {
        let start = (hoop.cos / swing, hoop.sin / swing);
        let (summit, settled) = climbed(|c, s| self.jet(1.0, c, s), start);
        (summit.value, settled & Touch::of(self.below(summit.value), self.v.mean, &summit).only())
    }
}

impl Root {
    /// The highest place of the larger root, if a climb finds one that is proved to be the highest of all: nothing is
    /// scanned. It begins at the crest of the hoop stress, whose amplitude is `swing`.
    #[inline]
    pub fn highest(&self, hoop: Wave, swing: f64, scale: f64) -> Option<Summit> {
        if swing <= SAME * scale {
            return None;
        }
        let start = (hoop.cos / swing, hoop.sin / swing);
        highest(&self.larger(), start, |p| self.below(p), self.v.mean)
    }

    /// The smaller root turned upside down is the larger root of this.
    #[inline]
    pub fn turned_over(&self) -> Root {
        Root { mean: self.mean.scaled(-1.0, 0.0), ..*self }
    }

    pub fn larger(&self) -> Signed {
        Signed { root: *self, sign: 1.0 }
    }

    pub fn smaller(&self) -> Signed {
        Signed { root: *self, sign: -1.0 }
    }
}

/// One of the two values of a root.
#[derive(Clone, Copy, Debug, PartialEq)]
pub(crate) struct Signed {
    root: Root,
    sign: f64,
}

impl OnCircle for Signed {
    #[inline(always)]
    fn value(&self, c: f64, s: f64) -> f64 {
        self.root.mean.at(c, s) + self.sign * self.root.radius(c, s)
    }
    #[inline(always)]
    fn jet(&self, _piece: usize, c: f64, s: f64) -> Jet {
        let [value, slope, bend] = self.root.jet(self.sign, c, s);
        Jet { value, slope, bend }
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::well::wall::round::greatest;
    use wide::f64x4;

    /// What is proved to be the highest place is the highest that a scan finds, and mostly one is; also where the shear
    /// makes a hollow of the crest of the hoop stress, so that a hill stands on either side of it.
    #[test]
    fn the_highest_place_without_a_scan_is_that_of_a_scan() {
        let (mut proved, mut hollow, mut all) = (0, 0, 0);
        for (k, swing) in [0.05, 0.2, 0.5, 0.9, 1.4].into_iter().enumerate() {
            let wave = |mean: f64, amplitude: f64, at: f64| Wave {
                mean,
                cos: amplitude * at.cos(),
                sin: amplitude * at.sin(),
            };
            let crest = 0.7 + k as f64;
            let (hoop, axial) = (wave(3.0, swing, crest), wave(2.5, 0.3 * swing, crest));
            for (j, i) in (0..12).flat_map(|j| (0..36).map(move |i| (j, i))) {
                let shear = 0.08 * f64::from(j);
                let v = wave(shear, shear, crest + 0.1745 * f64::from(i));
                let root = Root::new(hoop, axial, v);
                let (scan, found) = (greatest(&root.larger(), 5.0), root.highest(hoop, swing, 5.0));
                all += 1;
                if let Some(summit) = &found {
                    assert!((summit.value - scan.value).abs() < 1e-11, "{root:?}: {} {}", summit.value, scan.value);
                    let [_, _, bend] = root.jet(1.0, crest.cos(), crest.sin());
                    proved += 1;
                    hollow += i32::from(bend > 0.0);
                }
                // Four side by side are the first climb of each.
                let four = |w: Wave| {
                    let [mean, cos, sin] = [w.mean, w.cos, w.sin].map(f64x4::splat);
                    Wave { mean, cos, sin }
                };
                let (value, so) = root.climbed(hoop, swing);
                let (values, mask) =
                    Root::new(four(hoop), four(axial), four(v)).climbed(four(hoop), f64x4::splat(swing));
                assert_eq!(mask.to_bitmask(), if so { 0b1111 } else { 0 }, "{root:?}");
                assert!(!so || (values.to_array() == [value; 4] && (value - scan.value).abs() < 1e-11), "{root:?}");
            }
        }
        assert!(proved > all * 9 / 10 && hollow > all / 50, "{proved} and {hollow} of {all}");
    }
}
