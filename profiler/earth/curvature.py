"""Radii of curvature of the WGS84 ellipsoid, and the one that a path uses."""

from typing import TypeVar

import numpy as np

from profiler.constants import WGS84_A_M, WGS84_F
from profiler.model import FloatArray

ScalarOrArray = TypeVar("ScalarOrArray", float, FloatArray)

#: First eccentricity squared of WGS84 [1]: f(2 − f).
WGS84_E2: float = WGS84_F * (2.0 - WGS84_F)


def meridian_radius(lat_deg: ScalarOrArray) -> ScalarOrArray:
    """Radius of curvature M along the meridian.

    Parameters
    ----------
    lat_deg : float or float64 array of any shape [deg]
        Geodetic latitude, −90 to 90.

    Returns
    -------
    same shape [m]
        M = a(1 − e²)/(1 − e² sin²φ)^(3/2); 6 335 439 at the equator.

    References
    ----------
    Torge, Geodesy, third edition, section 4.1.3; from memory, checked against the
    printed radii in tests/published/test_radii.py.
    """
    w2 = _w_squared(lat_deg)
    radius: ScalarOrArray = WGS84_A_M * (1.0 - WGS84_E2) / (w2 * np.sqrt(w2))
    return radius


def prime_vertical_radius(lat_deg: ScalarOrArray) -> ScalarOrArray:
    """Radius of curvature N across the meridian.

    Parameters
    ----------
    lat_deg : float or float64 array of any shape [deg]
        Geodetic latitude, −90 to 90.

    Returns
    -------
    same shape [m]
        N = a/sqrt(1 − e² sin²φ); 6 378 137 at the equator.

    References
    ----------
    As for :func:`meridian_radius`.
    """
    radius: ScalarOrArray = WGS84_A_M / np.sqrt(_w_squared(lat_deg))
    return radius


def euler_radius(lat_deg: ScalarOrArray, azimuth_deg: ScalarOrArray) -> ScalarOrArray:
    """Radius of curvature R of the ellipsoid along an azimuth.

    Parameters
    ----------
    lat_deg : float or float64 array of any shape [deg]
        Geodetic latitude, −90 to 90.
    azimuth_deg : same shape [deg]
        Bearing from north; a half turn more gives the same radius.

    Returns
    -------
    same shape [m]
        1/R = cos²α/M + sin²α/N.

    References
    ----------
    Euler's theorem on normal sections; the printed value at latitude and azimuth 45°
    stands in tests/published/test_radii.py.
    """
    azimuth = np.radians(azimuth_deg)
    along = np.cos(azimuth) ** 2 / meridian_radius(lat_deg)
    across = np.sin(azimuth) ** 2 / prime_vertical_radius(lat_deg)
    radius: ScalarOrArray = 1.0 / (along + across)
    return radius


def _w_squared(lat_deg: ScalarOrArray) -> ScalarOrArray:
    """1 − e² sin²φ [1], the term both radii share."""
    sine = np.sin(np.radians(lat_deg))
    shared: ScalarOrArray = 1.0 - WGS84_E2 * sine * sine
    return shared
