//! What every shear criterion is: an excess over what the rock bears, on effective principal
//! stresses.

use super::Number;

/// How the order of the three principal stresses enters an excess. It tells a wall, where the order
/// changes from place to place, which smooth functions the excess is put together from.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub(crate) enum Order {
    /// It grows with the largest, falls with the smallest, and the middle one has no say: of all
    /// ways to fill in the three the largest excess is the true one.
    Extremes,
    /// All three enter alike but for the middle one, with which it grows.
    Middle,
    /// All three enter alike.
    Any,
}

/// A shear criterion with its constants worked out, in Pa.
pub(crate) trait Criterion: Copy {
    /// How the order of the stresses enters.
    const ORDER: Order;
    /// Whether the excess is a convex function of stress, so that what is safe is a convex set.
    const CONVEX: bool = true;

    /// By how much the stresses σ1', σ2', σ3' exceed what the rock bears: positive where it fails,
    /// zero at the limit, negative where it holds; never NaN. It takes them in the places given, also
    /// when they are not in order (see [`Order`]).
    ///
    /// It is measured so that it is defined for any stress: outside the domain of a criterion it is
    /// positive, the rock fails.
    fn excess<N: Number>(&self, stress: [N; 3]) -> N;

    /// What σ1' ≥ σ2' ≥ σ3' put on the rock, and what the rock bears there: the two sides of the
    /// criterion as it is published. `None` for a side that is not defined there.
    fn sides(&self, stress: [f64; 3]) -> [Option<f64>; 2];

    /// The same as the excess, to a millionth of the stresses, where that is quicker.
    #[inline(always)]
    fn rough(&self, stress: [f64; 3]) -> f64 {
        self.excess(stress)
    }

    /// The size of its strength, for tolerances.
    fn size(&self) -> f64;
}
