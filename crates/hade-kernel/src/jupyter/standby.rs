//! A process that stands by: a session that is warm before anybody asks for one.
//!
//! ```text
//!  Jupyter ──starts──► kernel (hade kernel start --standby) ──connection file, folder, environment──► standby
//!     │                   │ lives as long as ◄──────────────── life line (the same stream) ────────────► │
//!     └───────────────────┴────────────────── the five sockets ──────────────────────────────────────────┘
//! ```
//!
//! It serves one kernel and ends with it; the kernel's own process starts the next. Nobody who comes takes it
//! away: it leaves after a time, and when its cache is cleaned.

use std::fs;
use std::path::Path;
use std::sync::Arc;
use std::time::Duration;

use tokio::io::{AsyncReadExt as _, AsyncWriteExt as _};
use tokio::net::{UnixListener, UnixStream};

use super::ending::{self, Ending};
use super::handover::{self, Handover, INTERRUPT};
use super::meeting::{LEAVE, Meeting, SERVE, start_another};
use super::worker::Ready;
use super::{connection, serve};
use crate::error::{Error, Result};
use crate::interrupt::InterruptHandle;
use crate::prepare::prepare;
use crate::progress::Silent;
use crate::session::{Session, SessionOptions};

/// Nobody who comes in this time: it leaves.
const IDLE: Duration = Duration::from_secs(30 * 60);

/// The next one is warmed once the user's own first cells have run.
const NEXT_AFTER: Duration = Duration::from_secs(20);

/// How often it is looked whether what the session was started from is still there.
const LOOK_EVERY: Duration = Duration::from_secs(10);

/// Stands by for one kernel, then serves it.
///
/// # Errors
/// If the libraries cannot be prepared, the session does not start or the place cannot be made.
pub fn stand_by(after: Duration, idle: Option<Duration>) -> Result<()> {
    let meeting = Meeting::here()?;
    meeting.make_folder()?;
    let Some(held) = meeting.lock()? else {
        return Ok(());
    };
    let runtime = super::runtime()?;
    let sent_away = async {
        tokio::select! {
            () = tokio::time::sleep(after) => false,
            () = held.is_lost() => true,
        }
    };
    if runtime.block_on(sent_away) {
        return Ok(());
    }
    let interrupt = InterruptHandle::default();
    let prepared = prepare(&mut Silent)?;
    let options = SessionOptions { interrupt: interrupt.clone(), ..SessionOptions::default() };
    let mut session = Session::start(&prepared, options)?;
    session.warm();
    let socket = meeting.socket();
    let served = runtime.block_on(async {
        // One of a process that was killed; only the holder of the lock comes here.
        let _ = fs::remove_file(&socket);
        let listener = UnixListener::bind(&socket).map_err(Error::file("listen on", &socket))?;
        let came = tokio::select! {
            came = tokio::time::timeout(idle.unwrap_or(IDLE), wait(&listener)) => came.ok(),
            () = held.is_lost() => None,
            () = gone(&prepared) => None,
            () = ending::terminated() => None,
        };
        let _ = fs::remove_file(&socket);
        drop((listener, held));
        match came {
            Some(Visitor::Kernel(stream, handover)) => take_over(stream, &handover, session, interrupt).await,
            // The stream closes when the session has gone.
            Some(Visitor::Sender(_stream)) => {
                drop(session);
                Ok(())
            }
            None => Ok(()),
        }
    });
    runtime.shutdown_background();
    served
}

/// Who came.
enum Visitor {
    Kernel(UnixStream, Handover),
    /// Sends it away.
    Sender(UnixStream),
}

/// Waits for somebody of this user who says something sensible.
async fn wait(listener: &UnixListener) -> Visitor {
    loop {
        let Ok((mut stream, _)) = listener.accept().await else {
            tokio::time::sleep(Duration::from_millis(100)).await;
            continue;
        };
        // SAFETY: a plain system call.
        let ours = unsafe { libc::geteuid() };
        if stream.peer_cred().is_ok_and(|peer| peer.uid() == ours) {
            match tokio::time::timeout(Duration::from_secs(1), stream.read_u8()).await {
                Ok(Ok(SERVE)) => {
                    if let Some(handover) = handover::read(&mut stream).await {
                        return Visitor::Kernel(stream, handover);
                    }
                }
                Ok(Ok(LEAVE)) => return Visitor::Sender(stream),
                _ => {}
            }
        }
    }
}

/// Waits until the session could no longer compile anything.
async fn gone(prepared: &crate::prepare::Prepared) {
    while prepared.is_there() {
        tokio::time::sleep(LOOK_EVERY).await;
    }
}

async fn take_over(
    mut stream: UnixStream,
    handover: &Handover,
    session: Session,
    interrupt: InterruptHandle,
) -> Result<()> {
    let info = match connection::read(&handover.connection_file) {
        Ok(info) => info,
        Err(error) => {
            handover::answer(&mut stream, Some(&error.to_string())).await;
            return Err(error);
        }
    };
    let ready = Ready { session, place: handover.place() };
    let sockets = match super::sockets::Sockets::bind(&info).await {
        Ok(sockets) => sockets,
        Err(error) => {
            handover::answer(&mut stream, Some(&error.to_string())).await;
            return Err(error);
        }
    };
    if !handover::answer(&mut stream, None).await {
        return Ok(());
    }
    serve(sockets, interrupt, Some(ready), |ending| tokio::spawn(follow(stream, ending))).await
}

/// Ends the kernel when the process that Jupyter started is gone, and stops cells for it.
async fn follow(mut stream: UnixStream, ending: Arc<Ending>) {
    loop {
        match stream.read_u8().await {
            Ok(INTERRUPT) => ending.interrupt(),
            Ok(_) => {}
            Err(_) => return ending.end(),
        }
    }
}

/// Serves a notebook by the process that stands by, and has another take its place; serves it itself when
/// there is none.
///
/// # Errors
/// As [`serve_kernel`](super::serve_kernel).
pub fn serve_kernel_by_standby(connection_file: impl AsRef<Path>) -> Result<()> {
    let connection_file = connection_file.as_ref();
    let runtime = super::runtime()?;
    let taken = runtime.block_on(handover::hand_over(connection_file));
    if let Err(error) = start_another(NEXT_AFTER, None) {
        eprintln!("hade: no other process stands by: {error}");
    }
    let served = match taken {
        Some(stream) => {
            runtime.block_on(live_with(stream));
            Ok(())
        }
        None => runtime.block_on(super::serve_here(connection_file)),
    };
    runtime.shutdown_background();
    served
}

/// Lives until the kernel ends, or ends it.
async fn live_with(stream: UnixStream) {
    let (mut theirs, mut ours) = stream.into_split();
    let ended = async { while theirs.read_u8().await.is_ok() {} };
    let interrupts = async {
        loop {
            ending::interrupted().await;
            let _ = ours.write_u8(INTERRUPT).await;
        }
    };
    tokio::select! {
        () = ended => {}
        () = interrupts => {}
        () = ending::terminated() => {}
        () = ending::parent_is_gone() => {}
    }
}
