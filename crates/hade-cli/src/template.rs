//! `hade template`: which there are, a copy to change, and whether one takes everything.

use std::path::{Path, PathBuf};

use clap::{Args, Subcommand};
use hade_memo::{FoundTemplate, Place, check_template, copy_template, templates};

use crate::Failure;
use crate::bar::Bar;

/// Arguments of `hade template`.
#[derive(Debug, Args)]
pub struct TemplateArgs {
    #[command(subcommand)]
    command: TemplateCommand,
}

#[derive(Debug, Subcommand)]
enum TemplateCommand {
    /// List the templates that `hade memo --template NAME` finds from this folder, with their settings
    List,
    /// Begin a template of your own: manifest and house style, everything else from the template it extends
    New {
        /// The folder to make; `templates/NAME` beside a notebook is found by its name
        folder: PathBuf,
        /// The template to begin from
        #[arg(long, default_value = "memo", value_name = "NAME|DIR")]
        from: PathBuf,
        /// Copy all files instead
        #[arg(long)]
        whole: bool,
    },
    /// Typeset every kind of card, long and wide tables, an empty sheet, in every state
    Check {
        /// The template's folder
        folder: PathBuf,
    },
}

/// Does what the arguments say.
pub(crate) fn run(args: &TemplateArgs) -> Result<(), Failure> {
    match &args.command {
        TemplateCommand::List => {
            for template in templates(Path::new(".")) {
                print!("{}", described(&template));
            }
        }
        TemplateCommand::New { folder, from, whole } => {
            copy_template(from, Path::new("."), folder, *whole)?;
            eprintln!(
                "{dir} is ready; change it, and try it with\n    hade template check {dir}",
                dir = folder.display()
            );
        }
        TemplateCommand::Check { folder } => {
            let mut bar = Bar::new();
            let sheets =
                check_template(folder, |number, of, what| bar.say(&format!("sample {number} of {of}: {what}")));
            bar.clear();
            let sheets = sheets?;
            eprintln!("{} takes everything; the largest sample has {sheets} sheets", folder.display());
        }
    }
    Ok(())
}

fn described(template: &FoundTemplate) -> String {
    let place = match &template.place {
        Place::Project(folder) | Place::User(folder) => folder.display().to_string(),
        _ => "built in".to_owned(),
    };
    let mut text = match &template.about {
        Ok((version, about)) => format!("{} {version} ({place})\n    {about}\n", template.name),
        Err(why) => format!("{} ({place})\n    cannot be used: {why}\n", template.name),
    };
    for [name, about, default] in &template.settings {
        let default = if default.is_empty() { String::new() } else { format!(" (unless set: {default})") };
        text.push_str(&format!("    {name}: {about}{default}\n"));
    }
    text
}
