//! `hade new`: a folder to begin a calculation in, with a notebook that runs as it is.

use std::fs;
use std::path::{Path, PathBuf};
use std::time::{SystemTime, UNIX_EPOCH};

use chrono::DateTime;
use clap::{Args, ValueEnum};
use serde_json::{Value, json};
use tera::{Context, Tera};

use crate::Failure;

const PROJECT: &str = include_str!("../../../templates/project/hade.toml");
const ANALYSIS: &str = include_str!("../../../templates/project/analysis.md");
const SURVEY_METRES: &str = include_str!("../../../templates/project/data/survey-m.csv");
const SURVEY_FEET: &str = include_str!("../../../templates/project/data/survey-ft.csv");

/// Arguments of `hade new`.
#[derive(Debug, Args)]
pub struct NewArgs {
    /// The folder to make
    folder: PathBuf,
    /// The project's name; the folder's name unless given
    #[arg(long)]
    project: Option<String>,
    /// For whom the work is done
    #[arg(long, default_value = "")]
    client: String,
    /// Who prepares the calculation
    #[arg(long, default_value = "", value_name = "NAME")]
    prepared_by: String,
    /// The number of the first memo
    #[arg(long, default_value = "")]
    number: String,
    /// The units of the notebook's numbers; any unit can be written later, number by number
    #[arg(long, value_enum, default_value_t = System::Metric)]
    units: System,
}

/// The units that the notebook begins with.
#[derive(Clone, Copy, Debug, PartialEq, Eq, ValueEnum)]
enum System {
    /// MPa and m
    Metric,
    /// psi and ft
    Field,
}

/// Makes the folder. Nothing that is there already is changed.
pub(crate) fn run(args: &NewArgs) -> Result<(), Failure> {
    let folder = &args.folder;
    if folder.is_dir() && folder.read_dir()?.next().is_some() {
        return Err(format!("{} is not empty; name a new folder, or an empty one", folder.display()).into());
    }
    if folder.exists() && !folder.is_dir() {
        return Err(format!("{} is a file; name a new folder", folder.display()).into());
    }
    let files = files(args, &today()?)?;
    fs::create_dir_all(folder.join("data")).map_err(|e| cannot("make the folder", folder, &e))?;
    for (name, text) in files {
        let path = folder.join(name);
        fs::write(&path, text).map_err(|e| cannot("write", &path, &e))?;
    }
    let notebook = folder.join("analysis.ipynb");
    eprintln!(
        "{} is ready; its numbers are invented. Replace them in analysis.ipynb and fill in hade.toml, then\n    \
         hade run {notebook}\n    hade memo {notebook} -o {memo}",
        folder.display(),
        notebook = notebook.display(),
        memo = folder.join("memo.pdf").display(),
    );
    Ok(())
}

fn cannot(what: &str, path: &Path, error: &std::io::Error) -> Failure {
    format!("cannot {what} {}: {error}", path.display()).into()
}

