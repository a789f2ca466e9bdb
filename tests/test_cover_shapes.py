"""Trees and buildings read from files, and where a path runs through them."""

import json
from collections.abc import Callable
from pathlib import Path
from typing import Any

import numpy as np
import pyogrio
import pytest
import shapely
from pyproj import Geod

from profiler.earth import destination, geodesic_path
from profiler.errors import InputError
from profiler.model import CoverKind, CoverSpan, Point
from profiler.shapes import read_cover, read_cover_file, spans_along
from profiler.shapes.cover import DISC_RADIUS_M
from tests.terrain import CENTRE, CENTRED_CRS, place

#: Metres of a tenth of a millimetre: the sag of a 10 m chord is below a tenth of it.
EXACT_M = 1e-4
WGS84 = Geod(ellps="WGS84")

Write = Callable[..., Path]
Ring = list[tuple[float, float]]


@pytest.fixture
def write(tmp_path: Path) -> Write:
    """Writes features as GeoJSON on WGS84; or as a layer on the centre's own map."""

    def writer(*features: dict[str, Any], name: str = "wood.geojson") -> Path:
        path = tmp_path / name
        whole = {"type": "FeatureCollection", "features": features}
        path.write_text(json.dumps(whole), encoding="utf-8")
        return path

    return writer


def feature(shape: str, coordinates: object, /, **properties: object) -> dict[str, Any]:
    geometry = {"type": shape, "coordinates": coordinates}
    return {"type": "Feature", "properties": properties, "geometry": geometry}


def on_map(path: Path, shapes: list[Any], **columns: list[Any]) -> Path:
    """A layer on the map of metres around the centre, east first."""
    pyogrio.raw.write(
        path,
        shapely.to_wkb(np.array(shapes, dtype=object)),
        [np.array(column, dtype=object) for column in columns.values()],
        list(columns),
        geometry_type="Unknown",
        crs=CENTRED_CRS,
    )
    return path


def box(west: float, south: float, east: float, north: float) -> Any:
    return shapely.box(west, south, east, north)


def eastward(length_m: float = 4000.0) -> Any:
    """The path from the centre due east: y = 0 on the map, but for its bow."""
    end = place(90.0, length_m)
    return geodesic_path(
        Point(lat_deg=CENTRE[0], lon_deg=CENTRE[1]),
        Point(lat_deg=end[0], lon_deg=end[1]),
    )


def runs(spans: tuple[CoverSpan, ...]) -> list[tuple[float, float]]:
    return [(span.start_m, span.end_m) for span in spans]


def along(shapes: list[Any], folder: Path, **columns: list[Any]) -> Any:
    columns = columns or {"height_m": [10.0] * len(shapes)}
    file = on_map(folder / "layer.gpkg", shapes, **columns)
    return spans_along(read_cover(file), eastward())


SQUARE: Ring = [(0.0, 0.0), (0.0, 1.0), (1.0, 1.0), (1.0, 0.0), (0.0, 0.0)]


def test_a_box_across_the_path_is_entered_and_left_at_its_sides(tmp_path: Path) -> None:
    (span,) = along([box(1003.3, -50.0, 1017.7, 60.0)], tmp_path)
    assert (span.start_m, span.end_m) == pytest.approx((1003.3, 1017.7), abs=EXACT_M)
    assert (span.height_m, span.kind, span.name) == (10.0, "trees", "polygon 1")


def test_the_hole_of_a_polygon_is_bare(tmp_path: Path) -> None:
    ring = shapely.Polygon(
        box(1000, -90, 1900, 90).exterior.coords,
        [box(1200, -50, 1300, 50).exterior.coords],
    )
    found = runs(along([ring], tmp_path))
    assert np.array(found) == pytest.approx(
        np.array([(1000.0, 1200.0), (1300.0, 1900.0)]), abs=EXACT_M
    )


def test_a_multipolygon_is_one_feature_of_several_runs(tmp_path: Path) -> None:
    parts = shapely.MultiPolygon([box(500, -9, 600, 9), box(700, -9, 800, 9)])
    spans = along([box(9, 50, 20, 60), parts], tmp_path)
    assert [span.name for span in spans] == ["polygon 2", "polygon 2"]
    assert runs(spans)[1] == pytest.approx((700.0, 800.0), abs=EXACT_M)


