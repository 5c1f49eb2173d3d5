//! Where wall stability goes wrong, each with a number from an independent numpy/scipy
//! implementation (compression positive, MPa, degrees). State B: Sv 60, SHmax 55 at azimuth 030,
//! Shmin 40, pore pressure 20, Poisson 0.25, cohesion 10, friction angle 30°.

use hade::prelude::*;
use hade::rock::{Rock, Strength};
use hade::well::{Governs, LimitKind, RangeChoices, Wall, WallDirection, WallInputs};
use hade_tests::{agree, assert_printed};

struct Case {
    sv: f64,
    sh_max: f64,
    sh_min: f64,
    azimuth: f64,
    inclination: f64,
    hole_azimuth: f64,
    strength: Strength,
}

fn state_b() -> Case {
    Case {
        sv: 60.0,
        sh_max: 55.0,
        sh_min: 40.0,
        azimuth: 30.0,
        inclination: 0.0,
        hole_azimuth: 0.0,
        strength: Strength::mohr_coulomb(10.mpa(), 30.deg()),
    }
}

impl Case {
    fn wall(&self) -> Wall {
        let s = Stress::from_horizontals(Horizontals {
            sv: self.sv.mpa(),
            sh_max: self.sh_max.mpa(),
            sh_min: self.sh_min.mpa(),
            sh_max_azimuth: Azimuth::from_true_north(self.azimuth.deg()),
        })
        .unwrap();
        let azimuth = Azimuth::from_true_north(self.hole_azimuth.deg());
        let chain = Attitude { inclination: self.inclination.deg(), azimuth }.chain().unwrap();
        let rock = Rock { poisson: 0.25, tensile_strength: 2.mpa(), strength: self.strength };
        Wall::new(WallInputs { stress: chain.carry(&s), pore: 20.mpa(), rock }).unwrap()
    }
}

fn mpa(p: Option<Pressure>) -> f64 {
    p.expect("a pressure").in_mpa()
}

/// Shear limits the pressure from above as well. The recommended top is S3 here.
#[test]
fn shear_is_the_upper_limit_before_parting() {
    let wall = Case { inclination: 35.0, hole_azimuth: 70.0, ..state_b() }.wall();
    let limits = wall.limits();
    assert_printed("lower shear", mpa(limits.lower_shear.pressure()), "33.0201");
    assert!(agree(mpa(limits.upper_shear.pressure()), 45.6653, 1e-4));
    assert_printed("initiation", mpa(limits.initiation.pressure()), "48.2297");
    assert!(agree(mpa(limits.least_stress.pressure()), 40.0, 1e-9));
    let choices = RangeChoices {
        allowed_width: 30.deg(),
        margin_bottom: 1.mpa(),
        margin_top: 0.mpa(),
        tvd_below_rotary: 2600.m(),
    };
    let top = wall.recommended(choices).unwrap().top.unwrap();
    assert_eq!(top.governed_by, Governs::LeastStress);
    assert!(agree(top.pressure.in_mpa(), 40.0, 1e-9));
}

/// The axial stress may exceed the hoop stress; assuming hoop > axial > radial gives 24.340.
#[test]
fn the_order_of_wall_stresses_is_looked_up() {
    let limits = Case { sv: 75.0, sh_max: 44.0, sh_min: 40.0, ..state_b() }.wall().limits();
    assert_printed("lower shear", mpa(limits.lower_shear.pressure()), "27.453");
    let mode = limits.lower_shear.mode().unwrap();
    assert_eq!(mode.directions, [WallDirection::Axial, WallDirection::Hoop, WallDirection::Radial]);
}

/// The worst excess at 0, 40 and 80 MPa is +130.4, −17.1, +130.4.
#[test]
fn the_margin_falls_on_both_sides() {
    let wall = state_b().wall();
    for (p, excess) in [(0, "130.4"), (40, "-17.1"), (80, "130.4")] {
        let margin = wall.failing_arcs(p.mpa()).unwrap().least_margin();
        assert_printed(&format!("excess at {p}"), -margin.in_mpa(), excess);
    }
}

/// An arc through the top of the hole is one arc.
#[test]
fn an_arc_through_zero_is_centred_there() {
    let wall =
        Case { sh_max: 56.0, azimuth: 90.0, strength: Strength::mohr_coulomb(9.mpa(), 32.deg()), ..state_b() }.wall();
    let arc = wall.breakout(27.mpa()).unwrap().unwrap();
    let centre = arc.centre.in_deg();
    assert!(centre.min(180.0 - centre) < 1e-9, "{centre}");
    assert_printed("half width", 0.5 * arc.width.in_deg(), "39.364");
}

