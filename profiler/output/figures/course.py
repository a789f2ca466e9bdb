"""Where things stand on the drawing: the profile over a curved or a level sea."""

import math
from dataclasses import dataclass
from typing import Final

import numpy as np

from profiler.errors import InputError
from profiler.kernels.circle import ray_height, sight_height
from profiler.kernels.runs import runs_of_true
from profiler.model import BoolArray, FloatArray, IntArray, SightLine

CURVED_SEA: Final = "curved-sea"
LEVEL_SEA: Final = "level-sea"
#: Columns into which a long path is thinned [1]: a quarter of a millimetre on A4.
COLUMNS: Final = 800
#: Samples a column above which a path is thinned [1].
THIN_ABOVE: Final = 2
#: Points at which smooth lines (sea, rays) are drawn [1].
SMOOTH_POINTS: Final = 129


@dataclass(frozen=True, slots=True, kw_only=True, eq=False)
class Course:
    """The answer and how its heights are put on paper.

    Notes
    -----
    Over a curved sea a height z at distance d stands at
    ``straight(d) + z - sight(d)``, where ``straight`` runs evenly from the eye's height
    to the aim point's: the sight line is exactly straight, the distance of ground from
    it is the record's margin, and heights at both ends are themselves. Over a level
    sea z stands at z.
    """

    line: SightLine
    curved: bool
    """Whether the sea is drawn curved and the sight line straight."""

    def sight_m(self, dist_m: FloatArray) -> FloatArray:
        """Height of the sight line, continued past the aim point [m]."""
        return sight_height(
            dist_m,
            self.line.aim_distance_m,
            self.line.from_.amsl_m,
            self.line.aim_m,
            self.line.earth.kappa_per_m,
        )

    def paper_m(self, dist_m: FloatArray, height_m: FloatArray) -> FloatArray:
        """Heights on paper of heights above sea level [m]."""
        height = np.asarray(height_m, dtype=np.float64)
        if not self.curved:
            return height
        dist = np.asarray(dist_m, dtype=np.float64)
        eye, aim = self.line.from_.amsl_m, self.line.aim_m
        straight = eye + (aim - eye) * dist / self.line.aim_distance_m
        paper: FloatArray = straight + height - self.sight_m(dist)
        return paper

    def paper_at(self, dist_m: float, height_m: float) -> float:
        """Height on paper of one height [m]."""
        return float(self.paper_m(np.array([dist_m]), np.array([height_m]))[0])

    def grazing_m(self, dist_m: FloatArray) -> FloatArray | None:
        """Height of the ray over the horizon point [m]; None without one."""
        horizon = self.line.horizon
        if horizon is None:
            return None
        tangent = np.full_like(dist_m, math.tan(math.radians(horizon.elevation_deg)))
        return ray_height(
            dist_m, tangent, self.line.from_.amsl_m, self.line.earth.kappa_per_m
        )

    def smooth_m(self) -> FloatArray:
        """Distances at which smooth lines are drawn [m]."""
        return np.linspace(0.0, self.line.path.length_m, SMOOTH_POINTS)


def course_of(line: SightLine, draw: str) -> Course:
    """The answer with the sea that was asked for.

    Raises
    ------
    InputError
        If ``draw`` is neither "curved-sea" nor "level-sea".
    """
    if draw not in (CURVED_SEA, LEVEL_SEA):
        msg = f'--draw "{draw}" is neither {CURVED_SEA} nor {LEVEL_SEA}.'
        raise InputError(msg)
    return Course(line=line, curved=draw == CURVED_SEA)


@dataclass(frozen=True, slots=True, kw_only=True, eq=False)
class Trace:
    """The ground as it is drawn: every sample, or each column's extremes."""

    dist_m: FloatArray
    """(n,) distance from the eye's end."""
    ground_m: FloatArray
    """(n,) elevation, NaN where none is known."""
    top_m: FloatArray
    """(n,) elevation of ground and cover together."""
    paper_m: FloatArray
    """(n,) height of the ground on paper."""
    paper_top_m: FloatArray
    """(n,) height on paper of ground and cover together."""
    margin_m: FloatArray
    """(n,) sight line minus ground and cover, continued past the aim point."""
    seen: BoolArray
    """(n,) whether the eye sees the ground."""


def trace_of(course: Course) -> Trace:
    """The ground to draw; a peak, a hollow or a void of the profile is never lost."""
    profile = course.line.profile
    dist, ground, top = profile.dist_m, profile.ground_m, profile.top_m
    margin = course.sight_m(dist) - top
    keep = thinned(dist, margin, profile.length_m)
    return Trace(
        dist_m=dist[keep],
        ground_m=ground[keep],
        top_m=top[keep],
        paper_m=course.paper_m(dist, ground)[keep],
        paper_top_m=course.paper_m(dist, top)[keep],
        margin_m=margin[keep],
        seen=course.line.ground_seen[keep],
    )


def _columns(dist_m: FloatArray, length_m: float) -> FloatArray:
    column = np.floor(dist_m / length_m * COLUMNS)
    return np.minimum(column, COLUMNS - 1)


def thinned(dist_m: FloatArray, margin_m: FloatArray, length_m: float) -> IntArray:
    """Indices of the samples to draw: first, last, lowest and highest of each column.

    Parameters
    ----------
    dist_m : (n,) float64 [m]
        Distances, never falling.
    margin_m : (n,) float64 [m]
        What is drawn; NaN in voids, whose two edges are kept.
    length_m : float [m]
        Length of the path.

    Returns
    -------
    (m,) int64
        Rising indices; all of them for a path of few samples.
    """
    if dist_m.size <= THIN_ABOVE * COLUMNS:
        return np.arange(dist_m.size)
    known = np.isfinite(margin_m)
    column = _columns(dist_m, length_m)
    cut = np.flatnonzero((np.diff(column) != 0) | (np.diff(known) != 0)) + 1
    starts = np.concatenate([[0], cut])
    ends = np.concatenate([cut, [dist_m.size]])
    keep = [starts, ends - 1]
    inside = [
        (a + int(np.argmin(margin_m[a:b])), a + int(np.argmax(margin_m[a:b])))
        for a, b in zip(starts.tolist(), ends.tolist(), strict=True)
        if known[a]
    ]
    return np.unique(np.concatenate([*keep, np.array(inside, dtype=np.int64).ravel()]))


def void_runs(course: Course) -> list[tuple[float, float]]:
    """Start and end [m] of every stretch of path without ground."""
    profile = course.line.profile
    first, end = runs_of_true(np.isnan(profile.ground_m))
    last = profile.dist_m.size - 1
    # the known samples on both sides stand at the edges of the void
    return [
        (float(profile.dist_m[max(a - 1, 0)]), float(profile.dist_m[min(b, last)]))
        for a, b in zip(first, end, strict=True)
    ]
