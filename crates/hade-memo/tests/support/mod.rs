//! A record made by hand that holds every kind of thing a memo can set.

#![allow(dead_code)]

use std::path::Path;

use hade::card::{
    Axis, Card, Check, Column, Explanation, Figure, Formula, Item, Json, Layer, Mark, Method, Reference, Role, Step,
    Table,
};
use hade::sheet::{Assumption, Basis, DataFile, Entry, Frontmatter, Given, RECORD_SCHEMA, Record, Source, trace};
use hade_memo::{Again, Memo, MemoInput, MemoOptions, Project, Replayer, build_with};
use sha2::{Digest, Sha256};

/// Text that would do harm if anything evaluated it.
pub const PROBE: &str = "#panic(\"x\") $x^2$ @ref <lab> \\ [ { ( \"q\" *b* _e_ `r` // /* */ = - ~ -- ' <script>alert(1)</script> https://a.b #let";

/// A notebook.
pub const NOTEBOOK: &[u8] = br##"{"cells":[{"cell_type":"code","execution_count":3,"metadata":{"execution":{"shell.execute_reply":"2026-01-01T00:00:00Z"}},"outputs":[{"output_type":"stream","name":"stdout","text":"1.2 s"}],"source":["sheet"]}],"metadata":{},"nbformat":4,"nbformat_minor":5}"##;

/// A survey with a few stations.
pub const SURVEY: &str = "md_m,inc_deg,azi_deg\n0,0,0\n1500,12.5,118\n2950,42,120\n";

/// A project file that says everything.
pub const PROJECT: &str = r#"
[memo]
number = "KF3-GM-001"
revision = "B"
date = 2026-05-14
status = "DRAFT"

[project]
name = "Kestrel Flat appraisal"
client = "Kestrel Flat Energy Ltd"
site = "Kestrel Flat"
hole = "KF-3"

[[people]]
role = "prepared"
name = "A. Maker"
licence = "PE 12345"
jurisdiction = "Province of Example"

[[people]]
role = "checked"
name = "B. Checker"
licence = "PE 54321"
jurisdiction = "Province of Example"

[[people]]
role = "approved"
name = "C. Approver"
licence = "PE 777"
jurisdiction = "Province of Example"

[[revisions]]
rev = "A"
date = 2026-04-30
what = "first issue for comment"
by = "A. Maker"

[[revisions]]
rev = "B"
date = 2026-05-14
what = "closure pressure of the second test cycle taken instead of the first; survey revision 2"
by = "A. Maker"
"#;

fn pressure(symbol: &str, name: &str, mpa: f64) -> Item {
    Item::new(symbol, name, "pressure", vec![mpa * 1e6], format!("{mpa:.2} MPa"))
}

fn given(item: Item, give_or_take: &str, source: Source) -> Given {
    Given { item, give_or_take: give_or_take.to_owned(), sd: None, source }
}

fn overburden(sha256: &str) -> Card {
    let rows = (0..95).map(|i| {
        let depth = 50.0 + 30.5 * f64::from(i);
        let density = 1.95 + 0.006 * f64::from(i);
        vec![
            format!("{}", i + 1),
            format!("{depth:.1}"),
            format!("{density:.3}"),
            format!("{:.2}", 0.022 * depth),
            if i % 17 == 0 { "washed out, filled".to_owned() } else { String::new() },
        ]
    });
    Card {
        kind: "overburden".to_owned(),
        version: 1,
        inputs: Json::parse("{\"file\":\"x\"}").unwrap(),
        outcome: Json::parse("{\"s_v\":66900000.0}").unwrap(),
        checks: vec![
            Check::compare("trapezoidal sum held against the sum of layer weights", &[66.9], &[66.9 + 3.2e-9], 1e-6, "MPa"),
            Check::holds("stress never falls with depth", -0.1, 0.0, "MPa"),
        ],
        warnings: Vec::new(),
        explanation: Explanation {
            title: "Vertical stress from the density log".to_owned(),
            headline: "S_v = 66.90 MPa at 2950.0 m TVD below the rotary table (22.68 MPa/km).".to_owned(),
            inputs: vec![
                Item::file("density log", "data/kf3-survey.csv", sha256),
                Item::choice("", "density above the log", "2.05 g/cm³, linear to the first sample"),
                Item::typed("z", "depth", hade::units::Length::m(2950.0)),
            ],
            results: vec![pressure("S_v", "vertical stress", 66.9), Item::new("", "gradient over TVD", "gradient", vec![22677.0], "22.68 MPa/km (19.30 ppg equivalent, 2.313 sg)")],
            method: Method {
                words: "The weight of the rock above is summed from the density log by the trapezoidal rule; the part above the first sample is filled as chosen.".to_owned(),
                formulas: vec![Formula::new(
                    "S_v = integral_0^z rho(z') thin g thin dif z' approx sum_i (rho_i + rho_(i+1)) / 2 thin g thin (z_(i+1) - z_i)",
                    "S_v = ∫ ρ g dz ≈ Σ (ρ_i + ρ_(i+1))/2 · g · (z_(i+1) − z_i)",
                )],
                symbols: vec![("ρ".to_owned(), "bulk density".to_owned()), ("g".to_owned(), "9.80665 m/s²".to_owned())],
                references: vec![Reference::new("Zoback, M.D. (2007) Reservoir Geomechanics, Cambridge University Press, eq. 1.5, p. 8")],
                assumptions: vec!["the vertical stress is the weight of the rock above".to_owned()],
            },
            steps: vec![
                Step::words("Every tenth of the 950 samples is shown; the sum runs over all."),
                Step::Table {
                    table: Table {
                        caption: "Density log and stress with depth".to_owned(),
                        columns: vec![
                            Column::text("Sample"),
                            Column::number("TVD below rotary table", "m"),
                            Column::number("Density", "g/cm³"),
                            Column::number("Stress", "MPa"),
                            Column::text("Remark"),
                        ],
                        rows: rows.collect(),
                    },
                },
                Step::worked("S_v = 0.98 + 65.92 = 66.90 MPa"),
            ],
            figures: vec![figure()],
            notes: vec!["The log is washed out between 1 180 m and 1 240 m; the neighbours' mean was taken there.".to_owned()],
            topics: vec!["overburden".to_owned(), "depth".to_owned()],
        },
    }
}

