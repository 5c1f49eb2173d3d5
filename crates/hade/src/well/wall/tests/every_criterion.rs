//! Properties of a wall under every criterion: impermeable, permeable and partly sealed, warmed and
//! cooled, with and without a plane of weakness.
#![cfg(test)]

use proptest::prelude::*;

use super::by_force::Force;
use super::walls_at_random::{CRITERIA, NUMBERS, Numbers, Plain, PlainRock};
use super::{Wall, choices};
use crate::card::{Card, Data, Explain};
use crate::rock::with_law;
use crate::units::{Pressure, Quantity, Units};
use crate::well::wall::round::{CIRCLE, OnCircle};
use crate::well::wall::shear::Window;

fn any_plain() -> impl Strategy<Value = Plain> {
    (proptest::array::uniform32(0.0..1.0_f64), 0..CRITERIA).prop_map(|(u, criterion)| {
        let numbers: [f64; NUMBERS] = std::array::from_fn(|k| u[k]);
        Plain::at_random(&numbers, criterion)
    })
}

fn failed(card: &Card) -> String {
    card.checks.iter().filter(|c| !c.passed).map(|c| format!("{c:?}; ")).collect()
}

/// The ends of the whole wall's safe pressures in MPa, where it has any.
fn ends(wall: &Wall) -> Option<(f64, f64)> {
    match wall.shear.window() {
        Window::Open { lower, upper } => {
            Some((lower.map_or(f64::NEG_INFINITY, |p| p.value * 1e-6), upper.map_or(f64::INFINITY, |p| p.value * 1e-6)))
        }
        Window::Closed { .. } => None,
    }
}

proptest! {
    #![proptest_config(ProptestConfig::with_cases(60))]

    /// Every card passes its own checks, and no number that comes out is not a number.
    #[test]
    fn every_card_of_every_wall_passes_its_checks(
        plain in any_plain(), width in 1.0..170.0_f64, pressure in 0.0..80.0_f64, theta in 0.0..360.0_f64,
    ) {
        let wall = plain.wall();
        for card in [
            wall.limits().card(),
            wall.limits_at_width(width.deg()).unwrap().card(),
            wall.failing_arcs(pressure.mpa()).unwrap().card(),
            wall.stress_at(pressure.mpa(), theta.deg()).unwrap().card(),
            wall.recommended(choices(width)).unwrap().card(),
        ] {
            prop_assert!(card.passed(), "{plain:?}: {}: {}", card.title(), failed(&card));
            for (place, number) in card.outcome.numbers() {
                prop_assert!(number.is_finite(), "{plain:?}: {}: {place}", card.title());
            }
        }
    }
}

/// Mogi–Coulomb where the stress across the wall becomes the largest: three edges within 2.5° of tool face, of which the
/// samples saw one.
#[test]
fn a_narrow_arc_beside_a_wide_one() {
    let plain = Plain {
        six: [
            70.4821240195416,
            33.721938193752756,
            41.12446569361184,
            2.96863368714666,
            -5.429027297366765,
            -0.032627131858775194,
        ],
        inclination: 124.53551035864639,
        azimuth: 129.29089228039814,
        pore: 23.128076047021242,
        poisson: 0.0797339922822111,
        tensile: 0.0,
        rock: PlainRock::MogiCoulomb { c: 8.119519714422735, phi: 14.415030296730233 },
        seepage: Some([0.164902826418692, 0.9061539576878241]),
        thermal: None,
        weak: None,
    };
    let pressure = 68.91160640132973;
    let arcs = plain.wall().failing_arcs(pressure.mpa()).unwrap().arcs();
    assert_eq!(arcs.len(), 2, "{arcs:?}");
    let force = Force::new(&plain);
    for arc in arcs {
        for side in [-1.0, 1.0] {
            let edge = arc.centre.in_deg() + side * 0.5 * arc.width.in_deg();
            assert!(
                force.excess(edge - side * 1e-4, pressure) > 0.0 && force.excess(edge + side * 1e-4, pressure) < 0.0
            );
        }
    }
}

/// Where the wall is least bad two hills are level, a degree apart: the checks see both.
#[test]
fn two_hills_within_a_degree() {
    let plain = Plain {
        six: [
            72.54871085245588,
            38.21232513990425,
            24.80887266630914,
            -0.5162330684517356,
            1.656715875007448,
            3.028634226614985,
        ],
        inclination: 0.0,
        azimuth: 273.8655079995874,
        pore: 0.0,
        poisson: 0.5,
        tensile: 0.0,
        rock: PlainRock::MohrCoulomb { c: 1.0, phi: 41.674564020707166 },
        seepage: None,
        thermal: None,
        weak: None,
    };
    let card = plain.wall().limits().card();
    assert!(card.passed(), "{}", failed(&card));
}

