"""Whatever a person types gives a value or one clear refusal."""

import math
from collections.abc import Callable
from typing import TypeVar

import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from profiler.cli.points import LatLon, SiteName, parse_point
from profiler.cli.quantities import (
    parse_height,
    parse_ke,
    parse_kr,
    parse_length,
    parse_n_gradient,
)
from profiler.errors import InputError
from profiler.model import Point
from profiler.shapes import Site, find_site
from profiler.shapes.site import plain_heading

WITHIN_DEG = 1e-6
TRIES = settings(deadline=None, max_examples=200)
FEW = settings(deadline=None, max_examples=60)

#: The characters that points and quantities are made of, so that near misses are hit.
NEAR = st.text(
    alphabet="0123456789 .,;:+-−/°'\"′″NSEWnsewdmkftui=CRS\u00a0٣eO", max_size=40
)
ANY = st.one_of(st.text(max_size=80), NEAR)
LATITUDES = st.floats(-89.9999, 89.9999).map(lambda value: round(value, 6))
LONGITUDES = st.floats(-179.9999, 179.9999).map(lambda value: round(value, 6))


T = TypeVar("T")


def value_or_refusal(parse: Callable[[], T]) -> T | InputError:
    try:
        return parse()
    except InputError as error:
        return error


def is_short_line(error: InputError) -> bool:
    return 0 < len(str(error)) < 400 and str(error).isprintable()


@TRIES
@given(ANY, st.booleans())
def test_any_text_is_a_point_or_is_refused_in_one_short_line(
    text: str, crs_given: bool
) -> None:
    point = value_or_refusal(lambda: parse_point(text, crs_given=crs_given))
    if isinstance(point, InputError):
        assert is_short_line(point)
    if isinstance(point, LatLon):
        Point(lat_deg=point.lat_deg, lon_deg=point.lon_deg)
    if isinstance(point, SiteName):
        assert point.text == text.strip()


@TRIES
@given(ANY)
@pytest.mark.parametrize(
    "parse", [parse_height, parse_length, parse_ke, parse_kr, parse_n_gradient]
)
def test_any_text_is_a_finite_quantity_or_is_refused_in_one_short_line(
    parse: Callable[[str], float], text: str
) -> None:
    value = value_or_refusal(lambda: parse(text))
    if isinstance(value, InputError):
        assert is_short_line(value)
    else:
        assert math.isfinite(value)


@FEW
@given(ANY)
def test_any_text_finds_a_site_or_is_refused(text: str) -> None:
    sites = [
        Site(name=name, point=Point(lat_deg=48.2, lon_deg=-21.5))
        for name in ("Skarvel", "Skarn", "Øst")
    ]
    found = value_or_refusal(lambda: find_site(sites, text))
    assert is_short_line(found) if isinstance(found, InputError) else found in sites


@FEW
@given(st.text(max_size=40))
def test_a_plain_heading_stays_as_it_is_when_made_plain_again(heading: str) -> None:
    assert plain_heading(plain_heading(heading)) == plain_heading(heading)


def sexagesimal(size_deg: float) -> tuple[int, int, float]:
    """Whole degrees and minutes, and seconds to 4 decimals, without a 60."""
    ticks = round(size_deg * 3600 * 10_000)
    minutes, seconds = divmod(ticks, 600_000)
    return minutes // 60, minutes % 60, seconds / 10_000


def dms(value: float, form: str, letters: str) -> str:
    d, m, s = sexagesimal(abs(value))
    return form.format(d=d, m=m, s=s, h=letters[value < 0])


def dm(value: float, form: str, letters: str) -> str:
    ticks = round(abs(value) * 60 * 1_000_000)
    d, m = divmod(ticks, 60_000_000)
    return form.format(d=d, m=m / 1_000_000, h=letters[value < 0])


def iso(value: float, digits: int) -> str:
    d, m, s = sexagesimal(abs(value))
    return f"{'-' if value < 0 else '+'}{d:0{digits}d}{m:02d}{s:07.4f}"


def both(
    one: Callable[[float, str, str], str], form: str, between: str
) -> Callable[[float, float], str]:
    return lambda lat, lon: one(lat, form, "NS") + between + one(lon, form, "EW")


FORMS: dict[str, Callable[[float, float], str]] = {
    "decimal, comma": lambda lat, lon: f"{lat:.6f},{lon:.6f}",
    "decimal, semicolon": lambda lat, lon: f"{lat:.6f}; {lon:.6f}",
    "decimal, blank": lambda lat, lon: f"{lat:.6f} {lon:.6f}",
    "decimal, minus sign": lambda lat, lon: f"{lat:.6f}, {lon:.6f}".replace("-", "−"),
    "letters after": lambda lat, lon: (
        f"{abs(lat):.6f}{'NS'[lat < 0]} {abs(lon):.6f}{'EW'[lon < 0]}"
    ),
    "letters before, longitude first": lambda lat, lon: (
        f"{'EW'[lon < 0]}{abs(lon):.6f} {'NS'[lat < 0]}{abs(lat):.6f}"
    ),
    "blanks": both(dms, "{d} {m} {s:.4f} {h}", ", "),
    "colons": both(dms, "{d}:{m:02d}:{s:07.4f}{h}", " "),
    "letters as marks": both(dms, "{d}d{m}m{s:.4f}s{h}", " "),
    "primes": both(dms, "{d}°{m}′{s:.4f}″{h}", " "),
    "quotes": both(dms, "{d}º{m}'{s:.4f}\"{h}", ""),
    "decimal minutes": both(dm, "{d} {m:.6f} {h}", " "),
    "decimal minutes, marks": both(dm, "{h} {d}° {m:.6f}'", " "),
    "ISO 6709 seconds": lambda lat, lon: f"{iso(lat, 2)}{iso(lon, 3)}/",
    "ISO 6709 degrees": lambda lat, lon: f"{lat:+010.6f}{lon:+011.6f}/",
}


@FEW
@given(LATITUDES, LONGITUDES)
@pytest.mark.parametrize("form", FORMS)
def test_a_point_written_in_any_form_is_read_back(
    form: str, lat: float, lon: float
) -> None:
    point = parse_point(FORMS[form](lat, lon))
    assert isinstance(point, LatLon)
    assert abs(point.lat_deg - lat) <= WITHIN_DEG
    assert abs(point.lon_deg - lon) <= WITHIN_DEG
