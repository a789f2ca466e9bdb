"""ISO 6709 point strings.

The three numeric forms of a latitude and a longitude, ±DD.DD±DDD.DD/,
±DDMM.MM±DDDMM.MM/ and ±DDMMSS.SS±DDDMMSS.SS/, after ISO 6709:2008 annex H. The
standard was not at hand: forms and examples are from memory, unverified. The decimal
degrees beside each are the arithmetic of its digits.
"""

import pytest

from profiler.cli.points import LatLon, parse_point

ROUNDING_DEG = 1e-12  # a few units in the last place of a float near 100


@pytest.mark.published
@pytest.mark.parametrize(
    ("text", "lat_deg", "lon_deg"),
    [
        pytest.param("+40.75-074.00/", 40.75, -74.0, id="degrees, from memory"),
        pytest.param("+4045.0-07400.0/", 40.75, -74.0, id="minutes, from memory"),
        pytest.param("+404500-0740000/", 40.75, -74.0, id="seconds, from memory"),
        pytest.param("+40-075CRSWGS_84/", 40.0, -75.0, id="with CRS, from memory"),
        pytest.param("-90+000/", -90.0, 0.0, id="pole, from memory"),
        pytest.param(
            "+481233.1-0213012.4/",
            48 + 12 / 60 + 33.1 / 3600,
            -21 - 30 / 60 - 12.4 / 3600,
            id="decimals of a second, from memory",
        ),
    ],
)
def test_each_numeric_form_gives_its_decimal_degrees(
    text: str, lat_deg: float, lon_deg: float
) -> None:
    point = parse_point(text)
    assert isinstance(point, LatLon)
    assert point.lat_deg == pytest.approx(lat_deg, abs=ROUNDING_DEG)
    assert point.lon_deg == pytest.approx(lon_deg, abs=ROUNDING_DEG)
