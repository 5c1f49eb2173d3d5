//! A figure as SVG.

mod bands;
mod canvas;
mod clip;
mod contours;
mod drawing;
mod frame;
mod labels;
mod net;
mod surface;
mod ticks;

use bands::{Band, band};
use canvas::{Canvas, Hold};
use clip::{Px, Rect, walk};
use contours::{Contours, Number};
use drawing::Drawing;
use frame::{Frame, Margins};
use labels::{Anchor, LINE, Placed, Room, SIZE, Wish, block, moved_into, spread, wrap};
use net::Net;

use super::theme::{Palette, Pen, Theme, dark_where_the_page_is};
use crate::card::{Figure, Layer, Role};

/// The widest label at the end of a line before it is broken into lines.
const WIDEST_END_LABEL: f64 = 150.0;
/// From the end of a line to its label.
const LEADER: f64 = 16.0;

/// Draws a figure. The same figure gives the same bytes; text stays text; caption and text
/// alternative are its `<title>` and `<desc>`. Points that are not numbers are left out, and an axis
/// without extent is given some.
pub fn svg(figure: &Figure, theme: Theme) -> String {
    let palette = Palette::of(theme);
    let plan = Plan::of(figure, &palette);
    let frame = &plan.frame;

    let mut canvas = Canvas::new();
    if theme == Theme::Notebook {
        let whole = Rect { left: 0.0, top: 0.0, right: frame.size.0, bottom: frame.size.1 };
        canvas.fill(&whole, palette.ground, 1.0);
    }
    frame.draw_grid(&mut canvas, &palette);
    let label_areas: Vec<Rect> = plan.labels.iter().map(|l| l.area).collect();
    for band in &plan.bands {
        band.draw(&mut canvas, &palette, &label_areas);
    }
    frame.draw_axes(&mut canvas, &palette);
    if let Some(net) = &plan.net {
        net.draw_graticule(&mut canvas, &palette);
    }
    if let Some(contours) = &plan.contours {
        contours.fill(&mut canvas, frame);
        contours.draw_lines(&mut canvas, &palette, frame, &plan.numbers);
        contours.draw_bar(&mut canvas, &palette, frame);
    }
    if let Some(net) = &plan.net {
        net.draw_circle(&mut canvas, &palette);
    }
    for drawing in &plan.drawings {
        if plan.contours.is_some() {
            drawing.draw_edged(&mut canvas, &palette);
        }
        drawing.draw(&mut canvas, &palette, &label_areas);
    }
    let thin = Pen { width: 1.0, dash: &[], ..palette.pen(Role::Quiet) };
    let leaders: Vec<Vec<Px>> = plan.labels.iter().filter_map(|l| l.leader.map(|ends| ends.to_vec())).collect();
    canvas.lines(&leaders, &thin);
    for label in &plan.labels {
        if plan.contours.is_some() {
            canvas.fill(&label.area.grown(1.5), palette.ground, PLATE);
        }
        let x = match label.hold {
            Hold::Start => label.area.left,
            Hold::Middle => (label.area.left + label.area.right) / 2.0,
            Hold::End => label.area.right,
        };
        for (i, line) in label.lines.iter().enumerate() {
            let y = label.area.top + (i as f64 + 0.5) * LINE;
            canvas.text(line, [x, y], label.hold, SIZE, label.colour);
        }
    }
    let style = if theme == Theme::Notebook { dark_where_the_page_is() } else { String::new() };
    canvas.finish(frame.size.0, frame.size.1, &figure.caption, &figure.alt, &style)
}

/// How much a label over filled steps hides of them.
const PLATE: f64 = 0.9;

/// Everything of a figure with its place, before anything is drawn.
struct Plan<'a> {
    frame: Frame,
    bands: Vec<Band<'a>>,
    net: Option<Net>,
    contours: Option<Contours<'a>>,
    numbers: Vec<Number>,
    drawings: Vec<Drawing>,
    labels: Vec<Placed>,
}

