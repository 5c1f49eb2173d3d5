//! Lines and planes on the lower hemisphere, as a figure.

use super::Line;
use super::vector::{V3, add, cross, norm, scale};
use crate::card::{Axis, Figure, Layer, Mark, Projection, Role};

/// The values along one side of a contoured quantity's grid: 841 numbers of four figures in the
/// record (6 kB), one of them at the centre.
const GRID: usize = 29;
/// The same where some are missing: 3721 numbers.
const FINE_GRID: usize = 61;
/// Half the length of the arrow of a movement, in radii of the net.
const ARROW: f64 = 0.13;
/// How far a net's figure reaches beyond its circle to each side and up and down: room for labels.
const ROOM: [f64; 2] = [1.45, 1.17];
/// The same beside a scale bar.
const ROOM_BESIDE_BAR: f64 = 1.25;

/// A net as it fills. Directions are in north, east, down, of any length. Lines and poles have no
/// sign: an end above the horizontal is turned to the lower one, and a horizontal line is seen at
/// both ends. A direction without length, or not finite, is left out.
#[derive(Clone, Debug)]
pub(crate) struct Net {
    projection: Projection,
    contoured: bool,
    layers: Vec<Layer>,
}

impl Net {
    pub fn new(projection: Projection) -> Self {
        Net { projection, contoured: false, layers: vec![Layer::Net { projection }] }
    }

    /// A quantity of lines, or of planes at the place of each plane's pole: the function takes the unit
    /// vector that points down. Where it is not finite the net stays blank. Beyond the circle, where
    /// lines repeat, the values are those of the same lines, so contours run out to the rim.
    pub fn contours(self, label: &str, value: impl Fn(V3) -> f64) -> Self {
        self.contours_on(GRID, label, value)
    }

    /// The same on a finer grid, for a quantity that is missing in places: the edge of a blank follows the grid.
    pub fn contours_with_blanks(self, label: &str, value: impl Fn(V3) -> f64) -> Self {
        self.contours_on(FINE_GRID, label, value)
    }

    fn contours_on(mut self, side: usize, label: &str, value: impl Fn(V3) -> f64) -> Self {
        let projection = self.projection;
        self.layers.push(Layer::contours(label, side, |place| {
            let n = projection.direction(place);
            value(if n[2] < 0.0 { scale(n, -1.0) } else { n })
        }));
        self.contoured = true;
        self
    }

    /// A line without sign, as a mark; both ends of a horizontal one bear the name.
    pub fn line(mut self, label: &str, role: Role, mark: Mark, direction: V3) -> Self {
        for place in self.projection.places(direction) {
            self.point(label, role, mark, place);
        }
        self
    }

    /// The pole of a plane: the line along its normal, as an open dot.
    pub fn pole(self, label: &str, role: Role, normal: V3) -> Self {
        self.line(label, role, Mark::Ring, normal)
    }

    /// A plane by its normal: its great circle.
    pub fn plane(mut self, label: &str, role: Role, normal: V3) -> Self {
        if let Some(arc) = great_circle(self.projection, normal) {
            self.layers.push(Layer::Line { label: label.to_owned(), role, points: arc });
        }
        self
    }

    /// A line that runs through directions, broken where it leaves the rim and goes on at the other side.
    pub fn path(mut self, role: Role, directions: &[V3]) -> Self {
        let mut pieces: Vec<Vec<[f64; 2]>> = Vec::new();
        for place in directions.iter().filter_map(|d| self.projection.place(*d)).map(rounded) {
            match pieces.last_mut() {
                Some(piece) if piece.last().is_some_and(|p| (p[0] - place[0]).hypot(p[1] - place[1]) < 0.5) => {
                    piece.push(place);
                }
                _ => pieces.push(vec![place]),
            }
        }
        let lines = pieces.into_iter().filter(|piece| piece.len() > 1);
        self.layers.extend(lines.map(|piece| Layer::line("", role, piece)));
        self
    }

