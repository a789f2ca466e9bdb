"""The path as polynomials in the pixel space of one lattice, and where it crosses.

Projecting every sample would be slow and would leave the path undefined between
samples. Instead polynomials go through projected geodesic points (Chebyshev–Lobatto
nodes); their degree rises, and the path is halved, until they stay within
`PATH_ERROR_CELLS` of the geodesic. From then on the polynomials *are* the path.
"""

from collections.abc import Callable
from dataclasses import dataclass
from typing import Final

import numpy as np
from numpy.polynomial import chebyshev

from profiler.errors import DemError
from profiler.model.arrays import FloatArray

#: Largest distance between the polynomial and the geodesic [cells]; design choice:
#: on a 45 degree slope of 30 m cells it changes the ground by 3 mm.
PATH_ERROR_CELLS: Final = 1e-4
#: Degrees tried in turn before the path is halved [1]; measured on a 1 arc-second
#: grid: 5 serves 450 km to 45 degrees of latitude, 8 at 60 (docs/decisions/0002).
DEGREES: Final = (3, 5, 8, 12, 16)
#: Halvings after which a path has no smooth image (it crosses a pole) [1].
MOST_HALVINGS: Final = 10
#: A coordinate this close to a post lies on it [cells]; far below the path's error,
#: far above the rounding of the polynomials.
ON_POST_CELLS: Final = 1e-7
#: Steps of the safeguarded Newton iteration [1]; bisection alone needs 53.
MOST_STEPS: Final = 60
#: Places on a monotone stretch between which a crossing is first guessed [1]; our
#: choice.
GUESS_PLACES: Final = 65
#: A crossing is found when it misses its level by less than this [cells]: far below
#: what counts as on a post.
ON_LEVEL_CELLS: Final = ON_POST_CELLS / 100.0
#: Coefficients below this share of the largest are rounding [1].
ROUNDING: Final = 1e-13
#: Roots with a smaller imaginary part are real [1]; a false one only splits a
#: monotone stretch in two, which changes nothing.
REAL_ROOT: Final = 1e-9

ToPosts = Callable[[FloatArray], tuple[FloatArray, FloatArray]]


@dataclass(frozen=True, slots=True, kw_only=True, eq=False)
class PixelPath:
    """Column and row coordinate of the path as functions of distance."""

    knot_m: FloatArray
    """(m+1,) distances between which one polynomial holds."""
    col: tuple[FloatArray, ...]
    """(m) Chebyshev coefficients of the column on each stretch."""
    row: tuple[FloatArray, ...]
    """(m) the same of the row."""

    def at(self, dist_m: FloatArray) -> tuple[FloatArray, FloatArray]:
        """Column and row coordinates at distances, snapped to posts.

        Parameters
        ----------
        dist_m : (n,) float64 [m]
            Within the path.

        Returns
        -------
        two (n,) float64 [cells]
        """
        which = np.searchsorted(self.knot_m, dist_m, side="right") - 1
        which = np.clip(which, 0, len(self.col) - 1)
        col, row = np.empty_like(dist_m), np.empty_like(dist_m)
        for k in np.unique(which):
            here = which == k
            unit = self._unit(int(k), dist_m[here])
            col[here] = chebyshev.chebval(unit, self.col[k])
            row[here] = chebyshev.chebval(unit, self.row[k])
        return snapped(col), snapped(row)

    def _unit(self, k: int, dist_m: FloatArray) -> FloatArray:
        a, b = self.knot_m[k], self.knot_m[k + 1]
        unit: FloatArray = (2.0 * dist_m - (a + b)) / (b - a)
        return unit

    def crossings(
        self, cols: tuple[float, float], rows: tuple[float, float], offset: float
    ) -> FloatArray:
        """Distances at which the path crosses lines of posts, unsorted.

        Parameters
        ----------
        cols, rows : (float, float) [cells]
            First and last line of interest of each kind.
        offset : float [cells]
            0 for lines through posts, 0.5 for the edges halfway between them.

        Returns
        -------
        (n,) float64 [m]
        """
        found = []
        for k in range(len(self.col)):
            a, b = self.knot_m[k], self.knot_m[k + 1]
            for coef, (low, high) in ((self.col[k], cols), (self.row[k], rows)):
                unit = _level_crossings(coef, low, high, offset)
                found.append((unit * (b - a) + (a + b)) / 2.0)
        return np.concatenate(found)


def snapped(value: FloatArray) -> FloatArray:
    """Coordinates [cells], whole where they lie on a post but for rounding."""
    whole = np.round(value)
    return np.where(np.abs(value - whole) <= ON_POST_CELLS, whole, value)


