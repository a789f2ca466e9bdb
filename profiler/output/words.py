"""The answer in plain words; every number is the record's, at the rounding shown."""

import textwrap
from collections.abc import Collection
from typing import Any, Final

from profiler.model import SightLine
from profiler.output.changes import NEAR_M, closers, enough, openers
from profiler.output.first_line import VERDICT_WORDS, at_an_end, first_line_parts
from profiler.output.naming import capital, names_of, printable
from profiler.output.numbers import (
    DOWN,
    Show,
    count,
    latitude,
    longitude,
    percent,
    place,
    posts_text,
    ratio,
)
from profiler.output.record import record
from profiler.output.standing import standing

#: Code of the caution that every radio answer carries.
RADIO_CODE: Final = "radio-geometry"
#: Width of the lead words [characters].
LEAD: Final = 13
#: Width of a line that is broken if it runs on [characters]; two of them fit an A4.
WIDTH: Final = 100
#: Stretches listed before the rest are only counted [1].
MOST_LISTED: Final = 8

Json = dict[str, Any]


def words(line: SightLine, *, show_in: str = "m", assumed: Collection[str] = ()) -> str:
    """The whole answer as a person reads it, several lines, one final newline.

    Parameters
    ----------
    line : SightLine
    show_in : str
        "m" or "ft".
    assumed : collection of str
        The ends, "from" and "to", whose height is a default that nobody stated.

    Raises
    ------
    InputError
        If ``show_in`` is no such unit.
    """
    values = record(line)
    show = Show(unit=show_in, path_m=values["path"]["distance_m"])
    lines = [
        "".join(first_line_parts(values, show)),
        air_and_ground(values),
        "",
        *_ends(values, show, assumed),
        _path(values, show),
        "",
        *_led("in the way", _in_the_way(values, show)),
        *_radio_lines(values, show),
        *_led("shown", [] if "radio" in values else _shown(values, show)),
        *_would_change(values, show),
        *_led("growth", _growth(values)),
        *_led("left out", _left_out(values, show)),
        *_led("DEM alone", _other_ground(values, show)),
        *_led("check", _check(values, show)),
        *_led("careful", _careful(values)),
        _judged_for(values),
    ]
    return "\n".join(lines) + "\n"


def _radio_lines(values: Json, show: Show) -> list[str]:
    """Rule, tight places and the path sheet of a radio path."""
    if "radio" not in values:
        return []
    from profiler.output import radio_words as radio  # only for a radio path

    return [
        *_led("rule", radio.rule_lines(values, show)),
        *_led("tight", radio.tight_lines(values, show)),
        *_led("pointing", radio.pointing_lines(values, show)),
        *_led("ground", radio.ground_lines(values, show)),
        *_led("loss", radio.loss_lines(values)),
    ]


def _growth(values: Json) -> list[str]:
    """When growing trees first spoil the answer."""
    growth = values.get("growth")
    if growth is None:
        return []
    what = "the rule" if "radio" in values else "the line"
    year = growth["first_failing_year"]
    if year is None:
        ends = f"{what} holds for all {growth['years']} years"
    else:
        ends = f"{what} first fails in year {year}"
    rate = ratio(growth["metres_per_year"])
    return [f"trees by {rate} m a year, shown after {growth['years']} years: {ends}"]


def _judged_for(values: Json) -> str:
    if not _is_radio(values):
        return "Judged for light. For a radio path add --frequency."
    if "radio" not in values:
        return "Judged for radio; without known ground no rule can be held against it."
    from profiler.output.radio_words import frequency_text  # only for a radio path

    return f"Judged for radio at {frequency_text(values['radio']['frequency_hz'])}."


def _is_radio(values: Json) -> bool:
    """Whether a frequency was given; without known ground only a caution says so."""
    return any(note["code"] == RADIO_CODE for note in values["cautions"])


def headline(line: SightLine, *, show_in: str = "m") -> tuple[str, str]:
    """The first line in two short ones, for a figure.

    Parameters
    ----------
    line : SightLine
    show_in : str
        "m" or "ft".

    Raises
    ------
    InputError
        If ``show_in`` is no such unit.
    """
    values = record(line)
    show = Show(unit=show_in, path_m=values["path"]["distance_m"])
    return first_line_parts(values, show)


