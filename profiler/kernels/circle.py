"""Sight lines over a circle of curvature kappa, exact through kappa = 0.

Formulas for scalars and arrays alike; every caller in the house uses these. With
c(x) = sin(kappa x)/(kappa x) and S(x) = x c(x) no term divides by kappa, so flat
ground and ducts (negative kappa) need no case of their own.
docs/how-it-computes.md, "The sight line", derives both and gives the error.
"""

from typing import TypeVar

import numpy as np

from profiler.model.arrays import FloatArray

Number = TypeVar("Number", float, FloatArray)


def arc_ratio(dist_m: Number, kappa_per_m: float) -> Number:
    """Sine over arc, c(x) = sin(kappa x)/(kappa x); 1 at kappa = 0.

    Parameters
    ----------
    dist_m : (n,) float64 or float [m]
        Distance along the curved surface.
    kappa_per_m : float [1/m]
        Effective curvature; 0 is flat, negative a duct.

    Returns
    -------
    (n,) float64 or float [1]
    """
    return np.sinc(dist_m * (kappa_per_m / np.pi))


def elevation_tangent(
    dist_m: Number, height_m: Number, eye_m: float, kappa_per_m: float
) -> Number:
    """Tangent of the elevation angle from the eye to heights along the path.

    Parameters
    ----------
    dist_m : (n,) float64 or float [m]
        Distance from the eye, > 0.
    height_m : (n,) float64 or float [m]
        Height seen there, above the same level as ``eye_m``.
    eye_m : float [m]
        Height of the eye.
    kappa_per_m : float [1/m]
        Effective curvature.

    Returns
    -------
    (n,) float64 or float [1]
        [(z − H0) − g (kappa d/2) c(d/2)² ] / [g d c(d)] with g = 1 + kappa z.

    References
    ----------
    Plane trigonometry in the triangle eye, centre, point; docs/how-it-computes.md.
    """
    rise_m = height_m - eye_m
    half = arc_ratio(dist_m / 2.0, kappa_per_m)
    stretch = 1.0 + kappa_per_m * height_m
    drop_m = (kappa_per_m * dist_m * dist_m / 2.0) * half * half
    return (rise_m - stretch * drop_m) / (
        stretch * dist_m * arc_ratio(dist_m, kappa_per_m)
    )


def ray_height(
    dist_m: Number, tangent: Number, eye_m: float, kappa_per_m: float
) -> Number:
    """Height of the ray that leaves the eye at an elevation tangent.

    Parameters
    ----------
    dist_m : (n,) float64 or float [m]
        Distance from the eye.
    tangent : (n,) float64 or float [1]
        Tangent of the ray's elevation angle at the eye; one ray, or one a distance.
    eye_m : float [m]
        Height of the eye.
    kappa_per_m : float [1/m]
        Effective curvature.

    Returns
    -------
    (n,) float64 or float [m]
        The inverse of `elevation_tangent` in its height.
    """
    half = arc_ratio(dist_m / 2.0, kappa_per_m)
    drop_m = (kappa_per_m * dist_m * dist_m / 2.0) * half * half
    rise_m = drop_m + tangent * dist_m * arc_ratio(dist_m, kappa_per_m)
    return (eye_m + rise_m) / (1.0 - kappa_per_m * rise_m)


def sight_height(
    dist_m: Number, length_m: float, eye_m: float, aim_m: float, kappa_per_m: float
) -> Number:
    """Height of the straight line between two ends above the curved surface.

    Parameters
    ----------
    dist_m : (n,) float64 or float [m]
        Distance from the eye, 0 to ``length_m``.
    length_m : float [m]
        Distance from the eye to the aim point, > 0.
    eye_m, aim_m : float [m]
        Heights of the two ends.
    kappa_per_m : float [1/m]
        Effective curvature.

    Returns
    -------
    (n,) float64 or float [m]
        Exactly symmetric in the two ends; ``eye_m`` at 0 and ``aim_m`` at the end.

    References
    ----------
    The chord of a circle in polar form; docs/how-it-computes.md.
    """
    kap = kappa_per_m
    rest_m = length_m - dist_m
    s_all = length_m * arc_ratio(length_m, kap)
    s_near = dist_m * arc_ratio(dist_m, kap)
    s_far = rest_m * arc_ratio(rest_m, kap)
    bulge = (
        (kap / 2.0)
        * (dist_m * rest_m * length_m)
        * (arc_ratio(dist_m / 2.0, kap) * arc_ratio(rest_m / 2.0, kap))
        * arc_ratio(length_m / 2.0, kap)
    )
    above = eye_m * (s_all - s_near) + aim_m * (s_all - s_far)
    return (above + kap * eye_m * aim_m * s_all - bulge) / (
        (1.0 + kap * eye_m) * s_near + (1.0 + kap * aim_m) * s_far
    )
