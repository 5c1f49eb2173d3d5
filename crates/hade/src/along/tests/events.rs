//! Events held against a log, and where every input of the cards comes from.

use super::*;

/// Events at pressures a stated way from the limits of their depth.
#[test]
fn events_are_told_on_their_side_of_the_limit() {
    let ratios = |layer: Layer| layer.horizontal_ratios(0.6, 0.75).unwrap();
    let ground = by_ratios(vec![ratios(Layer::from("rock", at_rt(300.0), shale()).unwrap())]);
    let log = LimitLog::with_choices(&survey(120.0), &ground, choices(1000.0, 2000.0, 200.0, 60.0)).unwrap();
    let md = 1530.m();
    let row = log.at(md).unwrap();
    let (s3, initiation) = (row.least_stress, row.initiation.unwrap());
    let (low, high) = if s3 < initiation { (s3, initiation) } else { (initiation, s3) };
    let told = |kind: EventKind, pressure: Pressure, ecd: Option<Pressure>, within: f64| {
        let event = DrillingEvent {
            md,
            kind,
            mud_weight: row.mud_weight(pressure),
            circulating_density: ecd.map(|p| row.mud_weight(p)),
        };
        let hindcast = log.hindcast(&DrillingEvents::from_events(&[event]).unwrap(), within.mpa()).unwrap();
        let card = hindcast.card();
        assert!(card.passed(), "{:#?}", card.checks);
        assert_eq!(Hindcast::compute(hindcast.inputs()).unwrap().card(), card);
        let row = hindcast.rows()[0];
        assert!(row.reason().len() > 20);
        (row.hit, row.reason())
    };
    let up = |p: Pressure, by: f64| p + by.mpa();
    use EventKind::*;
    // Losses count the circulating density.
    assert!(told(Losses, up(s3, -2.0), Some(up(s3, 0.2)), 0.0).0);
    assert!(!told(Losses, up(s3, -2.0), Some(up(s3, -0.2)), 0.0).0);
    assert!(told(Losses, up(s3, -2.0), Some(up(s3, -0.2)), 0.3).1.contains("within the tolerance"));
    assert!(told(Gain, up(row.pore, -0.2), None, 0.0).0 && !told(Gain, up(row.pore, 0.2), None, 0.0).0);
    let lower = row.lower_shear.unwrap();
    for kind in [TightHole, PackOff, Cavings, Enlarged] {
        assert!(told(kind, up(lower, -0.2), None, 0.0).0 && !told(kind, up(lower, 0.2), None, 0.0).0);
    }
    assert!(!told(InGauge, up(lower, -0.2), None, 0.0).0 && told(InGauge, up(lower, 0.2), None, 0.0).0);
    assert!(told(LeakOff, 0.5 * (low + high), None, 0.0).0);
    assert!(!told(LeakOff, up(low, -0.2), None, 0.0).0 && told(LeakOff, up(low, -0.2), None, 0.3).0);
    let (hit, reason) = told(LeakOff, up(high, 0.2), None, 0.0);
    assert!(!hit, "{reason}");
    assert!(told(FormationIntegrity, up(high, -0.2), None, 0.0).1.contains("lower bound"));
    assert!(!told(FormationIntegrity, up(high, 0.2), None, 0.0).0);
    let outside = DrillingEvent { md: 2500.m(), kind: Gain, mud_weight: 1.2.sg(), circulating_density: None };
    let events = DrillingEvents::from_events(&[outside]).unwrap();
    let e = log.hindcast(&events, 0.mpa()).unwrap_err().to_string();
    assert!(e.contains("\"gain\" at MD 2500 m") && e.contains("between 1000 m and 2000 m"), "{e}");
    assert!(e.contains("events.between(from, to)?"), "{e}");
    assert!(log.hindcast(&events, (-1).mpa()).is_err());
}

