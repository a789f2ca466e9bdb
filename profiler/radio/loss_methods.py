"""Each method's loss for one path, with whether and why it applies."""

from dataclasses import dataclass, field
from typing import Final, NamedTuple

import numpy as np

from profiler.constants import M_PER_KM
from profiler.errors import InputError
from profiler.model import FloatArray, SightLine
from profiler.radio.assess import TightPlace
from profiler.radio.bullington import bullington_loss
from profiler.radio.cylinders import ONE_OBSTRUCTION_M, cylinder_loss
from profiler.radio.delta_bullington import DiffractionLoss, smooth_surface_m
from profiler.radio.fresnel import fresnel_radius_m
from profiler.radio.knife_edge import (
    knife_edge_loss_db,
    knife_edge_loss_exact_db,
    nu_from_share_of_f1,
)
from profiler.radio.method import METHOD_FOR_PROFILES
from profiler.radio.obstruction import PART_F1, Obstruction
from profiler.radio.rounded import radius_from_terrain_m, rounded_obstacle_loss
from profiler.radio.two_edges import (
    CORRECTION_HOLDS_DB,
    dominant_edge_loss,
    similar_edges_loss,
)
from profiler.sight.line import Line

#: Unevenness up to which ground is a smooth earth, as a share of the largest F1 [1];
#: Rec. ITU-R P.526-16 section 2.
SMOOTH_F1: Final = 0.1
_WHERE: Final = "Rec. ITU-R P.526-16"
#: What stands behind a method's figures: tests/published/test_itu_p526.py for the
#: Study Group's validation examples, tests/test_knife_edge.py for the series (8).
EXAMPLES: Final = "the Study Group's examples are reproduced"
EXAMPLES_IN_PART: Final = "its smooth-earth part reproduces the Study Group's examples"
SERIES: Final = "the exact figure follows the published series"
UNCHECKED: Final = "no published check"


@dataclass(frozen=True, slots=True, kw_only=True)
class MethodLoss:
    """One method's figure for a path, and how far to trust it."""

    name: str
    section: str
    """Where the method is printed."""
    loss_db: float | None
    """Loss relative to free space [dB]; None when there is nothing to compute."""
    applies: bool
    because: str
    """Why it applies, or why it does not."""
    limits: str
    checked: str
    """What stands behind the figures."""
    parts: dict[str, float] = field(default_factory=dict)
    """What the figure is made of, names with their units."""


class Case(NamedTuple):
    """What the methods look at."""

    line: SightLine
    ray: Line
    dist: FloatArray
    height: FloatArray
    wave: float
    radius: float
    whole: DiffractionLoss
    tightest: TightPlace
    near: tuple[TightPlace, ...]
    found: Obstruction


def method_losses(case: Case) -> tuple[MethodLoss, ...]:
    """Every method's loss, delta-Bullington first.

    Parameters
    ----------
    case : Case

    Raises
    ------
    InputError
        If an antenna stands below the ground.
    """
    return (
        _delta_bullington(case),
        _knife_edge(case),
        rounded(case),
        *_two_edges(case),
        _cylinders(case),
        _spherical(case),
    )


def _km(dist_m: float) -> str:
    return f"{dist_m / M_PER_KM:.2f} km"


def _one_obstacle(case: Case) -> tuple[bool, str]:
    """Whether the path meets one isolated obstacle, and why."""
    count = len(case.near)
    if count == 0:
        return False, f"nothing stands within {PART_F1:g} F1 of the line"
    if count > 1:
        return False, f"{count} obstacles stand within {PART_F1:g} F1 of the line"
    if not case.found.is_isolated:
        run = f"from {_km(case.found.start_m)} to {_km(case.found.end_m)}"
        return False, f"the obstruction is extended: ground {run} takes part"
    at = _km(case.tightest.place.distance_m)
    return True, f"one isolated obstacle stands in the way, at {at}"


