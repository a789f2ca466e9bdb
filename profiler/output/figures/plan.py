"""The plan map: grey hillshade around the path, scale bar, north."""

import math
from dataclasses import dataclass
from typing import Any, Final

import numpy as np
from matplotlib.axes import Axes
from matplotlib.figure import Figure
from matplotlib.lines import Line2D

from profiler.constants import TURN_DEG
from profiler.earth import Projector, plane_around, points_at, within_half_turn
from profiler.model import BoolArray, FloatArray, GeodesicPath
from profiler.model.arrays import frozen
from profiler.output.figures import page
from profiler.output.figures.marks import Mark
from profiler.output.figures.scale import Scale
from profiler.output.numbers import ratio
from profiler.terrain import Terrain
from profiler.terrain.near import finest_at
from profiler.terrain.overview import ground_grid

#: Ground shown beyond the ends of the path [1 of its length]; our choice.
PAD: Final = 0.14
#: Cells of the map along its longer side [1]; three a millimetre: finer shows nothing.
CELLS: Final = 260
#: and at least so many, however far apart the posts are [1].
LEAST_CELLS: Final = 8
#: Nodes along a side at which the map's places are worked out exactly [1].
NODES: Final = 17
#: Nearer to a pole every place of the map is worked out [deg].
EVEN_BELOW_DEG: Final = 80.0
#: Points along the path on the map [1].
PATH_POINTS: Final = 65
#: The lamp: bearing and height above the horizon [deg]; common practice.
LAMP_AZIMUTH_DEG: Final = 315.0
LAMP_HEIGHT_DEG: Final = 45.0
#: Slopes are steepened until their typical one is this [1]; our choice.
TYPICAL_SLOPE: Final = 0.3
#: Grey of the darkest and the lightest hillside [1]; dark lines stay readable.
GREYS: Final = (0.45, 0.97)
#: Widths of lines [pt] and sizes of marks [pt].
CASING: Final = 4.0
COURSE: Final = 1.8
DOT: Final = 5.0
MARKER: Final = 7.0
#: The scale bar is at most this share of the map's width [1]; steps of its length.
BAR_SHARE: Final = 0.45
BAR_STEPS: Final = (5.0, 2.0, 1.0)
#: Ticks of the scale bar and half the arrow's head [1 of the row's height].
TICK_SHARE: Final = 0.17
#: White in eight bits.
WHITE: Final = 255.0
#: Letters A and B stand so far from their mark [pt].
LETTER_OFF: Final = 11.0
#: White behind them.
LETTER_BOX: Final = "round,pad=0.12"


@dataclass(frozen=True, slots=True, kw_only=True, eq=False)
class GroundMap:
    """Ground around a path on a plane whose middle is the path's; north is up."""

    east_m: FloatArray
    """(m,) east of the path's middle, rising [m]."""
    north_m: FloatArray
    """(n,) north of it, falling [m]."""
    ground_m: FloatArray
    """(n, m) elevation; NaN where none is known."""
    path_east_m: FloatArray
    """(k,) the path on that plane [m], at even distances."""
    path_north_m: FloatArray
    """(k,)"""

    def __post_init__(self) -> None:
        """Freeze the arrays."""
        for name in ("east_m", "north_m", "ground_m", "path_east_m", "path_north_m"):
            object.__setattr__(self, name, frozen(getattr(self, name)))


def ground_map(terrain: Terrain, path: GeodesicPath) -> GroundMap:
    """Ground around a path, coarse enough for a small map.

    Parameters
    ----------
    terrain : Terrain
        Where the ground comes from.
    path : GeodesicPath
        What the map shows.

    Raises
    ------
    DemError
        If a file is damaged.
    """
    lat, lon = points_at(path, np.linspace(0.0, path.length_m, PATH_POINTS))
    middle = PATH_POINTS // 2
    plane = plane_around(float(lat[middle]), within_half_turn(float(lon[middle])))
    x, y = plane.to_crs(lat, lon)
    finest = finest_at(terrain, path.start)
    post_m = 0.0 if finest is None else finest.size_m
    east, north = _frame(x, y, path.length_m, post_m)
    ground = ground_grid(terrain, *_places(plane, east, north))
    return GroundMap(
        east_m=east, north_m=north, ground_m=ground, path_east_m=x, path_north_m=y
    )


