"""From the options on trees and buildings to the cover along any path."""

from collections.abc import Sequence
from pathlib import Path

from profiler.errors import InputError
from profiler.model import Note
from profiler.shapes import CoverShape, read_cover_file
from profiler.sight.cover_sources import CoverAlong, cover_along
from profiler.terrain import Terrain, open_terrain
from profiler.terrain.dem import SUFFIXES

#: The most that any tree grows in a year [m]; common knowledge, from memory, with
#: room; more is a height written in the wrong place.
MOST_GROWTH_M = 5.0
#: The most years that are looked ahead [1]; our choice.
MOST_YEARS = 200


def cover_from(
    *,
    canopy_m: float | None = None,
    files: Sequence[str] = (),
    growth_m: float | None = None,
    years: float | None = None,
) -> CoverAlong | None:
    """The cover that the options state; None without any.

    Parameters
    ----------
    canopy_m : float or None [m]
        Of ``--canopy``.
    files : sequence of str
        Of ``--cover``: outlines and points, or a raster of heights above ground, by
        the ending of the name.
    growth_m, years : float or None [m] and [year]
        Of ``--growth`` and ``--years``; both or neither.

    Returns
    -------
    function or None
        For `profiler.look`.

    Raises
    ------
    InputError
        If a file cannot be used, growth and years are not given together, or one
        cannot be.
    DemError
        If a raster cannot be used.
    """
    has_cover = canopy_m is not None or bool(files)
    check_growth(growth_m, years, has_cover=has_cover)
    if not has_cover:
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
        metres_per_year=growth_m or 0.0,
        years=years or 0.0,
        notes=tuple(notes),
    )


def check_growth(
    growth_m: float | None, years: float | None, *, has_cover: bool
) -> None:
    """Refuse growth without years, years without growth, and either without trees.

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
