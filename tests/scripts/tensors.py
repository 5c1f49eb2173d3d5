"""Reference values for turns and principal stresses, by numpy and scipy.

    python tests/scripts/tensors.py            writes tests/data/reference/{eigen,turns}.npy

The inputs are not stored. They come from the generator below, which tests/src/splitmix.rs repeats
operation by operation: integers by splitmix64 (Steele, Lea and Flood 2014), and from them floats by
sums, products and quotients alone, which IEEE 754 rounds in the same way everywhere.

eigen.npy  (N, 9): the principal stresses of tensor k in falling order, and the unit axes of the
           first and the third, in north, east, down, each by its lower end; NaN where a magnitude
           equals its neighbour's (closer than 1e-9 of the sum of the sizes) and no axis exists.
turns.npy  (N, 15): the matrix Q of attitude k (rows: top of hole, right, along the hole) and the
           tensor k in those axes, Q S Q^T, as xx, yy, zz, xy, yz, xz.
"""

from __future__ import annotations

import math
from pathlib import Path

import numpy as np
from scipy.spatial.transform import Rotation

COUNT = 10_000
EQUAL = 1e-9
MASK = (1 << 64) - 1


class SplitMix64:
    """The generator; `unit` is uniform in [0, 1) in steps of 2^-53."""

    def __init__(self, state: int) -> None:
        self.state = state

    def integer(self) -> int:
        self.state = (self.state + 0x9E3779B97F4A7C15) & MASK
        z = self.state
        z = ((z ^ (z >> 30)) * 0xBF58476D1CE4E5B9) & MASK
        z = ((z ^ (z >> 27)) * 0x94D049BB133111EB) & MASK
        return z ^ (z >> 31)

    def unit(self) -> float:
        return (self.integer() >> 11) * 2.0**-53

    def signed(self) -> float:
        return 2.0 * self.unit() - 1.0


# --- inputs: tests/src/splitmix.rs does the same, in the same order -----------------------------


def components(g: SplitMix64, scale: float) -> list[float]:
    """Six components xx, yy, zz, xy, yz, xz, each within the scale."""
    return [scale * g.signed() for _ in range(6)]


def built(g: SplitMix64, values: list[float]) -> list[float]:
    """A tensor with about these principal values, along axes of a random quaternion."""
    while True:
        w, x, y, z = g.signed(), g.signed(), g.signed(), g.signed()
        n = w * w + x * x + y * y + z * z
        if n > 0.01:
            break
    axes = [
        [(w * w + x * x - y * y - z * z) / n, 2.0 * (x * y - w * z) / n, 2.0 * (x * z + w * y) / n],
        [2.0 * (x * y + w * z) / n, (w * w - x * x + y * y - z * z) / n, 2.0 * (y * z - w * x) / n],
        [2.0 * (x * z - w * y) / n, 2.0 * (y * z + w * x) / n, (w * w - x * x - y * y + z * z) / n],
    ]
    six = []
    for i, j in ((0, 0), (1, 1), (2, 2), (0, 1), (1, 2), (0, 2)):
        total = 0.0
        for value, axis in zip(values, axes):
            total = total + value * axis[i] * axis[j]
        six.append(total)
    return six


def near(g: SplitMix64, k: int, gap: float) -> list[float]:
    """Two principal values a relative gap apart, the third above, below, or as near again."""
    b = 1e7 + 9e7 * g.unit()
    other = g.unit()
    values = [b, b * (1.0 - gap)]
    if k % 3 == 0:
        values.append(b * (0.2 + 0.6 * other))
    elif k % 3 == 1:
        values.append(b * (1.3 + 0.7 * other))
    else:
        values.append(b * (1.0 - 2.5 * gap))
    return built(g, values)


