"""An answer that tells itself: the sight line with its record, words and figure."""

import math
from collections.abc import Callable
from dataclasses import dataclass, fields, replace
from pathlib import Path
from typing import TYPE_CHECKING, Any

from profiler.constants import KE_RADIO, VOID_BELOW_M
from profiler.model import Air, SightLine, Station, Verdict
from profiler.output.exchange import geojson
from profiler.output.record import record, record_text
from profiler.output.told import Growth, Told
from profiler.output.words import headline, words
from profiler.sight import judge
from profiler.sight.cover_sources import CoverAlong
from profiler.terrain import Terrain

if TYPE_CHECKING:
    from matplotlib.figure import Figure

    from profiler.radio.answer import Rule
    from profiler.radio.first_term import Polarization


@dataclass(frozen=True, slots=True, kw_only=True, eq=False, repr=False)
class Answer(Told):
    """A sight line and the terrain it was found on."""

    terrain: Terrain
    """Where the ground came from; the figure's plan map reads it again."""

    def record(self) -> dict[str, Any]:
        """The JSON record as plain values."""
        return record(self)

    def words(self, *, show_in: str = "m") -> str:
        """The answer in plain words; ``show_in`` is "m" or "ft"."""
        return words(self, show_in=show_in)

    def geojson(self) -> dict[str, Any]:
        """The path and its places as a GeoJSON feature collection."""
        return geojson(self)

    def figure(self, *, draw: str = "curved-sea", show_in: str = "m") -> "Figure":
        """The annotated profile as a matplotlib figure.

        Parameters
        ----------
        draw : str
            "curved-sea": straight sight line over a curved sea; "level-sea": the
            other way round.
        show_in : str
            "m" or "ft".

        Raises
        ------
        InputError
            If an option has no such value.
        """
        from profiler.output.figure import draw_figure, ground_map  # slow: 0.6 s

        return draw_figure(
            self,
            headline=headline(self, show_in=show_in),
            ground_map=ground_map(self.terrain, self.path),
            draw=draw,
            show_in=show_in,
        )

    def save_record(self, path: str | Path) -> None:
        """Write the JSON record to a file, whole or not at all."""
        from profiler.output.files import write_text

        write_text(Path(path), record_text(self))

    def __repr__(self) -> str:
        """The answer as a table of its first facts."""
        rows = self._rows()
        width = max(len(name) for name, _ in rows)
        return "\n".join(f"{name:<{width}}  {value}" for name, value in rows)

    def _repr_html_(self) -> str:
        """The same table for a notebook."""
        from html import escape  # 2 ms that only a notebook needs

        cells = "".join(
            f"<tr><th style='text-align:left'>{escape(name)}</th>"
            f"<td style='text-align:left'>{escape(value)}</td></tr>"
            for name, value in self._rows()
        )
        return f"<table>{cells}</table>"

    def _rows(self) -> list[tuple[str, str]]:
        values = record(self)
        decisive = values["decisive"] or {}
        return [
            ("answer", "".join(headline(self))),
            ("verdict", values["verdict"]),
            ("margin_m", str(values["margin_m"])),
            ("decisive_m", str(decisive.get("distance_m"))),
            ("shown", f"{values['target']['shown']}, {self.target.visible_m:.1f} m"),
            ("needed", _needed_text(values["needed"])),
            ("distance_m", str(values["path"]["distance_m"])),
            ("azimuth_deg", str(values["path"]["azimuth_deg"])),
            ("air", f"ke {values['earth']['ke']}, kr {values['earth']['kr']}"),
        ]


def _needed_text(needed: dict[str, Any]) -> str:
    parts = [
        f"{end} {needed[f'{end}_agl_m']} m above ground"
        for end in ("from", "to")
        if needed[f"{end}_agl_m"] is not None
    ]
    return ", or ".join(parts) or "no height alone"


