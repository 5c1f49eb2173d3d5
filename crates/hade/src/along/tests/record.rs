//! The log as a whole: its record, its file, its speed, and every wall a layer may state.

use std::time::Instant;

use super::*;

/// Without choices the whole hole is looked at, as far as the ground is known.
#[test]
fn the_whole_hole_without_choices() {
    let ratios = |layer: Layer| layer.horizontal_ratios(0.6, 0.75).unwrap();
    let ground = by_ratios(vec![ratios(Layer::from("rock", at_rt(300.0), shale()).unwrap())]);
    let log = LimitLog::along(&survey(120.0), &ground).unwrap();
    let (first, last) = (log.rows()[0], *log.rows().last().unwrap());
    assert!((300.0..310.0).contains(&first.md.in_m()) && last.md == 4000.m());
    assert_eq!(log.choices().allowed_width, Angle::default());
    let card = log.card();
    assert!(card.passed(), "{:#?}", card.checks.iter().filter(|c| !c.passed).collect::<Vec<_>>());
    let replayed = LimitLog::compute(log.inputs()).unwrap();
    assert_eq!(replayed.card(), card);
    assert!(replayed.rows().len() < log.rows().len());
    let none = by_ratios(vec![ratios(Layer::from("rock", at_rt(9000.0), shale()).unwrap())]);
    assert!(LimitLog::along(&survey(120.0), &none).unwrap_err().to_string().contains("within what layers"));
}

/// 3 000 m at 1 m. The time is printed, not held: machines differ.
#[test]
fn three_thousand_metres_at_a_metre() {
    let ratios = |layer: Layer, k: f64| layer.horizontal_ratios(k, k + 0.15).unwrap();
    let layers = (0..6).map(|k| {
        ratios(
            Layer::from(&format!("layer {k}"), at_rt(400.0 + 450.0 * f64::from(k)), shale()).unwrap(),
            0.6 + 0.01 * f64::from(k),
        )
    });
    let ground = by_ratios(layers.collect());
    for width in [0.0, 60.0] {
        let begun = Instant::now();
        let log = LimitLog::with_choices(&survey(120.0), &ground, choices(1000.0, 4000.0, 1.0, width)).unwrap();
        let took = begun.elapsed();
        let begun = Instant::now();
        let card = log.card();
        println!(
            "{} rows at {width}°: {took:?}, its card {:?}, {} printed, record {} kB",
            log.rows().len(),
            begun.elapsed(),
            log.inputs().depths(),
            (card.inputs.text().len() + card.outcome.text().len()) / 1000
        );
        assert!(
            log.rows().len() > 3000 && card.passed(),
            "{:#?}",
            card.checks.iter().filter(|c| !c.passed).collect::<Vec<_>>()
        );
    }
}

#[test]
fn the_whole_log_is_written_as_csv() {
    let ratios = |layer: Layer| layer.horizontal_ratios(0.6, 0.75).unwrap();
    let ground = by_ratios(vec![ratios(Layer::from("rock, grey", at_rt(300.0), shale()).unwrap())]);
    let log = LimitLog::with_choices(&survey(120.0), &ground, choices(1000.0, 1200.0, 50.0, 60.0)).unwrap();
    let path = std::env::temp_dir().join(format!("hade-log-{}.csv", std::process::id()));
    log.write_csv(&path).unwrap();
    let text = std::fs::read_to_string(&path).unwrap();
    std::fs::remove_file(&path).unwrap();
    let rows: Vec<&str> = text.lines().filter(|line| !line.starts_with('#')).collect();
    assert_eq!(rows.len(), 6);
    assert!(rows[1].starts_with("1000,") && rows[1].contains("\"rock, grey\""));
    let value: f64 = rows[1].replace("rock, grey", "").split(',').nth(7).unwrap().parse().unwrap();
    assert_eq!(value, log.rows()[0].pore.in_mpa());
    let e = log.write_csv("no/such/folder/x.csv").unwrap_err().to_string();
    assert!(e.contains("cannot be written"), "{e}");
}

