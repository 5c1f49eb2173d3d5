//! What the kernel says of itself.

use jupyter_protocol::{CodeMirrorMode, KernelInfoReply, LanguageInfo, ReplyStatus};

use super::message::PROTOCOL;

pub(super) fn reply() -> KernelInfoReply {
    let version = env!("CARGO_PKG_VERSION");
    KernelInfoReply {
        status: ReplyStatus::Ok,
        protocol_version: PROTOCOL.to_owned(),
        implementation: "hade".to_owned(),
        implementation_version: version.to_owned(),
        language_info: LanguageInfo {
            name: "rust".to_owned(),
            version: env!("CARGO_PKG_RUST_VERSION").to_owned(),
            mimetype: Some("text/x-rustsrc".to_owned()),
            file_extension: Some(".rs".to_owned()),
            pygments_lexer: Some("rust".to_owned()),
            codemirror_mode: Some(CodeMirrorMode::Simple("rust".to_owned())),
            nbconvert_exporter: None,
        },
        banner: format!("Hade {version}: stress in rock, in Rust"),
        help_links: Vec::new(),
        debugger: false,
        error: None,
    }
}
