use hade::prelude::*;

fn main() {
    let mut sheet = Sheet::new("KF-3");
    let strength = Strength::mohr_coulomb(11.7.mpa(), 30.deg());
    sheet.given("c", "strength of the rock", strength, Source::measured("KF-3 core"));
}
