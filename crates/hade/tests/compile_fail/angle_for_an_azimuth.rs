use hade::prelude::*;

fn main() {
    let _ = Attitude { inclination: 42.deg(), azimuth: 120.deg() };
}
