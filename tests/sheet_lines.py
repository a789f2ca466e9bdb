"""The words of an answer, read number by number against its record."""

import re
from typing import Any

from tests.sheet import RECORD_M, Sheet, nearest, place, up_to


def read_first_line(sheet: Sheet) -> None:
    values = sheet.record
    at, target = values["decisive"], values["target"]
    if values["verdict"] == "blocked":
        sheet.take(
            "ground at # FAR stands # UNIT above the line",
            sheet.distance(at["distance_m"]),
            sheet.height(-at["margin_m"]),
        )
    elif values["verdict"] == "undetermined":
        read_cannot_say(sheet)
    elif target["shown"] == "part":
        horizon = values["horizon"]
        sheet.take(
            "the upper # UNIT of # UNIT ",
            sheet.height(target["visible_m"]),
            sheet.height(target["height_m"]),
        )
        read_angle(sheet, r"\(", r"\)")
        sheet.take(
            "ground at # FAR hides the rest, the line passes it by # UNIT",
            sheet.distance(horizon["distance_m"]),
            sheet.height(horizon["margin_m"]),
        )
    else:
        if target["height_m"] > 0.0:
            sheet.take("sees all # UNIT of", sheet.height(target["height_m"]))
        if at is None:
            return
        if ends_decide(values):
            sheet.take("[Tt]he ground at .* itself is the tightest")
            return
        sheet.take(
            "he line passes ground at # FAR by # UNIT",
            sheet.distance(at["distance_m"]),
            sheet.height(at["margin_m"]),
        )


def ends_decide(values: dict[str, Any]) -> bool:
    """Whether the decisive point is within 1 m of an end of a clear line."""
    if values["verdict"] != "clear" or values["decisive"] is None:
        return False
    at, end = values["decisive"]["distance_m"], values["path"]["distance_m"]
    return bool(at < 1.0 or at > end - values["target"]["aim_moved_m"] - 1.0)


def read_cannot_say(sheet: Sheet) -> None:
    values, at = sheet.record, sheet.record["decisive"]
    void = values["void"]
    if at is not None:
        sheet.take("clear by # UNIT;", sheet.height(at["margin_m"]))
    sheet.take_run("", " of path", void["end_m"] - void["start_m"])
    sheet.take(
        "near # FAR have no ground",
        sheet.distance((void["end_m"] + void["start_m"]) / 2.0),
    )
    above = void["blocks_above_m"]
    sheet.take("Above # UNIT there would block", sheet.down(above))
    place(sheet, "check +at ", ": height", void, " ")
    sheet.take("Above # UNIT blocks", sheet.down(above))


def read_angle(sheet: Sheet, before: str, after: str) -> None:
    angle = sheet.record["target"]["visible_arcmin"]
    sign = {"m": "′", "ft": " arcmin"}[sheet.unit]
    if angle < 0.05:
        sheet.take(f"{before}under 0.1{sign}{after}")
    else:
        sheet.take(f"{before}#{sign}{after}", nearest(angle))


def read_air_and_ground(sheet: Sheet) -> None:
    earth, files = sheet.record["earth"], sheet.record["terrain"]["files"]
    sheet.take("kr #", nearest(earth["kr"]))
    if earth["ke"] is None:
        sheet.take("ke infinite")
    else:
        sheet.take("ke #", nearest(earth["ke"]))
    if len(files) > 1:
        sheet.take(" and # more(?=, posts)", nearest(len(files) - 1))
    if files:
        read_posts(sheet, [file["cell_m"] for file in files])
    if earth["stated"].startswith("dN"):
        sheet.take("dN/dh # N/km", nearest(-39.0))


def read_posts(sheet: Sheet, cells: list[list[float]]) -> None:
    """Cells of the finest file and, where others are coarser, of the coarsest."""
    finest, coarsest = min(cells, key=max), max(cells, key=max)
    if max(coarsest) > 1.05 * max(finest):
        sides = (*finest, *coarsest)
        sheet.take("posts # x # to # x # m", *(nearest(side) for side in sides))
    else:
        sheet.take("posts # x # m", *(nearest(side) for side in cells[0]))


