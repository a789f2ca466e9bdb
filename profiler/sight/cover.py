"""Trees and buildings laid on a path's ground: cut in where they start and end."""

import math
from collections.abc import Sequence
from dataclasses import replace
from typing import NamedTuple

import numpy as np

from profiler.errors import InputError
from profiler.model import (
    BoolArray,
    CoverKind,
    CoverSpan,
    FloatArray,
    IntArray,
    PathProfile,
)
from profiler.sight.ground import quadratic

#: Edges of cover nearer than this to a piece's end, or to one another, are one [m];
#: rounding of crossings, a thousandth of the record's millimetre.
SAME_EDGE_M = 1e-6
#: What cover of one height over the whole path is called.
CANOPY = "canopy"


class Height(NamedTuple):
    """A height on the path, taken apart."""

    ground_m: float
    cover_m: float
    span: CoverSpan | None
    """What gives the cover; None on bare ground."""


class _Parts(NamedTuple):
    """Pieces of a profile, cut where cover starts or ends."""

    dist_m: FloatArray
    """(k, 3) at start, middle and end."""
    ground_m: FloatArray
    source: IntArray
    step: BoolArray
    """(k−1,) whether the ground steps between a part and the next."""


def canopy(height_m: float, length_m: float) -> CoverSpan:
    """Trees of one height over a whole path.

    Parameters
    ----------
    height_m : float [m]
        Above bare ground, > 0.
    length_m : float [m]
        Length of the path.

    Raises
    ------
    InputError
        If the height is not above 0.
    """
    return CoverSpan(
        start_m=0.0,
        end_m=length_m,
        height_m=height_m,
        kind=CoverKind.TREES,
        name=CANOPY,
    )


def grown(
    spans: Sequence[CoverSpan], *, metres_per_year: float, years: float
) -> tuple[CoverSpan, ...]:
    """The same cover some years later: trees grow, buildings do not.

    Parameters
    ----------
    spans : sequence of CoverSpan
    metres_per_year : float [m]
        Growth of every tree, 0 or more; 0.3 to 0.6 is common practice, no source.
    years : float
        How many years later, 0 or more.

    Raises
    ------
    InputError
        If growth or years is negative or not finite.
    """
    for what, value in (("Growth", metres_per_year), ("A span of years", years)):
        if not (math.isfinite(value) and value >= 0.0):
            msg = f"{what} of {value:g} must be 0 or more."
            raise InputError(msg)
    more = metres_per_year * years
    return tuple(
        replace(span, height_m=span.height_m + more)
        if span.kind is CoverKind.TREES
        else span
        for span in spans
    )


def covered(profile: PathProfile, spans: Sequence[CoverSpan]) -> PathProfile:
    """A path profile with cover on its ground.

    Parameters
    ----------
    profile : PathProfile
        Cover that it has already is kept.
    spans : sequence of CoverSpan
        In any order; what reaches beyond the path is cut off. Where several overlap
        the highest counts, of equal ones the building.

    Returns
    -------
    PathProfile
        Its ground is the same surface, with a piece's end, and a sample on either
        side, wherever the cover changes; ``cover_m`` is constant on each piece.
    """
    kept = _fitted(profile, [*profile.cover_spans, *spans])
    if not kept:
        return profile
    parts = _cut(profile, kept)
    index = _highest(parts.dist_m[:, 1], kept)
    heights = np.array([*(span.height_m for span in kept), 0.0])
    changes = parts.step | (np.diff(index) != 0)
    first = np.zeros(index.size, dtype=np.int64)
    first[1:] = np.cumsum(2 + changes)
    samples = first[:, None] + np.arange(3)
    size = int(first[-1]) + 3
    dist, ground, source = np.empty(size), np.empty(size), np.empty(size, np.int64)
    cover_index = np.empty(size, dtype=np.int64)
    dist[samples], ground[samples] = parts.dist_m, parts.ground_m
    source[samples] = parts.source
    cover_index[samples] = index[:, None]
    return replace(
        profile,
        dist_m=dist,
        ground_m=ground,
        piece_start=first,
        source=source,
        cover_m=heights[cover_index],
        cover_index=cover_index,
        cover_spans=kept,
    )


def _fitted(profile: PathProfile, spans: Sequence[CoverSpan]) -> tuple[CoverSpan, ...]:
    """Spans within the path, their edges on those of pieces where they nearly are."""
    bounds = [*profile.dist_m[profile.piece_start], profile.length_m]
    fixed = np.array(bounds)
    ends = np.array([(span.start_m, span.end_m) for span in spans]).reshape(-1, 2)
    ends = np.clip(ends, 0.0, profile.length_m)
    values, where = np.unique(ends, return_inverse=True)
    near = np.clip(np.searchsorted(fixed, values), 1, fixed.size - 1)
    near -= values - fixed[near - 1] < fixed[near] - values
    snapped = np.where(np.abs(fixed[near] - values) <= SAME_EDGE_M, fixed[near], values)
    for k in range(1, snapped.size):
        if snapped[k] - snapped[k - 1] <= SAME_EDGE_M:
            snapped[k] = snapped[k - 1]
    ends = snapped[where].reshape(-1, 2)
    kept = [
        replace(span, start_m=float(start), end_m=float(end))
        for span, (start, end) in zip(spans, ends, strict=True)
        if end > start
    ]
    return tuple(sorted(kept, key=lambda s: (s.start_m, s.end_m, s.kind, s.name)))


