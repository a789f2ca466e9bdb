"""Constants of curvature and refraction printed for surveyors and navigators."""

import pytest

from profiler.constants import FOOT_M, MEAN_RADIUS_M, MILE_M, NAUTICAL_MILE_M
from profiler.earth import (
    distance_by_vertical_angle_m,
    drop_parabola_m,
    hidden_by_curvature_m,
    horizon_distance_m,
    ke_from_drop_rule,
    kr_from_half_coefficient,
    kr_from_ke,
)

#: What Ghilani and Wolf print for both together: 0.0675 m at 1 km; quoted elsewhere.
KE_OF_0_0675 = ke_from_drop_rule(0.0675, drop_unit_m=1.0, dist_unit_m=1000.0)


@pytest.mark.published
def test_curvature_alone_is_0_07848_m_at_one_kilometre() -> None:
    """Ghilani and Wolf, Elementary Surveying, 13th ed., chapter 4; quoted elsewhere."""
    ours_m = drop_parabola_m(1000.0, radius_m=MEAN_RADIUS_M)
    assert ours_m == pytest.approx(0.07848, abs=1e-5)


@pytest.mark.published
@pytest.mark.parametrize(
    ("dist_m", "printed_ft", "within_ft"),
    [
        pytest.param(MILE_M, 0.574, 5e-4, id="a mile, quoted elsewhere"),
        pytest.param(1000.0 * FOOT_M, 0.0206, 5e-5, id="1000 ft, from memory"),
        pytest.param(1000.0 * FOOT_M, 0.021, 5e-4, id="1000 ft, surveying text, seen"),
    ],
)
def test_curvature_and_refraction_agree_in_metres_and_feet(
    dist_m: float, printed_ft: float, within_ft: float
) -> None:
    ours_m = drop_parabola_m(dist_m, radius_m=KE_OF_0_0675 * MEAN_RADIUS_M)
    assert ours_m / FOOT_M == pytest.approx(printed_ft, abs=within_ft)


@pytest.mark.published
def test_0_0675_takes_14_percent_off_the_curvature() -> None:
    """A surveying text, seen: refraction is 14 % of curvature."""
    assert kr_from_ke(KE_OF_0_0675) == pytest.approx(0.14, abs=1e-3)


@pytest.mark.published
@pytest.mark.parametrize(
    ("dist_m", "share", "printed_m"),
    [
        pytest.param(900.0, 1.0, 0.063, id="curvature 0.9 km"),
        pytest.param(2500.0, 1.0, 0.49, id="curvature 2.5 km"),
        pytest.param(700.0, 1.0 / 7.0, 0.0055, id="refraction 0.7 km"),
        pytest.param(1500.0, 1.0 / 7.0, 0.0252, id="refraction 1.5 km"),
        pytest.param(1000.0, 1.0, 0.0785, id="curvature 1 km"),
        pytest.param(1000.0, 1.0 / 7.0, 0.0112, id="refraction 1 km"),
        pytest.param(1000.0, 6.0 / 7.0, 0.0673, id="combined 1 km"),
    ],
)
def test_a_surveying_texts_worked_corrections_come_out(
    dist_m: float, share: float, printed_m: float
) -> None:
    """A surveying text with kr 1/7, seen; its 0.063 is 0.0636 cut short."""
    ours_m = share * drop_parabola_m(dist_m, radius_m=MEAN_RADIUS_M)
    assert ours_m == pytest.approx(printed_m, abs=1e-3)


@pytest.mark.published
def test_an_offshore_turbine_loses_15_m_at_19_km() -> None:
    """Question page of an offshore wind farm, seen; its radius is about 6383 km."""
    horizon_m = horizon_distance_m(2.0, radius_m=MEAN_RADIUS_M)
    assert horizon_m == pytest.approx(5053.0, abs=5.0)
    hidden_m = hidden_by_curvature_m(19_000.0, eye_m=2.0, radius_m=MEAN_RADIUS_M)
    assert hidden_m == pytest.approx(15.2, abs=0.1)


@pytest.mark.published
def test_landscape_guidance_correction_is_as_remembered() -> None:
    """Guidance on wind farms, Scotland, 2006/2017: table from memory, unverified."""
    half = 1.0 - kr_from_half_coefficient(0.075)
    for dist_km, remembered_m in ((5, 1.7), (10, 6.7), (15, 15.0), (20, 26.7)):
        ours_m = drop_parabola_m(1000.0 * dist_km, radius_m=6_367_000.0 / half)
        assert ours_m == pytest.approx(remembered_m, abs=0.05)


@pytest.mark.published
def test_bowditch_table_15_gives_20_5_miles_for_1400_feet_at_half_a_degree() -> None:
    """Bowditch, table 15, row quoted in navigation texts; original not seen."""
    dist_m = distance_by_vertical_angle_m(
        1400.0 * FOOT_M,
        elevation_deg=0.5,
        radius_m=3440.1 / 0.8321 * NAUTICAL_MILE_M,
    )
    # the table prints one decimal; its formula gives 20.5498, hence a hair of slack
    assert dist_m / NAUTICAL_MILE_M == pytest.approx(20.5, abs=0.0501)
    assert dist_m / NAUTICAL_MILE_M == pytest.approx(20.55, abs=0.01)
