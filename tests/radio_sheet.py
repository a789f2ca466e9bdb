"""Reads the radio rows of the words, striking out every number that is told."""

import re
from typing import Any

from tests.sheet import Sheet, nearest, place

#: numbers of documents, not of this path
SOURCES = (
    r"p530-temperate: .*|plain-0.6: .*|\(Rec\. ITU-R P\.526-16.*\)|99\.9 % of the worst"
)


def radio_part(sheet: Sheet) -> str:
    """The first line and the rows of the radio room, continued rows with theirs."""
    lines = sheet.left.splitlines()
    kept, ours = [lines[0]], False
    for line in lines[1:]:
        lead = line[:13].strip()
        if lead:
            ours = lead in ("rule", "tight", "pointing", "ground", "loss")
        if ours:
            kept.append(line)
    return re.sub(SOURCES, "", "\n".join([*kept, lines[-1]]))


def take_criterion(sheet: Sheet, asked: dict[str, Any], after: str, *more: Any) -> None:
    extra = r" \+ # m" if asked["extra_m"] else ""
    known = {1.333333: "4/3", 0.666667: "2/3"}.get(asked["ke"])
    checks = [nearest(asked["f1_fraction"])]
    checks += [nearest(asked["extra_m"])] if extra else []
    checks += [] if known else [nearest(asked["ke"])]
    sheet.take(f"# F1{extra} at ke {known or '#'}{after}", *checks, *more)


def take_spare(sheet: Sheet, result: dict[str, Any], before: str, after: str) -> None:
    left = result["margin_m"]
    if result["met"]:
        sheet.take(f"{before}# UNIT to spare{after}", sheet.down(max(left, 0.0)))
    else:
        sheet.take(f"{before}# UNIT short{after}", sheet.up(-left))


def read_first_line(sheet: Sheet) -> None:
    radio = sheet.record["radio"]
    if radio["state"] == "blocked":
        at = sheet.record["decisive"]
        sheet.take(
            "ground at # FAR stands # UNIT above the line; diffraction loss # dB",
            sheet.distance(at["distance_m"]),
            sheet.height(-at["margin_m"]),
            nearest(radio["loss"]["diffraction_db"]),
        )
        return
    if radio["state"] == "no_rule":
        plain, worst = radio["criteria"]
        sheet.take("given. # F1 at ke 4/3: ", nearest(plain["f1_fraction"]))
        take_spare(sheet, plain, "", ";")
        sheet.take("at ke # \\(", nearest(worst["ke"]))
        sheet.take("with # F1: ", nearest(worst["f1_fraction"]))
        take_spare(sheet, worst, "", r"\.")
        return
    low = next(
        r
        for r in radio["criteria"]
        if all(r[key] == value for key, value in radio["governing"].items())
    )
    assert low["margin_m"] == min(r["margin_m"] for r in radio["criteria"])
    at = low["at"]
    if at["clearance_m"] >= 0.0:
        sheet.take(
            "clear by # UNIT at # FAR, # of F1;",
            sheet.height(at["clearance_m"]),
            sheet.distance(at["distance_m"]),
            nearest(at["f1_share"]),
        )
    else:
        sheet.take(
            "At ke # ground at # FAR stands # UNIT above the line;",
            nearest(low["ke"]),
            sheet.distance(at["distance_m"]),
            sheet.height(-at["clearance_m"]),
        )
    asks = at["clearance_m"] - low["margin_m"]
    take_criterion(sheet, low, " asks for # UNIT: ", sheet.height(asks))
    take_spare(sheet, low, "", r"\.")


def read_rows(sheet: Sheet) -> None:
    radio = sheet.record["radio"]
    for result in radio["criteria"]:
        take_criterion(sheet, result, " *")
        take_spare(sheet, result, "", " at ")
        sheet.take(
            "# FAR(   governs)?\n", sheet.distance(result["at"]["distance_m"]), _
        )
    found = radio["obstruction"]
    if radio["rule"]["name"].startswith("p530"):
        sheet.take(
            f"obstruction {found['kind']}, #-# FAR",
            sheet.distance(found["start_m"]),
            sheet.distance(found["end_m"]),
        )
    for at in radio["obstacles"][:2]:
        sheet.take(
            r"(?<![a-z(] )# of F1 \(# UNIT\) at # FAR   ",
            nearest(at["f1_share"]),
            sheet.height(at["f1_m"]),
            sheet.distance(at["distance_m"]),
        )
        place(sheet, "", "", at, " ")
    side = radio["side"]
    if side is not None:
        sheet.take(
            r"path, # UNIT to the .* at # FAR: # of F1 \(under the path #\)",
            sheet.height(side["offset_m"]),
            sheet.distance(side["distance_m"]),
            nearest(side["f1_share"]),
            nearest(side["centre_f1_share"]),
        )
    read_sheet(sheet, radio)


def _(text: str | None) -> None:
    """A group that says no number."""


def read_sheet(sheet: Sheet, radio: dict[str, Any]) -> None:
    aim = radio["pointing"]
    for side, tilt in (("azimuth", "from_tilt"), ("back_azimuth", "to_tilt")):
        up = "up" if aim[f"{tilt}_deg"] >= 0.0 else "down"
        sheet.take(
            f"#°, tilt {up} #°",
            nearest(aim[f"{side}_deg"]),
            nearest(abs(aim[f"{tilt}_deg"])),
        )
    sheet.take("ray # FAR", sheet.distance(aim["ray_m"]))
    for row, ke in zip(radio["by_ke"], ("2/3", "1", "4/3", "3"), strict=True):
        sheet.take(
            rf"ke {ke}: # UNIT \(# of F1\)",
            sheet.height(row["clearance_m"]),
            nearest(row["f1_share"]),
        )
    mirror = radio["reflection"]
    if mirror is not None:
        sheet.take(
            "reflect at # FAR; the line passes # UNIT above",
            sheet.distance(mirror["distance_m"]),
            sheet.height(mirror["clearance_m"]),
        )
    loss = radio["loss"]
    sheet.take("free space # dB", nearest(loss["free_space_db"]))
    sheet.take("diffraction # dB", nearest(loss["diffraction_db"]))
    unit = 1e9 if radio["frequency_hz"] >= 1e9 else 1e6
    sheet.take("radio at # [GM]Hz", nearest(radio["frequency_hz"] / unit))