def test_a_comb_is_crossed_as_often_as_it_has_teeth(tmp_path: Path) -> None:
    teeth = [box(100 * k, -20, 100 * k + 30, 20) for k in range(1, 9)]
    comb = shapely.union_all([*teeth, box(100, 10, 830, 20)])
    assert len(along([comb], tmp_path)) == 8


def test_a_corner_that_touches_the_path_covers_nothing(tmp_path: Path) -> None:
    corner = shapely.Polygon([(1000.0, 0.0), (990.0, 30.0), (1010.0, 30.0)])
    assert along([corner], tmp_path) == ()


def test_a_side_that_lies_beside_the_path_covers_nothing(tmp_path: Path) -> None:
    assert along([box(1000, 0.001, 1100, 30)], tmp_path) == ()


def test_a_polygon_around_the_whole_path_covers_all_of_it(tmp_path: Path) -> None:
    path = eastward()
    assert runs(along([box(-99, -99, 5000, 99)], tmp_path)) == [(0.0, path.length_m)]


def test_a_path_that_starts_inside_is_covered_from_0(tmp_path: Path) -> None:
    (run,) = runs(along([box(-99, -99, 250, 99)], tmp_path))
    assert run == pytest.approx((0.0, 250.0), abs=EXACT_M)
    assert run[0] == 0.0


def test_two_that_overlap_stay_two_spans(tmp_path: Path) -> None:
    spans = along([box(100, -9, 300, 9), box(200, -9, 400, 9)], tmp_path)
    assert [span.name for span in spans] == ["polygon 1", "polygon 2"]


def test_a_polygon_beside_the_path_is_not_on_it(tmp_path: Path) -> None:
    assert along([box(100, 20, 300, 90)], tmp_path) == ()


def test_an_outline_that_crosses_itself_is_its_two_halves(tmp_path: Path) -> None:
    bow_tie = shapely.Polygon([(100, -50), (300, 50), (300, -50), (100, 50)])
    (run,) = runs(along([bow_tie], tmp_path))
    assert run == pytest.approx((100.0, 300.0), abs=EXACT_M)


@pytest.mark.parametrize("crs", ["EPSG:32630", "EPSG:3857", "EPSG:4326"])
def test_the_map_of_a_file_does_not_move_its_trees(tmp_path: Path, crs: str) -> None:
    from pyproj import Transformer

    there = Transformer.from_crs(CENTRED_CRS, crs, always_xy=True)
    # sides square to the path, so that their own bow does not matter
    square = shapely.transform(
        shapely.segmentize(box(1000, -20, 1040, 20), 5.0),
        lambda xy: np.column_stack(there.transform(xy[:, 0], xy[:, 1])),
    )
    file = tmp_path / "layer.gpkg"
    pyogrio.raw.write(
        file,
        shapely.to_wkb(np.array([square], dtype=object)),
        [np.array([12.0])],
        ["height"],
        geometry_type="Polygon",
        crs=crs,
    )
    (run,) = runs(spans_along(read_cover(file), eastward()))
    assert run == pytest.approx((1000.0, 1040.0), abs=EXACT_M)


@pytest.mark.parametrize(
    "lons",
    [
        pytest.param([(179.99, 180.01)], id="past 180"),
        pytest.param([(179.99, -179.99)], id="jumping"),
        pytest.param([(-180.01, -179.99)], id="past -180"),
        pytest.param([(179.99, 180.0), (-180.0, -179.99)], id="cut in two"),
    ],
)
@pytest.mark.parametrize("eastbound", [True, False])
def test_a_polygon_over_the_date_line_is_one_run(
    write: Write, lons: list[tuple[float, float]], *, eastbound: bool
) -> None:
    squares = [[[[w, -1.0], [e, -1.0], [e, 1.0], [w, 1.0], [w, -1.0]]] for w, e in lons]
    file = write(feature("MultiPolygon", squares, height_m=8.0, name="Isle"))
    west, east = Point(lat_deg=0.0, lon_deg=179.9), Point(lat_deg=0.0, lon_deg=-179.9)
    path = geodesic_path(west, east) if eastbound else geodesic_path(east, west)
    (run,) = runs(spans_along(read_cover(file), path))
    degree = path.length_m / 0.2
    assert run == pytest.approx((0.09 * degree, 0.11 * degree), abs=EXACT_M)


