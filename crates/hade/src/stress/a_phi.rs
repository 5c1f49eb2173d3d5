//! The faulting regime as a number, for any stress tensor.

use serde::{Deserialize, Serialize};

use super::invariants::trace_minors_det;
use super::invariants_card::factor;
use super::regime::{Steepest, nearest, steepest, ties};
use super::regime_strip::regime_strip;
use super::tensor::Tensor;
use super::{Regime, Stress};
use crate::card::{Card, Check, Explain, Explanation, Formula, Item, Method, Reference, Step};
use crate::error::Result;
use crate::frames::Geographic;
use crate::frames::vector::{V3, cross, norm};
use crate::units::{Angle, Pressure, Quantity, fixed};

/// The faulting regime of a stress with its shape ratio φ and Simpson's A_φ, which runs from 0
/// (radial extension) over 1 (between normal and strike-slip) and 2 (between strike-slip and
/// reverse) to 3 (radial compression) without a step.
///
/// Where the axes tilt, the principal axis nearest to vertical stands for the vertical stress.
#[derive(Clone, Copy, Debug, PartialEq)]
#[non_exhaustive]
pub struct FaultingRegime {
    /// The regime. On a boundary, where the vertical stress equals a horizontal one, the one with
    /// the smaller A_φ; the number is the same for both.
    pub regime: Regime,
    /// φ = (S2 − S3) / (S1 − S3), 0 to 1. `None` where all three are equal.
    pub shape_ratio: Option<f64>,
    /// A_φ, 0 to 3. `None` where all three are equal.
    pub a_phi: Option<f64>,
    /// The angle of the principal axis nearest to vertical from the vertical. `None` where all three
    /// are equal.
    pub tilt: Option<Angle>,
    magnitudes: [Pressure; 3],
    stress: Stress<Geographic>,
}

/// What came out, in SI.
#[derive(Clone, Copy, Debug, PartialEq, Serialize, Deserialize)]
pub struct FaultingRegimeOutcome {
    regime: Regime,
    magnitudes: [Pressure; 3],
    shape_ratio: Option<f64>,
    a_phi: Option<f64>,
    tilt: Option<Angle>,
}

/// Above this tilt, in degrees, Anderson's names do not fit well.
const FITS: f64 = 20.0;

impl Stress<Geographic> {
    /// The faulting regime, the shape ratio φ and A_φ (Simpson 1997), with the tilt of the principal
    /// axis that stands for the vertical.
    pub fn a_phi(&self) -> FaultingRegime {
        FaultingRegime::of(*self)
    }
}

impl FaultingRegime {
    fn of(stress: Stress<Geographic>) -> Self {
        let e = stress.tensor().eigen();
        let upright = steepest(&e);
        let [s1, s2, s3] = e.values;
        let shape_ratio = upright.map(|_| (s2 - s3) / (s1 - s3));
        FaultingRegime {
            regime: Regime::of(upright),
            shape_ratio,
            a_phi: upright.zip(shape_ratio).map(|(u, phi)| {
                let n = u.index as f64;
                let sign = if u.index % 2 == 0 { 1.0 } else { -1.0 };
                (n + 0.5) + sign * (phi - 0.5)
            }),
            tilt: upright.map(|u| Angle::from_si(u.tilt)),
            magnitudes: e.values.map(Pressure::from_si),
            stress,
        }
    }

    /// R = (S1 − S2) / (S1 − S3) = 1 − φ, the ratio of Gephart and Forsyth (1984). `None` where all
    /// three are equal.
    pub fn gephart_forsyth_r(&self) -> Option<f64> {
        self.shape_ratio.map(|phi| 1.0 - phi)
    }

    fn notes(&self) -> Vec<String> {
        let Some(tilt) = self.tilt else {
            return vec!["All three principal stresses are equal: there is no regime, no φ and no A_φ.".to_owned()];
        };
        let mut notes = Vec::new();
        let boundary = match (ties(self.magnitudes.map(Quantity::si)), self.regime) {
            ([true, _], Regime::NormalFaulting) => Some("normal and strike-slip faulting"),
            ([_, true], Regime::StrikeSlip) => Some("strike-slip and reverse faulting"),
            _ => None,
        };
        if let Some(names) = boundary {
            notes.push(format!(
                "Two principal stresses are equal: the state is on the boundary of {names}, and A_φ is the same by either name."
            ));
        }
        if tilt.in_deg() > FITS {
            notes.push(format!(
                "The principal axis nearest to vertical is tilted by {tilt}, more than {FITS}°: the Andersonian names, and A_φ with them, do not fit this state well."
            ));
        }
        notes
    }
}

