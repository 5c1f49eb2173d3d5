//! Azimuths round the circle, and from true north to another and back.

use hade::prelude::*;
use proptest::prelude::*;

use crate::CASES;

/// What a bearing may differ by, in degrees.
const BEARING_DEG: f64 = 1e-10;

/// The angle between two bearings, 0–180°.
fn apart(a: f64, b: f64) -> f64 {
    let gap = (a - b).rem_euclid(360.0);
    gap.min(360.0 - gap)
}

fn bearing(azimuth: Azimuth) -> f64 {
    azimuth.true_north().unwrap().in_deg()
}

/// A site out of a few dozen, in both hemispheres, in the years of both magnetic models.
fn site() -> impl Strategy<Value = Site> {
    let dates = ["1931-07-01", "1968-02-29", "1999-12-31", "2011-03-14", "2024-12-31", "2026-05-01", "2029-12-31"];
    (0..6_i32, 0..5_i32, 0..dates.len()).prop_map(move |(row, column, date)| {
        let latitude = -62.5 + 25.0 * f64::from(row);
        let (zone, off) = (10 + 11 * column, [-2.9, -1.0, 0.0, 1.7, 3.0][column as usize]);
        let longitude = f64::from(6 * zone - 183) + off;
        let site = Site::at(latitude.deg(), longitude.deg(), dates[date]).unwrap();
        site.with_utm(u8::try_from(zone).unwrap()).unwrap()
    })
}

proptest! {
    #![proptest_config(ProptestConfig::with_cases(CASES))]

    /// A correction is added on the circle: the bearing is within 0–360° and the sum modulo 360°.
    #[test]
    fn a_corrected_azimuth_stays_on_the_circle(a in -360.0..=360.0_f64, correction in -180.0..=180.0_f64, turn in -720.0..=720.0_f64) {
        let magnetic = Azimuth::from_magnetic_north(a.deg()).with_declination(correction.deg()).unwrap();
        for (azimuth, sum) in [(magnetic, a + correction), (magnetic.turned_by(turn.deg()), a + correction + turn)] {
            let found = bearing(azimuth);
            prop_assert!((0.0..360.0).contains(&found), "{}", found);
            prop_assert!(apart(found, sum) < BEARING_DEG, "{} is not {}", found, sum);
        }
        // The direction across is at a right angle, and its other end is the same line.
        let across = bearing(magnetic.perpendicular());
        prop_assert!((apart(across, bearing(magnetic)) - 90.0).abs() < BEARING_DEG);
    }

    /// From true north to magnetic or grid north of a site, and back.
    #[test]
    fn to_another_north_and_back(a in 0.0..360.0_f64, site in site()) {
        let azimuth = Azimuth::from_true_north(a.deg());
        for there in [azimuth.to_magnetic(site).unwrap(), azimuth.to_grid(site).unwrap()] {
            let measured = there.measured().in_deg();
            let anew = match there.north() {
                hade::frames::North::Grid => Azimuth::from_grid_north(measured.deg()),
                _ => Azimuth::from_magnetic_north(measured.deg()),
            };
            let back = bearing(site.true_azimuth(anew).unwrap());
            prop_assert!(apart(back, a) < BEARING_DEG, "{} is not {}", back, a);
        }
    }
}
