//! Tensile cracks of a wall at a pressure: where they open, and how they are tilted.

use serde::{Deserialize, Serialize};

use super::check;
use super::parting::{Parting, parting};
use crate::card::{Card, Check, Explain, Explanation};
use crate::error::Result;
use crate::units::{Angle, Pressure, Quantity};
use crate::well::wall::round::on_circle;
use crate::well::wall::second_route::ByVectors;
use crate::well::wall::setup::WallSetup;
use crate::well::wall::shear::MOST_ARCS;
use crate::well::wall::{AtPressure, Wall, direction};

/// A place of the wall where a tensile crack opens first, or would.
#[derive(Clone, Copy, Debug, PartialEq, Serialize, Deserialize)]
#[non_exhaustive]
pub struct CrackPlace {
    /// Its tool face, 0–180°; it repeats at +180°, where the tilt has the other sign.
    pub toolface: Angle,
    /// The bearing of that tool face, `None` where it points straight up or down.
    pub bearing: Option<Angle>,
    /// The angle between the crack's trace on the wall and the hole's axis, more than −90° and at most
    /// 90°: positive when the trace is turned clockwise from the axis as seen from inside the hole looking
    /// at the wall with down-hole down, so that the tool face falls going down along it. `None` where
    /// the stress in the wall is the same in every direction.
    pub tilt: Option<Angle>,
}

/// An arc of the wall that is parted in tension. It stands for two: the same is parted on the far side.
#[derive(Clone, Copy, Debug, PartialEq, Serialize, Deserialize)]
#[non_exhaustive]
pub struct CrackArc {
    /// The tool face of its middle, 0–180°; it repeats at +180°. When the whole wall is parted, that of
    /// the place where the stress is least.
    pub centre: Angle,
    /// Its whole width; 180° when the whole wall is parted.
    pub width: Angle,
    /// Whether the whole wall is parted.
    pub whole_wall: bool,
    /// The place of the arc where the least effective principal stress is least; `None` where all
    /// places are alike.
    pub first: Option<CrackPlace>,
}

/// Where a wall is parted in tension at a pressure, and the tilt of the cracks; also when nothing is.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct TensileCracks {
    pub(super) wall: Wall,
    pub(super) inputs: AtPressure,
    pub(super) outcome: CracksOutcome,
}

/// What came out.
#[derive(Clone, Copy, Debug, PartialEq, Serialize, Deserialize)]
pub struct CracksOutcome {
    /// Widest first.
    pub(super) arcs: [Option<CrackArc>; MOST_ARCS],
    /// The least effective principal stress in the wall.
    pub(super) least: Pressure,
    /// Where it is; `None` where all places are alike.
    pub(super) first: Option<CrackPlace>,
    /// The pressure at which the first crack opens; `None` where the wall is parted at any.
    pub(super) initiation: Option<Pressure>,
    /// Where it opens then; `None` also where all places are alike.
    pub(super) initiation_at: Option<CrackPlace>,
}

impl Wall {
    /// The tensile cracks of the wall at a pressure: the arcs where the least effective principal stress
    /// in the wall's tangent plane is beyond −T₀, where it is least, and the tilt of the crack there.
    ///
    /// # Errors
    /// When the pressure is not a finite number.
    pub fn tensile_cracks(&self, pressure: Pressure) -> Result<TensileCracks> {
        let inputs = self.at_pressure(pressure)?;
        Ok(TensileCracks { wall: *self, inputs, outcome: self.cracks_outcome(pressure.si()) })
    }

    pub(crate) fn cracks_outcome(&self, pressure: f64) -> CracksOutcome {
        let tensile = self.setup.inputs.rock.tensile_strength.si();
        let least = self.shear.least_of_wall(pressure);
        let first = (!least.flat).then(|| self.crack_place(0.5 * least.phi, pressure));
        let initiation = match parting(self.shear.effective_wall(), self.shear.pore, tensile, self.shear.scale()) {
            Parting::At(peak) => Some(peak),
            Parting::Always { .. } => None,
        };
        CracksOutcome {
            arcs: self.crack_arcs(tensile, pressure, first),
            least: Pressure::from_si(least.value),
            first,
            initiation: initiation.map(|peak| Pressure::from_si(peak.value)),
            initiation_at: initiation
                .filter(|peak| !peak.flat)
                .map(|peak| self.crack_place(0.5 * peak.phi, peak.value)),
        }
    }

