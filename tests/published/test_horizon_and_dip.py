"""Horizon distances and dips printed for seamen and radio planners.

Each test names where its numbers were read. The metric horizon rule 2.07·√m of some
printings of Bowditch is a known misprint (true 2.12) and is not used.
"""

import numpy as np
import pytest

from profiler.constants import FOOT_M, MEAN_RADIUS_M, MILE_M, NAUTICAL_MILE_M
from profiler.earth import (
    dip_short_of_horizon_deg,
    horizon_dip_deg,
    horizon_distance_m,
    horizon_distance_straight_m,
    ke_from_dip_rule,
    ke_from_horizon_rule,
    kr_from_ke,
)

#: Effective radius of Bowditch's constants: 3440.1 nautical miles / 0.8321.
BOWDITCH_RADIUS_M = 3440.1 / 0.8321 * NAUTICAL_MILE_M
#: Effective radius meant by 1.17·√ft in nautical miles.
LIGHT_LIST_RADIUS_M = MEAN_RADIUS_M * ke_from_horizon_rule(
    1.17, dist_unit_m=NAUTICAL_MILE_M, height_unit_m=FOOT_M
)


def horizon_nm(height_ft: float) -> float:
    dist_m = horizon_distance_m(height_ft * FOOT_M, radius_m=LIGHT_LIST_RADIUS_M)
    return dist_m / NAUTICAL_MILE_M


@pytest.mark.published
def test_bowditch_constants_give_its_horizon_rule_of_1_17() -> None:
    """Bowditch 1995/2002, table 12 and article 22; quoted in navigation texts."""
    dist_m = horizon_distance_m(FOOT_M, radius_m=BOWDITCH_RADIUS_M)
    # half the last printed digit
    assert dist_m / NAUTICAL_MILE_M == pytest.approx(1.17, abs=0.005)


@pytest.mark.published
def test_nine_feet_see_3_51_nautical_or_4_04_statute_miles() -> None:
    """A boating text, seen."""
    assert horizon_nm(9.0) == pytest.approx(3.51, abs=0.01)
    assert horizon_nm(9.0) * NAUTICAL_MILE_M / MILE_M == pytest.approx(4.04, abs=0.01)


@pytest.mark.published
@pytest.mark.parametrize(
    ("heights_ft", "printed_nm", "sum_nm", "within_nm"),
    [
        # a seamanship handbook's table, quoted; the quotation was seen
        pytest.param((16.0, 125.0), (4.7, 13.1), 17.8, 0.05, id="handbook"),
        # USCG Light List, quoted elsewhere, original not seen; 9.4 + 6.9 are printed
        # and summed after rounding, so the sum is 0.05 off
        pytest.param((65.0, 35.0), (9.4, 6.9), 16.3, 0.06, id="light list"),
        # a nautical text, seen
        pytest.param((170.0, 8.0), (15.25, 3.31), 18.56, 0.01, id="light and eye"),
    ],
)
def test_a_light_is_seen_over_the_sum_of_two_horizons(
    heights_ft: tuple[float, float],
    printed_nm: tuple[float, float],
    sum_nm: float,
    within_nm: float,
) -> None:
    ours_nm = [horizon_nm(height_ft) for height_ft in heights_ft]
    assert ours_nm == pytest.approx(printed_nm, abs=within_nm)
    assert sum(ours_nm) == pytest.approx(sum_nm, abs=within_nm)


@pytest.mark.published
def test_the_horizon_without_refraction_follows_the_printed_table() -> None:
    """Table of table-references.info, seen; it fits a radius of about 6378 km."""
    height_m = np.array([1.0, 2, 5, 10, 20, 50, 100, 500, 1000, 2000])
    printed_km = [3.6, 5.1, 8.0, 11.3, 16.0, 25.3, 35.7, 79.9, 112.9, 159.7]
    ours_m = horizon_distance_straight_m(height_m, radius_m=MEAN_RADIUS_M)
    assert (ours_m / 1000.0).tolist() == pytest.approx(printed_km, abs=0.1)


@pytest.mark.published
def test_a_metre_sees_3_57_km_without_refraction() -> None:
    """Paris Observatory's dictionary, seen: 3.57 for a radius of 6378 km."""
    ours_m = horizon_distance_m(1.0, radius_m=6_378_000.0)
    assert ours_m / 1000.0 == pytest.approx(3.57, abs=0.003)


@pytest.mark.published
def test_a_metre_sees_4_12_km_by_radio() -> None:
    """4.12·(√h1 + √h2) with the radius of Rec. ITU-R P.526; quoted elsewhere."""
    ours_m = horizon_distance_m(1.0, radius_m=8_500_000.0)
    assert ours_m / 1000.0 == pytest.approx(4.12, abs=0.005)


@pytest.mark.published
def test_dip_from_ten_metres_is_5_57_minutes() -> None:
    """1.76′·√m of Bowditch and the Nautical Almanac; quoted elsewhere."""
    radius_m = MEAN_RADIUS_M * ke_from_dip_rule(1.76, height_unit_m=1.0)
    ours_arcmin = 60.0 * horizon_dip_deg(10.0, radius_m=radius_m)
    assert ours_arcmin == pytest.approx(5.57, abs=0.01)


@pytest.mark.published
def test_both_forms_of_the_dip_rule_mean_the_same_air() -> None:
    """0.97′·√ft and 1.76′·√m, printed side by side; quoted elsewhere."""
    radius_m = MEAN_RADIUS_M * ke_from_dip_rule(0.97, height_unit_m=FOOT_M)
    ours_arcmin = 60.0 * horizon_dip_deg(1.0, radius_m=radius_m)
    # half the last printed digit
    assert ours_arcmin == pytest.approx(1.76, abs=0.005)


@pytest.mark.published
def test_dip_without_refraction_is_1_926_minutes_for_a_metre() -> None:
    """Message g23661 of a navigation mailing list, seen."""
    ours_arcmin = 60.0 * horizon_dip_deg(1.0, radius_m=MEAN_RADIUS_M)
    assert ours_arcmin == pytest.approx(1.926, abs=0.001)


@pytest.mark.published
def test_bowditch_refraction_is_kr_one_less_its_0_8321() -> None:
    """0.8321 of Bowditch, table 14, seen: the part of the curvature that is left."""
    kr = kr_from_ke(ke_from_dip_rule(0.97, height_unit_m=FOOT_M))
    assert kr == pytest.approx(1.0 - 0.8321, abs=0.001)


@pytest.mark.published
@pytest.mark.parametrize(
    ("height_ft", "dist_nm"),
    [(5.0, 0.1), (5.0, 0.2), (5.0, 0.5), (5.0, 1.0), (5.0, 2.0), (30.0, 2.0)],
)
def test_dip_short_of_the_horizon_follows_bowditch_constants(
    height_ft: float, dist_nm: float
) -> None:
    """Bowditch, table 14: constants seen, arrangement of the formula from memory."""
    ours_deg = dip_short_of_horizon_deg(
        dist_nm * NAUTICAL_MILE_M,
        height_m=height_ft * FOOT_M,
        radius_m=BOWDITCH_RADIUS_M,
    )
    slope = height_ft / (6076.1 * dist_nm) + 0.8321 * dist_nm / (2.0 * 3440.1)
    # 6076.1 ft for the nautical mile are 6076.12, a relative 3e-6 of 28′
    assert 60.0 * ours_deg == pytest.approx(
        60.0 * np.degrees(np.arctan(slope)), abs=1e-3
    )
