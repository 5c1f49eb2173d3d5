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
#[cfg(unix)]
mod handover;
mod history;
mod inspection;
mod iopub;
mod kernel_info;
mod kernelspec;
#[cfg(unix)]
mod meeting;
mod message;
#[cfg(not(unix))]
mod no_standby;
mod offsets;
mod preparing;
mod queue;
mod replies;
mod sockets;
#[cfg(unix)]
mod standby;
mod worker;

use std::path::Path;
use std::sync::Arc;

use crate::error::{Error, Result};
use crate::interrupt::InterruptHandle;

use self::desk::Desk;
use self::ending::Ending;
use self::history::SharedHistory;
use self::sockets::Sockets;
use self::worker::{Ready, Worker};

pub use self::kernelspec::{KernelPlace, install_kernel};
#[cfg(unix)]
pub use self::meeting::send_standby_away;
#[cfg(not(unix))]
pub use self::no_standby::{send_standby_away, serve_kernel_by_standby, stand_by};
#[cfg(unix)]
pub use self::standby::{serve_kernel_by_standby, stand_by};

/// Serves one notebook until its client ends the kernel.
///
/// # Errors
/// If the connection file cannot be read, names another machine or gives no key, or if a port is taken.
/// Everything later, a missing compiler too, is told to the client.
pub fn serve_kernel(connection_file: impl AsRef<Path>) -> Result<()> {
    let runtime = runtime()?;
    let served = runtime.block_on(serve_here(connection_file.as_ref()));
    // A task may wait for a client that is gone.
    runtime.shutdown_background();
    served
}

fn runtime() -> Result<tokio::runtime::Runtime> {
    tokio::runtime::Builder::new_multi_thread()
        .worker_threads(2)
        .enable_all()
        .build()
        .map_err(|error| Error::Start { why: error.to_string() })
}

/// Serves the notebook of a connection file in this process, from the start of a session on.
async fn serve_here(connection_file: &Path) -> Result<()> {
    let info = connection::read(connection_file)?;
    let sockets = Sockets::bind(&info).await?;
    serve(sockets, InterruptHandle::default(), None, |_| ()).await
}

/// Serves the sockets by a session that is ready, or by one that is started now. `also` is given what ends it.
async fn serve<T>(
    sockets: Sockets,
    interrupt: InterruptHandle,
    ready: Option<Ready>,
    also: impl FnOnce(Arc<Ending>) -> T,
) -> Result<()> {
    let (queue, waiting) = queue::new();
    let history = SharedHistory::default();
    let ending = Arc::new(Ending::new(interrupt.clone(), queue.clone()));
    let _also = also(Arc::clone(&ending));
    let worker = Worker::new(waiting, sockets.iopub.clone(), history.clone(), interrupt, Arc::clone(&ending), ready);
    let worker = worker.spawn()?;
    let desk = Desk { iopub: sockets.iopub.clone(), queue, history, ending: Arc::clone(&ending) };
    let serving = sockets.serve(desk);
    ending.wait().await;
    ending.finish(worker).await;
    serving.close().await;
    Ok(())
}
