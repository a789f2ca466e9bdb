"""What the options on trees and buildings make of what is written after them."""

from pathlib import Path

import numpy as np
import pytest

from profiler.cli.cover_options import check_growth, cover_from
from profiler.cli.question import cover_in
from profiler.earth import geodesic_path
from profiler.errors import InputError
from profiler.model import Point
from tests import terrain
from tests.terrain import CENTRED_CRS
from tests.test_cover_shapes import box, eastward, on_map


def test_no_option_is_no_cover() -> None:
    assert cover_from() is None


def test_a_canopy_grows_with_the_years() -> None:
    along = cover_in(cover_from(canopy_m=15.0), growth_m=0.4, year=10)
    assert along is not None
    (span,) = along(eastward()).spans
    assert (span.name, span.height_m) == ("canopy", 19.0)


def test_files_of_outlines_and_of_cells_are_told_apart_by_their_endings(
    tmp_path: Path,
) -> None:
    wood = on_map(tmp_path / "wood.gpkg", [box(1000, -9, 1100, 9)], height_m=[9.0])
    cells = tmp_path / "heights.tif"
    corner = (30.0, 0.0, -315.0, 0.0, -30.0, 315.0)
    heights = np.full((21, 160), 4.0)
    terrain.write_geotiff(cells, heights, corner, CENTRED_CRS, unit="m")
    along = cover_from(files=[str(wood), str(cells)])
    assert along is not None
    found = along(eastward())
    names = sorted(span.name for span in found.spans)
    assert names == ["cover raster heights.tif", "polygon 1"]
    assert found.notes == ()


@pytest.mark.parametrize(
    ("options", "part"),
    [
        ({"canopy_m": -1.0}, "above 0"),
        ({"files": ["wood.gpkg"]}, "does not exist"),
        ({"files": ["wood.doc"]}, "does not exist"),
    ],
)
def test_what_cannot_be_is_refused(options: dict[str, float], part: str) -> None:
    with pytest.raises(InputError, match=part):
        cover_from(**options)  # type: ignore[arg-type]


@pytest.mark.parametrize(
    ("growth_m", "years", "part"),
    [
        (0.4, None, "--growth alone says nothing"),
        (None, 9.0, "Add --growth 0.4m"),
        (15.0, 9.0, "within 0 to 5 m"),
        (-0.1, 9.0, "within 0 to 5 m"),
        (0.4, 2027.0, "within 0 to 200"),
        (0.4, float("nan"), "0 to 200"),
    ],
)
def test_growth_that_cannot_be_is_refused(
    growth_m: float | None, years: float | None, part: str
) -> None:
    with pytest.raises(InputError, match=part):
        check_growth(growth_m, years, has_cover=True)


def test_growth_without_trees_is_refused() -> None:
    with pytest.raises(InputError, match="needs trees to grow"):
        check_growth(0.4, 9.0, has_cover=False)


def test_cover_that_misses_the_path_is_pointed_out(tmp_path: Path) -> None:
    wood = tmp_path / "wood.geojson"
    wood.write_text(
        '{"type": "FeatureCollection", "features": [{"type": "Feature", '
        '"properties": {"height_m": 15}, "geometry": {"type": "Polygon", '
        '"coordinates": [[[3, 3], [3.1, 3], [3.1, 3.1], [3, 3]]]}}]}'
    )
    cover = cover_from(files=[str(wood)])
    assert cover is not None
    start, end = Point(lat_deg=48.2, lon_deg=-21.5), Point(lat_deg=48.3, lon_deg=-21.2)
    found = cover(geodesic_path(start, end))
    assert found.spans == ()
    assert [note.code for note in found.notes] == ["cover-off-path"]