fn figure() -> Figure {
    Figure {
        caption: "Vertical stress with depth; the band is one standard deviation.".to_owned(),
        alt: "Vertical stress grows from 0 at the surface to 66.9 MPa at 2950 m.".to_owned(),
        x: Axis::new("vertical stress (MPa)", 0.0, 80.0).ticks_every(20.0),
        y: Axis::new("TVD below rotary table (m)", 0.0, 3000.0).downward(),
        equal_scale: false,
        layers: vec![
            Layer::RowBand { label: "reservoir".to_owned(), role: Role::Range, from: 2800.0, to: 3000.0 },
            Layer::ColumnBand { label: "σ".to_owned(), role: Role::Quiet, from: 60.0, to: 66.0 },
            Layer::line("S_v", Role::First, (0..50).map(|i| [1.36 * f64::from(i), 60.0 * f64::from(i)])),
            Layer::Circle {
                label: "c".to_owned(),
                role: Role::Limit,
                centre: [40.0, 1500.0],
                radius: 10.0,
                upper_half: false,
            },
            Layer::Points {
                label: "tests".to_owned(),
                role: Role::Failing,
                mark: Mark::Triangle,
                points: vec![[50.0, 2400.0]],
            },
            Layer::Words { text: "<b>#x</b>".to_owned(), at: [10.0, 500.0] },
        ],
    }
}

