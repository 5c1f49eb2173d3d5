//! Where strength criteria go wrong, each with a number from an independent numpy/scipy implementation
//! (effective stresses, compression positive, MPa, degrees).

use super::strength::{against, principal};
use hade::prelude::*;
use hade_tests::{agree, assert_printed};

/// α of Drucker–Prager is on I1, a third of the one on the mean stress, and the inscribed cone is not
/// the one through triaxial extension.
#[test]
fn drucker_prager_constants_are_on_i1_and_inscribed_is_not_extension() {
    let (c, phi) = (10.mpa(), 30.deg());
    for (cone, alpha_printed, k_printed) in [
        (Strength::drucker_prager_inscribed(c, phi), "0.16013", "8.3205"),
        (Strength::drucker_prager_circumscribed(c, phi), "0.23094", "12"),
        (Strength::drucker_prager_extension(c, phi), "0.16496", "8.5714"),
    ] {
        let StrengthConstants::DruckerPrager { alpha, k } = cone.envelope().unwrap().constants() else { panic!() };
        assert_printed("alpha", alpha, alpha_printed);
        assert_printed("k", k.in_mpa(), k_printed);
        // Pure pressure uses no strength: the margin is k + 3 α p.
        let margin = against(cone, [20.0; 3]).margin().in_mpa();
        assert!(agree(margin, k.in_mpa() + 60.0 * alpha, 1e-9));
    }
    let card = Strength::drucker_prager_circumscribed(c, phi).envelope().unwrap().card();
    assert!(card.explanation.notes[0].contains("flatters"), "{:?}", card.explanation.notes);
    assert!(card.explanation.method.assumptions[0].contains("For comparison only"));
    // It bears three times what Mohr–Coulomb does under two equal stresses, and at 40° any.
    let biaxial = |s: Strength| s.envelope().unwrap().biaxial().map(Pressure::in_mpa);
    assert_printed("Mohr–Coulomb", biaxial(Strength::mohr_coulomb(c, phi)).unwrap(), "34.64");
    assert_printed("circumscribed", biaxial(Strength::drucker_prager_circumscribed(c, phi)).unwrap(), "103.92");
    assert_eq!(biaxial(Strength::drucker_prager_circumscribed(c, 40.deg())), None);
}

fn weak_rock(beta: f64) -> WeakRock {
    WeakRock::under(WeakRockInputs {
        intact: Strength::mohr_coulomb(10.mpa(), 35.deg()),
        plane: PlaneStrength { cohesion: 1.mpa(), friction_angle: 25.deg() },
        sigma_3: 5.mpa(),
        beta: beta.deg(),
    })
    .unwrap()
}

/// Jaeger's β is counted from the plane's normal. Where the plane cannot slip the rock breaks as if
/// intact, and no negative or infinite strength comes out.
#[test]
fn jaegers_beta_is_from_the_normal_and_planes_that_cannot_slip_do_not() {
    assert_printed("β 60°", weak_rock(60.0).strength().in_mpa(), "15.53");
    assert_printed("β 30°, the same plane counted from itself", weak_rock(30.0).strength().in_mpa(), "45.00");
    let intact = weak_rock(90.0).intact().in_mpa();
    assert_printed("intact", intact, "56.87");
    for beta in [0.0, 10.0, 25.0, 90.0] {
        let at = weak_rock(beta);
        assert_eq!((at.weak(), at.mode()), (None, WeakRockMode::BreaksIntact), "{beta}");
        assert!(agree(at.strength().in_mpa(), intact, 0.0), "{beta}");
        assert!(at.card().explanation.notes[0].contains("cannot slip"));
    }
    // On both sides of where it begins and ends to govern, and just inside where it can slip.
    let [from, to] = weak_rock(60.0).governs().unwrap().map(|a| a.in_deg());
    for (beta, mode) in [
        (25.000_001, WeakRockMode::BreaksIntact),
        (from - 1e-6, WeakRockMode::BreaksIntact),
        (from + 1e-6, WeakRockMode::SlipsOnPlane),
        (to - 1e-6, WeakRockMode::SlipsOnPlane),
        (to + 1e-6, WeakRockMode::BreaksIntact),
        (89.999_999, WeakRockMode::BreaksIntact),
    ] {
        let at = weak_rock(beta);
        assert_eq!(at.mode(), mode, "{beta}");
        assert!(at.strength().in_mpa() > 5.0 && at.strength().in_mpa() <= intact, "{beta}");
        assert!(at.card().passed(), "{beta}: {:#?}", at.card().checks);
    }
    let (least, beta) = weak_rock(60.0).weakest();
    assert!(agree(beta.in_deg(), 57.5, 1e-12) && least < weak_rock(60.0).strength());
    assert!(agree(weak_rock(57.5).strength().in_mpa(), least.in_mpa(), 1e-12));
}

