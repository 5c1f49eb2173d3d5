//! What the card of a declination says: the coefficients on the date, the field degree by degree, the
//! turn from the sphere to the ellipsoid, and how good it is.

use super::declination::{BLACKOUT, CAUTION, Declination, MagneticField};
use super::harmonics::{ECCENTRICITY_SQUARED, REFERENCE_RADIUS, SEMI_MAJOR, by_degree, field, geocentric, total};
use super::models::FieldModel;
use crate::card::{Column, Explanation, Formula, Item, Method, Reference, Step, Table};
use crate::frames::site::{few_decimals, place_items, place_words};
use crate::units::{Angle, Quantity, as_typed, fixed};

pub(super) fn explain(d: &Declination) -> Explanation {
    let model = FieldModel::on(d.inputs.date).ok();
    let place = format!("{} on {}", place_words(d.inputs.latitude, d.inputs.longitude), d.inputs.date);
    let by = match (d.inputs.stated, model) {
        (Some(_), _) => ", as stated".to_owned(),
        (None, Some(model)) => format!(" by {}", model.words()),
        (None, None) => String::new(),
    };
    let sd = d.one_sd.map(|sd| format!(" ± {}°", fixed(sd.in_deg(), 2))).unwrap_or_default();
    let side = if d.angle.si() < 0.0 { "west" } else { "east" };
    Explanation {
        title: format!("Magnetic declination at {place}{by}"),
        headline: format!("declination {}°{sd} (magnetic north lies {side} of true north)", few_decimals(d.angle, 2)),
        inputs: inputs(d),
        results: results(d),
        method: method(d, model),
        steps: steps(d, model).unwrap_or_default(),
        notes: notes(d),
        topics: vec!["azimuth".to_owned(), "declination".to_owned()],
        ..Explanation::default()
    }
}

fn inputs(d: &Declination) -> Vec<Item> {
    let mut items = place_items(d.inputs.latitude, d.inputs.longitude);
    items.push(Item::choice("", "date of the measurement", d.inputs.date.to_string()));
    items.push(match d.inputs.height {
        Some(height) => Item::typed("h", "height above the ellipsoid", height),
        None => Item::choice("h", "height above the ellipsoid, not stated", "0 m, assumed"),
    });
    if let Some(stated) = d.inputs.stated {
        let name = format!("declination stated in: {}", stated.source);
        items.push(Item::typed("D", name, stated.angle));
    }
    items
}

/// An angle in degrees with so many decimals, with its exact bits.
fn degrees(symbol: &str, name: &str, angle: Angle, decimals: usize) -> Item {
    Item::new(symbol, name, Angle::KIND, vec![angle.si()], format!("{}°", fixed(angle.in_deg(), decimals)))
}

fn results(d: &Declination) -> Vec<Item> {
    let shown = format!("{}°", few_decimals(d.angle, 2));
    let mut items = vec![Item::new("D", "magnetic declination, east positive", Angle::KIND, vec![d.angle.si()], shown)];
    let Some(b) = d.field else { return items };
    if d.inputs.stated.is_some() {
        items.push(degrees("D_m", "declination by the model, for comparison", b.declination, 2));
    }
    items.push(degrees("σ_D", "one standard deviation of the modelled declination", b.declination_sd, 2));
    items.push(Item::new(
        "D'",
        "change of the declination in one year",
        "angle per year",
        vec![b.declination_per_year.si()],
        format!("{}° per year", fixed(b.declination_per_year.in_deg(), 3)),
    ));
    items.push(degrees("I", "inclination of the field, down positive", b.inclination, 2));
    items.push(Item::computed("H", "horizontal intensity", b.horizontal));
    items.push(Item::computed("F", "total intensity", b.total));
    items.push(Item::computed("X", "component towards true north", b.north));
    items.push(Item::computed("Y", "component towards east", b.east));
    items.push(Item::computed("Z", "component down", b.down));
    items
}

