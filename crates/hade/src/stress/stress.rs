//! The stress tensor as a value: in one kind of axes, remembering how it was made.

use std::fmt;
use std::marker::PhantomData;

use serde::{Deserialize, Deserializer, Serialize, Serializer};

use super::made::Made;
use super::tensor::Tensor;
use crate::card::Item;
use crate::error::{Error, Result};
use crate::frames::{Attitude, Axis, Borehole, Frame, Geographic, Name};
use crate::units::{Pressure, Quantity};

/// A total stress tensor, compression positive, in one kind of axes. Which hole's axes a
/// `Stress<Borehole>` is in is part of the value.
pub struct Stress<F: Frame = Geographic> {
    pub(super) tensor: Tensor,
    /// How the geographic tensor behind it was made.
    pub(super) made: Made,
    /// For a carried stress: the geographic tensor, and the hole it was carried to.
    pub(super) carried: Option<(Tensor, Attitude, Option<Name>)>,
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
        self.tensor == other.tensor && self.hole() == other.hole()
    }
}
impl<F: Frame> fmt::Debug for Stress<F> {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        write!(f, "Stress in {} {}", F::NAME, self.words())
    }
}

impl<F: Frame> Stress<F> {
    pub(crate) fn of(tensor: Tensor, made: Made, carried: Option<(Tensor, Attitude, Option<Name>)>) -> Self {
        Stress { tensor, made, carried, frame: PhantomData }
    }

    fn hole(&self) -> Option<(Attitude, Option<Name>)> {
        self.carried.map(|(_, attitude, name)| (attitude, name))
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
        Stress { tensor: self.tensor.scale(factor), made: Made::Combined, ..*self }
    }

    /// Whether every component is within a tolerance of the other's, in the same axes.
    pub fn is_close(&self, other: &Self, tolerance: Pressure) -> bool {
        self.hole() == other.hole()
            && self.tensor.0.iter().zip(other.tensor.0).all(|(a, b)| (a - b).abs() <= tolerance.si())
    }

    pub(crate) fn kind() -> String {
        format!("stress in {}", F::NAME)
    }

    /// The tensor as an input or result.
    pub(crate) fn item(&self, symbol: &str, name: &str) -> Item {
        Item::new(symbol, name, Self::kind(), self.tensor.0.to_vec(), self.words())
    }

    fn words(&self) -> String {
        let [xx, yy, zz, xy, yz, xz] = self.tensor.scale(1e-6).0;
        let [x, y, z] = F::LETTERS;
        format!(
            "S_{x}{x} {xx:.2}, S_{y}{y} {yy:.2}, S_{z}{z} {zz:.2}, S_{x}{y} {xy:.2}, S_{y}{z} {yz:.2}, S_{x}{z} {xz:.2} MPa"
        )
    }
}

impl Stress<Borehole> {
    /// The hole's attitude.
    pub fn attitude(&self) -> Option<Attitude> {
        self.carried.map(|(_, attitude, _)| attitude)
    }
    /// The geographic tensor it was carried from.
    pub(crate) fn geographic(&self) -> Option<Tensor> {
        self.carried.map(|(geographic, ..)| geographic)
    }
    /// The hole's name, if one was given.
    pub fn name(&self) -> Option<Name> {
        self.carried.and_then(|(.., name)| name)
    }

    /// The sum of two stresses in the axes of one hole at one depth.
    ///
    /// # Errors
    /// When they are in the axes of different holes or depths.
    pub fn try_add(&self, other: &Self) -> Result<Self> {
        let words = |s: &Self| match s.carried {
            Some((_, attitude, name)) => crate::frames::frame_words(attitude, name),
            None => Borehole::NAME.to_owned(),
        };
        if self.hole() != other.hole() {
            return Err(Error::FrameMismatch {
                doing: "Adding two stresses".to_owned(),
                left: words(self),
                right: words(other),
            });
        }
        let carried = match (self.carried, other.carried) {
            (Some((a, attitude, name)), Some((b, ..))) => Some((a.add(b), attitude, name)),
            _ => None,
        };
        Ok(Stress::of(self.tensor.add(other.tensor), Made::Combined, carried))
    }
}

/// What can be added to a stress in axes `F` with `+`: only another stress in the geographic frame,
/// because two stresses in borehole axes may belong to different holes.
#[diagnostic::on_unimplemented(
    message = "stresses in different axes cannot be added: `{Self}` to a stress in `{F}` axes",
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
        Stress::of(self.tensor.add(other.stress().tensor), Made::Combined, None)
    }
}

#[derive(Serialize, Deserialize)]
struct Written {
    frame: String,
    components: Tensor,
    made: Made,
    carried: Option<(Tensor, Attitude, Option<Name>)>,
}

impl<F: Frame> Serialize for Stress<F> {
    fn serialize<S: Serializer>(&self, s: S) -> std::result::Result<S::Ok, S::Error> {
        Written { frame: F::NAME.to_owned(), components: self.tensor, made: self.made, carried: self.carried }
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
        if !written.components.is_finite() {
            return Err(serde::de::Error::custom("a stress component is not a finite number"));
        }
        Ok(Stress::of(written.components, written.made, written.carried))
    }
}