/// Outside the domain of the modified Lade criterion its ratio reads as safe: two shifted stresses below
/// zero give a small positive one, one gives a negative one. Both have failed.
#[test]
fn modified_lade_fails_outside_its_domain() {
    let lade = Strength::modified_lade(10.mpa(), 30.deg());
    let StrengthConstants::ModifiedLade { shift, eta } = lade.envelope().unwrap().constants() else { panic!() };
    assert_printed("S1", shift.in_mpa(), "17.32");
    assert_printed("27 + η", 27.0 + eta, "41.67");
    let ratio = |s: [f64; 3]| {
        let [a, b, c] = s.map(|s| s + shift.in_mpa());
        (a + b + c).powi(3) / (a * b * c)
    };
    let two_below = [25.0, -30.0, -31.0];
    assert_printed("the false ratio", ratio(two_below), "0.55");
    let one_below = [25.0, 10.0, -31.0];
    assert!(ratio(one_below) < 0.0);
    for stress in [two_below, one_below, [-20.0; 3], [-18.0, -19.0, -40.0], [5.0, 5.0, -17.33]] {
        let margin = against(lade, stress);
        assert!(margin.fails() && margin.margin().in_mpa() < 0.0, "{stress:?}");
        assert_eq!(margin.lade_ratio(), None);
        assert!(margin.card().explanation.notes[0].contains("outside the domain"), "{stress:?}");
    }
    let refused = principal([5.0; 3]).strength_margin(Strength::modified_lade(10.mpa(), 0.deg()), 0.mpa());
    assert!(refused.unwrap_err().to_string().contains("needs a friction angle above 0°"));
}

/// Below the tensile strength of the mass the power of a negative number is not a number, which compares
/// as false and would read as safe. It has failed. Intact rock has s = 1 and a = ½ exactly.
#[test]
fn hoek_brown_fails_below_its_tensile_strength() {
    let rock = HoekBrown { sigma_ci: 50.mpa(), m_i: 10.0, gsi: 45.0, disturbance: 0.0 };
    let mass = rock.rock_mass().unwrap();
    let tensile = mass.tensile_strength().in_mpa();
    for below in [1e-6, 0.01, 1.0, 50.0] {
        let s3 = -tensile - below;
        for stress in [[s3; 3], [s3 + 0.001, s3, s3], [20.0, 5.0, s3]] {
            let margin = against(mass.strength(), stress);
            assert!(margin.margin().in_mpa() < 0.0, "{stress:?}: {:?}", margin.margin());
            assert!(margin.fails() && margin.margin().in_mpa().is_finite());
        }
        assert_eq!(mass.sigma_1_at(s3.mpa()), None);
    }
    assert!(!against(mass.strength(), [0.0, 0.0, -0.9 * tensile]).fails());
    let intact = HoekBrown { gsi: 100.0, ..rock }.rock_mass().unwrap();
    assert_eq!((intact.m_b(), intact.s(), intact.a()), (10.0, 1.0, 0.5));
    assert!(agree(intact.compressive_strength().in_mpa(), 50.0, 0.0));
}
