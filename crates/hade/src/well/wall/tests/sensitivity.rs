//! Sensitivities of recommended ranges: against closed forms by hand, against walls built anew, and with
//! bad input.
#![cfg(test)]

use proptest::prelude::*;

use super::range::{B, b, near, passes};
use super::*;
use crate::frames::{Attitude, Azimuth, Plane};
use crate::rock::{Rock, Strength};
use crate::stress::{Components, Stress};
use crate::units::{Pressure, Units};

fn changes(s: &Sensitivity, symbol: &str) -> [f64; 4] {
    let (_, row) = s.ranked().into_iter().find(|(vary, _)| vary.symbol() == symbol).unwrap();
    [row.less.bottom, row.more.bottom, row.less.top, row.more.top].map(|end| end.unwrap().pressure.in_mpa())
}

/// By hand, vertical hole, from the closed form: d(lower) = ¾ dSHmax − ¼ dShmin + ½ dPp − (√3 / 2) dc;
/// Sv, azimuth, ν and T₀ have no part; the top follows Shmin.
#[test]
fn the_sensitivity_of_a_vertical_hole_by_hand() {
    let range = b(0.0, 0.0).wall().recommended(choices(0.0)).unwrap();
    let s = range
        .sensitivity(&[
            Vary::sv(1.mpa()),
            Vary::sh_min(1.mpa()),
            Vary::sh_max(4.mpa()),
            Vary::sh_max_azimuth(10.deg()),
            Vary::pore(0.6.mpa()),
            Vary::poisson(0.05),
            Vary::tensile_strength(1.mpa()),
            Vary::cohesion(1.mpa()),
            Vary::friction_angle(2.deg()),
        ])
        .unwrap();
    let base = (165.0 - 20.0 * 3_f64.sqrt()) / 4.0;
    let c = 0.5 * 3_f64.sqrt();
    for (symbol, expected) in [
        ("S_v", [base, base, 39.0, 39.0]),
        ("S_Hmax", [base - 3.0, base + 3.0, 39.0, 39.0]),
        ("S_hmin", [base + 0.25, base - 0.25, 38.0, 40.0]),
        ("A_Hmax", [base, base, 39.0, 39.0]),
        ("P_p", [base - 0.3, base + 0.3, 39.0, 39.0]),
        ("ν", [base, base, 39.0, 39.0]),
        ("T_0", [base, base, 39.0, 39.0]),
        ("c", [base + c, base - c, 39.0, 39.0]),
    ] {
        for (got, expected) in changes(&s, symbol).into_iter().zip(expected) {
            assert!((got - expected).abs() < 1e-8, "{symbol}: {got} is not {expected}");
        }
    }
    // φ moves both q and UCS: the closed form at 28° and 32°.
    let at = |phi: f64| {
        let sin = phi.to_radians().sin();
        let (q, ucs) = ((1.0 + sin) / (1.0 - sin), 20.0 * phi.to_radians().cos() / (1.0 - sin));
        (125.0 - ucs + (q - 1.0) * 20.0) / (1.0 + q)
    };
    let [less, more, ..] = changes(&s, "φ");
    assert!((less - at(28.0)).abs() < 1e-8 && (more - at(32.0)).abs() < 1e-8);
    // The largest effect first.
    let order: Vec<_> = s.ranked().iter().map(|(vary, _)| vary.symbol()).take(3).collect();
    assert_eq!(order, ["S_Hmax", "φ", "S_hmin"], "{:?}", changes(&s, "φ"));
    let card = passes(&s);
    assert!(card.explanation.headline.starts_with("the bottom moves most with S_Hmax ± 4 MPa (by 3.00 MPa); the top moves most with S_hmin ± 1 MPa (by 1.00 MPa)"), "{}", card.explanation.headline);
    assert!(card.explanation.notes.iter().any(|n| n.starts_with("The geographic tensor is changed")));
    assert_eq!(card.explanation.figures.len(), 2);
}

