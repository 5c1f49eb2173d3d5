use hade::prelude::*;

fn main() {
    let _ = Thermal { warming: (-20).kelvin(), expansion: 1e-5.per_kelvin() };
}
