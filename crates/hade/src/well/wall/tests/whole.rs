//! Walls as a whole: cards that catch every perturbed number, properties, and bad input.
#![cfg(test)]

use proptest::prelude::*;

use super::*;
use crate::card::{Data, Explain};
use crate::frames::Borehole;
use crate::rock::{Rock, Strength};
use crate::stress::Stress;
use crate::units::{Angle, Pressure, Quantity, Units};

#[test]
fn every_card_passes_replays_and_catches_each_perturbed_number() {
    for (name, wall) in walls() {
        hold(name, &wall.limits());
        hold(name, &wall.limits_at_width(60.deg()).unwrap());
        hold(name, &wall.stress_at(31.mpa(), 77.deg()).unwrap());
        for pressure in [24.0, 40.0] {
            hold(name, &wall.failing_arcs(pressure.mpa()).unwrap());
        }
        hold(name, &wall.around(27.mpa()).unwrap());
        for width in [0.0, 45.0] {
            hold(name, &wall.recommended(choices(width)).unwrap());
        }
    }
}

/// A tool face of the wrong sense and a transposed turn leave invariants alone; the checks see both.
#[test]
fn a_flipped_tool_face_and_a_transposed_turn_turn_a_check_red() {
    let wall = state_b(35.0, 70.0, coulomb());
    let at = wall.stress_at(31.mpa(), 77.deg()).unwrap();
    let flipped = wall.stress_at(31.mpa(), (-77).deg()).unwrap();
    assert!(WallStress::check(&at.inputs(), &flipped.outcome()).iter().any(|c| !c.passed));

    // The same wall with S turned by the transposed matrix in place of the right one.
    let q = wall.inputs().stress.attitude().unwrap().matrix().unwrap();
    let far = wall.inputs().stress.geographic();
    let wrong = far.turned(&crate::frames::vector::transpose(&q));
    let mut json = wall.inputs().stress.write();
    for (k, c) in wrong.0.iter().enumerate() {
        json = json.with_number(&format!("/components/{k}"), *c);
    }
    // A record that says so is not read at all.
    assert!(Stress::<Borehole>::read(&json).unwrap_err().to_string().contains("does not agree"));
    let axes = wall.inputs().stress.axes();
    let stress = Stress::<Borehole>::of(wrong, crate::stress::Made::Combined { parts: None }, Some((far, axes)));
    let wrong = Wall::new(WallInputs { stress, ..wall.inputs() }).unwrap();
    assert!(!wrong.limits().card().passed());
    assert!(!wrong.around(31.mpa()).unwrap().card().passed());
    assert!(!wrong.stress_at(31.mpa(), 77.deg()).unwrap().card().passed());
    assert!(!wrong.failing_arcs(31.mpa()).unwrap().card().passed());
    assert!(!wrong.recommended(choices(30.0)).unwrap().card().passed());
}

#[test]
fn what_a_wall_is_made_of_is_all_that_a_card_takes_in() {
    let wall = state_b(35.0, 70.0, coulomb());
    let card = wall.limits().card();
    let symbols: Vec<_> = card.explanation.inputs.iter().map(|i| i.symbol.as_str()).collect();
    assert_eq!(symbols, ["S'", "P_p", "ν", "T_0", "c", "φ", "w"]);
    let upstream = wall.limits().upstream();
    let carried = upstream.last().unwrap();
    assert!(carried.explanation.results[0].same_value(&card.explanation.inputs[0]));
}

#[test]
fn recommended_ranges_say_what_governs() {
    let range = state_b(35.0, 70.0, coulomb()).recommended(choices(30.0)).unwrap();
    assert_eq!(range.top.unwrap().governed_by, Governs::LeastStress);
    assert!((range.top.unwrap().pressure.in_mpa() - 39.0).abs() < 1e-9);
    assert_eq!(range.bottom.unwrap().governed_by, Governs::LowerShear);
    assert!(!range.is_empty());
    let bottom = range.bottom.unwrap();
    assert!((bottom.mud_weight.column(2950.m()) - bottom.pressure).abs() < 1e-6.pa());

    let strong = Strength::mohr_coulomb_ucs(150.mpa(), 30.deg());
    let range = state_b(35.0, 70.0, strong).recommended(choices(30.0)).unwrap();
    assert_eq!(range.bottom.unwrap().governed_by, Governs::PorePressure);
    assert!((range.bottom.unwrap().pressure.in_mpa() - 21.5).abs() < 1e-12);

    let weak = Strength::mohr_coulomb(4.mpa(), 25.deg());
    let range = state_b(35.0, 70.0, weak).recommended(choices(0.0)).unwrap();
    assert!(range.is_empty());
    assert!(range.card().explanation.headline.starts_with("no range"), "{}", range.card().explanation.headline);
}

