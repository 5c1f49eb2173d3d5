//! How a result explains itself: a [`Card`] says what went in, by which method and source, what
//! came out, step by step with the numbers, which checks it passed, and its figure. It is plain
//! data; the notebook draws it and the memo typesets the same one.

mod check;
mod explain;
mod figure;
mod item;
mod projection;
mod row_chart;
mod step;

pub use check::Check;
pub use explain::{Card, Data, Explain, Explanation, Json};
pub use figure::{Axis, Figure, Layer, Mark, Role};
pub use item::{Item, Standing};
pub use projection::Projection;
pub(crate) use row_chart::{ChartRow, RowChart};
pub use step::{Column, Formula, Method, Reference, Step, Table};
