//! Walls warmed or cooled by temperatures that change with depth.

use super::*;
use crate::card::Standing;
use crate::field::TemperatureProfile;
use crate::units::Temperature;

fn vertical() -> Survey {
    Survey::from_stations(&[station(0.0, 0.0, 0.0), station(3000.0, 0.0, 0.0)]).unwrap()
}
/// 10 °C at the rotary table and 30 K/km.
fn geothermal() -> TemperatureProfile {
    TemperatureProfile::from_gradient(30.kelvin_per_km(), at_rt(0.0), 10.celsius()).unwrap()
}
fn mud(celsius: f64) -> TemperatureProfile {
    TemperatureProfile::uniform(celsius.celsius()).unwrap()
}
fn layer() -> Layer {
    Layer::from("rock", at_rt(300.0), shale()).unwrap().horizontal_ratios(0.6, 0.75).unwrap()
}
fn expanding() -> Layer {
    layer().thermal_properties(12.gpa(), 1e-5.per_kelvin()).unwrap()
}

/// At 2000 m the ground has 70 °C; mud of 45 °C cools the wall by 25 K. E α_T ΔT / (1 − ν) is then −4 MPa, and
/// a vertical wall parts 4 MPa sooner (its hoop stress is the least; Zoback 2007, ch. 6, from memory). At 1166.7 m
/// the two meet.
#[test]
fn the_mud_less_the_ground_cools_the_wall() {
    let plain =
        LimitLog::with_choices(&vertical(), &by_ratios(vec![layer()]), choices(500.0, 2500.0, 100.0, 0.0)).unwrap();
    let ground = by_ratios(vec![expanding()]).with_temperatures(&geothermal(), &mud(45.0)).unwrap();
    let log = LimitLog::with_choices(&vertical(), &ground, choices(500.0, 2500.0, 100.0, 0.0)).unwrap();
    for (row, plain) in log.rows().iter().zip(plain.rows()) {
        let warming = 45.0 - (10.0 + 0.03 * row.md.in_m());
        assert!((row.warming.unwrap().in_kelvin() - warming).abs() < 1e-9, "{row:?}");
        let shift = 12e9 * 1e-5 * warming / 0.75;
        let moved = row.initiation.unwrap() - plain.initiation.unwrap();
        assert!((moved.in_pa() - shift).abs() < 1.0, "{} {shift}", moved.in_pa());
        assert_eq!(plain.warming, None);
    }
    let at = log.at(2000.m()).unwrap();
    assert!((at.warming.unwrap() - (-25).kelvin()).in_kelvin().abs() < 1e-9);
    // The same as a layer that states the difference of that depth.
    let own = Thermal { warming: at.warming.unwrap(), youngs_modulus: 12.gpa(), expansion: 1e-5.per_kelvin() };
    let stated = LimitLog::with_choices(&vertical(), &by_ratios(vec![layer().thermal(own)]), log.choices()).unwrap();
    assert_eq!(stated.at(2000.m()).unwrap(), at);
}

/// Tables of a file, below another level, in a record that holds only what its depths need; every step is shown.
#[test]
fn temperatures_of_a_file_are_recorded_and_replayed() {
    let path = std::env::temp_dir().join(format!("hade-temperatures-{}.csv", std::process::id()));
    let mut text = String::from(
        "# datum: mean sea level\n# depth_unit: m\n# temperature_unit: C\n# rotary_table_above_msl: 30 m\ntvd,ground,mud\n",
    );
    for k in 0..4000 {
        let z = f64::from(k);
        text.push_str(&format!("{z},{},{}\n", 8.0 + 0.031 * z + 0.2 * (0.02 * z).sin(), 25.0 + 0.008 * z));
    }
    std::fs::write(&path, text).unwrap();
    let column = |name: &str| TemperatureProfile::read_csv(&path, name).unwrap();
    let (ground, mud) = (column("ground"), column("mud"));
    std::fs::remove_file(&path).unwrap();
    let tie = DatumTie::rotary_table_at(30.m()).unwrap();
    let survey = survey(120.0).tied(tie).unwrap();
    let below = Layer::from("sand", at_rt(1777.7), sand()).unwrap().horizontal_ratios(0.55, 0.7).unwrap();
    let below = below.thermal_properties(20.gpa(), 1.2e-5.per_kelvin()).unwrap();
    let ground = by_ratios(vec![expanding(), below]).with_temperatures(&ground, &mud).unwrap();
    let log = LimitLog::with_choices(&survey, &ground, choices(800.0, 3300.0, 5.0, 60.0)).unwrap();
    // By hand at 1000 m, 970 m below the sea: 25 + 7.76 − (8 + 30.07 + 0.2 sin 19.4).
    let at = log.at(1000.m()).unwrap().warming.unwrap().in_kelvin();
    assert!((at - (32.76 - 38.07 - 0.2 * 19.4_f64.sin())).abs() < 1e-9, "{at}");
    let card = log.card();
    assert!(card.passed(), "{:#?}", card.checks.iter().filter(|c| !c.passed).collect::<Vec<_>>());
    assert!(card.checks.iter().any(|check| check.what.starts_with("ΔT of every row")));
    assert!(card.inputs.text().len() < 100_000, "{}", card.inputs.text().len());
    assert_eq!(LimitLog::compute(log.inputs()).unwrap().card(), card);
    let steps = format!("{:?}", card.explanation.steps);
    assert!(steps.contains("°C") && steps.contains("ΔT = T_m − T_g"), "{steps}");
    // The state at one depth says the same.
    let state = ground.at(&survey, 1000.m()).unwrap();
    assert!(state.card().passed() && (state.warming.unwrap().in_kelvin() - at).abs() < 1e-9);
    assert!(card.explanation.topics.iter().any(|topic| topic == "thermal"));
    // A row whose ΔT is another turns the check red.
    let mut outcome = log.outcome();
    let warming = outcome.rows[3].warming.unwrap();
    outcome.rows[3].warming = Some(warming * 1.001);
    assert!(LimitLog::check(&log.inputs(), &outcome).iter().any(|check| !check.passed));
}

