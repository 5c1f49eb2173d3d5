//! A far field in the axes of a hole, where many holes are looked at.

use crate::lanes::Lanes;

/// A stress in north, east, down (nn, ee, dd, ne, ed, nd) in the axes of a hole (xx, yy, zz, xy, yz, xz), by the sines
/// and cosines of its inclination and azimuth.
#[inline(always)]
pub(crate) fn in_hole<N: Lanes>([nn, ee, dd, ne, ed, nd]: [N; 6], (si, ci): (N, N), (sa, ca): (N, N)) -> [N; 6] {
    let two = N::of(2.0);
    // About down to the azimuth, then about the right axis by the inclination.
    let uu = nn * ca * ca + ee * sa * sa + two * ne * sa * ca;
    let vv = nn * sa * sa + ee * ca * ca - two * ne * sa * ca;
    let uv = (ee - nn) * sa * ca + ne * (ca * ca - sa * sa);
    let (ud, vd) = (nd * ca + ed * sa, ed * ca - nd * sa);
    [
        ci * ci * uu + si * si * dd - two * si * ci * ud,
        vv,
        si * si * uu + ci * ci * dd + two * si * ci * ud,
        ci * uv - si * vd,
        si * uv + ci * vd,
        si * ci * (uu - dd) + (ci * ci - si * si) * ud,
    ]
}
