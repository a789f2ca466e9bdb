"""Closed forms of the round earth that anyone can check by hand.

Every function takes the *effective* radius R_e = ke·R, so that the same formula serves
the straight ray (R_e = R), light and radio. A duct or a flat earth has no horizon and
is no case for this file.
"""

from typing import cast

import numpy as np

from profiler.constants import QUARTER_TURN_DEG
from profiler.earth.curvature import ScalarOrArray
from profiler.errors import InputError


def horizon_distance_m(height_m: ScalarOrArray, *, radius_m: float) -> ScalarOrArray:
    """Distance along the curved ground to the horizon of a smooth earth.

    Parameters
    ----------
    height_m : float or float64 array of any shape [m]
        Height of the eye above the ground, not negative.
    radius_m : float [m]
        Effective earth radius, > 0.

    Returns
    -------
    same shape [m]
        R_e·acos(R_e/(R_e + h)).

    Raises
    ------
    InputError
        If the radius is not above 0 or a height is negative.

    References
    ----------
    Right triangle at the tangent point.
    """
    return radius_m * _dip_rad(height_m, radius_m)


def horizon_distance_straight_m(
    height_m: ScalarOrArray, *, radius_m: float
) -> ScalarOrArray:
    """Length of the tangent from the eye to the horizon of a smooth earth.

    Parameters
    ----------
    height_m : float or float64 array of any shape [m]
        Height of the eye above the ground, not negative.
    radius_m : float [m]
        Effective earth radius, > 0.

    Returns
    -------
    same shape [m]
        sqrt(2·R_e·h + h²), a little more than the distance along the ground.

    Raises
    ------
    InputError
        If the radius is not above 0 or a height is negative.

    References
    ----------
    Right triangle at the tangent point.
    """
    _check(radius_m, height_m)
    return cast(ScalarOrArray, np.sqrt(height_m * (2.0 * radius_m + height_m)))


def horizon_dip_deg(height_m: ScalarOrArray, *, radius_m: float) -> ScalarOrArray:
    """Angle of the sea horizon below the horizontal.

    Parameters
    ----------
    height_m : float or float64 array of any shape [m]
        Height of the eye above the sea, not negative.
    radius_m : float [m]
        Effective earth radius, > 0.

    Returns
    -------
    same shape [deg]
        acos(R_e/(R_e + h)), positive.

    Raises
    ------
    InputError
        If the radius is not above 0 or a height is negative.

    References
    ----------
    Right triangle at the tangent point.
    """
    return cast(ScalarOrArray, np.degrees(_dip_rad(height_m, radius_m)))


def dip_short_of_horizon_deg(
    dist_m: ScalarOrArray, *, height_m: float, radius_m: float
) -> ScalarOrArray:
    """Angle of a point of the sea nearer than the horizon below the horizontal.

    Parameters
    ----------
    dist_m : float or float64 array of any shape [m]
        Distance of the point, > 0.
    height_m : float [m]
        Height of the eye above the sea, not negative.
    radius_m : float [m]
        Effective earth radius, > 0.

    Returns
    -------
    same shape [deg]
        atan(h/d + d/(2·R_e)), the parabola's form, as navigation tables use it.

    Raises
    ------
    InputError
        If the radius or a distance is not above 0, or the height is negative.

    References
    ----------
    Bowditch, table 14: constants seen, arrangement of the formula from memory.
    """
    _check(radius_m, dist_m, height_m)
    _check_above_zero(dist_m, "Distance")
    slope = height_m / dist_m + dist_m / (2.0 * radius_m)
    return cast(ScalarOrArray, np.degrees(np.arctan(slope)))


