//! Limits over every hole direction, and of drawn walls, against numpy (`tests/scripts/wall_limits.py`).
//!
//! numpy looks at a grid of tool faces, ours are exact in the tool face: a grid of 1° finds the lower limit low by
//! 0.0002 MPa on the average and never high, one of 0.05° by a four-hundredth of that.

use hade::prelude::*;
use hade_tests::{agree, data, reference_rows};
use serde_json::Value;

/// What a grid of 1° may be low by in one direction, and one of 0.05°.
const COARSE_MPA: f64 = 2e-3;
const FINE_MPA: f64 = 1e-5;

fn reference() -> Value {
    let path = data().join("reference/wall_map.json");
    let text = std::fs::read_to_string(&path).unwrap_or_else(|e| panic!("{}: {e}", path.display()));
    serde_json::from_str(&text).expect("JSON")
}

struct Numbers {
    sv: f64,
    sh_max: f64,
    sh_min: f64,
    azimuth: f64,
    pore: f64,
    ucs: f64,
    phi: f64,
}

impl Numbers {
    fn stress(&self) -> Stress {
        let sh_max_azimuth = Azimuth::from_true_north(self.azimuth.deg());
        let (sv, sh_max, sh_min) = (self.sv.mpa(), self.sh_max.mpa(), self.sh_min.mpa());
        Stress::from_horizontals(Horizontals { sv, sh_max, sh_min, sh_max_azimuth }).expect("a stress")
    }
    fn rock(&self) -> Rock {
        let strength = Strength::mohr_coulomb_ucs(self.ucs.mpa(), self.phi.deg());
        Rock { poisson: 0.25, tensile_strength: 2.mpa(), strength }
    }
}

fn hole(inclination: f64, azimuth: f64) -> Attitude {
    Attitude { inclination: inclination.deg(), azimuth: Azimuth::from_true_north(azimuth.deg()) }
}

fn maps() -> (DirectionMap, DirectionMap) {
    let base = Numbers { sv: 60.0, sh_max: 55.0, sh_min: 42.0, azimuth: 35.0, pore: 22.0, ucs: 30.0, phi: 32.0 };
    let inputs = MapInputs { stress: base.stress(), pore: base.pore.mpa(), rock: base.rock(), step: 1.deg() };
    let lower = DirectionMap::over(inputs).expect("a map");
    let upper = lower.of(MapOf::UpperShear).expect("a map");
    (lower, upper)
}

fn mean(map: &DirectionMap, every: usize) -> f64 {
    let kept = |angle: Angle| (angle.in_deg().round() as usize).is_multiple_of(every);
    let values: Vec<f64> = map
        .all()
        .iter()
        .filter(|d| kept(d.inclination) && kept(d.azimuth))
        .map(|d| d.limit.expect("a safe pressure in every direction").in_mpa())
        .collect();
    values.iter().sum::<f64>() / values.len() as f64
}

#[test]
fn the_mean_over_all_directions() {
    let (map, _) = maps();
    assert_eq!(map.all().len(), 91 * 360);
    let want = reference();
    let number = |key: &str| want[key].as_f64().expect("a number");
    // As printed by an independent script of this kind, 360 tool faces: 34.2236253043.
    assert!(agree(number("mean_lower_coarse"), 34.223_625_304_3, 1e-9));
    let off = mean(&map, 1) - number("mean_lower_coarse");
    assert!(off > 0.0 && off < 4e-4, "the grid of 1° is low by {off} MPa");
    assert!(agree(mean(&map, 10), number("mean_lower_10_fine"), 2e-6), "{}", mean(&map, 10));
    assert!(mean(&map, 10) > number("mean_lower_10_coarse"));
}

#[test]
fn single_directions() {
    let (lower, upper) = maps();
    for row in reference()["directions"].as_array().expect("directions") {
        let number = |key: &str| row[key].as_f64().expect("a number");
        let hole = hole(number("inclination"), number("azimuth"));
        for (k, map) in [(0, &lower), (1, &upper)] {
            let got = map.at(hole).expect("a hole").expect("a safe pressure").in_mpa();
            let [coarse, fine] = ["coarse", "fine"].map(|grid| row[grid][k].as_f64().expect("a number"));
            assert!(agree(got, fine, FINE_MPA), "{} {k}: {got} {fine}", hole.words());
            assert!(agree(got, coarse, COARSE_MPA), "{} {k}: {got} {coarse}", hole.words());
            // A grid is on the unsafe side: its lower limit is too low, its upper one too high.
            let side = if k == 0 { 1.0 } else { -1.0 };
            assert!(side * (got - coarse) > -1e-9 && side * (got - fine) > -1e-9, "{}", hole.words());
        }
    }
}

#[test]
fn the_same_draws() {
    let rows = reference_rows::<9>("wall_draws.npy");
    let mut without = 0;
    for [sv, sh_max, sh_min, azimuth, pore, ucs, phi, lower, upper] in rows {
        let drawn = Numbers { sv, sh_max, sh_min, azimuth, pore, ucs, phi };
        let stress = hole(50.0, 110.0).chain().expect("a chain").carry(&drawn.stress());
        let wall = Wall::new(WallInputs { stress, pore: pore.mpa(), rock: drawn.rock() }).expect("a wall");
        let limits = wall.limits();
        let got = [limits.lower_shear, limits.upper_shear].map(|limit| limit.pressure().map(Pressure::in_mpa));
        if lower == 0.0 {
            without += 1;
            assert_eq!(got, [None, None]);
            continue;
        }
        for (got, want) in got.into_iter().zip([lower, upper]) {
            let got = got.unwrap_or_else(|| panic!("numpy found {want}"));
            assert!(agree(got, want, 1e-4), "{got} {want}");
        }
    }
    assert_eq!(without, 99);
}
