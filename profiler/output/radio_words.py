"""What the words say about a radio path; every number is the record's."""

from typing import Any, Final

from profiler.output.naming import capital, names_of, printable
from profiler.output.numbers import DOWN, UP, Show, place, ratio
from profiler.output.standing import standing

#: Width of a criterion in the list [characters].
CRITERION: Final = 24
#: Ground this near to a mast is its foot [m]; our choice: the zone is thin there.
FOOT_M: Final = 50.0
#: Obstacles told in words [1]; all are in the record.
MOST_OBSTACLES: Final = 2
#: Hertz in a gigahertz and a megahertz.
HZ_PER_GHZ: Final = 1e9
HZ_PER_MHZ: Final = 1e6
#: Difference under which two ratios of the record are one fraction [1].
SAME_RATIO: Final = 1e-6

Json = dict[str, Any]


def frequency_text(frequency_hz: float) -> str:
    """A frequency with its unit."""
    if frequency_hz >= HZ_PER_GHZ:
        return f"{ratio(frequency_hz / HZ_PER_GHZ, 4)} GHz"
    return f"{ratio(frequency_hz / HZ_PER_MHZ, 3)} MHz"


def ke_words(ke: float) -> str:
    """An effective earth radius factor as written in the trade."""
    for top, bottom in ((4, 3), (2, 3), (1, 2)):
        if abs(ke - top / bottom) < SAME_RATIO:
            return f"{top}/{bottom}"
    return ratio(ke)


def criterion_text(criterion: Json) -> str:
    """A criterion of the record: "0.6 F1 + 3 m at ke 4/3"."""
    extra = f" + {ratio(criterion['extra_m'])} m" if criterion["extra_m"] else ""
    share = ratio(criterion["f1_fraction"])
    return f"{share} F1{extra} at ke {ke_words(criterion['ke'])}"


def radio_first_line(values: Json, show: Show) -> tuple[str, str] | None:
    """The first line of a radio path in two parts; None when the usual one serves.

    Parameters
    ----------
    values : dict
        The record, with its radio part.
    show : Show
    """
    tell = {
        "blocked": _blocked,
        "met": _met,
        "not_met": _not_met,
        "no_rule": _no_rule,
        # without known ground under the line the usual words name the place
        "undetermined": _cannot_say if values["verdict"] == "clear" else None,
    }.get(values["radio"]["state"])
    return None if tell is None else tell(values, show)


def _blocked(values: Json, show: Show) -> tuple[str, str]:
    at = values["decisive"]
    eye, name = names_of(values)
    over, where = show.height(-at["margin_m"]), show.distance(at["distance_m"])
    loss = values["radio"]["loss"]["diffraction_db"]
    told = "" if loss is None else f"; diffraction loss {loss:.1f} dB"
    there = standing(at)
    return (
        f"BLOCKED. {capital(eye)} does not see {name}:",
        f" {there.name} at {where} {there.verb('stand')} {over} above the line{told}.",
    )


def _asks(result: Json, show: Show) -> str:
    """What a criterion asks for at its tightest place [m]."""
    return show.height(result["at"]["clearance_m"] - result["margin_m"])


def _governing(values: Json) -> Json:
    radio = values["radio"]
    found: Json = next(r for r in radio["criteria"] if _is(r, radio["governing"]))
    return found


def _is(result: Json, criterion: Json) -> bool:
    return all(result[key] == value for key, value in criterion.items())


def _cannot_say(values: Json, show: Show) -> tuple[str, str]:
    length = show.run(values["path"]["void_m"])
    highest = show.given(values["settings"]["void_below_m"])
    return (
        "CANNOT SAY. Known ground meets the rule;",
        f" {length} of path have no ground, and ground up to {highest} there could "
        "break it.",
    )


def _line_is(result: Json, show: Show) -> str:
    at = result["at"]
    return (
        f"{show.height(at['clearance_m'])} at {show.distance(at['distance_m'])}, "
        f"{ratio(at['f1_share'], 2)} of F1"
    )


def _met(values: Json, show: Show) -> tuple[str, str]:
    result = _governing(values)
    tightest = values["radio"]["obstacles"][:1]
    if _is_at_a_foot(result, values) and tightest:
        # at a mast's own foot the zone is nothing and the mast's height is told
        at = {"at": tightest[0]}
        return (
            f"RULE MET. The line is clear by {_line_is(at, show)};",
            f" {criterion_text(result)} holds all along.",
        )
    spare = show.height(max(result["margin_m"], 0.0), rounding=DOWN)
    return (
        f"RULE MET. The line is clear by {_line_is(result, show)};",
        f" {criterion_text(result)} asks for {_asks(result, show)}: {spare} to spare.",
    )


def _is_at_a_foot(result: Json, values: Json) -> bool:
    """Whether a criterion leaves least within sight of a mast's own foot."""
    at, length = result["at"]["distance_m"], values["path"]["distance_m"]
    return bool(min(at, length - at) < FOOT_M)


