//! hade
fn main() { evcxr_hook() } fn evcxr_hook(){}