def distance_by_vertical_angle_m(
    rise_m: ScalarOrArray, *, elevation_deg: float, radius_m: float
) -> ScalarOrArray:
    """Distance of a top of known height, from the elevation angle it shows.

    Parameters
    ----------
    rise_m : float or float64 array of any shape [m]
        Height of the top above the eye, not negative.
    elevation_deg : float [deg]
        Elevation angle of the top above the horizontal, −90 < angle < 90.
    radius_m : float [m]
        Effective earth radius, > 0.

    Returns
    -------
    same shape [m]
        R_e·(sqrt(tan²α + 2·rise/R_e) − tan α), the parabola's form.

    Raises
    ------
    InputError
        If the radius is not above 0, the rise is negative or the angle is not
        between −90 and 90.

    References
    ----------
    Bowditch, table 15, as quoted in navigation texts; several printings misplace the
    root or a zero.
    """
    _check(radius_m, rise_m)
    if not abs(elevation_deg) < QUARTER_TURN_DEG:
        msg = f"Elevation angle {elevation_deg:g} is not between -90 and 90 degrees."
        raise InputError(msg)
    slope = np.tan(np.radians(elevation_deg))
    root = np.sqrt(slope**2 + 2.0 * rise_m / radius_m)
    return cast(ScalarOrArray, radius_m * (root - slope))


def hidden_by_curvature_m(
    dist_m: ScalarOrArray, *, eye_m: float, radius_m: float
) -> ScalarOrArray:
    """Height hidden at a distance by the bulge of a smooth earth.

    Parameters
    ----------
    dist_m : float or float64 array of any shape [m]
        Distance along the ground, not negative.
    eye_m : float [m]
        Height of the eye above the ground, not negative.
    radius_m : float [m]
        Effective earth radius, > 0.

    Returns
    -------
    same shape [m]
        R_e·(sec((d − d_h)/R_e) − 1) beyond the horizon at d_h, 0 before it.

    Raises
    ------
    InputError
        If the radius is not above 0, a distance or height is negative, or a place
        lies a quarter of the earth or more beyond the horizon.

    References
    ----------
    The tangent at the horizon, met by the plumb line of the place.
    """
    _check(radius_m, dist_m, eye_m)
    horizon_m = horizon_distance_m(eye_m, radius_m=radius_m)
    beyond: ScalarOrArray = np.maximum(dist_m - horizon_m, 0.0)
    return drop_m(beyond, radius_m=radius_m)


def drop_m(dist_m: ScalarOrArray, *, radius_m: float) -> ScalarOrArray:
    """How far the ground has fallen below the horizontal plane of the start.

    Parameters
    ----------
    dist_m : float or float64 array of any shape [m]
        Distance along the ground, not negative.
    radius_m : float [m]
        Effective earth radius, > 0.

    Returns
    -------
    same shape [m]
        R_e·(sec(d/R_e) − 1), measured on the plumb line of the place.

    Raises
    ------
    InputError
        If the radius is not above 0, a distance is negative, or reaches a quarter of
        the earth, whose plumb line never meets the plane.

    References
    ----------
    Right triangle between the start, the centre and the plumb line.
    """
    _check(radius_m, dist_m)
    angle = dist_m / radius_m
    if np.any(angle >= np.pi / 2.0):
        msg = (
            f"A distance of {np.max(dist_m):g} m goes a quarter round a sphere of "
            f"{radius_m:g} m or more. Give a shorter one."
        )
        raise InputError(msg)
    # sec x − 1 without the loss of digits: 2·sin²(x/2)/cos x
    secant_less_one = 2.0 * np.sin(angle / 2.0) ** 2 / np.cos(angle)
    drop: ScalarOrArray = radius_m * secant_less_one
    return drop


def drop_parabola_m(dist_m: ScalarOrArray, *, radius_m: float) -> ScalarOrArray:
    """Work out the same drop by the rule of thumb that surveyors print.

    Parameters
    ----------
    dist_m : float or float64 array of any shape [m]
        Distance along the ground, not negative.
    radius_m : float [m]
        Effective earth radius, > 0.

    Returns
    -------
    same shape [m]
        d²/(2·R_e): 0.08 m too little at 100 km, 50 m at 500 km.

    Raises
    ------
    InputError
        If the radius is not above 0 or a distance is negative.

    References
    ----------
    First term of the series of :func:`drop_m`.
    """
    _check(radius_m, dist_m)
    return dist_m * dist_m / (2.0 * radius_m)