/// In a vertical hole the tool face counts from the azimuth that was given, and the card prints which;
/// the breakout itself lies at bearings 120 and 300 either way.
#[test]
fn the_same_vertical_hole_under_two_azimuths() {
    for (hole_azimuth, toolface, bearing) in [(0.0, 120.0, "120.0"), (123.0, 177.0, "300.0")] {
        let wall = Case { hole_azimuth, ..state_b() }.wall();
        let arc = wall.breakout(30.mpa()).unwrap().unwrap();
        assert!(agree(arc.centre.in_deg(), toolface, 1e-6), "{hole_azimuth}: {}", arc.centre);
        assert!(agree(arc.bearing.unwrap().in_deg().rem_euclid(180.0), 120.0, 1e-6));
        let card = wall.failing_arcs(30.mpa()).unwrap().card();
        let headline = &card.explanation.headline;
        let place = format!("middle at tool face {toolface:.1}° (bearing {bearing}° from true north) and at +180°");
        assert!(headline.contains(&place), "{headline}");
        let from = format!("tool faces count clockwise from azimuth {hole_azimuth:05.1}°");
        assert!(card.explanation.notes.iter().any(|n| n.contains(&from)), "{:?}", card.explanation.notes);
    }
}

/// Parting needs the least principal stress in the wall, not the hoop alone (which
/// gives 50.552), and through the axial stress Poisson's ratio has a say; not in a vertical hole in a
/// stress with a vertical axis.
#[test]
fn parting_is_a_principal_stress_and_poissons_ratio_counts() {
    let deviated = |poisson: f64| {
        let s = Stress::from_components(Components {
            nn: 50.mpa(),
            ee: 42.mpa(),
            dd: 60.mpa(),
            ne: 3.mpa(),
            ed: 9.mpa(),
            nd: (-8).mpa(),
        })
        .unwrap();
        let azimuth = Azimuth::from_true_north(110.deg());
        let chain = Attitude { inclination: 50.deg(), azimuth }.chain().unwrap();
        let rock = Rock { poisson, tensile_strength: 2.mpa(), strength: state_b().strength };
        Wall::new(WallInputs { stress: chain.carry(&s), pore: 20.mpa(), rock }).unwrap().limits().initiation
    };
    for (poisson, pressure) in [(0.0, "40.454"), (0.25, "38.755"), (0.4, "37.447")] {
        assert_printed("initiation", mpa(deviated(poisson).pressure()), pressure);
    }
    assert_printed("tool face", deviated(0.25).toolface().unwrap().in_deg(), "100.0");
    let vertical = |poisson: f64| {
        let wall = state_b().wall().inputs();
        let rock = Rock { poisson, ..wall.rock };
        mpa(Wall::new(WallInputs { rock, ..wall }).unwrap().limits().initiation.pressure())
    };
    assert!(agree(vertical(0.0), vertical(0.4), 1e-12));
}

/// A limit may be below the pore pressure or negative; it is reported as it is, and the
/// range says that the pore pressure governs.
#[test]
fn strong_rock_has_limits_below_the_pore_pressure() {
    let strong = |ucs: f64| Case { strength: Strength::mohr_coulomb_ucs(ucs.mpa(), 30.deg()), ..state_b() }.wall();
    assert!(agree(mpa(strong(150.0).limits().lower_shear.pressure()), 3.75, 1e-9));
    let negative = strong(200.0).limits();
    assert!(agree(mpa(negative.lower_shear.pressure()), -8.75, 1e-9));
    assert!(negative.lower_shear.in_tension());
    assert!(negative.card().passed());
    let choices = RangeChoices {
        allowed_width: 0.deg(),
        margin_bottom: 0.5.mpa(),
        margin_top: 1.mpa(),
        tvd_below_rotary: 2600.m(),
    };
    let bottom = strong(150.0).recommended(choices).unwrap().bottom.unwrap();
    assert_eq!(bottom.governed_by, Governs::PorePressure);
    assert!(agree(bottom.pressure.in_mpa(), 20.5, 1e-12));
}

/// State B, vertical: the lower limit at widths 0/30/60/90°.
#[test]
fn the_lower_limit_falls_with_the_allowed_width() {
    let wall = state_b().wall();
    for (width, pressure) in [(0, "32.59"), (30, "31.59"), (60, "28.84"), (90, "25.09")] {
        let limits = wall.limits_at_width(width.deg()).unwrap();
        assert_eq!(limits.lower_shear.kind(), LimitKind::LowerShear);
        if width == 30 {
            // DIFFERENCE: 31.585 rounds to 31.58 or 31.59; held to the exact 31.58494 below.
            assert!(agree(mpa(limits.lower_shear.pressure()), 31.584936, 1e-6));
            continue;
        }
        assert_printed(&format!("at {width}°"), mpa(limits.lower_shear.pressure()), pressure);
    }
}
