"""From the options of a question to its terrain, stations and air."""

import os
from collections.abc import Mapping, Sequence
from pathlib import Path
from typing import TYPE_CHECKING, Any

import click
import numpy as np

from profiler.cli.points import EastingNorthing, LatLon, SiteName, parse_point
from profiler.cli.quantities import ke_looks_like_kr
from profiler.constants import EYE_M, HALF_TURN_DEG, KE_RADIO, SURVEY_GAP_M, TURN_DEG
from profiler.earth import crs_from_user
from profiler.errors import InputError
from profiler.model import Air, Point, Station
from profiler.output.files import check_target
from profiler.output.numbers import box
from profiler.sight.cover_sources import CoverAlong, aged
from profiler.terrain import Terrain, open_terrain

if TYPE_CHECKING:
    from profiler.radio.answer import Rule
    from profiler.shapes import Site

#: Room added around a question when the ground it needs is named [deg]; our choice.
BOX_ROOM_DEG = 0.01
#: The largest own hill of a summit that is taken [m]; our choice: beyond it the word
#: has no meaning, and every post of the circle is read.
MOST_OWN_HILL_M = 2000.0
#: Decimals of that box [1]; half of the last is below the room.
BOX_DECIMALS = 2

Options = Mapping[str, Any]


def air_from(options: Options) -> Air:
    """The air as stated by at most one of four options.

    Raises
    ------
    click.UsageError
        If several are given.
    """
    given = [name for name in ("ke", "kr", "n_gradient") if options[name] is not None]
    if options["no_refraction"]:
        given.append("no_refraction")
    if len(given) > 1:
        names = " and ".join(f"--{name.replace('_', '-')}" for name in given)
        msg = f"{names} say the same thing twice. Give one of them."
        raise click.UsageError(msg)
    ke = options["ke"]
    if ke is not None and ke_looks_like_kr(ke):
        text = (
            f"--ke {ke:g} is an earth bent {1 / ke:.1f} times as hard as it is; for a "
            f"coefficient of refraction write --kr {ke:g}."
        )
        click.echo(f"Warning: {text}", err=True)
    if not given and options["frequency"] is not None:
        return Air(ke=KE_RADIO, assumed=True)
    kr = 0.0 if options["no_refraction"] else options["kr"]
    return Air(ke=ke, kr=kr, n_gradient_per_km=options["n_gradient"])


def cover_of(options: Options) -> CoverAlong | None:
    """Trees and buildings as they stand today; None without any.

    Raises
    ------
    InputError
        If a file or the growth cannot be used.
    """
    stated = ("canopy", "growth", "years")
    if not options["cover"] and all(options[name] is None for name in stated):
        return None
    has_cover = options["canopy"] is not None or bool(options["cover"])
    # most questions have no cover and need none of its rooms
    from profiler.cli.cover_options import check_growth, cover_from

    check_growth(options["growth"], options["years"], has_cover=has_cover)
    return cover_from(canopy_m=options["canopy"], files=options["cover"])


def cover_in(cover: CoverAlong | None, growth_m: float, year: int) -> CoverAlong | None:
    """The cover some years from today.

    Parameters
    ----------
    cover : function or None
        From `cover_of`.
    growth_m : float [m]
        Growth of trees a year.
    year : int
        Years from today.
    """
    if cover is None or year == 0:
        return cover
    return aged(cover, metres_per_year=growth_m, years=year)


def rule_from(options: Options) -> "Rule | None":
    """The clearance rule as stated.

    Raises
    ------
    click.UsageError
        If a rule is stated twice, or one or a missing height has no frequency.
    """
    criteria, name = options["criteria"], options["rule_set"]
    if criteria and name is not None:
        msg = "--criterion and --rule-set both state a rule. Give one of them."
        raise click.UsageError(msg)
    if options["frequency"] is None:
        if criteria or name is not None:
            msg = "A clearance rule needs a frequency. Add --frequency, such as 7.5GHz."
            raise click.UsageError(msg)
        return None
    return tuple(criteria) or name


def check_radio_heights(options: Options) -> None:
    """Ask for both heights of a radio path: there is no default antenna.

    Raises
    ------
    click.UsageError
        If one is missing.
    """
    missing = sorted(assumed_heights(options))
    if options["frequency"] is not None and missing:
        names = " and ".join(f"--{role}-height" for role in missing)
        msg = f"A radio path has no default heights. Give {names}, such as 20m."
        raise click.UsageError(msg)


def terrain_from(options: Options) -> Terrain:
    """The elevation model as stated.

    Raises
    ------
    DemError
        If a file is missing or cannot be used.
    """
    return open_terrain(
        *options["dem"],
        interpolation=options["interpolation"],
        dem_kind=options["dem_kind"] or "unknown",
        dem_unit=options["dem_unit"],
        dem_crs=options["dem_crs"],
        sea_level_m=options["sea_level"],
        hash_all=options["hash_all"],
    )


