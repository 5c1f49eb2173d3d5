//! The horizontal stresses that friction on faults allows beside a vertical stress.

use serde::{Deserialize, Serialize};

use super::friction::frictional_ratio;
use super::strength::require_friction;
use crate::card::{
    Axis, Check, Column, Explain, Explanation, Figure, Formula, Item, Layer, Mark, Method, Reference, Role, Step, Table,
};
use crate::error::{Error, Result};
use crate::units::{Pressure, Quantity, as_typed, fixed, with_typed_unit};

/// The bounds of S_hmin and S_Hmax by friction, for every regime: the frictional polygon.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct FrictionalBounds {
    inputs: BoundsInputs,
    outcome: BoundsOutcome,
}

/// The inputs: the vertical stress, which is taken as principal, the pore pressure, and the
/// coefficient of friction of the best oriented faults.
#[derive(Clone, Copy, Debug, PartialEq, Serialize, Deserialize)]
pub struct BoundsInputs {
    /// The vertical stress, total.
    pub sv: Pressure,
    /// The pore pressure.
    pub pore: Pressure,
    /// The coefficient of friction, greater than zero.
    pub friction: f64,
}

/// What came out: the ratio of effective principal stresses that friction allows, the least S_hmin
/// and the largest S_Hmax.
#[derive(Clone, Copy, Debug, PartialEq, Serialize, Deserialize)]
pub struct BoundsOutcome {
    ratio: f64,
    least_sh_min: Pressure,
    largest_sh_max: Pressure,
}

impl FrictionalBounds {
    /// The bounds beside a vertical stress.
    ///
    /// # Errors
    /// When the friction is not greater than zero, or the vertical stress does not exceed the pore
    /// pressure (then no effective ratio exists).
    pub fn at(inputs: BoundsInputs) -> Result<Self> {
        FrictionalBounds::compute(inputs)
    }

    /// The largest ratio of effective principal stresses, (√(μ² + 1) + μ)².
    pub fn ratio(&self) -> f64 {
        self.outcome.ratio
    }
    /// The least S_hmin that friction allows: normal faulting at its limit.
    pub fn least_sh_min(&self) -> Pressure {
        self.outcome.least_sh_min
    }
    /// The largest S_Hmax that friction allows: reverse faulting at its limit.
    pub fn largest_sh_max(&self) -> Pressure {
        self.outcome.largest_sh_max
    }

    /// The largest S_Hmax beside an S_hmin. `None` when friction does not allow that S_hmin at all.
    pub fn largest_sh_max_beside(&self, sh_min: Pressure) -> Option<Pressure> {
        let BoundsInputs { sv, pore, .. } = self.inputs;
        if !(sh_min >= self.outcome.least_sh_min && sh_min <= self.outcome.largest_sh_max) {
            return None;
        }
        Some(if sh_min < sv { pore + (sh_min - pore) * self.outcome.ratio } else { self.outcome.largest_sh_max })
    }

    /// Whether friction allows a pair of horizontal stresses.
    ///
    /// # Errors
    /// When S_Hmax is smaller than S_hmin, or a number is not finite.
    pub fn allow(&self, sh_max: Pressure, sh_min: Pressure) -> Result<bool> {
        sh_max.finite("larger horizontal stress S_Hmax")?;
        sh_min.finite("smaller horizontal stress S_hmin")?;
        if sh_max < sh_min {
            return Err(Error::not_physical(
                format!("S_Hmax {} is smaller than S_hmin {}", with_typed_unit(sh_max), with_typed_unit(sh_min)),
                "exchange the two.",
            ));
        }
        Ok(self.largest_sh_max_beside(sh_min).is_some_and(|most| sh_max <= most))
    }

    /// The corners of the polygon as (S_hmin, S_Hmax): both at their least, normal to strike-slip,
    /// strike-slip to reverse, both at their largest.
    pub fn corners(&self) -> [(Pressure, Pressure); 4] {
        let (low, sv, high) = (self.outcome.least_sh_min, self.inputs.sv, self.outcome.largest_sh_max);
        [(low, low), (low, sv), (sv, high), (high, high)]
    }
}

impl Explain for FrictionalBounds {
    const KIND: &'static str = "frictional-bounds";
    type Inputs = BoundsInputs;
    type Outcome = BoundsOutcome;

