"""The measured bounds of docs/how-it-computes.md, measured again.

Run ``python -m docs.measure`` from the top of a checkout; each function returns the
lines that the page shows, and the page's doctests call the same functions.
"""

import sys
from collections.abc import Callable
from dataclasses import replace
from pathlib import Path
from typing import Any

import numpy as np
import rasterio
from pyproj import CRS

from profiler import Answer, Point, Station, look, open_terrain
from profiler.constants import MEAN_RADIUS_M
from profiler.earth import crs_from_user, euler_radius, geodesic_path, points_at
from profiler.kernels.circle import sight_height
from profiler.sight.ground import ground_of, quadratic
from profiler.terrain import sample_path
from profiler.terrain.pixel_path import fit_pixel_path
from tests.oracle_earth import WGS84, RasterGround, chord_margins

SAMPLE = Path(__file__).resolve().parents[1] / "sample_dem" / "upland.tif"
#: Differences below this are rounding and are written as this [m or cells].
ROUNDING = 1e-6
#: Box of the sample that holds ground everywhere along most paths [deg].
SAMPLE_BOX = ((48.20, 48.34), (-21.45, -21.10))
#: Seed of the random paths.
SEED = 11
#: How far below the needed height the question is asked again [m]; the place that
#: sets it may lie near the far end, where a tenth of it or less arrives.
LESS_M = 0.2

Array = np.ndarray[Any, Any]


def path_polynomials() -> str:
    """Degree, pieces and error of the path in pixel space, worst of 40 azimuths."""
    lines = ["grid               length   latitude  degree  pieces  error, cells"]
    for length_m in (10e3, 50e3, 100e3, 450e3):
        for lat in (0.0, 45.0, 60.0, 70.0):
            worst = _worst_path(_to_seconds, lat, -21.0, length_m)
            lines.append(_path_line("1 arc-second", length_m, lat, worst))
    to_grid = _to_grid_of(5.0)
    for length_m in (10e3, 50e3, 100e3):
        worst = _worst_path(to_grid, 60.0, -21.0, length_m)
        lines.append(_path_line("transverse M., 5 m", length_m, 60.0, worst))
    return "\n".join(lines)


def _path_line(
    grid: str, length_m: float, lat: float, worst: tuple[int, int, float]
) -> str:
    degree, pieces, miss = worst
    return (
        f"{grid:<18} {length_m / 1e3:>4.0f} km  {lat:>6.0f}°  {degree:>8}  {pieces:>6}"
        f"  {max(miss, ROUNDING):.1e}"
    )


def _to_seconds(lat: Array, lon: Array) -> tuple[Array, Array]:
    return lon * 3600.0, -lat * 3600.0


def _to_grid_of(cell_m: float) -> Callable[[Array, Array], tuple[Array, Array]]:
    crs = crs_from_user("EPSG:32627")

    def to_grid(lat: Array, lon: Array) -> tuple[Array, Array]:
        x, y = crs.to_crs(lat, lon)
        return x / cell_m, -y / cell_m

    return to_grid


def _worst_path(
    to_cells: Callable[[Array, Array], tuple[Array, Array]],
    lat: float,
    lon: float,
    length_m: float,
) -> tuple[int, int, float]:
    degree, pieces, miss = 0, 0, 0.0
    for azimuth in np.arange(0.0, 360.0, 9.0) + 1.0:
        lon1, lat1, _ = WGS84.fwd(lon, lat, azimuth, length_m)
        path = geodesic_path(
            Point(lat_deg=lat, lon_deg=lon), Point(lat_deg=lat1, lon_deg=lon1)
        )

        def to_posts(dist_m: Array, path: Any = path) -> tuple[Array, Array]:
            return to_cells(*points_at(path, dist_m))

        fitted = fit_pixel_path(to_posts, path.length_m)
        dist = np.linspace(0.0, path.length_m, 1001)
        for got, true in zip(fitted.at(dist), to_posts(dist), strict=True):
            miss = max(miss, float(np.max(np.abs(got - true))))
        degree = max(degree, *(len(c) - 1 for c in fitted.col))
        pieces = max(pieces, len(fitted.col))
    return degree, pieces, miss


