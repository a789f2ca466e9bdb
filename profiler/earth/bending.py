"""Bending of the ray by the air: ke, kr, gradient, and the curvature they all mean."""

import math

from profiler.constants import KE_RADIO, N0_AIR
from profiler.errors import InputError
from profiler.model import Air, Bending

#: Effective curvature below this counts as flat [1/m]; our choice: over 1500 km it
#: moves the far end by a thousandth of a millimetre.
FLAT_BELOW_PER_M = 1e-15
#: N-units per kilometre to refractive index per metre [1]: 1e-6 / 1000.
PER_M_FROM_N_PER_KM = 1e-9
#: How close a stated ke must be to 4/3 to be printed so [1]; our choice.
FOUR_THIRDS_WITHIN = 1e-12


def kappa_from_kr(kr: float, *, radius_m: float) -> float:
    """Effective curvature for a coefficient of refraction.

    Parameters
    ----------
    kr : float [1]
        Curvature of the ray divided by the earth's; any finite number.
    radius_m : float [m]
        Radius of the earth along the path, > 0.

    Returns
    -------
    float [1/m]
        κ = (1 − kr)/R; exactly 0 when flat, negative in a duct.

    Raises
    ------
    InputError
        If a number is not finite or the radius is not above 0.

    References
    ----------
    Definition of kr (Gauss): kr = R / radius of the ray.
    """
    _check(radius_m, kr)
    return _flattened((1.0 - kr) / radius_m)


def kappa_from_ke(ke: float, *, radius_m: float) -> float:
    """Effective curvature for an effective earth radius factor.

    Parameters
    ----------
    ke : float [1]
        Effective earth radius divided by the true radius; not 0, negative in a duct.
    radius_m : float [m]
        Radius of the earth along the path, > 0.

    Returns
    -------
    float [1/m]
        κ = 1/(ke·R).

    Raises
    ------
    InputError
        If ``ke`` is 0, a number is not finite or the radius is not above 0.

    References
    ----------
    Definition of ke: Rec. ITU-R P.310, from memory.
    """
    _check(radius_m, ke)
    if ke == 0.0:
        msg = "ke 0 would be an earth without size. State ke above 0."
        raise InputError(msg)
    return _flattened(1.0 / (ke * radius_m))


def kappa_from_n_gradient(n_gradient_per_km: float, *, radius_m: float) -> float:
    """Effective curvature for a refractivity gradient at the ground.

    Parameters
    ----------
    n_gradient_per_km : float [N/km]
        Gradient dN/dh of refractivity, about −39 for radio on a normal day.
    radius_m : float [m]
        Radius of the earth along the path, > 0.

    Returns
    -------
    float [1/m]
        κ = 1/R + 1e-9·(dN/dh)/n0, n0 = 1.000315.

    Raises
    ------
    InputError
        If a number is not finite or the radius is not above 0.

    References
    ----------
    Curvature of a near-horizontal ray is −(1/n)·dn/dh (Snell's law in a sphere).
    """
    _check(radius_m, n_gradient_per_km)
    bent = PER_M_FROM_N_PER_KM * n_gradient_per_km / N0_AIR
    return _flattened(1.0 / radius_m + bent)


def kr_from_kappa(kappa_per_m: float, *, radius_m: float) -> float:
    """Coefficient of refraction for an effective curvature.

    Parameters
    ----------
    kappa_per_m : float [1/m]
        Effective curvature.
    radius_m : float [m]
        Radius of the earth along the path, > 0.

    Returns
    -------
    float [1]
        kr = 1 − κ·R; 1 when flat.

    Raises
    ------
    InputError
        If a number is not finite or the radius is not above 0.

    References
    ----------
    The inverse of :func:`kappa_from_kr`.
    """
    _check(radius_m, kappa_per_m)
    return 1.0 - kappa_per_m * radius_m


def ke_from_kappa(kappa_per_m: float, *, radius_m: float) -> float | None:
    """Effective earth radius factor for an effective curvature.

    Parameters
    ----------
    kappa_per_m : float [1/m]
        Effective curvature.
    radius_m : float [m]
        Radius of the earth along the path, > 0.

    Returns
    -------
    float [1] or None
        ke = 1/(κ·R); None when flat, negative in a duct.

    Raises
    ------
    InputError
        If a number is not finite or the radius is not above 0.

    References
    ----------
    The inverse of :func:`kappa_from_ke`.
    """
    _check(radius_m, kappa_per_m)
    if _flattened(kappa_per_m) == 0.0:
        return None
    return 1.0 / (kappa_per_m * radius_m)


