//! The limits of a wall together.

use serde::{Deserialize, Serialize};

use super::breakout::outside;
use super::limit::{Limit, LimitKind};
use super::shear::{LeastBad, Window};
use super::stress_at::bearing_check;
use super::tension::{Parting, parting};
use super::wall::{Wall, WallInputs};
use super::width::AtWidth;
use super::{direction, method, second_route::ByVectors};
use crate::card::{
    Axis, Card, Check, Column, Explain, Explanation, Figure, Item, Layer, Mark, Reference, Role, Step, Table,
};
use crate::error::Result;
use crate::units::{Angle, Pressure, Quantity, as_typed, fixed, require_between};

/// The pressures that limit a wall. None of them is a recommendation: see
/// [`RecommendedRange`](super::RecommendedRange).
#[derive(Clone, Copy, Debug, PartialEq)]
#[non_exhaustive]
pub struct Limits {
    /// The lowest pressure at which the wall does not fail in shear, or fails in arcs no wider than
    /// the allowed width.
    pub lower_shear: Limit,
    /// The highest pressure at which nothing of the wall fails in shear.
    pub upper_shear: Limit,
    /// Where the wall parts.
    pub initiation: Limit,
    /// Where a wall that is parted already opens.
    pub reopening: Limit,
    /// The least far-field stress S3.
    pub least_stress: Limit,
    /// The pore pressure of the formation.
    pub pore_pressure: Limit,
    wall: Wall,
    width: Angle,
}

/// The inputs of limits.
#[derive(Clone, Copy, Debug, PartialEq, Serialize, Deserialize)]
pub struct LimitsInputs {
    wall: WallInputs,
    width: Angle,
}

/// What came out.
#[derive(Clone, Copy, Debug, PartialEq, Serialize, Deserialize)]
pub struct LimitsOutcome {
    lower_shear: Limit,
    upper_shear: Limit,
    initiation: Limit,
    reopening: Limit,
    least_stress: Limit,
    pore_pressure: Limit,
}

impl Wall {
    /// The limits with no shear failure anywhere. All are exact in the tool face and not clamped.
    pub fn limits(&self) -> Limits {
        self.limits_within(Angle::default())
    }

    /// The limits when arcs up to a width are allowed to fail (per lobe; there are two). The upper
    /// shear limit allows nothing to fail.
    ///
    /// # Errors
    /// When the width is outside 0–180°.
    pub fn limits_at_width(&self, width: Angle) -> Result<Limits> {
        require_between("allowed width of a failing arc", width, Angle::deg(0.0), Angle::deg(180.0))?;
        Ok(self.limits_within(width))
    }

    /// The lower shear limit with nothing allowed to fail, by itself: for loops over many walls.
    /// Nothing is allocated. `None` when no pressure is safe.
    pub fn lower_shear_limit(&self) -> Option<Pressure> {
        match self.shear.window() {
            Window::Open { lower, .. } => Some(Pressure::from_si(lower.value)),
            Window::Closed { .. } => None,
        }
    }

    fn limits_within(&self, width: Angle) -> Limits {
        let window = self.shear.window();
        let none_safe = |kind, own_side| Limit::none_safe(self, kind, self.shear.least_bad(), own_side);
        let (lower, upper) = match window {
            Window::Open { lower, upper } => (
                Limit::reached(self, LimitKind::LowerShear, lower.value, lower.phi, lower.flat),
                Limit::reached(self, LimitKind::UpperShear, upper.value, upper.phi, upper.flat),
            ),
            Window::Closed { crossed } => (
                none_safe(LimitKind::LowerShear, crossed.map(|(lower, _)| lower)),
                none_safe(LimitKind::UpperShear, crossed.map(|(_, upper)| upper)),
            ),
        };
        let lower_shear = if width.si() > 0.0 {
            match self.shear.lower_at_width(width.si()) {
                AtWidth::At(pressure) => self.lower_with_arc(pressure),
                AtWidth::Never => none_safe(LimitKind::LowerShear, None),
            }
        } else {
            lower
        };
        let part = |kind, tensile: f64| match parting(&self.shear.kirsch, self.shear.pore, tensile) {
            Parting::At(peak) => Limit::reached(self, kind, peak.value, peak.phi, peak.flat),
            Parting::Always { least_bad, beyond, phi, flat, alone } => {
                Limit::none_safe(self, kind, LeastBad { pressure: least_bad, excess: beyond, phi, flat }, alone)
            }
        };
        let [.., s3] = self.inputs.stress.tensor().eigen().values;
        Limits {
            lower_shear,
            upper_shear: upper,
            initiation: part(LimitKind::Initiation, self.inputs.rock.tensile_strength.si()),
            reopening: part(LimitKind::Reopening, 0.0),
            least_stress: Limit::plain(LimitKind::LeastStress, Pressure::from_si(s3)),
            pore_pressure: Limit::plain(LimitKind::PorePressure, self.inputs.pore),
            wall: *self,
            width,
        }
    }

