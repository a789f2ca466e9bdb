"""Rules of the trades: how each states the bending, turned into ke and kr."""

import math
from dataclasses import dataclass

from profiler.constants import (
    ARCMIN_PER_DEG,
    FOOT_M,
    KE_RADIO,
    KR_LIGHT,
    M_PER_KM,
    MEAN_RADIUS_M,
    MILE_M,
    NAUTICAL_MILE_M,
    TRAPPING_N_PER_KM,
)
from profiler.earth.bending import kr_from_ke
from profiler.errors import InputError

#: Factor of the weather formula [K²/hPa]; Hirt et al. 2010, equation 2, quoted.
WEATHER_FACTOR = 503.0
#: Gradient at which air has the same density at all heights [K/m]; same equation.
DENSITY_LAPSE_K_PER_M = 0.0343


def kr_from_half_coefficient(half_kr: float) -> float:
    """Coefficient of refraction kr for the British coefficient, which is half of it.

    Parameters
    ----------
    half_kr : float [1]
        Angle of refraction divided by the angle at the earth's centre, about 0.075;
        used in texts as (1 − 2·half)·d²/2R.

    Returns
    -------
    float [1]
        kr = 2·half.

    Raises
    ------
    InputError
        If the number is not finite.

    References
    ----------
    A. R. Clarke's definition in the Principal Triangulation, as quoted by others.
    """
    _check_finite(half_kr)
    return 2.0 * half_kr


def kr_from_weather(
    pressure_hpa: float, temperature_k: float, *, lapse_k_per_m: float
) -> float:
    """Coefficient of refraction of light for the weather along the ray.

    Parameters
    ----------
    pressure_hpa : float [hPa]
        Air pressure, > 0.
    temperature_k : float [K]
        Air temperature, > 0.
    lapse_k_per_m : float [K/m]
        Temperature gradient dT/dh, positive when it warms upwards; −0.0065 is the
        standard atmosphere's.

    Returns
    -------
    float [1]
        kr = 503·P/T²·(0.0343 + dT/dh).

    Raises
    ------
    InputError
        If pressure or temperature is not above 0, or a number is not finite.

    References
    ----------
    Hirt et al. 2010, Journal of Geophysical Research 115, D21102, equation 2, as
    quoted in other public texts; the original was not seen.
    """
    _check_finite(pressure_hpa, temperature_k, lapse_k_per_m)
    if pressure_hpa <= 0.0 or temperature_k <= 0.0:
        msg = (
            f"Pressure {pressure_hpa:g} hPa and temperature {temperature_k:g} K must "
            "both be above 0. Give hectopascals and kelvins."
        )
        raise InputError(msg)
    density = WEATHER_FACTOR * pressure_hpa / temperature_k**2
    return density * (DENSITY_LAPSE_K_PER_M + lapse_k_per_m)


def ke_from_gradient_rule(n_gradient_per_km: float) -> float | None:
    """Effective earth radius factor by the radio trade's rule of thumb.

    For the conversion table only. Answers use :func:`kappa_from_n_gradient`: the rule
    rounds 1e6/6371 to 157 and misses the exact ray by 0.2 to 0.3 m at 100 km.

    Parameters
    ----------
    n_gradient_per_km : float [N/km]
        Gradient dN/dh of refractivity; finite.

    Returns
    -------
    float [1] or None
        ke = 157/(157 + dN/dh); None at −157 (flat), negative below it (a duct).

    Raises
    ------
    InputError
        If the number is not finite.

    References
    ----------
    Rec. ITU-R P.452-18 equation (5), there with ΔN = −dN/dh.
    """
    _check_finite(n_gradient_per_km)
    total = TRAPPING_N_PER_KM + n_gradient_per_km
    return None if total == 0.0 else TRAPPING_N_PER_KM / total


@dataclass(frozen=True, slots=True, kw_only=True)
class TradeRule:
    """One statement of a trade and the bending it means."""

    statement: str
    """The rule as the trade writes it."""
    trade: str
    """Who writes it."""
    ke: float
    """Effective earth radius divided by the true radius [1]."""
    kr: float
    """Curvature of the ray divided by the earth's [1]."""
    horizon_km_per_sqrt_m: float
    """c in the horizon rule: distance in km = c·sqrt(height in m)."""
    source: str
    """Where the statement was read, or that it is from memory."""


