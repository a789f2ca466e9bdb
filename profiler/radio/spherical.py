"""Smooth earth at any distance, in sight or beyond the horizon."""

import math
from dataclasses import dataclass

from profiler.errors import InputError
from profiler.radio.first_term import (
    LAND,
    SEA,
    Polarization,
    check_polarization,
    first_term_loss_db,
)
from profiler.radio.inputs import (
    check_above_zero,
    check_effective_radius,
    check_not_negative,
)
from profiler.radio.waves import check_wavelength

#: Share of F1 that is free of loss [1]; Rec. ITU-R P.526-16 (23).
FREE_SHARE = 0.552
#: Numbers in the place of the clearance [1]; Rec. ITU-R P.526-16 (22).
THREE, FOUR = 3.0, 4.0


@dataclass(frozen=True, slots=True, kw_only=True)
class SmoothClearance:
    """The place of a line in sight that counts over the smooth earth.

    The Recommendation calls its clearance the smallest. It is where a mirror would lie,
    seen from both ends under one angle, not where the line is lowest in metres.
    """

    from_m: float
    """Distance of the place from the first end."""
    to_m: float
    """Distance of the place from the second end."""
    clearance_m: float
    """Height of the line above the smooth earth there."""
    needed_m: float
    """Clearance from which on nothing is lost, 0.552·F1."""


def horizon_reach_m(
    *, from_height_m: float, to_height_m: float, effective_radius_m: float
) -> float:
    """Longest path over the smooth earth whose ends see each other.

    Parameters
    ----------
    from_height_m, to_height_m : float [m]
        Antennas above the smooth earth, 0 or more.
    effective_radius_m : float [m]
        Effective earth radius, > 0; inf for a flat earth.

    Returns
    -------
    float [m]
        d_los = sqrt(2a)·(sqrt(h1) + sqrt(h2)); inf on a flat earth.

    Raises
    ------
    InputError
        If a number is outside its range, or both antennas stand on a flat earth.

    References
    ----------
    Rec. ITU-R P.526-16 (11/2025) section 3.2 equation (21).
    """
    check_effective_radius(effective_radius_m)
    check_not_negative(from_height_m, "Height of the first antenna")
    check_not_negative(to_height_m, "Height of the second antenna")
    roots = math.sqrt(from_height_m) + math.sqrt(to_height_m)
    if math.isinf(effective_radius_m) and roots == 0.0:
        msg = (
            "Both antennas lie on a flat, smooth earth: the line touches it all the "
            "way. Give at least one a height, or the earth a radius."
        )
        raise InputError(msg)
    return math.sqrt(2.0 * effective_radius_m) * roots


def smooth_clearance(
    dist_m: float,
    *,
    from_height_m: float,
    to_height_m: float,
    effective_radius_m: float,
    wavelength_m: float,
) -> SmoothClearance:
    """Clearance of a line in sight over the smooth earth, where it counts.

    Parameters
    ----------
    dist_m : float [m]
        Path length, > 0 and below :func:`horizon_reach_m`.
    from_height_m, to_height_m : float [m]
        Antennas above the smooth earth, 0 or more, not both 0.
    effective_radius_m : float [m]
        Effective earth radius, > 0. With inf, b of the Recommendation is c, its limit.
    wavelength_m : float [m]
        Wavelength, 1 mm to 30 m.

    Returns
    -------
    SmoothClearance
        The place, the clearance and what is needed there.

    Raises
    ------
    InputError
        If a number is outside its range.

    References
    ----------
    Rec. ITU-R P.526-16 (11/2025) section 3.2 equations (22), (22a) to (22e) and (23).
    """
    reach_m = horizon_reach_m(
        from_height_m=from_height_m,
        to_height_m=to_height_m,
        effective_radius_m=effective_radius_m,
    )
    check_wavelength(wavelength_m)
    if not 0.0 < dist_m < reach_m:
        msg = f"A path of {dist_m:g} m is not in sight: 0 to {reach_m:g} m is."
        raise InputError(msg)
    total = from_height_m + to_height_m
    c = (from_height_m - to_height_m) / total
    m = dist_m * dist_m / (FOUR * effective_radius_m * total)
    b = c
    if m > 0.0:
        sine = THREE * c / 2.0 * math.sqrt(THREE * m / (m + 1.0) ** 3)
        # sin(asin(x)/3) is cos(π/3 + acos(x)/3), without its loss of digits at small m
        third = math.sin(math.asin(min(max(sine, -1.0), 1.0)) / THREE)
        b = 2.0 * math.sqrt((m + 1.0) / (THREE * m)) * third
    near = min(max(dist_m / 2.0 * (1.0 + b), 0.0), dist_m)
    far = dist_m - near
    over_near = from_height_m - near * near / (2.0 * effective_radius_m)
    over_far = to_height_m - far * far / (2.0 * effective_radius_m)
    return SmoothClearance(
        from_m=near,
        to_m=far,
        clearance_m=(over_near * far + over_far * near) / dist_m,
        needed_m=FREE_SHARE * math.sqrt(near * far * wavelength_m / dist_m),
    )


