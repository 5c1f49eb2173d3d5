//! Templates of a user's own: what is accepted and what is refused, with file and line.

mod support;

use std::path::{Path, PathBuf};

use hade_memo::MemoOptions;
use support::{AGREES, folder, memo, project, record};

const MANIFEST: &str =
    "name = \"mine\"\nversion = \"1\"\nentry = \"memo.typ\"\nrecord_schema = 1\nfonts = [\"Inter\"]\n";

/// What the exporter needs of any template.
const HEAD: &str = "#let M = json(\"memo.json\")\n#set document(title: M.memo.title)\n#set text(lang: \"en\")\n";

fn template(name: &str, manifest: &str, body: &str) -> PathBuf {
    let folder = folder(name);
    std::fs::write(folder.join("template.toml"), manifest).unwrap();
    std::fs::write(folder.join("memo.typ"), body).unwrap();
    folder
}

fn with(template: &Path) -> hade_memo::Result<hade_memo::Memo> {
    let folder = folder(&format!("{}-work", template.file_name().unwrap().to_string_lossy()));
    let json = record(&folder).to_json().unwrap();
    let options = MemoOptions::default().with_template(template);
    memo(&json, &folder, Some(&project()), &options, AGREES)
}

#[track_caller]
fn refused(template: &Path, words: &[&str]) {
    let message = with(template).unwrap_err().to_string();
    for word in words {
        assert!(message.contains(word), "\"{word}\" is not in\n{message}");
    }
}

#[test]
fn a_folder_of_ones_own_works() {
    let attach = "#for (n, a) in M.attachments.enumerate() { pdf.attach(a.name, read(\"attached/\" + str(n), encoding: none), relationship: a.relationship, mime-type: a.mime, description: a.description) }\n";
    let mine = template("mine", MANIFEST, &format!("{HEAD}{attach}= #M.memo.title\n#M.conclusions.len() conclusions"));
    assert_eq!(with(&mine).unwrap().pages, 1);
    let copy = Path::new(env!("CARGO_MANIFEST_DIR")).join("../../templates/memo");
    assert!(with(&copy).unwrap().pages > 5, "the default template as a folder");
}

#[test]
fn what_does_not_compile_is_refused_with_file_and_line() {
    let bad = template("does-not-compile", MANIFEST, &format!("{HEAD}\n#let x = nonsense(1)\n"));
    refused(&bad, &["memo.typ:5:", "nonsense", "does-not-compile"]);
}

#[test]
fn a_missing_part_is_named() {
    refused(&template("no-part", MANIFEST, &format!("{HEAD}#M.memo.nothing")), &["memo.typ:4:", "nothing"]);
    refused(&template("no-import", MANIFEST, "#import \"other.typ\": a"), &["memo.typ:1:", "other.typ"]);
    refused(&folder("no-manifest"), &["template.toml"]);
    refused(&template("no-record", MANIFEST, &format!("{HEAD}= #M.memo.title")), &["attached files", "pdf.attach"]);
    refused(Path::new("/nowhere/at/all"), &["there is no such folder"]);
}

#[test]
fn nothing_outside_the_folder_is_read() {
    let secret = folder("outside").join("secret.txt");
    std::fs::write(&secret, "secret").unwrap();
    refused(
        &template("dots", MANIFEST, &format!("{HEAD}#read(\"../outside/secret.txt\")")),
        &["memo.typ:4:", "escape"],
    );
    refused(
        &template("absolute", MANIFEST, &format!("{HEAD}#read(\"{}\")", secret.display())),
        &["memo.typ:4:", "not found"],
    );
    refused(&template("package", MANIFEST, "#import \"@preview/cetz:0.3.0\"\n"), &["memo.typ:1:", "no packages"]);
    #[cfg(unix)]
    {
        let linked = template("linked", MANIFEST, &format!("{HEAD}#read(\"link.txt\")"));
        std::os::unix::fs::symlink(&secret, linked.join("link.txt")).unwrap();
        refused(&linked, &["memo.typ:4:", "outside the template"]);
        let whole = folder("linked-folder");
        std::os::unix::fs::symlink(folder("outside"), whole.join("up")).unwrap();
        std::fs::write(whole.join("template.toml"), MANIFEST).unwrap();
        std::fs::write(whole.join("memo.typ"), format!("{HEAD}#read(\"up/secret.txt\")")).unwrap();
        refused(&whole, &["memo.typ:4:"]);
    }
}

#[test]
fn there_is_no_clock() {
    refused(&template("clock", MANIFEST, &format!("{HEAD}#datetime.today().display()")), &["memo.typ:4:", "date"]);
}

#[test]
fn a_manifest_is_judged() {
    refused(
        &template("newer-schema", &MANIFEST.replace("record_schema = 1", "record_schema = 7"), HEAD),
        &["schema 7"],
    );
    refused(&template("no-font", &MANIFEST.replace("Inter", "Comic Sans MS"), HEAD), &["Comic Sans MS"]);
    refused(&template("no-entry", &MANIFEST.replace("memo.typ", "other.typ"), HEAD), &["other.typ"]);
    refused(&template("bad-entry", &MANIFEST.replace("memo.typ", "../../etc/passwd"), HEAD), &["escapes"]);
    refused(&template("typo", &format!("{MANIFEST}nmae = 1\n"), HEAD), &["nmae"]);
}