fn method(d: &Declination, model: Option<FieldModel>) -> Method {
    let Some(model) = model else {
        return Method {
            words: "The declination is taken as it was stated; no model of the field holds for this date.".to_owned(),
            ..Method::default()
        };
    };
    let stated = if d.inputs.stated.is_some() {
        "The declination is taken as it was stated; the field by the model stands beside it. "
    } else {
        ""
    };
    let (published, sd, text) = match model {
        FieldModel::Wmm2025 => (
            "NOAA National Centers for Environmental Information and British Geological Survey (2024) World Magnetic Model 2025, coefficients of 13 November 2024, valid 2025.0–2030.0; error model σ_D = √(0.26² + (5417/H)²)",
            "sigma_D = sqrt(0.26^2 + (5417 \\/ H)^2)",
            "σ_D = √(0.26² + (5417/H)²), in degrees, H in nT",
        ),
        FieldModel::Igrf14 => (
            "International Association of Geomagnetism and Aeronomy (2024) International Geomagnetic Reference Field, 14th generation, doi 10.5281/zenodo.14012302",
            "sigma_D = sqrt(0.26^2 + (8251 \\/ H)^2)",
            "σ_D = √(0.26² + (8251/H)²), in degrees, H in nT",
        ),
    };
    let mut references = vec![
        Reference::new(published),
        Reference::new(
            "Chulliat, A. et al. (2020) The US/UK World Magnetic Model for 2020–2025: Technical Report, NOAA, eqs. 1–19, the same method (cited from memory)",
        ),
    ];
    let mut assumptions = vec![
        "The models hold the main field alone. Fields of the crust (mineralised rock, lava), steel (casing, rails, rigs) and magnetic storms are not in them; the standard deviation covers what is usual of them away from steel, and a local anomaly can turn the needle by several degrees.".to_owned(),
        "The needle itself is free of instrument and interference errors.".to_owned(),
    ];
    if d.inputs.height.is_none() {
        assumptions.push("The height above the ellipsoid was not stated and is taken as 0 m.".to_owned());
    }
    if model == FieldModel::Igrf14 {
        references.push(Reference::new("Beggan, C.D. (2022) Evidence-based uncertainty estimates for the International Geomagnetic Reference Field. Earth, Planets and Space 74, doi 10.1186/s40623-022-01572-y: standard deviations of ground stations 144 nT north and 136 nT east, 1980–2021"));
        assumptions.push("For IGRF-14 the standard deviation takes 144 nT across the needle, the larger of the 144 nT north and 136 nT east that ground stations showed for 1980 to 2021 on quiet days (8251 = 144 in radians turned to degrees), with the 0.26° that the error model of WMM2025 adds for disturbance.".to_owned());
    }
    Method {
        words: format!(
            "{stated}The field is the downhill gradient of a potential in spherical harmonics, with the Gauss coefficients of {} brought to the date in a straight line; it is summed along geocentric axes and turned to the geodetic ones.",
            model.words()
        ),
        formulas: vec![
            Formula::new(
                "V = a sum_(n) (a / r)^(n+1) sum_(m) (g_n^m cos m lambda + h_n^m sin m lambda) P_n^m (sin phi')",
                "V = a Σₙ (a/r)ⁿ⁺¹ Σₘ (gₙᵐ cos mλ + hₙᵐ sin mλ) Pₙᵐ(sin φ')",
            ),
            Formula::new("X' = -1/r (partial V)/(partial phi')", "X' = −(1/r) ∂V/∂φ'"),
            Formula::new("Y' = -1/(r cos phi') (partial V)/(partial lambda)", "Y' = −1/(r cos φ') ∂V/∂λ"),
            Formula::new("Z' = (partial V)/(partial r)", "Z' = ∂V/∂r"),
            Formula::new("X = X' cos(phi' - phi) - Z' sin(phi' - phi)", "X = X' cos(φ' − φ) − Z' sin(φ' − φ)"),
            Formula::new("Z = X' sin(phi' - phi) + Z' cos(phi' - phi)", "Z = X' sin(φ' − φ) + Z' cos(φ' − φ)"),
            Formula::new("D = upright(\"atan2\")(Y, X)", "D = atan2(Y, X), Y = Y'"),
            Formula::new("H = sqrt(X^2 + Y^2)", "H = √(X² + Y²)"),
            Formula::new("I = upright(\"atan2\")(Z, H)", "I = atan2(Z, H)"),
            Formula::new("F = sqrt(H^2 + Z^2)", "F = √(H² + Z²)"),
            Formula::new("D' = (X dot(Y) - Y dot(X)) / H^2", "D' = (X Ẏ − Y Ẋ) / H²"),
            Formula::new(sd, text),
        ],
        symbols: vec![
            ("a".to_owned(), "reference radius of the model, 6371.2 km".to_owned()),
            ("r, φ'".to_owned(), "distance from the Earth's centre and geocentric latitude".to_owned()),
            ("g, h".to_owned(), "Gauss coefficients, nT".to_owned()),
            ("Ẋ, Ẏ".to_owned(), "the same sums with the yearly change of the coefficients, nT per year".to_owned()),
            ("P".to_owned(), "Schmidt semi-normalised associated Legendre functions".to_owned()),
            ("X', Y', Z'".to_owned(), "north, east, down along the geocentric axes".to_owned()),
        ],
        references,
        assumptions,
    }
}