def tensor(g: SplitMix64, k: int) -> list[float]:
    """The tensor k of twenty families, in pascals."""
    family = k % 20
    if family < 8:
        return components(g, 1e8)
    if family < 13:
        return near(g, k // 20, [1e-2, 1e-4, 1e-6, 1e-7, 1e-8][family - 8])
    if family < 15:
        return near(g, k // 20, [1e-10, 1e-11, 1e-12, 1e-13, 1e-14, 0.0][(k // 20) % 6])
    if family == 15:
        b, c = 1e8 * g.unit(), 1e8 * g.signed()
        return [[b, b, c], [b, c, b], [c, b, b]][(k // 20) % 3] + [0.0, 0.0, 0.0]
    if family == 16:
        b = 1e8 * g.signed()
        return [b, b, b, 0.0, 0.0, 0.0]
    if family == 17:
        return components(g, 1e-12)
    if family == 18:
        return components(g, 1e20)
    return built(g, [-1e8 * (0.1 + g.unit()), -1e8 * (0.1 + g.unit()), -1e8 * (0.1 + g.unit())])


def attitude(g: SplitMix64, k: int) -> tuple[float, float]:
    """Azimuth and inclination k in degrees; every tenth one on the edges of their ranges."""
    azimuth, inclination = 360.0 * g.unit(), 180.0 * g.unit()
    if k % 10 == 0:
        azimuth = [0.0, 90.0, 180.0, 270.0, 359.999][(k // 10) % 5]
    if k % 20 < 2:
        inclination = [0.0, 90.0, 180.0, 45.0, 135.0, 1e-7, 89.999_999][(k // 20) % 7]
    return azimuth, inclination


# --- outputs ------------------------------------------------------------------------------------


def rows(six: list[float]) -> np.ndarray:
    xx, yy, zz, xy, yz, xz = six
    return np.array([[xx, xy, xz], [xy, yy, yz], [xz, yz, zz]])


def lower_end(axis: np.ndarray) -> np.ndarray:
    upward = axis[2] < 0.0 or (axis[2] == 0.0 and axis[0] < 0.0)
    return -axis if upward else axis


def eigen() -> np.ndarray:
    g = SplitMix64(1)
    out = np.empty((COUNT, 9))
    for k in range(COUNT):
        values, axes = np.linalg.eigh(rows(tensor(g, k)))
        values, axes = values[::-1], axes.T[::-1]
        share = np.array([values[0] - values[1], values[1] - values[2]]) / np.abs(values).sum()
        # No case may hang on where exactly "equal" begins.
        assert not np.any((share > 0.5 * EQUAL) & (share < 2.0 * EQUAL)), (k, share)
        first = lower_end(axes[0]) if share[0] > EQUAL else np.full(3, np.nan)
        third = lower_end(axes[2]) if share[1] > EQUAL else np.full(3, np.nan)
        out[k] = np.concatenate([values, first, third])
    return out


def turns() -> np.ndarray:
    g = SplitMix64(2)
    out = np.empty((COUNT, 15))
    for k in range(COUNT):
        azimuth, inclination = (math.radians(x) for x in attitude(g, k))
        s = rows(components(g, 1e8))
        # The matrix by intrinsic Euler angles: about down, then about the right axis as it then lies.
        q = Rotation.from_euler("ZY", [azimuth, inclination]).as_matrix().T
        # The tensor by two turns about fixed axes in space, applied to the axis vectors one by one.
        about_down = Rotation.from_rotvec([0.0, 0.0, azimuth])
        right = about_down.apply([0.0, 1.0, 0.0])
        turn = Rotation.from_rotvec(inclination * right) * about_down
        axes = [turn.apply(unit) for unit in np.eye(3)]
        turned = [axes[i] @ s @ axes[j] for i, j in ((0, 0), (1, 1), (2, 2), (0, 1), (1, 2), (0, 2))]
        out[k] = np.concatenate([q.ravel(), turned])
    return out


def write(folder: Path) -> None:
    """Writes every file of this script into a folder."""
    np.save(folder / "eigen.npy", eigen().astype("<f8"))
    np.save(folder / "turns.npy", turns().astype("<f8"))


def differences(name: str, stored: Path, made: Path) -> list[str]:
    """Where two versions of a file differ. Matrix and tensor of a row have scales of their own; an
    axis is only as good as the gap beside it, and its sign is nobody's."""
    a, b = np.load(stored), np.load(made)
    if a.shape != b.shape:
        return [f"shape {a.shape} is not {b.shape}"]
    return eigen_differences(a, b) if name == "eigen.npy" else turn_differences(a, b)


def turn_differences(a: np.ndarray, b: np.ndarray) -> list[str]:
    found = []
    for what, part, share in (("matrix", slice(0, 9), 1e-14), ("tensor", slice(9, 15), 1e-13)):
        off = np.abs(a[:, part] - b[:, part]).max(axis=1)
        scale = np.abs(a[:, part]).max(axis=1)
        for k in np.flatnonzero(~(off <= share * scale)):
            found.append(f"attitude {k}: the {what} differs by {off[k]:.3g} of {scale[k]:.3g}")
    return found


def eigen_differences(a: np.ndarray, b: np.ndarray) -> list[str]:
    found = []
    scale = np.abs(a[:, :3]).max(axis=1)
    off = np.abs(a[:, :3] - b[:, :3]).max(axis=1)
    for k in np.flatnonzero(~(off <= 1e-13 * scale)):
        found.append(f"tensor {k}: principal stresses differ by {off[k]:.3g} of {scale[k]:.3g}")
    for first, gap in ((3, a[:, 0] - a[:, 1]), (6, a[:, 1] - a[:, 2])):
        u, v = a[:, first : first + 3], b[:, first : first + 3]
        if not np.array_equal(np.isnan(u), np.isnan(v)):
            found.append("axes are undefined for other tensors")
            continue
        across = np.linalg.norm(np.cross(u, v), axis=1)
        allowed = 1e-15 + 1e-14 * scale / np.where(gap > 0.0, gap, np.nan)
        for k in np.flatnonzero(across > allowed):
            found.append(f"tensor {k}: an axis differs by {across[k]:.3g}, {allowed[k]:.3g} allowed")
    return found


if __name__ == "__main__":
    write(Path(__file__).resolve().parents[1] / "data" / "reference")
