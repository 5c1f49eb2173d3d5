//! Walls at random for the properties: every criterion, through any wall, warmed or cooled, with and
//! without a plane of weakness.
#![cfg(test)]

use super::{Thermal, Wall, WallInputs, WeakPlane};
use crate::frames::{Attitude, Azimuth, Borehole, Plane};
use crate::rock::{HoekBrown, Rock, Strength};
use crate::stress::{Components, Stress};
use crate::units::{Angle, Expansion, Pressure, Units, Warming};

/// How many numbers of 0–1 make a wall.
pub(super) const NUMBERS: usize = 28;
/// How many criteria there are.
pub(super) const CRITERIA: usize = 7;

/// A wall in plain numbers, MPa and degrees: what the formulas of the test read.
#[derive(Clone, Copy, Debug, PartialEq)]
pub(super) struct Plain {
    /// North, east, down: nn, ee, dd, ne, ed, nd.
    pub six: [f64; 6],
    pub inclination: f64,
    pub azimuth: f64,
    pub pore: f64,
    pub poisson: f64,
    pub tensile: f64,
    pub rock: PlainRock,
    /// Biot's coefficient and sealing.
    pub seepage: Option<[f64; 2]>,
    /// ΔT (K), E (MPa), α_T (1/K).
    pub thermal: Option<[f64; 3]>,
    /// Strike, dip, cohesion, friction angle.
    pub weak: Option<[f64; 4]>,
}

/// A strength in plain numbers.
#[derive(Clone, Copy, Debug, PartialEq)]
pub(super) enum PlainRock {
    MohrCoulomb {
        c: f64,
        phi: f64,
    },
    MogiCoulomb {
        c: f64,
        phi: f64,
    },
    ModifiedLade {
        c: f64,
        phi: f64,
    },
    /// 0 inscribed, 1 circumscribed, 2 extension.
    DruckerPrager {
        fit: usize,
        c: f64,
        phi: f64,
    },
    HoekBrown {
        sigma_ci: f64,
        m_i: f64,
        gsi: f64,
        disturbance: f64,
    },
}

impl PlainRock {
    pub fn strength(self) -> Strength {
        match self {
            PlainRock::MohrCoulomb { c, phi } => Strength::mohr_coulomb(c.mpa(), phi.deg()),
            PlainRock::MogiCoulomb { c, phi } => Strength::mogi_coulomb(c.mpa(), phi.deg()),
            PlainRock::ModifiedLade { c, phi } => Strength::modified_lade(c.mpa(), phi.deg()),
            PlainRock::DruckerPrager { fit, c, phi } => {
                let (c, phi): (Pressure, Angle) = (c.mpa(), phi.deg());
                match fit {
                    0 => Strength::drucker_prager_inscribed(c, phi),
                    1 => Strength::drucker_prager_circumscribed(c, phi),
                    _ => Strength::drucker_prager_extension(c, phi),
                }
            }
            PlainRock::HoekBrown { sigma_ci, m_i, gsi, disturbance } => {
                Strength::hoek_brown(HoekBrown { sigma_ci: sigma_ci.mpa(), m_i, gsi, disturbance })
            }
        }
    }

    /// The same rock with its cohesion (or σci) times a factor above one.
    pub fn stronger(self, factor: f64) -> Self {
        match self {
            PlainRock::MohrCoulomb { c, phi } => PlainRock::MohrCoulomb { c: c * factor, phi },
            PlainRock::MogiCoulomb { c, phi } => PlainRock::MogiCoulomb { c: c * factor, phi },
            PlainRock::ModifiedLade { c, phi } => PlainRock::ModifiedLade { c: c * factor, phi },
            PlainRock::DruckerPrager { fit, c, phi } => PlainRock::DruckerPrager { fit, c: c * factor, phi },
            PlainRock::HoekBrown { sigma_ci, m_i, gsi, disturbance } => {
                PlainRock::HoekBrown { sigma_ci: sigma_ci * factor, m_i, gsi, disturbance }
            }
        }
    }
}

impl Plain {
    pub fn stress(&self) -> Stress<Borehole> {
        let [nn, ee, dd, ne, ed, nd] = self.six.map(|c| c.mpa());
        let azimuth = Azimuth::from_true_north(self.azimuth.deg());
        let chain = Attitude { inclination: self.inclination.deg(), azimuth }.chain().unwrap();
        chain.carry(&Stress::from_components(Components { nn, ee, dd, ne, nd, ed }).unwrap())
    }

