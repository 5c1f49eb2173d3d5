use hade::prelude::*;

fn main() {
    let _ = 31.2.mpa() + 2950.m();
}
