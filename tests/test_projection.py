"""CRSs: their units, names and the way to and from WGS84."""

import numpy as np
import pytest
from pyproj import CRS

from profiler.earth import Projector, crs_from_user, projector
from profiler.errors import DemError, InputError

LAT_DEG = np.array([40.7, 40.9])
LON_DEG = np.array([-74.0, -73.5])
#: A tenth of a micrometre on the ground [deg].
NOTHING_DEG = 1e-12
#: A local datum shift, undone by iteration, closes to a few centimetres [deg].
SHIFT_CLOSES_DEG = 1e-6


def of_code(code: str) -> Projector:
    return projector(CRS.from_user_input(code).to_wkt())


def is_rough_at(ready: Projector, lat_deg: float, lon_deg: float) -> bool:
    """Whether no datum shift serves a place, once one is settled on there."""
    x, y = ready.to_crs(np.array([lat_deg]), np.array([lon_deg]))
    return ready.settled_at(float(x[0]), float(y[0])).ballpark


@pytest.mark.parametrize(
    "wkt",
    [
        CRS.from_epsg(4326).to_wkt(),
        CRS.from_epsg(4326).to_wkt("WKT1_GDAL"),
        CRS.from_epsg(4326).to_wkt("WKT1_ESRI"),
        CRS.from_epsg(4979).to_wkt(),
        CRS.from_epsg(9707).to_wkt(),
        CRS.from_user_input("+proj=longlat +ellps=WGS84").to_wkt(),
    ],
)
def test_wgs84_by_any_name_needs_no_transformer(wkt: str) -> None:
    ready = projector(wkt)
    assert ready.transformer is None
    assert ready.is_geographic
    assert ready.unit_name == "degree"
    assert ready.metres_per_unit == 1.0
    assert not ready.ballpark
    assert not is_rough_at(ready, 40.0, -74.0)
    x, y = ready.to_crs(LAT_DEG, LON_DEG + 360.0)
    assert x.tolist() == (LON_DEG + 360.0).tolist()
    assert y.tolist() == LAT_DEG.tolist()
    lat_deg, lon_deg = ready.to_wgs84(x, y)
    assert lat_deg.tolist() == LAT_DEG.tolist()
    assert lon_deg.tolist() == x.tolist()


@pytest.mark.parametrize(
    "text",
    [
        "+proj=longlat +ellps=WGS84 +towgs84=100,0,0",
        "+proj=longlat +ellps=WGS84 +pm=paris",
        "EPSG:4267",
        "EPSG:4258",
        "EPSG:3857",
    ],
)
def test_what_is_not_plain_wgs84_gets_a_transformer(text: str) -> None:
    assert of_code(text).transformer is not None


@pytest.mark.parametrize(
    ("code", "name", "unit", "metres"),
    [
        ("EPSG:32618", "EPSG:32618", "metre", 1.0),
        ("EPSG:2263", "EPSG:2263", "US survey foot", 1200.0 / 3937.0),
        ("EPSG:2222", "EPSG:2222", "foot", 0.3048),
        ("EPSG:4269", "EPSG:4269", "degree", 1.0),
        ("EPSG:8806", "EPSG:26934", "metre", 1.0),
        ("+proj=tmerc +lat_0=3 +lon_0=-74.1 +x_0=7", "unknown", "metre", 1.0),
    ],
)
def test_a_crs_names_itself_and_its_unit(
    code: str, name: str, unit: str, metres: float
) -> None:
    ready = of_code(code)
    assert ready.crs_name == name
    assert ready.unit_name == unit
    assert ready.metres_per_unit == pytest.approx(metres, rel=1e-12)


@pytest.mark.parametrize(
    ("code", "unit", "datum"),
    [
        ("EPSG:32618", None, None),
        ("EPSG:9707", "m", "EGM96 geoid"),
        ("EPSG:32618+3855", "m", "EGM2008 geoid"),
        ("EPSG:2263+8228", "ft", "North American Vertical Datum 1988"),
        ("EPSG:2263+6360", "us-ft", "North American Vertical Datum 1988"),
        ("EPSG:4979", "m", "ellipsoid of World Geodetic System 1984 ensemble"),
    ],
)
def test_heights_have_the_unit_and_datum_of_the_vertical_part(
    code: str, unit: str | None, datum: str | None
) -> None:
    ready = of_code(code)
    assert (ready.vertical_unit, ready.vertical_datum) == (unit, datum)


def test_a_bound_crs_keeps_its_vertical_unit() -> None:
    ready = of_code("+proj=utm +zone=18 +ellps=intl +towgs84=1,2,3 +vunits=us-ft")
    assert ready.vertical_unit == "us-ft"
    assert ready.unit_name == "metre"


def test_easting_stands_first_even_where_the_crs_says_northing() -> None:
    x, y = of_code("EPSG:2180").to_crs(np.array([52.0]), np.array([19.0]))
    # the central meridian, 19 E, has false easting 500 000 m
    assert x[0] == pytest.approx(500_000.0, abs=1.0)
    assert y[0] > 100_000.0


@pytest.mark.parametrize(
    ("code", "within_deg"),
    [
        ("EPSG:32618", NOTHING_DEG),
        ("EPSG:2263", NOTHING_DEG),
        ("EPSG:4258", NOTHING_DEG),
        ("EPSG:4267", SHIFT_CLOSES_DEG),
        ("EPSG:4807", SHIFT_CLOSES_DEG),
    ],
)
def test_there_and_back_is_where_it_was(code: str, within_deg: float) -> None:
    ready = of_code(code)
    lat_deg, lon_deg = ready.to_wgs84(*ready.to_crs(LAT_DEG, LON_DEG))
    assert lat_deg == pytest.approx(LAT_DEG, abs=within_deg)
    assert lon_deg == pytest.approx(LON_DEG, abs=within_deg)


