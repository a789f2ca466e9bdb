"""Figures on disk, thinning, the plan map and what is refused."""

import io
import subprocess
import sys
from collections.abc import Callable
from pathlib import Path
from typing import Any

import matplotlib as mpl
import numpy as np
import pytest
from matplotlib.figure import Figure
from PIL import Image

from profiler.earth import plane_around
from profiler.errors import InputError
from profiler.model import FloatArray
from profiler.output.figure import draw_figure, ground_map, save_figure
from profiler.output.figures import page
from profiler.output.figures.course import COLUMNS, course_of, thinned, trace_of
from profiler.output.figures.marks import spread
from profiler.output.figures.plan import _places, bar_length, hillshade
from profiler.output.figures.png import png_bytes
from profiler.output.figures.scale import END_SHARE, nice_ticks
from tests.plots.figure_cases import (
    HEADLINE,
    Case,
    axes_of,
    built,
    figure_of,
)


def test_thinning_a_long_path_keeps_every_columns_extremes(
    case_of: Callable[[str], Case],
) -> None:
    line = case_of("450 km").line
    trace = trace_of(course_of(line, "curved-sea"))
    assert trace.dist_m.size < line.profile.dist_m.size / 2
    margin = line.margin_along_m
    column = np.minimum(
        np.floor(line.profile.dist_m / line.path.length_m * COLUMNS), COLUMNS - 1
    )
    kept = np.minimum(
        np.floor(trace.dist_m / line.path.length_m * COLUMNS), COLUMNS - 1
    )
    for k in range(0, COLUMNS, 7):
        there = margin[column == k]
        drawn = trace.margin_m[kept == k]
        assert drawn.min() == pytest.approx(there.min(), abs=1e-9)
        assert drawn.max() == pytest.approx(there.max(), abs=1e-9)


def test_thinning_keeps_both_edges_of_a_void_narrower_than_a_column() -> None:
    count = 20 * COLUMNS
    dist = np.linspace(0.0, 1000.0, count)
    margin = np.cos(dist)
    margin[7003:7005] = np.nan
    keep = thinned(dist, margin, 1000.0)
    assert {7002, 7003, 7004, 7005} <= set(keep.tolist())
    assert keep.size < count / 2


def test_discs_that_want_one_place_share_it_evenly() -> None:
    placed = spread([5.0, 5.0, 5.0, 1.0], 1.0, 0.0, 10.0)
    assert placed == pytest.approx([4.0, 5.0, 6.0, 1.0])
    assert spread([0.0, 0.1], 1.0, 0.5, 9.5) == pytest.approx([0.5, 1.5])
    assert spread([9.4, 9.5, 8.4], 1.0, 0.5, 9.5) == pytest.approx([8.5, 9.5, 7.5])
    assert spread([], 1.0, 0.0, 1.0) == []


def test_ticks_are_round_and_within_the_limits() -> None:
    assert nice_ticks(0.0, 27.4, 10) == [0.0, 5.0, 10.0, 15.0, 20.0, 25.0]
    assert all(-3.2 <= t <= 8.1 for t in nice_ticks(-3.2, 8.1, 4))


def test_the_scale_bar_is_round_and_fits() -> None:
    assert bar_length(7.3) == 5.0
    assert bar_length(2.0) == 2.0
    assert bar_length(0.19) == pytest.approx(0.1)


def test_the_map_lies_north_up_with_light_from_the_north_west(tmp_path: Path) -> None:
    case = built(tmp_path, 4e3, lambda e: 100.0 - np.abs(e - 2e3) / 10.0)
    plan = ground_map(case.terrain, case.line.path)
    assert np.all(np.diff(plan.east_m) > 0.0)
    assert np.all(np.diff(plan.north_m) < 0.0)
    assert plan.path_east_m[0] < plan.path_east_m[-1]
    span = plan.path_east_m[-1] - plan.path_east_m[0]
    assert span == pytest.approx(4e3, abs=0.01)
    grey, known = hillshade(plan)
    middle = int(np.argmin(np.abs(plan.north_m)))
    quarter = [int(np.argmin(np.abs(plan.east_m - x))) for x in (-1e3, 1e3)]
    assert known[middle, quarter].all()
    assert grey[middle, quarter[0]] > grey[middle, quarter[1]]


def test_the_page_is_a4_and_900_pixels_wide_at_77_dots(
    case_of: Callable[[str], Case], tmp_path: Path
) -> None:
    figure = figure_of(case_of("main"))
    assert tuple(figure.get_size_inches()) == pytest.approx((11.69, 8.27))
    save_figure(figure, tmp_path / "a.png", dpi=77.0)
    with Image.open(tmp_path / "a.png") as image:
        assert image.width == 900
    save_figure(figure, tmp_path / "b.PNG")
    with Image.open(tmp_path / "b.PNG") as image:
        assert image.width == 1753


@pytest.mark.parametrize("suffix", [".png", ".svg", ".pdf"])
def test_the_same_answer_gives_the_same_bytes(
    case_of: Callable[[str], Case], tmp_path: Path, suffix: str
) -> None:
    before = dict(mpl.rcParams)
    for name in ("one", "two"):
        save_figure(figure_of(case_of("void")), tmp_path / f"{name}{suffix}")
    one, two = ((tmp_path / f"{n}{suffix}").read_bytes() for n in ("one", "two"))
    assert one == two
    assert dict(mpl.rcParams) == before
    assert sorted(p.stem for p in tmp_path.iterdir()) == ["one", "two"]


