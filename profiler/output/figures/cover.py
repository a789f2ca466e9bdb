"""Trees and buildings on the profile: a stippled band above the ground."""

import numpy as np
from matplotlib.axes import Axes

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
    # sides and top: where cover begins or ends the profile has two samples at one place
    edge = np.where(covered, top, np.nan)
    steps = np.flatnonzero(np.diff(covered.astype(np.int8)))
    ax.plot(x, edge, color=page.COVER, lw=page.COVER_WIDTH, zorder=page.Z_EDGE)
    for k in steps:
        inside = k + 1 if covered[k + 1] else k
        pair = [foot[inside], top[inside]]
        ax.plot(
            [x[inside]] * 2,
            pair,
            color=page.COVER,
            lw=page.COVER_WIDTH,
            zorder=page.Z_EDGE,
        )
