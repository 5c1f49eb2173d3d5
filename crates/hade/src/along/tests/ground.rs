//! The ground: layers, contacts, levels, and what cannot be.

use super::*;

/// Between points of a table the ratio of effective stress runs straight, not the stress; over a contact
/// nothing does.
#[test]
fn the_ratio_is_interpolated_within_a_layer_only() {
    let table = |symbol: &str, points: &[(f64, f64)]| {
        let points: Vec<(Length, Pressure)> = points.iter().map(|(z, p)| (z.m(), p.mpa())).collect();
        PressureProfile::from_points(&points, Datum::RotaryTable).unwrap().of(symbol, symbol)
    };
    // S_v 20, 40, 60 and P_p 10, 26, 30 at 1000, 2000, 3000 m: a pressure ramp bends the effective stress.
    let ground = |contact: Option<f64>| {
        let mut layers = vec![Layer::from("a", at_rt(500.0), shale()).unwrap()];
        layers.extend(contact.map(|z| Layer::from("b", at_rt(z), shale()).unwrap()));
        Ground::new(GroundInputs {
            sv: table("S_v", &[(1000.0, 20.0), (3000.0, 60.0)]),
            pore: table("P_p", &[(1000.0, 10.0), (2000.0, 26.0), (3000.0, 30.0)]),
            horizontals: Some(HorizontalProfiles {
                sh_min: table("S_hmin", &[(1000.0, 16.0), (3000.0, 48.0)]),
                sh_max: table("S_Hmax", &[(1000.0, 18.0), (3000.0, 57.0)]),
            }),
            sh_max_azimuth: azimuth(0.0),
            layers,
        })
        .unwrap()
    };
    let survey = Survey::from_stations(&[station(0.0, 0.0, 0.0), station(3000.0, 0.0, 0.0)]).unwrap();
    let at = |ground: &Ground, md: f64| ground.at(&survey, md.m()).unwrap();
    // K_h 0.6 at both ends: at 2000 m 26 + 0.6 · 14 = 34.4, where the straight line between 16 and 48 gives 32.
    assert!(close(at(&ground(None), 2000.0).sh_min, 34.4.mpa()));
    // K_H 0.8 and 0.9: 26 + 0.85 · 14 = 37.9.
    assert!(close(at(&ground(None), 2000.0).sh_max, 37.9.mpa()));
    // With a contact at 2200 m each layer keeps its own ratio up to it.
    let two = ground(Some(2200.0));
    let (above, below) = (at(&two, 2199.999), at(&two, 2200.0));
    let (sv, pore) = (44.mpa(), 26.8.mpa());
    assert!((above.sh_max - (pore + (sv - pore) * 0.8)).abs() < 100.pa());
    assert!(close(below.sh_max, pore + (sv - pore) * 0.9));
    assert_eq!((above.layer(), below.layer()), ("a", "b"));
    // A layer without a point says so.
    let said = ground(Some(1500.0)).with_intervals(&[]).unwrap();
    let third = GroundInputs {
        layers: vec![
            Layer::from("a", at_rt(500.0), shale()).unwrap(),
            Layer::from("b", at_rt(1500.0), shale()).unwrap(),
            Layer::from("c", at_rt(1600.0), shale()).unwrap(),
        ],
        ..said.inputs()
    };
    let e = Ground::new(third).unwrap().at(&survey, 1550.m()).unwrap_err().to_string();
    assert!(e.contains("No point of the table") && e.contains("layer b") && e.contains("MD 1550 m"), "{e}");
}

/// A top that dips 30° towards the east meets a vertical hole that stands 100 m east of its point
/// 100 · tan 30° = 57.735 m deeper.
#[test]
fn a_dipping_top_is_met_where_it_lies() {
    let top = TopPlane {
        depth: at_rt(1500.0),
        north: 40.m(),
        east: (-100).m(),
        plane: Plane { strike: azimuth(0.0), dip: 30.deg() },
    };
    let ratios = |layer: Layer| layer.horizontal_ratios(0.6, 0.7).unwrap();
    let ground = by_ratios(vec![
        ratios(Layer::from("shale", at_rt(10.0), shale()).unwrap()),
        ratios(Layer::below_plane("sand", top, sand()).unwrap()),
    ]);
    let survey = Survey::from_stations(&[station(0.0, 0.0, 0.0), station(3000.0, 0.0, 0.0)]).unwrap();
    let log = LimitLog::with_choices(&survey, &ground, choices(1400.0, 1700.0, 40.0, 0.0)).unwrap();
    let first = log.rows().into_iter().find(|row| row.layer() == "sand").unwrap();
    assert!((first.md.in_m() - (1500.0 + 100.0 * 30_f64.to_radians().tan())).abs() < 1e-6, "{}", first.md);
    // A thin layer between two depths of the log is not stepped over.
    let thin = by_ratios(vec![
        ratios(Layer::from("shale", at_rt(10.0), shale()).unwrap()),
        ratios(Layer::from("coal", at_rt(1510.2), sand()).unwrap()),
        ratios(Layer::from("shale below", at_rt(1510.7), shale()).unwrap()),
    ]);
    let log = LimitLog::with_choices(&survey, &thin, choices(1400.0, 1700.0, 40.0, 0.0)).unwrap();
    let coal: Vec<f64> = log.rows().iter().filter(|row| row.layer() == "coal").map(|row| row.md.in_m()).collect();
    assert_eq!(coal.len(), 2);
    assert!((coal[0] - 1510.2).abs() < 1e-6 && (coal[1] - 1510.7).abs() < 1e-6);
}

