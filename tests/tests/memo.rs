//! The main job, end to end: the demo notebook becomes a memo, through the `hade` command alone.

#[path = "memo/clients.rs"]
mod clients;
#[path = "memo/demo.rs"]
mod demo;
#[path = "memo/python.rs"]
mod python;
#[path = "memo/refusals.rs"]
mod refusals;
#[path = "memo/sign_off.rs"]
mod sign_off;
#[path = "memo/support.rs"]
mod support;
#[path = "memo/three_frames.rs"]
mod three_frames;
#[path = "memo/verify.rs"]
mod verify;
