"""Places, trees and buildings read from files; the only door to pyogrio, shapely."""

from profiler.shapes.cover import CoverFile, CoverShape, read_cover, read_cover_file
from profiler.shapes.crossings import spans_along
from profiler.shapes.lookup import find_site
from profiler.shapes.site import Site, SiteFile
from profiler.shapes.sites import read_site_file, read_sites

__all__ = [
    "CoverFile",
    "CoverShape",
    "Site",
    "SiteFile",
    "find_site",
    "read_cover",
    "read_cover_file",
    "read_site_file",
    "read_sites",
    "spans_along",
]
