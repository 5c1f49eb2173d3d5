//! Just enough parsing of a cell to find its `let` statements, whether it is whole and where not, and whether it asks for
//! input.

use std::collections::BTreeSet;

use ra_ap_syntax::ast::{self, HasName};
use ra_ap_syntax::{AstNode, Edition, NodeOrToken, Parse, SourceFile, SyntaxKind, SyntaxToken, TextRange, TextSize};

/// What the parser needs around a cell.
const BEFORE: &str = "fn f(){";

/// A name bound by a `let` at the top level of a cell.
#[derive(Debug, Clone, PartialEq, Eq)]
pub(crate) struct Binding {
    pub(crate) name: String,
    pub(crate) mutable: bool,
    /// Where the statement begins and ends, as byte offsets in the cell.
    pub(crate) start: usize,
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
    let problem = problem(&rust, &parsed);
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
        let range = statement.syntax().text_range();
        let [start, end] = [range.start(), range.end()].map(|at| usize::from(at).saturating_sub(BEFORE.len()));
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
            let end = end.min(code.len());
            outline.bindings.push(Binding { name, mutable: ident.mut_token().is_some(), start, end });
        }
    }
    outline
}

/// The statements at the top of a cell that are run, and its last expression: byte offset and text.
pub(crate) fn statements(code: &str) -> Vec<(usize, String)> {
    let rust = without_commands(code);
    let parsed = SourceFile::parse(&format!("{BEFORE}{rust}\n}}"), Edition::Edition2024);
    let function = parsed.syntax_node().children().find_map(ast::Fn::cast);
    let Some(list) = function.and_then(|function| function.body()).and_then(|body| body.stmt_list()) else {
        return Vec::new();
    };
    let run = list.statements().filter(|statement| !matches!(statement, ast::Stmt::Item(_)));
    run.map(|statement| statement.syntax().clone())
        .chain(list.tail_expr().map(|last| last.syntax().clone()))
        .map(|node| (usize::from(node.text_range().start()).saturating_sub(BEFORE.len()), node.text().to_string()))
        .collect()
}

/// The value that a `let` at the top of a cell gives a variable, as it is written.
pub(crate) fn initial_value(code: &str, name: &str) -> Option<String> {
    let made = outline(code).bindings.into_iter().find(|binding| binding.name == name)?;
    let statement = code.get(made.start..made.end)?;
    Some(statement.split_once('=')?.1.trim().trim_end_matches(';').trim_end().to_owned())
}

/// What stands before the point of a method or field whose name begins at a byte offset.
pub(crate) fn receiver(code: &str, at: usize) -> Option<String> {
    let parsed = SourceFile::parse(&format!("{BEFORE}{}\n}}", without_commands(code)), Edition::Edition2024);
    let at = TextSize::try_from(at + BEFORE.len()).ok()?;
    let named = parsed.syntax_node().token_at_offset(at).right_biased()?.parent()?;
    let whole = named.parent()?;
    let before = match ast::MethodCallExpr::cast(whole.clone()) {
        Some(call) => call.receiver(),
        None => ast::FieldExpr::cast(whole)?.expr(),
    };
    before.map(|before| before.syntax().text().to_string())
}

