//! Tests of ensembles: the short way against whole walls, a numpy ensemble, threads, and bad input.
#![cfg(test)]

use super::*;
use crate::card::Explain;
use crate::frames::{Attitude, Azimuth, Plane};
use crate::rock::{HoekBrown, Rock, Strength};
use crate::spread::{Distribution, Draws, for_each_draw};
use crate::stress::{Components, Horizontals, Stress};
use crate::units::{Pressure, Units};
use crate::well::{Thermal, Wall, WallInputs, WeakPlane};

fn hole(i: f64, a: f64) -> Attitude {
    Attitude { inclination: i.deg(), azimuth: Azimuth::from_true_north(a.deg()) }
}

/// The wall of the numpy ensemble: Sv 60, SHmax 55 at 035°, Shmin 42, Pp 22, ν 0.25, UCS 30, φ 32°, hole 50° to 110°.
fn wall(strength: Strength, tensile: f64) -> Wall {
    wall_in(hole(50.0, 110.0), strength, tensile)
}

fn wall_in(hole: Attitude, strength: Strength, tensile: f64) -> Wall {
    let stress = Stress::from_horizontals(Horizontals {
        sv: 60.mpa(),
        sh_max: 55.mpa(),
        sh_min: 42.mpa(),
        sh_max_azimuth: Azimuth::from_true_north(35.deg()),
    })
    .unwrap();
    let stress = hole.named("KF-3 at 2950 m").chain().unwrap().carry(&stress);
    let rock = Rock { poisson: 0.25, tensile_strength: tensile.mpa(), strength };
    Wall::new(WallInputs { stress, pore: 22.mpa(), rock }).unwrap()
}

fn ucs() -> Strength {
    Strength::mohr_coulomb_ucs(30.mpa(), 32.deg())
}

fn numpys() -> [Drawn; 7] {
    [
        Drawn::sv(Distribution::normal(60.mpa(), 1.5.mpa())),
        Drawn::sh_max(Distribution::normal(55.mpa(), 3.mpa())),
        Drawn::sh_min(Distribution::normal(42.mpa(), 2.mpa())),
        Drawn::sh_max_azimuth(Distribution::normal(35.deg(), 8.deg())),
        Drawn::pore(Distribution::normal(22.mpa(), 1.mpa())),
        Drawn::ucs(Distribution::normal(30.mpa(), 4.mpa())),
        Drawn::friction_angle(Distribution::normal(32.deg(), 2.deg())),
    ]
}

/// numpy 2.4.6, 100 000 draws of its own generator, limits in closed form at 90 tool faces: P10 30.694268, P50
/// 32.734184, P90 34.936943 MPa, mean 32.787426 of those with a window; 3365 have none. The standard error of each
/// quantile is √(P (1 − P) / n) over the density there, about 0.009, 0.006 and 0.010 MPa; of the difference of two such
/// ensembles √2 times that; its grid of tool faces is at most 0.002 MPa low. Of the count it is √(3365 · 2) = 82.
#[test]
fn quantiles_of_the_bottom_are_those_of_numpy_within_the_sampling_error() {
    let ensemble = wall(ucs(), 2.0).ensemble(Draws { count: 100_000, start: 42 }, &numpys()).unwrap();
    let bottom = ensemble.bottom().unwrap();
    for (got, want, error) in
        [(bottom.p10, 30.694268, 0.009), (bottom.p50, 32.734184, 0.006), (bottom.p90, 34.936943, 0.010)]
    {
        let off = got.in_mpa() - want;
        assert!(off.abs() < 4.0 * std::f64::consts::SQRT_2 * error + 0.002, "{got}: off by {off}");
    }
    let outcome = ensemble.outcome();
    assert!((outcome.without_shear - 3365.0).abs() < 4.0 * 82.0, "{}", outcome.without_shear);
    assert!((outcome.bottom_mean.unwrap()[0].in_mpa() - 32.787_426).abs() < 0.03);
    // P(SHmax < Shmin) = Φ(−13/√13) = 1.56e-4 (scipy 1.17.1, ndtr).
    assert!((outcome.crossed - 15.6).abs() < 4.0 * 15.6_f64.sqrt(), "{}", outcome.crossed);
    assert_eq!(outcome.counted + outcome.crossed, 100_000.0);
}

