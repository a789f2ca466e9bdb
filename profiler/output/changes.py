"""What would change the answer, in plain words: heights, ground and air."""

from typing import Any, Final

from profiler.output.naming import names_of
from profiler.output.numbers import DOWN, UP, Show, ratio

#: Coefficient of refraction that clear days exceed too seldom to count on [1];
#: radio's normal 4/3, which light reaches only in strong inversions; our choice.
KR_TO_COUNT_ON: Final = 0.25
#: Coefficient of refraction of a ray as curved as the earth: a duct [1].
KR_DUCT: Final = 1.0
#: Ground this near to an end is told by its distance from it [m]; our choice.
NEAR_M: Final = 200.0
#: Coefficient of refraction below which no kilometres-long ray was ever bent [1]; our
#: choice: radio's rarest ke of 1/2 is kr −1.
KR_OUT_OF_REACH: Final = -1.0

Json = dict[str, Any]


def openers(values: Json, show: Show) -> list[str]:
    """What would open a blocked line; each height suffices as printed.

    Parameters
    ----------
    values : dict
        The record of a blocked line.
    show : Show
    """
    eye, name = names_of(values)
    needed = values["needed"]
    parts, sets = [], []
    for end, who in (("from", eye), ("to", name)):
        if needed[f"{end}_agl_m"] is not None:
            parts.append(f"{who} at {show.height(needed[f'{end}_agl_m'], rounding=UP)}")
            sets.append(needed[f"{end}_stretch"])
    if needed["both_extra_m"] is not None:
        parts.append(f"{show.height(needed['both_extra_m'], rounding=UP)} more on both")
        sets.append(needed["both_stretch"])
    lines = []
    if parts:
        lines.append(", or ".join(parts) + _set_by(sets))
    other = []
    if needed["dem_bias_m"] is not None:
        lower = show.height(-needed["dem_bias_m"], rounding=UP)
        other.append(f"all ground between {lower} lower")
    if needed["kr"] is not None:
        told = ratio(needed["kr"], 2, rounding=UP)
        if float(told) < KR_DUCT:
            other.append(f"kr {told}{_doubt(needed['kr'])}")
    if other:
        lines.append(("or " if lines else "") + "; or ".join(other))
    if lines and values["path"]["void_m"] > 0.0:
        length = show.run(values["path"]["void_m"])
        lines.append(f"over known ground only: {length} of the path have none")
    return lines or ["nothing short of other stations"]


def _set_by(sets: list[int | None]) -> str:
    """Which numbered stretch asks for the heights."""
    known = [s for s in sets if s is not None]
    if not known or len(known) < len(sets):
        return ""
    if len(set(known)) == 1:
        how_many = {1: "it", 2: "both", 3: "all three"}[len(known)]
        return f"   ({known[0]} sets {how_many})"
    return "   (set by " + ", ".join(str(s) for s in known) + " in turn)"


def _doubt(kr: float) -> str:
    return ", more than you may count on" if kr > KR_TO_COUNT_ON else ""


def closers(values: Json, show: Show) -> list[str]:
    """What would close a clear line.

    Parameters
    ----------
    values : dict
        The record of a clear line.
    show : Show
    """
    needed = values["needed"]
    parts = []
    if needed["dem_bias_m"] is not None and needed["dem_bias_m"] > 0.0:
        higher = show.height(needed["dem_bias_m"], rounding=DOWN)
        parts.append(f"{_tightest_ground(values, show)} more than {higher} higher")
    if needed["kr"] is not None and needed["kr"] > KR_OUT_OF_REACH:
        parts.append(f"kr below {ratio(needed['kr'], 3, rounding=UP)}")
    return ["; or ".join(parts)] if parts else []


def _tightest_ground(values: Json, show: Show) -> str:
    """The ground that the least rise closes: far off, or at an end's own feet."""
    at, length = values["needed"]["dem_bias_at_m"], values["path"]["distance_m"]
    eye, name = names_of(values)
    off_m, end = min((at, eye), (length - at, name))
    if off_m >= NEAR_M:
        return f"ground at {show.distance(at)}"
    run = show.run(off_m)
    return (
        f"ground beside {end}" if run == show.run(0.0) else f"ground {run} from {end}"
    )


def enough(values: Json, show: Show) -> list[str]:
    """Lower heights that a clear line would still be clear with."""
    parts = []
    for end, who in zip(("from", "to"), names_of(values), strict=True):
        least, now = values["needed"][f"{end}_agl_m"], values[end]["agl_m"]
        if least is None or now is None:
            continue
        told = show.height(least, rounding=UP)
        if least > 0.0 and told != show.height(now, rounding=UP):
            parts.append(f"{who} at {told}")
    return [", or ".join(parts)] if parts else []
