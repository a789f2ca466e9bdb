"""Smooth earth beyond the horizon: the first term of the residue series."""

import math
from dataclasses import dataclass
from typing import Final, Literal

from profiler.errors import InputError
from profiler.radio.inputs import check_above_zero, check_not_negative
from profiler.radio.waves import FIELD_DB, POWER_DB, check_wavelength

Polarization = Literal["horizontal", "vertical"]


@dataclass(frozen=True, slots=True, kw_only=True)
class GroundConstants:
    """What the ground is to a wave."""

    permittivity: float
    """Relative permittivity [1]."""
    conductivity_s_per_m: float
    """Conductivity [S/m]."""
    source: str
    """Where both numbers are printed."""


_SOURCE = "Rec. ITU-R P.452-18 section 4.2.2.1, P.1812-8 section 4.3.3"
#: Permittivity [1] and conductivity [S/m] of average land.
LAND: Final = GroundConstants(
    permittivity=22.0, conductivity_s_per_m=0.003, source=_SOURCE
)
#: Permittivity [1] and conductivity [S/m] of the sea.
SEA: Final = GroundConstants(
    permittivity=80.0, conductivity_s_per_m=5.0, source=_SOURCE
)

#: Imaginary part of the permittivity over λσ [ohm]; Rec. ITU-R P.526-16 (11), (12).
LOSS_OHM = 60.0
#: Exponent of lengths and heights [1]; (11), (14), (15).
ONE_THIRD = 1.0 / 3.0
#: Factors of K² and K⁴ above and below the stroke of β [1]; (16).
BETA_ABOVE, BETA_BELOW = (1.6, 0.67), (4.5, 1.53)
#: Admittance above which the first term has no meaning [1]; section 3.1.1.
LARGEST_K = 1.0
#: X at which the distance term changes its form [1]; (17).
X_BRANCH = 1.6
#: Constants of the distance term from there on [dB]; (17a).
FAR_DB, FAR_SLOPE_DB = 11.0, 17.6
#: Constant [dB] and exponent [1] of the distance term before it; (17b).
NEAR_SLOPE_DB, NEAR_EXPONENT = 5.6488, 1.425
#: Shift of B [1] and constants [dB] of the gain of a high antenna; (18).
HIGH_SHIFT, HIGH_ROOT_DB, HIGH_LOG_DB, HIGH_DB = 1.1, 17.6, 5.0, 8.0
#: Factor of B³ in the gain of a low antenna [1] and its exponent [1]; (18a).
LOW_CUBE, CUBE = 0.1, 3.0
#: Constants of the least X for 2 dB [1]; (19a).
LIMIT_X, LIMIT_BETA = 1.096, 1.280
#: Weight of 1 − β between both curves [1]; (19b).
MIX_BETA = 1.779
#: Offset and width of both tanh curves [1]; (19c), (19d).
CURVE_OFFSET, DELTA_0_WIDTH, DELTA_INF_WIDTH = 0.255, 0.3, 0.25


def surface_admittance(
    ground: GroundConstants,
    *,
    radius_m: float,
    wavelength_m: float,
    polarization: Polarization,
) -> float:
    """Normalized surface admittance of the ground.

    Parameters
    ----------
    ground : GroundConstants
        Permittivity and conductivity.
    radius_m : float [m]
        Effective earth radius, > 0.
    wavelength_m : float [m]
        Wavelength, 1 mm to 30 m.
    polarization : "horizontal" or "vertical"
        Polarization of the wave.

    Returns
    -------
    float [1]
        K_H = (2πa/λ)^(−1/3)·[(ε − 1)² + (60λσ)²]^(−1/4), or K_V = K_H·[ε² +
        (60λσ)²]^(1/2). Below 0.001 the ground does not matter.

    Raises
    ------
    InputError
        If a number is outside its range.

    References
    ----------
    Rec. ITU-R P.526-16 (11/2025) section 3.1.1 equations (11) and (12).
    """
    check_above_zero(radius_m, "Effective earth radius")
    check_wavelength(wavelength_m)
    check_polarization(polarization)
    loss = LOSS_OHM * wavelength_m * ground.conductivity_s_per_m
    size = 2.0 * math.pi * radius_m / wavelength_m
    across = math.hypot(ground.permittivity - 1.0, loss)
    horizontal = math.pow(size, -ONE_THIRD) / math.sqrt(across)
    if polarization == "horizontal":
        return horizontal
    return horizontal * math.hypot(ground.permittivity, loss)


