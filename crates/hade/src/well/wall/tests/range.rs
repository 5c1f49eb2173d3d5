//! Recommended ranges raised, held and beside others: against closed forms by hand, and with bad input.
#![cfg(test)]

use super::*;
use crate::card::{Card, Data, Explain};
use crate::frames::{Attitude, Azimuth};
use crate::rock::{HoekBrown, Rock, Strength};
use crate::stress::{Horizontals, Stress};
use crate::units::{Pressure, Units};

/// State B of the house's cases: Sv 60, SHmax 55 at 030°, Shmin 40, Pp 20, ν 0.25, c 10, φ 30°, so UCS
/// 34.641 and q = 3; T₀ 2.
#[derive(Clone, Copy)]
pub(super) struct B {
    pub stress: Horizontals,
    pub i: f64,
    pub a: f64,
    pub pore: Pressure,
    pub rock: Rock,
}

pub(super) fn b(i: f64, a: f64) -> B {
    B {
        stress: Horizontals {
            sv: 60.mpa(),
            sh_max: 55.mpa(),
            sh_min: 40.mpa(),
            sh_max_azimuth: Azimuth::from_true_north(30.deg()),
        },
        i,
        a,
        pore: 20.mpa(),
        rock: Rock { poisson: 0.25, tensile_strength: 2.mpa(), strength: Strength::mohr_coulomb(10.mpa(), 30.deg()) },
    }
}

impl B {
    pub fn wall(&self) -> Wall {
        let s = Stress::from_horizontals(self.stress).unwrap();
        let hole = Attitude { inclination: self.i.deg(), azimuth: Azimuth::from_true_north(self.a.deg()) };
        let stress = hole.named("B").chain().unwrap().carry(&s);
        Wall::new(WallInputs { stress, pore: self.pore, rock: self.rock }).unwrap()
    }
}

pub(super) fn near(got: Pressure, expected: f64) {
    assert!((got.in_mpa() - expected).abs() < 1e-8, "{} is not {expected}", got.in_mpa());
}

pub(super) fn passes<E: Explain>(result: &E) -> Card {
    let card = result.card();
    let failed: Vec<_> = card.checks.iter().filter(|c| !c.passed).collect();
    assert!(card.passed(), "{}: {failed:#?}", card.title());
    let again = E::compute(E::Inputs::read(&card.inputs).unwrap()).unwrap().card();
    assert_eq!(again, card);
    card
}

/// By hand, vertical hole: the lower limit is (3 SHmax − Shmin − UCS + (q − 1) Pp) / (1 + q) =
/// (165 − 40 − 34.641 + 40) / 4 = 32.590, initiation 3 Shmin − SHmax − Pp + T₀ = 47, S3 = 40.
#[test]
fn the_ends_of_a_vertical_hole_by_hand() {
    let range = b(0.0, 0.0).wall().recommended(choices(0.0)).unwrap();
    near(range.bottom.unwrap().pressure, (165.0 - 40.0 - 20.0 * 3_f64.sqrt() + 40.0) / 4.0);
    near(range.top.unwrap().pressure, 39.0);
    near(range.limits().initiation.pressure().unwrap(), 47.0);
    assert_eq!(range.bottom.unwrap().governed_by, Governs::LowerShear);
    assert_eq!(range.top.unwrap().governed_by, Governs::LeastStress);
}

#[test]
fn trap_34_strong_rock_is_limited_by_the_pore_pressure_and_its_limit_is_not_clamped() {
    let mut strong = b(35.0, 70.0);
    strong.rock.strength = Strength::mohr_coulomb_ucs(150.mpa(), 30.deg());
    let range = strong.wall().recommended(choices(30.0)).unwrap();
    let bottom = range.bottom.unwrap();
    assert_eq!(bottom.governed_by, Governs::PorePressure);
    assert!(bottom.governed_by.words().starts_with("pore pressure governs"));
    near(bottom.pressure, 21.5);
    assert!(range.limits().lower_shear.pressure().unwrap() < 20.mpa());
}

