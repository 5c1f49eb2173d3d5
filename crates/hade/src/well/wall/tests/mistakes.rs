//! Mistakes that the printed checks of a wall must see, and bad input that it must refuse.
#![cfg(test)]

use super::{RangeChoices, Thermal, Wall, WallInputs, WallStress, WeakPlane, state_b};
use crate::card::Explain;
use crate::frames::vector::{apply, transpose};
use crate::frames::{Azimuth, Borehole, Plane};
use crate::rock::{HoekBrown, Strength};
use crate::stress::Stress;
use crate::units::{Expansion, Pressure, Quantity, Units, Warming};
use crate::well::wall::elastic::Kirsch;
use crate::well::wall::shear::{PlaneAtWall, ShearWall};

fn weak_plane(strike: f64, dip: f64) -> WeakPlane {
    let plane = Plane { strike: Azimuth::from_true_north(strike.deg()), dip: dip.deg() };
    WeakPlane { plane, cohesion: 1.mpa(), friction_angle: 18.deg() }
}

fn warmed(warming: f64) -> Thermal {
    Thermal {
        warming: Warming::kelvin(warming),
        youngs_modulus: Pressure::gpa(20.0),
        expansion: Expansion::per_kelvin(1e-5),
    }
}

fn coulomb() -> Strength {
    Strength::mohr_coulomb(12.mpa(), 32.deg())
}

/// State B in hole 35/70: by a criterion that is searched, permeable, warmed, with a plane of weakness,
/// and with all of these.
fn walls() -> Vec<(&'static str, Wall)> {
    let wall = state_b(35.0, 70.0, coulomb());
    let lade = state_b(35.0, 70.0, Strength::modified_lade(10.mpa(), 30.deg()));
    let all = lade.partly_sealed(0.8, 0.6).unwrap().thermal(warmed(-15.0)).unwrap();
    vec![
        ("modified Lade", lade),
        ("Mogi–Coulomb", state_b(35.0, 70.0, Strength::mogi_coulomb(10.mpa(), 30.deg()))),
        (
            "Hoek–Brown",
            state_b(
                35.0,
                70.0,
                Strength::hoek_brown(HoekBrown { sigma_ci: 90.mpa(), m_i: 12.0, gsi: 80.0, disturbance: 0.0 }),
            ),
        ),
        ("permeable", wall.permeable(0.9).unwrap()),
        ("partly sealed", wall.partly_sealed(0.9, 0.7).unwrap()),
        ("warmed", wall.thermal(warmed(12.0)).unwrap()),
        ("plane of weakness", wall.weak_plane(weak_plane(120.0, 40.0)).unwrap()),
        ("all together", all.weak_plane(weak_plane(120.0, 40.0)).unwrap()),
    ]
}

/// A pressure a little below the lower limit, or the least bad one.
fn a_little_low(wall: &Wall) -> Pressure {
    let limit = wall.limits().lower_shear;
    limit.pressure().or(limit.least_bad()).unwrap() - 1.mpa()
}

/// Which of a wall's results have a red check: limits, stress at a place, arcs and all round at a
/// pressure, range.
fn red(wall: &Wall, pressure: Pressure) -> [bool; 5] {
    let choices = RangeChoices {
        allowed_width: 30.deg(),
        margin_bottom: 0.mpa(),
        margin_top: 0.mpa(),
        tvd_below_rotary: 2950.m(),
    };
    [
        !wall.limits().card().passed(),
        !wall.stress_at(31.mpa(), 77.deg()).unwrap().card().passed(),
        !wall.failing_arcs(pressure).unwrap().card().passed(),
        !wall.around(pressure).unwrap().card().passed(),
        !wall.recommended(choices).unwrap().card().passed(),
    ]
}

