//! The kernel as real Jupyter clients use it: the general tests of kernels, nbclient, and kernels from
//! start to end. The clients are Python programs, in `tests/clients`.

#[path = "clients/environment.rs"]
mod environment;
#[path = "clients/lab.rs"]
mod lab;
#[path = "clients/life.rs"]
mod life;
#[path = "clients/notebook.rs"]
mod notebook;
#[path = "clients/protocol.rs"]
mod protocol;
#[path = "clients/standby.rs"]
mod standby;
