"""In which year growing trees first break a rule."""

from collections.abc import Callable

from profiler.errors import InputError
from profiler.radio.assess import MET_WITHIN_M


def first_failing_year(
    worst_margin: Callable[[int], float], *, years: int
) -> int | None:
    """The first whole year in which the worst margin is short.

    Parameters
    ----------
    worst_margin : function
        From a year, 0 for today, to the least margin over what the rule asks for [m].
    years : int
        How many years are looked at, 0 or more.

    Returns
    -------
    int or None
        From 0 to ``years``; 0 when the rule fails today, None when it never fails.
        Each year is asked for by itself, in order, and none after the first that
        fails, so margins need not fall evenly.

    Raises
    ------
    InputError
        If ``years`` is negative, or a margin is not a number.
    """
    if years < 0:
        msg = f"Growth is looked at over 0 or more years, not {years}."
        raise InputError(msg)
    for year in range(years + 1):
        margin_m = worst_margin(year)
        if margin_m != margin_m:
            msg = f"The margin in year {year} is not a number."
            raise InputError(msg)
        if margin_m < -MET_WITHIN_M:
            return year
    return None
