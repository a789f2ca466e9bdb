"""The path, the ground along it and the files the ground came from."""

from dataclasses import dataclass, field
from enum import StrEnum

import numpy as np

from profiler.model.arrays import FloatArray, IntArray, frozen, frozen_int
from profiler.model.cover import CoverSpan
from profiler.model.note import Note
from profiler.model.question import Point


class Interpolation(StrEnum):
    """How ground between posts is made."""

    BILINEAR = "bilinear"
    """The bilinear surface through the four posts around."""
    HIGHEST = "highest"
    """The highest of the four posts around: the cautious choice."""
    NEAREST = "nearest"
    """The nearest post."""


class DemKind(StrEnum):
    """What surface an elevation model shows."""

    BARE = "bare"
    """The ground without trees and buildings."""
    SURFACE = "surface"
    """Tree tops and roofs included."""
    UNKNOWN = "unknown"
    """Nobody said."""


@dataclass(frozen=True, slots=True, kw_only=True)
class GeodesicPath:
    """The WGS84 geodesic between two points, with the one radius used along it."""

    start: Point
    """The eye's end."""
    end: Point
    """The target's end."""
    length_m: float
    """Length of the geodesic [m]."""
    azimuth_deg: float
    """Bearing at the start towards the end [deg], 0 to 360 from north clockwise."""
    back_azimuth_deg: float
    """Bearing at the end towards the start [deg], 0 to 360."""
    radius_m: float
    """Euler radius of curvature along the path at its midpoint [m]."""


@dataclass(frozen=True, slots=True, kw_only=True)
class SourceFile:
    """One elevation file that gave ground to the path."""

    name: str
    """File name without its folder."""
    bytes: int
    """Size of the file."""
    sha256: str | None
    """Hash of the file's bytes; None for a large file not asked for."""
    crs: str
    """Authority code of the CRS, or its name."""
    cell_m: tuple[float, float]
    """Ground distance between posts, down a column and along a row [m]."""


@dataclass(frozen=True, slots=True, kw_only=True, eq=False)
class PathProfile:
    """Ground along one path, exact between its samples.

    The path is cut into pieces at every row and column of posts. A piece has three
    samples, at its two ends and midway; through them the ground is a quadratic in
    distance, which for bilinear ground is the surface itself. Neighbouring pieces
    share a sample where the ground is continuous and have one each where it steps.
    """

    dist_m: FloatArray
    """(n,) distance from the eye's end, never falling; steps repeat a distance."""
    ground_m: FloatArray
    """(n,) elevation above the DEM's datum; NaN where there is none."""
    piece_start: IntArray
    """(k,) index i of each piece's first sample; it owns samples i, i+1 and i+2."""
    source: IntArray
    """(n,) index into ``files``; −1 where no file gives ground."""
    length_m: float
    """Length of the path [m]."""
    files: tuple[SourceFile, ...]
    """The files that gave ground, in the order of ``source``."""
    interpolation: Interpolation
    """How ground between posts was made."""
    dem_kind: DemKind
    """What surface the files show, as stated."""
    vertical_unit: str
    """Unit of the files' heights: m, ft or us-ft; several joined by a comma."""
    sea_level_m: float | None
    """Height given to sea voids on request [m]; None when voids stay voids."""
    sea_filled_m: float
    """Length of path that got that height [m]."""
    notes: tuple[Note, ...]
    """What looked wrong with the posts that were read."""
    cover_m: FloatArray = field(default_factory=lambda: np.zeros(0))
    """(n,) trees or buildings above ``ground_m``, one height on each piece [m]."""
    cover_index: IntArray = field(default_factory=lambda: np.zeros(0, dtype=np.int64))
    """(n,) index into ``cover_spans`` of what gives ``cover_m``; −1 for none."""
    cover_spans: tuple[CoverSpan, ...] = ()
    """Trees and buildings along the path, by where they start."""

    def __post_init__(self) -> None:
        """Freeze the arrays; a profile made without cover has none anywhere."""
        if self.cover_m.size == 0:
            none = np.full(self.dist_m.size, -1, dtype=np.int64)
            object.__setattr__(self, "cover_m", np.zeros(self.dist_m.size))
            object.__setattr__(self, "cover_index", none)
        object.__setattr__(self, "cover_m", frozen(self.cover_m))
        object.__setattr__(self, "cover_index", frozen_int(self.cover_index))
        object.__setattr__(self, "dist_m", frozen(self.dist_m))
        object.__setattr__(self, "ground_m", frozen(self.ground_m))
        object.__setattr__(self, "piece_start", frozen_int(self.piece_start))
        object.__setattr__(self, "source", frozen_int(self.source))

    @property
    def piece_samples(self) -> IntArray:
        """(k, 3) indices of the samples at each piece's start, middle and end."""
        samples: IntArray = self.piece_start[:, None] + np.arange(3)
        return samples

    @property
    def piece_bounds_m(self) -> tuple[FloatArray, FloatArray]:
        """(k,) distances at which each piece starts and ends."""
        return self.dist_m[self.piece_start], self.dist_m[self.piece_start + 2]

    @property
    def coarsest_cell_m(self) -> float:
        """Longest side of a cell of the files under the path [m]; 0 without files."""
        return max((side for f in self.files for side in f.cell_m), default=0.0)

    @property
    def top_m(self) -> FloatArray:
        """(n,) ground and cover together [m]; NaN where there is no ground."""
        top: FloatArray = self.ground_m + self.cover_m
        return top
