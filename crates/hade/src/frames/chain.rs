//! A chain of named turns from one set of axes to another.

use std::marker::PhantomData;

use serde::{Deserialize, Serialize};

use super::axes::product;
use super::azimuth::{TRUE_AZIMUTH, bearing};
use super::net::axes_net;
use super::turn::{Turn, in_words};
use super::vector::{M3, V3, apply, cross, dot, multiply, transpose};
use super::{Attitude, Axes, Borehole, FaultAxes, Frame, Geographic, Name, Plane};
use crate::card::{Card, Check, Explain, Explanation, Figure, Formula, Item, Method, Reference, Step};
use crate::error::{Error, Result};
use crate::units::{Angle, Quantity};

/// The chain of turns from one set of axes to another. Its product Q has the new axes as rows, in
/// the old axes: v' = Q v, S' = Q S Qᵀ. `Chain` alone leads from north, east, down to a hole.
pub struct Chain<From: Frame = Geographic, To: Frame = Borehole> {
    route: Route,
    frames: PhantomData<fn() -> (From, To)>,
}

impl<A: Frame, B: Frame> Clone for Chain<A, B> {
    fn clone(&self) -> Self {
        *self
    }
}
impl<A: Frame, B: Frame> Copy for Chain<A, B> {}
impl<A: Frame, B: Frame> PartialEq for Chain<A, B> {
    fn eq(&self, other: &Self) -> bool {
        self.route == other.route
    }
}
impl<A: Frame, B: Frame> std::fmt::Debug for Chain<A, B> {
    fn fmt(&self, f: &mut std::fmt::Formatter<'_>) -> std::fmt::Result {
        write!(f, "Chain from {} to {}", self.from().words(), self.to().words())
    }
}

/// A chain whatever its frames: between which axes, and the product of its turns.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Route {
    inputs: ChainInputs,
    q: M3,
    /// Rows of the axes it leads to, in north, east, down.
    to_rows: M3,
}

/// The inputs of a chain: the axes it leads from and to.
#[derive(Clone, Copy, Debug, PartialEq, Serialize, Deserialize)]
pub struct ChainInputs {
    from: Axes,
    to: Axes,
}

/// What a chain can carry: a stress, a direction, the traction on a plane.
#[diagnostic::on_unimplemented(
    message = "this chain leads from `{From}` to `{To}` axes and cannot carry `{Self}`",
    label = "a value in other axes than the chain begins with",
    note = "`chain.back()` leads the other way, and `chain.then(&next)?` joins two chains"
)]
pub trait CarriedBy<From: Frame, To: Frame> {
    /// What it is in the axes the chain leads to.
    type Carried;
    /// Carries it.
    fn carried_by(&self, chain: &Chain<From, To>) -> Self::Carried;
}

impl<From: Frame, To: Frame> Chain<From, To> {
    /// The chain between two sets of axes, which must be of the kinds that the types say.
    pub(crate) fn between(from: Axes, to: Axes) -> Result<Self> {
        debug_assert!(from.kind() == From::NAME && to.kind() == To::NAME);
        Ok(Chain { route: Route::compute(ChainInputs { from, to })?, frames: PhantomData })
    }

    /// The axes it leads from.
    pub fn from(&self) -> Axes {
        self.route.inputs.from
    }

    /// The axes it leads to.
    pub fn to(&self) -> Axes {
        self.route.inputs.to
    }

    /// The product Q of its turns: rows are the new axes in the old ones.
    pub fn matrix(&self) -> [[f64; 3]; 3] {
        self.route.q
    }

    /// Rows: the axes it leads to, in north, east, down.
    pub(crate) fn rows_of_to(&self) -> &M3 {
        &self.route.to_rows
    }

    /// The turns in the order they are made.
    pub fn steps(&self) -> Vec<Turn> {
        self.route.turns()
    }

    /// The chain the other way round; its matrix is the transpose.
    pub fn back(&self) -> Chain<To, From> {
        let inputs = ChainInputs { from: self.to(), to: self.from() };
        let to_rows = self.from().matrix().unwrap_or_default();
        Chain { route: Route { inputs, q: transpose(&self.route.q), to_rows }, frames: PhantomData }
    }

