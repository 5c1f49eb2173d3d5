//! The limits along a hole, against single depths, by hand, and against values worked out elsewhere.

use super::*;

/// Uniform ground gives at every depth what a single depth with that attitude gives.
#[test]
fn uniform_ground_gives_the_limits_of_each_attitude() {
    let survey = survey(120.0);
    for width in [0.0, 60.0] {
        let log = LimitLog::with_choices(&survey, &uniform(35.0), choices(200.0, 4000.0, 100.0, width)).unwrap();
        assert_eq!(log.rows().len(), 39);
        for row in log.rows() {
            let position = survey.at(row.md).unwrap();
            assert!((row.tvd - position.tvd).abs() < 1e-9.m());
            let stress = Stress::from_horizontals(Horizontals {
                sv: 66.9.mpa(),
                sh_max: 58.2.mpa(),
                sh_min: 47.1.mpa(),
                sh_max_azimuth: azimuth(35.0),
            })
            .unwrap();
            let stress = position.attitude.chain().unwrap().carry(&stress);
            let wall = Wall::new(WallInputs { stress, pore: 31.2.mpa(), rock: shale() }).unwrap();
            let limits = wall.limits_at_width(width.deg()).unwrap();
            assert!(close(row.lower_shear.unwrap(), limits.lower_shear.pressure().unwrap()));
            assert!(close(row.initiation.unwrap(), limits.initiation.pressure().unwrap()));
            assert!(close(row.least_stress, 47.1.mpa()) && close(row.pore, 31.2.mpa()) && close(row.sv, 66.9.mpa()));
            let range = wall
                .recommended(RangeChoices {
                    allowed_width: width.deg(),
                    margin_bottom: 1.mpa(),
                    margin_top: 1.5.mpa(),
                    tvd_below_rotary: row.tvd,
                })
                .unwrap();
            let (bottom, top) = (range.bottom.unwrap(), range.top.unwrap());
            assert!(
                close(row.bottom.unwrap().pressure, bottom.pressure) && close(row.top.unwrap().pressure, top.pressure)
            );
            assert!((row.mud_weight(row.top.unwrap().pressure) - top.mud_weight).abs() < 1e-6.kg_m3());
        }
    }
}

/// Path and stress turned together: nothing changes.
#[test]
fn turning_path_and_stress_together_changes_nothing() {
    let log = |turn: f64| {
        LimitLog::with_choices(&survey(120.0 + turn), &uniform(35.0 + turn), choices(200.0, 4000.0, 380.0, 0.0))
            .unwrap()
            .rows()
    };
    for turn in [37.0, 215.5] {
        for (a, b) in log(0.0).iter().zip(log(turn)) {
            assert!(close(a.lower_shear.unwrap(), b.lower_shear.unwrap()), "{turn}");
            assert!(close(a.upper_shear.unwrap(), b.upper_shear.unwrap()));
            assert!(close(a.initiation.unwrap(), b.initiation.unwrap()));
        }
    }
}