def conversion_table() -> tuple[TradeRule, ...]:
    """Bending meant by the rules of many trades, each worked out from its own numbers.

    Returns
    -------
    tuple of TradeRule
        In order of rising ke; for a sphere of the mean radius 6 371.009 km.

    References
    ----------
    Each row names its own source.
    """
    rows = [_rule(*row) for row in _STATEMENTS]
    return tuple(sorted(rows, key=lambda row: row.ke))


def conversion_table_text() -> str:
    """Conversion table as a Markdown table.

    Returns
    -------
    str
        A heading, a rule and one line for each row, each ended by a line feed.
    """
    lines = [
        "| statement | trade | ke | kr | horizon, km for a height in m | source |",
        "|---|---|---|---|---|---|",
    ]
    lines += [
        f"| {row.statement} | {row.trade} | {row.ke:.3f} | {row.kr:.3f} "
        f"| {row.horizon_km_per_sqrt_m:.3f}·√h | {row.source} |"
        for row in conversion_table()
    ]
    return "".join(f"{line}\n" for line in lines)


def _rule(statement: str, trade: str, ke: float, source: str) -> TradeRule:
    """Row of the table from its ke."""
    horizon = math.sqrt(2.0 * ke * MEAN_RADIUS_M) / M_PER_KM
    return TradeRule(
        statement=statement,
        trade=trade,
        ke=ke,
        kr=kr_from_ke(ke),
        horizon_km_per_sqrt_m=horizon,
        source=source,
    )


def ke_from_horizon_rule(
    coefficient: float, *, dist_unit_m: float, height_unit_m: float
) -> float:
    """Effective earth radius factor that a horizon rule d = c·√h means.

    Parameters
    ----------
    coefficient : float [1]
        c, > 0.
    dist_unit_m, height_unit_m : float [m]
        Units in which the rule counts distance and height.

    Returns
    -------
    float [1]
        ke = d²/(2·R·h) on the mean sphere.

    Raises
    ------
    InputError
        If a number is not above 0 and finite.

    References
    ----------
    d = sqrt(2·ke·R·h), the horizon rule of a sphere.
    """
    _check_above_zero(coefficient, dist_unit_m, height_unit_m)
    dist_m = coefficient * dist_unit_m
    return dist_m**2 / (2.0 * MEAN_RADIUS_M * height_unit_m)


def ke_from_drop_rule(
    coefficient: float, *, drop_unit_m: float, dist_unit_m: float
) -> float:
    """Effective earth radius factor that a drop rule h = c·d² means.

    Parameters
    ----------
    coefficient : float [1]
        c, > 0; curvature and refraction together.
    drop_unit_m, dist_unit_m : float [m]
        Units in which the rule counts the drop and the distance.

    Returns
    -------
    float [1]
        ke = d²/(2·R·h) on the mean sphere.

    Raises
    ------
    InputError
        If a number is not above 0 and finite.

    References
    ----------
    h = d²/(2·ke·R), the surveyor's drop.
    """
    _check_above_zero(coefficient, drop_unit_m, dist_unit_m)
    drop_m = coefficient * drop_unit_m
    return dist_unit_m**2 / (2.0 * MEAN_RADIUS_M * drop_m)


def ke_from_dip_rule(coefficient_arcmin: float, *, height_unit_m: float) -> float:
    """Effective earth radius factor that a dip rule dip = c·√h means.

    Parameters
    ----------
    coefficient_arcmin : float [′]
        c, > 0; minutes of arc for a height of one unit.
    height_unit_m : float [m]
        Unit in which the rule counts height.

    Returns
    -------
    float [1]
        ke = 2·h/(R·dip²) on the mean sphere.

    Raises
    ------
    InputError
        If a number is not above 0 and finite.

    References
    ----------
    dip = sqrt(2·h/(ke·R)), the first term of acos(R_e/(R_e + h)).
    """
    _check_above_zero(coefficient_arcmin, height_unit_m)
    dip_rad = math.radians(coefficient_arcmin / ARCMIN_PER_DEG)
    return 2.0 * height_unit_m / (MEAN_RADIUS_M * dip_rad**2)


