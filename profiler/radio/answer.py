"""Everything the radio room says about one path."""

from collections.abc import Sequence
from dataclasses import dataclass
from pathlib import Path
from typing import Final

from profiler.errors import InputError
from profiler.model import Note, SightLine
from profiler.radio.assess import RadioResult, assess, rule_named
from profiler.radio.criteria import Criterion, RuleSet
from profiler.radio.first_term import Polarization
from profiler.radio.rule_sets import read_rule_set
from profiler.radio.sheet import PathSheet, path_sheet
from profiler.radio.side import SidePlace, side_terrain
from profiler.terrain import Terrain

#: What no figure of this room covers; it stands in every radio answer.
RADIO_CAUTION: Final = Note(
    code="radio-geometry",
    text=(
        "Clearance and diffraction from a terrain model: no link budget, coverage, "
        "rain or multipath statistics. Verify by path survey; licences, RF exposure, "
        "structures, marking and lighting follow local codes and licensed practice."
    ),
)
#: A rule as a caller states it: criteria, a name, a file ending in .toml, or made.
Rule = RuleSet | Sequence[Criterion] | str | Path


@dataclass(frozen=True, slots=True, kw_only=True)
class RadioAnswer:
    """A radio path held against its rule, with its sheet."""

    result: RadioResult
    sheet: PathSheet
    side: SidePlace | None
    """Ground beside the path inside the zone; None when there is none."""


def rule_for(rule: Rule, line: SightLine, frequency_hz: float) -> RuleSet:
    """The rule set behind what a caller stated.

    Raises
    ------
    InputError
        If the name is unknown, the file cannot be read or there is no criterion.
    """
    if isinstance(rule, RuleSet):
        return rule
    if isinstance(rule, str | Path):
        if str(rule).lower().endswith(".toml"):
            return read_rule_set(Path(rule))
        return rule_named(str(rule), line, frequency_hz)
    given: object = rule
    if not isinstance(given, Sequence):
        given = (given,)
    criteria = tuple(c for c in given if isinstance(c, Criterion))
    if len(criteria) < len(given):
        msg = "A rule is a name, a file ending in .toml or a list of Criterion."
        raise InputError(msg)
    return RuleSet(name="given", source="as given", criteria=criteria)


def radio_answer(
    terrain: Terrain,
    line: SightLine,
    *,
    frequency_hz: float,
    rule: Rule | None = None,
    sea_fraction: float = 0.0,
    polarization: Polarization = "horizontal",
) -> RadioAnswer | None:
    """Hold an answer's path against a clearance rule and fill its path sheet.

    Parameters
    ----------
    terrain : Terrain
        Read again beside the path.
    line : SightLine
    frequency_hz : float [Hz]
        10 MHz to 300 GHz.
    rule : RuleSet, sequence of Criterion, str, Path or None
        None: no rule is applied, and none is said to be met.
    sea_fraction : float [1]
        Share of the path over sea, for the diffraction loss.
    polarization : str
        "horizontal" or "vertical", for the diffraction loss.

    Returns
    -------
    RadioAnswer or None
        None when no ground is known between the ends.

    Raises
    ------
    InputError
        If frequency, rule, share or polarization cannot be used.
    """
    stated = None if rule is None else rule_for(rule, line, frequency_hz)
    result = assess(line, frequency_hz=frequency_hz, rule=stated)
    if result is None:
        return None
    sheet = path_sheet(
        line, result, sea_fraction=sea_fraction, polarization=polarization
    )
    side = side_terrain(terrain, line, wavelength_m=result.wavelength_m)
    return RadioAnswer(result=result, sheet=sheet, side=side)