proptest! {
    #![proptest_config(ProptestConfig::with_cases(1500))]

    /// By force: nothing fails between the ends of the safe pressures, something does outside, and where
    /// none is said to be safe something fails at every pressure.
    #[test]
    fn the_ends_of_the_safe_pressures_by_force(plain in any_plain()) {
        let (wall, force) = (plain.wall(), Force::new(&plain));
        let size = wall.shear.scale() * 1e-6;
        let Some((lower, upper)) = ends(&wall) else {
            for k in -60..=120 {
                let p = size * f64::from(k) / 60.0;
                prop_assert!(force.fails(p, 72) || force.worst(p, 720) > -1e-9 * size, "{plain:?}: holds at {p}");
            }
            return Ok(());
        };
        prop_assert!(lower <= upper, "{plain:?}");
        let nudge = 1e-7 * size;
        for (end, out) in [(lower, -1.0), (upper, 1.0)] {
            if end.is_finite() {
                let inside = force.worst(end - out * nudge.min(0.5 * (upper - lower)), 720);
                prop_assert!(inside <= 1e-9 * size, "{plain:?}: fails by {inside} inside {end}");
                prop_assert!(force.worst(end + out * nudge, 720) > 0.0, "{plain:?}: holds outside {end}");
            }
        }
        let (from, to) = (lower.max(-30.0 * size), upper.min(30.0 * size));
        for k in 1..24 {
            let p = from + (to - from) * f64::from(k) / 24.0;
            prop_assert!(!force.fails(p, 180) || force.worst(p, 720) <= 1e-9 * size, "{plain:?}: fails at {p}");
            let beyond = size * 0.002 * 1.4_f64.powi(k);
            // Mogi–Coulomb may hold again; the others do not.
            if wall.shear.is_convex() {
                for p in [lower - beyond, upper + beyond].into_iter().filter(|p| p.is_finite()) {
                    prop_assert!(force.fails(p, 180) || force.worst(p, 1440) > 0.0, "{plain:?}: holds at {p}");
                }
            }
        }
    }

    /// By force: the same places fail, on a grid of a twentieth of a degree.
    #[test]
    fn failing_arcs_by_force(plain in any_plain(), pressure in 0.0..80.0_f64) {
        const PLACES: u32 = 3600;
        let arcs = plain.wall().failing_arcs(pressure.mpa()).unwrap().arcs();
        let force = Force::new(&plain);
        for (k, fails) in (0..PLACES).zip(force.failing(pressure, PLACES)) {
            let theta = f64::from(k) * 0.05;
            let off = |middle: f64| {
                let off = (theta - middle).rem_euclid(180.0);
                off.min(180.0 - off)
            };
            let listed = arcs.iter().any(|arc| arc.whole_wall || off(arc.centre.in_deg()) < 0.5 * arc.width.in_deg());
            let at_an_edge = arcs.iter().any(|arc| (off(arc.centre.in_deg()) - 0.5 * arc.width.in_deg()).abs() < 1e-6);
            prop_assert!(
                listed == fails || at_an_edge || force.excess(theta, pressure).abs() < 1e-9,
                "{plain:?}: at {theta}, {pressure} MPa: {arcs:?}"
            );
        }
    }

    /// All samples of a part at once are those of its derivatives' values one by one.
    #[test]
    fn samples_of_a_part_are_its_values(plain in any_plain(), pressure in 0.0..80.0_f64) {
        let shear = plain.wall().shear;
        with_law!(shear.law, criterion => {
            let excess = shear.excess(criterion, pressure * 1e6);
            for part in 0..excess.parts() {
                let one_by_one = CIRCLE.each(|c, s| excess.part(part, c, s).value);
                for (at_once, alone) in excess.scan_part(part, &CIRCLE).into_iter().zip(one_by_one) {
                    prop_assert!((at_once - alone).abs() <= 1e-13 * shear.scale(), "{plain:?}: {part}: {at_once} {alone}");
                }
            }
        });
    }

    /// By force: stresses, effective stresses and slip at one place.
    #[test]
    fn stress_at_a_place_by_force(plain in any_plain(), pressure in 0.0..80.0_f64, theta in 0.0..360.0_f64) {
        let at = plain.wall().stress_at(pressure.mpa(), theta.deg()).unwrap();
        let force = Force::new(&plain);
        let got = [at.radial, at.hoop, at.axial, at.shear].map(Pressure::in_mpa);
        for (got, want) in got.into_iter().zip(force.parts(theta, pressure)) {
            prop_assert!((got - want).abs() < 1e-9, "{plain:?}: {got} {want}");
        }
        for (got, want) in at.effective.principal().into_iter().zip(force.principal(theta, pressure)) {
            prop_assert!((got.in_mpa() - want).abs() < 1e-9, "{plain:?}: {got} {want}");
        }
        if let Some(margin) = at.weak_plane_margin() {
            prop_assert!((margin.in_mpa() + force.slip(theta, pressure)).abs() < 1e-6, "{plain:?}: {margin}");
        }
    }

    /// Limits are those of hole, stress and plane turned together about the vertical.
    #[test]
    fn limits_stay_when_all_is_turned_about_the_vertical(plain in any_plain(), turn in 0.0..360.0_f64) {
        let [nn, ee, dd, ne, ed, nd] = plain.six;
        let (s, c) = turn.to_radians().sin_cos();
        let mut turned = plain;
        turned.six = [
            c * c * nn - 2.0 * s * c * ne + s * s * ee,
            s * s * nn + 2.0 * s * c * ne + c * c * ee,
            dd,
            s * c * (nn - ee) + (c * c - s * s) * ne,
            s * nd + c * ed,
            c * nd - s * ed,
        ];
        turned.azimuth = (plain.azimuth + turn).rem_euclid(360.0);
        turned.weak = plain.weak.map(|[strike, rest @ ..]| {
            let [dip, cohesion, friction] = rest;
            [(strike + turn).rem_euclid(360.0), dip, cohesion, friction]
        });
        let (one, two) = (plain.wall().limits(), turned.wall().limits());
        let size = 1e-9 * plain.wall().shear.scale();
        for (one, two) in one.all().iter().zip(two.all()) {
            match (one.pressure(), two.pressure()) {
                (Some(a), Some(b)) => prop_assert!((a - b).si().abs() < size, "{plain:?}: {one:?} {two:?}"),
                (a, b) => prop_assert_eq!(a.is_some(), b.is_some(), "{:?}: {:?} {:?}", plain, one, two),
            }
        }
    }

    /// Everything but the sign of τθz repeats on the far side.
    #[test]
    fn the_far_side_repeats(plain in any_plain(), pressure in 0.0..80.0_f64, theta in 0.0..180.0_f64) {
        let wall = plain.wall();
        let at = |theta: f64| wall.stress_at(pressure.mpa(), theta.deg()).unwrap();
        let (near, far) = (at(theta), at(theta + 180.0));
        let small = 1e-3.pa();
        prop_assert!((near.hoop - far.hoop).abs() < small && (near.axial - far.axial).abs() < small);
        prop_assert!((near.shear + far.shear).abs() < small);
        for (a, b) in near.effective.principal().into_iter().zip(far.effective.principal()) {
            prop_assert!((a - b).abs() < small);
        }
        if let (Some(a), Some(b)) = (near.weak_plane_margin(), far.weak_plane_margin()) {
            prop_assert!((a - b).abs() < small, "{plain:?}: {a} {b}");
        }
    }

    /// A stronger rock holds from a lower pressure and up to a higher one.
    #[test]
    fn a_stronger_rock_holds_at_more_pressures(plain in any_plain(), factor in 1.02..2.0_f64) {
        let strong = Plain { rock: plain.rock.stronger(factor), ..plain };
        let (weak, strong) = (ends(&plain.wall()), ends(&strong.wall()));
        let Some((lower, upper)) = weak else { return Ok(()) };
        prop_assert!(strong.is_some(), "{plain:?}: the stronger rock holds at no pressure");
        let (lower_strong, upper_strong) = strong.unwrap();
        // Where the plane of weakness limits it the rock has no say.
        let small = 1e-9 * plain.wall().shear.scale() * 1e-6;
        prop_assert!(lower_strong <= lower + small && upper_strong >= upper - small, "{plain:?}: {weak:?} {strong:?}");
        if plain.weak.is_none() && lower.is_finite() && upper.is_finite() {
            prop_assert!(lower_strong < lower && upper_strong > upper, "{plain:?}: {weak:?} {strong:?}");
        }
    }

    /// A wall whose cake holds all the pressure back, and of no Biot's coefficient, is impermeable.
    #[test]
    fn a_sealed_wall_is_impermeable(plain in any_plain(), biot in 0.0..1.0_f64) {
        let bare = Plain { seepage: None, ..plain }.wall();
        for sealed in [bare.partly_sealed(0.0, 1.0).unwrap(), bare.partly_sealed(biot, 1.0).unwrap()] {
            prop_assert_eq!(ends(&sealed), ends(&bare), "{:?}", plain);
        }
        let none = bare.permeable(biot).unwrap().impermeable().unwrap();
        prop_assert_eq!(none, bare);
    }

    /// Below the lower limit the widest failing arc only grows; the pressure for a width falls with it.
    #[test]
    fn a_wider_arc_is_allowed_at_a_lower_pressure(plain in any_plain()) {
        let wall = plain.wall();
        // Mogi–Coulomb may stop failing again lower down.
        if ends(&wall).is_none() || !wall.shear.is_convex() {
            return Ok(());
        }
        let mut last = f64::INFINITY;
        for width in [0.0, 10.0, 30.0, 60.0, 90.0, 150.0, 180.0] {
            let limit = wall.limits_at_width(width.deg()).unwrap().lower_shear;
            if limit.is_unbounded() {
                last = f64::NEG_INFINITY;
                continue;
            }
            let now = limit.pressure().unwrap().si();
            // On a plane without cohesion that lies along the wall, two arcs are kept apart only by the pressure beyond
            // the pore pressure: a gap of some 1e-8 rad is seen at one pressure and not at the next.
            prop_assert!(now <= last + 1e-7 * wall.shear.scale(), "{plain:?}: {width}: {now} {last}");
            last = now;
        }
    }
}

