//! The notebook file: read, filled with outputs, written back.
//!
//! The file is kept as JSON, so whatever this program does not know (metadata of any tool) comes
//! back as it was.

use std::fs;
use std::io::Write as _;
use std::path::{Path, PathBuf};

use serde::Serialize as _;
use serde_json::{Map, Value, json};

use crate::bundle;
use crate::cell::{CellOutcome, Output, is_aside};
use crate::error::{Error, Result};

/// A notebook of format 4.
#[derive(Debug, Clone, PartialEq)]
pub struct Notebook {
    path: PathBuf,
    json: Value,
    /// The file as it was read, to see whether someone else writes it meanwhile.
    read: Vec<u8>,
}

impl Notebook {
    /// Reads a notebook.
    ///
    /// # Errors
    /// [`Error::File`] if it cannot be read, [`Error::NotANotebook`] with what it lacks,
    /// [`Error::NotebookVersion`] if its format is not 4.
    pub fn read(path: impl AsRef<Path>) -> Result<Notebook> {
        let path = path.as_ref();
        if path.is_dir() {
            return Err(not_one(path, "it is a folder"));
        }
        let bytes = fs::read(path).map_err(Error::file("read", path))?;
        Notebook::from_bytes(path, &bytes)
    }

    /// Reads a notebook from memory; `path` serves messages and [`Notebook::folder`].
    ///
    /// # Errors
    /// As [`Notebook::read`].
    pub fn from_bytes(path: impl AsRef<Path>, bytes: &[u8]) -> Result<Notebook> {
        let path = path.as_ref();
        let read = bytes.to_vec();
        let bytes = bytes.strip_prefix(b"\xef\xbb\xbf").unwrap_or(bytes);
        if bytes.iter().all(u8::is_ascii_whitespace) {
            return Err(not_one(path, "it is empty"));
        }
        let mut json: Value =
            serde_json::from_slice(bytes).map_err(|error| not_one(path, &format!("it is not JSON ({error})")))?;
        let format = &json["nbformat"];
        if format.is_null() || !json.is_object() {
            return Err(not_one(path, "it is JSON without the key \"nbformat\""));
        }
        if format.as_u64() != Some(4) {
            return Err(Error::NotebookVersion { path: path.to_path_buf(), found: format.to_string() });
        }
        let Some(cells) = json["cells"].as_array_mut() else {
            return Err(not_one(path, "it has no list of cells"));
        };
        for (at, cell) in cells.iter_mut().enumerate() {
            let number = at + 1;
            if !cell["cell_type"].is_string() {
                return Err(not_one(path, &format!("cell {number} says no \"cell_type\"")));
            }
            if source(cell).is_none() {
                return Err(not_one(path, &format!("the source of cell {number} is no text")));
            }
            if let Some(cell) = cell.as_object_mut() {
                cell.entry("metadata").or_insert_with(|| json!({}));
            }
        }
        if !json["metadata"].is_object() {
            json["metadata"] = json!({});
        }
        if !json["nbformat_minor"].is_u64() {
            json["nbformat_minor"] = json!(0);
        }
        Ok(Notebook { path: path.to_path_buf(), json, read })
    }

    /// The file it was read from.
    pub fn path(&self) -> &Path {
        &self.path
    }

    /// The folder it lies in, where its cells run.
    pub fn folder(&self) -> &Path {
        match self.path.parent() {
            Some(folder) if !folder.as_os_str().is_empty() => folder,
            _ => Path::new("."),
        }
    }

    /// The notebook as JSON.
    pub fn json(&self) -> &Value {
        &self.json
    }

    /// The cells that hold code: place among all cells and source.
    pub fn code_cells(&self) -> Vec<(usize, String)> {
        self.json["cells"]
            .as_array()
            .into_iter()
            .flatten()
            .enumerate()
            .filter(|(_, cell)| cell["cell_type"] == "code")
            .filter_map(|(at, cell)| Some((at, source(cell)?)))
            .filter(|(_, source)| !source.trim().is_empty())
            .collect()
    }

    /// Removes every output and execution number.
    pub fn clear_outputs(&mut self) {
        for cell in self.json["cells"].as_array_mut().into_iter().flatten() {
            if cell["cell_type"] == "code" {
                cell["outputs"] = json!([]);
                cell["execution_count"] = Value::Null;
            }
        }
    }

