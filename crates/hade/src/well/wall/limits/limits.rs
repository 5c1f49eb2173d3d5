//! The limits of a wall together.

use serde::{Deserialize, Serialize};

use super::limit::{Limit, LimitKind};
use crate::error::Result;
use crate::interrupt;
use crate::units::{Angle, Pressure, Quantity, require_between};
use crate::well::wall::Wall;
use crate::well::wall::round::Peak;
use crate::well::wall::setup::WallSetup;
use crate::well::wall::shear::{AtWidth, LeastBad, Window};
use crate::well::wall::tension::{Parting, parting};

/// The pressures that limit a wall. None of them is a recommendation: see
/// [`RecommendedRange`](crate::well::RecommendedRange).
#[derive(Clone, Copy, Debug, PartialEq)]
#[non_exhaustive]
pub struct Limits {
    /// The lowest pressure at which the wall does not fail in shear, or fails in arcs no wider than
    /// the allowed width.
    pub lower_shear: Limit,
    /// The highest pressure at which nothing of the wall fails in shear.
    pub upper_shear: Limit,
    /// Where the wall parts.
    pub initiation: Limit,
    /// Where a wall that is parted already opens.
    pub reopening: Limit,
    /// The least far-field stress S3.
    pub least_stress: Limit,
    /// The pore pressure of the formation.
    pub pore_pressure: Limit,
    pub(super) wall: Wall,
    pub(super) width: Angle,
}

/// The inputs of limits.
#[derive(Clone, Copy, Debug, PartialEq, Serialize, Deserialize)]
pub struct LimitsInputs {
    pub(super) wall: WallSetup,
    pub(super) width: Angle,
}

/// What came out.
#[derive(Clone, Copy, Debug, PartialEq, Serialize, Deserialize)]
pub struct LimitsOutcome {
    pub(super) lower_shear: Limit,
    pub(super) upper_shear: Limit,
    pub(super) initiation: Limit,
    pub(super) reopening: Limit,
    pub(super) least_stress: Limit,
    pub(super) pore_pressure: Limit,
}

impl Wall {
    /// The limits with no shear failure anywhere. All are exact in the tool face and not clamped.
    pub fn limits(&self) -> Limits {
        self.limits_within(Angle::default())
    }

    /// The limits when arcs up to a width are allowed to fail (per lobe; there are two). The upper
    /// shear limit allows nothing to fail.
    ///
    /// # Errors
    /// When the width is outside 0–180°.
    pub fn limits_at_width(&self, width: Angle) -> Result<Limits> {
        require_between("allowed width of a failing arc", width, Angle::deg(0.0), Angle::deg(180.0))?;
        Ok(self.limits_within(width))
    }

    /// The lower shear limit with nothing allowed to fail, by itself: for loops over many walls.
    /// Nothing is allocated. `None` when no pressure is safe, or none is too low.
    /// With Mogi–Coulomb, whose safe pressures may be two intervals, it is the end that Newton's method
    /// reaches from below; [`limits`](Wall::limits) looks through all.
    pub fn lower_shear_limit(&self) -> Option<Pressure> {
        self.shear.lower().map(Pressure::from_si)
    }

    fn limits_within(&self, width: Angle) -> Limits {
        interrupt::check();
        let window = self.shear.window();
        let none_safe = |kind, own_side| Limit::none_safe(self, kind, self.shear.least_bad(), own_side);
        let (lower, upper) = match window {
            Window::Open { lower, upper } => {
                let end = |kind, peak: Option<Peak>| {
                    peak.map_or_else(
                        || Limit::none_needed(kind),
                        |peak| Limit::reached(self, kind, peak.value, peak.phi, peak.flat),
                    )
                };
                (end(LimitKind::LowerShear, lower), end(LimitKind::UpperShear, upper))
            }
            Window::Closed { crossed } => (
                none_safe(LimitKind::LowerShear, crossed.map(|(lower, _)| lower)),
                none_safe(LimitKind::UpperShear, crossed.map(|(_, upper)| upper)),
            ),
        };
        let lower_shear = if width.si() > 0.0 {
            match self.shear.lower_at_width(window, width.si()) {
                AtWidth::At(pressure) => self.lower_with_arc(pressure),
                AtWidth::Never => none_safe(LimitKind::LowerShear, None),
                AtWidth::Unbounded => Limit::none_needed(LimitKind::LowerShear),
            }
        } else {
            lower
        };
        let part = |kind, tensile: f64| match parting(
            self.shear.effective_wall(),
            self.shear.pore,
            tensile,
            self.shear.scale(),
        ) {
            Parting::At(peak) => Limit::reached(self, kind, peak.value, peak.phi, peak.flat),
            Parting::Always { least_bad, beyond, phi, flat, alone } => {
                Limit::none_safe(self, kind, LeastBad { pressure: least_bad, excess: beyond, phi, flat }, alone)
            }
        };
        let [.., s3] = self.setup.inputs.stress.tensor().eigen().values;
        Limits {
            lower_shear,
            upper_shear: upper,
            initiation: part(LimitKind::Initiation, self.setup.inputs.rock.tensile_strength.si()),
            reopening: part(LimitKind::Reopening, 0.0),
            least_stress: Limit::plain(LimitKind::LeastStress, Pressure::from_si(s3)),
            pore_pressure: Limit::plain(LimitKind::PorePressure, self.setup.inputs.pore),
            wall: *self,
            width,
        }
    }

    /// The lower limit at a width: its place is the middle of the widest arc.
    fn lower_with_arc(&self, pressure: f64) -> Limit {
        let arc = self.arcs_outcome(Pressure::from_si(pressure));
        let widest = arc.widest();
        let phi = widest.map_or_else(|| self.shear.worst(pressure).phi, |arc| 2.0 * arc.centre.si());
        let flat = widest.is_none_or(|arc| arc.whole_wall);
        Limit::reached(self, LimitKind::LowerShear, pressure, phi, flat)
    }
}

impl Limits {
    /// The allowed width of a failing arc.
    pub fn width(&self) -> Angle {
        self.width
    }

    /// All of them, in the order they are printed.
    pub fn all(&self) -> [Limit; 6] {
        [self.lower_shear, self.upper_shear, self.initiation, self.reopening, self.least_stress, self.pore_pressure]
    }
}
