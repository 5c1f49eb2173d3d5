//! Parting of a wall: the pressure at which its least effective principal stress reaches −T₀.
//!
//! In the wall's tangent plane the least principal value of hoop, axial and shear is −T₀ where
//! (σθ' + T₀)(σz' + T₀) = τθz². Both fall in a straight line with the pressure (see
//! [`EffectiveWall`]), so that is one pressure for each place; the wall parts first where it is
//! smallest. At an impermeable wall the axial stress does not move with the pressure, and where
//! σz' + T₀ ≤ 0 the wall is parted along the hole at any. Across the wall the effective stress rises
//! with the pressure: below its own limit the wall spalls; where it parts below that pressure
//! already, no pressure is safe.

use crate::rock::{Jet, Number};
use crate::well::wall::elastic::EffectiveWall;
use crate::well::wall::round::{Below, OnCircle, Peak, SAME, greatest, highest, smallest};

/// At which pressure a wall parts.
#[derive(Clone, Copy, Debug, PartialEq)]
pub(crate) enum Parting {
    /// The highest pressure at which nothing is beyond −T₀, and where the wall parts first.
    At(Peak),
    /// At every pressure something is beyond −T₀.
    Always {
        /// The pressure at which the least effective principal stress is least bad.
        least_bad: f64,
        /// How far it is beyond −T₀ there.
        beyond: f64,
        /// Where the wall parts first at that pressure.
        phi: f64,
        flat: bool,
        /// The pressure above which the wall parts, lower than that below which it spalls; none
        /// where it is parted along the hole at any.
        alone: Option<f64>,
    },
}

/// How many times the size of the numbers at hand is far off.
const FAR: f64 = 256.0;

/// The parting pressure of a wall.
pub(crate) fn parting(wall: &EffectiveWall, pore: f64, tensile: f64, scale: f64) -> Parting {
    // Below −T₀ / r the wall spalls; where the pressure passes the wall whole, it does not.
    let spalls = |strength: f64| if wall.across > 0.0 { -strength / wall.across } else { f64::NEG_INFINITY };
    let first = in_the_wall(wall, tensile, scale);
    let above = |peak: Peak| Peak { value: peak.value + pore, ..peak };
    if let Some(peak) = first.filter(|peak| peak.value >= spalls(tensile)) {
        return Parting::At(above(peak));
    }
    if wall.across <= 0.0 {
        // Parted along the hole at any pressure, and it does not spall: the lower the pressure the less
        // bad, ever more slowly.
        let x = -FAR * (scale + tensile);
        let least = greatest(&Least { wall, x }, scale + tensile);
        return Parting::Always {
            least_bad: pore + x,
            beyond: least.value - tensile,
            phi: least.phi,
            flat: least.flat,
            alone: None,
        };
    }
    // The strength with which the wall would just part where it just spalls.
    let scale = scale + tensile;
    let enough = |strength: f64| in_the_wall(wall, strength, scale).filter(|peak| peak.value >= spalls(strength));
    let (mut low, mut high) = (tensile, tensile + 8.0 * scale);
    for _ in 0..120 {
        let middle = 0.5 * (low + high);
        if enough(middle).is_some() {
            high = middle;
        } else {
            low = middle;
        }
        if high - low <= 1e-15 * scale {
            break;
        }
    }
    let place = enough(high).unwrap_or(Peak { phi: 0.0, value: spalls(high), flat: true });
    Parting::Always {
        least_bad: pore + spalls(high),
        beyond: high - tensile,
        phi: place.phi,
        flat: place.flat,
        alone: first.map(|peak| peak.value + pore),
    }
}

/// The pressure, above the pore pressure, beyond which the wall parts in its tangent plane; none
/// where it does at any.
fn in_the_wall(wall: &EffectiveWall, tensile: f64, scale: f64) -> Option<Peak> {
    let room = wall.axial.scaled(1.0, tensile);
    if wall.axial_falls <= 0.0 && room.mean - room.amplitude() <= 0.0 {
        return None;
    }
    let parts = Parts { wall, tensile };
    Some(parts.lowest(scale).unwrap_or_else(|| smallest(parts, scale + tensile)))
}

/// The parting pressure round the hole.
#[derive(Clone, Copy)]
struct Parts<'a> {
    wall: &'a EffectiveWall,
    tensile: f64,
}

