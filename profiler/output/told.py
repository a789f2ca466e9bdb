"""A sight line with what other rooms add to its telling."""

from dataclasses import dataclass
from typing import TYPE_CHECKING

from profiler.model import SightLine

if TYPE_CHECKING:  # a walker's question need not load the radio room
    from profiler.radio.answer import RadioAnswer


@dataclass(frozen=True, slots=True, kw_only=True, eq=False)
class Told(SightLine):
    """A sight line and, for a radio path, its rule and sheet."""

    radio: "RadioAnswer | None" = None
    """What the radio room says; None when no frequency was given."""


def radio_of(line: SightLine) -> "RadioAnswer | None":
    """The radio part of an answer, if it has one."""
    return line.radio if isinstance(line, Told) else None
