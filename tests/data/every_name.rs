// Kestrel Flat, hole KF-3: a session in which every name of the prelude is used for what it is there for. Invented
// for demonstration: no such site, hole or number exists. Lines of `// ---` part the cells; each shows its last value.

// Units: a number takes its unit on, and gives it back in another.
let depth: Length = 2950.m();
let pore: Pressure = 31.2.mpa();
let mud: Density = 1.42.sg();
let inclination: Angle = 42.deg();
let vertical_gradient: Gradient = 22.7.mpa_per_km();
let cooling: Warming = (-20).kelvin();
let expansion: Expansion = 1.1e-5.per_kelvin();
let measured: Uncertain<Pressure> = 49.5.mpa().give_or_take(0.8.mpa());

/// Any plain number becomes a quantity.
fn from_feet<N: Units>(feet: N) -> Length {
    feet.ft()
}

assert!((from_feet(9678) - depth).abs() < 0.2.m());
(vertical_gradient * depth, mud.column(depth) - pore, measured)
// ---
// Depths: each says below what it is counted; a hole ties the levels together.
let tie = DatumTie::rotary_table_at(32.4.m())?.with_ground_at(25.m())?;
let place = Depth::below_rotary_table(depth);
let below_sea: DepthConversion = tie.conversion(place, Datum::MeanSeaLevel)?.named("KF-3");
assert!((below_sea.depth().tvd.in_m() - 2917.6).abs() < 1e-9);
below_sea
// ---
// Norths: true azimuths from magnetic and grid ones, by the earth's field and the map of the site.
let mine_map = MapGrid {
    ellipsoid: Ellipsoid::grs80(),
    central_meridian: 165.deg(),
    latitude_of_origin: 0.deg(),
    scale: 0.9996,
    false_easting: 500_000.m(),
    false_northing: 0.m(),
};
let site = Site::at(40.deg(), 162.95.deg(), "2026-05-01")?.with_height(25.m())?.with_map_grid(mine_map)?;
let declination: Declination = site.declination()?;
let convergence: Convergence = site.convergence()?;
let turns_the_compass: FluxDensity = declination.field.ok_or("no model for this date")?.horizontal;
let breakouts: Azimuth = site.true_azimuth(Azimuth::from_magnetic_north(127.deg()))?;
let sh_max_azimuth = breakouts.perpendicular();
([declination.card(), convergence.card(), sh_max_azimuth.card()], turns_the_compass)
// ---
// Lines and planes: bedding, a fault, and what they have in common. Results of several kinds stand in one list by
// their cards.

/// A line by its trend from true north and its plunge, in degrees.
fn line(trend: f64, plunge: f64) -> Line {
    Line { trend: Azimuth::from_true_north(trend.deg()), plunge: plunge.deg() }
}

let fault = Plane { strike: Azimuth::from_true_north(37.deg()), dip: 62.deg() };
let bedding: PlaneThroughLines = Plane::through(line(60.0, 3.0), line(140.0, 4.0))?;
let cutoff: PlanesIntersection = fault.intersection(bedding.plane)?;
let in_section: ApparentDip = fault.apparent_dip(Azimuth::from_true_north(90.deg()))?;
let striae: LineAtRake = fault.line_at_rake((-75).deg())?;
let read_back: RakeOfLine = fault.rake_of(striae.line)?;
assert!((read_back.down - (-75).deg()).abs() < 1e-9.deg() && read_back.misfit < 1e-6.deg());
[bedding.card(), cutoff.card(), in_section.card(), striae.card(), read_back.card()]
// ---
// Axes that were measured: three lines made square, and the turn of a core from directions known in both.
let cell_axes = MeasuredAxes { lines: [line(35.0, 12.0), line(127.0, 8.0), line(246.0, 75.0)] };
let fitted: FittedAxes = cell_axes.fitted()?;
let marks: [DirectionPair; 3] = [
    DirectionPair { reference: [1.0, 0.0, 0.0], measured: [0.02, 0.99, 0.05], weight: 1.0 },
    DirectionPair { reference: [0.0, 1.0, 0.0], measured: [-0.99, 0.03, 0.02], weight: 1.0 },
    DirectionPair { reference: [0.0, 0.0, 1.0], measured: [0.01, -0.04, 1.0], weight: 2.0 },
];
let core_turn = BestRotation::of(&marks)?;
let mut net = LowerHemisphere::new("Fault KFF-01 and the axes of a cell", Projection::EqualArea)
    .plane("KFF-01", fault)?
    .pole("pole of KFF-01", fault)?;
