//! The two projections of the lower hemisphere of directions onto a disc.

use serde::{Deserialize, Serialize};

/// How the lower hemisphere falls on a disc of radius 1: north up, east to the right, straight down
/// at the centre, horizontal directions on the rim (the primitive circle).
///
/// θ is the angle from straight down. Lambert, J.H. (1772) Anmerkungen und Zusätze zur Entwerfung
/// der Land- und Himmelscharten (equal area); Phillips, F.C. (1971) The Use of Stereographic
/// Projection in Structural Geology, 3rd ed., Arnold (both; cited from memory).
#[derive(Clone, Copy, Debug, PartialEq, Eq, Serialize, Deserialize)]
#[serde(rename_all = "snake_case")]
pub enum Projection {
    /// Equal area (the net of Schmidt): r = √2 sin(θ/2). Densities of points can be compared.
    EqualArea,
    /// Equal angle (stereographic, the net of Wulff): r = tan(θ/2). Circles stay circles.
    EqualAngle,
}

/// A direction this near to horizontal (the sine of its plunge) has two ends on the rim.
const HORIZONTAL: f64 = 1e-9;

impl Projection {
    /// Its name as a figure prints it.
    pub fn words(self) -> &'static str {
        match self {
            Projection::EqualArea => "lower hemisphere, equal area (Schmidt net)",
            Projection::EqualAngle => "lower hemisphere, equal angle (Wulff net)",
        }
    }

    /// The disc place (east, north) of a unit vector in north, east, down whose down part is not
    /// negative. With h = sin θ its horizontal part, r = h / √(1 + cos θ) and r = h / (1 + cos θ).
    fn of_lower(self, [north, east, down]: [f64; 3]) -> [f64; 2] {
        let shrink = match self {
            Projection::EqualArea => (1.0 + down).sqrt(),
            Projection::EqualAngle => 1.0 + down,
        };
        [east / shrink, north / shrink]
    }

    /// The disc place (east, north; radius 1 is horizontal) of the lower end of a direction in
    /// north, east, down, of any length. `None` for a direction without length or with a number
    /// that is not finite.
    pub fn place(self, direction: [f64; 3]) -> Option<[f64; 2]> {
        let unit = unit(direction)?;
        let lower = if unit[2] < 0.0 { unit.map(|c| -c) } else { unit };
        Some(self.of_lower(lower))
    }

    /// Where a line without sign falls: one place, or the two ends of a horizontal line (its
    /// eastern end first, of a north–south line the northern one). None as [`Self::place`].
    pub fn places(self, direction: [f64; 3]) -> Vec<[f64; 2]> {
        let Some(unit) = unit(direction) else { return Vec::new() };
        let [north, east, down] = unit;
        if down.abs() > HORIZONTAL {
            return self.place(unit).into_iter().collect();
        }
        let western = east < -HORIZONTAL || (east.abs() <= HORIZONTAL && north < 0.0);
        let [north, east] = if western { [-north, -east] } else { [north, east] };
        let end = self.of_lower([north, east, 0.0]);
        vec![end, end.map(|c| -c)]
    }

    /// The unit vector in north, east, down that falls on a disc place (east, north). Beyond the
    /// rim it goes on over the upper hemisphere; the equal-area disc ends at √2, straight up.
    pub fn direction(self, [x, y]: [f64; 2]) -> [f64; 3] {
        let square = x * x + y * y;
        let (down, grow) = match self {
            Projection::EqualArea => {
                let square = square.min(2.0);
                (1.0 - square, (2.0 - square).sqrt())
            }
            Projection::EqualAngle => ((1.0 - square) / (1.0 + square), 2.0 / (1.0 + square)),
        };
        [y * grow, x * grow, down]
    }
}

fn unit(v: [f64; 3]) -> Option<[f64; 3]> {
    let length = v.iter().map(|c| c * c).sum::<f64>().sqrt();
    (length.is_finite() && length > 0.0).then(|| v.map(|c| c / length))
}

#[cfg(test)]
mod tests {
    use super::*;
    use proptest::prelude::*;