/// The files by name, with their texts.
fn files(args: &NewArgs, today: &str) -> Result<[(&'static str, String); 3], Failure> {
    let given = |text: &str, what: &str| -> Result<String, Failure> {
        if text.chars().any(char::is_control) {
            return Err(format!("the {what} holds a control character; give one line of plain text").into());
        }
        Ok(text.trim().to_owned())
    };
    let own = args.folder.file_name().map(|name| name.to_string_lossy().into_owned()).unwrap_or_default();
    let name = given(args.project.as_deref().unwrap_or(&own), "project's name")?;
    let toml = |text: String| serde_json::to_string(&text);
    let mut context = Context::new();
    context.insert("date", today);
    context.insert("number", &toml(given(&args.number, "memo's number")?)?);
    context.insert("name", &toml(name.clone())?);
    context.insert("client", &toml(given(&args.client, "client's name")?)?);
    context.insert("prepared", &toml(given(&args.prepared_by, "preparer's name")?)?);
    // A Rust string literal.
    context.insert("title", &format!("{:?}", format!("{name}: stability of the wall at one depth")));
    let (survey, numbers) = match args.units {
        System::Metric => (SURVEY_METRES, METRIC),
        System::Field => (SURVEY_FEET, FIELD),
    };
    for (name, number) in numbers {
        context.insert(name, number);
    }
    Ok([
        ("hade.toml", filled(PROJECT, &context)?),
        ("analysis.ipynb", notebook(&filled(ANALYSIS, &context)?)?),
        ("data/survey.csv", survey.to_owned()),
    ])
}

/// The invented numbers of the notebook, in Rust.
const METRIC: [(&str, &str); 9] = [
    ("md", "2350.m()"),
    ("sv", "50.mpa()"),
    ("sh_max", "46.mpa()"),
    ("sh_min", "38.mpa()"),
    ("pore", "23.mpa()"),
    ("cohesion", "8.mpa()"),
    ("tensile", "2.mpa()"),
    ("margin_bottom", "0.5.mpa()"),
    ("margin_top", "1.mpa()"),
];
const FIELD: [(&str, &str); 9] = [
    ("md", "7700.ft()"),
    ("sv", "7250.psi()"),
    ("sh_max", "6670.psi()"),
    ("sh_min", "5510.psi()"),
    ("pore", "3340.psi()"),
    ("cohesion", "1160.psi()"),
    ("tensile", "290.psi()"),
    ("margin_bottom", "75.psi()"),
    ("margin_top", "150.psi()"),
];

fn filled(template: &str, context: &Context) -> Result<String, Failure> {
    Ok(Tera::one_off(template, context, false)?)
}

/// A notebook from text: what stands between ```` ```rust ```` and ```` ``` ```` is a cell of code, the rest
/// cells of words.
fn notebook(text: &str) -> Result<String, Failure> {
    let mut cells: Vec<Value> = Vec::new();
    let mut push = |kind: &str, lines: &[&str]| {
        let source = lines.join("\n").trim().to_owned();
        if source.is_empty() {
            return;
        }
        let id = format!("{kind}-{}", cells.len() + 1);
        cells.push(match kind {
            "code" => json!({
                "cell_type": kind, "id": id, "metadata": {}, "source": source,
                "execution_count": null, "outputs": [],
            }),
            _ => json!({ "cell_type": kind, "id": id, "metadata": {}, "source": source }),
        });
    };
    let mut kind = "markdown";
    let mut lines = Vec::new();
    for line in text.lines() {
        let next = match (kind, line.trim_end()) {
            ("markdown", "```rust") => "code",
            ("code", "```") => "markdown",
            _ => {
                lines.push(line);
                continue;
            }
        };
        push(kind, &lines);
        lines.clear();
        kind = next;
    }
    push(kind, &lines);
    let notebook = json!({
        "cells": cells,
        "metadata": {
            "kernelspec": { "display_name": "Hade (Rust)", "language": "rust", "name": "hade" },
            "language_info": { "name": "rust" },
        },
        "nbformat": 4,
        "nbformat_minor": 5,
    });
    Ok(serde_json::to_string_pretty(&notebook)? + "\n")
}

/// The day, in UTC, as 2026-05-14.
fn today() -> Result<String, Failure> {
    let seconds = SystemTime::now().duration_since(UNIX_EPOCH)?.as_secs();
    let now =
        DateTime::from_timestamp(i64::try_from(seconds)?, 0).ok_or("the clock of this machine is out of range")?;
    Ok(now.date_naive().to_string())
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn words_and_code_become_cells() {
        let text = notebook("# Title\n\n```rust\nlet a = 1;\n```\n\nmore\n```rust\na\n```\n").unwrap();
        let read: Value = serde_json::from_str(&text).unwrap();
        let cells = read["cells"].as_array().unwrap();
        let kinds: Vec<_> = cells.iter().map(|c| c["cell_type"].as_str().unwrap()).collect();
        assert_eq!(kinds, ["markdown", "code", "markdown", "code"]);
        assert_eq!(cells[1]["source"], "let a = 1;");
        assert_eq!(cells[2]["source"], "more");
    }

    #[test]
    fn names_are_data_and_not_code() {
        let args = NewArgs {
            folder: PathBuf::from("x"),
            project: Some("a \"quoted\" \\ {{ name }} name".to_owned()),
            client: "c'est".to_owned(),
            prepared_by: String::new(),
            number: String::new(),
            units: System::Field,
        };
        let [(_, project), (_, analysis), _] = files(&args, "2026-05-14").unwrap();
        assert!(project.contains(r#"name = "a \"quoted\" \\ {{ name }} name""#), "{project}");
        let read: Value = serde_json::from_str(&analysis).unwrap();
        let first = read["cells"][1]["source"].as_str().unwrap();
        assert!(first.contains(r#"Sheet::new("a \"quoted\" \\ {{ name }} name: stability"#), "{first}");
        assert!(analysis.contains("7700.ft()"));
        let line = NewArgs { project: Some("two\nlines".to_owned()), ..args };
        assert!(files(&line, "2026-05-14").unwrap_err().to_string().contains("one line"));
    }
}