    /// The lower limit at a width: its place is the middle of the widest arc.
    fn lower_with_arc(&self, pressure: f64) -> Limit {
        let arc = self.arcs_outcome(Pressure::from_si(pressure));
        let widest = arc.widest();
        let phi = widest.map_or_else(|| self.shear.worst(pressure).phi, |arc| 2.0 * arc.centre.si());
        let flat = widest.is_none_or(|arc| arc.whole_wall);
        Limit::reached(self, LimitKind::LowerShear, pressure, phi, flat)
    }
}

impl Limits {
    /// The allowed width of a failing arc.
    pub fn width(&self) -> Angle {
        self.width
    }

    /// All of them, in the order they are printed.
    pub fn all(&self) -> [Limit; 6] {
        [self.lower_shear, self.upper_shear, self.initiation, self.reopening, self.least_stress, self.pore_pressure]
    }
}

impl Explain for Limits {
    const KIND: &'static str = "wall-limits";
    /// The search for an allowed width, and the tool face of a hill, rest on iterations.
    const REPLAY_TOLERANCE: f64 = 1e-8;
    type Inputs = LimitsInputs;
    type Outcome = LimitsOutcome;

    fn compute(inputs: LimitsInputs) -> Result<Self> {
        Wall::new(inputs.wall)?.limits_at_width(inputs.width)
    }
    fn inputs(&self) -> LimitsInputs {
        LimitsInputs { wall: self.wall.inputs, width: self.width }
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
        let Some(route) = ByVectors::new(&inputs.wall) else { return Vec::new() };
        let tensile = inputs.wall.rock.tensile_strength.si();
        let width = inputs.width.si();
        let mut checks = Vec::new();
        if width > 0.0 && outcome.lower_shear.pressure().is_some() {
            checks.extend(check_width(&route, &outcome.lower_shear, width));
        } else {
            checks.extend(check_shear(&route, &outcome.lower_shear));
        }
        checks.extend(check_shear(&route, &outcome.upper_shear));
        checks.extend(check_parting(&route, &outcome.initiation, tensile));
        checks.extend(check_parting(&route, &outcome.reopening, 0.0));
        let unit = route.size() * 1e-6;
        let [.., s3] = route.far().values_by_invariants();
        let number = |limit: &Limit| limit.pressure().map_or(f64::NAN, Pressure::in_mpa);
        checks.push(Check::compare(
            "least stress against the least root of the characteristic equation of S (trigonometric solution)",
            &[number(&outcome.least_stress)],
            &[s3 * 1e-6],
            unit * 1e-7,
            "MPa",
        ));
        checks.push(Check::compare(
            "pore pressure as stated",
            &[number(&outcome.pore_pressure)],
            &[inputs.wall.pore.in_mpa()],
            0.0,
            "MPa",
        ));
        checks
    }

