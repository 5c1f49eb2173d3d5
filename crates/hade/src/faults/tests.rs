//! Faults where they go wrong, and laws that hold for any stress and any plane.

use proptest::prelude::*;

use super::critical::plane_across;
use super::*;
use crate::card::Explain;
use crate::frames::vector::{M3, V3, cross, dot, norm, scale};
use crate::frames::{Azimuth, Geographic, Plane};
use crate::stress::tensor::Tensor;
use crate::stress::{Components, Horizontals, Stress};
use crate::units::{Pressure, Quantity, Units};

fn plane(strike: f64, dip: f64) -> Plane {
    Plane { strike: Azimuth::from_true_north(strike.deg()), dip: dip.deg() }
}

fn horizontals(sv: f64, sh_max: f64, sh_min: f64, azimuth: f64) -> Stress {
    Stress::from_horizontals(Horizontals {
        sv: sv.mpa(),
        sh_max: sh_max.mpa(),
        sh_min: sh_min.mpa(),
        sh_max_azimuth: Azimuth::from_true_north(azimuth.deg()),
    })
    .unwrap()
}

fn strength(friction: f64, cohesion: f64) -> FaultStrength {
    FaultStrength { friction, cohesion: cohesion.mpa() }
}

/// The hanging wall follows the shear part of S n with n DOWN. A normal fault that dips 60°
/// has rake −90°, not +90°.
#[test]
fn rake_is_that_of_the_hanging_wall_with_the_normal_down() {
    // S_Hmax along strike, S_hmin across: a normal fault slips down dip.
    let normal = horizontals(60.0, 50.0, 35.0, 20.0);
    let slip = normal.slip_on(plane(20.0, 60.0), strength(0.6, 0.0), 20.mpa()).unwrap();
    assert!((slip.rake().unwrap().in_deg() + 90.0).abs() < 1e-9, "{:?}", slip.rake());
    // The conjugate plane too.
    let other = normal.slip_on(plane(200.0, 60.0), strength(0.6, 0.0), 20.mpa()).unwrap();
    assert!((other.rake().unwrap().in_deg() + 90.0).abs() < 1e-9);
    // A reverse fault slips up dip.
    let reverse = horizontals(30.0, 60.0, 40.0, 110.0);
    let up = reverse.slip_on(plane(20.0, 30.0), strength(0.6, 0.0), 10.mpa()).unwrap();
    assert!((up.rake().unwrap().in_deg() - 90.0).abs() < 1e-9);
    // Upright faults, S_Hmax anticlockwise of the strike: seen across it, the other side moves to the
    // left; the block below the dip's side moves along the strike.
    for (strike, sh_max) in [(0.0, 150.0), (60.0, 30.0), (0.0, 149.999_999), (123.0, 93.0)] {
        let left = horizontals(50.0, 60.0, 35.0, sh_max).slip_on(plane(strike, 90.0), strength(0.6, 0.0), 20.mpa());
        assert!(left.unwrap().rake().unwrap().in_deg().abs() < 1e-7, "{strike} {sh_max}");
    }
    // Clockwise of it: to the right, 180° whatever the sign of a rounding.
    for (strike, sh_max) in [(0.0, 30.0), (30.0, 60.0), (0.0, 29.999_999), (93.0, 123.0), (215.0, 65.0)] {
        let right = horizontals(50.0, 60.0, 35.0, sh_max).slip_on(plane(strike, 90.0), strength(0.6, 0.0), 20.mpa());
        assert!((right.unwrap().rake().unwrap().in_deg() - 180.0).abs() < 1e-7, "{strike} {sh_max}");
    }
}