/// Profiles and tops below other levels, and of another hole.
#[test]
fn levels_are_carried_and_unstated_ones_refused() {
    let tie = DatumTie::rotary_table_at(30.m()).unwrap().with_ground_at(22.m()).unwrap();
    let survey = Survey::from_stations(&[station(0.0, 0.0, 0.0), station(3000.0, 0.0, 0.0)]).unwrap();
    let below = |datum: Datum| {
        let begin = Depth { tvd: 0.m(), below: datum };
        let profile = |per_km: f64| PressureProfile::from_gradient(per_km.mpa_per_km(), begin, 0.mpa()).unwrap();
        Ground::new(GroundInputs {
            sv: profile(22.6).of("S_v", "vertical stress"),
            pore: profile(10.0).of("P_p", "pore pressure"),
            horizontals: None,
            sh_max_azimuth: azimuth(10.0),
            layers: vec![
                Layer::from("rock", Depth { tvd: 50.m(), below: datum }, shale())
                    .unwrap()
                    .horizontal_ratios(0.6, 0.7)
                    .unwrap(),
            ],
        })
        .unwrap()
    };
    let tied = survey.tied(tie).unwrap();
    for (datum, shift) in [(Datum::RotaryTable, 0.0), (Datum::MeanSeaLevel, 30.0), (Datum::Ground, 8.0)] {
        let state = below(datum).at(&tied, 1000.m()).unwrap();
        assert!(close(state.pore, (0.01 * (1000.0 - shift)).mpa()), "{datum:?}");
    }
    let e = below(Datum::MeanSeaLevel).at(&survey, 1000.m()).unwrap_err().to_string();
    assert!(e.contains("rotary_table_above_msl") || e.contains("not tied together"), "{e}");
    let e = below(Datum::Mudline).at(&tied, 1000.m()).unwrap_err().to_string();
    assert!(e.contains("mudline"), "{e}");
    // A profile of a hole whose rotary table stands 100 m higher.
    let other = DatumTie::rotary_table_at(130.m()).unwrap();
    let ground =
        by_ratios(vec![Layer::from("rock", at_rt(50.0), shale()).unwrap().horizontal_ratios(0.6, 0.7).unwrap()]);
    let inputs = GroundInputs { pore: gradient("P_p", 10.0).tied(other).unwrap(), ..ground.inputs() };
    let state = Ground::new(inputs).unwrap().at(&tied, 1000.m()).unwrap();
    assert!(close(state.pore, 11.mpa()), "{}", state.pore);
}

