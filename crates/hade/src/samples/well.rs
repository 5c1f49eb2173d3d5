//! Cards of the hole, its wall and what it is drilled with.

use crate::prelude::*;

pub(super) fn well_samples(sh: Stress<Borehole>) -> Vec<Card> {
    let station = |md: f64, i: f64, a: f64| Station {
        md: md.m(),
        inclination: i.deg(),
        azimuth: Azimuth::from_grid_north(a.deg()).with_convergence(0.8.deg()).unwrap(),
    };
    let survey = Survey::from_stations(&[
        station(0.0, 0.0, 118.0),
        station(700.0, 0.5, 118.0),
        station(1300.0, 24.0, 120.0),
        station(2000.0, 42.0, 121.0),
        station(3500.0, 42.3, 119.5),
    ])
    .unwrap();
    let tie = DatumTie::rotary_table_at(32.4.m()).unwrap().with_ground_at(25.m()).unwrap();
    let log = DensityLog::from_samples(
        &[(250.m(), 2.0.g_cm3()), (900.m(), 2.2.g_cm3()), (1800.m(), 2.4.g_cm3()), (3100.m(), 2.5.g_cm3())],
        Datum::RotaryTable,
    )
    .unwrap()
    .tied(tie)
    .unwrap();
    let overburden = log
        .overburden(OverburdenInputs {
            depth: Depth::below_rotary_table(2950.m()),
            hole: tie,
            top: Top::Land { mean_density: 1.9.g_cm3() },
        })
        .unwrap();
    let strength = Strength::mohr_coulomb(12.mpa(), 32.deg());
    let rock = Rock { poisson: 0.25, tensile_strength: 2.mpa(), strength };
    let wall = Wall::new(WallInputs { stress: sh, pore: 31.2.mpa(), rock }).unwrap();
    let weak = Rock { strength: Strength::mohr_coulomb_ucs(1.mpa(), 15.deg()), ..rock };
    let weak = Wall::new(WallInputs { stress: sh, pore: 31.2.mpa(), rock: weak }).unwrap();
    let choices = RangeChoices {
        allowed_width: 60.deg(),
        margin_bottom: 1.mpa(),
        margin_top: 1.5.mpa(),
        tvd_below_rotary: 2950.m(),
    };
    vec![
        survey.table().unwrap().card(),
        survey.at(2600.m()).unwrap().card(),
        survey.at_tvd(2950.m()).unwrap().card(),
        overburden.card(),
        MudColumn { density: 1.3.sg(), tvd_below_rotary: 2950.m() }.pressure().unwrap().card(),
        wall.stress_at(37.6.mpa(), 25.deg()).unwrap().card(),
        wall.around(33.mpa()).unwrap().card(),
        wall.failing_arcs(33.mpa()).unwrap().card(),
        wall.failing_arcs(45.mpa()).unwrap().card(),
        wall.failing_arcs(5.mpa()).unwrap().card(),
        wall.limits().card(),
        wall.limits_at_width(60.deg()).unwrap().card(),
        weak.limits().card(),
        wall.recommended(choices).unwrap().card(),
        weak.recommended(choices).unwrap().card(),
    ]
}

