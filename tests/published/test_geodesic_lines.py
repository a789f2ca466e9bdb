"""Geodesic lines printed in the literature.

Flinders Peak to Buninyong: Australian GDA technical manual; the distance and bearings
were seen quoted in several test suites, the seconds of the coordinates are from memory
but agree with the decimals seen. Karney, Algorithms for geodesics, Journal of Geodesy
87, 2013, tables 2 and 4 to 6: seen quoted elsewhere, not in the original. Two lines of
the GeographicLib documentation: seen there. Rapp, Geometric Geodesy, standard lines 1,
2, 5 and 6 on the International ellipsoid of 1924: seen quoted elsewhere, not in the
original; they check the same call with that ellipsoid put in.
"""

import numpy as np
import pytest
from geographiclib.geodesic import Geodesic
from pyproj import Geod

from profiler.earth import destination, geodesic, geodesic_line
from profiler.model import Point

ARCSEC_DEG = 1.0 / 3600.0
HUNDREDTH_ARCSEC_DEG = 0.01 * ARCSEC_DEG  # the manual prints two decimals
MICROMETRE_M = 1e-6  # both programs carry about 15 nm


def dms(degrees: int, minutes: int, seconds: float) -> float:
    return degrees + minutes / 60.0 + seconds / 3600.0


@pytest.mark.published
def test_flinders_peak_to_buninyong_is_as_the_australian_manual_prints_it() -> None:
    flinders = Point(lat_deg=-dms(37, 57, 3.72030), lon_deg=dms(144, 25, 29.52440))
    buninyong = Point(lat_deg=-dms(37, 39, 10.15610), lon_deg=dms(143, 55, 35.38390))
    line = geodesic_line(flinders, buninyong)
    # printed on GRS80, whose flattening moves this line by less than 0.1 mm
    assert line.length_m == pytest.approx(54_972.271, abs=0.001)
    assert line.azimuth_deg == pytest.approx(
        dms(306, 52, 5.37), abs=HUNDREDTH_ARCSEC_DEG
    )
    assert line.back_azimuth_deg == pytest.approx(
        dms(127, 10, 25.07), abs=HUNDREDTH_ARCSEC_DEG
    )


@pytest.mark.published
def test_ten_thousand_kilometres_end_where_karney_table_2_says() -> None:
    start = Point(lat_deg=40.0, lon_deg=0.0)
    end = destination(start, 30.0, dist_m=10_000_000.0)
    assert end.lat_deg == pytest.approx(41.79331020506, abs=1e-9)
    assert end.lon_deg == pytest.approx(137.84490004377, abs=1e-9)
    onward_deg = geodesic_line(start, end).back_azimuth_deg - 180.0
    assert onward_deg == pytest.approx(149.09016931807, abs=1e-9)


@pytest.mark.published
def test_a_nearly_antipodal_line_is_as_karney_tables_4_to_6_print_it() -> None:
    line = geodesic_line(
        Point(lat_deg=-30.0, lon_deg=0.0), Point(lat_deg=29.9, lon_deg=179.8)
    )
    assert line.length_m == pytest.approx(19_989_832.827610, abs=1e-6)
    # the quotation cuts the bearing after six decimals
    assert 161.890524 <= line.azimuth_deg < 161.890525


@pytest.mark.published
def test_the_geographiclib_inverse_example_is_met_to_a_millimetre() -> None:
    line = geodesic_line(
        Point(lat_deg=-41.32, lon_deg=174.81), Point(lat_deg=40.96, lon_deg=-5.50)
    )
    assert line.length_m == pytest.approx(19_959_679.267, abs=0.001)


@pytest.mark.published
def test_the_geographiclib_direct_example_is_met_to_eight_decimals() -> None:
    end = destination(Point(lat_deg=-32.06, lon_deg=115.74), 225.0, dist_m=20_000_000.0)
    assert end.lat_deg == pytest.approx(32.11195529, abs=1e-8)
    assert end.lon_deg == pytest.approx(-63.95925278, abs=1e-8)


@pytest.mark.published
@pytest.mark.parametrize(
    ("lat1_deg", "lat2_deg", "lon_deg", "length_m", "azimuth_deg", "within_m"),
    [
        pytest.param(
            dms(37, 19, 54.95367),
            dms(26, 7, 42.83946),
            dms(41, 28, 35.50729),
            4_085_966.7026,
            dms(95, 27, 59.630888),
            1e-4,
            id="line 1",
        ),
        pytest.param(
            dms(35, 16, 11.24862),
            dms(67, 22, 14.77638),
            dms(137, 47, 28.31435),
            8_084_823.8383,
            dms(15, 44, 23.748498),
            1e-4,
            id="line 2",
        ),
        pytest.param(
            dms(41, 41, 45.88),
            dms(41, 41, 46.20),
            dms(0, 0, 0.56),
            16.2839751,
            dms(52, 40, 39.390667),
            1e-6,
            id="line 5, of the size of a DEM's cell",
        ),
        pytest.param(
            dms(30, 0, 0.0),
            dms(37, 53, 32.46584),
            dms(116, 19, 16.68843),
            10_002_499.9999,
            45.0,
            1e-4,
            id="line 6",
        ),
    ],
)
def test_rapps_standard_lines_come_out_on_the_international_ellipsoid(
    monkeypatch: pytest.MonkeyPatch,
    lat1_deg: float,
    lat2_deg: float,
    lon_deg: float,
    length_m: float,
    azimuth_deg: float,
    within_m: float,
) -> None:
    monkeypatch.setattr(geodesic, "_WGS84", Geod(ellps="intl"))
    line = geodesic_line(
        Point(lat_deg=lat1_deg, lon_deg=0.0), Point(lat_deg=lat2_deg, lon_deg=lon_deg)
    )
    assert line.length_m == pytest.approx(length_m, abs=within_m)
    # on 16 m the last printed digits of the coordinates turn the line by 2e-5 arcsec
    assert line.azimuth_deg == pytest.approx(azimuth_deg, abs=2e-5 * ARCSEC_DEG)


@pytest.mark.published
def test_two_hundred_lines_agree_with_geographiclib_to_a_micrometre() -> None:
    """geographiclib for Python, Karney's own program, run here beside PROJ's."""
    draw = np.random.default_rng(20_240_229)
    for _ in range(200):
        lats_deg = np.degrees(np.arcsin(draw.uniform(-1.0, 1.0, 2)))
        lons_deg = draw.uniform(-180.0, 180.0, 2)
        start, end = (
            Point(lat_deg=float(lat_deg), lon_deg=float(lon_deg))
            for lat_deg, lon_deg in zip(lats_deg, lons_deg, strict=True)
        )
        line = geodesic_line(start, end)
        theirs = Geodesic.WGS84.Inverse(
            start.lat_deg, start.lon_deg, end.lat_deg, end.lon_deg
        )
        assert line.length_m == pytest.approx(theirs["s12"], abs=MICROMETRE_M)
        assert line.azimuth_deg == pytest.approx(theirs["azi1"] % 360.0, abs=1e-9)
        back_deg = (theirs["azi2"] + 180.0) % 360.0
        assert line.back_azimuth_deg == pytest.approx(back_deg, abs=1e-9)
