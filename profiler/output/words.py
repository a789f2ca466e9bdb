"""The answer in plain words; every number is the record's, at the rounding shown."""

from typing import Any, Final

from profiler.model import SightLine
from profiler.output.numbers import (
    DOWN,
    UP,
    Show,
    count,
    latitude,
    longitude,
    place,
    ratio,
)
from profiler.output.record import record

#: Coefficient of refraction that clear days exceed too seldom to count on [1];
#: radio's normal 4/3, which light reaches only in strong inversions; our choice.
KR_TO_COUNT_ON: Final = 0.25
#: Coefficient of refraction below which no kilometres-long ray was ever bent [1]; our
#: choice: radio's rarest ke of 1/2 is kr −1.
KR_OUT_OF_REACH: Final = -1.0
#: Width of the lead words [characters].
LEAD: Final = 13
#: Stretches listed before the rest are only counted [1].
MOST_LISTED: Final = 8

Json = dict[str, Any]


def words(line: SightLine, *, show_in: str = "m") -> str:
    """The whole answer as a person reads it, several lines, one final newline.

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
    lines = [
        first_line(values, show),
        _air_and_ground(values),
        "",
        *_ends(values, show),
        _path(values, show),
        "",
        *_in_the_way(values, show),
        *_shown(values, show),
        *_would_change(values, show),
        *_other_ground(values, show),
        *_check(values, show),
        *_careful(values),
        "Judged for light.",
    ]
    return "\n".join(lines) + "\n"


def headline(line: SightLine, *, show_in: str = "m") -> tuple[str, str]:
    """The first line in two short ones, for a figure.

    Parameters
    ----------
    line : SightLine
    show_in : str
        "m" or "ft".
    """
    values = record(line)
    show = Show(unit=show_in, path_m=values["path"]["distance_m"])
    return _first_line_parts(values, show)


def first_line(values: Json, show: Show) -> str:
    """The verdict in one or two sentences."""
    head, tail = _first_line_parts(values, show)
    return f"{head}{tail}"


def names_of(values: Json) -> tuple[str, str]:
    """What the two ends are called."""
    return values["from"]["name"] or "the eye", values["to"]["name"] or "the target"


def _capital(text: str) -> str:
    return text[:1].upper() + text[1:]


def _top_of(values: Json) -> str:
    name = names_of(values)[1]
    return name if values["target"]["height_m"] == 0.0 else f"the top of {name}"


def _first_line_parts(values: Json, show: Show) -> tuple[str, str]:
    if values["verdict"] == "blocked":
        return _hidden_line(values, show)
    if values["verdict"] == "undetermined":
        return _cannot_say_line(values, show)
    return _seen_line(values, show)


def _hidden_line(values: Json, show: Show) -> tuple[str, str]:
    at = values["decisive"]
    head = f"HIDDEN. {_capital(names_of(values)[0])} does not see {_top_of(values)}"
    over = show.height(-at["margin_m"])
    where = show.distance(at["distance_m"])
    return f"{head}:", f" ground at {where} stands {over} above the line."


def _cannot_say_line(values: Json, show: Show) -> tuple[str, str]:
    void, at = values["void"], values["decisive"]
    known = "No ground is known between"
    if at is not None:
        known = f"Known ground is clear by {show.height(at['margin_m'])}"
    length = show.height(void["end_m"] - void["start_m"])
    where = show.distance((void["start_m"] + void["end_m"]) / 2.0)
    above = show.height(void["blocks_above_m"])
    return (
        f"CANNOT SAY. {known};",
        f" {length} of path near {where} have no ground. Above {above} there would "
        "block.",
    )


def _seen_line(values: Json, show: Show) -> tuple[str, str]:
    target, at = values["target"], values["decisive"]
    eye, name = names_of(values)
    head = f"SEEN. {_capital(eye)} sees"
    if target["shown"] == "part":
        rest = values["horizon"]
        amount = show.height(target["visible_m"])
        whole = show.height(target["height_m"])
        angle = f"{target['visible_arcmin']:.1f}′"
        return (
            f"{head} the upper {amount} of {whole} ({angle});",
            f" ground at {show.distance(rest['distance_m'])} hides the rest, the line "
            f"passes it by {show.height(rest['margin_m'])}.",
        )
    if target["point_shown"] == "none":
        moved = show.height(target["aim_moved_m"])
        head = f"{head} the top of {name}, {moved} before the point given"
        return f"{head};", " that point itself lies behind its own hill." + _pass(
            at, show
        )
    what = f"all {show.height(target['height_m'])} of {name}"
    head = f"{head} {name if target['height_m'] == 0.0 else what}"
    if at is None:
        return f"{head}:", " no ground between them counts."
    if values["grazing"]:
        return (
            f"{head}:",
            f" the line grazes ground at {show.distance(at['distance_m'])}.",
        )
    return f"{head}:", _pass(at, show).replace(" The", " the")


def _pass(at: Json | None, show: Show) -> str:
    if at is None:
        return ""
    where, margin = show.distance(at["distance_m"]), show.height(at["margin_m"])
    return f" The line passes ground at {where} by {margin}."


def _air_and_ground(values: Json) -> str:
    earth, terrain = values["earth"], values["terrain"]
    ke = "flat" if earth["ke"] is None else f"ke {ratio(earth['ke'])}"
    kr = f"kr {ratio(earth['kr'])}"
    both = f"{ke} = {kr}" if earth["stated"].startswith("ke") else f"{kr} = {ke}"
    if earth["stated"].startswith("dN"):
        both = f"{earth['stated']}, {both}"
    how = "light, " + both + " (default)" if earth["is_default"] else both + " (given)"
    files = terrain["files"]
    name = files[0]["name"] if files else "no file"
    more = f" and {len(files) - 1} more" if len(files) > 1 else ""
    kind = {
        "bare": "bare ground",
        "surface": "surface model",
        "unknown": "bare or surface not stated",
    }[terrain["dem_kind"]]
    cell = files[0]["cell_m"] if files else [0.0, 0.0]
    posts = f"posts {_side(cell[0])} x {_side(cell[1])} m"
    way = (
        ""
        if terrain["interpolation"] == "bilinear"
        else f", {terrain['interpolation']}"
    )
    return f"Air: {how}.  Ground: {name}{more}, {posts}{way}, {kind}."


def _side(side_m: float) -> str:
    return f"{side_m:.0f}" if side_m >= 9.5 else ratio(side_m, 1)


def _ends(values: Json, show: Show) -> list[str]:
    names = [_capital(n) for n in names_of(values)]
    width = max(len(n) for n in names)
    lines = []
    for role, name, what in (("from", names[0], "eye"), ("to", names[1], "top")):
        end = values[role]
        where = f"{latitude(end['lat_deg'])}  {longitude(end['lon_deg'])}"
        lines.append(
            f"{role:<7}{name:<{width}}  {where}   {_height_of(end, what, show)}"
        )
    return lines


def _height_of(end: Json, what: str, show: Show) -> str:
    if end["ground_m"] is None:
        return f"no ground known   {what} {show.height(end['amsl_m'])} above sea level"
    source = " (surveyed)" if end["ground_from"] == "surveyed" else ""
    ground = f"ground {show.height(end['ground_m'])}{source}"
    if end["agl_m"] == 0.0:
        return f"{ground}   {what} on it"
    return f"{ground}   {what} {show.height(end['agl_m'])} above it"


def _path(values: Json, show: Show) -> str:
    path = values["path"]
    voids = count(path["void_samples"]) if path["void_samples"] else "none"
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
    decisive_at = values["decisive"]["distance_m"]
    listed = _listed(stretches)
    rows = []
    for number, s in listed:
        decides = s["start_m"] <= decisive_at <= s["end_m"]
        rows.append(
            f"{number}  {_from_to(s, show)}   {show.height(-s['worst_margin_m'])} at "
            f"{show.distance(s['worst_at_m'])}   {place(s['lat_deg'], s['lon_deg'])}"
            f"{'   decides' if decides else ''}"
        )
    if len(listed) < len(stretches):
        rows.append(
            f"and {len(stretches) - len(listed)} lesser ones, all in the record"
        )
    return _led("in the way", rows)


def _from_to(stretch: Json, show: Show) -> str:
    start, end = stretch["start_m"], stretch["end_m"]
    return f"{show.bare_distance(start)}-{show.distance(end)}"


def _listed(stretches: list[Json]) -> list[tuple[int, Json]]:
    """The worst stretches with their numbers, in order of distance."""
    numbered = list(enumerate(stretches, start=1))
    worst = sorted(numbered, key=lambda pair: pair[1]["worst_margin_m"])
    return sorted(worst[:MOST_LISTED])


def _shown(values: Json, show: Show) -> list[str]:
    target, crest = values["target"], values["front_crest"]
    lines = []
    height = target["height_m"]
    if values["verdict"] == "blocked" and height > 0.0:
        below = show.height(-target["above_crest_m"])
        where = show.distance(values["horizon"]["distance_m"])
        lines.append(
            f"none of {show.height(height)}; the lowest ray past the ground at {where} "
            f"goes {below} over the top"
        )
    elif height > 0.0 and target["shown"] != "none":
        lines.append(
            f"{show.height(target['visible_m'])} of {show.height(height)} "
            f"({target['visible_fraction']:.0%}), {target['visible_arcmin']:.1f}′ at "
            "the eye"
        )
    if crest is not None and values["verdict"] != "blocked":
        lines.append(
            f"rises {show.height(target['above_crest_m'])} above the crest in front at "
            f"{show.distance(crest['distance_m'])}"
        )
    if target["own_hill_m"] > 0.0:
        lines.append(
            f"ground within {show.height(target['own_hill_m'])} of the top counts as "
            f"its own hill; without it: {_without_hill(target)}"
        )
    return _led("shown", lines)


def _without_hill(target: Json) -> str:
    return "hidden" if target["point_shown"] == "none" else "seen all the same"


def _would_change(values: Json, show: Show) -> list[str]:
    needed = values["needed"]
    if values["verdict"] == "blocked":
        return _led("would open", _openers(values, needed, show))
    return _led("would close", _closers(values, needed, show))


def _openers(values: Json, needed: Json, show: Show) -> list[str]:
    eye, name = names_of(values)
    parts, sets = [], []
    if needed["from_agl_m"] is not None:
        parts.append(f"{eye} at {show.height(needed['from_agl_m'], rounding=UP)}")
        sets.append(needed["from_stretch"])
    if needed["to_agl_m"] is not None:
        parts.append(f"{name} at {show.height(needed['to_agl_m'], rounding=UP)}")
        sets.append(needed["to_stretch"])
    if needed["both_extra_m"] is not None:
        parts.append(f"{show.height(needed['both_extra_m'], rounding=UP)} more on both")
        sets.append(needed["both_stretch"])
    lines = []
    if parts:
        lines.append(", or ".join(parts) + _set_by(sets))
    other = []
    if needed["dem_bias_m"] is not None:
        lower = show.height(-needed["dem_bias_m"], rounding=UP)
        other.append(f"all ground between {lower} lower")
    if needed["kr"] is not None:
        other.append(_kr_text(needed["kr"]))
    if other:
        lines.append(("or " if lines else "") + "; or ".join(other))
    return lines or ["nothing short of other stations"]


def _set_by(sets: list[int | None]) -> str:
    known = [s for s in sets if s is not None]
    if not known or len(known) < len(sets):
        return ""
    if len(set(known)) == 1:
        how_many = {1: "it", 2: "both", 3: "all three"}[len(known)]
        return f"   ({known[0]} sets {how_many})"
    return "   (set by " + ", ".join(str(s) for s in known) + " in turn)"


def _kr_text(kr: float) -> str:
    doubt = ", more than you may count on" if kr > KR_TO_COUNT_ON else ""
    return f"kr {ratio(kr, 2, rounding=UP)}{doubt}"


def _closers(values: Json, needed: Json, show: Show) -> list[str]:
    eye, name = names_of(values)
    other = []
    if needed["dem_bias_m"] is not None and needed["dem_bias_m"] > 0.0:
        higher = show.height(needed["dem_bias_m"], rounding=DOWN)
        other.append(f"all ground between more than {higher} higher")
    if needed["kr"] is not None and needed["kr"] > KR_OUT_OF_REACH:
        other.append(f"kr below {ratio(needed['kr'], 2, rounding=UP)}")
    lines = ["; or ".join(other)] if other else []
    heights = []
    if needed["from_agl_m"] and needed["from_agl_m"] < (values["from"]["agl_m"] or 0.0):
        heights.append(f"{eye} at {show.height(needed['from_agl_m'], rounding=UP)}")
    if needed["to_agl_m"] and needed["to_agl_m"] < (values["to"]["agl_m"] or 0.0):
        heights.append(f"{name} at {show.height(needed['to_agl_m'], rounding=UP)}")
    if heights:
        lines.append(", or ".join(heights) + " would still be enough")
    return lines


def _other_ground(values: Json, show: Show) -> list[str]:
    other = values["other_ground"]
    if other is None:
        return []
    verdict = {"clear": "SEEN", "blocked": "HIDDEN", "undetermined": "CANNOT SAY"}
    margin = (
        ""
        if other["margin_m"] is None
        else f", margin {show.height(other['margin_m'])}"
    )
    gaps = []
    for role in ("from", "to"):
        end = values[role]
        if end["ground_from"] == "surveyed" and end["dem_ground_m"] is not None:
            gap = show.height(end["ground_m"] - end["dem_ground_m"])
            gaps.append(f"{role}: survey {gap} above the DEM")
    return _led(
        "DEM alone", [f"{verdict[other['verdict']]}{margin}   ({'; '.join(gaps)})"]
    )


def _check(values: Json, show: Show) -> list[str]:
    at = values["decisive"]
    if at is None:
        return []
    where = place(at["lat_deg"], at["lon_deg"])
    for number, s in enumerate(values["blocked_stretches"], start=1):
        if s["start_m"] <= at["distance_m"] <= s["end_m"]:
            where = str(number)
    decides = show.height(abs(at["margin_m"]))
    return _led("check", [f"at {where}: height of ground and trees. {decides} decide"])


def _careful(values: Json) -> list[str]:
    return _led("careful", [note["text"] for note in values["cautions"]])