class Places:
    """Turns what was written after --from and --to into stations."""

    def __init__(self, options: Options) -> None:
        """Read the file of sites, once."""
        self._options = options
        self._sites: Sequence[Site] = ()
        if options["sites"] is not None:
            from profiler.shapes import read_site_file  # only for a file of places

            found = read_site_file(options["sites"])
            self._sites = found.sites
            for note in found.notes:
                click.echo(f"Warning: {note.text}", err=True)

    def station(self, role: str, terrain: Terrain | None) -> Station:
        """The station of one end.

        Parameters
        ----------
        role : str
            "from" or "to".
        terrain : Terrain or None
            Needed for ``--crs dem`` only.

        Raises
        ------
        InputError
            If the text is no point and no site.
        """
        options = self._options
        text = options[f"{role}_point"]
        names = [site.name for site in self._sites]
        try:
            value = parse_point(text, crs_given=options["crs"] is not None, names=names)
            point, name, surveyed = self._place(value, terrain)
        except InputError as error:
            msg = f"--{role}: {error}"
            raise InputError(msg) from error
        gap = SURVEY_GAP_M
        if options[f"{role}_ground"] is not None:
            surveyed, gap = options[f"{role}_ground"], 0.0
        amsl, agl = options[f"{role}_amsl"], options[f"{role}_height"]
        if amsl is None and agl is None:
            agl = EYE_M if role == "from" else 0.0
        return Station(
            point=point,
            name=name,
            agl_m=agl,
            amsl_m=amsl,
            surveyed_ground_m=surveyed,
            survey_gap_m=gap,
        )

    def _place(
        self, value: LatLon | EastingNorthing | SiteName, terrain: Terrain | None
    ) -> tuple[Point, str, float | None]:
        if isinstance(value, LatLon):
            return Point(lat_deg=value.lat_deg, lon_deg=value.lon_deg), "", None
        if isinstance(value, EastingNorthing):
            return _from_grid(value, self._options["crs"], terrain), "", None
        if self._options["sites"] is None:
            msg = (
                f'"{value.text}" is no pair of coordinates. Write "57.1,-4.2" '
                "(latitude,longitude), or give the file that names it with --sites."
            )
            raise InputError(msg)
        from profiler.shapes import find_site

        site = find_site(self._sites, value.text)
        return site.point, site.name, site.surveyed_ground_m


def _from_grid(value: EastingNorthing, crs_text: str, terrain: Terrain | None) -> Point:
    if crs_text.lower() == "dem":
        if terrain is None:
            msg = "--crs dem needs --dem."
            raise InputError(msg)
        crs = terrain.lattices[0].crs
    else:
        crs = crs_from_user(crs_text)
    lat, lon = crs.to_wgs84(np.array([value.x]), np.array([value.y]))
    if not (np.isfinite(lat[0]) and np.isfinite(lon[0])):
        msg = f"{value.x:g}, {value.y:g} is no place in {crs.crs_name}."
        raise InputError(msg)
    return Point(lat_deg=float(lat[0]), lon_deg=float(lon[0]))


def check_heights(options: Options) -> None:
    """Refuse two heights for one end.

    Raises
    ------
    click.UsageError
        If an end has a height above ground and one above sea level.
    """
    for role in ("from", "to"):
        height = options[f"{role}_height"]
        if height is not None and options[f"{role}_amsl"] is not None:
            msg = f"--{role}-height and --{role}-amsl both state a height. Give one."
            raise click.UsageError(msg)
        if height is not None and height < 0.0:
            msg = f"--{role}-height {height:g} m is below the ground. Use 0 or more."
            raise InputError(msg)


def own_hill_from(options: Options) -> float | None:
    """Radius of a summit's own hill as stated [m]; None when it is not.

    Raises
    ------
    InputError
        If it is no hill but a mountain range.
    """
    own_hill: float | None = options["own_hill"]
    if own_hill is not None and own_hill > MOST_OWN_HILL_M:
        msg = (
            f"--own-hill {own_hill:g} m is more than a summit's own hill. Use "
            f"{MOST_OWN_HILL_M:g} m or less."
        )
        raise InputError(msg)
    return own_hill


def box_text(places: Places) -> str:
    """The box of ground that a question needs, in words."""
    points = [places.station(role, None).point for role in ("from", "to")]
    lats = [p.lat_deg for p in points]
    lons = [p.lon_deg for p in points]
    if max(lons) - min(lons) > HALF_TURN_DEG:
        lons = [lon % TURN_DEG for lon in lons]
    return box(
        min(lats) - BOX_ROOM_DEG,
        min(lons) - BOX_ROOM_DEG,
        max(lats) + BOX_ROOM_DEG,
        max(lons) + BOX_ROOM_DEG,
        decimals=BOX_DECIMALS,
    )


def assumed_heights(options: Options) -> tuple[str, ...]:
    """The ends, "from" and "to", whose height nobody stated."""
    return tuple(
        role
        for role in ("from", "to")
        if options[f"{role}_height"] is None and options[f"{role}_amsl"] is None
    )


def check_targets(options: Options) -> None:
    """Refuse files that cannot be written, before any work is done.

    Raises
    ------
    InputError
        If one cannot be written, two are the same, or one is the file of sites.
    """
    files = _targets(options)
    for path in files:
        check_target(path)
    if len({os.path.realpath(p) for p in files}) < len(files):
        msg = "Two results go to one file. Give each its own name."
        raise InputError(msg)
    if options["sites"] is not None:
        _refuse_overwriting(files, [Path(options["sites"])])


def spare_elevation_files(options: Options, terrain: Terrain) -> None:
    """Refuse to write a result over an elevation file in use.

    Raises
    ------
    InputError
        If a result has the name of one.
    """
    _refuse_overwriting(_targets(options), [r.path for r in terrain.rasters])


def _targets(options: Options) -> list[Path]:
    names = [options.get(k) for k in ("json_file", "figure", "geojson", "check_points")]
    return [Path(n) for n in names if n is not None and n != "-"]


def _refuse_overwriting(targets: Sequence[Path], inputs: Sequence[Path]) -> None:
    read = {os.path.realpath(p) for p in inputs}
    for path in targets:
        if os.path.realpath(path) in read:
            msg = f'"{path}" is read by this question and would be overwritten. '
            msg += "Choose another name."
            raise InputError(msg)
