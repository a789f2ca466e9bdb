"""Frozen value objects that pass between the rooms; data only, checked once."""

from profiler.model.arrays import BoolArray, FloatArray, IntArray
from profiler.model.cover import CoverKind, CoverSpan, PathCover
from profiler.model.note import Note
from profiler.model.question import Air, Point, Station
from profiler.model.result import (
    Bending,
    EndReport,
    Needed,
    OtherGround,
    Place,
    Shown,
    SightLine,
    Stretch,
    Target,
    Verdict,
    VoidStretch,
)
from profiler.model.terrain import (
    DemKind,
    GeodesicPath,
    Interpolation,
    PathProfile,
    SourceFile,
)

__all__ = [
    "Air",
    "Bending",
    "BoolArray",
    "CoverKind",
    "CoverSpan",
    "DemKind",
    "EndReport",
    "FloatArray",
    "GeodesicPath",
    "IntArray",
    "Interpolation",
    "Needed",
    "Note",
    "OtherGround",
    "PathCover",
    "PathProfile",
    "Place",
    "Point",
    "Shown",
    "SightLine",
    "SourceFile",
    "Station",
    "Stretch",
    "Target",
    "Verdict",
    "VoidStretch",
]
