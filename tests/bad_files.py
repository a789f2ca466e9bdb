"""Bad elevation files and bad files of sites, and how to make each."""

from collections.abc import Callable
from pathlib import Path
from typing import Any, NamedTuple

import numpy as np
import rasterio
from rasterio.enums import ColorInterp
from rasterio.transform import Affine

from tests import terrain
from tests.asking import GIVEN, HIDDEN, UPLAND

#: Two points inside the sample, far from the sea.
FROM = ("--from", "48.2092,-21.50344")
TO = ("--to", "48.32758,-21.17892")
UPLAND_TRANSFORM = (0.001, 0.0, -21.6, 0.0, -0.001, 48.4)
FLAT = np.full((300, 600), 100.0)

Make = Callable[[Path], tuple[str, ...]]


class Bad(NamedTuple):
    """A bad input: how to make it, how it ends, and what is said (a pattern)."""

    name: str
    make: Make
    status: int
    says: str


def words(*given: str) -> Make:
    """The sample upland with these words."""
    return lambda _: ("profile", *GIVEN, *given)


def main_example(*given: str) -> Make:
    return words(*HIDDEN, *given)


def start(text: str, *given: str) -> Make:
    """This text as the eye's place."""
    return words("--from", text, *TO, *given)


def dem(make: Callable[[Path], Path], *given: str) -> Make:
    """A bad elevation file under a good question."""
    return lambda folder: ("profile", "--dem", str(make(folder)), *FROM, *TO, *given)


def sites(name: str, content: str | bytes, wanted: str = "Skarvel") -> Make:
    """A bad file of sites."""

    def make(folder: Path) -> tuple[str, ...]:
        raw = content if isinstance(content, bytes) else content.encode()
        (folder / name).write_bytes(raw)
        file = str(folder / name)
        return ("profile", "--dem", str(UPLAND), "--sites", file, "--from", wanted, *TO)

    return make


def output(option: str, name: str) -> Make:
    """A result in the folder of the test."""
    return lambda folder: (
        "profile", *GIVEN, *HIDDEN, option, str(folder / name)
    )  # fmt: skip


def bytes_of(name: str, content: bytes) -> Callable[[Path], Path]:
    def make(folder: Path) -> Path:
        (folder / name).write_bytes(content)
        return folder / name

    return make


def grid(
    posts: Any = FLAT,
    transform: terrain.Transform = UPLAND_TRANSFORM,
    crs: str | None = "EPSG:4326",
    **options: Any,
) -> Callable[[Path], Path]:
    return lambda folder: terrain.write_geotiff(
        folder / "bad.tif", posts, transform, crs, **options
    )


def bands(count: int, dtype: str) -> Callable[[Path], Path]:
    def make(folder: Path) -> Path:
        shape = {"height": 300, "width": 600, "count": count, "dtype": dtype}
        where = {"crs": "EPSG:4326", "transform": Affine(*UPLAND_TRANSFORM)}
        with rasterio.open(
            folder / "bad.tif", "w", driver="GTiff", **shape, **where
        ) as file:
            for band in range(1, count + 1):
                file.write(FLAT.astype(dtype), band)
            if count == 3:
                file.colorinterp = (
                    ColorInterp.red, ColorInterp.green, ColorInterp.blue,
                )  # fmt: skip
        return folder / "bad.tif"

    return make


def holes(folder: Path) -> Path:
    """Ground with a void of 10 km around the eye."""
    posts = FLAT.copy()
    posts[100:300, 0:200] = np.nan
    return grid(posts, nodata=-9999.0)(folder)


def loop(folder: Path) -> Path:
    (folder / "one").symlink_to(folder / "two")
    (folder / "two").symlink_to(folder / "one")
    return folder / "one"


def no_image(folder: Path) -> Path:
    (folder / "dir.tif").mkdir()
    return folder / "dir.tif"


def survey_feet(folder: Path) -> Path:
    """State plane in US survey feet; heights in no stated unit, 212 to 1480."""
    posts = np.linspace(212.0, 1480.0, 40_000).reshape(200, 200)
    transform = (100.0, 0.0, 2_000_000.0, 0.0, -100.0, 400_000.0)
    return grid(posts, transform, "EPSG:2227")(folder)


ENTITIES = """<?xml version="1.0"?><!DOCTYPE gpx [<!ENTITY a "aaaaaaaaaa">
<!ENTITY b "&a;&a;&a;&a;&a;&a;&a;&a;&a;&a;"><!ENTITY c "&b;&b;&b;&b;&b;&b;&b;&b;">]>
<gpx version="1.1"><wpt lat="48.2" lon="-21.5"><name>&c;</name></wpt></gpx>"""
BROKEN_GPX = '<?xml version="1.0"?><gpx version="1.1"><wpt lat="48.2" lon="-21.5"><na'
NO_PLACEMARKS = (
    '<?xml version="1.0"?><kml xmlns="http://www.opengis.net/kml/2.2"><Document>'
    "<name>none</name></Document></kml>"
)
HEADER = UPLAND.read_bytes()

