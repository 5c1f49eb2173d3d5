"""How long a notebook waits, here and in the stock kernel: `speed.py HADE EVCXR_JUPYTER [soak]`.

Prints a table. HADE is the command of a release build, EVCXR_JUPYTER the stock kernel's program
(`cargo install --locked evcxr_jupyter@0.22.0`), which loads the same crate by `:dep hade = { path = … }`.
The libraries of `hade` are prepared before the clock runs, as `hade kernel install` does. The machine should have
nothing else to do. With `soak` 500 cells run in one session of ours.
"""

import json
import os
import pathlib
import shutil
import statistics
import subprocess
import sys
import tempfile
import time

from jupyter_client.manager import KernelManager

ROOT = pathlib.Path(__file__).resolve().parents[2]
PATIENCE = 1800

CARD = """let s = Stress::from_horizontals(Horizontals {
    sv: 66.9.mpa(), sh_max: 60.mpa(), sh_min: 48.mpa(), sh_max_azimuth: Azimuth::from_true_north(35.deg()),
})?;
s.principals()"""

LATER = [
    "let hole = Attitude { inclination: 42.deg(), azimuth: Azimuth::from_true_north(120.deg()) };",
    "let chain = hole.chain()?;",
    "chain",
    "let sh = chain.carry(&s);",
    "sh",
    "let strength = Strength::mohr_coulomb(6.mpa(), 35.deg());",
    "let rock = Rock { poisson: 0.25, tensile_strength: 2.mpa(), strength };",
    "let wall = Wall::new(WallInputs { stress: sh, pore: 30.mpa(), rock })?;",
    "wall.limits()",
    "wall.around(45.mpa())?",
    "s.mohr()",
    "let sv = s.component(Axis::Z, Axis::Z);\nsv",
]


class Kernel:
    def __init__(self, name):
        self.manager = KernelManager(kernel_name=name)
        self.started = time.monotonic()
        self.manager.start_kernel()
        self.client = self.manager.blocking_client()
        self.client.start_channels()
        self.client.wait_for_ready(timeout=PATIENCE)
        self.ready = self.since()

    def since(self):
        return time.monotonic() - self.started

    def run(self, code):
        """Seconds until the answer."""
        begun = time.monotonic()
        failed = []
        reply = self.client.execute_interactive(
            code,
            timeout=PATIENCE,
            output_hook=lambda message: failed.append(message["content"]) if message["msg_type"] == "error" else None,
        )
        took = time.monotonic() - begun
        assert reply["content"]["status"] == "ok" and not failed, (code, reply["content"], failed)
        return took

    def memory(self):
        """Bytes of this kernel and all it started that no other process shares, and its largest part."""
        sizes = {}
        for process in family(self.manager.provisioner.pid):
            try:
                with open(f"/proc/{process}/smaps_rollup") as file:
                    fields = dict(line.split(":", 1) for line in file if ":" in line)
                sizes[process] = 1024 * int(fields["Pss"].split()[0])
            except OSError:
                pass
        return sum(sizes.values())

    def end(self):
        self.client.stop_channels()
        self.manager.shutdown_kernel()


def family(process):
    """A process and all below it."""
    found = [process]
    for parent in found:
        for task in pathlib.Path(f"/proc/{parent}/task").glob("*/children"):
            try:
                found += [int(child) for child in task.read_text().split()]
            except OSError:
                pass
    return found


def measured(name, prepare):
    """One session in which the user types at once, and one in which the user took 20 s to type."""
    row = {}
    k = Kernel(name)
    row["kernel_info answered"] = k.ready
    for cell in prepare:
        k.run(cell)
    k.run(CARD)
    row["start → first card, typed at once"] = k.since()
    later = [k.run(cell) for cell in LATER]
    row["a later cell, median"] = statistics.median(later)
    row["a later cell, slowest"] = max(later)
    row["memory after them (MB)"] = k.memory() / 1e6
    k.end()
    k = Kernel(name)
    time.sleep(20)
    begun = time.monotonic()
    for cell in prepare:
        k.run(cell)
    k.run(CARD)
    row["first card, typed after 20 s"] = time.monotonic() - begun
    k.end()
    return row


def standing_by(hade, folder):
    """Start to first card when a session stands by."""
    install(hade, folder, "--standby")
    standby = subprocess.Popen([hade, "kernel", "standby"], cwd="/", start_new_session=True)
    cache = pathlib.Path(os.environ.get("HADE_CACHE") or pathlib.Path.home() / ".cache/hade")
    while not list(cache.glob("standby/*.socket")):
        assert standby.poll() is None
        time.sleep(0.1)
    k = Kernel("hade")
    k.run(CARD)
    row = {"start → first card, a session stands by": k.since()}
    k.end()
    install(hade, folder)
    return row


def soak(name):
    k = Kernel(name)
    k.run(CARD)
    took, memory = [], []
    for number in range(500):
        last = 4 * (number // 4)
        code = [
            f"let x_{number} = ({number} as f64 + 40.0).mpa();",
            f"let w = Wall::new(WallInputs {{ stress: Attitude {{ inclination: {number % 90}.deg(), azimuth: "
            "Azimuth::from_true_north(120.deg()) }.chain()?.carry(&s), pore: 20.mpa(), rock: Rock { poisson: 0.25, "
            "tensile_strength: 2.mpa(), strength: Strength::mohr_coulomb(9.mpa(), 35.deg()) } })?;",
            "w.limits()",
            f'println!("{{}}", x_{last}.in_mpa());',
        ][number % 4]
        took.append(k.run(code))
        if number % 50 == 49:
            memory.append(k.memory() / 1e6)
    k.end()
    early, late = statistics.median(took[50:100]), statistics.median(took[450:500])
    print(f"median of cells 51–100 {early:.3f} s, of 451–500 {late:.3f} s: {late / early:.2f} times")
    print("memory after each 50 cells (MB):", ", ".join(f"{m:.0f}" for m in memory))


def install(hade, folder, *options):
    subprocess.run([hade, "kernel", "install", *options, "--prefix", folder], check=True, stderr=subprocess.DEVNULL)


def main(hade, stock, *what):
    hade, stock = shutil.which(hade), shutil.which(stock)
    folder = tempfile.mkdtemp()
    install(hade, folder)
    spec = pathlib.Path(folder, "share/jupyter/kernels/stock")
    spec.mkdir(parents=True)
    argv = [stock, "--control_file", "{connection_file}"]
    (spec / "kernel.json").write_text(json.dumps({"argv": argv, "display_name": "stock", "language": "rust"}))
    os.environ["JUPYTER_PATH"] = str(pathlib.Path(folder, "share/jupyter"))
    os.environ["JUPYTER_RUNTIME_DIR"] = str(pathlib.Path(folder, "runtime"))
    os.chdir(folder)
    if "soak" in what:
        return soak("hade")
    load = f':dep hade = {{ path = "{ROOT / "crates/hade"}" }}\nuse hade::prelude::*;'
    ours = measured("hade", []) | standing_by(hade, folder)
    theirs = measured("stock", [load])
    print(f"{'':45}{'hade':>10}{'stock':>10}{'ratio':>8}")
    for what, value in ours.items():
        other = theirs.get(what)
        ratio = f"{other:10.2f}{other / value:8.1f}" if other else ""
        print(f"{what:45}{value:10.2f}{ratio}")


if __name__ == "__main__":
    main(*sys.argv[1:])
