"""What mast can be built at one end of a radio path, and what it costs."""

import math
from dataclasses import dataclass
from typing import Final

from profiler.errors import InputError

#: Step to which heights are rounded up [m].
STEP_M: Final = 0.01
#: Highest mast sought [m]: above any built.
HIGHEST_M: Final = 1000.0
#: Share of a step by which rounding may miss a whole step [1].
WHOLE_STEP: Final = 1e-7
#: Heights nearer than this are one [m]; rounding of multiples of a section.
SAME_M: Final = 1e-9
#: Decimals kept of a multiple of a section [1]; rounding of the product.
DECIMALS: Final = 9


@dataclass(frozen=True, slots=True, kw_only=True)
class MastLimits:
    """What can be built at one end and what it costs."""

    least_m: float = 0.0
    """Lowest antenna height allowed [m]."""
    most_m: float = HIGHEST_M
    """Highest antenna height allowed [m]."""
    section_m: float = STEP_M
    """Masts come in multiples of this [m]."""
    cost_per_m: float = 1.0
    """Cost of a metre in any unit."""

    def __post_init__(self) -> None:
        """Refuse what cannot be built."""
        for value in (self.least_m, self.most_m, self.section_m, self.cost_per_m):
            if not (math.isfinite(value) and value >= 0.0):
                msg = f"Limits, sections and costs must be 0 or more, not {value:g}."
                raise InputError(msg)
        if self.section_m < STEP_M:
            msg = f"A mast section of {self.section_m:g} m is below {STEP_M:g} m."
            raise InputError(msg)
        if self.least_m > self.most_m:
            msg = (
                f"The lowest height allowed, {self.least_m:g} m, is above the "
                f"highest, {self.most_m:g} m."
            )
            raise InputError(msg)
        if not self.allows(self.rounded(self.least_m)):
            msg = (
                f"No multiple of {self.section_m:g} m lies between {self.least_m:g} "
                f"and {self.most_m:g} m."
            )
            raise InputError(msg)

    def rounded(self, agl_m: float) -> float:
        """The least height that can be built and is not below ``agl_m`` [m]."""
        return round_up(max(agl_m, self.least_m), self.section_m)

    def allows(self, agl_m: float) -> bool:
        """Whether a height is no higher than may be built."""
        return agl_m <= self.most_m + SAME_M


def round_up(value_m: float, step_m: float) -> float:
    """The least multiple of a step that is not below a value; infinite stays so [m]."""
    if not math.isfinite(value_m):
        return value_m
    return round(math.ceil(value_m / step_m - WHOLE_STEP) * step_m, DECIMALS)
