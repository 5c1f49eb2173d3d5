//! What is said when a kernel is handed to the process that stands by.

use std::env;
use std::path::{Path, PathBuf};
use std::time::Duration;

use serde::{Deserialize, Serialize};
use tokio::io::{AsyncBufReadExt as _, AsyncReadExt as _, AsyncWriteExt as _, BufReader};
use tokio::net::UnixStream;

use super::meeting::{Meeting, SERVE};
use crate::session::Place;

/// A process that stands by answers at once, or as soon as the ports are free.
const PATIENCE: Duration = Duration::from_secs(4);

/// An environment and two paths are never longer.
const LONGEST: u64 = 4 << 20;

/// What it answers when it has taken over; anything else is a reason why it has not.
const TAKEN: &str = "taken";

/// Sent later: stop the cell that runs.
pub(super) const INTERRUPT: u8 = b'i';

/// What is handed over.
#[derive(Debug, Serialize, Deserialize)]
pub(super) struct Handover {
    pub(super) connection_file: PathBuf,
    folder: PathBuf,
    environment: Vec<(String, String)>,
}

impl Handover {
    /// This process's kernel.
    fn of(connection_file: &Path) -> Option<Handover> {
        Some(Handover {
            connection_file: std::path::absolute(connection_file).ok()?,
            folder: env::current_dir().ok()?,
            environment: environment(),
        })
    }

    /// The place as seen from this process.
    pub(super) fn place(&self) -> Place {
        let ours = environment();
        let set = self.environment.iter().filter(|pair| !ours.contains(pair));
        let gone = ours.iter().filter(|(name, _)| !self.environment.iter().any(|(other, _)| other == name));
        let set = set.map(|(name, value)| (name.clone(), Some(value.clone())));
        let gone = gone.map(|(name, _)| (name.clone(), None));
        let mut environment: Vec<_> = set.chain(gone).collect();
        environment.sort();
        Place { folder: self.folder.clone(), environment }
    }
}

/// The variables a cell may look at. Those by which the session itself works stay as they are.
fn environment() -> Vec<(String, String)> {
    let ours = |name: &str| {
        name.starts_with("EVCXR_")
            || name.starts_with("HADE_")
            || name.contains('=')
            || ["LD_LIBRARY_PATH", "DYLD_LIBRARY_PATH", "RUST_SRC_PATH", "_", "PWD", "OLDPWD", "SHLVL"].contains(&name)
    };
    let text = |text: std::ffi::OsString| text.into_string().ok();
    env::vars_os()
        .filter_map(|(name, value)| Some((text(name)?, text(value)?)))
        .filter(|(name, value)| !ours(name) && !name.is_empty() && !value.contains('\0'))
        .collect()
}

/// Hands a kernel to the process that stands by. The stream is its life line: the kernel ends with it. `None`:
/// nobody takes it.
pub(super) async fn hand_over(connection_file: &Path) -> Option<UnixStream> {
    let meeting = Meeting::here().ok()?;
    let handover = Handover::of(connection_file)?;
    let asked = async {
        let mut stream = UnixStream::connect(meeting.socket()).await.ok()?;
        let mut said = vec![SERVE];
        serde_json::to_writer(&mut said, &handover).ok()?;
        said.push(b'\n');
        stream.write_all(&said).await.ok()?;
        let mut answer = String::new();
        BufReader::new(&mut stream).take(LONGEST).read_line(&mut answer).await.ok()?;
        match answer.trim() {
            TAKEN => Some(stream),
            why => {
                if !why.is_empty() {
                    eprintln!("hade: the process that stands by cannot take over: {why}");
                }
                None
            }
        }
    };
    tokio::time::timeout(PATIENCE, asked).await.ok()?
}

/// Reads what is handed over, after its first byte.
pub(super) async fn read(stream: &mut UnixStream) -> Option<Handover> {
    let mut line = String::new();
    let reading = async { BufReader::new(stream).take(LONGEST).read_line(&mut line).await };
    tokio::time::timeout(PATIENCE, reading).await.ok()?.ok()?;
    serde_json::from_str(&line).ok()
}

/// Answers that the kernel is taken over, or why it is not.
pub(super) async fn answer(stream: &mut UnixStream, why_not: Option<&str>) -> bool {
    let line = format!("{}\n", why_not.unwrap_or(TAKEN).replace('\n', " "));
    stream.write_all(line.as_bytes()).await.is_ok()
}
