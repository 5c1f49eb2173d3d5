//! A wall whose places have both ends of their safe pressures in closed form, and what bounds on the whole wall say of
//! it; of one wall, or of four side by side.

use super::root::Root;
use crate::lanes::Lanes;
use crate::rock::MohrCoulomb;
use crate::well::wall::elastic::Kirsch;

/// A wall that is impermeable, of rock by Mohr–Coulomb without a plane of weakness; Pa.
#[derive(Clone, Copy, Debug, PartialEq)]
pub(crate) struct ClosedForm<N = f64> {
    pub(super) kirsch: Kirsch<N>,
    pub(super) line: MohrCoulomb<N>,
    pub(super) pore: N,
    pub(super) scale: N,
    /// Amplitudes of hoop and axial stress.
    pub(super) swings: [N; 2],
}

/// What certainly holds all round.
pub(super) struct Bounds<N: Lanes> {
    pub closing: N::Mask,
    pub within: N::Mask,
    pub pushed: N::Mask,
    /// The least effective principal stress is not below it.
    pub least: N,
}

impl<N: Lanes> ClosedForm<N> {
    /// `scale` is the size of the numbers at hand, for tolerances.
    #[inline(always)]
    pub fn new(kirsch: Kirsch<N>, line: MohrCoulomb<N>, pore: N, scale: N) -> Self {
        ClosedForm { kirsch, line, pore, scale, swings: [kirsch.hoop.amplitude(), kirsch.axial.amplitude()] }
    }

    /// Whether by bounds on the whole wall nothing fails at a pressure, and it does not part with a tensile strength.
    /// Where they do not say so, it may still hold.
    #[inline(always)]
    pub fn surely_holds(&self, pressure: N, tensile: N) -> N::Mask {
        let bounds = self.bounds(pressure);
        bounds.closing & bounds.within & bounds.pushed & bounds.least.at_least(-tensile)
    }

    /// The lower end by one climb, and whether it is proved to be that. Where it is not, it may be any number.
    #[inline(always)]
    pub fn climbed_lower(&self) -> (N, N::Mask) {
        let (lower, highest) = self.closing().climbed(self.kirsch.hoop, self.swings[0]);
        (lower, highest & self.only_closes(lower))
    }

    /// Whether by bounds on the whole wall nothing fails at a pressure but what closes in.
    #[inline(always)]
    pub(super) fn only_closes(&self, pressure: N) -> N::Mask {
        let bounds = self.bounds(pressure);
        bounds.within & bounds.pushed
    }

    /// What certainly holds all round at a pressure. Hoop and axial stress have their crests at one
    /// place, so both are straight lines in u, the cosine from there; with the largest τθz² all round
    /// each condition is a convex function of u, and largest at u = 1 or −1.
    #[inline(always)]
    pub(super) fn bounds(&self, pressure: N) -> Bounds<N> {
        let (half, one) = (N::of(0.5), N::of(1.0));
        let MohrCoulomb { q, ucs } = self.line;
        let ([hoop1, axial1], hoop0, axial0) = (self.swings, self.kirsch.hoop.mean, self.kirsch.axial.mean);
        // The square of one sine is nowhere above twice its mean.
        let shear = N::of(2.0) * self.kirsch.shear_squared.mean;
        let across = pressure - self.pore;
        let (m0, m1) = (half * (hoop0 + axial0 - pressure) - self.pore, half * (hoop1 + axial1));
        let (d0, d1) = (half * (hoop0 - axial0 - pressure), half * (hoop1 - axial1));
        let at = |m: N, d: N| {
            let radius = (d * d + shear).sqrt();
            Bounds {
                closing: (ucs + q * across).at_least(m + radius),
                within: (ucs + (q - one) * m).at_least((one + q) * radius),
                pushed: ucs.at_least(across + q * (radius - m)),
                least: m - radius,
            }
        };
        let (crest, trough): (Bounds<N>, Bounds<N>) = (at(m0 + m1, d0 + d1), at(m0 - m1, d0 - d1));
        Bounds {
            closing: crest.closing & trough.closing,
            within: crest.within & trough.within,
            pushed: crest.pushed & trough.pushed,
            least: across.smaller(crest.least).smaller(trough.least),
        }
    }

    /// The pressures between which a place closes in by e1 and by e2.
    #[inline(always)]
    pub(super) fn closing(&self) -> Root<N> {
        let (MohrCoulomb { q, ucs }, kirsch, one) = (self.line, &self.kirsch, N::of(1.0));
        let b = ucs - (q - one) * self.pore;
        let (by_hoop, by_axial) = (one / (one + q), one / q);
        Root::new(
            kirsch.hoop.scaled(by_hoop, -b * by_hoop),
            kirsch.axial.scaled(by_axial, -b * by_axial),
            kirsch.shear_squared.scaled(by_hoop * by_axial, N::of(0.0)),
        )
    }
}