    fn compute(inputs: BoundsInputs) -> Result<Self> {
        let BoundsInputs { sv, pore, friction } = inputs;
        sv.finite("vertical stress S_v")?;
        pore.finite("pore pressure")?;
        let ratio = frictional_ratio(require_friction(friction)?)?;
        let effective = sv - pore;
        if effective.si() <= 0.0 {
            return Err(Error::not_physical(
                format!(
                    "The vertical stress {} does not exceed the pore pressure {}",
                    with_typed_unit(sv),
                    with_typed_unit(pore)
                ),
                "rock in the earth does not bear that; check both.",
            ));
        }
        let outcome =
            BoundsOutcome { ratio, least_sh_min: pore + effective / ratio, largest_sh_max: pore + effective * ratio };
        outcome.largest_sh_max.finite("largest S_Hmax")?;
        Ok(FrictionalBounds { inputs, outcome })
    }
    fn inputs(&self) -> BoundsInputs {
        self.inputs
    }
    fn outcome(&self) -> BoundsOutcome {
        self.outcome
    }

    /// At each bound the best oriented plane, at 45° − φ/2 to the largest stress, bears just the
    /// shear that friction holds; the ratio by the angle of friction.
    fn check(inputs: &BoundsInputs, outcome: &BoundsOutcome) -> Vec<Check> {
        let phi = inputs.friction.atan();
        let by_angle = (std::f64::consts::FRAC_PI_4 + 0.5 * phi).tan().powi(2);
        let sv = (inputs.sv - inputs.pore).si();
        let [low, high] = [outcome.least_sh_min, outcome.largest_sh_max].map(|s| (s - inputs.pore).si());
        let scale = inputs.sv.si().abs().max(inputs.pore.si().abs()).max(sv * by_angle);
        let mut checks = vec![Check::compare(
            "largest ratio against tan²(45° + φ/2), φ = arctan μ",
            &[outcome.ratio],
            &[by_angle],
            by_angle * 1e-12,
            "",
        )];
        for (what, s1, s3) in
            [("least S_hmin (normal faulting)", sv, low), ("largest S_Hmax (reverse faulting)", high, sv)]
        {
            // The two axes and the normal of the plane: n = (cos a, sin a), a = 45° + φ/2.
            let (sin, cos) = (std::f64::consts::FRAC_PI_4 + 0.5 * phi).sin_cos();
            let (normal, shear) = (s1 * cos * cos + s3 * sin * sin, (s1 - s3) * sin * cos);
            checks.push(Check::compare(
                format!("{what}: shear on the best oriented plane against μ times its effective normal stress"),
                &[shear * 1e-6],
                &[inputs.friction * normal * 1e-6],
                scale * (1.0 + inputs.friction) * 1e-12 * 1e-6,
                "MPa",
            ));
        }
        checks
    }

    fn explain(&self) -> Explanation {
        let BoundsInputs { sv, pore, friction } = self.inputs;
        let BoundsOutcome { ratio, least_sh_min, largest_sh_max } = self.outcome;
        let mpa = |p: Pressure| fixed(p.in_mpa(), 3);
        let (v, p, r) = (as_typed(sv.in_mpa()), as_typed(pore.in_mpa()), fixed(ratio, 4));
        Explanation {
            title: format!("Horizontal stresses that friction allows beside S_v {}", with_typed_unit(sv)),
            headline: format!("S_hmin at least {least_sh_min}, S_Hmax at most {largest_sh_max}"),
            inputs: vec![
                Item::typed("S_v", "vertical stress", sv),
                Item::typed("P_p", "pore pressure", pore),
                Item::typed("μ", "coefficient of friction of faults", friction),
            ],
            results: vec![
                Item::new("r_max", "largest ratio of effective principal stresses", "ratio", vec![ratio], fixed(ratio, 3)),
                Item::computed("S_hmin_least", "least S_hmin, at the limit of normal faulting", least_sh_min),
                Item::computed("S_Hmax_most", "largest S_Hmax, at the limit of reverse faulting", largest_sh_max),
            ],
            method: Method {
                words: "A crust full of faults cannot hold a larger ratio of effective principal stresses than the best oriented one bears without cohesion. With the vertical stress principal, that bounds the horizontal stresses in each regime.".to_owned(),
                formulas: vec![
                    Formula::new("r_upright(max) = (sqrt(mu^2 + 1) + mu)^2", "r_max = (√(μ² + 1) + μ)²"),
                    Formula::new(
                        "(S_upright(v) - P_upright(p)) / (S_upright(h min) - P_upright(p)) <= r_upright(max)",
                        "normal faulting, S_v ≥ S_Hmax ≥ S_hmin: (S_v − P_p) / (S_hmin − P_p) ≤ r_max",
                    ),
                    Formula::new(
                        "(S_upright(H max) - P_upright(p)) / (S_upright(h min) - P_upright(p)) <= r_upright(max)",
                        "strike-slip, S_Hmax ≥ S_v ≥ S_hmin: (S_Hmax − P_p) / (S_hmin − P_p) ≤ r_max",
                    ),
                    Formula::new(
                        "(S_upright(H max) - P_upright(p)) / (S_upright(v) - P_upright(p)) <= r_upright(max)",
                        "reverse faulting, S_Hmax ≥ S_hmin ≥ S_v: (S_Hmax − P_p) / (S_v − P_p) ≤ r_max",
                    ),
                ],
                references: vec![Reference::new(
                    "Zoback, M.D. (2007) Reservoir Geomechanics, Cambridge University Press, eq. 4.45–4.47, p. 133",
                )],
                assumptions: vec![
                    "The vertical is a principal direction.".to_owned(),
                    "Faults without cohesion exist in every orientation.".to_owned(),
                ],
                ..Method::default()
            },
            steps: vec![
                Step::worked(format!("r_max = (√({m}² + 1) + {m})² = {r}", m = as_typed(friction))),
                Step::worked(format!("least S_hmin = {p} + ({v} − {p}) / {r} = {} MPa", mpa(least_sh_min))),
                Step::worked(format!("largest S_Hmax = {p} + ({v} − {p}) · {r} = {} MPa", mpa(largest_sh_max))),
                Step::Table { table: self.table() },
            ],
            figures: vec![self.figure()],
            notes: vec![
                "A stress inside the bounds is possible, not likely; the bounds say nothing of where inside it lies.".to_owned(),
            ],
            topics: vec!["stress".to_owned(), "friction".to_owned()],
        }
    }
}