/// Each changed range against a wall made anew from other horizontals, pressures, rock and attitude.
#[test]
fn a_changed_tensor_is_the_one_that_other_horizontals_make() {
    let case = b(35.0, 70.0);
    let range = case.wall().recommended(choices(30.0)).unwrap();
    type Change = fn(B, f64) -> B;
    let list: [(Vary, Change); 8] = [
        (Vary::sv(2.mpa()), |mut b, s| {
            b.stress.sv = b.stress.sv + (2.0 * s).mpa();
            b
        }),
        (Vary::sh_max(4.mpa()), |mut b, s| {
            b.stress.sh_max = b.stress.sh_max + (4.0 * s).mpa();
            b
        }),
        (Vary::sh_min(1.5.mpa()), |mut b, s| {
            b.stress.sh_min = b.stress.sh_min + (1.5 * s).mpa();
            b
        }),
        (Vary::sh_max_azimuth(12.deg()), |mut b, s| {
            b.stress.sh_max_azimuth = Azimuth::from_true_north((30.0 + 12.0 * s).deg());
            b
        }),
        (Vary::inclination(5.deg()), |mut b, s| {
            b.i += 5.0 * s;
            b
        }),
        (Vary::hole_azimuth(9.deg()), |mut b, s| {
            b.a += 9.0 * s;
            b
        }),
        (Vary::poisson(0.04), |mut b, s| {
            b.rock.poisson += 0.04 * s;
            b
        }),
        (Vary::cohesion(1.5.mpa()), |mut b, s| {
            b.rock.strength = Strength::mohr_coulomb((10.0 + 1.5 * s).mpa(), 30.deg());
            b
        }),
    ];
    let s = range.sensitivity(&list.map(|(vary, _)| vary)).unwrap();
    passes(&s);
    for (vary, change) in list {
        let got = changes(&s, vary.symbol());
        let anew = [-1.0, 1.0].map(|side| change(case, side).wall().recommended(choices(30.0)).unwrap());
        let expected = [anew[0].bottom, anew[1].bottom, anew[0].top, anew[1].top];
        for (got, expected) in got.into_iter().zip(expected) {
            assert!((got - expected.unwrap().pressure.in_mpa()).abs() < 1e-7, "{}: {got} {expected:?}", vary.symbol());
        }
        assert!((got[0] - got[1]).abs() > 1e-4 || (got[2] - got[3]).abs() > 1e-4, "{} has no effect", vary.symbol());
    }
}

/// A tilted stress, a plane of weakness, a permeable wall, a hole that leans past the vertical.
#[test]
fn any_stress_and_any_wall_can_be_varied() {
    let s = Stress::from_components(Components {
        nn: 50.mpa(),
        ee: 42.mpa(),
        dd: 60.mpa(),
        ne: 3.mpa(),
        ed: 4.mpa(),
        nd: (-3).mpa(),
    })
    .unwrap();
    let at = |i: f64, a: f64| {
        let hole = Attitude { inclination: i.deg(), azimuth: Azimuth::from_true_north(a.deg()) };
        let stress = hole.chain().unwrap().carry(&s);
        Wall::new(WallInputs { stress, pore: 20.mpa(), rock: b(0.0, 0.0).rock }).unwrap()
    };
    let weak = WeakPlane {
        plane: Plane { strike: Azimuth::from_true_north(140.deg()), dip: 25.deg() },
        cohesion: 6.mpa(),
        friction_angle: 28.deg(),
    };
    let all = [
        Vary::sv(2.mpa()),
        Vary::sh_max(3.mpa()),
        Vary::sh_min(3.mpa()),
        Vary::sh_max_azimuth(10.deg()),
        Vary::inclination(5.deg()),
        Vary::hole_azimuth(20.deg()),
    ];
    passes(&at(50.0, 110.0).weak_plane(weak).unwrap().recommended(choices(40.0)).unwrap().sensitivity(&all).unwrap());
    let wet = at(20.0, 10.0).permeable(0.6).unwrap().recommended(choices(60.0)).unwrap();
    passes(&wet.sensitivity(&[Vary::biot(0.2), Vary::pore(1.mpa())]).unwrap());
    let upright = at(2.0, 300.0).recommended(choices(30.0)).unwrap();
    let leaning = upright.sensitivity(&[Vary::inclination(5.deg()), Vary::hole_azimuth(5.deg())]).unwrap();
    passes(&leaning);
    let over = at(3.0, 120.0).recommended(choices(30.0)).unwrap().bottom.unwrap();
    near(Pressure::mpa(changes(&leaning, "i")[0]), over.pressure.in_mpa());
}

#[test]
fn a_change_that_leaves_no_range_is_a_value_and_comes_first() {
    let range = b(0.0, 0.0).wall().recommended(choices(0.0)).unwrap();
    let s = range.sensitivity(&[Vary::sh_min(1.mpa()), Vary::sh_max(12.mpa()), Vary::cohesion(7.mpa())]).unwrap();
    let card = passes(&s);
    assert!(card.explanation.headline.contains("can leave no range"), "{}", card.explanation.headline);
    assert!(card.warnings.iter().any(|said| said.starts_with("With")));
}

