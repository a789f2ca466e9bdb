"""Terrain line-of-sight profiler: does one point see another over real ground."""

from profiler.constants import VERSION
from profiler.earth import (
    apparent_size_deg,
    conversion_table,
    hidden_by_curvature_m,
    horizon_dip_deg,
    horizon_distance_m,
    horizon_distance_straight_m,
    kr_from_half_coefficient,
    kr_from_weather,
)
from profiler.errors import DemError, InputError, OutsideDemError, ProfilerError
from profiler.model import (
    Air,
    DemKind,
    Interpolation,
    Point,
    Shown,
    SightLine,
    Station,
    Verdict,
)
from profiler.output.answer import Answer, look
from profiler.radio.criteria import Criterion, RuleSet
from profiler.radio.delta_bullington import diffraction_loss
from profiler.radio.limits import MastLimits
from profiler.radio.plan import antenna_heights
from profiler.radio.rule_sets import worst_month_ke
from profiler.shapes import read_cover, read_sites
from profiler.sight.cover_sources import cover_along
from profiler.terrain import Terrain, open_terrain, sample_path

__all__ = [
    "VERSION",
    "Air",
    "Answer",
    "Criterion",
    "DemError",
    "DemKind",
    "InputError",
    "Interpolation",
    "MastLimits",
    "OutsideDemError",
    "Point",
    "ProfilerError",
    "RuleSet",
    "Shown",
    "SightLine",
    "Station",
    "Terrain",
    "Verdict",
    "antenna_heights",
    "apparent_size_deg",
    "conversion_table",
    "cover_along",
    "diffraction_loss",
    "hidden_by_curvature_m",
    "horizon_dip_deg",
    "horizon_distance_m",
    "horizon_distance_straight_m",
    "kr_from_half_coefficient",
    "kr_from_weather",
    "look",
    "open_terrain",
    "read_cover",
    "read_sites",
    "sample_path",
    "worst_month_ke",
]
