"""A profile seen as one knife edge: Bullington's construction."""

from dataclasses import dataclass

import numpy as np

from profiler.constants import M_PER_KM
from profiler.model import FloatArray
from profiler.radio.inputs import (
    check_effective_radius,
    check_finite,
    checked_profile,
)
from profiler.radio.knife_edge import knife_edge_loss_db
from profiler.radio.waves import check_wavelength

#: Edge loss over which the correction builds up [dB]; Rec. ITU-R P.526-16 (57).
BUILD_UP_DB = 6.0
#: Correction of a short path [dB] and its growth [dB/km]; Rec. ITU-R P.526-16 (57).
CORRECTION_DB, CORRECTION_DB_PER_KM = 10.0, 0.02


@dataclass(frozen=True, slots=True, kw_only=True)
class BullingtonLoss:
    """Loss by Bullington's construction, and the edge it stands on."""

    total_db: float
    """Loss relative to free space."""
    edge_db: float
    """Loss of the equivalent knife edge alone."""
    nu: float
    """Parameter ν of that edge."""
    edge_m: float
    """Distance of that edge from the first end."""
    in_sight: bool
    """Whether no sample reaches the line between the antennas."""


def bullington_loss(
    dist_m: FloatArray,
    height_m: FloatArray,
    *,
    from_amsl_m: float,
    to_amsl_m: float,
    wavelength_m: float,
    effective_radius_m: float,
) -> BullingtonLoss:
    """Loss over a profile by Bullington's construction.

    Parameters
    ----------
    dist_m : (n,) float64 [m]
        Distances along the path, increasing, n >= 3.
    height_m : (n,) float64 [m]
        Ground above sea level; the two end samples do not enter.
    from_amsl_m, to_amsl_m : float [m]
        Antennas above sea level.
    wavelength_m : float [m]
        Wavelength, 1 mm to 30 m.
    effective_radius_m : float [m]
        Effective earth radius, > 0; inf for a flat earth.

    Returns
    -------
    BullingtonLoss
        J(ν) + (1 − exp(−J/6))·(10 + 0.02·d), d in km; exactly 0 if J is.

    Raises
    ------
    InputError
        If the profile or a number is outside its range.

    References
    ----------
    Rec. ITU-R P.526-16 (11/2025) section 4.5.1 equations (49) to (57).
    """
    dist, height = checked_profile(dist_m, height_m)
    check_effective_radius(effective_radius_m)
    check_wavelength(wavelength_m)
    check_finite(from_amsl_m, "Height of the first antenna")
    check_finite(to_amsl_m, "Height of the second antenna")
    length = float(dist[-1])
    near = dist[1:-1]
    bulge = near * (length - near) / (2.0 * effective_radius_m)
    edge_m, nu, in_sight = _equivalent_edge(
        near, height[1:-1] + bulge, length, from_amsl_m, to_amsl_m, wavelength_m
    )
    edge_db = float(knife_edge_loss_db(nu))
    correction_db = CORRECTION_DB + CORRECTION_DB_PER_KM * length / M_PER_KM
    build_up = -float(np.expm1(-edge_db / BUILD_UP_DB))
    return BullingtonLoss(
        total_db=edge_db + build_up * correction_db,
        edge_db=edge_db,
        nu=nu,
        edge_m=edge_m,
        in_sight=in_sight,
    )


def _equivalent_edge(
    near: FloatArray,
    top: FloatArray,
    length: float,
    from_m: float,
    to_m: float,
    wave: float,
) -> tuple[float, float, bool]:
    """Distance and ν of the one edge, and whether the path is in sight.

    ``near`` and ``top`` are the inner samples, ``top`` with the earth's bulge.
    """
    far = length - near
    from_slopes = (top - from_m) / near
    from_slope = float(np.max(from_slopes))
    line_slope = (to_m - from_m) / length
    if from_slope < line_slope:
        over = top - (from_m * far + to_m * near) / length
        nus = over * np.sqrt(2.0 * length / (wave * near * far))
        at = int(np.argmax(nus))
        return float(near[at]), float(nus[at]), True
    to_slope = float(np.max((top - to_m) / far))
    edge = float(near[np.argmax(from_slopes)])
    if from_slope + to_slope > 0.0:
        edge = (to_m - from_m + to_slope * length) / (from_slope + to_slope)
    # at grazing both slopes cancel and rounding may put the crossing anywhere, while
    # ν is 0 wherever it is: hold it between the samples, where it always lies
    edge = min(max(edge, float(near[0])), float(near[-1]))
    over_edge = (from_slope - line_slope) * edge
    nu = over_edge * np.sqrt(2.0 * length / (wave * edge * (length - edge)))
    return edge, float(nu), False
