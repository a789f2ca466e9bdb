"""Make the sample terrain: an invented upland in the open ocean.

Nothing here is real ground. Both elevation files are samples of one surface. Run it
again and the same bytes come out: ``python sample_dem/make_sample_dem.py [FOLDER]``.
"""

import sys
from dataclasses import dataclass, replace
from pathlib import Path

import numpy as np
import rasterio
from numpy.typing import NDArray
from rasterio.transform import Affine
from rasterio.warp import transform as transform_points

sys.path.insert(0, str(Path(__file__).resolve().parents[1]))

from sample_dem.ground_numbers import (
    ANCHORS,
    BLOCK_POSTS,
    DEFLATE_EFFORT,
    EAST_DEG,
    EXTRA_M,
    FINE_CORNER_M,
    FINE_CRS,
    FINE_POST_M,
    FINE_POSTS,
    FINE_STEP_M,
    LAT_DEG_M,
    LOCH_LEVEL_M,
    LON_DEG_M,
    NORTH_DEG,
    POSTS_PER_DEG,
    PREDICTOR,
    ROWS_AT_ONCE,
    SEA_M,
    SEARCH_M,
    SEED,
    SOUTH_DEG,
    TOP_REACH,
    TOP_STEPS_M,
    UPLAND_STEP_M,
    WEST_DEG,
)
from sample_dem.ground_surface import (
    FloatArray,
    Surface,
    to_plane,
)


@dataclass(frozen=True, slots=True, kw_only=True)
class Place:
    """A line of the list of places."""

    name: str
    """What the place is called."""
    lat_deg: float
    """Latitude, before it is moved to what ``kind`` asks for."""
    lon_deg: float
    """Longitude, likewise."""
    kind: str
    """``here``, ``top``, ``low`` (valley floor), ``coast`` or ``loch`` (nearest)."""
    note: str
    """What it is, in a few words."""


#: The places a reader can name in the examples.
PLACES = (
    Place(
        name="Skarvel",
        lat_deg=48.20920,
        lon_deg=-21.50344,
        kind="here",
        note="hill farm, west end of the main example",
    ),
    Place(
        name="Quillet Mast",
        lat_deg=48.32758,
        lon_deg=-21.17892,
        kind="here",
        note="mast, east end of the main example",
    ),
    Place(
        name="Tarrow Pass",
        lat_deg=48.27367,
        lon_deg=-21.32674,
        kind="here",
        note="pass between them, on the line",
    ),
    Place(
        name="Sillet Brow",
        lat_deg=48.30805,
        lon_deg=-21.23246,
        kind="here",
        note="low brow near the mast, on the line",
    ),
    Place(
        name="Cobbin Round",
        lat_deg=48.32500,
        lon_deg=-21.39400,
        kind="top",
        note="rounded top",
    ),
    Place(
        name="Thrane Pike",
        lat_deg=48.225278,
        lon_deg=-21.231111,
        kind="top",
        note="sharp top; the posts miss its tip by metres",
    ),
    Place(
        name="Hask Edge",
        lat_deg=48.26847,
        lon_deg=-21.44431,
        kind="top",
        note="ridge in front of Cobbin Round",
    ),
    Place(
        name="Mossel Flat",
        lat_deg=48.38600,
        lon_deg=-21.27000,
        kind="top",
        note="highest of the tableland",
    ),
    Place(
        name="Pellow Knowe",
        lat_deg=48.27000,
        lon_deg=-21.11500,
        kind="top",
        note="top of the eastern ridge",
    ),
    Place(
        name="Wexel Hut",
        lat_deg=48.33350,
        lon_deg=-21.38560,
        kind="here",
        note="hut behind Cobbin Round as seen from Skarvel",
    ),
    Place(
        name="Ostrey Haven",
        lat_deg=48.28500,
        lon_deg=-21.56000,
        kind="coast",
        note="harbour",
    ),
    Place(
        name="Lirr Jetty",
        lat_deg=48.20500,
        lon_deg=-21.15500,
        kind="loch",
        note="jetty on Loch Lirr",
    ),
    Place(
        name="Vennick",
        lat_deg=48.23500,
        lon_deg=-21.43000,
        kind="low",
        note="village on the valley floor",
    ),
)