impl<'a> Plan<'a> {
    fn of(figure: &'a Figure, palette: &Palette) -> Plan<'a> {
        let contours = Contours::of(figure);
        let frame = Frame::of(figure, margins(figure, contours.as_ref()));
        let net = Net::of(figure, &frame, contours.is_some());
        // Without its circle a quantity has no place.
        let contours = contours.filter(|_| net.is_some());
        let drawings: Vec<Drawing> = figure.layers.iter().map(|l| Drawing::of(l, &frame)).collect();
        let bands: Vec<Band<'_>> = figure.layers.iter().filter_map(|l| band(l, &frame)).collect();
        let covered: Vec<Rect> = drawings.iter().flat_map(Drawing::covers).collect();
        let numbers = contours.as_ref().map_or_else(Vec::new, |c| c.numbers(&frame, &covered));
        let mut room = room(&frame, &drawings, &bands);
        if let Some(net) = &net {
            let (circle, texts) = net.outline();
            room.edges.extend(walk(&circle, 6.0));
            room.taken.extend(texts);
        }
        room.taken.extend(numbers.iter().map(|n| n.area));
        let labels = place_labels(figure, &frame, palette, &drawings, &bands, room);
        Plan { frame, bands, net, contours, numbers, drawings, labels }
    }
}

/// Whether a line is named at its right end, outside the frame.
fn named_at_its_end(figure: &Figure, points: &[[f64; 2]]) -> bool {
    let (low, high) = ticks::ends(&figure.x);
    let (bottom, top) = ticks::ends(&figure.y);
    let last = points.iter().rev().find(|p| p[0].is_finite() && p[1].is_finite());
    !figure.y.downward
        && last.is_some_and(|[x, y]| {
            *x >= high - 0.02 * (high - low) && *x <= high * (1.0 + 1e-9) + 1e-12 && *y >= bottom && *y <= top
        })
}

fn margins(figure: &Figure, contours: Option<&Contours<'_>>) -> Margins {
    let mut out = Margins { right: contours.map_or(0.0, Contours::margin), ..Margins::default() };
    for layer in &figure.layers {
        match layer {
            Layer::Line { label, points, .. } if !label.is_empty() && named_at_its_end(figure, points) => {
                let (wide, _) = block(&wrap(label, SIZE, WIDEST_END_LABEL), SIZE);
                out.right = out.right.max(LEADER + wide);
            }
            Layer::ColumnBand { label, .. } if !label.is_empty() => out.strip = LINE + 4.0,
            _ => {}
        }
    }
    out
}

/// What labels keep clear of, before the first has its place.
fn room(frame: &Frame, drawings: &[Drawing], bands: &[Band<'_>]) -> Room {
    let mut room = Room::default();
    for (owner, drawing) in drawings.iter().enumerate() {
        let mut places = drawing.outline();
        places.sort_by_key(cell);
        places.dedup_by_key(|p| cell(p));
        room.drawn.extend(places.into_iter().map(|p| (owner, p)));
    }
    let edges = frame.zero_lines().into_iter().chain(bands.iter().flat_map(Band::edges));
    room.edges = edges.flat_map(|line| walk(&line, 6.0)).collect();
    room
}

fn place_labels(
    figure: &Figure,
    frame: &Frame,
    palette: &Palette,
    drawings: &[Drawing],
    bands: &[Band<'_>],
    mut room: Room,
) -> Vec<Placed> {
    let mut out = Vec::new();
    let inside = frame.area.grown(-4.0);
    label_upright_bands(frame, palette, bands, &mut out);
    label_line_ends(figure, frame, palette, drawings, &mut out);
    for layer in &figure.layers {
        if let Layer::Words { text, at } = layer {
            let [x, y] = frame.at(*at);
            let lines = wrap(text, SIZE, 0.6 * frame.area.width());
            if !x.is_finite() || !y.is_finite() || lines.is_empty() {
                continue;
            }
            let (w, h) = block(&lines, SIZE);
            let area = Rect { left: x, right: x + w, top: y - h / 2.0, bottom: y + h / 2.0 };
            let area = moved_into(area, &inside);
            room.taken.push(area);
            out.push(Placed { lines, colour: palette.ink, hold: Hold::Start, area, leader: None });
        }
    }
    for (owner, (layer, drawing)) in figure.layers.iter().zip(drawings).enumerate() {
        let (label, gap, anchors) = match (layer, drawing) {
            (Layer::Line { label, points, .. }, Drawing::Lines { parts, .. }) if !named_at_its_end(figure, points) => {
                (label, 7.0, along(parts))
            }
            (Layer::Circle { label, .. }, Drawing::Lines { parts, .. }) => (label, 6.0, along(parts)),
            (Layer::Arrow { label, .. }, Drawing::Strokes { parts, .. }) => (label, 8.0, along(parts)),
            (Layer::Points { label, .. }, Drawing::Marks { places, .. }) => {
                let anchors = places.iter().take(24).enumerate();
                let anchors = anchors.map(|(i, p)| Anchor { at: *p, cost: 0.2 * i as f64 });
                (label, 10.0, anchors.collect())
            }
            _ => continue,
        };
        let role = match layer {
            Layer::Line { role, .. }
            | Layer::Circle { role, .. }
            | Layer::Points { role, .. }
            | Layer::Arrow { role, .. } => *role,
            _ => continue,
        };
        if !label.is_empty() {
            let wish =
                Wish { owner, text: label.clone(), colour: palette.pen(role).word, gap, may_stand_off: true, anchors };
            out.extend(room.place(&wish, &inside));
        }
    }
    for (number, band) in bands.iter().enumerate().filter(|(_, b)| !b.upright && !b.label.is_empty()) {
        let middle = (band.area.top + band.area.bottom) / 2.0;
        let half = canvas::width(band.label, SIZE) / 2.0;
        let anchors = [0.97, 0.03, 0.5, 0.75, 0.25, 0.87, 0.62, 0.38, 0.13]
            .iter()
            .enumerate()
            .map(|(i, share)| {
                let x = inside.left + half + share * (inside.width() - 2.0 * half);
                Anchor { at: [x, middle + LINE / 2.0], cost: 2.0 * i as f64 }
            })
            .collect();
        let wish = Wish {
            owner: drawings.len() + number,
            text: band.label.to_owned(),
            colour: palette.pen(band.role).word,
            gap: 0.0,
            may_stand_off: false,
            anchors,
        };
        out.extend(room.place(&wish, &inside));
    }
    out
}

/// The cell of a fine grid that a place is in; one place a cell is enough to keep clear of.
fn cell(place: &Px) -> (i64, i64) {
    ((place[0] / 3.0) as i64, (place[1] / 3.0) as i64)
}

/// The most anchors that one layer offers.
const ANCHORS: f64 = 60.0;

/// Anchors along lines: the highest place, the end, and steps between.
fn along(parts: &[Vec<Px>]) -> Vec<Anchor> {
    let length: f64 = parts.iter().flat_map(|p| p.windows(2)).map(step_length).sum();
    let mut out = Vec::new();
    for part in parts {
        let places = walk(part, (length / ANCHORS).max(12.0));
        let highest = places.iter().map(|p| p[1]).fold(f64::INFINITY, f64::min);
        let count = places.len();
        for (i, at) in places.into_iter().enumerate() {
            let cost = if at[1] <= highest + 0.5 {
                0.0
            } else if i + 1 == count {
                2.0
            } else {
                6.0
            };
            out.push(Anchor { at, cost });
        }
    }
    out
}

fn step_length(pair: &[Px]) -> f64 {
    match pair {
        [a, b] => (b[0] - a[0]).hypot(b[1] - a[1]),
        _ => 0.0,
    }
}

fn label_line_ends(figure: &Figure, frame: &Frame, palette: &Palette, drawings: &[Drawing], out: &mut Vec<Placed>) {
    let mut ends: Vec<(Px, Placed)> = Vec::new();
    for (layer, drawing) in figure.layers.iter().zip(drawings) {
        let (Layer::Line { label, role, points }, Drawing::Lines { parts, .. }) = (layer, drawing) else { continue };
        if label.is_empty() || !named_at_its_end(figure, points) {
            continue;
        }
        let Some(end) = parts.last().and_then(|p| p.last()).copied() else { continue };
        let lines = wrap(label, SIZE, WIDEST_END_LABEL);
        let (w, h) = block(&lines, SIZE);
        let left = frame.area.right + LEADER;
        let area = Rect { left, right: left + w, top: end[1] - h / 2.0, bottom: end[1] + h / 2.0 };
        ends.push((end, Placed { lines, colour: palette.pen(*role).word, hold: Hold::Start, area, leader: None }));
    }
    let wanted: Vec<(f64, f64)> = ends.iter().map(|(end, p)| (end[1], p.area.height() + 2.0)).collect();
    let slack = 0.6 * LINE;
    let centres = spread(&wanted, frame.area.top - slack, frame.area.bottom + slack);
    for ((end, mut placed), centre) in ends.into_iter().zip(centres) {
        let half = placed.area.height() / 2.0;
        placed.area = Rect { top: centre - half, bottom: centre + half, ..placed.area };
        let from = [end[0] + 3.0, end[1]];
        placed.leader = Some([from, [placed.area.left - 4.0, centre]]);
        out.push(placed);
    }
}

fn label_upright_bands(frame: &Frame, palette: &Palette, bands: &[Band<'_>], out: &mut Vec<Placed>) {
    let mut named: Vec<&Band<'_>> = bands.iter().filter(|b| b.upright && !b.label.is_empty()).collect();
    let wide = |b: &&Band<'_>| canvas::width(b.label, SIZE) + 8.0;
    let room = frame.size.0 - 8.0 - frame.area.left;
    if named.iter().map(wide).sum::<f64>() > room {
        // Not enough room to name every band: each name once.
        let mut seen: Vec<&str> = Vec::new();
        named.retain(|b| {
            let new = !seen.contains(&b.label);
            seen.push(b.label);
            new
        });
    }
    let wanted: Vec<(f64, f64)> = named.iter().map(|b| ((b.area.left + b.area.right) / 2.0, wide(b))).collect();
    let centres = spread(&wanted, frame.area.left, frame.size.0 - 8.0);
    for (band, x) in named.into_iter().zip(centres) {
        let half = canvas::width(band.label, SIZE) / 2.0;
        let y = frame.strip();
        let area = Rect { left: x - half, right: x + half, top: y - LINE / 2.0, bottom: y + LINE / 2.0 };
        out.push(Placed {
            lines: vec![band.label.to_owned()],
            colour: palette.pen(band.role).word,
            hold: Hold::Middle,
            area,
            leader: None,
        });
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::card::{Axis, Mark, Projection};
    use crate::show::sample;

    const THEMES: [Theme; 4] = [Theme::Notebook, Theme::Light, Theme::Dark, Theme::Print];

    fn empty(x: Axis, y: Axis) -> Figure {
        Figure { caption: "c".into(), alt: "a".into(), x, y, equal_scale: false, layers: Vec::new() }
    }

    /// Every tag closed in order, no attribute or text with a bare `<`.
    fn well_formed(text: &str) -> bool {
        let mut open: Vec<&str> = Vec::new();
        for tag in text.split('<').skip(1) {
            let Some((tag, _)) = tag.split_once('>') else { return false };
            if let Some(name) = tag.strip_prefix('/') {
                if open.pop() != Some(name) {
                    return false;
                }
            } else if !tag.ends_with('/') {
                open.push(tag.split_whitespace().next().unwrap_or_default());
            }
        }
        open.is_empty()
    }

    #[test]
    fn draws_the_same_bytes_each_time_with_title_alternative_and_real_text() {
        for theme in THEMES {
            let picture = svg(&sample::figure(), theme);
            assert_eq!(picture, svg(&sample::figure(), theme));
            assert!(well_formed(&picture));
            assert!(picture.contains("role=\"img\"") && picture.contains("<title>Stresses at the wall"));
            assert!(picture.contains("<desc>The hoop stress peaks"));
            assert!(picture.contains("font-family=\"Inter, Helvetica, Arial, sans-serif\""));
            for words in ["strength</text>", "fails</text>", "recommended</text>", "peak hoop</text>"] {
                assert!(picture.contains(words), "{words}");
            }
            assert!(picture.contains("hoop σ<tspan"));
            assert!(!picture.contains("NaN") && !picture.contains("inf"));
            assert!(!picture.contains(" id="));
        }
    }

    #[test]
    fn only_the_notebook_brings_a_ground() {
        let whole = |theme| svg(&sample::figure(), theme).contains("fill=\"#FFFFFF\"");
        assert!(whole(Theme::Notebook));
        assert!(!whole(Theme::Light) && !whole(Theme::Dark) && !whole(Theme::Print));
        assert!(svg(&sample::figure(), Theme::Notebook).contains("prefers-color-scheme:dark"));
        assert!(!svg(&sample::figure(), Theme::Print).contains("<style"));
    }

    #[test]
    fn no_two_labels_of_a_full_figure_overlap_and_all_are_inside() {
        let figure = sample::figure();
        let Plan { frame, labels: placed, .. } = Plan::of(&figure, &Palette::of(Theme::Light));
        assert_eq!(placed.len(), 9);
        let whole = Rect { left: 0.0, top: 0.0, right: frame.size.0, bottom: frame.size.1 };
        for (i, a) in placed.iter().enumerate() {
            assert!(whole.covers(&a.area), "{:?}", a.lines);
            assert!(placed.iter().skip(i + 1).all(|b| !a.area.meets(&b.area)), "{:?}", a.lines);
        }
    }

    #[test]
    fn markup_in_a_figure_stays_text() {
        let evil = "</text><script>x</script>&\"";
        let mut figure = empty(Axis::new(evil, 0.0, 1.0), Axis::new(evil, 0.0, 1.0));
        evil.clone_into(&mut figure.caption);
        evil.clone_into(&mut figure.alt);
        figure.layers = vec![
            Layer::line(evil, Role::First, [[0.0, 0.0], [1.0, 1.0]]),
            Layer::Words { text: evil.into(), at: [0.2, 0.8] },
            Layer::ColumnBand { label: evil.into(), role: Role::Failing, from: 0.2, to: 0.4 },
        ];
        let picture = svg(&figure, Theme::Notebook);
        assert!(well_formed(&picture) && !picture.contains("<script"));
        assert_eq!(picture.matches("&lt;script&gt;").count(), 7);
    }

    #[test]
    fn nothing_is_too_odd_to_draw() {
        let odd = [f64::NAN, f64::INFINITY, f64::NEG_INFINITY, 0.0, 1e308, -1e308, 1e-320, 5.0];
        for a in odd {
            for b in odd {
                for equal_scale in [false, true] {
                    for y in [
                        Axis::new("", b, a),
                        Axis::new("depth", a, b).downward().ticks_every(b),
                        Axis::new("", a, b).hidden(),
                    ] {
                        let hidden = y.hidden;
                        let mut figure = empty(Axis { hidden, ..Axis::new("x", a, b).ticks_every(a) }, y);
                        figure.equal_scale = equal_scale;
                        figure.layers = vec![
                            Layer::Line {
                                label: "l".into(),
                                role: Role::Quiet,
                                points: vec![[a, b], [b, a], [0.0, b], [1.0, 1.0]],
                            },
                            Layer::Line { label: "e".into(), role: Role::Limit, points: Vec::new() },
                            Layer::Circle {
                                label: "c".into(),
                                role: Role::Second,
                                centre: [a, 0.0],
                                radius: b,
                                upper_half: true,
                            },
                            Layer::ColumnBand { label: "b".into(), role: Role::Range, from: a, to: b },
                            Layer::RowBand { label: "r".into(), role: Role::Failing, from: b, to: a },
                            Layer::Points {
                                label: "p".into(),
                                role: Role::Third,
                                mark: Mark::Cross,
                                points: vec![[a, b], [b, b]],
                            },
                            Layer::Words { text: "w".into(), at: [a, b] },
                            Layer::Arrow { label: "a".into(), role: Role::First, from: [a, b], to: [b, 1.0] },
                            Layer::Bar { role: Role::First, from: [a, b], to: [b, 0.5] },
                            Layer::Net { projection: Projection::EqualArea },
                            Layer::Contours {
                                label: "q".into(),
                                side: 3,
                                values: [a, b, 1.0, 2.0, b, a, 0.0, a, b].map(Some).to_vec(),
                            },
                        ];
                        let picture = svg(&figure, Theme::Light);
                        assert!(well_formed(&picture), "{a} {b}");
                        assert!(!picture.contains("NaN") && !picture.contains("inf"), "{a} {b}\n{picture}");
                        assert!(picture.len() < 200_000);
                    }
                }
            }
        }
    }

    #[test]
    fn the_labels_of_a_net_are_inside_and_apart_from_its_own_texts() {
        let points = |label: &str, at: [f64; 2]| Layer::Points {
            label: label.into(),
            role: Role::First,
            mark: Mark::Ring,
            points: vec![at],
        };
        let contours = Layer::contours("tendency (–)", 9, |[x, y]| x + 0.3 * y);
        for filled in [false, true] {
            let mut figure = empty(Axis::new("p", -1.3, 1.3).hidden(), Axis::new("", -1.2, 1.2).hidden());
            figure.equal_scale = true;
            figure.layers = vec![Layer::Net { projection: Projection::EqualArea }];
            figure.layers.extend(filled.then(|| contours.clone()));
            figure.layers.extend([
                points("S_1", [0.0, 1.0]),
                points("S_2", [0.0, 0.99]),
                points("fault F2", [0.03, 0.02]),
                points("pole", [1.0, 0.0]),
                points("at 30°", [0.5, 0.866]),
            ]);
            let plan = Plan::of(&figure, &Palette::of(Theme::Light));
            let whole = Rect { left: 0.0, top: 0.0, right: plan.frame.size.0, bottom: plan.frame.size.1 };
            let (_, texts) = plan.net.as_ref().unwrap().outline();
            let mut areas: Vec<Rect> = plan.labels.iter().map(|l| l.area).collect();
            assert_eq!(areas.len(), 5);
            areas.extend(texts);
            areas.extend(plan.numbers.iter().map(|n| n.area));
            assert_eq!(plan.numbers.is_empty(), !filled);
            for (i, a) in areas.iter().enumerate() {
                assert!(whole.covers(a), "{a:?}");
                assert!(areas.iter().skip(i + 1).all(|b| !a.meets(b)), "{filled} {a:?}");
            }
        }
    }

    #[test]
    fn a_long_line_stays_small() {
        let mut figure = empty(Axis::new("x", 0.0, 1.0), Axis::new("y", -1.0, 1.0));
        figure.layers =
            vec![Layer::line("s", Role::First, (0..100_000).map(|i| [f64::from(i) / 1e5, (f64::from(i) / 3e4).sin()]))];
        assert!(svg(&figure, Theme::Light).len() < 40_000);
    }
}