def look(
    terrain: Terrain,
    eye: Station,
    target: Station,
    *,
    air: Air | None = None,
    own_hill_m: float | None = None,
    ignore_near_m: float = 0.0,
    void_below_m: float = VOID_BELOW_M,
    cover: CoverAlong | None = None,
    frequency_hz: float | None = None,
    rule: "Rule | None" = None,
    sea_fraction: float = 0.0,
    polarization: "Polarization" = "horizontal",
) -> Answer:
    """Whether one station sees another, with everything the record holds.

    Parameters
    ----------
    terrain : Terrain
        From `open_terrain`.
    eye, target : Station
        The observing end and the observed one.
    air : Air or None
        Bending of the ray; None: light, kr 0.13, or with a frequency radio, ke 4/3.
    own_hill_m : float or None [m]
        Radius of a bare summit's own hill; None: the larger of 100 m and 3 cells.
    ignore_near_m : float [m]
        Ground this near to either end is not counted.
    void_below_m : float [m]
        A void that only higher ground could block counts as clear.
    cover : function or None
        Trees and buildings, from `cover_along`; None: bare ground.
    frequency_hz : float or None [Hz]
        Makes it a radio path: Fresnel zones, a clearance rule and the path sheet.
    rule : RuleSet, sequence of Criterion, str, Path or None
        Clearance rule: criteria, the name of a published set or a .toml file.
    sea_fraction : float [1]
        Share of the path over sea, for the diffraction loss.
    polarization : str
        "horizontal" or "vertical", for the diffraction loss.

    Returns
    -------
    Answer
        The fields of `SightLine`, which are those of the JSON record, and methods
        that tell them.

    Raises
    ------
    InputError
        If the points are one place or nearer than a cell, or a height is impossible.
    DemError
        If a file is damaged; OutsideDemError if an end has no ground.
    """
    if air is None and frequency_hz is not None:
        air = Air(ke=KE_RADIO, assumed=True)
    line = judge(
        terrain,
        eye,
        target,
        air=air,
        own_hill_m=own_hill_m,
        ignore_near_m=ignore_near_m,
        void_below_m=void_below_m,
        cover=cover,
    )
    values = {f.name: getattr(line, f.name) for f in fields(SightLine)}
    if frequency_hz is not None:
        values |= _radio_fields(
            terrain,
            line,
            frequency_hz=frequency_hz,
            rule=rule,
            sea_fraction=sea_fraction,
            polarization=polarization,
        )
    return Answer(**values, terrain=terrain)


def _radio_fields(terrain: Terrain, line: SightLine, **question: Any) -> dict[str, Any]:
    """Fields of the answer that a frequency adds or changes."""
    # only a radio path needs that room
    from profiler.radio.answer import RADIO_CAUTION, radio_answer

    radio = radio_answer(terrain, line, **question)
    more = () if radio is None else radio.result.warnings
    return {
        "radio": radio,
        "cautions": (*line.cautions, RADIO_CAUTION),
        "warnings": (*line.warnings, *more),
    }


def look_ahead(
    answer_in: Callable[[int], Answer], *, metres_per_year: float, years: int
) -> Answer:
    """The answer at the end of a period, with the year in which it first fails.

    Parameters
    ----------
    answer_in : function
        From a year, 0 for today, to the answer with trees as they stand then.
    metres_per_year : float [m]
        How fast they grow, for the telling.
    years : int
        Length of the period.

    Raises
    ------
    InputError
        If ``years`` is negative.
    """
    from profiler.radio.growth import first_failing_year  # only for growing trees

    year = first_failing_year(lambda y: _worst_margin(answer_in(y)), years=years)
    growth = Growth(
        metres_per_year=metres_per_year, years=years, first_failing_year=year
    )
    return replace(answer_in(years), growth=growth)


def _worst_margin(answer: Answer) -> float:
    """What the rule leaves; without a rule the margin of the bare line [m]."""
    if answer.radio is not None and answer.verdict is not Verdict.BLOCKED:
        return answer.radio.result.governing.margin_m
    return math.inf if answer.margin_m is None else answer.margin_m