    fn explain(&self) -> Explanation {
        let mut inputs = self.wall.items();
        inputs.push(Item::typed("w", "allowed width of a failing arc, per lobe", self.width).chosen());
        let mut method = method::with_strength(
            &self.wall,
            "The lowest and highest pressure at which the shear criterion is met nowhere on the wall (or, for the lower, in arcs no wider than allowed), in closed form at each tool face and then exact round the hole; and the lowest at which the least effective principal stress in the wall reaches −T₀.",
        );
        method.formulas.push(crate::card::Formula::new(
            "(sigma_theta - P_p + T_0)(sigma_(z w) - P_p + T_0) = tau_(theta z)^2",
            "parting: (σθ − P_p + T₀)(σzw − P_p + T₀) = τθz²",
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
            topics: ["wall", "limits", "breakout", "elastic"].map(str::to_owned).to_vec(),
        }
    }

    fn upstream(&self) -> Vec<Card> {
        self.wall.upstream()
    }
}

/// "32.59 MPa" or "no safe pressure".
pub(super) fn shown(limit: &Limit) -> String {
    limit.pressure().map_or_else(|| "no safe pressure".to_owned(), |p| p.to_string())
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
        let mut notes = vec![direction::reference(self.wall.attitude)];
        if let (None, Some(least), Some(short)) =
            (self.lower_shear.pressure(), self.lower_shear.least_bad(), self.lower_shear.short_by())
        {
            notes.push(format!(
                "No pressure keeps the wall within its shear strength: the least bad is {least}, where the worst place still exceeds it by {short} in σ1'."
            ));
            if let (Some(lower), Some(upper)) = (self.lower_shear.own_side(), self.upper_shear.own_side()) {
                notes.push(format!(
                    "Nothing closes in above {lower}, and nothing is pushed out below {upper}: the two have crossed."
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
                    "The {} stands in tension (σ3' < 0): the shear criterion is used beyond its range there, and rock spalls or parts first.",
                    limit.kind().words()
                ));
            }
            if limit.pressure().is_some_and(|p| p < self.wall.inputs.pore) && limit.kind() == LimitKind::LowerShear {
                notes.push("The lower shear limit is below the pore pressure: the formation's fluid, not the rock, sets the lowest pressure; below P_p − T₀ the wall spalls.".to_owned());
            }
        }
        if let (Some(upper), Some(part)) = (self.upper_shear.pressure(), self.initiation.pressure()) {
            if upper < part {
                notes.push(
                    "As the pressure rises, the wall fails in shear before it parts: the upper shear limit is below initiation."
                        .to_owned(),
                );
            }
        }
        notes.push("Limits are not clamped and carry no margin; a range to work in is a card of its own.".to_owned());
        notes
    }

