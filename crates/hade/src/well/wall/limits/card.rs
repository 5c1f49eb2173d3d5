//! The card of a wall's limits.

use super::limit::{Limit, LimitKind};
use super::limits::{Limits, LimitsInputs, LimitsOutcome};
use crate::card::{
    Axis, Card, Check, Column, Explain, Explanation, Figure, Item, Layer, Mark, Reference, Role, Step, Table,
};
use crate::error::Result;
use crate::units::{Pressure, Quantity, as_typed, fixed};
use crate::well::wall::tension::at_place;
use crate::well::wall::{Wall, direction, method};

impl Explain for Limits {
    const KIND: &'static str = "wall-limits";
    /// The search for an allowed width, and the tool face of a hill, rest on iterations.
    const REPLAY_TOLERANCE: f64 = 1e-8;
    type Inputs = LimitsInputs;
    type Outcome = LimitsOutcome;

    fn compute(inputs: LimitsInputs) -> Result<Self> {
        Wall::of(inputs.wall)?.limits_at_width(inputs.width)
    }
    fn inputs(&self) -> LimitsInputs {
        LimitsInputs { wall: self.wall.setup, width: self.width }
    }
    fn outcome(&self) -> LimitsOutcome {
        LimitsOutcome {
            lower_shear: self.lower_shear,
            upper_shear: self.upper_shear,
            initiation: self.initiation,
            reopening: self.reopening,
            least_stress: self.least_stress,
            pore_pressure: self.pore_pressure,
        }
    }

    fn check(inputs: &LimitsInputs, outcome: &LimitsOutcome) -> Vec<Check> {
        super::check::check(inputs, outcome)
    }

    fn explain(&self) -> Explanation {
        let mut inputs = self.wall.items();
        inputs.push(Item::typed("w", "allowed width of a failing arc, per lobe", self.width).chosen());
        let mut method = method::with_strength(
            &self.wall,
            "The lowest and highest pressure at which the shear criterion is met nowhere on the wall (or, for the lower, in arcs no wider than allowed), found at each tool face and then exactly round the hole; and the lowest at which the least effective principal stress in the wall reaches −T₀.",
        );
        method.formulas.push(crate::card::Formula::new(
            "(sigma_theta - P_p + T_0)(sigma_(z w) - P_p + T_0) = tau_(theta z)^2",
            "parting: (σ_θ − P_p + T₀)(σ_zw − P_p + T₀) = τ_θz²",
        ));
        method.references.push(Reference::new(
            "Zoback, M.D. (2007) Reservoir Geomechanics, Cambridge University Press, ch. 6, 8 and 10 (breakouts, tensile fractures at deviated holes, wellbore stability)",
        ));
        Explanation {
            title: if self.width.si() > 0.0 {
                format!(
                    "Limits of the wall of {}, arcs up to {}° allowed to fail",
                    self.wall.place(),
                    as_typed(self.width.in_deg())
                )
            } else {
                format!("Limits of the wall of {}", self.wall.place())
            },
            headline: self.headline(),
            inputs,
            results: self.results(),
            method,
            steps: self.steps(),
            figures: vec![self.figure()],
            notes: self.notes(),
            topics: self.wall.topics(&["wall", "limits", "breakout", "elastic"]),
        }
    }

    fn warnings(&self) -> Vec<String> {
        self.wall.setup.inputs.rock.doubts()
    }

    fn upstream(&self) -> Vec<Card> {
        self.wall.upstream()
    }
}

/// "32.59 MPa", "no safe pressure", or "no limit" where every pressure on that side is safe.
pub(crate) fn shown(limit: &Limit) -> String {
    let without = if limit.is_unbounded() { "no limit" } else { "no safe pressure" };
    limit.pressure().map_or_else(|| without.to_owned(), |p| p.to_string())
}

impl Limits {
    fn headline(&self) -> String {
        format!(
            "lower shear {}, upper shear {}, initiation {}, least stress {}",
            shown(&self.lower_shear),
            shown(&self.upper_shear),
            shown(&self.initiation),
            shown(&self.least_stress)
        )
    }