    /// Fills in what running a cell gave. `at` is its place among all cells.
    pub fn set_outcome(&mut self, at: usize, count: usize, outcome: &CellOutcome) {
        if let Some(cell) = self.json["cells"].get_mut(at) {
            cell["outputs"] = Value::Array(outputs(outcome, count));
            cell["execution_count"] = json!(count);
        }
    }

    /// The last output of a mime type, searched from the end of the notebook. JSON types give the
    /// JSON value, others a string.
    pub fn last_output(&self, mime: &str) -> Option<Value> {
        self.json["cells"]
            .as_array()?
            .iter()
            .rev()
            .filter_map(|cell| cell["outputs"].as_array())
            .flat_map(|outputs| outputs.iter().rev())
            .find_map(|output| output["data"].get(mime))
            .map(|content| match joined(content) {
                Some(text) if !bundle::is_json(mime) => Value::String(text),
                _ => content.clone(),
            })
    }

    /// The file's bytes, laid out as Jupyter lays it out.
    ///
    /// # Errors
    /// [`Error::File`] if it cannot be written as JSON.
    pub fn to_bytes(&self) -> Result<Vec<u8>> {
        let mut bytes = Vec::new();
        let layout = serde_json::ser::PrettyFormatter::with_indent(b" ");
        let mut serializer = serde_json::Serializer::with_formatter(&mut bytes, layout);
        self.json.serialize(&mut serializer).map_err(|error| Error::file("write", &self.path)(error.into()))?;
        bytes.push(b'\n');
        Ok(bytes)
    }

    /// Writes the notebook: beside the target first, then renamed, so the target is never half
    /// written.
    ///
    /// # Errors
    /// [`Error::File`] if the folder is missing, not writable or full, [`Error::Changed`] if the
    /// target is the file that was read and is another now; the target is unchanged.
    pub fn save(&self, target: impl AsRef<Path>) -> Result<()> {
        let target = target.as_ref();
        let bytes = self.to_bytes()?;
        let itself = same_file(target, &self.path);
        if itself && fs::read(target).is_ok_and(|now| now != self.read) {
            return Err(Error::Changed { path: target.to_path_buf() });
        }
        // A link stays a link: what it points to is replaced.
        let target = fs::canonicalize(target).unwrap_or_else(|_| target.to_path_buf());
        let folder = match target.parent() {
            Some(folder) if !folder.as_os_str().is_empty() => folder,
            _ => Path::new("."),
        };
        let write = || -> std::io::Result<()> {
            let mut aside = tempfile::Builder::new().prefix(".hade-").suffix(".part").tempfile_in(folder)?;
            aside.write_all(&bytes)?;
            aside.as_file().sync_all()?;
            let permissions = match fs::metadata(&target) {
                Ok(meta) => Some(meta.permissions()),
                Err(_) => default_permissions(),
            };
            if let Some(permissions) = permissions {
                aside.as_file().set_permissions(permissions)?;
            }
            aside.persist(&target).map_err(|error| error.error)?;
            Ok(())
        };
        write().map_err(Error::file("write", &target))
    }
}

fn same_file(a: &Path, b: &Path) -> bool {
    matches!((fs::canonicalize(a), fs::canonicalize(b)), (Ok(a), Ok(b)) if a == b)
}

/// A temporary file is private to its owner; a notebook is an ordinary file.
#[cfg(unix)]
fn default_permissions() -> Option<fs::Permissions> {
    use std::os::unix::fs::PermissionsExt as _;
    Some(fs::Permissions::from_mode(0o644))
}

#[cfg(not(unix))]
fn default_permissions() -> Option<fs::Permissions> {
    None
}

fn not_one(path: &Path, why: &str) -> Error {
    Error::NotANotebook { path: path.to_path_buf(), why: why.to_owned() }
}

fn source(cell: &Value) -> Option<String> {
    joined(&cell["source"])
}

/// Text that may be stored as a list of lines.
fn joined(value: &Value) -> Option<String> {
    match value {
        Value::String(text) => Some(text.clone()),
        Value::Array(lines) => lines.iter().map(Value::as_str).collect(),
        _ => None,
    }
}

/// Text as the list of lines the file format prefers.
fn lines(text: &str) -> Value {
    text.split_inclusive('\n').collect()
}

