//! Stress and limits along a hole through two layers, the lower one drawn down, against numpy
//! (`tests/scripts/two_layers.py`).

use hade::prelude::*;
use hade_tests::data;
use serde_json::Value;

/// What numpy's grid of tool faces may be low by.
const GRID_MPA: f64 = 1e-6;

fn table(symbol: &str, points: &[(f64, f64)]) -> PressureProfile {
    let points: Vec<(Length, Pressure)> = points.iter().map(|(z, p)| (z.m(), p.mpa())).collect();
    PressureProfile::from_points(&points, Datum::RotaryTable).expect("a profile").of(symbol, symbol)
}

fn ground() -> Ground {
    let rock = |ucs: f64, phi: f64| Rock {
        poisson: 0.25,
        tensile_strength: 2.mpa(),
        strength: Strength::mohr_coulomb_ucs(ucs.mpa(), phi.deg()),
    };
    let top = |z: f64| Depth::below_rotary_table(z.m());
    let drawn_down = Depletion { drawdown: 6.mpa(), sh_min: MinPath::Measured(0.64), sh_max: MaxPath::AsMin };
    Ground::new(GroundInputs {
        sv: table("S_v", &[(1000.0, 21.5), (2000.0, 45.0), (3200.0, 74.6)]),
        pore: table("P_p", &[(1000.0, 10.3), (2200.0, 23.4), (2600.0, 30.8), (3200.0, 38.9)]),
        horizontals: Some(HorizontalProfiles {
            sh_min: table("S_hmin", &[(1500.0, 26.1), (2000.0, 36.6), (2300.0, 43.2), (2500.0, 45.0), (3000.0, 56.4)]),
            sh_max: table("S_Hmax", &[(1500.0, 30.2), (2000.0, 42.9), (2300.0, 50.1), (2500.0, 52.6), (3000.0, 66.5)]),
        }),
        sh_max_azimuth: Azimuth::from_true_north(35.deg()),
        layers: vec![
            Layer::from("upper", top(1000.0), rock(31.0, 30.0)).expect("a layer"),
            Layer::from("lower", top(2400.0), rock(44.0, 36.0)).and_then(|l| l.depleted(drawn_down)).expect("a layer"),
        ],
    })
    .expect("a ground")
}

#[test]
fn two_layers_agree_with_numpy() {
    let text = std::fs::read_to_string(data().join("reference/two_layers.json")).expect("the values");
    let reference: Value = serde_json::from_str(&text).expect("JSON");
    let station = |md: f64| Station { md: md.m(), inclination: 40.deg(), azimuth: Azimuth::from_true_north(120.deg()) };
    let survey = Survey::from_stations(&[station(0.0), station(4000.0)]).expect("a survey");
    let choices = LogChoices {
        from: 1500.m(),
        to: 3900.m(),
        step: 50.m(),
        allowed_width: 0.deg(),
        margin_bottom: 0.mpa(),
        margin_top: 0.mpa(),
    };
    let log = LimitLog::with_choices(&survey, &ground(), choices).expect("a log");
    let rows = reference["rows"].as_array().expect("rows");
    assert_eq!(rows.len(), 11);
    let mut seen = [0, 0];
    for row in rows {
        let number = |name: &str| row[name].as_f64().unwrap_or_else(|| panic!("no {name}"));
        let here = log.at(number("md").m()).expect("a row");
        let layer = row["layer"].as_u64().expect("a layer") as usize;
        seen[layer] += 1;
        assert_eq!(here.layer(), ["upper", "lower"][layer], "MD {}", number("md"));
        assert!((here.tvd.in_m() - number("tvd")).abs() < 1e-9);
        for (name, ours) in [("sv", here.sv), ("pore", here.pore), ("sh_min", here.sh_min), ("sh_max", here.sh_max)] {
            assert!((ours.in_mpa() - number(name)).abs() < 1e-9, "{name} at MD {}: {ours}", number("md"));
        }
        let (lower, upper) = (here.lower_shear.expect("a lower limit"), here.upper_shear.expect("an upper limit"));
        let above = lower.in_mpa() - number("lower");
        assert!((-1e-9..GRID_MPA).contains(&above), "MD {}: {above}", number("md"));
        let below = number("upper") - upper.in_mpa();
        assert!((-1e-9..GRID_MPA).contains(&below), "MD {}: {below}", number("md"));
    }
    assert_eq!(seen, [7, 4]);
}