def _sample_ground() -> RasterGround:
    """Posts of the sample for the tests' own, separate reading of the ground."""
    with rasterio.open(SAMPLE) as dataset:
        posts = dataset.read(1).astype(float)
        posts[posts == dataset.nodata] = np.nan
        crs = CRS.from_user_input(dataset.crs.to_wkt())
        return RasterGround(posts, tuple(dataset.transform)[:6], crs)


def _pairs(count: int, *, agl_m: float) -> list[tuple[Station, Station]]:
    random = np.random.default_rng(SEED)
    pairs: list[tuple[Station, Station]] = []
    while len(pairs) < count:
        lats = random.uniform(*SAMPLE_BOX[0], 2)
        lons = random.uniform(*SAMPLE_BOX[1], 2)
        ends = [
            Station(point=Point(lat_deg=float(a), lon_deg=float(o)), agl_m=agl_m)
            for a, o in zip(lats, lons, strict=True)
        ]
        pairs.append((ends[0], ends[1]))
    return pairs


def ground_between_posts() -> str:
    """Quadratic pieces against bilinear ground at the geodesic's own places."""
    terrain, oracle = open_terrain(SAMPLE), _sample_ground()
    random = np.random.default_rng(SEED)
    worst, places = 0.0, 0
    for eye, target in _pairs(40, agl_m=2.0):
        path = geodesic_path(eye.point, target.point)
        ground = ground_of(sample_path(terrain, path)).known
        u = random.random(int(ground.dist_m.shape[0]))
        dist = ground.dist_m[:, 0] + u * (ground.dist_m[:, 2] - ground.dist_m[:, 0])
        height = quadratic(ground.height_m).at(u)
        true = oracle.height(*points_at(path, dist))
        worst = max(worst, float(np.nanmax(np.abs(height - true))))
        places += dist.size
    return (
        f"{places} places between samples: within {max(worst, ROUNDING):.0e} m of "
        "bilinear ground"
    )


def half_cell_steps() -> str:
    """Lowest margin of samples every half cell, against the surface's own."""
    terrain, oracle = open_terrain(SAMPLE), _sample_ground()
    too_high = []
    for eye, target in _pairs(150, agl_m=10.0):
        answer = look(terrain, eye, target)
        exact = _lowest(answer)
        if exact is None:
            continue
        step = min(answer.profile.files[0].cell_m) / 2.0
        length = answer.path.length_m
        dist = np.linspace(0.0, length, int(length / step) + 2)[1:-1]
        ground = oracle.height(*points_at(answer.path, dist))
        line = sight_height(
            dist,
            length,
            answer.from_.amsl_m,
            answer.to.amsl_m,
            answer.earth.kappa_per_m,
        )
        too_high.append(float(np.nanmin(line - ground)) - exact)
    return (
        f"{len(too_high)} blocked paths: {np.median(too_high):.2f} m too high at the "
        f"median, {np.max(too_high):.2f} m at worst"
    )


def _lowest(answer: Answer) -> float | None:
    if not answer.blocked_stretches or answer.void is not None:
        return None
    return min(s.worst_margin_m for s in answer.blocked_stretches)


def finer_samples() -> str:
    """Lowest margin of 64 samples a piece, against the surface's own."""
    terrain = open_terrain(SAMPLE)
    lower = []
    u = np.linspace(0.0, 1.0, 65)
    for eye, target in _pairs(60, agl_m=10.0):
        answer = look(terrain, eye, target)
        exact = _lowest(answer)
        if exact is None:
            continue
        ground = ground_of(answer.profile).known
        fit = quadratic(ground.height_m)
        start, step = ground.dist_m[:, 0], ground.dist_m[:, 2] - ground.dist_m[:, 0]
        dist = (start[:, None] + u * step[:, None]).ravel()
        height = (fit.a[:, None] + u * (fit.b[:, None] + u * fit.c[:, None])).ravel()
        line = sight_height(
            dist,
            answer.path.length_m,
            answer.from_.amsl_m,
            answer.to.amsl_m,
            answer.earth.kappa_per_m,
        )
        lower.append(exact - float(np.min(line - height)))
    least = max(*lower, ROUNDING)
    return f"{len(lower)} blocked paths: finer samples at most {least:.0e} m lower"