def _places(
    plane: Projector, east: FloatArray, north: FloatArray
) -> tuple[FloatArray, FloatArray]:
    """Latitude and longitude of the map's cells, (n, m) each [deg].

    Worked out at some of them and bilinear between: below 80 degrees the rest are at
    most 0.08 of a cell off at 450 km, 0.02 at 100 km (measured).
    """
    is_even = abs(plane.to_wgs84(np.zeros(1), np.zeros(1))[0][0]) < EVEN_BELOW_DEG
    nodes = [_some(axis) if is_even else np.sort(axis) for axis in (east, north)]
    x, y = np.meshgrid(*nodes)
    found = plane.to_wgs84(x.ravel(), y.ravel())
    lat, lon = (_between(nodes, v.reshape(x.shape), east, north) for v in found)
    return lat, lon


def _some(axis: FloatArray) -> FloatArray:
    """Rising nodes over an axis of the map, both ends among them [m]."""
    return np.linspace(float(axis.min()), float(axis.max()), NODES)


def _between(
    nodes: list[FloatArray], value: FloatArray, east: FloatArray, north: FloatArray
) -> FloatArray:
    """Values at the nodes, bilinear at every cell; a date line is stepped over."""
    weights = [
        _weights(node, axis) for node, axis in zip(nodes, (east, north), strict=True)
    ]
    even = np.unwrap(np.unwrap(value, period=TURN_DEG, axis=1), period=TURN_DEG, axis=0)
    grid: FloatArray = weights[1] @ even @ weights[0].T
    return grid


def _weights(node: FloatArray, axis: FloatArray) -> FloatArray:
    """(len(axis), len(node)) shares of the two nodes beside each place."""
    at = np.interp(axis, node, np.arange(node.size, dtype=np.float64))
    return np.maximum(1.0 - np.abs(at[:, None] - np.arange(node.size)), 0.0)


def _frame(
    x: FloatArray, y: FloatArray, length_m: float, post_m: float
) -> tuple[FloatArray, FloatArray]:
    """East and north of the map's cells, in the shape of its area.

    Cells are no finer than the posts: nearest posts would make steps of the hills.
    """
    tall = page.MAP_AREA.height / page.MAP_AREA.width
    width = float(np.ptp(x)) + 2.0 * PAD * length_m
    height = float(np.ptp(y)) + 2.0 * PAD * length_m
    width = max(width, height / tall)
    height = width * tall
    rows = int(min(max(height / max(post_m, height / CELLS), LEAST_CELLS), CELLS))
    cell = height / rows
    cols = round(width / cell)
    east = (np.arange(cols) - (cols - 1) / 2.0) * cell + (x.min() + x.max()) / 2.0
    north = ((rows - 1) / 2.0 - np.arange(rows)) * cell + (y.min() + y.max()) / 2.0
    return east, north


def hillshade(plan: GroundMap) -> tuple[FloatArray, BoolArray]:
    """Greys of the ground under a lamp in the north-west, and where ground is known.

    Notes
    -----
    Lambert's cosine law on the ground's slopes, steepened to one typical slope so that
    low hills show too: a picture, not a measure.
    """
    cell = float(plan.east_m[1] - plan.east_m[0])
    known = np.isfinite(plan.ground_m)
    level = np.where(known, plan.ground_m, np.nan)
    down, right = np.gradient(level, cell)
    slopes_north, slopes_east = -down, right
    steep = np.hypot(slopes_north, slopes_east)
    usable = steep[np.isfinite(steep)]
    typical = float(np.sqrt(np.mean(usable * usable))) if usable.size else 0.0
    lift = TYPICAL_SLOPE / typical if typical > 0.0 else 1.0
    lamp_high = math.radians(LAMP_HEIGHT_DEG)
    lamp_way = math.radians(LAMP_AZIMUTH_DEG)
    east, north = math.sin(lamp_way), math.cos(lamp_way)
    slope = lift * (slopes_east * east + slopes_north * north)
    length = np.sqrt(1.0 + (lift * steep) ** 2)
    light = (math.sin(lamp_high) - math.cos(lamp_high) * slope) / length
    flat = math.sin(lamp_high)
    light = np.where(np.isfinite(light), light, flat)
    grey = GREYS[0] + (GREYS[1] - GREYS[0]) * np.clip(light, 0.0, 1.0)
    return grey, known


