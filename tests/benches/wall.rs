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

#[divan::bench]
fn lower_shear_limit(bencher: Bencher) {
    let rock =
        Rock { poisson: 0.25, tensile_strength: 2.mpa(), strength: Strength::mohr_coulomb_ucs(30.mpa(), 32.deg()) };
    let wall = Wall::new(WallInputs { stress: chain().carry(&stress()), pore: 22.mpa(), rock }).expect("a wall");
    bencher.bench_local(|| black_box(&wall).lower_shear_limit());
}

#[divan::bench]
fn limits_with_places(bencher: Bencher) {
    let rock =
        Rock { poisson: 0.25, tensile_strength: 2.mpa(), strength: Strength::mohr_coulomb_ucs(30.mpa(), 32.deg()) };
    let wall = Wall::new(WallInputs { stress: chain().carry(&stress()), pore: 22.mpa(), rock }).expect("a wall");
    bencher.bench_local(|| black_box(&wall).limits());
}
