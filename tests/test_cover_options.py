"""What the options on trees and buildings make of what is written after them."""

from pathlib import Path

import numpy as np
import pytest

from profiler.cli.cover_options import cover_from
from profiler.errors import InputError
from tests import terrain
from tests.terrain import CENTRED_CRS
from tests.test_cover_shapes import box, eastward, on_map


def test_no_option_is_no_cover() -> None:
    assert cover_from() is None


def test_a_canopy_grows_with_the_years() -> None:
    along = cover_from(canopy_m=15.0, growth_m=0.4, years=10)
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
        ({"canopy_m": 15.0, "growth_m": 0.4}, "--growth alone says nothing"),
        ({"canopy_m": 15.0, "years": 9.0}, "Add --growth 0.4m"),
        ({"growth_m": 0.4, "years": 9.0}, "needs trees to grow"),
        ({"canopy_m": 15.0, "growth_m": 15.0, "years": 9.0}, "within 0 to 5 m"),
        ({"canopy_m": 15.0, "growth_m": -0.1, "years": 9.0}, "within 0 to 5 m"),
        ({"canopy_m": 15.0, "growth_m": 0.4, "years": 2027.0}, "within 0 to 200"),
        ({"canopy_m": 15.0, "growth_m": 0.4, "years": float("nan")}, "0 to 200"),
        ({"canopy_m": -1.0}, "above 0"),
        ({"files": ["wood.gpkg"]}, "does not exist"),
        ({"files": ["wood.doc"]}, "does not exist"),
    ],
)
def test_what_cannot_be_is_refused(options: dict[str, float], part: str) -> None:
    with pytest.raises(InputError, match=part):
        cover_from(**options)  # type: ignore[arg-type]
