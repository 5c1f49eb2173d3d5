//! What users see, as snapshots that somebody looked at. After a wanted change:
//! `INSTA_UPDATE=always cargo test --release --test snapshots`, then read the difference.

use hade::prelude::*;
use hade::show::card_text;

#[test]
fn the_prelude_exports_these_names() {
    let names = hade_tests::prelude_names();
    for forbidden in ["Result", "Error", "Ok", "Err", "Option", "Some", "None"] {
        assert!(!names.iter().any(|n| n == forbidden), "{forbidden} would break a notebook's own code");
    }
    insta::assert_snapshot!(names.join("\n"));
}

fn state_b() -> Stress {
    Stress::from_horizontals(Horizontals {
        sv: 60.mpa(),
        sh_max: 55.mpa(),
        sh_min: 40.mpa(),
        sh_max_azimuth: Azimuth::from_true_north(30.deg()),
    })
    .expect("a possible stress")
}

/// The text of a card without its checks, whose last digits are a machine's own.
fn words(card: &Card) -> String {
    card_text(card).split("Checks:").next().unwrap_or_default().trim_end().to_owned()
}

#[test]
fn a_card_as_text() {
    insta::assert_snapshot!("principals", words(&state_b().principals().card()));
    let chain =
        Attitude { inclination: 35.deg(), azimuth: Azimuth::from_true_north(70.deg()) }.chain().expect("a hole");
    insta::assert_snapshot!("chain", words(&chain.card()));
}

#[test]
fn a_figure_as_svg() {
    let card = state_b().mohr().effective(20.mpa()).expect("a pore pressure").card();
    let figure = card.explanation.figures.first().expect("a figure");
    insta::assert_snapshot!("mohr", hade::show::svg(figure, hade::show::Theme::Light));
}
