"""Diffraction loss of any terrain profile: the delta-Bullington method."""

from dataclasses import dataclass

import numpy as np

from profiler.model import FloatArray
from profiler.radio.bullington import bullington_loss
from profiler.radio.first_term import Polarization
from profiler.radio.inputs import (
    check_effective_radius,
    check_not_negative,
    checked_profile,
)
from profiler.radio.spherical import spherical_loss_db
from profiler.radio.waves import SPEED_OF_LIGHT, wavelength_m

#: Effective earth radius if nothing else is known [m]; Rec. ITU-R P.526-16 section 1.
USUAL_RADIUS_M = 8_500_000.0


@dataclass(frozen=True, slots=True, kw_only=True)
class DiffractionLoss:
    """Diffraction loss of a profile, and what it is made of."""

    total_db: float
    """Loss relative to free space, never negative."""
    bullington_db: float
    """Loss of the real profile by Bullington's construction."""
    smooth_bullington_db: float
    """Loss of the smooth profile by the same construction."""
    spherical_db: float
    """Loss of the smooth earth; what it exceeds the one before is added."""
    effective_heights_m: tuple[float, float]
    """Antennas above the smooth surface, first end and second end."""


def diffraction_loss(
    dist_m: FloatArray,
    height_m: FloatArray,
    *,
    from_agl_m: float,
    to_agl_m: float,
    frequency_hz: float,
    effective_radius_m: float = USUAL_RADIUS_M,
    sea_fraction: float = 0.0,
    polarization: Polarization = "horizontal",
    speed_of_light_m_s: float = SPEED_OF_LIGHT,
) -> DiffractionLoss:
    """Diffraction loss of a terrain profile.

    Parameters
    ----------
    dist_m : (n,) float64 [m]
        Distances along the path, increasing, n >= 3; spacing may vary, but nothing is
        interpolated, so flat stretches and water need their samples too.
    height_m : (n,) float64 [m]
        Ground above sea level, the first and last under the antennas; cover may be
        added to all samples but these two.
    from_agl_m, to_agl_m : float [m]
        Antennas above the ground at the ends, 0 or more.
    frequency_hz : float [Hz]
        Frequency, 10 MHz to 300 GHz.
    effective_radius_m : float [m]
        Effective earth radius, > 0. inf is a flat earth, the limit of the equations; a
        negative radius (a duct) is refused, as the method has no meaning there.
    sea_fraction : float [1]
        Share of the path over sea, 0 to 1; the rest is land.
    polarization : "horizontal" or "vertical"
        Polarization of the wave.
    speed_of_light_m_s : float [m/s]
        Speed of light; the published examples use 3e8.

    Returns
    -------
    DiffractionLoss
        L = L_ba + max(L_sph − L_bs, 0), in SI units throughout.

    Raises
    ------
    InputError
        If the profile or a number is outside its range.

    References
    ----------
    Rec. ITU-R P.526-16 (11/2025) section 4.5.2 equations (58) to (66).
    """
    dist, height = checked_profile(dist_m, height_m)
    check_effective_radius(effective_radius_m)
    check_not_negative(from_agl_m, "Height of the first antenna above ground")
    check_not_negative(to_agl_m, "Height of the second antenna above ground")
    wave = wavelength_m(frequency_hz, speed_of_light_m_s=speed_of_light_m_s)
    ends = float(height[0]) + from_agl_m, float(height[-1]) + to_agl_m
    effective = effective_heights_m(
        dist, height, from_amsl_m=ends[0], to_amsl_m=ends[1]
    )
    air = {"wavelength_m": wave, "effective_radius_m": effective_radius_m}
    real = bullington_loss(dist, height, from_amsl_m=ends[0], to_amsl_m=ends[1], **air)
    smooth = bullington_loss(
        dist,
        np.zeros_like(height),
        from_amsl_m=effective[0],
        to_amsl_m=effective[1],
        **air,
    )
    spherical_db = spherical_loss_db(
        float(dist[-1]),
        from_height_m=effective[0],
        to_height_m=effective[1],
        sea_fraction=sea_fraction,
        polarization=polarization,
        **air,
    )
    return DiffractionLoss(
        total_db=real.total_db + max(spherical_db - smooth.total_db, 0.0),
        bullington_db=real.total_db,
        smooth_bullington_db=smooth.total_db,
        spherical_db=spherical_db,
        effective_heights_m=effective,
    )


def effective_heights_m(
    dist_m: FloatArray, height_m: FloatArray, *, from_amsl_m: float, to_amsl_m: float
) -> tuple[float, float]:
    """Heights of both antennas above the smooth surface of a profile.

    Parameters
    ----------
    dist_m : (n,) float64 [m]
        Distances along the path, increasing, n >= 3.
    height_m : (n,) float64 [m]
        Ground above sea level, the first and last under the antennas.
    from_amsl_m, to_amsl_m : float [m]
        Antennas above sea level, not below the ground at their ends.

    Returns
    -------
    tuple of two floats [m]
        h_ts − h_st and h_rs − h_sr; not less than the heights above ground.

    Raises
    ------
    InputError
        If the profile is outside its range.

    References
    ----------
    Rec. ITU-R P.526-16 (11/2025) section 4.5.2 equations (60) to (64).
    """
    dist, height = checked_profile(dist_m, height_m)
    from_surface, to_surface = smooth_surface_m(dist, height)
    length = float(dist[-1])
    near = dist[1:-1]
    far = length - near
    over = height[1:-1] - (from_amsl_m * far + to_amsl_m * near) / length
    highest = float(np.max(over))
    if highest > 0.0:
        from_steep, to_steep = float(np.max(over / near)), float(np.max(over / far))
        from_share = from_steep / (from_steep + to_steep)
        from_surface -= highest * from_share
        to_surface -= highest * (1.0 - from_share)
    return (
        from_amsl_m - min(from_surface, float(height[0])),
        to_amsl_m - min(to_surface, float(height[-1])),
    )


def smooth_surface_m(dist_m: FloatArray, height_m: FloatArray) -> tuple[float, float]:
    """Heights at both ends of the straight line that fits the profile best.

    Parameters
    ----------
    dist_m : (n,) float64 [m]
        Distances along the path, increasing, n >= 3.
    height_m : (n,) float64 [m]
        Ground above sea level.

    Returns
    -------
    tuple of two floats [m]
        h_st0 and h_sr0: the least-squares line through the piecewise straight ground.

    Raises
    ------
    InputError
        If the profile is outside its range.

    References
    ----------
    Rec. ITU-R P.526-16 (11/2025) section 4.5.2 equations (58), (59), (60a), (60b).
    """
    dist, height = checked_profile(dist_m, height_m)
    step = np.diff(dist)
    near, far = dist[:-1], dist[1:]
    left, right = height[:-1], height[1:]
    length = float(dist[-1])
    v1 = float(np.sum(step * (right + left)))
    v2 = float(np.sum(step * (right * (2.0 * far + near) + left * (far + 2.0 * near))))
    square = length * length
    return (2.0 * v1 * length - v2) / square, (v2 - v1 * length) / square