fn outputs(outcome: &CellOutcome, count: usize) -> Vec<Value> {
    let mut list: Vec<Value> = Vec::new();
    // Where the displays are that a later one of the same name replaces.
    let mut named: Vec<(&str, usize)> = Vec::new();
    let passes = |output: &Output| matches!(output, Output::Display(bundle) if bundle::is_passing(bundle));
    let last = outcome.outputs.iter().rposition(|output| !is_aside(output) && !passes(output));
    let mut result = None;
    for (at, output) in outcome.outputs.iter().enumerate() {
        match output {
            Output::Text { stream, text } => list.push(json!({
                "output_type": "stream",
                "name": stream.name(),
                "text": lines(text),
            })),
            Output::Display(bundle) if bundle::is_passing(bundle) => {}
            Output::Display(bundle) => {
                let data: Map<String, Value> =
                    bundle::shown(bundle).map(|(mime, content)| (mime.to_owned(), stored(mime, content))).collect();
                // The value a cell ends in is its result where it is text alone; anything richer
                // is a display, which every client shows.
                if bundle::is_plain(bundle) && Some(at) == last && outcome.error.is_none() {
                    result = Some(json!({
                        "output_type": "execute_result",
                        "execution_count": count,
                        "data": data,
                        "metadata": {},
                    }));
                    continue;
                }
                let display = json!({ "output_type": "display_data", "data": data, "metadata": {} });
                let Some(id) = bundle::display_id(bundle) else {
                    list.push(display);
                    continue;
                };
                match named.iter().find(|(name, _)| *name == id) {
                    Some((_, at)) => list[*at] = display,
                    None => {
                        named.push((id, list.len()));
                        list.push(display);
                    }
                }
            }
        }
    }
    list.extend(result);
    if let Some(error) = &outcome.error {
        let traceback: Vec<&str> = error.detail.lines().collect();
        list.push(json!({
            "output_type": "error",
            "ename": error.name,
            "evalue": error.sentence,
            "traceback": traceback,
        }));
    }
    list
}

/// Contents as a file holds them: text as lines.
fn stored(mime: &str, content: &str) -> Value {
    match bundle::json_value(mime, content) {
        Value::String(text) if mime.starts_with("text/") || mime == "image/svg+xml" => lines(&text),
        value => value,
    }
}

#[cfg(test)]
mod tests {
    use std::collections::BTreeMap;

    use super::*;
    use crate::cell::{CellError, Stream};

