"""What the radio methods refuse, said once for all of them."""

import numpy as np

from profiler.constants import M_PER_KM
from profiler.errors import InputError
from profiler.model import FloatArray

#: Both ends and one sample between them [1]; Rec. ITU-R P.526-16 section 4.5.1 runs
#: over samples 2 to n−1.
FEWEST_SAMPLES = 3


def check_above_zero(value: float, what: str, unit: str = "m") -> None:
    """Refuse a number that is not finite and above 0."""
    if not (np.isfinite(value) and value > 0.0):
        msg = f"{what} must be finite and above 0 {unit}, not {value}."
        raise InputError(msg)


def check_not_negative(value: float, what: str, unit: str = "m") -> None:
    """Refuse a number that is not finite or is below 0."""
    if not (np.isfinite(value) and value >= 0.0):
        msg = f"{what} must be finite and 0 {unit} or more, not {value}."
        raise InputError(msg)


def check_finite(value: float, what: str, unit: str = "m") -> None:
    """Refuse a number that is not finite."""
    if not np.isfinite(value):
        msg = f"{what} must be a finite number of {unit}, not {value}."
        raise InputError(msg)


def check_effective_radius(effective_radius_m: float) -> None:
    """Refuse an effective earth radius in which diffraction has no meaning.

    A flat earth (inf) is allowed: every equation used here has a limit there. A
    negative radius is not: the ray bends more than the earth, the smooth earth is a
    bowl that nothing lies behind, and Rec. ITU-R P.526-16 section 3.2 asks for a
    radius above 0.
    """
    if not effective_radius_m > 0.0:
        msg = (
            f"Diffraction has no meaning with an effective earth radius of "
            f"{effective_radius_m:g} m: it must be above 0. In a duct, where it is "
            "negative, take the ke your rule prescribes; inf means a flat earth."
        )
        raise InputError(msg)


def checked_profile(
    dist_m: FloatArray, height_m: FloatArray
) -> tuple[FloatArray, FloatArray]:
    """Profile as float64 arrays, distances counted from the first sample.

    Parameters
    ----------
    dist_m : (n,) float64 [m]
        Distances along the path, increasing, n >= 3.
    height_m : (n,) float64 [m]
        Ground above sea level.

    Returns
    -------
    tuple of two (n,) float64 [m]
        Distances with the first one 0, heights.

    Raises
    ------
    InputError
        If there are fewer than 3 samples, the lengths differ, a number is not finite
        or the distances do not increase.
    """
    dist = np.asarray(dist_m, dtype=np.float64)
    height = np.asarray(height_m, dtype=np.float64)
    if dist.ndim != 1 or dist.shape != height.shape:
        msg = (
            f"A profile needs one height for each distance; {dist.shape} distances "
            f"and {height.shape} heights were given."
        )
        raise InputError(msg)
    if dist.size < FEWEST_SAMPLES:
        msg = (
            f"A profile of {dist.size} samples has none between its ends: give "
            f"{FEWEST_SAMPLES} or more."
        )
        raise InputError(msg)
    _check_samples(dist, height)
    return dist - dist[0], height


def _check_samples(dist_m: FloatArray, height_m: FloatArray) -> None:
    """Refuse samples without a number and distances that do not increase."""
    if not np.all(np.isfinite(dist_m)) or not np.all(np.diff(dist_m) > 0.0):
        msg = "The distances of a profile must be finite and increase along the path."
        raise InputError(msg)
    missing = ~np.isfinite(height_m)
    if np.any(missing):
        first_km = float(dist_m[np.argmax(missing)]) / M_PER_KM
        msg = (
            f"{np.count_nonzero(missing)} of {height_m.size} samples have no ground, "
            f"the first at {first_km:.3f} km. Diffraction needs a whole profile: fill "
            "the void or take another elevation model."
        )
        raise InputError(msg)