    /// This chain, then another that begins where it ends.
    ///
    /// # Errors
    /// When the other begins in another hole's, wall's or fault's axes.
    pub fn then<Next: Frame>(&self, next: &Chain<To, Next>) -> Result<Chain<From, Next>> {
        if !self.to().same(next.from()) {
            return Err(Error::FrameMismatch {
                doing: "Joining two chains".to_owned(),
                left: self.to().words(),
                right: next.from().words(),
            });
        }
        Chain::between(self.from(), next.to())
    }

    /// Carries a stress, a direction or a traction to the axes it leads to. A stress or direction
    /// knows the axes it is in and is turned out of those.
    pub fn carry<X: CarriedBy<From, To>>(&self, value: &X) -> X::Carried {
        value.carried_by(self)
    }
}

impl<From: Frame> Chain<From, Borehole> {
    /// The attitude of the hole it leads to.
    pub fn attitude(&self) -> Attitude {
        match self.to() {
            Axes::Hole { attitude, .. } => attitude,
            _ => Attitude { inclination: Angle::default(), azimuth: super::Azimuth::from_true_north(Angle::default()) },
        }
    }

    /// The name of the hole and depth, if one was given.
    pub fn name(&self) -> Option<Name> {
        match self.to() {
            Axes::Hole { name, .. } => name,
            _ => None,
        }
    }
}

impl Plane {
    /// The chain of turns from the geographic frame to the axes of a fault in this plane: along
    /// strike, down dip, normal.
    ///
    /// # Errors
    /// When the dip is outside 0–90° or the strike has no true north.
    pub fn chain(self) -> Result<Chain<Geographic, FaultAxes>> {
        Chain::between(Axes::NorthEastDown, Axes::Fault { plane: self, name: None })
    }

    /// The same under the fault's name.
    ///
    /// # Errors
    /// As [`Plane::chain`].
    pub fn chain_named(self, fault: &str) -> Result<Chain<Geographic, FaultAxes>> {
        Chain::between(Axes::NorthEastDown, Axes::Fault { plane: self, name: Some(Name::new(fault)) })
    }
}

impl Route {
    /// From north, east, down to some axes.
    pub(crate) fn to(axes: Axes) -> Result<Route> {
        Route::compute(ChainInputs { from: Axes::NorthEastDown, to: axes })
    }

    fn turns(&self) -> Vec<Turn> {
        self.inputs.from.turns_to(self.inputs.to).unwrap_or_default()
    }
}

impl Explain for Route {
    const KIND: &'static str = "rotation-chain";
    const VERSION: u32 = 2;
    type Inputs = ChainInputs;
    type Outcome = [[f64; 3]; 3];

    fn compute(inputs: ChainInputs) -> Result<Self> {
        let q = product(&inputs.from.turns_to(inputs.to)?);
        let to_rows = if inputs.from == Axes::NorthEastDown { q } else { inputs.to.matrix()? };
        Ok(Route { inputs, q, to_rows })
    }
    fn inputs(&self) -> ChainInputs {
        self.inputs
    }
    fn outcome(&self) -> [[f64; 3]; 3] {
        self.q
    }

    /// Routes that a transposed matrix does not survive: Q from dot products of axis vectors by
    /// their definitions, and each new axis, known in the old axes, carried to the unit vector it is.
    fn check(inputs: &ChainInputs, q: &[[f64; 3]; 3]) -> Vec<Check> {
        let (Ok(old), Ok(new)) = (inputs.from.by_definition(), inputs.to.by_definition()) else { return Vec::new() };
        let dots = new.map(|n| old.map(|o| dot(n, o)));
        let identity = multiply(q, &transpose(q));
        let unit = [1.0, 0.0, 0.0, 0.0, 1.0, 0.0, 0.0, 0.0, 1.0];
        let mut checks = vec![
            Check::compare(
                "Q against dot products of the new and the old axes, each from its definition",
                q.as_flattened(),
                dots.as_flattened(),
                1e-12,
                "",
            ),
            Check::compare("Q times its transpose against the unit matrix", identity.as_flattened(), &unit, 1e-12, ""),
            Check::compare(
                "first row of Q across its second row against the third (right-handed)",
                &cross(q[0], q[1]),
                &q[2],
                1e-12,
                "",
            ),
        ];
        if let (Axes::NorthEastDown, Axes::Hole { attitude, .. }) = (inputs.from, inputs.to)
            && let Ok((i, a)) = attitude.angles()
        {
            let along = [i.sin() * a.cos(), i.sin() * a.sin(), i.cos()];
            checks.push(Check::compare(
                "the hole's direction (sin i cos a, sin i sin a, cos i) carried by Q against (0, 0, 1)",
                &apply(q, along),
                &[0.0, 0.0, 1.0],
                1e-12,
                "",
            ));
        }
        checks
    }

