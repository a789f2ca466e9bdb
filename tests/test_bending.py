"""Bending: every form of it says the same thing."""

import math

import pytest

from profiler.constants import KR_LIGHT, MEAN_RADIUS_M
from profiler.earth import (
    bend,
    conversion_table,
    conversion_table_text,
    kappa_from_ke,
    kappa_from_kr,
    kappa_from_n_gradient,
    ke_from_dip_rule,
    ke_from_drop_rule,
    ke_from_gradient_rule,
    ke_from_horizon_rule,
    ke_from_kappa,
    ke_from_kr,
    kr_from_half_coefficient,
    kr_from_kappa,
    kr_from_ke,
    kr_from_weather,
    n_gradient_from_kappa,
)
from profiler.errors import InputError
from profiler.model import Air

RADIUS_M = 6_378_000.0
#: dN/dh that bends a ray exactly as the earth: −1e9·n0/R [N/km].
FLAT_N_PER_KM = -1e9 * 1.000315 / RADIUS_M


def test_nothing_stated_is_light_with_kr_0_13() -> None:
    bent = bend(Air(), RADIUS_M)
    assert bent.is_default
    assert bent.kr == KR_LIGHT
    assert bent.kappa_per_m == pytest.approx(0.87 / RADIUS_M, rel=1e-15)
    assert bent.ke == pytest.approx(1.0 / 0.87, rel=1e-15)
    assert bent.effective_radius_m == pytest.approx(RADIUS_M / 0.87, rel=1e-15)
    assert bent.radius_m == RADIUS_M


@pytest.mark.parametrize(
    ("air", "stated"),
    [
        (Air(), "kr 0.13"),
        (Air(kr=0.13), "kr 0.13"),
        (Air(kr=-0.25), "kr -0.25"),
        (Air(kr=0.0), "no refraction"),
        (Air(ke=4.0 / 3.0), "ke 4/3"),
        (Air(ke=4.0 / 3.0 + 1e-13), "ke 4/3"),
        (Air(ke=1.333), "ke 1.333"),
        (Air(ke=1.0), "ke 1"),
        (Air(n_gradient_per_km=-39.0), "dN/dh -39 N/km"),
        (Air(n_gradient_per_km=0.0), "dN/dh 0 N/km"),
    ],
)
def test_the_air_is_named_as_it_was_stated(air: Air, stated: str) -> None:
    bent = bend(air, RADIUS_M)
    assert bent.stated == stated
    assert bent.is_default == (air == Air())


def test_four_thirds_and_a_quarter_are_the_same_air() -> None:
    by_ke, by_kr = bend(Air(ke=4.0 / 3.0), RADIUS_M), bend(Air(kr=0.25), RADIUS_M)
    assert by_ke.kappa_per_m == pytest.approx(by_kr.kappa_per_m, rel=1e-15)
    assert by_ke.kr == pytest.approx(0.25, rel=1e-15)
    assert by_kr.ke == pytest.approx(4.0 / 3.0, rel=1e-15)


def test_a_stated_number_comes_back_to_the_last_bit() -> None:
    assert bend(Air(ke=0.6745), RADIUS_M).ke == 0.6745
    assert bend(Air(kr=0.1706), RADIUS_M).kr == 0.1706


@pytest.mark.parametrize(
    "air", [Air(kr=1.0), Air(ke=1e12), Air(n_gradient_per_km=FLAT_N_PER_KM)]
)
def test_a_ray_that_follows_the_earth_is_flat(air: Air) -> None:
    bent = bend(air, RADIUS_M)
    assert bent.kappa_per_m == 0.0
    assert bent.ke is None
    assert bent.effective_radius_m is None
    assert bent.kr == pytest.approx(1.0, abs=1e-11)


@pytest.mark.parametrize("air", [Air(kr=1.5), Air(n_gradient_per_km=-200.0)])
def test_a_duct_has_negative_curvature_and_negative_ke(air: Air) -> None:
    bent = bend(air, RADIUS_M)
    assert bent.kappa_per_m < 0.0
    assert bent.ke is not None
    assert bent.ke < 0.0
    assert bent.effective_radius_m is not None
    assert bent.effective_radius_m < 0.0
    assert bent.kr > 1.0


def test_a_gradient_acts_through_the_refractive_index_at_the_ground() -> None:
    bent = bend(Air(n_gradient_per_km=-39.0), RADIUS_M)
    assert bent.kappa_per_m == pytest.approx(
        1.0 / RADIUS_M - 39e-9 / 1.000315, rel=1e-15
    )
    assert bent.kr == pytest.approx(39e-9 / 1.000315 * RADIUS_M, rel=1e-13)


