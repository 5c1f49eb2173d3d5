use hade::prelude::*;

fn main() {
    let _ = PressureProfile::from_points(&[(1000.m(), 12.mpa()), (3000.m(), 36.mpa())]);
}
