//! The commands a cell may begin with: lines that start with a colon, before any code.

use std::collections::BTreeMap;
use std::fmt::Write as _;

use crate::cell::CellError;

/// Every command: as it is written, and what it does.
pub(crate) const COMMANDS: &[(&str, &str)] = &[
    (":help", "this list"),
    (":vars", "the variables of the session with their types and values"),
    (":card NAME", "show a variable, as a last line with its name does"),
    (":type NAME", "the type of a variable"),
    (":time", "say how long this cell takes to compile and to run"),
    (":clear", "forget all variables, functions, types and imports"),
    (":dep NAME = \"1.2\"", "use another crate; its version is not pinned, and first use is slow"),
    (":offline 0", "let Cargo fetch crates for :dep from the network (1: no longer)"),
    (":opt 2", "how far cells are optimised: 0 (as at first), 1, 2 or 3; Hade itself always is"),
    (":explain", "the compiler's explanation of the last error"),
];

/// A command that the session carries out.
#[derive(Debug, Clone, PartialEq, Eq)]
pub(crate) enum Command {
    Help,
    Vars,
    Card(String),
    Type(String),
    Time,
    Clear,
    /// A command of the engine, as it was written.
    Engine(String),
}

/// A cell taken apart.
#[derive(Debug, Default, PartialEq, Eq)]
pub(crate) struct Split {
    pub(crate) commands: Vec<Command>,
    /// The cell with those lines blank, so that lines keep their numbers.
    pub(crate) code: String,
}

/// Takes the commands at the top of a cell off it.
pub(crate) fn split(cell: &str) -> Result<Split, CellError> {
    let mut found = Split::default();
    let mut at_top = true;
    for (number, line) in cell.split_inclusive('\n').enumerate() {
        let text = line.trim();
        if at_top && text.starts_with([':', '!']) && !text.starts_with("::") {
            found.commands.push(read(text).map_err(|sentence| CellError {
                name: "CommandError".to_owned(),
                detail: format!("{sentence}\n  line {}: {text}", number + 1),
                sentence,
                line: Some(number + 1),
            })?);
            found.code.push_str(if line.ends_with('\n') { "\n" } else { "" });
        } else {
            at_top &= text.is_empty() || text.starts_with("//");
            found.code.push_str(line);
        }
    }
    Ok(found)
}

fn read(line: &str) -> Result<Command, String> {
    if line.starts_with('!') {
        return Err("a notebook of this kernel runs no shell; use a terminal, or std::process::Command".to_owned());
    }
    let (word, rest) = line.split_once(char::is_whitespace).unwrap_or((line, ""));
    let rest = rest.trim();
    let alone = |command: Command| {
        if rest.is_empty() { Ok(command) } else { Err(format!("`{word}` stands alone on its line, without `{rest}`")) }
    };
    let name = || {
        let plain = !rest.is_empty() && rest.chars().all(|c| c.is_alphanumeric() || c == '_');
        if plain {
            Ok(rest.to_owned())
        } else {
            Err(format!("`{word}` needs the name of one variable: `{word} stress`"))
        }
    };
    let engine = || Ok(Command::Engine(line.to_owned()));
    match word {
        ":help" => alone(Command::Help),
        ":vars" => alone(Command::Vars),
        ":card" => name().map(Command::Card),
        ":type" | ":t" => name().map(Command::Type),
        ":time" => alone(Command::Time),
        ":clear" => alone(Command::Clear),
        ":dep" if rest.is_empty() => Err("`:dep` needs a crate: `:dep regex = \"1\"`".to_owned()),
        ":dep" | ":explain" => engine(),
        ":offline" if ["0", "1"].contains(&rest) => engine(),
        ":offline" => Err("write `:offline 0` to let Cargo use the network, `:offline 1` to forbid it".to_owned()),
        ":opt" if ["0", "1", "2", "3"].contains(&rest) => engine(),
        ":opt" => Err("write `:opt 0`, `:opt 1`, `:opt 2` or `:opt 3`".to_owned()),
        ":quit" | ":q" => Err("to end the session, shut the kernel down from the notebook's menu".to_owned()),
        ":restart" => Err("to start anew, restart the kernel from the notebook's menu, or write `:clear`".to_owned()),
        _ => Err(format!("there is no command `{word}`; `:help` lists them")),
    }
}

/// What `:dep` should say before it works.
pub(crate) fn dependency_notice(line: &str) -> Option<String> {
    let name = line.strip_prefix(":dep")?.trim();
    let name = name.split('=').next().unwrap_or(name).trim();
    (name != "hade").then(|| {
        format!(
            "[`:dep {name}` is built from source at first use, and the notebook waits for it; \
             its version is not pinned, so it is no part of what a memo can vouch for]\n"
        )
    })
}

/// Why the engine could not add a crate, in plain words.
pub(crate) fn dependency_failure(words: &str) -> Option<String> {
    let offline = words.contains("offline") || words.contains("failed to download") || words.contains("resolve host");
    let missing = words.contains("no matching package") || words.contains("failed to get") || offline;
    missing.then(|| {
        let name = words.split('`').nth(1).unwrap_or("the crate").split(' ').next().unwrap_or("the crate");
        format!(
            "{name} (or a crate that it needs) is not on this machine; write `:offline 0` above `:dep` to let \
             Cargo fetch it, or give a folder: `:dep {name} = {{ path = \"…\" }}`"
        )
    })
}

