//! The kinds of axes a value can be in, as types. Which hole or which fault is data, not a type.

/// Axes that a stress, a line or a turn can be in. The library owns the list.
pub trait Frame: sealed::Sealed + Copy + 'static {
    /// The name in results and messages ("the geographic frame").
    const NAME: &'static str;
    /// The three axes, in words.
    const AXES: [&'static str; 3];
    /// The letters for the axes in symbols.
    const LETTERS: [&'static str; 3];
}

mod sealed {
    pub trait Sealed {}
}

macro_rules! frames {
    ($($(#[$doc:meta])* $name:ident, $text:literal, $axes:expr, $letters:expr;)*) => {
        $($(#[$doc])*
        #[derive(Clone, Copy, Debug, PartialEq, Eq)]
        pub struct $name;
        impl sealed::Sealed for $name {}
        impl Frame for $name {
            const NAME: &'static str = $text;
            const AXES: [&'static str; 3] = $axes;
            const LETTERS: [&'static str; 3] = $letters;
        })*
    };
}
frames! {
    /// North, east, down from true north.
    Geographic, "the geographic frame", ["north", "east", "down"], ["n", "e", "d"];
    /// Top of hole, right, along the hole.
    Borehole, "a borehole frame", ["top of hole", "right", "along the hole"], ["x", "y", "z"];
    /// Radial, around and along, at one tool face of a borehole wall.
    WallAxes, "wall axes", ["radial", "around the hole", "along the hole"], ["r", "θ", "z"];
    /// Along strike, down dip and normal (pointing down, into the footwall), of one fault.
    FaultAxes, "fault axes", ["along strike", "down dip", "normal"], ["s", "d", "n"];
    /// Axes that the user stated: a mine grid, an instrument's own.
    Local, "local axes", ["first axis", "second axis", "third axis"], ["1", "2", "3"];
}

/// A frame whose axes depend on a hole, a place at its wall, a fault or what the user stated: every
/// kind but the geographic one. Which it is, is data ([`Axes`](super::Axes)).
pub trait Turned: Frame {}
impl Turned for Borehole {}
impl Turned for WallAxes {}
impl Turned for FaultAxes {}
impl Turned for Local {}

/// One of the three axes of a frame.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Axis {
    /// The first: north, top of hole, radial, along strike.
    X,
    /// The second: east, right of hole, around, down dip.
    Y,
    /// The third: down, along the hole, normal to the fault.
    Z,
}

impl Axis {
    pub(crate) fn index(self) -> usize {
        match self {
            Axis::X => 0,
            Axis::Y => 1,
            Axis::Z => 2,
        }
    }
}
