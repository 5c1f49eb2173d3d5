//! Where wall stability goes wrong, each with a number from an independent numpy/scipy
//! implementation (compression positive, MPa, degrees). State B: Sv 60, SHmax 55 at azimuth 030,
//! Shmin 40, pore pressure 20, Poisson 0.25, cohesion 10, friction angle 30°.

use hade::prelude::*;
use hade::rock::{Rock, Strength};
use hade::well::{Governs, LimitKind, RangeChoices, Thermal, Wall, WallDirection, WallInputs};
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

fn choices(width: f64) -> RangeChoices {
    RangeChoices {
        allowed_width: width.deg(),
        margin_bottom: 0.5.mpa(),
        margin_top: 0.mpa(),
        tvd_below_rotary: 2600.m(),
    }
}

/// The safe pressures of Mogi–Coulomb need not be one interval. A vertical hole, both horizontal
/// stresses 50 MPa, vertical stress 20, pore pressure 10, cohesion 2.5, friction angle 30°: it holds from
/// 40.9275 to 48.4070 and again from 51.5930 to 59.0725 (roots of the criterion by scipy's brentq).
/// The lower interval is reported, the other is told; Mohr–Coulomb holds at none.
#[test]
fn mogi_coulomb_may_hold_in_two_intervals() {
    let strength = Strength::mogi_coulomb(2.5.mpa(), 30.deg());
    let case = Case { sv: 20.0, sh_max: 50.0, sh_min: 50.0, strength, ..state_b() };
    let wall = Wall::new(WallInputs { pore: 10.mpa(), ..case.wall().inputs() }).unwrap();
    let limits = wall.limits();
    assert!(agree(mpa(limits.lower_shear.pressure()), 40.927_464_818_530_74, 1e-9));
    assert!(agree(mpa(limits.upper_shear.pressure()), 48.407_034_447_315_76, 1e-9));
    let card = limits.card();
    assert!(card.passed(), "{:#?}", card.checks);
    let told = "The whole wall holds again from 51.59 MPa to 59.07 MPa";
    assert!(card.explanation.notes.iter().any(|n| n.starts_with(told)), "{:?}", card.explanation.notes);
    for (pressure, holds) in [(44.0, true), (50.0, false), (55.0, true), (62.0, false)] {
        assert_eq!(wall.breakout(pressure.mpa()).unwrap().is_none(), holds, "{pressure}");
    }
    let coulomb = wall.with_strength(Strength::mohr_coulomb(2.5.mpa(), 30.deg())).unwrap();
    assert!(coulomb.limits().lower_shear.pressure().is_none());
}

/// A permeable wall has the pressure in the hole for its pore pressure. State B, vertical: the hoop
/// equation 3 SHmax − Shmin − 2p = UCS gives 45.179, which leaves out what seepage adds (α = 0); with
/// that the equation gives 57.77. The axial stress, 67.5 − p/3 − 13.33, is larger than the hoop stress
/// there, and the wall closes in below 58.58. Impermeable it is 32.590: Terzaghi's stress with the
/// formation's pore pressure belongs to that wall alone.
#[test]
fn what_passes_the_wall_is_said() {
    let wall = state_b().wall();
    let ucs = 20.0 * 3.0_f64.sqrt();
    let closes_in = |wall: Wall| {
        let limit = wall.limits().lower_shear;
        mpa(limit.pressure().or(limit.own_side()))
    };
    let permeable = wall.permeable(1.0).unwrap();
    assert_printed("impermeable", closes_in(wall), "32.590");
    assert_printed("permeable, no seepage stress", closes_in(wall.permeable(0.0).unwrap()), "45.179");
    // p (2 − 2η) = 3 SHmax − Shmin − 2η P_p − UCS with 2η = 2/3.
    let hoop_only = (3.0 * 55.0 - 40.0 - 20.0 * 2.0 / 3.0 - ucs) / (4.0 / 3.0);
    assert_printed("by the hoop stress", hoop_only, "57.8");
    let at = permeable.stress_at(hoop_only.mpa(), 120.deg()).unwrap();
    assert!(agree(at.hoop.in_mpa() - hoop_only, ucs, 1e-9) && at.axial > at.hoop);
    let by_hand = 3.0 * (60.0 + 0.25 * 2.0 * 15.0 - 20.0 * 2.0 / 3.0 - ucs);
    assert!(agree(closes_in(permeable), by_hand, 1e-9), "{}", closes_in(permeable));
    // A cake that holds back a share is between the two, and all the higher the less it does.
    let mut last = closes_in(wall.partly_sealed(1.0, 1.0).unwrap());
    assert!(agree(last, closes_in(wall), 1e-9));
    for sealing in [0.8, 0.6, 0.4, 0.2, 0.0] {
        let now = closes_in(wall.partly_sealed(1.0, sealing).unwrap());
        assert!(now > last, "{sealing}: {now} {last}");
        last = now;
    }
    assert!(agree(last, by_hand, 1e-9));
    let at = permeable.stress_at(30.mpa(), 0.deg()).unwrap();
    assert!(agree(at.effective.pore().in_mpa(), 30.0, 1e-12));
    let at = wall.stress_at(30.mpa(), 0.deg()).unwrap();
    assert!(agree(at.effective.pore().in_mpa(), 20.0, 1e-12));
}