    fn steps(&self) -> Vec<Step> {
        let mut steps = self.wall.inputs.rock.strength.steps();
        steps.push(Step::matrix(
            "S'",
            &self.wall.inputs.stress.rows_in_mpa(),
            4,
            "MPa",
            "top of hole, right, along the hole",
        ));
        for limit in [self.lower_shear, self.upper_shear, self.initiation] {
            let Some(pressure) = limit.pressure().or(limit.least_bad()) else { continue };
            let theta = limit.toolface().unwrap_or_default();
            let place = limit
                .toolface()
                .map_or_else(|| "any tool face".to_owned(), |t| direction::words(self.wall.attitude, t));
            steps.push(Step::words(format!(
                "{} at {}, tool face {place}:",
                capitalised(limit.kind().words()),
                pressure
            )));
            steps.extend(method::worked(&self.wall, theta.si(), pressure.si()));
            if limit.kind() == LimitKind::Initiation {
                let [.., s3] = limit.effective().unwrap_or_default();
                steps.push(Step::worked(format!(
                    "least effective principal stress = {} MPa against −T₀ = −{} MPa",
                    fixed(s3.in_mpa(), 4),
                    as_typed(self.wall.inputs.rock.tensile_strength.in_mpa())
                )));
            } else {
                let all = method::effective(&self.wall, theta.si(), pressure.si());
                steps.push(method::worked_strength(&self.wall, all));
            }
        }
        steps.push(Step::Table { table: self.table() });
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
                Column::number("σ1'", "MPa"),
                Column::number("σ2'", "MPa"),
                Column::number("σ3'", "MPa"),
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
        let tensile = wall.inputs.rock.tensile_strength.si();
        let places = || (0..=120).map(|k| f64::from(k) * 3.0);
        let both = |f: &dyn Fn(f64, f64) -> f64| -> Vec<[f64; 2]> {
            places()
                .map(|degrees| {
                    let (s, c) = (2.0 * degrees.to_radians()).sin_cos();
                    [degrees, f(c, s) * 1e-6]
                })
                .filter(|[_, y]| y.is_finite())
                .collect()
        };
        let holds = |c: f64, s: f64| wall.shear.interval_at(c, s);
        let lower = both(&|c, s| holds(c, s).map_or(f64::NAN, |(lower, _)| lower));
        let upper = both(&|c, s| holds(c, s).map_or(f64::NAN, |(_, upper)| upper));
        let part = both(&|c, s| super::tension::at_place(&wall.shear.kirsch, wall.shear.pore, tensile, c, s));
        let (mut low, mut high) = (f64::INFINITY, f64::NEG_INFINITY);
        for [_, y] in lower.iter().chain(&upper) {
            low = low.min(*y);
            high = high.max(*y);
        }
        let least = self.least_stress.pressure().unwrap_or_default().in_mpa();
        let (low, high) = (low.min(least), high.max(least));
        let room = 0.06 * (high - low).max(1.0);
        let level = |y: f64| [[0.0, y], [360.0, y]];
        let mut layers = vec![
            Layer::line("holds above", Role::First, lower),
            Layer::line("holds below", Role::Second, upper),
            Layer::line("parts above", Role::Third, part),
            Layer::line("S_3", Role::Quiet, level(least)),
            Layer::line("P_p", Role::Quiet, level(self.wall.inputs.pore.in_mpa())),
        ];
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

fn capitalised(words: &str) -> String {
    let mut letters = words.chars();
    letters.next().map_or_else(String::new, |first| first.to_uppercase().chain(letters).collect())
}

/// The place and the stresses of a limit at a pressure, by the second route.
fn check_place(route: &ByVectors, limit: &Limit, pressure: f64) -> Vec<Check> {
    let theta = limit.toolface().unwrap_or_default().si();
    let what = limit.kind().words();
    let unit = (route.size() + pressure.abs()) * 1e-6;
    let mut checks = Vec::new();
    if let Some(effective) = limit.effective() {
        checks.push(Check::compare(
            format!("{what}: σ1', σ2', σ3' there by eigenvalues of the whole tensor"),
            &effective.map(Pressure::in_mpa),
            &route.effective(theta, pressure).map(|v| v * 1e-6),
            unit * 1e-9,
            "MPa",
        ));
    }
    if limit.toolface().is_some() {
        checks.push(Check::holds(format!("{what}: tool face within 0–180°"), outside(theta), 0.0, "rad"));
    }
    if let Some(bearing) = limit.bearing() {
        let mut check = bearing_check(route.direction(theta), bearing);
        check.what = format!("{what}: {}", check.what);
        checks.push(check);
    }
    checks
}

/// A shear limit: the criterion is just met at its place, exceeded nowhere at it, and exceeded there
/// just beyond it; or, where no pressure is safe, the worst excess is as stated and grows both ways.
fn check_shear(route: &ByVectors, limit: &Limit) -> Vec<Check> {
    let what = limit.kind().words();
    let size = route.size();
    let unit = size * 1e-6;
    let theta = limit.toolface().unwrap_or_default().si();
    let nudge = 1e-6 * size;
    if let Some(pressure) = limit.pressure().map(Quantity::si) {
        let beyond = if limit.kind() == LimitKind::UpperShear { nudge } else { -nudge };
        let mut checks = vec![
            Check::compare(
                format!("{what}: σ1' − q σ3' − UCS is zero at its tool face"),
                &[route.excess(theta, pressure) * 1e-6],
                &[0.0],
                unit * 1e-9,
                "MPa",
            ),
            Check::holds(
                format!("{what}: the criterion is exceeded nowhere just inside it"),
                route.worst(pressure - beyond) * 1e-6,
                unit * 1e-9,
                "MPa",
            ),
            Check::holds(
                format!("{what}: the criterion is exceeded just outside it"),
                -route.worst(pressure + beyond) * 1e-6,
                0.0,
                "MPa",
            ),
        ];
        checks.extend(check_place(route, limit, pressure));
        return checks;
    }
    let (Some(least), Some(short)) = (limit.least_bad().map(Quantity::si), limit.short_by()) else {
        return vec![Check::holds(format!("{what}: a least bad pressure is given"), f64::NAN, 0.0, "MPa")];
    };
    let excess = |p: f64| route.worst(p) * 1e-6;
    let beside = excess(least - 100.0 * nudge).min(excess(least + 100.0 * nudge));
    let mut checks = vec![
        Check::compare(
            format!("{what}: worst excess at the least bad pressure, looking all round"),
            &[short.in_mpa()],
            &[excess(least)],
            unit * 1e-8,
            "MPa",
        ),
        Check::compare(
            format!("{what}: excess at the tool face of the worst place"),
            &[short.in_mpa()],
            &[route.excess(theta, least) * 1e-6],
            unit * 1e-8,
            "MPa",
        ),
        Check::holds(
            format!("{what}: the worst excess is no smaller at pressures beside the least bad one"),
            excess(least) - beside,
            unit * 1e-9,
            "MPa",
        ),
        Check::holds(format!("{what}: the wall fails at the least bad pressure"), -short.in_mpa(), 0.0, "MPa"),
    ];
    if let Some(own) = limit.own_side().map(Quantity::si) {
        // Places that fail there fail by the other side: more (or less) pressure makes them worse.
        let sense = if limit.kind() == LimitKind::UpperShear { -1.0 } else { 1.0 };
        let [inside, outside] = [sense, -sense].map(|side| route.worst_of_side(own + side * nudge, -sense) * 1e-6);
        checks.push(Check::holds(
            format!("{what}: just inside it by itself nothing fails by that side"),
            inside,
            unit * 1e-9,
            "MPa",
        ));
        checks.push(Check::holds(format!("{what}: just outside it something does"), -outside, 0.0, "MPa"));
    }
    checks.extend(check_place(route, limit, least));
    checks
}

/// A lower limit at a width: just above it the widest arc is within the width, just below it is not.
fn check_width(route: &ByVectors, limit: &Limit, width: f64) -> Vec<Check> {
    let what = limit.kind().words();
    let Some(pressure) = limit.pressure().map(Quantity::si) else { return Vec::new() };
    let nudge = 1e-6 * route.size();
    let over = |p: f64| (route.widest(p) - width).clamp(-10.0, 10.0);
    let mut checks = vec![
        Check::holds(
            format!("{what}: the widest arc just above it is within the allowed width, looking all round"),
            over(pressure + nudge),
            1e-9,
            "rad",
        ),
        Check::holds(
            format!("{what}: the widest arc just below it is beyond the allowed width"),
            if over(pressure - nudge) > 0.0 { 0.0 } else { 1.0 },
            0.0,
            "rad",
        ),
    ];
    checks.extend(check_place(route, limit, pressure));
    checks
}

/// A parting limit: the least effective principal stress is −T₀ at its place and nowhere less; or,
/// where no pressure is safe, it is beyond −T₀ as stated and more so at pressures beside.
fn check_parting(route: &ByVectors, limit: &Limit, tensile: f64) -> Vec<Check> {
    let what = limit.kind().words();
    let unit = route.size() * 1e-6;
    let theta = limit.toolface().unwrap_or_default().si();
    if let Some(pressure) = limit.pressure().map(Quantity::si) {
        let unit = unit + pressure.abs() * 1e-6;
        let mut checks = vec![
            Check::compare(
                format!("{what}: least effective principal stress at its tool face, by eigenvalues"),
                &[route.effective(theta, pressure)[2] * 1e-6],
                &[-tensile * 1e-6],
                unit * 1e-9,
                "MPa",
            ),
            Check::compare(
                format!("{what}: the least of it round the hole"),
                &[route.least_round(pressure) * 1e-6],
                &[-tensile * 1e-6],
                unit * 1e-8,
                "MPa",
            ),
        ];
        checks.extend(check_place(route, limit, pressure));
        return checks;
    }
    let (Some(least), Some(short)) = (limit.least_bad().map(Quantity::si), limit.short_by()) else {
        return vec![Check::holds(format!("{what}: a least bad pressure is given"), f64::NAN, 0.0, "MPa")];
    };
    let nudge = 1e-4 * route.size();
    let beyond = |p: f64| (-tensile - route.least_round(p)) * 1e-6;
    let beside = beyond(least - nudge).min(beyond(least + nudge));
    let [.., there] = route.effective(theta, least);
    let mut checks = vec![
        Check::compare(
            format!("{what}: least effective principal stress beyond −T₀ at the least bad pressure, looking all round"),
            &[short.in_mpa()],
            &[beyond(least)],
            unit * 1e-8,
            "MPa",
        ),
        Check::compare(
            format!("{what}: the same at its tool face"),
            &[short.in_mpa()],
            &[(-tensile - there) * 1e-6],
            unit * 1e-8,
            "MPa",
        ),
        Check::holds(
            format!("{what}: no less beyond at pressures beside it"),
            beyond(least) - beside,
            unit * 1e-9,
            "MPa",
        ),
    ];
    if let Some(own) = limit.own_side().map(Quantity::si) {
        checks.push(Check::compare(
            format!("{what}: by itself, least effective principal stress within the wall, looking all round"),
            &[route.least_in_wall_round(own) * 1e-6],
            &[-tensile * 1e-6],
            (unit + own.abs() * 1e-6) * 1e-8,
            "MPa",
        ));
    }
    checks.extend(check_place(route, limit, least));
    checks
}
