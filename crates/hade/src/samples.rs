//! One card of every kind, for the tests of the table and for trying templates.

mod along;
mod well;

use self::along::along_samples;
use self::well::{map_samples, range_samples, well_samples};
use crate::prelude::*;

/// One card of every kind, made through the public surface.
pub fn samples() -> Vec<Card> {
    let breakout = Azimuth::from_magnetic_north(127.deg()).with_declination((-2.5).deg()).unwrap();
    let s = Stress::from_horizontals(Horizontals {
        sv: 66.9.mpa(),
        sh_max: 58.2.mpa(),
        sh_min: 47.1.mpa(),
        sh_max_azimuth: breakout.perpendicular(),
    })
    .unwrap();
    let components =
        Components { nn: 52.mpa(), ee: 66.mpa(), dd: 41.mpa(), ne: (-5.4).mpa(), nd: (-1.9).mpa(), ed: (-2.3).mpa() };
    let stated = Stress::from_components(components).unwrap();
    let turned = Stress::from_tension_positive(components).unwrap();
    let line = |t: f64, p: f64| Line { trend: Azimuth::from_true_north(t.deg()), plunge: p.deg() };
    let measured = Stress::from_principals([
        (60.mpa(), line(35.0, 12.0)),
        (40.mpa(), line(127.0, 8.0)),
        (20.mpa(), line(246.0, 75.0)),
    ])
    .unwrap();
    let chain = Attitude { inclination: 42.deg(), azimuth: Azimuth::from_true_north(120.deg()) }
        .named("KF-3 at 2950 m")
        .chain()
        .unwrap();
    let plane = Plane { strike: Azimuth::from_true_north(45.deg()), dip: 60.deg() };
    let sh = chain.carry(&s);
    let mut cards = well_samples(sh);
    cards.extend(field_samples(sh));
    cards.extend(range_samples(sh));
    cards.extend(along_samples());
    cards.extend(map_samples(s));
    cards.extend(frame_samples(s, plane));
    cards.extend(depth_samples());
    cards.extend(norths_samples());
    cards.extend(fault_samples(s));
    cards.extend(strength_samples(&s));
    cards.extend([
        breakout.perpendicular().card(),
        s.card(),
        stated.card(),
        turned.card(),
        measured.card(),
        (s + stated).card(),
        s.principals().card(),
        Stress::from_horizontals(Horizontals {
            sv: 50.mpa(),
            sh_max: 50.mpa(),
            sh_min: 40.mpa(),
            sh_max_azimuth: Azimuth::from_true_north(35.deg()),
        })
        .unwrap()
        .principals()
        .card(),
        chain.card(),
        sh.card(),
        s.on(plane).unwrap().card(),
        s.frictional_limit(31.mpa(), 0.6).unwrap().card(),
        s.mohr().effective(31.mpa()).unwrap().with_plane(plane).unwrap().card(),
    ]);
    cards.extend(geometry_samples());
    cards.extend(tensor_samples());
    cards.extend(mohr_samples(&s.mohr().effective(31.mpa()).unwrap().with_plane(plane).unwrap()));
    cards
}