/// A sand drawn down by 12 MPa at κ 0.64 between shales: S3 falls by 7.68 MPa in the sand only (12 · 0.64,
/// by hand), and no mud weight serves all of the hole.
#[test]
fn a_depleted_sand_between_virgin_shales() {
    let depletion = Depletion { drawdown: 12.mpa(), sh_min: MinPath::Measured(0.64), sh_max: MaxPath::AsMin };
    let weak = Rock { strength: Strength::mohr_coulomb(3.mpa(), 30.deg()), ..shale() };
    let layers = |sand_layer: Layer| {
        let ratios = |layer: Layer| layer.horizontal_ratios(0.6, 0.75).unwrap();
        vec![
            ratios(Layer::from("upper shale", at_rt(100.0), weak).unwrap()),
            ratios(sand_layer),
            ratios(Layer::from("lower shale", at_rt(2450.0), weak).unwrap()),
        ]
    };
    let sand_layer = Layer::from("sand", at_rt(2400.0), sand()).unwrap();
    let survey = Survey::from_stations(&[station(0.0, 0.0, 0.0), station(3000.0, 0.0, 0.0)]).unwrap();
    let choices = LogChoices { margin_bottom: 0.5.mpa(), margin_top: 0.5.mpa(), ..choices(2300.0, 2600.0, 7.0, 0.0) };
    let log = |layer: Layer| LimitLog::with_choices(&survey, &by_ratios(layers(layer)), choices).unwrap();
    let (before, after) = (log(sand_layer), log(sand_layer.depleted(depletion).unwrap()));
    let (mut in_sand, mut outside) = (0, 0);
    for (a, b) in before.rows().iter().zip(after.rows()) {
        let fall = if b.layer() == "sand" { 7.68.mpa() } else { 0.mpa() };
        assert!(close(a.least_stress - b.least_stress, fall), "{} {}", b.md, b.layer());
        assert_eq!(b.depleted, b.layer() == "sand");
        assert!((2400.0..=2450.0).contains(&b.md.in_m()) || b.layer() != "sand");
        if b.depleted { in_sand += 1 } else { outside += 1 }
    }
    assert!(in_sand > 5 && outside > 20);
    // Both sides of both contacts, at the contact itself.
    let contacts: Vec<(f64, &str)> = after
        .rows()
        .windows(2)
        .filter(|p| p[0].layer() != p[1].layer())
        .flat_map(|p| [(p[0].md.in_m(), p[0].layer()), (p[1].md.in_m(), p[1].layer())])
        .collect();
    let expected = [(2400.0, "upper shale"), (2400.0, "sand"), (2450.0, "sand"), (2450.0, "lower shale")];
    for ((md, layer), (at, name)) in contacts.iter().zip(expected) {
        assert!((md - at).abs() < 1e-6 && *layer == name, "{contacts:?}");
    }
    assert_eq!(contacts.len(), 4);
    assert!(before.section_ranges()[0].common().is_some());
    let section = &after.section_ranges()[0];
    assert_eq!(section.common(), None);
    assert_eq!(section.conflicts.len(), 1);
    let [from, to] = section.conflicts[0];
    assert!((from - 2400.m()).abs() < 1e-6.m() && (to - 2450.m()).abs() < 1e-6.m(), "{from} {to}");
    let card = after.card();
    assert!(card.passed(), "{:#?}", card.checks.iter().filter(|c| !c.passed).collect::<Vec<_>>());
    assert!(
        card.explanation.headline.contains("no common mud weight (MD 2400.0 to 2450.0 m)"),
        "{}",
        card.explanation.headline
    );
    assert!(card.warnings.iter().any(|note| note.contains("needs") && note.contains("sand at MD")));
    assert_eq!(card.title(), "Pressure limits against depth along the hole, MD 2300.0 to 2600.0 m");
}

/// A level hole at one TVD through two rocks by measured depth: the limits change at that measured depth
/// and nowhere else.
#[test]
fn a_level_hole_changes_its_rock_at_a_measured_depth() {
    let survey = Survey::from_stations(&[
        station(0.0, 0.0, 90.0),
        station(2000.0, 0.0, 90.0),
        station(2800.0, 90.0, 90.0),
        station(4000.0, 90.0, 90.0),
    ])
    .unwrap();
    let ratios = |layer: Layer| layer.horizontal_ratios(0.62, 0.8).unwrap();
    let ground = by_ratios(vec![
        ratios(Layer::from("shale", at_rt(100.0), shale()).unwrap()),
        ratios(Layer::by_measured_depth("sand", sand()).unwrap()),
    ])
    .with_intervals(&[(3210.m(), 3477.7.m(), "sand")])
    .unwrap();
    let log = LimitLog::with_choices(&survey, &ground, choices(2900.0, 3900.0, 50.0, 0.0)).unwrap();
    let rows = log.rows();
    let tvd = rows[0].tvd;
    assert!(rows.iter().all(|row| (row.tvd - tvd).abs() < 1e-6.m()));
    for row in &rows {
        let md = row.md.in_m();
        let inside = md > 3210.0 && md < 3477.7;
        let edge = md == 3210.0 || md == 3477.7;
        assert!(edge || (row.layer() == "sand") == inside, "{md}");
        let expected = if row.layer() == "sand" { rows.iter().find(|r| r.layer() == "sand") } else { rows.first() };
        assert!(close(row.lower_shear.unwrap(), expected.unwrap().lower_shear.unwrap()), "{md}");
    }
    assert_eq!(rows.iter().filter(|row| row.md == 3210.m()).count(), 2);
    assert_eq!(rows.iter().filter(|row| row.md == 3477.7.m()).count(), 2);
    assert!((rows[0].lower_shear.unwrap() - log.at(3300.m()).unwrap().lower_shear.unwrap()).abs() > 1.mpa());
    assert_eq!((log.at(3210.m()).unwrap().layer(), log.at(3477.7.m()).unwrap().layer()), ("sand", "shale"));
}

