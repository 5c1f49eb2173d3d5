//! What was stated or found, as a notebook shows it: in words, with units.

use super::html::{lines_html, table_html};
use super::notebook::Show;
use super::text::table_text;
use super::typeset::true_minus;
use crate::along::{DrillingEvent, DrillingEvents, EventKind, Ground, Layer};
use crate::card::{Explain as _, Projection};
use crate::faults::{Fault, FaultSet, FaultState, FaultStrength, RankedFault};
use crate::field::{DensityLog, PressureProfile, TemperatureProfile};
use crate::frames::{Attitude, Axes, Datum, DatumTie, Depth, Line, NamedAttitude, Plane, Site, three_figures};
use crate::rock::{HoekBrown, Rock, Strength, WeakRockMode};
use crate::stress::{Components, EffectiveStress, Horizontals, Regime};
use crate::units::{Angle, Pressure, fixed, with_typed_unit};
use crate::well::{
    Breakout, CrackArc, CrackPlace, DeepestFailure, GovernedPressure, Governs, HeldPressure, Limit, LimitKind,
    MapInputs, Mode, MudState, PlaneTrace, RangeEnd, Station, Survey, TieIn, Wall,
};

/// Values with the words that stand for them.
macro_rules! shows_words {
    ($($value:ty: |$it:ident| $words:expr;)*) => { $(
        impl Show for $value {
            fn text(&self) -> String {
                let $it = self;
                true_minus(&$words)
            }
            fn html(&self) -> String {
                lines_html(&self.text())
            }
        }
    )* };
}
shows_words! {
    // Frames.
    Attitude: |hole| hole.words();
    NamedAttitude: |hole| format!("{}: {}", hole.name, hole.attitude.words());
    Line: |line| line.words();
    Plane: |plane| plane.words();
    Axes: |axes| axes.words();
    Site: |site| site.words();
    Datum: |datum| datum.words();
    DatumTie: |tie| tie.words();
    Depth: |depth| depth.words();
    Projection: |projection| projection.words();
    // Stress, rock, faults.
    Horizontals: |given| format!(
        "S_v {}, S_Hmax {}, S_hmin {}; azimuth of S_Hmax: {}",
        with_typed_unit(given.sv),
        with_typed_unit(given.sh_max),
        with_typed_unit(given.sh_min),
        given.sh_max_azimuth.words()
    );
    Components: |given| components(given);
    EffectiveStress: |stress| effective(stress);
    Regime: |regime| regime.to_string();
    Strength: |strength| strength.words();
    HoekBrown: |mass| Strength::hoek_brown(*mass).words();
    Rock: |rock| rock.words();
    WeakRockMode: |mode| match mode {
        WeakRockMode::SlipsOnPlane => "slips on the plane of weakness",
        WeakRockMode::BreaksIntact => "breaks across the plane of weakness",
    };
    FaultStrength: |strength| strength.words();
    FaultState: |state| state.words();
    Fault: |fault| fault.words();
    RankedFault: |ranked| format!("{}; {}", ranked.fault.words(), ranked.slip.explain().headline);
    // The hole and its wall.
    Station: |station| format!("MD {}: {}", with_typed_unit(station.md), station.attitude().words());
    TieIn: |tie_in| format!(
        "first station {} north and {} east of the wellhead, TVD {}",
        with_typed_unit(tie_in.north),
        with_typed_unit(tie_in.east),
        with_typed_unit(tie_in.tvd)
    );
    Wall: |wall| wall.words();
    Mode: |mode| mode.words();
    Breakout: |arc| breakout(arc);
    CrackPlace: |place| crack(place);
    CrackArc: |arc| crack_arc(arc);
    PlaneTrace: |trace| plane_trace(trace);
    DeepestFailure: |deepest| format!(
        "fails to {} hole radii from the axis, {}",
        fixed(deepest.radius_ratio, 3),
        deepest.toolface.map_or_else(|| "all round alike".to_owned(), |at| both_sides(at, deepest.bearing))
    );
    LimitKind: |kind| kind.words();
    Limit: |limit| self::limit(limit);
    Governs: |governs| governs.words();
    GovernedPressure: |end| format!("{}: {}", end.pressure, end.governed_by.words());
    RangeEnd: |end| format!("{}: {}", end.words(), end.governed_by.words());
    HeldPressure: |held| held_pressure(held);
    MudState: |state| state.words();
    MapInputs: |inputs| map_inputs(inputs);
    // The field, and along the hole.
    DensityLog: |log| log.words();
    PressureProfile: |profile| profile.words();
    TemperatureProfile: |profile| profile.words();
    Layer: |layer| layer.words();
    DrillingEvent: |event| event.words();
    EventKind: |kind| kind.words();
}