@pytest.mark.parametrize("kr", [-4.0, -0.5, 0.0, 0.13, 0.25, 0.99, 1.5, 16.0])
def test_every_conversion_has_its_inverse(kr: float) -> None:
    kappa = kappa_from_kr(kr, radius_m=RADIUS_M)
    assert kr_from_kappa(kappa, radius_m=RADIUS_M) == pytest.approx(kr, abs=1e-14)
    ke = ke_from_kappa(kappa, radius_m=RADIUS_M)
    assert ke is not None
    assert ke == pytest.approx(ke_from_kr(kr), rel=1e-13)
    assert kr_from_ke(ke) == pytest.approx(kr, abs=1e-13)
    assert kappa_from_ke(ke, radius_m=RADIUS_M) == pytest.approx(kappa, rel=1e-14)
    gradient = n_gradient_from_kappa(kappa, radius_m=RADIUS_M)
    again = kappa_from_n_gradient(gradient, radius_m=RADIUS_M)
    # a strong gradient less 1/R loses two digits
    assert again == pytest.approx(kappa, abs=1e-21)


def test_kr_one_has_no_ke() -> None:
    assert ke_from_kr(1.0) is None
    assert ke_from_kappa(0.0, radius_m=RADIUS_M) is None


def test_the_rule_of_157_differs_from_the_exact_ray_by_tenths_of_a_metre() -> None:
    exact = bend(Air(n_gradient_per_km=-39.0), MEAN_RADIUS_M).kappa_per_m
    rule = ke_from_gradient_rule(-39.0)
    assert rule is not None
    off_m = abs(1.0 / (rule * MEAN_RADIUS_M) - exact) * 100_000.0**2 / 2.0
    assert off_m < 0.3


@pytest.mark.parametrize("number", [math.nan, math.inf])
def test_numbers_that_are_not_finite_are_refused(number: float) -> None:
    with pytest.raises(InputError, match="finite"):
        kappa_from_kr(number, radius_m=RADIUS_M)
    with pytest.raises(InputError, match="finite"):
        ke_from_gradient_rule(number)
    with pytest.raises(InputError, match="finite"):
        kr_from_half_coefficient(number)
    with pytest.raises(InputError, match="finite"):
        kr_from_weather(1000.0, 280.0, lapse_k_per_m=number)


@pytest.mark.parametrize("radius_m", [0.0, -1.0, math.nan, math.inf])
def test_a_radius_that_is_none_is_refused(radius_m: float) -> None:
    with pytest.raises(InputError, match="radius"):
        bend(Air(), radius_m)


def test_ke_zero_is_refused() -> None:
    with pytest.raises(InputError, match="ke 0"):
        kr_from_ke(0.0)


@pytest.mark.parametrize(("hpa", "kelvin"), [(0.0, 280.0), (1000.0, -5.0)])
def test_weather_without_air_or_warmth_is_refused(hpa: float, kelvin: float) -> None:
    with pytest.raises(InputError, match="above 0"):
        kr_from_weather(hpa, kelvin, lapse_k_per_m=0.0)


def test_the_conversion_table_is_one_physics_in_many_constants() -> None:
    rows = conversion_table()
    assert [row.ke for row in rows] == sorted(row.ke for row in rows)
    for row in rows:
        assert row.kr == pytest.approx(1.0 - 1.0 / row.ke, abs=1e-15)
        horizon_km = math.sqrt(2.0 * row.ke * MEAN_RADIUS_M) / 1000.0
        assert row.horizon_km_per_sqrt_m == pytest.approx(horizon_km, rel=1e-14)
        assert row.source


def test_a_rules_own_number_comes_back_from_its_row() -> None:
    rows = {row.statement: row for row in conversion_table()}
    assert rows["3.9·√m in km"].horizon_km_per_sqrt_m == pytest.approx(3.9)
    assert rows["4.12·√m in km"].horizon_km_per_sqrt_m == pytest.approx(4.12)
    in_km = 1.17 * 1.852 / math.sqrt(0.3048)
    by_light_list = rows["1.17·√ft in nautical miles"].horizon_km_per_sqrt_m
    assert by_light_list == pytest.approx(in_km)
    assert rows["m = 0.07 (half of kr)"].kr == pytest.approx(0.14)
    assert rows["7/6 of the radius"].kr == pytest.approx(1.0 / 7.0)


def test_the_table_is_printed_one_row_a_line() -> None:
    lines = conversion_table_text().splitlines()
    assert len(lines) == 2 + len(conversion_table())
    assert {line.count("|") for line in lines} == {7}
    assert (
        "| ke 4/3 | radio | 1.333 | 0.250 | 4.122·√h "
        "| Rec. ITU-R P.530-19 section 2.2.2.1, seen |" in lines
    )


@pytest.mark.parametrize("number", [0.0, -1.0, math.nan])
def test_a_rule_without_a_positive_number_is_refused(number: float) -> None:
    with pytest.raises(InputError, match="above 0"):
        ke_from_horizon_rule(number, dist_unit_m=1.0, height_unit_m=1.0)
    with pytest.raises(InputError, match="above 0"):
        ke_from_drop_rule(number, drop_unit_m=1.0, dist_unit_m=1.0)
    with pytest.raises(InputError, match="above 0"):
        ke_from_dip_rule(number, height_unit_m=1.0)