for (n, axis) in fitted.lines().into_iter().enumerate() {
    net = net.line(&format!("axis {}", n + 1), axis)?;
}
[fitted.card(), core_turn.card(), net.card()]
// ---
// Chains of turns: each carries lines, stresses and tractions from one kind of axes to another, and back.
let hole = Attitude { inclination, azimuth: Azimuth::from_true_north(120.deg()) }.named("KF-3 at 2950 m");
let to_hole: Chain<Geographic, Borehole> = hole.chain()?;
let to_wall: Chain<Geographic, WallAxes> = to_hole.then(&hole.wall_chain(25.deg())?)?;
let to_fault: Chain<Geographic, FaultAxes> = fault.chain_named("KFF-01")?;
let mine_grid = LocalAxes::mine_grid_with_up("the mine grid", Azimuth::from_true_north(7.5.deg()))?;
let to_grid: Chain<Geographic, Local> = mine_grid.chain()?;
let ends: [Axes; 4] = [to_hole.to(), to_wall.to(), to_fault.to(), to_grid.to()];
assert!(matches!(ends[0], Axes::Hole { .. }));
let seen_in_hole: Direction<Borehole> = to_hole.carry(&striae.line.direction()?);
[to_hole.card(), to_wall.card(), to_fault.card(), to_grid.card(), seen_in_hole.card()]
// ---
// Stress: one tensor, from the vertical and horizontal stresses, with its measures.
let s: Stress =
    Stress::from_horizontals(Horizontals { sv: 66.9.mpa(), sh_max: 68.mpa(), sh_min: 49.5.mpa(), sh_max_azimuth })?
        .named("KF-3 at 2950 m");
let principals: Principals = s.principals();
let horizontal: HorizontalStresses = s.horizontal_stresses();
let invariants: Invariants = s.invariants();
let faulting: FaultingRegime = s.a_phi();
let regime: Regime = faulting.regime;
assert_eq!(regime, Regime::StrikeSlip);
[principals.card(), horizontal.card(), invariants.card(), faulting.card()]
// ---
// Stress stated in other axes and with other signs.
let north_east = s.component(Axis::X, Axis::Y);
let tension_positive = Components {
    nn: -s.component(Axis::X, Axis::X),
    ee: -s.component(Axis::Y, Axis::Y),
    dd: -s.component(Axis::Z, Axis::Z),
    ne: -north_east,
    nd: 0.mpa(),
    ed: 0.mpa(),
};
assert!(Stress::from_tension_positive(tension_positive)?.is_close(&s, 1.pa()));
let reading = AxisComponents { xx: 52.mpa(), yy: 61.mpa(), zz: 66.mpa(), xy: 4.mpa(), yz: (-3).mpa(), xz: 2.mpa() };
let overcored: Stress<Local> = Stress::from_components_in(&to_grid, reading)?.named("the cell");
let beside = Stress::weighted_mean(&[(3.0, s), (1.0, to_grid.back().carry(&overcored))])?;
[overcored.card(), beside.card()]
// ---
// On a fault: effective stress, traction, circles.
let effective: EffectiveStress = s.effective(pore)?;
assert!((effective.principal()[2] - (49.5.mpa() - pore)).abs() < 1.pa());
let traction: Traction = s.on(fault)?;
let by_fault_axes: TractionVector<FaultAxes> = to_fault.carry(&traction);
let circles: MohrCircles =
    s.mohr().effective(pore)?.with_named_plane("KFF-01", fault)?.with_envelope(0.mpa(), 31.deg())?;
