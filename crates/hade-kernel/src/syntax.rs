//! Just enough parsing of a cell to find its `let` statements.

use ra_ap_syntax::ast::{self, HasName};
use ra_ap_syntax::{AstNode, Edition, SourceFile};

/// What the parser needs around a cell.
const BEFORE: &str = "fn f(){";

/// A name bound by a `let` at the top level of a cell.
#[derive(Debug, Clone, PartialEq, Eq)]
pub(crate) struct Binding {
    pub(crate) name: String,
    pub(crate) mutable: bool,
    /// Where the statement ends, as a byte offset in the cell.
    pub(crate) end: usize,
}

/// The statements of a cell, as far as they concern us.
#[derive(Debug, Clone, PartialEq, Eq, Default)]
pub(crate) struct Outline {
    /// Every binding; of several with one name the last only.
    pub(crate) bindings: Vec<Binding>,
    /// The cell ends in an expression, whose value is displayed.
    pub(crate) ends_in_expression: bool,
    /// Where the cell cannot be read as Rust: line from 1 and what is wrong.
    pub(crate) problem: Option<(usize, String)>,
}

/// Reads a cell.
pub(crate) fn outline(code: &str) -> Outline {
    let rust = without_commands(code);
    let parsed = SourceFile::parse(&format!("{BEFORE}{rust}\n}}"), Edition::Edition2024);
    let problem = parsed.errors().first().map(|error| {
        let at = usize::from(error.range().start()).saturating_sub(BEFORE.len()).min(rust.len());
        (line_of(&rust, at), error.to_string())
    });
    let mut outline = Outline { problem, ..Outline::default() };
    let statements = parsed
        .syntax_node()
        .children()
        .find_map(ast::Fn::cast)
        .and_then(|function| function.body())
        .and_then(|body| body.stmt_list());
    let Some(statements) = statements else {
        return outline;
    };
    outline.ends_in_expression = statements.tail_expr().is_some();
    for statement in statements.statements() {
        let ast::Stmt::LetStmt(statement) = statement else {
            continue;
        };
        let end = usize::from(statement.syntax().text_range().end()).saturating_sub(BEFORE.len());
        let Some(pattern) = statement.pat() else {
            continue;
        };
        for node in pattern.syntax().descendants() {
            let Some(ident) = ast::IdentPat::cast(node) else {
                continue;
            };
            let Some(name) = ident.name() else {
                continue;
            };
            let name = name.text().to_string();
            outline.bindings.retain(|earlier| earlier.name != name);
            outline.bindings.push(Binding { name, mutable: ident.mut_token().is_some(), end: end.min(code.len()) });
        }
    }
    outline
}

/// The cell with lines that are commands to the session blanked; every offset stays.
fn without_commands(code: &str) -> String {
    code.split_inclusive('\n')
        .map(|line| {
            if line.trim_start().starts_with([':', '!']) {
                line.chars().map(|c| if c == '\n' { "\n".to_owned() } else { " ".repeat(c.len_utf8()) }).collect()
            } else {
                line.to_owned()
            }
        })
        .collect()
}

/// The line, from 1, at a byte offset.
pub(crate) fn line_of(code: &str, at: usize) -> usize {
    code.as_bytes().iter().take(at).filter(|&&byte| byte == b'\n').count() + 1
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn bindings_are_found_in_patterns() {
        let code = ":dep x\nlet (a, mut b) = f();\nlet c = 1; let c = 2;\nif true { let d = 3; }\nc";
        let outline = outline(code);
        let names: Vec<_> = outline
            .bindings
            .iter()
            .map(|binding| (binding.name.as_str(), binding.mutable, &code[..binding.end]))
            .collect();
        assert_eq!(names.len(), 3);
        assert_eq!(names[0], ("a", false, ":dep x\nlet (a, mut b) = f();"));
        assert!(names[1].1);
        assert!(names[2].2.ends_with("let c = 2;"));
        assert!(outline.ends_in_expression);
        assert_eq!(outline.problem, None);
    }

    #[test]
    fn unfinished_code_is_a_problem_with_its_line() {
        let (line, _) = outline("let a = 1;\nlet b = std::;").problem.unwrap_or_default();
        assert_eq!(line, 2);
    }
}