/// A hole whose far side would be pushed out before the near one stops closing in: no pressure keeps
/// all of it sound, and the allowed width makes a range all the same.
#[test]
fn crossed_limits_leave_a_range_only_with_a_width() {
    let wall = state_b(0.0, 0.0, Strength::mohr_coulomb(3.mpa(), 30.deg()));
    let limits = wall.limits();
    let (lower, upper) = (limits.lower_shear.own_side().unwrap(), limits.upper_shear.own_side().unwrap());
    assert!(limits.lower_shear.pressure().is_none() && lower > upper);
    assert!(wall.recommended(choices(0.0)).unwrap().is_empty());
    let range = wall.recommended(choices(90.0)).unwrap();
    assert!(range.card().passed(), "{:#?}", range.card().checks);
    let (bottom, top) = (range.bottom.unwrap(), range.top.unwrap());
    assert!(!range.is_empty(), "{bottom:?} {top:?}");
    assert_eq!(top.governed_by, Governs::UpperShear);
    for k in 0..=10 {
        let p = bottom.pressure + (top.pressure - bottom.pressure) * (0.1 * f64::from(k));
        assert!(wall.breakout(p).unwrap().unwrap().width.in_deg() <= 90.0 + 1e-6);
    }
}

#[test]
fn bad_input_is_refused_by_name() {
    let wall = state_b(35.0, 70.0, coulomb());
    let inputs = wall.inputs();
    let message = |w: WallInputs| Wall::new(w).unwrap_err().to_string();
    assert!(message(WallInputs { pore: f64::NAN.mpa(), ..inputs }).starts_with("pore pressure is NaN"));
    let bad = Rock { poisson: 0.51, ..inputs.rock };
    assert_eq!(
        message(WallInputs { rock: bad, ..inputs }),
        "Poisson's ratio is 0.51, but it must be between 0 and 0.5."
    );
    let text = |r: crate::error::Result<Limits>| r.unwrap_err().to_string();
    assert_eq!(
        text(wall.limits_at_width(181.deg())),
        "allowed width of a failing arc is 181°, but it must be between 0° and 180°."
    );
    assert!(wall.limits_at_width((-1).deg()).is_err() && wall.limits_at_width(f64::NAN.deg()).is_err());
    assert!(wall.stress_at(f64::INFINITY.mpa(), 0.deg()).is_err());
    assert!(wall.stress_at(30.mpa(), f64::NAN.deg()).is_err());
    assert!(wall.around(f64::NAN.mpa()).is_err() && wall.breakout(f64::NAN.mpa()).is_err());
    let refused = |c: RangeChoices| wall.recommended(c).unwrap_err().to_string();
    assert!(
        refused(RangeChoices { margin_bottom: (-1).mpa(), ..choices(0.0) })
            .starts_with("margin at the bottom is -1 MPa")
    );
    assert!(refused(RangeChoices { margin_top: f64::NAN.mpa(), ..choices(0.0) }).starts_with("margin at the top"));
    assert_eq!(
        refused(RangeChoices { tvd_below_rotary: 0.m(), ..choices(0.0) }),
        "true vertical depth below the rotary table is 0 m, but it must be more than 0 m."
    );
    assert!(refused(RangeChoices { allowed_width: 200.deg(), ..choices(0.0) }).starts_with("allowed width"));
}

#[test]
fn all_widths_up_to_the_whole_wall() {
    let wall = state_b(0.0, 0.0, coulomb());
    let at = |w: f64| wall.limits_at_width(w.deg()).unwrap().lower_shear.pressure().unwrap();
    let mut last = at(0.0);
    for k in 1..=36 {
        let now = at(f64::from(k) * 5.0);
        assert!(now < last, "{k}");
        last = now;
    }
    // At 180° the last place of the wall just fails.
    assert!(wall.failing_arcs(at(180.0) - 1.pa()).unwrap().whole_wall());
    assert!(!wall.failing_arcs(at(180.0) + 1.pa()).unwrap().whole_wall());
}

/// The first place that holds, as the pressure rises, may lie between those that the search looks at.
#[test]
fn a_narrow_gap_lets_a_closed_wall_keep_to_a_width() {
    let s = [25_920_465.5, 52_230_207.6, 76_089_693.7, -3_977_155.5, -747_796.0, -1_754_970.2].map(|pa| pa * 1e-6);
    let rock = Rock { tensile_strength: 0.mpa(), ..rock(Strength::mohr_coulomb(21.660_598.mpa(), 0.deg())) };
    let [nn, ee, dd, ne, ed, nd] = s;
    let stress = components([nn, ee, dd, ne, ed, nd], 0.0, 0.0);
    let wall = Wall::new(WallInputs { stress, pore: 19.448_383.mpa(), rock }).unwrap();
    let limits = wall.limits_at_width(157.864.deg()).unwrap();
    assert!(limits.upper_shear.pressure().is_none(), "no pressure keeps the whole wall");
    assert!(limits.card().passed(), "{:#?}", limits.card().checks);
}

