"""A single knife edge: the parameter ν and the loss J(ν)."""

from typing import cast

import numpy as np

from profiler.earth.curvature import ScalarOrArray
from profiler.errors import InputError
from profiler.radio.inputs import check_above_zero
from profiler.radio.waves import FIELD_DB, check_wavelength

#: At and below this ν the approximate loss is 0 [1]; Rec. ITU-R P.526-16 section 4.1,
#: "at" as Rec. ITU-R P.1812-8 words it.
NU_WITHOUT_LOSS = -0.78
#: Loss at ν = 0.1 in the approximation [dB]; Rec. ITU-R P.526-16 equation (31).
APPROXIMATE_DB = 6.9
#: Shift of ν in the approximation [1]; Rec. ITU-R P.526-16 equation (31).
NU_SHIFT = 0.1


def nu_from_height(
    height_m: ScalarOrArray, *, from_m: float, to_m: float, wavelength_m: float
) -> ScalarOrArray:
    """Parameter ν of an edge, from its height above the straight line.

    Parameters
    ----------
    height_m : float or float64 array of any shape [m]
        Top of the edge above the line between the ends, negative = clear.
    from_m, to_m : float [m]
        Distances from the edge to the two ends, > 0.
    wavelength_m : float [m]
        Wavelength, 1 mm to 30 m.

    Returns
    -------
    same shape [1]
        ν = h·sqrt((2/λ)(1/d1 + 1/d2)) = √2·h/F1, with the sign of h.

    Raises
    ------
    InputError
        If a distance or the wavelength is outside its range.

    References
    ----------
    Rec. ITU-R P.526-16 (11/2025) section 4.1 equation (26).
    """
    _check(from_m, to_m, wavelength_m)
    factor = np.sqrt(2.0 / wavelength_m * (1.0 / from_m + 1.0 / to_m))
    return cast(ScalarOrArray, height_m * factor)


def nu_from_angle(
    angle_rad: ScalarOrArray, *, from_m: float, to_m: float, wavelength_m: float
) -> ScalarOrArray:
    """Parameter ν of an edge, from the angle by which the ray turns there.

    Parameters
    ----------
    angle_rad : float or float64 array of any shape [rad]
        Diffraction angle θ, below 0.2, with the sign of the height.
    from_m, to_m : float [m]
        Distances from the edge to the two ends, > 0.
    wavelength_m : float [m]
        Wavelength, 1 mm to 30 m.

    Returns
    -------
    same shape [1]
        ν = θ·sqrt(2/(λ(1/d1 + 1/d2))).

    Raises
    ------
    InputError
        If a distance or the wavelength is outside its range.

    References
    ----------
    Rec. ITU-R P.526-16 (11/2025) section 4.1 equation (27).
    """
    _check(from_m, to_m, wavelength_m)
    factor = np.sqrt(2.0 / (wavelength_m * (1.0 / from_m + 1.0 / to_m)))
    return cast(ScalarOrArray, angle_rad * factor)


def nu_from_height_and_angle(
    height_m: ScalarOrArray, angle_rad: ScalarOrArray, *, wavelength_m: float
) -> ScalarOrArray:
    """Parameter ν of an edge, from its height and the angle by which the ray turns.

    Parameters
    ----------
    height_m : float or float64 array of any shape [m]
        Top of the edge above the line between the ends, negative = clear.
    angle_rad : same shape [rad]
        Diffraction angle θ, below 0.2, with the sign of the height.
    wavelength_m : float [m]
        Wavelength, 1 mm to 30 m.

    Returns
    -------
    same shape [1]
        ν = sqrt(2·h·θ/λ) with the sign of h.

    Raises
    ------
    InputError
        If height and angle differ in sign, or the wavelength is outside its range.

    References
    ----------
    Rec. ITU-R P.526-16 (11/2025) section 4.1 equation (28).
    """
    check_wavelength(wavelength_m)
    product = height_m * angle_rad
    _check_same_sign(product, "height and angle")
    root = np.sqrt(2.0 * product / wavelength_m)
    return cast(ScalarOrArray, np.copysign(root, height_m))


