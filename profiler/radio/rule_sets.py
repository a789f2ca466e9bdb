"""Rule sets taken from published rules, and rule sets from a file of the user's own."""

import tomllib
from pathlib import Path
from typing import Any, Final

from profiler.constants import KE_RADIO, M_PER_KM
from profiler.errors import InputError
from profiler.model import Note
from profiler.radio.criteria import Criterion, RuleSet

#: Rec. ITU-R P.530-19 (09/2025) section 2.2.2.1, equation (4): ke exceeded for about
#: 99.9 % of the worst month, continental temperate climate, is 157/(144 + 2670/d).
KE_WORST_TOP: Final = 157.0
KE_WORST_BASE: Final = 144.0
KE_WORST_PER_KM: Final = 2670.0
#: The same section: shares of F1 at that ke.
ISOLATED_F1: Final = 0.0
EXTENDED_F1: Final = 0.3
TROPICAL_F1: Final = 0.6
#: The same section: tropical share on paths longer than about this [km].
TROPICAL_FROM_KM: Final = 30.0
#: The shortest path for which that ke is drawn [km]; Rec. ITU-R P.530-19 figure 2.
CURVE_FROM_KM: Final = 20.0
#: The same section, lower antenna of a diversity pair at median ke: cautious ends of
#: 0.6 to 0.3 F1 (extended) and 0.3 to 0 F1 (isolated).
LOWER_EXTENDED_F1: Final = 0.6
LOWER_ISOLATED_F1: Final = 0.3
#: Practical free-space clearance: Rec. ITU-R P.530-19 section 2.2; US Federal
#: Standard 1037C, "propagation path obstruction".
PLAIN_F1: Final = 0.6
#: Largest rule file read [bytes]; our choice.
MOST_BYTES: Final = 100_000

#: Names of the rule sets that come with the tool, and what each asks for.
NAMED: Final = {
    "plain-0.6": "0.6 F1 at ke 4/3",
    "p530-temperate": "P.530-19: 1.0 F1 at ke 4/3; at the worst month's ke 0 F1 over "
    "one isolated obstacle, 0.3 F1 over extended ground",
    "p530-tropical": "P.530-19: 1.0 F1 at ke 4/3; at the worst month's ke 0.6 F1 on "
    "paths over 30 km",
    "p530-lower-antenna": "P.530-19, lower antenna of a diversity pair: 0.6 F1 "
    "(extended) or 0.3 F1 (isolated) at ke 4/3",
}
_P530: Final = "Rec. ITU-R P.530-19 (09/2025) section 2.2.2"


def worst_month_ke(length_m: float) -> float:
    """Effective earth radius factor exceeded for 99.9 % of the worst month.

    Parameters
    ----------
    length_m : float [m]
        Path length, > 0.

    Returns
    -------
    float [1]
        157 / (144 + 2670/d), d in km; continental temperate climate.

    Raises
    ------
    InputError
        If the length is not above 0.

    References
    ----------
    Rec. ITU-R P.530-19 (09/2025), section 2.2.2.1, equation (4).
    """
    if not length_m > 0.0:
        msg = f"Path length must be above 0, not {length_m:g} m."
        raise InputError(msg)
    return KE_WORST_TOP / (KE_WORST_BASE + KE_WORST_PER_KM / (length_m / M_PER_KM))


