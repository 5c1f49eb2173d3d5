//! Wall stresses, limits and failing arcs against an independent numpy/scipy implementation: closed
//! forms to 1e-9 relative, limits to 1e-4 MPa, arcs to 0.02° (held much closer, as the cases allow).

use hade::prelude::*;
use hade::rock::{HoekBrown, Rock, Strength};
use hade::well::{Wall, WallInputs, WallStress, WeakPlane};
use hade_tests::{Case, agree, assert_all_close, cases, number, numbers};
use serde_json::Value;

const RELATIVE: f64 = 1e-9;
const LIMIT_MPA: f64 = 1e-4;
const ARC_DEGREES: f64 = 0.02;

fn carried(inputs: &Value) -> Stress<Borehole> {
    let [nn, ee, dd, ne, ed, nd] =
        <[f64; 6]>::try_from(numbers(inputs, "stress_ned")).expect("six components").map(|c| c.mpa());
    let s = Stress::from_components(Components { nn, ee, dd, ne, nd, ed }).expect("finite components");
    let azimuth = Azimuth::from_true_north(number(inputs, "azimuth").deg());
    let hole = Attitude { inclination: number(inputs, "inclination").deg(), azimuth };
    hole.chain().expect("a chain").carry(&s)
}

fn wall_of(inputs: &Value, tensile: f64) -> Wall {
    let strength = inputs.get("criterion_params").map_or_else(
        || Strength::mohr_coulomb(10.mpa(), 30.deg()),
        |p| strength(inputs["criterion"].as_str().expect("a criterion"), p),
    );
    let rock = Rock { poisson: number(inputs, "nu"), tensile_strength: tensile.mpa(), strength };
    let pore = inputs.get("pore_pressure").map_or(0.0, |_| number(inputs, "pore_pressure")).mpa();
    Wall::new(WallInputs { stress: carried(inputs), pore, rock }).expect("a wall")
}

fn strength(criterion: &str, p: &Value) -> Strength {
    let of = |make: fn(Pressure, Angle) -> Strength| make(number(p, "c").mpa(), number(p, "phi").deg());
    match criterion {
        "mohr_coulomb" => of(Strength::mohr_coulomb),
        "mogi_coulomb" => of(Strength::mogi_coulomb),
        "modified_lade" => of(Strength::modified_lade),
        "dp_inscribed" => of(Strength::drucker_prager_inscribed),
        "dp_circumscribed" => of(Strength::drucker_prager_circumscribed),
        "hoek_brown" => Strength::hoek_brown(HoekBrown {
            sigma_ci: number(p, "sci").mpa(),
            m_i: number(p, "mi"),
            gsi: number(p, "GSI"),
            disturbance: number(p, "D"),
        }),
        other => panic!("no criterion {other}"),
    }
}

/// Larger numbers carry a larger last bit; the cases with magnitudes of 1000 scale the tolerance.
fn scale(case: &Case) -> f64 {
    (numbers(&case.inputs, "stress_ned").iter().fold(0.0_f64, |m, v| m.max(v.abs())) / 100.0).max(1.0)
}

#[test]
fn stresses_at_tool_faces() {
    for case in cases("wall_stress") {
        let wall = wall_of(&case.inputs, 0.0);
        let pressure = number(&case.inputs, "pw").mpa();
        let at: Vec<WallStress> = numbers(&case.inputs, "theta")
            .into_iter()
            .map(|t| wall.stress_at(pressure, t.deg()).expect("a wall stress"))
            .collect();
        let column = |f: &dyn Fn(&WallStress) -> Pressure| at.iter().map(|s| f(s).in_mpa()).collect::<Vec<_>>();
        let hold = |key: &str, got: Vec<f64>| {
            assert_all_close(&format!("{} {key}", case.id), &got, &numbers(&case.outputs, key), RELATIVE);
        };
        hold("srr", column(&|s| s.radial));
        hold("stt", column(&|s| s.hoop));
        hold("szz", column(&|s| s.axial));
        // A shear that is zero but for rounding has no digits of its own: it is held against the hoop
        // stress beside it.
        let beside = |shear: Vec<f64>| [shear, numbers(&case.outputs, "stt")].concat();
        let shear = [beside(column(&|s| s.shear)), beside(numbers(&case.outputs, "ttz"))];
        assert_all_close(&format!("{} ttz", case.id), &shear[0], &shear[1], RELATIVE);
        hold("eff_s1", column(&|s| s.effective.principal()[0]));
        hold("eff_s2", column(&|s| s.effective.principal()[1]));
        hold("eff_s3", column(&|s| s.effective.principal()[2]));
        assert!(at.iter().all(|s| s.card().passed()), "{}", case.id);
    }
}

#[test]
fn a_wall_tensor_in_north_east_down() {
    for case in cases("wall_tensor_ned") {
        let wall = wall_of(&case.inputs, 0.0);
        let at = wall.stress_at(number(&case.inputs, "pw").mpa(), number(&case.inputs, "theta").deg()).unwrap();
        let s = at.in_geographic();
        use Axis::{X, Y, Z};
        let got = [(X, X), (Y, Y), (Z, Z), (X, Y), (Y, Z), (X, Z)].map(|(a, b)| s.component(a, b).in_mpa());
        assert_all_close(&case.id, &got, &numbers(&case.outputs, "stress_ned"), RELATIVE);
    }
}