/// Recommended ranges raised, held against a mud, beside others, and with inputs varied.
pub(super) fn range_samples(sh: Stress<Borehole>) -> Vec<Card> {
    let strength = Strength::mohr_coulomb(12.mpa(), 32.deg());
    let rock = Rock { poisson: 0.25, tensile_strength: 2.mpa(), strength };
    let wall = Wall::new(WallInputs { stress: sh, pore: 31.2.mpa(), rock }).unwrap();
    let choices = RangeChoices {
        allowed_width: 60.deg(),
        margin_bottom: 1.mpa(),
        margin_top: 1.5.mpa(),
        tvd_below_rotary: 2950.m(),
    };
    let range = wall.recommended(choices).unwrap();
    let raised = range.raised_to(47.6.mpa(), "extended leak-off at 2931 m held 49 MPa for ten minutes").unwrap();
    let plan = MudPlan {
        static_density: 1.35.sg(),
        swab: Some(0.7.mpa()),
        circulating_density: Some(1.43.sg()),
        surge: Some(0.9.mpa()),
    };
    let others = [Alternative::criterion(Strength::mogi_coulomb(12.mpa(), 32.deg())), Alternative::permeable(0.8)];
    let vary = [Vary::sh_max(4.mpa()), Vary::cohesion(1.2.mpa()), Vary::inclination(2.deg())];
    let drawn = [
        Drawn::sv(Distribution::uniform(64.mpa(), 70.mpa())),
        Drawn::sh_max(Distribution::normal(58.2.mpa(), 3.mpa())),
        Drawn::sh_min(Distribution::triangular(44.mpa(), 47.1.mpa(), 50.mpa())),
        Drawn::cohesion(Distribution::lognormal(12.mpa(), 2.mpa()).within(8.mpa(), 18.mpa())),
        Drawn::friction_angle(Distribution::normal(32.deg(), 2.deg())),
    ];
    let ensemble = wall.ensemble(Draws { count: 600, start: 3 }, &drawn).unwrap();
    let weak = Wall::new(WallInputs {
        rock: Rock { strength: Strength::mohr_coulomb_ucs(16.mpa(), 25.deg()), ..rock },
        ..wall.inputs()
    });
    let weak = weak.unwrap().ensemble(
        Draws { count: 500, start: 11 },
        &[Drawn::sh_max(Distribution::normal(55.mpa(), 5.mpa())), Drawn::ucs(Distribution::normal(16.mpa(), 8.mpa()))],
    );
    vec![
        ensemble
            .correlated("S_Hmax", "S_hmin", 0.5)
            .unwrap()
            .within_friction(0.8)
            .unwrap()
            .at_tvd(2950.m())
            .unwrap()
            .card(),
        weak.unwrap().card(),
        raised.card(),
        range.hold(plan).unwrap().card(),
        raised.hold(MudPlan { swab: None, surge: None, ..plan }).unwrap().card(),
        range.beside(&others).unwrap().card(),
        range.sensitivity(&vary).unwrap().card(),
    ]
}

/// Maps of every limit, with a path, with one planned direction and without, and with directions that have no safe
/// pressure.
pub(super) fn map_samples(s: Stress) -> Vec<Card> {
    let strength = Strength::mohr_coulomb(12.mpa(), 32.deg());
    let rock = Rock { poisson: 0.25, tensile_strength: 2.mpa(), strength };
    let map = DirectionMap::over(MapInputs { stress: s, pore: 31.2.mpa(), rock, step: 10.deg() }).unwrap();
    let weak = Rock { strength: Strength::mohr_coulomb_ucs(14.mpa(), 25.deg()), ..rock };
    let weak = DirectionMap::over(MapInputs { stress: s, pore: 31.2.mpa(), rock: weak, step: 15.deg() }).unwrap();
    let azimuth = Azimuth::from_true_north(120.deg());
    let station = |md: f64, i: f64| Station { md: md.m(), inclination: i.deg(), azimuth };
    let path =
        [station(0.0, 0.0), station(700.0, 0.5), station(1300.0, 24.0), station(2000.0, 42.0), station(3500.0, 97.0)];
    let survey = Survey::from_stations(&path).unwrap();
    vec![
        map.with_path(&survey.named("KF-3")).unwrap().card(),
        map.of(MapOf::UpperShear).unwrap().card(),
        map.with_planned(Attitude { inclination: 42.deg(), azimuth }).unwrap().of(MapOf::Initiation).unwrap().card(),
        map.of(MapOf::Width).unwrap().card(),
        weak.card(),
        weak.of(MapOf::Width).unwrap().card(),
    ]
}
