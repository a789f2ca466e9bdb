"""The elevation files that tests are made of say what they were asked to say."""

from pathlib import Path

import numpy as np
import pytest
import rasterio
from pyproj import CRS

from tests import terrain
from tests.oracle_earth import RasterGround
from tests.terrain import place


def test_a_written_file_reads_back_as_it_was_made(tmp_path: Path) -> None:
    made = terrain.one_void(land_m=41.5)
    path = terrain.write_geotiff(
        tmp_path / "a.tif",
        *made[:3],
        nodata=-9999,
        dtype="int16",
        scale=0.1,
        offset=10.0,
        unit="m",
        point_registration=True,
        tiled=True,
        blockxsize=16,
        blockysize=16,
    )
    with rasterio.open(path) as file:
        assert file.tags()["AREA_OR_POINT"] == "Point"
        assert (file.units, file.scales, file.offsets) == (("m",), (0.1,), (10.0,))
        assert tuple(file.transform)[:6] == pytest.approx(made.transform)
        stored = file.read(1, masked=True)
        assert np.array_equal(stored.mask, np.isnan(made.posts))
        heights = stored.compressed() * 0.1 + 10
        crs = CRS.from_wkt(file.crs.to_wkt())
    assert heights == pytest.approx(np.full(heights.size, 41.5))
    lat, lon = place(33.0, 300.0)
    read = RasterGround(made.posts, made.transform, crs)
    there, here = (
        read.pixel(lat, lon),
        RasterGround(*made[:2], CRS(made.crs)).pixel(lat, lon),
    )
    assert np.array(there) == pytest.approx(np.array(here), abs=1e-6)


def test_voids_cannot_be_lost_in_whole_numbers(tmp_path: Path) -> None:
    with pytest.raises(ValueError, match="voids in whole numbers need nodata"):
        terrain.write_geotiff(
            tmp_path / "a.tif", *terrain.one_void()[:3], dtype="int16"
        )


def test_the_bundled_sample_stands_the_right_way_up(tmp_path: Path) -> None:
    with rasterio.open(terrain.jacksboro(tmp_path)) as file:
        posts = file.read(1)
        bounds = file.bounds
    assert posts.shape == (344, 403)
    assert (posts.min(), posts.max()) == (236, 1076)
    assert bounds.top == pytest.approx(36.73291666666667)
    assert bounds.bottom == pytest.approx(36.44625)
    assert bounds.left == pytest.approx(-84.41375)
    assert bounds.right == pytest.approx(-84.07791666666667)
    # the first row of the archive is its northern edge
    assert posts[0, :4].tolist() == [483, 487, 491, 493]