def nu_from_end_angles(
    from_angle_rad: ScalarOrArray,
    to_angle_rad: ScalarOrArray,
    *,
    length_m: float,
    wavelength_m: float,
) -> ScalarOrArray:
    """Parameter ν of an edge, from its angles above the line as each end sees it.

    Parameters
    ----------
    from_angle_rad, to_angle_rad : float or float64 arrays of one shape [rad]
        Angles α1, α2 of the edge above the line, negative = clear.
    length_m : float [m]
        Path length d, > 0.
    wavelength_m : float [m]
        Wavelength, 1 mm to 30 m.

    Returns
    -------
    same shape [1]
        ν = sqrt(2·d·α1·α2/λ) with the sign of the angles.

    Raises
    ------
    InputError
        If the angles differ in sign, or the length or wavelength is outside its range.

    References
    ----------
    Rec. ITU-R P.526-16 (11/2025) section 4.1 equation (29).
    """
    check_above_zero(length_m, "Path length")
    check_wavelength(wavelength_m)
    product = from_angle_rad * to_angle_rad
    _check_same_sign(product, "both angles")
    root = np.sqrt(2.0 * length_m * product / wavelength_m)
    return cast(ScalarOrArray, np.copysign(root, from_angle_rad))


def nu_from_share_of_f1(share: ScalarOrArray) -> ScalarOrArray:
    """Parameter ν of an edge, from the clearance as a share of F1.

    Parameters
    ----------
    share : float or float64 array of any shape [1]
        Clearance divided by the first Fresnel radius, positive = clear.

    Returns
    -------
    same shape [1]
        ν = −√2·share.

    References
    ----------
    Rec. ITU-R P.526-16 (11/2025) equations (2) and (26); in this form equation (129).
    """
    return cast(ScalarOrArray, -np.sqrt(2.0) * share)


def knife_edge_loss_exact_db(nu: ScalarOrArray) -> ScalarOrArray:
    """Loss over a knife edge by the Fresnel integrals.

    Parameters
    ----------
    nu : float or float64 array of any shape [1]
        Parameter ν, positive = the edge stands above the line.

    Returns
    -------
    same shape [dB]
        J(ν) = −20·log10(½·sqrt((1 − C − S)² + (C − S)²)); 6.0206 at ν = 0. Below
        ν = −0.778 it swings around 0, down to −1.369 (a gain) at ν = −1.217. NaN stays
        NaN.

    References
    ----------
    Rec. ITU-R P.526-16 (11/2025) section 4.1 equation (30), C and S as in section 2.7
    equations (6) and (7).
    """
    from scipy.special import fresnel

    s, c = fresnel(nu)
    field = np.hypot(1.0 - c - s, c - s) / 2.0
    return cast(ScalarOrArray, -FIELD_DB * np.log10(field))


def knife_edge_loss_db(nu: ScalarOrArray) -> ScalarOrArray:
    """Loss over a knife edge by the approximation that the methods here build on.

    Parameters
    ----------
    nu : float or float64 array of any shape [1]
        Parameter ν, positive = the edge stands above the line.

    Returns
    -------
    same shape [dB]
        J(ν) = 6.9 + 20·log10(sqrt((ν − 0.1)² + 1) + ν − 0.1), exactly 0 for
        ν <= −0.78. It differs from the exact loss by −0.123 to +0.103 dB for
        −0.78 <= ν <= 10. NaN stays NaN.

    References
    ----------
    Rec. ITU-R P.526-16 (11/2025) section 4.1 equation (31); the limit at −0.78 itself
    as in Rec. ITU-R P.1812-8 section 4.3.1.
    """
    # held at the limit, for far below it the sum under the logarithm rounds to 0
    shifted = np.maximum(nu, NU_WITHOUT_LOSS) - NU_SHIFT
    loss = APPROXIMATE_DB + FIELD_DB * np.log10(np.hypot(shifted, 1.0) + shifted)
    return cast(
        ScalarOrArray, np.where(np.less_equal(nu, NU_WITHOUT_LOSS), 0.0, loss)[()]
    )


def _check(from_m: float, to_m: float, wavelength_m: float) -> None:
    """Refuse distances that are not above 0 and a wavelength outside the band."""
    check_above_zero(from_m, "Distance to the first end")
    check_above_zero(to_m, "Distance to the second end")
    check_wavelength(wavelength_m)


def _check_same_sign(product: ScalarOrArray, what: str) -> None:
    """Refuse a product below 0: its root is no number."""
    if np.any(np.less(product, 0.0)):
        msg = (
            f"{what.capitalize()} of one edge have the same sign: above the line both "
            "are positive, below it both negative."
        )
        raise InputError(msg)