/// P_c = σ_n − (τ − C)/μ. With τ < C it passes the normal stress: then the fault opens
/// first; the number is capped and flagged, not turned round.
#[test]
fn cohesion_above_the_shear_stress_means_that_the_fault_opens_first() {
    let s = horizontals(60.0, 55.0, 40.0, 30.0);
    let of = |c: f64| s.slip_on(plane(30.0, 60.0), strength(0.6, c), 20.mpa()).unwrap();
    let (none, some, much) = (of(0.0), of(3.0), of(15.0));
    let (sigma, tau) = (none.normal().in_mpa(), none.shear().in_mpa());
    assert!((sigma - 45.0).abs() < 1e-9 && (tau - 75.0_f64.sqrt()).abs() < 1e-9);
    assert!((none.critical_pore().in_mpa() - (sigma - tau / 0.6)).abs() < 1e-9);
    assert!((some.critical_pore().in_mpa() - (sigma - (tau - 3.0) / 0.6)).abs() < 1e-9);
    assert!(!none.opens_first() && !some.opens_first());
    assert!(much.opens_first() && much.critical_pore() == much.normal());
    assert!((much.frictional_pore().in_mpa() - (sigma + (15.0 - tau) / 0.6)).abs() < 1e-9);
    assert!((much.margin().in_mpa() - 25.0).abs() < 1e-9);
    let card = much.card();
    assert!(card.passed() && card.explanation.notes.iter().any(|n| n.starts_with("Opens first")));
    assert!(card.explanation.headline.contains("it holds, and opens at a pore pressure of 45.00 MPa, 25.00 MPa above"));
}

/// Pore pressure above the normal stress: an open fault is a value with a note.
#[test]
fn an_open_fault_is_a_value_without_a_slip_tendency() {
    let s = horizontals(60.0, 55.0, 40.0, 30.0);
    for pore in [40.0, 40.5, 70.0] {
        let slip = s.slip_on(plane(30.0, 90.0), strength(0.6, 2.0), pore.mpa()).unwrap();
        assert_eq!((slip.state(), slip.slip_tendency()), (FaultState::Open, None), "{pore}");
        assert!(slip.margin().in_mpa() <= 1e-9);
        let card = slip.card();
        assert!(card.passed(), "{:#?}", card.checks);
        assert!(card.explanation.notes[0].contains("It is open"), "{:?}", card.explanation.notes);
    }
    let pressed = s.slip_on(plane(30.0, 90.0), strength(0.6, 2.0), 39.9.mpa()).unwrap();
    assert!(pressed.slip_tendency().is_some());
}

#[test]
fn a_slipping_fault_says_so() {
    let s = horizontals(60.0, 55.0, 30.0, 30.0);
    let slip = s.slip_on(plane(30.0, 60.0), strength(0.6, 0.0), 20.mpa()).unwrap();
    assert_eq!(slip.state(), FaultState::Slips);
    assert!(slip.coulomb() > 0.mpa() && slip.margin() < 0.mpa());
    assert!(slip.card().explanation.notes[0].starts_with("WARNING: the shear stress exceeds the strength by"));
    assert!(slip.card().explanation.headline.contains("it SLIPS; it would hold below"));
}

#[test]
fn equal_principal_stresses_have_no_dilation_tendency_and_no_rake() {
    let s = horizontals(40.0, 40.0, 40.0, 30.0);
    let slip = s.slip_on(plane(17.0, 33.0), strength(0.6, 0.0), 10.mpa()).unwrap();
    assert_eq!((slip.dilation_tendency(), slip.rake()), (None, None));
    assert!(slip.shear().in_mpa().abs() < 1e-12 && slip.card().passed());
    let planes = s.critical_planes(strength(0.6, 1.0), 10.mpa()).unwrap();
    assert!(planes.planes().is_none() && planes.card().passed());
    assert!((planes.coulomb().in_mpa() + 1.0 + 0.6 * 30.0).abs() < 1e-12);
}

#[test]
fn what_is_not_a_strength_a_plane_or_a_pressure_is_refused() {
    let s = horizontals(60.0, 55.0, 40.0, 30.0);
    let said = |p: Plane, k: FaultStrength, pore: f64| s.slip_on(p, k, pore.mpa()).unwrap_err().to_string();
    assert!(said(plane(1.0, 95.0), strength(0.6, 0.0), 20.0).contains("dip is 95°"));
    assert!(said(plane(1.0, 60.0), strength(0.0, 0.0), 20.0).contains("a number greater than zero"));
    assert!(said(plane(1.0, 60.0), strength(0.6, -1.0), 20.0).contains("cohesion of the fault is -1 MPa"));
    assert!(said(plane(1.0, 60.0), strength(0.6, 0.0), f64::NAN).contains("pore pressure is NaN"));
    assert!(said(plane(1.0, 60.0), strength(1e-320, 0.0), 20.0).contains("check their units"));
    let grid = Plane { strike: Azimuth::from_grid_north(30.deg()), dip: 60.deg() };
    assert!(said(grid, strength(0.6, 0.0), 20.0).contains("with_convergence"));
    assert!(s.critical_planes(strength(-0.6, 0.0), 20.mpa()).is_err());
}