/// Lines, planes and fits of axes; azimuths with a correction, so that it is carried along.
fn geometry_samples() -> Vec<Card> {
    let magnetic = |t: f64| Azimuth::from_magnetic_north(t.deg()).with_declination((-2.5).deg()).unwrap();
    let line = |t: f64, p: f64| Line { trend: magnetic(t), plunge: p.deg() };
    let plane = Plane::from_dip_direction(magnetic(137.0), 62.deg());
    let joint = Plane { strike: magnetic(210.0), dip: 35.deg() };
    let lines = [line(35.0, 12.0), line(127.0, -8.0), line(246.0, 75.0)];
    let left_handed = [lines[1], lines[0], lines[2]];
    let pair = |reference, measured, weight| DirectionPair { reference, measured, weight };
    let turned = [
        pair([1.0, 0.0, 0.0], [0.1, 0.9, 0.2], 1.0),
        pair([0.0, 1.0, 0.0], [-0.9, 0.2, 0.1], 2.0),
        pair([0.1, 0.2, 1.0], [0.0, -0.1, 1.0], 1.5),
    ];
    let reflected = [pair([0.1, 0.2, 1.0], [0.3, -0.1, -0.6], 0.5), turned[0], turned[1]];
    vec![
        Plane::through(line(47.0, 5.0), line(120.0, -50.0)).unwrap().card(),
        plane.intersection(joint).unwrap().card(),
        plane.intersection(Plane { dip: 20.deg(), ..plane }).unwrap().card(),
        plane.intersection(Plane::across(line(300.0, -30.0)).unwrap()).unwrap().card(),
        plane.apparent_dip(magnetic(20.0)).unwrap().card(),
        plane.apparent_dip(magnetic(100.0)).unwrap().card(),
        plane.line_at_rake((-30).deg()).unwrap().card(),
        plane.line_at_rake(110.deg()).unwrap().card(),
        plane.rake_of(line(72.0, 40.0)).unwrap().card(),
        plane.rake_of(line(30.0, -22.0)).unwrap().card(),
        MeasuredAxes { lines }.fitted().unwrap().card(),
        MeasuredAxes { lines: left_handed }.fitted().unwrap().card(),
        BestRotation::of(&turned).unwrap().card(),
        BestRotation::of(&reflected).unwrap().card(),
    ]
}

/// Measures of tilted, upright and degenerate stresses.
fn tensor_samples() -> Vec<Card> {
    let tensor = |[nn, ee, dd, ne, nd, ed]: [f64; 6]| {
        let (nn, ee, dd) = (nn.mpa(), ee.mpa(), dd.mpa());
        Stress::from_components(Components { nn, ee, dd, ne: ne.mpa(), nd: nd.mpa(), ed: ed.mpa() }).unwrap()
    };
    let states = [
        tensor([52.0, 66.0, 41.0, -5.4, -1.9, -2.3]),
        tensor([48.0, 40.0, 45.0, 3.0, 11.0, -7.0]),
        tensor([20.0, -6.0, 33.0, 3.0, 5.0, -2.0]),
        tensor([30.0, 30.0, 55.0, 0.0, 0.0, 0.0]),
        tensor([50.0, 30.0, 50.0, 0.0, 0.0, 0.0]),
        tensor([40.0, 40.0, 40.0, 0.0, 0.0, 0.0]),
    ];
    let hole = Attitude { inclination: 42.deg(), azimuth: Azimuth::from_true_north(120.deg()) };
    let carried = hole.named("KF-3 at 2950 m").chain().unwrap().carry(&states[0]);
    let mut cards = vec![carried.invariants().card()];
    for s in states {
        cards.extend([s.invariants().card(), s.horizontal_stresses().card(), s.a_phi().card()]);
    }
    cards
}