fn rotation() -> Card {
    let q = [[0.643_787, -0.643_582, -0.669_131], [-0.866_025, -0.5, 0.0], [-0.334_565, 0.579_484, 0.743_145]];
    let s = [[48.2, -5.1, 0.0], [-5.1, 54.1, 0.0], [0.0, 0.0, 66.9]];
    Card {
        kind: "rotation".to_owned(),
        version: 1,
        inputs: Json::parse("{}").unwrap(),
        outcome: Json::parse("[1.0]").unwrap(),
        checks: vec![Check::compare(
            "S′ rebuilt from dot products of the axis vectors",
            &[1.0],
            &[1.0 + 7e-15],
            1e-9,
            "MPa",
        )],
        warnings: Vec::new(),
        explanation: Explanation {
            title: "Stress in the axes of the hole KF-3 at 2950 m".to_owned(),
            headline: "In borehole axes σx = 58.31, σy = 49.88, σz = 61.02 MPa.".to_owned(),
            inputs: vec![
                pressure("S_v", "vertical stress", 66.9),
                pressure("S_Hmax", "greatest horizontal stress", 61.5),
                pressure("S_hmin", "least horizontal stress", 51.2),
                pressure("P_p", "pore pressure that never was stated", 31.234_567),
            ],
            results: vec![Item::new(
                "S'",
                "stress in borehole axes",
                "stress",
                vec![1.0, 2.0],
                "(58.31, 49.88, 61.02; −3.10, 0.42, −2.77) MPa: xx, yy, zz; xy, yz, xz",
            )],
            method: Method {
                words: "The tensor is turned by the product of two elementary turns.".to_owned(),
                formulas: vec![
                    Formula::new("S' = Q S Q^upright(T)", "S′ = Q S Qᵀ"),
                    Formula::new(
                        "Q = mat(delim: \"[\", cos i, 0, -sin i; 0, 1, 0; sin i, 0, cos i) mat(delim: \"[\", cos a, sin a, 0; -sin a, cos a, 0; 0, 0, 1)",
                        "Q = turn by i about the right axis × turn by a about down",
                    ),
                ],
                symbols: vec![
                    ("Q".to_owned(), "rows are the new axes in the old frame".to_owned()),
                    ("i".to_owned(), "inclination".to_owned()),
                    ("a".to_owned(), "azimuth from true north".to_owned()),
                ],
                references: vec![
                    Reference::new(
                        "Zoback, M.D. (2007) Reservoir Geomechanics, Cambridge University Press, eq. 1.5, p. 8",
                    ),
                    Reference::new(
                        "Jaeger, Cook & Zimmerman (2007) Fundamentals of Rock Mechanics, 4th ed., Blackwell, section 2.7",
                    ),
                ],
                assumptions: Vec::new(),
            },
            steps: vec![
                Step::words("First the turn by 120° about down, then by 42° about the right axis."),
                Step::matrix("Q", &q, 6, "", "rows: top of hole, right, along the hole; columns: north, east, down"),
                Step::matrix("S", &s, 2, "MPa", "geographic axes: north, east, down"),
                Step::worked(
                    "S′_xx = 0.643787² · 48.20 + 2 · 0.643787 · (−0.643582) · (−5.10) + (−0.643582)² · 54.10 + (−0.669131)² · 66.90 = 58.31 MPa, and this line goes on for so long that it has to wrap on any paper",
                ),
                Step::Matrix {
                    name: "W".to_owned(),
                    rows: vec![vec![-1.5; 10]; 2],
                    decimals: 3,
                    unit: "MPa".to_owned(),
                    about: "ten columns, set as a table".to_owned(),
                },
                Step::Table {
                    table: Table {
                        caption: "A table that is too wide for an upright page".to_owned(),
                        columns: (0..15).map(|i| Column::number(&format!("stress {i}"), "MPa")).collect(),
                        rows: vec![(0..15).map(|i| format!("-{i}234.5678")).collect(); 4],
                    },
                },
            ],
            figures: Vec::new(),
            notes: Vec::new(),
            topics: vec!["rotation".to_owned(), "stress".to_owned(), "azimuth".to_owned()],
        },
    }
}

fn limits() -> Card {
    Card {
        kind: "wall-limits".to_owned(),
        version: 2,
        inputs: Json::parse("{}").unwrap(),
        outcome: Json::parse("[2.0]").unwrap(),
        checks: vec![
            Check::compare("least effective wall stress at the limit equals −T₀", &[-2.0], &[-2.0 + 1e-7], 1e-4, "MPa"),
            Check::compare("full field at 50 radii gives S back", &[1.0], &[1.5], 1e-2, "MPa"),
        ],
        warnings: Vec::new(),
        explanation: Explanation {
            title: "Limits of the wall".to_owned(),
            headline: "No shear failure anywhere from 36.12 MPa (1.249 sg) to 44.80 MPa (1.549 sg).".to_owned(),
            inputs: vec![
                Item::new(
                    "S'",
                    "stress in borehole axes",
                    "stress",
                    vec![1.0, 2.0],
                    "(58.31, 49.88, 61.02; −3.10, 0.42, −2.77) MPa",
                ),
                pressure("c", "cohesion", 10.0),
                Item::typed("", "allowed width of a failing arc", hade::units::Angle::deg(60.0)).chosen(),
                Item::choice("", "wall", "impermeable"),
            ],
            results: vec![pressure("p_lower", "lower shear limit", 36.12), pressure("p_i", "initiation", 44.8)],
            method: Method { words: PROBE.to_owned(), ..Method::default() },
            steps: vec![Step::words(PROBE), Step::worked(PROBE)],
            figures: Vec::new(),
            notes: vec!["governed by pore pressure".to_owned(), PROBE.to_owned()],
            topics: vec!["wall".to_owned(), "mud-weight".to_owned(), "strength".to_owned()],
        },
    }
}

