//! Which axes: the kind of frame with the hole, the place at its wall, the fault or the stated lines
//! that fix it.

use serde::{Deserialize, Serialize};

use super::attitude::borehole_axes;
use super::turn::Turn;
use super::vector::{M3, add, scale};
use super::{Attitude, Borehole, FaultAxes, Frame, Geographic, Local, LocalAxes, Name, Plane, WallAxes};
use crate::card::{Card, Item};
use crate::error::Result;
use crate::units::{Angle, Quantity};

/// The axes of one hole, wall, fault or instrument: what a value in a frame belongs to.
#[derive(Clone, Copy, Debug, PartialEq, Serialize, Deserialize)]
#[serde(tag = "axes", rename_all = "snake_case")]
#[non_exhaustive]
pub enum Axes {
    /// North, east, down from true north.
    NorthEastDown,
    /// Top of hole, right, along the hole.
    Hole {
        /// How the hole lies.
        attitude: Attitude,
        /// Its name, if it has one.
        name: Option<Name>,
    },
    /// Radial, around the hole, along the hole.
    Wall {
        /// How the hole lies.
        attitude: Attitude,
        /// Its name, if it has one.
        name: Option<Name>,
        /// The tool face of the place.
        tool_face: Angle,
    },
    /// Along strike, down dip, normal.
    Fault {
        /// The fault's plane.
        plane: Plane,
        /// Its name, if it has one.
        name: Option<Name>,
    },
    /// Axes that the user stated.
    Local {
        /// The axes.
        stated: LocalAxes,
    },
}

