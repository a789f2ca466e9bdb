"""What the analysis found; field names are those of the JSON record."""

from dataclasses import dataclass
from enum import StrEnum

from profiler.model.arrays import BoolArray, FloatArray
from profiler.model.cover import CoverKind
from profiler.model.note import Note
from profiler.model.terrain import GeodesicPath, PathProfile


class Verdict(StrEnum):
    """Whether the line clears the ground."""

    CLEAR = "clear"
    BLOCKED = "blocked"
    UNDETERMINED = "undetermined"


class Shown(StrEnum):
    """How much of the target is seen."""

    WHOLE = "whole"
    PART = "part"
    NONE = "none"


@dataclass(frozen=True, slots=True, kw_only=True)
class Place:
    """One place on the path, with the ground and the line there."""

    distance_m: float
    """From the eye's end [m]."""
    lat_deg: float
    lon_deg: float
    ground_m: float
    """Bare or surface ground as the DEM gives it [m]."""
    cover_m: float
    """Trees or buildings added above that ground [m]."""
    sight_m: float
    """Height of the sight line [m]."""
    margin_m: float
    """Sight line minus ground and cover [m], positive = clear."""
    elevation_deg: float
    """Elevation angle of the ground and cover here, seen from the eye [deg]."""
    cover_name: str = ""
    """What the cover here is called; empty where there is none."""
    cover_kind: CoverKind | None = None
    """Whether it is trees or a building; None where there is none."""


@dataclass(frozen=True, slots=True, kw_only=True)
class Stretch:
    """A run of ground, with its cover, above the sight line."""

    start_m: float
    """From the eye's end [m]."""
    end_m: float
    worst_margin_m: float
    """Lowest margin in it [m], negative."""
    worst_at_m: float
    """Where that is [m]."""
    lat_deg: float
    lon_deg: float
    cover_name: str = ""
    """What the cover at its worst place is called; empty for bare ground."""
    cover_kind: CoverKind | None = None
    """Whether that is trees or a building; None for bare ground."""


@dataclass(frozen=True, slots=True, kw_only=True)
class VoidStretch:
    """A run of path without ground, and the ground that would block there."""

    start_m: float
    end_m: float
    lat_deg: float
    """Of the place where the line runs lowest in the void."""
    lon_deg: float
    blocks_above_m: float
    """Ground higher than this would block [m above the DEM's datum]."""


@dataclass(frozen=True, slots=True, kw_only=True)
class Target:
    """How much of the target is seen; heights on the plumb line at the target."""

    height_m: float
    """Top above ground [m]."""
    shown: Shown
    visible_m: float
    hidden_m: float
    visible_fraction: float | None
    """Of the height; None at height 0."""
    visible_arcmin: float
    """Angle at the eye between the aim point and the lowest visible point [′]."""
    above_crest_m: float | None
    """Aim point minus the ray over the front crest [m]; None without a crest."""
    own_hill_m: float
    """Radius of the summit's own hill [m]; 0 when it has none."""
    aim_moved_m: float
    """How far before the given point the aim point lies [m]."""
    point_shown: Shown
    """The same for the given point itself, its own hill counted as ground."""


@dataclass(frozen=True, slots=True, kw_only=True)
class Needed:
    """What would just clear the line; rounded so that a re-run is clear."""

    from_agl_m: float | None
    """Least height above ground at the eye's end, the other kept [m]."""
    to_agl_m: float | None
    """Least height above ground at the target's end, the other kept [m]."""
    both_extra_m: float | None
    """Least height to add at both ends [m]; negative: so much to spare."""
    ke: float | None
    """Least effective earth radius factor [1]; None when no positive one does."""
    kr: float | None
    """Least coefficient of refraction [1]."""
    dem_bias_m: float | None
    """Largest shift of all ground between the ends [m]; negative = lower."""
    dem_bias_at_m: float | None
    """The place that sets it, from the eye's end [m]."""
    from_stretch: int | None
    """Number, from 1, of the blocked stretch that sets ``from_agl_m``."""
    to_stretch: int | None
    both_stretch: int | None


@dataclass(frozen=True, slots=True, kw_only=True)
class Bending:
    """Curvature of the earth less that of the ray, in every form."""

    kappa_per_m: float
    """Effective curvature (1 − kr)/R [1/m]; 0 = flat, negative = duct."""
    radius_m: float
    """Euler radius R of the path [m]."""
    ke: float | None
    """1/(1 − kr) [1]; None when flat, negative in a duct."""
    kr: float
    effective_radius_m: float | None
    """1/kappa [m]; None when flat."""
    stated: str
    """How it was stated: "kr 0.13", "ke 4/3", "dN/dh -39 N/km", "no refraction"."""
    is_default: bool
    """Whether nobody stated it."""


@dataclass(frozen=True, slots=True, kw_only=True)
class EndReport:
    """One end of the path as it was used."""

    name: str
    lat_deg: float
    lon_deg: float
    ground_m: float | None
    """Ground in use [m]; None on a void with a height above sea level."""
    agl_m: float | None
    amsl_m: float
    dem_ground_m: float | None
    """What the DEM gives here [m]; differs from ``ground_m`` when surveyed."""
    ground_from: str
    """"dem", "surveyed" or "none"."""


@dataclass(frozen=True, slots=True, kw_only=True)
class OtherGround:
    """The same question with the DEM's ground instead of the surveyed one."""

    verdict: Verdict
    margin_m: float | None
    at_m: float | None
    """Where that margin is, from the eye's end [m]."""
    shown: Shown
    from_ground_m: float | None
    to_ground_m: float | None


@dataclass(frozen=True, slots=True, kw_only=True, eq=False)
class SightLine:
    """The answer: verdict, what decides it and what would change it."""

    verdict: Verdict
    grazing: bool
    """Whether the lowest margin is within a millimetre of touching."""
    margin_m: float | None
    """Margin at the decisive point [m]; None when no ground is known between."""
    decisive: Place | None
    first_block: Place | None
    horizon: Place | None
    front_crest: Place | None
    blocked_stretches: tuple[Stretch, ...]
    target: Target
    needed: Needed
    path: GeodesicPath
    from_elevation_deg: float
    """Elevation angle of the aim point from the eye [deg]."""
    to_elevation_deg: float
    """Elevation angle of the eye from the aim point [deg]."""
    earth: Bending
    from_: EndReport
    to: EndReport
    void: VoidStretch | None
    cautions: tuple[Note, ...]
    warnings: tuple[Note, ...]
    other_ground: OtherGround | None
    profile: PathProfile
    sight_m: FloatArray
    """(n,) height of the sight line at the profile's samples [m]."""
    margin_along_m: FloatArray
    """(n,) sight line minus ground and cover [m]; NaN where there is no ground."""
    ground_seen: BoolArray
    """(n,) whether the ground at the sample is seen from the eye."""
    aim_distance_m: float
    """Where the aim point lies [m]; the path's length unless it moved."""
    aim_m: float
    """Height of the aim point above the DEM's datum [m]."""
    ignore_near_m: float
    """Ground this near to either end was not counted [m]."""
    void_below_m: float
    """Voids that only higher ground could block count as clear [m]."""