/// The record; `folder` is where its data file is written.
pub fn record(folder: &Path) -> Record {
    std::fs::create_dir_all(folder.join("data")).unwrap();
    std::fs::write(folder.join("data/kf3-survey.csv"), SURVEY).unwrap();
    let sha256: String = Sha256::digest(SURVEY.as_bytes()).iter().map(|b| format!("{b:02x}")).collect();
    let data = vec![DataFile {
        path: "data/kf3-survey.csv".to_owned(),
        about: "definitive survey, rev 2".to_owned(),
        sha256: sha256.clone(),
        bytes: SURVEY.len() as u64,
    }];
    let givens = vec![
        given(
            pressure("S_Hmax", "greatest horizontal stress at 2950 m TVD", 61.5),
            "3.1 MPa",
            Source::correlation("frictional limit and breakout width in KF-1, report KF-1-GM-004, section 3"),
        ),
        given(
            pressure("S_hmin", "least horizontal stress at 2950 m TVD", 51.2),
            "0.8 MPa",
            Source::measured("extended leak-off test, closure of cycle 2, 2026-03-02"),
        ),
        given(pressure("c", "cohesion of the shale", 10.0), "", Source::assumed("")),
        given(
            Item::typed("z", "depth of the calculation, TVD below rotary table", hade::units::Length::m(2950.0)),
            "",
            Source::measured("definitive survey"),
        ),
        given(
            pressure(
                "T_0",
                "tensile strength, said to be of a very longlonglonglonglonglonglongword/path/without/blanks",
                2.0,
            ),
            "",
            Source::offset(PROBE),
        ),
    ];
    let mut entries = Vec::new();
    let cards = [overburden(&sha256), rotation(), limits()];
    for (i, card) in cards.iter().enumerate() {
        let earlier: Vec<&Card> = cards.iter().take(i).collect();
        let lineage = trace(card, &givens, &data, &earlier);
        entries.push(Entry::Card { card: Box::new(card.clone()), lineage, added_by_sheet: i == 1 });
        if i == 0 {
            entries.push(Entry::Note { words: format!("The azimuth is the mean of eleven picks. {PROBE}") });
        }
    }
    let lines = |words: &[&str]| words.iter().map(|w| (*w).to_owned()).collect::<Vec<_>>();
    Record {
        schema: RECORD_SCHEMA,
        program: "hade 0.1.0".to_owned(),
        title: "Kestrel Flat KF-3: wall stability of the 8½ in hole".to_owned(),
        front: Frontmatter {
            site: "Kestrel Flat".to_owned(),
            place: "KF-3".to_owned(),
            purpose: "To say which mud weight keeps the wall of the 8½ in section standing at 2950 m TVD.".to_owned(),
            scope: "The 8½ in section of KF-3 at 2950 m TVD, drilled at 42° towards 120°.".to_owned(),
            exclusions: lines(&["well control and kick tolerance", "time-dependent failure of the shale"]),
            valid_for: lines(&[
                "depths from 2900 m to 3000 m TVD below the rotary table",
                "inclinations from 38° to 46°",
                "water-based mud, open less than five days",
            ]),
            void_if: lines(&["the pore pressure is found to differ by more than 1 MPa", PROBE]),
            left_out: vec![(
                "leak-off test of KF-2 at 1210 m".to_owned(),
                "the casing shoe was suspected to leak".to_owned(),
            )],
            open_items: lines(&["core tests of the shale are expected in June"]),
            design_basis: vec![
                ("Criterion".to_owned(), "Mohr–Coulomb, because only cohesion and friction angle are known".to_owned()),
                ("Allowed width".to_owned(), PROBE.to_owned()),
            ],
        },
        givens,
        data,
        assumptions: vec![
            Assumption {
                words: "rock is isotropic and linear elastic".to_owned(),
                basis: Basis::unverified("no core from this interval"),
            },
            Assumption {
                words: "the vertical stress is principal".to_owned(),
                basis: Basis::unverified("flat layers")
                    .to_be_verified_by("C. Approver", "image log of the next section"),
            },
            Assumption {
                words: "the pore pressure is hydrostatic".to_owned(),
                basis: Basis::verified("two pressure points of 2026-02-11 agree within 0.2 MPa"),
            },
        ],
        entries,
        conclusions: lines(&[
            "Recommended static mud weight at 2950 m TVD: 1.28 sg to 1.49 sg (10.7 to 12.4 ppg), rotary table datum.",
            "Below 1.25 sg the wall fails in shear over more than 60° of arc on each side, at tool faces 95° and 275°.",
            PROBE,
        ]),
        conflicts: Vec::new(),
        no_numbers: Vec::new(),
    }
}

/// Agrees with every card.
pub const AGREES: Replayer = |card| Ok(Again { card: card.clone(), difference: None, checks: card.checks.clone() });

/// The memo of a record.
pub fn memo(
    record_json: &str,
    folder: &Path,
    project: Option<&Project>,
    options: &MemoOptions,
    replayer: Replayer,
) -> hade_memo::Result<Memo> {
    let input = MemoInput { record_json, notebook: ("kf3.ipynb", NOTEBOOK), folder, project };
    build_with(&input, options, replayer)
}

/// The project file that says everything.
pub fn project() -> Project {
    Project::parse(PROJECT, Path::new("hade.toml")).unwrap()
}

/// A folder of its own for a test.
pub fn folder(name: &str) -> std::path::PathBuf {
    let folder = Path::new(env!("CARGO_TARGET_TMPDIR")).join(name);
    let _ = std::fs::remove_dir_all(&folder);
    std::fs::create_dir_all(&folder).unwrap();
    folder
}