/// Tables that were read or typed, by their words and their first and last rows.
macro_rules! shows_tables {
    ($($value:ident),*) => { $(
        impl Show for $value {
            fn text(&self) -> String {
                format!("{}\n{}", self.words(), table_text(&self.short_table()))
            }
            fn html(&self) -> String {
                lines_html(&self.words()) + &table_html(&self.short_table())
            }
        }
    )* };
}
shows_tables!(DrillingEvents, FaultSet, Ground, Survey);

fn components(given: &Components) -> String {
    let Components { nn, ee, dd, ne, nd, ed } = *given;
    let all = [("nn", nn), ("ee", ee), ("dd", dd), ("ne", ne), ("nd", nd), ("ed", ed)];
    all.map(|(name, stress)| format!("S_{name} {}", with_typed_unit(stress))).join(", ")
}

fn effective(stress: &EffectiveStress) -> String {
    let [s1, s2, s3] = stress.principal();
    let pore = with_typed_unit(stress.pore());
    format!("σ'_1 {s1}, σ'_2 {s2}, σ'_3 {s3}: total stress less a pore pressure of {pore}")
}

/// "tool face 110.0° (bearing 145.0° from true north)".
fn toolface(toolface: Angle, bearing: Option<Angle>) -> String {
    let bearing = bearing
        .map_or_else(|| "straight up or down".to_owned(), |b| format!("bearing {}° from true north", three_figures(b)));
    format!("tool face {toolface} ({bearing})")
}

/// The same for what repeats on the far side of the hole.
fn both_sides(at: Angle, bearing: Option<Angle>) -> String {
    format!("{} and at +180°", toolface(at, bearing))
}

fn breakout(arc: &Breakout) -> String {
    let place = both_sides(arc.centre, arc.bearing);
    if arc.whole_wall {
        return format!("the whole wall fails, worst at {place}; {}", arc.words());
    }
    format!("an arc {} wide fails, middle at {place}; {}", arc.width, arc.words())
}

fn crack(place: &CrackPlace) -> String {
    let at = toolface(place.toolface, place.bearing);
    format!("{at}, a crack there {} (the other way at +180°)", place.tilt_words())
}

fn crack_arc(arc: &CrackArc) -> String {
    let extent = if arc.whole_wall {
        "the whole wall is parted in tension".to_owned()
    } else {
        format!("an arc {} wide is parted in tension, middle at tool face {} and at +180°", arc.width, arc.centre)
    };
    format!(
        "{extent}; {}",
        arc.first.map_or_else(|| "all places alike".to_owned(), |p| format!("first at {}", crack(&p)))
    )
}

fn plane_trace(trace: &PlaneTrace) -> String {
    match (trace.half_height, trace.toolface) {
        (Some(half), Some(at)) => {
            format!(
                "a wave {} m from middle to crest, lowest at {}",
                fixed(half.in_m(), 3),
                toolface(at, trace.bearing)
            )
        }
        (None, Some(at)) => format!("two lines along the hole, at {}", both_sides(at, trace.bearing)),
        (_, None) => "a level circle, as the plane lies across the hole".to_owned(),
    }
}

fn limit(limit: &Limit) -> String {
    let kind = limit.kind().words();
    let at = limit.toolface().map_or_else(String::new, |at| format!("; at {}", both_sides(at, limit.bearing())));
    let words = limit.words();
    match (limit.pressure(), limit.least_bad()) {
        (Some(pressure), _) => format!("{kind} {pressure}: {words}{at}"),
        (None, Some(least_bad)) => {
            let short = limit.short_by().map_or_else(String::new, |by| format!(", short by {by}"));
            format!("{kind}: {words}; least bad at {least_bad}{short}{at}")
        }
        (None, None) => format!("{kind}: {words}"),
    }
}

fn held_pressure(held: &HeldPressure) -> String {
    let left = |by: Option<Pressure>, side: &str, end: &str| {
        by.map_or_else(|| format!("no {end}"), |by| format!("{by} {side} the {end}"))
    };
    format!(
        "{}: {} ({}, {}), {}, {}",
        held.state.words(),
        held.pressure,
        held.mud_weight,
        held.gradient,
        left(held.above_bottom, "above", "bottom"),
        left(held.below_top, "below", "top")
    )
}

