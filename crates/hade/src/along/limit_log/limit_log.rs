//! The log itself.

use std::sync::Arc;

use rayon::prelude::*;
use serde::{Deserialize, Serialize};

use super::choices::LogChoices;
use super::friction::FrictionAlong;
use super::printed::printed;
use super::row::LogRow;
use super::sample::{Look, looks, whole};
use super::section::{HoleSection, MOST_SECTIONS, SectionRange};
use super::summary::{LogOutcome, Narrowest};
use crate::along::ground::{AtPlace, Ground, GroundInHole, GroundRecord};
use crate::error::{Error, Result};
use crate::faults::frictional_ratio;
use crate::interrupt;
use crate::units::{Angle, Length, Pressure, with_typed_unit};
use crate::well::{Survey, SurveyTableInputs};

/// The pressures that limit the wall along a hole: lower shear limit at an allowed width, upper shear
/// limit, initiation, least stress, pore pressure and overburden against depth, and the range
/// recommended at each. Both sides of a contact are rows of their own.
#[derive(Clone, Debug, PartialEq)]
pub struct LimitLog {
    pub(super) survey: Survey,
    pub(super) ground: Ground,
    pub(super) choices: LogChoices,
    pub(super) sections: Vec<HoleSection>,
    pub(super) friction: Option<f64>,
    /// Every depth with the place of its layer in the list.
    all: Vec<(LogRow, usize)>,
    /// Those that are printed.
    printed: Vec<(LogRow, usize)>,
    record: Arc<LogInputs>,
}

/// The inputs of a log as the record holds them: the survey, the ground reduced to what the printed
/// depths need, the choices, and these depths.
#[derive(Clone, Debug, PartialEq, Serialize, Deserialize)]
pub struct LogInputs {
    pub(super) survey: SurveyTableInputs,
    pub(super) ground: GroundRecord,
    pub(crate) choices: LogChoices,
    pub(super) sections: Vec<HoleSection>,
    /// The coefficient of friction that the stress is held against.
    pub(super) friction: Option<f64>,
    /// Measured depth and layer of each printed row.
    pub(super) printed: Vec<(Length, usize)>,
    pub(super) looked: usize,
}

impl LimitLog {
    /// The bare limits along the whole hole, as far as the ground is known: no failing arc is allowed, no
    /// margin is kept, and some hundreds of depths at a round step are looked at. State the choices with
    /// [`LimitLog::with_choices`].
    ///
    /// # Errors
    /// When the ground says nothing of any depth of the hole, a depth between lacks something, or the
    /// survey is not tied to the rotary table or has more than 2000 stations.
    pub fn along(survey: &Survey, ground: &Ground) -> Result<Self> {
        let [from, to, step] = whole(&GroundInHole::new(ground, survey)?, survey)?;
        let (none, width) = (Pressure::default(), Angle::default());
        let choices = LogChoices { from, to, step, allowed_width: width, margin_bottom: none, margin_top: none };
        LimitLog::with_choices(survey, ground, choices)
    }

    /// The limits and the recommended range along a stretch of the hole.
    ///
    /// # Errors
    /// When a choice is out of its range, the stretch lies outside the survey or what the ground says, or
    /// the survey is not tied to the rotary table or has more than 2000 stations.
    pub fn with_choices(survey: &Survey, ground: &Ground, choices: LogChoices) -> Result<Self> {
        choices.checked()?;
        // So that the record can hold it.
        survey.table()?;
        let in_hole = GroundInHole::new(ground, survey)?;
        let looks = looks(&in_hole, survey, &choices)?;
        let all = at_looks(&in_hole, &choices, &looks)?;
        let looked = all.len();
        LimitLog::build((survey, ground), choices, (Vec::new(), None), all, looked)
    }

