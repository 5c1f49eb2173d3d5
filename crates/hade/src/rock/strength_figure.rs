//! Pictures of a strength: σ1' at failure against σ3', and against σ2'.

use super::Strength;
use super::criterion::{Criterion, Order};
use super::law::{Law, with_law};
use super::mogi_coulomb::MogiCoulomb;
use crate::card::{Axis, Figure, Layer, Mark, Role};
use crate::units::fixed;

/// The places of a curve.
const PLACES: u32 = 41;

/// The figures of a strength, with the stress σ1' ≥ σ2' ≥ σ3' (Pa) that is held against it.
pub(super) fn figures(strength: Strength, stress: Option<[f64; 3]>) -> Vec<Figure> {
    let mut figures = vec![against_least(strength, stress)];
    if with_law!(strength.law(), c => order(c)) != Order::Extremes {
        figures.extend(against_middle(strength, stress));
    }
    figures
}

fn order<C: Criterion>(_: C) -> Order {
    C::ORDER
}

/// A confinement that shows the curve well.
fn confinement(strength: Strength) -> f64 {
    let uniaxial = strength.in_compression(0.0).unwrap_or(0.0);
    if uniaxial > 0.0 { 0.5 * uniaxial } else { 20e6 }
}

/// The points of a curve in MPa between two places (Pa) where it is defined.
fn curve(from: f64, to: f64, at: impl Fn(f64) -> Option<f64>) -> Vec<[f64; 2]> {
    (0..PLACES)
        .map(|i| from + (to - from) * f64::from(i) / f64::from(PLACES - 1))
        .filter_map(|x| at(x).map(|y| [x * 1e-6, y * 1e-6]))
        .collect()
}

fn against_least(strength: Strength, stress: Option<[f64; 3]>) -> Figure {
    let to = stress.map_or(0.0, |s| 1.2 * s[2]).max(confinement(strength));
    let from = stress.map_or(0.0, |s| 1.2 * s[2]).min(-0.12 * to);
    let compression = curve(from, to, |s3| strength.in_compression(s3));
    let extension = curve(from, to, |s3| strength.in_extension(s3));
    let same = compression.len() == extension.len()
        && compression.iter().zip(&extension).all(|(a, b)| (a[1] - b[1]).abs() <= 1e-9 * a[1].abs().max(1e-9));
    let mut layers = Vec::new();
    let of = |points: &[[f64; 2]], name: &str| {
        let (first, last) = (points.first().copied().unwrap_or_default(), points.last().copied().unwrap_or_default());
        format!(
            "{name}: from {} MPa at σ'_3 = {} to {} MPa at {} MPa.",
            fixed(first[1], 2),
            fixed(first[0], 2),
            fixed(last[1], 2),
            fixed(last[0], 2)
        )
    };
    let mut alt = vec![format!("σ'_1 at failure against σ'_3 by {}.", strength.words())];
    if same {
        alt.push(of(&compression, "Triaxial compression and extension"));
        layers.push(Layer::line("compression = extension", Role::Limit, compression.clone()));
    } else {
        alt.push(of(&compression, "Triaxial compression"));
        layers.push(Layer::line("triaxial compression", Role::Limit, compression.clone()));
        if extension.is_empty() {
            alt.push("In triaxial extension the criterion never fails.".to_owned());
        } else {
            alt.push(of(&extension, "Triaxial extension"));
            layers.push(Layer::line("triaxial extension", Role::Second, extension.clone()));
        }
    }
    if let Some(line) = strength.fit().and_then(|_| strength.as_mohr_coulomb()) {
        layers.push(Layer::line("Mohr–Coulomb", Role::Quiet, curve(from, to, |s3| line.in_compression(s3))));
    }
    let mut top = compression.last().map_or(1.0, |p| p[1]);
    top = extension.last().map_or(top, |p| p[1].clamp(top, 2.0 * top));
    if let Some([s1, _, s3]) = stress.map(|s| s.map(|c| c * 1e-6)) {
        layers.push(point(strength, stress, [s3, s1]));
        top = top.max(s1);
        alt.push(format!("The stress is at σ'_3 = {}, σ'_1 = {} MPa.", fixed(s3, 2), fixed(s1, 2)));
    }
    let bottom = compression.first().map_or(0.0, |p| p[1]).min(0.0);
    Figure {
        caption: if same {
            "The largest effective stress borne beside the least, whether σ'_2 equals σ'_3 or σ'_1.".to_owned()
        } else {
            "The largest effective stress borne beside the least: with σ'_2 = σ'_3 (triaxial compression) and with σ'_2 = σ'_1 (triaxial extension).".to_owned()
        },
        alt: alt.join(" "),
        x: Axis::new("σ'_3 (MPa)", from * 1e-6, to * 1e-6),
        y: Axis::new("σ'_1 (MPa)", bottom, 1.06 * top.max(1e-6)),
        equal_scale: false,
        layers,
    }
}

