"""Antenna heights in plain words; every number is the masts' record's."""

from typing import Any, Final

from profiler.constants import FOOT_M
from profiler.output.naming import capital, names_of
from profiler.output.numbers import DOWN, UP, Show, ratio
from profiler.output.radio_words import criterion_text, frequency_text
from profiler.output.words import LEAD

#: From this height on marking, lighting and registration rules may apply [m]; 200 ft,
#: 47 CFR 17.7.
MARKED_FROM_M: Final = 200.0 * FOOT_M
MASTS_CAUTION: Final = (
    "Above 60.96 m (200 ft) and near airfields marking, lighting and registration "
    "rules may apply; structure, climbing and RF exposure are for licensed practice "
    "and local codes."
)
#: Points of the trade-off told in words [1]; all are in the record.
TOLD: Final = 6

Json = dict[str, Any]


def masts_words(values: Json, *, show_in: str = "m") -> str:
    """A masts' record as a person reads it, several lines, one final newline.

    Parameters
    ----------
    values : dict
        From `masts_record`.
    show_in : str
        "m" or "ft".

    Raises
    ------
    InputError
        If ``show_in`` is no such unit.
    """
    show = Show(unit=show_in, path_m=values["path"]["distance_m"])
    eye, name = names_of(values)
    rows = [
        ("path", f"{show.length(values['path']['distance_m'])} from {eye} to {name}"),
        *_led("rule", _rule(values, show)),
        *_given(values, show),
        *_cheapest(values, show),
        *_led("trade-off", _curve(values, show)),
        ("careful", MASTS_CAUTION),
    ]
    first = first_masts_line(values, show)
    lines = [first, *(f"{lead:<{LEAD}}{text}" for lead, text in rows)]
    return "\n".join(lines) + "\n"


def _led(lead: str, texts: list[str]) -> list[tuple[str, str]]:
    """Texts with a lead word before the first."""
    return [(lead if k == 0 else "", text) for k, text in enumerate(texts)]


def first_masts_line(values: Json, show: Show) -> str:
    """The equal heights and what governs them."""
    radio = frequency_text(values["frequency_hz"])
    if values["equal_agl_m"] is None:
        return f"No equal heights within the limits meet the rule at {radio}."
    height = show.height(values["equal_agl_m"], rounding=UP)
    governs = ""
    if values["margins_at"]["from_agl_m"] == values["margins_at"]["to_agl_m"]:
        governs = f"; {criterion_text(values['governing'])} governs"
    return f"Equal antenna heights of {height} meet the rule at {radio}{governs}."


def _rule(values: Json, show: Show) -> list[str]:
    lines = []
    for criterion in values["criteria"]:
        left = criterion["margin_m"]
        told = "" if left is None else f"   leaves {show.height(left, rounding=DOWN)}"
        lines.append(f"{criterion_text(criterion)}{told}")
    at = values["margins_at"]
    if at is not None:
        near, far = (_up(show, at[k]) for k in ("from_agl_m", "to_agl_m"))
        lines.append(f"at {near} and {far} above ground")
    return lines


def _up(show: Show, agl_m: float) -> str:
    """A height that must suffice as printed."""
    return show.height(agl_m, rounding=UP)


def _given(values: Json, show: Show) -> list[tuple[str, str]]:
    eye, name = names_of(values)
    rows = []
    for role, mast, other, other_name in (
        ("from", eye, "to", name),
        ("to", name, "from", eye),
    ):
        given = values["given"][f"{other}_agl_m"]
        if given is not None:
            held = f"with {other_name} at {show.given(given)}"
            rows.append(("least", _least(values, role, mast, held, show)))
    return rows


def _least(values: Json, role: str, mast: str, held: str, show: Show) -> str:
    """The least height of one mast for the given other, or that none does."""
    least = values[f"{role}_agl_m"]
    if least is not None:
        return f"{capital(mast)} at {show.height(least, rounding=UP)} {held}"
    most = show.given(values["limits"][role]["most_m"])
    none = f"no height up to {most} at {mast} does {held}"
    beyond = values["beyond"][f"{role}_agl_m"]
    if beyond is None:
        return none
    return f"{none}; {show.height(beyond, rounding=UP)} would"


def _cheapest(values: Json, show: Show) -> list[tuple[str, str]]:
    eye, name = names_of(values)
    pair = values["cheapest"]
    if pair is None:
        return [("cheapest", "no pair within the limits meets the rule")]
    near, far = (_up(show, pair[k]) for k in ("from_agl_m", "to_agl_m"))
    text = (
        f"{capital(eye)} at {near}, {name} at {far}: cost {ratio(pair['cost'])}; "
        f"{criterion_text(pair['governing'])} governs"
    )
    tall = max(pair["from_agl_m"], pair["to_agl_m"]) > MARKED_FROM_M
    rows = [("cheapest", text)]
    if tall:
        rows.append(("", "one mast is above 60.96 m (200 ft)"))
    return rows


def _curve(values: Json, show: Show) -> list[str]:
    curve = values["curve"]
    step = max(1, (len(curve) - 1) // (TOLD - 1))
    return [
        f"{_up(show, p['from_agl_m'])} and {_up(show, p['to_agl_m'])}   "
        f"{criterion_text(p['governing'])}"
        for p in curve[::step]
    ]