def read_ends(sheet: Sheet) -> None:
    for role in ("from", "to"):
        end = sheet.record[role]
        place(sheet, f"\n{role} .*?", "", end, "  ")
        if end["ground_m"] is None:
            sheet.take("no ground known +")
            sheet.take(
                "(?:top|eye) # UNIT above sea level", sheet.height(end["amsl_m"])
            )
            continue
        sheet.take("ground # UNIT( .surveyed.)?  ", sheet.height(end["ground_m"]), free)
        if end["agl_m"] > 0.0:
            sheet.take("(eye|top) # UNIT above it", free, sheet.height(end["agl_m"]))
    path = sheet.record["path"]
    sheet.take(
        "# FAR, bearing #°, back #°; ([0-9 ]+)(?= samples, )",
        sheet.distance(path["distance_m"]),
        nearest(path["azimuth_deg"]),
        nearest(path["back_azimuth_deg"]),
        lambda text: is_count(text, path["samples"]),
    )
    if path["void_m"] == 0.0:
        assert path["void_samples"] == 0
        sheet.take(" samples, none without ground")
    else:
        sheet.take_run(" samples, ", " without ground", path["void_m"])


def free(text: str | None) -> None:
    """A group that says no number."""


def is_count(text: str, value: int) -> None:
    assert int(text.replace(" ", "")) == value


def read_in_the_way(sheet: Sheet) -> None:
    stretches = sheet.record["blocked_stretches"]
    worst = sorted(stretches, key=lambda s: s["worst_margin_m"])[:8]
    for number, s in enumerate(stretches, start=1):
        if s not in worst:
            continue
        sheet.take(
            f"(?m)(^in the way|^) +{number}  #-# FAR +# UNIT at # FAR   ",
            free,
            sheet.distance(s["start_m"]),
            sheet.distance(s["end_m"]),
            sheet.height(-s["worst_margin_m"]),
            sheet.distance(s["worst_at_m"]),
        )
        place(sheet, " *", "", s, "  ")
    if len(stretches) > len(worst):
        left_out = len(stretches) - len(worst)
        sheet.take("and # lesser ones", nearest(left_out))


def read_shown(sheet: Sheet) -> None:
    values = sheet.record
    target, crest = values["target"], values["front_crest"]
    if values["verdict"] == "blocked":
        if target["height_m"] > 0.0:
            sheet.take("none of # UNIT;", sheet.height(target["height_m"]))
        horizon = values["horizon"]
        sheet.take(
            r"ray past (\d+|the ground at .*? (?:km|mi|m|ft)) goes # UNIT over",
            lambda text: is_stretch_at(text, values, horizon["distance_m"]),
            sheet.height(-target["above_crest_m"]),
        )
        return
    if target["shown"] == "part":
        share = 100.0 * target["visible_fraction"]
        if share < 0.5:
            sheet.take(r"\(under 1%\)")
        else:
            sheet.take(r"\(#%\)", nearest(share))
        sheet.take(
            "# UNIT of # UNIT",
            sheet.height(target["visible_m"]),
            sheet.height(target["height_m"]),
        )
        read_angle(sheet, ", ", " at the eye")
    elif target["height_m"] > 0.0 and values["verdict"] == "clear":
        sheet.take("all # UNIT,", sheet.height(target["height_m"]))
        read_angle(sheet, " ", " at the eye")
    # a structure seen whole says so already; a crest at the eye's feet is no crest
    tells_crest = (
        crest is not None
        and values["to"]["amsl_m"] > crest["ground_m"]
        and crest["distance_m"] > 200.0
        and (target["height_m"] == 0.0 or target["shown"] != "whole")
    )
    assert ("rises" in sheet.left) == tells_crest
    if tells_crest:
        sheet.take(
            "rises # UNIT above the crest in front at # FAR",
            sheet.height(target["above_crest_m"]),
            sheet.distance(crest["distance_m"]),
        )


def is_stretch_at(text: str, values: dict[str, Any], dist_m: float) -> None:
    stretch = values["blocked_stretches"][int(text) - 1]
    assert stretch["start_m"] <= dist_m <= stretch["end_m"]


def read_own_hill(sheet: Sheet) -> None:
    target = sheet.record["target"]
    if target["own_hill_m"] > 0.0:
        sheet.take("ground within # UNIT of", sheet.height(target["own_hill_m"]))
        hidden = "hidden" if target["point_shown"] == "none" else "seen all the same"
        sheet.take(f"without it: {hidden}")
    if target["point_shown"] == "none" and sheet.record["verdict"] == "clear":
        sheet.take("# UNIT before the point given", sheet.height(target["aim_moved_m"]))