    const SMALL: &str = r##"{
 "cells": [
  {"cell_type": "markdown", "metadata": {"x": 1}, "source": ["# a\n", "b"]},
  {"cell_type": "code", "execution_count": 9, "metadata": {}, "outputs": [], "source": "let a = 1;"},
  {"cell_type": "code", "execution_count": null, "metadata": {}, "outputs": [], "source": []}
 ],
 "metadata": {"kernelspec": {"name": "hade", "display_name": "Hade"}, "other": 0.1},
 "nbformat": 4,
 "nbformat_minor": 2
}"##;

    fn outcome() -> CellOutcome {
        CellOutcome {
            outputs: vec![
                Output::Text { stream: Stream::Stdout, text: "a\nb".into() },
                Output::Display(BTreeMap::from([
                    ("text/html".into(), "<b>".into()),
                    (crate::RECORD_MIME.into(), "{\"x\":0.1}".into()),
                ])),
                Output::Display(BTreeMap::from([("text/plain".into(), "3".into())])),
            ],
            ..CellOutcome::default()
        }
    }

    #[test]
    fn outputs_are_filled_in_and_the_rest_kept() -> Result<()> {
        let mut notebook = Notebook::from_bytes("a.ipynb", SMALL.as_bytes())?;
        assert_eq!(notebook.code_cells(), [(1, "let a = 1;".to_owned())]);
        notebook.clear_outputs();
        assert!(notebook.json()["cells"][1]["execution_count"].is_null());
        notebook.set_outcome(1, 1, &outcome());
        let outputs = &notebook.json()["cells"][1]["outputs"];
        assert_eq!(outputs[0]["text"], json!(["a\n", "b"]));
        assert_eq!(outputs[1]["output_type"], "display_data");
        assert_eq!(outputs[1]["data"][crate::RECORD_MIME]["x"], json!(0.1));
        assert_eq!(outputs[2]["output_type"], "execute_result");
        assert_eq!(notebook.last_output(crate::RECORD_MIME), Some(json!({"x": 0.1})));
        assert_eq!(notebook.last_output("text/html"), Some(json!("<b>")));
        assert_eq!(notebook.json()["metadata"]["other"], json!(0.1));
        assert_eq!(notebook.json()["cells"][0]["source"], json!(["# a\n", "b"]));
        Ok(())
    }

    #[test]
    fn a_result_is_one_though_standard_error_follows() {
        let result = Output::Display(BTreeMap::from([("text/plain".into(), "3".into())]));
        let text = |stream| Output::Text { stream, text: "a".into() };
        let kinds = |output| {
            let outcome = CellOutcome { outputs: vec![result.clone(), output], ..CellOutcome::default() };
            outputs(&outcome, 1).iter().map(|o| o["output_type"].clone()).collect::<Vec<_>>()
        };
        assert_eq!(kinds(text(Stream::Stderr)), ["stream", "execute_result"]);
        assert_eq!(kinds(text(Stream::Stdout)), ["display_data", "stream"]);
    }

    #[test]
    fn a_display_replaces_an_earlier_one_of_its_name() {
        let named = |text: &str| {
            Output::Display(BTreeMap::from([
                ("text/plain".into(), text.into()),
                (crate::DISPLAY_ID_MIME.into(), "bar".into()),
            ]))
        };
        let between = Output::Text { stream: Stream::Stdout, text: "a".into() };
        let outcome = CellOutcome { outputs: vec![named("1"), between, named("2")], ..CellOutcome::default() };
        let list = outputs(&outcome, 1);
        assert_eq!(list.len(), 2);
        assert_eq!(list[0]["data"], json!({"text/plain": ["2"]}));
    }

    #[test]
    fn a_bar_is_no_output() {
        let bar = Output::Display(BTreeMap::from([
            ("text/plain".into(), "half".into()),
            (crate::DISPLAY_ID_MIME.into(), "progress-1".into()),
        ]));
        let value = Output::Display(BTreeMap::from([("text/plain".into(), "1".into())]));
        let outcome = CellOutcome { outputs: vec![value, bar], ..CellOutcome::default() };
        let list = outputs(&outcome, 1);
        assert_eq!((list.len(), &list[0]["output_type"]), (1, &json!("execute_result")));
    }

    #[test]
    fn a_filled_notebook_is_one_for_another_reader() -> Result<()> {
        let mut notebook = Notebook::from_bytes("a.ipynb", SMALL.as_bytes())?;
        let mut failed = outcome();
        failed.error =
            Some(CellError { name: "Panic".into(), sentence: "no".into(), detail: "no\nnever".into(), line: Some(1) });
        notebook.set_outcome(1, 1, &failed);
        let text = String::from_utf8_lossy(&notebook.to_bytes()?).into_owned();
        assert!(text.ends_with("}\n") && text.starts_with("{\n \""));
        assert!(nbformat::parse_notebook(&text).is_ok());
        assert_eq!(Notebook::from_bytes("a.ipynb", text.as_bytes())?.json, notebook.json);
        Ok(())
    }

    #[test]
    fn what_is_not_a_notebook_says_why() {
        for (bytes, why) in [
            ("", "it is empty"),
            ("hello", "it is not JSON"),
            ("[1]", "without the key \"nbformat\""),
            ("{\"nbformat\": 4}", "no list of cells"),
            ("{\"nbformat\": 4, \"cells\": [{}]}", "cell 1 says no \"cell_type\""),
            ("{\"nbformat\": 4, \"cells\": [{\"cell_type\": \"code\"}]}", "the source of cell 1"),
            ("{\"nbformat\": 3, \"worksheets\": []}", "of format 3"),
        ] {
            let message = Notebook::from_bytes("x/a.ipynb", bytes.as_bytes())
                .err()
                .map(|error| error.to_string())
                .unwrap_or_default();
            assert!(message.contains(why) && message.contains("x/a.ipynb"), "{bytes}: {message}");
        }
        assert!(matches!(Notebook::read("/no/such.ipynb"), Err(Error::File { .. })));
    }

    #[test]
    fn saving_replaces_the_whole_file() -> std::io::Result<()> {
        let dir = tempfile::tempdir()?;
        let path = dir.path().join("a.ipynb");
        fs::write(&path, SMALL)?;
        let notebook = Notebook::read(&path).map_err(std::io::Error::other)?;
        notebook.save(&path).map_err(std::io::Error::other)?;
        let again = Notebook::read(&path).map_err(std::io::Error::other)?;
        assert_eq!(again.json, notebook.json);
        fs::write(&path, "someone else's")?;
        assert!(matches!(again.save(&path), Err(Error::Changed { .. })));
        assert_eq!(fs::read(&path)?, b"someone else's");
        assert_eq!(fs::read_dir(dir.path())?.count(), 1);
        assert!(notebook.save(dir.path().join("none/a.ipynb")).is_err());
        Ok(())
    }
}