/// An effective stress of zero or less in the denominator is inadmissible, not a negative
/// ratio that passes for small.
#[test]
fn a_negative_effective_stress_never_passes_the_frictional_limit() {
    // (72 − 40.4) / (27.7 − 40.4) = −2.5 is smaller than 2.29 and yet no stress of rock.
    assert!(horizontals(72.0, 74.4, 27.7, 0.0).frictional_limit(40.4.mpa(), 0.4273).is_err());
    assert!(horizontals(72.0, 74.4, 40.4, 0.0).frictional_limit(40.4.mpa(), 0.4273).is_err());
    let said = FrictionalBounds::at(BoundsInputs { sv: 30.mpa(), pore: 31.mpa(), friction: 0.6 }).unwrap_err();
    assert!(said.to_string().starts_with("The vertical stress 30 MPa does not exceed the pore pressure 31 MPa"));
    let bounds = FrictionalBounds::at(BoundsInputs { sv: 60.mpa(), pore: 25.mpa(), friction: 0.6 }).unwrap();
    assert!(!bounds.allow(50.mpa(), 20.mpa()).unwrap());
}

#[test]
fn the_polygon_agrees_with_the_limit_of_one_stress() {
    let (sv, pore, mu) = (66.9, 31.0, 0.6);
    let bounds = FrictionalBounds::at(BoundsInputs { sv: sv.mpa(), pore: pore.mpa(), friction: mu }).unwrap();
    for sh_min in [35.0, 42.0, 42.51, 43.0, 50.0, 66.0, 67.0, 90.0, 140.0] {
        for sh_max in [42.6, 45.0, 60.0, 66.0, 68.0, 80.0, 120.0, 142.9, 143.1, 150.0] {
            if sh_max < sh_min {
                assert!(bounds.allow(sh_max.mpa(), sh_min.mpa()).is_err());
                continue;
            }
            let one = horizontals(sv, sh_max, sh_min, 0.0).frictional_limit(pore.mpa(), mu).unwrap();
            assert_eq!(bounds.allow(sh_max.mpa(), sh_min.mpa()).unwrap(), one.is_within(), "{sh_min} {sh_max}");
        }
    }
    let mpa = |p: (Pressure, Pressure)| [p.0.in_mpa(), p.1.in_mpa()];
    let [_, low, high, _] = bounds.corners().map(mpa);
    assert!((low[1] - sv).abs() < 1e-12 && (high[0] - sv).abs() < 1e-12);
}

/// At the frictional limit the critical planes are also those of the largest slip tendency, μ.
#[test]
fn at_the_limit_the_critical_planes_slip_and_mobilise_just_the_friction() {
    let ratio = frictional_ratio(0.6).unwrap();
    let s = horizontals(20.0 + 10.0 * ratio, 40.0, 30.0, 35.0);
    let planes = s.critical_planes(strength(0.6, 0.0), 20.mpa()).unwrap();
    assert!(planes.coulomb().in_mpa().abs() < 1e-9);
    assert!((planes.largest_slip_tendency().unwrap() - 0.6).abs() < 1e-12);
    let [a, b] = planes.planes().unwrap();
    let degrees = |p: Plane| (p.strike.true_north().unwrap().in_deg(), p.dip.in_deg());
    let dip = 45.0 + 0.5 * 0.6_f64.atan().to_degrees();
    for (got, strike) in [(degrees(a), 35.0), (degrees(b), 215.0)] {
        assert!((got.0 - strike).abs() < 1e-9 && (got.1 - dip).abs() < 1e-9, "{got:?}");
    }
    for p in [a, b] {
        let slip = s.slip_on(p, strength(0.6, 0.0), 20.mpa()).unwrap();
        assert!((slip.slip_tendency().unwrap() - 0.6).abs() < 1e-9);
        assert!((slip.critical_pore() - planes.least_critical_pore()).in_mpa().abs() < 1e-9);
    }
}

