//! Showing what a cell puts out, while it runs.

use std::collections::{BTreeMap, HashSet};

use serde_json::{Map, Value, json};

use super::iopub::IoPub;
use super::message::{Request, untyped};
use crate::bundle;
use crate::cell::{Output, is_aside};

type Bundle = BTreeMap<String, String>;

/// Shows the outputs of one cell.
pub(super) struct Display<'a> {
    iopub: &'a IoPub,
    request: &'a Request,
    count: usize,
    silent: bool,
    /// The displays that later ones may replace, of all cells.
    known: &'a mut HashSet<String>,
    /// A value that is text alone: the cell's result if nothing follows.
    held: Option<Bundle>,
}

impl<'a> Display<'a> {
    pub(super) fn new(
        iopub: &'a IoPub,
        request: &'a Request,
        count: usize,
        silent: bool,
        known: &'a mut HashSet<String>,
    ) -> Display<'a> {
        Display { iopub, request, count, silent, known, held: None }
    }

    /// Shows one output.
    pub(super) fn show(&mut self, output: Output) {
        if !is_aside(&output)
            && let Some(held) = self.held.take()
        {
            self.display(&held);
        }
        match output {
            Output::Text { stream, text } => {
                if !self.silent {
                    self.iopub.stream(stream, &text, self.request);
                }
            }
            Output::Display(bundle) if bundle::is_plain(&bundle) => self.held = Some(bundle),
            Output::Display(bundle) => self.display(&bundle),
        }
    }

    /// Nothing follows; the text of the cell's result, if it has one.
    pub(super) fn finish(mut self, failed: bool) -> Option<String> {
        let held = self.held.take()?;
        if failed {
            self.display(&held);
            return None;
        }
        let content = json!({"execution_count": self.count, "data": data(&held), "metadata": {}, "transient": {}});
        self.send("execute_result", content);
        held.into_values().next()
    }

    fn display(&mut self, bundle: &Bundle) {
        let mut content = json!({"data": data(bundle), "metadata": {}, "transient": {}});
        let mut kind = "display_data";
        if let Some(id) = bundle::display_id(bundle) {
            content["transient"] = json!({"display_id": id});
            if !self.known.insert(id.to_owned()) {
                kind = "update_display_data";
            }
        }
        self.send(kind, content);
    }

    // The contents are passed as they are; the typed messages know some mime types only.
    fn send(&self, kind: &str, content: Value) {
        if !self.silent {
            self.iopub.publish(untyped(kind, content), self.request);
        }
    }
}

/// A displayed value as the message carries it.
fn data(bundle: &Bundle) -> Map<String, Value> {
    bundle::shown(bundle).map(|(mime, content)| (mime.to_owned(), bundle::json_value(mime, content))).collect()
}
