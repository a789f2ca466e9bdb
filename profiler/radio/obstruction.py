"""Whether a path meets one isolated obstacle or an extended obstruction."""

from typing import Final, NamedTuple

import numpy as np

from profiler.radio.criteria import Criterion
from profiler.radio.tight import Tight, tight_places
from profiler.sight.ground import Ground
from profiler.sight.line import Line

#: Ground within this share of F1 of a grazing line takes part in the obstruction [1];
#: Rec. ITU-R P.526-16 section 2: isolated when the rest is clear by it.
PART_F1: Final = 0.6
#: Longest obstacle, as a share of the path, that is still one isolated obstacle [1];
#: our choice, the Recommendation gives none for a profile.
ISOLATED_SHARE: Final = 0.1
#: Steps of raising both ends until the line grazes [1]; three are enough.
MOST_STEPS: Final = 12
#: Near enough to grazing [m].
GRAZES_M: Final = 1e-3


class Obstruction(NamedTuple):
    """What stands in the way of a grazing line."""

    is_isolated: bool
    start_m: float
    """First place within 0.6 F1 of the grazing line [m]."""
    end_m: float
    """Last one [m]."""
    runs: int
    """How many separate stretches there are."""


def find_obstruction(
    ground: Ground, line: Line, wavelength_m: float
) -> Obstruction | None:
    """The obstruction of a path at one state of the air, whatever the masts.

    Both ends are raised or lowered alike until the line just grazes; the ground then
    within 0.6 F1 of it is the obstruction. It is isolated when it is one stretch of at
    most a tenth of the path.

    Parameters
    ----------
    ground : Ground
        Known counted pieces.
    line : Line
        With the curvature in question; its heights are where the search starts.
    wavelength_m : float [m]

    Returns
    -------
    Obstruction or None
        None without ground between the ends.
    """
    if ground.dist_m.size == 0:
        return None
    bare = Criterion(ke=1.0, f1_fraction=0.0)
    raised = line
    at = tight_places(raised, ground, bare, wavelength_m)
    for _ in range(MOST_STEPS):
        low = float(at.clear_m.min())
        if abs(low) <= GRAZES_M:
            break
        raised = raised._replace(eye_m=raised.eye_m - low, aim_m=raised.aim_m - low)
        at = tight_places(raised, ground, bare, wavelength_m)
    return _runs(at, line.length_m)


def _runs(at: Tight, length_m: float) -> Obstruction:
    inside = at.share < PART_F1
    edges = np.flatnonzero(np.diff(np.concatenate([[False], inside, [False]])))
    starts, ends = at.dist_m[edges[::2]], at.dist_m[edges[1::2] - 1]
    short = ends[-1] - starts[0] <= ISOLATED_SHARE * length_m
    return Obstruction(
        is_isolated=bool(starts.size == 1 and short),
        start_m=float(starts[0]),
        end_m=float(ends[-1]),
        runs=int(starts.size),
    )
