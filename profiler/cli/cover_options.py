"""From the options on trees and buildings to the cover along any path."""

from collections.abc import Sequence
from pathlib import Path

from profiler.cli.options import MOST_YEARS
from profiler.errors import InputError
from profiler.model import Note
from profiler.shapes import CoverShape, read_cover_file
from profiler.sight.cover_sources import CoverAlong, cover_along
from profiler.terrain import Terrain, open_terrain
from profiler.terrain.dem import SUFFIXES

#: The most that any tree grows in a year [m]; common knowledge, from memory, with
#: room; more is a height written in the wrong place.
MOST_GROWTH_M = 5.0


def cover_from(
    *, canopy_m: float | None = None, files: Sequence[str] = ()
) -> CoverAlong | None:
    """The cover that the options state; None without any.

    Parameters
    ----------
    canopy_m : float or None [m]
        Of ``--canopy``.
    files : sequence of str
        Of ``--cover``: outlines and points, or a raster of heights above ground, by
        the ending of the name.

    Returns
    -------
    function or None
        For `profiler.look`.

    Raises
    ------
    InputError
        If a file or the height cannot be used.
    DemError
        If a raster cannot be used.
    """
    if canopy_m is None and not files:
        return None
    shapes: list[CoverShape] = []
    rasters: list[Terrain] = []
    notes: list[Note] = []
    for name in files:
        if Path(name).suffix.lower() in SUFFIXES:
            rasters.append(open_terrain(name, interpolation="nearest"))
        else:
            found = read_cover_file(name)
            shapes += found.shapes
            notes += found.notes
    return cover_along(
        canopy_m=canopy_m,
        shapes=tuple(shapes),
        rasters=tuple(rasters),
        notes=tuple(notes),
    )


def check_growth(
    growth_m: float | None, years: float | None, *, has_cover: bool
) -> None:
    """Refuse growth without years, years without growth, and either without trees.

    Parameters
    ----------
    growth_m, years : float or None [m] and [year]
        Of ``--growth`` and ``--years``.
    has_cover : bool
        Whether there are trees to grow.

    Raises
    ------
    InputError
        If one is missing or cannot be.
    """
    if (growth_m is None) != (years is None):
        given, other = "--growth", "--years 10"
        if growth_m is None:
            given, other = "--years", "--growth 0.4m"
        msg = f"{given} alone says nothing. Add {other}."
        raise InputError(msg)
    if growth_m is None or years is None:
        return
    if not has_cover:
        msg = "--growth needs trees to grow. Add --canopy 15m or --cover FILE."
        raise InputError(msg)
    if not 0.0 <= growth_m <= MOST_GROWTH_M:
        msg = (
            f"--growth {growth_m:g} m a year is not within 0 to {MOST_GROWTH_M:g} m. "
            "Trees grow 0.3 to 0.6 m a year."
        )
        raise InputError(msg)
    if not 0.0 <= years <= MOST_YEARS:
        msg = f"--years {years:g} is not within 0 to {MOST_YEARS}."
        raise InputError(msg)
