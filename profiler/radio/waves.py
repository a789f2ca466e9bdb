"""Radio waves in free space: frequency, wavelength, loss without any obstacle."""

from typing import Final

import numpy as np

from profiler.earth.curvature import ScalarOrArray
from profiler.errors import InputError

#: Speed of light in vacuum [m/s]; exact by definition of the metre (SI, 1983).
SPEED_OF_LIGHT: Final = 299_792_458.0
#: Lowest frequency answered [Hz]; Rec. ITU-R P.526-16 section 3.2: below it the first
#: term of the residue series does not stand for the ground wave.
LOWEST_FREQUENCY_HZ: Final = 10e6
#: Highest frequency answered [Hz]; upper end of the radio bands of the trade.
HIGHEST_FREQUENCY_HZ: Final = 300e9
#: Room left at the limits of the wavelength for rounded speeds of light [1]: 3e8 m/s
#: is 0.07 % high.
SPEED_SLACK = 1.001

#: Decibels in a factor 10 of field strength [dB].
FIELD_DB: Final = 20.0
#: Decibels in a factor 10 of power [dB].
POWER_DB: Final = 10.0
#: Factor of π in 4πd/λ [1]: the surface of a sphere over its squared radius.
SPHERE = 4.0


def check_frequency(frequency_hz: float) -> None:
    """Refuse a frequency outside 10 MHz to 300 GHz.

    Parameters
    ----------
    frequency_hz : float [Hz]
        Frequency of the radio path.

    Raises
    ------
    InputError
        If it is not a number from 10 MHz to 300 GHz.

    References
    ----------
    Rec. ITU-R P.526-16 (11/2025) section 3.2 for the lower limit; the upper one is
    common practice, no source.
    """
    if not LOWEST_FREQUENCY_HZ <= frequency_hz <= HIGHEST_FREQUENCY_HZ:
        msg = (
            f"A frequency of {frequency_hz:g} Hz is outside 10 MHz to 300 GHz. "
            "Was it meant in MHz or GHz?"
        )
        raise InputError(msg)


def check_wavelength(wavelength_m: float) -> None:
    """Refuse a wavelength outside 1 mm to 30 m, the same band.

    Parameters
    ----------
    wavelength_m : float [m]
        Wavelength in vacuum.

    Raises
    ------
    InputError
        If it is not a number from 1 mm to 30 m.

    References
    ----------
    :func:`check_frequency`.
    """
    shortest = SPEED_OF_LIGHT / HIGHEST_FREQUENCY_HZ / SPEED_SLACK
    longest = SPEED_OF_LIGHT / LOWEST_FREQUENCY_HZ * SPEED_SLACK
    if not shortest <= wavelength_m <= longest:
        msg = (
            f"A wavelength of {wavelength_m:g} m is outside 1 mm to 30 m (300 GHz to "
            "10 MHz). Give it in metres."
        )
        raise InputError(msg)


def wavelength_m(
    frequency_hz: float, *, speed_of_light_m_s: float = SPEED_OF_LIGHT
) -> float:
    """Wavelength in vacuum.

    Parameters
    ----------
    frequency_hz : float [Hz]
        Frequency, 10 MHz to 300 GHz.
    speed_of_light_m_s : float [m/s]
        Speed of light; 3e8 reproduces tables that were made with that number.

    Returns
    -------
    float [m]
        c/f.

    Raises
    ------
    InputError
        If the frequency is outside its limits or the speed is not near that of light.

    References
    ----------
    Rec. ITU-R P.526-16 (11/2025) section 2: λ = c/f.
    """
    check_frequency(frequency_hz)
    if not 1.0 / SPEED_SLACK <= speed_of_light_m_s / SPEED_OF_LIGHT <= SPEED_SLACK:
        msg = (
            f"{speed_of_light_m_s:g} m/s is not the speed of light, 299792458 m/s; "
            "only its rounded value 3e8 may replace it."
        )
        raise InputError(msg)
    return speed_of_light_m_s / frequency_hz


def free_space_loss_db(
    dist_m: ScalarOrArray,
    *,
    frequency_hz: float,
    speed_of_light_m_s: float = SPEED_OF_LIGHT,
) -> ScalarOrArray:
    """Loss between two isotropic antennas in free space.

    Parameters
    ----------
    dist_m : float or float64 array of any shape [m]
        Distance between the antennas, > 0.
    frequency_hz : float [Hz]
        Frequency, 10 MHz to 300 GHz.
    speed_of_light_m_s : float [m/s]
        Speed of light.

    Returns
    -------
    same shape [dB]
        20·log10(4π·d·f/c), never rounded: 32.4478 + 20·log10(MHz) + 20·log10(km) or
        92.4478 with GHz. Recommendations print 32.4 and 92.4, 0.0478 dB less.

    Raises
    ------
    InputError
        If a distance is not above 0 or the frequency is outside its limits.

    References
    ----------
    Rec. ITU-R P.525 (form with 32.4, read in a secondary source); Rec. ITU-R P.452-18
    and P.1812-8 (form with 92.4).
    """
    if not np.all(np.isfinite(dist_m)) or not np.all(np.greater(dist_m, 0.0)):
        msg = f"Distance must be above 0 m, not {dist_m}."
        raise InputError(msg)
    wave = wavelength_m(frequency_hz, speed_of_light_m_s=speed_of_light_m_s)
    loss: ScalarOrArray = FIELD_DB * np.log10(SPHERE * np.pi * dist_m / wave)
    return loss