#[test]
fn what_cannot_be_varied_is_refused_by_name() {
    let range = b(35.0, 70.0).wall().recommended(choices(30.0)).unwrap();
    let said = |vary: &[Vary]| range.sensitivity(vary).unwrap_err().to_string();
    assert!(said(&[]).contains("1 to 24"));
    assert_eq!(
        said(&[Vary::sv((-1).mpa())]),
        "change of vertical stress is -1 MPa, but it must be more than zero; it is applied both ways."
    );
    assert!(said(&[Vary::pore(0.mpa())]).starts_with("change of pore pressure is 0 MPa"));
    assert!(said(&[Vary::pore(f64::NAN.mpa())]).starts_with("change of pore pressure is NaN"));
    assert!(said(&[Vary::pore(1.mpa()), Vary::pore(2.mpa())]).contains("stands twice"));
    assert!(said(&[Vary::ucs(1.mpa())]).contains("uniaxial compressive strength of Mohr–Coulomb: this strength"));
    assert!(said(&[Vary::biot(0.1)]).contains("impermeable wall"));
    assert!(said(&[Vary::tensile_strength(3.mpa())]).contains("tensile strength T₀ is -1 MPa"));
    assert!(said(&[Vary::poisson(0.3)]).contains("Poisson's ratio is"));
    assert!(said(&[Vary::cohesion(11.mpa())]).ends_with("Vary it by less."));
    let mut even = b(35.0, 70.0);
    even.stress.sh_min = 55.mpa();
    let even = even.wall().recommended(choices(30.0)).unwrap();
    assert!(even.sensitivity(&[Vary::sh_max(1.mpa())]).unwrap_err().to_string().contains("are equal"));
    assert!(even.sensitivity(&[Vary::sv(1.mpa())]).is_ok());
}

/// What is compared is what the rule makes: a raised top is left aside.
#[test]
fn a_raised_top_is_left_aside() {
    let range = b(35.0, 70.0).wall().recommended(choices(30.0)).unwrap();
    let raised = range.raised_to(39.8.mpa(), "a reason").unwrap();
    let vary = [Vary::sv(2.mpa())];
    assert_eq!(raised.sensitivity(&vary).unwrap(), range.sensitivity(&vary).unwrap());
    let others = [Alternative::permeable(0.5)];
    assert_eq!(raised.beside(&others).unwrap(), range.beside(&others).unwrap());
}

fn any_range() -> impl Strategy<Value = (Wall, f64)> {
    let stress = (30.0..80.0_f64, 30.0..80.0_f64, 30.0..80.0_f64, -5.0..5.0_f64, -5.0..5.0_f64, -5.0..5.0_f64);
    let at = (0.0..180.0_f64, 0.0..360.0_f64, 5.0..25.0_f64, 0.0..120.0_f64);
    let rock = (0.1..0.4_f64, 2.0..8.0_f64, 4.0..30.0_f64, 15.0..45.0_f64, 0..3_u8);
    (stress, at, rock).prop_map(|((nn, ee, dd, ne, ed, nd), (i, a, pore, width), (poisson, tensile, c, phi, law))| {
        let [nn, ee, dd, ne, ed, nd] = [nn, ee, dd, ne, ed, nd].map(|c| c.mpa());
        let s = Stress::from_components(Components { nn, ee, dd, ne, nd, ed }).unwrap();
        let hole = Attitude { inclination: i.deg(), azimuth: Azimuth::from_true_north(a.deg()) };
        let strength = match law {
            0 => Strength::mohr_coulomb(c.mpa(), phi.deg()),
            1 => Strength::mogi_coulomb(c.mpa(), phi.deg()),
            _ => Strength::modified_lade(c.mpa(), phi.deg()),
        };
        let rock = Rock { poisson, tensile_strength: tensile.mpa(), strength };
        let stress = hole.chain().unwrap().carry(&s);
        (Wall::new(WallInputs { stress, pore: pore.mpa(), rock }).unwrap(), width)
    })
}

proptest! {
    #![proptest_config(ProptestConfig::with_cases(6))]

    #[test]
    fn every_range_passes_its_own_checks((wall, width) in any_range(), density in 0.5..2.0_f64) {
        let range = wall.recommended(choices(width)).unwrap();
        let plan = MudPlan {
            static_density: density.sg(),
            swab: Some(0.5.mpa()),
            circulating_density: None,
            surge: Some(1.mpa()),
        };
        passes(&range.hold(plan).unwrap());
        passes(&range.beside(&[Alternative::permeable(0.8), Alternative::partly_sealed(0.6, 0.5)]).unwrap());
        passes(&range.sensitivity(&[
            Vary::sh_max(3.mpa()),
            Vary::sh_max_azimuth(20.deg()),
            Vary::cohesion(1.mpa()),
            Vary::inclination(10.deg()),
            Vary::hole_azimuth(10.deg()),
        ]).unwrap());
    }
}