    fn explain(&self) -> Explanation {
        let ChainInputs { from, to } = self.inputs;
        let turns = self.turns();
        let mut steps = Vec::new();
        let numbers = "₁₂₃₄₅₆₇₈₉";
        let names: Vec<String> = numbers.chars().take(turns.len()).map(|n| format!("Q{n}")).collect();
        if turns.len() > 1 {
            for (turn, name) in turns.iter().zip(&names) {
                steps.push(Step::words(turn.sentence()));
                steps.push(Step::matrix(name, &turn.matrix, 6, "", "rows: the new axes in the axes before the turn"));
            }
            let factors: Vec<&str> = names.iter().rev().map(String::as_str).collect();
            steps.push(Step::words(format!(
                "The product of the turns, the first on the right: Q = {}.",
                factors.join(" ")
            )));
        } else if let Some(turn) = turns.first() {
            steps.push(Step::words(turn.sentence()));
        }
        steps.push(Step::matrix(
            "Q",
            &self.q,
            6,
            "",
            &format!("rows: {}; columns: {}", to.axis_names().join(", "), from.axis_names().join(", ")),
        ));
        steps.push(Step::words(whole_turn(&self.q, from)));
        let symbols = turns.iter().map(|t| t.words.as_str()).collect::<Vec<_>>().join("; ");
        let mut formulas = Vec::new();
        if turns.len() > 1 {
            let math: Vec<String> = (1..=turns.len()).rev().map(|n| format!("Q_{n}")).collect();
            let text: Vec<&str> = names.iter().rev().map(String::as_str).collect();
            formulas.push(Formula::new(&format!("Q = {}", math.join(" ")), &format!("Q = {}", text.join(" "))));
        }
        formulas.extend(turns.iter().zip(1..).filter_map(|(turn, n)| turn.formula(n)));
        Explanation {
            title: format!("Turn from {} to {}", from.title(), to.title()),
            headline: format!("{}: {symbols}", count(turns.len())),
            inputs: from.items_to(to),
            results: vec![Item::new(
                "Q",
                format!("turn from {} to {}", from.title(), to.title()),
                "turn",
                self.q.as_flattened().to_vec(),
                "the 3 × 3 matrix Q of the steps",
            )],
            method: Method {
                words: "The axes are turned step by step. Rows of Q are the new axes in the old ones, so that v' = Q v for a direction and S' = Q S Qᵀ for a tensor.".to_owned(),
                formulas,
                references: vec![Reference::new(
                    "Brady, B.H.G. and Brown, E.T. (2004) Rock Mechanics for Underground Mining, 3rd ed., Kluwer, p. 149 (rotation matrix of direction cosines)",
                )],
                ..Method::default()
            },
            steps,
            figures: axes_figure(from, to).into_iter().collect(),
            notes: [from.note(), to.note()].into_iter().flatten().fold(Vec::new(), |mut notes, note| {
                if !notes.contains(&note) {
                    notes.push(note);
                }
                notes
            }),
            topics: vec!["rotation".to_owned()],
        }
    }

    fn upstream(&self) -> Vec<Card> {
        let mut cards = self.inputs.from.upstream();
        cards.extend(self.inputs.to.upstream());
        cards
    }
}

impl<From: Frame, To: Frame> Explain for Chain<From, To> {
    const KIND: &'static str = Route::KIND;
    const VERSION: u32 = Route::VERSION;
    type Inputs = ChainInputs;
    type Outcome = [[f64; 3]; 3];

