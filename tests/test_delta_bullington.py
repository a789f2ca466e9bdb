"""Diffraction loss of a profile: Bullington's construction and the smooth earth."""

import math
from typing import Any, TypedDict

import numpy as np
import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from profiler.errors import InputError
from profiler.model import FloatArray
from profiler.radio import (
    DiffractionLoss,
    Polarization,
    bullington_loss,
    diffraction_loss,
    effective_heights_m,
    knife_edge_loss_db,
    nu_from_height,
    smooth_surface_m,
    spherical_loss_db,
    wavelength_m,
)

RADIUS_M = 8.5e6
#: The numbers worked out before used the printed practical constants of the sphere.
PRACTICAL_DB = 5e-3

Profile = tuple[FloatArray, FloatArray]


class Ends(TypedDict):
    """Both antennas and the frequency."""

    from_agl_m: float
    to_agl_m: float
    frequency_hz: float


@st.composite
def profiles(draw: st.DrawFn) -> Profile:
    steps = draw(st.lists(st.integers(30, 3000), min_size=2, max_size=40))
    size = len(steps) + 1
    heights = draw(
        st.lists(st.floats(-50.0, 900.0, width=32), min_size=size, max_size=size)
    )
    return np.cumsum([0.0, *steps]), np.array(heights)


def printed_bullington_db(
    dist_m: FloatArray, height_m: FloatArray, ends_m: tuple[float, float], wave_m: float
) -> float:
    """Section 4.5.1 as printed, in km and m, sample by sample."""
    h_ts, h_rs = ends_m
    d = float(dist_m[-1]) / 1e3
    c_e = 1.0 / (RADIUS_M / 1e3)
    inner = [(float(x) / 1e3, float(h)) for x, h in zip(dist_m, height_m, strict=True)][
        1:-1
    ]
    tops = [(x, h + 500.0 * c_e * x * (d - x)) for x, h in inner]
    s_tim = max((top - h_ts) / x for x, top in tops)
    if s_tim < (h_rs - h_ts) / d:
        nu = max(
            (top - (h_ts * (d - x) + h_rs * x) / d)
            * math.sqrt(0.002 * d / (wave_m * x * (d - x)))
            for x, top in tops
        )
    else:
        s_rim = max((top - h_rs) / (d - x) for x, top in tops)
        d_b = (h_rs - h_ts + s_rim * d) / (s_tim + s_rim)
        over = h_ts + s_tim * d_b - (h_ts * (d - d_b) + h_rs * d_b) / d
        nu = over * math.sqrt(0.002 * d / (wave_m * d_b * (d - d_b)))
    edge_db = 0.0
    if nu > -0.78:
        edge_db = 6.9 + 20.0 * math.log10(math.sqrt((nu - 0.1) ** 2 + 1.0) + nu - 0.1)
    return edge_db + (1.0 - math.exp(-edge_db / 6.0)) * (10.0 + 0.02 * d)


@settings(max_examples=150, deadline=None)
@given(profiles(), st.floats(1.0, 300.0), st.floats(1.0, 300.0))
def test_bullington_is_the_printed_one_in_km(
    profile: Profile, from_agl_m: float, to_agl_m: float
) -> None:
    dist_m, height_m = profile
    ends_m = float(height_m[0]) + from_agl_m, float(height_m[-1]) + to_agl_m
    ours = bullington_loss(
        dist_m,
        height_m,
        from_amsl_m=ends_m[0],
        to_amsl_m=ends_m[1],
        wavelength_m=0.3,
        effective_radius_m=RADIUS_M,
    )
    printed_db = printed_bullington_db(dist_m, height_m, ends_m, 0.3)
    assert ours.total_db == pytest.approx(printed_db, abs=1e-7)
    assert ours.total_db >= ours.edge_db >= 0.0
    assert ours.edge_db == knife_edge_loss_db(ours.nu)
    assert dist_m[1] <= ours.edge_m <= dist_m[-2]


