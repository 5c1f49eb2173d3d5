//! The files attached to the PDF: the record, its notebook, and the data files, each held against
//! the hash that the record has of it.

use std::path::Path;

use hade::sheet::{DataFile, Record};

use crate::digest::sha256;
use crate::error::{Error, Result};

/// Most bytes of one data file that are attached.
const MOST_BYTES: u64 = 64 << 20;
/// The name of the record in the PDF.
pub(crate) const RECORD_NAME: &str = "record.json";

/// A file to attach.
#[derive(Clone, Debug)]
pub(crate) struct Attachment {
    /// Its name in the PDF.
    pub name: String,
    /// What it is.
    pub about: String,
    /// Its media type.
    pub mime: &'static str,
    /// Its relationship to the memo, in PDF's words.
    pub relationship: &'static str,
    /// The path that the notebook wrote, for data.
    pub path: Option<String>,
    /// SHA-256, lower-case hexadecimal.
    pub sha256: String,
    /// Its bytes.
    pub bytes: Vec<u8>,
}

/// All attachments, the record first.
pub(crate) fn collect(
    record_json: &str,
    record: &Record,
    notebook: (&str, Vec<u8>),
    folder: &Path,
) -> Result<Vec<Attachment>> {
    let mut all = vec![Attachment {
        name: RECORD_NAME.to_owned(),
        about: "the calculation record with all numbers in full".to_owned(),
        mime: "application/json",
        relationship: "source",
        path: None,
        sha256: sha256(record_json.as_bytes()),
        bytes: record_json.as_bytes().to_vec(),
    }];
    let (name, bytes) = notebook;
    all.push(Attachment {
        name: free_name(&all, file_name(name)),
        about: "the notebook that made the record, without its outputs".to_owned(),
        mime: "application/x-ipynb+json",
        relationship: "source",
        path: None,
        sha256: sha256(&bytes),
        bytes,
    });
    for file in &record.data {
        let bytes = read_data(file, folder)?;
        all.push(Attachment {
            name: free_name(&all, file_name(&file.path)),
            about: if file.about.trim().is_empty() { "data file".to_owned() } else { file.about.clone() },
            mime: mime(&file.path),
            relationship: "data",
            path: Some(file.path.clone()),
            sha256: file.sha256.clone(),
            bytes,
        });
    }
    Ok(all)
}

fn read_data(file: &DataFile, folder: &Path) -> Result<Vec<u8>> {
    let bad = |why: String| Error::Data { path: file.path.clone(), why };
    if file.bytes > MOST_BYTES {
        return Err(bad(format!("it is {} bytes; the most that is attached is {MOST_BYTES}", file.bytes)));
    }
    let path = folder.join(&file.path);
    let about = std::fs::metadata(&path).map_err(|e| match e.kind() {
        std::io::ErrorKind::NotFound => bad("there is no such file beside the notebook".to_owned()),
        _ => bad(format!("it cannot be read: {e}")),
    })?;
    let changed = "it is not the file the record was made from (its SHA-256 differs); run the notebook again, and do not change data while it runs";
    if about.len() != file.bytes {
        return Err(bad(changed.to_owned()));
    }
    let bytes = std::fs::read(&path).map_err(|e| bad(format!("it cannot be read: {e}")))?;
    if sha256(&bytes) != file.sha256 {
        return Err(bad(changed.to_owned()));
    }
    Ok(bytes)
}

/// The last part of a path, in characters every viewer takes.
fn file_name(path: &str) -> String {
    let last = path.rsplit(['/', '\\']).find(|part| !part.is_empty()).unwrap_or("file");
    let name: String =
        last.chars().map(|c| if c.is_alphanumeric() || "-_.() ".contains(c) { c } else { '-' }).collect();
    match name.as_str() {
        "." | ".." => "file".to_owned(),
        _ => name,
    }
}

/// The name, or the name with a number before it when it is taken.
fn free_name(taken: &[Attachment], name: String) -> String {
    let is_free = |name: &str| !taken.iter().any(|a| a.name.eq_ignore_ascii_case(name));
    if is_free(&name) {
        return name;
    }
    (2..).map(|n| format!("{n}-{name}")).find(|n| is_free(n)).unwrap_or(name)
}

fn mime(path: &str) -> &'static str {
    match path.rsplit('.').next().unwrap_or_default().to_ascii_lowercase().as_str() {
        "csv" => "text/csv",
        "las" | "txt" | "dat" => "text/plain",
        "json" => "application/json",
        "toml" => "application/toml",
        "pdf" => "application/pdf",
        "png" => "image/png",
        "jpg" | "jpeg" => "image/jpeg",
        "xlsx" => "application/vnd.openxmlformats-officedocument.spreadsheetml.sheet",
        _ => "application/octet-stream",
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn names_are_plain_and_unique() {
        assert_eq!(file_name("../data/kf3 survey.csv"), "kf3 survey.csv");
        assert_eq!(file_name("a\\b\\..\\x:y.csv"), "x-y.csv");
        assert_eq!(file_name(".."), "file");
        let taken = [Attachment {
            name: "record.json".to_owned(),
            about: String::new(),
            mime: "",
            relationship: "",
            path: None,
            sha256: String::new(),
            bytes: Vec::new(),
        }];
        assert_eq!(free_name(&taken, "Record.json".to_owned()), "2-Record.json");
    }
}