    fn compute(inputs: ChainInputs) -> Result<Self> {
        if inputs.from.kind() != From::NAME || inputs.to.kind() != To::NAME {
            return Err(Error::FrameMismatch {
                doing: "Reading a chain of turns".to_owned(),
                left: inputs.from.words(),
                right: inputs.to.words(),
            });
        }
        Ok(Chain { route: Route::compute(inputs)?, frames: PhantomData })
    }
    fn inputs(&self) -> ChainInputs {
        self.route.inputs()
    }
    fn outcome(&self) -> [[f64; 3]; 3] {
        self.route.outcome()
    }
    fn check(inputs: &ChainInputs, outcome: &[[f64; 3]; 3]) -> Vec<Check> {
        Route::check(inputs, outcome)
    }
    fn explain(&self) -> Explanation {
        self.route.explain()
    }
    fn upstream(&self) -> Vec<Card> {
        self.route.upstream()
    }
}

/// Both sets of axes on the lower hemisphere, each by its letter.
fn axes_figure(from: Axes, to: Axes) -> Option<Figure> {
    let (old, new) = (from.by_definition().ok()?, to.by_definition().ok()?);
    let letters = |axes: Axes, prime: &str| axes.letters().map(|letter| format!("{letter}{prime}"));
    let prime = if from.letters() == to.letters() { "′" } else { "" };
    let (old_names, new_names) = (letters(from, ""), letters(to, prime));
    let pairs =
        |rows: M3, names: &[String; 3]| -> Vec<(V3, String)> { rows.into_iter().zip(names.iter().cloned()).collect() };
    let (old, new) = (pairs(old, &old_names), pairs(new, &new_names));
    let before: Vec<(V3, &str)> = old.iter().map(|(v, name)| (*v, name.as_str())).collect();
    let after: Vec<(V3, &str)> = new.iter().map(|(v, name)| (*v, name.as_str())).collect();
    let legend = |axes: Axes, names: &[String; 3]| {
        names.iter().zip(axes.axis_names()).map(|(n, what)| format!("{n} {what}")).collect::<Vec<_>>().join(", ")
    };
    Some(axes_net(
        &format!("The axes before ({}) and after the turn ({}).", legend(from, &old_names), legend(to, &new_names)),
        &before,
        &after,
    ))
}

fn count(turns: usize) -> &'static str {
    ["no turn", "one turn", "two turns", "three turns", "four turns"].get(turns).copied().unwrap_or("several turns")
}

/// The whole chain as one turn. Its line is the same in the old and the new axes.
fn whole_turn(q: &M3, from: Axes) -> String {
    if from == Axes::NorthEastDown {
        let (axis, angle) = in_words(q);
        return format!(
            "Altogether one turn by {angle} about {axis}: 1 + 2 cos of the angle is the sum of the diagonal of Q, and the line lies along (Q_23 − Q_32, Q_31 − Q_13, Q_12 − Q_21)."
        );
    }
    let (axis, angle) = super::turn::axis_and_angle(q);
    let cosines: V3 = axis;
    let [x, y, z] = cosines.map(|c| crate::units::fixed(c, 4));
    format!(
        "Altogether one turn by {} about the direction ({x}, {y}, {z}) in the old axes: 1 + 2 cos of the angle is the sum of the diagonal of Q, and the direction lies along (Q_23 − Q_32, Q_31 − Q_13, Q_12 − Q_21).",
        Angle::from_si(angle)
    )
}

