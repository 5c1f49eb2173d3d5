//! The weight of a density column against an independent numpy implementation, to 1e-9 relative.

use hade::field::{DensityColumn, DensityLog, OverburdenInputs, Top};
use hade::frames::{Datum, DatumTie, Depth};
use hade::units::Units;
use hade_tests::{agree, assert_all_close, cases, number, numbers, root};

const RELATIVE: f64 = 1e-9;

#[test]
fn vertical_stress_at_every_sample() {
    for case in cases("overburden") {
        let column = DensityColumn {
            tvd: numbers(&case.inputs, "tvd").into_iter().map(|z| z.m()).collect(),
            density: numbers(&case.inputs, "density").into_iter().map(|rho| rho.kg_m3()).collect(),
            water_depth: number(&case.inputs, "water_depth").m(),
            stress_at_top: number(&case.inputs, "sv_top").mpa(),
        };
        let got: Vec<f64> = column.vertical_stress().unwrap().into_iter().map(|s| s.in_mpa()).collect();
        assert_all_close(&case.id, &got, &numbers(&case.outputs, "Sv"), RELATIVE);
    }
}

/// The same columns by the route a log takes (reduced to layers, with levels and a stated top):
/// what lies on the first sample is taken off both.
#[test]
fn a_reduced_log_weighs_the_same() {
    for case in cases("overburden") {
        let tvd = numbers(&case.inputs, "tvd");
        let samples: Vec<_> =
            tvd.iter().zip(numbers(&case.inputs, "density")).map(|(z, rho)| (z.m(), rho.kg_m3())).collect();
        let tie = DatumTie::rotary_table_at(10.m()).unwrap().with_ground_at(0.m()).unwrap();
        let log = DensityLog::from_samples(&samples, Datum::Ground).unwrap().tied(tie).unwrap();
        let want = numbers(&case.outputs, "Sv");
        let top = Top::Land { mean_density: 2000.kg_m3() };
        let stated = 2000.kg_m3().column(tvd[0].m()).in_mpa();
        for (z, sv) in tvd.iter().zip(&want).skip(1) {
            let got = log.overburden(OverburdenInputs { depth: Depth::below_ground(z.m()), hole: tie, top }).unwrap();
            let difference = got.stress.in_mpa() - stated;
            assert!(
                agree(difference, sv - want[0], RELATIVE * sv),
                "{} at {z}: {difference} {}",
                case.id,
                sv - want[0]
            );
        }
    }
}

/// The demo's log at 2950 m TVD of KF-3 against a stand-alone script (Python 3, no library:
/// trapezoids over the samples; 2.0 g/cm³ from the ground, 6.8 m, to the first sample, 250 m).
#[test]
fn the_demo_log_at_2950_m() {
    let log =
        DensityLog::read_las(root().join("notebooks-demo/data/kf1-density.las"), "RHOB", Datum::RotaryTable).unwrap();
    let hole = DatumTie::rotary_table_at(32.4.m()).unwrap().with_ground_at(25.m()).unwrap();
    let top = Top::Land { mean_density: 2.0.g_cm3() };
    let sv = log.overburden(OverburdenInputs { depth: Depth::below_rotary_table(2950.m()), hole, top }).unwrap();
    assert!(agree(sv.stress.in_mpa(), 66.89999093059099, RELATIVE * 66.9), "{}", sv.stress.in_mpa());
}