/// A tool face of the wrong sense, and S turned by the transposed matrix, leave invariants alone; the
/// checks see both at every kind of wall.
#[test]
fn flipped_tool_faces_and_transposed_turns_turn_a_check_red_at_every_wall() {
    for (name, wall) in walls() {
        let low = a_little_low(&wall);
        assert_eq!(red(&wall, low), [false; 5], "{name}");
        let at = wall.stress_at(31.mpa(), 77.deg()).unwrap();
        let flipped = wall.stress_at(31.mpa(), (-77).deg()).unwrap();
        assert!(WallStress::check(&at.inputs(), &flipped.outcome()).iter().any(|c| !c.passed), "{name}");
        let flipped_plane = wall.shear.plane.is_some().then(|| {
            let setup = wall.setup.weak_plane.unwrap();
            let [x, y, z] = normal(&wall, &setup);
            with(&wall, |_| Some(plane_of(&wall, [x, -y, z], &setup)), |s| s)
        });
        if let Some(flipped) = flipped_plane {
            let red = red(&flipped, low);
            assert!(red[0] && red[2] && red[3], "{name}: {red:?}");
        }

        let inputs = wall.setup.inputs;
        let q = inputs.stress.attitude().unwrap().matrix().unwrap();
        let far = inputs.stress.geographic();
        let turned = far.turned(&transpose(&q));
        let made = crate::stress::Made::Combined { parts: None };
        let stress = Stress::<Borehole>::of(turned, made, Some((far, inputs.stress.axes())));
        let mut setup = wall.setup;
        setup.inputs = WallInputs { stress, ..inputs };
        assert_eq!(red(&Wall::of(setup).unwrap(), low), [true; 5], "{name}");
    }
}

fn normal(wall: &Wall, weak: &WeakPlane) -> [f64; 3] {
    apply(&wall.attitude.matrix().unwrap(), weak.plane.axes().unwrap().normal)
}

fn plane_of(wall: &Wall, normal: [f64; 3], weak: &WeakPlane) -> PlaneAtWall {
    let [.., yz, xz] = wall.setup.inputs.stress.tensor().0;
    PlaneAtWall::new(normal, yz, xz, weak.cohesion.si(), weak.friction_angle.si().tan())
}

/// What is mistaken in them.
type Mistake = fn(Parts) -> Parts;

/// The numbers of a wall that may be mistaken.
#[derive(Clone, Copy)]
struct Parts {
    thermal: f64,
    pore: f64,
    passes: f64,
    eta2: f64,
}

/// A wall that says it is one thing and is calculated as another.
fn with(
    wall: &Wall,
    plane: impl Fn(Option<PlaneAtWall>) -> Option<PlaneAtWall>,
    parts: impl Fn(Parts) -> Parts,
) -> Wall {
    let WallInputs { stress, pore, rock } = wall.setup.inputs;
    let right = Parts {
        thermal: wall.setup.thermal_stress(),
        pore: pore.si(),
        passes: wall.setup.passes(),
        eta2: wall.setup.eta2(),
    };
    let p = parts(right);
    let kirsch = Kirsch::new(stress.tensor(), rock.poisson).warmed(p.thermal);
    let shear = ShearWall::new(kirsch, rock.strength.law(), plane(wall.shear.plane), p.pore, p.passes, p.eta2);
    Wall { shear, ..*wall }
}

