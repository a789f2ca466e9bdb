"""The year in which growing trees first break a rule."""

import pytest

from profiler.errors import InputError
from profiler.radio.growth import first_failing_year


@pytest.mark.parametrize(
    ("start_m", "by_m", "year"),
    [
        pytest.param(3.1, 0.4, 8, id="3.1 m at 0.4 m a year last seven years"),
        pytest.param(-0.5, 0.4, 0, id="fails today"),
        pytest.param(0.0, 0.4, 1, id="just met today"),
        pytest.param(4.0, 0.4, 11, id="touching in year 10 is met"),
        pytest.param(9.0, 0.4, None, id="never within 20 years"),
        pytest.param(1.0, 0.0, None, id="without growth"),
        pytest.param(8.0, 0.4, None, id="just met in the last year"),
        pytest.param(7.9, 0.4, 20, id="in the last year"),
    ],
)
def test_the_first_year_that_is_short_is_found(
    start_m: float, by_m: float, year: int | None
) -> None:
    found = first_failing_year(lambda at: start_m - by_m * at, years=20)
    assert found == year


def test_no_year_after_the_first_that_fails_is_asked_for() -> None:
    asked: list[int] = []

    def margin(year: int) -> float:
        asked.append(year)
        return 1.0 - year

    assert first_failing_year(margin, years=20) == 2
    assert asked == [0, 1, 2]


def test_a_dip_between_good_years_is_not_stepped_over() -> None:
    margins = [1.0, -1.0, 1.0, 1.0]
    assert first_failing_year(margins.__getitem__, years=3) == 1


def test_a_millimetre_short_is_met() -> None:
    assert first_failing_year(lambda _: -0.001, years=0) is None
    assert first_failing_year(lambda _: -0.0011, years=0) == 0


def test_years_below_0_are_refused() -> None:
    with pytest.raises(InputError, match="0 or more years, not -1"):
        first_failing_year(lambda _: 1.0, years=-1)


def test_a_margin_that_is_no_number_is_refused() -> None:
    with pytest.raises(InputError, match="year 0 is not a number"):
        first_failing_year(lambda _: float("nan"), years=3)