/// Stresses stated in instruments' axes, put together, and carried on.
fn frame_samples(s: Stress, plane: Plane) -> Vec<Card> {
    let line = |t: f64, p: f64| Line { trend: Azimuth::from_true_north(t.deg()), plunge: p.deg() };
    let given = AxisComponents { xx: 41.mpa(), yy: 30.mpa(), zz: 25.mpa(), xy: 4.mpa(), yz: (-3).mpa(), xz: 2.mpa() };
    let cell = Attitude { inclination: 95.deg(), azimuth: Azimuth::from_true_north(40.deg()) }.named("KC-2");
    let to_cell = cell.chain().unwrap();
    let in_cell = Stress::from_components_in(&to_cell, given).unwrap().named("overcoring in KC-2");
    let grid = LocalAxes::mine_grid_with_up("model grid", Azimuth::from_true_north(12.deg())).unwrap();
    let to_grid = grid.chain().unwrap();
    let in_grid = Stress::from_tension_positive_in(&to_grid, given).unwrap();
    let two_lines = LocalAxes::along_lines("cell axes", line(35.0, 12.0), line(130.0, 20.0)).unwrap();
    let overcored = to_cell.back().carry(&in_cell);
    let mean = Stress::weighted_mean(&[(2.0, s), (1.0, overcored)]).unwrap().named("mean");
    let wall = to_cell.then(&cell.wall_chain(25.deg()).unwrap()).unwrap();
    let to_fault = plane.chain_named("F1").unwrap();
    let t = s.on(plane).unwrap();
    vec![
        overcored.card(),
        to_grid.back().carry(&in_grid).card(),
        mean.card(),
        s.scale(1.5).card(),
        in_cell.card(),
        wall.carry(&s).card(),
        two_lines.chain().unwrap().card(),
        LocalAxes::along_measured_axes("cell", [line(35.0, 12.0), line(127.0, 8.0), line(246.0, 75.0)])
            .unwrap()
            .chain()
            .unwrap()
            .card(),
        grid.chain().unwrap().back().then(&wall).unwrap().card(),
        to_fault.carry(&mean).card(),
        to_fault.carry(&t).card(),
        to_cell.carry(&line(123.0, 45.0).direction().unwrap()).card(),
        line(123.0, -45.0).direction().unwrap().card(),
        LowerHemisphere::new("Fault F1", Projection::EqualAngle)
            .plane("F1", plane)
            .unwrap()
            .pole("pole of F1", plane)
            .unwrap()
            .line("axis", line(123.0, -45.0))
            .unwrap()
            .card(),
    ]
}

fn depth_samples() -> Vec<Card> {
    let land = DatumTie::rotary_table_at(432.m()).unwrap().with_ground_at(425.m()).unwrap();
    let sea = DatumTie::rotary_table_at(25.m()).unwrap().with_mudline_at((-300).m()).unwrap();
    let points = [(1000.m(), 15.mpa()), (2000.m(), 33.5.mpa()), (3200.m(), 58.mpa())];
    let table = PressureProfile::from_points(&points, Datum::MeanSeaLevel).unwrap().of("S_hmin", "least stress");
    let begin = Depth::below_rotary_table(1500.m());
    let gradient = PressureProfile::from_gradient(12.mpa_per_km(), begin, 16.mpa()).unwrap();
    let under_sea = PressureProfile::from_mudline(22.6.mpa_per_km(), 1025.kg_m3()).unwrap();
    let at = |profile: PressureProfile, depth: Depth| profile.at(depth).unwrap().card();
    vec![
        sea.conversion(Depth::below_rotary_table(2950.m()), Datum::Mudline).unwrap().card(),
        land.conversion(Depth::below_ground(25.m()), Datum::MeanSeaLevel).unwrap().named("X-1").card(),
        land.conversion(Depth::below_ground(25.m()), Datum::Ground).unwrap().card(),
        at(table.clone(), Depth::below_mean_sea_level(2000.m())),
        at(table.tied(sea).unwrap(), Depth::below_mudline(1500.m())),
        at(table.tied(sea).unwrap().carried_to(land), Depth::below_rotary_table(2950.m())),
        at(gradient.clone(), Depth::below_rotary_table(2950.m())),
        at(gradient.tied(land).unwrap(), Depth::below_ground(2950.m())),
        at(under_sea.tied(sea).unwrap(), Depth::below_rotary_table(2950.m())),
    ]
}