    fn results(&self) -> Vec<Item> {
        let symbols = ["p_ls", "p_us", "p_i", "p_o", "S_3"];
        let mut items = Vec::new();
        for (limit, symbol) in self.all().iter().zip(symbols) {
            if let Some(p) = limit.pressure() {
                items.push(Item::computed(symbol, limit.kind().words(), p));
            }
            if let (Some(p), "p_ls") = (limit.least_bad(), symbol) {
                items.push(Item::computed("p_lb", "least bad pressure in shear", p));
            }
        }
        items
    }

    fn notes(&self) -> Vec<String> {
        let mut notes = method::notes(&self.wall);
        if let (None, Some(least), Some(short)) =
            (self.lower_shear.pressure(), self.lower_shear.least_bad(), self.lower_shear.short_by())
        {
            notes.push(format!(
                "No pressure keeps the wall within its shear strength: the least bad is {least}, where the worst place still exceeds it by {short} ({} there).",
                self.wall.strength().margin_words()
            ));
            if let (Some(lower), Some(upper)) = (self.lower_shear.own_side(), self.upper_shear.own_side()) {
                notes.push(format!(
                    "Nothing closes in above {lower}, and nothing is pushed out below {upper}: the two have crossed."
                ));
            }
        }
        // Where the safe pressures are not one interval, the limits are the ends of the lowest.
        if !self.wall.shear.is_convex() {
            for span in self.wall.shear.spans().iter().skip(1) {
                notes.push(format!(
                    "The whole wall holds again {}: with {} the safe pressures need not be one interval. The limits are the ends of the lowest one, and between the two the wall fails.",
                    span.words(),
                    self.wall.strength().name()
                ));
            }
        }
        if let (None, Some(least), Some(short)) =
            (self.initiation.pressure(), self.initiation.least_bad(), self.initiation.short_by())
        {
            notes.push(format!(
                "No pressure keeps the wall from parting or spalling: the least bad is {least}, where the least effective principal stress is still beyond −T₀ by {short}."
            ));
        }
        for limit in self.all() {
            if limit.in_tension()
                && limit.pressure().is_some()
                && matches!(limit.kind(), LimitKind::LowerShear | LimitKind::UpperShear)
            {
                notes.push(format!(
                    "The {} stands in tension (σ'_3 < 0): the shear criterion is used beyond its range there, and rock spalls or parts first.",
                    limit.kind().words()
                ));
            }
            if limit.pressure().is_some_and(|p| p < self.wall.pore()) && limit.kind() == LimitKind::LowerShear {
                notes.push("The lower shear limit is below the pore pressure: the formation's fluid, not the rock, sets the lowest pressure; below P_p − T₀ the wall spalls.".to_owned());
            }
        }
        if let (Some(upper), Some(part)) = (self.upper_shear.pressure(), self.initiation.pressure())
            && upper < part
        {
            notes.push("As the pressure rises, the wall fails in shear before it parts: the upper shear limit is below initiation.".to_owned());
        }
        notes.push("Limits are not clamped and carry no margin; a range to work in is a card of its own.".to_owned());
        notes
    }

    fn steps(&self) -> Vec<Step> {
        let mut steps = self.worked_all(&[self.lower_shear, self.upper_shear, self.initiation]);
        steps.push(Step::Table { table: self.table() });
        steps
    }

    /// Some of these limits with the numbers put in.
    pub(crate) fn worked_all(&self, limits: &[Limit]) -> Vec<Step> {
        let mut steps = self.wall.strength().steps();
        steps.push(Step::matrix(
            "S'",
            &self.wall.setup.inputs.stress.rows_in_mpa(),
            4,
            "MPa",
            "top of hole, right, along the hole",
        ));
        for limit in limits {
            steps.extend(self.worked(limit));
        }
        steps
    }

