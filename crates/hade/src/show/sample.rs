//! A card and a sheet made by hand, for the tests of this module.

use crate::card::{
    Axis, Card, Check, Column, Data as _, Explain, Explanation, Figure, Formula, Item, Layer, Mark, Method, Reference,
    Role, Step, Table,
};
use crate::error::Result;
use crate::sheet::{Basis, Sheet, Source};
use crate::units::{Pressure, Units as _};

/// A result whose second check fails.
#[derive(Clone)]
pub struct Limit(Pressure);

impl Explain for Limit {
    const KIND: &'static str = "sample-limit";
    type Inputs = f64;
    type Outcome = f64;
    fn compute(inputs: f64) -> Result<Self> {
        Ok(Limit(Pressure::pa(inputs)))
    }
    fn inputs(&self) -> f64 {
        self.0.in_pa()
    }
    fn outcome(&self) -> f64 {
        self.0.in_pa()
    }
    fn check(inputs: &f64, outcome: &f64) -> Vec<Check> {
        vec![
            Check::compare(
                "criterion just inside and outside the limit",
                &[*inputs / 1e6],
                &[*outcome / 1e6],
                1e-6,
                "MPa",
            ),
            Check::compare(
                "far field at r = 50 radii gives S back",
                &[*inputs / 1e6],
                &[*outcome / 1e6 + 0.004],
                1e-6,
                "MPa",
            ),
        ]
    }
    fn explain(&self) -> Explanation {
        Explanation {
            title: "Limits of the wall at 2950 m".into(),
            headline: "Lower shear limit 41.3 MPa (1.43 sg below the rotary table) at 60° allowed width; initiation 64.2 MPa; least stress S_hmin 54.1 MPa.".into(),
            inputs: vec![
                Item::typed("S_v", "vertical stress at 2950 m TVD", 66.9.mpa()),
                Item::typed("P_p", "pore pressure", 31.2.mpa()),
                Item::typed("w", "allowed width of the failing arc", 60.deg()).chosen(),
            ],
            results: vec![
                Item::computed("p_low", "lower shear limit at 60° width", self.0),
                Item::computed("p_init", "initiation", 64.2.mpa()),
                Item::computed("σ'_3", "least effective stress at the tool face of initiation", (-2).mpa()),
            ],
            method: Method {
                words: "The wall stresses of an inclined hole in linear elastic rock are compared with the criterion at every tool face.".into(),
                formulas: vec![
                    Formula::new("x", "σ_θ = σ_x + σ_y − 2(σ_x − σ_y) cos 2θ − 4 τ_xy sin 2θ − p"),
                    Formula::new("x", "τ = c + σ' tan φ"),
                ],
                symbols: vec![("θ".into(), "tool face, clockwise from the top of the hole".into())],
                references: vec![Reference::new(
                    "Bradley, W. B. (1979), Failure of inclined boreholes, J. Energy Resour. Technol. 101(4), 232–239.",
                )],
                assumptions: vec!["the rock is isotropic and linear elastic".into()],
            },
            steps: vec![
                Step::words("The stress in the axes of the hole:"),
                Step::matrix(
                    "S'",
                    &[[58.61, -3.2, 10.04], [-3.2, 61.0, 0.515], [10.04, 0.515, 63.9]],
                    2,
                    "MPa",
                    "rows: top of hole, right, along hole",
                ),
                Step::worked("σ_θ = 58.61 + 61.00 − 2(58.61 − 61.00) cos 180° − 4(-3.20) sin 180° − 41.30 = 73.53 MPa"),
                Step::Table { table: table() },
            ],
            figures: vec![figure()],
            notes: vec!["The lower limit is governed by shear at the sides of the hole, bearing 030° and 210°.".into()],
            topics: vec!["wall".into()],
        }
    }
}

pub fn table() -> Table {
    Table {
        caption: "Lower shear limit against allowed width".into(),
        columns: vec![
            Column::text("governed by"),
            Column::number("width", "°"),
            Column::number("p_low", "MPa"),
            Column::number("mud weight", "sg"),
        ],
        rows: vec![
            vec!["shear".into(), "0".into(), "47.02".into(), "1.625".into()],
            vec!["shear".into(), "30".into(), "44.8".into(), "1.55".into()],
            vec!["shear, in tension".into(), "60".into(), "-0.35".into(), "-0.012".into()],
        ],
    }
}

/// The card.
pub fn card() -> Card {
    Limit(41.3.mpa()).card()
}

/// A sheet on which one input is unmatched and one check fails.
pub fn sheet() -> Sheet {
    let mut sheet = Sheet::new("Kestrel Flat KF-3: wall stability of the 8½ in hole");
    let _ = sheet.given(
        "S_v",
        "vertical stress at 2950 m TVD",
        66.9.mpa().give_or_take(1.3.mpa()),
        Source::measured("density log KF-1, integrated from the ground"),
    );
    sheet.assume("rock is isotropic and linear elastic", Basis::unverified("no core from this interval"));
    sheet.add(&Limit(41.3.mpa()));
    sheet.note("The image log shows breakouts at 030° between 2938 m and 2951 m.");
    sheet.conclude("Drill 2900–2990 m with 1.45 to 1.58 sg.");
    assert!(f64::read(&1.0_f64.write()).is_ok());
    sheet
}

/// A figure with every kind of layer that stands on axes by a measure.
pub fn figure() -> Figure {
    let around = |f: fn(f64) -> f64| (0..=180).map(move |i| [f64::from(2 * i), f(f64::from(2 * i).to_radians())]);
    Figure {
        caption: "Stresses at the wall against tool face at 41.3 MPa wall pressure; the rock fails where hatched."
            .into(),
        alt: "The hoop stress peaks at 103 MPa at 90° and 270°, where it passes the strength over 58°.".into(),
        x: Axis::new("tool face θ (°, clockwise from the top of the hole)", 0.0, 360.0).ticks_every(30.0),
        y: Axis::new("stress σ' (MPa)", -10.0, 120.0),
        equal_scale: false,
        layers: vec![
            Layer::ColumnBand { label: "fails".into(), role: Role::Failing, from: 61.0, to: 119.0 },
            Layer::ColumnBand { label: "fails".into(), role: Role::Failing, from: 241.0, to: 299.0 },
            Layer::RowBand { label: "recommended".into(), role: Role::Range, from: 30.0, to: 42.0 },
            Layer::line("hoop σ_θ", Role::First, around(|a| 55.0 - 48.0 * (2.0 * a).cos())),
            Layer::line("along the hole σ_z", Role::Second, around(|a| 52.0 - 12.0 * (2.0 * a).cos())),
            Layer::line("radial σ_r", Role::Third, around(|_| 10.1)),
            Layer::line("strength", Role::Limit, around(|a| 82.0 + 3.0 * a.sin())),
            Layer::Points {
                label: "peak hoop".into(),
                role: Role::First,
                mark: Mark::Dot,
                points: vec![[90.0, 103.0], [270.0, 103.0]],
            },
            Layer::Words { text: "S_hmin side".into(), at: [150.0, 112.0] },
        ],
    }
}