/// State B, vertical, permeable with α = 1: it parts at 40.25 and no pressure keeps it from shearing;
/// impermeable beside it, 32.59 is safe.
#[test]
fn a_permeable_wall_has_no_safe_pressure_where_an_impermeable_one_has() {
    let wall = state_b().wall();
    let limits = wall.permeable(1.0).unwrap().limits();
    assert!(agree(mpa(limits.initiation.pressure()), 40.25, 1e-9));
    assert!(limits.lower_shear.pressure().is_none() && limits.upper_shear.pressure().is_none());
    assert!(limits.lower_shear.least_bad().is_some() && limits.card().passed());
    assert_printed("impermeable", mpa(wall.limits().lower_shear.pressure()), "32.59");
    assert!(wall.permeable(1.0).unwrap().recommended(choices(0.0)).unwrap().is_empty());
    assert!(!wall.recommended(choices(0.0)).unwrap().is_empty());
}

/// Looking only every degree is 4.7e-4 MPa low, on the unsafe side: modified Lade, well 35/70, is
/// 27.33520, and by the grid 27.33473.
#[test]
fn modified_lade_between_whole_degrees() {
    let strength = Strength::modified_lade(10.mpa(), 30.deg());
    let wall = Case { inclination: 35.0, hole_azimuth: 70.0, strength, ..state_b() }.wall();
    let limits = wall.limits();
    assert_printed("lower shear", mpa(limits.lower_shear.pressure()), "27.33520");
    assert!(limits.card().passed());
    let holds_on_the_grid = |p: f64| {
        (0..180).all(|theta| {
            let at = wall.stress_at(p.mpa(), f64::from(theta).deg()).unwrap();
            strength.margin(&at.effective) >= 0.mpa()
        })
    };
    assert!(holds_on_the_grid(27.334_74) && !holds_on_the_grid(27.334_72));
}

/// A hole that rises: its top stays the upper side, and "clockwise looking down the hole" looks up.
/// Rising 30° above level towards 040° its top points up and back, to 220°, and its right to 130°; told
/// as the hole that comes down the same line, 60° towards 220°, the wall is the same with tool faces the
/// other way round.
#[test]
fn a_hole_that_rises_has_its_top_above() {
    let rising = Case { inclination: 120.0, hole_azimuth: 40.0, ..state_b() }.wall();
    let falling = Case { inclination: 60.0, hole_azimuth: 220.0, ..state_b() }.wall();
    let bearing = |wall: &Wall, theta: f64| {
        let at = wall.stress_at(30.mpa(), theta.deg()).unwrap();
        at.bearing.unwrap().in_deg()
    };
    assert!(agree(bearing(&rising, 0.0), 220.0, 1e-9) && agree(bearing(&rising, 90.0), 130.0, 1e-9));
    assert!(agree(bearing(&falling, 0.0), 220.0, 1e-9) && agree(bearing(&falling, 90.0), 310.0, 1e-9));
    for theta in [0.0, 20.0, 77.0, 130.0] {
        let (up, down) =
            (rising.stress_at(30.mpa(), theta.deg()).unwrap(), falling.stress_at(30.mpa(), (-theta).deg()).unwrap());
        for (a, b) in [(up.hoop, down.hoop), (up.axial, down.axial), (up.shear, down.shear)] {
            assert!(agree(a.in_mpa(), b.in_mpa(), 1e-9), "{theta}");
        }
        // A level look at what the hole meets: the whole tensor in north, east, down is one.
        use Axis::{X, Y, Z};
        for (a, b) in [(X, X), (Y, Y), (Z, Z), (X, Y), (Y, Z), (X, Z)] {
            let got = up.in_geographic().component(a, b).in_mpa();
            assert!(agree(got, down.in_geographic().component(a, b).in_mpa(), 1e-9), "{theta} {a:?}{b:?}");
        }
    }
    for (up, down) in rising.limits().all().iter().zip(falling.limits().all()) {
        assert!(agree(mpa(up.pressure()), mpa(down.pressure()), 1e-9));
        if let (Some(a), Some(b)) = (up.toolface(), down.toolface()) {
            assert!(
                agree((a.in_deg() + b.in_deg()).rem_euclid(180.0), 0.0, 1e-6)
                    || agree((a.in_deg() + b.in_deg()).rem_euclid(180.0), 180.0, 1e-6)
            );
        }
    }
    assert!(rising.limits().card().passed() && rising.around(30.mpa()).unwrap().card().passed());
}

