//! Strength criteria against each other, on random stresses with tension among them.

use hade::card::Check;
use hade::prelude::*;
use hade_tests::agree;
use proptest::prelude::*;

use crate::CASES;

fn component() -> impl Strategy<Value = f64> {
    -60.0..120.0_f64
}

/// Any effective stress.
fn stress() -> impl Strategy<Value = EffectiveStress> {
    (proptest::array::uniform3(component()), proptest::array::uniform3(-30.0..30.0_f64)).prop_map(
        |([nn, ee, dd], [ne, nd, ed])| {
            let (nn, ee, dd) = (nn.mpa(), ee.mpa(), dd.mpa());
            let components = Components { nn, ee, dd, ne: ne.mpa(), nd: nd.mpa(), ed: ed.mpa() };
            Stress::from_components(components).unwrap().effective(0.mpa()).unwrap()
        },
    )
}

fn upright(values: [f64; 3]) -> EffectiveStress {
    let [nn, ee, dd] = values.map(|v| v.mpa());
    let zero = 0.mpa();
    let components = Components { nn, ee, dd, ne: zero, nd: zero, ed: zero };
    Stress::from_components(components).unwrap().effective(zero).unwrap()
}

fn cohesion() -> impl Strategy<Value = f64> {
    prop_oneof![9 => 0.0..50.0_f64, 1 => Just(0.0)]
}

fn friction() -> impl Strategy<Value = f64> {
    0.5..65.0_f64
}

fn mass() -> impl Strategy<Value = HoekBrown> {
    (1.0..250.0_f64, 1.0..35.0_f64, 0.0..=100.0_f64, 0.0..=1.0_f64).prop_map(|(ci, m_i, gsi, disturbance)| HoekBrown {
        sigma_ci: ci.mpa(),
        m_i,
        gsi,
        disturbance,
    })
}

fn margin(strength: Strength, stress: &EffectiveStress) -> f64 {
    strength.margin(stress).in_mpa()
}

proptest! {
    #![proptest_config(ProptestConfig::with_cases(CASES))]

    /// Where two stresses are equal Mogi–Coulomb's margin is Mohr–Coulomb's times (√2/3)(1 − sin φ).
    #[test]
    fn mogi_is_coulomb_where_two_stresses_are_equal(
        a in component(), b in component(), c in cohesion(), phi in friction(),
    ) {
        let (c, phi) = (c.mpa(), phi.deg());
        let share = 2.0_f64.sqrt() / 3.0 * (1.0 - phi.in_rad().sin());
        let s = upright([a, a, b]);
        let by_coulomb = share * margin(Strength::mohr_coulomb(c, phi), &s);
        let by_mogi = margin(Strength::mogi_coulomb(c, phi), &s);
        prop_assert!(agree(by_mogi, by_coulomb, 1e-11), "{} is not {}", by_mogi, by_coulomb);
    }

    /// As far as the apex the three cones lie in each other, with Mohr–Coulomb's pyramid between the
    /// inscribed and the circumscribed one; beyond it everything fails.
    #[test]
    fn cones_and_pyramid_lie_in_each_other(s in stress(), c in cohesion(), phi in friction()) {
        let (c, phi) = (c.mpa(), phi.deg());
        let [s1, s2, s3] = s.principal().map(Pressure::in_mpa);
        let before_apex = s1 + s2 + s3 + 3.0 * c.in_mpa() / phi.in_rad().tan() > 0.0;
        let inscribed = margin(Strength::drucker_prager_inscribed(c, phi), &s);
        let extension = margin(Strength::drucker_prager_extension(c, phi), &s);
        let circumscribed = margin(Strength::drucker_prager_circumscribed(c, phi), &s);
        let coulomb = margin(Strength::mohr_coulomb(c, phi), &s);
        if !before_apex {
            prop_assert!([inscribed, extension, circumscribed, coulomb].iter().all(|m| *m <= 1e-12));
            return Ok(());
        }
        prop_assert!(inscribed <= extension + 1e-12 && extension <= circumscribed + 1e-12);
        prop_assert!(inscribed <= 1e-10 || coulomb > 0.0, "the inscribed cone holds what Mohr–Coulomb does not");
        prop_assert!(coulomb <= 1e-10 || circumscribed > 0.0, "Mohr–Coulomb holds what the circumscribed cone does not");
    }

    /// Neither criterion is ever safe where it is not defined, and a margin is always a number.
    #[test]
    fn outside_the_domain_nothing_holds(s in stress(), c in cohesion(), phi in friction(), mass in mass()) {
        let (c, phi) = (c.mpa(), phi.deg());
        let s3 = s.principal()[2].in_mpa();
        let by_lade = margin(Strength::modified_lade(c, phi), &s);
        let by_mass = margin(Strength::hoek_brown(mass), &s);
        prop_assert!(by_lade.is_finite() && by_mass.is_finite());
        prop_assert!(s3 > -c.in_mpa() / phi.in_rad().tan() || by_lade <= 0.0);
        prop_assert!(s3 > -mass.rock_mass().unwrap().tensile_strength().in_mpa() || by_mass <= 0.0);
    }

    /// More cohesion, or a stronger rock between the joints, never makes it weaker; nor does more
    /// confinement of all three stresses alike, where friction is there.
    #[test]
    fn margins_grow_with_strength(
        s in stress(), c in cohesion(), more in 0.0..20.0_f64, phi in friction(), mass in mass(), factor in 1.0..3.0_f64,
    ) {
        let phi = phi.deg();
        let of = |c: f64| {
            let c = c.mpa();
            [
                Strength::mohr_coulomb(c, phi),
                Strength::mohr_coulomb_ucs(c, phi),
                Strength::mogi_coulomb(c, phi),
                Strength::modified_lade(c, phi),
                Strength::drucker_prager_inscribed(c, phi),
                Strength::drucker_prager_circumscribed(c, phi),
                Strength::drucker_prager_extension(c, phi),
            ]
        };
        for (weaker, stronger) in of(c).into_iter().zip(of(c + more)) {
            prop_assert!(margin(stronger, &s) >= margin(weaker, &s) - 1e-9, "{:?}", weaker);
        }
        let stronger = HoekBrown { sigma_ci: mass.sigma_ci * factor, ..mass };
        let [weaker, stronger] = [mass, stronger].map(Strength::hoek_brown);
        prop_assert!(margin(weaker, &s) <= 0.0 || margin(stronger, &s) >= margin(weaker, &s) - 1e-9);
        let squeezed = {
            let [s1, s2, s3] = s.principal().map(Pressure::in_mpa);
            upright([s1 + more, s2 + more, s3 + more])
        };
        for strength in of(c).into_iter().chain([weaker]) {
            prop_assert!(margin(strength, &squeezed) >= margin(strength, &s) - 1e-9, "{:?}", strength);
        }
    }
}