def air_and_ground(values: Json) -> str:
    """The second line: the air in both forms, and where the ground came from."""
    earth, terrain = values["earth"], values["terrain"]
    ke = "ke infinite" if earth["ke"] is None else f"ke {ratio(earth['ke'])}"
    kr = f"kr {ratio(earth['kr'])}"
    both = f"{ke} = {kr}" if earth["stated"].startswith("ke") else f"{kr} = {ke}"
    if earth["stated"].startswith("dN"):
        both = f"{earth['stated']}, {both}"
    wave = "radio" if _is_radio(values) else "light"
    how = f"{wave}, {both} (default)" if earth["is_default"] else f"{both} (given)"
    kind = {
        "bare": "bare ground",
        "surface": "surface model",
        "unknown": "bare or surface not stated",
    }[terrain["dem_kind"]]
    way = terrain["interpolation"]
    way = "" if way == "bilinear" else f", {way} post"
    return f"Air: {how}.  Ground: {_files(terrain['files'])}{way}, {kind}."


def _files(files: list[Json]) -> str:
    if not files:
        return "no file has any there"
    more = f" and {len(files) - 1} more" if len(files) > 1 else ""
    posts = posts_text([f["cell_m"] for f in files])
    return f"{printable(files[0]['name'])}{more}, {posts}"


def _ends(values: Json, show: Show, assumed: Collection[str]) -> list[str]:
    names = [capital(n) for n in names_of(values)]
    width = max(len(name) for name in names)
    rows = []
    for role, name, what in (("from", names[0], "eye"), ("to", names[1], "top")):
        end = values[role]
        told = _height_of(end, what, show)
        if role in assumed:
            told[-1] += " (default)"
        where = f"{latitude(end['lat_deg'])}  {longitude(end['lon_deg'])}"
        rows.append([f"{role:<4}", f"{name:<{width}}  {where}", *told])
    return _columns(rows)


def _height_of(end: Json, what: str, show: Show) -> list[str]:
    if end["ground_m"] is None:
        return [
            "no ground known",
            f"{what} {show.height(end['amsl_m'])} above sea level",
        ]
    source = " (surveyed)" if end["ground_from"] == "surveyed" else ""
    ground = f"ground {show.height(end['ground_m'])}{source}"
    if end["agl_m"] == 0.0:
        return [ground, "eye on it" if what == "eye" else "nothing on it"]
    return [ground, f"{what} {show.height(end['agl_m'])} above it"]


def _columns(rows: list[list[str]]) -> list[str]:
    """Rows whose cells stand under each other, three blanks apart."""
    widths = [max(len(cell) for cell in column) for column in zip(*rows, strict=True)]
    return [
        "   ".join(c.ljust(w) for c, w in zip(row, widths, strict=True)).rstrip()
        for row in rows
    ]


def _path(values: Json, show: Show) -> str:
    path = values["path"]
    voids = show.run(path["void_m"]) if path["void_m"] else "none"
    return (
        f"{'path':<7}{show.length(path['distance_m'])}, bearing "
        f"{path['azimuth_deg']:.1f}°, back {path['back_azimuth_deg']:.1f}°; "
        f"{count(path['samples'])} samples, {voids} without ground"
    )


def _led(lead: str, lines: list[str]) -> list[str]:
    """Lines behind a lead word, the rest indented below the first."""
    return [f"{lead if k == 0 else '':<{LEAD}}{text}" for k, text in enumerate(lines)]


def _in_the_way(values: Json, show: Show) -> list[str]:
    stretches = values["blocked_stretches"]
    if not stretches:
        return []
    decides = _number_at(values, values["decisive"]["distance_m"])
    listed = _listed(stretches)
    is_covered = any(s["cover_name"] for _, s in listed)
    rows = [
        [
            f"{number}  {show.bare_distance(s['start_m'])}-{show.distance(s['end_m'])}",
            f"{show.height(-s['worst_margin_m'])} at {show.distance(s['worst_at_m'])}",
            f"{latitude(s['lat_deg'])}  {longitude(s['lon_deg'])}",
            *([standing(s).name] if is_covered else []),
            "decides" if number == decides else "",
        ]
        for number, s in listed
    ]
    left_out = len(stretches) - len(listed)
    lesser = f"and {left_out} lesser ones, all in the record"
    return _columns(rows) + ([lesser] if left_out else [])


def _number_at(values: Json, dist_m: float) -> int | None:
    """Number of the blocked stretch that a place lies in."""
    for number, s in enumerate(values["blocked_stretches"], start=1):
        if s["start_m"] <= dist_m <= s["end_m"]:
            return number
    return None


def _listed(stretches: list[Json]) -> list[tuple[int, Json]]:
    """The worst stretches with their numbers, in order of distance."""
    numbered = list(enumerate(stretches, start=1))
    worst = sorted(numbered, key=lambda pair: pair[1]["worst_margin_m"])
    return sorted(worst[:MOST_LISTED], key=lambda pair: pair[0])


def _shown(values: Json, show: Show) -> list[str]:
    target = values["target"]
    lines = []
    if values["verdict"] == "blocked":
        lines.append(_shown_blocked(values, show))
    else:
        lines += _shown_clear(values, show)
    if target["own_hill_m"] > 0.0:
        without = "seen all the same"
        if target["point_shown"] == "none":
            without = "hidden"
        lines.append(
            f"ground within {show.given(target['own_hill_m'])} of the top counts as "
            f"its own hill; without it: {without}"
        )
    return lines


