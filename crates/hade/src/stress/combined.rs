//! A stress made of others: sums, multiples, weighted means.

use std::sync::atomic::{AtomicUsize, Ordering};

use serde::{Deserialize, Deserializer, Serialize, Serializer};

use super::Stress;
use super::made::Made;
use super::tensor::Tensor;
use crate::card::{Card, Check, Explain, Explanation, Formula, Item, Method, Reference, Step};
use crate::error::{Error, Result};
use crate::frames::Geographic;
use crate::units::{as_typed, fixed};

/// The stresses that another is made of, each with its factor. Copying it is free; a program keeps
/// the parts of its first stresses, and those made after 100 000 parts remember none.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Parts(&'static [(f64, Stress<Geographic>)]);

/// So many parts a program keeps.
pub const MOST_KEPT: usize = 100_000;
/// So many parts, and parts of parts, a sheet is given.
const MOST_SHOWN: usize = 60;
static KEPT: AtomicUsize = AtomicUsize::new(0);

impl Parts {
    fn keep(parts: &[(f64, Stress<Geographic>)]) -> Option<Self> {
        let before = KEPT.fetch_add(parts.len(), Ordering::Relaxed);
        (before < MOST_KEPT).then(|| Parts(Box::leak(parts.to_vec().into_boxed_slice())))
    }

    fn tensor(self) -> Tensor {
        sum(self.0)
    }

    /// Whether the factors make a mean: none negative, together one.
    fn is_mean(self) -> bool {
        self.0.len() > 1
            && self.0.iter().all(|(k, _)| *k >= 0.0)
            && (self.0.iter().map(|(k, _)| k).sum::<f64>() - 1.0).abs() < 1e-9
    }
}

fn sum(parts: &[(f64, Stress<Geographic>)]) -> Tensor {
    parts.iter().fold(Tensor([0.0; 6]), |total, (k, s)| total.add(s.tensor.scale(*k)))
}

/// In a record each part is its factor and its tensor; how a part was made has a card of its own.
impl Serialize for Parts {
    fn serialize<S: Serializer>(&self, s: S) -> std::result::Result<S::Ok, S::Error> {
        let written: Vec<_> = self.0.iter().map(|(k, stress)| (k, stress.tensor, stress.label)).collect();
        written.serialize(s)
    }
}
impl<'de> Deserialize<'de> for Parts {
    fn deserialize<D: Deserializer<'de>>(d: D) -> std::result::Result<Self, D::Error> {
        let written = Vec::<(f64, Tensor, _)>::deserialize(d)?;
        if written.iter().any(|(k, tensor, _)| !k.is_finite() || !tensor.is_finite()) {
            return Err(serde::de::Error::custom("a part of a combined stress is not a finite number"));
        }
        let parts: Vec<_> = written
            .into_iter()
            .map(|(k, tensor, label)| (k, Stress::of(tensor, Made::Combined { parts: None }, None).with_label(label)))
            .collect();
        Parts::keep(&parts).ok_or_else(|| serde::de::Error::custom("too many combined stresses in one program"))
    }
}

impl Made {
    pub(super) fn combined(parts: &[(f64, Stress<Geographic>)]) -> Self {
        Made::Combined { parts: Parts::keep(parts) }
    }
}

impl Stress<Geographic> {
    /// The sum of stresses, each times its factor.
    ///
    /// # Errors
    /// When the list is empty or a factor is not a finite number.
    pub fn superpose(parts: &[(f64, Stress<Geographic>)]) -> Result<Self> {
        if parts.is_empty() {
            return Err(Error::not_physical(
                "A superposition of no stress",
                "give at least one stress with its factor.",
            ));
        }
        if let Some((k, _)) = parts.iter().find(|(k, _)| !k.is_finite()) {
            return Err(Error::out_of_range("factor of a superposed stress", k.to_string(), "a finite number"));
        }
        let total = sum(parts);
        total.finite("superposed stress")?;
        Ok(Stress::of(total, Made::combined(parts), None))
    }

    /// The mean of measured stresses, each with a weight; the weights are divided by their sum.
    /// Tensors are averaged by components in one frame, never by magnitudes and angles.
    ///
    /// # Errors
    /// When the list is empty, a weight is negative or not finite, or all weights are zero.
    pub fn weighted_mean(parts: &[(f64, Stress<Geographic>)]) -> Result<Self> {
        if let Some((k, _)) = parts.iter().find(|(k, _)| !(k.is_finite() && *k >= 0.0)) {
            return Err(Error::out_of_range(
                "weight of a stress in a mean",
                k.to_string(),
                "a finite number, 0 or more",
            ));
        }
        let total: f64 = parts.iter().map(|(k, _)| k).sum();
        if !total.is_finite() {
            return Err(Error::out_of_range("sum of the weights of a mean", total.to_string(), "a finite number"));
        }
        if total <= 0.0 {
            return Err(Error::not_physical(
                "A mean of stresses without weight",
                "give at least one stress a weight above 0.",
            ));
        }
        let parts: Vec<_> = parts.iter().map(|(k, s)| (k / total, *s)).collect();
        Stress::superpose(&parts)
    }
}