/// By hand, vertical hole under Sv 116, SHmax 60, Shmin 48, UCS 40: the axial stress at the largest hoop
/// sets the bottom, 116 + 6 − 20 = 40 + 3 (p − 20), and that at the smallest hoop pushes the hole out,
/// 116 − 6 − 20 = 40 + 3 (144 − 60 − p − 20), at 47.333, below S3 = 48 and initiation 89.
#[test]
fn trap_1_the_upper_shear_limit_can_set_the_top() {
    let mut high = b(0.0, 0.0);
    high.stress = Horizontals { sv: 116.mpa(), sh_max: 60.mpa(), sh_min: 48.mpa(), ..high.stress };
    high.rock.strength = Strength::mohr_coulomb_ucs(40.mpa(), 30.deg());
    high.rock.tensile_strength = 25.mpa();
    let range = high.wall().recommended(choices(0.0)).unwrap();
    near(range.bottom.unwrap().pressure, 20.0 + 62.0 / 3.0);
    near(range.limits().initiation.pressure().unwrap(), 89.0);
    assert_eq!(range.top.unwrap().governed_by, Governs::UpperShear);
    near(range.top.unwrap().pressure, 64.0 - 50.0 / 3.0 - 1.0);
    passes(&range);
    // Raised above the upper shear limit it warns; S3 and initiation are both above it.
    let card = passes(&range.raised_to(47.9.mpa(), "the upper shear limit has not been seen to act here").unwrap());
    let notes = card.warnings.join("\n");
    assert!(notes.contains("The raised top is 0.57 MPa above the upper shear limit"), "{notes}");
    let s = range.sensitivity(&[Vary::ucs(0.3.mpa())]).unwrap();
    near(s.ranked()[0].1.more.top.unwrap().pressure, 64.0 - 49.7 / 3.0 - 1.0);
}

/// Where every low pressure holds in shear (here by Mogi–Coulomb at a permeable wall of incompressible
/// rock), the pore pressure is the bottom.
#[test]
fn what_has_no_lower_limit_does_not_empty_the_range() {
    let mut case = b(0.0, 0.0);
    case.rock.poisson = 0.5;
    case.rock.strength = Strength::mogi_coulomb(60.mpa(), 60.deg());
    let wall = case.wall().permeable(1.0).unwrap();
    assert!(wall.limits().lower_shear.is_unbounded());
    let range = wall.recommended(choices(0.0)).unwrap();
    assert_eq!(range.bottom.unwrap().governed_by, Governs::PorePressure);
    near(range.bottom.unwrap().pressure, 21.5);
    passes(&range);
    passes(&range.beside(&[Alternative::impermeable()]).unwrap());
}

#[test]
fn the_top_is_raised_only_with_a_reason_and_never_to_where_the_wall_parts_and_the_fracture_runs_on() {
    let range = b(0.0, 0.0).wall().recommended(choices(0.0)).unwrap();
    let raised = range.raised_to(39.6.mpa(), "  leak-off test held more ").unwrap();
    near(raised.top.unwrap().pressure, 39.6);
    near(raised.computed_top().unwrap().pressure, 39.0);
    assert_eq!(raised.top.unwrap().governed_by, Governs::Engineer);
    assert_eq!(raised.raised().unwrap().reason(), "leak-off test held more");
    let card = passes(&raised);
    let notes = card.explanation.notes.join("\n");
    assert!(notes.contains("RAISED BY THE ENGINEER") && notes.contains("Reason: leak-off test held more"), "{notes}");
    assert!(notes.contains("gives up 0.60 MPa of the 1 MPa of margin"), "{notes}");
    assert!(card.explanation.title.ends_with("top raised"));
    assert!(card.explanation.inputs.iter().any(|i| i.shown == "leak-off test held more"));

    // Above S3 and below initiation it warns; above both it is refused.
    let card = passes(&range.raised_to(44.mpa(), "no natural fractures on the image log").unwrap());
    let notes = card.warnings.join("\n");
    assert!(notes.contains("The raised top is 4.00 MPa above the least stress S_3, 40.00 MPa"), "{notes}");
    let said = |top: Pressure, reason: &str| range.raised_to(top, reason).unwrap_err().to_string();
    assert!(said(48.mpa(), "x").contains("above both initiation 47.00 MPa and the least stress 40.00 MPa"));
    assert!(said(40.mpa(), "  ").contains("without a reason"));
    assert!(said(39.mpa(), "x").contains("above the computed top 39.00 MPa; to lower the top, widen its margin"));
    assert!(said(f64::NAN.mpa(), "x").contains("raised top of the range is NaN"));
    let none = b(0.0, 0.0).wall().permeable(1.0).unwrap().recommended(choices(0.0)).unwrap();
    assert!(none.raised_to(45.mpa(), "x").is_err());
}

