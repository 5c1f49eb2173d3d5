use hade::prelude::*;

fn main() {
    let _ = Attitude { inclination: 42.mpa(), azimuth: Azimuth::from_true_north(120.deg()) };
}
