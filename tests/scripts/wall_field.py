"""Reference values of the stress round a hole: a finite-element solution with scikit-fem.

    pip install -r tests/scripts/requirements.txt
    OMP_NUM_THREADS=1 python tests/scripts/wall_field.py          every mesh, about half a minute
    OMP_NUM_THREADS=1 python tests/scripts/wall_field.py outer    what is left of the outer edge

The first writes tests/data/reference/wall_field.json and prints how the values settle with the mesh.
The tests read that file and need no Python; compare.py solves the meshes of AGAIN anew.

The hole is round, of radius 1, in an isotropic linear elastic plate, and has the axes of a borehole:
x is the top, y the right, z along the hole; a tool face t is the direction cos t x + sin t y.
Compression is positive; to have it so without a turn of sign, displacement is counted backwards, and
stress is Hooke's law of it. Two problems give the six components:

  in the plane    plane strain under sx, sy, txy from afar, the pressure on the wall; sz is what was
                  there and nu (change of sx + change of sy), for nothing may stretch along the hole;
  along the hole  the antiplane displacement w, div grad w = 0, under txz, tyz from afar, the wall free.

Neither knows the closed form of Kirsch, Hiramatsu and Oka. The outer edge is a circle of OUTER radii
(790) that carries the traction of the far field as it is, and nothing on top of it. What that leaves
falls with the square of OUTER: plates of other sizes, meshed alike further in, put it at 0.0004 MPa
for these cases (`wall_field.py outer`), a small part of the error of the finest mesh.

Elements are quadrilaterals of nine nodes, curved with the circles (isoparametric, quadratic both in
shape and in displacement), AROUND of them in a full turn; each mesh halves the elements of the one
before. Stresses are made continuous by least squares (L2 projection onto the same functions) and read
at corners of the elements, where no place has to be looked for. Their error is of second order.
"""

from __future__ import annotations

import importlib.metadata
import json
import math
import platform
import sys
import time
from pathlib import Path

import numpy as np
import scipy.sparse as sparse
from scipy.sparse.linalg import splu
from skfem import Basis, BilinearForm, ElementQuad2, ElementVector, FacetBasis, LinearForm, MeshQuad1, MeshQuad2, asm
from skfem.helpers import ddot, dot, eye, grad, sym_grad, trace

RADII = [1.0, 1.2, 1.5, 2.0, 3.0]
# Elements in a full turn of each mesh, and layers of them between those radii in the first.
AROUND = [24, 48, 96]
LAYERS = [2, 2, 2, 3]
# From there to the outer edge a layer of the first mesh ends GROWTH times as far out as it begins.
GROWTH, BEYOND = 1.45, 15
OUTER = RADII[-1] * GROWTH**BEYOND
# compare.py solves these again; to so many MPa they must be the same.
AGAIN = [24, 48]
AGAIN_MPA = 2e-6
# A quarter is what the second order promises; the worst radius has 0.338.
SETTLES = 0.36
# Multiples of 15 degrees, so that they are corners of every mesh.
TOOL_FACES = [0.0, 15.0, 60.0, 105.0, 150.0, 195.0, 255.0, 330.0]
COMPONENTS = ["radial", "hoop", "axial", "radial_hoop", "hoop_axial", "radial_axial"]

# MPa; the far field is sx, sy, sz, txy, tyz, txz.
CASES = [
    {"poisson": 0.25, "pressure": 30.0, "far": [52.0, 44.0, 63.0, 3.0, 5.0, -4.0]},
    {"poisson": 0.38, "pressure": 41.5, "far": [47.0, 71.0, 58.0, -9.0, -7.0, 11.0]},
]
# The stiffness cancels out of every stress; one of the order of the stresses keeps the numbers near 1.
YOUNG = 100.0
DECIMALS = 6


# --- the mesh -----------------------------------------------------------------------------------


def circles(around: int, beyond: int) -> np.ndarray:
    """The radii of the circles between the layers, RADII among them."""
    times = around // AROUND[0]
    outer = RADII[-1] * GROWTH**beyond
    out = [1.0]
    for a, b, layers in zip(RADII, [*RADII[1:], outer], [*LAYERS, beyond]):
        count = times * layers
        out.extend(a * (b / a) ** (k / count) for k in range(1, count))
        out.append(b)
    return np.array(out)


