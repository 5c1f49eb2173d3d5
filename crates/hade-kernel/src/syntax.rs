//! Just enough parsing of a cell to find its `let` statements, whether it is whole, and whether it asks for input.

use ra_ap_syntax::ast::{self, HasName};
use ra_ap_syntax::{AstNode, Edition, NodeOrToken, SourceFile, SyntaxKind, SyntaxToken};

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

/// Whether a cell could be run as it stands.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub(crate) enum Wholeness {
    /// It can be read as Rust.
    Whole,
    /// More text could make it whole.
    Unfinished,
    /// No text after it could make it whole.
    Wrong,
}

/// Whether a cell could be run as it stands.
pub(crate) fn wholeness(code: &str) -> Wholeness {
    let rust = without_commands(code);
    let rust = rust.trim_end();
    let parsed = SourceFile::parse(&format!("{BEFORE}{rust}\n}}"), Edition::Edition2024);
    let end = BEFORE.len() + rust.len();
    let mut open = Vec::new();
    for token in tokens(&parsed) {
        let range = token.text_range();
        let (from, to) = (usize::from(range.start()), usize::from(range.end()));
        if from < BEFORE.len() || from >= end {
            continue;
        }
        if to > end && token.kind() != SyntaxKind::WHITESPACE {
            // A text or a comment that runs on into what is put behind the cell.
            return Wholeness::Unfinished;
        }
        match token.kind() {
            kind @ (SyntaxKind::L_CURLY | SyntaxKind::L_PAREN | SyntaxKind::L_BRACK) => open.push(kind),
            SyntaxKind::R_CURLY if open.pop() != Some(SyntaxKind::L_CURLY) => return Wholeness::Wrong,
            SyntaxKind::R_PAREN if open.pop() != Some(SyntaxKind::L_PAREN) => return Wholeness::Wrong,
            SyntaxKind::R_BRACK if open.pop() != Some(SyntaxKind::L_BRACK) => return Wholeness::Wrong,
            _ => {}
        }
    }
    let errors = parsed.errors();
    if errors.iter().any(|error| usize::from(error.range().start()) < end) && open.is_empty() {
        Wholeness::Wrong
    } else if !errors.is_empty() || !open.is_empty() {
        Wholeness::Unfinished
    } else {
        Wholeness::Whole
    }
}

/// The spaces to begin the next line of an unfinished cell with.
pub(crate) fn indent_after(code: &str) -> String {
    let line = code.trim_end().lines().last().unwrap_or_default();
    let margin = line.len() - line.trim_start().len();
    let deeper = if line.ends_with(['{', '(', '[']) { 4 } else { 0 };
    " ".repeat(margin + deeper)
}

/// Whether a cell names `stdin` outside of texts and comments.
pub(crate) fn reads_input(code: &str) -> bool {
    code.contains("stdin")
        && tokens(&SourceFile::parse(&format!("{BEFORE}{}\n}}", without_commands(code)), Edition::Edition2024))
            .any(|token| token.kind() == SyntaxKind::IDENT && token.text() == "stdin")
}

fn tokens(parsed: &ra_ap_syntax::Parse<SourceFile>) -> impl Iterator<Item = SyntaxToken> {
    parsed.syntax_node().descendants_with_tokens().filter_map(NodeOrToken::into_token)
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
    fn a_cell_is_whole_unfinished_or_wrong() {
        for whole in
            ["", "let a = 1;", "a + 1", "fn f() {\n    1;\n}", ":dep x", "struct A;\nimpl A {}\nA", "// a {", "\"{\""]
        {
            assert_eq!(wholeness(whole), Wholeness::Whole, "{whole}");
        }
        for unfinished in [
            "fn f() {",
            "let a = (1,\n 2",
            "let a = \"one",
            "let a = r#\"one\"",
            "/* one",
            "a /",
            "a.",
            "let a =",
            "let a = 1",
            "if a {\n    1\n} else {",
            "let v = vec![1, 2,",
        ] {
            assert_eq!(wholeness(unfinished), Wholeness::Unfinished, "{unfinished}");
        }
        for wrong in ["}", "let a = 1);", "fn 1() {}", "let = 1;", "a b c;", "(1, 2]"] {
            assert_eq!(wholeness(wrong), Wholeness::Wrong, "{wrong}");
        }
    }

    #[test]
    fn the_next_line_is_indented() {
        assert_eq!(indent_after("fn f() {\n    let a = (\n"), " ".repeat(8));
        assert_eq!(indent_after("fn f() {\n    a;"), " ".repeat(4));
        assert_eq!(indent_after(""), "");
    }

    #[test]
    fn only_code_that_names_stdin_asks_for_input() {
        assert!(reads_input("std::io::stdin().read_line(&mut s)?;"));
        assert!(!reads_input("// stdin\nlet a = \"stdin\"; let my_stdin = 1;"));
    }

    #[test]
    fn unfinished_code_is_a_problem_with_its_line() {
        let (line, _) = outline("let a = 1;\nlet b = std::;").problem.unwrap_or_default();
        assert_eq!(line, 2);
    }
}
