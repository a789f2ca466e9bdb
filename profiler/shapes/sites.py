"""Files of named places: what kind a file is decides who reads it."""

from os import PathLike
from pathlib import Path
from typing import Final

from profiler.errors import InputError
from profiler.shapes.csv_sites import read_csv_sites
from profiler.shapes.layer_sites import read_layer_sites
from profiler.shapes.layers import LAYER_SUFFIXES
from profiler.shapes.site import Site, SiteFile

_TABLE_SUFFIXES: Final = (".csv", ".tsv", ".txt")


def read_sites(path: str | PathLike[str]) -> tuple[Site, ...]:
    """Named places of a file, as `read_site_file` reads them, without its notes.

    Parameters
    ----------
    path : path
        CSV, GeoJSON, GeoPackage, GPX, KML or a shapefile; its ending says which.

    Returns
    -------
    tuple of Site
        In the order of the file, at least one; WGS84 [deg], ground [m].

    Raises
    ------
    InputError
        If the file is missing or cannot be used.
    """
    return read_site_file(path).sites


def read_site_file(path: str | PathLike[str]) -> SiteFile:
    """Named places of a file, and how many of its features were skipped and why.

    Parameters
    ----------
    path : path
        CSV, GeoJSON, GeoPackage, GPX, KML or a shapefile; its ending says which.

    Returns
    -------
    SiteFile
        Sites in the order of the file, at least one; WGS84 [deg], ground [m].

    Raises
    ------
    InputError
        If the file is missing or cannot be used.
    """
    file = Path(path)
    suffix = file.suffix.lower()
    if not file.is_file():
        what = "is a folder, not a file" if file.is_dir() else "does not exist"
        msg = f"The file of sites {file} {what}."
        raise InputError(msg)
    if suffix not in (*_TABLE_SUFFIXES, *LAYER_SUFFIXES):
        known = ", ".join((*_TABLE_SUFFIXES, *LAYER_SUFFIXES))
        msg = f"{file.name}: sites are read from files that end in {known}."
        raise InputError(msg)
    try:
        if suffix in _TABLE_SUFFIXES:
            return read_csv_sites(file)
        return read_layer_sites(file)
    except OSError as error:
        msg = f"The file of sites {file} cannot be opened: {error.strerror}."
        raise InputError(msg) from error
