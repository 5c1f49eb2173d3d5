"""JupyterLab in a browser: what the cases of `lab.py` share."""

import contextlib
import os
import re
import shutil
import subprocess
import sys
import time

from playwright.sync_api import sync_playwright

# A session is warm after 7 s; the rest is for a machine with other work.
PATIENCE = 90

CHROMIUM = next((path for path in map(shutil.which, ["chromium", "chromium-browser", "google-chrome"]) if path), None)


@contextlib.contextmanager
def server(folder):
    """JupyterLab over a folder: its address."""
    command = [sys.executable, "-m", "jupyterlab", "--no-browser", "--allow-root", "--expose-app-in-browser", "--port=0"]
    command += ["--ServerApp.token=", "--ServerApp.password=", "--LabApp.collaborative=False", f"--ServerApp.root_dir={folder}"]
    log = os.path.join(folder, "..", "lab.log")
    with open(log, "w") as file:
        process = subprocess.Popen(command, stderr=file, stdout=file)
    try:
        deadline = time.monotonic() + PATIENCE
        address = None
        while not address:
            assert process.poll() is None and time.monotonic() < deadline, open(log).read()
            address = re.search(r"http://(?:localhost|127\.0\.0\.1):\d+", open(log).read())
            time.sleep(0.1)
        yield address[0]
    finally:
        process.terminate()
        try:
            process.wait(10)
        except subprocess.TimeoutExpired:
            # It waits for a browser that has gone; the kernels see that it ends.
            process.kill()
            process.wait(PATIENCE)


class Lab:
    """One page with one notebook."""

    def __init__(self, page, address, pictures):
        self.page, self.address, self.pictures = page, address, pictures

    def open(self, notebook):
        self.page.goto(f"{self.address}/lab/tree/{notebook}?reset")
        self.page.locator(".jp-Notebook .jp-CodeCell").first.wait_for(timeout=PATIENCE * 1000)
        for ready in ["ready", "sessionContext.ready"]:
            self.page.evaluate(f"() => window.jupyterapp.shell.currentWidget.context.{ready}")
        self.idle()

    def command(self, name, arguments=None):
        """Runs one of JupyterLab's own commands."""
        self.page.evaluate("([name, args]) => { window.jupyterapp.commands.execute(name, args ?? {}); }", [name, arguments])

    def kernel(self):
        return self.page.locator(".jp-NotebookPanel-toolbar .jp-Toolbar-kernelStatus, .jp-Notebook-ExecutionIndicator").first.get_attribute("data-status")

    def idle(self):
        self.until("the kernel is idle", lambda: self.kernel() == "idle")

    def until(self, what, condition, seconds=PATIENCE):
        deadline = time.monotonic() + seconds
        while not condition():
            assert time.monotonic() < deadline, f"after {seconds} s not: {what}; {self.prompts()}"
            self.page.wait_for_timeout(50)

    def prompts(self):
        """The number beside each cell of code, as it stands there."""
        return [text.strip() for text in self.page.locator(".jp-CodeCell .jp-InputPrompt").all_inner_texts()]

    def outputs(self, cell):
        """What stands under a cell of code, counted from 0."""
        return self.page.locator(".jp-CodeCell").nth(cell).locator(".jp-OutputArea-output")

    def picture(self, name):
        if self.pictures:
            self.page.screenshot(path=os.path.join(self.pictures, f"{name}.png"), full_page=True)


@contextlib.contextmanager
def lab(folder, pictures=None):
    """JupyterLab over a folder, in a browser."""
    with server(folder) as address, sync_playwright() as playwright:
        browser = playwright.chromium.launch(executable_path=CHROMIUM, args=["--no-sandbox"])
        page = browser.new_page(viewport={"width": 1280, "height": 6000})
        yield Lab(page, address, pictures)
        browser.close()