@pytest.mark.parametrize(("off_m", "half_m"), [(0.0, 5.0), (3.0, 4.0), (4.8, 1.4)])
def test_a_point_is_a_disc_of_5_m(tmp_path: Path, off_m: float, half_m: float) -> None:
    (span,) = along([shapely.Point(2000.0, off_m)], tmp_path)
    assert DISC_RADIUS_M == 5.0
    assert span.name == "point 1"
    assert (span.start_m, span.end_m) == pytest.approx(
        (2000.0 - half_m, 2000.0 + half_m), abs=0.002
    )


def test_the_edge_of_a_disc_is_its_radius_from_its_middle_on_the_ellipsoid() -> None:
    from profiler.earth.projection import crs_from_user
    from profiler.shapes import CoverShape

    path = geodesic_path(
        Point(lat_deg=69.0, lon_deg=20.0), Point(lat_deg=68.1, lon_deg=24.0)
    )
    on = destination(path.start, path.azimuth_deg, dist_m=120_000.0)
    centre = destination(on, 10.0, dist_m=60.0)
    disc = CoverShape(
        name="a",
        kind=CoverKind.TREES,
        height_m=9.0,
        crs=crs_from_user("EPSG:4326"),
        centre=centre,
        radius_m=100.0,
    )
    (span,) = spans_along([disc], path)
    for at in (span.start_m, span.end_m):
        edge = destination(path.start, path.azimuth_deg, dist_m=at)
        radius = WGS84.inv(centre.lon_deg, centre.lat_deg, edge.lon_deg, edge.lat_deg)[
            2
        ]
        assert radius == pytest.approx(100.0, abs=1e-6)


def test_a_disc_just_off_the_path_covers_nothing(tmp_path: Path) -> None:
    assert along([shapely.Point(2000.0, 5.01)], tmp_path) == ()


@pytest.mark.parametrize("east", [-3.0, 4003.0])
def test_a_disc_past_an_end_covers_what_it_reaches(tmp_path: Path, east: float) -> None:
    (run,) = runs(along([shapely.Point(east, 0.0)], tmp_path))
    assert run[1] - run[0] == pytest.approx(2.0, abs=EXACT_M)


def test_a_disc_takes_its_own_radius(tmp_path: Path) -> None:
    (run,) = runs(
        along([shapely.Point(2000, 0)], tmp_path, height_m=[9.0], radius_ft=[100.0])
    )
    assert run[1] - run[0] == pytest.approx(60.96, abs=EXACT_M)


def test_a_group_of_points_is_a_disc_each(tmp_path: Path) -> None:
    group = shapely.MultiPoint([(1000, 0), (1500, 0)])
    assert len(along([group], tmp_path)) == 2


@pytest.mark.parametrize(
    ("columns", "metres", "kind"),
    [
        ({"height_m": 12.0}, 12.0, "trees"),
        ({"Height (ft)": 100.0}, 30.48, "trees"),
        ({"tree_height": "12.5"}, 12.5, "trees"),
        ({"height": "12 m"}, 12.0, "trees"),
        ({"height": "40ft"}, 12.192, "trees"),
        ({"building_height": 7}, 7.0, "building"),
        ({"building_h": 7}, 7.0, "building"),
        ({"h": 7, "Type": "Farm buildings"}, 7.0, "building"),
        ({"h": 7, "class": "wood"}, 7.0, "trees"),
        ({"building_height": 7, "kind": "orchard"}, 7.0, "trees"),
    ],
)
def test_columns_say_height_and_kind(
    write: Write, columns: dict[str, object], metres: float, kind: str
) -> None:
    (shape,) = read_cover(write(feature("Polygon", [SQUARE], **columns)))
    assert shape.height_m == pytest.approx(metres, abs=1e-9)
    assert shape.kind is CoverKind(kind)


def test_a_name_column_names_and_an_id_does_not(write: Write) -> None:
    named = feature("Polygon", [SQUARE], h=5, name=" Old Mill ", id=77)
    other = feature("Polygon", [SQUARE], h=5, name=None, id=78)
    shapes = read_cover(write(named, other))
    assert [shape.name for shape in shapes] == ["Old Mill", "polygon 2"]


def test_height_0_stands_for_nothing(write: Write) -> None:
    felled = feature("Polygon", [SQUARE], height_m=0)
    wood = feature("Polygon", [SQUARE], height_m=9)
    assert [s.name for s in read_cover(write(felled, wood))] == ["polygon 2"]


def test_a_missing_height_is_taken_only_on_request(write: Write) -> None:
    wood = feature("Polygon", [SQUARE], height_m=9)
    bare = feature("Polygon", [SQUARE], height_m=None)
    file = write(wood, bare)
    heights = [s.height_m for s in read_cover(file, otherwise_m=15.0)]
    assert heights == [9.0, 15.0]
    with pytest.raises(InputError, match='"polygon 2" state no height'):
        read_cover(file)


