"""Answers to draw, from 300 m to 450 km, and ways to look into a figure."""

from collections.abc import Callable
from pathlib import Path
from typing import Any, NamedTuple

import numpy as np
from matplotlib.axes import Axes
from matplotlib.colors import to_rgb
from matplotlib.figure import Figure
from matplotlib.lines import Line2D
from matplotlib.text import Text
from numpy.typing import NDArray

from profiler.model import (
    Air,
    CoverKind,
    CoverSpan,
    PathCover,
    Point,
    SightLine,
    Station,
)
from profiler.output.answer import look
from profiler.output.figure import draw_figure, ground_map
from profiler.radio.criteria import Criterion, RuleSet
from profiler.sight import judge
from profiler.terrain import Terrain, open_terrain
from tests.terrain import CENTRE, CENTRED_CRS, place, write_geotiff

SAMPLE = Path(__file__).resolve().parents[2] / "sample_dem"
HEADLINE = ("HIDDEN. One does not see the other:", "ground stands above the line.")
LONG = "Ångström-Øvre Żółć Ψηλή Корабль $x_1$ and more besides"
#: Millimetres of a metre: what rounding in a printed height may hide.
HALF_DECIMETRE = 0.05
#: Two greys this far apart in CIE lightness are told apart in print; our choice.
LEAST_LIGHTNESS = 15.0
#: Letters of 7 pixels are the least that can be read; common practice, no source.
LEAST_LETTER_PX = 7.0

Ground = Callable[[NDArray[np.float64]], NDArray[np.float64]]


class Case(NamedTuple):
    terrain: Terrain
    line: SightLine


def from_sample(eye_m: float, top_m: float) -> Case:
    terrain = open_terrain(SAMPLE / "upland.tif")
    eye = Station(
        point=Point(lat_deg=48.20920, lon_deg=-21.50344), name="Skarvel", agl_m=eye_m
    )
    top = Station(
        point=Point(lat_deg=48.32758, lon_deg=-21.17892),
        name="Quillet Mast",
        agl_m=top_m,
    )
    return Case(terrain, judge(terrain, eye, top))


def skarvel_to_quillet(
    eye_m: float, top_m: float, **more: Any
) -> tuple[Terrain, SightLine]:
    terrain = open_terrain(SAMPLE / "upland.tif")
    ends = [
        Station(point=Point(lat_deg=lat, lon_deg=lon), name=name, agl_m=agl)
        for lat, lon, name, agl in (
            (48.20920, -21.50344, "Skarvel", eye_m),
            (48.32758, -21.17892, "Quillet Mast", top_m),
        )
    ]
    return terrain, look(terrain, ends[0], ends[1], **more)


def radio(eye_m: float, top_m: float, hertz: float, rule: Any, **more: Any) -> Case:
    asked = {"frequency_hz": hertz, "rule": rule, **more}
    return Case(*skarvel_to_quillet(eye_m, top_m, **asked))


def woods(_: Any) -> PathCover:
    def span(start: float, end: float, high: float, name: str, kind: str) -> CoverSpan:
        return CoverSpan(
            start_m=start, end_m=end, height_m=high, name=name, kind=CoverKind(kind)
        )

    return PathCover(
        spans=(
            span(14600.0, 15200.0, 18.0, "Karn Wood", "trees"),
            span(22500.0, 23300.0, 25.0, "Quillet Plantation", "trees"),
            span(6000.0, 9000.0, 40.0, "Low Wood", "trees"),
            span(1000.0, 1100.0, 60.0, "the mill", "building"),
        )
    )


def surveyed(folder: Path) -> Case:
    lat, lon = place(90.0, 20e3)
    ends = (
        Station(
            point=Point(lat_deg=CENTRE[0], lon_deg=CENTRE[1]),
            name="Eye",
            agl_m=10.0,
            surveyed_ground_m=131.0,
        ),
        Station(point=Point(lat_deg=lat, lon_deg=lon), name="Top", agl_m=20.0),
    )
    return built(folder, 20e3, lambda e: 100.0 + hilly(e, 10.0, 7e3), ends)


