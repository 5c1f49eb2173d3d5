//! Cards of what follows a hole.

use crate::prelude::*;

/// Limits along a hole through a depleted sand, with sections and muds; and along a level one.
pub(super) fn along_samples() -> Vec<Card> {
    let station =
        |md: f64, i: f64| Station { md: md.m(), inclination: i.deg(), azimuth: Azimuth::from_true_north(120.deg()) };
    let tie = DatumTie::rotary_table_at(32.4.m()).unwrap().with_ground_at(25.m()).unwrap();
    let survey =
        Survey::from_stations(&[station(0.0, 0.0), station(1300.0, 0.0), station(2300.0, 42.0), station(3500.0, 42.0)]);
    let survey = survey.unwrap().tied(tie).unwrap().named("KF-3");
    let rock = |cohesion: f64, angle: f64| Rock {
        poisson: 0.25,
        tensile_strength: 2.mpa(),
        strength: Strength::mohr_coulomb(cohesion.mpa(), angle.deg()),
    };
    let points = |symbol: &str, what: &str, all: [(f64, f64); 3], datum: Datum| {
        let points = all.map(|(z, p)| (z.m(), p.mpa()));
        PressureProfile::from_points(&points, datum).unwrap().of(symbol, what)
    };
    let sv = points("S_v", "vertical stress", [(500.0, 10.0), (2000.0, 44.5), (3500.0, 80.0)], Datum::RotaryTable);
    let pore = points("P_p", "pore pressure", [(400.0, 4.2), (2100.0, 22.0), (3500.0, 37.0)], Datum::MeanSeaLevel);
    let horizontals = Some(HorizontalProfiles {
        sh_min: points(
            "S_hmin",
            "smaller horizontal stress",
            [(900.0, 15.0), (2150.0, 37.5), (2400.0, 43.0)],
            Datum::RotaryTable,
        ),
        sh_max: points(
            "S_Hmax",
            "larger horizontal stress",
            [(900.0, 17.5), (2150.0, 44.0), (2400.0, 50.0)],
            Datum::RotaryTable,
        ),
    });
    let sand_top = TopPlane {
        depth: Depth::below_mean_sea_level(2150.m()),
        north: (-150).m(),
        east: 260.m(),
        plane: Plane { strike: Azimuth::from_true_north(20.deg()), dip: 4.deg() },
    };
    let depletion =
        Depletion { drawdown: 9.mpa(), sh_min: MinPath::Uniaxial { biot: 0.9 }, sh_max: MaxPath::Measured(0.5) };
    let ground = Ground::new(GroundInputs {
        sv,
        pore,
        horizontals,
        sh_max_azimuth: Azimuth::from_true_north(35.deg()),
        layers: vec![
            Layer::from("Upper shale", Depth::below_rotary_table(600.m()), rock(7.0, 30.0)).unwrap(),
            Layer::below_plane("Tern sand", sand_top, rock(9.0, 36.0))
                .unwrap()
                .horizontal_ratios(0.66, 0.85)
                .unwrap()
                .depleted(depletion)
                .unwrap(),
            Layer::from("Lower shale", Depth::below_rotary_table(2260.m()), rock(8.0, 30.0)).unwrap(),
        ],
    })
    .unwrap();
    let choices = LogChoices {
        from: 2350.m(),
        to: 2700.m(),
        step: 150.m(),
        allowed_width: 60.deg(),
        margin_bottom: 1.mpa(),
        margin_top: 1.mpa(),
    };
    let log = LimitLog::with_choices(&survey, &ground, choices).unwrap();
    let mud = MudPlan {
        static_density: 1.35.sg(),
        swab: Some(0.7.mpa()),
        circulating_density: Some(1.43.sg()),
        surge: Some(0.9.mpa()),
    };
    let sections = [
        HoleSection::between("12¼ in", 2350.m(), 2480.m()).with_mud(MudPlan { swab: None, surge: None, ..mud }),
        HoleSection::between("8½ in", 2480.m(), 2700.m()).with_mud(mud),
    ];
    let level =
        Survey::from_stations(&[station(0.0, 0.0), station(2000.0, 0.0), station(2800.0, 90.0), station(3600.0, 90.0)])
            .unwrap();
    let begin = Depth::below_rotary_table(0.m());
    let expanding = |layer: Layer| layer.thermal_properties(14.gpa(), 1.1e-5.per_kelvin()).unwrap();
    let lateral = Ground::new(GroundInputs {
        sv: PressureProfile::from_gradient(22.6.mpa_per_km(), begin, 0.mpa()).unwrap().of("S_v", "vertical stress"),
        pore: PressureProfile::from_gradient(10.4.mpa_per_km(), begin, 0.mpa()).unwrap().of("P_p", "pore pressure"),
        horizontals: None,
        sh_max_azimuth: Azimuth::from_true_north(35.deg()),
        layers: vec![
            expanding(Layer::from("shale", begin, rock(8.0, 30.0)).unwrap().horizontal_ratios(0.62, 0.8).unwrap()),
            expanding(
                Layer::by_measured_depth("sand", rock(12.0, 38.0)).unwrap().horizontal_ratios(0.55, 0.75).unwrap(),
            ),
        ],
    })
    .unwrap()
    .with_intervals(&[(3000.m(), 3300.m(), "sand")])
    .unwrap()
    .with_temperatures(
        &TemperatureProfile::from_gradient(29.kelvin_per_km(), begin, 9.celsius()).unwrap(),
        &TemperatureProfile::from_points(&[(0.m(), 30.celsius()), (3000.m(), 62.celsius())], Datum::RotaryTable)
            .unwrap(),
    )
    .unwrap();
    let bare = LogChoices {
        from: 2900.m(),
        to: 3400.m(),
        step: 500.m(),
        allowed_width: 0.deg(),
        margin_bottom: 0.mpa(),
        margin_top: 0.mpa(),
    };
    let event = |md: f64, kind: EventKind, weight: f64, ecd: Option<f64>| DrillingEvent {
        md: md.m(),
        kind,
        mud_weight: weight.sg(),
        circulating_density: ecd.map(|ecd| ecd.sg()),
    };
    let events = [
        event(2360.0, EventKind::LeakOff, 1.72, None),
        event(2400.0, EventKind::Cavings, 1.12, None),
        event(2455.0, EventKind::Losses, 1.35, Some(1.52)),
        event(2470.0, EventKind::Gain, 1.05, None),
        event(2620.0, EventKind::InGauge, 1.35, Some(1.4)),
        event(2650.0, EventKind::FormationIntegrity, 1.55, None),
    ];
    let events = DrillingEvents::from_events(&events).unwrap();
    vec![
        ground.at(&survey, 2450.m()).unwrap().card(),
        log.with_sections(&sections).unwrap().with_friction(0.6).unwrap().card(),
        LimitLog::with_choices(&level, &lateral, bare).unwrap().card(),
        log.hindcast(&events, 0.3.mpa()).unwrap().card(),
        log.with_sections(&sections)
            .unwrap()
            .section_ensemble(
                "8½ in",
                Draws { count: 200, start: 5 },
                &[Vary::sh_max(2.mpa()), Vary::pore(0.5.mpa()), Vary::cohesion(0.8.mpa())],
            )
            .unwrap()
            .correlated("S_Hmax", "P_p", 0.4)
            .unwrap()
            .card(),
    ]
}