def mesh_of(around: int, beyond: int) -> MeshQuad2:
    radii = circles(around, beyond)
    step = 2.0 * math.pi / around
    angle, radius = np.meshgrid(step * np.arange(around), radii)
    points = np.vstack([(radius * np.cos(angle)).ravel(), (radius * np.sin(angle)).ravel()])
    k, j = (a.ravel() for a in np.meshgrid(np.arange(len(radii) - 1), np.arange(around), indexing="ij"))
    after = (j + 1) % around
    corners = np.vstack([k * around + j, (k + 1) * around + j, (k + 1) * around + after, k * around + after])
    mesh = MeshQuad2.from_mesh(MeshQuad1(points, corners))
    # Nodes in the middle of an arc lie on the chord as yet.
    places = mesh.doflocs.copy()
    half = np.rint(np.arctan2(places[1], places[0]) / (0.5 * step)).astype(int)
    places[:, half % 2 != 0] /= math.cos(0.5 * step)
    return MeshQuad2(places, mesh.t)


# --- the two problems ---------------------------------------------------------------------------


def lame(poisson: float) -> tuple[float, float]:
    shear = YOUNG / (2.0 * (1.0 + poisson))
    return 2.0 * shear * poisson / (1.0 - 2.0 * poisson), shear


@BilinearForm
def plane_strain(u, v, w):
    strain = sym_grad(u)
    return ddot(w.first * eye(trace(strain), 2) + 2.0 * w.shear * strain, sym_grad(v))


@LinearForm
def edge_of_far_field(v, w):
    sx, sy, txy = w.sx, w.sy, w.txy
    return (sx * w.n[0] + txy * w.n[1]) * v[0] + (txy * w.n[0] + sy * w.n[1]) * v[1]


@LinearForm
def wall_pressure(v, w):
    return w.pressure * dot(w.n, v)


@BilinearForm
def harmonic(u, v, _):
    return dot(grad(u), grad(v))


@LinearForm
def edge_of_far_shear(v, w):
    return (w.txz * w.n[0] + w.tyz * w.n[1]) * v


@BilinearForm
def mass(u, v, _):
    return u * v


@LinearForm
def weighed(v, w):
    return w.value * v


def solved(stiffness, load: np.ndarray, held: list[int]) -> np.ndarray:
    """The solution with some unknowns held at nothing, against rigid motion. Loads in balance leave
    nothing for them to carry, which is looked at."""
    free = np.setdiff1d(np.arange(len(load)), held)
    matrix = sparse.csc_matrix(stiffness)
    out = np.zeros(len(load))
    out[free] = splu(matrix[free][:, free]).solve(load[free])
    carried = np.abs((matrix @ out - load)[held]).max()
    assert carried < 1e-7 * np.abs(load).sum(), f"the loads are out of balance: {carried}"
    return out


