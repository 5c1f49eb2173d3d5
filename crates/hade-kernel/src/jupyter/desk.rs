//! Sorts requests: most are answered at once, what needs the session is put in the queue.

use std::sync::Arc;

use jupyter_protocol::{CommClose, CommInfoReply, InterruptReply, IsCompleteReply, ReplyStatus, ShutdownReply};
use serde_json::json;

use super::ending::Ending;
use super::history::SharedHistory;
use super::iopub::IoPub;
use super::kernel_info;
use super::message::{Request, untyped};
use super::queue::{EXECUTE, Queue};
use super::replies::Replies;
use crate::syntax::{self, Wholeness};

/// Where every request comes in, from the shell and the control socket alike.
#[derive(Clone)]
pub(super) struct Desk {
    pub(super) iopub: IoPub,
    pub(super) queue: Queue,
    pub(super) history: SharedHistory,
    pub(super) ending: Arc<Ending>,
}

impl Desk {
    /// Answers a request or has it answered.
    pub(super) fn take(&self, request: Request, replies: &Replies) {
        match request.kind() {
            EXECUTE | "complete_request" | "inspect_request" => self.queue.put(request, replies),
            _ => {
                self.iopub.busy(&request);
                let ends = self.answer(&request, replies);
                self.iopub.idle(&request);
                if ends {
                    self.ending.end();
                }
            }
        }
    }

    /// Answers at once; whether the kernel is to end.
    fn answer(&self, request: &Request, replies: &Replies) -> bool {
        match request.kind() {
            "kernel_info_request" => replies.reply(kernel_info::reply(), request),
            "is_complete_request" => match syntax::wholeness(request.text("code")) {
                Wholeness::Unfinished => {
                    let indent = syntax::indent_after(request.text("code"));
                    replies.reply(IsCompleteReply::incomplete(indent), request);
                }
                // Only an unfinished cell may have an indent, which the typed reply always has.
                Wholeness::Whole => replies.reply(untyped("is_complete_reply", json!({"status": "complete"})), request),
                Wholeness::Wrong => replies.reply(untyped("is_complete_reply", json!({"status": "invalid"})), request),
            },
            "history_request" => replies.reply(self.history.reply(request), request),
            "comm_info_request" => replies.reply(CommInfoReply::default(), request),
            // There is nothing at this end that could talk.
            "comm_open" => {
                let comm_id = request.text("comm_id").to_owned().into();
                self.iopub.publish(CommClose { comm_id, ..CommClose::default() }, request);
            }
            "interrupt_request" => {
                self.ending.interrupt();
                replies.reply(InterruptReply::new(), request);
            }
            "shutdown_request" => {
                let restart = request.flag("restart", false);
                let answer = ShutdownReply { restart, status: ReplyStatus::Ok, error: None };
                replies.reply(answer.clone(), request);
                self.iopub.publish(answer, request);
                return true;
            }
            // A client may ask for more than there is; it is told that the request is dealt with.
            _ => {}
        }
        false
    }
}