def fit_pixel_path(to_posts: ToPosts, length_m: float) -> PixelPath:
    """Polynomials through a path's projected points.

    Parameters
    ----------
    to_posts : callable
        Column and row coordinates of distances (n,) [m] along the path.
    length_m : float [m]
        Length of the path, > 0.

    Raises
    ------
    DemError
        If the path has no smooth image in this CRS (it crosses a pole or leaves
        the area for which the CRS is made).
    """
    todo, done = [(0.0, length_m, 0)], []
    while todo:
        a, b, depth = todo.pop()
        fitted = _fit_one(to_posts, a, b)
        if fitted is not None:
            done.append((a, b, *fitted))
            continue
        if depth >= MOST_HALVINGS:
            msg = (
                "The path has no smooth course in this DEM's coordinate system; it "
                "may cross a pole. Use a DEM in a polar projection."
            )
            raise DemError(msg)
        mid = (a + b) / 2.0
        todo += [(mid, b, depth + 1), (a, mid, depth + 1)]
    return PixelPath(
        knot_m=np.array([done[0][0], *(d[1] for d in done)]),
        col=tuple(d[2] for d in done),
        row=tuple(d[3] for d in done),
    )


def _fit_one(
    to_posts: ToPosts, a: float, b: float
) -> tuple[FloatArray, FloatArray] | None:
    """Coefficients of the lowest degree that is close enough, or None."""
    for degree in DEGREES:
        nodes = np.cos(np.pi * np.arange(degree, -1, -1) / degree)
        between = np.cos(np.pi * (np.arange(degree, 0, -1) - 0.5) / degree)
        unit = np.concatenate([nodes, between])
        dist = (a + b + unit * (b - a)) / 2.0
        dist[0], dist[degree] = a, b
        col, row = to_posts(dist)
        if not (np.all(np.isfinite(col)) and np.all(np.isfinite(row))):
            return None
        coefs = [_through(nodes, v[: degree + 1]) for v in (col, row)]
        miss = max(
            float(np.max(np.abs(chebyshev.chebval(between, c) - v[degree + 1 :])))
            for c, v in zip(coefs, (col, row), strict=True)
        )
        if miss <= PATH_ERROR_CELLS:
            return coefs[0], coefs[1]
    return None


def _through(nodes: FloatArray, values: FloatArray) -> FloatArray:
    """Chebyshev coefficients of the polynomial through values at Lobatto nodes."""
    powers = chebyshev.chebvander(nodes, len(nodes) - 1)
    coefs: FloatArray = np.linalg.solve(powers, values).astype(np.float64)
    return coefs


def _level_crossings(
    coef: FloatArray, low: float, high: float, offset: float
) -> FloatArray:
    """Where a polynomial on [−1, 1] meets the levels n + offset in [low, high]."""
    slope: FloatArray = chebyshev.chebder(coef).astype(np.float64)
    turns = _turning_points(slope)
    ends = np.concatenate([[-1.0], turns, [1.0]])
    values = chebyshev.chebval(ends, coef)
    found = [np.empty(0)]
    for i in range(len(ends) - 1):
        bottom = max(min(values[i], values[i + 1]), low)
        top = min(max(values[i], values[i + 1]), high)
        levels = np.arange(np.ceil(bottom - offset), np.floor(top - offset) + 1.0)
        if levels.size:
            found.append(_meet(coef, slope, levels + offset, (ends[i], ends[i + 1])))
    return np.concatenate(found)


def _turning_points(slope: FloatArray) -> FloatArray:
    """Interior zeros of a derivative, sorted."""
    scale = np.max(np.abs(slope))
    if scale == 0.0:
        return np.empty(0)
    trimmed = chebyshev.chebtrim(slope, tol=scale * ROUNDING)
    roots = chebyshev.chebroots(trimmed)
    real = roots[np.abs(roots.imag) < REAL_ROOT].real
    turns: FloatArray = np.sort(real[(real > -1.0) & (real < 1.0)]).astype(np.float64)
    return turns


def _meet(
    coef: FloatArray, slope: FloatArray, level: FloatArray, span: tuple[float, float]
) -> FloatArray:
    """Newton's method kept inside a shrinking bracket, on a monotone stretch."""
    lo = np.full(level.shape, span[0])
    hi = np.full(level.shape, span[1])
    rising = chebyshev.chebval(span[1], coef) >= chebyshev.chebval(span[0], coef)
    grid = np.linspace(span[0], span[1], GUESS_PLACES)
    values = chebyshev.chebval(grid, coef)
    order = slice(None) if rising else slice(None, None, -1)
    at = np.interp(level, values[order], grid[order])
    for _ in range(MOST_STEPS):
        miss = chebyshev.chebval(at, coef) - level
        if np.max(np.abs(miss)) <= ON_LEVEL_CELLS:
            break
        above = (miss > 0.0) == rising
        hi = np.where(above, at, hi)
        lo = np.where(above, lo, at)
        steep = chebyshev.chebval(at, slope)
        with np.errstate(divide="ignore", invalid="ignore"):
            new = at - miss / steep
        inside = (new > lo) & (new < hi)
        at = np.where(inside, new, (lo + hi) / 2.0)
    return at