def _cut(profile: PathProfile, spans: tuple[CoverSpan, ...]) -> _Parts:
    """The pieces of a profile, those with an edge of cover inside cut there."""
    whole = profile.piece_samples
    dist, ground = profile.dist_m[whole], profile.ground_m[whole]
    begins = dist[:, 0]
    edges = np.setdiff1d(
        [edge for span in spans for edge in (span.start_m, span.end_m)],
        [*begins, profile.length_m],
    )
    start = np.sort(np.concatenate([begins, edges]))
    owner = np.searchsorted(begins, start, side="right") - 1
    last = np.append(owner[1:] != owner[:-1], True)
    head = np.append(True, last[:-1])
    end = np.where(last, dist[owner, 2], np.append(start[1:], profile.length_m))
    length = dist[owner, 2] - begins[owner]
    fit = quadratic(ground[owner])
    at = np.column_stack([start, (start + end) / 2.0, end])
    height = np.column_stack(
        [fit.at((at[:, k] - begins[owner]) / length) for k in range(3)]
    )
    source = np.repeat(profile.source[whole[owner, 1]][:, None], 3, axis=1)
    # what was a sample stays one, with its own file and ground
    for k, mask in ((0, head), (1, head & last), (2, last)):
        at[mask, k], height[mask, k] = dist[owner, k][mask], ground[owner, k][mask]
        source[mask, k] = profile.source[whole[owner, k]][mask]
    left, right = height[:-1, 2], height[1:, 0]
    step = (left != right) & np.isfinite(left) & np.isfinite(right)
    return _Parts(at, height, source, step)


def _highest(mid_m: FloatArray, spans: tuple[CoverSpan, ...]) -> IntArray:
    """(k,) index of the highest span over each part; −1 for none."""
    index = np.full(mid_m.size, -1, dtype=np.int64)
    order = sorted(range(len(spans)), key=lambda k: spans[k].name, reverse=True)
    order.sort(key=lambda k: (spans[k].height_m, spans[k].kind is CoverKind.BUILDING))
    for k in order:
        low, high = np.searchsorted(mid_m, (spans[k].start_m, spans[k].end_m))
        index[low:high] = k
    return index


def split_height(profile: PathProfile, dist_m: float, height_m: float) -> Height:
    """Ground and cover of a height on a path's surface.

    Parameters
    ----------
    profile : PathProfile
    dist_m : float [m]
        Distance from the eye's end.
    height_m : float [m]
        Ground and cover there; where the surface steps it tells which side is meant.

    Returns
    -------
    Height
        Its ground and cover add up to ``height_m``.
    """
    begins, ends = profile.piece_bounds_m
    low = int(np.searchsorted(ends, dist_m - SAME_EDGE_M))
    high = int(np.searchsorted(begins, dist_m + SAME_EDGE_M, side="right"))
    near = np.arange(low, high)
    if near.size == 0:
        return Height(height_m, 0.0, None)
    samples = profile.piece_samples[near]
    length = ends[near] - begins[near]
    part = np.clip((dist_m - begins[near]) / length, 0.0, 1.0)
    middle = samples[:, 1]
    tops = quadratic(profile.ground_m[samples]).at(part) + profile.cover_m[middle]
    gap = np.abs(tops - height_m)
    best = int(middle[np.argmin(np.where(np.isnan(gap), np.inf, gap))])
    cover = float(profile.cover_m[best])
    number = int(profile.cover_index[best])
    span = profile.cover_spans[number] if number >= 0 else None
    return Height(height_m - cover, cover, span)


def cover_at(profile: PathProfile, dist_m: FloatArray) -> FloatArray:
    """(n,) cover over places inside pieces of a path [m].

    Parameters
    ----------
    profile : PathProfile
    dist_m : (n,) float64 [m]
        Distances from the eye's end, none on the edge between two pieces.
    """
    begins, _ = profile.piece_bounds_m
    piece = np.searchsorted(begins, dist_m, side="right") - 1
    middle = profile.piece_start[np.maximum(piece, 0)] + 1
    cover: FloatArray = profile.cover_m[middle]
    return cover


def called(kind: CoverKind | None, name: str) -> str:
    """What stands at a place, in words: ground, trees of polygon 12, building Mill."""
    if kind is None:
        return "ground"
    if kind is CoverKind.BUILDING:
        return f"building {name}"
    return name if name == CANOPY else f"trees of {name}"