def _not_met(values: Json, show: Show) -> tuple[str, str]:
    result = _governing(values)
    short = show.height(-result["margin_m"], rounding=UP)
    clear = result["at"]["clearance_m"] >= 0.0
    line = f"The line is clear by {_line_is(result, show)};"
    if not clear:
        over = show.height(-result["at"]["clearance_m"])
        where = show.distance(result["at"]["distance_m"])
        there = standing(result["at"])
        line = (
            f"At ke {ke_words(result['ke'])} {there.name} at {where} "
            f"{there.verb('stand')} {over} above the line;"
        )
    return (
        f"RULE NOT MET. {line}",
        f" {criterion_text(result)} asks for {_asks(result, show)}: {short} short.",
    )


def _no_rule(values: Json, show: Show) -> tuple[str, str]:
    plain, worst = values["radio"]["criteria"]
    return (
        f"No rule given. {criterion_text(plain)}: {_spare(plain, show)};",
        f" at ke {ke_words(worst['ke'])} (99.9 % of the worst month, continental "
        f"temperate) with {ratio(worst['f1_fraction'])} F1: {_spare(worst, show)}.",
    )


def _spare(result: Json, show: Show) -> str:
    if not result["met"]:
        return f"{show.height(-result['margin_m'], rounding=UP)} short"
    return f"{show.height(max(result['margin_m'], 0.0), rounding=DOWN)} to spare"


def rule_lines(values: Json, show: Show) -> list[str]:
    """Each criterion with what it leaves, and which governs."""
    radio = values["radio"]
    governing = radio["governing"]
    lines = []
    for result in radio["criteria"]:
        governs = _is(result, governing) and len(radio["criteria"]) > 1
        ends = "   governs" if governs else ""
        at = show.distance(result["at"]["distance_m"])
        lines.append(
            f"{criterion_text(result):<{CRITERION}}{_spare(result, show)} at {at}{ends}"
        )
    if radio["rule"]["name"] not in ("none", "given"):
        rule = radio["rule"]
        lines.append(printable(f"{rule['name']}: {rule['source']}"))
    found = radio["obstruction"]
    if found is not None and radio["rule"]["name"].startswith("p530"):
        run = f"{show.bare_distance(found['start_m'])}-{show.distance(found['end_m'])}"
        lines.append(f"obstruction {found['kind']}, {run}")
    return lines


def tight_lines(values: Json, show: Show) -> list[str]:
    """The tightest obstacles, and ground beside the path."""
    radio = values["radio"]
    lines = []
    for obstacle in radio["obstacles"][:MOST_OBSTACLES]:
        where = place(obstacle["lat_deg"], obstacle["lon_deg"])
        lines.append(
            f"{ratio(obstacle['f1_share'], 2)} of F1 ({show.height(obstacle['f1_m'])}) "
            f"at {show.distance(obstacle['distance_m'])}   {where}"
        )
    side = radio["side"]
    if side is not None:
        where = show.distance(side["distance_m"])
        lines.append(
            f"beside the path, {show.height(side['offset_m'])} to the {side['side']} "
            f"at {where}: {ratio(side['f1_share'], 2)} of F1 (bare ground under the "
            f"path {ratio(side['centre_f1_share'], 2)})"
        )
    return lines


def pointing_lines(values: Json, show: Show) -> list[str]:
    """Bearings, tilts and the length of the ray."""
    aim = values["radio"]["pointing"]
    eye, name = names_of(values)
    near = f"{aim['azimuth_deg']:.2f}°, tilt {_tilt(aim['from_tilt_deg'])}"
    far = f"{aim['back_azimuth_deg']:.2f}°, tilt {_tilt(aim['to_tilt_deg'])}"
    ray = show.length(aim["ray_m"])
    return [f"{capital(eye)} {near}; {capital(name)} {far}; ray {ray}"]


def _tilt(angle_deg: float) -> str:
    return f"{'up' if angle_deg >= 0.0 else 'down'} {abs(angle_deg):.2f}°"


def ground_lines(values: Json, show: Show) -> list[str]:
    """Clearance over the range of air, and where smooth ground would mirror."""
    radio = values["radio"]
    parts = [
        f"ke {ke_words(r['ke'])}: {show.height(r['clearance_m'])} "
        f"({ratio(r['f1_share'], 2)} of F1)"
        for r in radio["by_ke"]
    ]
    lines = ["; ".join(parts)]
    mirror = radio["reflection"]
    if mirror is not None:
        where = show.distance(mirror["distance_m"])
        lines.append(
            f"smooth ground would reflect at {where}; the line passes "
            f"{show.height(mirror['clearance_m'])} above ground there"
        )
    return lines


def loss_lines(values: Json) -> list[str]:
    """Free-space and diffraction loss, with the method."""
    loss = values["radio"]["loss"]
    free = f"free space {loss['free_space_db']:.1f} dB"
    if loss["diffraction_db"] is None:
        return [f"{free}; diffraction not computed: {loss['method']}"]
    return [f"{free}; diffraction {loss['diffraction_db']:.1f} dB ({loss['method']})"]
