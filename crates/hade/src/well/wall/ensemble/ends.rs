//! The ends of every draw, for what puts several ensembles together.

use super::ensemble::Ensemble;
use super::stand::Stand;
use super::whole::stand_by_wall;
use crate::card::Step;
use crate::error::Result;
use crate::spread::for_each_draw;

/// Bottom and top of a draw in Pa; `None` for a draw that is left out.
type DrawEnds = Option<[Option<f64>; 2]>;

fn ends(stand: &Stand) -> DrawEnds {
    stand.left.is_none().then_some([stand.bottom, stand.top])
}

impl Ensemble {
    /// Those of every draw, in order.
    pub(crate) fn ends(&self) -> Vec<DrawEnds> {
        self.stands.iter().map(ends).collect()
    }

    /// The same, every draw as a whole wall.
    pub(crate) fn ends_by_whole_walls(&self) -> Result<Vec<DrawEnds>> {
        let ready = self.inputs.prepared()?;
        Ok(for_each_draw(&ready.sampler, self.inputs.draws.count, |draw| {
            ends(&stand_by_wall(&self.inputs, &ready, draw))
        }))
    }

    /// A draw with its numbers put in.
    pub(crate) fn worked_draw(&self, k: usize) -> Vec<Step> {
        self.worked(k, &format!("Draw {}", k + 1))
    }
}
