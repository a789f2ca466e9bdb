"""Options that commands about one path share, in the sections of their help."""

from collections.abc import Callable
from typing import Any, Final

import click

from profiler.cli.sections import SectionOption
from profiler.cli.types import CRITERION, FREQUENCY, HEIGHT, KE, KR, LENGTH, N_GRADIENT
from profiler.constants import EYE_M, HEIGHT_UNIT_M, VOID_BELOW_M
from profiler.model import DemKind, Interpolation

#: The most years of growth that are looked ahead [1]; our choice.
MOST_YEARS: Final = 200

Decorator = Callable[[Callable[..., None]], Callable[..., None]]


def option(section: str, *names: str, **settings: Any) -> Decorator:
    """An option in one section of a command's help."""
    return click.option(*names, cls=SectionOption, section=section, **settings)


def stacked(decorators: list[Decorator]) -> Decorator:
    """Several options as one decorator, listed in their order."""

    def decorate(function: Callable[..., None]) -> Callable[..., None]:
        for decorator in reversed(decorators):
            function = decorator(function)
        return function

    return decorate


def _end_options(role: str, who: str, default: str) -> list[Decorator]:
    return [
        option(
            "Question",
            f"--{role}",
            f"{role}_point",
            once=True,
            metavar="POINT",
            required=True,
            help=f'{who}: "57.1,-4.2" (latitude,longitude), "48 12 33.1 N, 21 30 12.4 '
            'W", EASTING,NORTHING with --crs, or a name from --sites.',
        ),
        option(
            "Question",
            f"--{role}-height",
            type=HEIGHT,
            metavar="HEIGHT",
            help=f"Height above ground, such as 20m or 65ft.  [default: {default}]",
        ),
        option(
            "Question",
            f"--{role}-amsl",
            type=HEIGHT,
            metavar="HEIGHT",
            help="Height above sea level instead, in the DEM's datum.",
        ),
        option(
            "Question",
            f"--{role}-ground",
            type=HEIGHT,
            metavar="HEIGHT",
            help="Surveyed elevation of the ground there, instead of the DEM's.",
        ),
    ]


question_options = stacked(
    [
        *_end_options("from", "The eye", f"{EYE_M:g}m"),
        *_end_options("to", "The target", "0, bare ground"),
        option(
            "Question",
            "--crs",
            is_eager=True,
            metavar="EPSG:n|dem",
            help="Points are easting,northing in this CRS, or in the DEM's own.",
        ),
        option(
            "Question",
            "--sites",
            metavar="FILE",
            help="Named places: CSV, GeoJSON, GeoPackage, GPX waypoints or KML.",
        ),
    ]
)

ground_options = stacked(
    [
        option(
            "Ground",
            "--dem",
            multiple=True,
            metavar="FILE|FOLDER|GLOB",
            help="Elevation files; repeatable. The finest that has a value wins.",
        ),
        option(
            "Ground",
            "--dem-kind",
            type=click.Choice([DemKind.BARE.value, DemKind.SURFACE.value]),
            help="What the heights show: bare ground, or tree tops and roofs too.  "
            "[default: not stated]",
        ),
        option(
            "Ground",
            "--dem-unit",
            type=click.Choice(list(HEIGHT_UNIT_M)),
            help="Unit of the heights.  [default: as the file states, else m]",
        ),
        option(
            "Ground",
            "--dem-crs",
            metavar="EPSG:n",
            help="CRS of files that state none.",
        ),
        option(
            "Ground",
            "--interpolation",
            type=click.Choice([way.value for way in Interpolation]),
            default=Interpolation.BILINEAR.value,
            show_default=True,
            help="Ground between posts; highest, of the four around, is cautious.",
        ),
        option(
            "Ground",
            "--ignore-near",
            type=LENGTH,
            default="0m",
            show_default=True,
            metavar="LENGTH",
            help="Ground this near to either end does not count, such as 50m.",
        ),
        option(
            "Ground",
            "--own-hill",
            type=LENGTH,
            metavar="LENGTH",
            help="A bare summit's own hill: ground this near to it cannot hide it; 0 "
            "for none.  [default: the larger of 100m and 3 cells]",
        ),
        option(
            "Ground",
            "--void-below",
            type=HEIGHT,
            default=f"{VOID_BELOW_M:.0f}m",
            show_default=True,
            metavar="HEIGHT",
            help="No unknown ground stands higher: a void that only higher ground "
            "could block is clear.",
        ),
        option(
            "Ground",
            "--sea-level",
            type=HEIGHT,
            metavar="HEIGHT",
            help="Voids are water at this height.  [default: voids stay voids]",
        ),
        option(
            "Ground",
            "--canopy",
            type=HEIGHT,
            metavar="HEIGHT",
            help="Trees of this height stand everywhere, such as 15m.  [default: none]",
        ),
        option(
            "Ground",
            "--cover",
            multiple=True,
            metavar="FILE",
            help="Trees and buildings: outlines or points with heights, or a raster of "
            "heights above ground; repeatable.",
        ),
        option(
            "Ground",
            "--growth",
            type=HEIGHT,
            metavar="HEIGHT",
            help="Trees grow by this a year, such as 0.4m; needs --years.",
        ),
        option(
            "Ground",
            "--years",
            type=click.IntRange(min=0, max=MOST_YEARS),
            metavar="N",
            help="Years of growth; the answer is for the last, and the first that "
            "fails is named.",
        ),
        option(
            "Ground",
            "--hash",
            "hash_all",
            is_flag=True,
            help="Hash files above 200 MB too.",
        ),
    ]
)