def rounded(ground: FloatArray, step_m: float) -> NDArray[np.float32]:
    """Heights in whole steps, the sea as its marker."""
    steps = np.round(ground / step_m)
    land = np.round(steps * step_m, 1)
    return np.where(steps > 0, land, SEA_M).astype(np.float32)


def write_tile(
    path: Path, ground: NDArray[np.float32], crs: str, place: Affine, text: str
) -> None:
    """Write one elevation file."""
    rows, cols = ground.shape
    with rasterio.open(
        path,
        "w",
        driver="GTiff",
        width=cols,
        height=rows,
        count=1,
        dtype="float32",
        crs=crs,
        transform=place,
        nodata=SEA_M,
        compress="deflate",
        predictor=PREDICTOR,
        zlevel=DEFLATE_EFFORT,
        tiled=True,
        blockxsize=BLOCK_POSTS,
        blockysize=BLOCK_POSTS,
    ) as dst:
        dst.write(ground, 1)
        dst.units = ("metre",)
        dst.set_band_description(1, text)
        dst.update_tags(AREA_OR_POINT="Area")


def upland_posts() -> tuple[FloatArray, FloatArray]:
    """Latitudes (southward) and longitudes of the posts of the upland."""
    rows = round((NORTH_DEG - SOUTH_DEG) * POSTS_PER_DEG)
    cols = round((EAST_DEG - WEST_DEG) * POSTS_PER_DEG)
    lat = NORTH_DEG - (np.arange(rows) + 1 / 2) / POSTS_PER_DEG
    return lat, WEST_DEG + (np.arange(cols) + 1 / 2) / POSTS_PER_DEG


def make_upland(surface: Surface) -> NDArray[np.float32]:
    """Heights of the upland at its posts."""
    lat, lon = upland_posts()
    parts = [
        surface.ground(*np.meshgrid(lat[k : k + ROWS_AT_ONCE], lon, indexing="ij"))
        for k in range(0, len(lat), ROWS_AT_ONCE)
    ]
    return rounded(np.concatenate(parts), UPLAND_STEP_M)


def make_fine(surface: Surface) -> tuple[NDArray[np.float32], Affine]:
    """Heights and place of the fine tile round the sharp top."""
    top = ANCHORS[-1]
    east, north = transform_points("EPSG:4326", FINE_CRS, [top.lon_deg], [top.lat_deg])
    half = FINE_POST_M * FINE_POSTS / 2
    west = round(east[0] / FINE_CORNER_M) * FINE_CORNER_M - half
    top_edge = round(north[0] / FINE_CORNER_M) * FINE_CORNER_M + half
    step = FINE_POST_M * (np.arange(FINE_POSTS) + 1 / 2)
    x, y = np.meshgrid(west + step, top_edge - step)
    lon, lat = transform_points(FINE_CRS, "EPSG:4326", x.ravel(), y.ravel())
    ground = surface.ground(
        np.array(lat).reshape(x.shape), np.array(lon).reshape(x.shape), EXTRA_M
    )
    place = Affine(FINE_POST_M, 0, west, 0, -FINE_POST_M, top_edge)
    return rounded(ground, FINE_STEP_M), place