def n_gradient_from_kappa(kappa_per_m: float, *, radius_m: float) -> float:
    """Refractivity gradient for an effective curvature.

    Parameters
    ----------
    kappa_per_m : float [1/m]
        Effective curvature.
    radius_m : float [m]
        Radius of the earth along the path, > 0.

    Returns
    -------
    float [N/km]
        dN/dh = 1e9·n0·(κ − 1/R).

    Raises
    ------
    InputError
        If a number is not finite or the radius is not above 0.

    References
    ----------
    The inverse of :func:`kappa_from_n_gradient`.
    """
    _check(radius_m, kappa_per_m)
    return N0_AIR * (kappa_per_m - 1.0 / radius_m) / PER_M_FROM_N_PER_KM


def ke_from_kr(kr: float) -> float | None:
    """Effective earth radius factor for a coefficient of refraction.

    Parameters
    ----------
    kr : float [1]
        Curvature of the ray divided by the earth's; finite.

    Returns
    -------
    float [1] or None
        ke = 1/(1 − kr); None at kr 1 (flat), negative above it (a duct).

    Raises
    ------
    InputError
        If ``kr`` is not finite.

    References
    ----------
    1/(ke·R) = (1 − kr)/R by the two definitions.
    """
    _check(1.0, kr)
    return None if kr == 1.0 else 1.0 / (1.0 - kr)


def kr_from_ke(ke: float) -> float:
    """Coefficient of refraction for an effective earth radius factor.

    Parameters
    ----------
    ke : float [1]
        Effective earth radius divided by the true radius; not 0.

    Returns
    -------
    float [1]
        kr = 1 − 1/ke.

    Raises
    ------
    InputError
        If ``ke`` is 0 or not finite.

    References
    ----------
    1/(ke·R) = (1 − kr)/R by the two definitions.
    """
    return 1.0 - kappa_from_ke(ke, radius_m=1.0)


def bend(air: Air, radius_m: float) -> Bending:
    """Express the state of the air as every form of bending, for one path.

    Parameters
    ----------
    air : Air
        What was stated; nothing stated means light, kr 0.13.
    radius_m : float [m]
        Euler radius of the path, > 0.

    Returns
    -------
    Bending
        ``ke`` and ``effective_radius_m`` are None when flat, negative in a duct.

    Raises
    ------
    InputError
        If the radius is not a finite number above 0.

    References
    ----------
    The conversions above; the number that was stated is kept as it was stated.
    """
    ke: float | None
    if air.n_gradient_per_km is not None:
        kappa = kappa_from_n_gradient(air.n_gradient_per_km, radius_m=radius_m)
        kr = kr_from_kappa(kappa, radius_m=radius_m)
        ke = ke_from_kappa(kappa, radius_m=radius_m)
    elif air.ke is not None:
        kappa = kappa_from_ke(air.ke, radius_m=radius_m)
        kr, ke = kr_from_ke(air.ke), air.ke
    else:
        kappa = kappa_from_kr(air.kr_or_default, radius_m=radius_m)
        kr, ke = air.kr_or_default, ke_from_kr(air.kr_or_default)
    flat = kappa == 0.0
    return Bending(
        kappa_per_m=kappa,
        radius_m=radius_m,
        ke=None if flat else ke,
        kr=kr,
        effective_radius_m=None if flat else 1.0 / kappa,
        stated=stated_text(air),
        is_default=air.is_default,
    )


def stated_text(air: Air) -> str:
    """How the air was stated, as people write it.

    Parameters
    ----------
    air : Air
        What was stated.

    Returns
    -------
    str
        "kr 0.13", "ke 4/3", "ke 1.2", "dN/dh -39 N/km" or "no refraction".
    """
    if air.n_gradient_per_km is not None:
        return f"dN/dh {air.n_gradient_per_km:.10g} N/km"
    if air.ke is not None:
        if abs(air.ke - KE_RADIO) <= FOUR_THIRDS_WITHIN:
            return "ke 4/3"
        return f"ke {air.ke:.10g}"
    if air.kr_or_default == 0.0:
        return "no refraction"
    return f"kr {air.kr_or_default:.10g}"


def _flattened(kappa_per_m: float) -> float:
    """Curvature [1/m], exactly 0 where it is too small to matter."""
    return 0.0 if abs(kappa_per_m) < FLAT_BELOW_PER_M else kappa_per_m


def _check(radius_m: float, *numbers: float) -> None:
    """Refuse a radius that is none and numbers that are not finite."""
    if not (math.isfinite(radius_m) and radius_m > 0.0):
        msg = f"The earth's radius must be a finite number above 0 m, not {radius_m}."
        raise InputError(msg)
    for number in numbers:
        if not math.isfinite(number):
            msg = f"The bending needs finite numbers, not {number}."
            raise InputError(msg)