fn norths_samples() -> Vec<Card> {
    let site = Site::at(57.2.deg(), 1.8.deg(), "2026-05-01").unwrap().with_utm(31).unwrap();
    let old = Site::at((-31.9).deg(), 141.5.deg(), "1974-02-28").unwrap().with_height(310.m()).unwrap();
    let mine = old
        .with_map_grid(MapGrid {
            ellipsoid: Ellipsoid::international_1924(),
            central_meridian: 141.deg(),
            latitude_of_origin: (-30).deg(),
            scale: 0.99994,
            false_easting: 300_000.m(),
            false_northing: 5_000_000.m(),
        })
        .unwrap();
    let stated = site
        .with_declination((-0.4).deg(), "survey report KF-3")
        .unwrap()
        .with_convergence((-0.99).deg(), "location plan KF-3")
        .unwrap();
    let later = Site::at(57.2.deg(), 1.8.deg(), "2034-05-01").unwrap();
    let later = later.with_declination(0.6.deg(), "survey report KF-9").unwrap();
    vec![
        site.declination().unwrap().card(),
        old.declination().unwrap().card(),
        stated.declination().unwrap().card(),
        later.declination().unwrap().card(),
        site.convergence().unwrap().card(),
        mine.convergence().unwrap().card(),
        stated.convergence().unwrap().card(),
        site.true_azimuth(Azimuth::from_magnetic_north(127.deg())).unwrap().card(),
        site.true_azimuth(Azimuth::from_grid_north(359.9.deg())).unwrap().perpendicular().card(),
    ]
}

fn fault_samples(s: Stress) -> Vec<Card> {
    let plane = |strike: f64, dip: f64| Plane { strike: Azimuth::from_true_north(strike.deg()), dip: dip.deg() };
    let grid = Azimuth::from_grid_north(217.deg()).with_convergence(1.3.deg()).unwrap();
    let weak = FaultStrength { friction: 0.3, cohesion: 0.mpa() };
    let strong = FaultStrength { friction: 0.6, cohesion: 12.mpa() };
    let even = Stress::from_components(Components {
        nn: 40.mpa(),
        ee: 40.mpa(),
        dd: 40.mpa(),
        ne: 0.mpa(),
        nd: 0.mpa(),
        ed: 0.mpa(),
    })
    .unwrap();
    let set = FaultSet::from_planes(&[
        ("F-1", plane(37.0, 61.0)),
        ("F-2", Plane { strike: grid, dip: 55.deg() }),
        ("F-3", plane(2.0, 88.0)),
        ("bedding", plane(140.0, 4.0)),
    ])
    .unwrap();
    vec![
        s.slip_on(plane(37.0, 61.0), weak, 31.mpa()).unwrap().card(),
        s.slip_on(Plane { strike: grid, dip: 55.deg() }, strong, 31.mpa()).unwrap().card(),
        s.slip_on(plane(37.0, 88.0), weak, 49.mpa()).unwrap().card(),
        even.slip_on(plane(37.0, 61.0), strong, 10.mpa()).unwrap().card(),
        s.critical_planes(weak, 31.mpa()).unwrap().card(),
        s.critical_planes(strong, 31.mpa()).unwrap().card(),
        s.critical_planes(strong, 49.mpa()).unwrap().card(),
        even.critical_planes(strong, 10.mpa()).unwrap().card(),
        set.ranked(&s, weak, 31.mpa()).unwrap().card(),
        FrictionalBounds::at(BoundsInputs { sv: 66.9.mpa(), pore: 31.mpa(), friction: 0.6 }).unwrap().card(),
    ]
}

/// Cards for the replay of every kind: with named planes and with strengths above and below.
fn mohr_samples(circles: &MohrCircles) -> Vec<Card> {
    let plane = Plane { strike: Azimuth::from_true_north(20.deg()), dip: 70.deg() };
    let named = circles.clone().with_named_plane("fault F2", plane).unwrap();
    vec![
        named.clone().with_envelope(8.mpa(), 30.deg()).unwrap().card(),
        named.with_envelope(0.mpa(), 20.deg()).unwrap().card(),
        circles.clone().with_envelope(5.mpa(), 0.deg()).unwrap().card(),
    ]
}

