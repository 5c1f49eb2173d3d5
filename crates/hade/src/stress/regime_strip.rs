//! The faulting regime as a place on a strip from 0 to 3.

use crate::card::{Axis, Figure, Layer, Mark, Role};
use crate::units::fixed;

/// The regimes in the order of A_φ.
const REGIMES: [(&str, Role); 3] =
    [("normal faulting", Role::First), ("strike-slip faulting", Role::Third), ("reverse faulting", Role::Second)];

/// The strip of A_φ (Simpson, R.W. 1997, J. Geophys. Res. 102(B8), 17909–17919; cited from memory):
/// 0–1 normal, 1–2 strike-slip, 2–3 reverse faulting, and between them the states where the
/// vertical stress equals a horizontal one. The folded line leads from A_φ to
/// φ = (S_2 − S_3) / (S_1 − S_3); a dot on it and a triangle at the foot mark the value. One outside 0–3, or not a number, is not marked.
pub(crate) fn regime_strip(a_phi: f64) -> Figure {
    let mut layers: Vec<Layer> = (0_u8..)
        .zip(REGIMES)
        .map(|(n, (name, role))| Layer::ColumnBand {
            label: name.to_owned(),
            role,
            from: f64::from(n),
            to: f64::from(n + 1),
        })
        .collect();
    layers.push(Layer::line("", Role::Quiet, [[0.0, 0.0], [1.0, 1.0], [2.0, 0.0], [3.0, 1.0]]));
    // Beside the folds, on the side that the line leaves free.
    for (text, at) in [
        ("S_Hmax = S_hmin", [0.03, 0.85]),
        ("normal to strike-slip:", [1.02, 0.23]),
        ("S_v = S_Hmax", [1.02, 0.1]),
        ("strike-slip to reverse:", [2.02, 0.9]),
        ("S_v = S_hmin", [2.02, 0.77]),
        ("S_Hmax = S_hmin", [2.52, 0.1]),
    ] {
        layers.push(Layer::Words { text: text.to_owned(), at });
    }
    let mut said = "No value of A_φ is marked.".to_owned();
    let mut caption = "The faulting regime by A_φ; the folded line gives φ.".to_owned();
    if let Some(phi) = phi_of(a_phi) {
        let (a, b) = (fixed(a_phi, 2), fixed(phi, 2));
        for (label, mark, y) in [(format!("A_φ {a}, φ {b}"), Mark::Dot, phi), (String::new(), Mark::Triangle, -0.04)]
        {
            layers.push(Layer::Points { label, role: Role::Limit, mark, points: vec![[a_phi, y]] });
        }
        let name = regime_words(a_phi);
        caption = format!("The faulting regime by A_φ = {a}: {name}. The folded line gives φ = {b}.");
        said = format!("A_φ = {a}, {name}, φ = {b}.");
    }
    Figure {
        caption,
        alt: format!(
            "A strip from 0 to 3: 0 to 1 normal faulting, 1 to 2 strike-slip faulting, 2 to 3 reverse faulting. {said}"
        ),
        x: Axis::new("A_φ", 0.0, 3.0).ticks_every(0.5),
        y: Axis::new("φ = (S_2 − S_3) / (S_1 − S_3)", -0.08, 1.08).ticks_every(0.25),
        equal_scale: true,
        layers,
    }
}

/// φ of A_φ = (n + ½) + (−1)ⁿ (φ − ½), n = 0, 1, 2; at a whole number both regimes give the same.
fn phi_of(a_phi: f64) -> Option<f64> {
    (0.0..=3.0).contains(&a_phi).then(|| {
        let within = a_phi.rem_euclid(2.0);
        if within <= 1.0 { within } else { 2.0 - within }
    })
}

fn regime_words(a_phi: f64) -> &'static str {
    if a_phi == 1.0 {
        "between normal and strike-slip faulting"
    } else if a_phi == 2.0 {
        "between strike-slip and reverse faulting"
    } else if a_phi < 1.0 {
        REGIMES[0].0
    } else if a_phi < 2.0 {
        REGIMES[1].0
    } else {
        REGIMES[2].0
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::show::{Theme, svg};

    #[test]
    fn phi_follows_the_definition_in_every_regime() {
        for n in 0..3 {
            for phi in [0.0, 0.2, 0.5, 0.93, 1.0] {
                let sign = if n % 2 == 0 { 1.0 } else { -1.0 };
                let a = f64::from(n) + 0.5 + sign * (phi - 0.5);
                assert!((phi_of(a).unwrap() - phi).abs() < 1e-12, "{n} {phi}");
            }
        }
        assert!(phi_of(-0.01).is_none() && phi_of(3.01).is_none() && phi_of(f64::NAN).is_none());
    }

    #[test]
    fn the_strip_says_value_regime_and_phi() {
        let figure = regime_strip(1.25);
        assert_eq!(
            figure.caption,
            "The faulting regime by A_φ = 1.25: strike-slip faulting. The folded line gives φ = 0.75."
        );
        assert!(figure.alt.ends_with("A_φ = 1.25, strike-slip faulting, φ = 0.75."));
        let picture = svg(&figure, Theme::Print);
        for text in ["normal faulting", "strike-slip faulting", "reverse faulting", "normal to strike-slip"] {
            assert!(picture.contains(text), "{text}");
        }
        // At the edge it names both; outside it marks nothing.
        assert!(regime_strip(2.0).alt.contains("between strike-slip and reverse faulting, φ = 0.00"));
        for odd in [3.2, -1.0, f64::NAN] {
            let figure = regime_strip(odd);
            assert!(figure.alt.contains("No value") && !svg(&figure, Theme::Light).contains("NaN"));
        }
    }
}
