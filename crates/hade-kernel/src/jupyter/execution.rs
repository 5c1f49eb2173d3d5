//! What clients are told about a cell besides its outputs: that it began, and how it ended.

use std::collections::HashMap;

use jupyter_protocol::{ErrorOutput, ExecuteInput, ExecuteReply, ExecutionCount, ReplyError, ReplyStatus};

use serde_json::json;

use super::iopub::IoPub;
use super::message::untyped;
use super::queue::Task;
use crate::cell::CellError;

/// Says that a cell begins, unless that has been said.
pub(super) fn announce(task: &mut Task, iopub: &IoPub, count: usize) {
    if task.announced {
        return;
    }
    task.announced = true;
    iopub.cell_begins(&task.request);
    if !is_silent(task) {
        let code = task.request.text("code").to_owned();
        iopub.publish(ExecuteInput { code, execution_count: ExecutionCount::new(count) }, &task.request);
    }
}

/// Says how a cell ended.
pub(super) fn conclude(task: &Task, iopub: &IoPub, count: usize, error: Option<&CellError>) {
    let mut reply = ExecuteReply {
        execution_count: ExecutionCount::new(count),
        // Expressions that a client would like to follow are not evaluated.
        user_expressions: Some(HashMap::new()),
        ..ExecuteReply::default()
    };
    if let Some(error) = error {
        let (ename, evalue) = (error.name.clone(), error.sentence.clone());
        let traceback: Vec<String> = error.detail.lines().map(str::to_owned).collect();
        if !is_silent(task) {
            let content = ErrorOutput { ename: ename.clone(), evalue: evalue.clone(), traceback: traceback.clone() };
            iopub.publish(content, &task.request);
        }
        reply.status = ReplyStatus::Error;
        reply.error = Some(Box::new(ReplyError { ename, evalue, traceback }));
    }
    task.replies.reply(reply, &task.request);
    iopub.cell_ends(&task.request);
}

/// Says that a cell does not run because an earlier one failed or was interrupted. It has no number, which
/// the typed reply always has.
pub(super) fn abort(task: &Task, iopub: &IoPub) {
    iopub.busy(&task.request);
    task.replies.reply(untyped("execute_reply", json!({"status": "aborted"})), &task.request);
    iopub.cell_ends(&task.request);
}

/// Whether nothing of the cell is to be shown.
pub(super) fn is_silent(task: &Task) -> bool {
    task.request.flag("silent", false)
}