def _check_finite(*numbers: float) -> None:
    """Refuse numbers that are not finite."""
    for number in numbers:
        if not math.isfinite(number):
            msg = f"The bending needs finite numbers, not {number}."
            raise InputError(msg)


def _check_above_zero(*numbers: float) -> None:
    """Refuse numbers that are not finite and above 0."""
    for number in numbers:
        if not (math.isfinite(number) and number > 0.0):
            msg = f"A rule's numbers must be finite and above 0, not {number}."
            raise InputError(msg)


def _ke_of_kr(kr: float) -> float:
    """Turn kr < 1, as every rule of the table has it, into ke."""
    return 1.0 / (1.0 - kr)


_SEEN_QUOTED = "seen quoted, not in the original"
_MEMORY = "from memory"
_STATEMENTS: tuple[tuple[str, str, float, str], ...] = (
    ("ke 2/3", "radio, sub-refraction", 2.0 / 3.0, "common practice"),
    ("straight ray", "geometry", 1.0, "by definition"),
    (
        "2.03·√m in nautical miles",
        "marine lights",
        ke_from_horizon_rule(2.03, dist_unit_m=NAUTICAL_MILE_M, height_unit_m=1.0),
        _MEMORY,
    ),
    ("kr 0.13", "geodesy (Gauss)", _ke_of_kr(KR_LIGHT), _MEMORY),
    (
        "0.0676 m/km²",
        "military survey",
        ke_from_drop_rule(0.0676, drop_unit_m=1.0, dist_unit_m=M_PER_KM),
        "US Army engineer course EN0593, pages 2-85 and 2-90, seen",
    ),
    (
        "0.574 ft/mile²",
        "land survey",
        ke_from_drop_rule(0.574, drop_unit_m=FOOT_M, dist_unit_m=MILE_M),
        "Ghilani and Wolf, chapter 4, " + _SEEN_QUOTED,
    ),
    (
        "m = 0.07 (half of kr)",
        "land survey",
        _ke_of_kr(2.0 * 0.07),
        "Chandra, Surveying, section 6.3, seen",
    ),
    ("7/6 of the radius", "land survey", 7.0 / 6.0, _SEEN_QUOTED),
    (
        "0.075 (half of kr)",
        "landscape assessment",
        _ke_of_kr(2.0 * 0.075),
        _MEMORY,
    ),
    (
        "3.9·√m in km",
        "German-language horizon rule",
        ke_from_horizon_rule(3.9, dist_unit_m=M_PER_KM, height_unit_m=1.0),
        "a horizon note, seen",
    ),
    (
        "dip 0.97′·√ft",
        "navigation",
        ke_from_dip_rule(0.97, height_unit_m=FOOT_M),
        "Bowditch and the Nautical Almanac, " + _SEEN_QUOTED,
    ),
    (
        "1.17·√ft in nautical miles",
        "light lists",
        ke_from_horizon_rule(1.17, dist_unit_m=NAUTICAL_MILE_M, height_unit_m=FOOT_M),
        "IALA dictionary and light-list notes, seen",
    ),
    (
        "4.12·√m in km",
        "radio",
        ke_from_horizon_rule(4.12, dist_unit_m=M_PER_KM, height_unit_m=1.0),
        _SEEN_QUOTED,
    ),
    (
        "1.23·√ft in nautical miles",
        "radar and aviation",
        ke_from_horizon_rule(1.23, dist_unit_m=NAUTICAL_MILE_M, height_unit_m=FOOT_M),
        "US Federal Standard 1037C for the equation, " + _SEEN_QUOTED,
    ),
    (
        "ke 4/3",
        "radio",
        KE_RADIO,
        "Rec. ITU-R P.530-19 section 2.2.2.1, seen",
    ),
)