/// The axis of one magnitude from the cofactors of S − λ I: its rows lie in the plane across the
/// axis, so the longest cross product of two of them is along it.
fn axis_by_cofactors(tensor: Tensor, value: f64) -> V3 {
    let [a, b, c] = tensor.add(Tensor([-value, -value, -value, 0.0, 0.0, 0.0])).rows();
    let longest = |x: V3, y: V3| if norm(y) > norm(x) { y } else { x };
    longest(longest(cross(a, b), cross(a, c)), cross(b, c))
}

/// The steepest axis by cofactors.
fn steepest_by_cofactors(tensor: Tensor, values: [f64; 3]) -> Option<Steepest> {
    let tilt = |i: usize| {
        let axis = axis_by_cofactors(tensor, values[i]);
        axis[0].hypot(axis[1]).atan2(axis[2].abs())
    };
    let own = |index: usize| Steepest { index, tilt: tilt(index), tied: false };
    let plane =
        |index: usize, across: usize| Steepest { index, tilt: std::f64::consts::FRAC_PI_2 - tilt(across), tied: true };
    let found = match ties(values) {
        [true, true] => return None,
        [true, false] => vec![plane(0, 2), own(2)],
        [false, true] => vec![own(0), plane(1, 0)],
        [false, false] => vec![own(0), own(1), own(2)],
    };
    nearest(found)
}

impl Explain for FaultingRegime {
    const KIND: &'static str = "faulting-regime";
    type Inputs = Stress<Geographic>;
    type Outcome = FaultingRegimeOutcome;

    fn compute(inputs: Stress<Geographic>) -> Result<Self> {
        Ok(FaultingRegime::of(inputs))
    }
    fn inputs(&self) -> Stress<Geographic> {
        self.stress
    }
    fn outcome(&self) -> FaultingRegimeOutcome {
        FaultingRegimeOutcome {
            regime: self.regime,
            magnitudes: self.magnitudes,
            shape_ratio: self.shape_ratio,
            a_phi: self.a_phi,
            tilt: self.tilt,
        }
    }

    /// The magnitudes by the invariants of S; φ from S2 as what the other two leave of the trace;
    /// A_φ piece by piece: φ, 2 − φ, 2 + φ; the tilt from the cofactors of S − S_k I.
    fn check(inputs: &Stress<Geographic>, outcome: &FaultingRegimeOutcome) -> Vec<Check> {
        let tensor = inputs.tensor();
        let largest = tensor.largest().max(1.0) * 1e-6;
        let [i1, i2, i3] = trace_minors_det(&tensor.scale(1e-6).rows());
        let [a, b, c] = outcome.magnitudes.map(Pressure::in_mpa);
        let mut checks = vec![
            Check::compare("sum of the magnitudes against the trace of S", &[a + b + c], &[i1], largest * 1e-11, "MPa"),
            Check::compare(
                "sum of their products two by two against the second invariant of S",
                &[a * b + b * c + c * a],
                &[i2],
                largest * largest * 1e-11,
                "MPa²",
            ),
            Check::compare(
                "their product against the determinant of S",
                &[a * b * c],
                &[i3],
                largest.powi(3) * 1e-11,
                "MPa³",
            ),
        ];
        let other = steepest_by_cofactors(tensor, outcome.magnitudes.map(Quantity::si));
        let given = [outcome.shape_ratio.is_some(), outcome.a_phi.is_some(), outcome.tilt.is_some()];
        checks.push(Check::compare(
            "φ, A_φ and the tilt stand unless all three magnitudes are equal",
            &given.map(|there| if there { 1.0 } else { 0.0 }),
            &[if other.is_some() { 1.0 } else { 0.0 }; 3],
            0.0,
            "",
        ));
        let number = |regime: Regime| match regime {
            Regime::NormalFaulting => 0.0,
            Regime::StrikeSlip => 1.0,
            Regime::ReverseFaulting => 2.0,
            Regime::Isotropic => 3.0,
        };
        checks.push(Check::compare(
            "number of the regime (0 normal, 1 strike-slip, 2 reverse, 3 none) by the cofactors of S − S_k I",
            &[number(outcome.regime)],
            &[number(Regime::of(other))],
            0.0,
            "",
        ));
        if let (Some(phi), Some(a_phi), Some(tilt), Some(other)) =
            (outcome.shape_ratio, outcome.a_phi, outcome.tilt, other)
        {
            let left = i1 - a - c;
            let noise = 1e-9 + 1e-13 * largest / (a - c);
            checks.push(Check::compare("φ with S_2 = I_1 − S_1 − S_3", &[phi], &[(left - c) / (a - c)], noise, ""));
            let pieces = match outcome.regime {
                Regime::NormalFaulting => phi,
                Regime::StrikeSlip => 2.0 - phi,
                _ => 2.0 + phi,
            };
            checks.push(Check::compare("A_φ piece by piece: φ, 2 − φ or 2 + φ", &[a_phi], &[pieces], 1e-12, ""));
            // An axis is as good as the gap to its neighbours allows.
            let gap = match ties([a, b, c]) {
                [true, _] => b - c,
                [_, true] => a - b,
                _ => (a - b).min(b - c),
            };
            checks.push(Check::compare(
                "tilt of the axis nearest to vertical by the cofactors of S − S_k I",
                &[tilt.in_deg()],
                &[other.tilt.to_degrees()],
                1e-8 + 1e-12 * largest / gap,
                "°",
            ));
        }
        checks
    }

