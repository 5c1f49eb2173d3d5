//! Tests of the map against single walls, a turn of everything together, and bad input.
#![cfg(test)]

use proptest::prelude::*;

use super::*;
use crate::card::Explain;
use crate::frames::{Attitude, Azimuth};
use crate::rock::{Rock, Strength};
use crate::stress::{Components, Horizontals, Stress};
use crate::units::{Angle, Pressure, Units};
use crate::well::{Limits, Station, Survey, Thermal, Wall, WallInputs};

const EVERY: [MapOf; 4] = [MapOf::LowerShear, MapOf::UpperShear, MapOf::Initiation, MapOf::Width];

fn hole(i: f64, a: f64) -> Attitude {
    Attitude { inclination: i.deg(), azimuth: Azimuth::from_true_north(a.deg()) }
}

fn inputs(strength: Strength) -> MapInputs {
    let stress = Stress::from_components(Components {
        nn: 50.mpa(),
        ee: 42.mpa(),
        dd: 60.mpa(),
        ne: 3.mpa(),
        nd: (-4).mpa(),
        ed: 5.mpa(),
    })
    .unwrap();
    let rock = Rock { poisson: 0.25, tensile_strength: 2.mpa(), strength };
    MapInputs { stress, pore: 20.mpa(), rock, step: 15.deg() }
}

fn coulomb() -> Strength {
    Strength::mohr_coulomb(10.mpa(), 30.deg())
}

fn limits(inputs: &MapInputs, hole: Attitude) -> Limits {
    let stress = hole.chain().unwrap().carry(&inputs.stress);
    Wall::new(WallInputs { stress, pore: inputs.pore, rock: inputs.rock }).unwrap().limits()
}

fn of_limits(of: MapOf, limits: &Limits) -> Option<Pressure> {
    let [lower, upper, part] = [limits.lower_shear, limits.upper_shear, limits.initiation].map(|l| l.pressure());
    match of {
        MapOf::LowerShear => lower,
        MapOf::UpperShear => upper,
        MapOf::Initiation => part,
        MapOf::Width => {
            let least = limits.least_stress.pressure().unwrap().in_mpa();
            let top = upper?.in_mpa().min(part?.in_mpa()).min(least);
            Some((top - lower?.in_mpa().max(limits.pore_pressure.pressure().unwrap().in_mpa())).mpa())
        }
    }
}

fn assert_same(got: Option<Pressure>, want: Option<Pressure>, what: &str) {
    match (got, want) {
        (Some(a), Some(b)) => assert!((a - b).abs() < 1e-2.pa(), "{what}: {a} {b}"),
        (a, b) => assert_eq!(a, b, "{what}"),
    }
}

#[test]
fn each_direction_is_the_limit_of_its_wall() {
    for strength in [coulomb(), Strength::mogi_coulomb(10.mpa(), 30.deg()), Strength::mohr_coulomb(1.5.mpa(), 20.deg())]
    {
        let inputs = inputs(strength);
        let lower = DirectionMap::over(inputs).unwrap();
        for of in EVERY {
            let map = lower.of(of).unwrap();
            let all = map.all();
            assert_eq!(all.len(), 7 * 24);
            for mapped in all {
                let limits = limits(&inputs, mapped.attitude());
                let what = format!("{of:?} {} {}", mapped.inclination, mapped.azimuth);
                assert_same(mapped.limit, of_limits(of, &limits), &what);
                assert_same(map.at(mapped.attitude()).unwrap(), mapped.limit, &what);
            }
        }
    }
}

#[test]
fn the_planned_direction_is_exact_and_a_rising_hole_is_its_line() {
    let inputs = inputs(coulomb());
    for of in EVERY {
        let map = DirectionMap::over(inputs).unwrap().of(of).unwrap();
        let planned = map.with_planned(hole(37.3, 211.8)).unwrap();
        let want = of_limits(of, &limits(&inputs, hole(37.3, 211.8)));
        assert_same(planned.outcome().on_path[0], want, "planned");
        assert_same(map.at(hole(142.7, 31.8)).unwrap(), want, "rising");
    }
}

