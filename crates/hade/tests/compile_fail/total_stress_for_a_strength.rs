use hade::prelude::*;

fn main() {
    let s = Stress::from_horizontals(Horizontals {
        sv: 60.mpa(),
        sh_max: 55.mpa(),
        sh_min: 40.mpa(),
        sh_max_azimuth: Azimuth::from_true_north(30.deg()),
    })
    .unwrap();
    let strength = Strength::mohr_coulomb(10.mpa(), 30.deg());
    let _ = strength.margin(&s);
}
