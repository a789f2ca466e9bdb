"""Where cover comes from: one height everywhere, outlines, a raster of heights."""

from collections.abc import Callable, Sequence
from dataclasses import replace
from typing import TYPE_CHECKING

import numpy as np

from profiler.constants import M_PER_KM, TALLEST_MAST_M
from profiler.errors import InputError
from profiler.model import (
    CoverKind,
    CoverSpan,
    FloatArray,
    GeodesicPath,
    Note,
    PathCover,
    PathProfile,
)
from profiler.sight.cover import canopy, covered, grown
from profiler.terrain import Terrain, sample_path
from profiler.terrain.dem import first_and_more

if TYPE_CHECKING:
    from profiler.shapes import CoverShape

CoverAlong = Callable[[GeodesicPath], PathCover]
"""Finds the cover along a path that is not known beforehand."""

#: Trees higher than this are questioned [m]; the tallest living one measured is near
#: 116 m (common knowledge, from memory).
TALLEST_TREE_M = 120.0


def cover_along(
    *,
    canopy_m: float | None = None,
    shapes: "Sequence[CoverShape]" = (),
    rasters: Sequence[Terrain] = (),
    metres_per_year: float = 0.0,
    years: float = 0.0,
    notes: Sequence[Note] = (),
) -> CoverAlong:
    """Cover from any of its sources, ready for any path.

    Parameters
    ----------
    canopy_m : float or None [m]
        Height of trees along the whole path; None: no such trees.
    shapes : sequence of CoverShape
        From `read_cover`.
    rasters : sequence of Terrain
        Heights above ground, opened with ``interpolation="nearest"``.
    metres_per_year, years : float [m] and [year]
        How fast and how long trees have grown since; buildings do not.
    notes : sequence of Note
        What the sources could not say, to be passed on.

    Returns
    -------
    function
        From a `GeodesicPath` to its `PathCover`. Where sources overlap the highest
        counts, not their sum.

    Raises
    ------
    InputError
        If a height, the growth or the years cannot be; a raster that holds no heights
        above ground is found out only along a path.
    """
    if canopy_m is not None:
        canopy(canopy_m, 1.0)
    for raster in rasters:
        _check_cells(raster)

    def along(path: GeodesicPath) -> PathCover:
        spans = _outlined(shapes, path)
        said = list(notes)
        if shapes and not spans:
            said.append(_off_the_path(len(shapes)))
        if canopy_m is not None:
            spans.append(canopy(canopy_m, path.length_m))
        for raster in rasters:
            found = raster_cover(raster, path)
            spans += found.spans
            said += found.notes
        return PathCover(spans=tuple(spans), notes=tuple(said))

    return aged(along, metres_per_year=metres_per_year, years=years)


def _outlined(shapes: "Sequence[CoverShape]", path: GeodesicPath) -> list[CoverSpan]:
    """Spans of outlines and discs along a path."""
    if not shapes:
        return []
    from profiler.shapes import spans_along  # only a file of cover needs that room

    return list(spans_along(shapes, path))


def _off_the_path(count: int) -> Note:
    """A note that a file of cover changes nothing: often a sign of a slip."""
    text = (
        f"None of the {count} features of cover lies on the path. Check that its "
        "coordinates are longitude, latitude and in the CRS that it states."
    )
    return Note(code="cover-off-path", text=text)


def aged(cover: CoverAlong, *, metres_per_year: float, years: float) -> CoverAlong:
    """The same cover some years later, its files not read again.

    Parameters
    ----------
    cover : function
        From `cover_along`.
    metres_per_year, years : float [m] and [year]
        How fast and how long the trees grow; buildings do not.

    Raises
    ------
    InputError
        If growth or years is negative or not finite.
    """
    grown((), metres_per_year=metres_per_year, years=years)

    def later(path: GeodesicPath) -> PathCover:
        now = cover(path)
        spans = grown(now.spans, metres_per_year=metres_per_year, years=years)
        return replace(now, spans=spans)

    return later


def with_cover(
    profile: PathProfile, path: GeodesicPath, cover: CoverAlong | None
) -> PathProfile:
    """A path's profile with what its cover gives, and says.

    Parameters
    ----------
    profile : PathProfile
    path : GeodesicPath
        The same path.
    cover : function or None
        From `cover_along`; None: no cover.

    Raises
    ------
    InputError
        If the cover cannot be used.
    """
    if cover is None:
        return profile
    found = cover(path)
    noted = replace(profile, notes=(*profile.notes, *found.notes))
    return covered(noted, found.spans)


def _check_cells(raster: Terrain) -> None:
    if raster.interpolation != "nearest":
        msg = (
            "A raster of cover holds one height a cell: open it with "
            'interpolation="nearest".'
        )
        raise InputError(msg)


def raster_cover(raster: Terrain, path: GeodesicPath) -> PathCover:
    """Cover along a path from a raster whose cells hold heights above ground.

    Parameters
    ----------
    raster : Terrain
        Opened with ``interpolation="nearest"``: cover is constant inside a cell.
    path : GeodesicPath

    Returns
    -------
    PathCover
        One span for each run of cells of one height above 0. Cells without a value,
        and path outside the raster, count as bare and are named in a note.

    Raises
    ------
    InputError
        If the heights are no heights above ground.
    DemError
        If a file is damaged.
    """
    _check_cells(raster)
    profile = sample_path(raster, path)
    start, end = profile.piece_bounds_m
    height = profile.ground_m[profile.piece_start + 1]
    files = first_and_more([file.path.name for file in raster.rasters])
    name = f"cover raster {files}"
    notes = [note for note in profile.notes if note.code != "seam-step"]
    notes += _doubts(name, height)
    unknown = float(np.sum((end - start)[np.isnan(height)]))
    if unknown > 0.0:
        text = (
            f"{unknown / M_PER_KM:.2f} km of path lie outside {name} or have no value "
            "in it: no trees are counted there, and nobody knows."
        )
        notes.append(Note(code="cover-void", text=text))
    heads = np.flatnonzero(np.diff(height, prepend=np.nan) != 0.0)
    tails = np.append(heads[1:], height.size) - 1
    spans = tuple(
        CoverSpan(
            start_m=float(start[a]),
            end_m=float(end[b]),
            height_m=float(height[a]),
            kind=CoverKind.TREES,
            name=name,
        )
        for a, b in zip(heads, tails, strict=True)
        if height[a] > 0.0
    )
    return PathCover(spans=spans, notes=tuple(notes))


def _doubts(name: str, height_m: FloatArray) -> list[Note]:
    """A note on trees higher than any; an error where they cannot be heights."""
    known = height_m[np.isfinite(height_m)]
    highest = float(known.max()) if known.size else 0.0
    if highest > TALLEST_MAST_M:
        msg = (
            f"{name[0].upper()}{name[1:]} has {highest:.0f} m on the path. It must "
            "hold heights of trees and buildings above ground; give elevations with "
            "--dem."
        )
        raise InputError(msg)
    if highest <= TALLEST_TREE_M:
        return []
    text = (
        f"{name[0].upper()}{name[1:]} has {highest:.0f} m on the path, higher than "
        "any tree. Does it hold heights above ground, not elevations?"
    )
    return [Note(code="cover-tall", text=text)]