    fn table(&self) -> Table {
        let cell = |p: Option<Pressure>| p.map_or_else(|| "–".to_owned(), |p| fixed(p.in_mpa(), 2));
        Table {
            caption: "Limits, with the place that sets each (it repeats at +180° of tool face) and the effective principal stresses there".to_owned(),
            columns: vec![
                Column::text("limit"),
                Column::number("pressure", "MPa"),
                Column::number("tool face", "°"),
                Column::number("bearing", "°"),
                Column::number("σ'_1", "MPa"),
                Column::number("σ'_2", "MPa"),
                Column::number("σ'_3", "MPa"),
                Column::text("what happens"),
            ],
            rows: self
                .all()
                .iter()
                .map(|limit| {
                    let s = limit.effective();
                    let at = |k: usize| s.and_then(|s| s.get(k).copied());
                    vec![
                        limit.kind().words().to_owned(),
                        limit.pressure().map_or_else(|| "none".to_owned(), |p| fixed(p.in_mpa(), 2)),
                        limit.toolface().map_or_else(|| "–".to_owned(), |t| fixed(t.in_deg(), 1)),
                        limit
                            .toolface()
                            .map_or_else(|| "–".to_owned(), |t| direction::bearing_cell(self.wall.attitude, t)),
                        cell(at(0)),
                        cell(at(1)),
                        cell(at(2)),
                        limit.words(),
                    ]
                })
                .collect(),
        }
    }

    /// Between which pressures each place of the wall holds.
    fn figure(&self) -> Figure {
        let wall = &self.wall;
        let tensile = wall.setup.inputs.rock.tensile_strength.si();
        let curve = |f: &dyn Fn(f64, f64) -> f64| {
            pieces((0..=120).map(|k| f64::from(k) * 3.0).map(|degrees| {
                let (s, c) = (2.0 * degrees.to_radians()).sin_cos();
                [degrees, f(c, s) * 1e-6]
            }))
        };
        let holds = |c: f64, s: f64| wall.shear.interval_at(c, s);
        let lower = curve(&|c, s| holds(c, s).map_or(f64::NAN, |(lower, _)| lower));
        let upper = curve(&|c, s| holds(c, s).map_or(f64::NAN, |(_, upper)| upper));
        let part = curve(&|c, s| at_place(wall.shear.effective_wall(), wall.shear.pore, tensile, c, s));
        let least = self.least_stress.pressure().unwrap_or_default().in_mpa();
        let (mut low, mut high) = (least, least);
        for [_, y] in lower.iter().chain(&upper).flatten() {
            low = low.min(*y);
            high = high.max(*y);
        }
        let room = 0.06 * (high - low).max(1.0);
        let level = |y: f64| [[0.0, y], [360.0, y]];
        let mut layers = Vec::new();
        for (label, role, curve) in [
            ("holds above", Role::First, lower),
            ("holds below", Role::Second, upper),
            ("parts above", Role::Third, part),
        ] {
            let last = curve.len();
            for (piece, k) in curve.into_iter().zip(1..) {
                layers.push(Layer::line(if k == last { label } else { "" }, role, piece));
            }
        }
        layers.push(Layer::line("S_3", Role::Quiet, level(least)));
        layers.push(Layer::line("P_p", Role::Quiet, level(self.wall.setup.inputs.pore.in_mpa())));
        for limit in [self.lower_shear, self.upper_shear, self.initiation] {
            if let (Some(p), Some(t)) = (limit.pressure(), limit.toolface()) {
                let (p, t) = (p.in_mpa(), t.in_deg());
                layers.push(Layer::Points {
                    label: String::new(),
                    role: Role::Limit,
                    mark: Mark::Dot,
                    points: vec![[t, p], [t + 180.0, p]],
                });
            }
        }
        Figure {
            caption: format!(
                "Pressures between which each place of the wall holds in shear, and above which it parts; dots mark the limits. {}",
                direction::reference(wall.attitude)
            ),
            alt: format!("Three curves of pressure over tool face, with the limits: {}.", self.headline()),
            x: Axis::new("tool face (°)", 0.0, 360.0).ticks_every(30.0),
            y: Axis::new("pressure in the hole (MPa)", low - room, high + room),
            equal_scale: false,
            layers,
        }
    }
}

pub(crate) fn capitalised(words: &str) -> String {
    let mut letters = words.chars();
    letters.next().map_or_else(String::new, |first| first.to_uppercase().chain(letters).collect())
}

/// A curve in pieces, broken where it is not a number.
fn pieces(points: impl Iterator<Item = [f64; 2]>) -> Vec<Vec<[f64; 2]>> {
    let mut pieces: Vec<Vec<[f64; 2]>> = Vec::new();
    let mut open = false;
    for point in points {
        let finite = point[1].is_finite();
        match pieces.last_mut() {
            Some(piece) if finite && open => piece.push(point),
            _ if finite => pieces.push(vec![point]),
            _ => {}
        }
        open = finite;
    }
    pieces
}
