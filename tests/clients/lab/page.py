"""A notebook as a page by nbconvert: `page.py NOTEBOOK PAGE.html`."""

import html.parser
import sys

import nbconvert
import nbformat
from nbconvert.preprocessors import ExecutePreprocessor


class Seen(html.parser.HTMLParser):
    """What is on the page."""

    def __init__(self):
        super().__init__()
        self.tables, self.pictures, self.words = 0, [], []

    def handle_starttag(self, tag, attrs):
        self.tables += tag == "table"
        if tag == "img":
            self.pictures.append(dict(attrs))

    def handle_data(self, data):
        self.words.append(data)


def main(notebook, page):
    notebook = nbformat.read(notebook, as_version=4)
    for cell in notebook.cells:
        if cell.cell_type == "code":
            cell.outputs, cell.execution_count = [], None
    ExecutePreprocessor(kernel_name="hade", timeout=120).preprocess(notebook)
    body, _ = nbconvert.HTMLExporter().from_notebook_node(notebook)
    with open(page, "w") as file:
        file.write(body)
    seen = Seen()
    seen.feed(body)
    assert seen.tables >= 3, seen.tables
    drawn = [picture for picture in seen.pictures if picture.get("src", "").startswith("data:image/svg+xml")]
    assert drawn and all(len(picture.get("alt", "")) > 20 for picture in drawn), seen.pictures
    words = " ".join("".join(seen.words).split())
    for wanted in ["Recommended range of pressure", "MPa", "Conclusions"]:
        assert wanted in words, wanted


if __name__ == "__main__":
    main(*sys.argv[1:])