@settings(max_examples=150, deadline=None)
@given(
    profiles(),
    st.floats(1.0, 300.0),
    st.floats(1.0, 300.0),
    st.sampled_from(["horizontal", "vertical"]),
    st.sampled_from([0.0, 0.3, 1.0]),
)
def test_looking_from_the_other_end_changes_nothing(
    profile: Profile,
    from_agl_m: float,
    to_agl_m: float,
    polarization: Polarization,
    sea_fraction: float,
) -> None:
    dist_m, height_m = profile
    there = diffraction_loss(
        dist_m,
        height_m,
        from_agl_m=from_agl_m,
        to_agl_m=to_agl_m,
        frequency_hz=1e9,
        sea_fraction=sea_fraction,
        polarization=polarization,
    )
    back = diffraction_loss(
        dist_m[-1] - dist_m[::-1],
        height_m[::-1],
        from_agl_m=to_agl_m,
        to_agl_m=from_agl_m,
        frequency_hz=1e9,
        sea_fraction=sea_fraction,
        polarization=polarization,
    )
    assert there.total_db == pytest.approx(back.total_db, abs=1e-6)
    swapped_m = back.effective_heights_m[::-1]
    assert there.effective_heights_m == pytest.approx(swapped_m, abs=1e-6)


@settings(max_examples=60, deadline=None)
@given(profiles(), st.floats(-400.0, 400.0))
def test_heights_count_from_any_level(profile: Profile, raised_m: float) -> None:
    dist_m, height_m = profile
    ends: Ends = {"from_agl_m": 20.0, "to_agl_m": 30.0, "frequency_hz": 4e8}
    low = diffraction_loss(dist_m, height_m, **ends)
    high = diffraction_loss(dist_m + 100.0, height_m + raised_m, **ends)
    assert high.total_db == pytest.approx(low.total_db, abs=1e-6)


@settings(max_examples=60, deadline=None)
@given(profiles(), st.floats(1.0, 200.0))
def test_the_parts_add_up_to_the_loss(profile: Profile, agl_m: float) -> None:
    dist_m, height_m = profile
    loss = diffraction_loss(
        dist_m, height_m, from_agl_m=agl_m, to_agl_m=agl_m, frequency_hz=1e9
    )
    more_db = max(loss.spherical_db - loss.smooth_bullington_db, 0.0)
    assert loss.total_db == loss.bullington_db + more_db
    assert loss.total_db >= 0.0
    assert min(loss.effective_heights_m) >= agl_m - 1e-9


def smooth(km: float, agl_m: float, frequency_hz: float) -> DiffractionLoss:
    dist_m = np.arange(0.0, km * 1e3 + 1.0, 50.0)
    return diffraction_loss(
        dist_m,
        np.full_like(dist_m, 120.0),
        from_agl_m=agl_m,
        to_agl_m=agl_m,
        frequency_hz=frequency_hz,
        speed_of_light_m_s=3e8,
    )


@pytest.mark.parametrize("km", [10.0, 40.0, 44.0, 60.0, 100.0])
def test_a_smooth_profile_is_the_sphere(km: float) -> None:
    loss = smooth(km, 30.0, 1e9)
    sphere_db = spherical_loss_db(
        km * 1e3,
        from_height_m=30.0,
        to_height_m=30.0,
        effective_radius_m=RADIUS_M,
        wavelength_m=0.3,
    )
    assert loss.total_db == pytest.approx(sphere_db, abs=1e-9)
    assert loss.bullington_db == pytest.approx(loss.smooth_bullington_db, abs=1e-9)
    assert loss.effective_heights_m == pytest.approx((30.0, 30.0), abs=1e-9)


def test_a_short_clear_path_loses_exactly_nothing() -> None:
    loss = smooth(5.0, 60.0, 6e9)
    assert loss.total_db == 0.0
    assert loss.spherical_db == 0.0


@pytest.mark.regression
def test_a_smooth_path_of_100_km_loses_what_was_worked_out_before() -> None:
    """DB1."""
    loss = smooth(100.0, 30.0, 1e9)
    assert loss.bullington_db == pytest.approx(32.971677, abs=1e-6)
    assert loss.smooth_bullington_db == pytest.approx(32.971677, abs=1e-6)
    assert loss.total_db == pytest.approx(65.176223, abs=PRACTICAL_DB)


@pytest.mark.regression
def test_a_spike_of_60_m_loses_what_was_worked_out_before() -> None:
    """DB2."""
    dist_m = np.arange(0.0, 50_001.0, 50.0)
    height_m = np.where(dist_m == 25e3, 60.0, 0.0)
    loss = diffraction_loss(
        dist_m,
        height_m,
        from_agl_m=20.0,
        to_agl_m=20.0,
        frequency_hz=2e9,
        speed_of_light_m_s=3e8,
    )
    assert loss.effective_heights_m == pytest.approx((39.94, 39.94), abs=1e-9)
    assert loss.bullington_db == pytest.approx(31.565597, abs=1e-6)
    assert loss.smooth_bullington_db == pytest.approx(11.474401, abs=1e-6)
    assert loss.spherical_db == pytest.approx(12.816305, abs=PRACTICAL_DB)
    assert loss.total_db == pytest.approx(32.907501, abs=PRACTICAL_DB)


