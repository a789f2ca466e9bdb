"""A sight line with what other rooms add to its telling."""

from dataclasses import dataclass
from typing import TYPE_CHECKING

from profiler.model import SightLine

if TYPE_CHECKING:  # a walker's question need not load the radio room
    from profiler.radio.answer import RadioAnswer


@dataclass(frozen=True, slots=True, kw_only=True)
class Growth:
    """Trees growing over a period, and when they first spoil the answer."""

    metres_per_year: float
    """How fast trees grow [m a year]; buildings do not."""
    years: int
    """The period; the answer is for its end."""
    first_failing_year: int | None
    """First whole year in which the rule, or the bare line, fails; None: none does."""


@dataclass(frozen=True, slots=True, kw_only=True, eq=False)
class Told(SightLine):
    """A sight line and, for a radio path, its rule and sheet."""

    radio: "RadioAnswer | None" = None
    """What the radio room says; None when no frequency was given."""
    growth: Growth | None = None
    """Growth of trees that was asked for; None without."""


def radio_of(line: SightLine) -> "RadioAnswer | None":
    """The radio part of an answer, if it has one."""
    return line.radio if isinstance(line, Told) else None


def growth_of(line: SightLine) -> Growth | None:
    """The growth of trees that an answer was asked for, if any."""
    return line.growth if isinstance(line, Told) else None
