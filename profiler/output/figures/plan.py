"""The plan map: grey hillshade around the path, scale bar, north."""

import math
from dataclasses import dataclass
from typing import Final

import numpy as np
from matplotlib.axes import Axes
from matplotlib.figure import Figure
from matplotlib.lines import Line2D

from profiler.earth import points_at, projector
from profiler.model import BoolArray, FloatArray, GeodesicPath
from profiler.model.arrays import frozen
from profiler.output.figures import page
from profiler.output.figures.marks import Mark
from profiler.output.figures.scale import Scale
from profiler.output.numbers import ratio
from profiler.terrain import Terrain
from profiler.terrain.overview import ground_grid

#: Ground shown beyond the ends of the path [1 of its length]; our choice.
PAD: Final = 0.14
#: Cells of the map along its longer side [1]; about its pixels at 150 dpi.
CELLS: Final = 320
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
#: Letters A and B stand so far from their mark [pt].
LETTER_OFF: Final = 11.0

_PLANE: Final = (
    'PROJCRS["around a path",BASEGEOGCRS["WGS 84",DATUM["World Geodetic System 1984",'
    'ELLIPSOID["WGS 84",6378137,298.257223563]]],CONVERSION["plane",'
    'METHOD["Azimuthal Equidistant",ID["EPSG",1125]],'
    'PARAMETER["Latitude of natural origin",{lat!r},ANGLEUNIT["degree",'
    "0.0174532925199433]],"
    'PARAMETER["Longitude of natural origin",{lon!r},ANGLEUNIT["degree",'
    "0.0174532925199433]],"
    'PARAMETER["False easting",0,LENGTHUNIT["metre",1]],'
    'PARAMETER["False northing",0,LENGTHUNIT["metre",1]]],CS[Cartesian,2],'
    'AXIS["easting",east],AXIS["northing",north],LENGTHUNIT["metre",1]]'
)


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
    plane = projector(_PLANE.format(lat=float(lat[middle]), lon=_turned(lon[middle])))
    x, y = plane.to_crs(lat, lon)
    east, north = _frame(x, y, path.length_m)
    grid_x, grid_y = np.meshgrid(east, north)
    grid_lat, grid_lon = plane.to_wgs84(grid_x.ravel(), grid_y.ravel())
    ground = ground_grid(
        terrain, grid_lat.reshape(grid_x.shape), grid_lon.reshape(grid_x.shape)
    )
    return GroundMap(
        east_m=east, north_m=north, ground_m=ground, path_east_m=x, path_north_m=y
    )


def _turned(lon_deg: float) -> float:
    """A longitude [deg] within a half turn of Greenwich."""
    return float((lon_deg + 180.0) % 360.0 - 180.0)


def _frame(
    x: FloatArray, y: FloatArray, length_m: float
) -> tuple[FloatArray, FloatArray]:
    """East and north of the map's cells, in the shape of its area."""
    tall = page.MAP_AREA.height / page.MAP_AREA.width
    width = float(np.ptp(x)) + 2.0 * PAD * length_m
    height = float(np.ptp(y)) + 2.0 * PAD * length_m
    width = max(width, height / tall)
    height = width * tall
    cell = height / CELLS
    cols, rows = round(width / cell), CELLS
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
    """The path on grey hills, north up; only the decisive place carries its number.

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
    grey, known = hillshade(plan)
    half = float(plan.east_m[1] - plan.east_m[0]) / 2.0
    edges = (
        plan.east_m[0] - half,
        plan.east_m[-1] + half,
        plan.north_m[-1] - half,
        plan.north_m[0] + half,
    )
    ax.set_xlim(edges[0], edges[1])
    ax.set_ylim(edges[2], edges[3])
    ax.axhspan(
        edges[2],
        edges[3],
        facecolor=page.PAPER,
        edgecolor=page.LEVEL,
        hatch="xxx",
        lw=0.0,
        zorder=0,
    )
    image = np.round(np.dstack([grey, grey, grey, known]) * 255.0).astype(np.uint8)
    ax.imshow(
        image,
        extent=edges,
        origin="upper",
        aspect="auto",
        interpolation="nearest",
        zorder=page.Z_LEVEL,
    )
    x, y = plan.path_east_m, plan.path_north_m
    ax.plot(x, y, color=page.PAPER, lw=CASING, zorder=page.Z_EDGE)
    ax.plot(x, y, color=page.SIGHT, lw=COURSE, zorder=page.Z_EDGE, label="path")
    even = np.linspace(0.0, length_m, x.size)
    for mark in (m for m in reversed(marks) if m.symbol.isdigit()):
        at = [float(np.interp(mark.distance_m, even, c)) for c in (x, y)]
        ax.plot(
            *at,
            ls="none",
            marker="o",
            ms=DOT,
            mec=page.EDGE,
            mew=0.6,
            mfc=page.DISC,
            zorder=page.Z_MARK,
        )
    _letters(ax, x, y)
    ax.set_xticks([])
    ax.set_yticks([])
    return ax


def _letters(ax: Axes, x: FloatArray, y: FloatArray) -> None:
    """Ring A and square B, their letters away from the path."""
    way = np.array([x[-1] - x[0], y[-1] - y[0]])
    way = way / np.hypot(*way)
    for letter, shape, k, sign in (("A", "o", 0, -1.0), ("B", "s", -1, 1.0)):
        ax.plot(
            x[k],
            y[k],
            ls="none",
            marker=shape,
            ms=MARKER,
            mfc="none",
            mec=page.EDGE,
            mew=COURSE,
            zorder=page.Z_MARK,
            label=letter,
        )
        ax.annotate(
            letter,
            (x[k], y[k]),
            xytext=tuple(sign * LETTER_OFF * way),
            textcoords="offset points",
            ha="center",
            va="center",
            fontproperties=page.letters(page.SIZE, bold=True),
            zorder=page.Z_MARK,
            bbox={"boxstyle": "round,pad=0.12", "fc": page.PAPER, "ec": "none"},
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
    tick = foot.height / 6.0
    _stroke(
        figure,
        [
            (foot.left, y + tick),
            (foot.left, y - tick),
            (foot.left + wide, y - tick),
            (foot.left + wide, y + tick),
        ],
    )
    page.write(
        figure,
        foot.left + wide + tick,
        y,
        f"{ratio(length, 6)} {scale.distance_unit}",
        size=page.SMALL,
        va="center",
    )
    right = foot.right - tick
    _stroke(
        figure, [(right - tick, y + tick), (right, foot.top), (right + tick, y + tick)]
    )
    _stroke(figure, [(right, foot.top), (right, foot.bottom + tick)])
    page.write(
        figure,
        right - 2.0 * tick,
        y,
        "N",
        size=page.SMALL,
        bold=True,
        ha="right",
        va="center",
    )


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
            lw=1.2,
        )
    )
