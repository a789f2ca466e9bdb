"""Terrain line-of-sight profiler: does one point see another over real ground."""

import importlib as _importlib
import typing as _typing

if _typing.TYPE_CHECKING:
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

#: Where each public name lives. A name is loaded when it is first asked for: a walker's
#: question on the command line need not load the radio room
#: (docs/decisions/0008-names-loaded-when-asked-for.md).
_HOMES = {
    "Air": "profiler.model",
    "Answer": "profiler.output.answer",
    "Criterion": "profiler.radio.criteria",
    "DemError": "profiler.errors",
    "DemKind": "profiler.model",
    "InputError": "profiler.errors",
    "Interpolation": "profiler.model",
    "MastLimits": "profiler.radio.limits",
    "OutsideDemError": "profiler.errors",
    "Point": "profiler.model",
    "ProfilerError": "profiler.errors",
    "RuleSet": "profiler.radio.criteria",
    "Shown": "profiler.model",
    "SightLine": "profiler.model",
    "Station": "profiler.model",
    "Terrain": "profiler.terrain",
    "Verdict": "profiler.model",
    "antenna_heights": "profiler.radio.plan",
    "apparent_size_deg": "profiler.earth",
    "conversion_table": "profiler.earth",
    "cover_along": "profiler.sight.cover_sources",
    "diffraction_loss": "profiler.radio.delta_bullington",
    "hidden_by_curvature_m": "profiler.earth",
    "horizon_dip_deg": "profiler.earth",
    "horizon_distance_m": "profiler.earth",
    "horizon_distance_straight_m": "profiler.earth",
    "kr_from_half_coefficient": "profiler.earth",
    "kr_from_weather": "profiler.earth",
    "look": "profiler.output.answer",
    "open_terrain": "profiler.terrain",
    "read_cover": "profiler.shapes",
    "read_sites": "profiler.shapes",
    "sample_path": "profiler.terrain",
    "worst_month_ke": "profiler.radio.rule_sets",
}


def __getattr__(name: str) -> _typing.Any:
    """A public name, loaded when it is first asked for."""
    if name not in _HOMES:
        msg = f"module {__name__!r} has no attribute {name!r}"
        raise AttributeError(msg)
    value = getattr(_importlib.import_module(_HOMES[name]), name)
    globals()[name] = value
    return value


def __dir__() -> list[str]:
    """The public names."""
    return list(__all__)