/// Every kind of wall with everything of it drawn.
fn walls() -> Vec<(Wall, Vec<Drawn>)> {
    let stress = Stress::from_components(Components {
        nn: 50.mpa(),
        ee: 42.mpa(),
        dd: 60.mpa(),
        ne: 3.mpa(),
        nd: (-4).mpa(),
        ed: 5.mpa(),
    })
    .unwrap();
    let of = |i: f64, strength: Strength| {
        let stress = hole(i, 110.0).chain().unwrap().carry(&stress);
        let rock = Rock { poisson: 0.25, tensile_strength: 2.mpa(), strength };
        Wall::new(WallInputs { stress, pore: 22.mpa(), rock }).unwrap()
    };
    let (c, phi) = (10.mpa(), 30.deg());
    let drawn = |strength: &[Drawn]| {
        let mut all = vec![
            Drawn::sv(Distribution::normal(60.mpa(), 2.mpa())),
            Drawn::sh_max(Distribution::uniform(48.mpa(), 56.mpa())),
            Drawn::sh_min(Distribution::triangular(38.mpa(), 41.mpa(), 47.mpa())),
            Drawn::sh_max_azimuth(Distribution::normal(25.deg(), 20.deg())),
            Drawn::pore(Distribution::normal(22.mpa(), 2.mpa())),
            Drawn::poisson(Distribution::normal(0.25, 0.12)),
            Drawn::tensile_strength(Distribution::lognormal(2.mpa(), 1.mpa())),
            Drawn::inclination(Distribution::normal(3.deg(), 4.deg())),
            Drawn::hole_azimuth(Distribution::normal(110.deg(), 5.deg())),
        ];
        all.extend(strength);
        all
    };
    let c_phi = [
        Drawn::cohesion(Distribution::normal(10.mpa(), 4.mpa())),
        Drawn::friction_angle(Distribution::normal(30.deg(), 3.deg())),
    ];
    let mass = HoekBrown { sigma_ci: 80.mpa(), m_i: 12.0, gsi: 70.0, disturbance: 0.2 };
    let hoek = [
        Drawn::sigma_ci(Distribution::normal(80.mpa(), 8.mpa())),
        Drawn::m_i(Distribution::normal(12.0, 1.0)),
        Drawn::gsi(Distribution::normal(70.0, 15.0)),
        Drawn::disturbance(Distribution::uniform(0.0, 0.5)),
    ];
    let plane = Plane { strike: Azimuth::from_true_north(40.deg()), dip: 35.deg() };
    let weak = WeakPlane { plane, cohesion: 3.mpa(), friction_angle: 28.deg() };
    let thermal = Thermal { warming: (-15).kelvin(), youngs_modulus: 12.gpa(), expansion: 1e-5.per_kelvin() };
    let mut permeable = drawn(&c_phi);
    permeable.push(Drawn::biot(Distribution::triangular(0.6, 0.8, 1.05)));
    vec![
        (of(3.0, Strength::mohr_coulomb(c, phi)), drawn(&c_phi)),
        (of(60.0, Strength::mogi_coulomb(c, phi)), drawn(&c_phi)),
        (of(3.0, Strength::modified_lade(c, phi)), drawn(&c_phi)),
        (of(3.0, Strength::drucker_prager_inscribed(c, phi)), drawn(&c_phi)),
        (of(3.0, Strength::hoek_brown(mass)), drawn(&hoek)),
        (of(3.0, Strength::mohr_coulomb(c, phi)).weak_plane(weak).unwrap(), drawn(&c_phi)),
        (of(3.0, Strength::mohr_coulomb(c, phi)).thermal(thermal).unwrap(), drawn(&c_phi)),
        (of(3.0, Strength::mohr_coulomb(c, phi)).permeable(0.8).unwrap().thermal(thermal).unwrap(), permeable),
    ]
}

#[test]
fn the_short_way_to_a_wall_is_the_whole_one() {
    for (wall, drawn) in walls() {
        let ensemble = wall.ensemble(Draws { count: 400, start: 5 }, &drawn).unwrap().within_friction(0.7).unwrap();
        let ready = ensemble.inputs.prepared().unwrap();
        let whole = for_each_draw(&ready.sampler, 400, |draw| whole::stand_by_wall(&ensemble.inputs, &ready, draw));
        let mut seen = [0; 3];
        for (k, (a, b)) in ensemble.stands.iter().zip(&whole).enumerate() {
            let name = wall.strength().name();
            assert_eq!(a.left, b.left, "{name} {k}");
            for (x, y) in [(a.bottom, b.bottom), (a.top, b.top)] {
                match (x, y) {
                    (Some(x), Some(y)) => assert!((x - y).abs() < 2.0, "{name} {k}: {x} {y}"),
                    (x, y) => assert_eq!(x, y, "{name} {k}"),
                }
            }
            seen[if a.left.is_some() {
                0
            } else if a.range().is_some() {
                1
            } else {
                2
            }] += 1;
        }
        assert!(seen[0] > 5 && seen[1] > 20, "{} {seen:?}", wall.strength().name());
    }
}