    const BOTH: [Projection; 2] = [Projection::EqualArea, Projection::EqualAngle];

    /// The line of a trend and plunge in degrees.
    fn line(trend: f64, plunge: f64) -> [f64; 3] {
        let ((st, ct), (sp, cp)) = (trend.to_radians().sin_cos(), plunge.to_radians().sin_cos());
        [cp * ct, cp * st, sp]
    }

    #[test]
    fn radius_and_bearing_are_those_of_the_closed_forms() {
        for plunge in [0.001, 5.0, 30.0, 45.0, 60.0, 89.0, 89.999, 90.0] {
            for trend in [0.0, 35.0, 90.0, 144.0, 215.0, 301.0] {
                let theta = (90.0_f64 - plunge).to_radians();
                for (projection, r) in [
                    (Projection::EqualArea, std::f64::consts::SQRT_2 * (theta / 2.0).sin()),
                    (Projection::EqualAngle, (theta / 2.0).tan()),
                ] {
                    let [x, y] = projection.place(line(trend, plunge)).unwrap();
                    let t = trend.to_radians();
                    assert!((x - r * t.sin()).abs() < 1e-15, "{projection:?} {trend} {plunge}");
                    assert!((y - r * t.cos()).abs() < 1e-15, "{projection:?} {trend} {plunge}");
                }
            }
        }
    }

    #[test]
    fn north_is_up_east_is_right_and_down_is_the_centre() {
        for p in BOTH {
            assert_eq!(p.places([2.0, 0.0, 0.0]), [[0.0, 1.0], [0.0, -1.0]]);
            assert_eq!(p.places([0.0, -3.0, 0.0]), [[1.0, 0.0], [-1.0, 0.0]]);
            assert_eq!(p.place([0.0, 0.0, 1.0]), Some([0.0, 0.0]));
            // An upper end is turned to the lower one: north-east and up is seen south-west.
            let [x, y] = p.place([1.0, 1.0, -1.0]).unwrap();
            assert!(x < 0.0 && y < 0.0);
            assert!(p.places([0.0; 3]).is_empty() && p.places([f64::NAN, 0.0, 1.0]).is_empty());
        }
    }

    #[test]
    fn at_45_degrees_the_two_differ_as_printed_nets_do() {
        // r = √2 sin 22.5° = 0.5412, tan 22.5° = 0.4142 (closed forms).
        let radius = |p: Projection| p.place(line(0.0, 45.0)).unwrap()[1];
        assert!((radius(Projection::EqualArea) - 0.541_196_1).abs() < 1e-7);
        assert!((radius(Projection::EqualAngle) - 0.414_213_6).abs() < 1e-7);
    }

    proptest! {
        #[test]
        fn a_line_and_its_antipode_fall_at_the_same_places(
            trend in 0.0..360.0_f64,
            plunge in prop_oneof![-90.0..90.0_f64, Just(0.0), Just(90.0), Just(-90.0)],
        ) {
            let v = line(trend, plunge);
            for p in BOTH {
                let (here, there) = (p.places(v), p.places(v.map(|c| -c)));
                prop_assert_eq!(&here, &there);
                prop_assert_eq!(here.len(), if plunge == 0.0 { 2 } else { 1 });
                for [x, y] in here {
                    prop_assert!(x.hypot(y) <= 1.0 + 1e-12);
                }
            }
        }

        #[test]
        fn a_place_leads_back_to_its_direction(trend in 0.0..360.0_f64, plunge in -85.0..90.0_f64) {
            let v = line(trend, plunge);
            for p in BOTH {
                // Beyond the rim the disc goes on: r from the closed form, whatever the hemisphere.
                let theta = (90.0 - plunge).to_radians();
                let r = match p {
                    Projection::EqualArea => std::f64::consts::SQRT_2 * (theta / 2.0).sin(),
                    Projection::EqualAngle => (theta / 2.0).tan(),
                };
                let t = trend.to_radians();
                let back = p.direction([r * t.sin(), r * t.cos()]);
                for (a, b) in back.iter().zip(v) {
                    prop_assert!((a - b).abs() < 1e-12);
                }
            }
        }
    }
}
