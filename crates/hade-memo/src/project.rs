//! The project file `hade.toml`: what the memo is called, who stands behind it, and when. It is
//! the only place a date comes from.

use std::collections::BTreeMap;
use std::path::Path;

use serde::Deserialize;

use crate::cautions::ProjectCaution;
use crate::error::{Error, Result};

/// The name of the project file, beside the notebook.
const FILE: &str = "hade.toml";

/// How far the memo has come.
#[derive(Clone, Copy, Debug, Default, PartialEq, Eq, Deserialize)]
pub enum Status {
    /// Being written.
    #[default]
    #[serde(rename = "DRAFT")]
    Draft,
    /// With the checker.
    #[serde(rename = "FOR REVIEW")]
    ForReview,
    /// Released for use. No project file says so: it is asked for when the memo is made, and refused while
    /// anything stands against it.
    #[serde(skip)]
    Issued,
}

impl Status {
    /// The words that are printed.
    pub fn words(self) -> &'static str {
        match self {
            Status::Draft => "DRAFT",
            Status::ForReview => "FOR REVIEW",
            Status::Issued => "ISSUED",
        }
    }
}

/// A day.
#[derive(Clone, Copy, Debug, PartialEq, Eq, PartialOrd, Ord)]
pub struct Date {
    /// Year.
    pub year: u16,
    /// Month, 1 to 12.
    pub month: u8,
    /// Day, 1 to 31.
    pub day: u8,
}

impl std::fmt::Display for Date {
    fn fmt(&self, f: &mut std::fmt::Formatter<'_>) -> std::fmt::Result {
        write!(f, "{:04}-{:02}-{:02}", self.year, self.month, self.day)
    }
}

impl<'de> Deserialize<'de> for Date {
    fn deserialize<D: serde::Deserializer<'de>>(deserializer: D) -> Result<Self, D::Error> {
        #[derive(Deserialize)]
        #[serde(untagged)]
        enum Written {
            Toml(toml::value::Datetime),
            Text(String),
        }
        let bad = |what: &str| serde::de::Error::custom(format!("{what} is not a date; write it as 2026-05-14"));
        let day = match Written::deserialize(deserializer).map_err(|_| bad("this"))? {
            Written::Toml(day) => day,
            Written::Text(text) => text.trim().parse().map_err(|_| bad(&format!("\"{text}\"")))?,
        };
        match (day.date, day.time) {
            (Some(d), None) => Ok(Date { year: d.year, month: d.month, day: d.day }),
            _ => Err(bad(&format!("\"{day}\""))),
        }
    }
}

/// The part a person has in the memo.
#[derive(Clone, Copy, Debug, PartialEq, Eq, Deserialize)]
#[serde(rename_all = "snake_case")]
pub enum Role {
    /// Made the calculation.
    Prepared,
    /// Checked it.
    Checked,
    /// Approves its use.
    Approved,
}

impl Role {
    /// The three, in the order of signing.
    pub const ALL: [Role; 3] = [Role::Prepared, Role::Checked, Role::Approved];

    /// The word that is printed.
    pub fn word(self) -> &'static str {
        match self {
            Role::Prepared => "Prepared",
            Role::Checked => "Checked",
            Role::Approved => "Approved",
        }
    }
}

/// Somebody who stands behind the memo.
#[derive(Clone, Debug, PartialEq, Eq, Deserialize)]
#[serde(deny_unknown_fields)]
pub struct Person {
    /// The part.
    pub role: Role,
    /// The name.
    #[serde(default)]
    pub name: String,
    /// The licence number.
    #[serde(default)]
    pub licence: String,
    /// Where the licence holds.
    #[serde(default)]
    pub jurisdiction: String,
}

/// One line of the revision history.
#[derive(Clone, Debug, PartialEq, Eq, Deserialize)]
#[serde(deny_unknown_fields)]
pub struct Revision {
    /// The revision.
    pub rev: String,
    /// Its date.
    pub date: Date,
    /// What changed.
    pub what: String,
    /// Who changed it.
    #[serde(default)]
    pub by: String,
}