/// A bearing as an item of a result.
pub(crate) fn bearing_item(symbol: &str, name: &str, angle: Angle) -> Item {
    Item::new(symbol, name, TRUE_AZIMUTH, vec![angle.si()], bearing(angle))
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::frames::{Azimuth, Line, LocalAxes};
    use crate::units::Units;

    fn attitude(i: f64, a: f64) -> Attitude {
        Attitude { inclination: i.deg(), azimuth: Azimuth::from_true_north(a.deg()) }
    }
    fn line(trend: f64, plunge: f64) -> Line {
        Line { trend: Azimuth::from_true_north(trend.deg()), plunge: plunge.deg() }
    }
    fn passes<A: Frame, B: Frame>(chain: &Chain<A, B>) -> bool {
        Chain::<A, B>::check(&chain.inputs(), &chain.outcome()).iter().all(|c| c.passed)
    }
    fn transposed_fails<A: Frame, B: Frame>(chain: &Chain<A, B>) -> bool {
        Chain::<A, B>::check(&chain.inputs(), &transpose(&chain.matrix())).iter().any(|c| !c.passed)
    }

    #[test]
    fn rows_are_the_axes_by_definition_in_every_quadrant() {
        for i in [0.0, 30.0, 90.0, 135.0, 180.0] {
            for a in [0.0, 50.0, 123.0, 222.0, 359.999] {
                let q = attitude(i, a).chain().unwrap();
                assert!(passes(&q), "{i} {a}");
                assert!(transposed_fails(&q) || i == 0.0 && a == 0.0 || i == 180.0, "{i} {a}");
            }
        }
    }

    #[test]
    fn every_kind_of_axes_is_reached_and_left_again() {
        let hole = attitude(42.0, 120.0);
        let fault = Plane { strike: Azimuth::from_true_north(35.deg()), dip: 60.deg() }.chain_named("F1").unwrap();
        let grid = LocalAxes::mine_grid("mine grid", Azimuth::from_true_north(12.deg())).unwrap().chain().unwrap();
        let up =
            LocalAxes::mine_grid_with_up("mine grid", Azimuth::from_true_north(12.deg())).unwrap().chain().unwrap();
        let lines = LocalAxes::along_lines("cell", line(35.0, 12.0), line(130.0, 20.0)).unwrap().chain().unwrap();
        assert!(passes(&fault) && passes(&grid) && passes(&up) && passes(&lines));
        assert!(transposed_fails(&fault) && transposed_fails(&grid) && transposed_fails(&lines));
        let wall = hole.chain().unwrap().then(&hole.wall_chain(25.deg()).unwrap()).unwrap();
        assert!(passes(&wall) && transposed_fails(&wall));
        assert_eq!(wall.steps().len(), 3);
        // From one hole to another, and from a grid to the wall: up to north, east, down and down again.
        let other = attitude(100.0, 250.0).named("KF-4").chain().unwrap();
        let across = hole.chain().unwrap().back().then(&other).unwrap();
        assert_eq!(across.steps().len(), 4);
        assert!(passes(&across) && transposed_fails(&across));
        let far = up.back().then(&wall).unwrap();
        assert!(passes(&far) && passes(&far.back()));
        let symbols: Vec<String> = across.card().explanation.inputs.iter().map(|i| i.symbol.clone()).collect();
        assert_eq!(symbols, ["i_0", "a_0", "i", "a"]);
    }

    #[test]
    fn a_chain_that_begins_elsewhere_is_refused_with_both_places() {
        let a = attitude(42.0, 120.0).named("KF-3 at 2950 m");
        let b = attitude(40.0, 118.0).named("KF-3 at 2800 m");
        let e = a.chain().unwrap().then(&b.wall_chain(0.deg()).unwrap()).unwrap_err().to_string();
        assert!(e.contains("KF-3 at 2950 m") && e.contains("KF-3 at 2800 m"), "{e}");
    }

    #[test]
    fn back_is_the_transpose_and_joining_with_it_is_no_turn() {
        let there = attitude(42.0, 120.0).chain().unwrap();
        let none = there.then(&there.back()).unwrap();
        assert_eq!(none.matrix(), [[1.0, 0.0, 0.0], [0.0, 1.0, 0.0], [0.0, 0.0, 1.0]]);
        assert!(none.steps().is_empty());
    }

    #[test]
    fn a_hole_straight_up_says_from_where_tool_faces_count() {
        let note = attitude(180.0, 40.0).chain().unwrap().card().explanation.notes[0].clone();
        assert!(note.contains("from azimuth 220.0°") && note.contains("anticlockwise"), "{note}");
        let note = attitude(0.0, 123.0).chain().unwrap().card().explanation.notes[0].clone();
        assert!(note.contains("from azimuth 123.0°"), "{note}");
    }

    #[test]
    fn inclination_out_of_range_and_lines_too_close_are_refused() {
        let e = attitude(190.0, 0.0).chain().unwrap_err();
        assert_eq!(e.to_string(), "inclination is 190°, but it must be between 0° and 180°.");
        let e = LocalAxes::along_lines("cell", line(35.0, 12.0), line(215.0, -13.0)).unwrap_err().to_string();
        assert!(e.contains("stand at 1.0°") && e.contains("at least 5°"), "{e}");
    }
}