/// The cell with the variables that its last value lists, `(here, there)`, only looked at: what is no copy would
/// be given away, and gone. `None` where nothing is to be changed.
pub(crate) fn listed_by_reference(code: &str, is_variable: impl Fn(&str) -> bool) -> Option<String> {
    let rust = without_commands(code);
    let parsed = SourceFile::parse(&format!("{BEFORE}{rust}\n}}"), Edition::Edition2024);
    let function = parsed.syntax_node().children().find_map(ast::Fn::cast)?;
    let is_named = |part: &ast::Expr| {
        matches!(part, ast::Expr::PathExpr(_)) && is_variable(part.syntax().text().to_string().as_str())
    };
    let last = function.body()?.stmt_list()?.tail_expr()?;
    // What another part may change must not be looked at meanwhile.
    let text = last.syntax().text().to_string();
    if text.contains("&mut") || text.contains('{') {
        return None;
    }
    let named: Vec<ast::Expr> = match last {
        ast::Expr::TupleExpr(tuple) => tuple.fields().filter(|part| is_named(part)).collect(),
        // The entries of a list are of one type, so all or none of them.
        ast::Expr::ArrayExpr(list) if list.semicolon_token().is_none() && list.exprs().all(|part| is_named(&part)) => {
            list.exprs().collect()
        }
        _ => Vec::new(),
    };
    let mut places: Vec<usize> =
        named.iter().map(|part| usize::from(part.syntax().text_range().start()).saturating_sub(BEFORE.len())).collect();
    places.sort_unstable_by(|a, b| b.cmp(a));
    let mut rewritten = code.to_owned();
    for place in &places {
        rewritten.insert(*place, '&');
    }
    (!places.is_empty()).then_some(rewritten)
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

/// The cell with the commands at its top blanked; every offset stays.
fn without_commands(code: &str) -> String {
    let mut at_top = true;
    code.split_inclusive('\n')
        .map(|line| {
            let text = line.trim();
            let is_command = at_top && text.starts_with([':', '!']);
            at_top &= is_command || text.is_empty() || text.starts_with("//");
            if is_command {
                line.chars().map(|c| if c == '\n' { "\n".to_owned() } else { " ".repeat(c.len_utf8()) }).collect()
            } else {
                line.to_owned()
            }
        })
        .collect()
}

/// Every word of a cell that may be a name.
pub(crate) fn words(code: &str) -> BTreeSet<String> {
    code.split(|c: char| !(c.is_alphanumeric() || c == '_'))
        .filter(|word| !word.is_empty())
        .map(str::to_owned)
        .collect()
}

/// Where a cell cannot be read as Rust.
fn problem(rust: &str, parsed: &Parse<SourceFile>) -> Option<(usize, String)> {
    let errors = parsed.errors();
    // A text that is not ended swallows what would close the brackets.
    let endless = errors.iter().find(|error| error.to_string().contains("terminate"));
    let error = endless.or(errors.first())?;
    let own = |range: TextRange| usize::from(range.start()).saturating_sub(BEFORE.len());
    if endless.is_none()
        && let Some(open) = unclosed(parsed)
    {
        let line = line_of(rust, own(open.text_range()));
        return Some((line, format!("the `{}` that begins here is not closed", open.text())));
    }
    let at = own(error.range()).min(rust.trim_end().len());
    let line = line_of(rust, at);
    if rust.lines().nth(line - 1).is_some_and(|text| text.trim_start().starts_with([':', '!'])) {
        return Some((
            line,
            "a line that begins with `:` must stand at the top of its cell, before any code".to_owned(),
        ));
    }
    Some((line, plain(&error.to_string())))
}

/// A bracket of a cell that is opened and not closed.
fn unclosed(parsed: &Parse<SourceFile>) -> Option<SyntaxToken> {
    let mut open: Vec<SyntaxToken> = Vec::new();
    let mut closed = None;
    for token in parsed.syntax_node().descendants_with_tokens().filter_map(|element| element.into_token()) {
        let opens = match token.text() {
            "(" | "[" | "{" => {
                open.push(token);
                continue;
            }
            ")" => "(",
            "]" => "[",
            "}" => "{",
            _ => continue,
        };
        closed = open.pop();
        if closed.as_ref().is_none_or(|last| last.text() != opens) {
            return closed;
        }
    }
    // Our own brace stays open when the last one closes one of the cell's.
    closed.filter(|last| !open.is_empty() && usize::from(last.text_range().start()) >= BEFORE.len())
}

/// The parser's words without its names for signs.
fn plain(words: &str) -> String {
    let signs = [
        ("SEMICOLON", "`;`"),
        ("COMMA", "`,`"),
        ("R_PAREN", "`)`"),
        ("L_PAREN", "`(`"),
        ("R_BRACK", "`]`"),
        ("L_BRACK", "`[`"),
        ("R_CURLY", "`}`"),
        ("L_CURLY", "`{`"),
        ("R_ANGLE", "`>`"),
        ("L_ANGLE", "`<`"),
        ("COLON", "`:`"),
        ("EQ", "`=`"),
        ("R_ARROW", "`->`"),
        ("FAT_ARROW", "`=>`"),
        ("IDENT", "a name"),
    ];
    let words = words.strip_prefix("Syntax Error: ").unwrap_or(words);
    if words == "expected SEMICOLON" {
        return "a `;` is missing at the end of this line".to_owned();
    }
    if words.contains("to terminate the string") {
        return "the text that begins on this line has no `\"` at its end".to_owned();
    }
    words
        .split(' ')
        .map(|word| signs.iter().find(|(name, _)| *name == word).map_or(word, |(_, sign)| sign))
        .collect::<Vec<_>>()
        .join(" ")
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
    fn variables_in_a_list_at_the_end_are_only_looked_at() {
        let shown = |code: &str| listed_by_reference(code, |name| ["a", "b"].contains(&name));
        for (code, wanted) in [
            (":dep x\nlet σ = 1;\n(a, b)", ":dep x\nlet σ = 1;\n(&a, &b)"),
            ("(a, f(b), 2.0, c,\n b)", "(&a, f(b), 2.0, c,\n &b)"),
            ("[a, b]", "[&a, &b]"),
        ] {
            assert_eq!(shown(code).as_deref(), Some(wanted));
        }
        for code in
            ["(a, b);", "a", "(a)", "[a, f(b)]", "[a; 2]", "(c, d)", "f(a, b)", "let t = (a, b);", "(&a, &b)", "", "()"]
                .into_iter()
                .chain(["(a, { a += 1; a })", "(a, f(&mut a))"])
        {
            assert_eq!(shown(code), None, "{code}");
        }
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
    fn parts_of_a_statement_are_found() {
        let code = ":dep x\nlet b: &f64 = &a.x;\nlet c = f(s.at(d)?.stress()?.zzz, e);";
        assert_eq!(initial_value(code, "b").as_deref(), Some("&a.x"));
        assert_eq!(initial_value(code, "d"), None);
        let before = |name: &str| receiver(code, code.find(name).unwrap_or_default());
        assert_eq!(before("zzz").as_deref(), Some("s.at(d)?.stress()?"));
        assert_eq!(before("at(").as_deref(), Some("s"));
        assert_eq!(before("let c"), None);
        let texts: Vec<String> = statements(code).into_iter().map(|(at, text)| format!("{at} {text}")).collect();
        assert_eq!(texts, ["7 let b: &f64 = &a.x;", "27 let c = f(s.at(d)?.stress()?.zzz, e);"]);
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
        for (code, line, words) in [
            ("let a = 1;\nlet b = std::;", 2, "expected"),
            ("let a = 1;\nlet b = std::", 2, "expected"),
            ("let a = 1;\nlet b = f(1,\n  2;\n", 2, "the `(` that begins here is not closed"),
            ("if true {\n  1;\n", 1, "the `{` that begins here is not closed"),
            ("let a = 1;\nlet s = \"abc;\n", 2, "has no `\"` at its end"),
            ("let a = 1\nlet b = 2;", 1, "a `;` is missing at the end of this line"),
            ("let a = 1;\n:vars", 2, "must stand at the top"),
        ] {
            let (found, said) = outline(code).problem.unwrap_or_default();
            assert_eq!(found, line, "{code}: {said}");
            assert!(said.contains(words), "{code}: {said}");
        }
    }

    #[test]
    fn whole_code_is_no_problem() {
        for code in [
            ":vars\n\n// a note\n:dep x = \"1\"\nlet a = 1;",
            "let pi =\n    ::std::f64::consts::PI;",
            "let s = \"(\"; let c = '{'; // [",
            "macro_rules! two { ($x:expr) => { ($x, $x) } }\ntwo!(1)",
            "#![allow(unused)]\nlet a = 1;",
            "let Some(x) = y else { panic!() };\nif let Some(a) = b && a > 1 { 2 } else { 3 }",
            "async { 1 }.await",
            "",
        ] {
            assert_eq!(outline(code).problem, None, "{code}");
        }
    }
}
