"""The masts' record: antenna heights that meet a rule, as JSON."""

import json
from typing import Any, Final

from profiler.constants import VERSION
from profiler.model import SightLine
from profiler.output.radio_record import criterion_record
from profiler.output.record import record
from profiler.output.rounding import metres, ratio
from profiler.radio.criteria import RuleSet
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
    margins = (None,) * len(plan.criteria) if shown is None else shown.margins_m
    return {
        "schema": MASTS_SCHEMA,
        "equal_agl_m": None if plan.equal is None else metres(plan.equal.from_agl_m),
        "from_agl_m": _end(plan.for_given_to, "from_agl_m"),
        "to_agl_m": _end(plan.for_given_from, "to_agl_m"),
        "governing": None if shown is None else criterion_record(shown.governing),
        "criteria": [
            {**criterion_record(c), "margin_m": metres(m)}
            for c, m in zip(plan.criteria, margins, strict=True)
        ],
        "margins_at": None if shown is None else _heights(shown),
        "cheapest": None if plan.cheapest is None else _costed(plan.cheapest),
        "curve": [
            {
                "from_agl_m": metres(near),
                "to_agl_m": metres(far),
                "governing": criterion_record(criterion),
            }
            for near, far, criterion in plan.curve
        ],
        "rule": {"name": rule.name, "source": rule.source},
        "frequency_hz": frequency_hz,
        **{k: path[k] for k in ("path", "terrain", "from", "to", "cautions")},
        "warnings": path["warnings"],
        "software": {"name": "overbrow", "version": VERSION},
    }


def masts_text(values: Json) -> str:
    """The masts' record as JSON text, one final newline."""
    return json.dumps(values, indent=1, ensure_ascii=False, allow_nan=False) + "\n"


def _end(pair: MastPair | None, name: str) -> float | None:
    return None if pair is None else metres(float(getattr(pair, name)))


def _heights(pair: MastPair) -> Json:
    return {
        "from_agl_m": metres(pair.from_agl_m),
        "to_agl_m": metres(pair.to_agl_m),
    }


def _costed(pair: MastPair) -> Json:
    return {
        **_heights(pair),
        "cost": ratio(pair.cost),
        "governing": criterion_record(pair.governing),
        "margins_m": [metres(m) for m in pair.margins_m],
    }
