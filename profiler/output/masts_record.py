"""The masts' record: antenna heights that meet a rule, as JSON."""

from typing import Any, Final

from profiler.model import SightLine
from profiler.output.radio_record import criterion_record, rule_record
from profiler.output.record import SOFTWARE, note_record, record
from profiler.output.rounding import metres, metres_up, ratio
from profiler.radio.answer import RADIO_CAUTION
from profiler.radio.assess import rule_warnings
from profiler.radio.criteria import RuleSet
from profiler.radio.limits import MastLimits
from profiler.radio.masts import MastPair, MastPlan

#: Name and version of the masts' record.
MASTS_SCHEMA: Final = "overbrow/masts/1"

Json = dict[str, Any]


def masts_record(
    plan: MastPlan, line: SightLine, *, rule: RuleSet, frequency_hz: float
) -> Json:
    """A plan of antenna heights as plain values.

    Parameters
    ----------
    plan : MastPlan
    line : SightLine
        The path it was made for; its heights are not used.
    rule : RuleSet
        All its criteria hold at every pair of heights given.
    frequency_hz : float [Hz]

    Returns
    -------
    dict
        Heights in metres above ground, rounded up; None where none within the limits
        does or none was asked for.
    """
    shown = plan.for_given_to or plan.for_given_from or plan.equal
    path = record(line)
    return {
        "schema": MASTS_SCHEMA,
        "equal_agl_m": _end(plan.equal, "from_agl_m"),
        "from_agl_m": _end(plan.for_given_to, "from_agl_m"),
        "to_agl_m": _end(plan.for_given_from, "to_agl_m"),
        "given": {
            "from_agl_m": metres(plan.given_from_agl_m),
            "to_agl_m": metres(plan.given_to_agl_m),
        },
        "beyond": {
            "from_agl_m": metres_up(plan.from_beyond_agl_m),
            "to_agl_m": metres_up(plan.to_beyond_agl_m),
        },
        "limits": {"from": _limits(plan.near), "to": _limits(plan.far)},
        "governing": None if shown is None else criterion_record(shown.governing),
        "criteria": _criteria(plan, shown),
        "margins_at": None if shown is None else _heights(shown),
        "cheapest": None if plan.cheapest is None else _costed(plan.cheapest),
        "curve": _curve(plan),
        "rule": rule_record(rule),
        "frequency_hz": frequency_hz,
        **{k: path[k] for k in ("path", "terrain", "from", "to")},
        "cautions": [*path["cautions"], note_record(RADIO_CAUTION)],
        "warnings": [
            *path["warnings"],
            *(note_record(n) for n in rule_warnings(frequency_hz, rule)),
        ],
        "software": SOFTWARE,
    }


def _criteria(plan: MastPlan, shown: MastPair | None) -> list[Json]:
    """Every criterion with what it leaves at the pair shown; None without a pair."""
    margins = (None,) * len(plan.criteria) if shown is None else shown.margins_m
    return [
        {**criterion_record(c), "margin_m": metres(m)}
        for c, m in zip(plan.criteria, margins, strict=True)
    ]


def _curve(plan: MastPlan) -> list[Json]:
    return [
        {
            "from_agl_m": metres(near),
            "to_agl_m": metres(far),
            "governing": criterion_record(criterion),
        }
        for near, far, criterion in plan.curve
    ]


def _end(pair: MastPair | None, name: str) -> float | None:
    return None if pair is None else metres_up(float(getattr(pair, name)))


def _limits(limits: MastLimits) -> Json:
    return {
        "least_m": metres(limits.least_m),
        "most_m": metres(limits.most_m),
        "section_m": metres(limits.section_m),
        "cost_per_m": ratio(limits.cost_per_m),
    }


def _heights(pair: MastPair) -> Json:
    return {
        "from_agl_m": metres_up(pair.from_agl_m),
        "to_agl_m": metres_up(pair.to_agl_m),
    }


def _costed(pair: MastPair) -> Json:
    return {
        **_heights(pair),
        "cost": ratio(pair.cost),
        "governing": criterion_record(pair.governing),
        "margins_m": [metres(m) for m in pair.margins_m],
    }
