//! A tool face and its compass bearing, in numbers and words.

use crate::card::Item;
use crate::frames::vector::{V3, add, scale, wrap};
use crate::frames::{Attitude, bearing_item, three_figures};
use crate::units::{Angle, Quantity};

/// Below this length of its horizontal part a direction has no bearing: it points straight up or
/// down.
const UPRIGHT: f64 = 1e-6;

/// The direction of a tool face in north, east, down.
pub(crate) fn vector(attitude: Attitude, toolface: f64) -> Option<V3> {
    let [top, right, _] = attitude.matrix().ok()?;
    let (s, c) = toolface.sin_cos();
    Some(add(scale(top, c), scale(right, s)))
}

/// The compass bearing of a tool face: that of its horizontal part, `None` where it points straight
/// up or down.
pub(crate) fn bearing(attitude: Attitude, toolface: f64) -> Option<Angle> {
    let [north, east, _] = vector(attitude, toolface)?;
    (north.hypot(east) > UPRIGHT).then(|| Angle::from_si(wrap(east.atan2(north))))
}

/// "110.0° (bearing 145.0° from true north)".
pub(crate) fn words(attitude: Attitude, toolface: Angle) -> String {
    format!("{} ({})", toolface, bearing_words(attitude, toolface))
}

/// "bearing 145.0° from true north" or "straight up".
pub(crate) fn bearing_words(attitude: Attitude, toolface: Angle) -> String {
    match (bearing(attitude, toolface.si()), vector(attitude, toolface.si())) {
        (Some(angle), _) => format!("bearing {}° from true north", three_figures(angle)),
        (None, Some([_, _, down])) if down > 0.0 => "straight down".to_owned(),
        _ => "straight up".to_owned(),
    }
}

/// A cell of a table: the bearing or "up", "down".
pub(crate) fn bearing_cell(attitude: Attitude, toolface: Angle) -> String {
    match (bearing(attitude, toolface.si()), vector(attitude, toolface.si())) {
        (Some(angle), _) => three_figures(angle),
        (None, Some([_, _, down])) if down > 0.0 => "down".to_owned(),
        _ => "up".to_owned(),
    }
}

/// A mark in a figure: "top, 070.0°" or "right, down"; in a vertical hole the bearing alone.
pub(crate) fn mark(attitude: Attitude, name: &str, toolface: Angle) -> String {
    let bearing = bearing_cell(attitude, toolface);
    let degree = if bearing == "up" || bearing == "down" { "" } else { "°" };
    if attitude.is_vertical() { format!("{bearing}{degree}") } else { format!("{name}, {bearing}{degree}") }
}

/// The tool face, and its bearing where it has one, as results.
pub(crate) fn items(attitude: Attitude, of: &str, symbol: &str, toolface: Angle) -> Vec<Item> {
    let mut items = vec![Item::computed(&format!("θ_{symbol}"), format!("tool face of {of}"), toolface)];
    if let Some(angle) = bearing(attitude, toolface.si()) {
        items.push(bearing_item(&format!("β_{symbol}"), &format!("bearing of {of}"), angle));
    }
    items
}

/// From where tool faces count in this hole, in one sentence.
pub(crate) fn reference(attitude: Attitude) -> String {
    if attitude.is_vertical() {
        let azimuth = attitude.azimuth.true_north().unwrap_or_default();
        // Straight up, tool face 0 lies opposite the azimuth and the sense seen from above is the other.
        let (count_from, sign) =
            if attitude.inclination.in_deg() < 90.0 { (azimuth, "+") } else { (azimuth + Angle::deg(180.0), "−") };
        let count_from = three_figures(count_from);
        return format!("{} A bearing is {count_from}° {sign} tool face.", attitude.tool_face_reference());
    }
    format!(
        "Tool faces count clockwise from the top of the hole (high side, {}), looking down the hole; its right is {}.",
        bearing_words(attitude, Angle::default()),
        bearing_words(attitude, Angle::deg(90.0))
    )
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::frames::Azimuth;
    use crate::units::Units;

    fn hole(i: f64, a: f64) -> Attitude {
        Attitude { inclination: i.deg(), azimuth: Azimuth::from_true_north(a.deg()) }
    }

    /// The same hole, azimuth called 0 or 123.
    #[test]
    fn a_vertical_hole_counts_from_its_azimuth() {
        let at = |a: f64, toolface: f64| bearing(hole(0.0, a), toolface.to_radians()).unwrap().in_deg();
        assert!((at(0.0, 120.0) - 120.0).abs() < 1e-9);
        assert!((at(123.0, 177.0) - 300.0).abs() < 1e-9);
        assert!(reference(hole(0.0, 123.0)).contains("azimuth 123.0"));
    }

    /// In a hole that rises straight up the top of the hole is opposite its azimuth, and tool faces
    /// turn the other way seen from above.
    #[test]
    fn a_hole_straight_up_counts_from_the_other_side() {
        let at = |toolface: f64| bearing(hole(180.0, 40.0), toolface.to_radians()).unwrap().in_deg();
        assert!((at(0.0) - 220.0).abs() < 1e-9 && (at(30.0) - 190.0).abs() < 1e-9);
        let said = reference(hole(180.0, 40.0));
        assert!(said.contains("from azimuth 220.0°") && said.ends_with("A bearing is 220.0° − tool face."), "{said}");
    }

    #[test]
    fn the_top_of_a_level_hole_is_straight_up() {
        assert_eq!(bearing_words(hole(90.0, 35.0), 0.deg()), "straight up");
        assert_eq!(bearing_words(hole(90.0, 35.0), 180.deg()), "straight down");
        assert_eq!(bearing_words(hole(90.0, 35.0), 90.deg()), "bearing 125.0° from true north");
    }
}