/// A wall calculated with a wrong 2η, thermal stress, pore pressure behind it, or plane turns checks of
/// its limits and of its stresses red; and one rebuilt from the right parts does not.
#[test]
fn mistaken_parts_of_a_wall_turn_checks_red() {
    let by_parts: [(&str, Mistake); 7] = [
        ("2η a thousandth too large", |p| Parts { eta2: 1.001 * p.eta2, ..p }),
        ("η for 2η", |p| Parts { eta2: 0.5 * p.eta2, ..p }),
        ("seepage the other way", |p| Parts { eta2: -p.eta2, ..p }),
        ("thermal stress the other way", |p| Parts { thermal: -p.thermal, ..p }),
        ("thermal stress a thousandth too large", |p| Parts { thermal: 1.001 * p.thermal, ..p }),
        ("the formation's pore pressure behind a wall that passes", |p| Parts { passes: 0.0, ..p }),
        ("all of the pressure behind a wall that holds some back", |p| Parts { passes: 1.0, ..p }),
    ];
    let mut planes = 0;
    for (name, wall) in walls() {
        let low = a_little_low(&wall);
        assert_eq!(red(&with(&wall, |plane| plane, |p| p), low), [false; 5], "{name}");
        let (passes, heated) = (wall.setup.passes(), wall.setup.thermal_stress() != 0.0);
        for (mistake, parts) in by_parts {
            let shows = match mistake {
                m if m.contains('η') || m.contains("seepage") => passes > 0.0,
                m if m.contains("thermal") => heated,
                m if m.contains("formation's") => passes > 0.0,
                _ => passes < 1.0,
            };
            if shows {
                let red = red(&with(&wall, |plane| plane, parts), low);
                assert!(red[0] && red[1] && red[2] && red[3], "{name}, {mistake}: {red:?}");
            }
        }
        let Some(weak) = wall.setup.weak_plane else { continue };
        // Where the rock fails first, a mistaken plane need not show in what fails.
        if !wall.limits().lower_shear.on_weak_plane() {
            continue;
        }
        planes += 1;
        let [x, y, z] = normal(&wall, &weak);
        let stronger = WeakPlane { cohesion: 1.01.mpa(), ..weak };
        let upside = WeakPlane { plane: Plane { dip: 50.deg(), ..weak.plane }, ..weak };
        let mistakes = [
            ("normal in north, east, down", plane_of(&wall, weak.plane.axes().unwrap().normal, &weak)),
            ("normal turned about the top", plane_of(&wall, [x, -y, z], &weak)),
            ("normal of the dip's complement", plane_of(&wall, normal(&wall, &upside), &weak)),
            ("a cohesion a little larger", plane_of(&wall, [x, y, z], &stronger)),
        ];
        for (mistake, plane) in mistakes {
            let red = red(&with(&wall, |_| Some(plane), |p| p), low);
            assert!(red[0] && red[2] && red[3], "{name}, {mistake}: {red:?}");
        }
        // n and −n are one plane.
        let other_end = with(&wall, |_| Some(plane_of(&wall, [-x, -y, -z], &weak)), |p| p);
        assert_eq!(red(&other_end, low), [false; 5], "{name}");
        let without = red(&with(&wall, |_| None, |p| p), low);
        assert!(without[0] && without[2] && without[3], "{name}: {without:?}");
    }
    assert!(planes > 0);
}

