//! How long the hot parts take: `cargo bench` (one core).

use divan::{Bencher, black_box};
use hade::prelude::*;

fn main() {
    divan::main();
}

fn stress() -> Stress {
    Stress::from_horizontals(Horizontals {
        sv: 60.mpa(),
        sh_max: 55.mpa(),
        sh_min: 42.mpa(),
        sh_max_azimuth: Azimuth::from_true_north(35.deg()),
    })
    .expect("a stress")
}

fn chain() -> Chain {
    Attitude { inclination: 45.deg(), azimuth: Azimuth::from_true_north(125.deg()) }.chain().expect("a hole")
}

#[divan::bench]
fn principal_stresses(bencher: Bencher) {
    let s = chain().back().carry(&chain().carry(&stress()));
    bencher.bench_local(|| black_box(&s).principals());
}

#[divan::bench]
fn carry_to_a_hole(bencher: Bencher) {
    let (s, chain) = (stress(), chain());
    bencher.bench_local(|| black_box(&chain).carry(black_box(&s)));
}

fn strength(criterion: &str) -> Strength {
    // UCS 30 MPa and 32° for all that take them.
    let phi = 32.deg();
    let c = 30.mpa() * ((1.0 - phi.in_rad().sin()) / (2.0 * phi.in_rad().cos()));
    match criterion {
        "Mohr–Coulomb" => Strength::mohr_coulomb_ucs(30.mpa(), phi),
        "Mogi–Coulomb" => Strength::mogi_coulomb(c, phi),
        "modified Lade" => Strength::modified_lade(c, phi),
        "Drucker–Prager, inscribed" => Strength::drucker_prager_inscribed(c, phi),
        "Drucker–Prager, circumscribed" => Strength::drucker_prager_circumscribed(c, phi),
        _ => Strength::hoek_brown(HoekBrown { sigma_ci: 60.mpa(), m_i: 10.0, gsi: 80.0, disturbance: 0.0 }),
    }
}

const CRITERIA: [&str; 6] = [
    "Mohr–Coulomb",
    "Mogi–Coulomb",
    "modified Lade",
    "Drucker–Prager, inscribed",
    "Drucker–Prager, circumscribed",
    "Hoek–Brown",
];

fn rock(criterion: &str) -> Rock {
    Rock { poisson: 0.25, tensile_strength: 2.mpa(), strength: strength(criterion) }
}

fn wall(criterion: &str) -> Wall {
    let inputs = WallInputs { stress: chain().carry(&stress()), pore: 22.mpa(), rock: rock(criterion) };
    Wall::new(inputs).expect("a wall")
}

#[divan::bench(args = CRITERIA)]
fn lower_shear_limit(bencher: Bencher, criterion: &str) {
    let wall = wall(criterion);
    bencher.bench_local(|| black_box(&wall).lower_shear_limit());
}

#[divan::bench(args = CRITERIA)]
fn limits_with_places(bencher: Bencher, criterion: &str) {
    let wall = wall(criterion);
    bencher.bench_local(|| black_box(&wall).limits());
}

/// 91 × 360 hole directions, exact in the tool face, on all cores.
#[divan::bench(args = CRITERIA, sample_count = 10)]
fn lower_limits_of_32760_directions(bencher: Bencher, criterion: &str) {
    let inputs = MapInputs { stress: stress(), pore: 22.mpa(), rock: rock(criterion), step: 1.deg() };
    bencher.bench_local(|| DirectionMap::over(black_box(inputs)));
}

/// 100 000 walls with seven inputs drawn, bottom and top, on all cores.
#[divan::bench(sample_count = 10)]
fn ensemble_of_100_000_draws(bencher: Bencher) {
    let wall = wall("Mohr–Coulomb");
    let drawn = [
        Drawn::sv(Distribution::normal(60.mpa(), 1.5.mpa())),
        Drawn::sh_max(Distribution::normal(55.mpa(), 3.mpa())),
        Drawn::sh_min(Distribution::normal(42.mpa(), 2.mpa())),
        Drawn::sh_max_azimuth(Distribution::normal(35.deg(), 8.deg())),
        Drawn::pore(Distribution::normal(22.mpa(), 1.mpa())),
        Drawn::ucs(Distribution::normal(30.mpa(), 4.mpa())),
        Drawn::friction_angle(Distribution::normal(32.deg(), 2.deg())),
    ];
    bencher.bench_local(|| black_box(&wall).ensemble(Draws { count: 100_000, start: 1 }, black_box(&drawn)));
}
