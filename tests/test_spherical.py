"""The smooth earth: first term and any distance."""

import math
from itertools import pairwise

import numpy as np
import pytest

from profiler.errors import InputError
from profiler.radio import (
    LAND,
    SEA,
    Polarization,
    beta_of,
    distance_term_db,
    first_term_loss_db,
    first_term_within_2_db,
    height_gain_db,
    horizon_reach_m,
    mixed_first_term_loss_db,
    normalized_height,
    normalized_length,
    smooth_clearance,
    spherical_loss_db,
    surface_admittance,
)

RADIUS_M = 8.5e6
#: The numbers worked out before used the printed practical constants 2.188, 9.575e-3
#: and 0.36, which move a loss by up to 4.8e-3 dB against consistent units.
PRACTICAL_DB = 5e-3
FLAT = math.inf


def loss_db(
    dist_m: float,
    from_m: float = 30.0,
    to_m: float = 30.0,
    radius_m: float = RADIUS_M,
    wave_m: float = 0.3,
    sea: float = 0.0,
    polarization: Polarization = "horizontal",
) -> float:
    return spherical_loss_db(
        dist_m,
        from_height_m=from_m,
        to_height_m=to_m,
        effective_radius_m=radius_m,
        wavelength_m=wave_m,
        sea_fraction=sea,
        polarization=polarization,
    )


@pytest.mark.regression
@pytest.mark.parametrize(
    ("polarization", "worked_out_db"),
    [
        pytest.param(
            "horizontal",
            (0.0, 13.81353, 16.99184, 18.62102, 30.41128, 65.17622),
            id="SE1",
        ),
        pytest.param(
            "vertical",
            (0.0, 13.81521, 16.99364, 18.62269, 30.41027, 65.16753),
            id="SE2",
        ),
    ],
)
def test_the_loss_over_land_is_as_worked_out_before(
    polarization: Polarization, worked_out_db: tuple[float, ...]
) -> None:
    ours_db = [
        loss_db(km * 1e3, polarization=polarization) for km in (20, 40, 44, 46, 60, 100)
    ]
    assert ours_db == pytest.approx(worked_out_db, abs=PRACTICAL_DB)
    assert ours_db[0] == 0.0


@pytest.mark.regression
def test_the_loss_over_sea_is_as_worked_out_before() -> None:
    """SE3: 100 MHz, 30 m and 30 m, 100 km."""
    assert loss_db(100e3, wave_m=3.0, sea=1.0) == pytest.approx(
        48.61398, abs=PRACTICAL_DB
    )
    vertical_db = loss_db(100e3, wave_m=3.0, sea=1.0, polarization="vertical")
    assert vertical_db == pytest.approx(48.52391, abs=PRACTICAL_DB)
    k = surface_admittance(
        SEA, radius_m=RADIUS_M, wavelength_m=3.0, polarization="vertical"
    )
    assert beta_of(k) == pytest.approx(0.964121, abs=1e-3)


def test_beta_falls_from_1_as_the_ground_matters_more() -> None:
    assert beta_of(0.0) == 1.0
    betas = [beta_of(k) for k in (0.0, 0.01, 0.1, 0.5, 1.0)]
    assert betas == sorted(betas, reverse=True)
    assert betas[-1] == pytest.approx((1.0 + 1.6 + 0.67) / (1.0 + 4.5 + 1.53))


def test_vertical_polarization_uses_beta_twice_in_the_gain() -> None:
    k = surface_admittance(
        SEA, radius_m=RADIUS_M, wavelength_m=3.0, polarization="vertical"
    )
    beta = beta_of(k)
    unit = {"radius_m": RADIUS_M, "wavelength_m": 3.0, "beta": beta}
    y = normalized_height(300.0, **unit)
    plain = normalized_height(300.0, radius_m=RADIUS_M, wavelength_m=3.0, beta=1.0)
    assert y == pytest.approx(beta * plain)
    gain_db = height_gain_db(y, admittance=k, beta=beta)
    assert gain_db == height_gain_db(beta * beta * plain, admittance=k, beta=1.0)
    term_db = first_term_loss_db(
        100e3,
        from_height_m=300.0,
        to_height_m=300.0,
        radius_m=RADIUS_M,
        wavelength_m=3.0,
        ground=SEA,
        polarization="vertical",
    )
    x = normalized_length(100e3, **unit)
    assert term_db == pytest.approx(-distance_term_db(x) - 2.0 * gain_db, abs=1e-9)