    fn explain(&self) -> Explanation {
        let [s1, s2, s3] = self.magnitudes.map(|m| factor(m.in_mpa()));
        let mut results: Vec<Item> = self
            .magnitudes
            .iter()
            .zip(1..)
            .map(|(m, n)| Item::computed(&format!("S_{n}"), format!("principal stress {n}"), *m))
            .collect();
        let mut steps = vec![
            Step::matrix("S", &self.stress.rows_in_mpa(), 4, "MPa", "north, east, down"),
            Step::worked(format!("principal stresses S_1 = {s1}, S_2 = {s2}, S_3 = {s3} MPa")),
        ];
        let mut headline = self.regime.to_string();
        if let (Some(phi), Some(a_phi), Some(tilt)) = (self.shape_ratio, self.a_phi, self.tilt) {
            let n = match self.regime {
                Regime::NormalFaulting => 0,
                Regime::StrikeSlip => 1,
                _ => 2,
            };
            let ratio =
                |symbol: &str, name: &str, value: f64| Item::new(symbol, name, "ratio", vec![value], fixed(value, 3));
            results.push(ratio("φ", "shape ratio of the stress", phi));
            results.push(ratio("A_φ", "faulting regime as a number, 0 to 3", a_phi));
            results.push(Item::computed("δ", "tilt of the principal axis nearest to vertical", tilt));
            headline = format!("{headline}, A_φ {}, tilt {tilt}", fixed(a_phi, 2));
            steps.push(Step::worked(format!(
                "S_{} is nearest to vertical, {} from it: {}, n = {n}",
                n + 1,
                tilt,
                self.regime
            )));
            steps.push(Step::worked(format!("φ = ({s2} − {s3}) / ({s1} − {s3}) = {}", fixed(phi, 4))));
            let sign = if n == 1 { "−" } else { "+" };
            steps.push(Step::worked(format!(
                "A_φ = ({n} + 0.5) {sign} ({} − 0.5) = {}",
                fixed(phi, 4),
                fixed(a_phi, 4)
            )));
            steps.push(Step::words(format!(
                "The ratio R = (S_1 − S_2) / (S_1 − S_3) of Gephart and Forsyth is 1 − φ = {}.",
                fixed(1.0 - phi, 4)
            )));
        }
        Explanation {
            title: format!("Faulting regime{}", self.stress.of_name()),
            headline,
            inputs: vec![self.stress.item("S", "stress in north, east, down")],
            results,
            method: Method {
                words: "The principal axis nearest to vertical stands for the vertical stress: n is 0 when it is S_1 (normal faulting), 1 when it is S_2 (strike-slip), 2 when it is S_3 (reverse).".to_owned(),
                formulas: vec![
                    Formula::new("phi = (S_2 - S_3) / (S_1 - S_3)", "φ = (S_2 − S_3) / (S_1 − S_3)"),
                    Formula::new(
                        "A_phi = (n + 1/2) + (-1)^n (phi - 1/2)",
                        "A_φ = (n + ½) + (−1)ⁿ (φ − ½)",
                    ),
                ],
                references: vec![
                    Reference::new("Simpson, R.W. (1997) Quantifying Anderson's fault types, J. Geophys. Res. 102 (B8), 17909–17919 (cited from memory)"),
                    Reference::new("Anderson, E.M. (1951) The Dynamics of Faulting, 2nd ed., Oliver & Boyd (cited from memory)"),
                    Reference::new("Angelier, J. (1979) Determination of the mean principal directions of stresses for a given fault population, Tectonophysics 56, T17–T26 (φ; cited from memory)"),
                ],
                assumptions: vec!["Anderson's regimes assume that a principal axis is vertical; the tilt says how far this is from true.".to_owned()],
                ..Method::default()
            },
            steps,
            figures: self.a_phi.map(regime_strip).into_iter().collect(),
            notes: self.notes(),
            topics: vec!["stress".to_owned()],
        }
    }

