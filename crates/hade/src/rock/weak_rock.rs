//! Rock with one plane of weakness (Jaeger 1960): it slips on the plane or breaks across it, whichever
//! comes first.

use serde::{Deserialize, Serialize};

use super::account::{mpa, number};
use super::{Strength, weak_rock_check};
use crate::card::{
    Axis, Check, Explain, Explanation, Figure, Formula, Item, Layer, Mark, Method, Reference, Role, Step,
};
use crate::error::{Error, Result};
use crate::units::{Angle, Pressure, Quantity, fixed, require_between, require_not_negative, with_typed_unit};

/// The strength of a plane of weakness in shear: τ = cw + σn' tan φw.
#[derive(Clone, Copy, Debug, PartialEq, Serialize, Deserialize)]
pub struct PlaneStrength {
    /// The cohesion cw, zero or more.
    pub cohesion: Pressure,
    /// The friction angle φw, 0° or more, below 90°.
    pub friction_angle: Angle,
}

impl PlaneStrength {
    /// Itself, or the error that says what no plane has.
    pub(crate) fn checked(self) -> Result<Self> {
        require_not_negative("cohesion of the plane of weakness", self.cohesion)?;
        if !(self.friction_angle.si() >= 0.0 && self.friction_angle.in_deg() < 90.0) {
            return Err(Error::out_of_range(
                "friction angle of the plane of weakness",
                with_typed_unit(self.friction_angle),
                "at least 0° and below 90°",
            ));
        }
        Ok(self)
    }

    /// The numbers as they were typed.
    pub(crate) fn items(self) -> Vec<Item> {
        vec![
            Item::typed("c_w", "cohesion of the plane of weakness", self.cohesion),
            Item::typed("φ_w", "friction angle of the plane of weakness", self.friction_angle),
        ]
    }
}

/// The strength of rock with a plane of weakness, under σ1' at an angle to the plane's normal and equal
/// stresses σ2' = σ3' across it.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct WeakRock {
    inputs: WeakRockInputs,
    outcome: WeakRockOutcome,
}

/// The inputs.
#[derive(Clone, Copy, Debug, PartialEq, Serialize, Deserialize)]
pub struct WeakRockInputs {
    /// The strength of the rock between such planes.
    pub intact: Strength,
    /// The strength of the plane.
    pub plane: PlaneStrength,
    /// The effective confinement σ2' = σ3'.
    pub sigma_3: Pressure,
    /// The angle β from σ1 to the plane's NORMAL, 0–90° (the dip of the plane when σ1 is vertical).
    pub beta: Angle,
}

/// How rock with a plane of weakness fails.
#[derive(Clone, Copy, Debug, PartialEq, Eq, Serialize, Deserialize)]
#[serde(rename_all = "snake_case")]
pub enum WeakRockMode {
    /// It slips on the plane.
    SlipsOnPlane,
    /// It breaks across the plane, as if there were none.
    BreaksIntact,
}

/// What came out; angles are β.
#[derive(Clone, Copy, Debug, PartialEq, Serialize, Deserialize)]
pub struct WeakRockOutcome {
    pub(super) intact: Pressure,
    pub(super) weak: Option<Pressure>,
    pub(super) strength: Pressure,
    pub(super) mode: WeakRockMode,
    pub(super) weakest: Pressure,
    pub(super) weakest_beta: Angle,
    pub(super) governs: Option<[Angle; 2]>,
}

/// Below this cosine of β the plane holds σ1 in itself and cannot slip.
const IN_THE_PLANE: f64 = 1e-12;

/// σ1' at which the plane slips: σ3' + (cw cos φw + σ3' sin φw) / (cos β sin(β − φw)), which is Jaeger's
/// σ3' + 2 (cw + σ3' tan φw) / ((1 − tan φw cot β) sin 2β). `None` for β ≤ φw and 90°.
pub(super) fn slips_at(plane: PlaneStrength, s3: f64, beta: f64) -> Option<f64> {
    let (s, c) = plane.friction_angle.si().sin_cos();
    let lever = beta.cos() * (beta - plane.friction_angle.si()).sin();
    (beta.cos() > IN_THE_PLANE && lever > 0.0)
        .then(|| s3 + (plane.cohesion.si() * c + s3 * s) / lever)
        .filter(|s1| s1.is_finite())
}