def test_both_terms_change_their_form_without_a_step() -> None:
    step_db = distance_term_db(1.6) - distance_term_db(1.6 - 1e-12)
    assert abs(step_db) < 0.02
    gains = [height_gain_db(y, admittance=1e-3, beta=1.0) for y in (2.0, 2.0 + 1e-12)]
    assert gains[1] - gains[0] == pytest.approx(0.0, abs=0.02)


def test_a_low_antenna_has_the_gain_of_its_ground() -> None:
    least_db = 2.0 + 20.0 * math.log10(0.01)
    assert height_gain_db(0.0, admittance=0.01, beta=1.0) == least_db
    assert height_gain_db(1e-4, admittance=0.01, beta=1.0) == least_db
    assert height_gain_db(2.5, admittance=10.0, beta=1.0) == pytest.approx(
        2.0 + 20.0 * math.log10(10.0)
    )


def test_the_loss_has_no_step_at_the_horizon() -> None:
    reach_m = horizon_reach_m(
        from_height_m=30.0, to_height_m=80.0, effective_radius_m=RADIUS_M
    )
    before_db = loss_db(reach_m - 1e-3, to_m=80.0)
    after_db = loss_db(reach_m, to_m=80.0)
    assert before_db == pytest.approx(after_db, abs=1e-5)


def test_the_loss_sets_in_from_0_without_a_step() -> None:
    losses = np.array([loss_db(float(d)) for d in np.arange(20e3, 46e3, 50.0)])
    assert losses[0] == 0.0
    assert np.all(np.diff(losses) >= 0.0)
    assert np.max(np.diff(losses)) < 0.1


def test_swapping_the_antennas_changes_nothing() -> None:
    for dist_m in (15e3, 35e3, 80e3):
        there_db = loss_db(dist_m, from_m=12.0, to_m=55.0)
        back_db = loss_db(dist_m, from_m=55.0, to_m=12.0)
        assert there_db == pytest.approx(back_db, abs=1e-9)


def test_a_higher_antenna_never_loses_more() -> None:
    losses = [loss_db(50e3, from_m=h) for h in (2.0, 10.0, 30.0, 80.0, 200.0, 500.0)]
    assert losses == sorted(losses, reverse=True)
    assert losses[-1] == 0.0


def test_the_clearance_is_taken_where_both_ends_see_a_mirror() -> None:
    for from_m, to_m, dist_m in ((20.0, 60.0, 30e3), (200.0, 5.0, 40e3)):
        place = smooth_clearance(
            dist_m,
            from_height_m=from_m,
            to_height_m=to_m,
            effective_radius_m=RADIUS_M,
            wavelength_m=0.3,
        )
        near_m, far_m = place.from_m, place.to_m
        assert near_m + far_m == dist_m
        from_slope = (from_m - near_m**2 / (2.0 * RADIUS_M)) / near_m
        to_slope = (to_m - far_m**2 / (2.0 * RADIUS_M)) / far_m
        assert from_slope == pytest.approx(to_slope, rel=1e-9)
        line_m = (from_m * far_m + to_m * near_m) / dist_m
        bulge_m = near_m * far_m / (2.0 * RADIUS_M)
        assert place.clearance_m == pytest.approx(line_m - bulge_m, abs=1e-9)
        zone_m = math.sqrt(0.3 * near_m * far_m / dist_m)
        assert place.needed_m == pytest.approx(0.552 * zone_m)


def test_a_flat_earth_is_the_limit_of_a_large_radius() -> None:
    flat_db = loss_db(10e3, wave_m=3.0, radius_m=FLAT)
    assert flat_db == pytest.approx(7.655, abs=0.001)
    assert loss_db(10e3, wave_m=3.0, radius_m=1e15) == pytest.approx(flat_db, abs=1e-6)
    assert loss_db(1e3, radius_m=FLAT) == 0.0


def test_an_antenna_on_the_ground_is_answered() -> None:
    on_ground_db = loss_db(10e3, from_m=0.0)
    barely_db = loss_db(10e3, from_m=1e-9)
    assert on_ground_db == pytest.approx(barely_db, abs=0.01)
    assert loss_db(10e3, from_m=0.0, radius_m=FLAT) > 0.0
    assert loss_db(10e3, from_m=0.0, to_m=0.0) > loss_db(10e3, from_m=0.0)