#[test]
fn best_and_worst_are_of_all_directions_and_ties_are_counted() {
    // S_v principal: everything is the same after half a turn about the vertical.
    let stress = Stress::from_horizontals(Horizontals {
        sv: 60.mpa(),
        sh_max: 55.mpa(),
        sh_min: 42.mpa(),
        sh_max_azimuth: Azimuth::from_true_north(35.deg()),
    })
    .unwrap();
    let rock = Rock { strength: Strength::mohr_coulomb_ucs(30.mpa(), 32.deg()), ..inputs(coulomb()).rock };
    let map = DirectionMap::over(MapInputs { stress, pore: 22.mpa(), rock, step: 5.deg() }).unwrap();
    let all = map.all();
    let values = || all.iter().filter_map(|d| d.limit).map(|p| p.in_mpa());
    let (low, high) = (values().fold(f64::INFINITY, f64::min), values().fold(f64::NEG_INFINITY, f64::max));
    assert!((map.best().unwrap().limit.unwrap().in_mpa() - low).abs() < 1e-5);
    assert!((map.worst().unwrap().limit.unwrap().in_mpa() - high).abs() < 1e-5);
    let outcome = map.outcome();
    let same_line =
        |d: &MappedDirection, a: f64| ((d.azimuth.in_deg() - a + 90.0).rem_euclid(180.0) - 90.0).abs() < 1e-9;
    // The lowest lies in the plane of S_v and S_hmin, the highest is the level hole along S_hmax.
    let best = outcome.best.unwrap();
    assert!(same_line(&best, 125.0) && outcome.as_good == 1.0, "{best:?} {}", outcome.as_good);
    let worst = outcome.worst.unwrap();
    assert!((worst.inclination.in_deg() - 90.0).abs() < 1e-9 && same_line(&worst, 35.0), "{worst:?}");
    assert_eq!(outcome.as_bad, 0.0);
    assert_eq!(outcome.share_without, 0.0);
    // All alike under an isotropic stress.
    let even = Stress::from_horizontals(Horizontals {
        sv: 50.mpa(),
        sh_max: 50.mpa(),
        sh_min: 50.mpa(),
        sh_max_azimuth: Azimuth::from_true_north(0.deg()),
    })
    .unwrap();
    let map = DirectionMap::over(MapInputs { stress: even, pore: 22.mpa(), rock, step: 15.deg() }).unwrap();
    assert_eq!(map.outcome().as_good, f64::from(1 + 5 * 24 + 12 - 1));
    assert!(map.card().passed(), "{:#?}", map.card().checks);
    // No strength: no pressure is safe anywhere.
    let none = Rock { strength: Strength::mohr_coulomb(0.mpa(), 5.deg()), ..rock };
    let map = DirectionMap::over(MapInputs { stress, pore: 22.mpa(), rock: none, step: 15.deg() }).unwrap();
    assert!((map.share_without() - 1.0).abs() < 1e-12 && map.best().is_none());
    let card = map.with_planned(hole(40.0, 70.0)).unwrap().card();
    assert!(card.passed(), "{:#?}", card.checks.iter().filter(|c| !c.passed).collect::<Vec<_>>());
}

#[test]
fn the_shares_of_all_directions_are_the_whole_hemisphere() {
    for step in [0.5, 1.0, 7.5, 30.0, 45.0, 90.0] {
        let grid = grid::Grid::of(&MapInputs { step: step.deg(), ..inputs(coulomb()) }).unwrap();
        let sum: f64 = (0..grid.rows).map(|row| grid.share(row) * grid.azimuths as f64).sum();
        assert!((sum - 1.0).abs() < 1e-12, "{step}");
    }
}

#[test]
fn steps_that_do_not_divide_a_right_angle_are_refused() {
    for step in [0.0, -1.0, f64::NAN, 0.05, 7.0, 100.0] {
        let said = DirectionMap::over(MapInputs { step: step.deg(), ..inputs(coulomb()) }).unwrap_err().to_string();
        assert!(said.starts_with("step of the map is"), "{said}");
    }
    let map = DirectionMap::over(inputs(coulomb())).unwrap();
    assert!(map.at(hole(190.0, 0.0)).is_err() && map.with_planned(hole(f64::NAN, 0.0)).is_err());
    let magnetic = Attitude { azimuth: Azimuth::from_magnetic_north(10.deg()), ..hole(10.0, 0.0) };
    assert!(map.with_planned(magnetic).unwrap_err().to_string().contains("magnetic"));
}