def draw_plan(ax: Axes, plan: GroundMap, marks: list[Mark], length_m: float) -> Axes:
    """The path on grey hills, north up; dots at the numbered places.

    Parameters
    ----------
    ax : Axes
        Where to draw; both axes in metres.
    plan : GroundMap
        Ground around the path.
    marks : list of Mark
        Places with a disc.
    length_m : float [m]
        Length of the path.
    """
    _hills(ax, plan)
    x, y = plan.path_east_m, plan.path_north_m
    ax.plot(x, y, color=page.PAPER, lw=CASING, zorder=page.Z_EDGE)
    ax.plot(x, y, color=page.SIGHT, lw=COURSE, zorder=page.Z_EDGE, label="path")
    even = np.linspace(0.0, length_m, x.size)
    look = {"ms": DOT, "mew": page.FRAME_WIDTH, "mfc": page.DISC}
    for mark in (m for m in reversed(marks) if m.symbol.isdigit()):
        at = [float(np.interp(mark.distance_m, even, c)) for c in (x, y)]
        page.spot(ax, (at[0], at[1]), "o", label=mark.symbol, **look)
    way = np.array([x[-1] - x[0], y[-1] - y[0]])
    way = way * (LETTER_OFF / np.hypot(*way))
    box = {"boxstyle": LETTER_BOX, "fc": page.PAPER, "ec": "none"}
    for letter, shape, k, sign in (("A", "o", 0, -1.0), ("B", "s", -1, 1.0)):
        end = (float(x[k]), float(y[k]))
        page.spot(ax, end, shape, label=letter, ms=MARKER, mew=COURSE)
        off = (float(sign * way[0]), float(sign * way[1]))
        page.letter_beside(ax, letter, end, off, bbox=box)
    ax.set_xticks([])
    ax.set_yticks([])
    return ax


def _hills(ax: Axes, plan: GroundMap) -> None:
    """Grey hills; where no ground is known, crossed lines."""
    grey, known = hillshade(plan)
    half = float(plan.east_m[1] - plan.east_m[0]) / 2.0
    west, east = float(plan.east_m[0]) - half, float(plan.east_m[-1]) + half
    south, north = float(plan.north_m[-1]) - half, float(plan.north_m[0]) + half
    ax.set_xlim(west, east)
    ax.set_ylim(south, north)
    look: dict[str, Any] = {"facecolor": page.PAPER, "edgecolor": page.LEVEL}
    ax.axhspan(south, north, hatch="xxx", lw=0.0, zorder=0, **look)
    image = np.round(np.dstack([grey, grey, grey, known]) * WHITE).astype(np.uint8)
    ax.imshow(
        image,
        extent=(west, east, south, north),
        origin="upper",
        aspect="auto",
        interpolation="bilinear",
        zorder=page.Z_LEVEL,
    )


def draw_plan_foot(figure: Figure, plan: GroundMap, scale: Scale) -> None:
    """Scale bar and north arrow under the map."""
    area, foot = page.MAP_AREA, page.MAP_FOOT_AREA
    cell = float(plan.east_m[1] - plan.east_m[0])
    per_in = plan.east_m.size * cell / area.width
    unit_m = scale.distance_unit_m
    length = bar_length(BAR_SHARE * area.width * per_in / unit_m)
    wide = length * unit_m / per_in
    y = foot.bottom + foot.height / 2.0
    tick = foot.height * TICK_SHARE
    low, high, end = y - tick, y + tick, foot.left + wide
    _stroke(figure, [(foot.left, high), (foot.left, low), (end, low), (end, high)])
    text = f"{ratio(length)} {scale.distance_unit}"
    page.write(figure, end + tick, y, text, size=page.SMALL, va="center")
    right = foot.right - tick
    _stroke(figure, [(right - tick, high), (right, foot.top), (right + tick, high)])
    _stroke(figure, [(right, foot.top), (right, foot.bottom + tick)])
    look: dict[str, Any] = {"bold": True, "ha": "right", "va": "center"}
    page.write(figure, right - 2.0 * tick, y, "N", size=page.SMALL, **look)


def bar_length(most: float) -> float:
    """The longest round length that is not longer than ``most``, in its unit."""
    ten = 10.0 ** math.floor(math.log10(most))
    return next(step * ten for step in BAR_STEPS if step * ten <= most * (1.0 + 1e-9))


def _stroke(figure: Figure, corners: list[tuple[float, float]]) -> None:
    xs, ys = zip(*corners, strict=True)
    figure.add_artist(
        Line2D(
            [x / page.PAGE_IN[0] for x in xs],
            [y / page.PAGE_IN[1] for y in ys],
            color=page.EDGE,
            lw=page.RAY_WIDTH,
        )
    )