def read_openers(sheet: Sheet) -> None:
    needed = sheet.record["needed"]
    sets = [
        needed[f"{end}_stretch"]
        for end in ("from", "to", "both")
        if needed[f"{end}_stretch"] is not None
    ]
    for end in ("from", "to"):
        if needed[f"{end}_agl_m"] is not None:
            sheet.take("[a-zA-Z] at # UNIT", sheet.up(needed[f"{end}_agl_m"]))
    sheet.take("or # UNIT more on both", sheet.up(needed["both_extra_m"]))
    if len(set(sets)) == 1:
        sheet.take("\\(# sets", nearest(sets[0]))
    else:
        sheet.take("\\(set by #, #, #", *(nearest(s) for s in sets))
    sheet.take("between # UNIT lower", sheet.up(-needed["dem_bias_m"]))
    # a ray as curved as the earth is a duct, which nobody may count on
    offers_kr = needed["kr"] is not None and needed["kr"] <= 0.99
    assert ("or kr" in sheet.left) == offers_kr
    if offers_kr:
        sheet.take("or kr #", up_to(needed["kr"], 0.01))
    if sheet.record["path"]["void_m"] > 0.0:
        length = sheet.record["path"]["void_m"]
        sheet.take_run("over known ground only: ", " of the path have none", length)


def read_closers(sheet: Sheet) -> None:
    needed = sheet.record["needed"]
    if needed["dem_bias_m"] is None:
        return
    read_tightest(sheet)
    sheet.take(" more than # UNIT higher", sheet.down(needed["dem_bias_m"]))
    # no air bends kilometres of ray upwards as hard as the earth curves down
    tells_kr = needed["kr"] is not None and needed["kr"] > -1.0
    assert ("kr below" in sheet.left) == tells_kr
    if tells_kr:
        sheet.take("kr below #", up_to(needed["kr"], 0.001))
    for end in ("from", "to"):
        value = needed[f"{end}_agl_m"]
        if re.search(r"\benough\b.* at ", sheet.left) and value:
            spare = sheet.record[end]["agl_m"] - value
            if spare > 0.15 * sheet.unit_m + RECORD_M:
                sheet.take("[a-zA-Z] at # UNIT", sheet.up(value))


def read_tightest(sheet: Sheet) -> None:
    """Where the ground is that the least rise closes, from the nearer end."""
    at = sheet.record["needed"]["dem_bias_at_m"]
    off_m = sheet.record["path"]["distance_m"] - at
    name = sheet.record["to"]["name"] or "the target"
    if at <= off_m:
        off_m, name = at, sheet.record["from"]["name"] or "the eye"
    if off_m >= 200.0:
        sheet.take("ground at # FAR(?= more than)", sheet.distance(at))
    elif off_m < 0.5 * sheet.unit_m:
        sheet.take(f"ground beside {name}(?= more than)")
    else:
        sheet.take(f"ground # UNIT from {name}(?= more than)", sheet.height(off_m))


def read_left_out(sheet: Sheet) -> None:
    settings = sheet.record["settings"]
    if settings["ignore_near_m"] > 0.0:
        sheet.take_run("ground within ", " of either end", settings["ignore_near_m"])
    if settings["sea_filled_m"] > 0.0:
        sheet.take_run("", " without ground, taken", settings["sea_filled_m"])
        sheet.take("water at # UNIT, as asked", sheet.height(settings["sea_level_m"]))
    voids = sheet.record["path"]["void_samples"]
    if sheet.record["verdict"] == "clear" and voids:
        height = settings["void_below_m"]
        sheet.take("where no ground stands, above # UNIT", sheet.height(height))


def read_rest(sheet: Sheet) -> None:
    at = sheet.record["decisive"]
    if ends_decide(sheet.record):
        assert "check" not in sheet.left
        at = None
    if sheet.record["verdict"] == "blocked":
        sheet.take(
            "check +at #: height",
            lambda text: is_stretch_at(text, sheet.record, at["distance_m"]),
        )
    if sheet.record["verdict"] == "clear" and at is not None:
        place(sheet, "check +at ", ": height", at, " ")
    if sheet.record["verdict"] != "undetermined" and at is not None:
        sheet.take("# UNIT decide", sheet.height(abs(at["margin_m"])))
    other = sheet.record["other_ground"]
    if other is not None:
        sheet.take(
            "margin # UNIT at # FAR",
            sheet.height(other["margin_m"]),
            sheet.distance(other["at_m"]),
        )
        end = sheet.record["to"]
        gap = end["ground_m"] - end["dem_ground_m"]
        side = "above" if gap > 0.0 else "below"
        sheet.take(f"survey # UNIT {side} the DEM", sheet.height(abs(gap)))
    sheet.take(
        r"careful(.|\n)*\nJudged for light\. For a radio path add --frequency\.\n", free
    )


def read_all(sheet: Sheet) -> None:
    """Read every line; what is left says no number."""
    read_first_line(sheet)
    read_air_and_ground(sheet)
    read_ends(sheet)
    read_in_the_way(sheet)
    read_shown(sheet)
    read_own_hill(sheet)
    if sheet.record["verdict"] == "blocked":
        read_openers(sheet)
    if sheet.record["verdict"] == "clear":
        read_closers(sheet)
    read_left_out(sheet)
    read_rest(sheet)