/// A vertical hole through two layers, against plain Python: linear interpolation of K between the points
/// of each layer, held to the contact; lower limit (3 S_H − S_h − UCS + (q − 1) P_p) / (1 + q), initiation
/// 3 S_h − S_H − P_p + T₀ (closed forms of a vertical hole).
#[test]
fn a_vertical_hole_against_values_of_a_python_script() {
    let table = |points: &[(f64, f64)]| {
        let points: Vec<(Length, Pressure)> = points.iter().map(|(z, p)| (z.m(), p.mpa())).collect();
        PressureProfile::from_points(&points, Datum::RotaryTable).unwrap()
    };
    let rock = |cohesion: f64, angle: f64, tensile: f64| Rock {
        poisson: 0.25,
        tensile_strength: tensile.mpa(),
        strength: Strength::mohr_coulomb(cohesion.mpa(), angle.deg()),
    };
    let depletion = Depletion { drawdown: 9.mpa(), sh_min: MinPath::Measured(0.64), sh_max: MaxPath::Measured(0.5) };
    let ground = Ground::new(GroundInputs {
        sv: table(&[(500.0, 11.0), (2000.0, 44.5), (3500.0, 80.0)]),
        pore: table(&[(500.0, 5.2), (1800.0, 18.0), (2600.0, 33.0), (3500.0, 46.0)]),
        horizontals: Some(HorizontalProfiles {
            sh_min: table(&[(1000.0, 17.0), (1900.0, 34.0), (2300.0, 42.0), (3400.0, 70.0)]),
            sh_max: table(&[(1000.0, 19.0), (1900.0, 39.0), (2300.0, 48.0), (3400.0, 77.0)]),
        }),
        sh_max_azimuth: azimuth(35.0),
        layers: vec![
            Layer::from("upper", at_rt(600.0), rock(7.0, 31.0, 1.5)).unwrap(),
            Layer::from("lower", at_rt(2100.0), rock(11.0, 36.0, 1.0)).unwrap().depleted(depletion).unwrap(),
        ],
    })
    .unwrap();
    let survey = Survey::from_stations(&[station(0.0, 0.0, 0.0), station(3500.0, 0.0, 0.0)]).unwrap();
    let log = LimitLog::with_choices(&survey, &ground, choices(1200.0, 2900.0, 50.0, 0.0)).unwrap();
    for (md, expected) in [
        (1200.0, [20.588547294, 23.188222279, 12.092307692, 12.103604378, 27.985111911]),
        (2050.0, [37.193617417, 42.328526237, 22.687500000, 27.457596423, 48.064826014]),
        (2150.0, [32.982260062, 40.059597523, 15.562500000, 18.220069375, 44.324682663]),
        (2900.0, [51.329097693, 59.079820466, 28.333333333, 33.705782948, 67.574139279]),
    ] {
        let row = log.rows().into_iter().find(|row| row.md == md.m()).unwrap();
        let got = [row.sh_min, row.sh_max, row.pore, row.lower_shear.unwrap(), row.initiation.unwrap()];
        for (got, expected) in got.iter().zip(expected) {
            assert!((got.in_mpa() - expected).abs() < 2e-9, "MD {md}: {got:?} {expected}");
        }
    }
}

