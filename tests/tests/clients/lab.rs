//! The kernel in JupyterLab in a browser, and a notebook as a page.

use std::path::Path;

use hade_tests::root;

use crate::environment::{Jupyter, said};

/// JupyterLab and a Jupyter that knows the kernel, with a notebook that `hade run` executed.
fn lab() -> Option<(Jupyter, String)> {
    let jupyter = Jupyter::with("tests/clients/lab/requirements.txt")?;
    let executed = jupyter.folder().join("executed.ipynb");
    let ran = jupyter.hade(&["run"], &[&root().join("notebooks-demo/minimal.ipynb"), "-o".as_ref(), &executed]);
    assert!(ran.status.success(), "{}", said(&ran));
    let executed = executed.display().to_string();
    Some((jupyter, executed))
}

fn has_browser() -> bool {
    let folders = std::env::var_os("PATH").unwrap_or_default();
    let found = std::env::split_paths(&folders)
        .any(|folder| ["chromium", "chromium-browser", "google-chrome"].iter().any(|name| folder.join(name).is_file()));
    if !found {
        assert!(std::env::var_os("HADE_REQUIRE_CLIENTS").is_none(), "a Chromium browser is required");
        eprintln!("SKIPPED: there is no Chromium browser on the path");
    }
    found
}

/// Before it is trusted, run, run again, in the dark, interrupted, completed, explained. With
/// `HADE_PICTURES=FOLDER` its pictures stay there to be looked at.
#[test]
fn a_notebook_in_a_browser() {
    if !has_browser() {
        return;
    }
    let Some((jupyter, executed)) = lab() else { return };
    let pictures = std::env::var_os("HADE_PICTURES").map_or_else(|| jupyter.folder().join("pictures"), Into::into);
    jupyter.run("lab/lab.py", &[&executed, &pictures.display().to_string()]);
}

/// nbconvert executes a notebook and makes a page that shows cards and pictures.
#[test]
fn a_notebook_becomes_a_page() {
    let Some((jupyter, executed)) = lab() else { return };
    let page = jupyter.folder().join("page.html");
    jupyter.run("lab/page.py", &[&executed, &page.display().to_string()]);
    assert!(Path::new(&page).is_file());
}
