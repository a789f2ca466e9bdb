"""Which method of Rec. ITU-R P.526 fits a path, and how far to trust it."""

from dataclasses import dataclass
from typing import Final

from profiler.errors import InputError

_WHERE = "Rec. ITU-R P.526-16"


@dataclass(frozen=True, slots=True, kw_only=True)
class MethodChoice:
    """A method, and why it is the one."""

    name: str
    """The method in plain words."""
    function: str
    """Name of the function in this room that computes it."""
    section: str
    """Where the method is printed."""
    why: str
    """What about the path led to it."""
    limits: str
    """What it cannot be trusted with."""


#: What the Recommendation points to for profiles from an elevation model, whatever the
#: path is like; Rec. ITU-R P.526-16 section 4.5.2 and figure 19.
METHOD_FOR_PROFILES: Final = MethodChoice(
    name="delta-Bullington",
    function="diffraction_loss",
    section=f"{_WHERE} section 4.5.2",
    why="It takes any profile as it comes, without a person judging its obstacles.",
    limits="Ground and cover only as the samples carry them; 10 MHz and above; no "
    "ducts. Flat stretches need samples too.",
)

_BEYOND_HORIZON = MethodChoice(
    name="smooth earth beyond the horizon, first term",
    function="first_term_loss_db",
    section=f"{_WHERE} section 3.1.1",
    why="The ground is smooth and the ends do not see each other.",
    limits="Better than 2 dB only well beyond the horizon, see "
    "first_term_within_2_db; 10 MHz and above; surface admittance below 1.",
)
_SMOOTH_IN_SIGHT = MethodChoice(
    name="smooth earth at any distance",
    function="spherical_loss_db",
    section=f"{_WHERE} section 3.2",
    why="The ground is smooth and the ends see each other.",
    limits="Interpolated between grazing and 0.552 F1; 10 MHz and above; effective "
    "earth radius above 0.",
)
_ONE_ROUNDED = MethodChoice(
    name="single rounded obstacle",
    function="rounded_obstacle_loss",
    section=f"{_WHERE} section 4.2",
    why="One obstacle stands in the way and the radius of its top is known.",
    limits="The vertex must stand on or above the line; smooth top, no trees on it.",
)
_CYLINDERS = MethodChoice(
    name="cascaded cylinders",
    function="cylinder_loss",
    section=f"{_WHERE} section 4.4",
    why="Several obstacles stand in the way and their ridges are known in detail.",
    limits="Samples 250 m apart or less, ray angles below about 5 degrees. For two "
    "obstacles section 4.3 (two edges) may be used as well. No published example.",
)
_ONE_EDGE = MethodChoice(
    name="single knife edge",
    function="knife_edge_loss_db",
    section=f"{_WHERE} section 4.1",
    why="One obstacle stands in the way and the radius of its top is not known.",
    limits="Isolated and sharp: a rounded top loses more. Diffraction angle below "
    "0.2 rad.",
)
_TWO_EDGES = MethodChoice(
    name="two isolated edges",
    function="similar_edges_loss or dominant_edge_loss",
    section=f"{_WHERE} section 4.3",
    why="Two obstacles stand in the way and the radii of their tops are not known.",
    limits="Both isolated. Similar edges: the correction holds above about 15 dB "
    "each. One dominant edge: the other must reach the direct line.",
)


def choose_method(
    *,
    obstacles: int,
    in_sight: bool,
    smooth: bool = False,
    radius_known: bool = False,
) -> MethodChoice:
    """Method that fits a path whose obstacles a person has judged.

    Parameters
    ----------
    obstacles : int [1]
        Number of separate obstacles that decide the path, 0 or more.
    in_sight : bool
        Whether the ends see each other over the smooth earth; asked of smooth ground
        only.
    smooth : bool
        Whether the ground is a smooth earth: unevenness below about a tenth of the
        largest F1. Obstacles are then not looked at.
    radius_known : bool
        Whether the radii of the tops are known.

    Returns
    -------
    MethodChoice
        The method, why, and its limits. For a profile taken as it comes, and for ground
        that is uneven without an obstacle of its own, :data:`METHOD_FOR_PROFILES`.

    Raises
    ------
    InputError
        If the number of obstacles is negative.

    References
    ----------
    Rec. ITU-R P.526-16 (11/2025) section 4.5.2 figure 19.
    """
    if obstacles < 0:
        msg = f"The number of obstacles is 0 or more, not {obstacles}."
        raise InputError(msg)
    if smooth:
        return _SMOOTH_IN_SIGHT if in_sight else _BEYOND_HORIZON
    if obstacles == 0:
        return METHOD_FOR_PROFILES
    if radius_known:
        return _ONE_ROUNDED if obstacles == 1 else _CYLINDERS
    if obstacles == 1:
        return _ONE_EDGE
    return _TWO_EDGES if obstacles == 2 else METHOD_FOR_PROFILES