    pub fn wall(&self) -> Wall {
        let rock = Rock { poisson: self.poisson, tensile_strength: self.tensile.mpa(), strength: self.rock.strength() };
        let mut wall = Wall::new(WallInputs { stress: self.stress(), pore: self.pore.mpa(), rock }).unwrap();
        if let Some([biot, sealing]) = self.seepage {
            wall = wall.partly_sealed(biot, sealing).unwrap();
        }
        if let Some([warming, youngs_modulus, expansion]) = self.thermal {
            let thermal = Thermal {
                warming: Warming::kelvin(warming),
                youngs_modulus: youngs_modulus.mpa(),
                expansion: Expansion::per_kelvin(expansion),
            };
            wall = wall.thermal(thermal).unwrap();
        }
        if let Some([strike, dip, cohesion, friction]) = self.weak {
            let plane = Plane { strike: Azimuth::from_true_north(strike.deg()), dip: dip.deg() };
            let weak = WeakPlane { plane, cohesion: cohesion.mpa(), friction_angle: friction.deg() };
            wall = wall.weak_plane(weak).unwrap();
        }
        wall
    }

    /// From numbers of 0–1, for one criterion. Every number gives a wall; the kinds of walls are in
    /// fixed shares.
    pub fn at_random(u: &[f64; NUMBERS], criterion: usize) -> Self {
        let between = |k: usize, low: f64, high: f64| low + u[k] * (high - low);
        // An end of a range now and then.
        let with_ends = |k: usize, low: f64, high: f64| low + ((u[k] * 1.3 - 0.15).clamp(0.0, 1.0)) * (high - low);
        let swing = if u[9] < 0.15 { 0.0 } else { 1.0 };
        let six = [
            between(0, 20.0, 80.0),
            between(1, 20.0, 80.0),
            between(2, 20.0, 80.0),
            between(3, -8.0, 8.0) * swing,
            between(4, -8.0, 8.0) * swing,
            between(5, -8.0, 8.0) * swing,
        ];
        let (c, phi) = (between(11, 1.0, 30.0), between(12, 8.0, 50.0));
        let rock = match criterion {
            0 => PlainRock::MohrCoulomb { c, phi },
            1 => PlainRock::MogiCoulomb { c, phi },
            2 => PlainRock::ModifiedLade { c, phi },
            3..=5 => PlainRock::DruckerPrager { fit: criterion - 3, c, phi },
            _ => PlainRock::HoekBrown {
                sigma_ci: between(11, 20.0, 180.0),
                m_i: between(12, 4.0, 30.0),
                gsi: with_ends(13, 30.0, 100.0),
                disturbance: with_ends(14, 0.0, 1.0),
            },
        };
        let seepage = (u[15] > 0.4).then(|| [with_ends(16, 0.0, 1.0), if u[15] > 0.7 { 0.0 } else { u[17] }]);
        let thermal =
            (u[18] > 0.6).then(|| [between(19, -40.0, 40.0), between(20, 5e3, 50e3), between(21, 5e-6, 15e-6)]);
        let weak = (u[22] > 0.55).then(|| {
            [between(23, 0.0, 360.0), with_ends(24, 0.0, 90.0), with_ends(25, 0.0, 8.0), with_ends(26, 5.0, 40.0)]
        });
        Plain {
            six,
            inclination: with_ends(6, 0.0, 180.0),
            azimuth: between(7, 0.0, 360.0),
            pore: between(8, 0.0, 30.0),
            poisson: with_ends(10, 0.0, 0.5),
            tensile: with_ends(27, 0.0, 8.0),
            rock,
            seepage,
            thermal,
            weak,
        }
    }
}

/// Numbers of 0–1, the same every time (splitmix64).
pub(super) struct Numbers(u64);

impl Numbers {
    pub fn new(start: u64) -> Self {
        Numbers(start)
    }

    pub fn next_number(&mut self) -> f64 {
        self.0 = self.0.wrapping_add(0x9e37_79b9_7f4a_7c15);
        let mut z = self.0;
        z = (z ^ (z >> 30)).wrapping_mul(0xbf58_476d_1ce4_e5b9);
        z = (z ^ (z >> 27)).wrapping_mul(0x94d0_49bb_1331_11eb);
        ((z ^ (z >> 31)) >> 11) as f64 / (1_u64 << 53) as f64
    }

    pub fn next_numbers(&mut self) -> [f64; NUMBERS] {
        std::array::from_fn(|_| self.next_number())
    }
}
