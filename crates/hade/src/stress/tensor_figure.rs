//! What a stress tensor looks like at a glance: how large, which way, how far from level.

use super::Stress;
use super::principals::{axes_words, with_axes};
use crate::card::{Axis, Figure, Layer, Projection, Role};
use crate::frames::net::Net;
use crate::frames::{Geographic, three_figures};
use crate::units::{Angle, Pressure, fixed};

/// The normal stresses across level and upright planes: S_v, and the largest and least horizontal
/// one in megapascals with the azimuth of the largest, where they differ.
struct Level {
    vertical: f64,
    horizontal: [f64; 2],
    azimuth: Option<Angle>,
}

/// Two horizontal normal stresses closer than this share of the largest have no azimuth.
const EQUAL: f64 = 1e-9;

impl Level {
    fn of(stress: &Stress<Geographic>) -> Level {
        let [[nn, ne, _], [_, ee, _], [_, _, dd]] = stress.rows_in_mpa();
        let (mean, half) = (0.5 * (nn + ee), 0.5 * (nn - ee));
        let radius = half.hypot(ne);
        let azimuth = (radius > EQUAL * mean.abs().max(radius)).then(|| {
            let turn = 0.5 * ne.atan2(half);
            Angle::rad(if turn < 0.0 { turn + std::f64::consts::PI } else { turn })
        });
        Level { vertical: dd, horizontal: [mean + radius, mean - radius], azimuth }
    }
}

/// Two figures of a stress: the principal stresses as bars with their axes, over the vertical and
/// the extreme horizontal normal stresses; and the axes on a net with the azimuth of the largest
/// horizontal stress. Where an axis is vertical, its bar is as long as one of the lower three.
pub(crate) fn tensor_figures(stress: &Stress<Geographic>) -> Vec<Figure> {
    let level = Level::of(stress);
    vec![bars(stress, &level), axes(stress, &level)]
}

fn bars(stress: &Stress<Geographic>, level: &Level) -> Figure {
    let principals = stress.principals();
    let magnitudes = principals.magnitudes().map(Pressure::in_mpa);
    let mpa = |v: f64| format!("{} MPa", fixed(v, 2));
    let azimuth = match level.azimuth {
        Some(a) => format!(", towards {}°", three_figures(a)),
        None => ", the same all round".to_owned(),
    };
    let mut rows: Vec<(String, f64, Role)> = Vec::new();
    for (((n, value), axis), role) in
        (1..).zip(magnitudes).zip(principals.axes()).zip([Role::First, Role::Second, Role::Third])
    {
        rows.push((format!("S_{n} = {}, {}", mpa(value), axes_words(axis)), value, role));
    }
    let [largest, least] = level.horizontal;
    rows.push((format!("S_v = {}, across level planes", mpa(level.vertical)), level.vertical, Role::Quiet));
    rows.push((format!("S_Hmax = {}{azimuth}", mpa(largest)), largest, Role::Quiet));
    rows.push((format!("S_hmin = {}", mpa(least)), least, Role::Quiet));

    let ends = rows.iter().map(|r| r.1);
    let (low, high) = (ends.clone().fold(0.0, f64::min), ends.fold(0.0, f64::max));
    let mut layers = Vec::new();
    let mut y = 0.0;
    for (i, (text, value, role)) in rows.iter().enumerate() {
        // The lower three stand a little apart.
        y -= if i == 3 { 1.4 } else { 1.0 };
        layers.push(Layer::Words { text: text.clone(), at: [low.min(0.0) + 0.006 * (high - low), y + 0.68] });
        layers.push(Layer::Bar { role: *role, from: [0.0, y + 0.1], to: [*value, y + 0.4] });
    }
    Figure {
        caption: "Principal stresses with their axes, over the normal stresses across level and upright planes."
            .to_owned(),
        alt: format!("Bars from zero. {}.", rows.iter().map(|r| r.0.as_str()).collect::<Vec<_>>().join("; ")),
        x: Axis::new("stress (MPa)", low, if high > low { low + 1.04 * (high - low) } else { 1.0 }),
        y: Axis::new("", y - 0.1, 0.0).hidden(),
        equal_scale: false,
        layers,
    }
}

