//! What the card of a convergence says: the series with its numbers, and the sphere beside it.

use super::convergence::Convergence;
use super::grid::MapGrid;
use super::transverse_mercator::{Projected, Series};
use crate::card::{Column, Explanation, Formula, Item, Method, Reference, Step, Table};
use crate::frames::site::{few_decimals, place_items, place_words, within_half_turn};
use crate::units::{Angle, Quantity, as_typed, fixed};

pub(super) fn explain(c: &Convergence) -> Explanation {
    let place = place_words(c.inputs.latitude, c.inputs.longitude);
    let by = match (c.inputs.stated, c.inputs.grid) {
        (Some(_), _) => ", as stated".to_owned(),
        (None, Some(grid)) => format!(" on {}", grid.words().split(',').next().unwrap_or_default()),
        (None, None) => String::new(),
    };
    let side = if c.angle.si() < 0.0 { "west" } else { "east" };
    Explanation {
        title: format!("Grid convergence at {place}{by}"),
        headline: format!("convergence {}° (grid north lies {side} of true north)", few_decimals(c.angle, 4)),
        inputs: inputs(c),
        results: results(c),
        method: method(c),
        steps: steps(c).unwrap_or_default(),
        notes: notes(c),
        topics: vec!["azimuth".to_owned(), "convergence".to_owned()],
        ..Explanation::default()
    }
}

fn inputs(c: &Convergence) -> Vec<Item> {
    let mut items = place_items(c.inputs.latitude, c.inputs.longitude);
    if let Some(grid) = c.inputs.grid {
        items.push(Item::choice("", "map grid", grid.words()));
    }
    if let Some(stated) = c.inputs.stated {
        items.push(Item::typed("γ", format!("convergence stated in: {}", stated.source), stated.angle));
    }
    items
}

fn results(c: &Convergence) -> Vec<Item> {
    let angle = |symbol: &str, name: &str, angle: Angle| {
        Item::new(symbol, name, Angle::KIND, vec![angle.si()], format!("{}°", few_decimals(angle, 4)))
    };
    let mut items = vec![angle("γ", "grid convergence, east positive", c.angle)];
    let Some(p) = c.projected else { return items };
    if c.inputs.stated.is_some() {
        items.push(angle("γ_g", "convergence of the map grid, for comparison", p.convergence));
    }
    items.push(Item::new("k", "point scale", "ratio", vec![p.scale], fixed(p.scale, 7)));
    for (symbol, name, value) in [("E", "easting", p.easting), ("N", "northing", p.northing)] {
        items.push(Item::new(symbol, name, "map coordinate", vec![value.si()], format!("{} m", fixed(value.si(), 2))));
    }
    items
}

