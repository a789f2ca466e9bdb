"""Surfaces whose answers are closed forms, asked through real GeoTIFFs.

The closed forms were worked out for this project, not printed anywhere. Where a number
stands for a radius of 6371 km, the bending is chosen so that the path has exactly that
curvature. Heights stand on the file's own level.
"""

from pathlib import Path

import numpy as np
import pytest

from profiler.earth import geodesic_path
from profiler.model import Point, SightLine
from profiler.terrain import Terrain
from tests import terrain
from tests.looking import from_centre, opened, seen
from tests.terrain import CENTRE, place

#: Radius of the closed forms [m].
SPHERE_M = 6_371_000.0
#: Half the last digit with which the closed forms were written down [m].
HALF_MM = 0.0005
#: Distances on the centred plane are those of the geodesic but for rounding [m].
ROUNDING_M = 1e-5


def kr_on_sphere(azimuth_deg: float, distance_m: float, kr: float) -> float:
    """Refraction that bends the path's own radius to that of the closed forms."""
    end = place(azimuth_deg, distance_m)
    path = geodesic_path(
        Point(lat_deg=CENTRE[0], lon_deg=CENTRE[1]),
        Point(lat_deg=end[0], lon_deg=end[1]),
    )
    return 1.0 - (1.0 - kr) / SPHERE_M * path.radius_m


def sea(folder: Path, reach_m: float, cell_m: float = 100.0) -> Terrain:
    """A strip of level ground at height 0 to the east."""
    posts = np.zeros((5, int(reach_m / cell_m) + 5))
    corner = (cell_m, 0.0, -2.5 * cell_m, 0.0, -cell_m, 2.5 * cell_m)
    made = terrain.Terrain(posts, corner, terrain.CENTRED_CRS, {})
    return opened(folder, made)


# --- A1 plane ------------------------------------------------------------------------


@pytest.mark.parametrize(("east", "north"), [(0.0, 0.0), (0.3, 0.1), (-0.4, 0.2)])
@pytest.mark.parametrize("azimuth", [0.0, 33.0, 45.0, 90.0])
def test_all_of_a_plane_is_seen_under_its_slope(
    tmp_path: Path, east: float, north: float, azimuth: float
) -> None:
    ground = opened(tmp_path, terrain.plane(east, north, reach_m=3000.0))
    line = from_centre(ground, azimuth, 2900.0, eye=0.0)
    angle = np.radians(azimuth)
    slope = np.degrees(np.arctan(east * np.sin(angle) + north * np.cos(angle)))
    assert line.verdict == "clear"
    assert line.horizon is not None
    # heights carry 1e-13 m, the nearest angle is taken 5 mm from the eye
    assert line.horizon.elevation_deg == pytest.approx(slope, abs=1e-7)
    assert from_centre(ground, azimuth, 2900.0, eye=0.01).verdict == "clear"


# --- A2 smooth sphere ----------------------------------------------------------------


@pytest.mark.parametrize(
    ("eye_m", "dist_m", "kr", "hidden_m"),
    [
        (2.0, 19e3, 0.0, 15.277),
        (2.0, 19e3, 0.13, 12.606),
        (2.0, 19e3, 1.0 / 7.0, 12.346),
        (1.7, 20e3, 0.0, 18.482),
        (1.7, 20e3, 0.13, 15.383),
        (10.0, 50e3, 0.0, 117.614),
        (10.0, 50e3, 0.13, 98.066),
        (100.0, 100e3, 0.0, 324.534),
        (100.0, 100e3, 0.13, 260.189),
    ],
)
def test_the_sea_hides_the_foot_of_a_far_target(
    tmp_path: Path, eye_m: float, dist_m: float, kr: float, hidden_m: float
) -> None:
    """R (sec((d − d_h)/R) − 1) with d_h = R acos(R/(R + h)), R over 1 − kr."""
    line = from_centre(
        sea(tmp_path, dist_m),
        90.0,
        dist_m,
        eye=eye_m,
        top=500.0,
        kr=kr_on_sphere(90.0, dist_m, kr),
    )
    radius = SPHERE_M / (1.0 - kr)
    dip = np.arccos(radius / (radius + eye_m))
    exact = radius * (1.0 / np.cos(dist_m / radius - dip) - 1.0)
    assert line.target.hidden_m == pytest.approx(exact, abs=ROUNDING_M)
    assert line.target.hidden_m == pytest.approx(hidden_m, abs=HALF_MM)
    assert line.horizon is not None
    # the angle is flat about the horizon: 1 m there is 1e-13 of angle
    assert line.horizon.distance_m == pytest.approx(radius * dip, abs=1.0)


def two_masts(ground: Terrain, distance_m: float, mast_m: float) -> SightLine:
    return from_centre(ground, 90.0, distance_m, eye=mast_m, top=mast_m, ke=4.0 / 3.0)