/// The stress that parts make, or the tensor itself where they were forgotten.
pub(super) fn compute(parts: Option<Parts>, combined: Option<Tensor>) -> Result<Stress<Geographic>> {
    match (parts, combined) {
        (Some(parts), _) => Ok(Stress::of(parts.tensor(), Made::Combined { parts: Some(parts) }, None)),
        (None, Some(tensor)) => Ok(Stress::of(tensor, Made::Combined { parts: None }, None)),
        (None, None) => {
            Err(Error::undeclared("A combined stress has no components", "add the stress again from its notebook."))
        }
    }
}

/// By tractions: on each of three planes askew to the axes, the traction of the sum is the sum of the
/// parts' tractions.
pub(super) fn checks(parts: Option<Parts>, got: Tensor) -> Vec<Check> {
    let mpa = |c: f64| c * 1e-6;
    // What nothing is known of cannot be checked, and a card without a check has not passed.
    let Some(parts) = parts else { return Vec::new() };
    let planes = [[0.6, 0.8, 0.0], [0.0, 0.6, 0.8], [0.8, 0.0, 0.6]];
    let ours = planes.map(|n| got.times(n).map(mpa));
    let theirs = planes.map(|n| {
        parts.0.iter().fold([0.0; 3], |t, (k, s)| {
            let own = s.tensor.times(n);
            [t[0] + mpa(k * own[0]), t[1] + mpa(k * own[1]), t[2] + mpa(k * own[2])]
        })
    });
    let largest = parts.0.iter().fold(1.0_f64, |m, (k, s)| m.max(k.abs() * s.tensor.largest()));
    vec![Check::compare(
        "tractions on three planes askew to the axes: of the sum against the sum of the parts'",
        ours.as_flattened(),
        theirs.as_flattened(),
        largest * 1e-12 * 1e-6,
        "MPa",
    )]
}

pub(super) fn explain(s: &Stress<Geographic>, parts: Option<Parts>) -> Explanation {
    let Some(parts) = parts else {
        return Explanation {
            title: format!("Stress tensor{} by combination", s.of_name()),
            inputs: vec![s.item("S", "combined stress")],
            notes: vec![
                "WARNING: how this stress was put together is not known any more, so nothing checks it; state it again."
                    .to_owned(),
            ],
            ..Explanation::default()
        };
    };
    let mean = parts.is_mean();
    let mut inputs = Vec::new();
    let mut steps = Vec::new();
    let mut terms = Vec::new();
    for ((k, part), n) in parts.0.iter().zip(letters()) {
        let of = part.of_name();
        inputs.push(part.item(&format!("S_{n}"), &format!("part {n}: stress{of} in north, east, down")));
        let what = if mean { "weight" } else { "factor" };
        inputs.push(
            Item::new(&format!("w_{n}"), format!("{what} of part {n}"), "factor", vec![*k], as_typed(rounded(*k)))
                .chosen(),
        );
        steps.push(Step::matrix(&format!("S_{n}"), &part.rows_in_mpa(), 4, "MPa", &format!("part {n}{of}")));
        terms.push(format!("{} · {}", as_typed(rounded(*k)), fixed(part.tensor.0[0] * 1e-6, 4)));
    }
    steps.push(Step::worked(format!("S_nn = {} = {} MPa", terms.join(" + "), fixed(s.tensor.0[0] * 1e-6, 4))));
    let mut notes = Vec::new();
    if mean {
        notes.push(scatter(s, parts));
    }
    let kind = if mean { "the weighted mean of its parts" } else { "the sum of its parts, each times its factor" };
    Explanation {
        title: format!("Stress tensor{} by {}", s.of_name(), if mean { "weighted mean" } else { "superposition" }),
        inputs,
        method: Method {
            words: format!("Component by component in one frame, the stress is {kind}."),
            formulas: vec![Formula::new("S = sum_k w_k S_k", "S = Σ w_k S_k")],
            references: vec![Reference::new(
                "Linearity of the stress tensor: any textbook of elasticity (common practice, no source)",
            )],
            assumptions: if mean {
                vec!["The parts are measurements of one and the same stress.".to_owned()]
            } else {
                vec!["The rock answers linearly, so that stresses add.".to_owned()]
            },
            ..Method::default()
        },
        steps,
        notes,
        topics: if mean { vec!["combined".to_owned()] } else { Vec::new() },
        ..Explanation::default()
    }
}

