//! What the card of a position says: the stations, the last arc with its numbers, the hole in
//! side view and from above.

use super::position::{Asked, Position};
use super::survey::{Leg, Survey, SurveySource};
use super::table::{rows, station_columns};
use crate::card::{Axis, Explanation, Figure, Formula, Item, Layer, Mark, Method, Reference, Role, Step, Table};
use crate::frames::vector::{V3, add, wrap};
use crate::frames::{Datum, North, bearing_item, correction_item, few_decimals, three_figures};
use crate::units::{Angle, Length, Quantity, fixed};

/// A card prints no more station rows than this.
const MOST_ROWS: usize = 80;

pub(super) fn explain(p: &Position) -> Explanation {
    let survey = p.survey();
    let mut steps = vec![Step::words(declarations(survey))];
    let all = rows(survey, p.used());
    let left_out = all.len().saturating_sub(MOST_ROWS);
    if left_out > 0 {
        steps.push(Step::words(format!("The first {left_out} stations are worked in the same way and not printed.")));
    }
    steps.push(Step::Table {
        table: Table {
            caption: format!("Stations down to the one below {}, each worked from the one above", p.name()),
            columns: station_columns(),
            rows: all.into_iter().skip(left_out).collect(),
        },
    });
    steps.extend(last_arc(p));
    if let (Some(below_sea), Some(level)) = (depth_below_sea(p), level(survey)) {
        steps.push(Step::worked(format!(
            "TVD below mean sea level = {} − {} = {} m",
            fixed(p.tvd.si(), 2),
            fixed(level.si(), 2),
            fixed(below_sea.si(), 2)
        )));
    }
    Explanation {
        title: format!("Position of {}", p.name()),
        headline: format!(
            "MD {}, TVD {} below {}, {}",
            p.md,
            p.tvd,
            if survey.is_tied_in() { "the rotary table" } else { "the first station" },
            p.attitude.words()
        ),
        inputs: inputs(p),
        results: results(p),
        method: method(),
        steps,
        figures: vec![side_view(p), plan_view(p)],
        notes: notes(p),
        topics: vec!["survey".to_owned()],
    }
}

fn depth_below_sea(p: &Position) -> Option<Length> {
    p.below(Datum::MeanSeaLevel).ok().map(|d| d.tvd)
}

fn level(survey: &Survey) -> Option<Length> {
    survey.tie().and_then(|t| t.elevation(Datum::RotaryTable)).ok()
}

/// What the table of numbers cannot say: norths and datum.
pub(super) fn declarations(survey: &Survey) -> String {
    let data = survey.data();
    let by = match &data.meta.source {
        SurveySource::File { path, .. } => format!("As {path} declares: "),
        SurveySource::Typed => "As stated with the stations: ".to_owned(),
    };
    let first = data.stations.first().map(|s| s.azimuth);
    let same = first.filter(|f| {
        data.stations.iter().all(|s| s.azimuth.north() == f.north() && s.azimuth.correction() == f.correction())
    });
    let north = match same {
        None => "azimuths from several norths, each with its own correction".to_owned(),
        Some(azimuth) => match (azimuth.north(), azimuth.correction()) {
            (North::Grid, Some(c)) => format!(
                "azimuths from grid north, convergence {}° (east positive), so true = grid + ({0}°)",
                few_decimals(c, 4)
            ),
            (North::Magnetic, Some(c)) => format!(
                "azimuths from magnetic north, declination {}° (east positive), so true = magnetic + ({0}°)",
                few_decimals(c, 4)
            ),
            (north, _) => format!("azimuths from {}", north.words()),
        },
    };
    let levels = data.meta.tie.map(|t| format!("; {}", t.words())).unwrap_or_default();
    let begin = match data.meta.tie_in {
        Some(t) => {
            format!("; the first station lies {} north and {} east of the wellhead at TVD {}", t.north, t.east, t.tvd)
        }
        None => String::new(),
    };
    let north = match survey.corrected_at() {
        Some((site, _)) => format!("{north}; that correction is the site's, {}", site.words()),
        None => north,
    };
    format!("{by}{north}; depths from the rotary table{levels}{begin}.")
}

