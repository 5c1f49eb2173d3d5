//! One hole at sea, 25 m from the rotary table to the sea and 300 m of water, whose pressures are
//! stated from three different levels: the numbers must not depend on which.

use hade::prelude::*;
use hade_tests::{agree, assert_printed};

const AIR_GAP: f64 = 25.0;
const WATER: f64 = 300.0;

fn hole() -> DatumTie {
    DatumTie::rotary_table_at(AIR_GAP.m()).unwrap().with_mudline_at((-WATER).m()).unwrap()
}

/// The three levels with how far each lies below the rotary table.
const LEVELS: [(Datum, f64); 3] =
    [(Datum::RotaryTable, 0.0), (Datum::MeanSeaLevel, AIR_GAP), (Datum::Mudline, AIR_GAP + WATER)];

/// Depths below the rotary table, metres, with S_v, S_Hmax, S_hmin and pore pressure in MPa.
const TABLE: [(f64, [f64; 4]); 4] = [
    (325.0, [3.02, 3.02, 3.02, 3.02]),
    (1200.0, [20.5, 18.25, 15.75, 12.0]),
    (2400.0, [47.0, 43.5, 37.0, 25.5]),
    (3600.0, [75.5, 70.25, 60.5, 41.0]),
];

fn profile(level: Datum, lower: f64, column: usize) -> PressureProfile {
    let points: Vec<_> = TABLE.iter().map(|(z, p)| ((z - lower).m(), p[column].mpa())).collect();
    PressureProfile::from_points(&points, level).unwrap().tied(hole()).unwrap()
}

fn tensor(level: Datum, lower: f64, asked: Depth) -> Stress {
    let at = |column: usize| profile(level, lower, column).at(asked).unwrap().pressure;
    Stress::from_horizontals(Horizontals {
        sv: at(0),
        sh_max: at(1),
        sh_min: at(2),
        sh_max_azimuth: Azimuth::from_true_north(30.deg()),
    })
    .unwrap()
}

/// The same table from three levels, asked for at depths from three levels: the same pressures, the
/// same tensor, to the last bit where the depths are whole metres and to rounding elsewhere.
#[test]
fn tables_from_any_level_give_the_same_pressures_and_tensor() {
    for below_rotary in [325.0, 1000.0, 1200.0, 2950.0, 3600.0, 2345.678] {
        let exact = below_rotary == f64::trunc(below_rotary);
        let asked = |lower: f64, below: Datum| Depth { tvd: (below_rotary - lower).m(), below };
        let first = tensor(Datum::RotaryTable, 0.0, asked(0.0, Datum::RotaryTable));
        let mud = profile(Datum::RotaryTable, 0.0, 3).at(asked(0.0, Datum::RotaryTable)).unwrap();
        for (level, lower) in LEVELS {
            for (from, above) in LEVELS {
                let here = tensor(level, lower, asked(above, from));
                assert!(first.is_close(&here, 1e-6.pa()), "{level:?} {from:?} {below_rotary}");
                assert!(!exact || first == here, "{level:?} {from:?} {below_rotary}");
                let pore = profile(level, lower, 3).at(asked(above, from)).unwrap();
                assert!(agree(pore.pressure.in_pa(), mud.pressure.in_pa(), 1e-6));
                // The mud weight counts from the rotary table, whatever the table counts from.
                let (a, b) = (pore.mud_weight.unwrap().in_sg(), mud.mud_weight.unwrap().in_sg());
                assert!(agree(a, b, 1e-12), "{level:?} {from:?}: {a} {b}");
                assert!(pore.card().passed());
            }
        }
    }
}

/// Taking one level for another moves the pressure by the difference of the levels: 325 m of a table
/// of 13 MPa/km are over 4 MPa.
#[test]
fn a_table_read_from_the_wrong_level_is_far_off() {
    let asked = Depth::below_rotary_table(2950.m());
    let right = profile(Datum::Mudline, AIR_GAP + WATER, 3).at(asked).unwrap().pressure;
    let wrong = profile(Datum::Mudline, 0.0, 3).at(asked).unwrap().pressure;
    assert!((right - wrong).in_mpa() > 3.5, "{right} {wrong}");
}

/// A depth from a level that is not tied to the table's is refused, and so is a file without a datum;
/// each message says what to write.
#[test]
fn an_undeclared_datum_is_refused() {
    let points = [(1200.m(), 12.mpa()), (2400.m(), 25.5.mpa())];
    let loose = PressureProfile::from_points(&points, Datum::RotaryTable).unwrap();
    let e = loose.at(Depth::below_mudline(1500.m())).unwrap_err().to_string();
    assert!(e.contains("not tied together") && e.contains(".tied(DatumTie::rotary_table_at"), "{e}");
    let half = loose.tied(DatumTie::rotary_table_at(AIR_GAP.m()).unwrap()).unwrap();
    let e = half.at(Depth::below_mudline(1500.m())).unwrap_err().to_string();
    assert!(e.contains("with_mudline_at"), "{e}");

    let file = std::env::temp_dir().join(format!("hade-depths-{}.csv", std::process::id()));
    let table = "# depth_unit: m\n# pressure_unit: MPa\ntvd,pore pressure\n1200,12\n2400,25.5\n";
    std::fs::write(&file, table).unwrap();
    let e = PressureProfile::read_csv(&file, "pore pressure").unwrap_err().to_string();
    assert!(e.contains("line 3") && e.contains("# datum: ") && e.contains("mudline"), "{e}");
    std::fs::write(&file, format!("# datum: mudline\n{table}")).unwrap();
    let read = PressureProfile::read_csv(&file, "pore pressure").unwrap();
    std::fs::remove_file(&file).unwrap();
    assert_eq!(read.datum(), Datum::Mudline);
    assert_eq!(read.at(Depth::below_mudline(1800.m())).unwrap().pressure, 18.75.mpa());
}

/// A gradient counts from the level it is stated for. 22.6 MPa/km (1 psi/ft) from the mudline on top of
/// the sea: at 2950 m below the rotary table 2625 m of rock and 300 m of sea water weigh 62.34 MPa;
/// the same gradient from the rotary table would say 66.67.
#[test]
fn a_gradient_counts_from_its_own_level() {
    let asked = Depth::below_rotary_table(2950.m());
    let from_mudline = PressureProfile::from_mudline(22.6.mpa_per_km(), 1025.kg_m3()).unwrap().tied(hole()).unwrap();
    assert_printed("from the mudline", from_mudline.at(asked).unwrap().pressure.in_mpa(), "62.34");
    let table = Depth::below_rotary_table(0.m());
    let from_table = PressureProfile::from_gradient(22.6.mpa_per_km(), table, 0.mpa()).unwrap();
    assert_printed("from the rotary table", from_table.at(asked).unwrap().pressure.in_mpa(), "66.67");
    // The same law stated with the weight of the sea worked out elsewhere: 1025 · 9.80665 · 300 Pa.
    let stated = PressureProfile::from_gradient(22.6.mpa_per_km(), Depth::below_mudline(0.m()), 3_015_544.875.pa());
    let stated = stated.unwrap().tied(hole()).unwrap().at(asked).unwrap().pressure;
    assert!(agree(stated.in_pa(), from_mudline.at(asked).unwrap().pressure.in_pa(), 1e-6));
}
