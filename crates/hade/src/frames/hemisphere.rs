//! Lines and planes that the user wants to see together, on the lower hemisphere.

use serde::{Deserialize, Serialize};

use super::net::Net;
use super::vector::wrap;
use super::{Line, Name, Plane, three_figures};
use crate::card::{
    Card, Check, Column, Explain, Explanation, Formula, Item, Mark, Method, Projection, Reference, Role, Step, Table,
};
use crate::error::Result;
use crate::units::{Angle, Quantity, fixed};

/// Lines and planes on the lower hemisphere, by a projection that the figure names. North is up, east
/// to the right, down at the centre; the circle's radius is one.
#[derive(Clone, Debug, PartialEq)]
pub struct LowerHemisphere {
    inputs: HemisphereInputs,
    places: Vec<[f64; 2]>,
}

/// What is drawn, and how.
#[derive(Clone, Debug, PartialEq, Serialize, Deserialize)]
pub struct HemisphereInputs {
    title: String,
    projection: Projection,
    drawn: Vec<Drawn>,
}

/// One thing drawn, with its name.
#[derive(Clone, Copy, Debug, PartialEq, Serialize, Deserialize)]
#[serde(tag = "drawn", rename_all = "snake_case")]
#[non_exhaustive]
pub enum Drawn {
    /// A line, as a dot.
    Line {
        /// Its name.
        name: Name,
        /// The line.
        line: Line,
    },
    /// A plane, as a great circle.
    Plane {
        /// Its name.
        name: Name,
        /// The plane.
        plane: Plane,
    },
    /// The pole of a plane, as a ring.
    Pole {
        /// Its name.
        name: Name,
        /// The plane.
        plane: Plane,
    },
}

impl Drawn {
    fn name(self) -> Name {
        match self {
            Drawn::Line { name, .. } | Drawn::Plane { name, .. } | Drawn::Pole { name, .. } => name,
        }
    }

    /// The line whose place stands for it: itself, the line of steepest dip, the pole.
    fn line(self) -> Result<Line> {
        match self {
            Drawn::Line { line, .. } => line.lower_end(),
            Drawn::Plane { plane, .. } => Ok(Line::along(plane.axes()?.down_dip)),
            Drawn::Pole { plane, .. } => plane.pole(),
        }
    }

    /// What fixes it, as inputs that the sheet must know.
    fn items(self, n: usize) -> [Item; 2] {
        let name = self.name();
        match self {
            Drawn::Line { line, .. } => [
                line.trend.item(&format!("T_{n}"), &format!("trend of {name}")),
                Item::typed(&format!("P_{n}"), format!("plunge of {name}"), line.plunge),
            ],
            Drawn::Plane { plane, .. } => plane_items(plane, n, name.text()),
            Drawn::Pole { plane, .. } => plane_items(plane, n, &format!("the plane whose pole is \"{name}\"")),
        }
    }

    fn words(self) -> String {
        match self {
            Drawn::Line { line, .. } => format!("line, {}", line.words()),
            Drawn::Plane { plane, .. } => format!("plane, {}", plane.words()),
            Drawn::Pole { plane, .. } => format!("pole of the plane {}", plane.words()),
        }
    }
}

fn plane_items(plane: Plane, n: usize, of: &str) -> [Item; 2] {
    [
        plane.strike.item(&format!("s_{n}"), &format!("strike of {of}")),
        Item::typed(&format!("d_{n}"), format!("dip of {of}"), plane.dip),
    ]
}

/// "1 line, 2 planes, 1 pole".
fn counted(drawn: &[Drawn]) -> String {
    let count = |is: fn(&Drawn) -> bool| drawn.iter().filter(|thing| is(thing)).count();
    let counts = [
        (count(|d| matches!(d, Drawn::Line { .. })), "line"),
        (count(|d| matches!(d, Drawn::Plane { .. })), "plane"),
        (count(|d| matches!(d, Drawn::Pole { .. })), "pole"),
    ];
    let some = counts.iter().filter(|(n, _)| *n > 0).map(|(n, one)| match n {
        1 => format!("1 {one}"),
        n => format!("{n} {one}s"),
    });
    some.reduce(|a, b| format!("{a}, {b}")).unwrap_or_else(|| "nothing".to_owned())
}

impl LowerHemisphere {
    /// An empty one, with the title of its card and the projection.
    pub fn new(title: &str, projection: Projection) -> Self {
        let inputs = HemisphereInputs { title: title.to_owned(), projection, drawn: Vec::new() };
        LowerHemisphere { inputs, places: Vec::new() }
    }

