"""A notebook by nbclient: `notebook.py NOTEBOOK HEADLESS`, the second as `hade run` executed the first."""

import json
import sys

import nbclient
import nbformat

RECORD = "application/vnd.hade.record+json"


def outputs(notebook):
    """Every cell's outputs, as far as they do not depend on how they arrived."""
    cells = []
    for cell in notebook.cells:
        if cell.cell_type != "code":
            continue
        seen = []
        for output in cell.outputs:
            output = dict(output)
            output.pop("metadata", None)
            if output["output_type"] == "stream" and seen and seen[-1].get("name") == output["name"]:
                seen[-1]["text"] += output["text"]
            else:
                seen.append(output)
        cells.append((cell.execution_count, seen))
    return cells


def execute(notebook, folder):
    nbclient.NotebookClient(
        notebook, kernel_name="hade", timeout=120, startup_timeout=60, resources={"metadata": {"path": folder}}
    ).execute()


def main(path, headless, folder):
    notebook = nbformat.read(path, as_version=4)
    execute(notebook, folder)
    nbformat.validate(notebook)
    ours, theirs = outputs(notebook), outputs(nbformat.read(headless, as_version=4))
    assert len(ours) == 4 and all(seen for _, seen in ours[1:]), [len(seen) for _, seen in ours]
    for number, (one, other) in enumerate(zip(ours, theirs, strict=True), 1):
        assert json.dumps(one, sort_keys=True) == json.dumps(other, sort_keys=True), f"cell {number} differs"
    assert any(RECORD in output.get("data", {}) for output in ours[-1][1])
    assert notebook.metadata.language_info["name"] == "rust"

    cells = ["let a = 1;", "println!(\"before\"); Err(\"the depth is negative\".to_string())?;", "let b = 2;"]
    failing = nbformat.v4.new_notebook(cells=[nbformat.v4.new_code_cell(cell) for cell in cells])
    try:
        execute(failing, folder)
    except nbclient.exceptions.CellExecutionError as error:
        assert error.ename == "Error" and error.evalue == "the depth is negative", error
    else:
        raise AssertionError("a cell that failed did not stop the run")
    assert failing.cells[1].outputs[0].text == "before\n"
    assert failing.cells[2].execution_count is None


if __name__ == "__main__":
    main(*sys.argv[1:])
