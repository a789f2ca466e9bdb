"""Trees and buildings over a stretch of path."""

import math
from dataclasses import dataclass
from enum import StrEnum

from profiler.errors import InputError
from profiler.model.note import Note


class CoverKind(StrEnum):
    """What stands on the ground."""

    TREES = "trees"
    BUILDING = "building"


@dataclass(frozen=True, slots=True, kw_only=True)
class CoverSpan:
    """Cover of one height over a stretch of path; constant inside its outline."""

    start_m: float
    """Where the path enters it, from the eye's end [m]."""
    end_m: float
    """Where the path leaves it [m]."""
    height_m: float
    """Above bare ground [m], > 0."""
    kind: CoverKind
    name: str
    """What it is called in the answer."""

    def __post_init__(self) -> None:
        """Refuse what is no stretch and no height."""
        numbers = (self.start_m, self.end_m, self.height_m)
        if not all(math.isfinite(value) for value in numbers):
            msg = f'Cover "{self.name}" needs finite numbers, not {numbers}.'
            raise InputError(msg)
        if self.height_m <= 0.0:
            msg = (
                f'Cover "{self.name}" is {self.height_m:g} m high. Give a height '
                "above 0, or leave it out."
            )
            raise InputError(msg)
        if self.end_m < self.start_m:
            msg = (
                f'Cover "{self.name}" ends at {self.end_m:g} m before it starts at '
                f"{self.start_m:g} m. Exchange the two."
            )
            raise InputError(msg)


@dataclass(frozen=True, slots=True, kw_only=True)
class PathCover:
    """The cover along one path, and what is not known of it."""

    spans: tuple[CoverSpan, ...]
    """In any order; they may overlap, and the highest counts."""
    notes: tuple[Note, ...] = ()
    """What the sources could not say."""
