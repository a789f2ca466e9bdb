"""The first line of an answer: the verdict in one or two sentences."""

from typing import Any, Final

from profiler.output.naming import capital, names_of
from profiler.output.numbers import DOWN, Show
from profiler.output.standing import standing

#: First word by verdict of the record.
VERDICT_WORDS: Final = {
    "clear": "SEEN",
    "blocked": "HIDDEN",
    "undetermined": "CANNOT SAY",
}

#: A decisive point this near to an end lies on that end's own ground [m]; our choice.
END_M: Final = 1.0

Json = dict[str, Any]


def first_line_parts(values: Json, show: Show) -> tuple[str, str]:
    """The first line, cut where a figure breaks it.

    Parameters
    ----------
    values : dict
        The record.
    show : Show

    Returns
    -------
    tuple of two str
        Joined they are the first line.
    """
    if "radio" in values:
        from profiler.output.radio_words import radio_first_line  # only for radio

        parts = radio_first_line(values, show)
        if parts is not None:
            return parts
    tell = {"blocked": _hidden, "undetermined": _cannot_say, "clear": _seen}
    head, tail = tell[values["verdict"]](values, show)
    return f"{VERDICT_WORDS[values['verdict']]}. {head}", tail


def _hidden(values: Json, show: Show) -> tuple[str, str]:
    at = values["decisive"]
    eye, name = names_of(values)
    what = name if values["target"]["height_m"] == 0.0 else f"the top of {name}"
    over = show.height(-at["margin_m"])
    where = show.distance(at["distance_m"])
    there = standing(at)
    return (
        f"{capital(eye)} does not see {what}:",
        f" {there.name} at {where} {there.verb('stand')} {over} above the line.",
    )


def _cannot_say(values: Json, show: Show) -> tuple[str, str]:
    void, at = values["void"], values["decisive"]
    known = "No ground is known between"
    if at is not None:
        known = f"Known ground is clear by {show.height(at['margin_m'])}"
    length = show.run(void["end_m"] - void["start_m"])
    where = show.distance((void["start_m"] + void["end_m"]) / 2.0)
    above = show.height(void["blocks_above_m"], rounding=DOWN)
    return (
        f"{known};",
        f" {length} of path near {where} have no ground. Above {above} there would "
        "block.",
    )


def _seen(values: Json, show: Show) -> tuple[str, str]:
    target = values["target"]
    eye, name = names_of(values)
    sees = f"{capital(eye)} sees"
    if target["shown"] == "part":
        return _part(values, sees, show)
    if target["point_shown"] == "none":
        moved = show.height(target["aim_moved_m"])
        return (
            f"{sees} the top of {name}, {moved} before the point given;",
            f" that point itself lies behind its own hill.{_pass(values, show)}",
        )
    if target["height_m"] > 0.0:
        name = f"all {show.given(target['height_m'])} of {name}"
    return f"{sees} {name}:", _pass(values, show).replace(" The", " the")


def _part(values: Json, sees: str, show: Show) -> tuple[str, str]:
    target, rest = values["target"], values["horizon"]
    amount = show.height(target["visible_m"])
    whole, angle = show.given(target["height_m"]), show.arcmin(target["visible_arcmin"])
    there = standing(rest)
    it = "them" if there.is_plural else "it"
    return (
        f"{sees} the upper {amount} of {whole} ({angle});",
        f" {there.name} at {show.distance(rest['distance_m'])} {there.verb('hide')} "
        f"the rest, the line passes {it} by {show.height(rest['margin_m'])}.",
    )


def at_an_end(values: Json) -> str | None:
    """The end on whose own ground the decisive point lies; None when between them."""
    at = values["decisive"]
    end_m = values["path"]["distance_m"] - values["target"]["aim_moved_m"]
    if at["distance_m"] < END_M:
        return names_of(values)[0]
    return names_of(values)[1] if at["distance_m"] > end_m - END_M else None


def _pass(values: Json, show: Show) -> str:
    at = values["decisive"]
    if at is None:
        return " The path has no ground that counts."
    end = at_an_end(values)
    if end is not None and not values["grazing"]:
        return f" The ground at {end} itself is the tightest."
    where = show.distance(at["distance_m"])
    if values["grazing"]:
        return f" The line grazes {standing(at).name} at {where}."
    by = show.height(at["margin_m"])
    return f" The line passes {standing(at).name} at {where} by {by}."