def _delta_bullington(case: Case) -> MethodLoss:
    whole = case.whole
    return MethodLoss(
        name=METHOD_FOR_PROFILES.name,
        section=METHOD_FOR_PROFILES.section,
        loss_db=whole.total_db,
        applies=True,
        because="it takes any profile as it comes",
        limits=METHOD_FOR_PROFILES.limits,
        checked=EXAMPLES_IN_PART,
        parts={
            "bullington_db": whole.bullington_db,
            "smooth_bullington_db": whole.smooth_bullington_db,
            "spherical_db": whole.spherical_db,
            "from_effective_height_m": whole.effective_heights_m[0],
            "to_effective_height_m": whole.effective_heights_m[1],
        },
    )


def _knife_edge(case: Case) -> MethodLoss:
    applies, because = _one_obstacle(case)
    place = case.tightest.place
    nu = float(nu_from_share_of_f1(case.tightest.share))
    return MethodLoss(
        name="single knife edge",
        section=f"{_WHERE} section 4.1",
        loss_db=float(knife_edge_loss_db(nu)),
        applies=applies,
        because=because,
        limits="Isolated and sharp: a rounded top loses more, and all other ground is "
        "left out.",
        checked=SERIES,
        parts={
            "exact_db": float(knife_edge_loss_exact_db(nu)),
            "nu": nu,
            "at_m": place.distance_m,
            "above_line_m": -place.margin_m,
        },
    )


def rounded(case: Case) -> MethodLoss:
    """Single rounded obstacle; its vertex is where both ends' horizon rays cross."""
    applies, because = _one_obstacle(case)
    edge = bullington_loss(
        case.dist,
        case.height,
        from_amsl_m=case.line.from_.amsl_m,
        to_amsl_m=case.line.to.amsl_m,
        wavelength_m=case.wave,
        effective_radius_m=case.radius,
    )
    radius = _top_radius_m(case)
    loss, parts = None, {}
    if edge.in_sight:
        applies, because = False, "the line is clear: no two tangent rays cross"
    elif radius is None:
        applies, because = False, "the ground beside the top does not tell its radius"
    else:
        zone = fresnel_radius_m(
            edge.edge_m, length_m=case.ray.length_m, wavelength_m=case.wave
        )
        found = rounded_obstacle_loss(
            max(edge.nu, 0.0) * zone / np.sqrt(2.0),
            from_m=edge.edge_m,
            to_m=case.ray.length_m - edge.edge_m,
            radius_m=radius,
            wavelength_m=case.wave,
        )
        loss = found.total_db
        parts = {
            "knife_edge_db": found.knife_edge_db,
            "rounding_db": found.rounding_db,
            "top_radius_m": radius,
            "vertex_at_m": edge.edge_m,
        }
    return MethodLoss(
        name="single rounded obstacle",
        section=f"{_WHERE} section 4.2",
        loss_db=loss,
        applies=applies,
        because=because,
        limits="The radius is that of the elevation posts, not surveyed; smooth top, "
        "no trees on it.",
        checked=UNCHECKED,
        parts=parts,
    )


def _top_radius_m(case: Case) -> float | None:
    """Radius of the tightest obstacle's top against the line; None if not told.

    Heights are taken from the line, so that on a slope the top is what the line meets
    first, and the earth's own curvature is part of the radius.
    """
    over = case.height - case.ray.height(case.dist)
    top = int(np.argmin(np.abs(case.dist - case.tightest.place.distance_m)))
    deep = over < over[top] - case.tightest.f1_m
    start = int(np.max(np.flatnonzero(deep[:top]), initial=-1)) + 1
    stop = top + int(np.argmax(deep[top:])) if np.any(deep[top:]) else over.size
    try:
        return radius_from_terrain_m(
            case.dist[start:stop],
            over[start:stop],
            fresnel_radius_m=case.tightest.f1_m,
        )
    except InputError:  # fewer than three samples, or a top without sides
        return None