impl WeakRock {
    /// The strength of the rock with its plane.
    ///
    /// # Errors
    /// When a strength is one that no rock has, β is not within 0–90°, or σ3' is beyond the tension that
    /// the plane or the rock bears by its criterion.
    pub fn under(inputs: WeakRockInputs) -> Result<Self> {
        WeakRock::compute(inputs)
    }

    /// σ1' at failure.
    pub fn strength(&self) -> Pressure {
        self.outcome.strength
    }
    /// How it fails.
    pub fn mode(&self) -> WeakRockMode {
        self.outcome.mode
    }
    /// σ1' at which the rock breaks across the plane.
    pub fn intact(&self) -> Pressure {
        self.outcome.intact
    }
    /// σ1' at which the plane slips, which may be more than the rock bears. `None` where it cannot slip
    /// at all: β no larger than the plane's friction angle, or 90°.
    pub fn weak(&self) -> Option<Pressure> {
        self.outcome.weak
    }
    /// The least σ1' at which a plane of any direction slips, and its β, 45° + φw / 2.
    pub fn weakest(&self) -> (Pressure, Angle) {
        (self.outcome.weakest, self.outcome.weakest_beta)
    }
    /// The range of β in which the plane governs; `None` when the rock breaks first at every β.
    pub fn governs(&self) -> Option<[Angle; 2]> {
        self.outcome.governs
    }
}

impl Explain for WeakRock {
    const KIND: &'static str = "weak-plane-strength";
    type Inputs = WeakRockInputs;
    type Outcome = WeakRockOutcome;

    fn compute(inputs: WeakRockInputs) -> Result<Self> {
        let WeakRockInputs { intact, plane, sigma_3, beta } = inputs;
        let (rock, plane) = (intact.checked()?, plane.checked()?);
        let s3 = sigma_3.finite("effective confinement σ3'")?.si();
        require_between("angle β from σ1 to the normal of the plane", beta, Angle::deg(0.0), Angle::deg(90.0))?;
        let (s, c) = plane.friction_angle.si().sin_cos();
        let held = plane.cohesion.si() * c + s3 * s;
        let beyond = |what: &str| {
            Error::not_physical(
                format!("The effective confinement σ3' {}", with_typed_unit(sigma_3)),
                format!("it is more tension than {what} bears, so that no σ1' holds; check σ3' and the strength."),
            )
        };
        if held < 0.0 {
            return Err(beyond("the plane of weakness"));
        }
        let Some(breaks) = rock.in_compression(s3) else { return Err(beyond("the intact rock")) };
        let weak = slips_at(plane, s3, beta.si());
        let slips = weak.filter(|w| *w < breaks);
        // The plane governs where cos β sin(β − φw) ≥ held / (σ1' − σ3'), with σ1' of the intact rock.
        let governs = (breaks > s3).then(|| 2.0 * held / (breaks - s3) + s).filter(|x| *x < 1.0).map(|x| {
            let (phi, turn) = (plane.friction_angle.si(), x.asin());
            [phi + turn, phi + std::f64::consts::PI - turn].map(|a| Angle::from_si(0.5 * a))
        });
        let outcome = WeakRockOutcome {
            intact: Pressure::from_si(breaks),
            weak: weak.map(Pressure::from_si),
            strength: Pressure::from_si(slips.unwrap_or(breaks)),
            mode: if slips.is_some() { WeakRockMode::SlipsOnPlane } else { WeakRockMode::BreaksIntact },
            weakest: Pressure::from_si(s3 + 2.0 * held * (1.0 + s) / (c * c)),
            weakest_beta: Angle::from_si(std::f64::consts::FRAC_PI_4 + 0.5 * plane.friction_angle.si()),
            governs,
        };
        Ok(WeakRock { inputs, outcome })
    }
    fn inputs(&self) -> WeakRockInputs {
        self.inputs
    }
    fn outcome(&self) -> WeakRockOutcome {
        self.outcome
    }