def hidden_by_ridge_m(
    ridge_m: ScalarOrArray,
    *,
    eye_m: float,
    ridge_dist_m: float,
    target_dist_m: float,
    radius_m: float,
) -> ScalarOrArray:
    """Lowest height seen behind one thin ridge on a smooth earth.

    Parameters
    ----------
    ridge_m : float or float64 array of any shape [m]
        Height of the ridge above the smooth ground, not negative.
    eye_m : float [m]
        Height of the eye above the smooth ground, not negative.
    ridge_dist_m, target_dist_m : float [m]
        Distances along the ground from the eye, 0 < ridge < target.
    radius_m : float [m]
        Effective earth radius, > 0; both distances under a quarter of its circle.

    Returns
    -------
    same shape [m]
        Height above the smooth ground where the line over the ridge meets the plumb
        line of the target; negative when it passes below the ground there.

    Raises
    ------
    InputError
        If a number is outside its range.

    References
    ----------
    A straight line in polar coordinates: 1/r is linear in cos θ and sin θ, so
    1/r = (u0·sin(a − θ) + u1·sin θ)/sin a with u0, u1 at the eye and the ridge.
    """
    _check(radius_m, ridge_m, eye_m, ridge_dist_m)
    at_ridge, at_target = ridge_dist_m / radius_m, target_dist_m / radius_m
    if not 0.0 < at_ridge < at_target < np.pi / 2.0:
        msg = (
            f"The ridge at {ridge_dist_m:g} m must lie between the eye and the target "
            f"at {target_dist_m:g} m, both within a quarter of the earth."
        )
        raise InputError(msg)
    from_eye = np.sin(at_ridge - at_target) / (radius_m + eye_m)
    from_ridge = np.sin(at_target) / (radius_m + ridge_m)
    return cast(ScalarOrArray, np.sin(at_ridge) / (from_eye + from_ridge) - radius_m)


def apparent_size_deg(size_m: ScalarOrArray, dist_m: ScalarOrArray) -> ScalarOrArray:
    """Angle under which a thing appears, its middle straight ahead.

    Parameters
    ----------
    size_m : float or float64 array of any shape [m]
        Size across the line of sight, not negative.
    dist_m : float or float64 array of the same shape [m]
        Distance of its middle, > 0.

    Returns
    -------
    same shape [deg]
        2·atan(size/(2·distance)).

    Raises
    ------
    InputError
        If a size is negative or a distance is not above 0.

    References
    ----------
    Two right triangles, one for each half.
    """
    _check(1.0, size_m)
    _check_above_zero(dist_m, "Distance")
    return cast(ScalarOrArray, np.degrees(2.0 * np.arctan(size_m / (2.0 * dist_m))))


def _dip_rad(height_m: ScalarOrArray, radius_m: float) -> ScalarOrArray:
    """Angle at the centre between the eye and its horizon [rad]."""
    # acos(R/(R + h)) loses half its digits for a small h; its tangent does not
    tangent = horizon_distance_straight_m(height_m, radius_m=radius_m)
    return cast(ScalarOrArray, np.arctan2(tangent, radius_m))


def _check(radius_m: float, *values: ScalarOrArray | float) -> None:
    """Refuse a radius that is none and heights or distances below 0."""
    if not (np.isfinite(radius_m) and radius_m > 0.0):
        msg = f"The effective radius must be finite and above 0 m, not {radius_m}."
        raise InputError(msg)
    for value in values:
        if not np.all(np.isfinite(value)) or np.any(np.less(value, 0.0)):
            msg = f"Heights and distances must be finite and 0 m or more, not {value}."
            raise InputError(msg)


def _check_above_zero(value: ScalarOrArray, what: str) -> None:
    """Refuse a value that is not above 0."""
    if not np.all(np.isfinite(value)) or not np.all(np.greater(value, 0.0)):
        msg = f"{what} must be above 0 m, not {value}."
        raise InputError(msg)