fn method(c: &Convergence) -> Method {
    if c.inputs.grid.is_none() {
        return Method {
            words: "The convergence is taken as it was stated; no map grid was given beside it.".to_owned(),
            ..Method::default()
        };
    }
    let stated = if c.inputs.stated.is_some() {
        "The convergence is taken as it was stated; that of the map grid stands beside it. "
    } else {
        ""
    };
    Method {
        words: format!("{stated}The transverse Mercator projection by Krüger's series to the sixth order in the third flattening: first the conformal sphere, then the turn of the series from the sphere to the ellipsoid."),
        formulas: vec![
            Formula::new("tau' = tau sqrt(1 + sigma^2) - sigma sqrt(1 + tau^2)", "τ' = τ √(1 + σ²) − σ √(1 + τ²), τ = tan φ"),
            Formula::new("sigma = sinh(e upright(\"artanh\")(e sin phi))", "σ = sinh(e artanh(e sin φ))"),
            Formula::new("omega = lambda - lambda_0", "ω = λ − λ_0"),
            Formula::new("xi' = upright(\"atan2\")(tau', cos omega)", "ξ' = atan2(τ', cos ω)"),
            Formula::new("eta' = upright(\"arsinh\") ((sin omega) / sqrt(tau'^2 + cos^2 omega))", "η' = arsinh(sin ω / √(τ'² + cos² ω))"),
            Formula::new("p' = 1 + sum_j 2 j alpha_j cos 2 j xi' cosh 2 j eta'", "p' = 1 + Σ 2j αⱼ cos 2jξ' cosh 2jη'"),
            Formula::new("q' = sum_j 2 j alpha_j sin 2 j xi' sinh 2 j eta'", "q' = Σ 2j αⱼ sin 2jξ' sinh 2jη'"),
            Formula::new(
                "gamma = arctan(tau' / sqrt(1 + tau'^2) tan omega) + upright(\"atan2\")(q', p')",
                "γ = arctan(τ'/√(1 + τ'²) tan ω) + atan2(q', p')",
            ),
            Formula::new("xi = xi' + sum_j alpha_j sin 2 j xi' cosh 2 j eta'", "ξ = ξ' + Σ αⱼ sin 2jξ' cosh 2jη'"),
            Formula::new("eta = eta' + sum_j alpha_j cos 2 j xi' sinh 2 j eta'", "η = η' + Σ αⱼ cos 2jξ' sinh 2jη'"),
            Formula::new("E = E_0 + k_0 A eta", "E = E_0 + k_0 A η"),
            Formula::new("N = N_0 + k_0 A (xi - xi_0)", "N = N_0 + k_0 A (ξ − ξ_0)"),
            Formula::new(
                "k = k_0 A / a sqrt(p'^2 + q'^2) sqrt((1 - e^2 sin^2 phi) (1 + tau^2)) / sqrt(tau'^2 + cos^2 omega)",
                "k = k_0 (A/a) √(p'² + q'²) √((1 − e² sin²φ)(1 + τ²)) / √(τ'² + cos² ω)",
            ),
        ],
        symbols: vec![
            ("e".to_owned(), "eccentricity of the ellipsoid, e² = f (2 − f)".to_owned()),
            ("α".to_owned(), "Krüger's coefficients, polynomials in n = f / (2 − f)".to_owned()),
            ("τ'".to_owned(), "tangent of the conformal latitude".to_owned()),
            ("λ_0, k_0, E_0, N_0".to_owned(), "the grid's central meridian, scale, false easting and false northing".to_owned()),
            ("A".to_owned(), "radius of the circle as long as the meridian, a / (1 + n) · (1 + n²/4 + n⁴/64 + n⁶/256)".to_owned()),
            ("a".to_owned(), "half the major axis of the ellipsoid".to_owned()),
            ("ξ_0".to_owned(), "ξ at the grid's latitude of origin on the central meridian, 0 at the equator".to_owned()),
        ],
        references: vec![
            Reference::new("Krüger, L. (1912) Konforme Abbildung des Erdellipsoids in der Ebene, Geodätisches Institut Potsdam (cited from memory)"),
            Reference::new("Karney, C.F.F. (2011) Transverse Mercator with an accuracy of a few nanometers. Journal of Geodesy 85, 475–485, eqs. 7–9, 23–25, 35 (cited from memory)"),
        ],
        assumptions: vec![
            "Latitude and longitude are on the geodetic datum of the grid; 100 m of difference between two datums change the convergence by about 0.001° (more towards the poles).".to_owned(),
            "The grid is defined, not measured: its convergence has no standard deviation of its own.".to_owned(),
        ],
    }
}

