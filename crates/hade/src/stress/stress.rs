//! The stress tensor as a value: in one kind of axes, remembering how it was made.

use std::fmt;
use std::marker::PhantomData;

use serde::{Deserialize, Deserializer, Serialize, Serializer};

use super::made::Made;
use super::tensor::Tensor;
use crate::card::Item;
use crate::error::{Error, Result};
use crate::frames::{Attitude, Axes, Axis, Borehole, Frame, Geographic, Name, Turned};
use crate::units::{Pressure, Quantity};

/// A total stress tensor, compression positive, in one kind of axes. Which hole's axes a
/// `Stress<Borehole>` is in is part of the value, and so is the name it was given.
pub struct Stress<F: Frame = Geographic> {
    pub(super) tensor: Tensor,
    /// How the geographic tensor behind it was made.
    pub(super) made: Made,
    /// For a carried stress: the geographic tensor, and the axes it was carried to.
    pub(super) carried: Option<(Tensor, Axes)>,
    /// What the user calls it ("overcoring in KC-2").
    pub(super) label: Option<Name>,
    frame: PhantomData<fn() -> F>,
}

impl<F: Frame> Clone for Stress<F> {
    fn clone(&self) -> Self {
        *self
    }
}
impl<F: Frame> Copy for Stress<F> {}
impl<F: Frame> PartialEq for Stress<F> {
    /// The same numbers in the same axes, bit for bit.
    fn eq(&self, other: &Self) -> bool {
        self.tensor == other.tensor && self.axes() == other.axes()
    }
}
impl<F: Frame> fmt::Debug for Stress<F> {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        write!(f, "Stress in {} {}", F::NAME, self.tensor.words(F::LETTERS))
    }
}

impl<F: Frame> Stress<F> {
    pub(crate) fn of(tensor: Tensor, made: Made, carried: Option<(Tensor, Axes)>) -> Self {
        Stress { tensor, made, carried, label: None, frame: PhantomData }
    }

    /// With a name ("overcoring in KC-2") that its cards bear, so that several stresses can stand on
    /// one sheet.
    pub fn named(self, name: &str) -> Self {
        Stress { label: Some(Name::new(name)), ..self }
    }

    /// The name it was given.
    pub fn given_name(&self) -> Option<Name> {
        self.label
    }

    /// " of overcoring in KC-2", or nothing, for titles.
    pub(crate) fn of_name(&self) -> String {
        self.label.map_or_else(String::new, |name| format!(" of {name}"))
    }

    /// " under overcoring in KC-2", or nothing, for titles.
    pub(crate) fn under_name(&self) -> String {
        self.label.map_or_else(String::new, |name| format!(" under {name}"))
    }

    pub(super) fn with_label(self, label: Option<Name>) -> Self {
        Stress { label, ..self }
    }

    /// The axes it is in: which hole, wall, fault or instrument.
    pub fn axes(&self) -> Axes {
        self.carried.map_or(Axes::NorthEastDown, |(_, axes)| axes)
    }

    /// The same stress in north, east, down.
    pub(crate) fn geographic(&self) -> Tensor {
        self.carried.map_or(self.tensor, |(geographic, _)| geographic)
    }

    /// The stress behind it in north, east, down, with how it was made.
    pub(super) fn behind(&self) -> Stress<Geographic> {
        Stress::of(self.geographic(), self.made, None).with_label(self.label)
    }

    pub(crate) fn tensor(&self) -> Tensor {
        self.tensor
    }

    /// A component by its two axes: `component(Axis::X, Axis::Y)` is the shear stress between the
    /// first and second axes.
    pub fn component(&self, a: Axis, b: Axis) -> Pressure {
        let rows = self.tensor.rows();
        Pressure::from_si(rows[a.index()][b.index()])
    }

    /// The rows of the tensor in megapascals.
    pub fn rows_in_mpa(&self) -> [[f64; 3]; 3] {
        self.tensor.scale(1e-6).rows()
    }

    /// Times a number.
    pub fn scale(&self, factor: f64) -> Self {
        let made = Made::combined(&[(factor, self.behind())]);
        let carried = self.carried.map(|(geographic, axes)| (geographic.scale(factor), axes));
        Stress::of(self.tensor.scale(factor), made, carried)
    }

    /// Whether every component is within a tolerance of the other's, in the same axes.
    pub fn is_close(&self, other: &Self, tolerance: Pressure) -> bool {
        self.axes().same(other.axes())
            && self.tensor.0.iter().zip(other.tensor.0).all(|(a, b)| (a - b).abs() <= tolerance.si())
    }

    pub(crate) fn kind() -> String {
        format!("stress in {}", F::NAME)
    }

    /// The tensor as an input or result.
    pub(crate) fn item(&self, symbol: &str, name: &str) -> Item {
        Item::new(symbol, name, Self::kind(), self.tensor.0.to_vec(), self.tensor.words(F::LETTERS))
    }
}

