"""What stands at a place, in words and in the record: ground, trees, buildings."""

from typing import Any, NamedTuple

from profiler.model import CoverKind, CoverSpan, PathProfile
from profiler.output.naming import printable, storable
from profiler.output.rounding import metres
from profiler.sight.cover import called

#: Stretches of one name that touch within this are one in the record [m]; its last
#: digit.
TOUCH_M = 0.001


class Standing(NamedTuple):
    """A noun for what stands at a place, and its number."""

    name: str
    is_plural: bool

    def verb(self, stem: str) -> str:
        """A verb that agrees: the ground hides, trees hide."""
        return stem if self.is_plural else f"{stem}s"


def standing(place: dict[str, Any]) -> Standing:
    """What stands at a place or at the worst of a blocked stretch.

    Parameters
    ----------
    place : dict
        Of the record, with ``cover_name`` and ``cover_kind``.
    """
    kind = place["cover_kind"]
    name = printable(place["cover_name"])
    what = called(None if kind is None else CoverKind(kind), name)
    return Standing(what, what.startswith("trees of "))


def cover_rows(profile: PathProfile) -> list[dict[str, Any]]:
    """The cover along a path as the record lists it.

    Parameters
    ----------
    profile : PathProfile

    Returns
    -------
    list of dict
        One for each run of touching spans of one name and kind: the cells of a raster
        are one wood. ``height_m`` is the highest in it, ``least_height_m`` the lowest.
    """
    runs: list[list[CoverSpan]] = []
    open_runs: dict[tuple[str, str], list[CoverSpan]] = {}
    for span in profile.cover_spans:
        key = (span.kind, span.name)
        run = open_runs.get(key)
        if run is None or span.start_m > max(s.end_m for s in run[-1:]) + TOUCH_M:
            run = open_runs[key] = []
            runs.append(run)
        run.append(span)
    return [
        {
            "start_m": metres(run[0].start_m),
            "end_m": metres(max(span.end_m for span in run)),
            "height_m": metres(max(span.height_m for span in run)),
            "least_height_m": metres(min(span.height_m for span in run)),
            "kind": run[0].kind.value,
            "name": storable(run[0].name),
        }
        for run in runs
    ]