class Plate:
    """One mesh, for every case."""

    def __init__(self, around: int, beyond: int = BEYOND) -> None:
        self.around, self.outer = around, RADII[-1] * GROWTH**beyond
        self.mesh = mesh_of(around, beyond)
        middle = 0.5 * (1.0 + self.outer)
        edge = self.mesh.facets_satisfying(lambda x: np.hypot(*x) > middle, boundaries_only=True)
        wall = self.mesh.facets_satisfying(lambda x: np.hypot(*x) < middle, boundaries_only=True)
        assert len(edge) == around and len(wall) == around, "the edges of the plate"
        order = 6
        self.scalar = Basis(self.mesh, ElementQuad2(), intorder=order)
        self.vector = Basis(self.mesh, ElementVector(ElementQuad2()), intorder=order)
        self.scalar_edge = FacetBasis(self.mesh, ElementQuad2(), facets=edge, intorder=order)
        self.vector_edge = FacetBasis(self.mesh, ElementVector(ElementQuad2()), facets=edge, intorder=order)
        self.vector_wall = FacetBasis(self.mesh, ElementVector(ElementQuad2()), facets=wall, intorder=order)
        self.masses = splu(sparse.csc_matrix(asm(mass, self.scalar)))
        self.nodes = {}
        for radius in RADII:
            for tool_face in TOOL_FACES:
                self.nodes[radius, tool_face] = self.node(radius, math.radians(tool_face))

    def node(self, radius: float, angle: float) -> int:
        x, y = self.scalar.doflocs
        distance = np.hypot(x - radius * math.cos(angle), y - radius * math.sin(angle))
        nearest = int(np.argmin(distance))
        assert distance[nearest] < 1e-12, f"no node at {radius}, {angle}"
        return nearest

    def unknowns(self, basis: Basis, radius: float, angle: float) -> list[int]:
        x, y = basis.doflocs
        near = np.hypot(x - radius * math.cos(angle), y - radius * math.sin(angle)) < 1e-9 * radius
        return sorted(int(k) for k in np.flatnonzero(near))

    def continuous(self, value: np.ndarray) -> np.ndarray:
        """Least squares of a value at the quadrature points."""
        return self.masses.solve(asm(weighed, self.scalar, value=value))

    def in_the_plane(self, poisson: float, pressure: float, far: list[float]) -> list[np.ndarray]:
        """sx, sy, txy at the nodes."""
        first, shear = lame(poisson)
        sx, sy, _, txy, _, _ = far
        stiffness = asm(plane_strain, self.vector, first=first, shear=shear)
        load = asm(edge_of_far_field, self.vector_edge, sx=sx, sy=sy, txy=txy)
        # The normal of the plate points into the hole, and so does the pressure of what fills it.
        load = load + asm(wall_pressure, self.vector_wall, pressure=pressure)
        a, b = (self.unknowns(self.vector, self.outer, angle) for angle in (0.0, math.pi))
        assert len(a) == 2 and len(b) == 2, "the nodes that are held"
        u = solved(stiffness, load, [*a, b[1]])
        strain = sym_grad(self.vector.interpolate(u))
        stress = first * eye(trace(strain), 2) + 2.0 * shear * strain
        return [self.continuous(stress[i, j]) for i, j in ((0, 0), (1, 1), (0, 1))]

    def along_the_hole(self, far: list[float]) -> list[np.ndarray]:
        """txz, tyz at the nodes, the shear modulus 1."""
        _, _, _, _, tyz, txz = far
        load = asm(edge_of_far_shear, self.scalar_edge, txz=txz, tyz=tyz)
        w = solved(asm(harmonic, self.scalar), load, self.unknowns(self.scalar, self.outer, 0.0))
        slope = grad(self.scalar.interpolate(w))
        return [self.continuous(slope[i]) for i in (0, 1)]

    def field(self, case: dict) -> np.ndarray:
        """Radius, tool face, component."""
        far = case["far"]
        sx, sy, txy = self.in_the_plane(case["poisson"], case["pressure"], far)
        txz, tyz = self.along_the_hole(far)
        sz = far[2] + case["poisson"] * ((sx - far[0]) + (sy - far[1]))
        out = np.empty((len(RADII), len(TOOL_FACES), len(COMPONENTS)))
        for i, radius in enumerate(RADII):
            for j, tool_face in enumerate(TOOL_FACES):
                k = self.nodes[radius, tool_face]
                c, s = math.cos(math.radians(tool_face)), math.sin(math.radians(tool_face))
                turn = np.array([[c, s, 0.0], [-s, c, 0.0], [0.0, 0.0, 1.0]])
                here = np.array([[sx[k], txy[k], txz[k]], [txy[k], sy[k], tyz[k]], [txz[k], tyz[k], sz[k]]])
                local = turn @ here @ turn.T
                out[i, j] = [local[0, 0], local[1, 1], local[2, 2], local[0, 1], local[1, 2], local[0, 2]]
        return out


# --- outputs ------------------------------------------------------------------------------------


def solved_mesh(around: int) -> dict:
    mesh = Plate(around)
    return {
        "around": around,
        "elements": int(mesh.mesh.t.shape[1]),
        "unknowns": int(mesh.vector.N + mesh.scalar.N),
        "values": [np.round(mesh.field(case), DECIMALS).tolist() for case in CASES],
    }


