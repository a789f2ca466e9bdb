"""Loss by ground of one path: the figure to use, and every other for comparison."""

from dataclasses import dataclass

from profiler.model import SightLine
from profiler.radio.assess import TightPlace, assess, counted_ground
from profiler.radio.delta_bullington import DiffractionLoss
from profiler.radio.first_term import Polarization, check_polarization
from profiler.radio.loss_methods import (
    Case,
    MethodLoss,
    method_losses,
    rounded,
    unevenness,
)
from profiler.radio.method import MethodChoice, choose_method
from profiler.radio.obstruction import PART_F1, Obstruction, find_obstruction
from profiler.radio.sheet import loss_of, raw_profile, ray_length_m
from profiler.radio.spherical import check_sea_fraction, horizon_reach_m
from profiler.radio.waves import free_space_loss_db
from profiler.radio.waves import wavelength_m as wavelength_of
from profiler.sight.line import Line


@dataclass(frozen=True, slots=True, kw_only=True)
class PathLosses:
    """Loss by ground of one path."""

    frequency_hz: float
    wavelength_m: float
    sea_fraction: float
    polarization: str
    free_space_db: float
    headline: DiffractionLoss | None
    """Complete delta-Bullington, the figure to use; None where no method holds."""
    reason: str
    """Source of the headline, or why there is none."""
    suggested: MethodChoice | None
    """What figure 19 names for the obstacles found; None where no method holds."""
    obstacles: tuple[TightPlace, ...]
    """Distinct obstacles within 0.6 F1 of the line, the tightest first."""
    obstruction: Obstruction | None
    """Isolated or extended in the stated air, under a line that just grazes."""
    methods: tuple[MethodLoss, ...]
    """Every method, the headline first; empty where no method holds."""


def path_losses(
    line: SightLine,
    *,
    frequency_hz: float,
    sea_fraction: float = 0.0,
    polarization: Polarization = "horizontal",
) -> PathLosses:
    """Diffraction loss of an answer's path by every method of the Recommendation.

    Parameters
    ----------
    line : SightLine
        The path in its stated air; ground near the ends counts here even where the
        sight line was asked to leave it out.
    frequency_hz : float [Hz]
        10 MHz to 300 GHz.
    sea_fraction : float [1]
        Share of the path over sea, 0 to 1.
    polarization : str
        "horizontal" or "vertical".

    Returns
    -------
    PathLosses
        Delta-Bullington is the headline: the Recommendation points to it for profiles
        from an elevation model. The others are for comparison.

    Raises
    ------
    InputError
        If a number is outside its range.

    References
    ----------
    Rec. ITU-R P.526-16 (11/2025) sections 2 to 4.5.2 and figure 19.
    """
    check_sea_fraction(sea_fraction)
    check_polarization(polarization)
    wave = wavelength_of(frequency_hz)
    whole, reason = loss_of(
        line, frequency_hz, sea_fraction=sea_fraction, polarization=polarization
    )
    case = _case(line, frequency_hz, whole)
    free = free_space_loss_db(ray_length_m(line), frequency_hz=frequency_hz)
    return PathLosses(
        frequency_hz=frequency_hz,
        wavelength_m=wave,
        sea_fraction=sea_fraction,
        polarization=polarization,
        free_space_db=float(free),
        headline=None if case is None else whole,
        reason=reason,
        suggested=None if case is None else _suggested(case),
        obstacles=() if case is None else case.near,
        obstruction=None if case is None else case.found,
        methods=() if case is None else method_losses(case),
    )


def _case(
    line: SightLine, frequency_hz: float, whole: DiffractionLoss | None
) -> Case | None:
    """What the methods look at; None where the headline has no meaning."""
    held, raw = assess(line, frequency_hz=frequency_hz), raw_profile(line)
    radius = line.earth.effective_radius_m
    ray = Line(
        line.path.length_m, line.from_.amsl_m, line.to.amsl_m, line.earth.kappa_per_m
    )
    wave = wavelength_of(frequency_hz)
    found = find_obstruction(counted_ground(line), ray, wave)
    if whole is None or held is None or raw is None or radius is None or found is None:
        return None
    return Case(
        line=line,
        ray=ray,
        dist=raw[0],
        height=raw[1],
        wave=wave,
        radius=radius,
        whole=whole,
        tightest=held.obstacles[0],
        near=tuple(o for o in held.obstacles if o.share < PART_F1),
        found=found,
    )


def _suggested(case: Case) -> MethodChoice:
    """What figure 19 names; the radii of several tops nobody has surveyed."""
    uneven, allowed = unevenness(case)
    reach = horizon_reach_m(
        from_height_m=max(case.whole.effective_heights_m[0], 0.0),
        to_height_m=max(case.whole.effective_heights_m[1], 0.0),
        effective_radius_m=case.radius,
    )
    return choose_method(
        obstacles=len(case.near),
        in_sight=case.ray.length_m < reach,
        smooth=uneven <= allowed,
        radius_known=len(case.near) == 1 and rounded(case).applies,
    )