/// Checks by other routes that are red for a right outcome would be as bad as none.
fn red(checks: Vec<Check>) -> Vec<Check> {
    checks.into_iter().filter(|c| !c.passed).collect()
}

fn red_of<E: Explain>(result: &E) -> Vec<Check> {
    red(E::check(&result.inputs(), &result.outcome()))
}

proptest! {
    #![proptest_config(ProptestConfig::with_cases(CASES / 4))]

    #[test]
    fn checks_are_green_for_every_strength(
        values in proptest::array::uniform3(component()), shear in proptest::array::uniform3(-30.0..30.0_f64),
        even in 0..4, pore in 0.0..80.0_f64, c in cohesion(),
        phi in prop_oneof![8 => 0.02..70.0_f64, 1 => 70.0..89.99_f64, 1 => Just(30.0)],
        mass in mass(), most in 0.01..80.0_f64,
        plane in (cohesion(), prop_oneof![8 => 0.0..70.0_f64, 1 => Just(0.0)]),
        beta in prop_oneof![8 => 0.0..=90.0_f64, 1 => Just(90.0), 1 => Just(0.0)],
    ) {
        let [mut nn, mut ee, dd] = values.map(|v| v.mpa());
        let mut shear = shear.map(|v| v.mpa());
        // Equal and upright ones among them.
        if even > 0 {
            shear = [0.mpa(); 3];
        }
        if even > 1 {
            ee = dd;
        }
        if even > 2 {
            nn = dd;
        }
        let [ne, nd, ed] = shear;
        let s = Stress::from_components(Components { nn, ee, dd, ne, nd, ed }).unwrap();
        let (c, phi) = (c.mpa(), phi.deg());
        let sigma_3 = dd;
        for strength in [
            Strength::mohr_coulomb(c, phi),
            Strength::mohr_coulomb_ucs(c, phi),
            Strength::mogi_coulomb(c, phi),
            Strength::modified_lade(c, phi),
            Strength::drucker_prager_inscribed(c, phi),
            Strength::drucker_prager_circumscribed(c, phi),
            Strength::drucker_prager_extension(c, phi),
            Strength::hoek_brown(mass),
        ] {
            // The modified Lade criterion does not take friction angles that no rock has.
            let Ok(envelope) = strength.envelope() else {
                prop_assert!(phi > 85.deg() && strength.name() == "modified Lade", "{:?}", strength);
                continue;
            };
            let found = red_of(&envelope);
            prop_assert!(found.is_empty(), "{:?} {:#?}", strength, found);
            let found = red_of(&s.strength_margin(strength, pore.mpa()).unwrap());
            prop_assert!(found.is_empty(), "{:?} {:#?}", strength, found);
            let plane = PlaneStrength { cohesion: plane.0.mpa(), friction_angle: plane.1.deg() };
            if let Ok(weak) = WeakRock::under(WeakRockInputs { intact: strength, plane, sigma_3, beta: beta.deg() }) {
                let found = red_of(&weak);
                prop_assert!(found.is_empty(), "{:?} {:?} {:#?}", strength, weak, found);
            }
        }
        for rock_mass in [mass.rock_mass().unwrap(), mass.rock_mass_up_to(most.mpa()).unwrap()] {
            let found = red_of(&rock_mass);
            prop_assert!(found.is_empty(), "{:?} {:#?}", rock_mass, found);
        }
    }
}