fn inputs(p: &Position) -> Vec<Item> {
    let survey = p.survey();
    let mut items = vec![survey.item()];
    items.extend(stated_items(survey));
    items.push(match p.asked() {
        Asked::MeasuredDepth(md) => Item::typed("MD", "measured depth asked for", md),
        Asked::TrueVerticalDepth(tvd) => Item::typed("z", "true vertical depth asked for, below the rotary table", tvd),
    });
    items
}

/// What the notebook stated beside the stations.
pub(crate) fn stated_items(survey: &Survey) -> Vec<Item> {
    let meta = &survey.data().meta;
    let mut items = Vec::new();
    if let (Some((_, north)), Some(c)) =
        (survey.corrected_at(), survey.data().stations.first().and_then(|s| s.azimuth.correction()))
    {
        items.push(correction_item(north, c));
    }
    if let (Some(level), false) = (level(survey), meta.tie_in_file) {
        items.push(Item::typed("e_RT", "rotary table above mean sea level", level));
    }
    if let (Some(t), SurveySource::Typed) = (meta.tie_in, &meta.source) {
        items.push(Item::typed("N_0", "north of the first station", t.north));
        items.push(Item::typed("E_0", "east of the first station", t.east));
        items.push(Item::typed("z_0", "true vertical depth of the first station", t.tvd));
    }
    items
}

fn results(p: &Position) -> Vec<Item> {
    let tvd = if p.survey().is_tied_in() {
        Item::computed("z", "true vertical depth below the rotary table", p.tvd)
    } else {
        let words = format!("{} below the first station", p.tvd);
        Item::new(
            "z",
            "true vertical depth below the first station",
            "depth below the first station",
            vec![p.tvd.si()],
            words,
        )
    };
    let mut items = vec![
        Item::computed("MD", "measured depth", p.md),
        tvd,
        Item::computed("N", "north of the wellhead", p.north),
        Item::computed("E", "east of the wellhead", p.east),
        Item::computed("i", "inclination of the hole from vertical", p.attitude.inclination),
        bearing_item("a", "azimuth of the hole", p.attitude.azimuth.measured()),
        Item::new(
            "β",
            "change of direction from the station above",
            Angle::KIND,
            vec![p.dogleg.si()],
            format!("{}°", fixed(p.dogleg.in_deg(), 3)),
        ),
        Item::new(
            "D_30",
            "dogleg severity",
            "dogleg severity",
            vec![p.dogleg_in_30_m.si()],
            format!(
                "{}° in 30 m ({}° in 100 ft)",
                fixed(p.dogleg_in_30_m.in_deg(), 2),
                fixed(p.dogleg_in_100_ft().in_deg(), 2)
            ),
        ),
    ];
    if let Some(level) = level(p.survey()) {
        items.push(Item::computed("e_RT", "rotary table above mean sea level", level));
    }
    if let Some(below_sea) = depth_below_sea(p) {
        items.push(Item::computed("z_s", "true vertical depth below mean sea level", below_sea));
    }
    items
}

fn notes(p: &Position) -> Vec<String> {
    let mut notes = Vec::new();
    if !p.survey().is_tied_in() {
        notes.push("The survey begins below the rotary table and nothing says where: north, east and TVD count from its first station.".to_owned());
    }
    if p.attitude.is_vertical() {
        notes.push("The hole is vertical here: its azimuth is only the reference for tool faces.".to_owned());
    }
    notes
}

