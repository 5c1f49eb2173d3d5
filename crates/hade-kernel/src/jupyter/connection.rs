//! The connection file: where to listen, and the key.

use std::fs;
use std::net::IpAddr;
use std::path::Path;

use jupyter_protocol::ConnectionInfo;
use jupyter_protocol::connection_info::Transport;

use crate::error::{Error, Result};

/// The one scheme in use.
const SCHEME: &str = "hmac-sha256";

/// Reads a connection file and refuses what is not safe.
///
/// Whoever can reach the sockets and knows the key can run any code as this user. So the sockets are
/// opened to this machine only, and a file that others can read is closed to them.
pub(super) fn read(path: &Path) -> Result<ConnectionInfo> {
    let refuse = |why: &str| Error::Connection { path: path.to_path_buf(), why: why.to_owned() };
    let text = fs::read(path).map_err(Error::file("read", path))?;
    let info: ConnectionInfo =
        serde_json::from_slice(&text).map_err(|error| refuse(&format!("it is no connection file ({error})")))?;
    let local = match info.transport {
        Transport::IPC => true,
        Transport::TCP => info.ip == "localhost" || info.ip.parse::<IpAddr>().is_ok_and(|ip| ip.is_loopback()),
    };
    if !local {
        return Err(refuse(&format!(
            "it asks to listen on {}, where other machines could run code here; set the address to 127.0.0.1",
            info.ip
        )));
    }
    if info.key.is_empty() {
        return Err(refuse(
            "it gives no key, so anybody on this machine could run code; start the kernel from Jupyter",
        ));
    }
    if info.signature_scheme != SCHEME {
        return Err(refuse(&format!("it asks for signatures by {}; only {SCHEME} is known", info.signature_scheme)));
    }
    close_to_others(path);
    Ok(info)
}

#[cfg(unix)]
fn close_to_others(path: &Path) {
    use std::os::unix::fs::PermissionsExt as _;
    let Ok(meta) = fs::metadata(path) else {
        return;
    };
    let mode = meta.permissions().mode() & 0o777;
    if mode & 0o077 == 0 {
        return;
    }
    let shown = path.display();
    match fs::set_permissions(path, fs::Permissions::from_mode(0o600)) {
        Ok(()) => eprintln!("hade: {shown} could be read by others (mode {mode:o}); it is now for its owner only"),
        Err(error) => eprintln!("hade: {shown} can be read by others (mode {mode:o}), who could run code: {error}"),
    }
}

#[cfg(not(unix))]
fn close_to_others(_: &Path) {}

#[cfg(test)]
mod tests {
    use serde_json::json;

    use super::*;

    fn read_with(change: impl FnOnce(&mut serde_json::Value)) -> std::result::Result<ConnectionInfo, String> {
        let mut content = json!({
            "ip": "127.0.0.1", "transport": "tcp", "shell_port": 1, "iopub_port": 2, "stdin_port": 3,
            "control_port": 4, "hb_port": 5, "key": "secret", "signature_scheme": "hmac-sha256", "extra": 1,
        });
        change(&mut content);
        let folder = tempfile::tempdir().map_err(|error| error.to_string())?;
        let path = folder.path().join("kernel.json");
        fs::write(&path, content.to_string()).map_err(|error| error.to_string())?;
        let read = read(&path).map_err(|error| error.to_string());
        #[cfg(unix)]
        if read.is_ok() {
            use std::os::unix::fs::PermissionsExt as _;
            let mode = fs::metadata(&path).map_err(|error| error.to_string())?.permissions().mode();
            assert_eq!(mode & 0o077, 0);
        }
        read
    }

    #[test]
    fn only_this_machine_is_listened_to() {
        for here in ["127.0.0.1", "localhost", "::1", "127.3.2.1"] {
            assert!(read_with(|info| info["ip"] = json!(here)).is_ok(), "{here}");
        }
        for elsewhere in ["0.0.0.0", "192.168.0.4", "::", "example.org", ""] {
            let why = read_with(|info| info["ip"] = json!(elsewhere)).err().unwrap_or_default();
            assert!(why.contains("set the address to 127.0.0.1"), "{elsewhere}: {why}");
        }
    }

    #[test]
    fn a_key_and_the_known_scheme_are_needed() {
        assert!(read_with(|info| info["key"] = json!("")).is_err_and(|why| why.contains("no key")));
        assert!(read_with(|info| info["signature_scheme"] = json!("hmac-md5")).is_err_and(|why| why.contains("md5")));
        assert!(read_with(|info| info["hb_port"] = json!("x")).is_err_and(|why| why.contains("no connection file")));
    }
}