    /// Where something moves: an arrow over the place of its line, pointing to the azimuth of the
    /// movement, just inside the rim where it would cross it. Away from the centre it moves down,
    /// towards it up. A vertical movement has no azimuth and is a diamond.
    pub fn movement(mut self, label: &str, role: Role, direction: V3) -> Self {
        let horizontal = direction[0].hypot(direction[1]);
        if horizontal <= 1e-6 * norm(direction) {
            return self.line(label, role, Mark::Diamond, direction);
        }
        let step = [direction[1] / horizontal * ARROW, direction[0] / horizontal * ARROW];
        for (i, [x, y]) in self.projection.places(direction).into_iter().enumerate() {
            // The arrow runs along the radius; it slides on it.
            let r = x.hypot(y);
            let inward = (0.97 - ARROW).min(r) / r.max(1e-9);
            let (x, y) = (x * inward, y * inward);
            self.layers.push(Layer::Arrow {
                label: if i == 0 { label.to_owned() } else { String::new() },
                role,
                from: rounded([x - step[0], y - step[1]]),
                to: rounded([x + step[0], y + step[1]]),
            });
        }
        self
    }

    /// The azimuth (radians) of a compression: two arrows that meet, inside the rim.
    pub fn compression(mut self, label: &str, role: Role, azimuth: f64) -> Self {
        let (s, c) = azimuth.sin_cos();
        for (label, side) in [(label, 1.0), ("", -1.0)] {
            let at = |r: f64| rounded([side * r * s, side * r * c]);
            let (from, to) = (at(0.93), at(0.73));
            self.layers.push(Layer::Arrow { label: label.to_owned(), role, from, to });
        }
        self
    }

    /// A direction with a sign: filled where it points down, open where it points up and its other
    /// end is seen; both, where it is horizontal.
    pub fn direction(mut self, label: &str, role: Role, direction: V3) -> Self {
        let places = self.projection.places(direction);
        match places.as_slice() {
            [east, west] => {
                let forward = direction[1] * east[0] + direction[0] * east[1] > 0.0;
                let (to, from) = if forward { (*east, *west) } else { (*west, *east) };
                self.point(label, role, Mark::Dot, to);
                self.point("", role, Mark::Ring, from);
            }
            _ => {
                let mark = if direction[2] < 0.0 { Mark::Ring } else { Mark::Dot };
                places.into_iter().for_each(|place| self.point(label, role, mark, place));
            }
        }
        self
    }

    fn point(&mut self, label: &str, role: Role, mark: Mark, place: [f64; 2]) {
        self.layers.push(Layer::Points { label: label.to_owned(), role, mark, points: vec![rounded(place)] });
    }

    /// The figure. The projection's name is printed under the net and ends the text alternative.
    pub fn figure(self, caption: impl Into<String>, alt: impl Into<String>) -> Figure {
        let words = self.projection.words();
        let (wide, high) = (if self.contoured { ROOM_BESIDE_BAR } else { ROOM[0] }, ROOM[1]);
        Figure {
            caption: caption.into(),
            alt: format!("{} Net: {words}.", alt.into()),
            x: Axis::new(words, -wide, wide).hidden(),
            y: Axis::new("", -high, high).hidden(),
            equal_scale: true,
            layers: self.layers,
        }
    }
}

/// Axes with a sign on an equal-area net, each with its name: those before a turn as quiet marks,
/// those after it as strong ones.
pub(crate) fn axes_net(caption: &str, before: &[(V3, &str)], after: &[(V3, &str)]) -> Figure {
    let roles = [Role::First, Role::Second, Role::Third];
    let mut net = Net::new(Projection::EqualArea);
    for (axis, name) in before {
        net = net.direction(name, Role::Quiet, *axis);
    }
    for ((axis, name), role) in after.iter().zip(roles.iter().cycle()) {
        net = net.direction(name, *role, *axis);
    }
    let said: Vec<String> =
        before.iter().chain(after).map(|(v, name)| format!("{name}: {}", signed_words(*v))).collect();
    net.figure(
        format!("{caption} Filled: the axis points down there; open: it points up, and its lower end is seen."),
        format!("{}.", said.join("; ")),
    )
}

