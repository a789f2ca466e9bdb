"""Steps in height where one file ends and another begins."""

from typing import Final

import numpy as np

from profiler.constants import SEAM_STEP_M
from profiler.model.arrays import FloatArray, IntArray
from profiler.terrain.windows import Window

#: Fewest neighbouring pairs of posts that make a median worth stating [1]; our choice.
FEWEST_PAIRS: Final = 8
#: How far a seam is followed to either side of the path [posts]; measured on the
#: roughest ground at hand (pairs scatter by 6 m): a step of 3 m stands out.
SEAM_POSTS: Final = 100
#: Standard error of a median of n normal values, in their median deviation/√n [1]:
#: √(π/2)·1.4826.
ERROR_OF_MEDIAN: Final = 1.858
#: A step must exceed the standard error this many times [1]; measured on the same
#: ground: no false step on 200 paths, 197 of 200 steps of 3 m found.
SURE: Final = 4.0


def note_seams(steps: dict[tuple[int, int], float], window: Window) -> None:
    """Add the median step between neighbouring files of a window to ``steps``.

    The step between two posts of different files is what is left of their difference
    after the slope on either side is taken off; the median along the seam is not
    fooled by rough ground.

    Parameters
    ----------
    steps : dict
        By pair of file numbers: largest median step above `SEAM_STEP_M` so far [m].
    window : Window
        Posts and the files they came from.
    """
    numbers = np.unique(window.owner)
    if np.count_nonzero(numbers >= 0) < 2:
        return
    found: dict[tuple[int, int], list[FloatArray]] = {}
    for height, owner in (
        (window.height_m, window.owner),
        (window.height_m.T, window.owner.T),
    ):
        for pair, gaps in _gaps_along_rows(height, owner).items():
            found.setdefault(pair, []).append(gaps)
    for pair, parts in found.items():
        gaps = np.concatenate(parts)
        if gaps.size < FEWEST_PAIRS:
            continue
        step = float(np.median(gaps))
        scatter = float(np.median(np.abs(gaps - step)))
        if abs(step) < SURE * ERROR_OF_MEDIAN * scatter / np.sqrt(gaps.size):
            continue
        if abs(step) > max(SEAM_STEP_M, abs(steps.get(pair, 0.0))):
            steps[pair] = step


def _gaps_along_rows(
    height: FloatArray, owner: IntArray
) -> dict[tuple[int, int], FloatArray]:
    """Second-difference steps between horizontal neighbours of two files [m]."""
    if height.shape[1] < 4:
        return {}
    a0, a1, b1, b0 = (owner[:, k : owner.shape[1] - 3 + k] for k in range(4))
    z0, z1, z2, z3 = (height[:, k : height.shape[1] - 3 + k] for k in range(4))
    seam = (a0 == a1) & (b0 == b1) & (a1 != b1) & (a1 >= 0) & (b1 >= 0)
    gap = (z2 - z1) - ((z1 - z0) + (z3 - z2)) / 2.0
    found = {}
    for left, right in np.unique(np.stack([a1[seam], b1[seam]], axis=1), axis=0):
        here = gap[seam & (a1 == left) & (b1 == right)]
        low, high = sorted((int(left), int(right)))
        found[(low, high)] = here if left == low else -here
    return found
