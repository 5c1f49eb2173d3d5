use hade::prelude::*;

fn main() {
    let s = Stress::from_horizontals(Horizontals {
        sv: 60.mpa(),
        sh_max: 55.mpa(),
        sh_min: 40.mpa(),
        sh_max_azimuth: Azimuth::from_true_north(30.deg()),
    })
    .unwrap();
    let hole = Attitude { inclination: 42.deg(), azimuth: Azimuth::from_true_north(120.deg()) };
    let chain = hole.chain().unwrap();
    let sh = chain.carry(&s);
    let _ = chain.carry(&sh);
}