#[test]
fn what_no_wall_has_is_refused_by_name() {
    let wall = state_b(35.0, 70.0, coulomb());
    let text = |r: crate::error::Result<Wall>| r.unwrap_err().to_string();
    for biot in [-0.01, 1.01, f64::NAN, f64::INFINITY] {
        let message = text(wall.permeable(biot));
        assert!(message.starts_with("Biot's coefficient α is "), "{message}");
        assert!(message.ends_with(", but it must be between 0 and 1."), "{message}");
    }
    assert_eq!(text(wall.permeable(1.01)), "Biot's coefficient α is 1.01, but it must be between 0 and 1.");
    assert_eq!(text(wall.partly_sealed(0.5, -0.25)), "sealing of the wall is -0.25, but it must be between 0 and 1.");
    assert_eq!(text(wall.partly_sealed(0.5, 1.5)), "sealing of the wall is 1.5, but it must be between 0 and 1.");
    assert!(wall.partly_sealed(0.5, f64::NAN).is_err());

    let thermal = warmed(-20.0);
    assert_eq!(
        text(wall.thermal(Thermal { youngs_modulus: 0.gpa(), ..thermal })),
        "Young's modulus E is 0 MPa, but it must be above zero; a thermal stress cannot be had without it."
    );
    assert_eq!(
        text(wall.thermal(Thermal { youngs_modulus: (-20).gpa(), ..thermal })),
        "Young's modulus E is -20000 MPa, but it must be above zero; a thermal stress cannot be had without it."
    );
    for e in [f64::NAN, f64::INFINITY] {
        assert!(
            text(wall.thermal(Thermal { youngs_modulus: e.gpa(), ..thermal })).starts_with("Young's modulus E is ")
        );
    }
    assert_eq!(
        text(wall.thermal(Thermal { expansion: (-1e-5).per_kelvin(), ..thermal })),
        "thermal expansion α_T is -10 × 10⁻⁶/K, but it must be zero or more."
    );
    assert!(wall.thermal(Thermal { expansion: f64::NAN.per_kelvin(), ..thermal }).is_err());
    assert_eq!(
        text(wall.thermal(Thermal { warming: f64::NAN.kelvin(), ..thermal })),
        "temperature difference is NaN, but it must be a finite number."
    );

    assert_eq!(text(wall.weak_plane(weak_plane(30.0, 91.0))), "dip is 91°, but it must be between 0° and 90°.");
    assert!(wall.weak_plane(weak_plane(30.0, -1.0)).is_err() && wall.weak_plane(weak_plane(f64::NAN, 30.0)).is_err());
    let weak = weak_plane(30.0, 40.0);
    assert_eq!(
        text(wall.weak_plane(WeakPlane { cohesion: (-1).mpa(), ..weak })),
        "cohesion of the plane of weakness is -1 MPa, but it must be zero or more."
    );
    assert_eq!(
        text(wall.weak_plane(WeakPlane { friction_angle: 90.deg(), ..weak })),
        "friction angle of the plane of weakness is 90°, but it must be at least 0° and below 90°."
    );
    assert!(wall.weak_plane(WeakPlane { friction_angle: f64::NAN.deg(), ..weak }).is_err());
    // A magnetic strike without its correction is refused as everywhere.
    let magnetic = Plane { strike: Azimuth::from_magnetic_north(30.deg()), dip: 40.deg() };
    assert!(wall.weak_plane(WeakPlane { plane: magnetic, ..weak }).is_err());
}

/// A rock that no criterion takes is refused when the wall is made, and when it is given to a wall.
#[test]
fn what_no_rock_has_is_refused_by_the_wall() {
    let wall = state_b(35.0, 70.0, coulomb());
    let text = |s: Strength| {
        let inputs = wall.inputs();
        let made = Wall::new(WallInputs { rock: crate::rock::Rock { strength: s, ..inputs.rock }, ..inputs });
        let given = wall.with_strength(s).unwrap_err().to_string();
        assert_eq!(made.unwrap_err().to_string(), given);
        given
    };
    let mass = HoekBrown { sigma_ci: 50.mpa(), m_i: 10.0, gsi: 60.0, disturbance: 0.0 };
    for (bad, name) in [
        (HoekBrown { sigma_ci: 0.mpa(), ..mass }, "compressive strength"),
        (HoekBrown { m_i: 0.0, ..mass }, "constant mi"),
        (HoekBrown { gsi: 101.0, ..mass }, "GSI"),
        (HoekBrown { gsi: -1.0, ..mass }, "GSI"),
        (HoekBrown { disturbance: 1.1, ..mass }, "disturbance"),
        (HoekBrown { disturbance: f64::NAN, ..mass }, "disturbance"),
    ] {
        let message = text(Strength::hoek_brown(bad));
        assert!(message.contains(name), "{name}: {message}");
    }
    let message = text(Strength::modified_lade(10.mpa(), 0.deg()));
    assert!(message.contains("modified Lade") && message.contains("friction angle"), "{message}");
    for strength in [
        Strength::mogi_coulomb((-1).mpa(), 30.deg()),
        Strength::modified_lade((-1).mpa(), 30.deg()),
        Strength::drucker_prager_inscribed((-1).mpa(), 30.deg()),
    ] {
        assert_eq!(text(strength), "cohesion is -1 MPa, but it must be zero or more.");
    }
}