impl FrictionalBounds {
    /// The bounds regime by regime.
    fn table(&self) -> Table {
        let mpa = |p: Pressure| fixed(p.in_mpa(), 3);
        let (low, sv, high) = (mpa(self.outcome.least_sh_min), mpa(self.inputs.sv), mpa(self.outcome.largest_sh_max));
        let (p, r) = (as_typed(self.inputs.pore.in_mpa()), fixed(self.outcome.ratio, 4));
        let row = |regime: &str, min: String, max: String| vec![regime.to_owned(), min, max];
        Table {
            caption: "Bounds in each regime, MPa".to_owned(),
            columns: vec![Column::text("regime"), Column::text("S_hmin"), Column::text("S_Hmax")],
            rows: vec![
                row("normal faulting", format!("{low} to {sv}"), format!("S_hmin to {sv}")),
                row("strike-slip", format!("{low} to {sv}"), format!("{sv} to {p} + {r} · (S_hmin − {p})")),
                row("reverse faulting", format!("{sv} to {high}"), format!("S_hmin to {high}")),
            ],
        }
    }

    fn figure(&self) -> Figure {
        let [low, sv, high] =
            [self.outcome.least_sh_min, self.inputs.sv, self.outcome.largest_sh_max].map(Pressure::in_mpa);
        let pad = 0.08 * (high - low).max(0.01 * sv.abs());
        let (from, to) = (low - pad, high + pad);
        let words = |text: &str, x: f64, y: f64| Layer::Words { text: text.to_owned(), at: [x, y] };
        let outline = [[low, low], [low, sv], [sv, high], [high, high], [low, low]];
        Figure {
            caption: "Horizontal stresses that friction allows, inside the outline; the cross is where all three stresses are equal.".to_owned(),
            alt: format!(
                "A polygon over S_hmin and S_Hmax with corners ({l}, {l}), ({l}, {v}), ({v}, {h}) and ({h}, {h}) MPa, cut into normal faulting, strike-slip and reverse faulting.",
                l = fixed(low, 2), v = fixed(sv, 2), h = fixed(high, 2)
            ),
            x: Axis::new("S_hmin (MPa)", from, to),
            y: Axis::new("S_Hmax (MPa)", from, to),
            equal_scale: true,
            layers: vec![
                Layer::line("", Role::Quiet, [[low, sv], [sv, sv]]),
                Layer::line("", Role::Quiet, [[sv, sv], [sv, high]]),
                Layer::line("", Role::Limit, outline),
                Layer::Points { label: String::new(), role: Role::Quiet, mark: Mark::Cross, points: vec![[sv, sv]] },
                words("normal", low + 0.06 * (sv - low), low + 0.8 * (sv - low)),
                words("strike-slip", low + 0.3 * (sv - low), sv + 0.08 * (high - sv)),
                words("reverse", sv + 0.08 * (high - sv), sv + 0.75 * (high - sv)),
            ],
        }
    }
}