    /// With a line. What begins with the same word ("cell 1", "cell 2") is drawn alike.
    ///
    /// # Errors
    /// When the plunge is outside ±90° or the trend has no true north.
    pub fn line(self, name: &str, line: Line) -> Result<Self> {
        self.with(Drawn::Line { name: Name::new(name), line })
    }

    /// With a plane, as a great circle.
    ///
    /// # Errors
    /// When the dip is outside 0–90° or the strike has no true north.
    pub fn plane(self, name: &str, plane: Plane) -> Result<Self> {
        self.with(Drawn::Plane { name: Name::new(name), plane })
    }

    /// With the pole of a plane, as a ring.
    ///
    /// # Errors
    /// As [`LowerHemisphere::plane`].
    pub fn pole(self, name: &str, plane: Plane) -> Result<Self> {
        self.with(Drawn::Pole { name: Name::new(name), plane })
    }

    fn with(mut self, drawn: Drawn) -> Result<Self> {
        self.inputs.drawn.push(drawn);
        LowerHemisphere::compute(self.inputs)
    }

    /// Where each thing lies: east and north of the centre, in radii. For a plane, its line of
    /// steepest dip.
    pub fn places(&self) -> &[[f64; 2]] {
        &self.places
    }
}

/// The number of a name's first word among those seen.
fn group(seen: &mut Vec<String>, name: Name) -> usize {
    let first = name.text().split_whitespace().next().unwrap_or_default();
    seen.iter().position(|word| word == first).unwrap_or_else(|| {
        seen.push(first.to_owned());
        seen.len() - 1
    })
}

impl Explain for LowerHemisphere {
    const KIND: &'static str = "lower-hemisphere";
    type Inputs = HemisphereInputs;
    type Outcome = Vec<[f64; 2]>;

    fn compute(inputs: HemisphereInputs) -> Result<Self> {
        let mut places = Vec::new();
        for drawn in &inputs.drawn {
            let v = drawn.line()?.vector()?;
            places.push(inputs.projection.place([v[0], v[1], v[2].max(0.0)]).unwrap_or_default());
        }
        Ok(LowerHemisphere { inputs, places })
    }
    fn inputs(&self) -> HemisphereInputs {
        self.inputs.clone()
    }
    fn outcome(&self) -> Vec<[f64; 2]> {
        self.places.clone()
    }

    /// By trend and plunge: the distance from the centre is √2 sin((90° − P)/2) or tan((90° − P)/2),
    /// towards the trend.
    fn check(inputs: &HemisphereInputs, outcome: &Vec<[f64; 2]>) -> Vec<Check> {
        let mut expected = Vec::new();
        for drawn in &inputs.drawn {
            let Ok(line) = drawn.line() else { return Vec::new() };
            let Ok(trend) = line.trend.true_north() else { return Vec::new() };
            let half = 0.5 * (std::f64::consts::FRAC_PI_2 - line.plunge.si());
            let r = match inputs.projection {
                Projection::EqualArea => std::f64::consts::SQRT_2 * half.sin(),
                _ => half.tan(),
            };
            expected.extend([r * trend.si().sin(), r * trend.si().cos()]);
        }
        vec![Check::compare(
            "places by trend, plunge and the formula of the projection",
            outcome.as_flattened(),
            &expected,
            1e-12,
            "radii",
        )]
    }