fn plan() -> MudPlan {
    MudPlan {
        static_density: 1.2.sg(),
        swab: Some(0.7.mpa()),
        circulating_density: Some(1.3.sg()),
        surge: Some(5.mpa()),
    }
}

/// By hand at 2950 m: 1.2 sg is 1200 · 9.80665 · 2950 = 34.715541 MPa, 1.3 sg is 37.608503 MPa; the range
/// is 32.589746 to 39 MPa.
#[test]
fn a_mud_is_held_static_and_swabbed_against_the_bottom_circulating_and_surged_against_the_top() {
    let range = b(0.0, 0.0).wall().recommended(choices(0.0)).unwrap();
    let held = range.hold(plan()).unwrap();
    let expected = [
        (MudState::Static, 34.715_541, true),
        (MudState::Swabbed, 34.015_541, true),
        (MudState::Circulating, 37.608_502_75, true),
        (MudState::Surged, 39.715_541, false),
    ];
    let bottom = (165.0 - 20.0 * 3_f64.sqrt()) / 4.0;
    for (held, (state, p, inside)) in held.pressures().into_iter().zip(expected) {
        assert_eq!(held.state, state);
        near(held.pressure, p);
        near(held.above_bottom.unwrap(), p - bottom);
        near(held.below_top.unwrap(), 39.0 - p);
        assert_eq!(held.is_inside(), inside, "{state:?}");
        near(Pressure::mpa(held.gradient.in_mpa_per_km() * 2.95), p);
    }
    assert!(!held.is_inside() && held.not_stated().is_empty());
    let card = passes(&held);
    assert!(card.explanation.headline.contains("static and surge OUTSIDE: 0.72 MPa above the top"), "{card:#?}");
    let calm = range.hold(MudPlan { surge: Some(1.mpa()), ..plan() }).unwrap();
    assert!(calm.is_inside() && passes(&calm).explanation.headline.contains("stays inside the range"));
    // The items of the ends are the range's own results, so that the sheet can follow them.
    let own = range.card();
    for symbol in ["p_b", "p_t"] {
        let find = |items: &[crate::card::Item]| items.iter().find(|i| i.symbol == symbol).cloned().unwrap();
        assert!(find(&own.explanation.results).same_value(&find(&card.explanation.inputs)));
    }
}