    fn upstream(&self) -> Vec<Card> {
        let mut cards = self.stress.upstream();
        cards.extend(self.stress.stated());
        cards
    }
}

#[cfg(test)]
mod tests {
    use crate::prelude::*;

    fn from(sv: f64, sh_max: f64, sh_min: f64) -> Stress {
        Stress::from_horizontals(Horizontals {
            sv: sv.mpa(),
            sh_max: sh_max.mpa(),
            sh_min: sh_min.mpa(),
            sh_max_azimuth: Azimuth::from_true_north(35.deg()),
        })
        .unwrap()
    }

    #[test]
    fn runs_from_nought_to_three_without_a_step() {
        let a_phi = |sv, big, small| from(sv, big, small).a_phi().a_phi.unwrap();
        // Sv falls through the range from above SHmax to below Shmin.
        let states =
            [(60.0, 30.0, 30.0), (60.0, 55.0, 30.0), (55.0, 55.0, 30.0), (40.0, 55.0, 30.0), (30.0, 55.0, 30.0)];
        let got = states.map(|(v, big, small)| a_phi(v, big, small));
        let want = [0.0, 25.0 / 30.0, 1.0, 1.6, 2.0];
        assert!(got.iter().zip(want).all(|(g, w)| (g - w).abs() < 1e-12), "{got:?}");
        assert!((a_phi(20.0, 50.0, 50.0) - 3.0).abs() < 1e-12);
        let near = [a_phi(55.0 + 1e-6, 55.0, 30.0), a_phi(55.0 - 1e-6, 55.0, 30.0)];
        assert!(near.iter().all(|a| (a - 1.0).abs() < 1e-7), "{near:?}");
    }

    #[test]
    fn a_tilted_state_is_named_with_a_warning() {
        let line = |t: f64, p: f64| Line { trend: Azimuth::from_true_north(t.deg()), plunge: p.deg() };
        let lines = [line(20.0, 35.0), line(110.0, 0.0), line(200.0, 55.0)];
        let s = Stress::from_principals([(60.mpa(), lines[0]), (50.mpa(), lines[1]), (25.mpa(), lines[2])]).unwrap();
        let r = s.a_phi();
        assert_eq!((r.regime, r.regime), (Regime::ReverseFaulting, s.regime()));
        assert!((r.tilt.unwrap().in_deg() - 35.0).abs() < 1e-10);
        let card = r.card();
        assert!(card.passed(), "{:#?}", card.checks);
        assert!(card.explanation.notes[0].contains("do not fit this state well"), "{:?}", card.explanation.notes);
        assert!(from(60.0, 55.0, 40.0).a_phi().card().explanation.notes.is_empty());
    }

    #[test]
    fn equal_stresses_have_no_regime_and_boundaries_say_so() {
        let none = from(40.0, 40.0, 40.0).a_phi();
        assert_eq!((none.regime, none.shape_ratio, none.a_phi, none.tilt), (Regime::Isotropic, None, None, None));
        assert!(none.card().passed());
        for (s, words) in
            [(from(55.0, 55.0, 40.0), "normal and strike-slip"), (from(40.0, 55.0, 40.0), "strike-slip and reverse")]
        {
            let card = s.a_phi().card();
            assert!(card.passed(), "{:#?}", card.checks);
            assert!(card.explanation.notes[0].contains(words));
        }
    }
}