/// In normal faulting the ratio of effective stresses is 1/K: 3.03 for K = 0.33 and 3.33 for 0.30, and friction of 0.6 bears
/// (√1.36 + 0.6)² = 3.12 (Zoback 2007, eq. 4.45, from memory).
#[test]
fn stress_beyond_friction_is_said_where_it_is() {
    let layer = |name: &str, top: f64, k: f64| {
        Layer::from(name, at_rt(top), sand()).unwrap().horizontal_ratios(k, k + 0.1).unwrap()
    };
    let ground = by_ratios(vec![layer("within", 500.0, 0.33), layer("beyond", 2000.0, 0.3)]);
    let hole = Survey::from_stations(&[station(0.0, 0.0, 0.0), station(3000.0, 0.0, 0.0)]).unwrap();
    let log = LimitLog::with_choices(&hole, &ground, choices(1500.0, 2500.0, 2.0, 0.0)).unwrap();
    assert_eq!(log.friction(), None);
    let log = log.with_friction(0.6).unwrap();
    let friction = log.friction().unwrap();
    assert_eq!((friction.beyond.clone(), friction.md), (vec![[2000.m(), 2500.m()]], 2500.m()));
    // At 2500 m the effective vertical stress is 12.2 MPa/km · 2.5 km = 30.5 MPa.
    let by = 30.5 * (1.0 - (1.36_f64.sqrt() + 0.6).powi(2) * 0.3);
    assert!((friction.beyond_by.in_mpa() - by).abs() < 1e-9, "{friction:?} {by}");
    let card = log.card();
    assert!(card.passed(), "{:#?}", card.checks);
    assert!(card.warnings.iter().any(|note| note.starts_with("At MD 2000.0 to 2500.0 m the stress is")));
    assert_eq!(LimitLog::compute(log.inputs()).unwrap().card(), card);
    let strong = log.with_friction(0.7).unwrap().friction().unwrap();
    assert!(strong.beyond.is_empty() && strong.beyond_by.in_mpa() < 0.0);
    let sections = log.with_sections(&[HoleSection::between("a", 1500.m(), 2500.m())]).unwrap();
    assert_eq!(sections.friction().unwrap().beyond, friction.beyond);
    assert!(log.with_friction(-0.1).unwrap_err().to_string().contains("coefficient of friction"));
}

/// What can be but seldom is, and what the log leaves out, is said on its card.
#[test]
fn doubtful_input_and_what_is_left_out_are_said() {
    let rock = |strength| Rock { strength, ..shale() };
    let layer =
        |strength| Layer::from("rock", at_rt(300.0), rock(strength)).unwrap().horizontal_ratios(0.6, 0.75).unwrap();
    let notes = |ground: &Ground, survey: &Survey, sections: &[HoleSection]| {
        let log = LimitLog::with_choices(survey, ground, choices(1000.0, 2000.0, 100.0, 0.0)).unwrap();
        let log = if sections.is_empty() { log } else { log.with_sections(sections).unwrap() };
        assert_eq!(LimitLog::compute(log.inputs()).unwrap().card(), log.card());
        log.card().warnings.join("\n")
    };
    let plain = by_ratios(vec![layer(shale().strength)]);
    assert!(!notes(&plain, &survey(120.0), &[]).contains("Doubtful"));
    let exchanged = by_ratios(vec![layer(Strength::mohr_coulomb(24.mpa(), 6.2.deg()))]);
    assert!(notes(&exchanged, &survey(120.0), &[]).contains("rock: Doubtful input: the friction angle 6.2°"));
    // Stresses in bar, read as MPa.
    let inputs = GroundInputs { sv: gradient("S_v", 226.0), ..plain.inputs() };
    let said = notes(&Ground::new(inputs).unwrap(), &survey(120.0), &[]);
    assert!(said.contains("is 226.0 kPa for each metre"), "{said}");
    let sharp = [(0.0, 0.0), (1400.0, 0.0), (1430.0, 15.0), (4000.0, 15.0)].map(|(md, i)| station(md, i, 80.0));
    let said = notes(&plain, &Survey::from_stations(&sharp).unwrap(), &[]);
    assert!(said.contains("between the stations at MD 1400.0 and 1430.0 m the hole turns by 15.0° in 30 m"), "{said}");
    let said = notes(&plain, &survey(120.0), &[HoleSection::between("8½ in", 1500.m(), 2600.m())]);
    assert!(
        said.contains("8½ in runs from MD 1500.0 to 2600.0 m, and the log only over MD 1500.0 to 2000.0 m"),
        "{said}"
    );
    let beyond = LimitLog::with_choices(&survey(120.0), &plain, choices(1000.0, 4200.0, 100.0, 0.0));
    let said = beyond.unwrap_err().to_string();
    assert!(said.contains("end of the log, measured depth is 4200 m"), "{said}");
}