fn hold_limit(case: &Case, what: &str, got: Option<Pressure>, want: &Value) -> f64 {
    match (got, want.as_f64()) {
        (None, None) => 0.0,
        (Some(got), Some(want)) => {
            let got = got.in_mpa();
            assert!(agree(got, want, LIMIT_MPA * scale(case)), "{} {what}: got {got}, want {want}", case.id);
            (got - want).abs() / scale(case)
        }
        (got, want) => panic!("{} {what}: got {got:?}, want {want:?}", case.id),
    }
}

#[test]
fn limits_by_every_criterion() {
    let mut largest = 0.0_f64;
    for case in cases("pressure_window") {
        let limits = wall_of(&case.inputs, number(&case.inputs, "T0")).limits();
        for (what, limit) in [
            ("lower_shear", limits.lower_shear),
            ("upper_shear", limits.upper_shear),
            ("upper_tensile", limits.initiation),
        ] {
            largest = largest.max(hold_limit(&case, what, limit.pressure(), &case.outputs[what]));
        }
        let card = limits.card();
        assert!(card.passed(), "{}: {:#?}", case.id, card.checks.iter().filter(|c| !c.passed).collect::<Vec<_>>());
        if case.outputs["shear_status"] == "no_safe_pw" {
            assert!(limits.lower_shear.least_bad().is_some() && limits.lower_shear.short_by().is_some());
        }
    }
    eprintln!("limits: largest difference {largest:.2e} MPa");
}

#[test]
fn initiation_by_the_least_effective_principal_stress() {
    let mut largest = 0.0_f64;
    for case in cases("tensile_limit") {
        let limits = wall_of(&case.inputs, number(&case.inputs, "T0")).limits();
        largest = largest.max(hold_limit(&case, "upper", limits.initiation.pressure(), &case.outputs["upper"]));
        if let (Some(got), Some(want)) = (limits.initiation.toolface(), case.outputs["theta_mod180"].as_f64()) {
            let gap = (got.in_deg() - want).rem_euclid(180.0);
            assert!(gap.min(180.0 - gap) < 1e-3, "{}: tool face {got}, want {want}", case.id);
        }
        let card = limits.card();
        assert!(card.passed(), "{}: {:#?}", case.id, card.checks.iter().filter(|c| !c.passed).collect::<Vec<_>>());
    }
    eprintln!("initiation: largest difference {largest:.2e} MPa");
}

#[test]
fn failing_arcs_by_every_criterion() {
    let mut largest = 0.0_f64;
    for case in cases("breakout_arcs") {
        let wall = wall_of(&case.inputs, 0.0);
        let failing = wall.failing_arcs(number(&case.inputs, "pw").mpa()).unwrap();
        let wanted = case.outputs["arcs"].as_array().expect("arcs");
        let card = failing.card();
        assert!(card.passed(), "{}: {:#?}", case.id, card.checks.iter().filter(|c| !c.passed).collect::<Vec<_>>());
        if case.outputs["status"] == "all" {
            assert!(failing.whole_wall(), "{}", case.id);
            continue;
        }
        let got = failing.arcs();
        assert_eq!(got.len(), wanted.len(), "{}: {got:?}", case.id);
        for want in wanted {
            let (centre, half) = (number(want, "centre"), number(want, "half_width"));
            let off = |c: f64| {
                let gap = (c - centre).rem_euclid(180.0);
                gap.min(180.0 - gap)
            };
            let near = got
                .iter()
                .map(|arc| off(arc.centre.in_deg()).max((0.5 * arc.width.in_deg() - half).abs()))
                .fold(f64::INFINITY, f64::min);
            assert!(near <= ARC_DEGREES, "{}: {got:?} against {want}", case.id);
            largest = largest.max(near);
        }
    }
    eprintln!("arcs: largest difference {largest:.2e}°");
}

/// The margin of slip on a plane of weakness, with the whole traction of the wall on it.
#[test]
fn slip_on_a_plane_of_weakness() {
    for case in cases("weak_plane_wall_margin") {
        let input = |key: &str| number(&case.inputs, key);
        let plane = Plane { strike: Azimuth::from_true_north(input("strike").deg()), dip: input("dip").deg() };
        let weak = WeakPlane { plane, cohesion: input("cw").mpa(), friction_angle: input("phiw").deg() };
        let wall = wall_of(&case.inputs, 0.0).weak_plane(weak).expect("a plane");
        let got: Vec<f64> = numbers(&case.inputs, "theta")
            .into_iter()
            .map(|t| {
                let at = wall.stress_at(input("pw").mpa(), t.deg()).expect("a wall stress");
                assert!(at.card().passed(), "{}", case.id);
                // Their margin is positive where it slips.
                -at.weak_plane_margin().expect("a plane").in_mpa()
            })
            .collect();
        assert_all_close(&case.id, &got, &numbers(&case.outputs, "margin"), RELATIVE);
    }
}