fn any_wall() -> impl Strategy<Value = Wall> {
    let stress = (20.0..80.0_f64, 20.0..80.0_f64, 20.0..80.0_f64, -6.0..6.0_f64, -6.0..6.0_f64, -6.0..6.0_f64);
    let at = (0.0..180.0_f64, 0.0..360.0_f64, 5.0..25.0_f64);
    let rock = (0.0..0.5_f64, 0.0..8.0_f64, 2.0..40.0_f64, 0.0..50.0_f64);
    (stress, at, rock).prop_map(|((nn, ee, dd, ne, ed, nd), (i, a, pore), (poisson, tensile, c, phi))| {
        let strength = Strength::mohr_coulomb(c.mpa(), phi.deg());
        let rock = Rock { poisson, tensile_strength: tensile.mpa(), strength };
        Wall::new(WallInputs { stress: components([nn, ee, dd, ne, ed, nd], i, a), pore: pore.mpa(), rock }).unwrap()
    })
}

proptest! {
    #![proptest_config(ProptestConfig::with_cases(48))]

    #[test]
    fn every_wall_passes_its_own_checks(wall in any_wall(), width in 1.0..170.0_f64, pressure in 0.0..70.0_f64) {
        for card in [
            wall.limits().card(),
            wall.limits_at_width(width.deg()).unwrap().card(),
            wall.failing_arcs(pressure.mpa()).unwrap().card(),
            wall.recommended(choices(width)).unwrap().card(),
        ] {
            let failed: Vec<_> = card.checks.iter().filter(|c| !c.passed).collect();
            prop_assert!(card.passed(), "{}: {failed:#?}", card.title());
        }
    }
}

proptest! {
    #[test]
    fn limits_stay_when_hole_and_stress_turn_together(
        s in (20.0..80.0_f64, 20.0..80.0_f64, 20.0..80.0_f64, -6.0..6.0_f64, -6.0..6.0_f64, -6.0..6.0_f64),
        i in 0.0..180.0_f64, a in 0.0..360.0_f64, turn in 0.0..360.0_f64,
    ) {
        let six = [s.0, s.1, s.2, s.3, s.4, s.5];
        let [nn, ee, dd, ne, ed, nd] = six;
        let (sin, cos) = turn.to_radians().sin_cos();
        let turned = crate::stress::tensor::Tensor([nn, ee, dd, ne, ed, nd])
            .turned(&[[cos, -sin, 0.0], [sin, cos, 0.0], [0.0, 0.0, 1.0]]);
        let wall = |six, a| Wall::new(WallInputs { stress: components(six, i, a), pore: 15.mpa(), rock: rock(coulomb()) }).unwrap();
        let (one, two) = (wall(six, a).limits(), wall(turned.0, (a + turn).rem_euclid(360.0)).limits());
        for (one, two) in one.all().iter().zip(two.all()) {
            match (one.pressure(), two.pressure()) {
                (Some(one), Some(two)) => prop_assert!((one - two).abs() < 1e-3.pa(), "{one:?} {two:?}"),
                (one, two) => prop_assert_eq!(one.is_some(), two.is_some()),
            }
        }
    }

    #[test]
    fn stresses_repeat_on_the_far_side_but_for_the_sign_of_the_shear(wall in any_wall(), theta in 0.0..180.0_f64) {
        let at = |t: f64| wall.stress_at(30.mpa(), t.deg()).unwrap();
        let (near, far) = (at(theta), at(theta + 180.0));
        let small = 1e-6.pa();
        prop_assert!((near.hoop - far.hoop).abs() < small && (near.axial - far.axial).abs() < small);
        prop_assert!((near.shear + far.shear).abs() < small);
        for (a, b) in near.effective.principal().into_iter().zip(far.effective.principal()) {
            prop_assert!((a - b).abs() < small);
        }
    }

    #[test]
    fn a_stronger_rock_holds_from_a_lower_pressure(wall in any_wall(), c in 2.0..30.0_f64, more in 0.1..10.0_f64) {
        let with = |c: f64| {
            let strength = Strength::mohr_coulomb(c.mpa(), 30.deg());
            let inputs = WallInputs { rock: Rock { strength, ..wall.inputs().rock }, ..wall.inputs() };
            Wall::new(inputs).unwrap().lower_shear_limit()
        };
        match (with(c), with(c + more)) {
            (Some(weak), Some(strong)) => prop_assert!(strong < weak),
            (Some(_), None) => prop_assert!(false, "the stronger rock has no limit"),
            _ => {}
        }
    }

    #[test]
    fn arcs_only_grow_as_the_pressure_falls_below_the_lower_limit(wall in any_wall()) {
        let Some(limit) = wall.lower_shear_limit() else { return Ok(()) };
        let width = |p: Pressure| match wall.breakout(p).unwrap() {
            Some(arc) => arc.width,
            None => Angle::default(),
        };
        let mut last = width(limit + 1.pa());
        prop_assert_eq!(last, Angle::default());
        for k in 1..40 {
            let now = width(limit - (0.5 * f64::from(k)).mpa());
            prop_assert!(now.si() >= last.si() - 1e-9);
            last = now;
        }
    }
}