def test_sea_and_land_mix_by_their_share() -> None:
    land_db = loss_db(80e3, wave_m=3.0, polarization="vertical")
    sea_db = loss_db(80e3, wave_m=3.0, sea=1.0, polarization="vertical")
    mixed_db = loss_db(80e3, wave_m=3.0, sea=0.25, polarization="vertical")
    assert mixed_db == pytest.approx(0.25 * sea_db + 0.75 * land_db, abs=1e-12)
    assert sea_db != pytest.approx(land_db, abs=0.01)


def test_the_loss_is_held_at_0_where_the_first_term_turns_into_gain() -> None:
    near = {"from_height_m": 0.0, "to_height_m": 0.0, "wavelength_m": 29.9}
    term_db = mixed_first_term_loss_db(
        50.0, radius_m=RADIUS_M, sea_fraction=1.0, polarization="vertical", **near
    )
    assert term_db < 0.0
    ours_db = loss_db(
        50.0, from_m=0.0, to_m=0.0, wave_m=29.9, sea=1.0, polarization="vertical"
    )
    assert ours_db == 0.0


def test_the_first_term_is_good_to_2_db_only_well_beyond_the_horizon() -> None:
    def good(km: float, beta: float = 1.0) -> bool:
        unit = {"radius_m": RADIUS_M, "wavelength_m": 0.3, "beta": beta}
        y = normalized_height(30.0, **unit)
        return first_term_within_2_db(
            normalized_length(km * 1e3, **unit), y, y, beta=beta
        )

    answers = [good(km) for km in range(10, 200, 5)]
    assert not answers[0]
    assert answers[-1]
    assert sum(one != other for one, other in pairwise(answers)) == 1
    # equation (19) by hand at Y = 1, where log Y is 0
    delta = (1.0 + math.tanh(-0.255 / 0.3)) / 2.0
    limit = 1.096 + 2.0 * delta
    assert first_term_within_2_db(limit + 1e-9, 1.0, 1.0, beta=1.0)
    assert not first_term_within_2_db(limit - 1e-9, 1.0, 1.0, beta=1.0)
    far = (1.0 + math.tanh(0.255 / 0.25)) / 2.0
    mixed = delta + 1.779 * 0.1 * (far - delta)
    limit = 1.096 - 1.280 * 0.1 + 2.0 * mixed
    assert first_term_within_2_db(limit + 1e-9, 1 / 0.9, 1 / 0.9, beta=0.9)
    assert not first_term_within_2_db(limit - 1e-9, 1 / 0.9, 1 / 0.9, beta=0.9)


def test_ground_constants_name_their_source() -> None:
    assert (LAND.permittivity, LAND.conductivity_s_per_m) == (22.0, 0.003)
    assert (SEA.permittivity, SEA.conductivity_s_per_m) == (80.0, 5.0)
    assert "P.452-18" in LAND.source
    assert "P.1812-8" in SEA.source


@pytest.mark.parametrize("radius_m", [0.0, -8.5e6, -math.inf, math.nan])
def test_an_earth_without_a_positive_radius_is_refused(radius_m: float) -> None:
    with pytest.raises(InputError, match="must be above 0"):
        loss_db(10e3, radius_m=radius_m)


def test_what_has_no_meaning_is_refused() -> None:
    with pytest.raises(InputError, match="Path length"):
        loss_db(0.0)
    with pytest.raises(InputError, match="Height of the first antenna"):
        loss_db(1e3, from_m=-1.0)
    with pytest.raises(InputError, match="Height of the second antenna"):
        loss_db(1e3, to_m=math.nan)
    with pytest.raises(InputError, match="outside 1 mm to 30 m"):
        loss_db(1e3, wave_m=300.0)
    with pytest.raises(InputError, match="share of the path over sea"):
        loss_db(1e3, sea=1.5)
    with pytest.raises(InputError, match="flat, smooth earth"):
        loss_db(1e3, from_m=0.0, to_m=0.0, radius_m=FLAT)
    with pytest.raises(InputError, match="is not in sight"):
        smooth_clearance(
            100e3,
            from_height_m=1.0,
            to_height_m=1.0,
            effective_radius_m=RADIUS_M,
            wavelength_m=0.3,
        )


def test_an_admittance_above_1_is_refused() -> None:
    with pytest.raises(InputError, match="surface admittance is"):
        loss_db(100e3, radius_m=1e6, wave_m=29.9, sea=1.0, polarization="vertical")


def test_a_third_polarization_is_refused() -> None:
    with pytest.raises(InputError, match='not "slant"'):
        surface_admittance(
            LAND,
            radius_m=RADIUS_M,
            wavelength_m=0.3,
            polarization="slant",  # type: ignore[arg-type]
        )