#[test]
fn two_equal_principal_stresses_leave_no_two_planes_and_say_so() {
    for (s, word) in
        [(horizontals(50.0, 50.0, 40.0, 35.0), "S_1 = S_2"), (horizontals(60.0, 40.0, 40.0, 35.0), "S_2 = S_3")]
    {
        let planes = s.critical_planes(strength(0.6, 0.0), 20.mpa()).unwrap();
        assert!(planes.planes().is_none());
        let card = planes.card();
        assert!(card.passed(), "{:#?}", card.checks);
        assert!(card.explanation.notes[0].starts_with(word));
    }
    // Strike-slip faults stand upright; each is given by its strike below 180°.
    let upright = horizontals(50.0, 60.0, 40.0, 35.0).critical_planes(strength(0.6, 0.0), 20.mpa()).unwrap();
    let away = 45.0 - 0.5 * 0.6_f64.atan().to_degrees();
    let [a, b] = upright.planes().unwrap().map(|p| (p.strike.true_north().unwrap().in_deg(), p.dip.in_deg()));
    assert!((a.0 - (35.0 - away)).abs() < 1e-9 && (b.0 - (35.0 + away)).abs() < 1e-9, "{a:?} {b:?}");
    assert!((a.1 - 90.0).abs() < 1e-9 && (b.1 - 90.0).abs() < 1e-9);
}

/// S_3 below the pore pressure: planes across it are open and the card stands.
#[test]
fn critical_planes_of_a_stress_that_is_open_somewhere() {
    let s = horizontals(60.0, 55.0, 18.0, 30.0);
    let planes = s.critical_planes(strength(0.6, 40.0), 20.mpa()).unwrap();
    assert_eq!(planes.largest_slip_tendency(), None);
    assert!((planes.least_critical_pore().in_mpa() - 18.0).abs() < 1e-9);
    let card = planes.card();
    assert!(card.passed(), "{:#?}", card.checks);
    assert!(card.explanation.notes.iter().any(|n| n.contains("open before any plane slips")));
}

fn cases() -> ProptestConfig {
    ProptestConfig::with_cases(if cfg!(debug_assertions) { 2_000 } else { 100_000 })
}

fn any_stress() -> impl Strategy<Value = Stress> {
    let component = -30.0..80.0_f64;
    let shear = -15.0..15.0_f64;
    ([component.clone(), component.clone(), component], [shear.clone(), shear.clone(), shear]).prop_map(
        |([nn, ee, dd], [ne, nd, ed])| {
            Stress::from_components(Components {
                nn: nn.mpa(),
                ee: ee.mpa(),
                dd: dd.mpa(),
                ne: ne.mpa(),
                nd: nd.mpa(),
                ed: ed.mpa(),
            })
            .unwrap()
        },
    )
}

fn any_plane() -> impl Strategy<Value = Plane> {
    (0.0..360.0_f64, 0.0..=90.0_f64).prop_map(|(strike, dip)| plane(strike, dip))
}

fn any_strength() -> impl Strategy<Value = FaultStrength> {
    (0.05..1.5_f64, prop_oneof![Just(0.0), 0.0..30.0_f64]).prop_map(|(mu, c)| strength(mu, c))
}

/// A turn by a quaternion.
fn any_turn() -> impl Strategy<Value = M3> {
    [-1.0..1.0_f64, -1.0..1.0, -1.0..1.0, -1.0..1.0].prop_filter_map("no direction", |q: [f64; 4]| {
        let length = q.iter().map(|c| c * c).sum::<f64>().sqrt();
        let [w, x, y, z] = q.map(|c| c / length);
        let rows = [
            [1.0 - 2.0 * (y * y + z * z), 2.0 * (x * y - z * w), 2.0 * (x * z + y * w)],
            [2.0 * (x * y + z * w), 1.0 - 2.0 * (x * x + z * z), 2.0 * (y * z - x * w)],
            [2.0 * (x * z - y * w), 2.0 * (y * z + x * w), 1.0 - 2.0 * (x * x + y * y)],
        ];
        (length > 0.1).then_some(rows)
    })
}