/// A crate in a folder that is no longer there, in plain words.
pub(crate) fn dependency_gone(words: &str) -> Option<String> {
    let name = words.split("failed to get `").nth(1)?.split('`').next()?;
    let folder = words.split("failed to read `").nth(1)?.split("/Cargo.toml").next()?;
    Some(format!(
        "the crate {name}, which this session uses, is no longer in {folder}; put it back, or write `:clear` and run \
         the notebook again"
    ))
}

/// A table as text and as HTML.
pub(crate) fn table(head: &[&str], rows: &[Vec<String>]) -> BTreeMap<String, String> {
    let width = |column: usize| {
        let cells = rows.iter().filter_map(|row| row.get(column)).map(String::as_str);
        cells.chain(head.get(column).copied()).map(|cell| cell.chars().count()).max().unwrap_or(0)
    };
    let mut text = String::new();
    let mut html = String::from("<table style=\"border-collapse:collapse\"><tr>");
    for name in head {
        let _ = write!(html, "<th style=\"text-align:left;padding:2px 12px 2px 0\">{}</th>", escaped(name));
    }
    html.push_str("</tr>");
    let head: Vec<String> = head.iter().map(|name| (*name).to_owned()).collect();
    for row in std::iter::once(&head).chain(rows) {
        let cells: Vec<String> = row
            .iter()
            .enumerate()
            .map(|(column, cell)| {
                format!("{cell:<pad$}", pad = if column + 1 == row.len() { 0 } else { width(column) })
            })
            .collect();
        let _ = writeln!(text, "{}", cells.join("  ").trim_end());
    }
    for row in rows {
        html.push_str("<tr>");
        for cell in row {
            let style = "text-align:left;padding:2px 12px 2px 0;font-family:monospace";
            let _ = write!(html, "<td style=\"{style}\">{}</td>", escaped(cell));
        }
        html.push_str("</tr>");
    }
    html.push_str("</table>");
    BTreeMap::from([("text/plain".to_owned(), text.trim_end().to_owned()), ("text/html".to_owned(), html)])
}

/// What `:help` shows.
pub(crate) fn help() -> BTreeMap<String, String> {
    let rows: Vec<Vec<String>> =
        COMMANDS.iter().map(|(command, what)| vec![(*command).to_owned(), (*what).to_owned()]).collect();
    table(&["Command", "What it does"], &rows)
}

fn escaped(text: &str) -> String {
    text.replace('&', "&amp;").replace('<', "&lt;").replace('>', "&gt;").replace('"', "&quot;")
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn commands_leave_the_lines_of_the_code_where_they_are() {
        let found = split("// first\n:vars\n:dep a = \"1\"\n\nlet a = 1;\n:card").unwrap_or_default();
        assert_eq!(found.commands, [Command::Vars, Command::Engine(":dep a = \"1\"".to_owned())]);
        assert_eq!(found.code, "// first\n\n\n\nlet a = 1;\n:card");
        let path = "::std::process::id()";
        assert_eq!(split(path), Ok(Split { commands: Vec::new(), code: path.to_owned() }));
    }

    #[test]
    fn what_is_no_command_says_what_to_write() {
        for (cell, words) in [
            (":nonsense", "there is no command `:nonsense`; `:help` lists them"),
            (":card", "the name of one variable"),
            (":card a b", "the name of one variable"),
            (":vars all", "without `all`"),
            (":quit", "shut the kernel down"),
            (":load_config", "there is no command"),
            ("!ls", "runs no shell"),
            (":dep", "needs a crate"),
            (":opt 7", "`:opt 3`"),
        ] {
            let error = split(cell).err().map(|error| error.sentence).unwrap_or_default();
            assert!(error.contains(words), "{cell}: {error}");
        }
    }

    #[test]
    fn every_command_that_is_listed_can_be_read() {
        for (command, _) in COMMANDS {
            assert!(read(command).is_ok(), "{command}");
        }
    }

    #[test]
    fn a_crate_that_went_is_named() {
        let words = "error: failed to get `own` as a dependency of package `ctx`\n\nCaused by:\n  failed to read \
                     `/data/own/Cargo.toml`";
        let said = dependency_gone(words).unwrap_or_default();
        assert!(said.starts_with("the crate own, which this session uses, is no longer in /data/own;"), "{said}");
        assert_eq!(dependency_gone("error: odd"), None);
    }

    #[test]
    fn a_table_is_text_and_html() {
        let shown = table(&["Name", "Type"], &[vec!["a".into(), "Vec<f64>".into()], vec!["long".into(), "i32".into()]]);
        assert_eq!(shown["text/plain"], "Name  Type\na     Vec<f64>\nlong  i32");
        assert!(shown["text/html"].contains("Vec&lt;f64&gt;"));
    }
}