impl<F: Turned> Stress<F> {
    /// The sum of two stresses in the same axes: of one hole at one depth, of one fault.
    ///
    /// # Errors
    /// When they are in the axes of different holes, depths, faults or instruments.
    pub fn try_add(&self, other: &Self) -> Result<Self> {
        if !self.axes().same(other.axes()) {
            return Err(Error::FrameMismatch {
                doing: "Adding two stresses".to_owned(),
                left: self.axes().words(),
                right: other.axes().words(),
            });
        }
        let made = Made::combined(&[(1.0, self.behind()), (1.0, other.behind())]);
        let carried = self.carried.map(|(geographic, axes)| (geographic.add(other.geographic()), axes));
        Ok(Stress::of(self.tensor.add(other.tensor), made, carried))
    }
}

impl Stress<Borehole> {
    /// The hole's attitude.
    pub fn attitude(&self) -> Option<Attitude> {
        match self.axes() {
            Axes::Hole { attitude, .. } => Some(attitude),
            _ => None,
        }
    }
    /// The hole's name, if one was given.
    pub fn name(&self) -> Option<Name> {
        match self.axes() {
            Axes::Hole { name, .. } => name,
            _ => None,
        }
    }
}

/// What can be added to a stress in axes `F` with `+`, or taken off with `-`: only another stress in the geographic frame,
/// because two stresses in borehole axes may belong to different holes.
#[diagnostic::on_unimplemented(
    message = "`+` and `-` join only stresses in north, east, down, not `{Self}` and a stress in `{F}` axes",
    label = "carry both into one frame first: `chain.carry(&s)` goes to the hole, `chain.back().carry(&sh)` comes back",
    note = "two stresses in borehole axes may belong to different holes or depths: add them with `a.try_add(&b)?`"
)]
pub trait AddsTo<F: Frame> {
    /// The stress that is added.
    fn stress(self) -> Stress<F>;
}
impl AddsTo<Geographic> for Stress<Geographic> {
    fn stress(self) -> Stress<Geographic> {
        self
    }
}
impl AddsTo<Geographic> for &Stress<Geographic> {
    fn stress(self) -> Stress<Geographic> {
        *self
    }
}

impl<F: Frame, Other: AddsTo<F>> std::ops::Add<Other> for Stress<F> {
    type Output = Stress<F>;
    fn add(self, other: Other) -> Stress<F> {
        let other = other.stress();
        let made = Made::combined(&[(1.0, self.behind()), (1.0, other.behind())]);
        Stress::of(self.tensor.add(other.tensor), made, None)
    }
}

impl<F: Frame, Other: AddsTo<F>> std::ops::Sub<Other> for Stress<F> {
    type Output = Stress<F>;
    fn sub(self, other: Other) -> Stress<F> {
        let other = other.stress();
        let made = Made::combined(&[(1.0, self.behind()), (-1.0, other.behind())]);
        Stress::of(self.tensor.add(other.tensor.scale(-1.0)), made, None)
    }
}

#[derive(Serialize, Deserialize)]
struct Written {
    frame: String,
    components: Tensor,
    made: Made,
    carried: Option<(Tensor, Axes)>,
    #[serde(default, skip_serializing_if = "Option::is_none")]
    label: Option<Name>,
}

impl Written {
    /// Whether the components are those of the stress behind them, and that is what it was made of.
    fn agrees(&self) -> Result<()> {
        let (behind, rows) = match self.carried {
            Some((behind, axes)) => (behind, Some(axes.matrix()?)),
            None => (self.components, None),
        };
        let close = |a: Tensor, b: Tensor| {
            let allowed = 1e-9 * a.largest().max(b.largest()).max(1.0);
            a.0.iter().zip(b.0).all(|(a, b)| (a - b).abs() <= allowed)
        };
        let turned = rows.is_none_or(|rows| close(behind.turned(&rows), self.components));
        let made = match self.made {
            Made::Combined { parts: None } => true,
            made => close(made.tensor()?, behind),
        };
        if turned && made {
            return Ok(());
        }
        Err(Error::not_physical(
            "A stress of the record does not agree with what it says it was made of",
            "the record was changed; make it again from its notebook.",
        ))
    }
}

impl<F: Frame> Serialize for Stress<F> {
    fn serialize<S: Serializer>(&self, s: S) -> std::result::Result<S::Ok, S::Error> {
        Written {
            frame: F::NAME.to_owned(),
            components: self.tensor,
            made: self.made,
            carried: self.carried,
            label: self.label,
        }
        .serialize(s)
    }
}
impl<'de, F: Frame> Deserialize<'de> for Stress<F> {
    fn deserialize<D: Deserializer<'de>>(d: D) -> std::result::Result<Self, D::Error> {
        let written = Written::deserialize(d)?;
        if written.frame != F::NAME {
            return Err(serde::de::Error::custom(format!(
                "a stress in {} stands where one in {} is needed",
                written.frame,
                F::NAME
            )));
        }
        let axes = written.carried.map_or(Axes::NorthEastDown, |(_, axes)| axes);
        if axes.kind() != F::NAME {
            return Err(serde::de::Error::custom(format!(
                "a stress in {} says that it is in {}",
                F::NAME,
                axes.words()
            )));
        }
        if !written.components.is_finite() {
            return Err(serde::de::Error::custom("a stress component is not a finite number"));
        }
        written.agrees().map_err(serde::de::Error::custom)?;
        Ok(Stress::of(written.components, written.made, written.carried).with_label(written.label))
    }
}