    fn explain(&self) -> Explanation {
        let HemisphereInputs { title, projection, drawn } = &self.inputs;
        let mut net = Net::new(*projection);
        let looks = [
            (Role::First, Mark::Dot),
            (Role::Second, Mark::Square),
            (Role::Third, Mark::Triangle),
            (Role::Fourth, Mark::Diamond),
        ];
        let mut groups = Vec::new();
        let mut rows = Vec::new();
        let mut alt = Vec::new();
        for (thing, place) in drawn.iter().zip(&self.places) {
            let name = thing.name();
            net = match thing {
                Drawn::Line { line, .. } => match line.vector() {
                    Ok(v) => {
                        let (role, mark) = looks[group(&mut groups, name) % looks.len()];
                        net.line(name.text(), role, mark, v)
                    }
                    Err(_) => net,
                },
                Drawn::Plane { plane, .. } => match plane.axes() {
                    Ok(axes) => net.plane(name.text(), looks[group(&mut groups, name) % looks.len()].0, axes.normal),
                    Err(_) => net,
                },
                Drawn::Pole { plane, .. } => match plane.axes() {
                    Ok(axes) => net.pole(name.text(), looks[group(&mut groups, name) % looks.len()].0, axes.normal),
                    Err(_) => net,
                },
            };
            alt.push(format!("{name}: {}", thing.words()));
            if let Ok(line) = thing.line() {
                let trend = line.trend.true_north().unwrap_or_default();
                rows.push(vec![
                    name.to_string(),
                    thing.words(),
                    three_figures(Angle::from_si(wrap(trend.si()))),
                    fixed(line.plunge.in_deg(), 1),
                    fixed(place[0], 3),
                    fixed(place[1], 3),
                ]);
            }
        }
        let (math, text) = match projection {
            Projection::EqualArea => ("r = sqrt(2) sin((90 degree - P) / 2)", "r = √2 sin((90° − P)/2)"),
            _ => ("r = tan((90 degree - P) / 2)", "r = tan((90° − P)/2)"),
        };
        Explanation {
            title: title.clone(),
            headline: format!("{}; {} projection", counted(drawn), projection.words()),
            inputs: drawn.iter().zip(1..).flat_map(|(thing, n)| thing.items(n)).collect(),
            method: Method {
                words: "Each line is drawn where its lower end lies, a plane as the circle of its lines; r counts from the centre in radii of the circle, towards the trend.".to_owned(),
                formulas: vec![
                    Formula::new(math, text),
                    Formula::new("upright(\"east\") = r sin T", "east = r sin T"),
                    Formula::new("upright(\"north\") = r cos T", "north = r cos T"),
                ],
                references: vec![Reference::new(
                    "Priest, S.D. (1985) Hemispherical Projection Methods in Rock Mechanics, Allen & Unwin (cited from memory)",
                )],
                ..Method::default()
            },
            steps: vec![Step::Table {
                table: Table {
                    caption: "What is drawn: the line, the plane's steepest line or pole, and its place east and north of the centre".to_owned(),
                    columns: vec![
                        Column::text("name"),
                        Column::text("what"),
                        Column::number("trend", "°"),
                        Column::number("plunge", "°"),
                        Column::number("east", "radii"),
                        Column::number("north", "radii"),
                    ],
                    rows,
                },
            }],
            figures: vec![net.figure(format!("{title}."), format!("{}.", alt.join("; ")))],
            topics: vec!["plane".to_owned()],
            ..Explanation::default()
        }
    }

    fn upstream(&self) -> Vec<Card> {
        self.inputs
            .drawn
            .iter()
            .flat_map(|drawn| match drawn {
                Drawn::Line { line, .. } => line.trend.upstream(),
                Drawn::Plane { plane, .. } | Drawn::Pole { plane, .. } => plane.strike.upstream(),
            })
            .collect()
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::frames::Azimuth;
    use crate::units::Units;

    #[test]
    fn a_line_a_plane_and_a_pole_lie_where_the_projection_says() {
        let plane = Plane { strike: Azimuth::from_true_north(0.deg()), dip: 60.deg() };
        let line = Line { trend: Azimuth::from_true_north(180.deg()), plunge: (-30).deg() };
        for (projection, at_60) in
            [(Projection::EqualArea, 0.366_025_403_784), (Projection::EqualAngle, 0.267_949_192_431)]
        {
            let net = LowerHemisphere::new("t", projection).plane("F", plane).unwrap().pole("F", plane).unwrap();
            let net = net.line("up", line).unwrap();
            // The steepest line of a plane that dips 60° east plunges 60°; its pole plunges 30° west.
            assert!(
                (net.places()[0][0] - at_60).abs() < 1e-11 && net.places()[0][1].abs() < 1e-12,
                "{:?}",
                net.places()
            );
            assert!(net.places()[1][0] < -0.5);
            // The upper end of a line is turned to its lower one.
            assert!(net.places()[2][1] > 0.5);
            let card = net.card();
            assert!(card.passed());
            let begins = card.explanation.headline.split(';').next();
            assert_eq!(begins, Some("1 line, 1 plane, 1 pole"));
            assert_eq!(card.explanation.inputs[2].name, "strike of the plane whose pole is \"F\"");
        }
        let bad = Plane { dip: 120.deg(), ..plane };
        assert!(LowerHemisphere::new("t", Projection::EqualArea).plane("F", bad).unwrap_err().is_range());
    }
}
