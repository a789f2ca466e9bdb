"""A radio path's first Fresnel zone and the line below which its rule wants ground."""

from dataclasses import dataclass
from typing import TYPE_CHECKING, Any

import numpy as np
from matplotlib.axes import Axes
from matplotlib.figure import Figure

from profiler.model import FloatArray, SightLine
from profiler.output.figures import page
from profiler.output.figures.course import SMOOTH_POINTS, Course, Trace
from profiler.output.figures.scale import Scale
from profiler.output.numbers import DOWN, UP, Show
from profiler.output.rounding import metres
from profiler.output.told import radio_of

if TYPE_CHECKING:  # a walker's figure need not load the radio room
    from profiler.radio.answer import RadioAnswer

#: The words at the shortfall stand so far from its line, and above the frame [in].
WORDS_OFF_IN = 0.07
#: Ends of the bar between ground and the rule's line [pt].
BAR_END = 7.0


@dataclass(frozen=True, slots=True, kw_only=True, eq=False)
class Zone:
    """What a radio path adds to the drawing; heights above sea level.

    Notes
    -----
    The rule's line stands where its governing criterion wants all ground to stay
    below: the straight ray at that criterion's own ke, less its share of F1, less its
    extra metres. Whatever air the drawing shows, each height is put on paper as ground
    of that height would be, so that the distance from ground to the rule's line is
    what the criterion leaves, to scale, everywhere.
    """

    radio: "RadioAnswer"
    dist_m: FloatArray
    """(n,) distance from the eye's end, denser at both ends."""
    low_m: FloatArray
    """(n,) lower boundary of the first Fresnel zone in the stated air."""
    high_m: FloatArray
    """(n,) upper boundary."""
    rule_m: FloatArray | None
    """(n,) the governing criterion's line; None when no rule was given."""


def zone_of(course: Course) -> Zone | None:
    """The zone and the rule's line of a radio path; None for light."""
    radio = radio_of(course.line)
    if radio is None:
        return None
    # steps of a cosine follow the zone's round ends
    turn = np.linspace(0.0, np.pi, SMOOTH_POINTS)
    dist = course.line.path.length_m * (1.0 - np.cos(turn)) / 2.0
    dist[-1] = course.line.path.length_m
    f1, sight = _f1_m(course.line, radio, dist), course.sight_m(dist)
    rule = asked_m(course.line, radio, dist) if has_rule(radio) else None
    return Zone(
        radio=radio, dist_m=dist, low_m=sight - f1, high_m=sight + f1, rule_m=rule
    )


def has_rule(radio: "RadioAnswer") -> bool:
    """Whether a rule was given; without one there are criteria to look at only."""
    return radio.result.rule.name != "none"


def _f1_m(line: SightLine, radio: "RadioAnswer", dist_m: FloatArray) -> FloatArray:
    from profiler.radio.fresnel import fresnel_radius_m  # only for a radio path

    length = line.path.length_m
    within = np.clip(dist_m, 0.0, length)
    return fresnel_radius_m(
        within, length_m=length, wavelength_m=radio.result.wavelength_m
    )


def asked_m(line: SightLine, radio: "RadioAnswer", dist_m: FloatArray) -> FloatArray:
    """Height below which the governing criterion wants ground [m].

    Parameters
    ----------
    line : SightLine
    radio : RadioAnswer
    dist_m : (n,) float64 [m]
        From the eye's end.

    Returns
    -------
    (n,) float64 [m above the DEM's datum]
        This minus ground and cover is what the criterion leaves.
    """
    from profiler.radio.assess import line_at  # only for a radio path

    asked = radio.result.governing.criterion
    ray = line_at(line, asked.ke).height(dist_m)
    need = asked.f1_fraction * _f1_m(line, radio, dist_m) + asked.extra_m
    height: FloatArray = ray - need
    return height


