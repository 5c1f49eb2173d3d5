use hade::prelude::*;

fn main() {
    let strike = Azimuth::from_true_north(45.deg());
    let _ = Plane { strike, dip: Azimuth::from_true_north(60.deg()) };
}