def named_rule_set(name: str, *, length_m: float, isolated: bool) -> RuleSet:
    """A rule set from published rules, for one path.

    Parameters
    ----------
    name : str
        One of `NAMED`.
    length_m : float [m]
        Path length.
    isolated : bool
        Whether the path meets one isolated obstacle; else the obstruction is extended.

    Raises
    ------
    InputError
        If there is no such rule set.
    """
    if name not in NAMED:
        msg = (
            f'No rule set "{name}". There are {", ".join(NAMED)}; or give a file '
            "ending in .toml."
        )
        raise InputError(msg)
    if name == "plain-0.6":
        plain = Criterion(ke=KE_RADIO, f1_fraction=PLAIN_F1)
        source = "Rec. ITU-R P.530-19 (09/2025) section 2.2; US Federal Standard 1037C"
        return RuleSet(name=name, source=source, criteria=(plain,))
    kind = "isolated" if isolated else "extended"
    decided = Note(code="obstruction", text=f"The obstruction is taken as {kind}.")
    if name == "p530-lower-antenna":
        lower = LOWER_ISOLATED_F1 if isolated else LOWER_EXTENDED_F1
        only = Criterion(ke=KE_RADIO, f1_fraction=lower)
        return RuleSet(name=name, source=_P530, criteria=(only,), notes=(decided,))
    share = ISOLATED_F1 if isolated else EXTENDED_F1
    notes: tuple[Note, ...] = (decided,)
    if name == "p530-tropical" and length_m > TROPICAL_FROM_KM * M_PER_KM:
        share, notes = TROPICAL_F1, ()
    median = Criterion(ke=KE_RADIO, f1_fraction=1.0)
    worst = Criterion(ke=worst_month_ke(length_m), f1_fraction=share)
    if length_m < CURVE_FROM_KM * M_PER_KM:
        notes = (*notes, _short_path(worst.ke))
    return RuleSet(name=name, source=_P530, criteria=(median, worst), notes=notes)


def _short_path(ke: float) -> Note:
    text = (
        f"The Recommendation draws the worst month's ke from {CURVE_FROM_KM:g} km on; "
        f"its equation gives {ke:.3f} for this path. Take that with care."
    )
    return Note(code="short-path-ke", text=text)


def read_rule_set(path: Path) -> RuleSet:
    """A rule set from a TOML file.

    Parameters
    ----------
    path : Path
        A file with an optional ``source`` and tables ``[[criterion]]``, each with
        ``ke``, ``f1`` and, if wanted, ``extra_m``.

    Raises
    ------
    InputError
        If the file is missing, is no TOML or states no criterion.
    """
    if not path.is_file():
        msg = f'No rule file "{path}".'
        raise InputError(msg)
    if path.stat().st_size > MOST_BYTES:
        msg = f'Rule file "{path.name}" is larger than {MOST_BYTES} bytes.'
        raise InputError(msg)
    try:
        values = tomllib.loads(path.read_text(encoding="utf-8-sig"))
    except (ValueError, RecursionError) as error:
        msg = f'Rule file "{path.name}" is no TOML ({error}).'
        raise InputError(msg) from error
    except OSError as error:
        msg = f'Rule file "{path.name}" cannot be read: {error.strerror}.'
        raise InputError(msg) from error
    unknown = sorted(set(values) - {"criterion", "source"})
    if unknown:
        msg = (
            f'Rule file "{path.name}": "{unknown[0]}" is not known; use source and '
            "tables [[criterion]]."
        )
        raise InputError(msg)
    tables = values.get("criterion")
    if not isinstance(tables, list) or not tables:
        msg = f'Rule file "{path.name}" needs tables [[criterion]] with ke and f1.'
        raise InputError(msg)
    criteria = tuple(
        _criterion_of(table, f'"{path.name}", criterion {number}')
        for number, table in enumerate(tables, start=1)
    )
    source = str(values.get("source", "as given"))
    return RuleSet(name=path.name, source=source, criteria=criteria)


def _criterion_of(table: Any, where: str) -> Criterion:
    if not isinstance(table, dict):
        msg = f"{where}: write it as a table [[criterion]]."
        raise InputError(msg)
    unknown = sorted(set(table) - {"ke", "f1", "extra_m"})
    if unknown:
        msg = f'{where}: "{unknown[0]}" is not known; use ke, f1 and extra_m.'
        raise InputError(msg)
    for key in ("ke", "f1"):
        if key not in table:
            msg = f"{where}: {key} is missing."
            raise InputError(msg)
    numbers = {key: _number(value, f"{where}: {key}") for key, value in table.items()}
    try:
        return Criterion(
            ke=numbers["ke"],
            f1_fraction=numbers["f1"],
            extra_m=numbers.get("extra_m", 0.0),
        )
    except InputError as error:
        msg = f"{where}: {error}"
        raise InputError(msg) from error


def _number(value: Any, what: str) -> float:
    if isinstance(value, bool) or not isinstance(value, int | float):
        msg = f"{what} must be a number, not {value!r}."
        raise InputError(msg)
    try:
        return float(value)
    except OverflowError as error:
        msg = f"{what} is too large."
        raise InputError(msg) from error
