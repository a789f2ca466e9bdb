"""One question made ready: counted ground, own hill, and the answer for given heights.

The analysis, the needed heights and the critical bending all ask the same thing with
other numbers; this is the one place that asks it.
"""

import math
from dataclasses import dataclass, replace
from typing import NamedTuple

import numpy as np

from profiler.constants import GRAZING_M
from profiler.sight.ground import Ground, clip
from profiler.sight.line import (
    Line,
    Spots,
    first_to_touch,
    is_end_run,
    spots,
)
from profiler.sight.view import Rays, before, horizon_index, rays

#: Largest angle between the ends at the centre of the effective earth [rad]; our
#: choice, well inside half a turn, beyond which the sight line has no height.
QUARTER_TURN = math.pi / 2.0


class Aim(NamedTuple):
    """Where the sight line ends."""

    dist_m: float
    height_m: float


@dataclass(frozen=True, slots=True, kw_only=True)
class Case:
    """Ground and ends of one question."""

    ground: Ground
    """All pieces of the path, known and void."""
    length_m: float
    eye_m: float
    """Height of the eye above the DEM's datum [m]."""
    top_m: float
    """Height of the target's top above the DEM's datum [m]."""
    eye_on_ground: bool
    top_on_ground: bool
    near_m: float
    """Ground this near to either end is not counted [m]."""
    hill_m: float
    """Radius of the target's own hill [m]; 0 for none."""
    kappa_per_m: float

    def aim(self) -> Aim:
        """The point aimed at: of the own hill, what stands highest in the view."""
        end = Aim(self.length_m, self.top_m)
        if self.hill_m <= 0.0:
            return end
        hill = clip(self.ground, self.length_m - self.hill_m, self.length_m).known
        seen = before(rays(hill, self.eye_m, self.kappa_per_m), self.length_m)
        best = horizon_index(seen)
        if best is None:
            return end
        there = Line(self.length_m, self.eye_m, self.top_m, self.kappa_per_m)
        over = seen.ground_m[best] - there.height(seen.dist_m[best])
        if over <= 0.0:
            return end
        return Aim(float(seen.dist_m[best]), float(seen.ground_m[best]))

    def counted(self) -> Ground:
        """The pieces that may block, known and void."""
        far = max(self.near_m, self.hill_m)
        return clip(self.ground, self.near_m, self.length_m - far)

    def plain(self) -> "Case":
        """The same with the own hill counted as ground."""
        return replace(self, hill_m=0.0)


class Look(NamedTuple):
    """The line of a case over its counted ground."""

    line: Line
    known: Ground
    void: Ground
    at: Spots
    seen: Rays
    lowest_m: float
    """Lowest margin of all spots [m]; infinite without any."""
    closest_m: float
    """The same without the run beside an end that lies on the ground [m]."""
    closest_at_m: float
    """Where that is [m]; NaN without any."""

    @property
    def is_blocked(self) -> bool:
        """Whether known ground stands above the line by more than the band."""
        return self.lowest_m < -GRAZING_M


def look_at(case: Case) -> Look:
    """The line of a case with its margins and its view."""
    aim = case.aim()
    line = Line(aim.dist_m, case.eye_m, aim.height_m, case.kappa_per_m)
    counted = case.counted()
    known = counted.known
    at = spots(line, known)
    run = is_end_run(
        at,
        eye_on_ground=case.eye_on_ground,
        aim_on_ground=case.top_on_ground and case.hill_m <= 0.0,
    )
    rest = Spots(at.dist_m[~run], at.ground_m[~run], at.margin_m[~run])
    low = int(np.argmin(rest.margin_m)) if rest.margin_m.size else None
    return Look(
        line=line,
        known=known,
        void=counted.void,
        at=at,
        seen=rays(known, case.eye_m, case.kappa_per_m),
        lowest_m=float(at.margin_m.min()) if at.margin_m.size else np.inf,
        closest_m=np.inf if low is None else float(rest.margin_m[low]),
        closest_at_m=np.nan if low is None else float(rest.dist_m[low]),
    )


def least_ratio(look: Look) -> float:
    """Least margin/(d1·d2) of a look [1/m]; infinite without ground."""
    if look.at.margin_m.size == 0:
        return np.inf
    return float(first_to_touch(look.line, look.at).min())