#: Criteria of airs that the drawing does not show, with metres to add.
OTHER_AIRS = (
    Criterion(ke=2.0 / 3.0, f1_fraction=0.3, extra_m=5.0),
    Criterion(ke=4.0 / 3.0, f1_fraction=0.6),
    Criterion(ke=1.0, f1_fraction=0.6, extra_m=1.0),
    Criterion(ke=3.0, f1_fraction=1.0),
)
OTHER_RULE = RuleSet(name="given", source="as given", criteria=OTHER_AIRS)


def own_hill() -> Case:
    terrain = open_terrain(SAMPLE / "upland.tif")
    eye = Station(
        point=Point(lat_deg=48.20920, lon_deg=-21.50344), name="Skarvel", agl_m=1.7
    )
    top = Station(
        point=Point(lat_deg=48.324583, lon_deg=-21.393194), name="Cobbin", agl_m=0.0
    )
    return Case(terrain, judge(terrain, eye, top))


def built(
    folder: Path,
    length_m: float,
    ground: Ground,
    ends: tuple[Station, Station] | None = None,
    *,
    eye_m: float = 10.0,
    top_m: float = 30.0,
    names: tuple[str, str] = ("Eye", "Top"),
    air: Air | None = None,
    posts: int = 1200,
) -> Case:
    """Ground that depends on the distance eastward only, and a path due east."""
    cell = length_m / posts
    east = np.arange(-40, posts + 41) * cell
    heights = np.tile(ground(east.astype(np.float64)), (61, 1))
    corner = (cell, 0.0, float(east[0] - cell / 2), 0.0, -cell, 30.5 * cell)
    path = write_geotiff(
        folder / "ground.tif", heights, corner, CENTRED_CRS, nodata=-9999.0
    )
    terrain = open_terrain(path)
    lat, lon = place(90.0, length_m)
    if ends is None:
        here, there = (
            Point(lat_deg=CENTRE[0], lon_deg=CENTRE[1]),
            Point(lat_deg=lat, lon_deg=lon),
        )
        ends = (
            Station(point=here, name=names[0], agl_m=eye_m),
            Station(point=there, name=names[1], agl_m=top_m),
        )
    return Case(terrain, judge(terrain, *ends, air=air))


def hilly(east: NDArray[np.float64], high: float, wide: float) -> NDArray[np.float64]:
    waves = [
        high / k * np.sin(east / wide * k**1.5 * 2.0 * np.pi + k) for k in range(1, 6)
    ]
    total: NDArray[np.float64] = np.sum(waves, axis=0)
    return total


