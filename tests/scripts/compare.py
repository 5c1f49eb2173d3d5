"""Makes the reference values again and holds the stored ones against them.

    pip install -r tests/scripts/requirements.txt
    python tests/scripts/compare.py

Every other script of this folder that defines

    def write(folder: Path) -> None

takes part: it writes its files (.npy, .json, .csv, any text) into a folder, the same names as in
tests/data/reference. Numbers must agree to 1e-12 of the largest of their row (.npy) or of
themselves (.json, .csv), or to the script's own TOLERANCE; everything else to the letter. A script
that knows better for one of its files defines

    def differences(name: str, stored: Path, made: Path) -> list[str] | None

and answers with what differs, or None to leave the file to the rules above. The exit status is 0
when everything agrees.
"""

from __future__ import annotations

import importlib.util
import json
import math
import sys
import tempfile
from pathlib import Path

import numpy as np

sys.dont_write_bytecode = True

HERE = Path(__file__).resolve().parent
STORED = HERE.parent / "data" / "reference"
TOLERANCE = 1e-12
SHOWN = 5


def load(path: Path):
    spec = importlib.util.spec_from_file_location(path.stem, path)
    module = importlib.util.module_from_spec(spec)
    sys.modules[path.stem] = module
    spec.loader.exec_module(module)
    return module


def array_differences(stored: Path, made: Path, tolerance: float) -> list[str]:
    a, b = np.load(stored), np.load(made)
    if a.shape != b.shape or a.dtype != b.dtype:
        return [f"shape and type {a.shape} {a.dtype} are not {b.shape} {b.dtype}"]
    a, b = a.reshape(len(a), -1), b.reshape(len(b), -1)
    if not np.array_equal(np.isnan(a), np.isnan(b)):
        return ["other entries are not a number"]
    off = np.nanmax(np.abs(a - b), axis=1)
    largest = np.nanmax(np.abs(a), axis=1)
    bad = np.flatnonzero(~(off <= tolerance * largest))
    return [f"row {k}: differs by {off[k]:.3g} of {largest[k]:.3g}" for k in bad]


def value_differences(a, b, place: str, tolerance: float) -> list[str]:
    """Numbers of a JSON value within the tolerance, everything else equal."""
    number = (int, float)
    if isinstance(a, number) and isinstance(b, number) and not isinstance(a, bool) and not isinstance(b, bool):
        same = a == b or math.isclose(a, b, rel_tol=tolerance, abs_tol=tolerance)
        return [] if same else [f"{place}: {a} is not {b}"]
    if isinstance(a, dict) and isinstance(b, dict) and a.keys() == b.keys():
        return [d for key in a for d in value_differences(a[key], b[key], f"{place}/{key}", tolerance)]
    if isinstance(a, list) and isinstance(b, list) and len(a) == len(b):
        return [d for k, (x, y) in enumerate(zip(a, b)) for d in value_differences(x, y, f"{place}/{k}", tolerance)]
    return [] if a == b else [f"{place}: {a!r} is not {b!r}"]


def cell(text: str):
    try:
        return float(text)
    except ValueError:
        return text


def text_differences(stored: Path, made: Path, tolerance: float) -> list[str]:
    if stored.suffix == ".json":
        return value_differences(json.loads(stored.read_text()), json.loads(made.read_text()), "", tolerance)
    a, b = stored.read_text().splitlines(), made.read_text().splitlines()
    if stored.suffix == ".csv":
        a, b = ([[cell(c) for c in line.split(",")] for line in lines] for lines in (a, b))
    return value_differences(a, b, "line", tolerance)


def main() -> int:
    wrong = 0
    known: set[str] = set()
    for path in sorted(HERE.glob("*.py")):
        if path.resolve() == Path(__file__).resolve():
            continue
        script = load(path)
        if not hasattr(script, "write"):
            print(f"{path.name}: no write(folder), left out")
            continue
        with tempfile.TemporaryDirectory() as folder:
            script.write(Path(folder))
            names = sorted(p.name for p in Path(folder).iterdir())
            if not names:
                print(f"{path.name}: wrote nothing")
                wrong += 1
            for name in names:
                stored, made = STORED / name, Path(folder) / name
                tolerance = getattr(script, "TOLERANCE", TOLERANCE)
                if name in known:
                    found = ["two scripts write it"]
                elif not stored.is_file():
                    found = ["it is not stored"]
                else:
                    own = getattr(script, "differences", lambda *_: None)(name, stored, made)
                    other = array_differences if made.suffix == ".npy" else text_differences
                    found = other(stored, made, tolerance) if own is None else own
                known.add(name)
                print(f"{path.name}: {name}: {'agrees' if not found else f'{len(found)} differences'}")
                for difference in found[:SHOWN]:
                    print(f"    {difference}")
                wrong += len(found)
    for path in sorted(STORED.iterdir()) if STORED.is_dir() else []:
        if path.name not in known:
            print(f"{path.name}: no script writes it")
            wrong += 1
    if not known:
        print("no script wrote anything")
        wrong += 1
    return 1 if wrong else 0


if __name__ == "__main__":
    sys.exit(main())
