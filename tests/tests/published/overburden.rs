//! Overburden as printed.

use hade::field::DensityColumn;
use hade::units::Units;

/// Espinoza, D.N., Introduction to Energy Geomechanics (open textbook, rev. Nov 2025), Example 2.2:
/// at 4000 ft a gradient of 23.03 MPa/km (g = 9.8 m/s²) gives S_v = 28.07 MPa.
/// DIFFERENCE: 23.03 MPa/km × 1219.2 m is 28.078 MPa; the book cuts the last figure off instead of
/// rounding it. The column here is given the density that has the printed gradient at
/// g = 9.80665 m/s² (2348.4 kg/m³; 2350 kg/m³ at the book's g).
#[test]
fn espinoza_example_2_2_vertical_stress_at_4000_ft() {
    let density = 23.03.mpa_per_km().in_mpa_per_km() * 1000.0 / 9.806_65;
    assert!((density - 2348.4).abs() < 0.05, "{density}");
    let column = DensityColumn {
        tvd: vec![0.m(), 4000.ft()],
        density: vec![density.kg_m3(); 2],
        water_depth: 0.m(),
        stress_at_top: 0.mpa(),
    };
    let stress = column.vertical_stress().unwrap();
    let at_depth = stress.last().unwrap().in_mpa();
    assert!((at_depth - 28.0782).abs() < 5e-5, "{at_depth}");
    assert_eq!((at_depth * 100.0).floor(), 2807.0, "printed 28.07");
}
