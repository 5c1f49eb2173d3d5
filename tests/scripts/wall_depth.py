"""Depth of first failure and tilt of tensile cracks round a hole, by numpy and scipy.

The elastic field by complex potentials (Muskhelishvili) in numpy's own complex numbers, principal values and
axes by LAPACK (eigvalsh, eigh), the edge along a radius by Brent's root finder between steps of 0.02
radii, the deepest tool face and the place of the least stress by bounded minimisation beside the best of a
net of a degree or less. MPa and degrees; compression positive; x top of the hole, y right, z along it.
"""

from __future__ import annotations

import json
from pathlib import Path

import numpy as np
import scipy
from scipy.optimize import brentq, minimize_scalar

TOLERANCE = 1e-6
REACH = 4.0


def field(far, poisson, pressure, theta, ratio):
    """The 3 x 3 stress in x, y, z at a tool face (radians) and a distance (radii)."""
    x, y, z, xy, yz, xz = far
    zeta = ratio * np.exp(1j * theta)
    gamma, skew = (x + y) / 4, (y - x) / 2 + 1j * xy
    phi1 = gamma + np.conj(skew) / zeta**2
    phi2 = -2 * np.conj(skew) / zeta**3
    psi1 = skew + (2 * gamma - pressure) / zeta**2 + 3 * np.conj(skew) / zeta**4
    total, apart = 4 * phi1.real, 2 * (np.conj(zeta) * phi2 + psi1)
    shear = (xz - 1j * yz) - (xz + 1j * yz) / zeta**2
    sx, sy, sxy = (total - apart.real) / 2, (total + apart.real) / 2, apart.imag / 2
    sz = z + poisson * (total - x - y)
    return np.array([[sx, sxy, shear.real], [sxy, sy, -shear.imag], [shear.real, -shear.imag, sz]])


def excess(case, theta, ratio):
    stress = np.linalg.eigvalsh(field(case["far"], case["poisson"], case["pressure"], theta, ratio)) - case["pore"]
    s = np.sin(np.radians(case["phi"]))
    q = (1 + s) / (1 - s)
    ucs = 2 * case["c"] * np.sqrt(q)
    intact = stress[2] - q * stress[0] - ucs
    if "normal" in case:
        n = np.array(case["normal"]) / np.linalg.norm(case["normal"])
        traction = field(case["far"], case["poisson"], case["pressure"], theta, ratio) @ n
        normal = traction @ n
        shear = np.sqrt(max(traction @ traction - normal**2, 0.0))
        slip = shear - case["c_w"] - (normal - case["pore"]) * np.tan(np.radians(case["phi_w"]))
        return max(intact, slip)
    return intact


def edges(case, theta):
    """Failing stretches along a radius."""
    ratios = np.arange(1.0, REACH, 0.02)
    values = np.array([excess(case, theta, r) for r in ratios])
    out, start = [], 1.0 if values[0] > 0 else None
    for k in range(len(ratios) - 1):
        if (values[k] > 0) != (values[k + 1] > 0):
            root = brentq(lambda r: excess(case, theta, r), ratios[k], ratios[k + 1], xtol=1e-14, rtol=1e-14)
            if start is None:
                start = root
            else:
                out.append([start, root])
                start = None
    assert start is None, "the zone goes on beyond the net"
    return out


def deepest(case):
    reach = lambda theta: max((b for _, b in edges(case, theta)), default=0.0)
    net = np.radians(np.arange(0.0, 180.0, 1.0))
    best = net[int(np.argmax([reach(t) for t in net]))]
    if reach(best) == 0.0:
        return None
    step = np.radians(1.0)
    found = minimize_scalar(lambda t: -reach(t), bounds=(best - step, best + step), method="bounded", options={"xatol": 1e-9})
    return [float(-found.fun), float(np.degrees(found.x) % 180.0)]


def crack(case):
    """Least effective principal stress in the wall, its tool face, and the tilt of the crack there: the
    trace turned right-handed about the outward direction, clockwise seen from inside."""

    def least(theta):
        stress = field(case["far"], case["poisson"], case["pressure"], theta, 1.0)
        m, t = np.array([-np.sin(theta), np.cos(theta), 0.0]), np.array([0.0, 0.0, 1.0])
        wall = np.array([[m @ stress @ m, m @ stress @ t], [m @ stress @ t, t @ stress @ t]])
        values, axes = np.linalg.eigh(wall)
        return values[0] - case["pore"], axes[0, 0] * m + axes[1, 0] * t

    net = np.radians(np.arange(0.0, 180.0, 0.25))
    best = net[int(np.argmin([least(t)[0] for t in net]))]
    step = np.radians(0.25)
    theta = minimize_scalar(lambda t: least(t)[0], bounds=(best - step, best + step), method="bounded", options={"xatol": 1e-10}).x
    value, normal = least(theta)
    outward, along = np.array([np.cos(theta), np.sin(theta), 0.0]), np.array([0.0, 0.0, 1.0])
    trace = np.cross(outward, normal)
    trace = trace if trace @ along > 0 else -trace
    tilt = np.arctan2(outward @ np.cross(along, trace), along @ trace)
    return [float(value), float(np.degrees(theta) % 180.0), float(np.degrees(tilt))]


A, B, C = [52.0, 44.0, 63.0, 3.0, 5.0, -4.0], [47.0, 71.0, 58.0, -9.0, -7.0, 11.0], [41.0, 51.0, 60.0, -3.2, 3.1, -11.3]
BED, WEAK = [0.3, -0.5, 0.8], {"c_w": 5.0, "phi_w": 22.0}
ROCK = {"poisson": 0.25, "pore": 20.0, "c": 10.0, "phi": 30.0}
CASES = [
    {"far": A, "pressure": 22.0, **ROCK},
    {"far": A, "pressure": 28.0, **ROCK},
    {"far": A, "pressure": 60.0, **ROCK},
    {"far": B, "pressure": 33.0, **ROCK, "poisson": 0.38},
    {"far": B, "pressure": 68.0, **ROCK, "poisson": 0.1},
    {"far": C, "pressure": 46.0, **ROCK},
    {"far": A, "pressure": 22.0, **ROCK, "c": 40.0, "normal": BED, **WEAK},
    {"far": A, "pressure": 26.0, **ROCK, "c": 40.0, "normal": BED, **WEAK},
    {"far": C, "pressure": 40.0, **ROCK, "c": 40.0, "normal": [0.6, 0.2, 0.7], **WEAK},
]


def write(folder: Path) -> None:
    cases = []
    for case in CASES:
        at = [0.0, 30.0, 75.0, 120.0, 165.0]
        cases.append(
            {
                **case,
                "tool_faces": at,
                "stretches": [edges(case, np.radians(t)) for t in at],
                "deepest": deepest(case),
                "crack": crack(case),
            }
        )
    made = {
        "about": "Depth of first failure (radii) and tilt of cracks round a hole by numpy and scipy; MPa, degrees.",
        "made_by": "tests/scripts/wall_depth.py",
        "versions": [f"numpy {np.__version__}", f"scipy {scipy.__version__}"],
        "cases": cases,
    }
    (folder / "wall_depth.json").write_text(json.dumps(made, indent=1) + "\n")
