"""Two isolated edges, one behind the other.

Distances as in the Recommendation: a from the first end to edge 1, b between the edges,
c from edge 2 to the second end. Heights are those of the tops above the straight line
between the ends.
"""

import math
from dataclasses import dataclass

from profiler.radio.inputs import check_above_zero, check_finite
from profiler.radio.knife_edge import knife_edge_loss_db, nu_from_height
from profiler.radio.waves import FIELD_DB, POWER_DB, check_wavelength

#: Each edge's loss above which the correction of two similar edges holds [dB]; Rec.
#: ITU-R P.526-16 section 4.3.
CORRECTION_HOLDS_DB = 15.0
#: Correction of a dominant edge with the second edge next to it [dB]; Rec. ITU-R
#: P.526-16 (41).
DOMINANT_DB = 12.0


@dataclass(frozen=True, slots=True, kw_only=True)
class TwoEdgeLoss:
    """Loss over two edges, and what it is made of."""

    total_db: float
    """Loss relative to free space, never negative."""
    first_db: float
    """Loss of the edge next to the first end."""
    second_db: float
    """Loss of the edge next to the second end."""
    correction_db: float
    """What is added to the sum of both; negative for a dominant edge."""
    correction_holds: bool
    """Whether the correction is inside the range the Recommendation gives it."""


def similar_edges_loss(
    first_m: float,
    second_m: float,
    *,
    a_m: float,
    b_m: float,
    c_m: float,
    wavelength_m: float,
) -> TwoEdgeLoss:
    """Loss over two edges of about the same effect.

    Parameters
    ----------
    first_m, second_m : float [m]
        Tops of edges 1 and 2 above the line between the ends.
    a_m, b_m, c_m : float [m]
        Distances first end - edge 1 - edge 2 - second end, > 0.
    wavelength_m : float [m]
        Wavelength, 1 mm to 30 m.

    Returns
    -------
    TwoEdgeLoss
        J(ν(h1'; a, b)) + J(ν(h2'; b, c)) + L_c, with h1' above the line from the first
        end to top 2 and h2' above the line from top 1 to the second end. The
        Recommendation gives L_c for losses above about 15 dB each and leaves open what
        to do below. Here it is kept, the cautious choice, with ``correction_holds``
        False; it is 0 if one of the edges causes no loss, for then there are not two.

    Raises
    ------
    InputError
        If a number is outside its range.

    References
    ----------
    Rec. ITU-R P.526-16 (11/2025) section 4.3 equations (39) and (40).
    """
    _check(first_m, second_m, a_m, b_m, c_m, wavelength_m)
    over_first_m = first_m - second_m * a_m / (a_m + b_m)
    over_second_m = second_m - first_m * c_m / (b_m + c_m)
    first_db = _edge_db(over_first_m, a_m, b_m, wavelength_m)
    second_db = _edge_db(over_second_m, b_m, c_m, wavelength_m)
    lower_db = min(first_db, second_db)
    ratio = (a_m + b_m) * (b_m + c_m) / (b_m * (a_m + b_m + c_m))
    correction_db = POWER_DB * math.log10(ratio) if lower_db > 0.0 else 0.0
    return TwoEdgeLoss(
        total_db=first_db + second_db + correction_db,
        first_db=first_db,
        second_db=second_db,
        correction_db=correction_db,
        correction_holds=lower_db > CORRECTION_HOLDS_DB,
    )


def dominant_edge_loss(
    first_m: float,
    second_m: float,
    *,
    a_m: float,
    b_m: float,
    c_m: float,
    wavelength_m: float,
) -> TwoEdgeLoss:
    """Loss over two edges of which one dominates.

    Parameters
    ----------
    first_m, second_m : float [m]
        Tops of edges 1 and 2 above the line between the ends.
    a_m, b_m, c_m : float [m]
        Distances first end - edge 1 - edge 2 - second end, > 0.
    wavelength_m : float [m]
        Wavelength, 1 mm to 30 m.

    Returns
    -------
    TwoEdgeLoss
        L1 + L2 − T_c, L1 of the dominant edge M (the larger h/F1) over the whole path,
        L2 of the other over the line from M to the far end. If the lower edge does not
        reach the line between the ends (q <= 0) T_c has no meaning and is left out,
        with ``correction_holds`` False.

    Raises
    ------
    InputError
        If a number is outside its range.

    References
    ----------
    Rec. ITU-R P.526-16 (11/2025) section 4.3 equations (41) to (43).
    """
    _check(first_m, second_m, a_m, b_m, c_m, wavelength_m)
    first_nu = _nu(first_m, a_m, b_m + c_m, wavelength_m)
    second_nu = _nu(second_m, a_m + b_m, c_m, wavelength_m)
    if second_nu > first_nu:
        mirrored = _first_dominates(second_m, first_m, c_m, b_m, a_m, wavelength_m)
        second_db, first_db, correction_db = mirrored
    else:
        first_db, second_db, correction_db = _first_dominates(
            first_m, second_m, a_m, b_m, c_m, wavelength_m
        )
    return TwoEdgeLoss(
        total_db=max(first_db + second_db + correction_db, 0.0),
        first_db=first_db,
        second_db=second_db,
        correction_db=correction_db,
        correction_holds=min(first_m, second_m) > 0.0,
    )


def _first_dominates(
    first_m: float, second_m: float, a: float, b: float, c: float, wave: float
) -> tuple[float, float, float]:
    """L1, L2 and −T_c of the Recommendation, edge 1 being the dominant one M [dB]."""
    first_db = _edge_db(first_m, a, b + c, wave)
    over_second_m = second_m - first_m * c / (b + c)
    second_db = _edge_db(over_second_m, b, c, wave)
    p = _nu(first_m, a, b + c, wave)
    q = _nu(second_m, a + b, c, wave)
    if q <= 0.0:
        return first_db, second_db, 0.0
    alpha = math.atan(math.sqrt(b * (a + b + c) / (a * c)))
    bracket_db = DOMINANT_DB - FIELD_DB * math.log10(2.0 / (1.0 - alpha / math.pi))
    return first_db, second_db, -bracket_db * (q / p) ** (2.0 * p)


def _nu(height_m: float, from_m: float, to_m: float, wave: float) -> float:
    """Parameter ν; for the whole path it is p (42a) or q (42b) as well."""
    return float(nu_from_height(height_m, from_m=from_m, to_m=to_m, wavelength_m=wave))


def _edge_db(height_m: float, from_m: float, to_m: float, wave: float) -> float:
    """J(ν) of one edge."""
    return float(knife_edge_loss_db(_nu(height_m, from_m, to_m, wave)))


def _check(
    first_m: float, second_m: float, a_m: float, b_m: float, c_m: float, wave_m: float
) -> None:
    """Refuse heights that are no numbers and distances that are not above 0."""
    check_finite(first_m, "Height of edge 1")
    check_finite(second_m, "Height of edge 2")
    check_above_zero(a_m, "Distance from the first end to edge 1")
    check_above_zero(b_m, "Distance between the edges")
    check_above_zero(c_m, "Distance from edge 2 to the second end")
    check_wavelength(wave_m)
