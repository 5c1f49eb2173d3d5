use hade_tests::root;

use crate::environment::{Jupyter, said};

/// nbclient sees what `hade run` writes, and stops at a cell that fails.
#[test]
fn a_notebook_gives_the_same_in_jupyter_and_without() {
    let Some(jupyter) = Jupyter::new() else { return };
    let notebook = root().join("notebooks-demo/minimal.ipynb");
    let headless = jupyter.folder().join("headless.ipynb");
    let ran = jupyter.hade(&["run"], &[&notebook, "-o".as_ref(), &headless]);
    assert!(ran.status.success(), "{}", said(&ran));
    let path = |path: &std::path::Path| path.display().to_string();
    jupyter.run("notebook.py", &[&path(&notebook), &path(&headless), &path(jupyter.folder())]);
}
