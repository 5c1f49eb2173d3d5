//! Parting of a wall: the pressure at which its least effective principal stress reaches −T₀.
//!
//! In the wall's tangent plane the least principal value of hoop, axial and shear is −T₀ where
//! (σθ − P_p + T₀)(σz − P_p + T₀) = τθz². With σθ = A − p that is one pressure for each place; the
//! wall parts first where it is smallest. Where σz − P_p + T₀ ≤ 0 it is parted along the hole at any
//! pressure. Across the wall the effective stress is p − P_p, so below P_p − T₀ it spalls; where it
//! parts below that pressure already, no pressure is safe.

use super::circle::{Jet, OnCircle, Peak, smallest};
use super::kirsch::{Kirsch, Wave};

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

/// The parting pressure of a wall.
pub(crate) fn parting(kirsch: &Kirsch, pore: f64, tensile: f64) -> Parting {
    let first = in_the_wall(kirsch, pore, tensile);
    if let Some(peak) = first.filter(|peak| peak.value >= pore - tensile) {
        return Parting::At(peak);
    }
    // The strength with which the wall would just part where it just spalls.
    let scale = kirsch.scale() + pore.abs() + tensile;
    let enough = |strength: f64| in_the_wall(kirsch, pore, strength).filter(|peak| peak.value >= pore - strength);
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
    let place = enough(high).unwrap_or(Peak { phi: 0.0, value: pore - high, flat: true });
    Parting::Always {
        least_bad: pore - high,
        beyond: high - tensile,
        phi: place.phi,
        flat: place.flat,
        alone: first.map(|peak| peak.value),
    }
}

/// The pressure above which the wall parts in its tangent plane; none where it does at any.
fn in_the_wall(kirsch: &Kirsch, pore: f64, tensile: f64) -> Option<Peak> {
    let room = kirsch.axial.scaled(1.0, tensile - pore);
    if room.mean - room.amplitude() <= 0.0 {
        return None;
    }
    let scale = kirsch.scale() + pore.abs() + tensile;
    Some(smallest(
        Place { hoop: kirsch.hoop.scaled(1.0, tensile - pore), room, shear_squared: kirsch.shear_squared },
        scale,
    ))
}

/// A − P_p + T₀ − τθz² / (σz − P_p + T₀): the parting pressure round the hole.
struct Place {
    hoop: Wave,
    room: Wave,
    shear_squared: Wave,
}

impl OnCircle for Place {
    #[inline(always)]
    fn value(&self, c: f64, s: f64) -> f64 {
        self.hoop.at(c, s) - self.shear_squared.at(c, s).max(0.0) / self.room.at(c, s)
    }
    fn jet(&self, c: f64, s: f64) -> Jet {
        let (d, d1, d2) = (self.room.at(c, s), self.room.slope(c, s), self.room.bend(c, s));
        let t = self.shear_squared;
        let share = t.at(c, s).max(0.0) / d;
        let share1 = (t.slope(c, s) - share * d1) / d;
        let share2 = (t.bend(c, s) - 2.0 * share1 * d1 - share * d2) / d;
        Jet {
            value: self.hoop.at(c, s) - share,
            slope: self.hoop.slope(c, s) - share1,
            bend: self.hoop.bend(c, s) - share2,
        }
    }
}

/// The parting pressure of one place, not a number where it is parted at any.
pub(crate) fn at_place(kirsch: &Kirsch, pore: f64, tensile: f64, c: f64, s: f64) -> f64 {
    let room = kirsch.axial.at(c, s) - pore + tensile;
    if room <= 0.0 {
        return f64::NAN;
    }
    kirsch.hoop.at(c, s) - pore + tensile - kirsch.shear_squared.at(c, s).max(0.0) / room
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::frames::{Attitude, Azimuth};
    use crate::stress::{Components, Stress};
    use crate::units::{Pressure, Units};

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
        parting(&Kirsch::new(sh.tensor(), poisson), 20e6, 2e6)
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
