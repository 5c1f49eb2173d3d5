"""A straight inclined hole through two layers, the lower one drawn down, by numpy.

Vertical stress and pore pressure run straight between the points of their tables. The horizontal stresses are tables
too, but what runs straight between two of their points is K = (S - Pp) / (Sv - Pp), within a layer only: from the
points nearest to the contact K is held to it (np.interp does just that). Drawdown takes A dPp from both horizontal
stresses. Limits in shear of an intact, impermeable Mohr-Coulomb wall over 36 000 tool faces, as in wall_limits.py,
whose grid finds a lower limit that is up to 1e-6 MPa too low. MPa, metres and degrees.

two_layers.json: for each measured depth tvd, sv, pore, sh_min, sh_max, lower, upper.
"""

from __future__ import annotations

import json
import sys
from pathlib import Path

import numpy as np

sys.path.insert(0, str(Path(__file__).resolve().parent))

from wall_limits import POISSON, limits  # noqa: E402

TOLERANCE = 1e-10
INCLINATION, AZIMUTH, SH_MAX_AZIMUTH = 40.0, 120.0, 35.0
CONTACT = 2400.0
SV = ([1000.0, 2000.0, 3200.0], [21.5, 45.0, 74.6])
PORE = ([1000.0, 2200.0, 2600.0, 3200.0], [10.3, 23.4, 30.8, 38.9])
SH_MIN = ([1500.0, 2000.0, 2300.0, 2500.0, 3000.0], [26.1, 36.6, 43.2, 45.0, 56.4])
SH_MAX = ([1500.0, 2000.0, 2300.0, 2500.0, 3000.0], [30.2, 42.9, 50.1, 52.6, 66.5])
LAYERS = [
    {"ucs": 31.0, "phi": 30.0, "drawdown": 0.0, "path": 0.0},
    {"ucs": 44.0, "phi": 36.0, "drawdown": 6.0, "path": 0.64},
]
DEPTHS = [1600.0, 2100.0, 2450.0, 2820.0, 3060.0, 3110.0, 3132.0, 3134.0, 3200.0, 3500.0, 3850.0]
FACES = 36_000


def horizontal(table, layer: int, tvd: float, sv: float, pore: float) -> float:
    """One horizontal stress before drawdown."""
    depths, stresses = (np.array(column) for column in table)
    inside = depths < CONTACT if layer == 0 else depths >= CONTACT
    depths, stresses = depths[inside], stresses[inside]
    at_points = (stresses - np.interp(depths, *PORE)) / (np.interp(depths, *SV) - np.interp(depths, *PORE))
    return pore + float(np.interp(tvd, depths, at_points)) * (sv - pore)


def row(md: float) -> dict:
    tvd = md * float(np.cos(np.radians(INCLINATION)))
    layer = 0 if tvd < CONTACT else 1
    rock = LAYERS[layer]
    sv, pore = float(np.interp(tvd, *SV)), float(np.interp(tvd, *PORE))
    fall = rock["path"] * rock["drawdown"]
    sh_min = horizontal(SH_MIN, layer, tvd, sv, pore) - fall
    sh_max = horizontal(SH_MAX, layer, tvd, sv, pore) - fall
    pore -= rock["drawdown"]
    wall = {"sv": sv, "sh_max": sh_max, "sh_min": sh_min, "azimuth": SH_MAX_AZIMUTH, "pore": pore}
    lower, upper = limits(wall | {"ucs": rock["ucs"], "phi": rock["phi"]}, INCLINATION, AZIMUTH, FACES)
    numbers = {"tvd": tvd, "sv": sv, "pore": pore, "sh_min": sh_min, "sh_max": sh_max}
    return {"md": md, "layer": layer} | numbers | {"lower": float(lower), "upper": float(upper)}


def write(folder: Path) -> None:
    body = {"poisson": POISSON, "rows": [row(md) for md in DEPTHS]}
    (folder / "two_layers.json").write_text(json.dumps(body, indent=1) + "\n")