def test_lines_are_left_out_and_counted(write: Write) -> None:
    hedge = feature("LineString", [[0, 0], [1, 1]], height_m=2)
    wood = feature("Polygon", [SQUARE], height_m=9)
    (note,) = read_cover_file(write(hedge, wood)).notes
    assert note.code == "cover-skipped"
    assert note.text.endswith("neither polygons nor points, left out: 1.")


@pytest.mark.parametrize(
    ("made", "part"),
    [
        (feature("Polygon", [SQUARE]), 'has no column of heights; name it "height_m"'),
        (feature("Polygon", [SQUARE], h=-3), "height -3 is not within 0 to 1000 m"),
        (feature("Polygon", [SQUARE], h=4310), "bare ground, not the sea"),
        (feature("Polygon", [SQUARE], h="tall"), 'height "tall" is not a decimal'),
        (feature("Point", [0, 0], h=3, radius_m=0), "radius 0 is not within above 0"),
        (feature("Point", [0, 95.0], h=3), "Latitude 95"),
        (feature("LineString", [[0, 0], [1, 1]], h=2), "no polygon or point"),
        (feature("Polygon", [SQUARE], h=0), "no polygon or point with a height above"),
        (
            feature("Polygon", [[[0, 80], [120, 80], [-120, 80], [0, 80]]], h=9),
            "runs around a pole",
        ),
    ],
)
def test_what_cannot_be_cover_is_refused_with_its_cause(
    write: Write, made: dict[str, Any], part: str
) -> None:
    with pytest.raises(InputError) as caught:
        read_cover(write(made))
    assert part in str(caught.value)


def test_a_missing_file_a_folder_and_an_unknown_ending_are_refused(
    tmp_path: Path,
) -> None:
    (tmp_path / "wood.doc").write_text("x")
    for name, part in (("", "is a folder"), ("a", "not exist"), ("wood.doc", ".gpkg")):
        with pytest.raises(InputError, match=part):
            read_cover(tmp_path / name)


def test_xml_that_declares_entities_is_refused(tmp_path: Path) -> None:
    file = tmp_path / "wood.kml"
    file.write_text('<?xml version="1.0"?><!DOCTYPE k [<!ENTITY a "b">]><kml/>')
    with pytest.raises(InputError, match="XML entities"):
        read_cover(file)


def test_flatgeobuf_is_read(tmp_path: Path) -> None:
    file = on_map(tmp_path / "wood.fgb", [box(1000, -9, 1100, 9)], height_m=[9.0])
    assert len(spans_along(read_cover(file), eastward())) == 1


def test_a_layer_without_a_crs_is_refused(tmp_path: Path) -> None:
    file = on_map(tmp_path / "wood.shp", [box(0, 0, 1, 1)], height_m=[9.0])
    file.with_suffix(".prj").unlink()
    with pytest.raises(InputError, match="states no CRS"):
        read_cover(file)


def test_from_the_other_end_the_runs_are_mirrored(tmp_path: Path) -> None:
    shapes = [box(100, -9, 300, 9), shapely.Point(2000, 2), box(1200, -1, 1210, 80)]
    file = on_map(tmp_path / "layer.gpkg", shapes, height_m=[1.0, 2.0, 3.0])
    path = eastward()
    back = geodesic_path(path.end, path.start)
    there = spans_along(read_cover(file), path)
    again = spans_along(read_cover(file), back)
    turned = [(path.length_m - e, path.length_m - s) for s, e in runs(again)][::-1]
    assert np.array(runs(there)) == pytest.approx(np.array(turned), abs=1e-6)


def test_a_map_cut_at_the_date_line_gives_no_cover_across_the_world(
    tmp_path: Path,
) -> None:
    wide = shapely.box(-1e6, -9e3, 1e6, 9e3)
    file = tmp_path / "layer.gpkg"
    pyogrio.raw.write(
        file,
        shapely.to_wkb(np.array([wide], dtype=object)),
        [np.array([12.0])],
        ["height"],
        geometry_type="Polygon",
        crs="EPSG:3857",
    )
    path = geodesic_path(
        Point(lat_deg=0.0, lon_deg=179.9), Point(lat_deg=0.0, lon_deg=-179.9)
    )
    assert spans_along(read_cover(file), path) == ()
