//! The main job, end to end: the demo notebook becomes a memo, through the `hade` command alone.

#[path = "memo/clients.rs"]
mod clients;
#[path = "memo/demo.rs"]
mod demo;
#[path = "memo/every_name.rs"]
mod every_name;
#[path = "memo/guide.rs"]
mod guide;
#[path = "memo/new_project.rs"]
mod new_project;
#[path = "memo/python.rs"]
mod python;
#[path = "memo/records.rs"]
mod records;
#[path = "memo/refusals.rs"]
mod refusals;
#[path = "memo/rerun.rs"]
mod rerun;
#[path = "memo/section.rs"]
mod section;
#[path = "memo/sign_off.rs"]
mod sign_off;
#[path = "memo/states.rs"]
mod states;
#[path = "memo/support.rs"]
mod support;
#[path = "memo/three_frames.rs"]
mod three_frames;
#[path = "memo/verify.rs"]
mod verify;
