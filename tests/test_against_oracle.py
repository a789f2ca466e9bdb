"""The sight room against the oracle, which scans the same ground the slow way."""

from dataclasses import dataclass
from pathlib import Path
from typing import Any

import numpy as np
import pytest
import rasterio
from pyproj import CRS, Transformer

from profiler.model import SightLine, Verdict
from profiler.terrain import Terrain, open_terrain
from tests import terrain
from tests.looking import Pair, seen, twin
from tests.oracle_earth import RasterGround
from tests.oracles import OracleLook

#: The polynomial path may lie 0.0001 cell beside the geodesic: on the steepest slope
#: of these grounds that is 2 mm; the oracle looks every hundredth of a cell.
CLOSE_M = 0.003
PER_CELL = 100
#: The same in the angle at the eye, over the shortest distance to a horizon [deg].
CLOSE_DEG = 1e-4
#: Edges of a stretch, where the margin falls by one in a hundred or more [m].
EDGE_M = 100.0 * CLOSE_M
#: Narrower than so many of its steps the oracle may miss a stretch [1].
WIDE = 3.0
KR = 0.13
#: Heights in turn: bare points, eyes, masts [m].
EYES, TOPS = (1.7, 0.0, 15.0, 1.7), (0.0, 2.0, 40.0, 0.0, 120.0)
#: By how much a near-grazing top misses the line over the worst ground [m].
MISSES = (0.02, -0.02, 0.5, -0.5)


@dataclass(frozen=True)
class Ground:
    """One file as both sides read it."""

    ours: Terrain
    raster: RasterGround

    def somewhere(self, random: np.random.Generator) -> Pair:
        """A random place well inside."""
        rows, cols = self.raster.posts.shape
        a, b, c, d, e, f = tuple(self.raster.transform)[:6]
        col, row = random.uniform(2, cols - 2), random.uniform(2, rows - 2)
        back = Transformer.from_crs(self.raster.crs, "EPSG:4326", always_xy=True)
        lon, lat = back.transform(a * col + b * row + c, d * col + e * row + f)
        return float(lat), float(lon)


def ground_in(name: Path) -> Ground:
    with rasterio.open(name) as file:
        posts = file.read(1).astype(float)
        crs = CRS.from_wkt(file.crs.to_wkt())
        raster = RasterGround(posts, tuple(file.transform)[:6], crs)
    return Ground(open_terrain(name, dem_unit="m"), raster)


@pytest.fixture(scope="module")
def grounds(tmp_path_factory: pytest.TempPathFactory) -> dict[str, Ground]:
    folder = tmp_path_factory.mktemp("grounds")
    turn, cell = np.radians(23.0), 25.0
    cos, sin = cell * np.cos(turn), cell * np.sin(turn)
    corners = {
        "utm": (20.0, 0.0, 431_000.0, 0.0, -30.0, 5_213_000.0),
        "rotated": (cos, sin, 431_000.0, sin, -cos, 5_213_000.0),
    }
    files = {"jacksboro": terrain.jacksboro(folder)}
    for seed, (name, corner) in enumerate(corners.items()):
        made = terrain.fractal(
            40 + seed, shape=(160, 200), transform=corner, crs="EPSG:32632"
        )
        files[name] = terrain.write_geotiff(folder / f"{name}.tif", *made[:3])
    return {name: ground_in(file) for name, file in files.items()}


def compare(ours: SightLine, exact: OracleLook, *, bare: bool) -> None:
    """Everything both sides know; `bare` leaves out what is decided at an end."""
    assert ours.verdict == exact.verdict
    assert ours.path.length_m == pytest.approx(exact.length_m, abs=1e-6)
    assert ours.decisive is not None
    blocked = ours.verdict is Verdict.BLOCKED
    if blocked:
        # the polish of the oracle may stop on the wrong side of a kink: never lower
        assert ours.margin_m == pytest.approx(exact.lowest_margin_m, abs=CLOSE_M)
        assert ours.target.visible_m == 0.0
        ends = np.array([(s.start_m, s.end_m) for s in ours.blocked_stretches])
        worst = np.array([s.worst_margin_m for s in ours.blocked_stretches])
        other = np.array(exact.blocked_stretches).reshape(-1, 4)
        # the oracle passes over what is narrower than its scan
        kept, found = (
            np.ptp(v, axis=1) > WIDE * exact.at_m[1] for v in (ends, other[:, :2])
        )
        assert ends[kept] == pytest.approx(other[found, :2], abs=EDGE_M)
        assert worst[kept] == pytest.approx(other[found, 2], abs=CLOSE_M)
    elif not bare:
        assert ours.target.hidden_m == pytest.approx(exact.hidden_m, abs=CLOSE_M)
        at = ours.decisive.distance_m
        product = at * (exact.length_m - at)
        place, margin = exact.touches_first
        least = margin / (place * (exact.length_m - place))
        assert ours.decisive.margin_m == pytest.approx(exact.margin(at), abs=CLOSE_M)
        # within the millimetre of a tie, and never a place that touches later
        assert ours.decisive.margin_m - least * product < 0.001 + CLOSE_M
    assert ours.horizon is not None
    if not bare:
        angle = float(exact.horizon[1])
        assert ours.horizon.elevation_deg == pytest.approx(angle, abs=CLOSE_DEG)
        above = exact.above_crest_m
        assert (ours.target.above_crest_m is None) == (above is None)
        if above is not None:
            leverage = 10.0 * CLOSE_M
            assert ours.target.above_crest_m == pytest.approx(above, abs=leverage)


def ask(ground: Ground, number: int) -> None:
    random = np.random.default_rng(number)
    ends = ground.somewhere(random), ground.somewhere(random)
    eye, top = EYES[number % len(EYES)], TOPS[number % len(TOPS)]
    settings: dict[str, Any] = {"kr": KR, "points_per_cell": PER_CELL}
    if number % 3 == 0:
        # the least height that clears, and a little more or less
        rough = twin(ground.raster, *ends, from_agl=eye, to_agl=top, **settings)
        least = rough.least_to_agl_m()
        assert least is not None
        top = round(max(least + MISSES[number // 3 % len(MISSES)], 0.0), 3)
    exact = twin(ground.raster, *ends, from_agl=eye, to_agl=top, **settings)
    ours = seen(ground.ours, *ends, eye=eye, top=top, kr=KR, own_hill_m=0.0)
    compare(ours, exact, bare=min(eye, top) == 0.0)


@pytest.mark.parametrize("number", range(40))
def test_real_ground_gets_the_oracle_s_answer(
    grounds: dict[str, Ground], number: int
) -> None:
    ask(grounds["jacksboro"], number)


@pytest.mark.parametrize("number", range(20))
@pytest.mark.parametrize("name", ["utm", "rotated"])
def test_rough_ground_gets_the_oracle_s_answer(
    grounds: dict[str, Ground], name: str, number: int
) -> None:
    ask(grounds[name], number + 500)
