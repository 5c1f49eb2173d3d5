//! By how much a wall exceeds what its rock bears, round the hole, at one pressure.

use super::slip::PlaneAtWall;
use crate::rock::{Criterion, Jet, Number, Order};
use crate::well::wall::elastic::{EffectiveWall, Place};
use crate::well::wall::round::{Circle, OnCircle, SAMPLES};

/// The excess of one criterion, and of slip on a plane of weakness, x above the pore pressure.
pub(crate) struct Excess<'a, C> {
    pub wall: &'a EffectiveWall,
    pub criterion: C,
    pub plane: Option<&'a PlaneAtWall>,
    pub x: f64,
}

/// The three principal stresses, largest first.
#[inline(always)]
fn in_order<N: Number>(place: &Place<N>) -> [N; 3] {
    let (e1, e2) = place.in_the_wall();
    let r = place.across;
    [e1.larger(r), e2.larger(e1.smaller(r)), e2.smaller(r)]
}

impl<C: Criterion> Excess<'_, C> {
    /// Into how many smooth pieces the order of the stresses divides the excess.
    #[inline(always)]
    fn intact_pieces() -> usize {
        match C::ORDER {
            Order::Extremes => 3,
            Order::Middle => 2,
            Order::Any => 1,
        }
    }

    /// One of them: the excess with the stress across the wall the least, between, or the largest.
    #[inline(always)]
    fn intact<N: Number>(&self, piece: usize, place: &Place<N>) -> N {
        let (e1, e2) = place.in_the_wall();
        let (r, c) = (place.across, &self.criterion);
        match (C::ORDER, piece) {
            // The middle one is the larger of e2 and the smaller of r and e1.
            (Order::Middle, 1) => c.excess([e1, r, e2]).smaller(c.excess([r, e1, e2])),
            _ => self.intact_part(piece, place),
        }
    }

    /// Into how many parts without an edge: as the pieces, but the order of all three stresses counts.
    #[inline(always)]
    fn intact_parts() -> usize {
        match C::ORDER {
            Order::Extremes | Order::Middle => 3,
            Order::Any => 1,
        }
    }

    /// One of them.
    #[inline(always)]
    fn intact_part<N: Number>(&self, part: usize, place: &Place<N>) -> N {
        let (e1, e2) = place.in_the_wall();
        let (r, c) = (place.across, &self.criterion);
        match (C::ORDER, part) {
            (Order::Any, _) | (_, 0) => c.excess([e1, e2, r]),
            (_, 1) => c.excess([e1, r, e2]),
            (_, _) => c.excess([r, e1, e2]),
        }
    }

    /// The piece that is worst at a place.
    #[inline(always)]
    pub fn piece_at(&self, c: f64, s: f64) -> usize {
        let place = self.wall.place(c, s, self.x);
        let (e1, e2) = place.in_the_wall();
        let below = usize::from(place.across > e2) + usize::from(place.across > e1);
        let intact = below.min(Self::intact_pieces() - 1);
        match self.plane {
            Some(plane) if plane.slip(c, s, &place) > self.intact(intact, &place) => Self::intact_pieces(),
            _ => intact,
        }
    }

    /// With its derivatives by the pressure, at one place.
    #[inline(always)]
    pub fn pressed(&self, c: f64, s: f64, x: f64) -> Jet {
        let place = self.wall.pressed(c, s, x);
        let intact = self.criterion.excess(in_order(&place));
        match self.plane {
            None => intact,
            Some(plane) => intact.larger(plane.slip_pressed(c, s, &place)),
        }
    }
}

impl<C: Criterion> OnCircle for Excess<'_, C> {
    #[inline(always)]
    fn pieces(&self) -> usize {
        Self::intact_pieces() + usize::from(self.plane.is_some())
    }
    #[inline(always)]
    fn value(&self, c: f64, s: f64) -> f64 {
        let place = self.wall.place(c, s, self.x);
        let intact = self.criterion.excess(in_order(&place));
        match self.plane {
            None => intact,
            Some(plane) => intact.larger(plane.slip(c, s, &place)),
        }
    }
    #[inline(always)]
    fn piece(&self, piece: usize, c: f64, s: f64) -> f64 {
        let place = self.wall.place(c, s, self.x);
        match self.plane {
            Some(plane) if piece == Self::intact_pieces() => plane.slip(c, s, &place),
            _ => self.intact(piece, &place),
        }
    }
    /// The plane is asked after once, not at every sample: only then does the processor take several at a
    /// time.
    #[inline(always)]
    fn scan(&self, circle: &Circle) -> [f64; SAMPLES] {
        let (wall, criterion, x) = (*self.wall, self.criterion, self.x);
        let intact = |c: f64, s: f64| criterion.rough(in_order(&wall.place(c, s, x)));
        match self.plane {
            None => circle.each(intact),
            Some(plane) => circle.each(|c, s| intact(c, s).larger(plane.slip(c, s, &wall.place(c, s, x)))),
        }
    }
    #[inline(always)]
    fn jet(&self, piece: usize, c: f64, s: f64) -> Jet {
        let place = self.wall.round(c, s, self.x);
        match self.plane {
            Some(plane) if piece == Self::intact_pieces() => plane.slip_round(c, s, &place),
            _ => self.intact(piece, &place),
        }
    }
    fn parts(&self) -> usize {
        Self::intact_parts() + usize::from(self.plane.is_some())
    }
    fn part(&self, part: usize, c: f64, s: f64) -> Jet {
        let place = self.wall.round(c, s, self.x);
        match self.plane {
            Some(plane) if part == Self::intact_parts() => plane.slip_round(c, s, &place),
            _ => self.intact_part(part, &place),
        }
    }
    /// The part is chosen once, not at every sample: only then does the processor take several at a time.
    fn scan_part(&self, part: usize, circle: &Circle) -> [f64; SAMPLES] {
        let (wall, criterion, x) = (*self.wall, self.criterion, self.x);
        let intact = Excess { wall: &wall, criterion, plane: None, x };
        match (part, self.plane) {
            (_, Some(plane)) if part == Self::intact_parts() => {
                circle.each(|c, s| plane.slip(c, s, &wall.place(c, s, x)))
            }
            (0, _) => circle.each(|c, s| intact.intact_part(0, &wall.place(c, s, x))),
            (1, _) => circle.each(|c, s| intact.intact_part(1, &wall.place(c, s, x))),
            _ => circle.each(|c, s| intact.intact_part(2, &wall.place(c, s, x))),
        }
    }
}