def walls(east: NDArray[np.float64]) -> NDArray[np.float64]:
    inside = (east > 900.0) & (east < 18900.0) & (east % 900.0 < 300.0)
    return 20.0 + inside * (90.0 + 5.0 * np.sin(east // 900.0 * 7.3))


def mountains(east: NDArray[np.float64]) -> NDArray[np.float64]:
    near = 2800.0 * np.exp(-((east / 9e3) ** 2))
    far = 2600.0 * np.exp(-(((east - 450e3) / 12e3) ** 2))
    ground: NDArray[np.float64] = near + far + hilly(east, 60.0, 37e3) + 150.0
    return ground


def hole(start: float, end: float, level: float = 200.0) -> Ground:
    def ground(east: NDArray[np.float64]) -> NDArray[np.float64]:
        known = level + hilly(east, 12.0, 5e3) - 80.0
        return np.where((east > start) & (east < end), np.nan, known)

    return ground


def bump(east: NDArray[np.float64]) -> NDArray[np.float64]:
    return 120.0 + 24.0 * np.exp(-(((east - 3e3) / 400.0) ** 2))


def on_voids(folder: Path) -> Case:
    lat, lon = place(90.0, 20e3)
    ends = (
        Station(point=Point(lat_deg=CENTRE[0], lon_deg=CENTRE[1]), amsl_m=300.0),
        Station(point=Point(lat_deg=lat, lon_deg=lon), amsl_m=250.0),
    )

    def ground(east: NDArray[np.float64]) -> NDArray[np.float64]:
        edge = (east < 1e3) | (east > 19e3)
        return np.where(edge, np.nan, 100.0 + hilly(east, 20.0, 3e3))

    return built(folder, 20e3, ground, ends)


CASES: dict[str, Callable[[Path], Case]] = {
    "main": lambda _: from_sample(20.0, 30.0),
    "part": lambda _: from_sample(20.0, 60.0),
    "own hill": lambda _: own_hill(),
    "300 m": lambda f: built(
        f,
        300.0,
        lambda e: 50.0 + 3.0 * np.sin(e / 40.0),
        eye_m=1.7,
        top_m=2.0,
        posts=150,
    ),
    "300 m and 500 m": lambda f: built(
        f, 300.0, lambda e: 50.0 + 3.0 * np.sin(e / 40.0), top_m=500.0, posts=150
    ),
    "bank at A": lambda f: built(
        f,
        900.0,
        lambda e: 50.0 + 8.0 * np.clip((e - 2.0) / 6.0, 0.0, 1.0),
        eye_m=1.7,
        top_m=2.0,
        posts=900,
    ),
    "450 km": lambda f: built(f, 450e3, mountains, eye_m=1.7, top_m=0.0, posts=4000),
    "500 m target": lambda f: built(
        f, 40e3, lambda e: 200.0 + hilly(e, 40.0, 9e3), top_m=500.0
    ),
    "2 m target": lambda f: built(f, 8e3, bump, eye_m=1.7, top_m=2.0),
    "many walls": lambda f: built(
        f, 20e3, walls, eye_m=80.0, top_m=85.0, names=(LONG, LONG)
    ),
    "void": lambda f: built(
        f, 27e3, hole(12e3, 12.6e3), eye_m=60.0, top_m=60.0, names=("", LONG)
    ),
    "wide void": lambda f: built(f, 27e3, hole(2e3, 25e3), eye_m=90.0, top_m=90.0),
    "ends on voids": on_voids,
    "flat sea": lambda f: built(f, 20e3, np.zeros_like, eye_m=1.7, top_m=12.0),
    "bare and clear": lambda f: built(
        f, 9e3, lambda e: 60.0 + (e / 900.0) ** 2 + hilly(e, 4.0, 7e3), top_m=0.0
    ),
    "surveyed": surveyed,
    "trees": lambda _: Case(*skarvel_to_quillet(40.0, 45.0, cover=woods)),
    "radio blocked": lambda _: radio(20.0, 30.0, 4e8, "p530-temperate"),
    "radio short": lambda _: radio(40.0, 45.0, 7.5e9, "p530-temperate"),
    "radio met": lambda _: radio(60.0, 70.0, 7.5e9, "plain-0.6"),
    "radio low": lambda _: radio(60.0, 70.0, 4e8, OTHER_RULE),
    "radio without a rule": lambda _: radio(60.0, 70.0, 3e7, None),
    "radio over trees": lambda _: radio(
        40.0, 45.0, 2.4e10, "p530-temperate", cover=woods
    ),
    "duct": lambda f: built(
        f, 100e3, lambda e: 60.0 + hilly(e, 20.0, 9e3), air=Air(kr=1.3)
    ),
}
LOOKS = (("curved-sea", "m"), ("level-sea", "ft"))


def figure_of(case: Case, draw: str = "curved-sea", show_in: str = "m") -> Figure:
    plan = ground_map(case.terrain, case.line.path)
    return draw_figure(
        case.line, headline=HEADLINE, ground_map=plan, draw=draw, show_in=show_in
    )


def texts_of(figure: Figure) -> list[Text]:
    found = figure.findobj(Text)
    return [
        t for t in found if isinstance(t, Text) and t.get_text() and t.get_visible()
    ]


def words_of(figure: Figure) -> list[str]:
    return [t.get_text() for t in texts_of(figure)]


def axes_of(figure: Figure, label: str) -> Axes:
    return next(ax for ax in figure.axes if ax.get_label() == label)


def line_of(ax: Axes, label: str) -> Line2D:
    return next(line for line in ax.lines if line.get_label() == label)


def xy_of(line: Line2D) -> tuple[NDArray[np.float64], NDArray[np.float64]]:
    return np.asarray(line.get_xdata(), float), np.asarray(line.get_ydata(), float)


def lightness(color: Any) -> float:
    """CIE L* of a colour: sRGB to luminance to lightness (IEC 61966-2-1, CIE 1976)."""
    rgb = np.array(to_rgb(color))
    linear = np.where(rgb <= 0.04045, rgb / 12.92, ((rgb + 0.055) / 1.055) ** 2.4)
    luminance = float(linear @ [0.2126, 0.7152, 0.0722])
    return 116.0 * np.cbrt(luminance) - 16.0 if luminance > 0.008856 else 0.0
