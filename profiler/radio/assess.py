"""Whether a radio path meets its clearance rule, which case governs, what is tight."""

from dataclasses import dataclass
from enum import StrEnum
from typing import Final

import numpy as np

from profiler.constants import KE_RADIO
from profiler.model import Note, Place, SightLine, Verdict
from profiler.radio.criteria import Criterion, RuleSet, curvature_of
from profiler.radio.obstruction import Obstruction, find_obstruction
from profiler.radio.rule_sets import (
    EXTENDED_F1,
    PLAIN_F1,
    named_rule_set,
    worst_month_ke,
)
from profiler.radio.tight import Tight, obstacles, tight_places
from profiler.radio.waves import wavelength_m as wavelength_of
from profiler.sight.ground import Ground, clip, ground_of
from profiler.sight.line import Line
from profiler.sight.places import place_at

#: Below this smaller shares of F1 may be needed to avoid absurd masts [Hz];
#: Rec. ITU-R P.530-19 section 2.2.2.1.
SMALLER_BELOW_HZ: Final = 2e9
#: Above this the uncertainty of the obstacle's height is to be added [Hz]; the same.
UNCERTAINTY_ABOVE_HZ: Final = 13e9
#: A criterion short by less than this is met [m]; the verdict's own band.
MET_WITHIN_M: Final = 0.001


class RuleState(StrEnum):
    """How a radio path stands against its rule."""

    MET = "met"
    NOT_MET = "not_met"
    BLOCKED = "blocked"
    UNDETERMINED = "undetermined"
    NO_RULE = "no_rule"


@dataclass(frozen=True, slots=True, kw_only=True)
class TightPlace:
    """A place with its clearance in metres and as a share of F1."""

    place: Place
    f1_m: float
    """Radius of the first Fresnel zone there [m]."""
    share: float
    """Clearance as a share of it [1]."""


@dataclass(frozen=True, slots=True, kw_only=True)
class CriterionResult:
    """One criterion held against the path."""

    criterion: Criterion
    margin_m: float
    """Least clearance minus what is asked for [m]; negative: so much short."""
    at: TightPlace
    """Where that is."""

    @property
    def is_met(self) -> bool:
        """Whether the criterion holds."""
        return self.margin_m >= -MET_WITHIN_M


@dataclass(frozen=True, slots=True, kw_only=True)
class RadioResult:
    """A radio path held against its rule."""

    frequency_hz: float
    wavelength_m: float
    state: RuleState
    rule: RuleSet
    """The rule asked for; without one, two that the trade would look at."""
    results: tuple[CriterionResult, ...]
    """In the order of the rule's criteria."""
    governing: CriterionResult
    """The one that leaves least."""
    obstacles: tuple[TightPlace, ...]
    """Distinct obstacles in the stated air, the tightest share of F1 first."""
    obstruction: Obstruction | None
    """Isolated or extended, at the worst month's ke."""
    warnings: tuple[Note, ...]


def counted_ground(line: SightLine) -> Ground:
    """Known ground of an answer that counts against the line."""
    return _counted(line).known


def void_ground(line: SightLine) -> Ground:
    """Pieces that count but have no known ground, at the highest it may stand."""
    void = _counted(line).void
    return Ground(void.dist_m, np.full(void.height_m.shape, line.void_below_m))


def _counted(line: SightLine) -> Ground:
    near = line.ignore_near_m
    return clip(ground_of(line.profile), near, line.path.length_m - near)


def line_at(line: SightLine, ke: float) -> Line:
    """The line between an answer's ends at an effective earth radius factor."""
    kappa = curvature_of(
        Criterion(ke=ke, f1_fraction=0.0),
        radius_m=line.path.radius_m,
        length_m=line.path.length_m,
    )
    return Line(line.path.length_m, line.from_.amsl_m, line.to.amsl_m, kappa)


def obstruction_of(line: SightLine, frequency_hz: float) -> Obstruction | None:
    """The obstruction of an answer's path at the worst month's ke."""
    worst = line_at(line, worst_month_ke(line.path.length_m))
    return find_obstruction(counted_ground(line), worst, wavelength_of(frequency_hz))


def rule_named(name: str, line: SightLine, frequency_hz: float) -> RuleSet:
    """A published rule set for an answer's path.

    Raises
    ------
    InputError
        If there is no such rule set.
    """
    found = obstruction_of(line, frequency_hz)
    isolated = found is None or found.is_isolated
    return named_rule_set(name, length_m=line.path.length_m, isolated=isolated)