def spherical_loss_db(
    dist_m: float,
    *,
    from_height_m: float,
    to_height_m: float,
    effective_radius_m: float,
    wavelength_m: float,
    sea_fraction: float = 0.0,
    polarization: Polarization = "horizontal",
) -> float:
    """Diffraction loss over the smooth earth at any distance.

    Parameters
    ----------
    dist_m : float [m]
        Path length, > 0.
    from_height_m, to_height_m : float [m]
        Antennas above the smooth earth, 0 or more.
    effective_radius_m : float [m]
        Effective earth radius, > 0; inf is a flat earth, on which one antenna at least
        must stand above the ground.
    wavelength_m : float [m]
        Wavelength, 1 mm to 30 m.
    sea_fraction : float [1]
        Share of the path over sea, 0 to 1; the rest is land.
    polarization : "horizontal" or "vertical"
        Polarization of the wave.

    Returns
    -------
    float [dB]
        Loss relative to free space, exactly 0 where the line clears 0.552 F1. The first
        term runs below 0 for antennas on the sea a few wavelengths apart; the
        Recommendation does not say what to do beyond the horizon, here it is held at 0.

    Raises
    ------
    InputError
        If a number is outside its range.

    References
    ----------
    Rec. ITU-R P.526-16 (11/2025) section 3.2 equations (21) to (25).
    """
    check_above_zero(dist_m, "Path length")
    check_wavelength(wavelength_m)
    check_sea_fraction(sea_fraction)
    check_polarization(polarization)
    heights = {"from_height_m": from_height_m, "to_height_m": to_height_m}
    reach_m = horizon_reach_m(**heights, effective_radius_m=effective_radius_m)
    share = 0.0
    radius_m = effective_radius_m
    if dist_m < reach_m:
        there = smooth_clearance(
            dist_m,
            **heights,
            effective_radius_m=effective_radius_m,
            wavelength_m=wavelength_m,
        )
        if there.clearance_m > there.needed_m:
            return 0.0
        # for an antenna on the ground the place is the end: no zone, no clearance
        if there.needed_m > 0.0:
            share = there.clearance_m / there.needed_m
        roots = math.sqrt(from_height_m) + math.sqrt(to_height_m)
        radius_m = (dist_m / roots) ** 2 / 2.0
    loss_db = mixed_first_term_loss_db(
        dist_m,
        **heights,
        radius_m=radius_m,
        wavelength_m=wavelength_m,
        sea_fraction=sea_fraction,
        polarization=polarization,
    )
    return (1.0 - share) * max(loss_db, 0.0)


def mixed_first_term_loss_db(
    dist_m: float,
    *,
    from_height_m: float,
    to_height_m: float,
    radius_m: float,
    wavelength_m: float,
    sea_fraction: float,
    polarization: Polarization,
) -> float:
    """First-term loss of a path partly over sea.

    Parameters
    ----------
    dist_m, from_height_m, to_height_m, radius_m, wavelength_m, polarization
        As for :func:`~profiler.radio.first_term.first_term_loss_db`.
    sea_fraction : float [1]
        Share ω of the path over sea, 0 to 1.

    Returns
    -------
    float [dB]
        ω·A_sea + (1 − ω)·A_land.

    Raises
    ------
    InputError
        If a number is outside its range.

    References
    ----------
    Rec. ITU-R P.452-18 (10/2023) section 4.2.2.1; Rec. ITU-R P.1812-8 (09/2025)
    section 4.3.3.
    """
    check_sea_fraction(sea_fraction)
    loss_db = 0.0
    for share, ground in ((sea_fraction, SEA), (1.0 - sea_fraction, LAND)):
        if share > 0.0:
            loss_db += share * first_term_loss_db(
                dist_m,
                from_height_m=from_height_m,
                to_height_m=to_height_m,
                radius_m=radius_m,
                wavelength_m=wavelength_m,
                ground=ground,
                polarization=polarization,
            )
    return loss_db


def check_sea_fraction(sea_fraction: float) -> None:
    """Refuse a share of the path that is not from 0 to 1."""
    if not 0.0 <= sea_fraction <= 1.0:
        msg = f"The share of the path over sea is from 0 to 1, not {sea_fraction:g}."
        raise InputError(msg)
