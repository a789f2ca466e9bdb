"""A single rounded obstacle: what its radius adds to a knife edge."""

import math
from dataclasses import dataclass

import numpy as np

from profiler.errors import InputError
from profiler.model import FloatArray
from profiler.radio.inputs import (
    check_above_zero,
    check_not_negative,
    checked_profile,
)
from profiler.radio.knife_edge import knife_edge_loss_db, nu_from_height
from profiler.radio.waves import FIELD_DB

#: Product m·n at which the second branch of T begins [1]; Rec. ITU-R P.526-16 (34).
BRANCH_MN = 4.0
#: Factors of m^(1/2), m^(3/2) and m² in T [dB]; Rec. ITU-R P.526-16 (34a), (34b).
ROOT_DB, THREE_HALVES_DB, SQUARE_DB = 7.2, 3.6, 0.8
#: Factor of n·m in the first branch of T [dB]; Rec. ITU-R P.526-16 (34a).
LOW_MN_DB = 12.5
#: Factor of n·m in the second branch of T [dB]; Rec. ITU-R P.526-16 (34b).
HIGH_MN_DB = 17.0
#: Constant of the second branch of T [dB]; Rec. ITU-R P.526-16 (34b).
HIGH_BRANCH_DB = -6.0
#: Exponents of πR/λ in m and n, and of m in T [1]; Rec. ITU-R P.526-16 (34)-(36).
ONE_THIRD, TWO_THIRDS, THREE_HALVES = 1.0 / 3.0, 2.0 / 3.0, 1.5


@dataclass(frozen=True, slots=True, kw_only=True)
class RoundedLoss:
    """Loss over one rounded obstacle, and what it is made of."""

    total_db: float
    """Loss relative to free space, knife edge plus rounding."""
    knife_edge_db: float
    """J(ν): the same obstacle without thickness."""
    rounding_db: float
    """T(m, n): what the radius of the top adds."""
    nu: float
    """Parameter ν of the vertex."""
    m: float
    """Symbol m of the Recommendation: width of the top."""
    n: float
    """Symbol n of the Recommendation: height of the vertex."""


def rounded_obstacle_loss(
    height_m: float,
    *,
    from_m: float,
    to_m: float,
    radius_m: float,
    wavelength_m: float,
) -> RoundedLoss:
    """Loss over one rounded obstacle.

    Parameters
    ----------
    height_m : float [m]
        Height of the vertex, where the two tangent rays cross above the obstacle, over
        the line between the ends; 0 or more. Below the line there are no tangents to
        cross: a clear path is refused.
    from_m, to_m : float [m]
        Distances from the vertex to the two ends, > 0.
    radius_m : float [m]
        Radius of curvature of the top, 0 (a knife edge) or more.
    wavelength_m : float [m]
        Wavelength, 1 mm to 30 m.

    Returns
    -------
    RoundedLoss
        A = J(ν) + T(m, n), J by the approximation.

    Raises
    ------
    InputError
        If a number is outside its range.

    References
    ----------
    Rec. ITU-R P.526-16 (11/2025) section 4.2 equations (32) to (36).
    """
    check_not_negative(height_m, "Height of the vertex above the line")
    check_not_negative(radius_m, "Radius of the top")
    nu = float(
        nu_from_height(height_m, from_m=from_m, to_m=to_m, wavelength_m=wavelength_m)
    )
    edge_db = float(knife_edge_loss_db(nu))
    m, n = 0.0, math.inf if height_m > 0.0 else 0.0
    if radius_m > 0.0:
        size = math.pi * radius_m / wavelength_m
        m = radius_m * (from_m + to_m) / (from_m * to_m) / math.pow(size, ONE_THIRD)
        n = height_m / radius_m * math.pow(size, TWO_THIRDS)
    rounding_db = rounding_loss_db(m, n) if radius_m > 0.0 else 0.0
    return RoundedLoss(
        total_db=edge_db + rounding_db,
        knife_edge_db=edge_db,
        rounding_db=rounding_db,
        nu=nu,
        m=m,
        n=n,
    )


def rounding_loss_db(m: float, n: float) -> float:
    """What a rounded top adds to the loss over a knife edge.

    Parameters
    ----------
    m, n : float [1]
        Symbols m > 0 and n >= 0 of the Recommendation.

    Returns
    -------
    float [dB]
        T(m, n). The two branches miss each other by 0.04 dB at m·n = 4, m = 0.5.

    Raises
    ------
    InputError
        If m is not above 0 or n is negative.

    References
    ----------
    Rec. ITU-R P.526-16 (11/2025) section 4.2 equations (34a) and (34b).
    """
    check_above_zero(m, "The symbol m", "")
    check_not_negative(n, "The symbol n", "")
    shared = ROOT_DB * math.sqrt(m) + THREE_HALVES_DB * math.pow(m, THREE_HALVES)
    shared -= SQUARE_DB * m * m
    if m * n <= BRANCH_MN:
        return shared - (2.0 - LOW_MN_DB * n) * m
    high_db = HIGH_BRANCH_DB - FIELD_DB * math.log10(m * n)
    return high_db + shared - (2.0 - HIGH_MN_DB * n) * m


def radius_from_terrain_m(
    dist_m: FloatArray, height_m: FloatArray, *, fresnel_radius_m: float
) -> float:
    """Radius of curvature of a hilltop, from the ground on both sides of it.

    Parameters
    ----------
    dist_m : (n,) float64 [m]
        Distances of the samples of the hill, increasing, n >= 3.
    height_m : (n,) float64 [m]
        Ground of the hill; the highest sample is the top. Several equally high ones
        have their top in the middle, and tell nothing of the curvature themselves.
    fresnel_radius_m : float [m]
        First Fresnel radius at the top, > 0; the unbroken run of samples around the top
        that lie no deeper than this below it is used.

    Returns
    -------
    float [m]
        Mean of x²/(2y), x the distance from the top and y the drop below it.

    Raises
    ------
    InputError
        If the profile or the Fresnel radius is outside its range, or no sample beside
        the top is near enough to it.

    References
    ----------
    Rec. ITU-R P.526-16 (11/2025) section 4.2 equations (37) and (38).
    """
    check_above_zero(fresnel_radius_m, "The first Fresnel radius")
    dist, height = checked_profile(dist_m, height_m)
    drop = np.max(height) - height
    deep = drop > fresnel_radius_m
    top = int(np.argmin(drop))
    start = int(np.max(np.flatnonzero(deep[:top]), initial=-1)) + 1
    stop = top + int(np.argmax(deep[top:])) if np.any(deep[top:]) else dist.size
    dist, drop = dist[start:stop], drop[start:stop]
    away = dist - np.mean(dist[drop == 0.0])
    beside = drop > 0.0
    if not np.any(beside):
        msg = (
            f"No ground beside the top lies within {fresnel_radius_m:g} m below it, so "
            "its radius cannot be told. Give closer samples, or take 0, a knife edge."
        )
        raise InputError(msg)
    return float(np.mean(away[beside] ** 2 / (2.0 * drop[beside])))