    /// With the rows that are printed, and what the record needs of them. A log from a record holds only
    /// these, of more that were looked at.
    fn build(
        (survey, ground): (&Survey, &Ground),
        choices: LogChoices,
        (sections, friction): (Vec<HoleSection>, Option<f64>),
        all: Vec<(LogRow, usize)>,
        looked: usize,
    ) -> Result<Self> {
        let rows: Vec<LogRow> = all.iter().map(|(row, _)| *row).collect();
        let numbers = if looked > rows.len() { (0..rows.len()).collect() } else { printed(&rows, &sections, friction) };
        let printed: Vec<(LogRow, usize)> = numbers.iter().filter_map(|k| all.get(*k).copied()).collect();
        let place = |(row, layer): &(LogRow, usize)| Ok((survey.place(row.md)?, *layer));
        let looks = printed.iter().map(place).collect::<Result<Vec<Look>>>()?;
        let record = LogInputs {
            survey: survey.record(),
            ground: GroundInHole::new(ground, survey)?.record(&looks),
            choices,
            sections: sections.clone(),
            friction,
            printed: printed.iter().map(|(row, layer)| (row.md, *layer)).collect(),
            looked,
        };
        let (survey, ground, record) = (survey.clone(), ground.clone(), Arc::new(record));
        Ok(LimitLog { survey, ground, choices, sections, friction, all, printed, record })
    }

    /// With the sections of the hole, each from casing point to casing point, and the muds they are to be
    /// drilled with. Without it the whole log counts as one section.
    ///
    /// # Errors
    /// When there is none or more than 20, a section does not end below its beginning, overlaps the one
    /// before or lies outside the log, or a mud is out of its range.
    pub fn with_sections(&self, sections: &[HoleSection]) -> Result<Self> {
        if sections.is_empty() || sections.len() > MOST_SECTIONS {
            return Err(Error::out_of_range(
                "the number of sections",
                sections.len().to_string(),
                format!("between 1 and {MOST_SECTIONS}"),
            ));
        }
        let mut above = None;
        for section in sections {
            section.checked(above)?;
            if section.to <= self.choices.from || section.from >= self.choices.to {
                return Err(Error::not_physical(
                    format!("The section {}", section.name),
                    format!(
                        "it lies outside the log, which runs from MD {} to {}.",
                        with_typed_unit(self.choices.from),
                        with_typed_unit(self.choices.to)
                    ),
                ));
            }
            above = Some(section);
        }
        let mut all = self.all.clone();
        let looked = self.record.looked + self.look_at_ends(sections, &mut all)?;
        LimitLog::build((&self.survey, &self.ground), self.choices, (sections.to_vec(), self.friction), all, looked)
    }

    /// The same rows, their stress held against a coefficient of friction.
    pub(super) fn held_against(&self, friction: f64) -> Result<Self> {
        let stated = (self.sections.clone(), Some(friction));
        LimitLog::build((&self.survey, &self.ground), self.choices, stated, self.all.clone(), self.record.looked)
    }

    /// The ends of sections are rows too: how many were added.
    fn look_at_ends(&self, sections: &[HoleSection], all: &mut Vec<(LogRow, usize)>) -> Result<usize> {
        let in_hole = GroundInHole::new(&self.ground, &self.survey)?;
        let mut added = 0;
        for md in sections.iter().flat_map(|section| [section.from, section.to]) {
            if md < self.choices.from || md > self.choices.to || all.iter().any(|(row, _)| row.md == md) {
                continue;
            }
            let place = self.survey.place(md)?;
            let layer = in_hole.layer_at(&place)?;
            let row = LogRow::of(&in_hole.state(&place, layer)?, &self.choices)?;
            all.insert(all.partition_point(|(row, _)| row.md < md), (row, layer));
            added += 1;
        }
        Ok(added)
    }

    /// Every depth, from the top.
    pub fn rows(&self) -> Vec<LogRow> {
        self.all.iter().map(|(row, _)| *row).collect()
    }

    /// The choices it rests on.
    pub fn choices(&self) -> LogChoices {
        self.choices
    }

    /// Where the recommended range is narrowest; `None` when an end is missing at every depth.
    pub fn narrowest(&self) -> Option<Narrowest> {
        self.whole().narrowest
    }

    /// The stress held against friction; `None` without [`LimitLog::with_friction`].
    pub fn friction(&self) -> Option<FrictionAlong> {
        self.whole().friction
    }