/// Both ends against halving on a grid of a hundredth of a degree, criterion by criterion: the grid
/// misses what lies between its places, so its lower end is at or below the true one, and its upper end
/// at or above it.
#[test]
fn ends_against_halving_on_a_fine_grid() {
    let mut rng = Numbers::new(20);
    let (mut done, mut largest) = (0, [0.0_f64; CRITERIA]);
    for (criterion, largest) in largest.iter_mut().enumerate() {
        let mut left = 3;
        while left > 0 {
            let plain = Plain::at_random(&rng.next_numbers(), criterion);
            let wall = plain.wall();
            let Some((lower, upper)) = ends(&wall).filter(|(l, u)| l.is_finite() && u.is_finite()) else { continue };
            left -= 1;
            done += 1;
            let (force, size) = (Force::new(&plain), wall.shear.scale() * 1e-6);
            let middle = 0.5 * (lower + upper);
            let by_grid = [(lower - 0.01 * size, lower, 1.0), (upper + 0.01 * size, upper, -1.0)];
            for (outside, end, sense) in by_grid {
                let grid = force.edge(outside, middle, 18_000);
                let short = (end - grid) * sense;
                assert!(short > -1e-10 * size && short < 2e-5 * size, "{plain:?}: {end} and {grid} by the grid");
                *largest = largest.max(short / size);
            }
        }
    }
    assert_eq!(done, 3 * CRITERIA);
    eprintln!("the grid is short by at most {largest:?} of the size");
}

