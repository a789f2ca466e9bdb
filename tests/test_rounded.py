"""A single rounded obstacle."""

import numpy as np
import pytest

from profiler.errors import InputError
from profiler.model import FloatArray
from profiler.radio import (
    knife_edge_loss_db,
    radius_from_terrain_m,
    rounded_obstacle_loss,
    rounding_loss_db,
)


@pytest.mark.regression
@pytest.mark.parametrize(
    ("height_m", "from_m", "to_m", "radius_m", "wave_m", "total_db"),
    [
        pytest.param(30.0, 10e3, 15e3, 500.0, 0.1, 19.869636, id="RO1"),
        pytest.param(60.0, 5e3, 5e3, 5e3, 0.3, 35.513736, id="RO2"),
        pytest.param(200.0, 20e3, 20e3, 20e3, 1.0, 33.408542, id="RO3"),
    ],
)
def test_the_loss_is_as_worked_out_before(
    height_m: float,
    from_m: float,
    to_m: float,
    radius_m: float,
    wave_m: float,
    total_db: float,
) -> None:
    loss = rounded_obstacle_loss(
        height_m, from_m=from_m, to_m=to_m, radius_m=radius_m, wavelength_m=wave_m
    )
    assert loss.total_db == pytest.approx(total_db, abs=1e-6)
    assert loss.total_db == loss.knife_edge_db + loss.rounding_db
    assert loss.knife_edge_db == knife_edge_loss_db(loss.nu)


@pytest.mark.regression
def test_the_parts_are_as_worked_out_before() -> None:
    """RO1 with its symbols."""
    loss = rounded_obstacle_loss(
        30.0, from_m=10e3, to_m=15e3, radius_m=500.0, wavelength_m=0.1
    )
    parts = (loss.nu, loss.knife_edge_db, loss.m, loss.n, loss.rounding_db)
    expected = (1.732051, 17.895023, 0.003327, 37.632624, 1.974613)
    assert parts == pytest.approx(expected, abs=6e-7)


def test_a_radius_going_to_0_leaves_the_knife_edge() -> None:
    sides = {"from_m": 8e3, "to_m": 5e3, "wavelength_m": 0.2}
    edge = rounded_obstacle_loss(40.0, radius_m=0.0, **sides)
    assert edge.rounding_db == 0.0
    assert edge.total_db == knife_edge_loss_db(edge.nu)
    tiny = rounded_obstacle_loss(40.0, radius_m=1e-9, **sides)
    assert tiny.total_db == pytest.approx(edge.total_db, abs=1e-2)
    rounding = [
        rounded_obstacle_loss(40.0, radius_m=r, **sides).rounding_db
        for r in (1.0, 10.0, 100.0, 1000.0)
    ]
    assert rounding == sorted(rounding)
    assert rounding[0] > tiny.rounding_db > 0.0


def test_swapping_the_sides_changes_nothing() -> None:
    one = rounded_obstacle_loss(
        40.0, from_m=8e3, to_m=5e3, radius_m=300.0, wavelength_m=0.2
    )
    other = rounded_obstacle_loss(
        40.0, from_m=5e3, to_m=8e3, radius_m=300.0, wavelength_m=0.2
    )
    assert one.total_db == pytest.approx(other.total_db, abs=1e-12)


def test_the_branches_miss_each_other_by_0_041_db() -> None:
    below_db = rounding_loss_db(0.5, 8.0)
    above_db = rounding_loss_db(0.5, 8.0 + 1e-9)
    assert below_db - above_db == pytest.approx(0.041, abs=5e-4)
    assert below_db == pytest.approx(55.164, abs=5e-4)


def test_grazing_a_knife_edge_has_no_height() -> None:
    loss = rounded_obstacle_loss(
        0.0, from_m=1e3, to_m=1e3, radius_m=0.0, wavelength_m=0.1
    )
    assert (loss.m, loss.n, loss.nu) == (0.0, 0.0, 0.0)


def parabola(top_m: float, radius_m: float) -> tuple[FloatArray, FloatArray]:
    dist_m = np.arange(0.0, 2001.0, 50.0)
    return dist_m, 500.0 - (dist_m - top_m) ** 2 / (2.0 * radius_m)


def test_the_radius_of_a_parabola_is_found_again() -> None:
    dist_m, height_m = parabola(1000.0, 3000.0)
    for reach_m in (2.0, 20.0, 1e4):
        radius_m = radius_from_terrain_m(dist_m, height_m, fresnel_radius_m=reach_m)
        assert radius_m == pytest.approx(3000.0, rel=1e-12)


def test_a_top_between_two_samples_is_taken_in_their_middle() -> None:
    dist_m, height_m = parabola(1025.0, 3000.0)
    radius_m = radius_from_terrain_m(dist_m, height_m, fresnel_radius_m=20.0)
    drop_m = np.max(height_m) - height_m
    near = (drop_m > 0.0) & (drop_m <= 20.0)
    away_m = dist_m[near] - 1025.0
    assert radius_m == pytest.approx(np.mean(away_m**2 / (2.0 * drop_m[near])))


def test_a_second_hill_behind_a_dip_does_not_count() -> None:
    dist_m, height_m = parabola(500.0, 3000.0)
    height_m[-5:] = 495.0
    height_m[-10:-5] = 100.0
    radius_m = radius_from_terrain_m(dist_m, height_m, fresnel_radius_m=20.0)
    assert radius_m == pytest.approx(3000.0, rel=1e-12)
    mirrored_m = radius_from_terrain_m(
        dist_m, height_m[::-1].copy(), fresnel_radius_m=20.0
    )
    assert mirrored_m == pytest.approx(3000.0, rel=1e-12)


def test_a_top_with_nothing_near_it_has_no_radius() -> None:
    with pytest.raises(InputError, match="radius cannot be told"):
        radius_from_terrain_m(
            np.array([0.0, 50.0, 100.0]),
            np.array([0.0, 90.0, 0.0]),
            fresnel_radius_m=10.0,
        )


def test_what_has_no_meaning_is_refused() -> None:
    sides = {"from_m": 1e3, "to_m": 1e3, "wavelength_m": 0.1}
    with pytest.raises(InputError, match="Height of the vertex above the line"):
        rounded_obstacle_loss(-1.0, radius_m=10.0, **sides)
    with pytest.raises(InputError, match="Radius of the top"):
        rounded_obstacle_loss(1.0, radius_m=-10.0, **sides)
    with pytest.raises(InputError, match="symbol m"):
        rounding_loss_db(0.0, 1.0)
    with pytest.raises(InputError, match="symbol n"):
        rounding_loss_db(1.0, -1.0)
    with pytest.raises(InputError, match="first Fresnel radius"):
        radius_from_terrain_m(*parabola(1000.0, 3000.0), fresnel_radius_m=0.0)