[traction.card(), by_fault_axes.card(), circles.card()]
// ---
// Rock: a strength, what it bears, and what is left of it under this stress.
let strength = Strength::mohr_coulomb(11.7.mpa(), 29.6.deg());
let envelope: FailureEnvelope = strength.envelope()?;
let StrengthConstants::MohrCoulomb { ucs, q } = envelope.constants() else { panic!("another criterion") };
assert!((ucs - 40.2.mpa()).abs() < 0.1.mpa() && (q - 2.95).abs() < 0.01);
let left: StrengthMargin = s.strength_margin(strength, pore)?;
let rock = Rock { poisson: 0.25, tensile_strength: 2.mpa(), strength };
[envelope.card(), left.card()]
// ---
// Rock masses, and rock with a plane of weakness.
let jointed = HoekBrown { sigma_ci: 40.mpa(), m_i: 7.0, gsi: 65.0, disturbance: 0.0 };
let mass: RockMass = jointed.rock_mass_up_to(10.mpa())?;
let bed = PlaneStrength { cohesion: 2.mpa(), friction_angle: 22.deg() };
let bedded = WeakRock::under(WeakRockInputs { intact: strength, plane: bed, sigma_3: 10.mpa(), beta: 58.deg() })?;
assert_eq!(bedded.mode(), WeakRockMode::SlipsOnPlane);
[mass.card(), bedded.card()]
// ---
// Faults: how near one of them is to slip, and what friction allows at all.
let friction = FaultStrength { friction: 0.6, cohesion: 0.mpa() };
let slip: FaultSlip = s.slip_on(fault, friction, pore)?;
assert_eq!(slip.state(), FaultState::Holds);
let limit_of_friction: FrictionLimit = s.frictional_limit(pore, friction.friction)?;
let bounds = FrictionalBounds::at(BoundsInputs { sv: 66.9.mpa(), pore, friction: friction.friction })?;
assert!(bounds.allow(68.mpa(), 49.5.mpa())?);
let critical: CriticalPlanes = s.critical_planes(friction, pore)?;
[slip.card(), limit_of_friction.card(), bounds.card(), critical.card()]
// ---
// All faults of the block, from their table; the one that comes first.
let faults = FaultSet::read_csv("data/kestrel-faults.csv")?;
let tested: Fault = faults.fault("KFF-04")?;
assert_eq!(tested.friction, Some(0.45));
let ranked: RankedFaults = faults.ranked(&s, friction, pore)?;
let worst: RankedFault = ranked.worst().ok_or("no faults")?;
assert!(ranked.rows().iter().all(|row| row.slip.margin() >= worst.slip.margin()));
[worst.slip.card(), ranked.card()]
// ---
// The hole: its survey, where it is, and the mud that stands in it.
let survey = Survey::read_csv("data/kf3-survey.csv")?.named("KF-3");
let deepest: Station = *survey.stations().last().ok_or("no stations")?;
assert_eq!(deepest.md, survey.last_md());
let here: Position = survey.at_tvd(depth)?;
let shoe = survey.at(survey.stations()[20].md)?;
let below_shoe = Survey::from_stations(&survey.stations()[20..])?.tied_in(TieIn {
    north: shoe.north,
    east: shoe.east,
    tvd: shoe.tvd,
})?;
assert!((below_shoe.at_tvd(depth)?.md - here.md).abs() < 0.001.m());
let column: MudPressure = MudColumn { density: mud, tvd_below_rotary: depth }.pressure()?;
(here, column)
// ---
// The wall, in the planned attitude: stress at one tool face, all round it, and where it fails at this mud weight.
let stress: Stress<Borehole> = to_hole.carry(&s);
let wall = Wall::new(WallInputs { stress, pore, rock })?;
let pressure = column.pressure();
let at_top: WallStress = wall.stress_at(pressure, 0.deg())?;
let around: WallAround = wall.around(pressure)?;
let arcs: FailingArcs = wall.failing_arcs(pressure)?;
let breakout: Breakout = arcs.widest().ok_or("nothing fails")?;
assert_eq!(wall.breakout(pressure)?, Some(breakout));
[at_top.card(), around.card(), arcs.card()]
// ---
// Behind the wall: the field of stress, and how deep the rock fails.
let behind: FieldStress = wall.field_at(pressure, breakout.centre, 1.2)?;
let profile: RadialProfile = wall.radial_profile(pressure, breakout.centre)?;
let failure: FailureDepth = wall.failure_depth(pressure)?;
let reach: DeepestFailure = failure.deepest().ok_or("nothing fails")?;
assert!(reach.radius_ratio > 1.0);
[behind.card(), profile.card(), failure.card()]
// ---
// What an image of the wall shows: arcs that fail, cracks at too much mud, the trace of bedding.
let beds = WeakPlane { plane: bedding.plane, cohesion: 2.mpa(), friction_angle: 22.deg() };
let cooled = Thermal { warming: cooling, youngs_modulus: 18.gpa(), expansion };
let cracks: TensileCracks = wall.thermal(cooled)?.tensile_cracks(75.mpa())?;
let first: CrackPlace = cracks.first().ok_or("no cracks")?;
assert!(cracks.arcs().iter().any(|arc: &CrackArc| arc.first == Some(first)));
let image: WallImage = wall.weak_plane(beds)?.unrolled(pressure, 8.5.inch())?;
let trace: PlaneTrace = image.plane().ok_or("no plane")?;
([cracks.card(), image.card()], trace.bearing)
// ---
// Limits of the pressure, for this hole and for holes in every direction.
let limits: Limits = wall.limits();
let lower: Limit = limits.lower_shear;
assert_eq!(lower.kind(), LimitKind::LowerShear);
let map = DirectionMap::over(MapInputs { stress: s, pore, rock, step: 5.deg() })?.with_path(&survey)?;
let best: Option<MappedDirection> = map.of(MapOf::Initiation)?.best();
let vertical = Attitude { inclination: 0.deg(), azimuth: Azimuth::from_true_north(0.deg()) };
assert!(best.is_some());
(limits, lower.pressure(), map.at(vertical)?, map)
// ---
// How sure that is: inputs drawn from distributions. A start gives the same draws again.
let draws = Draws { count: 2000, start: 7 };
let ensemble: Ensemble = wall
    .ensemble(draws, &[
        Drawn::sh_max(Distribution::normal(68.mpa(), 4.mpa())),
        Drawn::pore(Distribution::triangular(30.mpa(), 31.2.mpa(), 32.mpa())),
        Drawn::cohesion(Distribution::lognormal(11.7.mpa(), 1.2.mpa())),
    ])?
    .correlated("S_Hmax", "P_p", 0.3)?
    .at_tvd(depth)?;