def test_a_figure_saved_twice_gives_the_same_bytes(
    case_of: Callable[[str], Case], tmp_path: Path
) -> None:
    figure = figure_of(case_of("part"))
    for name in ("a.svg", "b.png", "c.svg"):
        save_figure(figure, tmp_path / name)
    assert (tmp_path / "a.svg").read_bytes() == (tmp_path / "c.svg").read_bytes()


def test_a_drawing_for_the_web_stays_small(
    case_of: Callable[[str], Case], tmp_path: Path
) -> None:
    most_bytes = 1_000_000  # our bar
    save_figure(figure_of(case_of("450 km")), tmp_path / "a.svg")
    assert (tmp_path / "a.svg").stat().st_size < most_bytes


@pytest.mark.parametrize("name", ["a.jpg", "a", "a.svgz", "png"])
def test_another_ending_is_refused(
    case_of: Callable[[str], Case], tmp_path: Path, name: str
) -> None:
    with pytest.raises(InputError, match=r"\.png, \.svg or \.pdf"):
        save_figure(figure_of(case_of("300 m")), tmp_path / name)
    assert not list(tmp_path.iterdir())


def test_a_missing_folder_and_a_folder_as_file_are_refused(
    case_of: Callable[[str], Case], tmp_path: Path
) -> None:
    figure = figure_of(case_of("300 m"))
    with pytest.raises(InputError, match="does not exist"):
        save_figure(figure, tmp_path / "none" / "a.png")
    (tmp_path / "a.png").mkdir()
    with pytest.raises(InputError, match="is a folder"):
        save_figure(figure, tmp_path / "a.png")


def test_a_write_that_fails_leaves_the_old_file_and_nothing_beside(
    case_of: Callable[[str], Case], tmp_path: Path, monkeypatch: pytest.MonkeyPatch
) -> None:
    target = tmp_path / "a.svg"
    target.write_bytes(b"old")

    def full(_: Figure, out: Any, **__: Any) -> None:
        out.write(b"half")
        raise OSError(28, "No space left on device")

    monkeypatch.setattr(Figure, "savefig", full)
    with pytest.raises(InputError, match="No space left"):
        save_figure(figure_of(case_of("300 m")), target)
    assert target.read_bytes() == b"old"
    assert [p.name for p in tmp_path.iterdir()] == ["a.svg"]


def test_unknown_drawings_and_units_are_refused(case_of: Callable[[str], Case]) -> None:
    line = case_of("300 m").line
    with pytest.raises(InputError, match="curved-sea"):
        draw_figure(line, headline=HEADLINE, ground_map=None, draw="round")
    with pytest.raises(InputError, match="ft"):
        draw_figure(line, headline=HEADLINE, ground_map=None, show_in="yd")


def test_drawing_imports_no_pyplot() -> None:
    code = (
        "import sys, profiler.output.figure; print('matplotlib.pyplot' in sys.modules)"
    )
    done = subprocess.run(
        [sys.executable, "-c", code], capture_output=True, text=True, check=True
    )
    assert done.stdout.strip() == "False"


def test_both_ends_stand_inside_the_axes(case_of: Callable[[str], Case]) -> None:
    ax = axes_of(figure_of(case_of("main")), "profile")
    low, high = ax.get_xlim()
    length = case_of("main").line.path.length_m / 1000.0
    assert low == pytest.approx(-END_SHARE * length)
    assert high == pytest.approx((1.0 + END_SHARE) * length)


@pytest.mark.parametrize("lat_deg", [0.0, 48.0, -79.0, 88.0])
def test_the_maps_places_are_the_planes_own_within_a_tenth_of_a_cell(
    lat_deg: float,
) -> None:
    # at 179.9 degrees the map lies across the date line
    plane = plane_around(lat_deg, 179.9)
    cell = 2000.0
    east: FloatArray = (np.arange(150.0) - 74.5) * cell
    north: FloatArray = (89.5 - np.arange(180.0)) * cell
    lat, lon = _places(plane, east, north)
    grid_x, grid_y = np.meshgrid(east, north)
    exact_lat, exact_lon = (
        v.reshape(grid_x.shape) for v in plane.to_wgs84(grid_x.ravel(), grid_y.ravel())
    )
    turn = (exact_lon - lon + 180.0) % 360.0 - 180.0
    # 111.7 km is the longest degree of latitude on WGS84
    off = np.hypot(exact_lat - lat, turn * np.cos(np.radians(lat))) * 111.7e3
    assert off.max() < 0.1 * cell


def test_a_png_has_no_alpha_and_states_its_pixels_an_inch(
    case_of: Callable[[str], Case], tmp_path: Path
) -> None:
    figure = figure_of(case_of("main"))
    save_figure(figure, tmp_path / "a.png", dpi=77.0)
    with Image.open(tmp_path / "a.png") as image:
        assert image.mode == "RGB"
        assert image.info["dpi"] == pytest.approx((77.0, 77.0), abs=0.02)
    assert figure.dpi == page.PNG_DPI


def test_a_png_holds_the_pixels_it_was_given() -> None:
    rng = np.random.default_rng(1)
    pixels = rng.integers(0, 256, (7, 13, 3), dtype=np.uint8)
    # read back by another program's decoder, which checks every checksum
    with Image.open(io.BytesIO(png_bytes(pixels, 100.0))) as image:
        assert np.array_equal(np.asarray(image), pixels)
        assert image.info["dpi"] == pytest.approx((100.0, 100.0), abs=0.02)