#[test]
fn cards_pass_their_checks_and_replay() {
    for (wall, drawn) in walls() {
        let ensemble = wall.ensemble(Draws { count: 300, start: 9 }, &drawn).unwrap().at_tvd(2950.m()).unwrap();
        let ensemble = ensemble.correlated("S_Hmax", "S_hmin", 0.6).unwrap();
        let card = ensemble.card();
        let failed: Vec<_> = card.checks.iter().filter(|check| !check.passed).collect();
        assert!(card.passed(), "{}: {failed:#?}", card.title());
        let again = Ensemble::compute(ensemble.inputs()).unwrap().card();
        assert_eq!(again, card);
        let words = serde_json::to_string(&card).unwrap();
        assert!(words.len() < 60_000, "{}", words.len());
    }
}

#[test]
fn the_result_does_not_depend_on_the_number_of_threads() {
    let of = |threads: usize| {
        let pool = rayon::ThreadPoolBuilder::new().num_threads(threads).build().unwrap();
        pool.install(|| {
            let ensemble = wall(ucs(), 2.0).ensemble(Draws { count: 3_000, start: 1 }, &numpys()).unwrap();
            ensemble.outcome()
        })
    };
    let one = of(1);
    assert_eq!(one, of(2));
    assert_eq!(one, of(5));
}

#[test]
fn the_share_of_stable_walls_falls_to_nothing_at_both_ends() {
    let ensemble = wall(ucs(), 2.0).ensemble(Draws { count: 20_000, start: 8 }, &numpys()).unwrap();
    let at = |p: f64| ensemble.stable_share(p.mpa()).unwrap();
    assert_eq!((at(10.0), at(90.0)), (0.0, 0.0));
    let (bottom, top) = (ensemble.bottom().unwrap(), ensemble.top().unwrap());
    assert!(bottom.p10 < bottom.p50 && bottom.p50 < bottom.p90 && top.p10 < top.p90);
    // At the P90 of the bottom nine tenths of those with a bottom have reached it, less those that are past their top.
    let outcome = ensemble.outcome();
    let reached = 0.9 * (outcome.counted - outcome.without_shear) / outcome.counted;
    assert!(at(bottom.p90.in_mpa()) <= reached + 1e-4);
    for (pressure, share) in &outcome.stable {
        assert!((ensemble.stable_share(*pressure).unwrap() - share).abs() < 1e-12);
    }
    assert!(ensemble.stable_share(Pressure::mpa(f64::NAN)).is_err());
    // The strength matters most, and in its sense: a stronger rock has a lower bottom.
    let effects = &outcome.effects;
    assert_eq!(effects.len(), 7);
    assert!(effects[5].on_bottom < -0.3 && effects[4].on_bottom.abs() < 1.0);
    assert!(effects.iter().all(|e| e.narrows < 1.0) && effects.iter().any(|e| e.narrows > 0.05));
}