/// Long profile files enter the record as their hash and the points about the printed depths.
#[test]
fn the_record_of_long_files_stays_small_and_replays() {
    let path = std::env::temp_dir().join(format!("hade-profiles-{}.csv", std::process::id()));
    let mut text =
        String::from("# datum: rotary table\n# depth_unit: m\n# pressure_unit: MPa\ntvd,sv,pore,shmin,shmax\n");
    for k in 1..6000 {
        let z = 0.5 * f64::from(k);
        let wave = 0.3 * (0.01 * z).sin();
        text.push_str(&format!("{z},{},{},{},{}\n", 0.0226 * z, 0.0104 * z, 0.0175 * z + wave, 0.0205 * z + wave));
    }
    std::fs::write(&path, text).unwrap();
    let column = |name: &str| PressureProfile::read_csv(&path, name).unwrap();
    let ground = Ground::new(GroundInputs {
        sv: column("sv"),
        pore: column("pore"),
        horizontals: Some(HorizontalProfiles { sh_min: column("shmin"), sh_max: column("shmax") }),
        sh_max_azimuth: azimuth(35.0),
        layers: vec![
            Layer::from("upper", at_rt(200.0), shale()).unwrap(),
            Layer::from("lower", at_rt(1777.7), sand()).unwrap(),
        ],
    })
    .unwrap();
    std::fs::remove_file(&path).unwrap();
    let log = LimitLog::with_choices(&survey(120.0), &ground, choices(800.0, 3300.0, 5.0, 60.0)).unwrap();
    let card = log.card();
    assert!(card.passed(), "{:#?}", card.checks.iter().filter(|c| !c.passed).collect::<Vec<_>>());
    assert!(card.inputs.text().len() < 100_000, "{}", card.inputs.text().len());
    assert_eq!(LimitLog::compute(log.inputs()).unwrap().card(), card);
    let event = |md: f64| DrillingEvent {
        md: md.m(),
        kind: EventKind::Losses,
        mud_weight: 1.4.sg(),
        circulating_density: None,
    };
    let events = DrillingEvents::from_events(&[event(1234.56), event(2987.6)]).unwrap();
    let hindcast = log.hindcast(&events, 0.1.mpa()).unwrap();
    assert_eq!(Hindcast::compute(hindcast.inputs()).unwrap().card(), hindcast.card());
}

/// Every kind of wall and criterion that a layer may state, and rock that no pressure holds: the card
/// passes its checks and replays.
#[test]
fn layers_of_every_wall_and_criterion() {
    let strengths = [
        Strength::mogi_coulomb(8.mpa(), 30.deg()),
        Strength::modified_lade(8.mpa(), 30.deg()),
        Strength::drucker_prager_inscribed(8.mpa(), 30.deg()),
        Strength::hoek_brown(HoekBrown { sigma_ci: 60.mpa(), m_i: 10.0, gsi: 70.0, disturbance: 0.0 }),
        Strength::mohr_coulomb(0.2.mpa(), 12.deg()),
    ];
    let ratios = |layer: Layer| layer.horizontal_ratios(0.6, 0.8).unwrap();
    let mut layers: Vec<Layer> = Vec::new();
    for (k, strength) in strengths.into_iter().enumerate() {
        let rock = Rock { strength, ..shale() };
        layers.push(ratios(Layer::from(&format!("rock {k}"), at_rt(500.0 + 300.0 * k as f64), rock).unwrap()));
    }
    let next = |name: &str, k: f64| ratios(Layer::from(name, at_rt(2000.0 + 200.0 * k), shale()).unwrap());
    let thermal = Thermal { warming: (-15).kelvin(), youngs_modulus: 12.gpa(), expansion: 1e-5.per_kelvin() };
    let bedding = WeakPlane {
        plane: Plane { strike: azimuth(40.0), dip: 20.deg() },
        cohesion: 1.5.mpa(),
        friction_angle: 22.deg(),
    };
    layers.extend([
        next("permeable", 0.0).permeable(0.8).unwrap(),
        next("partly sealed", 1.0).partly_sealed(0.8, 0.5).unwrap(),
        next("cooled", 2.0).thermal(thermal),
        next("bedded", 3.0).weak_plane(bedding),
        next("salt", 4.0).in_creeping_rock(),
    ]);
    let ground = by_ratios(layers);
    for width in [0.0, 45.0] {
        let log = LimitLog::with_choices(&survey(120.0), &ground, choices(700.0, 4000.0, 1100.0, width)).unwrap();
        let names: std::collections::BTreeSet<&str> = log.rows().iter().map(LogRow::layer).collect();
        assert_eq!(names.len(), 10, "{names:?}");
        let card = log.card();
        assert!(card.passed(), "{width} {:#?}", card.checks.iter().filter(|c| !c.passed).collect::<Vec<_>>());
        assert_eq!(LimitLog::compute(log.inputs()).unwrap().card(), card);
        assert!(card.warnings.iter().any(|said| said.contains("salt creeps")));
        assert!(log.rows().iter().any(|row| row.bottom.is_none()), "the weakest rock holds at no pressure");
        assert!(!log.empty().is_empty() && log.section_ranges()[0].common().is_none());
    }
}
