//! Minimum curvature against an independent numpy implementation, to 1e-9 relative.

use hade::frames::Azimuth;
use hade::units::Units;
use hade::well::{Station, StationPosition, Survey};
use hade_tests::{agree, assert_all_close, cases, numbers, root};

const RELATIVE: f64 = 1e-9;

fn survey_of(inputs: &serde_json::Value) -> Survey {
    let (md, i, a) = (numbers(inputs, "md"), numbers(inputs, "inclination"), numbers(inputs, "azimuth"));
    assert_eq!(numbers(inputs, "tie_ned"), [0.0; 3], "the cases count from their first station");
    let stations: Vec<Station> = (0..md.len())
        .map(|k| Station { md: md[k].m(), inclination: i[k].deg(), azimuth: Azimuth::from_true_north(a[k].deg()) })
        .collect();
    Survey::from_stations(&stations).unwrap()
}

/// A coordinate the hole hardly moves along (TVD of a level hole) is held to 1e-12 of its length.
#[test]
fn places_and_doglegs_of_every_station() {
    for case in cases("min_curvature") {
        let rows = survey_of(&case.inputs).table().unwrap().rows();
        let list = |of: fn(&StationPosition) -> f64| rows.iter().map(of).collect::<Vec<_>>();
        let md = numbers(&case.inputs, "md");
        let nothing = 1e-12 * (md[md.len() - 1] - md[0]);
        let north_east_down =
            [("N", list(|r| r.north.in_m())), ("E", list(|r| r.east.in_m())), ("TVD", list(|r| r.tvd.in_m()))];
        for (key, got) in north_east_down {
            let want = numbers(&case.outputs, key);
            if want.iter().all(|w| w.abs() <= nothing) {
                assert!(got.iter().all(|g| g.abs() <= nothing), "{} {key}: {got:?}", case.id);
            } else {
                assert_all_close(&format!("{} {key}", case.id), &got, &want, RELATIVE);
            }
        }
        let doglegs: Vec<f64> = rows.iter().skip(1).map(|r| r.dogleg.in_deg()).collect();
        let want = numbers(&case.outputs, "dogleg_deg");
        if want.iter().all(|w| *w == 0.0) {
            assert!(doglegs.iter().all(|d| *d == 0.0), "{}", case.id);
            continue;
        }
        assert_all_close(&format!("{} dogleg", case.id), &doglegs, &want, RELATIVE);
        let severity: Vec<f64> = rows.iter().skip(1).map(|r| r.dogleg_in_30_m.in_deg()).collect();
        assert_all_close(
            &format!("{} severity", case.id),
            &severity,
            &numbers(&case.outputs, "dls_deg_per_30m"),
            RELATIVE,
        );
    }
}

/// The position at each station is the table's row, and its card passes its own checks.
#[test]
fn positions_at_stations_are_the_rows_of_the_table() {
    use hade::card::Explain;
    for case in cases("min_curvature") {
        let survey = survey_of(&case.inputs);
        for (row, md) in survey.table().unwrap().rows().iter().zip(numbers(&case.inputs, "md")) {
            let p = survey.at(md.m()).unwrap();
            assert_eq!((p.north, p.east, p.tvd, p.dogleg), (row.north, row.east, row.tvd, row.dogleg), "{}", case.id);
            assert!(p.card().passed(), "{} at {md}: {:#?}", case.id, p.card().checks);
        }
    }
}

/// The demo's survey at 2950 m TVD against a stand-alone script (Python 3, no library: the tangent
/// of every arc summed by Simpson's rule with 200 panels, MD found by bisection).
#[test]
fn the_demo_hole_at_2950_m() {
    let survey = Survey::read_csv(root().join("notebooks-demo/data/kf3-survey.csv")).unwrap();
    let p = survey.at_tvd(2950.m()).unwrap();
    let got = [
        p.md.in_m(),
        p.north.in_m(),
        p.east.in_m(),
        p.attitude.inclination.in_deg(),
        p.attitude.azimuth.true_north().unwrap().in_deg(),
    ];
    let want = [3456.011522138769, -740.8392470513753, 1266.9177086574696, 41.617634254638304, 119.78140732204204];
    for (g, w) in got.iter().zip(want) {
        assert!(agree(*g, w, RELATIVE * w.abs()), "{got:?}");
    }
}