#[test]
fn what_a_plan_does_not_state_is_said_and_warned_of() {
    let range = b(0.0, 0.0).wall().recommended(choices(0.0)).unwrap();
    let bare = MudPlan { static_density: 1.2.sg(), swab: None, circulating_density: None, surge: None };
    let held = range.hold(bare).unwrap();
    assert_eq!(held.not_stated(), [MudState::Swabbed, MudState::Circulating, MudState::Surged]);
    let card = passes(&held);
    assert!(card.explanation.headline.ends_with("swab, circulating density, surge not stated"));
    let warned = card.warnings.iter().filter(|said| said.contains("is not stated"));
    assert_eq!((warned.count(), card.warnings.len()), (3, 3));
    // A static mud above the top is outside even where nothing else is stated.
    assert!(!range.hold(MudPlan { static_density: 1.5.sg(), ..bare }).unwrap().is_inside());
    // At rest below the bottom arcs fail, and the card says how wide against what is allowed.
    let thin = range.hold(MudPlan { static_density: 1.0.sg(), ..bare }).unwrap();
    let thin = passes(&thin);
    let (notes, warnings) = (thin.explanation.notes.join("\n"), thin.warnings.join("\n"));
    assert!(notes.contains("WIDER than the allowed 0°"), "{notes}");
    assert!(warnings.contains("Static (28.93 MPa): OUTSIDE: 3.66 MPa below the bottom"), "{warnings}");
    // A mud weight read off the end is at the end.
    let at = range.hold(MudPlan { static_density: range.bottom.unwrap().mud_weight, ..bare }).unwrap();
    assert!(at.is_inside() && passes(&at).explanation.notes[0].contains("at the bottom"));

    let said = |plan: MudPlan| range.hold(plan).unwrap_err().to_string();
    assert!(said(MudPlan { static_density: (-1).sg(), ..bare }).starts_with("static mud weight is -1 sg"));
    assert!(said(MudPlan { swab: Some((-1).mpa()), ..bare }).starts_with("swab is -1 MPa"));
    assert!(said(MudPlan { surge: Some(f64::NAN.mpa()), ..bare }).starts_with("surge is NaN"));
    assert!(
        said(MudPlan { circulating_density: Some(1.1.sg()), ..bare }).contains("1.1 sg is below the static 1.2 sg")
    );
}

#[test]
fn a_mud_is_held_against_a_raised_top_and_an_empty_range_holds_none() {
    let range = b(0.0, 0.0).wall().recommended(choices(0.0)).unwrap();
    let raised = range.raised_to(39.9.mpa(), "losses can be cured").unwrap();
    let held = raised.hold(plan()).unwrap();
    assert!(held.is_inside());
    assert!(passes(&held).explanation.notes.iter().any(|n| n.contains("Reason: losses can be cured")));
    let mut weak = b(0.0, 0.0);
    weak.rock.strength = Strength::mohr_coulomb(1.mpa(), 20.deg());
    let held = weak.wall().recommended(choices(0.0)).unwrap().hold(plan()).unwrap();
    assert!(!held.is_inside() && passes(&held).explanation.headline.contains("there is no range"));
}

/// The permeable wall with seepage, by hand: at the smallest hoop 65 − p + (2/3)(p − 20) − p = −2, so
/// p = 40.25; and nowhere in between does the whole wall hold.
#[test]
fn trap_13_a_permeable_wall_stands_beside_the_impermeable_one_and_has_no_range() {
    let range = b(0.0, 0.0).wall().recommended(choices(0.0)).unwrap();
    let beside = range.beside(&[Alternative::permeable(1.0)]).unwrap();
    let [dry, wet] = beside.ranges() else { panic!() };
    near(wet.initiation.unwrap(), 40.25);
    near(dry.initiation.unwrap(), 47.0);
    assert!(wet.bottom.is_none() && wet.is_empty() && !dry.is_empty());
    assert_eq!(beside.tightest(), 1);
    assert!(beside.shared().is_none());
    let card = passes(&beside);
    assert!(card.explanation.headline.starts_with("tightest is Mohr–Coulomb, permeable wall (α = 1): no range"));
    // One top is rounded one way, wherever it stands.
    let shown = |symbol: &str| card.explanation.results.iter().find(|i| i.symbol == symbol).map(|i| i.shown.as_str());
    assert!(shown("p_t*").is_some() && shown("p_t*") == shown("p_t2"), "{:?}", shown("p_t*"));
    // And the other way round.
    let wet = b(0.0, 0.0).wall().permeable(1.0).unwrap().recommended(choices(0.0)).unwrap();
    let beside = wet.beside(&[Alternative::impermeable()]).unwrap();
    near(beside.ranges()[1].bottom.unwrap().pressure, (165.0 - 20.0 * 3_f64.sqrt()) / 4.0);
    assert_eq!(beside.tightest(), 0);
    passes(&beside);
}

