"""Diffraction loss of one path: its record and its words."""

import textwrap
from typing import Any, Final

from profiler.model import SightLine
from profiler.output.naming import names_of
from profiler.output.numbers import Show, place, ratio
from profiler.output.radio_words import frequency_text
from profiler.output.record import SOFTWARE, note_record, record
from profiler.output.rounding import db, deg, metres
from profiler.output.rounding import ratio as six
from profiler.output.words import LEAD, WIDTH, air_and_ground
from profiler.radio.answer import RADIO_CAUTION
from profiler.radio.assess import TightPlace
from profiler.radio.loss_methods import MethodLoss
from profiler.radio.losses import PathLosses
from profiler.radio.method import MethodChoice

#: Name and version of the record of losses.
LOSS_SCHEMA: Final = "overbrow/diffraction/1"
#: Width of a method's name in the list [characters].
NAME: Final = 26

Json = dict[str, Any]


def loss_record(losses: PathLosses, line: SightLine) -> Json:
    """Losses of a path as plain values.

    Parameters
    ----------
    losses : PathLosses
    line : SightLine
        The path they were found on.

    Returns
    -------
    dict
        Decibels and metres with 3 decimals, ratios with 6; None where no method holds.
    """
    values, found = record(line), losses.obstruction
    total = None if losses.headline is None else db(losses.headline.total_db)
    return {
        "schema": LOSS_SCHEMA,
        "frequency_hz": losses.frequency_hz,
        "wavelength_m": six(losses.wavelength_m),
        "polarization": losses.polarization,
        "sea_fraction": six(losses.sea_fraction),
        "free_space_db": db(losses.free_space_db),
        "diffraction_db": total,
        "method": losses.reason,
        "suggested": _suggested(losses.suggested),
        "obstacles": [_obstacle(o) for o in losses.obstacles],
        "obstruction": None
        if found is None
        else {
            "kind": "isolated" if found.is_isolated else "extended",
            "start_m": metres(found.start_m),
            "end_m": metres(found.end_m),
            "runs": found.runs,
        },
        "methods": [_method(m) for m in losses.methods],
        **{
            key: values[key]
            for key in ("verdict", "margin_m", "decisive", "path", "earth", "terrain")
        },
        **{key: values[key] for key in ("cover", "from", "to", "settings")},
        "cautions": [*values["cautions"], note_record(RADIO_CAUTION)],
        "warnings": values["warnings"],
        "software": SOFTWARE,
    }


def _suggested(choice: MethodChoice | None) -> Json | None:
    if choice is None:
        return None
    return {
        "name": choice.name,
        "section": choice.section,
        "why": choice.why,
        "limits": choice.limits,
    }


def _obstacle(tight: TightPlace) -> Json:
    at = tight.place
    return {
        "distance_m": metres(at.distance_m),
        "lat_deg": deg(at.lat_deg),
        "lon_deg": deg(at.lon_deg),
        "ground_m": metres(at.ground_m),
        "cover_m": metres(at.cover_m),
        "clearance_m": metres(at.margin_m),
        "f1_m": metres(tight.f1_m),
        "f1_share": six(tight.share),
    }


def _method(method: MethodLoss) -> Json:
    return {
        "name": method.name,
        "section": method.section,
        "loss_db": None if method.loss_db is None else db(method.loss_db),
        "applies": method.applies,
        "because": method.because,
        "limits": method.limits,
        "checked": method.checked,
        "parts": {name: _part(name, value) for name, value in method.parts.items()},
    }


def _part(name: str, value: float) -> float | None:
    if name.endswith("_db"):
        return db(value)
    return metres(value) if name.endswith("_m") else six(value)


def loss_words(values: Json, *, show_in: str = "m") -> str:
    """A record of losses as a person reads it, several lines, one final newline.

    Parameters
    ----------
    values : dict
        From `loss_record`.
    show_in : str
        "m" or "ft".

    Raises
    ------
    InputError
        If ``show_in`` is no such unit.
    """
    show = Show(unit=show_in, path_m=values["path"]["distance_m"])
    rows = [
        *_led("path", [_path(values, show)]),
        *_led("obstacles", _obstacles(values, show)),
        *_led("made of", _made_of(values, show)),
        *_led("compare", _compare(values)),
        *_led("figure 19", _figure_19(values)),
        *_led("careful", _careful(values)),
    ]
    # the air of a radio path, which the record of losses need not say
    second = air_and_ground({**values, "radio": None})
    return "\n".join([first_loss_line(values), second, "", *rows]) + "\n"


