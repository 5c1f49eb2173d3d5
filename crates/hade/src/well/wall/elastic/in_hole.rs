//! A far field in the axes of a hole, where many holes are looked at.

use crate::stress::tensor::Tensor;

/// A stress in north, east, down in the axes of a hole, by the sines and cosines of its inclination and
/// azimuth.
#[inline(always)]
pub(crate) fn in_hole(far: Tensor, (si, ci): (f64, f64), (sa, ca): (f64, f64)) -> Tensor {
    let [nn, ee, dd, ne, ed, nd] = far.0;
    // About down to the azimuth, then about the right axis by the inclination.
    let uu = nn * ca * ca + ee * sa * sa + 2.0 * ne * sa * ca;
    let vv = nn * sa * sa + ee * ca * ca - 2.0 * ne * sa * ca;
    let uv = (ee - nn) * sa * ca + ne * (ca * ca - sa * sa);
    let (ud, vd) = (nd * ca + ed * sa, ed * ca - nd * sa);
    Tensor([
        ci * ci * uu + si * si * dd - 2.0 * si * ci * ud,
        vv,
        si * si * uu + ci * ci * dd + 2.0 * si * ci * ud,
        ci * uv - si * vd,
        si * uv + ci * vd,
        si * ci * (uu - dd) + (ci * ci - si * si) * ud,
    ])
}