def moved(place: Place, ground: NDArray[np.float32]) -> tuple[float, float]:
    """Latitude and longitude of a place, moved to the post its kind asks for."""
    if place.kind == "here":
        return place.lat_deg, place.lon_deg
    lat, lon = np.meshgrid(*upland_posts(), indexing="ij")
    x, y = to_plane(lat, lon)
    at_x, at_y = to_plane(np.array(place.lat_deg), np.array(place.lon_deg))
    far = np.hypot(x - at_x, y - at_y)
    near, land = far < SEARCH_M, ground > SEA_M
    water = ground == np.float32(LOCH_LEVEL_M)
    score = {
        "top": np.where(near & land, -ground, np.inf),
        "low": np.where(near & land, ground, np.inf),
        "coast": np.where(land & next_to(~land), far, np.inf),
        "loch": np.where(water & next_to(~water), far, np.inf),
    }[place.kind]
    best = int(np.argmin(score))
    found = float(lat.flat[best]), float(lon.flat[best])
    if place.kind == "top" and found != (place.lat_deg, place.lon_deg):
        return moved(replace(place, lat_deg=found[0], lon_deg=found[1]), ground)
    return found


def next_to(mask: NDArray[np.bool_]) -> NDArray[np.bool_]:
    """Posts with a neighbour in the mask."""
    p = np.pad(mask, 1)
    out: NDArray[np.bool_] = p[:-2, 1:-1] | p[2:, 1:-1] | p[1:-1, :-2] | p[1:-1, 2:]
    return out


def true_top(surface: Surface, lat: float, lon: float) -> tuple[float, float, float]:
    """Latitude, longitude and height of the top of the surface itself near a post."""
    for step in TOP_STEPS_M:
        shift = step * np.arange(-TOP_REACH, TOP_REACH + 1)
        lats, lons = np.meshgrid(
            lat + shift / LAT_DEG_M, lon + shift / LON_DEG_M, indexing="ij"
        )
        height = surface.ground(lats, lons)
        best = int(np.argmax(height))
        lat, lon = float(lats.flat[best]), float(lons.flat[best])
    return lat, lon, float(height.flat[best])


def sites_text(places: dict[str, tuple[float, float]]) -> str:
    """Text of the list of places."""
    lines = ["name,lat,lon,note"]
    for place in PLACES:
        lat, lon = places[place.name]
        lines.append(f'{place.name},{lat:.6f},{lon:.6f},"{place.note}"')
    return "\n".join(lines) + "\n"


def tops_text(surface: Surface, places: dict[str, tuple[float, float]]) -> str:
    """Text of the GPX file: the true tops of the surface."""
    lines = [
        '<?xml version="1.0" encoding="UTF-8"?>',
        '<gpx version="1.1" creator="make_sample_dem.py"'
        ' xmlns="http://www.topografix.com/GPX/1/1">',
        "  <metadata><desc>Invented tops of an invented upland</desc></metadata>",
    ]
    for place in PLACES:
        if place.kind == "top":
            lat, lon, height = true_top(surface, *places[place.name])
            lines += [
                f'  <wpt lat="{lat:.6f}" lon="{lon:.6f}">',
                f"    <ele>{height:.1f}</ele>",
                f"    <name>{place.name}</name>",
                f"    <desc>{place.note}</desc>",
                "  </wpt>",
            ]
    return "\n".join([*lines, "</gpx>", ""])


def make_all(folder: Path) -> None:
    """Write every file of the sample terrain into a folder."""
    folder.mkdir(parents=True, exist_ok=True)
    surface = Surface(SEED)
    upland = make_upland(surface)
    post = 1 / POSTS_PER_DEG
    place = Affine(post, 0, WEST_DEG, 0, -post, NORTH_DEG)
    text = "invented ground, height above sea"
    write_tile(folder / "upland.tif", upland, "EPSG:4326", place, text)
    fine, place = make_fine(surface)
    write_tile(folder / "combe_fine.tif", fine, FINE_CRS, place, text)
    places = {p.name: moved(p, upland) for p in PLACES}
    for name, words in (
        ("sites.csv", sites_text(places)),
        ("tops.gpx", tops_text(surface, places)),
    ):
        (folder / name).write_bytes(words.encode("utf-8"))


if __name__ == "__main__":
    make_all(Path(sys.argv[1]) if len(sys.argv) > 1 else Path(__file__).parent)
