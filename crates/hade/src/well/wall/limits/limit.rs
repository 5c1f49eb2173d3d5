//! One limit of a wall.

use serde::{Deserialize, Serialize};

use crate::units::{Angle, Pressure, Quantity};
use crate::well::wall::shear::{LeastBad, Mode, mode_of};
use crate::well::wall::{Wall, direction};

/// Which limit.
#[derive(Clone, Copy, Debug, PartialEq, Eq, Serialize, Deserialize)]
#[serde(rename_all = "snake_case")]
#[non_exhaustive]
pub enum LimitKind {
    /// The lowest pressure at which the wall does not fail in shear, or within an allowed width.
    LowerShear,
    /// The highest pressure at which no place of the wall fails in shear.
    UpperShear,
    /// The pressure at which the wall parts: its least effective principal stress reaches −T₀.
    Initiation,
    /// The pressure at which a wall that is parted already opens: T₀ = 0.
    Reopening,
    /// The least far-field stress S3: a fracture runs on, and mud is lost, above it.
    LeastStress,
    /// The pore pressure: the formation flows in below it.
    PorePressure,
}

impl LimitKind {
    /// "lower shear limit".
    pub fn words(self) -> &'static str {
        match self {
            LimitKind::LowerShear => "lower shear limit",
            LimitKind::UpperShear => "upper shear limit",
            LimitKind::Initiation => "fracture initiation",
            LimitKind::Reopening => "reopening",
            LimitKind::LeastStress => "least stress",
            LimitKind::PorePressure => "pore pressure",
        }
    }
}

/// A limit: the pressure, and where and how the wall is at its end there.
#[derive(Clone, Copy, Debug, PartialEq, Serialize, Deserialize)]
pub struct Limit {
    kind: LimitKind,
    pressure: Option<Pressure>,
    least_bad: Option<Pressure>,
    short_by: Option<Pressure>,
    own_side: Option<Pressure>,
    toolface: Option<Angle>,
    bearing: Option<Angle>,
    effective: Option<[Pressure; 3]>,
    mode: Option<Mode>,
    slips: bool,
    unbounded: bool,
}

impl Limit {
    /// Which limit it is.
    pub fn kind(&self) -> LimitKind {
        self.kind
    }
    /// The pressure, which may be negative or below the pore pressure; `None` when no pressure is
    /// safe.
    pub fn pressure(&self) -> Option<Pressure> {
        self.pressure
    }
    /// When no pressure is safe: the pressure at which the worst place is least bad.
    pub fn least_bad(&self) -> Option<Pressure> {
        self.least_bad
    }
    /// When no pressure is safe: by how much the worst place still fails at the least bad pressure
    /// (shear: in the measure of the criterion; parting: of the least effective principal stress, beyond −T₀).
    pub fn short_by(&self) -> Option<Pressure> {
        self.short_by
    }
    /// When no pressure is safe because two limits have crossed: this one by itself, the lowest
    /// pressure at which nothing fails by too little pressure, or the highest at which nothing fails
    /// by too much (for parting: the one that crossed it is P_p − T₀, below which the wall spalls).
    pub fn own_side(&self) -> Option<Pressure> {
        self.own_side
    }
    /// The tool face where the wall is at its end, 0–180° (it repeats at +180°); for a lower limit
    /// at an allowed width, the middle of the widest arc. `None` where all places are alike, and for
    /// limits of the far field.
    pub fn toolface(&self) -> Option<Angle> {
        self.toolface
    }
    /// The bearing of that tool face; `None` also where it points straight up or down.
    pub fn bearing(&self) -> Option<Angle> {
        self.bearing
    }
    /// σ1', σ2', σ3' there.
    pub fn effective(&self) -> Option<[Pressure; 3]> {
        self.effective
    }
    /// Along which wall direction each of them lies nearest.
    pub fn mode(&self) -> Option<Mode> {
        self.mode
    }
    /// Whether it is slip on the plane of weakness, not failure of the rock beside it.
    pub fn on_weak_plane(&self) -> bool {
        self.slips
    }
    /// Whether there is no such limit because every pressure on that side is safe: a permeable wall
    /// of rock that the criterion makes strong enough.
    pub fn is_unbounded(&self) -> bool {
        self.unbounded
    }
    /// Whether σ3' there is tension. A shear limit then leans on a criterion beyond its range.
    pub fn in_tension(&self) -> bool {
        self.effective.is_some_and(|[.., s3]| s3 < Pressure::default())
    }

