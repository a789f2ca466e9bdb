"""Clearance criteria: the share of the first Fresnel zone to be free, at which ke."""

import math
from dataclasses import dataclass

from profiler.constants import M_PER_KM
from profiler.errors import InputError
from profiler.model import Note

#: Largest share of the first Fresnel zone that a rule may ask for [1]; our choice:
#: published rules ask for 1 at most, reflective paths for less than 3 zones.
MOST_F1 = 3.0
#: Most metres that a rule may add [m]; our choice: taller than any tree or building.
MOST_EXTRA_M = 1000.0
#: Largest ke of a criterion [1]; our choice: from there on the earth is flat to a
#: millimetre over any path.
MOST_KE = 1e6
#: Difference under which two factors are the same [1]; rounding of a fraction.
SAME_KE = 1e-12
#: Turn of the effective earth over a path from which on no line exists [rad].
QUARTER_TURN = math.pi / 2.0


@dataclass(frozen=True, slots=True, kw_only=True)
class Criterion:
    """Clearance asked for at one state of the air."""

    ke: float
    """Effective earth radius factor [1], > 0."""
    f1_fraction: float
    """Share of the first Fresnel zone's radius that must be free [1], >= 0."""
    extra_m: float = 0.0
    """Metres to add to that share, >= 0."""

    def __post_init__(self) -> None:
        """Refuse what is no criterion."""
        if not 0.0 < self.ke <= MOST_KE:
            msg = f"A criterion's ke must be above 0 and below 1e6, not {self.ke:g}."
            raise InputError(msg)
        if not 0.0 <= self.f1_fraction <= MOST_F1:
            msg = (
                f"A criterion's share of F1 must be between 0 and {MOST_F1:g}, not "
                f"{self.f1_fraction:g}."
            )
            raise InputError(msg)
        if not 0.0 <= self.extra_m <= MOST_EXTRA_M:
            msg = (
                f"A criterion's extra must be between 0 and {MOST_EXTRA_M:g} m, not "
                f"{self.extra_m:g} m."
            )
            raise InputError(msg)

    @property
    def text(self) -> str:
        """The criterion as the trade says it: "0.6 F1 at ke 4/3"."""
        extra = f" + {self.extra_m:g} m" if self.extra_m else ""
        return f"{self.f1_fraction:g} F1{extra} at ke {ke_text(self.ke)}"


def curvature_of(criterion: Criterion, *, radius_m: float, length_m: float) -> float:
    """Effective curvature that a criterion asks for on one path.

    Parameters
    ----------
    criterion : Criterion
    radius_m : float [m]
        Radius of the earth along the path.
    length_m : float [m]
        Length of the path.

    Returns
    -------
    float [1/m]

    Raises
    ------
    InputError
        If the earth would turn a quarter circle or more over the path.
    """
    # compared so, for a ke near 0 has no finite curvature
    if criterion.ke * radius_m * QUARTER_TURN <= length_m:
        msg = (
            f"At ke {criterion.ke:g} the effective earth turns a quarter circle or "
            f"more over {length_m / M_PER_KM:.0f} km: no line exists. Use a larger ke."
        )
        raise InputError(msg)
    return 1.0 / (criterion.ke * radius_m)


def ke_text(ke: float) -> str:
    """An effective earth radius factor as written in the trade."""
    for top, bottom in ((4, 3), (2, 3), (1, 2)):
        if abs(ke - top / bottom) < SAME_KE:
            return f"{top}/{bottom}"
    return f"{ke:.3f}".rstrip("0").rstrip(".")


@dataclass(frozen=True, slots=True, kw_only=True)
class RuleSet:
    """Criteria that must all hold, and where they come from."""

    name: str
    """Name under which it is asked for; "given" for criteria from options."""
    source: str
    """Document, section and equation; or who wrote it."""
    criteria: tuple[Criterion, ...]
    """All of them must hold."""
    notes: tuple[Note, ...] = ()
    """What was decided to get here."""

    def __post_init__(self) -> None:
        """Refuse a rule without a criterion."""
        if not self.criteria:
            msg = f'Rule set "{self.name}" has no criterion. Give at least one.'
            raise InputError(msg)