/// Rock without cohesion or friction, at Poisson's ratios 0 and ½, in stresses of one kind, of none, of
/// tension, a thousand times as large; with pore pressure of nothing and above all stresses: nothing
/// panics, hangs or comes out as no number.
#[test]
fn extreme_walls_end_in_numbers() {
    const FIELDS: [[f64; 6]; 10] = [
        [40.0, 40.0, 40.0, 0.0, 0.0, 0.0],
        [0.0; 6],
        [50e3, 42e3, 60e3, 3e3, 9e3, -8e3],
        [-20.0, -20.0, -20.0, 0.0, 0.0, 0.0],
        [-20.0, -40.0, -10.0, 3.0, 5.0, -2.0],
        [60.0, 0.0, 0.0, 0.0, 0.0, 0.0],
        [0.0, 0.0, 0.0, 10.0, 12.0, -9.0],
        [50.0, 42.0, 60.0, 3.0, 9.0, -8.0],
        [55.0, 40.0, 60.0, 0.0, 0.0, 0.0],
        // Alike but for what is lost in rounding.
        [1e-6, 2e-6, 3e-6, 0.0, 0.0, 1e-6],
    ];
    type Kind = (Option<[f64; 2]>, Option<[f64; 3]>, Option<[f64; 4]>);
    const KINDS: [Kind; 7] = [
        (None, None, None),
        (Some([1.0, 0.0]), None, None),
        (Some([0.0, 1.0]), None, None),
        (Some([0.7, 0.5]), Some([200.0, 50e3, 1e-5]), None),
        (None, Some([-300.0, 50e3, 1e-5]), Some([0.0, 0.0, 0.0, 0.0])),
        (None, None, Some([120.0, 90.0, 0.0, 60.0])),
        (Some([1.0, 0.0]), None, Some([70.0, 35.0, 5.0, 30.0])),
    ];
    let mut rocks = Vec::new();
    for (c, phi) in [(0.0, 30.0), (10.0, 0.0), (5.0, 89.0), (0.0, 0.0), (1e4, 30.0)] {
        rocks.push(PlainRock::MohrCoulomb { c, phi });
        rocks.push(PlainRock::MogiCoulomb { c, phi });
        // It takes friction angles up to 85°.
        if phi > 0.0 {
            rocks.push(PlainRock::ModifiedLade { c, phi: phi.min(85.0) });
        }
        rocks.extend((0..3).map(|fit| PlainRock::DruckerPrager { fit, c, phi }));
    }
    for (sigma_ci, m_i, gsi, disturbance) in [(50.0, 10.0, 5.0, 1.0), (50.0, 10.0, 100.0, 0.0), (5e4, 33.0, 80.0, 0.0)]
    {
        rocks.push(PlainRock::HoekBrown { sigma_ci, m_i, gsi, disturbance });
    }
    let mut count = 0_usize;
    for rock in &rocks {
        for (f, six) in FIELDS.into_iter().enumerate() {
            // Every criterion meets every field; kinds, pore pressures and holes take turns.
            {
                count += 1;
                let (seepage, thermal, weak) = KINDS[count % KINDS.len()];
                let poisson = [0.0, 0.25, 0.5][(count / 2) % 3];
                let pore = [0.0, 20.0, 300.0][(count / 5 + f) % 3];
                let (inclination, azimuth) = [(0.0, 0.0), (90.0, 30.0), (35.0, 70.0), (180.0, 10.0)][(count / 3) % 4];
                let tensile = if count.is_multiple_of(2) { 2.0 } else { 0.0 };
                let plain =
                    Plain { six, inclination, azimuth, pore, poisson, tensile, rock: *rock, seepage, thermal, weak };
                let wall = plain.wall();
                let mut outcomes = vec![
                    wall.limits().outcome().write(),
                    wall.failing_arcs(30.mpa()).unwrap().outcome().write(),
                    wall.failing_arcs(pore.mpa()).unwrap().outcome().write(),
                    wall.around(30.mpa()).unwrap().outcome().write(),
                    wall.stress_at(30.mpa(), 77.deg()).unwrap().outcome().write(),
                ];
                if count.is_multiple_of(4) {
                    outcomes.push(wall.recommended(choices(30.0)).unwrap().outcome().write());
                } else {
                    outcomes.push(wall.limits_at_width(60.deg()).unwrap().outcome().write());
                }
                for outcome in outcomes {
                    // What is not finite is written as nothing.
                    assert!(!outcome.numbers().is_empty(), "{plain:?}");
                    for (place, number) in outcome.numbers() {
                        assert!(number.is_finite(), "{plain:?}: {place}");
                    }
                }
                for limit in wall.limits().all() {
                    for pressure in [limit.pressure(), limit.least_bad(), limit.short_by(), limit.own_side()] {
                        assert!(pressure.is_none_or(|p| p.si().is_finite()), "{plain:?}: {limit:?}");
                    }
                    let said = limit.pressure().is_some() || limit.least_bad().is_some() || limit.is_unbounded();
                    assert!(said, "{plain:?}: {limit:?}");
                }
            }
        }
    }
    assert!(count > 300);
}

/// Arcs may all but meet where a plane of weakness without cohesion bears no shear.
#[test]
fn arcs_beside_a_place_without_shear_pass_their_checks() {
    let plain = Plain {
        six: [
            22.100_311_352_949_358,
            30.851_009_944_680_808,
            20.0,
            1.565_846_614_467_814,
            7.245_503_597_016_995,
            -3.487_867_915_104_687,
        ],
        inclination: 0.0,
        azimuth: 0.0,
        pore: 0.0,
        poisson: 0.0,
        tensile: 0.0,
        rock: PlainRock::MogiCoulomb { c: 29.722_122_976_772_32, phi: 33.321_109_931_111_34 },
        seepage: Some([0.0, 0.0]),
        thermal: None,
        weak: Some([205.137_893_296_132_4, 90.0, 0.0, 5.0]),
    };
    let card = plain.wall().failing_arcs(39.708_965_183_518_71.mpa()).unwrap().card();
    assert!(card.passed(), "{}", failed(&card));
    assert!(card.outcome.numbers().len() > 4);
}