def _two_edges(case: Case) -> tuple[MethodLoss, MethodLoss]:
    names = "two similar edges", "two edges, one dominant"
    limits = (
        f"The correction is given for losses above about {CORRECTION_HOLDS_DB:g} dB "
        "at each edge; below it is kept, the cautious choice.",
        "Both edges must reach the line between the antennas.",
    )
    count = len(case.near)
    if count != 2:
        told = f"{count or 'no'} obstacle{'s stand' if count > 1 else ' stands'}"
        because = f"{told} within {PART_F1:g} F1 of the line, not two"
        similar, dominant = (
            _edges(name, None, False, because, limit, {})
            for name, limit in zip(names, limits, strict=True)
        )
        return similar, dominant
    first, second = sorted(case.near, key=lambda o: o.place.distance_m)
    a, upto = first.place.distance_m, second.place.distance_m
    tops = -first.place.margin_m, -second.place.margin_m
    sides = {"a_m": a, "b_m": upto - a, "c_m": case.ray.length_m - upto}
    where = f"at {_km(a)} and {_km(upto)}"
    made = []
    for name, limit, made_by in zip(
        names, limits, (similar_edges_loss, dominant_edge_loss), strict=True
    ):
        loss = made_by(*tops, **sides, wavelength_m=case.wave)
        parts = {
            "first_db": loss.first_db,
            "second_db": loss.second_db,
            "correction_db": loss.correction_db,
        }
        because = f"two obstacles stand in the way, {where}"
        if not loss.correction_holds:
            because = f"of the two edges {where} one at least is too low for it"
        made.append(
            _edges(name, loss.total_db, loss.correction_holds, because, limit, parts)
        )
    return made[0], made[1]


def _edges(
    name: str,
    loss_db: float | None,
    applies: bool,
    because: str,
    limits: str,
    parts: dict[str, float],
) -> MethodLoss:
    return MethodLoss(
        name=name,
        section=f"{_WHERE} section 4.3",
        loss_db=loss_db,
        applies=applies,
        because=because,
        limits=limits,
        checked=UNCHECKED,
        parts=parts,
    )


def _cylinders(case: Case) -> MethodLoss:
    agl = (
        case.line.from_.amsl_m - float(case.height[0]),
        case.line.to.amsl_m - float(case.height[-1]),
    )
    found = cylinder_loss(
        case.dist,
        case.height,
        from_agl_m=agl[0],
        to_agl_m=agl[1],
        wavelength_m=case.wave,
        effective_radius_m=case.radius,
    )
    widest = float(np.max(np.diff(case.dist)))
    applies, because = True, "obstacles stand in the way and samples are close"
    if not found.cylinders:
        applies, because = False, "the line is clear: no string touches the ground"
    if widest > ONE_OBSTRUCTION_M:
        applies = False
        because = f"samples lie up to {widest:.0f} m apart, over 250 m"
    return MethodLoss(
        name="cascaded cylinders",
        section=f"{_WHERE} section 4.4",
        loss_db=found.total_db,
        applies=applies,
        because=because,
        limits="For ridges known in detail; ray angles below about 5 degrees.",
        checked=UNCHECKED,
        parts={
            "cylinders": float(len(found.cylinders)),
            "between_db": float(sum(found.between_db)),
            "spreading_db": found.spreading_db,
        },
    )


def unevenness(case: Case) -> tuple[float, float]:
    """Largest departure from the smooth surface, and what is allowed [m]."""
    start, stop = smooth_surface_m(case.dist, case.height)
    surface = np.interp(case.dist, [0.0, case.dist[-1]], [start, stop])
    largest = np.sqrt(case.wave * case.ray.length_m) / 2.0
    return (
        float(np.max(np.abs(case.height - surface))),
        SMOOTH_F1 * float(largest),
    )


def _spherical(case: Case) -> MethodLoss:
    uneven, allowed = unevenness(case)
    applies = uneven <= allowed
    because = (
        f"ground departs from a smooth surface by up to {uneven:.1f} m; "
        f"{SMOOTH_F1:g} of the largest F1 is {allowed:.1f} m"
    )
    return MethodLoss(
        name="smooth earth",
        section=f"{_WHERE} section 3.2",
        loss_db=case.whole.spherical_db,
        applies=applies,
        because=because,
        limits="Antennas above the smooth surface through the profile; ground between "
        "is left out.",
        checked=EXAMPLES,
    )