#[test]
fn a_second_criterion_stands_beside_with_the_range_that_it_makes_by_itself() {
    let case = b(35.0, 70.0);
    let range = case.wall().recommended(choices(30.0)).unwrap();
    let others = [
        Strength::mogi_coulomb(10.mpa(), 30.deg()),
        Strength::modified_lade(10.mpa(), 30.deg()),
        Strength::drucker_prager_inscribed(10.mpa(), 30.deg()),
        Strength::hoek_brown(HoekBrown { sigma_ci: 60.mpa(), m_i: 12.0, gsi: 80.0, disturbance: 0.0 }),
    ];
    let beside = range.beside(&others.map(Alternative::criterion)).unwrap();
    passes(&beside);
    for (row, strength) in beside.ranges().iter().skip(1).zip(others) {
        let own = case.wall().with_strength(strength).unwrap().recommended(choices(30.0)).unwrap();
        assert_eq!(row.bottom.map(|end| end.pressure), own.bottom.map(|end| end.pressure));
        assert_eq!(row.top.map(|end| end.pressure), own.top.map(|end| end.pressure));
        if let (Some(change), Some(bottom)) = (row.bottom_change, own.bottom) {
            near(change, bottom.pressure.in_mpa() - range.bottom.unwrap().pressure.in_mpa());
        }
    }
    // Mogi–Coulomb gives credit to the intermediate stress, the inscribed cone takes it.
    let change = |k: usize| beside.ranges()[k].bottom_change.unwrap();
    assert!(change(1) < 0.mpa() && change(3) > 0.mpa());

    let said = |list: &[Alternative]| range.beside(list).unwrap_err().to_string();
    assert!(said(&[]).contains("1 to 12"));
    assert!(said(&[Alternative::impermeable()]).contains("stands there already"));
    assert!(said(&[Alternative::permeable(0.8); 2]).contains("permeable wall (α = 0.8) stands there already"));
    assert!(said(&[Alternative::permeable(1.2)]).starts_with("Biot's coefficient α is 1.2"));
    assert!(said(&[Alternative::criterion(Strength::mohr_coulomb((-1).mpa(), 30.deg()))]).starts_with("cohesion"));
}

#[test]
fn every_perturbed_number_turns_a_check_red() {
    fn hold<E: Explain>(result: &E) {
        let card = passes(result);
        let inputs = E::Inputs::read(&card.inputs).unwrap();
        let numbers = card.outcome.numbers();
        let largest = numbers.iter().fold(0.0_f64, |m, (_, n)| m.max(n.abs()));
        for (place, number) in numbers {
            let step = if number.abs() > 1e-6 * largest { 1e-3 * number.abs() } else { 1e-3 * largest };
            for wrong in [number + step, number - step] {
                let outcome = E::Outcome::read(&card.outcome.with_number(&place, wrong)).unwrap();
                let checks = E::check(&inputs, &outcome);
                assert!(checks.iter().any(|c| !c.passed), "{}: {place} {number} → {wrong}", card.title());
            }
        }
    }
    let wall = b(35.0, 70.0).wall();
    let range = wall.recommended(choices(30.0)).unwrap();
    hold(&range.raised_to(39.5.mpa(), "a reason").unwrap());
    hold(&range.hold(MudPlan { static_density: 1.05.sg(), ..plan() }).unwrap());
    hold(&wall.permeable(0.9).unwrap().recommended(choices(60.0)).unwrap().hold(plan()).unwrap());
    hold(&range.beside(&[Alternative::permeable(0.7)]).unwrap());
    hold(&range.sensitivity(&[Vary::sh_max_azimuth(15.deg()), Vary::tensile_strength(0.5.mpa())]).unwrap());
}
