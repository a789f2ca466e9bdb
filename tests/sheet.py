"""The words of an answer as a sheet on which what was read is struck out."""

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


def up_to(value: float, step: float) -> Check:
    """Told large enough, by less than a step, whatever zeros are left out."""

    def check(text: str) -> None:
        assert -1e-9 <= float(text) - value < step

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