impl Parts<'_> {
    /// The lowest place of an impermeable wall, if a climb down finds one that is proved to be the lowest of all: nothing
    /// is scanned. At the pressure x there (H + T₀ − x)(Z + T₀) − τθz² has a double zero.
    fn lowest(&self, scale: f64) -> Option<Peak> {
        let Parts { wall, tensile } = *self;
        let swing = wall.hoop.amplitude();
        if wall.axial_falls > 0.0 || swing <= SAME * scale {
            return None;
        }
        let trough = (-wall.hoop.cos / swing, -wall.hoop.sin / swing);
        let axial = wall.axial.scaled(1.0, tensile);
        let waves = |top: f64| [wall.hoop.scaled(1.0, tensile + wall.hoop_falls * top), axial];
        let summit = highest(&Below(*self), trough, waves, wall.shear_squared.mean)?;
        Some(Peak { value: -summit.value, ..summit.peak() })
    }

    /// The smaller root x of (H + T₀ − h x)(Z + T₀ − k x) = τθz², in the form that also holds for
    /// k = 0.
    #[inline(always)]
    fn root<N: Number>(&self, hoop: N, axial: N, shear_squared: N) -> N {
        let (h, k) = (self.wall.hoop_falls, self.wall.axial_falls);
        let (a, b) = (hoop + self.tensile, axial + self.tensile);
        let shear_squared = if shear_squared.value() > 0.0 { shear_squared } else { shear_squared * 0.0 };
        let sum = b * h + a * k;
        let apart = b * h - a * k;
        let root = (apart * apart + shear_squared * (4.0 * h * k)).sqrt();
        let product = a * b - shear_squared;
        if sum.value() > 0.0 || k <= 0.0 { product * 2.0 / (sum + root) } else { (sum - root) * (0.5 / (h * k)) }
    }
}

impl OnCircle for Parts<'_> {
    #[inline(always)]
    fn value(&self, c: f64, s: f64) -> f64 {
        let w = self.wall;
        self.root(w.hoop.at(c, s), w.axial.at(c, s), w.shear_squared.at(c, s))
    }
    #[inline(always)]
    fn jet(&self, _piece: usize, c: f64, s: f64) -> Jet {
        let w = self.wall;
        self.root(w.hoop.jet(c, s), w.axial.jet(c, s), w.shear_squared.jet(c, s))
    }
}

/// The least effective stress in the wall's tangent plane, turned over, x above the pore pressure.
struct Least<'a> {
    wall: &'a EffectiveWall,
    x: f64,
}

impl OnCircle for Least<'_> {
    fn value(&self, c: f64, s: f64) -> f64 {
        -self.wall.place(c, s, self.x).in_the_wall().1
    }
    fn jet(&self, _piece: usize, c: f64, s: f64) -> Jet {
        -self.wall.round(c, s, self.x).in_the_wall().1
    }
}

/// The parting pressure of one place, not a number where it is parted at any.
pub(crate) fn at_place(wall: &EffectiveWall, pore: f64, tensile: f64, c: f64, s: f64) -> f64 {
    if wall.axial_falls <= 0.0 && wall.axial.at(c, s) + tensile <= 0.0 {
        return f64::NAN;
    }
    pore + Parts { wall, tensile }.value(c, s)
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::frames::{Attitude, Azimuth};
    use crate::stress::{Components, Stress};
    use crate::units::{Pressure, Units};
    use crate::well::wall::elastic::Kirsch;

    fn case(poisson: f64) -> Parting {
        // Parting by the hoop stress alone would come too high; Poisson's ratio enters by the axial stress.
        let mpa = Pressure::mpa;
        let s = Stress::from_components(Components {
            nn: mpa(50.0),
            ee: mpa(42.0),
            dd: mpa(60.0),
            ne: mpa(3.0),
            ed: mpa(9.0),
            nd: mpa(-8.0),
        })
        .unwrap();
        let hole = Attitude { inclination: 50.deg(), azimuth: Azimuth::from_true_north(110.deg()) };
        let sh = hole.chain().unwrap().carry(&s);
        let kirsch = Kirsch::new(sh.tensor(), poisson);
        parting(&EffectiveWall::new(&kirsch, 20e6, 0.0, 0.0), 20e6, 2e6, 100e6)
    }

    #[test]
    fn the_shear_along_the_wall_counts_and_so_does_poissons_ratio() {
        for (poisson, expected) in [(0.0, 40.454), (0.25, 38.755), (0.4, 37.447)] {
            let Parting::At(peak) = case(poisson) else { panic!("parted at any pressure") };
            assert!((peak.value * 1e-6 - expected).abs() < 6e-4, "{} {expected}", peak.value);
        }
        let Parting::At(peak) = case(0.25) else { panic!() };
        assert!((peak.phi.to_degrees() / 2.0 - 100.0).abs() < 0.06);
    }
}
