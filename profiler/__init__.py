"""Terrain line-of-sight profiler: does one point see another over real ground."""
