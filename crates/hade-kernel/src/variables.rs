//! The table of a session's variables: a cell of our own that shows their values.

use std::collections::BTreeMap;
use std::fmt::Write as _;

use crate::commands::table;
use crate::ledger::{Variable, short};

/// What every value is shown by, at most 60 characters of it: what it shows in a cell, else its `Debug`.
const SHORT: &str = r#"
struct HadeText(String);
impl std::fmt::Write for HadeText {
    fn write_str(&mut self, more: &str) -> std::fmt::Result {
        for c in more.chars() {
            if self.0.chars().count() >= 60 { self.0.push('…'); return std::result::Result::Err(std::fmt::Error); }
            self.0.push(if c.is_control() { ' ' } else { c });
        }
        std::result::Result::Ok(())
    }
}
struct HadeValue<'a, T>(&'a T);
trait HadeByShow { fn hade_short(&self) -> String; }
impl<T: Show> HadeByShow for &&HadeValue<'_, T> {
    fn hade_short(&self) -> String {
        let text = self.0.text();
        let mut lines = text.lines();
        let first = lines.next().unwrap_or_default();
        let mut out = HadeText(String::new());
        let _ = std::fmt::Write::write_str(&mut out, lines.next().unwrap_or(first).trim());
        out.0
    }
}
trait HadeByDebug { fn hade_short(&self) -> String; }
impl<T: std::fmt::Debug> HadeByDebug for &HadeValue<'_, T> {
    fn hade_short(&self) -> String {
        let mut out = HadeText(String::new());
        let _ = std::fmt::Write::write_fmt(&mut out, format_args!("{:?}", self.0));
        out.0
    }
}
trait HadeByNothing { fn hade_short(&self) -> String; }
impl<T> HadeByNothing for HadeValue<'_, T> { fn hade_short(&self) -> String { String::new() } }
"#;

/// The table without values, for a session whose values cannot be shown.
pub(crate) fn plain(variables: &[Variable]) -> BTreeMap<String, String> {
    let rows: Vec<Vec<String>> = variables.iter().map(|(name, kind)| vec![name.clone(), short(kind)]).collect();
    table(&["Variable", "Type"], &rows)
}

/// A cell that shows the table with values.
pub(crate) fn cell(variables: &[Variable]) -> String {
    let rows: Vec<Vec<String>> = variables
        .iter()
        .enumerate()
        .map(|(number, (name, kind))| vec![name.clone(), short(kind), place(number)])
        .collect();
    let table = table(&["Variable", "Type", "Value"], &rows);
    let mut code = format!("{{\n{SHORT}\nlet mut hade_text = String::from({:?});\n", table["text/plain"]);
    let _ = writeln!(code, "let mut hade_html = String::from({:?});", table["text/html"]);
    for (number, (name, _)) in variables.iter().enumerate() {
        let _ = writeln!(
            code,
            "{{ let value = (&&&HadeValue(&{name})).hade_short().replace(\"EVCXR_\", \"EVCXR \");\n\
             hade_text = hade_text.replace({place:?}, &value);\n\
             hade_html = hade_html.replace({place:?}, &value.replace('&', \"&amp;\").replace('<', \"&lt;\")); }}",
            place = place(number),
        );
    }
    code.push_str(
        "println!(\"EVCXR_BEGIN_CONTENT text/plain\\n{hade_text}\\nEVCXR_END_CONTENT\\n\
         EVCXR_BEGIN_CONTENT text/html\\n{hade_html}\\nEVCXR_END_CONTENT\");\n};",
    );
    code
}

/// Stands for a value until it is known.
fn place(number: usize) -> String {
    format!("\u{1}{number}\u{1}")
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn the_cell_can_be_read_and_names_each_variable_once() {
        let variables = [("a".to_owned(), "f64".to_owned()), ("b".to_owned(), "hade::stress::Stress".to_owned())];
        let code = cell(&variables);
        let outline = crate::syntax::outline(&code);
        assert_eq!((outline.problem, outline.bindings.len()), (None, 0));
        assert_eq!(code.matches("HadeValue(&b)").count(), 1);
        assert!(plain(&variables)["text/plain"].contains("b         Stress"));
    }
}