def check_polarization(polarization: str) -> None:
    """Refuse a polarization that is neither horizontal nor vertical."""
    if polarization not in ("horizontal", "vertical"):
        msg = (
            f'Polarization is "horizontal" or "vertical", not "{polarization}". '
            "For a slanted one take whichever gives more loss."
        )
        raise InputError(msg)


def beta_of(admittance: float) -> float:
    """Factor β by which the ground shortens normalized lengths and heights.

    Parameters
    ----------
    admittance : float [1]
        Surface admittance K.

    Returns
    -------
    float [1]
        (1 + 1.6K² + 0.67K⁴)/(1 + 4.5K² + 1.53K⁴).

    References
    ----------
    Rec. ITU-R P.526-16 (11/2025) section 3.1.1 equation (16).
    """
    square = admittance * admittance
    above = 1.0 + BETA_ABOVE[0] * square + BETA_ABOVE[1] * square * square
    below = 1.0 + BETA_BELOW[0] * square + BETA_BELOW[1] * square * square
    return above / below


def normalized_length(
    dist_m: float, *, radius_m: float, wavelength_m: float, beta: float
) -> float:
    """Path length X in the natural unit of the smooth earth.

    Parameters
    ----------
    dist_m, radius_m, wavelength_m : float [m]
        Path length, effective earth radius and wavelength, > 0.
    beta : float [1]
        Factor β of the ground.

    Returns
    -------
    float [1]
        X = β·(π/(λa²))^(1/3)·d.

    References
    ----------
    Rec. ITU-R P.526-16 (11/2025) section 3.1.1 equation (14).
    """
    cube = math.pi / (wavelength_m * radius_m * radius_m)
    return beta * math.pow(cube, ONE_THIRD) * dist_m


def normalized_height(
    height_m: float, *, radius_m: float, wavelength_m: float, beta: float
) -> float:
    """Antenna height Y in the natural unit of the smooth earth.

    Parameters
    ----------
    height_m, radius_m, wavelength_m : float [m]
        Height above the smooth earth, effective earth radius and wavelength.
    beta : float [1]
        Factor β of the ground.

    Returns
    -------
    float [1]
        Y = 2β·(π²/(λ²a))^(1/3)·h.

    References
    ----------
    Rec. ITU-R P.526-16 (11/2025) section 3.1.1 equation (15).
    """
    cube = (math.pi / wavelength_m) ** 2 / radius_m
    return 2.0 * beta * math.pow(cube, ONE_THIRD) * height_m


def distance_term_db(x: float) -> float:
    """Part of the field that depends on the path length.

    Parameters
    ----------
    x : float [1]
        Normalized length X > 0.

    Returns
    -------
    float [dB]
        F(X) = 11 + 10·log10(X) − 17.6X from X = 1.6 on, −20·log10(X) − 5.6488·X^1.425
        before.

    References
    ----------
    Rec. ITU-R P.526-16 (11/2025) section 3.1.1 equations (17a) and (17b).
    """
    if x >= X_BRANCH:
        return FAR_DB + POWER_DB * math.log10(x) - FAR_SLOPE_DB * x
    return -FIELD_DB * math.log10(x) - NEAR_SLOPE_DB * math.pow(x, NEAR_EXPONENT)