fn axes(stress: &Stress<Geographic>, level: &Level) -> Figure {
    let axes = stress.principals().axes();
    let mut net = Net::new(Projection::EqualArea);
    let mut said: Vec<String> = (1..).zip(axes).map(|(n, axis)| format!("S_{n} {}", axes_words(axis))).collect();
    if let Some(a) = level.azimuth {
        net = net.compression("S_Hmax", Role::Limit, a.in_rad());
        said.push(format!("S_Hmax towards {}°", three_figures(a)));
    }
    with_axes(net, axes).figure(
        "The principal axes by their lower ends; the arrows show the azimuth of the largest horizontal normal stress.",
        format!("{}.", said.join("; ")),
    )
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::prelude::{Azimuth, Components, Horizontals, Units};
    use crate::show::{Theme, svg};

    #[test]
    fn an_upright_state_has_bars_of_equal_length_and_says_its_azimuth() {
        let s = Stress::from_horizontals(Horizontals {
            sv: 66.9.mpa(),
            sh_max: 58.2.mpa(),
            sh_min: 47.1.mpa(),
            sh_max_azimuth: Azimuth::from_true_north(35.deg()),
        })
        .unwrap();
        let [bars, net] = &tensor_figures(&s)[..] else { panic!("two figures") };
        let ends: Vec<f64> =
            bars.layers.iter().filter_map(|l| if let Layer::Bar { to, .. } = l { Some(to[0]) } else { None }).collect();
        for (got, want) in ends.iter().zip([66.9, 58.2, 47.1, 66.9, 58.2, 47.1]) {
            assert!((got - want).abs() < 1e-9, "{ends:?}");
        }
        assert!(bars.alt.contains("S_1 = 66.90 MPa, vertical;") && bars.alt.contains("towards 035.0°"), "{}", bars.alt);
        assert!(net.alt.contains("S_Hmax towards 035.0°"), "{}", net.alt);
    }

    /// A tilted state and its extreme horizontal normal stresses, worked out elsewhere (numpy,
    /// eigenvalues of the horizontal 2 × 2 block).
    #[test]
    fn the_azimuth_of_a_tilted_state_is_its_own_and_not_the_trend_of_an_axis() {
        let components = Components {
            nn: 41.001_52.mpa(),
            ee: 62.743_31.mpa(),
            dd: 66.376_64.mpa(),
            ne: (-9.147_44).mpa(),
            nd: 5.424_7.mpa(),
            ed: 4.779_72.mpa(),
        };
        let s = Stress::from_components(components).unwrap();
        let level = Level::of(&s);
        assert!((level.azimuth.unwrap().in_deg() - 110.039_660_466_230_9).abs() < 1e-9);
        assert!((level.horizontal[0] - 66.079_878_413_805_62).abs() < 1e-9);
        assert!((level.horizontal[1] - 37.664_951_586_194_39).abs() < 1e-9);
        let [_, net] = &tensor_figures(&s)[..] else { panic!("two figures") };
        assert!(net.alt.contains("S_Hmax towards 110.0°") && !net.alt.contains("trend 110.0"), "{}", net.alt);
    }

    #[test]
    fn nothing_is_too_odd_to_draw() {
        let zero = 0.mpa();
        let isotropic = Components { nn: 40.mpa(), ee: 40.mpa(), dd: 40.mpa(), ne: zero, nd: zero, ed: zero };
        let tension = Components { nn: (-5).mpa(), ee: 3.mpa(), dd: 12.mpa(), ne: 1.mpa(), nd: 2.mpa(), ed: zero };
        let none = Components { nn: zero, ee: zero, dd: zero, ne: zero, nd: zero, ed: zero };
        for components in [isotropic, tension, none] {
            for figure in tensor_figures(&Stress::from_components(components).unwrap()) {
                let picture = svg(&figure, Theme::Light);
                assert!(!picture.contains("NaN") && picture.len() < 60_000);
                assert!(!figure.alt.is_empty() && !figure.caption.is_empty());
            }
        }
    }
}