def left_over_m(course: Course, trace: Trace) -> FloatArray | None:
    """(n,) what the governing criterion leaves at the drawn samples [m]."""
    radio = radio_of(course.line)
    if radio is None or not has_rule(radio):
        return None
    left: FloatArray = asked_m(course.line, radio, trace.dist_m) - trace.top_m
    return left


def draw_zone(ax: Axes, course: Course, zone: Zone, scale: Scale) -> None:
    """The zone's outline, the rule's line and the bar where it leaves least.

    Parameters
    ----------
    ax : Axes
        The profile's.
    course : Course
        The answer over the chosen sea.
    zone : Zone
        From `zone_of`.
    scale : Scale
        Units.
    """
    u, v = scale.distance_unit_m, scale.height_unit_m
    x = np.concatenate([zone.dist_m, [np.nan], zone.dist_m]) / u
    low, high = (course.paper_m(zone.dist_m, z) / v for z in (zone.low_m, zone.high_m))
    look: dict[str, Any] = {"zorder": page.Z_RAY, "color": page.ZONE}
    ax.plot(
        x,
        np.concatenate([low, [np.nan], high]),
        lw=page.ZONE_WIDTH,
        ls=page.ZONE_DOTS,
        label="first Fresnel zone",
        **look,
    )
    if zone.rule_m is None:
        return
    ax.plot(
        zone.dist_m / u,
        course.paper_m(zone.dist_m, zone.rule_m) / v,
        zorder=page.Z_EDGE,  # below the zone: 1 F1 in the stated air is its boundary
        label="rule's line",
        **RULE_LOOK,
    )
    place = zone.radio.result.governing.at.place
    at = np.array([place.distance_m, place.distance_m])
    top = place.ground_m + place.cover_m
    bar = np.array([top, float(asked_m(course.line, zone.radio, at)[0])])
    ax.plot(
        at / u,
        course.paper_m(at, bar) / v,
        color=page.EDGE,
        lw=page.RULE_WIDTH,
        marker="_",
        ms=BAR_END,
        mew=page.RULE_WIDTH,
        zorder=page.Z_MARK,
        label="left by the rule",
    )


#: The rule's line on the profile, what it leaves in the strip, and both in the key.
RULE_LOOK: dict[str, Any] = {
    "color": page.SIGHT,
    "lw": page.RULE_WIDTH,
    "ls": page.RULE_DASHES,
}


def spare_text(margin_m: float, show: Show) -> str:
    """What a criterion leaves or is short of; the record's metres, to the safe side."""
    margin = metres(margin_m)
    if margin < 0.0:
        return f"{show.height(-margin, rounding=UP)} short"
    return f"{show.height(margin, rounding=DOWN)} to spare"


def draw_zone_words(
    figure: Figure, zone: Zone, scale: Scale, leaders_in: list[float]
) -> None:
    """How much the rule leaves or lacks, at the foot of the profile beside its place.

    Parameters
    ----------
    figure : Figure
    zone : Zone
    scale : Scale
    leaders_in : list of float [in]
        Where lines run down to discs: the words take the side with fewer of them.
    """
    if zone.rule_m is None:
        return
    governing = zone.radio.result.governing
    area = page.PROFILE_AREA
    x = scale.x_in(governing.at.place.distance_m, area)
    text = page.write(
        figure,
        x,
        area.bottom + WORDS_OFF_IN,
        f"rule: {spare_text(governing.margin_m, scale.show)}",
        size=page.SMALL,
        bold=True,
        zorder=page.Z_MARK + 1,
        bbox={"boxstyle": "square,pad=0.1", "fc": page.GROUND, "ec": "none"},
    )
    wide = page.width_in(figure, text)
    starts = [x + WORDS_OFF_IN, x - WORDS_OFF_IN - wide]
    least, most = scale.x_in(0.0, area), scale.x_in(scale.length_m, area) - wide
    fits = [s for s in starts if least <= s <= most] or [min(max(x, least), most)]
    crossed = [sum(s <= there <= s + wide for there in leaders_in) for s in fits]
    text.set_x(fits[crossed.index(min(crossed))] / page.PAGE_IN[0])
