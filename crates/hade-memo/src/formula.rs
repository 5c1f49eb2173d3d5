//! The lint that stands between a formula and Typst's `eval`: even the library's own formulas pass
//! through it, because mathematics that is evaluated can read files, attach some, or paint over the
//! page.

use typst::syntax::{SyntaxKind, SyntaxNode, parse_math};

use crate::world::library;

/// Longest formula.
const MOST: usize = 4000;
/// Names that mathematics defines and a formula has no use for: elsewhere they load things.
const UNWANTED: [&str; 1] = ["image"];

/// Says why a formula cannot be typeset: a syntax error, code, or a name that mathematics does not
/// define.
pub fn lint(math: &str) -> Result<(), String> {
    if math.len() > MOST {
        return Err(format!("it is {} bytes long; the most is {MOST}", math.len()));
    }
    let root = parse_math(math);
    let (errors, _) = root.errors_and_warnings();
    if let Some(error) = errors.first() {
        return Err(error.message.to_string());
    }
    walk(&root)
}

fn walk(node: &SyntaxNode) -> Result<(), String> {
    match node.kind() {
        SyntaxKind::Hash | SyntaxKind::Dollar | SyntaxKind::Raw => {
            Err(format!("it holds \"{}\", which begins code", node.leaf_text()))
        }
        SyntaxKind::MathIdent if !is_mathematics(node.leaf_text()) => {
            Err(format!("it uses \"{}\", which mathematics does not define", node.leaf_text()))
        }
        // Of `arrow.r` only the first word is looked up.
        SyntaxKind::MathFieldAccess => node.children().next().map_or(Ok(()), walk),
        _ => node.children().try_for_each(walk),
    }
}

fn is_mathematics(name: &str) -> bool {
    !UNWANTED.contains(&name) && library().math.scope().get(name).is_some()
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn mathematics_passes() {
        for math in [
            "S' = Q S Q^upright(T)",
            "sigma_theta = sigma_x + sigma_y - 2 (sigma_x - sigma_y) cos 2 theta - 4 tau_(x y) sin 2 theta - p",
            "S_v = integral_0^z rho(z') g dif z'",
            "q = (1 + sin phi) / (1 - sin phi), quad a = sqrt(b)",
            "a arrow.r.double b, quad x = -1",
            "mat(delim: \"[\", cos a, sin a; -sin a, cos a)",
            "x = cases(1 quad &\"if\" x > 0, 0 &\"otherwise\")",
        ] {
            assert_eq!(lint(math), Ok(()), "{math}");
        }
    }

    #[test]
    fn code_does_not() {
        for math in [
            "#read(\"memo.json\")",
            "std.read(\"memo.json\")",
            "image(\"logo.svg\")",
            "x $ #panic() $",
            "#import \"@preview/a:1.0.0\"",
            "place(top, x)",
            "read(\"a\")",
            "a_#(1)",
            "frac(a, b",
            "sys.inputs",
            "std.sys.inputs",
        ] {
            assert!(lint(math).is_err(), "{math}");
        }
        assert!(lint(&"x".repeat(5000)).is_err());
    }
}
