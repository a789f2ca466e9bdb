"""The words of an answer, read number by number against its record."""

import re
from collections.abc import Callable
from typing import Any

from profiler import Answer
from profiler.constants import FOOT_M, MILE_M

NUMBER = r"-?\d+(?:\.\d+)?"
#: Half of the record's last digit of metres [m].
RECORD_M = 0.0005

Check = Callable[[str], None]


class Sheet:
    """The words of one answer; what was read is struck out."""

    def __init__(self, answer: Answer, show_in: str) -> None:
        self.record = answer.record()
        self.left = answer.words(show_in=show_in)
        self.unit_m = 1.0 if show_in == "m" else FOOT_M
        short = self.record["path"]["distance_m"] < 2000.0
        self.far = {"m": "km", "ft": "mi"}[show_in]
        self.far_m = {"m": 1000.0, "ft": MILE_M}[show_in]
        if short:
            self.far, self.far_m = show_in, self.unit_m
        self.unit = show_in

    def take(self, pattern: str, *checks: Check, times: int = 1) -> None:
        """Find a pattern, check its numbers and strike it out."""
        pattern = pattern.replace("#", f"({NUMBER})")
        pattern = pattern.replace("UNIT", self.unit).replace("FAR", self.far)
        for _ in range(times):
            found = re.search(pattern, self.left)
            assert found, f"{pattern}\nis not in\n{self.left}"
            for text, check in zip(found.groups(), checks, strict=True):
                check(text)
            self.left = self.left[: found.start()] + self.left[found.end() :]

    def take_run(self, before: str, after: str, value_m: float) -> None:
        """A part of the path: short ones in metres or feet, whole."""
        if value_m < {"m": 1000.0, "ft": MILE_M}[self.unit]:
            self.take(f"{before}# UNIT{after}", self.height(value_m))
        else:
            self.take(f"{before}# FAR{after}", self.distance(value_m))

    def height(self, value_m: float) -> Check:
        return nearest(value_m, self.unit_m)

    def up(self, value_m: float) -> Check:
        """Told high enough, by less than a step: what the words say must suffice."""

        def check(text: str) -> None:
            over = float(text) * self.unit_m - value_m
            assert -1e-6 <= over < step_of(text) * self.unit_m + 1e-6

        return check

    def down(self, value_m: float) -> Check:
        def check(text: str) -> None:
            under = value_m - float(text) * self.unit_m
            assert -1e-6 <= under < step_of(text) * self.unit_m + 1e-6

        return check

    def distance(self, value_m: float) -> Check:
        return nearest(value_m, self.far_m)


def step_of(text: str) -> float:
    return float(10.0 ** -len(text.partition(".")[2]))


def nearest(value: float, unit: float = 1.0) -> Check:
    def check(text: str) -> None:
        assert abs(float(text) * unit - value) <= step_of(text) / 2.0 * unit + 1e-9

    return check


def degrees(value: float) -> Check:
    return nearest(abs(value))


def place(sheet: Sheet, before: str, after: str, at: dict[str, Any], gap: str) -> None:
    letters = "NS"[at["lat_deg"] < 0.0] + gap + "EW"[at["lon_deg"] < 0.0]
    north, east = letters.split(gap)
    sheet.take(
        f"{before}# {north}{gap}# {east}{after}",
        degrees(at["lat_deg"]),
        degrees(at["lon_deg"]),
    )


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
        sheet.take(
            "he line passes ground at # FAR by # UNIT",
            sheet.distance(at["distance_m"]),
            sheet.height(at["margin_m"]),
        )


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
    if angle < 0.05:
        sheet.take(f"{before}under 0.1′{after}")
    else:
        sheet.take(f"{before}#′{after}", nearest(angle))


def read_air_and_ground(sheet: Sheet) -> None:
    earth, files = sheet.record["earth"], sheet.record["terrain"]["files"]
    sheet.take("kr #", nearest(earth["kr"]))
    if earth["ke"] is None:
        sheet.take("ke infinite")
    else:
        sheet.take("ke #", nearest(earth["ke"]))
    if files:
        sheet.take("posts # x # m", *(nearest(side) for side in files[0]["cell_m"]))
    if earth["stated"].startswith("dN"):
        sheet.take("dN/dh # N/km", nearest(-39.0))


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
        "# FAR, bearing #°, back #°; ([0-9 ]+) samples, ([0-9 ]+|none) without",
        sheet.distance(path["distance_m"]),
        nearest(path["azimuth_deg"]),
        nearest(path["back_azimuth_deg"]),
        lambda text: is_count(text, path["samples"]),
        lambda text: is_count(text.replace("none", "0"), path["void_samples"]),
    )


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
    if crest is not None and values["to"]["amsl_m"] > crest["ground_m"]:
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
    if needed["kr"] is not None:
        sheet.take("or kr #", Sheet.up(as_metres(sheet), needed["kr"]))


def as_metres(sheet: Sheet) -> Sheet:
    """The same sheet for numbers without a unit."""
    bare = object.__new__(Sheet)
    bare.__dict__ = {**sheet.__dict__, "unit_m": 1.0}
    return bare


def read_closers(sheet: Sheet) -> None:
    needed = sheet.record["needed"]
    if needed["dem_bias_m"] is None:
        return
    sheet.take("between more than # UNIT higher", sheet.down(needed["dem_bias_m"]))
    if "kr below" in sheet.left:
        sheet.take("kr below #", Sheet.up(as_metres(sheet), needed["kr"]))
    for end in ("from", "to"):
        value = needed[f"{end}_agl_m"]
        if re.search(r"\benough\b.* at ", sheet.left) and value:
            spare = sheet.record[end]["agl_m"] - value
            if spare > 0.15 * sheet.unit_m + RECORD_M:
                sheet.take("[a-zA-Z] at # UNIT", sheet.up(value))


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
        sheet.take("margin # UNIT", sheet.height(other["margin_m"]))
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