def _shown_blocked(values: Json, show: Show) -> str:
    target, horizon = values["target"], values["horizon"]
    height = target["height_m"]
    what = f"none of {show.given(height)}" if height > 0.0 else "nothing"
    number = _number_at(values, horizon["distance_m"])
    there = standing(horizon).name
    past = f"the {there} at {show.distance(horizon['distance_m'])}"
    over = show.height(-target["above_crest_m"])
    where = "the top" if height > 0.0 else "it"
    return (
        f"{what}; the lowest ray past {past if number is None else number} goes "
        f"{over} over {where}"
    )


def _shown_clear(values: Json, show: Show) -> list[str]:
    target, crest = values["target"], values["front_crest"]
    height = target["height_m"]
    # with a void on the path nobody knows; say so line by line
    known = "on known ground " if values["verdict"] == "undetermined" else ""
    lines = []
    if height > 0.0 and target["shown"] != "none":
        amount = f"all {show.given(height)}"
        if target["shown"] == "part":
            share = percent(target["visible_fraction"])
            seen = show.height(target["visible_m"])
            amount = f"{seen} of {show.given(height)} ({share})"
        angle = show.arcmin(target["visible_arcmin"])
        lines.append(f"{known}{amount}, {angle} at the eye")
    # looking down, "rises above the crest" would be true of the rays and read as false
    is_higher = crest is not None and values["to"]["amsl_m"] > crest["ground_m"]
    is_whole = height > 0.0 and target["shown"] == "whole"
    if is_higher and crest["distance_m"] > NEAR_M and not is_whole:
        lines.append(
            f"{known}rises {show.height(target['above_crest_m'])} above the crest in "
            f"front at {show.distance(crest['distance_m'])}"
        )
    return lines


def _would_change(values: Json, show: Show) -> list[str]:
    if values["verdict"] == "blocked":
        return _led("would open", openers(values, show))
    # a radio path's heights must meet its rule, not merely see
    if values["verdict"] == "undetermined" or "radio" in values:
        return []
    return [
        *_led("would close", closers(values, show)),
        *_led("enough", enough(values, show)),
    ]


def _left_out(values: Json, show: Show) -> list[str]:
    """Ground that does not count, and why: an answer must not hide it."""
    settings = values["settings"]
    lines = []
    if settings["ignore_near_m"] > 0.0:
        near = show.run(settings["ignore_near_m"])
        lines.append(f"ground within {near} of either end, as asked")
    if settings["sea_filled_m"] > 0.0:
        length = show.run(settings["sea_filled_m"])
        level = show.given(settings["sea_level_m"])
        lines.append(f"{length} without ground, taken as water at {level}, as asked")
    if values["verdict"] == "clear" and values["path"]["void_samples"] > 0:
        none_above = show.given(settings["void_below_m"])
        lines.append(
            f"unknown ground: it could block only where no ground stands, above "
            f"{none_above}"
        )
    return lines


def _other_ground(values: Json, show: Show) -> list[str]:
    other = values["other_ground"]
    if other is None:
        return []
    margin = ""
    if other["margin_m"] is not None:
        where = show.distance(other["at_m"])
        margin = f", margin {show.height(other['margin_m'])} at {where}"
    gaps = []
    for role in ("from", "to"):
        end = values[role]
        if end["ground_from"] == "surveyed" and end["dem_ground_m"] is not None:
            gap = end["ground_m"] - end["dem_ground_m"]
            side = "above" if gap >= 0.0 else "below"
            gaps.append(f"{role}: survey {show.height(abs(gap))} {side} the DEM")
    return [f"{VERDICT_WORDS[other['verdict']]}{margin}   ({'; '.join(gaps)})"]


def _check(values: Json, show: Show) -> list[str]:
    if values["verdict"] == "undetermined":
        void = values["void"]
        where = place(void["lat_deg"], void["lon_deg"])
        above = show.height(void["blocks_above_m"], rounding=DOWN)
        return [f"at {where}: height of ground. Above {above} blocks"]
    at = values["decisive"]
    if at is None or at_an_end(values) is not None:
        return []
    number = _number_at(values, at["distance_m"])
    where = place(at["lat_deg"], at["lon_deg"]) if number is None else str(number)
    decides = show.height(abs(at["margin_m"]))
    return [f"at {where}: height of ground and trees. {decides} decide"]


def _careful(values: Json) -> list[str]:
    return [
        text
        for note in values["cautions"]
        for text in textwrap.wrap(note["text"], WIDTH - LEAD)
    ]