#[test]
fn events_between_two_depths_and_of_another_hole() {
    let at =
        |md: f64| DrillingEvent { md: md.m(), kind: EventKind::Gain, mud_weight: 1.2.sg(), circulating_density: None };
    let events = DrillingEvents::from_events(&[at(900.0), at(1000.0), at(1500.0), at(2500.0)]).unwrap();
    let some = events.between(1000.m(), 2000.m()).unwrap();
    assert_eq!(some.events(), [at(1000.0), at(1500.0)]);
    let said = events.between(1001.m(), 1002.m()).unwrap_err().to_string();
    assert!(said.contains("none of them lies there"), "{said}");
    let ground =
        by_ratios(vec![Layer::from("rock", at_rt(300.0), shale()).unwrap().horizontal_ratios(0.6, 0.75).unwrap()]);
    let log =
        LimitLog::with_choices(&survey(120.0).named("KF-9"), &ground, choices(1000.0, 2000.0, 200.0, 60.0)).unwrap();
    let warned = |hole: Option<&str>| {
        let events = DrillingEvents { hole: hole.map(crate::frames::Name::new), ..some.clone() };
        let hindcast = log.hindcast(&events, 0.5.mpa()).unwrap();
        assert_eq!(Hindcast::compute(hindcast.inputs()).unwrap().card(), hindcast.card());
        hindcast.card().warnings.iter().any(|warning| warning.contains("The events are of KF-7"))
    };
    assert!(warned(Some("KF-7")) && !warned(Some("KF-9")) && !warned(None));
}

/// Every input of a log and of a hindcast is found on the sheet.
#[test]
fn lineage_finds_every_input() {
    use crate::sheet::{Entry, Origin, Sheet, Source};
    let mut sheet = Sheet::new("KF-9");
    let source = || Source::measured("test");
    let path = sheet.given("V", "survey", survey(120.0).named("KF-9"), source());
    let sv = sheet.given("S_v", "vertical stress", gradient("S_v", 22.6), source());
    let pore = sheet.given("P_p", "pore pressure", gradient("P_p", 10.4), source());
    let azimuth = sheet.given("A", "azimuth of S_Hmax", azimuth(35.0), source());
    let top = sheet.given("z", "top of the shale", at_rt(400.0), source());
    let nu = sheet.given("ν", "Poisson's ratio", 0.25, source());
    let tensile = sheet.given("T_0", "tensile strength", 2.mpa(), source());
    let cohesion = sheet.given("c", "cohesion", 8.mpa(), source());
    let friction = sheet.given("φ", "friction angle", 30.deg(), source());
    let (k_min, k_max) = (sheet.given("K_h", "ratio", 0.6, source()), sheet.given("K_H", "ratio", 0.8, source()));
    let (from, to) = (sheet.given("F", "from", 1500.m(), source()), sheet.given("T", "to", 1700.m(), source()));
    let mud = sheet.given("ρ", "mud weight", 1.3.sg(), source());
    let rock = Rock { poisson: nu, tensile_strength: tensile, strength: Strength::mohr_coulomb(cohesion, friction) };
    let layer = |layer: Layer| layer.horizontal_ratios(k_min, k_max).unwrap();
    let layers =
        vec![layer(Layer::from("shale", top, rock).unwrap()), layer(Layer::by_measured_depth("sand", rock).unwrap())];
    let ground = Ground::new(GroundInputs { sv, pore, horizontals: None, sh_max_azimuth: azimuth, layers }).unwrap();
    let ground = ground.with_intervals(&[(from, to, "sand")]).unwrap();
    let log = LimitLog::with_choices(&path, &ground, choices(1000.0, 2000.0, 250.0, 60.0)).unwrap();
    let plan = MudPlan { static_density: mud, swab: None, circulating_density: None, surge: None };
    let log = log.with_sections(&[HoleSection::between("8½ in", 1200.m(), 1900.m()).with_mud(plan)]).unwrap();
    let event =
        DrillingEvent { md: 1600.m(), kind: EventKind::Cavings, mud_weight: 1.2.sg(), circulating_density: None };
    let events = DrillingEvents::from_events(&[event]).unwrap();
    let events = sheet.given("E", "drilling events", events, source());
    let hindcast = log.hindcast(&events, 0.2.mpa()).unwrap();
    sheet.add(&log);
    sheet.add(&hindcast);
    let mut seen = 0;
    for entry in sheet.record().entries {
        let Entry::Card { card, lineage, .. } = entry else { continue };
        seen += 1;
        for (item, origin) in card.explanation.inputs.iter().zip(&lineage) {
            assert!(
                origin.is_known() || matches!(origin, Origin::Choice),
                "{}: {} is {origin:?}",
                card.title(),
                item.name
            );
        }
    }
    assert_eq!(seen, 2);
}