def three_dimensions() -> str:
    """Margins over the circle against the straight chord in three dimensions."""
    lines = ["length   Euler's radius  mean sphere   (300 paths, worst, m)"]
    for length_m in (50e3, 100e3, 450e3):
        worst = _worst_of_radii(length_m)
        lines.append(f"{length_m / 1e3:>4.0f} km  {worst[0]:<14.2g}  {worst[1]:.2g}")
    return "\n".join(lines)


def _worst_of_radii(length_m: float) -> tuple[float, float]:
    random = np.random.default_rng(3)
    worst = [0.0, 0.0]
    for _ in range(300):
        lat, lon = random.uniform(-80, 80), random.uniform(-180, 180)
        lon1, lat1, _ = WGS84.fwd(lon, lat, random.uniform(0, 360), length_m)
        h0, h1 = random.uniform(0, 3000, 2)
        at = np.linspace(0.02, 0.98, 25) * length_m
        ground = random.uniform(0, 3000, at.size)
        exact = chord_margins((lat, lon, h0), (lat1, lon1, h1), at, ground)
        path = geodesic_path(
            Point(lat_deg=lat, lon_deg=lon), Point(lat_deg=lat1, lon_deg=lon1)
        )
        for k, radius in enumerate((path.radius_m, MEAN_RADIUS_M)):
            line = sight_height(at, path.length_m, h0, h1, 1.0 / radius)
            miss = float(np.max(np.abs(line - ground - exact)))
            worst[k] = max(worst[k], miss)
    return worst[0], worst[1]


def parabola() -> str:
    """The usual parabola against the circle, at ke 1, worst place of the path."""
    lines = ["length   both ends at 0 m   ends at 0 and 3000 m"]
    kappa = 1.0 / float(euler_radius(45.0, 45.0))
    for length_m in (10e3, 50e3, 100e3, 450e3):
        dist = np.linspace(0.0, length_m, 2001)
        misses = []
        for aim in (0.0, 3000.0):
            exact = sight_height(dist, length_m, 0.0, aim, kappa)
            rough = aim * dist / length_m - kappa * dist * (length_m - dist) / 2.0
            misses.append(float(np.max(np.abs(exact - rough))))
        lines.append(f"{length_m / 1e3:>4.0f} km  {misses[0]:<17.2g}  {misses[1]:.2g}")
    return "\n".join(lines)


def swapped_ends() -> str:
    """The same question asked from the other end."""
    terrain = open_terrain(SAMPLE)
    margin, place, same = 0.0, 0.0, 0
    pairs = _pairs(60, agl_m=10.0)
    for eye, target in pairs:
        one, other = look(terrain, eye, target), look(terrain, target, eye)
        same += one.verdict == other.verdict
        if one.decisive is None or other.decisive is None:
            continue
        margin = max(margin, abs(one.decisive.margin_m - other.decisive.margin_m))
        back = one.path.length_m - other.decisive.distance_m
        place = max(place, abs(one.decisive.distance_m - back))
    return (
        f"{same} of {len(pairs)} verdicts the same; margins within "
        f"{max(margin, ROUNDING):.0e} m, places within {max(place, ROUNDING):.0e} m"
    )


def needed_figures() -> str:
    """Blocked paths asked again with the height that was named, and 20 cm less."""
    terrain = open_terrain(SAMPLE)
    asked = clear = short = 0
    for eye, target in _pairs(60, agl_m=10.0):
        need = look(terrain, eye, target).needed.from_agl_m
        if need is None or need <= 10.0:
            continue
        asked += 1
        again = look(terrain, replace(eye, agl_m=need), target)
        less = look(terrain, replace(eye, agl_m=need - LESS_M), target)
        clear += again.verdict != "blocked"
        short += less.verdict == "blocked"
    return (
        f"{asked} blocked paths: {clear} open at the height named, {short} not "
        "20 cm below"
    )


MEASURES = (
    path_polynomials,
    ground_between_posts,
    half_cell_steps,
    finer_samples,
    three_dimensions,
    parabola,
    swapped_ends,
    needed_figures,
)


def main() -> None:
    """Measure everything and write it to the screen."""
    for measure in MEASURES:
        sys.stdout.write(f"# {measure.__name__}\n{measure()}\n\n")


if __name__ == "__main__":
    main()
