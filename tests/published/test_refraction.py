"""Coefficients of refraction and effective radii as printed."""

import pytest

from profiler.constants import KE_RADIO, TRAPPING_N_PER_KM
from profiler.earth import (
    ke_from_gradient_rule,
    kr_from_half_coefficient,
    kr_from_weather,
)

#: The radius these Recommendations use [m].
ITU_RADIUS_M = 6_371_000.0


@pytest.mark.published
def test_the_standard_atmosphere_has_kr_0_1706() -> None:
    """Hirt et al. 2010, JGR 115, D21102, equation 2; quoted in other public texts."""
    kr = kr_from_weather(1013.25, 288.15, lapse_k_per_m=-0.0065)
    assert kr == pytest.approx(0.1706, abs=1e-4)


@pytest.mark.parametrize(
    ("pressure_hpa", "temperature_k", "lapse_k_per_m", "kr"),
    [
        pytest.param(1013.25, 288.15, 0.0, 0.2105, id="isothermal"),
        pytest.param(1013.25, 288.15, -0.0343, 0.0, id="equal density at all heights"),
        pytest.param(1013.25, 288.15, -0.01, 0.1492, id="dry adiabatic"),
        pytest.param(1013.25, 288.15, 0.1, 0.8244, id="inversion"),
        pytest.param(850.0, 283.0, -0.0065, 0.1484, id="850 hPa"),
        pytest.param(700.0, 273.15, -0.0065, 0.1312, id="700 hPa"),
        pytest.param(1013.25, 288.15, -0.01312, 0.13, id="what 0.13 needs"),
    ],
)
def test_kr_follows_the_weather(
    pressure_hpa: float, temperature_k: float, lapse_k_per_m: float, kr: float
) -> None:
    """The same equation, worked out apart from this code; not printed anywhere."""
    ours = kr_from_weather(pressure_hpa, temperature_k, lapse_k_per_m=lapse_k_per_m)
    assert ours == pytest.approx(kr, abs=1e-4)


@pytest.mark.published
@pytest.mark.parametrize(
    ("n_gradient_per_km", "ke"),
    [
        (157.0, 0.5),
        (79.0, 0.6653),
        (0.0, 1.0),
        (-39.0, 1.3305),
        (-39.25, 4.0 / 3.0),
        (-40.0, 1.3419),
        (-79.0, 2.0128),
        (-100.0, 2.7544),
        (-200.0, -3.6512),
    ],
)
def test_the_rule_of_157_turns_a_gradient_into_ke(
    n_gradient_per_km: float, ke: float
) -> None:
    """Rec. ITU-R P.452-18 (5), P.1812-8 (6), P.2001-6 (11): equation seen.

    The rows were worked out from it by hand, apart from this code.
    """
    assert ke_from_gradient_rule(n_gradient_per_km) == pytest.approx(ke, abs=1e-4)


@pytest.mark.published
def test_ke_is_infinite_at_minus_157() -> None:
    """Rec. ITU-R P.2001-6, seen: infinite at −157 N/km; here None, for flat."""
    assert ke_from_gradient_rule(-157.0) is None


@pytest.mark.published
def test_157_is_a_million_over_the_earths_radius_in_kilometres() -> None:
    """Rec. ITU-R P.452-18, seen: 157 rounds 156.961."""
    assert pytest.approx(1e6 / 6371.0, rel=3e-4) == TRAPPING_N_PER_KM


@pytest.mark.published
def test_8500_km_is_four_thirds_of_the_radius_rounded() -> None:
    """Rec. ITU-R P.526-16, section 1, seen: 8500 km; exact 8494.667."""
    assert pytest.approx(8_500_000.0, rel=7e-4) == KE_RADIO * ITU_RADIUS_M


@pytest.mark.published
@pytest.mark.parametrize(
    ("half_kr", "kr"), [pytest.param(0.0750, 0.150, id="land"), (0.0809, 0.1618)]
)
def test_the_british_coefficient_is_half_of_kr(half_kr: float, kr: float) -> None:
    """Clarke, Principal Triangulation, pages 542-550; quoted with his definition."""
    assert kr_from_half_coefficient(half_kr) == pytest.approx(kr, abs=1e-12)