    fn crack_place(&self, theta: f64, pressure: f64) -> CrackPlace {
        CrackPlace {
            toolface: Angle::from_si(theta),
            bearing: direction::bearing(self.attitude, theta),
            tilt: self.shear.tilt(theta, pressure).map(Angle::from_si),
        }
    }

    fn crack_arcs(&self, tensile: f64, pressure: f64, first: Option<CrackPlace>) -> [Option<CrackArc>; MOST_ARCS] {
        let arcs = self.shear.parted(tensile, pressure);
        let mut found = [None; MOST_ARCS];
        if arcs.whole {
            if let Some(cell) = found.first_mut() {
                *cell = Some(CrackArc {
                    centre: first.map_or(Angle::default(), |place| place.toolface),
                    width: Angle::from_si(std::f64::consts::PI),
                    whole_wall: true,
                    first,
                });
            }
            return found;
        }
        for (cell, (from, to)) in found.iter_mut().zip(arcs.list()) {
            // The least of all is known better than a search within the arc finds it.
            let known =
                first.filter(|place| (2.0 * place.toolface.si() - from).rem_euclid(std::f64::consts::TAU) < to - from);
            let place = known.unwrap_or_else(|| {
                let phi = on_circle(self.shear.least_of_arc(pressure, (*from, *to)));
                self.crack_place(0.5 * phi, pressure)
            });
            *cell = Some(CrackArc {
                centre: Angle::from_si(0.5 * on_circle(0.5 * (from + to))),
                width: Angle::from_si(0.5 * (to - from)),
                whole_wall: false,
                first: Some(place),
            });
        }
        found.sort_by(|a, b| {
            let key = |x: &Option<CrackArc>| x.map_or((1.0, 0.0), |x| (-(x.width.si() * 1e10).round(), x.centre.si()));
            let (a, b) = (key(a), key(b));
            a.0.total_cmp(&b.0).then(a.1.total_cmp(&b.1))
        });
        found
    }
}

impl CracksOutcome {
    pub(crate) fn list(&self) -> impl Iterator<Item = CrackArc> {
        self.arcs.iter().flatten().copied()
    }

    /// By the whole tensor in north, east, down; shared with the image of the wall.
    pub(crate) fn checks(&self, setup: &WallSetup, pressure: f64) -> Vec<Check> {
        ByVectors::new(setup).map_or_else(Vec::new, |route| check::check(&route, setup, pressure, self))
    }
}

impl TensileCracks {
    /// The arcs that are parted, widest first; each repeats at +180° with the tilt of the other sign.
    pub fn arcs(&self) -> Vec<CrackArc> {
        self.outcome.list().collect()
    }

    /// Whether any of the wall is parted.
    pub fn any(&self) -> bool {
        self.outcome.list().next().is_some()
    }

    /// The least effective principal stress in the wall's tangent plane, all round.
    pub fn least_stress(&self) -> Pressure {
        self.outcome.least
    }

    /// Where that is, and the tilt of a crack there; `None` where all places are alike.
    pub fn first(&self) -> Option<CrackPlace> {
        self.outcome.first
    }

    /// The pressure at which the first crack opens; `None` where the wall is parted at any.
    pub fn initiation(&self) -> Option<Pressure> {
        self.outcome.initiation
    }

    /// Where the first crack opens at that pressure, and its tilt; `None` also where all places are alike.
    pub fn initiation_at(&self) -> Option<CrackPlace> {
        self.outcome.initiation_at
    }

    /// The pressure in the hole.
    pub fn pressure(&self) -> Pressure {
        self.inputs.pressure
    }
}

impl Explain for TensileCracks {
    const KIND: &'static str = "tensile-cracks";
    type Inputs = AtPressure;
    type Outcome = CracksOutcome;
    // The first place of a second arc is where a smooth function is least, found to half the digits.
    const REPLAY_TOLERANCE: f64 = 1e-7;

    fn compute(inputs: AtPressure) -> Result<Self> {
        Wall::of(inputs.wall)?.tensile_cracks(inputs.pressure)
    }
    fn inputs(&self) -> AtPressure {
        self.inputs
    }
    fn outcome(&self) -> CracksOutcome {
        self.outcome
    }
    fn check(inputs: &AtPressure, outcome: &CracksOutcome) -> Vec<Check> {
        outcome.checks(&inputs.wall, inputs.pressure.si())
    }
    fn explain(&self) -> Explanation {
        self.explanation()
    }
    fn upstream(&self) -> Vec<Card> {
        self.wall.upstream()
    }
}
