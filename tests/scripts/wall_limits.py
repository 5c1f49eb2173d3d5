"""Limits of the wall in shear for every hole direction, and for drawn walls, by numpy.

Mohr-Coulomb at an impermeable wall has both ends of the safe pressures of one tool face in closed form; the limits of
a wall are the largest lower and the smallest upper end over a grid of tool faces. A grid finds a lower limit that is a
little too low: the map is made on a grid of 1 degree, as such maps mostly are, and a part of it on one of 0.05 degrees,
and the draws on one of 0.05 degrees. MPa and degrees; compression positive; azimuths from true north.

wall_map.json: the mean over 91 x 360 directions, and single directions, on the coarse and the fine grid.
wall_draws.npy: sv, sh_max, sh_min, azimuth, pore, ucs, phi, lower, upper; both limits are 0 where no pressure is safe.
"""

from __future__ import annotations

import json
from pathlib import Path

import numpy as np

TOLERANCE = 1e-10
POISSON = 0.25
BASE = {"sv": 60.0, "sh_max": 55.0, "sh_min": 42.0, "azimuth": 35.0, "pore": 22.0, "ucs": 30.0, "phi": 32.0}
DEVIATIONS = {"sv": 1.5, "sh_max": 3.0, "sh_min": 2.0, "azimuth": 8.0, "pore": 1.0, "ucs": 4.0, "phi": 2.0}
DRAWN_HOLE = (50.0, 110.0)
DRAWS, START = 2500, 42
COARSE, FINE = 180, 3600
SHOWN = [(0, 0), (30, 35), (45, 125), (90, 35), (90, 125), (60, 200), (77, 301), (12, 88)]


def in_hole(wall: dict, inclination, azimuth):
    """sx, sy, sz, txy, tyz, txz in the axes of a hole: x top, y right, z along it."""
    i, a, h = (np.radians(v) for v in (inclination, azimuth, wall["azimuth"]))
    between = a - h
    along, across = wall["sh_max"], wall["sh_min"]
    uu = along * np.cos(between) ** 2 + across * np.sin(between) ** 2
    vv = along * np.sin(between) ** 2 + across * np.cos(between) ** 2
    uv = (across - along) * np.sin(between) * np.cos(between)
    c, s = np.cos(i), np.sin(i)
    sv = wall["sv"]
    return (
        c * c * uu + s * s * sv,
        vv + 0 * s,
        s * s * uu + c * c * sv,
        c * uv,
        s * uv,
        s * c * (uu - sv),
    )


def limits(wall: dict, inclination, azimuth, faces: int):
    """Lower and upper limit, nan where no pressure is safe; everything may be a column of many walls."""
    theta = np.arange(faces) * (np.pi / faces)
    sx, sy, sz, txy, tyz, txz = in_hole(wall, inclination, azimuth)
    pore, ucs = wall["pore"], wall["ucs"]
    q = np.tan(np.radians(45.0 + wall["phi"] / 2)) ** 2
    swing = 2 * (sx - sy) * np.cos(2 * theta) + 4 * txy * np.sin(2 * theta)
    hoop, axial = sx + sy - swing, sz - POISSON * swing
    shear = 4 * (tyz * np.cos(theta) - txz * np.sin(theta)) ** 2
    # s1 in the wall, s3 across it.
    b = ucs - (q - 1) * pore
    x, y = (hoop - b) / (1 + q), (axial - b) / q
    lower = (x + y) / 2 + np.sqrt(((x - y) / 2) ** 2 + shear / (q * (1 + q)))
    # Both in the wall.
    g = ucs + (q - 1) * (axial - pore)
    d = g * g - 4 * q * shear
    can = (g >= 0) & (d >= 0)
    half = (1 + q) / 2 * np.sqrt(np.maximum(d, 0))
    middle = hoop - axial - (q - 1) * g / (2 * q)
    lower = np.where(can, np.maximum(lower, middle - half / q), np.inf)
    upper = np.where(can, middle + half / q, -np.inf)
    # s1 across the wall, s3 in it.
    h = (pore + ucs) / q - pore
    x, y = (hoop + h) * q / (1 + q), (axial + h) * q
    upper = np.minimum(upper, (x + y) / 2 - np.sqrt(((x - y) / 2) ** 2 + shear * q * q / (1 + q)))
    lower, upper = lower.max(-1), upper.min(-1)
    safe = lower <= upper
    return np.where(safe, lower, np.nan), np.where(safe, upper, np.nan)


def whole_map(faces: int, step: int):
    azimuths = np.arange(0.0, 360.0, step)[:, None]
    return np.array([limits(BASE, float(i), azimuths, faces)[0] for i in range(0, 91, step)])


def write(folder: Path) -> None:
    coarse = whole_map(COARSE, 1)
    rows = []
    for i, a in SHOWN:
        one = [limits(BASE, float(i), float(a), faces) for faces in (COARSE, FINE)]
        rows.append({"inclination": i, "azimuth": a, "coarse": [float(v) for v in one[0]], "fine": [float(v) for v in one[1]]})
    body = {
        "about": "Shear limits by direction of the hole, MPa, [lower, upper]; grids of tool faces of 1 and 0.05 degrees.",
        "made_by": "tests/scripts/wall_limits.py",
        "poisson": POISSON,
        "wall": BASE,
        "mean_lower_coarse": float(coarse.mean()),
        "mean_lower_10_coarse": float(whole_map(COARSE, 10).mean()),
        "mean_lower_10_fine": float(whole_map(FINE, 10).mean()),
        "directions": rows,
    }
    (folder / "wall_map.json").write_text(json.dumps(body, indent=1) + "\n", encoding="utf-8")
    normal = np.random.default_rng(START).normal
    drawn = {key: normal(BASE[key], DEVIATIONS[key], DRAWS) for key in BASE}
    column = {key: values[:, None] for key, values in drawn.items()}
    lower, upper = limits(column, *DRAWN_HOLE, FINE)
    table = np.column_stack([*drawn.values(), np.nan_to_num(lower), np.nan_to_num(upper)])
    np.save(folder / "wall_draws.npy", table)


if __name__ == "__main__":
    write(Path(__file__).resolve().parent.parent / "data" / "reference")