/// The names of parts: a, b, …, z, a2, b2, …, so that none is taken for a principal stress.
fn letters() -> impl Iterator<Item = String> {
    (1_u32..).flat_map(|round| {
        ('a'..='z').map(move |letter| if round == 1 { letter.to_string() } else { format!("{letter}{round}") })
    })
}

/// To six decimals.
fn rounded(k: f64) -> f64 {
    (k * 1e6).round() * 1e-6
}

/// How far the parts of a mean lie from it.
fn scatter(s: &Stress<Geographic>, parts: Parts) -> String {
    let (mut widest, mut which) = (0.0_f64, String::new());
    for ((_, part), n) in parts.0.iter().zip(letters()) {
        let gap = part.tensor.add(s.tensor.scale(-1.0)).largest();
        if gap > widest {
            (widest, which) = (gap, n);
        }
    }
    format!(
        "The parts scatter: the largest difference of a component from the mean is {} MPa, in part {which}.",
        fixed(widest * 1e-6, 2)
    )
}

/// The cards of the parts.
pub(super) fn upstream(parts: Option<Parts>) -> Vec<Card> {
    // A stress that was built up in a loop stands on long rows of sums: each part once, without recursion,
    // and no further down than anyone could read.
    let mut waiting: Vec<Parts> = parts.into_iter().collect();
    let mut seen: Vec<Parts> = Vec::new();
    let mut layers: Vec<Vec<Card>> = Vec::new();
    let mut own: Vec<Stress<Geographic>> = Vec::new();
    while let Some(parts) = waiting.pop() {
        if seen.contains(&parts) || own.len() >= MOST_SHOWN {
            continue;
        }
        seen.push(parts);
        // What is laid down last is read first.
        for (_, part) in parts.0.iter().rev() {
            let known = own.iter().any(|s| s.made == part.made && s.tensor == part.tensor && s.label == part.label);
            if known || own.len() >= MOST_SHOWN {
                continue;
            }
            own.push(*part);
            match part.made {
                Made::Combined { parts: Some(below) } => {
                    layers.push(vec![part.card()]);
                    waiting.push(below);
                }
                _ => layers.push(part.upstream_with_own()),
            }
        }
    }
    layers.into_iter().rev().flatten().collect()
}

#[cfg(test)]
mod tests {
    use crate::prelude::*;

    fn stress(nn: f64) -> Stress {
        let c = Components { nn: nn.mpa(), ee: 50.mpa(), dd: 60.mpa(), ne: 4.mpa(), nd: 1.mpa(), ed: (-2).mpa() };
        Stress::from_components(c).unwrap()
    }

    #[test]
    fn a_mean_says_how_its_parts_scatter_and_leads_back_to_them() {
        let (a, b) = (stress(40.0).named("overcoring in KC-2"), stress(44.0).named("hydraulic tests"));
        let mean = Stress::weighted_mean(&[(3.0, a), (1.0, b)]).unwrap();
        assert_eq!(mean.component(Axis::X, Axis::X), 41.mpa());
        let card = mean.card();
        assert!(card.passed());
        assert!(card.explanation.notes[0].contains("3.00 MPa, in part b"), "{:?}", card.explanation.notes);
        let titles: Vec<String> = mean.upstream().iter().map(|c| c.title().to_owned()).collect();
        assert_eq!(
            titles,
            [
                "Stress tensor of overcoring in KC-2 from six components",
                "Stress tensor of hydraulic tests from six components"
            ]
        );
    }

    /// A stress built up in a loop neither recurses nor brings a card for every round.
    #[test]
    fn a_long_row_of_sums_stays_readable() {
        let mut s = stress(40.0);
        for _ in 0..3000 {
            s = s + stress(1.0);
        }
        assert!(s.upstream().len() <= super::MOST_SHOWN);
        let mut doubled = stress(40.0);
        for _ in 0..16 {
            doubled = (doubled + doubled).scale(0.5);
        }
        assert!(doubled.upstream().len() <= super::MOST_SHOWN);
    }

    #[test]
    fn weights_that_are_none_are_refused() {
        assert!(Stress::weighted_mean(&[(0.0, stress(1.0))]).is_err());
        assert!(Stress::weighted_mean(&[(-1.0, stress(1.0)), (3.0, stress(1.0))]).is_err());
        assert!(Stress::weighted_mean(&[]).is_err());
        assert!(Stress::superpose(&[(f64::NAN, stress(1.0))]).is_err());
        assert!(Stress::superpose(&[(1e308, stress(1.0))]).is_err());
        assert!(Stress::weighted_mean(&[(1e308, stress(1.0)), (1e308, stress(1.0))]).is_err());
    }

    #[test]
    fn sums_and_multiples_remember_their_parts() {
        let s = stress(40.0) + stress(2.0).scale(0.5);
        assert_eq!(s.component(Axis::X, Axis::X), 41.mpa());
        assert!(s.card().passed());
        assert_eq!(s.upstream().len(), 3);
    }
}
