"""Points read from and written to files of places."""

from profiler.shapes.lookup import find_site
from profiler.shapes.site import Site, SiteFile
from profiler.shapes.sites import read_site_file, read_sites

__all__ = ["Site", "SiteFile", "find_site", "read_site_file", "read_sites"]