/// On the far side of the hole all repeats but the sign of τ_θz.
#[test]
fn the_far_side_has_the_other_shear() {
    let wall = Case { inclination: 35.0, hole_azimuth: 70.0, ..state_b() }.wall();
    let (near, far) = (wall.stress_at(30.mpa(), 65.deg()).unwrap(), wall.stress_at(30.mpa(), 245.deg()).unwrap());
    assert!(near.shear.in_mpa().abs() > 1.0);
    assert!(agree(near.shear.in_mpa(), -far.shear.in_mpa(), 1e-9));
    assert!(agree(near.hoop.in_mpa(), far.hoop.in_mpa(), 1e-9) && agree(near.axial.in_mpa(), far.axial.in_mpa(), 1e-9));
    for (a, b) in near.effective.principal().iter().zip(far.effective.principal()) {
        assert!(agree(a.in_mpa(), b.in_mpa(), 1e-9));
    }
}

/// Below the pore pressure the wall is pulled from behind: under P_p − T₀ it spalls, and where it parts
/// below that already no pressure is safe.
#[test]
fn the_wall_spalls_below_the_pore_pressure_less_its_tensile_strength() {
    let least = |p: f64| {
        let wall = state_b().wall();
        (0..72)
            .map(|k| wall.stress_at(p.mpa(), (5.0 * f64::from(k)).deg()).unwrap().effective.principal()[2].in_mpa())
            .fold(f64::INFINITY, f64::min)
    };
    assert!(agree(least(17.0), -3.0, 1e-9) && agree(least(18.0), -2.0, 1e-9));
    let squeezed = Case { sv: 60.0, sh_max: 70.0, sh_min: 25.0, ..state_b() }.wall();
    let initiation = squeezed.limits().initiation;
    assert!(initiation.pressure().is_none() && initiation.least_bad().is_some());
    assert!(agree(mpa(initiation.own_side()), 3.0 * 25.0 - 70.0 - 20.0 + 2.0, 1e-9));
}

/// In rock of 150 MPa the pore pressure governs, and the range says so in words.
#[test]
fn the_pore_pressure_governs_in_strong_rock() {
    let strong = Case { strength: Strength::mohr_coulomb_ucs(150.mpa(), 30.deg()), ..state_b() }.wall();
    let card = strong.recommended(choices(0.0)).unwrap().card();
    assert!(card.passed());
    assert!(card.explanation.notes.iter().any(|n| n.contains("pore pressure governs")), "{:?}", card.explanation.notes);
}

/// Cooled by 20 K with E 20 GPa, α_T 1e-5 and ν 0.25 the wall parts 5.33 MPa sooner. Without Young's
/// modulus there is no such result, and none is made up for it.
#[test]
fn cooling_lowers_the_pressure_at_which_the_wall_parts() {
    let wall = state_b().wall();
    let cooling =
        |youngs_modulus: Pressure| Thermal { warming: (-20).kelvin(), youngs_modulus, expansion: 1e-5.per_kelvin() };
    let cooled = wall.thermal(cooling(20.gpa())).unwrap();
    let fall = mpa(wall.limits().initiation.pressure()) - mpa(cooled.limits().initiation.pressure());
    assert!(agree(fall, 16.0 / 3.0, 1e-9), "{fall}");
    assert!(cooled.limits().card().passed());
    for (youngs_modulus, given) in [(0.gpa(), "0 GPa"), (f64::NAN.gpa(), "NaN GPa"), ((-20).gpa(), "-20 GPa")] {
        let message = wall.thermal(cooling(youngs_modulus)).unwrap_err().to_string();
        let given = given.replace("GPa", "");
        assert!(message.starts_with("Young's modulus E is ") && message.contains("above zero"), "{message}");
        assert!(message.contains(given.trim()) || given.contains("-20"), "{message}");
    }
}

/// What the safe pressures of the other criteria are is one interval: inside it nothing fails, outside
/// something does, at any of many pressures.
#[test]
fn safe_pressures_of_convex_criteria_are_one_interval() {
    for strength in [
        Strength::mohr_coulomb(10.mpa(), 30.deg()),
        Strength::modified_lade(10.mpa(), 30.deg()),
        Strength::drucker_prager_inscribed(10.mpa(), 30.deg()),
        Strength::drucker_prager_circumscribed(10.mpa(), 30.deg()),
        Strength::drucker_prager_extension(10.mpa(), 30.deg()),
    ] {
        let wall = Case { inclination: 35.0, hole_azimuth: 70.0, strength, ..state_b() }.wall();
        let limits = wall.limits();
        let (lower, upper) = (mpa(limits.lower_shear.pressure()), mpa(limits.upper_shear.pressure()));
        assert!(lower < upper, "{}", strength.name());
        for k in -50..=150 {
            let p = lower + (upper - lower) * (f64::from(k) + 0.5) / 100.0;
            let holds = wall.failing_arcs(p.mpa()).unwrap().arcs().is_empty();
            assert_eq!(holds, (lower..=upper).contains(&p), "{} at {p}", strength.name());
        }
    }
}