    fn check(inputs: &WeakRockInputs, outcome: &WeakRockOutcome) -> Vec<Check> {
        weak_rock_check::checks(inputs, outcome)
    }

    fn explain(&self) -> Explanation {
        let WeakRockInputs { intact, plane, sigma_3, beta } = self.inputs;
        let o = self.outcome;
        let how = match o.mode {
            WeakRockMode::SlipsOnPlane => "it slips on the plane",
            WeakRockMode::BreaksIntact => "it breaks across the plane",
        };
        let mut inputs = intact.items();
        inputs.extend(plane.items());
        inputs.push(Item::typed("σ'_3", "effective confinement, σ'_2 = σ'_3", sigma_3));
        inputs.push(Item::typed("β", "angle from σ_1 to the normal of the plane", beta));
        let mut results = vec![
            Item::computed("σ'_1", "σ'_1 at failure", o.strength),
            Item::computed("σ'_1i", "σ'_1 at which the rock breaks across the plane", o.intact),
        ];
        results.extend(o.weak.map(|weak| Item::computed("σ'_1w", "σ'_1 at which the plane slips", weak)));
        results.push(Item::computed("σ'_1min", "σ'_1 at which the worst plane slips", o.weakest));
        results.push(Item::computed("β_min", "β of the worst plane", o.weakest_beta));
        if let Some([from, to]) = o.governs {
            results.push(Item::computed("β_1", "least β at which the plane governs", from));
            results.push(Item::computed("β_2", "largest β at which the plane governs", to));
        }
        let mut notes: Vec<String> = intact.warning().into_iter().map(str::to_owned).collect();
        if o.weak.is_none() {
            notes.push(
                "At this β the plane cannot slip, however large σ'_1: β is no larger than the plane's friction angle, or σ_1 lies in the plane."
                    .to_owned(),
            );
        }
        if sigma_3.si() < 0.0 {
            notes.push(
                "σ'_3 is tension: the straight lines of both strengths only go on; rock and plane part earlier."
                    .to_owned(),
            );
        }
        let mut formulas = vec![
            Formula::new(
                "sigma'_(1 upright(w)) = sigma'_3 + (2 (c_upright(w) + sigma'_3 tan phi_upright(w))) / ((1 - tan phi_upright(w) cot beta) sin 2 beta)",
                "σ'_1w = σ'_3 + 2 (c_w + σ'_3 tan φ_w) / ((1 − tan φ_w cot β) sin 2β), φ_w < β < 90°",
            ),
            Formula::new("sigma'_1 = min(sigma'_(1 upright(w)), sigma'_(1 upright(i)))", "σ'_1 = min(σ'_1w, σ'_1i)"),
            Formula::new("beta_upright(min) = 45 degree + phi_upright(w) / 2", "β_min = 45° + φ_w / 2"),
        ];
        formulas.extend(intact.formulas());
        let mut references = vec![Reference::new(
            "Jaeger, J.C. (1960) Shear failure of anisotropic rocks, Geol. Mag. 97, 65–72 (cited from memory)",
        )];
        references.extend(intact.references());
        let mut assumptions = vec![
            "One set of parallel planes of one strength; σ_1 is at the angle β to their normal, and σ'_2 = σ'_3."
                .to_owned(),
            "β is counted from the NORMAL of the plane; the angle to the plane itself is 90° − β.".to_owned(),
        ];
        assumptions.extend(intact.assumptions());
        Explanation {
            title: format!(
                "Strength with a plane of weakness at β = {}, σ'_3 = {}",
                with_typed_unit(beta), with_typed_unit(sigma_3)
            ),
            headline: format!("σ'_1 at failure {}: {how}", o.strength),
            inputs,
            results,
            method: Method {
                words: "σ'_1 is raised until the shear stress on the plane meets its strength, or the rock between the planes breaks, whichever comes first.".to_owned(),
                formulas,
                symbols: intact.symbols(),
                references,
                assumptions,
            },
            steps: self.steps(),
            figures: vec![self.figure()],
            notes,
            topics: vec!["strength".to_owned(), "plane".to_owned()],
        }
    }
}

