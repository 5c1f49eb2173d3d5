use hade::prelude::*;

fn main() {
    let _ = MudColumn { density: 1.25.sg(), tvd_below_rotary: 29.5.mpa() };
}
