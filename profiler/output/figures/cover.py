"""Trees and buildings on the profile: a stippled band above the ground."""

from typing import Any

import numpy as np
from matplotlib.axes import Axes

from profiler.model import BoolArray, FloatArray
from profiler.output.figures import page
from profiler.output.figures.course import Trace
from profiler.output.figures.scale import Scale


def draw_cover(ax: Axes, trace: Trace, scale: Scale) -> None:
    """Cover as a band of its own from the ground to its top; nothing without any.

    Parameters
    ----------
    ax : Axes
        The profile's.
    trace : Trace
        Ground and cover as drawn.
    scale : Scale
        Units.

    Notes
    -----
    Green and stippled from tree foot to tree top: neither the hatching below unseen
    ground nor the thick edge of seen ground.
    """
    covered = trace.top_m > trace.ground_m
    if not covered.any():
        return
    x = trace.dist_m / scale.distance_unit_m
    foot, top = (y / scale.height_unit_m for y in (trace.paper_m, trace.paper_top_m))
    ax.fill_between(
        x,
        foot,
        top,
        where=list(covered),
        facecolor=page.PAPER,
        edgecolor=page.COVER,
        hatch=page.STIPPLE,
        lw=0.0,
        zorder=page.Z_GROUND + 1,
        label="trees, buildings",
    )
    outlines = [_outline(x, foot, top, run) for run in _runs(covered)]
    look: dict[str, Any] = {
        "color": page.COVER,
        "lw": page.COVER_WIDTH,
        "zorder": page.Z_EDGE,
    }
    ax.plot(*np.hstack(outlines), **look)


def _runs(covered: BoolArray) -> list[slice]:
    edges = np.flatnonzero(np.diff(np.concatenate([[0], covered, [0]])))
    pairs = zip(edges[::2].tolist(), edges[1::2].tolist(), strict=True)
    return [slice(a, b) for a, b in pairs]


def _outline(
    x: FloatArray, foot: FloatArray, top: FloatArray, run: slice
) -> FloatArray:
    """(2, k) sides and top of one run, ending in a gap."""
    xs, ys, feet = x[run], top[run], foot[run]
    return np.array(
        [
            [xs[0], *xs, xs[-1], np.nan],
            [feet[0], *ys, feet[-1], np.nan],
        ]
    )