def test_longitude_in_another_datum_runs_on_through_the_date_line() -> None:
    ready = of_code("EPSG:4167")
    lon_deg = np.array([179.9, 180.0, 180.1, 181.0])
    lat_deg = np.full(4, -43.0)
    x, y = ready.to_crs(lat_deg, lon_deg)
    assert x == pytest.approx(lon_deg, abs=1e-4)
    again_lat_deg, again_lon_deg = ready.to_wgs84(x, y)
    assert again_lon_deg == pytest.approx(lon_deg, abs=NOTHING_DEG * 1000.0)
    assert again_lat_deg == pytest.approx(lat_deg, abs=NOTHING_DEG * 1000.0)


def test_longitude_from_paris_in_grads_keeps_its_turns() -> None:
    ready = of_code("EPSG:4807")
    assert ready.unit_name == "grad"
    x, y = ready.to_crs(np.array([45.0, 45.0]), np.array([2.33722917, 362.33722917]))
    assert x == pytest.approx([0.0, 400.0], abs=0.01)
    assert y == pytest.approx([50.0, 50.0], abs=0.01)
    _, lon_deg = ready.to_wgs84(x, y)
    assert lon_deg == pytest.approx([2.33722917, 362.33722917], abs=SHIFT_CLOSES_DEG)


def test_wgs84_in_grads_is_not_taken_for_degrees() -> None:
    wkt = CRS.from_epsg(4326).to_wkt("WKT1_GDAL")
    ready = projector(
        wkt.replace(
            'UNIT["degree",0.0174532925199433', 'UNIT["grad",0.0157079632679490'
        )
        .replace(',AUTHORITY["EPSG","9122"]', "")
        .replace(',AUTHORITY["EPSG","4326"]', "")
    )
    assert ready.unit_name == "grad"
    x, y = ready.to_crs(np.array([45.0]), np.array([270.0]))
    assert x == pytest.approx([300.0], abs=1e-9)
    assert y == pytest.approx([50.0], abs=1e-9)


def test_a_turn_more_of_longitude_is_the_same_easting() -> None:
    ready = of_code("EPSG:32601")
    lat_deg = np.array([10.0, 10.0])
    x, _ = ready.to_crs(lat_deg, np.array([-179.5, 180.5]))
    assert x[0] == pytest.approx(x[1], abs=1e-6)


def test_where_the_projection_has_no_value_it_is_infinite() -> None:
    # a view of the globe from above 0 N 0 E has no far side
    globe = of_code("+proj=ortho +lat_0=0 +lon_0=0 +datum=WGS84")
    x, y = globe.to_crs(np.array([0.0]), np.array([170.0]))
    assert np.isinf(x[0])
    assert np.isinf(y[0])


def test_a_datum_without_a_known_shift_is_called_ballpark() -> None:
    ready = of_code("EPSG:4034")
    assert ready.ballpark
    assert is_rough_at(ready, 0.0, 0.0)
    x, _ = ready.to_crs(LAT_DEG, LON_DEG)
    assert x == pytest.approx(LON_DEG, abs=1e-9)


def test_a_shift_known_in_one_country_is_ballpark_in_another() -> None:
    ready = of_code("EPSG:27700")
    assert not ready.ballpark
    assert not is_rough_at(ready, 52.0, -1.0)
    assert is_rough_at(ready, 0.0, 50.0)


def test_a_single_known_shift_is_not_ballpark_anywhere() -> None:
    assert not is_rough_at(of_code("EPSG:2263"), 40.7, -74.0)
    assert not is_rough_at(of_code("EPSG:4258"), 50.0, 10.0)


def test_the_same_text_gives_the_same_projector() -> None:
    wkt = CRS.from_epsg(32618).to_wkt()
    assert projector(wkt) is projector(wkt)


@pytest.mark.parametrize("wkt", ["GEOGCS[oops", "no map at all"])
def test_a_malformed_crs_is_a_fault_of_the_dem(wkt: str) -> None:
    with pytest.raises(DemError, match="cannot be read"):
        projector(wkt)


def test_a_dem_without_a_crs_is_told_so() -> None:
    with pytest.raises(DemError, match="no CRS"):
        projector("  ")


@pytest.mark.parametrize(
    "text",
    [
        "EPSG:4978",
        "EPSG:3855",
        "+proj=ob_tran +o_proj=longlat +o_lat_p=40 +lon_0=10 +o_lon_p=0",
    ],
)
def test_a_crs_that_is_no_map_is_refused(text: str) -> None:
    with pytest.raises(DemError, match="is no map"):
        of_code(text)


def test_depths_and_strange_units_are_refused() -> None:
    with pytest.raises(DemError, match="counts downwards"):
        of_code("EPSG:32618+5715")
    with pytest.raises(DemError, match="are not read"):
        of_code("+proj=utm +zone=18 +datum=WGS84 +vunits=fath")


@pytest.mark.parametrize("text", ["EPSG:32618", "epsg:32618", " EPSG : 32618 "])
def test_a_code_is_taken_in_any_case(text: str) -> None:
    assert crs_from_user(text).crs_name == "EPSG:32618"


@pytest.mark.parametrize(
    ("text", "why"),
    [
        ("EPSG:999999", "No CRS"),
        ("32618", "is no CRS code"),
        ("EPSG:4978", "is no map"),
        ("", "is no CRS code"),
        ("NOBODY:7", "No CRS"),
    ],
)
def test_what_is_no_code_of_a_map_is_an_input_error(text: str, why: str) -> None:
    with pytest.raises(InputError, match=why):
        crs_from_user(text)