    /// Where no pressure is recommended, by measured depth.
    pub fn empty(&self) -> Vec<[Length; 2]> {
        self.whole().empty
    }

    /// The mud weights that each section has in common; the whole log's, where no section was stated.
    pub fn section_ranges(&self) -> Vec<SectionRange> {
        self.whole().sections
    }

    /// The limits at any measured depth of the log, worked out there. At a contact it is what lies below.
    ///
    /// # Errors
    /// Outside the log, or where the ground says nothing.
    pub fn at(&self, md: Length) -> Result<LogRow> {
        LogRow::of(&self.state_at(md)?, &self.choices)
    }

    /// The ground at a measured depth of the log.
    pub(crate) fn state_at(&self, md: Length) -> Result<AtPlace> {
        crate::units::require_between("measured depth in the log", md, self.choices.from, self.choices.to)?;
        self.ground.at_place(&self.survey, md)
    }

    fn whole(&self) -> LogOutcome {
        LogOutcome::of(self.rows(), &self.sections, self.friction)
    }

    /// The same with a record whose ground says what there is at these depths too.
    pub(crate) fn with_looks_at(&self, mds: &[Length]) -> Result<Self> {
        let in_hole = GroundInHole::new(&self.ground, &self.survey)?;
        let mut looks = Vec::with_capacity(self.printed.len() + mds.len());
        for (row, layer) in &self.printed {
            looks.push((self.survey.place(row.md)?, *layer));
        }
        for md in mds {
            let place = self.survey.place(*md)?;
            looks.push((place, in_hole.layer_at(&place)?));
        }
        let record = LogInputs { ground: in_hole.record(&looks), ..(*self.record).clone() };
        Ok(LimitLog { record: Arc::new(record), ..self.clone() })
    }

    pub(crate) fn survey(&self) -> &Survey {
        &self.survey
    }

    pub(crate) fn ground(&self) -> &Ground {
        &self.ground
    }

    /// The sections as they were stated.
    pub(crate) fn sections(&self) -> &[HoleSection] {
        &self.sections
    }

    /// The rows that are printed, with their layers.
    pub(crate) fn printed(&self) -> &[(LogRow, usize)] {
        &self.printed
    }

    /// How many depths were looked at.
    pub(super) fn looked(&self) -> usize {
        self.record.looked
    }

    /// "KF-3", or "the hole".
    pub(crate) fn hole(&self) -> &'static str {
        self.survey.hole().map_or("the hole", |name| name.text())
    }

    pub(super) fn record(&self) -> &LogInputs {
        &self.record
    }

    pub(super) fn from_record(inputs: LogInputs) -> Result<Self> {
        let (survey, ground) = inputs.read()?;
        inputs.choices.checked()?;
        let look = |(md, layer): &(Length, usize)| Ok((survey.place(*md)?, *layer));
        let looks = inputs.printed.iter().map(look).collect::<Result<Vec<Look>>>()?;
        let all = at_looks(&GroundInHole::new(&ground, &survey)?, &inputs.choices, &looks)?;
        let mut above = None;
        for section in &inputs.sections {
            section.checked(above)?;
            above = Some(section);
        }
        inputs.friction.map(frictional_ratio).transpose()?;
        LimitLog::build((&survey, &ground), inputs.choices, (inputs.sections, inputs.friction), all, inputs.looked)
    }
}

/// The rows at these depths, shared out to the cores.
fn at_looks(ground: &GroundInHole<'_>, choices: &LogChoices, looks: &[Look]) -> Result<Vec<(LogRow, usize)>> {
    let row = |(place, layer): &Look| {
        interrupt::check();
        Ok((LogRow::of(&ground.state(place, *layer)?, choices)?, *layer))
    };
    looks.par_iter().with_min_len(8).map(row).collect()
}

impl LogInputs {
    /// How many depths the record holds.
    pub fn depths(&self) -> usize {
        self.printed.len()
    }

    /// Survey and ground.
    pub(crate) fn read(&self) -> Result<(Survey, Ground)> {
        Ok((Survey::from_record(self.survey.clone())?, Ground::from_record(self.ground.clone())?))
    }
}