fn steps(d: &Declination, model: Option<FieldModel>) -> Option<Vec<Step>> {
    let (model, b) = (model?, d.field?);
    let (latitude, longitude, height) = d.inputs.place();
    let date = d.inputs.date;
    let year = date.decimal_year();
    let c = model.coefficients(year).ok()?;
    let mut steps = vec![Step::worked(format!(
        "t = {} + ({} − 1) / {} = {}; the last epoch of {} before that is {}, by {} years",
        date.year(),
        date.day_of_year(),
        date.days_in_year(),
        fixed(year, 5),
        model.words(),
        fixed(c.epoch, 1),
        fixed(year - c.epoch, 5)
    ))];
    for (name, m, which) in [("g(1,0)", 0, 0), ("g(1,1)", 1, 0), ("h(1,1)", 1, 1)] {
        let of = |from: &super::models::Coefficients| from.pair(1, m).get(which).copied().unwrap_or(f64::NAN);
        steps.push(Step::worked(format!(
            "{name} = {} + ({}) × {} = {} nT",
            as_typed(of(&c.at_epoch)),
            fixed(of(&c.per_year), 3),
            fixed(year - c.epoch, 5),
            fixed(of(&c.now), 2)
        )));
    }
    steps.push(Step::words(format!(
        "The other coefficients to degree {} follow in the same way from the published file.",
        c.now.last_degree()
    )));
    let place = geocentric(latitude, height);
    let normal = SEMI_MAJOR / (1.0 - ECCENTRICITY_SQUARED * latitude.sin().powi(2)).sqrt();
    steps.push(Step::worked(format!(
        "N = {SEMI_MAJOR} / √(1 − {} sin²φ) = {} km, p = (N + h) cos φ = {} km, z = (N (1 − {0}) + h) sin φ = {} km",
        fixed(ECCENTRICITY_SQUARED, 11),
        fixed(normal, 4),
        fixed(place.radius * place.latitude.cos(), 4),
        fixed(place.radius * place.latitude.sin(), 4)
    )));
    steps.push(Step::worked(format!(
        "r = √(p² + z²) = {} km, a/r = {}, φ' = atan2(z, p) = {}°",
        fixed(place.radius, 4),
        fixed(REFERENCE_RADIUS / place.radius, 7),
        fixed(place.latitude.to_degrees(), 5)
    )));
    let parts = by_degree(&c.now, place, longitude);
    let sum = total(&parts);
    let row = |name: String, v: &[f64; 3]| {
        let [x, y, z] = v.map(|part| fixed(part, 2));
        vec![name, x, y, z]
    };
    let mut rows: Vec<Vec<String>> =
        parts.iter().take(c.now.last_degree()).enumerate().map(|(i, part)| row((i + 1).to_string(), part)).collect();
    rows.push(row("sum".to_owned(), &sum));
    steps.push(Step::Table {
        table: Table {
            caption: "The field along the geocentric axes, degree by degree".to_owned(),
            columns: vec![
                Column::text("degree n"),
                Column::number("X'", "nT"),
                Column::number("Y'", "nT"),
                Column::number("Z'", "nT"),
            ],
            rows,
        },
    });
    steps.extend(elements(&b, sum, (place.latitude - latitude).to_degrees(), model));
    let [x_year, y_year, _] = field(&c.per_year, latitude, longitude, height).map(|v| fixed(v, 2));
    let [x, y, h] = [b.north, b.east, b.horizontal].map(|v| fixed(v.in_nt(), 2));
    steps.push(Step::worked(format!(
        "D' = ({x} · ({y_year}) − ({y}) · ({x_year})) / {h}² = {}° per year",
        fixed(b.declination_per_year.in_deg(), 4)
    )));
    Some(steps)
}

