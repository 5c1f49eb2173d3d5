use hade::prelude::*;

fn main() {
    let profile =
        PressureProfile::from_points(&[(1000.m(), 12.mpa()), (3000.m(), 36.mpa())], Datum::RotaryTable).unwrap();
    let _ = profile.at(2950.m());
}
