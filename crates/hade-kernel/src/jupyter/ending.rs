//! Stopping the cell that runs, and the kernel.

use std::process::Child;
use std::sync::{Arc, Mutex, PoisonError};
use std::time::Duration;

use tokio::sync::{Notify, oneshot};

use super::queue::Queue;
use crate::interrupt::InterruptHandle;
use crate::session;

/// A client kills a kernel that takes longer than about 2½ s to end.
const PATIENCE: Duration = Duration::from_millis(1200);

/// Set by the client to its own process when the kernel is to end with it.
pub(super) const PARENT_VAR: &str = "JPY_PARENT_PID";

/// Stops the cell that runs, and the kernel.
pub(super) struct Ending {
    interrupt: InterruptHandle,
    queue: Queue,
    /// The process that runs the cells.
    process: Mutex<Option<Arc<Mutex<Child>>>>,
    asked: Notify,
}

impl Ending {
    pub(super) fn new(interrupt: InterruptHandle, queue: Queue) -> Ending {
        Ending { interrupt, queue, process: Mutex::default(), asked: Notify::new() }
    }

    /// Stops the cell that runs and those that wait.
    pub(super) fn interrupt(&self) {
        self.queue.abort_cells();
        self.interrupt.interrupt();
    }

    /// A session has started; this process runs its cells.
    pub(super) fn watch(&self, process: Arc<Mutex<Child>>) {
        *self.process.lock().unwrap_or_else(PoisonError::into_inner) = Some(process);
    }

    /// Ends the kernel.
    pub(super) fn end(&self) {
        self.asked.notify_one();
    }

    /// Waits for a reason to end: a client asks, a signal comes, or the client is gone.
    pub(super) async fn wait(&self) {
        tokio::select! {
            () = self.asked.notified() => {}
            () = self.signals() => {}
            () = parent_is_gone() => {}
        }
    }

    /// Ends the session and everything it started, and leaves no files behind.
    pub(super) async fn finish(&self, worker: oneshot::Receiver<()>) {
        self.queue.close();
        if let Some(process) = self.process.lock().unwrap_or_else(PoisonError::into_inner).as_ref() {
            let _ = process.lock().unwrap_or_else(PoisonError::into_inner).kill();
        }
        if tokio::time::timeout(PATIENCE, worker).await.is_err() {
            // It is compiling. What it started must end before its folder can go.
            end_own_group();
            tokio::time::sleep(Duration::from_millis(50)).await;
            session::remove_folders();
        }
    }

    async fn signals(&self) {
        tokio::select! {
            () = terminated() => {}
            () = async {
                loop {
                    interrupted().await;
                    self.interrupt();
                }
            } => {}
        }
    }
}

/// Waits for Ctrl-C.
pub(super) async fn interrupted() {
    if tokio::signal::ctrl_c().await.is_err() {
        std::future::pending().await
    }
}

/// Waits for a signal that asks this process to end.
#[cfg(unix)]
pub(super) async fn terminated() {
    use tokio::signal::unix::{SignalKind, signal};
    let (Ok(mut terminate), Ok(mut hangup)) = (signal(SignalKind::terminate()), signal(SignalKind::hangup())) else {
        return std::future::pending().await;
    };
    tokio::select! {
        _ = terminate.recv() => {}
        _ = hangup.recv() => {}
    }
}

#[cfg(not(unix))]
pub(super) async fn terminated() {
    std::future::pending().await
}

/// Waits until the client that started this kernel has died.
#[cfg(unix)]
pub(super) async fn parent_is_gone() {
    if std::env::var_os(PARENT_VAR).is_none() {
        return std::future::pending().await;
    }
    let parent = std::os::unix::process::parent_id();
    while parent == std::os::unix::process::parent_id() {
        tokio::time::sleep(Duration::from_secs(1)).await;
    }
}

#[cfg(not(unix))]
pub(super) async fn parent_is_gone() {
    std::future::pending().await
}

/// Ends the compilers that still run, when they are in a group of processes of this kernel's own.
#[cfg(unix)]
fn end_own_group() {
    // SAFETY: plain system calls. Signals of this kind are caught in this process.
    unsafe {
        if libc::getpgrp() == libc::getpid() {
            libc::kill(0, libc::SIGTERM);
        }
    }
}

#[cfg(not(unix))]
fn end_own_group() {}