fn turn(q: &M3, v: V3) -> V3 {
    q.map(|row| dot(row, v))
}

fn turned(s: &Stress, q: &M3) -> Stress {
    let Tensor([nn, ee, dd, ne, ed, nd]) = s.tensor().turned(q);
    let [nn, ee, dd, ne, ed, nd] = [nn, ee, dd, ne, ed, nd].map(Pressure::from_si);
    Stress::<Geographic>::from_components(Components { nn, ee, dd, ne, nd, ed }).unwrap()
}

/// The slip direction of the hanging wall in north, east, down, for a normal that points down.
fn slip_vector(plane: Plane, rake: f64) -> V3 {
    let axes = plane.axes().unwrap();
    let (along, down) = (scale(axes.along_strike, rake.cos()), scale(axes.down_dip, -rake.sin()));
    [along[0] + down[0], along[1] + down[1], along[2] + down[2]]
}

proptest! {
    #![proptest_config(cases())]

    /// A fault does not know where north and down are: stress and plane turned together.
    #[test]
    fn slip_is_the_same_when_stress_and_plane_turn_together(
        s in any_stress(), p in any_plane(), k in any_strength(), pore in -5.0..40.0_f64, q in any_turn(),
    ) {
        let before = s.slip_on(p, k, pore.mpa()).unwrap();
        let normal = turn(&q, p.axes().unwrap().normal);
        let there = plane_across(normal);
        let after = turned(&s, &q).slip_on(there, k, pore.mpa()).unwrap();
        let size = s.tensor().largest() * 1e-6 + 40.0;
        let close = |a: Pressure, b: Pressure, factor: f64| (a - b).in_mpa().abs() <= 1e-12 * size * factor;
        prop_assert!(close(before.normal(), after.normal(), 1.0));
        prop_assert!(close(before.shear(), after.shear(), 1.0));
        prop_assert!(close(before.coulomb(), after.coulomb(), 10.0));
        prop_assert!(close(before.frictional_pore(), after.frictional_pore(), 100.0));
        prop_assert!(close(before.critical_pore(), after.critical_pore(), 100.0));
        if before.effective_normal() > 1.mpa() {
            let (a, b) = (before.slip_tendency().unwrap(), after.slip_tendency().unwrap());
            prop_assert!((a - b).abs() <= 1e-12 * size * (1.0 + a), "{} {}", a, b);
        }
        if let (Some(a), Some(b)) = (before.dilation_tendency(), after.dilation_tendency()) {
            let [s1, _, s3] = s.principals().magnitudes();
            prop_assert!((a - b).abs() <= 1e-12 * size / (s1 - s3).in_mpa());
        }
        // The two blocks move the same way past each other; where the turn put the footwall above,
        // it is the other block that is called the hanging wall.
        if let (Some(a), Some(b)) = (before.rake(), after.rake())
            && before.shear() > 0.1.mpa()
        {
            let there_normal = there.axes().unwrap().normal;
            let side = dot(there_normal, normal).signum();
            let moved = scale(turn(&q, slip_vector(p, a.si())), side);
            let gap = norm(cross(moved, slip_vector(there, b.si())));
            prop_assert!(gap < 1e-9 && dot(moved, slip_vector(there, b.si())) > 0.0, "{}", gap);
        }
    }

    /// At the critical pore pressure the fault stands at its limit: no Coulomb stress is left, or
    /// no effective normal stress.
    #[test]
    fn at_the_critical_pore_pressure_the_coulomb_stress_is_zero(
        s in any_stress(), p in any_plane(), k in any_strength(), pore in -5.0..40.0_f64,
    ) {
        let before = s.slip_on(p, k, pore.mpa()).unwrap();
        let size = s.tensor().largest() * 1e-6 + before.frictional_pore().in_mpa().abs();
        let there = s.slip_on(p, k, before.frictional_pore()).unwrap();
        prop_assert!(there.coulomb().in_mpa().abs() <= 1e-13 * size * (1.0 + k.friction));
        let first = s.slip_on(p, k, before.critical_pore()).unwrap();
        prop_assert!(first.margin().in_mpa().abs() <= 1e-13 * size);
        if before.opens_first() {
            prop_assert_eq!(first.effective_normal(), 0.pa());
            prop_assert_eq!(first.state(), FaultState::Open);
        } else {
            prop_assert!(first.effective_normal().in_mpa() >= -1e-13 * size);
        }
        // Below it the fault holds, above it it does not.
        prop_assert_eq!(s.slip_on(p, k, before.critical_pore() - 1.kpa()).unwrap().state(), FaultState::Holds);
        prop_assert!(s.slip_on(p, k, before.critical_pore() + 1.kpa()).unwrap().state() != FaultState::Holds);
        prop_assert_eq!(before.state() == FaultState::Holds, before.margin() > 0.pa());
    }

    #[test]
    fn dilation_tendency_is_between_zero_and_one(s in any_stress(), p in any_plane()) {
        let slip = s.slip_on(p, strength(0.6, 0.0), 10.mpa()).unwrap();
        let [s1, _, s3] = s.principals().magnitudes();
        let rounding = 1e-13 * s.tensor().largest() * 1e-6 / (s1 - s3).in_mpa();
        let tendency = slip.dilation_tendency().unwrap();
        prop_assert!(tendency >= -rounding && tendency <= 1.0 + rounding, "{}", tendency);
    }

    /// No plane is nearer to slip than the critical ones, and none has a larger slip tendency.
    #[test]
    fn no_plane_passes_the_critical_ones(
        s in any_stress(), p in any_plane(), k in any_strength(), pore in -5.0..40.0_f64,
    ) {
        let critical = s.critical_planes(k, pore.mpa()).unwrap();
        let any = s.slip_on(p, k, pore.mpa()).unwrap();
        let size = s.tensor().largest() + 40e6;
        prop_assert!((any.coulomb() - critical.coulomb()).si() <= 1e-12 * size * 3.0);
        prop_assert!((critical.least_critical_pore() - any.critical_pore()).si() <= 1e-12 * size / k.friction * 3.0);
        if let (Some(a), Some(most)) = (any.slip_tendency(), critical.largest_slip_tendency()) {
            let s3 = (s.principals().magnitudes()[2] - pore.mpa()).si();
            prop_assert!(a - most <= 1e-12 * (1.0 + most) * (1.0 + size / s3), "{} {}", a, most);
        }
        for plane in critical.planes().into_iter().flatten() {
            let there = s.slip_on(plane, k, pore.mpa()).unwrap();
            prop_assert!((there.coulomb() - critical.coulomb()).si().abs() <= 1e-11 * size);
        }
    }
}

proptest! {
    #![proptest_config(ProptestConfig::with_cases(if cfg!(debug_assertions) { 300 } else { 5_000 }))]

    /// The second route agrees for any stress, plane and pore pressure.
    #[test]
    fn every_card_passes_its_checks(
        s in any_stress(), p in any_plane(), k in any_strength(), pore in -5.0..90.0_f64,
    ) {
        let slip = s.slip_on(p, k, pore.mpa()).unwrap();
        let red: Vec<_> = FaultSlip::check(&slip.inputs(), &slip.outcome()).into_iter().filter(|c| !c.passed).collect();
        prop_assert!(red.is_empty(), "{:?}", red);
        let planes = s.critical_planes(k, pore.mpa()).unwrap();
        let red: Vec<_> =
            CriticalPlanes::check(&planes.inputs(), &planes.outcome()).into_iter().filter(|c| !c.passed).collect();
        prop_assert!(red.is_empty(), "{:?}", red);
        let bounds = BoundsInputs { sv: (pore + 20.0).mpa(), pore: pore.mpa(), friction: k.friction };
        let bounds = FrictionalBounds::at(bounds).unwrap();
        prop_assert!(bounds.card().passed());
    }
}