def test_one_edge_between_two_valleys_is_that_knife_edge() -> None:
    dist_m = np.array([0.0, 3e3, 4e3, 5e3, 12e3])
    height_m = np.array([0.0, -500.0, 150.0, -500.0, 0.0])
    loss = bullington_loss(
        dist_m,
        height_m,
        from_amsl_m=20.0,
        to_amsl_m=50.0,
        wavelength_m=0.1,
        effective_radius_m=math.inf,
    )
    nu = nu_from_height(120.0, from_m=4e3, to_m=8e3, wavelength_m=0.1)
    assert loss.nu == pytest.approx(nu, rel=1e-12)
    assert loss.edge_m == pytest.approx(4e3, rel=1e-12)
    assert not loss.in_sight


def test_a_line_in_sight_is_judged_at_its_largest_nu() -> None:
    dist_m = np.array([0.0, 1e3, 5e3, 9e3, 10e3])
    height_m = np.array([0.0, -3.0, -5.0, -9.0, 0.0])
    loss = bullington_loss(
        dist_m,
        height_m,
        from_amsl_m=0.0,
        to_amsl_m=0.0,
        wavelength_m=0.1,
        effective_radius_m=math.inf,
    )
    assert loss.in_sight
    assert loss.edge_m == 5e3
    nu = nu_from_height(-5.0, from_m=5e3, to_m=5e3, wavelength_m=0.1)
    assert loss.nu == pytest.approx(nu, rel=1e-12)


def test_ground_that_touches_the_line_all_the_way_is_an_edge_at_grazing() -> None:
    dist_m = np.arange(0.0, 5001.0, 100.0)
    for slope in (0.0, 0.037, -0.01):
        loss = bullington_loss(
            dist_m,
            slope * dist_m,
            from_amsl_m=0.0,
            to_amsl_m=slope * 5000.0,
            wavelength_m=0.1,
            effective_radius_m=math.inf,
        )
        assert loss.edge_db == pytest.approx(knife_edge_loss_db(0.0), abs=1e-9)


def test_the_smooth_surface_is_the_best_straight_line() -> None:
    dist_m = np.array([0.0, 700.0, 1500.0, 4000.0, 5000.0])
    height_m = np.array([10.0, 80.0, 20.0, 60.0, 5.0])
    # least squares over the straight pieces, drawn out to a metre
    fine_m = np.arange(0.5, 5000.0)
    slope, start_m = np.polyfit(fine_m, np.interp(fine_m, dist_m, height_m), 1)
    ends_m = smooth_surface_m(dist_m, height_m)
    assert ends_m == pytest.approx((start_m, start_m + slope * 5000.0), abs=1e-3)
    tilted_m = smooth_surface_m(dist_m, 3.0 + 0.01 * dist_m)
    assert tilted_m == pytest.approx((3.0, 53.0), abs=1e-9)


def test_effective_heights_never_fall_below_the_heights_above_ground() -> None:
    dist_m = np.linspace(0.0, 20e3, 101)
    bowl_m = 1e-6 * (dist_m - 10e3) ** 2
    assert effective_heights_m(
        dist_m, bowl_m, from_amsl_m=110.0, to_amsl_m=130.0
    ) == pytest.approx((76.67, 96.67), abs=0.05)
    hill_m = 100.0 - bowl_m
    assert effective_heights_m(
        dist_m, hill_m, from_amsl_m=200.0, to_amsl_m=250.0
    ) == pytest.approx((200.0, 250.0), abs=1e-9)


def test_a_flat_earth_is_the_limit_of_a_large_radius() -> None:
    dist_m = np.linspace(0.0, 20e3, 201)
    height_m = 30.0 * np.sin(dist_m / 1500.0)
    ends: Ends = {"from_agl_m": 15.0, "to_agl_m": 25.0, "frequency_hz": 9e8}
    flat = diffraction_loss(dist_m, height_m, effective_radius_m=math.inf, **ends)
    large = diffraction_loss(dist_m, height_m, effective_radius_m=1e14, **ends)
    assert flat.total_db == pytest.approx(large.total_db, abs=1e-5)