/// The arc from the station above, with its numbers.
fn last_arc(p: &Position) -> Vec<Step> {
    let leg = p.leg();
    let (i1, a1) = (leg.top.i.to_degrees(), leg.top.a.to_degrees());
    let (i2, a2) = (p.attitude.inclination.in_deg(), p.attitude.azimuth.measured().in_deg());
    let length = p.md.si() - leg.top.md;
    let factor = p.ratio_factor();
    let [n, e, d] = [p.north.si() - leg.start[0], p.east.si() - leg.start[1], p.tvd.si() - leg.start[2]];
    let mut steps = vec![Step::words(match p.asked() {
        Asked::MeasuredDepth(_) => format!(
            "The depth lies {} m below the station above it, {} of the way to the next; the direction there is on the great circle between the two.",
            fixed(length, 2),
            fixed(length / leg.arc.length, 6)
        ),
        Asked::TrueVerticalDepth(_) => format!(
            "The arc below MD {} m passes this TVD after {} m of hole, {} of the way to the next station; the direction there is on the great circle between the two.",
            fixed(leg.top.md, 2),
            fixed(length, 4),
            fixed(length / leg.arc.length, 6)
        ),
    })];
    let [t1, t2] = [
        leg.top.t,
        crate::well::survey::arc::direction(p.attitude.inclination.si(), p.attitude.azimuth.measured().si()),
    ];
    steps.push(Step::worked(format!(
        "sin²(β/2) = sin²(({} − {}) / 2) + sin {} sin {} sin²(({} − {}) / 2), so β = {}°",
        fixed(i2, 3),
        fixed(i1, 3),
        fixed(i1, 3),
        fixed(i2, 3),
        fixed(a2, 3),
        fixed(a1, 3),
        fixed(p.dogleg.in_deg(), 4)
    )));
    steps.push(Step::worked(format!("RF = (2 / β) tan(β / 2) = {}, β in radians", fixed(factor, 8))));
    let line = |name: &str, what: &str, from: f64, to: f64, start: f64, sum: f64| {
        Step::worked(format!(
            "{name} = {} + {} / 2 × {what} × RF = {0} + {1} / 2 × ({} + {}) × {} = {} m",
            fixed(start, 3),
            fixed(length, 3),
            fixed(from, 6),
            fixed(to, 6),
            fixed(factor, 6),
            fixed(start + sum, 3)
        ))
    };
    let [n0, e0, d0] = leg.start;
    steps.push(line("N", "(sin i₁ cos a₁ + sin i₂ cos a₂)", t1[0], t2[0], n0, n));
    steps.push(line("E", "(sin i₁ sin a₁ + sin i₂ sin a₂)", t1[1], t2[1], e0, e));
    steps.push(line("TVD", "(cos i₁ + cos i₂)", t1[2], t2[2], d0, d));
    steps
}

pub(super) fn method() -> Method {
    Method {
        words: "Each stretch between two stations is a circular arc that touches both measured directions (minimum curvature). On the arc the direction turns evenly along the great circle between them; the last, partial arc lies on the same circle.".to_owned(),
        formulas: vec![
            Formula::new(
                "sin^2 beta/2 = sin^2 (i_2 - i_1)/2 + sin i_1 sin i_2 sin^2 (a_2 - a_1)/2",
                "sin²(β/2) = sin²((i₂ − i₁)/2) + sin i₁ sin i₂ sin²((a₂ − a₁)/2)",
            ),
            Formula::new("R_F = 2/beta tan beta/2", "RF = (2/β) tan(β/2); 1 where β = 0"),
            Formula::new(
                "Delta N = (Delta M)/2 (sin i_1 cos a_1 + sin i_2 cos a_2) R_F",
                "ΔN = ΔMD/2 (sin i₁ cos a₁ + sin i₂ cos a₂) RF",
            ),
            Formula::new(
                "Delta E = (Delta M)/2 (sin i_1 sin a_1 + sin i_2 sin a_2) R_F",
                "ΔE = ΔMD/2 (sin i₁ sin a₁ + sin i₂ sin a₂) RF",
            ),
            Formula::new("Delta z = (Delta M)/2 (cos i_1 + cos i_2) R_F", "ΔTVD = ΔMD/2 (cos i₁ + cos i₂) RF"),
        ],
        symbols: vec![
            ("i, a".to_owned(), "inclination and true azimuth at the ends of an arc".to_owned()),
            ("β".to_owned(), "dogleg: the angle between the two directions".to_owned()),
            ("RF".to_owned(), "ratio factor, from the chord's broken line to the arc".to_owned()),
            ("M".to_owned(), "measured depth".to_owned()),
        ],
        references: vec![
            Reference::new("Taylor, H.L. and Mason, C.M. (1972) A systematic approach to well surveying calculations. SPE Journal 12(6), 474–488, SPE 3362"),
            Reference::new("Zaremba, W.A. (1973) Directional survey by the circular arc method. SPE Journal 13(1), 5–11, SPE 3664 (cited from memory)"),
        ],
        assumptions: vec![
            "The hole bends evenly between stations.".to_owned(),
            "Sag, magnetic interference and pipe stretch are corrected in the stations or negligible.".to_owned(),
        ],
    }
}