#[test]
fn what_cannot_be_a_ground_or_a_log_is_refused() {
    let layer =
        |name: &str, top: f64| Layer::from(name, at_rt(top), shale()).unwrap().horizontal_ratios(0.6, 0.7).unwrap();
    let ground = by_ratios(vec![layer("a", 100.0), layer("b", 1500.0)]);
    let survey = survey(120.0);
    let said = |made: crate::error::Result<LimitLog>| made.unwrap_err().to_string();
    let with = |c: LogChoices| LimitLog::with_choices(&survey, &ground, c);
    let good = choices(500.0, 2000.0, 100.0, 0.0);
    assert!(said(with(LogChoices { to: 400.m(), ..good })).contains("below its beginning"));
    assert!(said(with(LogChoices { step: 0.m(), ..good })).contains("step of the log"));
    assert!(said(with(LogChoices { step: f64::NAN.m(), ..good })).contains("step of the log"));
    assert!(said(with(LogChoices { allowed_width: 181.deg(), ..good })).contains("allowed width"));
    assert!(said(with(LogChoices { margin_top: (-1).mpa(), ..good })).contains("margin at the top"));
    assert!(said(with(LogChoices { to: 5000.m(), ..good })).contains("between 0 m and 4000 m"));
    assert!(said(with(LogChoices { from: 50.m(), ..good })).contains("in a layer"));
    assert!(said(with(LogChoices { from: f64::INFINITY.m(), ..good })).contains("finite"));
    let log = with(good).unwrap();
    let section = |from: f64, to: f64| HoleSection::between("s", from.m(), to.m());
    let sections = |s: &[HoleSection]| log.with_sections(s).unwrap_err().to_string();
    assert!(sections(&[]).contains("between 1 and 20"));
    assert!(sections(&[section(600.0, 500.0)]).contains("below its beginning"));
    assert!(sections(&[section(500.0, 900.0), section(800.0, 1000.0)]).contains("overlap"));
    assert!(sections(&[section(2500.0, 2900.0)]).contains("outside the log"));
    let mud = MudPlan { static_density: 1.3.sg(), swab: None, circulating_density: Some(1.2.sg()), surge: None };
    assert!(sections(&[section(500.0, 900.0).with_mud(mud)]).contains("below the static one"));
    let made = |layers: Vec<Layer>| Ground::new(GroundInputs { layers, ..ground.inputs() }).unwrap_err().to_string();
    assert!(made(vec![]).contains("number of layers is 0"));
    assert!(made(vec![layer("a", 1.0), layer("a", 2.0)]).contains("Two layers have the name a"));
    assert!(
        made(vec![Layer::from("a", at_rt(1.0), shale()).unwrap()]).contains("Nothing says the horizontal stresses")
    );
    let upside_down =
        Ground::new(GroundInputs { layers: vec![layer("a", 900.0), layer("b", 800.0)], ..ground.inputs() }).unwrap();
    assert!(upside_down.at(&survey, 1000.m()).unwrap_err().to_string().contains("list the layers from the top down"));
    let intervals = |i: &[(Length, Length, &str)]| ground.with_intervals(i).unwrap_err().to_string();
    assert!(intervals(&[(1.m(), 2.m(), "c")]).contains("it has a, b"));
    assert!(intervals(&[(2.m(), 2.m(), "a")]).contains("end must lie below"));
    assert!(intervals(&[(1.m(), 3.m(), "a"), (2.m(), 4.m(), "b")]).contains("overlap"));
    assert!(Layer::from(" ", at_rt(1.0), shale()).is_err());
    assert!(Layer::from("a", at_rt(f64::NAN), shale()).is_err());
    assert!(layer("a", 1.0).horizontal_ratios(0.8, 0.7).unwrap_err().to_string().contains("exchange the two"));
    assert!(layer("a", 1.0).horizontal_ratios(f64::NAN, 0.7).is_err());
    let steep =
        TopPlane { depth: at_rt(1.0), north: 0.m(), east: 0.m(), plane: Plane { strike: azimuth(0.0), dip: 89.deg() } };
    assert!(Layer::below_plane("a", steep, shale()).unwrap_err().to_string().contains("85°"));
    let over = GroundInputs { pore: gradient("P_p", 23.0), ..ground.inputs() };
    let e = Ground::new(over).unwrap().at(&survey, 1000.m()).unwrap_err().to_string();
    assert!(e.contains("effective vertical stress") && e.contains("MD 1000 m"), "{e}");
    let deep = Depletion { drawdown: 90.mpa(), sh_min: MinPath::Measured(0.6), sh_max: MaxPath::AsMin };
    let drained = by_ratios(vec![layer("a", 100.0).depleted(deep).unwrap()]);
    assert!(drained.at(&survey, 1000.m()).unwrap_err().to_string().contains("drawdown 90 MPa"));
}

/// The state at a depth is a result of its own: its card is made again from its record, and what comes out is what a
/// stress made of it takes in, bit for bit.
#[test]
fn the_state_at_a_depth_explains_itself() {
    let sand = Layer::from("sand", at_rt(2000.0), sand()).unwrap().horizontal_ratios(0.5, 0.7).unwrap();
    let depletion = Depletion { drawdown: 6.mpa(), sh_min: MinPath::Measured(0.64), sh_max: MaxPath::AsMin };
    let ground = by_ratios(vec![sand.depleted(depletion).unwrap()]);
    let survey = survey(120.0);
    let state = ground.at(&survey, 2600.m()).unwrap();
    let card = state.card();
    assert!(card.passed(), "{:#?}", card.checks);
    assert_eq!(GroundState::compute(state.inputs()).unwrap().card(), card);
    // By hand: K = 0.5 of the effective vertical stress, less 0.64 · 6 MPa.
    let (sv, pore) = (22.6e-3 * state.tvd.in_m(), 10.4e-3 * state.tvd.in_m());
    assert!((state.sh_min.in_mpa() - (pore + 0.5 * (sv - pore) - 3.84)).abs() < 1e-9);
    assert!((state.pore.in_mpa() - (pore - 6.0)).abs() < 1e-9);
    let stress = state.stress().unwrap().card();
    for name in ["vertical stress", "larger horizontal stress", "smaller horizontal stress"] {
        let taken = stress.explanation.inputs.iter().find(|input| input.name == name).unwrap();
        let given = card.explanation.results.iter().find(|result| result.name == name).unwrap();
        assert!(taken.same_value(given), "{name}");
    }
    assert!(card.explanation.title.ends_with("along the hole at MD 2600.00 m"));
}