#[test]
fn a_table_for_other_programs() {
    let map = DirectionMap::over(inputs(Strength::mohr_coulomb(1.5.mpa(), 20.deg()))).unwrap();
    let text = map.to_csv();
    let rows: Vec<&str> = text.lines().filter(|line| !line.starts_with('#')).collect();
    assert_eq!(rows[0], "inclination_deg,azimuth_deg,lower_shear_limit_mpa");
    assert_eq!(rows.len(), 1 + 7 * 24);
    for (row, mapped) in rows[1..].iter().zip(map.all()) {
        let cells: Vec<&str> = row.split(',').collect();
        assert_eq!(cells[0].parse::<f64>().unwrap(), mapped.inclination.in_deg().round());
        assert_eq!(cells[1].parse::<f64>().unwrap(), mapped.azimuth.in_deg().round());
        assert_eq!(cells[2].parse::<f64>().ok(), mapped.limit.map(Pressure::in_mpa));
    }
    let folder = std::env::temp_dir().join(format!("hade-map-{}", std::process::id()));
    std::fs::create_dir_all(&folder).unwrap();
    map.write_csv(folder.join("map.csv")).unwrap();
    assert_eq!(std::fs::read_to_string(folder.join("map.csv")).unwrap(), text);
    assert_eq!(std::fs::read_dir(&folder).unwrap().count(), 1);
    let said = map.write_csv(folder.join("none/map.csv")).unwrap_err().to_string();
    assert!(said.contains("cannot be written") && said.ends_with("may be written to."), "{said}");
    std::fs::remove_dir_all(&folder).unwrap();
}

#[test]
fn a_path_is_drawn_and_reduced() {
    let map = DirectionMap::over(inputs(coulomb())).unwrap();
    let station = |k: usize| Station {
        md: (30.0 * k as f64).m(),
        inclination: (0.2 * k as f64).deg(),
        azimuth: Azimuth::from_true_north((100.0 + 0.05 * k as f64).deg()),
    };
    let survey = Survey::from_stations(&(0..600).map(station).collect::<Vec<_>>()).unwrap().named("KF-3");
    let card = map.with_path(&survey).unwrap().card();
    assert!(card.passed(), "{:#?}", card.checks);
    let numbers = card.outcome.numbers().len();
    assert!(numbers < 40, "{numbers}");
    assert!(card.explanation.notes.iter().any(|note| note.contains("rises")));
    let long: Vec<Station> = (0..2500).map(|k| Station { inclination: 0.deg(), ..station(k) }).collect();
    let said = map.with_path(&Survey::from_stations(&long).unwrap()).unwrap_err().to_string();
    assert!(said.contains("2500") && said.contains("file"), "{said}");
}