/// "trend 120.0°, plunge 48.0° up".
fn signed_words(v: V3) -> String {
    let line = Line::along(v);
    let plunge = line.plunge.in_deg();
    if plunge > 89.95 {
        return if v[2] < 0.0 { "straight up".to_owned() } else { "straight down".to_owned() };
    }
    // The trend of its own end, not of the lower one.
    let trend = Line::along([v[0], v[1], v[2].abs()]).trend.true_north().unwrap_or_default();
    let way = if plunge < 0.05 {
        "horizontal".to_owned()
    } else {
        format!("{plunge:.1}° {}", if v[2] < 0.0 { "up" } else { "down" })
    };
    format!("towards {}°, {way}", super::three_figures(trend))
}

/// Six decimals: what a record needs, and no sign of zero.
fn rounded(place: [f64; 2]) -> [f64; 2] {
    place.map(|c| (c * 1e6).round() / 1e6 + 0.0)
}

/// The lower half of a plane's great circle, from its strike to the opposite end; the whole rim for
/// a horizontal plane.
fn great_circle(projection: Projection, normal: V3) -> Option<Vec<[f64; 2]>> {
    let length = norm(normal);
    if !(length.is_finite() && length > 0.0) {
        return None;
    }
    let n = scale(normal, if normal[2] < 0.0 { -1.0 / length } else { 1.0 / length });
    let horizontal = n[0].hypot(n[1]);
    let flat = horizontal < 1e-9;
    let strike = if flat { [1.0, 0.0, 0.0] } else { [-n[1] / horizontal, n[0] / horizontal, 0.0] };
    let down_dip = cross(n, strike);
    let steps = if flat { 72 } else { 36 };
    let place = |i: i32| {
        let (s, c) = (5.0 * f64::from(i)).to_radians().sin_cos();
        let v = add(scale(strike, c), scale(down_dip, s));
        // The last bit must not turn an end of the strike line to the other.
        let on_rim = flat || i == 0 || i == steps;
        if on_rim { Some([v[1], v[0]]) } else { projection.place(v) }
    };
    Some((0..=steps).filter_map(place).map(rounded).collect())
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::frames::vector::dot;
    use crate::frames::{Azimuth, Plane};
    use crate::show::{Theme, svg};
    use crate::units::Units;

    fn contoured(projection: Projection, value: impl Fn(V3) -> f64) -> Figure {
        Net::new(projection).contours("slip tendency τ/σ'_n", value).figure("c", "a.")
    }

    const BOTH: [Projection; 2] = [Projection::EqualArea, Projection::EqualAngle];

    fn plane(strike: f64, dip: f64) -> Plane {
        Plane { strike: Azimuth::from_true_north(strike.deg()), dip: dip.deg() }
    }

    #[test]
    fn a_great_circle_runs_over_the_dip_line_between_the_ends_of_the_strike() {
        for projection in BOTH {
            for (strike, dip) in [(45.0, 60.0), (0.0, 90.0), (200.0, 15.0), (333.0, 89.999)] {
                let axes = plane(strike, dip).axes().unwrap();
                let arc = great_circle(projection, axes.normal).unwrap();
                assert_eq!(arc, great_circle(projection, scale(axes.normal, -3.0)).unwrap());
                let s: f64 = f64::to_radians(strike);
                let near = |p: [f64; 2], q: [f64; 2]| (p[0] - q[0]).hypot(p[1] - q[1]) < 2e-6;
                assert!(near(arc[0], [s.sin(), s.cos()]), "{strike} {dip}");
                assert!(near(arc[36], [-s.sin(), -s.cos()]), "{strike} {dip}");
                // The dip line, by its closed form: to strike + 90°, θ = 90° − dip from down.
                let theta = (90.0 - dip).to_radians();
                let r = match projection {
                    Projection::EqualArea => std::f64::consts::SQRT_2 * (theta / 2.0).sin(),
                    Projection::EqualAngle => (theta / 2.0).tan(),
                };
                assert!(near(arc[18], [r * s.cos(), -r * s.sin()]), "{strike} {dip} {:?}", arc[18]);
            }
        }
    }

    #[test]
    fn every_place_of_a_great_circle_is_a_right_angle_from_the_pole() {
        for projection in BOTH {
            for (strike, dip) in [(45.0, 60.0), (0.0, 90.0), (123.0, 5.0), (200.0, 0.0)] {
                let normal = plane(strike, dip).axes().unwrap().normal;
                let [pole] = projection.places(normal)[..] else {
                    assert!(dip == 90.0);
                    continue;
                };
                let pole = projection.direction(pole);
                for place in great_circle(projection, normal).unwrap() {
                    assert!(dot(projection.direction(place), pole).abs() < 1e-5, "{strike} {dip} {place:?}");
                    assert!(place[0].hypot(place[1]) <= 1.0 + 1e-6);
                }
            }
        }
    }

    /// On the equal-angle net a great circle is a circle of radius 1/cos(dip) about a point at
    /// tan(dip) against the dip direction (Phillips 1971; cited from memory).
    #[test]
    fn a_great_circle_of_the_equal_angle_net_is_round() {
        let (strike, dip) = (30.0_f64.to_radians(), 50.0_f64.to_radians());
        let arc = great_circle(Projection::EqualAngle, plane(30.0, 50.0).axes().unwrap().normal).unwrap();
        let away = [-dip.tan() * strike.cos(), dip.tan() * strike.sin()];
        for p in arc {
            let radius = (p[0] - away[0]).hypot(p[1] - away[1]);
            assert!((radius - 1.0 / dip.cos()).abs() < 3e-6, "{radius}");
        }
    }

    fn points(figure: &Figure) -> Vec<(Mark, Vec<[f64; 2]>)> {
        let of = |l: &Layer| match l {
            Layer::Points { mark, points, .. } => Some((*mark, points.clone())),
            _ => None,
        };
        figure.layers.iter().filter_map(of).collect()
    }

    #[test]
    fn the_figure_names_its_projection_and_a_horizontal_line_has_two_ends() {
        for projection in BOTH {
            let figure = Net::new(projection)
                .line("a", Role::First, Mark::Dot, [0.0, -2.0, 0.0])
                .line("b", Role::First, Mark::Dot, [0.0; 3])
                .figure("c", "A line.");
            assert_eq!(points(&figure), [(Mark::Dot, vec![[1.0, 0.0]]), (Mark::Dot, vec![[-1.0, 0.0]])]);
            for theme in [Theme::Notebook, Theme::Light, Theme::Dark, Theme::Print] {
                let picture = svg(&figure, theme);
                assert!(picture.contains(&format!(">{}</text>", projection.words())));
                for letter in ["N", "E", "S", "W", "030", "330"] {
                    assert!(picture.contains(&format!(">{letter}</text>")), "{letter}");
                }
            }
            assert!(figure.alt.ends_with(&format!("{}.", projection.words())));
        }
    }

    #[test]
    fn axes_with_a_sign_are_open_where_they_point_up() {
        // The axes of a hole of inclination 42° to 120°: its top points up, back along the azimuth.
        let (i, a) = (42.0_f64.to_radians(), 120.0_f64.to_radians());
        let top = [i.cos() * a.cos(), i.cos() * a.sin(), -i.sin()];
        let along = [i.sin() * a.cos(), i.sin() * a.sin(), i.cos()];
        let right = [-a.sin(), a.cos(), 0.0];
        let figure = axes_net("c.", &[([0.0, 0.0, 1.0], "down")], &[(top, "top"), (right, "right"), (along, "along")]);
        assert!(
            figure.alt.starts_with(
                "down: straight down; top: towards 120.0°, 42.0° up; right: towards 210.0°, horizontal; along: towards 120.0°, 48.0° down."
            ),
            "{}",
            figure.alt
        );
        let marks: Vec<Mark> = points(&figure).iter().map(|(m, _)| *m).collect();
        assert_eq!(marks, [Mark::Dot, Mark::Ring, Mark::Dot, Mark::Ring, Mark::Dot]);
        // The lower end of the top is seen at 300°, and the right axis points to 210°.
        let places: Vec<[f64; 2]> = points(&figure).iter().map(|(_, p)| p[0]).collect();
        assert!(places[1][0] < 0.0 && places[1][1] > 0.0);
        assert!((places[2][0] + 0.5).abs() < 1e-6 && (places[2][1] + 0.866_025).abs() < 1e-6);
    }

    #[test]
    fn a_movement_points_out_when_down_and_in_when_up() {
        let arrow = |v: V3| {
            let figure = Net::new(Projection::EqualArea).movement("m", Role::First, v).figure("c", "a");
            let of = |l: &Layer| match l {
                Layer::Arrow { from, to, .. } => Some((*from, *to)),
                _ => None,
            };
            figure.layers.iter().filter_map(of).collect::<Vec<_>>()
        };
        let r = |p: [f64; 2]| p[0].hypot(p[1]);
        let [(from, to)] = arrow([0.3, 0.4, 0.5])[..] else { panic!("one arrow") };
        assert!(r(to) > r(from) && to[0] > 0.0);
        let [(from, to)] = arrow([0.3, 0.4, -0.5])[..] else { panic!("one arrow") };
        assert!(r(to) < r(from) && to[0] > from[0]);
        // Horizontal: out at one end, in at the other, and within the rim.
        let both = arrow([1.0, 0.0, 0.0]);
        assert_eq!(both.len(), 2);
        assert!(both.iter().all(|(from, to)| to[1] > from[1] && r(*from) < 1.0 && r(*to) < 1.0));
        assert!(arrow([0.0, 0.0, 1.0]).is_empty());
    }

    /// Slip tendency of a strike-slip state, as a function of the normal.
    fn tendency(n: V3) -> f64 {
        let s = [55.0, 25.0, 40.0];
        let t = [s[0] * n[0], s[1] * n[1], s[2] * n[2]];
        let normal = dot(t, n);
        (dot(t, t) - normal * normal).max(0.0).sqrt() / normal
    }

    #[test]
    fn a_contoured_quantity_keeps_the_record_and_the_picture_small() {
        for projection in BOTH {
            let figure = contoured(projection, tendency);
            let Some(Layer::Contours { values, .. }) = figure.layers.get(1) else { panic!("contours") };
            assert!(values.iter().all(Option::is_some));
            assert!(serde_json::to_string(&figure).unwrap().len() < 8_000);
            for theme in [Theme::Notebook, Theme::Light, Theme::Dark, Theme::Print] {
                let picture = svg(&figure, theme);
                assert!(picture.len() < 150_000, "{}", picture.len());
                assert_eq!(picture, svg(&figure, theme));
                for text in [">0.1</text>", ">0.3</text>", ">slip tendency τ/σ"] {
                    assert!(picture.contains(text), "{text}");
                }
                assert!(!picture.contains(" id=") && !picture.contains("url("));
            }
        }
    }

    #[test]
    fn a_quantity_that_is_the_same_or_missing_everywhere_is_drawn_without_lines() {
        let same = contoured(Projection::EqualArea, |_| 0.0);
        assert!(svg(&same, Theme::Light).contains(">N</text>"));
        let none = contoured(Projection::EqualArea, |_| f64::NAN);
        assert!(svg(&none, Theme::Light).contains(">N</text>"));
        let half = contoured(Projection::EqualArea, |n| if n[0] > 0.0 { n[1] } else { f64::NAN });
        let text = serde_json::to_string(&half).unwrap();
        assert_eq!(serde_json::from_str::<Figure>(&text).unwrap(), half);
    }
}