fn steps(c: &Convergence) -> Option<Vec<Step>> {
    let (grid, p) = (c.inputs.grid?, c.projected?);
    let series = Series::new(grid.ellipsoid);
    let latitude = c.inputs.latitude.si();
    let w = series.work(latitude, within_half_turn((c.inputs.longitude - grid.central_meridian).si()));
    let rows = series.alpha.iter().enumerate().map(|(j, alpha)| {
        let k = 2.0 * (j as f64 + 1.0);
        vec![
            (j + 1).to_string(),
            format!("{alpha:.6e}"),
            format!("{:.6e}", k * alpha * (k * w.xi).cos() * (k * w.eta).cosh()),
            format!("{:.6e}", k * alpha * (k * w.xi).sin() * (k * w.eta).sinh()),
        ]
    });
    let mut steps = vec![
        Step::worked(format!(
            "ω = {}° − ({}°) = {}°",
            as_typed(c.inputs.longitude.in_deg()),
            as_typed(grid.central_meridian.in_deg()),
            fixed(w.lambda.to_degrees(), 6)
        )),
        Step::worked(format!(
            "1/f = {}, n = {}, e = {}, A = {} m",
            as_typed(grid.ellipsoid.inverse_flattening),
            fixed(series.n, 10),
            fixed(series.e, 9),
            fixed(series.radius, 3)
        )),
        Step::worked(format!(
            "τ = tan φ = {}, τ' = {}, ξ' = {}, η' = {}",
            fixed(latitude.tan(), 8),
            fixed(w.tau, 8),
            fixed(w.xi, 8),
            fixed(w.eta, 8)
        )),
        Step::Table {
            table: Table {
                caption: "The terms of the series".to_owned(),
                columns: vec![
                    Column::text("j"),
                    Column::number("α", ""),
                    Column::number("term of p'", ""),
                    Column::number("term of q'", ""),
                ],
                rows: rows.collect(),
            },
        },
        Step::worked(format!(
            "γ = arctan(sin(arctan τ') tan ω) + atan2({}, {}) = {}° + ({}°) = {}°",
            fixed(w.q, 9),
            fixed(w.p, 9),
            fixed(w.on_sphere.to_degrees(), 6),
            fixed(w.by_series.to_degrees(), 6),
            fixed(p.convergence.in_deg(), 6)
        )),
    ];
    steps.push(on_a_sphere(latitude, w.lambda));
    steps.push(coordinates(&grid, &p));
    Some(steps)
}

/// What a pocket calculator gives.
fn on_a_sphere(latitude: f64, lambda: f64) -> Step {
    let gamma = (lambda.tan() * latitude.sin()).atan();
    Step::worked(format!(
        "For comparison on a sphere: arctan(tan ω sin φ) = arctan({} × {}) = {}°",
        fixed(lambda.tan(), 8),
        fixed(latitude.sin(), 8),
        fixed(gamma.to_degrees(), 5)
    ))
}

fn coordinates(grid: &MapGrid, p: &Projected) -> Step {
    Step::words(format!(
        "On {} (central meridian {}°, k_0 {}, E_0 {} m, N_0 {} m, a {} m) the place has E {} m and N {} m, to be held against the coordinates of the plan.",
        grid.words(),
        as_typed(grid.central_meridian.in_deg()),
        as_typed(grid.scale),
        as_typed(grid.false_easting.si()),
        as_typed(grid.false_northing.si()),
        as_typed(grid.ellipsoid.semi_major.si()),
        fixed(p.easting.si(), 2),
        fixed(p.northing.si(), 2)
    ))
}

fn notes(c: &Convergence) -> Vec<String> {
    let mut notes = Vec::new();
    if c.angle.abs().in_deg() > 10.0 {
        notes.push(format!(
            "WARNING: a convergence of {}° is more than 10°, unusual for a map grid; check longitude, central meridian and their signs (east is positive), or whether the grid was turned.",
            few_decimals(c.angle, 2)
        ));
    }
    if let (Some(stated), Some(p)) = (c.inputs.stated, c.projected) {
        let apart = |x: Angle, y: Angle| within_half_turn((x - y).si()).abs().to_degrees();
        let difference = apart(stated.angle, p.convergence);
        if difference > USUAL {
            notes.push(format!(
                "WARNING: the stated convergence {}° differs from that of the map grid, {}°, by {}°; check its grid, place and sign (east is positive).",
                few_decimals(stated.angle, 3),
                fixed(p.convergence.in_deg(), 3),
                fixed(difference, 3)
            ));
            if apart(-stated.angle, p.convergence) < USUAL {
                notes.push("With the opposite sign it would agree.".to_owned());
            }
        }
    }
    notes
}

/// A stated convergence that was rounded, or taken a few kilometres away, differs by no more (degrees).
const USUAL: f64 = 0.1;