let bottom: Option<Quantiles> = ensemble.bottom();
assert!(bottom.is_some_and(|of| of.p10 < of.p90));
ensemble
// ---
// Along the hole: stress, pore pressure and rock by depth, in layers, and the limits in each.
let shale = Layer::from("Shale", Depth::below_rotary_table(2000.m()), rock)?.horizontal_ratios(0.52, 1.0)?;
let sand_top = TopPlane {
    depth: Depth::below_rotary_table(2640.m()),
    north: 0.m(),
    east: 0.m(),
    plane: Plane { strike: Azimuth::from_true_north(20.deg()), dip: 2.deg() },
};
let drawn_down = Depletion { drawdown: 6.mpa(), sh_min: MinPath::Measured(0.64), sh_max: MaxPath::AsMin };
let sand = Layer::below_plane("Grebe sand", sand_top, rock)?.horizontal_ratios(0.5, 0.97)?.depleted(drawn_down)?;
let zero = Depth::below_rotary_table(0.m());
let ground: Ground = Ground::new(GroundInputs {
    sv: PressureProfile::from_gradient(vertical_gradient, zero, 0.mpa())?.of("S_v", "vertical stress"),
    pore: PressureProfile::from_gradient(10.6.mpa_per_km(), zero, 0.mpa())?.of("P_p", "pore pressure"),
    horizontals: None::<HorizontalProfiles>,
    sh_max_azimuth: Azimuth::from_true_north(34.6.deg()),
    layers: vec![shale, sand],
})?;
let state: GroundState = ground.at(&survey, 3500.m())?;
let choices = LogChoices {
    from: 2900.m(),
    to: 3600.m(),
    step: 20.m(),
    allowed_width: 60.deg(),
    margin_bottom: 1.mpa(),
    margin_top: 1.mpa(),
};
let section = HoleSection::between("8½ in", 2900.m(), 3600.m());
let log: LimitLog = LimitLog::with_choices(&survey, &ground, choices)?.with_sections(&[section])?;
let row: LogRow = log.at(3000.m())?;
let narrowest: Option<Narrowest> = log.narrowest();
let in_section: Vec<SectionRange> = log.section_ranges();
let friction: Option<FrictionAlong> = log.with_friction(0.6)?.friction();
assert!(friction.is_some_and(|limit| limit.beyond.is_empty()));
assert!(row.pore < row.sv && narrowest.is_some() && in_section.len() == 1 && state.layer() == "Grebe sand");
log
// ---
// A wall cooled by the mud: temperatures by depth, and what they do to the rock of each layer.
let warmer_by: TemperatureGradient = 30.kelvin_per_km();
let surface: Temperature = 8.celsius();
let rock_temperature: TemperatureProfile = TemperatureProfile::from_gradient(warmer_by, zero, surface)?;
let expanding: Vec<Layer> = ground
    .layers()
    .into_iter()
    .map(|layer| layer.thermal_properties(12.gpa(), 1e-5.per_kelvin()))
    .collect::<Result<_, _>>()?;
let cooled = Ground::new(GroundInputs { layers: expanding, ..ground.inputs() })?
    .with_temperatures(&rock_temperature, &TemperatureProfile::uniform(45.celsius())?)?;