/// In a vertical hole the bottom is (3 S_Hmax − S_hmin − UCS + (q − 1) P_p) / (1 + q) (Kirsch with Mohr–Coulomb; a fact of
/// the trade): a straight line in the three, so that normal inputs give a normal bottom and first order is exact.
#[test]
fn a_vertical_hole_has_the_closed_form() {
    let drawn = [
        Drawn::ucs(Distribution::normal(30.mpa(), 3.mpa())),
        Drawn::sh_max(Distribution::normal(55.mpa(), 1.mpa())),
        Drawn::sh_min(Distribution::normal(42.mpa(), 1.5.mpa())),
    ];
    let count = 100_000;
    let ensemble = wall_in(hole(0.0, 0.0), ucs(), 2.0).ensemble(Draws { count, start: 2 }, &drawn).unwrap();
    let q = (61.0_f64).to_radians().tan().powi(2);
    let mean = (3.0 * 55.0 - 42.0 - 30.0 + (q - 1.0) * 22.0) / (1.0 + q);
    let changes = [-3.0 / (1.0 + q), 3.0 / (1.0 + q), -1.5 / (1.0 + q)];
    for (ensemble, rank) in [(ensemble.clone(), 0.0), (ensemble.correlated("S_hmin", "S_Hmax", 0.6).unwrap(), 0.6)] {
        let r = 2.0 * (std::f64::consts::PI * rank / 6.0).sin();
        let squares: f64 = changes.iter().map(|c| c * c).sum();
        let deviation = (squares + 2.0 * r * changes[1] * changes[2]).sqrt();
        let outcome = ensemble.outcome();
        let first = outcome.first_order.clone().unwrap();
        assert!((first.mean.in_mpa() - mean).abs() < 1e-9 && (first.deviation.in_mpa() - deviation).abs() < 1e-7);
        for (got, want) in first.by_one_deviation.iter().zip(changes) {
            assert!((got.in_mpa() - want).abs() < 1e-7, "{got} {want}");
        }
        // Four standard errors: of the mean s/√n, of the deviation s/√(2n), of P90 1.709 s/√n.
        let error = deviation / f64::from(count).sqrt();
        let [drawn_mean, drawn_deviation] = outcome.bottom_mean.unwrap().map(Pressure::in_mpa);
        assert!((drawn_mean - mean).abs() < 4.0 * error, "{drawn_mean} {mean}");
        assert!((drawn_deviation - deviation).abs() < 4.0 * error / 2.0_f64.sqrt(), "{drawn_deviation} {deviation}");
        let p90 = outcome.bottom.unwrap().p90.in_mpa();
        assert!((p90 - mean - 1.281_551_565_544_6 * deviation).abs() < 4.0 * 1.709 * error, "{p90}");
        let notes = ensemble.card().explanation.notes.join(" ");
        assert!(notes.contains("agrees within 5 %"), "{notes}");
    }
}

#[test]
fn draws_outside_bounds_or_of_no_wall_are_counted_and_left_out() {
    let drawn = [
        Drawn::cohesion(Distribution::normal(2.mpa(), 2.mpa())),
        Drawn::poisson(Distribution::uniform(0.1, 0.4).within(0.1, 0.3)),
    ];
    let strength = Strength::mohr_coulomb(2.mpa(), 40.deg());
    let ensemble = wall(strength, 2.0).ensemble(Draws { count: 40_000, start: 4 }, &drawn).unwrap();
    let outcome = ensemble.outcome();
    // A third outside; of the rest Φ(−1) = 15.87 % with a negative cohesion.
    assert!((outcome.outside[1] / 40_000.0 - 1.0 / 3.0).abs() < 0.012 && outcome.outside[0] == 0.0);
    assert!((outcome.impossible / (40_000.0 - outcome.outside[1]) - 0.158_66).abs() < 0.012);
    assert_eq!(outcome.counted + outcome.left_out(), 40_000.0);
    let notes = ensemble.card().explanation.notes.join(" ");
    assert!(notes.contains("outside its stated bounds") && notes.contains("negative strength"), "{notes}");
}

#[test]
fn what_cannot_be_drawn_is_refused_in_one_sentence() {
    let wall = wall(ucs(), 2.0);
    let draws = Draws { count: 1_000, start: 1 };
    let said = |drawn: &[Drawn]| wall.ensemble(draws, drawn).unwrap_err().to_string();
    let one = Drawn::sv(Distribution::normal(60.mpa(), 1.mpa()));
    assert!(said(&[]).starts_with("number of uncertain inputs is 0"), "{}", said(&[]));
    assert!(said(&[one, one]).contains("stands twice"));
    assert!(said(&[Drawn::cohesion(Distribution::normal(10.mpa(), 1.mpa()))]).starts_with("Varying the cohesion"));
    assert!(said(&[Drawn::biot(Distribution::uniform(0.1, 0.9))]).contains("impermeable"));
    assert!(
        said(&[Drawn::sv(Distribution::normal(60.mpa(), (-1).mpa()))])
            .starts_with("standard deviation of the vertical stress is -1 MPa")
    );
    assert!(said(&[Drawn::poisson(Distribution::uniform(0.6, 0.9))]).contains("every draw is left out"));
    assert!(
        wall.ensemble(Draws { count: 10, ..draws }, &[one])
            .unwrap_err()
            .to_string()
            .starts_with("number of draws is 10")
    );
    let ensemble = wall.ensemble(draws, &[one]).unwrap();
    assert!(ensemble.correlated("S_v", "UCS", 0.3).unwrap_err().to_string().contains("no uncertain input"));
    assert!(ensemble.within_friction(-1.0).is_err() && ensemble.at_tvd(0.m()).is_err());
}