/// What the intermediate stress does, at the σ3' of the stress or at a quarter of the uniaxial strength.
fn against_middle(strength: Strength, stress: Option<[f64; 3]>) -> Option<Figure> {
    let s3 = stress.map_or(0.5 * confinement(strength), |s| s[2]);
    let compression = strength.in_compression(s3)?;
    let extension = strength.in_extension(s3);
    // To where the curve meets σ'_2 = σ'_1, or well past it where it never does.
    let to = extension.unwrap_or(2.5 * compression).min(4.0 * compression.max(s3.abs()));
    let mut points = match strength.law() {
        Law::MogiCoulomb(line) => turning_back(line, s3, compression),
        _ => curve(s3, to, |s2| strength.beside(s2, s3)),
    };
    // The ends by their own formulas: the curve is steep or touches the line of equal stresses there.
    points.retain(|p| p[0] > s3 * 1e-6 && p[1] > p[0] && extension.is_none_or(|e| p[0] < 1.5e-6 * e));
    points.insert(0, [s3 * 1e-6, compression * 1e-6]);
    if let Some(e) = extension.filter(|e| *e <= to) {
        points.push([e * 1e-6, e * 1e-6]);
    }
    let highest = points.iter().map(|p| p[1]).fold(compression * 1e-6, f64::max);
    let most = highest.max(stress.map_or(0.0, |s| s[0] * 1e-6));
    let right = (to * 1e-6).max(most.min(to * 1.2e-6)).max(stress.map_or(0.0, |s| s[1] * 1e-6));
    let mut layers = vec![
        Layer::line("σ'_2 = σ'_1", Role::Quiet, [[s3 * 1e-6, s3 * 1e-6], [right.min(most), right.min(most)]]),
        Layer::line(strength.name(), Role::Limit, points.clone()),
    ];
    if let Some(line) = strength.as_mohr_coulomb().and_then(|line| line.in_compression(s3)) {
        let level = line * 1e-6;
        layers.push(Layer::line("Mohr–Coulomb", Role::Second, [[s3 * 1e-6, level], [level.min(right), level]]));
    }
    let mut alt = format!(
        "σ'_1 at failure against σ'_2 at σ'_3 = {} MPa by {}: {} MPa where σ'_2 = σ'_3, at most {} MPa.",
        fixed(s3 * 1e-6, 2),
        strength.words(),
        fixed(compression * 1e-6, 2),
        fixed(highest, 2)
    );
    if let Some([s1, s2, _]) = stress.map(|s| s.map(|c| c * 1e-6)) {
        layers.push(point(strength, stress, [s2, s1]));
        alt.push_str(&format!(" The stress is at σ'_2 = {}, σ'_1 = {} MPa.", fixed(s2, 2), fixed(s1, 2)));
    }
    let pad = 0.06 * (most - s3 * 1e-6).max(1e-6);
    Some(Figure {
        caption: format!(
            "The largest effective stress borne at σ'_3 = {} MPa, against the intermediate one.",
            fixed(s3 * 1e-6, 2)
        ),
        alt,
        x: Axis::new("σ'_2 (MPa)", s3 * 1e-6, right + pad),
        y: Axis::new("σ'_1 (MPa)", (s3 * 1e-6).min(0.0), most + pad),
        equal_scale: false,
        layers,
    })
}

/// Mogi–Coulomb's curve of σ1' over σ2', which turns back near σ2' = σ1': both σ2' for each σ1'.
fn turning_back(line: MogiCoulomb, s3: f64, compression: f64) -> Vec<[f64; 2]> {
    let most = line.most(s3).map_or(2.5 * compression, |most| most.min(4.0 * compression));
    let places: Vec<(f64, [f64; 2])> = (0..PLACES)
        // Closer towards the top, where the two meet.
        .map(|i| most - (most - compression) * (1.0 - f64::from(i) / f64::from(PLACES - 1)).powi(2))
        .filter_map(|s1| line.middles(s1, s3).map(|middles| (s1, middles)))
        .collect();
    let lower = places.iter().map(|(s1, [s2, _])| [s2 * 1e-6, s1 * 1e-6]);
    lower.chain(places.iter().rev().map(|(s1, [_, s2])| [s2 * 1e-6, s1 * 1e-6])).collect()
}

/// The stress as a point, by whether it holds.
fn point(strength: Strength, stress: Option<[f64; 3]>, at: [f64; 2]) -> Layer {
    let fails = stress.is_some_and(|s| strength.law().excess(s) > 0.0);
    let (role, mark) = if fails { (Role::Failing, Mark::Cross) } else { (Role::First, Mark::Dot) };
    Layer::Points { label: "this stress".to_owned(), role, mark, points: vec![at] }
}
