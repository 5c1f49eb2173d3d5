//! What the checks of this workspace share: cases read from `data/`, and comparisons that fail on
//! both sides and never pass what is not a number.

mod prelude;
mod python;
pub mod splitmix;

use std::path::PathBuf;

use serde_json::Value;

pub use prelude::prelude_names;
pub use python::python_with;

/// One case worked out outside this project.
pub struct Case {
    /// Its name.
    pub id: String,
    /// What goes in.
    pub inputs: Value,
    /// What must come out.
    pub outputs: Value,
    /// What it is about.
    pub note: String,
}

/// The folder of the tests' data.
pub fn data() -> PathBuf {
    PathBuf::from(env!("CARGO_MANIFEST_DIR")).join("data")
}

/// The cases of one function, from `data/cases/<function>.json`. Panics when there are none.
pub fn cases(function: &str) -> Vec<Case> {
    let path = data().join("cases").join(format!("{function}.json"));
    let text = std::fs::read_to_string(&path).unwrap_or_else(|e| panic!("{}: {e}", path.display()));
    let value: Value = serde_json::from_str(&text).unwrap_or_else(|e| panic!("{}: {e}", path.display()));
    let cases: Vec<Case> = value["cases"]
        .as_array()
        .unwrap_or_else(|| panic!("{}: no cases", path.display()))
        .iter()
        .map(|c| Case {
            id: c["id"].as_str().unwrap_or_default().to_owned(),
            inputs: c["inputs"].clone(),
            outputs: c["outputs"].clone(),
            note: c["note"].as_str().unwrap_or_default().to_owned(),
        })
        .collect();
    assert!(!cases.is_empty(), "{}: no cases", path.display());
    cases
}

/// The rows of a table that a script of `tests/scripts` wrote: `data/reference/<file>`, in numpy's
/// own format (NEP 1, version 1.0; little-endian doubles in C order). Panics at anything else.
pub fn reference_rows<const N: usize>(file: &str) -> Vec<[f64; N]> {
    let path = data().join("reference").join(file);
    let bytes = std::fs::read(&path).unwrap_or_else(|e| panic!("{}: {e}", path.display()));
    assert_eq!(bytes.get(..8), Some(&b"\x93NUMPY\x01\x00"[..]), "{file} is no .npy file of version 1.0");
    let length = usize::from(u16::from_le_bytes([bytes[8], bytes[9]]));
    let header = String::from_utf8_lossy(&bytes[10..10 + length]).into_owned();
    let numbers = &bytes[10 + length..];
    let count = numbers.len() / (8 * N);
    let shape = format!("'descr': '<f8', 'fortran_order': False, 'shape': ({count}, {N})");
    assert!(header.contains(&shape), "{file}: {header} is not {shape}");
    assert!(count > 0 && numbers.len() == count * 8 * N, "{file}: cut short");
    let mut values = numbers.chunks_exact(8).map(|b| f64::from_le_bytes(b.try_into().expect("eight bytes")));
    (0..count).map(|_| std::array::from_fn(|_| values.next().expect("a value"))).collect()
}

/// A number of a case.
pub fn number(value: &Value, key: &str) -> f64 {
    value[key].as_f64().unwrap_or_else(|| panic!("{key} is no number in {value}"))
}

/// A list of numbers of a case.
pub fn numbers(value: &Value, key: &str) -> Vec<f64> {
    let list = value[key].as_array().unwrap_or_else(|| panic!("{key} is no list in {value}"));
    list.iter().map(|v| v.as_f64().unwrap_or_else(|| panic!("{key} holds no numbers in {value}"))).collect()
}

/// Whether two numbers agree within an absolute tolerance; never for what is not a number.
pub fn agree(got: f64, want: f64, tolerance: f64) -> bool {
    (got - want).abs() <= tolerance
}

/// Fails unless every pair agrees within `relative` times the largest wanted number.
#[track_caller]
pub fn assert_all_close(what: &str, got: &[f64], want: &[f64], relative: f64) {
    assert_eq!(got.len(), want.len(), "{what}: lengths");
    assert!(!want.is_empty(), "{what}: nothing to compare");
    let largest = want.iter().fold(0.0_f64, |m, w| m.max(w.abs()));
    for (i, (g, w)) in got.iter().zip(want).enumerate() {
        assert!(agree(*g, *w, relative * largest), "{what}, number {i}: got {g}, want {w} (relative {relative:e})");
    }
}

/// Fails unless the two agree to half a unit in the last printed place of `printed`.
#[track_caller]
pub fn assert_printed(what: &str, got: f64, printed: &str) {
    let want: f64 = printed.parse().unwrap_or_else(|_| panic!("{printed} is no number"));
    let decimals = printed.split_once('.').map_or(0, |(_, d)| d.len());
    let half = 0.5 * 10_f64.powi(-(decimals as i32));
    assert!(agree(got, want, half * (1.0 + 1e-9)), "{what}: got {got}, printed {printed}");
}

/// The `hade` command as this build made it, beside the test's own executable.
pub fn hade_binary() -> PathBuf {
    let own = std::env::current_exe().expect("the test's own path");
    let folder = own.ancestors().nth(2).expect("the build folder");
    let binary = folder.join(format!("hade{}", std::env::consts::EXE_SUFFIX));
    assert!(binary.is_file(), "{} is missing: run `cargo test --release` from the workspace's root", binary.display());
    binary
}

/// The workspace's root.
pub fn root() -> PathBuf {
    PathBuf::from(env!("CARGO_MANIFEST_DIR")).parent().expect("the workspace").to_owned()
}

/// Whether a tool that reads PDFs is here. Where `HADE_REQUIRE_PDF_TOOLS` is set it must be.
pub fn tool(name: &str) -> bool {
    let here = std::process::Command::new(name).arg("--version").output().is_ok();
    if !here {
        assert!(std::env::var_os("HADE_REQUIRE_PDF_TOOLS").is_none(), "{name} is required and not here");
        eprintln!("SKIPPED a part: {name} is not installed");
    }
    here
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn comparisons_fail_for_wrong_answers_on_both_sides() {
        assert!(agree(1.0, 1.0 + 1e-10, 1e-9));
        assert!(!agree(1.0, 1.0 + 3e-9, 1e-9));
        assert!(!agree(1.0 + 3e-9, 1.0, 1e-9));
        assert!(!agree(f64::NAN, 1.0, 1e9));
        assert!(std::panic::catch_unwind(|| assert_printed("x", 38.756, "38.8")).is_ok());
        assert!(std::panic::catch_unwind(|| assert_printed("x", 38.74, "38.8")).is_err());
        assert!(std::panic::catch_unwind(|| assert_all_close("x", &[1.0], &[1.1], 1e-9)).is_err());
    }
}