#[test]
fn what_says_two_differences_or_none_is_refused() {
    let own = Thermal { warming: (-15).kelvin(), youngs_modulus: 12.gpa(), expansion: 1e-5.per_kelvin() };
    let refused = |layer: Layer| {
        by_ratios(vec![layer]).with_temperatures(&geothermal(), &mud(45.0)).map(|_| ()).unwrap_err().to_string()
    };
    assert_eq!(
        refused(layer().thermal(own)),
        "The layer rock states a ΔT of its own, -15 K: temperatures by depth say it too; keep one of the two: leave out .thermal(…), or .with_temperatures(…)? and .thermal_properties(…)?."
    );
    assert!(refused(expanding().thermal(own)).contains("keep one of the two"));
    assert!(refused(layer()).contains("state E and α_T with .thermal_properties(E, α_T)?"));
    let at = |layer: Layer| by_ratios(vec![layer]).at(&vertical(), 1000.m()).map(|_| ()).unwrap_err().to_string();
    assert!(at(expanding()).contains("nothing says the temperatures"));
    assert!(at(expanding().thermal(own)).contains("keep one of the two"));
    assert!(layer().thermal_properties(0.gpa(), 1e-5.per_kelvin()).unwrap_err().to_string().contains("above zero"));
    assert!(
        layer().thermal_properties(1.gpa(), (-1e-5).per_kelvin()).unwrap_err().to_string().contains("zero or more")
    );
    // Nothing is extrapolated, and the whole log ends where the temperatures do.
    let points = |points: &[(f64, f64)]| {
        let points: Vec<(Length, Temperature)> = points.iter().map(|(z, t)| (z.m(), t.celsius())).collect();
        TemperatureProfile::from_points(&points, Datum::RotaryTable).unwrap()
    };
    let short = points(&[(500.0, 25.0), (1500.0, 40.0)]);
    let ground = by_ratios(vec![expanding()]).with_temperatures(&geothermal(), &short).unwrap();
    let e = ground.at(&vertical(), 2000.m()).unwrap_err().to_string();
    assert!(e.contains("MD 2000 m") && e.contains("temperature of the mud at the wall") && e.contains("1500 m"), "{e}");
    let log = LimitLog::along(&vertical(), &ground).unwrap();
    assert_eq!((log.choices().from, log.choices().to), (500.m(), 1500.m()));
}

/// The wall of the state is that of the log; a wall of the stress alone is not, and the card says so.
#[test]
fn the_wall_of_a_state_is_cooled_sealed_and_weakened_as_its_layer() {
    let weak = WeakPlane {
        plane: Plane { strike: azimuth(20.0), dip: 35.deg() },
        cohesion: 1.mpa(),
        friction_angle: 22.deg(),
    };
    let layer = expanding().partly_sealed(0.9, 0.5).unwrap().weak_plane(weak);
    let ground = by_ratios(vec![layer]).with_temperatures(&geothermal(), &mud(45.0)).unwrap();
    let survey = survey(120.0);
    let state = ground.at(&survey, 2400.m()).unwrap();
    let wall = state.wall().unwrap();
    let log = LimitLog::with_choices(&survey, &ground, choices(500.0, 3000.0, 100.0, 0.0)).unwrap();
    let row = log.at(2400.m()).unwrap();
    assert_eq!(wall.limits().initiation.pressure(), row.initiation);
    assert_eq!(wall.limits().lower_shear.pressure(), row.lower_shear);
    let thermal = Thermal { warming: state.warming.unwrap(), youngs_modulus: 12.gpa(), expansion: 1e-5.per_kelvin() };
    let chain = survey.at(2400.m()).unwrap().attitude.chain().unwrap();
    let stress = chain.carry(&state.stress().unwrap());
    let by_hand = Wall::new(WallInputs { stress, pore: state.pore, rock: shale() }).unwrap();
    let by_hand = by_hand.partly_sealed(0.9, 0.5).unwrap().thermal(thermal).unwrap().weak_plane(weak).unwrap();
    assert_eq!(by_hand.limits().initiation.pressure(), row.initiation);
    let card = state.card();
    assert!(card.explanation.notes.iter().any(|note| note.contains("state.wall()?")));
    // Every number of the wall is a result of the state, so that the sheet knows where it comes from.
    for item in wall.limits().explain().inputs.iter().skip(1).filter(|item| item.standing == Standing::Value) {
        assert!(card.explanation.results.iter().any(|result| result.same_value(item)), "{item:?}");
    }
    let hot = layer.thermal_properties(12.gpa(), 12.per_kelvin()).unwrap_err().to_string();
    assert!(hot.contains("at most 0.001 1/K"), "{hot}");
    assert!(log.card().explanation.notes.iter().any(|note| note.contains("at rest and swabbed too")));
}
