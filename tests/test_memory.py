"""Peak memory of a path over a file far larger than memory should hold."""

import subprocess
import sys
from pathlib import Path

import numpy as np
import pytest
import rasterio

#: Memory that a path over a huge file may add [kB]; the bar of the design.
MEMORY_KB = 150_000
_OVER_A_HUGE_FILE = """
import resource, sys
from tests.reading import profile
def peak():
    return resource.getrusage(resource.RUSAGE_SELF).ru_maxrss
profile(sys.argv[2], (56.1, -4.0), (56.11, -3.99))
before = peak()
found = profile(sys.argv[1], (46.01, 6.51), (52.99, 13.49))
print(peak() - before, found.dist_m.size)
"""


@pytest.mark.parametrize("layout", ["tiles", "strips"])
def test_a_path_over_a_huge_file_takes_little_memory(
    tmp_path: Path, layout: str
) -> None:
    size = 40_000
    cell = 7.0 / size
    files = {}
    for name, side, west, north in (
        ("huge", size, 6.5, 53.0),
        ("small", 99, -4, 56.11),
    ):
        files[name] = tmp_path / f"{name}.tif"
        tiles = {"tiled": True, "blockxsize": 512, "blockysize": 512}
        with rasterio.open(
            files[name],
            "w",
            driver="GTiff",
            width=side,
            height=side,
            count=1,
            dtype="float32",
            crs="EPSG:4326",
            transform=(cell, 0.0, west, 0.0, -cell, north),
            SPARSE_OK=True,
            compress="deflate",
            **(tiles if layout == "tiles" else {"blockysize": 8}),
        ) as data:
            block = np.full((512, 512), 9.0, "float32")
            data.write(block[:side, :side], 1, window=((0, min(512, side)),) * 2)
    run = subprocess.run(
        [sys.executable, "-c", _OVER_A_HUGE_FILE, files["huge"], files["small"]],
        capture_output=True,
        text=True,
        check=True,
        cwd=Path(__file__).parents[1],
    )
    added_kb, samples = map(int, run.stdout.split())
    assert samples > size
    assert added_kb < MEMORY_KB