def test_sea_costs_vertical_waves_less_than_land() -> None:
    dist_m = np.arange(0.0, 80_001.0, 100.0)
    ends: Ends = {"from_agl_m": 10.0, "to_agl_m": 10.0, "frequency_hz": 5e7}
    losses = [
        diffraction_loss(
            dist_m,
            np.zeros_like(dist_m),
            sea_fraction=sea,
            polarization="vertical",
            **ends,
        ).total_db
        for sea in (0.0, 0.5, 1.0)
    ]
    assert losses == sorted(losses, reverse=True)
    assert losses[0] - losses[2] > 5.0


def test_the_exact_speed_of_light_is_the_default() -> None:
    dist_m = np.arange(0.0, 60_001.0, 100.0)
    height_m = np.zeros_like(dist_m)
    ends: Ends = {"from_agl_m": 20.0, "to_agl_m": 20.0, "frequency_hz": 2e9}
    sphere_db = spherical_loss_db(
        60e3,
        from_height_m=20.0,
        to_height_m=20.0,
        effective_radius_m=RADIUS_M,
        wavelength_m=wavelength_m(2e9),
    )
    exact = diffraction_loss(dist_m, height_m, **ends)
    rounded = diffraction_loss(dist_m, height_m, speed_of_light_m_s=3e8, **ends)
    assert exact.spherical_db == sphere_db
    assert 0.001 < abs(rounded.total_db - exact.total_db) < 0.02


GOOD: Ends = {"from_agl_m": 20.0, "to_agl_m": 20.0, "frequency_hz": 2e9}


@pytest.mark.parametrize(
    ("bad", "sentence"),
    [
        ({"from_agl_m": -1.0}, "first antenna above ground"),
        ({"to_agl_m": math.inf}, "second antenna above ground"),
        ({"frequency_hz": 2.0}, "outside 10 MHz to 300 GHz"),
        ({"effective_radius_m": -1e7}, "In a duct, where it is negative"),
        ({"effective_radius_m": 0.0}, "must be above 0"),
        ({"sea_fraction": -0.1}, "share of the path over sea"),
        ({"sea_fraction": math.nan}, "share of the path over sea"),
        ({"polarization": "round"}, '"horizontal" or "vertical"'),
        ({"speed_of_light_m_s": 1.0}, "not the speed of light"),
    ],
)
def test_a_number_outside_its_range_is_refused(
    bad: dict[str, Any], sentence: str
) -> None:
    dist_m = np.array([0.0, 1e3, 2e3])
    with pytest.raises(InputError, match=sentence):
        diffraction_loss(dist_m, np.zeros(3), **{**GOOD, **bad})


@pytest.mark.parametrize(
    ("dist_m", "height_m", "sentence"),
    [
        ([0.0, 1e3], [0.0, 0.0], "none between its ends"),
        ([0.0, 1e3, 2e3], [0.0, 0.0], "one height for each distance"),
        ([[0.0, 1e3, 2e3]], [[0.0, 0.0, 0.0]], "one height for each distance"),
        ([0.0, 1e3, 1e3], [0.0, 0.0, 0.0], "increase along the path"),
        ([0.0, 2e3, 1e3], [0.0, 0.0, 0.0], "increase along the path"),
        ([0.0, 1e3, math.inf], [0.0, 0.0, 0.0], "increase along the path"),
        ([0.0, math.nan, 1e3], [0.0, 0.0, 0.0], "increase along the path"),
        (
            [0.0, 1e3, 2e3, 3e3],
            [0.0, math.nan, math.inf, 0.0],
            r"2 of 4 samples have no ground, the first at 1\.000 km",
        ),
    ],
)
def test_a_profile_that_is_none_is_refused(
    dist_m: list[float], height_m: list[float], sentence: str
) -> None:
    with pytest.raises(InputError, match=sentence):
        diffraction_loss(np.array(dist_m), np.array(height_m), **GOOD)


def test_antennas_without_a_height_are_refused() -> None:
    for name in ("from_amsl_m", "to_amsl_m"):
        ends = {"from_amsl_m": 1.0, "to_amsl_m": 1.0, name: math.nan}
        with pytest.raises(InputError, match="antenna must be a finite number"):
            bullington_loss(
                np.array([0.0, 1e3, 2e3]),
                np.zeros(3),
                wavelength_m=0.1,
                effective_radius_m=RADIUS_M,
                **ends,
            )
