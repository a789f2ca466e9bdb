"""Units on the page: heights in metres or feet, distances, ticks, exaggeration."""

from dataclasses import dataclass
from typing import Final

from matplotlib.ticker import MaxNLocator

from profiler.constants import FOOT_M, M_PER_KM, MILE_M
from profiler.model import SightLine
from profiler.output.figures.page import PROFILE_AREA, Area
from profiler.output.numbers import Show, ratio

#: Steps between ticks, as multiples of a power of ten [1]; our choice.
NICE_STEPS: Final = (1, 2, 5, 10)
#: Share of the path's length left free at each end for the letters A and B [1].
END_SHARE: Final = 0.032
#: Exaggerations of this and more are told as whole numbers [1].
WHOLE_FROM: Final = 10.0
#: Most decimals of a round number [1].
TICK_DECIMALS: Final = 6
#: Metres in a unit of distance [m].
DISTANCE_UNIT_M: Final = {"m": 1.0, "ft": FOOT_M, "km": M_PER_KM, "mi": MILE_M}


@dataclass(frozen=True, slots=True, kw_only=True)
class Scale:
    """Units of one figure and the length of its path."""

    show: Show
    length_m: float
    """Length of the path [m]."""

    @property
    def height_unit(self) -> str:
        """Unit of heights: m or ft."""
        return self.show.unit

    @property
    def height_unit_m(self) -> float:
        """That unit [m]."""
        return DISTANCE_UNIT_M[self.show.unit]

    @property
    def distance_unit(self) -> str:
        """Unit of distances: km or mi, m or ft on a short path."""
        return self.show.distance_unit

    @property
    def distance_unit_m(self) -> float:
        """That unit [m]."""
        return DISTANCE_UNIT_M[self.distance_unit]

    def x_limits(self) -> tuple[float, float]:
        """Ends of the drawing, in the unit of distances."""
        length = self.length_m / self.distance_unit_m
        return -END_SHARE * length, (1.0 + END_SHARE) * length

    def x_in(self, distance_m: float, area: Area) -> float:
        """Where a place on the path stands on the page [in], in a drawing's area."""
        low, high = self.x_limits()
        share = (distance_m / self.distance_unit_m - low) / (high - low)
        return area.left + share * area.width

    def exaggeration(self, low_m: float, high_m: float) -> float:
        """How many times larger heights are drawn than distances [1]."""
        across = self.length_m * (1.0 + 2.0 * END_SHARE) / PROFILE_AREA.width
        return across / ((high_m - low_m) / PROFILE_AREA.height)


def scale_of(line: SightLine, show_in: str) -> Scale:
    """Units of a figure; InputError if heights cannot be shown in ``show_in``."""
    show = Show(unit=show_in, path_m=line.path.length_m)
    return Scale(show=show, length_m=line.path.length_m)


def nice_ticks(low: float, high: float, most: int) -> list[float]:
    """Round numbers between two limits, at most so many and one more."""
    ticks = MaxNLocator(nbins=most, steps=list(NICE_STEPS)).tick_values(low, high)
    return [float(t) for t in ticks if low <= t <= high]


def tick_texts(ticks: list[float]) -> list[str]:
    """Ticks without needless zeros, thousands set apart."""
    return [_apart(ratio(t, TICK_DECIMALS)) for t in ticks]


def _apart(text: str) -> str:
    whole, dot, rest = text.partition(".")
    sign = "−" if whole.startswith("-") else ""
    return f"{sign}{int(whole.lstrip('-')):,}".replace(",", " ") + dot + rest


def times_text(exaggeration: float) -> str:
    """An exaggeration in two figures or a whole number."""
    if exaggeration >= WHOLE_FROM:
        return f"{exaggeration:.0f}"
    return ratio(float(f"{exaggeration:.2g}"), TICK_DECIMALS)