fn map_inputs(inputs: &MapInputs) -> String {
    format!(
        "Holes in every direction, {} apart\n{}; P_p {}; {}",
        with_typed_unit(inputs.step),
        inputs.stress.item("", "").shown,
        with_typed_unit(inputs.pore),
        inputs.rock.words()
    )
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::prelude::*;

    fn north(degrees: f64) -> Azimuth {
        Azimuth::from_true_north(degrees.deg())
    }

    fn stress() -> Stress {
        let sh_max_azimuth = north(35.0);
        Stress::from_horizontals(Horizontals { sv: 66.9.mpa(), sh_max: 68.mpa(), sh_min: 49.5.mpa(), sh_max_azimuth })
            .unwrap()
    }

    fn rock() -> Rock {
        let strength = Strength::mohr_coulomb(11.7.mpa(), 29.6.deg());
        Rock { poisson: 0.25, tensile_strength: 2.mpa(), strength }
    }

    fn wall() -> Wall {
        let hole = Attitude { inclination: 42.deg(), azimuth: north(120.0) }.named("KF-3 at 2950 m");
        let stress = hole.chain().unwrap().carry(&stress());
        Wall::new(WallInputs { stress, pore: 31.2.mpa(), rock: rock() }).unwrap()
    }

    fn hole() -> Attitude {
        Attitude { inclination: 42.deg(), azimuth: north(120.0) }
    }

    fn range() -> RecommendedRange {
        let choices = RangeChoices {
            allowed_width: 60.deg(),
            margin_bottom: 1.mpa(),
            margin_top: 1.5.mpa(),
            tvd_below_rotary: 2950.m(),
        };
        wall().recommended(choices).unwrap()
    }

    #[test]
    fn frames_say_where_they_are_and_from_where_they_count() {
        let tie = DatumTie::rotary_table_at(32.4.m()).unwrap().with_ground_at(25.m()).unwrap();
        assert_eq!(tie.text(), "rotary table 32.4 m and ground 25.0 m above mean sea level");
        assert_eq!(Datum::MeanSeaLevel.text(), "mean sea level");
        assert_eq!(hole().text(), "inclination 42.0°, azimuth 120.0°");
        assert_eq!(hole().named("KF-3").text(), "KF-3: inclination 42.0°, azimuth 120.0°");
        assert_eq!(
            hole().named("KF-3").chain().unwrap().to().text(),
            "the borehole frame of KF-3 (inclination 42.0°, azimuth 120.0°)"
        );
        assert_eq!(Projection::EqualArea.text(), Projection::EqualArea.words());
    }

    #[test]
    fn stress_and_rock_say_their_numbers_with_units() {
        assert_eq!(
            stress().effective(31.2.mpa()).unwrap().text(),
            "σ'_1 36.80 MPa, σ'_2 35.70 MPa, σ'_3 18.30 MPa: total stress less a pore pressure of 31.2 MPa"
        );
        assert_eq!(stress().regime().text(), "strike-slip faulting");
        assert_eq!(rock().strength.text(), "Mohr–Coulomb, c 11.7 MPa, φ 29.6°");
        assert_eq!(rock().text(), "Mohr–Coulomb, c 11.7 MPa, φ 29.6°; ν 0.25, T_0 2 MPa");
        assert!(rock().html().contains("T<sub>0</sub>"));
        let mass = HoekBrown { sigma_ci: 40.mpa(), m_i: 7.0, gsi: 65.0, disturbance: 0.0 };
        assert_eq!(mass.text(), "Hoek–Brown, σ_ci 40 MPa, m_i 7, GSI 65, D 0");
        assert_eq!(WeakRockMode::SlipsOnPlane.text(), "slips on the plane of weakness");
        let map = MapInputs { stress: stress(), pore: 31.2.mpa(), rock: rock(), step: 5.deg() }.text();
        assert!(map.starts_with("Holes in every direction, 5° apart\nS_nn 61.91, S_ee 55.59, S_dd 66.90, "), "{map}");
        assert!(map.ends_with("; P_p 31.2 MPa; Mohr–Coulomb, c 11.7 MPa, φ 29.6°; ν 0.25, T_0 2 MPa"), "{map}");
    }

    #[test]
    fn faults_say_their_planes_and_what_is_their_own() {
        let strength = FaultStrength { friction: 0.6, cohesion: 0.mpa() };
        assert_eq!((strength, FaultState::Holds).text(), "μ 0.6, C 0 MPa\nholds");
        let faults = FaultSet::read_csv("../../notebooks-demo/data/kestrel-faults.csv").unwrap();
        assert_eq!(
            faults.fault("KFF-04").unwrap().text(),
            "KFF-04: strike 222.7°, dip 64.0°, μ 0.45, C 0 MPa of its own"
        );
        assert_eq!(faults.fault("KFF-05").unwrap().text(), "KFF-05: strike 049.7°, dip 55.0°");
        let text = faults.text();
        assert!(
            text.starts_with("12 planes of ../../notebooks-demo/data/kestrel-faults.csv, 3 of them with"),
            "{text}"
        );
        assert_eq!(text.lines().count(), 1 + 1 + 1 + 12);
        let ranked = faults.ranked(&stress(), strength, 31.2.mpa()).unwrap().worst().unwrap().text();
        assert!(ranked.starts_with("KFF-04: strike 222.7°") && ranked.contains("; slip tendency 0.323"), "{ranked}");
    }

    #[test]
    fn a_survey_and_a_log_say_their_file_count_and_range() {
        let survey = Survey::read_csv("../../notebooks-demo/data/kf3-survey.csv").unwrap().named("KF-3");
        let text = survey.text();
        assert!(
            text.starts_with("KF-3: 50 stations of ../../notebooks-demo/data/kf3-survey.csv, MD 0 m to 3640.09 m, ")
        );
        assert!(text.contains("TVD 0.0 m to 3087.3 m below the rotary table; azimuths measured from grid north; "));
        // Words, caption, heading, four stations, dots, four stations.
        assert_eq!(text.lines().count(), 1 + 1 + 1 + 4 + 1 + 4, "{text}");
        let html = survey.html();
        assert!(html.contains("<table") && html.contains("−801.7") && !html.contains("<style"), "{html}");
        let typed = Survey::from_stations(&survey.stations()[20..]).unwrap().text();
        assert!(typed.starts_with("A hole: 30 stations typed in the notebook, "), "{typed}");
        assert!(typed.contains("below the first station") && typed.contains("no levels stated"), "{typed}");
        let station = Station { md: 2950.m(), inclination: 42.deg(), azimuth: north(120.0) };
        assert_eq!(station.text(), "MD 2950 m: inclination 42.0°, azimuth 120.0°");
        let tie_in = TieIn { north: 3.m(), east: (-4).m(), tvd: 99.m() };
        assert_eq!(tie_in.text(), "first station 3 m north and −4 m east of the wellhead, TVD 99 m");
        let log =
            DensityLog::read_las("../../notebooks-demo/data/kf1-density.las", "RHOB", Datum::RotaryTable).unwrap();
        assert_eq!(
            log.text(),
            "KF-1: RHOB of ../../notebooks-demo/data/kf1-density.las, 2851 values from 250.0 m to 3100.0 m below the \
             rotary table, 1.96 to 2.58 g/cm³, no gap; rotary table 31.8 m and ground 25.0 m above mean sea level"
        );
    }

    #[test]
    fn a_wall_says_its_place_and_everything_it_is_made_of() {
        let text = wall().text();
        assert!(text.starts_with("Wall of KF-3 at 2950 m: impermeable wall, judged by Mohr–Coulomb\nS' S_xx 57.37, "));
        assert!(
            text.ends_with(
                "S_xy −1.19, S_yz −1.07, S_xz −8.58 MPa; P_p 31.2 MPa; ν 0.25; T_0 2 MPa; c 11.7 MPa; φ 29.6°"
            )
        );
        assert!(wall().permeable(0.8).unwrap().text().ends_with("; α 0.8; w_s 0"));
        assert_eq!(wall().html().matches("<div").count(), 2);
    }

    #[test]
    fn places_of_the_wall_say_tool_face_and_bearing() {
        let mud = 1.42.sg().column(2950.m());
        let arc = wall().breakout(mud).unwrap().text();
        assert_eq!(
            arc,
            "an arc 44.8° wide fails, middle at tool face 6.2° (bearing 128.4° from true north) and at +180°; \
             shear: σ'_1 nearest hoop, σ'_2 axial, σ'_3 radial"
        );
        let whole = wall().breakout(33.mpa()).unwrap().text();
        assert!(whole.starts_with("the whole wall fails, worst at tool face 6.3° "), "{whole}");
        let cracks = wall().tensile_cracks(85.mpa()).unwrap();
        let first = cracks.first().unwrap().text();
        assert_eq!(
            first,
            "tool face 96.5° (bearing 214.8° from true north), a crack there turned 22.3° anticlockwise from the hole's \
             axis (the other way at +180°)"
        );
        let arcs = cracks.arcs().text();
        assert!(
            arcs.starts_with(
                "an arc 77.4° wide is parted in tension, middle at tool face 96.5° and at +180°; first at "
            )
        );
        let bed = |strike: f64, dip: f64| {
            let plane = Plane { strike: north(strike), dip: dip.deg() };
            let weak = WeakPlane { plane, cohesion: 2.mpa(), friction_angle: 22.deg() };
            wall().weak_plane(weak).unwrap().unrolled(mud, 8.5.inch()).unwrap().plane().text()
        };
        assert_eq!(
            bed(37.0, 12.0),
            "a wave 0.148 m from middle to crest, lowest at tool face 1.8° (bearing 122.4° from true north)"
        );
        // Across a hole that goes down at 48° towards 120°, and along it.
        assert_eq!(bed(210.0, 42.0), "a level circle, as the plane lies across the hole");
        assert!(bed(120.0, 90.0).starts_with("two lines along the hole, at tool face "), "{}", bed(120.0, 90.0));
        let deepest = wall().failure_depth(mud).unwrap().deepest().text();
        assert!(deepest.starts_with("fails to 1.018 hole radii from the axis, tool face 6.2° (bearing "), "{deepest}");
    }

    #[test]
    fn limits_and_ends_say_their_pressure_and_what_sets_it() {
        let limits = wall().limits();
        assert_eq!(
            limits.lower_shear.text(),
            "lower shear limit 42.37 MPa: shear, the hole closes in; σ'_1 nearest hoop, σ'_2 axial, σ'_3 radial; at tool \
             face 6.3° (bearing 128.4° from true north) and at +180°"
        );
        assert_eq!(limits.least_stress.text(), "least stress 49.50 MPa: a fracture runs on into the far field");
        assert_eq!((LimitKind::Initiation, MudState::Swabbed).text(), "fracture initiation\nstatic less swab");
        let weak = wall().with_strength(Strength::mohr_coulomb(1.mpa(), 20.deg())).unwrap().limits().lower_shear.text();
        assert!(weak.starts_with("lower shear limit: no safe pressure in shear; ") && weak.contains("; least bad at "));
        assert_eq!(
            range().bottom.text(),
            "40.18 MPa (1.389 sg, 13.62 MPa/km): shear governs: below this, arcs wider than allowed fail"
        );
        let others = range().beside(&[Alternative::permeable(0.8)]).unwrap();
        assert!(others.ranges()[1].top.text().ends_with("MPa: initiation governs: above this the wall parts"));
        let plan = MudPlan { static_density: 1.42.sg(), swab: Some(0.6.mpa()), circulating_density: None, surge: None };
        let held = range().hold(plan).unwrap().pressures();
        assert_eq!(
            held[0].text(),
            "static: 41.08 MPa (1.420 sg, 13.93 MPa/km), 0.91 MPa above the bottom, 6.92 MPa below the top"
        );
    }

    #[test]
    fn the_ground_and_what_was_met_say_their_layers_and_events() {
        let data = |name: &str| format!("{}/../../notebooks-demo/data/{name}", env!("CARGO_MANIFEST_DIR"));
        let pore = PressureProfile::read_csv(data("kf3-pressures.csv"), "pore_pressure").unwrap();
        let sv = PressureProfile::read_csv(data("kf3-pressures.csv"), "sv").unwrap().of("S_v", "vertical stress");
        let layers = Ground::read_layers(data("kf3-layers.csv")).unwrap();
        assert!(
            layers[2].text().starts_with("Siltstone from 2685 m below the rotary table: Mohr–Coulomb"),
            "{}",
            layers[2].text()
        );
        let ground = GroundInputs { sv, pore, horizontals: None, sh_max_azimuth: north(34.6), layers };
        let ground = Ground::new(ground).unwrap();
        let text = ground.text();
        assert!(text.starts_with("vertical stress against depth of KF-3: 6 points, TVD 2200 m"), "{text}");
        assert!(text.contains("azimuth of S_Hmax: 034.6° from true north") && text.contains("Mohr–Coulomb"), "{text}");
        assert!(ground.html().contains("<table"));
        let events = DrillingEvents::read_csv(data("kf3-events.csv")).unwrap().text();
        assert!(events.starts_with("6 drilling events, ") && events.contains("losses"), "{events}");
        let given = Horizontals { sv: 66.9.mpa(), sh_max: 68.mpa(), sh_min: 49.5.mpa(), sh_max_azimuth: north(35.0) };
        assert!(given.text().starts_with("S_v 66.9 MPa, S_Hmax 68 MPa, S_hmin 49.5 MPa; azimuth of S_Hmax: 035"));
        let zero = 0.mpa();
        let given = Components { nn: 62.mpa(), ee: 55.mpa(), dd: 66.9.mpa(), ne: (-8.5).mpa(), nd: zero, ed: zero };
        assert_eq!(given.text(), "S_nn 62 MPa, S_ee 55 MPa, S_dd 66.9 MPa, S_ne −8.5 MPa, S_nd 0 MPa, S_ed 0 MPa");
    }
}
