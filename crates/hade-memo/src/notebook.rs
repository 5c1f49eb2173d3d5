//! The notebook as it is attached: its text and code, without outputs, counts and timings, so that
//! it is the same before and after a run.

use serde_json::Value;

use crate::error::{Error, Result};

/// Keys of a cell's metadata that tell how a run went.
const RUN_KEYS: [&str; 4] = ["execution", "ExecuteTime", "collapsed", "scrolled"];

/// The notebook without outputs, execution counts and timings.
pub(crate) fn strip(name: &str, bytes: &[u8]) -> Result<Vec<u8>> {
    let bad = |why: String| Error::Notebook { name: name.to_owned(), why };
    let mut notebook: Value = serde_json::from_slice(bytes).map_err(|e| bad(e.to_string()))?;
    let cells = notebook
        .get_mut("cells")
        .and_then(Value::as_array_mut)
        .ok_or_else(|| bad("it has no list of cells".to_owned()))?;
    for cell in cells {
        let Some(cell) = cell.as_object_mut() else { continue };
        if cell.get("cell_type").and_then(Value::as_str) == Some("code") {
            cell.insert("outputs".to_owned(), Value::Array(Vec::new()));
            cell.insert("execution_count".to_owned(), Value::Null);
        }
        if let Some(metadata) = cell.get_mut("metadata").and_then(Value::as_object_mut) {
            RUN_KEYS.iter().for_each(|key| {
                metadata.remove(*key);
            });
        }
    }
    let mut text = serde_json::to_vec_pretty(&notebook).map_err(|e| bad(e.to_string()))?;
    text.push(b'\n');
    Ok(text)
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn a_run_leaves_no_trace() {
        let before = br#"{"cells":[{"cell_type":"code","source":"1","outputs":[],"execution_count":null,"metadata":{}}],"nbformat":4}"#;
        let after = br#"{"cells":[{"cell_type":"code","source":"1","outputs":[{"x":1}],"execution_count":7,
            "metadata":{"execution":{"iopub.execute_input":"2026-01-01"}}}],"nbformat":4}"#;
        assert_eq!(strip("n", before).unwrap(), strip("n", after).unwrap());
    }

    #[test]
    fn what_is_no_notebook_is_named() {
        assert!(strip("a.ipynb", b"[]").unwrap_err().to_string().contains("a.ipynb"));
        assert!(strip("a.ipynb", b"{").unwrap_err().to_string().contains("a.ipynb"));
    }
}