ELEVATION = [
    Bad("missing file", dem(lambda f: f / "none.tif"), 3, r'No elevation file ".*none'),
    Bad("name of 300 letters", dem(lambda f: f / ("n" * 300)), 3, "File name too long"),
    Bad("zero bytes", dem(bytes_of("e.tif", b"")), 3, r"empty \(0 bytes\)"),
    Bad(
        "text called tif",
        dem(bytes_of("t.tif", b"hello")),
        3,
        r'"t.tif" cannot be read as an elevation grid',
    ),
    Bad("cut in the header", dem(bytes_of("c.tif", HEADER[:60])), 3, r'"c.tif"'),
    Bad(
        "cut in the data",
        dem(bytes_of("c.tif", HEADER[: len(HEADER) // 2])),
        3,
        r'"c.tif"',
    ),
    Bad("no CRS", dem(grid(crs=None)), 3, r"Say --dem-crs EPSG:n"),
    Bad(
        "no geotransform",
        dem(grid(transform=(1.0, 0.0, 0.0, 0.0, 1.0, 0.0))),
        3,
        r"does not say where it lies \(no geotransform\)",
    ),
    Bad(
        "all void",
        dem(grid(FLAT * np.nan, nodata=-9999.0)),
        3,
        r"no ground is known at the point",
    ),
    Bad("one post", dem(grid(FLAT[:1, :1])), 3, r"1 x 1 posts; .* at least 2 x 2"),
    Bad("complex numbers", dem(bands(1, "complex64")), 3, r"holds complex numbers"),
    Bad("a photograph", dem(bands(3, "uint8")), 3, r"3 bands; an elevation file has"),
    Bad("a loop of links", dem(loop), 3, r"No elevation file"),
    Bad("an empty folder", dem(no_image), 3, r"holds no elevation file"),
    Bad("pattern without match", dem(lambda f: f / "*.tif"), 3, r"No file matches"),
    Bad(
        "heights of unknown unit on feet",
        dem(survey_feet),
        3,
        r"^Error: Heights run from 212 to 1 480, unit not stated, map unit US survey "
        r"foot\. Say --dem-unit us-ft, ft or m\.$",
    ),
    Bad("a stated unit unknown", dem(grid(unit="fathom")), 3, r'heights in "fathom"'),
    Bad(
        "eye on a void", dem(holes), 3, r"no ground is known at the point .*--from-amsl"
    ),
    Bad("name not UTF-8", dem(bytes_of("n\udcff.tif", HEADER)), 3, r"is not UTF-8"),
    Bad("unknown unit", main_example("--dem-unit", "yd"), 2, r"'yd' is not one of"),
    Bad("unknown kind", main_example("--dem-kind", "lidar"), 2, r"is not one of"),
    Bad("CRS declared badly", dem(grid(crs=None), "--dem-crs", "EPSG:x"), 3, r"EPSG:x"),
    Bad(
        "no --dem", lambda _: ("profile", *FROM, *TO), 2, r"must cover 48.20 to 48.34 N"
    ),
    Bad(
        "expanded by the shell",
        lambda _: ("profile", "--dem", "tiles/a.tif", "tiles/b.tif", *FROM, *TO),
        2,
        r"^Error: --dem takes one name each time; give the folder: --dem tiles\.$",
    ),
    Bad(
        "expanded here",
        lambda _: ("profile", "--dem", "a.tif", "b.tif", "c.tif", *FROM, *TO),
        2,
        r"give the folder: --dem \.\.$",
    ),
    Bad("sea level nan", main_example("--sea-level", "nan"), 2, r"is not a height"),
]
NAMES = [
    Bad(
        "near miss",
        start("Skarvle"),
        3,
        r'^Error: --from: No site "Skarvle"\. Nearest: Skarvel\.$',
    ),
    Bad(
        "unknown site", start("Zzyzx"), 3, r'No site "Zzyzx" and none like it\. Known:'
    ),
    Bad(
        "a name without a file",
        lambda _: ("profile", "--dem", str(UPLAND), "--from", "Skarvel", *TO),
        3,
        r'"Skarvel" is no pair of coordinates\. Write "57\.1,-4\.2" .* --sites\.$',
    ),
    Bad(
        "two places of one name",
        sites("s.csv", "name,lat,lon\nSkarvel,48.2,-21.5\nSkarvel,48.3,-21.4\n"),
        3,
        r'2 sites are called "Skarvel": .*; .*\. Give the place itself',
    ),
    Bad("broken GPX", sites("b.gpx", BROKEN_GPX), 3, r"b\.gpx cannot be read"),
    Bad("entity bomb", sites("b.gpx", ENTITIES), 3, r"declares its own XML entities"),
    Bad("empty CSV", sites("e.csv", ""), 3, r"e\.csv is empty"),
    Bad(
        "CSV of headings", sites("e.csv", "name,lat,lon\n"), 3, r"headings but no rows"
    ),
    Bad("CSV without places", sites("n.csv", "name\nA\n"), 3, r"has no lat column"),
    Bad("CSV with text", sites("n.csv", "name,lat,lon\nA,x,1\n"), 3, r"Row 2"),
    Bad("CSV with nan", sites("n.csv", "name,lat,lon\nA,nan,1\n"), 3, r"Row 2"),
    Bad(
        "CSV not UTF-8", sites("n.csv", b"name,lat,lon\n\xff\xfe\xf0,1,2\n"), 3, "UTF-8"
    ),
    Bad("KML without placemarks", sites("n.kml", NO_PLACEMARKS), 3, r"n\.kml"),
    Bad("GeoJSON of nothing", sites("n.geojson", "{}"), 3, r"n\.geojson"),
    Bad(
        "a picture of sites", sites("s.png", b"\x89PNG"), 3, r"are read from files that"
    ),
    Bad(
        "missing file of sites",
        words("--sites", "none.csv", *HIDDEN),
        3,
        r"none\.csv does not exist",
    ),
    Bad("folder of sites", words("--sites", ".", *HIDDEN), 3, r"is a folder"),
]