proptest! {
    #![proptest_config(ProptestConfig { cases: 24, failure_persistence: None, ..ProptestConfig::default() })]
    /// Stress and hole turned together about the vertical, or turned over about a level axis with the hole's
    /// line, change nothing.
    #[test]
    fn turning_stress_and_hole_together_changes_nothing(
        [nn, ee, dd] in [30.0..70.0_f64, 30.0..70.0, 30.0..70.0],
        [ne, nd, ed] in [-6.0..6.0_f64, -6.0..6.0, -6.0..6.0],
        i in 0.0..90.0_f64, a in 0.0..360.0_f64, turn in 0.0..360.0_f64,
    ) {
        let (s, c) = turn.to_radians().sin_cos();
        let turned = |nn: f64, ee: f64, ne: f64, nd: f64, ed: f64| Components {
            nn: (nn * c * c + ee * s * s - 2.0 * ne * s * c).mpa(),
            ee: (nn * s * s + ee * c * c + 2.0 * ne * s * c).mpa(),
            dd: dd.mpa(),
            ne: ((nn - ee) * s * c + ne * (c * c - s * s)).mpa(),
            nd: (nd * c - ed * s).mpa(),
            ed: (nd * s + ed * c).mpa(),
        };
        let plain = Components { nn: nn.mpa(), ee: ee.mpa(), dd: dd.mpa(), ne: ne.mpa(), nd: nd.mpa(), ed: ed.mpa() };
        // North and down change their signs: turned over about east.
        let over = Components { ne: (-ne).mpa(), ed: (-ed).mpa(), ..plain };
        for of in EVERY {
            let map = |components: Components| {
                let stress = Stress::from_components(components).unwrap();
                DirectionMap::over(MapInputs { stress, step: 45.deg(), ..inputs(coulomb()) }).unwrap().of(of).unwrap()
            };
            let here = map(plain).at(hole(i, a)).unwrap().map(Pressure::in_mpa);
            let there = map(turned(nn, ee, ne, nd, ed)).at(hole(i, (a + turn) % 360.0)).unwrap().map(Pressure::in_mpa);
            // (sin i cos a, sin i sin a, cos i) becomes (−, +, −): the other end has azimuth −a.
            let above = map(over).at(hole(i, (360.0 - a) % 360.0)).unwrap().map(Pressure::in_mpa);
            for other in [there, above] {
                match (here, other) {
                    (Some(x), Some(y)) => prop_assert!((x - y).abs() < 1e-7, "{of:?}: {x} {y}"),
                    (x, y) => prop_assert_eq!(x, y),
                }
            }
        }
    }
}

/// A cooled wall in every direction is the cooled wall of each hole; the card says so and replays.
#[test]
fn a_map_of_cooled_walls() {
    let thermal = Thermal { warming: (-25).kelvin(), youngs_modulus: 12.gpa(), expansion: 1e-5.per_kelvin() };
    let plain = DirectionMap::over(inputs(coulomb())).unwrap();
    let survey = [(0.0, 0.0), (1000.0, 0.0), (2000.0, 55.0)].map(|(md, i)| Station {
        md: f64::m(md),
        inclination: f64::deg(i),
        azimuth: Azimuth::from_true_north(70.deg()),
    });
    let path = Survey::from_stations(&survey).unwrap();
    for of in EVERY {
        let map = plain.of(of).unwrap().thermal(thermal).unwrap().with_path(&path).unwrap();
        for direction in map.all().iter().step_by(7) {
            let hole = direction.attitude();
            let stress = hole.chain().unwrap().carry(&inputs(coulomb()).stress);
            let wall = Wall::new(WallInputs { stress, pore: 20.mpa(), rock: inputs(coulomb()).rock }).unwrap();
            let limits = wall.thermal(thermal).unwrap().limits();
            assert_same(direction.limit, of_limits(of, &limits), "cooled");
        }
        let card = map.card();
        assert!(card.passed(), "{:#?}", card.checks);
        assert_eq!(DirectionMap::compute(map.inputs.clone()).unwrap().card(), card);
        assert!(card.explanation.notes.iter().any(|note| note.contains("is cooled by 25 K")));
        assert!(card.explanation.headline.contains("; end of the path "), "{}", card.explanation.headline);
        assert!(card.explanation.topics.contains(&"thermal".to_owned()));
    }
    let hot = Thermal { expansion: 12.per_kelvin(), ..thermal };
    let said = plain.thermal(hot).unwrap_err().to_string();
    assert!(said.contains("thermal expansion α_T is 12 1/K") && said.contains("1e-6/K"), "{said}");
    assert!(plain.thermal(Thermal { youngs_modulus: 0.gpa(), ..thermal }).is_err());
}

/// What the two share as types.
#[test]
fn a_mapped_direction_is_small_and_an_attitude() {
    fn small<T: Copy + Send + 'static>() {}
    small::<MappedDirection>();
    small::<MapOf>();
    let map = DirectionMap::over(inputs(coulomb())).unwrap();
    let worst = map.worst().unwrap();
    assert_eq!(worst.attitude().azimuth.true_north().unwrap(), worst.azimuth);
    assert!(worst.inclination <= Angle::deg(90.0));
}
