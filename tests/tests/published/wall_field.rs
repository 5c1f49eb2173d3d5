//! The stress away from a wall as printed.
//!
//! Z: Zoback, M.D. (2007) Reservoir Geomechanics, Cambridge University Press, p. 172 and fig. 6.2.

use hade::prelude::*;
use hade::rock::{Rock, Strength};
use hade::well::{Wall, WallInputs};
use hade_tests::{agree, assert_printed};

/// The vertical hole of Z, fig. 6.2: effective SHmax 58.5 and Shmin 20 MPa, with the pressure in the hole
/// equal to the pore pressure. The totals, 90 and 51.5 MPa at a pore pressure of 31.5 MPa, are from memory;
/// the vertical stress plays no part.
fn hole() -> Wall {
    let s = Stress::from_horizontals(Horizontals {
        sv: 88.2.mpa(),
        sh_max: 90.mpa(),
        sh_min: 51.5.mpa(),
        sh_max_azimuth: Azimuth::from_true_north(90.deg()),
    })
    .unwrap();
    let hole = Attitude { inclination: 0.deg(), azimuth: Azimuth::from_true_north(0.deg()) };
    let strength = Strength::mohr_coulomb_ucs(45.mpa(), 45.deg());
    let rock = Rock { poisson: 0.25, tensile_strength: 0.mpa(), strength };
    Wall::new(WallInputs { stress: hole.chain().unwrap().carry(&s), pore: 31.5.mpa(), rock }).unwrap()
}

/// Z, fig. 6.2: effective hoop stress 155.5 MPa at the azimuth of Shmin and close to zero at that of SHmax
/// (3·20 − 58.5 = 1.5); at r/R = 1.5 the stress is 30 % above the far-field SHmax.
///
/// DIFFERENCE: the exact total hoop stress there is 118.85 MPa, 32.1 % above SHmax; the book's figure
/// is a round one.
#[test]
fn zoback_figure_6_2_hoop_stress_at_the_wall_and_at_one_and_a_half_radii() {
    let wall = hole();
    let hoop = |toolface: f64, ratio: f64| wall.field_at(31.5.mpa(), toolface.deg(), ratio).unwrap().hoop.in_mpa();
    assert_printed("hoop at Shmin", hoop(0.0, 1.0) - 31.5, "155.5");
    assert_printed("hoop at SHmax", hoop(90.0, 1.0) - 31.5, "1.5");
    let above = 100.0 * (hoop(0.0, 1.5) / 90.0 - 1.0);
    assert!(agree(above, 30.0, 2.5), "{above} %");
    assert!(agree(above, 32.06, 0.005), "{above} %");
    // And far off it is the far field.
    assert!(agree(hoop(0.0, 1000.0), 90.0, 1e-4) && agree(hoop(90.0, 1000.0), 51.5, 1e-4));
}