impl Axes {
    /// The kind of frame these axes are of ([`Frame::NAME`]).
    pub fn kind(self) -> &'static str {
        match self {
            Axes::NorthEastDown => Geographic::NAME,
            Axes::Hole { .. } => Borehole::NAME,
            Axes::Wall { .. } => WallAxes::NAME,
            Axes::Fault { .. } => FaultAxes::NAME,
            Axes::Local { .. } => Local::NAME,
        }
    }

    /// Whether both are the same axes under the same name, however their angles were stated (−10° and
    /// 350°, magnetic and true).
    pub(crate) fn same(self, other: Axes) -> bool {
        if self == other {
            return true;
        }
        let close = |a: M3, b: M3| a.as_flattened().iter().zip(b.as_flattened()).all(|(a, b)| (a - b).abs() <= 1e-12);
        self.kind() == other.kind()
            && self.name() == other.name()
            && matches!((self.by_definition(), other.by_definition()), (Ok(a), Ok(b)) if close(a, b))
    }

    /// The name of the hole, fault or instrument.
    fn name(self) -> Option<Name> {
        match self {
            Axes::NorthEastDown => None,
            Axes::Hole { name, .. } | Axes::Wall { name, .. } | Axes::Fault { name, .. } => name,
            Axes::Local { stated } => Some(stated.name()),
        }
    }

    /// The three axes in words.
    pub fn axis_names(self) -> [&'static str; 3] {
        match self {
            Axes::NorthEastDown => Geographic::AXES,
            Axes::Hole { .. } => Borehole::AXES,
            Axes::Wall { .. } => WallAxes::AXES,
            Axes::Fault { .. } => FaultAxes::AXES,
            Axes::Local { stated } => stated.axis_names(),
        }
    }

    /// The letters of the axes in symbols.
    pub(crate) fn letters(self) -> [&'static str; 3] {
        match self {
            Axes::NorthEastDown => Geographic::LETTERS,
            Axes::Hole { .. } => Borehole::LETTERS,
            Axes::Wall { .. } => WallAxes::LETTERS,
            Axes::Fault { .. } => FaultAxes::LETTERS,
            Axes::Local { .. } => Local::LETTERS,
        }
    }

    /// The axes as a title says them: "north, east, down", "the axes of KF-3 at 2950 m".
    pub(crate) fn title(self) -> String {
        match self {
            Axes::NorthEastDown => "north, east, down".to_owned(),
            Axes::Hole { name: Some(name), .. } => format!("the axes of {name}"),
            Axes::Hole { attitude, name: None } => format!("borehole axes ({})", attitude.words()),
            Axes::Wall { name: Some(name), tool_face, .. } => {
                format!("the wall axes of {name} at tool face {tool_face}")
            }
            Axes::Wall { attitude, name: None, tool_face } => {
                format!("wall axes at tool face {tool_face} ({})", attitude.words())
            }
            Axes::Fault { name: Some(name), .. } => format!("the axes of fault {name}"),
            Axes::Fault { plane, name: None } => format!("fault axes ({})", plane.words()),
            Axes::Local { stated } => format!("the axes of {}", stated.name()),
        }
    }

    /// In a sentence: "the borehole frame of KF-3 at 2950 m (inclination 42.0°, azimuth 120.0°)".
    pub(crate) fn words(self) -> String {
        match self {
            Axes::NorthEastDown => Geographic::NAME.to_owned(),
            Axes::Hole { attitude, name: Some(name) } => {
                format!("the borehole frame of {name} ({})", attitude.words())
            }
            Axes::Hole { attitude, name: None } => format!("the borehole frame at {}", attitude.words()),
            Axes::Wall { attitude, name: Some(_), .. } => format!("{} ({})", self.title(), attitude.words()),
            Axes::Wall { .. } => self.title(),
            Axes::Fault { plane, name: Some(name) } => format!("the axes of fault {name} ({})", plane.words()),
            Axes::Fault { plane, name: None } => format!("the axes of a fault of {}", plane.words()),
            Axes::Local { stated } => format!("the axes of {} ({})", stated.name(), stated.words()),
        }
    }

    /// The axes these are turned out of.
    fn parent(self) -> Option<Axes> {
        match self {
            Axes::NorthEastDown => None,
            Axes::Wall { attitude, name, .. } => Some(Axes::Hole { attitude, name }),
            _ => Some(Axes::NorthEastDown),
        }
    }

    /// From the geographic axes down to these.
    fn ancestry(self) -> Vec<Axes> {
        let mut line = vec![self];
        while let Some(parent) = line.last().and_then(|a| a.parent()) {
            line.push(parent);
        }
        line.reverse();
        line
    }

    /// The turns out of the parent's axes. The suffix tells two sets of symbols apart.
    fn own_turns(self, suffix: &str) -> Result<Vec<Turn>> {
        let symbol = |letter: &str| format!("{letter}{suffix}");
        Ok(match self {
            Axes::NorthEastDown => Vec::new(),
            Axes::Hole { attitude, .. } => {
                let (i, a) = attitude.angles()?;
                let (i, a) = (Angle::from_si(i), Angle::from_si(a));
                vec![
                    Turn::about(2, "the azimuth", &symbol("a"), a, "down"),
                    Turn::about(1, "the inclination", &symbol("i"), i, "the right axis"),
                ]
            }
            Axes::Wall { tool_face, .. } => {
                let tool_face = tool_face.finite("tool face")?;
                vec![Turn::about(2, "the tool face", &symbol("θ"), tool_face, "the axis along the hole")]
            }
            Axes::Fault { plane, .. } => {
                plane.axes()?;
                let strike = plane.strike.true_north()?;
                vec![
                    Turn::about(2, "the strike", &symbol("s"), strike, "down"),
                    Turn::about(0, "the dip", &symbol("d"), plane.dip, "the strike"),
                ]
            }
            Axes::Local { stated } => stated.turns(suffix)?,
        })
    }

    /// The turns from one set of axes to another: up to what both are turned out of, and down again.
    pub(super) fn turns_to(self, to: Axes) -> Result<Vec<Turn>> {
        let (ups, downs) = (self.ancestry(), to.ancestry());
        let shared = ups.iter().zip(&downs).take_while(|(a, b)| a == b).count();
        let (suffix, mut turns) = (self.suffix(to), Vec::new());
        for axes in ups[shared..].iter().rev() {
            turns.extend(axes.own_turns(suffix)?.into_iter().rev().map(Turn::back));
        }
        for axes in &downs[shared..] {
            turns.extend(axes.own_turns("")?);
        }
        Ok(turns)
    }

    /// What the symbols of the first axes carry when the second have symbols of their own.
    fn suffix(self, to: Axes) -> &'static str {
        let shares = self.ancestry().contains(&to) || to.ancestry().contains(&self);
        if shares { "" } else { "_0" }
    }

    /// Rows: the axes in north, east, down, by their turns.
    pub(crate) fn matrix(self) -> Result<M3> {
        Ok(product(&Axes::NorthEastDown.turns_to(self)?))
    }

    /// Rows: the axes in north, east, down, by their definitions and not by turns.
    pub(crate) fn by_definition(self) -> Result<M3> {
        Ok(match self {
            Axes::NorthEastDown => [[1.0, 0.0, 0.0], [0.0, 1.0, 0.0], [0.0, 0.0, 1.0]],
            Axes::Hole { attitude, .. } => attitude.matrix()?,
            Axes::Wall { attitude, tool_face, .. } => {
                let (i, a) = attitude.angles()?;
                let [top, right, along] = borehole_axes(i, a);
                let (s, c) = tool_face.si().sin_cos();
                [add(scale(top, c), scale(right, s)), add(scale(top, -s), scale(right, c)), along]
            }
            Axes::Fault { plane, .. } => {
                let axes = plane.axes()?;
                [axes.along_strike, axes.down_dip, axes.normal]
            }
            Axes::Local { stated } => stated.by_definition()?,
        })
    }

    /// The angles that fix the axes, as inputs of a turn to or from `other`.
    fn own_items(self, suffix: &str) -> Vec<Item> {
        let symbol = |letter: &str| format!("{letter}{suffix}");
        match self {
            Axes::NorthEastDown => Vec::new(),
            Axes::Hole { attitude, .. } => attitude.items(suffix),
            Axes::Wall { attitude, tool_face, .. } => {
                let mut items = attitude.items(suffix);
                items.push(Item::typed(&symbol("θ"), "tool face", tool_face));
                items
            }
            Axes::Fault { plane, .. } => vec![
                plane.strike.item(&symbol("s"), "strike of the fault, dip to its right"),
                Item::typed(&symbol("d"), "dip of the fault", plane.dip),
            ],
            Axes::Local { stated } => stated.items(suffix),
        }
    }

    /// The angles that fix both sets of axes.
    pub(super) fn items_to(self, to: Axes) -> Vec<Item> {
        let (ours, theirs) = (self.own_items(self.suffix(to)), to.own_items(""));
        if self.ancestry().contains(&to) {
            return ours;
        }
        if to.ancestry().contains(&self) {
            return theirs;
        }
        ours.into_iter().chain(theirs).collect()
    }

    /// From where angles count in these axes, where that needs a word.
    pub(super) fn note(self) -> Option<String> {
        match self {
            Axes::Hole { attitude, .. } | Axes::Wall { attitude, .. } => Some(attitude.tool_face_reference()),
            Axes::Fault { .. } => Some(
                "The normal of the fault points down, into its footwall; the dip is to the right of the strike."
                    .to_owned(),
            ),
            Axes::Local { stated } => stated.note(),
            Axes::NorthEastDown => None,
        }
    }

    /// The cards of the azimuths that fix the axes.
    pub(crate) fn upstream(self) -> Vec<Card> {
        match self {
            Axes::NorthEastDown => Vec::new(),
            Axes::Hole { attitude, .. } | Axes::Wall { attitude, .. } => attitude.azimuth.upstream(),
            Axes::Fault { plane, .. } => plane.strike.upstream(),
            Axes::Local { stated } => stated.upstream(),
        }
    }
}

/// The product of turns made one after another: the first stands on the right.
pub(super) fn product(turns: &[Turn]) -> M3 {
    let unit = [[1.0, 0.0, 0.0], [0.0, 1.0, 0.0], [0.0, 0.0, 1.0]];
    let mut turns = turns.iter();
    let first = turns.next().map_or(unit, |t| t.matrix);
    turns.fold(first, |q, turn| super::vector::multiply(&turn.matrix, &q))
}