/// From the sums along the geocentric axes to declination, intensity and standard deviation.
fn elements(b: &MagneticField, sum: [f64; 3], turn: f64, model: FieldModel) -> Vec<Step> {
    let [x1, _, z1] = sum.map(|v| fixed(v, 2));
    let turn = fixed(turn, 5);
    let [x, y, z] = [b.north, b.east, b.down].map(|v| fixed(v.in_nt(), 2));
    let h = fixed(b.horizontal.in_nt(), 1);
    vec![
        Step::worked(format!("X = {x1} cos({turn}°) − ({z1}) sin({turn}°) = {x} nT; Y = {y} nT")),
        Step::worked(format!("Z = {x1} sin({turn}°) + ({z1}) cos({turn}°) = {z} nT")),
        Step::worked(format!("D = atan2({y}, {x}) = {}°", fixed(b.declination.in_deg(), 4))),
        Step::worked(format!(
            "H = √(({x})² + ({y})²) = {h} nT, F = √(H² + ({z})²) = {} nT, I = atan2({z}, {h}) = {}°",
            fixed(b.total.in_nt(), 1),
            fixed(b.inclination.in_deg(), 3)
        )),
        Step::worked(format!(
            "σ_D = √({}² + ({} / {h})²) = {}°",
            FieldModel::sd_floor(),
            fixed(model.sd_coefficient(), 0),
            fixed(b.declination_sd.in_deg(), 3)
        )),
    ]
}

fn notes(d: &Declination) -> Vec<String> {
    let mut notes = Vec::new();
    let Some(b) = d.field else {
        notes.push(
            "No model of the field holds for this date, so nothing stands beside the stated declination.".to_owned(),
        );
        return notes;
    };
    let h = b.horizontal.in_nt();
    if h < BLACKOUT {
        notes.push(format!(
            "WARNING: the horizontal intensity is {}, below 2000 nT: this is the blackout zone of the World Magnetic Model around a magnetic pole, where a compass is unreliable; use a gyro or a survey by the sun or satellites.",
            b.horizontal
        ));
    } else if h < CAUTION {
        notes.push(format!(
            "The horizontal intensity is {}, below 6000 nT: this is the caution zone of the World Magnetic Model, where a compass loses accuracy.",
            b.horizontal
        ));
    }
    if d.inputs.stated.is_some() {
        notes.extend(beside_the_model(d.angle, &b));
    }
    if d.inputs.date.decimal_year() < 1980.0 {
        notes.push("The standard deviation rests on stations from 1980 to 2021; the field of earlier dates is less well known (Lowes 2000, Earth, Planets and Space 52: up to a few hundred nT).".to_owned());
    }
    notes
}

/// How a stated declination lies to the model's.
fn beside_the_model(stated: Angle, b: &MagneticField) -> Vec<String> {
    let apart = |x: Angle, y: Angle| crate::frames::site::within_half_turn((x - y).si()).abs().to_degrees();
    let difference = apart(stated, b.declination);
    let usual = (3.0 * b.declination_sd.in_deg()).max(1.0);
    let mut notes = Vec::new();
    if difference > usual {
        notes.push(format!(
            "WARNING: the stated declination {}° differs from the model's {}° by {}°, more than {}°; check its place, date and sign (east is positive).",
            few_decimals(stated, 2),
            fixed(b.declination.in_deg(), 2),
            fixed(difference, 2),
            fixed(usual, 1)
        ));
        if apart(-stated, b.declination) < usual {
            notes.push("With the opposite sign it would agree.".to_owned());
        }
    }
    notes
}