/// The path of the hole over the stations used, in north, east, down.
pub(super) fn path(survey: &Survey, stations: usize) -> Vec<V3> {
    let legs: Vec<Leg> = survey.legs().take(stations.saturating_sub(1)).collect();
    let pieces = (400 / legs.len().max(1)).clamp(1, 12);
    let mut points = Vec::new();
    for leg in &legs {
        for k in 0..pieces {
            points.push(add(leg.start, leg.arc.up_to(k as f64 / pieces as f64).displacement()));
        }
    }
    points.extend(legs.last().map(|leg| leg.end));
    points
}

fn span(values: impl Iterator<Item = f64>, least: f64) -> (f64, f64) {
    let (low, high) = values.fold((f64::INFINITY, f64::NEG_INFINITY), |(l, h), v| (l.min(v), h.max(v)));
    let (middle, half) = (0.5 * (low + high), (0.5 * (high - low)).max(least));
    (middle - 1.08 * half, middle + 1.08 * half)
}

fn layers(path: &[[f64; 2]], stations: &[[f64; 2]], here: [f64; 2], label: &str) -> Vec<Layer> {
    let mut layers = Vec::new();
    if stations.len() <= 150 {
        layers.push(Layer::Points {
            label: String::new(),
            role: Role::Quiet,
            mark: Mark::Cross,
            points: stations.to_vec(),
        });
    }
    layers.push(Layer::line("", Role::First, path.iter().copied()));
    layers.push(Layer::Points { label: label.to_owned(), role: Role::Limit, mark: Mark::Dot, points: vec![here] });
    layers
}

fn side_view(p: &Position) -> Figure {
    let azimuth = if p.departure().si() < 1.0 { 0.0 } else { wrap(p.east.si().atan2(p.north.si())) };
    let (s, c) = azimuth.sin_cos();
    let flat = |[n, e, d]: V3| [n * c + e * s, d];
    let path: Vec<[f64; 2]> = path(p.survey(), p.used()).into_iter().map(flat).collect();
    let stations: Vec<[f64; 2]> = p.survey().data().places.iter().take(p.used()).copied().map(flat).collect();
    let here = flat([p.north.si(), p.east.si(), p.tvd.si()]);
    let (left, right) = span(path.iter().map(|q| q[0]).chain([here[0], 0.0]), 50.0);
    let (top, bottom) = span(path.iter().map(|q| q[1]).chain([here[1], 0.0]), 50.0);
    let towards = three_figures(Angle::from_si(azimuth));
    Figure {
        caption: format!(
            "Side view of the hole, looking across azimuth {towards}°; crosses are stations, the dot is {}.",
            p.name()
        ),
        alt: format!(
            "Path of the hole from the first station down to TVD {} m at {} m from the wellhead towards {towards}°, where it lies at {}.",
            fixed(here[1], 1),
            fixed(here[0], 1),
            p.attitude.words()
        ),
        x: Axis::new(&format!("distance towards {towards}° (m)"), left, right),
        y: Axis::new(
            if p.survey().is_tied_in() { "TVD below the rotary table (m)" } else { "TVD below the first station (m)" },
            top,
            bottom,
        )
        .downward(),
        equal_scale: true,
        layers: layers(&path, &stations, here, &format!("TVD {} m", fixed(p.tvd.si(), 1))),
    }
}

fn plan_view(p: &Position) -> Figure {
    let flat = |[n, e, _]: V3| [e, n];
    let path: Vec<[f64; 2]> = path(p.survey(), p.used()).into_iter().map(flat).collect();
    let stations: Vec<[f64; 2]> = p.survey().data().places.iter().take(p.used()).copied().map(flat).collect();
    let here = [p.east.si(), p.north.si()];
    let (left, right) = span(path.iter().map(|q| q[0]).chain([here[0], 0.0]), 50.0);
    let (low, high) = span(path.iter().map(|q| q[1]).chain([here[1], 0.0]), 50.0);
    Figure {
        caption: format!("The hole from above, true north up; the dot is {}.", p.name()),
        alt: format!(
            "Plan of the hole: it ends {} m north and {} m east of the wellhead.",
            fixed(p.north.si(), 1),
            fixed(p.east.si(), 1)
        ),
        x: Axis::new("east of the wellhead (m)", left, right),
        y: Axis::new("north of the wellhead, true north (m)", low, high),
        equal_scale: true,
        layers: layers(&path, &stations, here, &format!("azimuth {}°", three_figures(p.attitude.azimuth.measured()))),
    }
}