    /// What happens at the limit, in words.
    pub fn words(&self) -> String {
        let directions = self.mode.map_or_else(String::new, |mode| {
            let at = if self.pressure.is_none() { "at the least bad, " } else { "" };
            format!("; {at}{}", mode.words())
        });
        let mark = if self.in_tension() { " (in tension)" } else { "" };
        let slip = matches!(self.kind, LimitKind::LowerShear | LimitKind::UpperShear) && self.slips;
        match self.kind {
            _ if self.unbounded => "none: the wall holds at any pressure on this side".to_owned(),
            _ if slip && self.pressure.is_some() => format!("slip on the plane of weakness{directions}{mark}"),
            LimitKind::LowerShear | LimitKind::UpperShear if self.pressure.is_none() => {
                format!("no safe pressure in shear{directions}{mark}")
            }
            LimitKind::LowerShear => format!("shear, the hole closes in{directions}{mark}"),
            LimitKind::UpperShear => format!("shear, the hole is pushed out{directions}{mark}"),
            LimitKind::Initiation | LimitKind::Reopening if self.pressure.is_none() => {
                format!("no safe pressure: parted or spalled at any{directions}")
            }
            LimitKind::Initiation => format!("parting at −T₀{directions}"),
            LimitKind::Reopening => format!("parting at zero{directions}"),
            LimitKind::LeastStress => "a fracture runs on into the far field".to_owned(),
            LimitKind::PorePressure => "balance with the formation's fluid".to_owned(),
        }
    }

    /// A limit of the far field, not of a place.
    pub(super) fn plain(kind: LimitKind, pressure: Pressure) -> Self {
        Limit { pressure: Some(pressure), ..Limit::empty(kind) }
    }

    pub(super) fn empty(kind: LimitKind) -> Self {
        Limit {
            kind,
            pressure: None,
            least_bad: None,
            short_by: None,
            own_side: None,
            toolface: None,
            bearing: None,
            effective: None,
            mode: None,
            slips: false,
            unbounded: false,
        }
    }

    /// Every pressure on that side is safe.
    pub(super) fn none_needed(kind: LimitKind) -> Self {
        Limit { unbounded: true, ..Limit::empty(kind) }
    }

    /// A limit reached at φ (any place when `flat`).
    pub(super) fn reached(wall: &Wall, kind: LimitKind, pressure: f64, phi: f64, flat: bool) -> Self {
        Limit { pressure: Some(Pressure::from_si(pressure)), ..Limit::placed(wall, kind, pressure, phi, flat) }
    }

    /// No pressure is safe; this one is least bad.
    pub(super) fn none_safe(wall: &Wall, kind: LimitKind, least: LeastBad, own_side: Option<f64>) -> Self {
        Limit {
            own_side: own_side.map(Pressure::from_si),
            least_bad: Some(Pressure::from_si(least.pressure)),
            short_by: Some(Pressure::from_si(least.excess)),
            ..Limit::placed(wall, kind, least.pressure, least.phi, least.flat)
        }
    }

    fn placed(wall: &Wall, kind: LimitKind, pressure: f64, phi: f64, flat: bool) -> Self {
        let at = wall.shear.at(0.5 * phi, pressure);
        let toolface = (!flat).then(|| Angle::from_si(0.5 * phi));
        Limit {
            toolface,
            bearing: toolface.and_then(|t| direction::bearing(wall.attitude, t.si())),
            effective: Some(wall.shear.principal(0.5 * phi, pressure).map(Pressure::from_si)),
            mode: Some(mode_of(at, wall.shear.scale())),
            slips: wall.shear.slips_at(pressure, phi),
            ..Limit::empty(kind)
        }
    }
}
