//! The five sockets and the tasks that serve them.

use std::time::{Duration, Instant};

use jupyter_protocol::{ConnectionInfo, JupyterMessage};
use jupyter_zmq_client::{
    KernelHeartbeatConnection, KernelIoPubXPubConnection, KernelShellConnection, RouterRecvConnection, RuntimeError,
    create_kernel_control_connection, create_kernel_heartbeat_connection, create_kernel_iopub_xpub_connection,
    create_kernel_shell_connection, create_kernel_stdin_connection,
};
use tokio::sync::mpsc::{self, UnboundedReceiver};
use tokio::task::JoinHandle;
use zeromq::{SocketRecv as _, SocketSend as _};

use super::desk::Desk;
use super::iopub::{self, IoPub};
use super::message::{Request, untyped};
use super::replies::{self, Replies};
use crate::error::{Error, Result};

/// How long the last messages may take to leave.
const LAST_MESSAGES: Duration = Duration::from_millis(300);

/// How long a port may be taken.
const PORT_PATIENCE: Duration = Duration::from_secs(2);

/// The sockets, bound and not yet served.
pub(super) struct Sockets {
    pub(super) iopub: IoPub,
    published: UnboundedReceiver<JupyterMessage>,
    iopub_socket: KernelIoPubXPubConnection,
    shell: KernelShellConnection,
    control: KernelShellConnection,
    stdin: KernelShellConnection,
    heartbeat: KernelHeartbeatConnection,
}

/// The tasks that serve the sockets.
pub(super) struct Serving {
    readers: Vec<JoinHandle<()>>,
    /// They end once everything handed to them is sent.
    writers: Vec<JoinHandle<()>>,
}

impl Sockets {
    pub(super) async fn bind(info: &ConnectionInfo) -> Result<Sockets> {
        let failed = |port: u16| {
            move |error: RuntimeError| Error::Start {
                why: format!("port {port} on {} cannot be listened on ({error})", info.ip),
            }
        };
        // Marks this kernel's messages.
        let session = JupyterMessage::new(untyped("", serde_json::json!({})), None).header.session;
        let (sender, published) = mpsc::unbounded_channel();
        let sockets = Sockets {
            iopub: IoPub::new(sender),
            published,
            heartbeat: patiently(|| create_kernel_heartbeat_connection(info)).await.map_err(failed(info.hb_port))?,
            iopub_socket: patiently(|| create_kernel_iopub_xpub_connection(info, &session))
                .await
                .map_err(failed(info.iopub_port))?,
            control: patiently(|| create_kernel_control_connection(info, &session))
                .await
                .map_err(failed(info.control_port))?,
            stdin: patiently(|| create_kernel_stdin_connection(info, &session))
                .await
                .map_err(failed(info.stdin_port))?,
            shell: patiently(|| create_kernel_shell_connection(info, &session))
                .await
                .map_err(failed(info.shell_port))?,
        };
        Ok(sockets)
    }

    /// Serves the sockets, each in a task of its own.
    pub(super) fn serve(self, desk: Desk) -> Serving {
        self.iopub.starting();
        let mut serving = Serving { readers: Vec::new(), writers: Vec::new() };
        serving.writers.push(tokio::spawn(iopub::serve(self.iopub_socket, self.published)));
        for socket in [self.control, self.shell] {
            let (send, receive) = socket.split();
            let (sender, answers) = mpsc::unbounded_channel();
            serving.writers.push(tokio::spawn(replies::serve(send, answers)));
            serving.readers.push(tokio::spawn(listen(receive, desk.clone(), Replies(sender))));
        }
        serving.readers.push(tokio::spawn(ignore(self.stdin)));
        serving.readers.push(tokio::spawn(echo(self.heartbeat)));
        serving
    }
}

impl Serving {
    /// Stops reading and sends what is still to be sent.
    pub(super) async fn close(self) {
        for reader in &self.readers {
            reader.abort();
        }
        let all = async {
            for reader in self.readers {
                let _ = reader.await;
            }
            for writer in self.writers {
                let _ = writer.await;
            }
            // The sockets' own tasks write behind the last call.
            tokio::time::sleep(Duration::from_millis(50)).await;
        };
        let _ = tokio::time::timeout(LAST_MESSAGES, all).await;
    }
}

/// Tries again for a while: on a restart the kernel that had the port may need a moment to leave it.
async fn patiently<T, F: Future<Output = std::result::Result<T, RuntimeError>>>(
    bind: impl Fn() -> F,
) -> std::result::Result<T, RuntimeError> {
    let started = Instant::now();
    loop {
        match bind().await {
            Err(_) if started.elapsed() < PORT_PATIENCE => tokio::time::sleep(Duration::from_millis(50)).await,
            done => return done,
        }
    }
}

/// Reads requests until the kernel ends.
async fn listen(mut socket: RouterRecvConnection, desk: Desk, replies: Replies) {
    loop {
        match Request::read(&mut socket).await {
            Ok(request) => desk.take(request, &replies),
            Err(RuntimeError::ZmqError(_)) => tokio::time::sleep(Duration::from_millis(5)).await,
            Err(RuntimeError::VerifyError(_) | RuntimeError::DecodeError(_) | RuntimeError::MissingHmac) => {
                eprintln!("hade: a message with a wrong signature was dropped");
            }
            Err(error) => eprintln!("hade: a message that cannot be read was dropped ({error})"),
        }
    }
}

/// Cells have no input, so nothing is ever asked for: see [`reads_input`](crate::syntax::reads_input).
async fn ignore(mut socket: KernelShellConnection) {
    loop {
        if socket.socket.recv().await.is_err() {
            tokio::time::sleep(Duration::from_millis(5)).await;
        }
    }
}

/// Sends back whatever comes, to show that the kernel lives.
async fn echo(mut heartbeat: KernelHeartbeatConnection) {
    loop {
        match heartbeat.socket.recv().await {
            Ok(beat) => {
                let _ = heartbeat.socket.send(beat).await;
            }
            Err(_) => tokio::time::sleep(Duration::from_millis(5)).await,
        }
    }
}