air_options = stacked(
    [
        option(
            "Air",
            "--ke",
            type=KE,
            metavar="RATIO",
            help="Effective earth radius factor, such as 4/3; above 0.",
        ),
        option(
            "Air",
            "--kr",
            type=KR,
            metavar="RATIO",
            help="Coefficient of refraction.  [default: 0.13, light]",
        ),
        option(
            "Air",
            "--n-gradient",
            type=N_GRADIENT,
            metavar="N/KM",
            help="Refractivity gradient, such as -39 (N units a kilometre).",
        ),
        option(
            "Air", "--no-refraction", is_flag=True, help="Straight rays: kr 0, ke 1."
        ),
    ]
)

radio_options = stacked(
    [
        option(
            "Radio",
            "--frequency",
            type=FREQUENCY,
            metavar="FREQUENCY",
            help="Makes it a radio path, such as 7.5GHz or 868MHz; then both heights "
            "are asked for and the air is ke 4/3.",
        ),
        option(
            "Radio",
            "--criterion",
            "criteria",
            type=CRITERION,
            multiple=True,
            metavar='"ke= f1= extra="',
            help='Clearance asked for, such as "ke=4/3 f1=0.6 extra=3m"; repeatable, '
            "all must hold.",
        ),
        option(
            "Radio",
            "--rule-set",
            metavar="NAME|FILE.toml",
            help="Criteria of a published rule: plain-0.6, p530-temperate, "
            "p530-tropical, p530-lower-antenna; or of your own file.",
        ),
    ]
)

result_options = stacked(
    [
        option(
            "Results",
            "--json",
            "json_file",
            metavar="FILE|-",
            help="The record as JSON; - prints it alone instead of the words.",
        ),
        option(
            "Results",
            "--figure",
            metavar="FILE",
            help="The annotated profile: .png, .svg or .pdf.",
        ),
        option(
            "Results",
            "--geojson",
            metavar="FILE",
            help="Path and places as GeoJSON.",
        ),
        option(
            "Results",
            "--check-points",
            metavar="FILE",
            help="Places for the survey crew, what to measure there and how many "
            "metres matter: .csv, .geojson or .gpx waypoints.",
        ),
        option(
            "Results",
            "--draw",
            type=click.Choice(["curved-sea", "level-sea"]),
            default="curved-sea",
            show_default=True,
            help="A straight line over a curved sea, or a bent one over a level sea.",
        ),
        option(
            "Results",
            "--show-in",
            type=click.Choice(["m", "ft"]),
            default="m",
            show_default=True,
            help="Unit of heights in words and figure; the record stays in metres.",
        ),
        option(
            "Results",
            "--exit-code",
            is_flag=True,
            help="Exit 0 if clear, 4 if blocked, 5 if undetermined.",
        ),
    ]
)