def test_two_masts_of_20_m_see_each_other_over_36_9_km_of_sea(tmp_path: Path) -> None:
    ground = sea(tmp_path, 38e3)
    radius = two_masts(ground, 36.9e3, 20.0).earth.effective_radius_m
    assert radius is not None
    limit = 2.0 * radius * np.arccos(radius / (radius + 20.0))
    assert limit == pytest.approx(36.9e3, abs=100.0)
    # a metre more lowers the line's middle by kappa d/4 = 1.08 mm
    per_metre = limit / radius / 4.0
    at = two_masts(ground, limit, 20.0)
    assert at.margin_m == pytest.approx(0.0, abs=ROUNDING_M)
    assert (at.verdict, at.grazing) == ("clear", True)
    inside, beyond = (limit + s * 1.1e-3 / per_metre for s in (-1.0, 1.0))
    near, far = two_masts(ground, inside, 20.0), two_masts(ground, beyond, 20.0)
    assert (near.verdict, near.grazing) == ("clear", False)
    assert far.verdict == "blocked"
    assert far.margin_m == pytest.approx(-1.1e-3, rel=0.01)


@pytest.mark.parametrize(("eye", "top"), [(2.0, 30.0), (10.0, 10.0), (50.0, 0.5)])
def test_unequal_heights_see_each_other_up_to_the_sum_of_their_horizons(
    tmp_path: Path, eye: float, top: float
) -> None:
    ground = sea(tmp_path, 40e3)
    kr = kr_on_sphere(90.0, 25e3, 0.13)
    radius = SPHERE_M / 0.87
    limit = radius * sum(np.arccos(radius / (radius + h)) for h in (eye, top))
    for distance, verdict in ((limit - 20.0, "clear"), (limit + 20.0, "blocked")):
        line = from_centre(ground, 90.0, distance, eye=eye, top=top, kr=kr)
        assert line.verdict == verdict


# --- A3 thin ridge -------------------------------------------------------------------


@pytest.mark.parametrize(("kr", "lowest_m"), [(0.0, 213.700), (0.13, 211.659)])
def test_a_thin_ridge_hides_what_the_sphere_says(
    tmp_path: Path, kr: float, lowest_m: float
) -> None:
    """Eye 2 m, ridge 100 m at 10 km, target at 20 km, exact on the sphere."""
    made = terrain.ridge("column", height_m=100.0, cells_away=200, cell_m=50.0)
    ground = opened(tmp_path, made)
    air = kr_on_sphere(90.0, 20e3, kr)
    line = from_centre(ground, 90.0, 20e3, eye=2.0, top=300.0, kr=air)
    assert line.target.hidden_m == pytest.approx(lowest_m, abs=HALF_MM)
    need = from_centre(ground, 90.0, 20e3, eye=2.0, top=0.0, kr=air).needed
    assert need.to_agl_m == pytest.approx(lowest_m, abs=0.011)


@pytest.mark.parametrize("lies", ["row", "column", "diagonal"])
def test_a_ridge_blocks_alike_whichever_way_it_lies(tmp_path: Path, lies: str) -> None:
    made = terrain.ridge(lies)
    facts = made.facts
    line = from_centre(
        opened(tmp_path, made), facts["azimuth_deg"], facts["reach_m"], eye=10, top=10
    )
    assert line.margin_m == pytest.approx(-90.0, abs=ROUNDING_M)
    assert line.decisive is not None
    assert line.decisive.distance_m == pytest.approx(facts["crest_at_m"], abs=1e-3)
    (stretch,) = line.blocked_stretches
    # across the diagonal the ground falls as the square of the way to the next post
    half = 30 * (np.sqrt(2) * (1 - np.sqrt(0.1)) if lies == "diagonal" else 0.9)
    assert stretch.end_m - stretch.start_m == pytest.approx(2.0 * half, abs=1e-3)


# --- A4 cone -------------------------------------------------------------------------


def on_cone(away_m: float, r_m: float, turn_deg: float) -> tuple[float, float]:
    """A place r from the cone's axis, turned from the direction of the eye."""
    turn = np.radians(turn_deg)
    east, north = away_m - r_m * np.cos(turn), r_m * np.sin(turn)
    return place(
        float(np.degrees(np.arctan2(east, north))), float(np.hypot(east, north))
    )


@pytest.mark.parametrize("turn", [0.0, 45.0, 90.0, 180.0, 270.0])
def test_from_its_apex_all_of_a_cone_is_seen(tmp_path: Path, turn: float) -> None:
    made = terrain.cone(apex_m=100.0, away_m=600.0, cell_m=10.0, reach_m=1200.0)
    ground = opened(tmp_path, made)
    apex = place(90.0, 600.0)
    # between posts bilinear ground lies below the cone, at them upon it
    between_posts = 10.0 * (np.sqrt(2.0) if turn == 45.0 else 1.0)
    for count in (2, 5, 13):
        r = count * between_posts
        line = seen(ground, apex, on_cone(600.0, r, turn), eye=0.01, own_hill_m=0.0)
        assert line.verdict == "clear"


