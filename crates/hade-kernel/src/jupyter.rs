//! The kernel: a session behind Jupyter's five sockets.
//!
//! The sockets are served from the first moment, each by a task of its own. One thread owns the
//! session: it prepares the libraries if need be, starts the session, warms it, and works off what needs
//! it, one request after the other. Everything else is answered at once, also while a cell compiles.
//!
//! ```text
//!  shell, control ──► Desk ──► answered at once (kernel_info, is_complete, history, …)
//!                      │
//!                      └─► queue ──► Worker (owns the session) ──► replies, IoPub
//! ```
//!
//! The messages are those of the Jupyter messaging protocol, version 5.4.

mod completion;
mod connection;
mod desk;
mod display;
mod ending;
mod execution;
mod history;
mod inspection;
mod iopub;
mod kernel_info;
mod kernelspec;
mod message;
mod offsets;
mod preparing;
mod queue;
mod replies;
mod sockets;
mod worker;

use std::path::Path;
use std::sync::Arc;

use crate::error::{Error, Result};
use crate::interrupt::InterruptHandle;

use self::desk::Desk;
use self::ending::Ending;
use self::history::SharedHistory;
use self::sockets::Sockets;
use self::worker::Worker;

pub use self::kernelspec::{KernelPlace, install_kernel};

/// Serves one notebook until its client ends the kernel.
///
/// # Errors
/// If the connection file cannot be read, names another machine or gives no key, or if a port is taken.
/// Everything later, a missing compiler too, is told to the client.
pub fn serve_kernel(connection_file: impl AsRef<Path>) -> Result<()> {
    let info = connection::read(connection_file.as_ref())?;
    let runtime = tokio::runtime::Builder::new_multi_thread()
        .worker_threads(2)
        .enable_all()
        .build()
        .map_err(|error| Error::Start { why: error.to_string() })?;
    let served = runtime.block_on(serve(&info));
    // A task may wait for a client that is gone.
    runtime.shutdown_background();
    served
}

async fn serve(info: &jupyter_protocol::ConnectionInfo) -> Result<()> {
    let sockets = Sockets::bind(info).await?;
    let (queue, waiting) = queue::new();
    let history = SharedHistory::default();
    let interrupt = InterruptHandle::default();
    let ending = Arc::new(Ending::new(interrupt.clone(), queue.clone()));
    let worker = Worker::new(waiting, sockets.iopub.clone(), history.clone(), interrupt, Arc::clone(&ending));
    let worker = worker.spawn()?;
    let desk = Desk { iopub: sockets.iopub.clone(), queue, history, ending: Arc::clone(&ending) };
    let serving = sockets.serve(desk);
    ending.wait().await;
    ending.finish(worker).await;
    serving.close().await;
    Ok(())
}
