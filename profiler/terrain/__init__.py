"""The elevation model: open, inspect, sample along a path."""

from profiler.terrain.dem import Terrain, open_terrain
from profiler.terrain.sample import sample_path

__all__ = ["Terrain", "open_terrain", "sample_path"]