def _what_the_trade_looks_at(line: SightLine) -> RuleSet:
    worst = worst_month_ke(line.path.length_m)
    return RuleSet(
        name="none",
        source="no rule given; Rec. ITU-R P.530-19 section 2.2.2 for orientation",
        criteria=(
            Criterion(ke=KE_RADIO, f1_fraction=PLAIN_F1),
            Criterion(ke=worst, f1_fraction=EXTENDED_F1),
        ),
    )


def assess(
    line: SightLine, *, frequency_hz: float, rule: RuleSet | None = None
) -> RadioResult | None:
    """Hold an answer's path against a clearance rule.

    Parameters
    ----------
    line : SightLine
        The path in its stated air.
    frequency_hz : float [Hz]
    rule : RuleSet or None
        None: no rule; the result says how two usual criteria stand, never "met".

    Returns
    -------
    RadioResult or None
        None when no ground is known between the ends.

    Raises
    ------
    InputError
        If the frequency is outside what is handled.
    """
    wave = wavelength_of(frequency_hz)
    ground = counted_ground(line)
    asked = rule or _what_the_trade_looks_at(line)
    if ground.dist_m.size == 0:
        return None
    results = tuple(_result(line, ground, c, wave) for c in asked.criteria)
    stated = Line(
        line.path.length_m,
        line.from_.amsl_m,
        line.to.amsl_m,
        line.earth.kappa_per_m,
    )
    at = tight_places(stated, ground, Criterion(ke=1.0, f1_fraction=0.0), wave)
    return RadioResult(
        frequency_hz=frequency_hz,
        wavelength_m=wave,
        state=_state(line, results, wave, has_rule=rule is not None),
        rule=asked,
        results=results,
        governing=min(results, key=lambda r: r.margin_m),
        obstacles=tuple(_tight_place(line, stated, at, k) for k in obstacles(at)),
        obstruction=obstruction_of(line, frequency_hz),
        warnings=rule_warnings(frequency_hz, asked),
    )


def _state(
    line: SightLine,
    results: tuple[CriterionResult, ...],
    wave_m: float,
    *,
    has_rule: bool,
) -> RuleState:
    if line.verdict is Verdict.BLOCKED:
        return RuleState.BLOCKED
    if has_rule and not all(r.is_met for r in results):
        return RuleState.NOT_MET
    if line.verdict is Verdict.UNDETERMINED:
        return RuleState.UNDETERMINED
    if not has_rule:
        return RuleState.NO_RULE
    # a void too high for the line may still stand in the zone, or in other air
    void = void_ground(line)
    if void.dist_m.size and not all(
        _result(line, void, r.criterion, wave_m).is_met for r in results
    ):
        return RuleState.UNDETERMINED
    return RuleState.MET


def _result(
    line: SightLine, ground: Ground, criterion: Criterion, wave_m: float
) -> CriterionResult:
    there = line_at(line, criterion.ke)
    at = tight_places(there, ground, criterion, wave_m)
    low = int(np.argmin(at.left_m))
    return CriterionResult(
        criterion=criterion,
        margin_m=float(at.left_m[low]),
        at=_tight_place(line, there, at, low),
    )


def _tight_place(line: SightLine, there: Line, at: Tight, index: int) -> TightPlace:
    dist, ground = float(at.dist_m[index]), float(at.ground_m[index])
    return TightPlace(
        place=place_at(line.path, there, dist, ground, profile=line.profile),
        f1_m=float(at.f1_m[index]),
        share=float(at.share[index]),
    )


def rule_warnings(frequency_hz: float, rule: RuleSet) -> tuple[Note, ...]:
    """What was decided about a rule, and what it leaves open at a frequency."""
    notes = list(rule.notes)
    if frequency_hz < SMALLER_BELOW_HZ:
        text = (
            "Below about 2 GHz smaller shares of F1 may have to do, to avoid absurd "
            "masts (Rec. ITU-R P.530-19 section 2.2.2.1)."
        )
        notes.append(Note(code="low-frequency", text=text))
    uncertain = all(c.extra_m == 0.0 for c in rule.criteria)
    if frequency_hz > UNCERTAINTY_ABOVE_HZ and uncertain:
        text = (
            "Above about 13 GHz add the uncertainty of the obstacle's height to the "
            "clearance: give it as extra in the criterion (Rec. ITU-R P.530-19 section "
            "2.2.2.1)."
        )
        notes.append(Note(code="high-frequency", text=text))
    return tuple(notes)
