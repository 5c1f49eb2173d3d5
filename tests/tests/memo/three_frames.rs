//! Three measurements in three frames become one stress, and a memo.

use hade::sheet::Record;

use super::support::{assert_success, attachments, demo_copy, memo, text};

/// The mean worked out in numpy from the notebook's givens: S = 0.4 S₁ + 0.4 Q₂ᵀ C Q₂ + 0.2 M₃ᵀ(−T)M₃
/// with the declination −1.54390° (ppigrf 2.1.0) and the convergence −1.31805° (pyproj 3.7.2), in MPa:
/// nn, ee, dd, ne, ed, nd; and its principal values.
const MEAN: [f64; 6] = [20.991_171, 16.212_906, 16.175_124, 5.779_781, 0.049_619, 0.693_773];
const PRINCIPAL: [f64; 3] = [24.898_051, 16.164_192, 12.316_956];
/// What the declination model and a site's height may differ by, in MPa of the largest component.
const MODEL_MPA: f64 = 2e-4;

#[test]
fn tests_in_a_hole_a_strain_cell_and_a_model_become_one_stress() {
    let demo = demo_copy();
    assert_success(&memo(demo.path(), "stress.ipynb", "stress.pdf"));
    let pdf = demo.path().join("stress.pdf");
    let (_, bytes) = attachments(&pdf).into_iter().find(|(name, _)| name == "record.json").expect("record.json");
    let record = Record::from_json(std::str::from_utf8(&bytes).expect("UTF-8")).expect("a record");
    assert_eq!(record.unknown_inputs(), vec![], "every input is on the sheet");
    assert_eq!(record.conflicts, Vec::<String>::new());
    let card = |title: &str| {
        let found = record.cards().into_iter().find(|(c, _)| c.title() == title);
        found.unwrap_or_else(|| panic!("no item \"{title}\"")).0.clone()
    };
    for (card, _) in record.cards() {
        assert!(card.passed(), "{}: {:#?}", card.title(), card.checks);
    }

    let mean = card("Stress tensor of the decline by weighted mean");
    for (got, want) in mean.explanation.results[0].si.iter().zip(MEAN) {
        assert!((got * 1e-6 - want).abs() < MODEL_MPA, "{got} {want}");
    }
    let principals = card("Principal stresses of the decline");
    let magnitudes: Vec<f64> = (1..=3)
        .map(|n| {
            principals.explanation.results.iter().find(|r| r.symbol == format!("S_{n}")).expect("a magnitude").si[0]
        })
        .collect();
    for (got, want) in magnitudes.iter().zip(PRINCIPAL) {
        assert!((got * 1e-6 - want).abs() < MODEL_MPA, "{got} {want}");
    }
    // Each measurement has an item of its own, in the frame it came from.
    card("Stress tensor of the hydraulic tests from the vertical and horizontal stresses");
    card("Stress tensor of the strain cell from six components in the axes of KC-2");
    let model = card("Stress tensor of the back-analysis from six components in the axes of the mine grid");
    assert!(model.explanation.notes[0].contains("Signs were turned"));

    if hade_tests::tool("pdftotext") {
        let text = text(&pdf);
        for words in ["KF-CAL-0030", "IGRF-14", "Kestrel Flat", "grid convergence", "the mine grid", "Slip tendency"] {
            assert!(text.to_lowercase().contains(&words.to_lowercase()), "\"{words}\" is printed");
        }
    }
}
