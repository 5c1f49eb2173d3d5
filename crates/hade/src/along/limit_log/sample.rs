//! Where a log looks: at a step, and on both sides of every contact.

use super::choices::LogChoices;
use crate::along::ground::GroundInHole;
use crate::error::{Error, Result};
use crate::interrupt;
use crate::units::{Length, Quantity, require_between, with_typed_unit};
use crate::well::{Place, Survey};

/// A depth of the log, and the layer that is looked at there.
pub(super) type Look = (Place, usize);

/// Every look from the beginning of a log to its end. A contact is looked at twice, in the layer above
/// and in the one below.
pub(super) fn looks(ground: &GroundInHole<'_>, survey: &Survey, choices: &LogChoices) -> Result<Vec<Look>> {
    let (first, last) = (survey.first_md(), survey.last_md());
    require_between("beginning of the log, measured depth", choices.from, first, last)?;
    require_between("end of the log, measured depth", choices.to, first, last)?;
    let mut places = Vec::new();
    for md in at_step(choices) {
        interrupt::check();
        let here = survey.place(Length::m(md))?;
        if let Some(above) = places.last().copied() {
            for contact in ground.contacts(survey, &above, &here)? {
                places.push(survey.place(Length::m(contact))?);
            }
        }
        places.push(here);
    }
    // The layer of a stretch is that of its middle.
    let mut layers = Vec::with_capacity(places.len());
    for pair in places.windows(2) {
        let [above, below] = pair else { continue };
        layers.push(ground.layer_at(&survey.place(Length::m(0.5 * (above.md + below.md)))?)?);
    }
    let (Some(first), Some(last)) = (layers.first().copied(), layers.last().copied()) else { return Ok(Vec::new()) };
    let before = std::iter::once(first).chain(layers.iter().copied());
    let after = layers.iter().copied().chain(std::iter::once(last));
    let mut looks = Vec::with_capacity(places.len());
    for ((place, before), after) in places.iter().zip(before).zip(after) {
        looks.push((*place, before));
        if before != after {
            looks.push((*place, after));
        }
    }
    Ok(looks)
}

/// Measured depths at whole steps between the two ends, and these.
fn at_step(choices: &LogChoices) -> Vec<f64> {
    let (from, to, step) = (choices.from.si(), choices.to.si(), choices.step.si());
    let mut depths = vec![from];
    let mut count = (from / step).floor() + 1.0;
    while count * step < to - 1e-6 * step {
        if count * step > from + 1e-6 * step {
            depths.push(count * step);
        }
        count += 1.0;
    }
    depths.push(to);
    depths
}

/// The longest stretch of a hole that the ground says anything of, from the first such depth, and a
/// round step that makes some hundreds of depths of it.
pub(super) fn whole(ground: &GroundInHole<'_>, survey: &Survey) -> Result<[Length; 3]> {
    let (first, last) = (survey.first_md(), survey.last_md());
    let length = (last - first).si();
    let round = [0.5, 1.0, 2.0, 5.0, 10.0, 20.0, 50.0, 100.0];
    let step = round.into_iter().find(|step| length / step <= 1000.0).unwrap_or(length / 1000.0);
    let count = (length / step).floor() as usize;
    let covered = |k: usize| {
        let md = if k > count { last } else { Length::m(first.si() + k as f64 * step) };
        survey.place(md).ok().filter(|place| ground.covers(place)).map(|_| md)
    };
    let from = (0..=count).find_map(covered);
    let to = (0..=count + 1).rev().find_map(covered);
    match (from, to) {
        (Some(from), Some(to)) if from < to => Ok([from, to, Length::m(step)]),
        _ => Err(Error::out_of_range(
            "the hole",
            format!("surveyed from MD {} to {}", with_typed_unit(first), with_typed_unit(last)),
            "within what layers and profiles say somewhere; check their depths and the level these count from",
        )),
    }
}