def height_gain_db(y: float, *, admittance: float, beta: float) -> float:
    """Part of the field that depends on the height of one antenna.

    Parameters
    ----------
    y : float [1]
        Normalized height Y, 0 or more; it holds one β already, B = βY a second one.
    admittance : float [1]
        Surface admittance K.
    beta : float [1]
        Factor β of the ground.

    Returns
    -------
    float [dB]
        G = 17.6·sqrt(B − 1.1) − 5·log10(B − 1.1) − 8 for B > 2, else 20·log10(B +
        0.1·B³); never below 2 + 20·log10(K).

    References
    ----------
    Rec. ITU-R P.526-16 (11/2025) section 3.1.1 equations (18), (18a) and (18b).
    """
    b = beta * y
    least_db = 2.0 + FIELD_DB * math.log10(admittance)
    if b > 2.0:
        high = b - HIGH_SHIFT
        gain_db = HIGH_ROOT_DB * math.sqrt(high) - HIGH_LOG_DB * math.log10(high)
        return max(gain_db - HIGH_DB, least_db)
    if b > 0.0:
        gain_db = FIELD_DB * math.log10(b + LOW_CUBE * math.pow(b, CUBE))
        return max(gain_db, least_db)
    return least_db


def first_term_loss_db(
    dist_m: float,
    *,
    from_height_m: float,
    to_height_m: float,
    radius_m: float,
    wavelength_m: float,
    ground: GroundConstants = LAND,
    polarization: Polarization = "horizontal",
) -> float:
    """Loss over the smooth earth by the first term of the residue series.

    Parameters
    ----------
    dist_m : float [m]
        Path length, > 0.
    from_height_m, to_height_m : float [m]
        Antennas above the smooth earth, 0 or more.
    radius_m : float [m]
        Effective earth radius, finite and > 0.
    wavelength_m : float [m]
        Wavelength, 1 mm to 30 m.
    ground : GroundConstants
        Permittivity and conductivity.
    polarization : "horizontal" or "vertical"
        With horizontal polarization β is taken as 1, as the Recommendation allows and
        its published examples do; with vertical it is computed.

    Returns
    -------
    float [dB]
        A = −[F(X) + G(Y1) + G(Y2)]. Negative, and without meaning, well in sight of
        each other; :func:`first_term_within_2_db` tells.

    Raises
    ------
    InputError
        If a number is outside its range, or the surface admittance is above 1.

    References
    ----------
    Rec. ITU-R P.526-16 (11/2025) section 3.1.1 equation (13).
    """
    check_above_zero(dist_m, "Path length")
    check_not_negative(from_height_m, "Height of the first antenna")
    check_not_negative(to_height_m, "Height of the second antenna")
    k = surface_admittance(
        ground, radius_m=radius_m, wavelength_m=wavelength_m, polarization=polarization
    )
    if k > LARGEST_K:
        msg = (
            f"The ground's surface admittance is {k:.2f}; above 1 the smooth-earth "
            "method has no meaning. Take a higher frequency or horizontal polarization."
        )
        raise InputError(msg)
    beta = 1.0 if polarization == "horizontal" else beta_of(k)
    unit = {"radius_m": radius_m, "wavelength_m": wavelength_m, "beta": beta}
    loss_db = -distance_term_db(normalized_length(dist_m, **unit))
    for height_m in (from_height_m, to_height_m):
        y = normalized_height(height_m, **unit)
        loss_db -= height_gain_db(y, admittance=k, beta=beta)
    return loss_db


def first_term_within_2_db(
    x: float, y_from: float, y_to: float, *, beta: float
) -> bool:
    """Whether the first term alone is good to 2 dB.

    Parameters
    ----------
    x, y_from, y_to : float [1]
        Normalized length X and heights Y1, Y2, all above 0.
    beta : float [1]
        Factor β of the ground.

    Returns
    -------
    bool
        X − sqrt(βY1)·Δ(Y1) − sqrt(βY2)·Δ(Y2) > 1.096 − 1.280(1 − β).

    References
    ----------
    Rec. ITU-R P.526-16 (11/2025) section 3.1.1 equations (19) and (19a) to (19d).
    """
    reach = x
    for y in (y_from, y_to):
        half_log = math.log10(beta * y) / 2.0
        near = (1.0 + math.tanh((half_log - CURVE_OFFSET) / DELTA_0_WIDTH)) / 2.0
        far = (1.0 + math.tanh((half_log + CURVE_OFFSET) / DELTA_INF_WIDTH)) / 2.0
        delta = near + MIX_BETA * (1.0 - beta) * (far - near)
        reach -= math.sqrt(beta * y) * delta
    return reach > LIMIT_X - LIMIT_BETA * (1.0 - beta)
