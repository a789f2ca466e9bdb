"""Antenna heights for an answer's path."""

import numpy as np

from profiler.errors import InputError
from profiler.model import SightLine
from profiler.radio.answer import Rule, rule_for
from profiler.radio.assess import counted_ground, void_ground
from profiler.radio.bench import Bench, bench_for
from profiler.radio.criteria import RuleSet
from profiler.radio.limits import MastLimits
from profiler.radio.masts import MastPlan, plan_masts
from profiler.radio.waves import wavelength_m


def antenna_heights(
    line: SightLine,
    *,
    frequency_hz: float,
    rule: Rule,
    near: MastLimits | None = None,
    far: MastLimits | None = None,
    given_from_agl_m: float | None = None,
    given_to_agl_m: float | None = None,
) -> tuple[MastPlan, RuleSet]:
    """Least, equal and cheapest antenna heights that meet every criterion of a rule.

    Parameters
    ----------
    line : SightLine
        The path; its own heights and air are not used.
    frequency_hz : float [Hz]
    rule : RuleSet, sequence of Criterion, str or Path
    near, far : MastLimits or None
        What can be built at the two ends.
    given_from_agl_m, given_to_agl_m : float or None [m]
        A height at one end for which the least one at the other is wanted.

    Returns
    -------
    MastPlan, RuleSet
        Heights above ground, rounded up and tried along the whole path; the rule.

    Raises
    ------
    InputError
        If ground at an end or between is unknown, or rule or limits cannot be used.
    """
    made = rule_for(rule, line, frequency_hz)
    plan = plan_masts(
        path_bench(line, frequency_hz=frequency_hz, rule=made),
        near=near,
        far=far,
        given_from_agl_m=given_from_agl_m,
        given_to_agl_m=given_to_agl_m,
    )
    return plan, made


def path_bench(line: SightLine, *, frequency_hz: float, rule: RuleSet) -> Bench:
    """An answer's path prepared for trying heights.

    Raises
    ------
    InputError
        If ground at an end or between is unknown.
    """
    grounds = line.from_.ground_m, line.to.ground_m
    if grounds[0] is None or grounds[1] is None:
        msg = "Antenna heights need ground at both ends: --from-ground, --to-ground."
        raise InputError(msg)
    void = void_ground(line).dist_m
    if void.size:
        msg = (
            f"{np.sum(void[:, 2] - void[:, 0]):.0f} m of the path have no known "
            "ground: no height can be named. Add elevation files or --sea-level."
        )
        raise InputError(msg)
    return bench_for(
        counted_ground(line),
        length_m=line.path.length_m,
        from_ground_m=grounds[0],
        to_ground_m=grounds[1],
        criteria=rule.criteria,
        wavelength_m=wavelength_m(frequency_hz),
        radius_m=line.path.radius_m,
    )
