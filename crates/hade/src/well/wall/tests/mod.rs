//! Tests of the wall as a whole: the walls they share, and what every card must do.
#![cfg(test)]

mod by_force;
mod every_criterion;
mod field;
mod mistakes;
mod range;
mod sensitivity;
mod walls_at_random;
mod whole;

use super::*;
use crate::card::{Card, Data, Explain};
use crate::frames::{Attitude, Azimuth, Borehole};
use crate::rock::{Rock, Strength};
use crate::stress::{Components, Horizontals, Stress};
use crate::units::Units;

fn hole(i: f64, a: f64) -> Attitude {
    Attitude { inclination: i.deg(), azimuth: Azimuth::from_true_north(a.deg()) }
}

fn rock(strength: Strength) -> Rock {
    Rock { poisson: 0.25, tensile_strength: 2.mpa(), strength }
}

/// State B of the house's cases: Sv 60, SHmax 55 at 030°, Shmin 40, Pp 20, ν 0.25, c 10, φ 30°.
fn state_b(i: f64, a: f64, strength: Strength) -> Wall {
    let s = Stress::from_horizontals(Horizontals {
        sv: 60.mpa(),
        sh_max: 55.mpa(),
        sh_min: 40.mpa(),
        sh_max_azimuth: Azimuth::from_true_north(30.deg()),
    })
    .unwrap();
    let stress = hole(i, a).named("B").chain().unwrap().carry(&s);
    Wall::new(WallInputs { stress, pore: 20.mpa(), rock: rock(strength) }).unwrap()
}

fn components(six: [f64; 6], i: f64, a: f64) -> Stress<Borehole> {
    let [nn, ee, dd, ne, ed, nd] = six.map(|c| c.mpa());
    hole(i, a).chain().unwrap().carry(&Stress::from_components(Components { nn, ee, dd, ne, nd, ed }).unwrap())
}

fn coulomb() -> Strength {
    Strength::mohr_coulomb(10.mpa(), 30.deg())
}

/// Walls of every kind: open, at a tool face of its own and flat, crossed, failing within the wall at
/// any pressure, and parted at any.
fn walls() -> Vec<(&'static str, Wall)> {
    let wall =
        |stress, pore: f64, strength| Wall::new(WallInputs { stress, pore: pore.mpa(), rock: rock(strength) }).unwrap();
    vec![
        ("deviated", state_b(35.0, 70.0, coulomb())),
        ("vertical", state_b(0.0, 0.0, coulomb())),
        ("level", state_b(90.0, 30.0, coulomb())),
        ("rising", state_b(130.0, 200.0, Strength::mohr_coulomb_ucs(60.mpa(), 20.deg()))),
        ("strong", state_b(20.0, 300.0, Strength::mohr_coulomb_ucs(150.mpa(), 30.deg()))),
        ("isotropic", wall(components([40.0, 40.0, 40.0, 0.0, 0.0, 0.0], 45.0, 222.0), 20.0, coulomb())),
        (
            "crossed",
            wall(
                components([75.0, 30.0, 55.0, 3.0, 2.0, -4.0], 54.0, 15.0),
                8.0,
                Strength::mohr_coulomb(0.4.mpa(), 15.deg()),
            ),
        ),
        (
            "frictionless",
            wall(
                components([50.0, 42.0, 60.0, 3.0, 9.0, -8.0], 50.0, 110.0),
                20.0,
                Strength::mohr_coulomb(8.mpa(), 0.deg()),
            ),
        ),
        (
            "sheared",
            wall(
                components([40.0, 40.0, 40.0, 0.0, 18.0, 18.0], 0.0, 0.0),
                6.0,
                Strength::mohr_coulomb(0.5.mpa(), 10.deg()),
            ),
        ),
        ("parted", wall(components([70.0, 12.0, 20.0, 0.0, 0.0, 0.0], 0.0, 0.0), 25.0, coulomb())),
    ]
}

fn choices(width: f64) -> RangeChoices {
    RangeChoices {
        allowed_width: width.deg(),
        margin_bottom: 1.5.mpa(),
        margin_top: 1.mpa(),
        tvd_below_rotary: 2950.m(),
    }
}

/// What the table of replays does with every sample: checks pass, the card replays from its text,
/// and each perturbed number turns a check red.
fn hold<E: Explain>(name: &str, result: &E) {
    let card: Card = result.card();
    let failed: Vec<_> = card.checks.iter().filter(|c| !c.passed).collect();
    assert!(card.passed(), "{name}, {}: {failed:#?}", card.title());
    let read = E::Inputs::read(&card.inputs).unwrap();
    let again = E::compute(read).unwrap().card();
    assert_eq!(again, card, "{name}, {}", card.title());
    let text = serde_json::to_string(&card).unwrap();
    assert_eq!(serde_json::from_str::<Card>(&text).unwrap(), card, "{name}");
    let numbers = card.outcome.numbers();
    assert!(!numbers.is_empty(), "{name}, {}: nothing came out", card.title());
    if !["deviated", "level", "crossed", "sheared", "parted"].contains(&name) {
        return;
    }
    let largest = numbers.iter().fold(0.0_f64, |m, (_, n)| m.max(n.abs()));
    for (place, number) in numbers {
        let step = if number.abs() > 1e-6 * largest { 1e-3 * number.abs() } else { 1e-3 * largest };
        for wrong in [number + step, number - step] {
            let outcome = E::Outcome::read(&card.outcome.with_number(&place, wrong)).unwrap();
            let checks = E::check(result_inputs::<E>(&card), &outcome);
            assert!(
                checks.iter().any(|c| !c.passed),
                "{name}, {}: {place} {number} → {wrong} passes every check",
                card.title()
            );
        }
    }
}

fn result_inputs<E: Explain>(card: &Card) -> &'static E::Inputs {
    Box::leak(Box::new(E::Inputs::read(&card.inputs).unwrap()))
}
