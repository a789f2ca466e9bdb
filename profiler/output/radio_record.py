"""The radio part of the JSON record."""

from typing import Any

from profiler.output.naming import storable
from profiler.output.rounding import db, deg, metres, ratio
from profiler.radio.answer import RadioAnswer
from profiler.radio.assess import CriterionResult, RadioResult, TightPlace
from profiler.radio.criteria import Criterion, RuleSet
from profiler.radio.sheet import PathSheet
from profiler.radio.side import SidePlace

Json = dict[str, Any]


def radio_record(radio: RadioAnswer) -> Json:
    """A radio answer as plain values in the record's order.

    Parameters
    ----------
    radio : RadioAnswer

    Returns
    -------
    dict
        Metres with 3 decimals, degrees with 9, ratios with 6, decibels with 3.
    """
    result = radio.result
    return {
        "frequency_hz": result.frequency_hz,
        "wavelength_m": ratio(result.wavelength_m),
        "state": result.state.value,
        "rule": rule_record(result.rule),
        "criteria": [_criterion_result(r) for r in result.results],
        "governing": criterion_record(result.governing.criterion),
        "obstacles": [_tight(t) for t in result.obstacles],
        "obstruction": _obstruction(result),
        "side": None if radio.side is None else _side(radio.side),
        **_sheet(radio.sheet),
    }


def criterion_record(criterion: Criterion) -> Json:
    """A criterion as the record and the masts' record write it."""
    return {
        "ke": ratio(criterion.ke),
        "f1_fraction": ratio(criterion.f1_fraction),
        "extra_m": metres(criterion.extra_m),
    }


def rule_record(rule: RuleSet) -> Json:
    """Where a rule comes from, as both records write it."""
    return {"name": storable(rule.name), "source": storable(rule.source)}


def _criterion_result(result: CriterionResult) -> Json:
    return {
        **criterion_record(result.criterion),
        "margin_m": metres(result.margin_m),
        "met": result.is_met,
        "at": _tight(result.at),
    }


def _tight(tight: TightPlace) -> Json:
    place = tight.place
    return {
        "distance_m": metres(place.distance_m),
        "lat_deg": deg(place.lat_deg),
        "lon_deg": deg(place.lon_deg),
        "ground_m": metres(place.ground_m),
        "cover_m": metres(place.cover_m),
        "cover_name": storable(place.cover_name),
        "cover_kind": None if place.cover_kind is None else place.cover_kind.value,
        "clearance_m": metres(place.margin_m),
        "f1_m": metres(tight.f1_m),
        "f1_share": ratio(tight.share),
    }


def _obstruction(result: RadioResult) -> Json | None:
    found = result.obstruction
    if found is None:
        return None
    return {
        "kind": "isolated" if found.is_isolated else "extended",
        "start_m": metres(found.start_m),
        "end_m": metres(found.end_m),
        "runs": found.runs,
    }


def _side(side: SidePlace) -> Json:
    return {
        "distance_m": metres(side.distance_m),
        "offset_m": metres(side.offset_m),
        "side": side.side,
        "lat_deg": deg(side.lat_deg),
        "lon_deg": deg(side.lon_deg),
        "ground_m": metres(side.ground_m),
        "f1_share": ratio(side.share),
        "centre_f1_share": ratio(side.centre_share),
    }


def _sheet(sheet: PathSheet) -> Json:
    loss = sheet.loss
    return {
        "pointing": {
            "azimuth_deg": deg(sheet.azimuth_deg),
            "back_azimuth_deg": deg(sheet.back_azimuth_deg),
            "from_tilt_deg": deg(sheet.from_tilt_deg),
            "to_tilt_deg": deg(sheet.to_tilt_deg),
            "distance_m": metres(sheet.length_m),
            "ray_m": metres(sheet.ray_m),
        },
        "by_ke": [{"ke": ratio(r.criterion.ke), **_tight(r.at)} for r in sheet.by_ke],
        "reflection": None if sheet.reflection is None else _tight(sheet.reflection),
        "loss": {
            "free_space_db": db(sheet.free_space_db),
            "diffraction_db": None if loss is None else db(loss.total_db),
            "bullington_db": None if loss is None else db(loss.bullington_db),
            "smooth_bullington_db": (
                None if loss is None else db(loss.smooth_bullington_db)
            ),
            "spherical_db": None if loss is None else db(loss.spherical_db),
            "effective_heights_m": (
                None if loss is None else [metres(h) for h in loss.effective_heights_m]
            ),
            "method": sheet.loss_note,
        },
    }