#[derive(Debug, Default, Deserialize)]
#[serde(deny_unknown_fields, default)]
struct MemoTable {
    number: String,
    revision: String,
    date: Option<Date>,
    status: Status,
    title: String,
    supersedes: String,
}

#[derive(Debug, Default, Deserialize)]
#[serde(deny_unknown_fields, default)]
struct ProjectTable {
    name: String,
    client: String,
    site: String,
    hole: String,
}

/// What one notebook of the folder says otherwise.
#[derive(Clone, Debug, Default, PartialEq, Eq, Deserialize)]
#[serde(deny_unknown_fields, default)]
pub(crate) struct NotebookTable {
    number: Option<String>,
    revision: Option<String>,
    date: Option<Date>,
    status: Option<Status>,
    title: Option<String>,
    supersedes: Option<String>,
    hole: Option<String>,
    revisions: Option<Vec<Revision>>,
}

#[derive(Debug, Default, Deserialize)]
#[serde(deny_unknown_fields, default)]
struct File {
    memo: MemoTable,
    project: ProjectTable,
    people: Vec<Person>,
    revisions: Vec<Revision>,
    cautions: Vec<ProjectCaution>,
    withhold: BTreeMap<String, String>,
    template: BTreeMap<String, String>,
    notebook: BTreeMap<String, NotebookTable>,
}

/// What `hade.toml` says. What it leaves out is empty here and stands against issue.
#[derive(Clone, Debug, Default, PartialEq, Eq)]
#[non_exhaustive]
pub struct Project {
    /// The memo's number.
    pub number: String,
    /// Its revision.
    pub revision: String,
    /// Its date.
    pub date: Option<Date>,
    /// How far it has come.
    pub status: Status,
    /// A title in place of the sheet's, empty for none.
    pub title: String,
    /// The memo, or the revision of it, that this one takes the place of; empty for none.
    pub supersedes: String,
    /// The project's name.
    pub name: String,
    /// The client.
    pub client: String,
    /// The site, where the sheet does not name it.
    pub site: String,
    /// The hole, where the sheet does not name it.
    pub hole: String,
    /// Who stands behind the memo.
    pub people: Vec<Person>,
    /// The revision history.
    pub revisions: Vec<Revision>,
    /// Cautions of its own.
    pub cautions: Vec<ProjectCaution>,
    /// Cautions that are withheld, by id, each with the reason that is printed in its place.
    pub withhold: BTreeMap<String, String>,
    /// Parameters of the template ("paper").
    pub template: BTreeMap<String, String>,
    /// What single notebooks say otherwise, by file name.
    pub(crate) notebooks: BTreeMap<String, NotebookTable>,
}

impl Project {
    /// Reads `hade.toml` in a folder; `None` when there is none.
    pub fn read_beside(folder: &Path) -> Result<Option<Self>> {
        let path = folder.join(FILE);
        match std::fs::read_to_string(&path) {
            Ok(text) => Project::parse(&text, &path).map(Some),
            Err(e) if e.kind() == std::io::ErrorKind::NotFound => Ok(None),
            Err(e) => Err(Error::Project { path, why: format!("cannot be read: {e}") }),
        }
    }

    /// Reads the text of a project file; `path` is what a message names.
    pub fn parse(text: &str, path: &Path) -> Result<Self> {
        let file: File = toml::from_str(text).map_err(|e| {
            let mut why = e.to_string().trim_end().to_owned();
            if why.contains("`ISSUED`") {
                why.push_str(
                    "\na memo is issued by `hade memo … --issue REVISION`, which first looks at what stands against it",
                );
            }
            Error::Project { path: path.to_path_buf(), why }
        })?;
        let twice = Role::ALL.into_iter().find(|role| file.people.iter().filter(|p| p.role == *role).count() > 1);
        if let Some(role) = twice {
            return Err(Error::Project {
                path: path.to_path_buf(),
                why: format!(
                    "[[people]] names more than one person with the role \"{}\"; each role is one person",
                    role.word().to_lowercase()
                ),
            });
        }
        Ok(Project {
            number: file.memo.number,
            revision: file.memo.revision,
            date: file.memo.date,
            status: file.memo.status,
            title: file.memo.title,
            supersedes: file.memo.supersedes,
            name: file.project.name,
            client: file.project.client,
            site: file.project.site,
            hole: file.project.hole,
            people: file.people,
            revisions: file.revisions,
            cautions: file.cautions,
            withhold: file.withhold,
            template: file.template,
            notebooks: file.notebook,
        })
    }