impl WeakRock {
    fn steps(&self) -> Vec<Step> {
        let WeakRockInputs { intact, plane, sigma_3, beta } = self.inputs;
        let o = self.outcome;
        let s3 = mpa(sigma_3.si());
        let (tan, c) = (number(plane.friction_angle.si().tan()), mpa(plane.cohesion.si()));
        let mut steps = intact.steps();
        steps.push(Step::words(format!(
            "Intact rock at σ'_2 = σ'_3: σ'_1i = {} MPa; there its margin is zero but for rounding:",
            mpa(o.intact.si())
        )));
        steps.extend(intact.worked([o.intact.si(), sigma_3.si(), sigma_3.si()]));
        match o.weak {
            Some(weak) => steps.push(Step::worked(format!(
                "σ'_1w = {s3} + 2 · ({c} + {s3} · {tan}) / ((1 − {tan} · {}) · {}) = {} MPa",
                number(beta.si().tan().recip()),
                number((2.0 * beta.si()).sin()),
                mpa(weak.si())
            ))),
            None => steps.push(Step::words(format!(
                "β = {} is not between φ_w = {} and 90°: the plane cannot slip.",
                with_typed_unit(beta),
                with_typed_unit(plane.friction_angle)
            ))),
        }
        steps.push(Step::worked(format!("σ'_1 = {} MPa", mpa(o.strength.si()))));
        steps.push(Step::worked(format!(
            "β_min = 45° + {} / 2 = {}°, where the plane slips at {} MPa",
            with_typed_unit(plane.friction_angle),
            fixed(o.weakest_beta.in_deg(), 3),
            mpa(o.weakest.si())
        )));
        steps
    }

    /// Strength against β.
    fn figure(&self) -> Figure {
        let WeakRockInputs { plane, sigma_3, beta, .. } = self.inputs;
        let o = self.outcome;
        let intact = o.intact.in_mpa();
        let top = 1.25 * intact.max(o.weakest.in_mpa()).max(1e-6);
        let bottom = sigma_3.in_mpa().min(0.0);
        let slips = |degrees: f64| slips_at(plane, sigma_3.si(), degrees.to_radians()).map(|s| [degrees, s * 1e-6]);
        let curve: Vec<[f64; 2]> =
            (0..=360).filter_map(|i| slips(0.25 * f64::from(i))).filter(|p| p[1] <= top).collect();
        let mut layers = vec![Layer::line("rock breaks", Role::First, [[0.0, intact], [90.0, intact]])];
        let mut alt =
            format!("σ'_1 at failure against β from 0 to 90°: the rock breaks at {} MPa at every β", fixed(intact, 2));
        match o.governs {
            Some([from, to]) => {
                layers.push(Layer::ColumnBand {
                    label: String::new(),
                    role: Role::Failing,
                    from: from.in_deg(),
                    to: to.in_deg(),
                });
                alt.push_str(&format!(
                    "; between {} and {} the plane slips first, at {} MPa at the worst, β = {}.",
                    from,
                    to,
                    fixed(o.weakest.in_mpa(), 2),
                    o.weakest_beta
                ));
            }
            None => alt.push_str(", before any plane slips."),
        }
        layers.push(Layer::line("plane slips", Role::Limit, curve));
        layers.push(Layer::Points {
            label: format!("{} MPa", fixed(o.strength.in_mpa(), 2)),
            role: if o.mode == WeakRockMode::SlipsOnPlane { Role::Failing } else { Role::First },
            mark: Mark::Dot,
            points: vec![[beta.in_deg(), o.strength.in_mpa()]],
        });
        Figure {
            caption: "The stress σ'_1 at failure against the angle β from σ_1 to the normal of the plane; in the shaded range the plane governs.".to_owned(),
            alt,
            x: Axis::new("β, from σ_1 to the normal (°)", 0.0, 90.0).ticks_every(30.0),
            y: Axis::new("σ'_1 (MPa)", bottom, top),
            equal_scale: false,
            layers,
        }
    }
}