def put(folder: Path, meshes: list[dict]) -> None:
    versions = [f"{name} {importlib.metadata.version(name)}" for name in ("numpy", "scipy", "scikit-fem")]
    body = {
        "about": "Stress round a hole of radius 1 by finite elements, MPa, compression positive, degrees. "
        "values: case, radius, tool face, component.",
        "made_by": "tests/scripts/wall_field.py",
        "versions": [f"python {platform.python_version()}", *versions],
        "outer": OUTER,
        "layers": [*LAYERS, BEYOND],
        "far_components": ["x", "y", "z", "xy", "yz", "xz"],
        "cases": CASES,
        "radii": RADII,
        "tool_faces": TOOL_FACES,
        "components": COMPONENTS,
    }
    lines = [f' "{key}": {json.dumps(value)}' for key, value in body.items()]
    of_meshes = []
    for mesh in meshes:
        head = json.dumps({key: value for key, value in mesh.items() if key != "values"})[:-1]
        of_cases = [
            "[\n    " + ",\n    ".join(json.dumps(row, separators=(",", ":")) for row in case) + "]"
            for case in mesh["values"]
        ]
        of_meshes.append(f'  {head}, "values": [\n   ' + ",\n   ".join(of_cases) + "]}")
    lines.append(' "meshes": [\n' + ",\n".join(of_meshes) + "\n ]")
    (folder / "wall_field.json").write_text("{\n" + ",\n".join(lines) + "\n}\n", encoding="utf-8")


def write(folder: Path) -> None:
    """The meshes of AGAIN; the whole file is written when this is run as a script."""
    put(folder, [solved_mesh(around) for around in AGAIN])


def differences(name: str, stored: Path, made: Path) -> list[str]:
    """The inputs to the letter, the meshes that were solved again to AGAIN_MPA, and the others by how
    the values settle: each mesh must move them by less than SETTLES of what the one before did."""
    a, b = (json.loads(path.read_text(encoding="utf-8")) for path in (stored, made))
    found = [f"{key}: other than stored" for key in b if key not in ("versions", "meshes") and a.get(key) != b[key]]
    # The numbers are as good with another Python, the pinned packages are a part of them.
    if a["versions"][1:] != b["versions"][1:]:
        found.append(f"versions: {a['versions']} is not {b['versions']}")
    if [mesh["around"] for mesh in a["meshes"]] != AROUND:
        return [*found, f"meshes: not those of {AROUND}"]
    by_around = {mesh["around"]: mesh for mesh in a["meshes"]}
    for mesh in b["meshes"]:
        kept = by_around[mesh["around"]]
        if any(kept[key] != mesh[key] for key in ("elements", "unknowns")):
            found.append(f"mesh {mesh['around']}: another size")
        off = np.abs(np.array(kept["values"]) - np.array(mesh["values"])).max()
        if not off <= AGAIN_MPA:
            found.append(f"mesh {mesh['around']}: differs by {off:.3g} MPa, {AGAIN_MPA:g} allowed")
    moves = np.array(settling([np.array(mesh["values"]) for mesh in a["meshes"]]))
    if not np.all(moves[1:] < SETTLES * moves[:-1]):
        found.append(f"the stored values do not settle: {moves.round(4).tolist()} MPa by case and radius")
    return found


def settling(values: list[np.ndarray]) -> list[np.ndarray]:
    """By how much each mesh moves the values of the one before at most: case, radius."""
    return [np.abs(fine - coarse).max(axis=(2, 3)) for coarse, fine in zip(values, values[1:])]


def print_settling(meshes: list[dict]) -> None:
    values = [np.array(mesh["values"]) for mesh in meshes]
    for mesh, move in zip(meshes[1:], settling(values)):
        for case, row in enumerate(move):
            print(f"mesh {mesh['around']} moves case {case} at {RADII} radii by at most {row.round(4).tolist()} MPa")


def print_outer() -> None:
    """Plates of several sizes on the second mesh, the same further in."""
    layers = [3, 6, 9, 12, BEYOND, BEYOND + 6]
    plates = [Plate(AROUND[1], beyond) for beyond in layers]
    values = [np.array([plate.field(case) for case in CASES]) for plate in plates]
    for plate, value in zip(plates[:-1], values):
        off = np.abs(value - values[-1]).max()
        print(f"outer edge at {plate.outer:.1f} radii: {off:.2e} MPa off that at {plates[-1].outer:.0f}, "
              f"times its square {off * plate.outer**2:.0f}")


if __name__ == "__main__":
    if sys.argv[1:] == ["outer"]:
        print_outer()
    else:
        begin = time.perf_counter()
        all_of = []
        for around in AROUND:
            all_of.append(solved_mesh(around))
            print(f"mesh {around}: {all_of[-1]['unknowns']} unknowns, {time.perf_counter() - begin:.1f} s so far")
        print_settling(all_of)
        put(Path(__file__).resolve().parents[1] / "data" / "reference", all_of)