let table = [
    "# datum: rotary table",
    "# depth_unit: m",
    "# pressure_unit: MPa",
    "# angle_unit: deg",
    "from,to,layer,poisson,tensile_strength,ucs,friction_angle",
    "3600,3900,Grebe sand,0.2,1,40,38",
];
std::fs::write("kf3-lateral.csv", table.join("\n"))?;
let lateral: LayerIntervals = Ground::read_intervals("kf3-lateral.csv")?;
assert_eq!(lateral.layers()[0].name(), "Grebe sand");
let cold: Option<Warming> = cooled.at(&survey, 3500.m())?.warming;
assert!(cold.is_some_and(|warming| warming < 0.kelvin()));
cooled.at(&survey, 3500.m())?
// ---
// What was met while drilling, held against the limits.
let met = DrillingEvent { md: 3000.m(), kind: EventKind::Losses, mud_weight: 1.4.sg(), circulating_density: None };
let hindcast: Hindcast = log.hindcast(&DrillingEvents::from_events(&[met])?, 0.5.mpa())?;
let first: Vec<HindcastRow> = hindcast.rows();
assert_eq!(first.len(), 1);
hindcast
// ---
// How sure it is that one mud weight keeps the section: its depths drawn together.
let chance: SectionEnsemble =
    log.section_ensemble("8½ in", Draws { count: 500, start: 3 }, &[Vary::sh_max(4.mpa()), Vary::cohesion(1.2.mpa())])?;
let at_best: Option<MudShare> = chance.best();
let planned: Option<PlanShare> = chance.planned();
let of_layers: Vec<LayerShare> = chance.layers();
assert!(planned.is_none() && !of_layers.is_empty() && at_best.is_none_or(|best| best.by_layer <= 1.0));
chance
// ---
// What to drill with: the range, the mud held against it, other criteria beside it, one input at a time.
let range: RecommendedRange = wall.recommended(RangeChoices {
    allowed_width: 60.deg(),
    margin_bottom: 1.mpa(),
    margin_top: 1.5.mpa(),
    tvd_below_rotary: depth,
})?;
assert_eq!(range.bottom.ok_or("no bottom")?.governed_by, Governs::LowerShear);
let held: MudHeld = range.hold(MudPlan {
    static_density: mud,
    swab: Some(0.6.mpa()),
    circulating_density: Some(1.47.sg()),
    surge: None,
})?;
assert_eq!(held.not_stated(), [MudState::Surged]);
let others: RangesBeside = range
    .beside(&[Alternative::criterion(Strength::mogi_coulomb(11.7.mpa(), 29.6.deg())), Alternative::permeable(0.8)])?;
let sensitivity: Sensitivity =
    range.sensitivity(&[Vary::sh_max(4.mpa()), Vary::pore(0.6.mpa()), Vary::cohesion(1.2.mpa())])?;
[range.card(), held.card(), others.card(), sensitivity.card()]
// ---
// The field: the weight of the rock from a density log, and pressures with depth.
let log = DensityLog::read_las("data/kf1-density.las", "RHOB", Datum::RotaryTable)?.named("KF-1");
let asked = OverburdenInputs { depth: place, hole: survey.tie()?, top: Top::Land { mean_density: 2.0.g_cm3() } };
let overburden: Overburden = log.overburden(asked)?;
assert!((overburden.stress - 66.9.mpa()).abs() < 1.3.mpa());
let tests = PressureProfile::from_points(&[(2890.m(), 30.5.mpa()), (3010.m(), 31.9.mpa())], Datum::RotaryTable)?
    .of("P_p", "pore pressure")
    .tied(tie)?;
let between: PressureAtDepth = tests.at(place)?;
[overburden.card(), between.card()]
// ---
// The sheet: what is given and on what evidence, what is assumed, what came out.
let mut sheet = Sheet::new("Kestrel Flat KF-3: every name of the library");
let evidence = Source::measured("KF-3 extended leak-off at 2931 m TVD (invented)");
let sh_min = sheet.given("S_hmin", "smaller horizontal stress at 2950 m", measured, evidence);
let basis = Basis::unverified("no core from this interval").to_be_verified_by("rock laboratory", "plugs of KF-3");
sheet.assume("The rock is isotropic and linear elastic.", basis);
sheet.add(&range);
sheet.conclude(format!("The smaller horizontal stress is {sh_min}."));

/// Whether every check of a result passed.
fn passed<R: Explain>(result: &R) -> bool {
    result.card().passed()
}

assert!(passed(&range) && passed(&ranked) && passed(&overburden));
sheet
// ---
// What a cell shows of its last value can be had as text, or shown from within a cell.
let card: Card = principals.card();

/// The first line of what is shown as text.
fn first_line<V: Show>(value: &V) -> String {
    value.text().lines().next().unwrap_or_default().to_owned()
}

/// Each value, one after the other.
fn show_each<V: NotebookDisplay>(values: &[V]) {
    values.iter().for_each(V::evcxr_display);
}

show_each(&[traction.normal, traction.shear]);
assert_eq!(first_line(&card), first_line(&principals));
card
