"""What a user sees in JupyterLab: `lab.py EXECUTED PICTURES`, the first a notebook that `hade run` executed."""

import json
import os
import shutil
import sys
import tempfile

import nbformat

from browser import lab

LOOP = "let mut n = 0u64; loop { n = std::hint::black_box(n.wrapping_add(1)); }"

# Of every text in an output: the ratio of its brightness to that of what lies behind it, as WCAG 2 counts it.
CONTRASTS = """() => {
  const part = (c) => { c /= 255; return c <= 0.03928 ? c / 12.92 : ((c + 0.055) / 1.055) ** 2.4; };
  const numbers = (text) => (text.match(/[0-9.]+/g) || []).map(Number);
  const light = ([r, g, b]) => 0.2126 * part(r) + 0.7152 * part(g) + 0.0722 * part(b);
  const behind = (node) => {
    for (; node; node = node.parentElement) {
      const colour = numbers(getComputedStyle(node).backgroundColor);
      if (colour.length === 3 || colour[3] === 1) return colour;
    }
    return [255, 255, 255];
  };
  const found = [];
  for (const area of document.querySelectorAll('.jp-OutputArea-output')) {
    const walker = document.createTreeWalker(area, NodeFilter.SHOW_TEXT);
    while (walker.nextNode()) {
      const text = walker.currentNode.textContent.trim();
      if (!text) continue;
      const parent = walker.currentNode.parentElement;
      const [a, b] = [light(numbers(getComputedStyle(parent).color)), light(behind(parent))];
      found.push([(Math.max(a, b) + 0.05) / (Math.min(a, b) + 0.05), text.slice(0, 40)]);
    }
  }
  return found;
}"""

# Every picture in an output: whether it is drawn, and its words for those who do not see it.
PICTURES = """() => [...document.querySelectorAll('.jp-OutputArea-output img')]
  .map((image) => [image.complete && image.naturalWidth > 50, image.alt])"""


def looks_right(page, texts, pictures):
    def seen():
        return page.page.evaluate(PICTURES)

    page.until("the pictures are drawn", lambda: len(seen()) >= pictures and all(drawn for drawn, _ in seen()), 20)
    assert all(len(alt) > 20 for _, alt in seen()), seen()
    contrasts = page.page.evaluate(CONTRASTS)
    assert len(contrasts) >= texts, len(contrasts)
    faint = [found for found in contrasts if found[0] < 4.5]
    assert not faint, faint


def an_executed_notebook_is_seen_before_it_is_trusted(page):
    page.open("executed.ipynb")
    trusted = page.page.evaluate(
        "() => [...window.jupyterapp.shell.currentWidget.content.model.cells].map((cell) => [cell.type, cell.trusted])"
    )
    assert ["code", False] in trusted and ["code", True] not in trusted, trusted
    looks_right(page, 30, 1)
    page.picture("untrusted")


def all_cells_run(page):
    page.command("notebook:run-all-cells")
    cells = len(page.prompts())
    wanted = [f"[{number}]:" for number in range(1, cells + 1)]
    page.until("every cell has run", lambda: page.prompts() == wanted)
    page.idle()
    looks_right(page, 30, 1)
    page.picture("run-all")


def a_restart_begins_anew(page):
    page.command("notebook:restart-run-all")
    page.page.locator(".jp-Dialog button.jp-mod-accept").click()
    cells = len(page.prompts())
    page.until("the cells wait", lambda: any("*" in prompt for prompt in page.prompts()))
    wanted = [f"[{number}]:" for number in range(1, cells + 1)]
    page.until("every cell has run again, counted from 1", lambda: page.prompts() == wanted)
    page.idle()


def it_is_dark(page):
    page.command("apputils:change-theme", {"theme": "JupyterLab Dark"})
    page.until("it is dark", lambda: page.page.evaluate("() => document.body.dataset.jpThemeLight") == "false")
    looks_right(page, 30, 1)
    page.picture("dark")
    page.command("apputils:change-theme", {"theme": "JupyterLab Light"})
    page.until("it is light", lambda: page.page.evaluate("() => document.body.dataset.jpThemeLight") == "true")


def a_loop_is_interrupted(page):
    page.open("cells.ipynb")
    page.command("notebook:run-all-cells")
    page.until("the loop runs", lambda: page.prompts()[:2] == ["[1]:", "[*]:"] and page.kernel() == "busy")
    page.page.wait_for_timeout(1500)
    page.command("notebook:interrupt-kernel")
    page.until("the loop is stopped", lambda: page.prompts()[1] == "[2]:")
    assert "interrupted" in page.outputs(1).last.inner_text().lower(), page.outputs(1).last.inner_text()
    assert page.prompts()[2] == "[ ]:", "a cell behind it ran"
    page.idle()
    page.picture("interrupted")


def type_in(page, cell, text):
    editor = page.page.locator(".jp-CodeCell").nth(cell).locator(".cm-content")
    editor.click()
    page.page.keyboard.press("Control+A")
    page.page.keyboard.type(text, delay=20)


def a_unit_is_completed(page):
    type_in(page, 2, "let p = 68.5.mp")
    page.page.keyboard.press("Tab")
    one = page.page.locator(".jp-Completer .jp-Completer-item", has=page.page.get_by_text("mpa()", exact=True))
    one.wait_for(timeout=20_000)
    page.picture("completion")
    one.click()
    page.until("the unit is written", lambda: "68.5.mpa()" in page.page.locator(".jp-CodeCell").nth(2).inner_text())


def a_name_is_explained(page):
    type_in(page, 2, "Stress::from_horizontals")
    page.page.keyboard.press("Shift+Tab")
    tip = page.page.locator(".jp-Tooltip")
    tip.wait_for(timeout=20_000)
    words = tip.inner_text()
    assert "from_horizontals" in words and "two horizontal stresses" in words, words
    page.picture("explained")


def main(executed, pictures):
    folder = os.path.join(tempfile.mkdtemp(), "notebooks")
    os.mkdir(folder)
    shutil.copy(executed, os.path.join(folder, "executed.ipynb"))
    cells = [nbformat.v4.new_code_cell(source) for source in ["let a = 1;", LOOP, "let b = 2;"]]
    metadata = {"kernelspec": {"name": "hade", "display_name": "Hade (Rust)", "language": "rust"}}
    nbformat.write(nbformat.v4.new_notebook(cells=cells, metadata=metadata), os.path.join(folder, "cells.ipynb"))
    os.makedirs(pictures, exist_ok=True)
    with lab(folder, pictures) as page:
        for case in [
            an_executed_notebook_is_seen_before_it_is_trusted,
            all_cells_run,
            a_restart_begins_anew,
            it_is_dark,
            a_loop_is_interrupted,
            a_unit_is_completed,
            a_name_is_explained,
        ]:
            print(case.__name__, flush=True)
            try:
                case(page)
            except Exception:
                page.picture("failed")
                raise
    print(json.dumps(sorted(os.listdir(pictures))))


if __name__ == "__main__":
    main(*sys.argv[1:])