    /// The project as it stands for one notebook: where the file has a table `[notebook."name.ipynb"]`,
    /// what that says goes before the rest.
    pub fn for_notebook(mut self, notebook: &Path) -> Self {
        let name = notebook.file_name().map(|n| n.to_string_lossy().into_owned()).unwrap_or_default();
        let Some(own) = self.notebooks.get(&name).cloned() else { return self };
        let take = |slot: &mut String, own: Option<String>| {
            if let Some(own) = own {
                *slot = own;
            }
        };
        take(&mut self.number, own.number);
        take(&mut self.revision, own.revision);
        take(&mut self.title, own.title);
        take(&mut self.supersedes, own.supersedes);
        take(&mut self.hole, own.hole);
        self.date = own.date.or(self.date);
        self.status = own.status.unwrap_or(self.status);
        self.revisions = own.revisions.unwrap_or(self.revisions);
        self
    }

    /// The date, without which there is no PDF/A.
    pub fn stated_date(&self) -> Result<Date> {
        self.date.ok_or(Error::NoDate)
    }

    /// The person of a role.
    pub fn person(&self, role: Role) -> Option<&Person> {
        self.people.iter().find(|p| p.role == role)
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    fn parse(text: &str) -> Result<Project> {
        Project::parse(text, Path::new("hade.toml"))
    }

    #[test]
    fn dates_may_be_quoted_or_not() {
        for date in ["2026-05-14", "\"2026-05-14\""] {
            let project = parse(&format!("[memo]\nnumber = \"A\"\ndate = {date}\n")).unwrap();
            assert_eq!(project.date, Some(Date { year: 2026, month: 5, day: 14 }));
        }
    }

    #[test]
    fn a_notebook_of_its_own_number_keeps_the_rest() {
        let text = "[memo]\nnumber = \"A-1\"\nrevision = \"B\"\ndate = 2026-05-14\n\n[notebook.\"b.ipynb\"]\nnumber = \"A-2\"\ndate = 2026-06-01\n";
        let project = parse(text).unwrap();
        let other = project.clone().for_notebook(Path::new("calc/b.ipynb"));
        assert_eq!((other.number.as_str(), other.revision.as_str()), ("A-2", "B"));
        assert_eq!(other.date, Some(Date { year: 2026, month: 6, day: 1 }));
        assert_eq!(project.clone().for_notebook(Path::new("calc/a.ipynb")), project);
        let said = parse("[notebook.\"b.ipynb\"]\nnumbr = 3\n").unwrap_err().to_string();
        assert!(said.contains("numbr"), "{said}");
    }

    #[test]
    fn a_bad_file_is_named_with_its_line() {
        for (text, line, word) in [
            ("[memo]\ndate = \"14 May\"\n", "line 2", "2026-05-14"),
            ("[memo]\nnumber = \"A\"\nnumbr = 3\n", "line 3", "numbr"),
            ("[memo]\nstatus = \"DONE\"\n", "line 2", "FOR REVIEW"),
            ("[memo]\nstatus = \"ISSUED\"\n", "line 2", "--issue REVISION"),
            ("[memo\n", "line 1", ""),
            ("[[people]]\nrole = \"author\"\n", "line 2", "prepared"),
        ] {
            let message = parse(text).unwrap_err().to_string();
            assert!(message.contains(line) && message.contains(word), "{message}");
        }
    }

    #[test]
    fn one_person_a_role() {
        let twice = "[[people]]\nrole = \"checked\"\nname = \"A\"\n[[people]]\nrole = \"checked\"\nname = \"B\"\n";
        assert!(parse(twice).unwrap_err().to_string().contains("checked"));
    }

    #[test]
    fn without_a_date_says_what_to_write() {
        let message = Project::default().stated_date().unwrap_err().to_string();
        assert!(message.contains("hade.toml") && message.contains("date = "), "{message}");
    }
}