def first_loss_line(values: Json) -> str:
    """The headline: the loss by ground, on top of that of free space."""
    free = f"{values['free_space_db']:.1f} dB of free space"
    at = f"at {frequency_text(values['frequency_hz'])}"
    if values["diffraction_db"] is None:
        return f"No diffraction loss {at}: {values['method']}. It would add to {free}."
    return (
        f"Diffraction loss {values['diffraction_db']:.1f} dB {at}, on top of {free}; "
        "delta-Bullington."
    )


def _led(lead: str, texts: list[str]) -> list[str]:
    return [f"{lead if k == 0 else '':<{LEAD}}{text}" for k, text in enumerate(texts)]


def _wrapped(texts: list[str]) -> list[str]:
    return [part for text in texts for part in textwrap.wrap(text, WIDTH - LEAD)]


def _path(values: Json, show: Show) -> str:
    eye, name = names_of(values)
    near, far = (show.height(values[k]["agl_m"] or 0.0) for k in ("from", "to"))
    told = f"{show.length(values['path']['distance_m'])} from {eye} ({near}) to {name} "
    told += f"({far})"
    at = values["decisive"]
    if at is None:
        return told
    side = "above" if at["margin_m"] < 0.0 else "below"
    over, where = show.height(abs(at["margin_m"])), show.distance(at["distance_m"])
    return f"{told}; ground at {where} stands {over} {side} the line"


def _obstacles(values: Json, show: Show) -> list[str]:
    if values["diffraction_db"] is None:
        return []
    if not values["obstacles"]:
        return ["none: no ground within 0.6 F1 of the line"]
    return [
        f"{ratio(o['f1_share'], 2)} of F1 ({show.height(o['f1_m'])}) at "
        f"{show.distance(o['distance_m'])}   {place(o['lat_deg'], o['lon_deg'])}"
        for o in values["obstacles"]
    ]


def _made_of(values: Json, show: Show) -> list[str]:
    if not values["methods"]:
        return []
    parts = values["methods"][0]["parts"]
    heights = [
        show.height(parts[f"{role}_effective_height_m"]) for role in ("from", "to")
    ]
    return [
        f"profile as one edge {parts['bullington_db']:.1f} dB; smooth earth "
        f"{parts['spherical_db']:.1f} dB less its own edge "
        f"{parts['smooth_bullington_db']:.1f} dB, if more",
        f"antennas {heights[0]} and {heights[1]} above the smooth surface",
    ]


def _compare(values: Json) -> list[str]:
    lines = []
    for method in values["methods"][1:]:
        loss = method["loss_db"]
        told = "-" if loss is None else f"{loss:.1f} dB"
        exact = method["parts"].get("exact_db")
        more = "" if exact is None else f"exact {exact:.1f} dB; "
        holds = "applies" if method["applies"] else "does not apply"
        note = f"; {method['checked']}" if method["checked"].startswith("no ") else ""
        text = f"{more}{holds}: {method['because']}{note}"
        wide = WIDTH - LEAD - NAME - len("100.0 dB   ")
        head = f"{method['name']:<{NAME}}{told:>8}   "
        for k, part in enumerate(textwrap.wrap(text, wide)):
            lines.append(f"{head if k == 0 else '':<{len(head)}}{part}")
    return lines


def _figure_19(values: Json) -> list[str]:
    choice = values["suggested"]
    if choice is None:
        return []
    return _wrapped(
        [
            f"by hand: {choice['name']} ({choice['section']}). {choice['why']}",
            "Profiles from an elevation model go to delta-Bullington whatever they are "
            "like.",
        ]
    )


def _careful(values: Json) -> list[str]:
    near = values["settings"]["ignore_near_m"]
    kept = "Ground near the ends counts in the loss, though left out of the line."
    texts = [kept] if near > 0.0 else []
    return _wrapped([*texts, *(note["text"] for note in values["cautions"])])
