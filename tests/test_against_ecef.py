"""Margins against exact three-dimensional geometry on WGS84, straight rays."""

from pathlib import Path

import numpy as np
import pytest

from profiler.model import SightLine
from profiler.terrain import Terrain
from tests import terrain
from tests.looking import Pair, opened, seen
from tests.oracle_earth import WGS84, chord_margins

#: One radius of curvature for the whole path is off by up to 2 mm at 100 km and by
#: 0.18 m at 450 km (docs/how-it-computes.md); the design allows 1 cm at 100 km.
CLOSE_M = {30e3: 0.002, 100e3: 0.01, 300e3: 0.2}
#: Side of the ground in cells and its cell [deg].
SIDE, CELL_DEG = 260, 0.02


def rough(folder: Path, lat: float) -> Terrain:
    """Rough ground around a latitude at longitude 10, wider near the pole."""
    wide = CELL_DEG / np.cos(np.radians(lat))
    corner = (
        wide,
        0.0,
        10.0 - SIDE / 2 * wide,
        0.0,
        -CELL_DEG,
        lat + SIDE / 2 * CELL_DEG,
    )
    made = terrain.fractal(
        77, shape=(SIDE, SIDE), relief_m=2500.0, transform=corner, crs="EPSG:4326"
    )
    return opened(folder, made)


def error_m(ground: Terrain, start: Pair, end: Pair, eye: float, top: float) -> float:
    """Largest difference of the margins along a path."""
    line: SightLine = seen(ground, start, end, eye=eye, top=top, ke=1.0)
    first = *start, line.from_.amsl_m
    last = *end, line.to.amsl_m
    at = line.profile.dist_m
    inner = (at > 1.0) & (at < line.path.length_m - 1.0)
    exact = chord_margins(first, last, at[inner], line.profile.ground_m[inner])
    return float(np.max(np.abs(exact - line.margin_along_m[inner])))


@pytest.mark.parametrize("lat", [2.0, 46.0, -71.0])
@pytest.mark.parametrize("distance", list(CLOSE_M))
def test_margins_are_those_of_three_dimensional_geometry(
    tmp_path: Path, lat: float, distance: float
) -> None:
    ground = rough(tmp_path, lat)
    for azimuth in (10.0, 65.0, 90.0, 135.0):
        lon0, lat0, _ = WGS84.fwd(10.0, lat, azimuth + 180.0, distance / 2.0)
        lon1, lat1, _ = WGS84.fwd(10.0, lat, azimuth, distance / 2.0)
        found = error_m(ground, (lat0, lon0), (lat1, lon1), 20.0, 150.0)
        assert found < CLOSE_M[distance]