def test_from_outside_the_sector_between_the_tangent_generators_is_seen(
    tmp_path: Path,
) -> None:
    made = terrain.cone(apex_m=100.0, away_m=600.0, cell_m=5.0, reach_m=1200.0)
    ground = opened(tmp_path, made)
    foot = (100.0 - 10.0) / 0.5
    limit = np.degrees(np.arccos(foot / 600.0))
    # 5 m facets at 100 m from the axis turn by 3 degrees
    for turn, verdict in ((limit - 3.0, "clear"), (limit + 3.0, "blocked")):
        for side in (1.0, -1.0):
            spot = on_cone(600.0, 100.0, side * turn)
            line = seen(ground, CENTRE, spot, eye=10.0, own_hill_m=0.0)
            assert line.verdict == verdict


# --- A5 spherical cap ----------------------------------------------------------------


def test_a_round_cap_is_touched_where_its_tangent_says(tmp_path: Path) -> None:
    """Radius 500 m, top 80 m at 2 km, eye 5 m; posts 5 m apart sag by 6.3 mm."""
    sag = 5.0**2 / (8.0 * 500.0)
    ground = opened(tmp_path, terrain.cap())
    line = from_centre(ground, 90.0, 4000.0, eye=5.0, top=200.0)
    at = line.horizon
    assert at is not None
    assert at.elevation_deg == pytest.approx(
        2.157735, abs=float(np.degrees(sag / 1981.0))
    )
    # the tangent touches at the post nearest to 1981.175 m
    assert at.distance_m == pytest.approx(1981.175, abs=5.0)
    assert at.ground_m == pytest.approx(79.6455, abs=5.0 * np.tan(np.radians(2.16)))
    assert line.target.hidden_m == pytest.approx(155.7095, abs=sag * 4000.0 / 1981.0)
    crest = line.front_crest
    assert crest is not None
    assert crest.distance_m == at.distance_m


# --- A6 pillar -----------------------------------------------------------------------


def four_pillars() -> terrain.Terrain:
    """A raised post 600 m from the centre to each side."""
    east, north, transform = terrain.offsets(30.0, 1500.0, 1500.0, 1500.0)
    near = np.abs(np.hypot(east, north) - 600.0) < 1.0
    near &= (np.abs(east) < 1.0) | (np.abs(north) < 1.0)
    posts = np.where(near, 50.0, 0.0)
    return terrain.Terrain(posts, transform, terrain.CENTRED_CRS, {})


@pytest.mark.parametrize("side", [0.0, 90.0, 180.0, 270.0])
def test_a_pillar_hides_the_same_sector_to_every_side(
    tmp_path: Path, side: float
) -> None:
    ground = opened(tmp_path, four_pillars())
    # a bilinear pillar stands within one cell of its post and falls off evenly
    edge = float(np.degrees(np.arctan(30.0 / 570.0)))
    for share, margin in ((0.0, -45.0), (0.5, None), (1.01, 5.0), (-1.01, 5.0)):
        line = from_centre(ground, side + share * edge, 1200.0, eye=5.0, top=5.0)
        assert line.verdict == ("clear" if abs(share) > 1.0 else "blocked")
        if margin is not None:
            assert line.margin_m == pytest.approx(margin, abs=0.01)
    turned = from_centre(ground, side + 0.5 * edge, 1200.0, eye=5.0, top=5.0)
    first = from_centre(ground, 0.5 * edge, 1200.0, eye=5.0, top=5.0)
    assert turned.margin_m == pytest.approx(first.margin_m, abs=ROUNDING_M)


# --- A7 reciprocity, A8 exact drop ---------------------------------------------------


@pytest.mark.parametrize("seed", range(6))
def test_what_sees_is_seen(tmp_path: Path, seed: int) -> None:
    made = terrain.fractal(seed, shape=(100, 100), relief_m=300.0)
    ground = opened(tmp_path, made)
    random = np.random.default_rng(seed)
    a, b = (place(*random.uniform((0, 0), (360, 1400))) for _ in (0, 1))
    there = seen(ground, a, b, eye=3.0, top=30.0, kr=0.13)
    back = seen(ground, b, a, eye=30.0, top=3.0, kr=0.13)
    assert there.verdict == back.verdict
    assert there.margin_along_m == pytest.approx(back.margin_along_m[::-1], abs=1e-6)
    assert there.from_elevation_deg == pytest.approx(back.to_elevation_deg, abs=1e-9)


@pytest.mark.parametrize(
    ("dist_m", "parabola_m", "exact_m"),
    [
        (100e3, 784.806, 784.887),
        (300e3, 7063.26, 7069.79),
        (500e3, 19620.15, 19670.63),
    ],
)
def test_the_drop_below_a_level_ray_is_exact_not_the_parabola(
    tmp_path: Path, dist_m: float, parabola_m: float, exact_m: float
) -> None:
    """R (sec(d/R) − 1) from an eye on the sea, against d²/(2R)."""
    line = from_centre(
        sea(tmp_path, dist_m, cell_m=1000.0),
        90.0,
        dist_m,
        eye=0.0,
        top=25_000.0,
        kr=kr_on_sphere(90.0, dist_m, 0.0),
    )
    half = HALF_MM if dist_m < 200e3 else 0.005
    assert line.target.hidden_m == pytest.approx(exact_m, abs=half)
    assert dist_m**2 / (2.0 * SPHERE_M) == pytest.approx(parabola_m, abs=half)