/// Every criterion by itself and against a stress, inside and outside its domain; rock masses; planes of
/// weakness that slip, that do not, and that cannot.
fn strength_samples(s: &Stress) -> Vec<Card> {
    let (c, phi) = (11.mpa(), 33.deg());
    let mass = HoekBrown { sigma_ci: 85.mpa(), m_i: 14.0, gsi: 58.0, disturbance: 0.4 };
    let whole = HoekBrown { sigma_ci: 120.mpa(), m_i: 21.0, gsi: 100.0, disturbance: 0.0 };
    let every = [
        Strength::mohr_coulomb(c, phi),
        Strength::mohr_coulomb_ucs(38.mpa(), phi),
        Strength::mogi_coulomb(c, phi),
        Strength::modified_lade(c, phi),
        Strength::drucker_prager_inscribed(c, phi),
        Strength::drucker_prager_circumscribed(c, phi),
        Strength::drucker_prager_circumscribed(c, 40.deg()),
        Strength::drucker_prager_extension(c, phi),
        Strength::hoek_brown(mass),
        Strength::hoek_brown(whole),
    ];
    let mut cards: Vec<Card> = every.iter().map(|strength| strength.envelope().unwrap().card()).collect();
    for strength in every {
        cards.push(s.strength_margin(strength, 31.mpa()).unwrap().card());
    }
    // Far into tension: outside the domains of the modified Lade criterion and Hoek–Brown.
    for strength in [every[0], every[3], every[8]] {
        cards.push(s.strength_margin(strength, 71.mpa()).unwrap().card());
    }
    let weak = |sigma_3: f64, beta: f64, cohesion: f64, friction: f64| {
        let plane = PlaneStrength { cohesion: cohesion.mpa(), friction_angle: friction.deg() };
        let intact = if friction > 40.0 { every[8] } else { every[0] };
        WeakRock::under(WeakRockInputs { intact, plane, sigma_3: sigma_3.mpa(), beta: beta.deg() }).unwrap().card()
    };
    cards.extend([
        mass.rock_mass().unwrap().card(),
        mass.rock_mass_up_to(20.mpa()).unwrap().card(),
        whole.rock_mass_up_to(30.mpa()).unwrap().card(),
        weak(5.0, 60.0, 1.0, 25.0),
        weak(5.0, 28.0, 1.0, 25.0),
        weak(5.0, 12.0, 1.0, 25.0),
        weak(5.0, 90.0, 1.0, 25.0),
        weak(-0.5, 55.0, 2.0, 20.0),
        weak(6.0, 70.0, 30.0, 45.0),
    ]);
    cards
}

/// The field round a hole: at the wall and off it, with and without a plane of weakness, failing and
/// sound, and cracks.
fn field_samples(sh: Stress<Borehole>) -> Vec<Card> {
    let strength = Strength::mohr_coulomb(12.mpa(), 32.deg());
    let rock = Rock { poisson: 0.25, tensile_strength: 2.mpa(), strength };
    let wall = Wall::new(WallInputs { stress: sh, pore: 31.2.mpa(), rock }).unwrap();
    let plane = Plane { strike: Azimuth::from_true_north(40.deg()), dip: 35.deg() };
    let bedded = wall.weak_plane(WeakPlane { plane, cohesion: 1.5.mpa(), friction_angle: 22.deg() }).unwrap();
    let mogi = wall.with_strength(Strength::mogi_coulomb(6.mpa(), 32.deg())).unwrap();
    vec![
        wall.field_at(37.6.mpa(), 25.deg(), 1.0).unwrap().card(),
        bedded.field_at(37.6.mpa(), 125.deg(), 1.4).unwrap().card(),
        wall.permeable(0.8).unwrap().field_at(40.mpa(), 25.deg(), 1.0).unwrap().card(),
        bedded.radial_profile(36.mpa(), 70.deg()).unwrap().card(),
        wall.failure_depth(33.mpa()).unwrap().card(),
        wall.failure_depth(47.mpa()).unwrap().card(),
        bedded.failure_depth(38.mpa()).unwrap().card(),
        mogi.failure_depth(33.mpa()).unwrap().card(),
        wall.tensile_cracks(40.mpa()).unwrap().card(),
        wall.tensile_cracks(72.mpa()).unwrap().card(),
        bedded.unrolled(72.mpa(), 0.216.m()).unwrap().card(),
        wall.unrolled(33.mpa(), 0.216.m()).unwrap().card(),
    ]
}
