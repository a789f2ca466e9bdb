"""Time of antenna heights beside the time of the plain question, one run.

python -m tests.benchmarks.masts prints the ratio for 60 km and four criteria.
"""

import tempfile
import time
from collections.abc import Callable
from pathlib import Path

import numpy as np

from profiler.model import Air
from profiler.radio.criteria import Criterion
from profiler.radio.plan import antenna_heights
from profiler.sight import judge
from tests import terrain
from tests.looking import opened, station

LENGTH_M = 60_000.0
CELL_M = 30.0
RULE = (
    Criterion(ke=4 / 3, f1_fraction=1.0),
    Criterion(ke=2 / 3, f1_fraction=0.3),
    Criterion(ke=1.0, f1_fraction=0.6, extra_m=3.0),
    Criterion(ke=0.5, f1_fraction=0.0),
)
REPEATS = 9


def hills() -> terrain.Terrain:
    """Rolling ground with half a metre of noise."""
    rng = np.random.default_rng(5)
    east, north, transform = terrain.offsets(CELL_M, LENGTH_M + 300, 600, 600)
    ground = 200 + rng.normal(0, 0.5, east.shape)
    for high, wide, turn in ((60, 4000, 1), (30, 1100, 2), (10, 300, 0.3), (3, 90, 1)):
        ground += high * np.sin(east / wide + turn) * np.cos(north / wide / 1.3)
    return terrain.Terrain(ground, transform, terrain.CENTRED_CRS, {})


def least_time(function: Callable[[], object]) -> float:
    """Shortest of several runs [s]."""
    function()
    times = []
    for _ in range(REPEATS):
        start = time.perf_counter()
        function()
        times.append(time.perf_counter() - start)
    return min(times)


def main() -> str:
    """Measure and tell."""
    with tempfile.TemporaryDirectory() as folder:
        ground = opened(Path(folder), hills())
        ends = (
            station(terrain.CENTRE, agl_m=30.0),
            station(terrain.place(90.3, LENGTH_M), agl_m=30.0),
        )
        line = judge(ground, *ends, air=Air(ke=4 / 3))
        plain = least_time(lambda: judge(ground, *ends, air=Air(ke=4 / 3)))
        heights = least_time(
            lambda: antenna_heights(
                line, frequency_hz=6e9, rule=RULE, given_to_agl_m=30.0
            )
        )
    return (
        f"judge {plain * 1e3:.1f} ms, heights {heights * 1e3:.1f} ms: "
        f"{heights / plain:.2f} times"
    )


if __name__ == "__main__":
    # what a benchmark finds is printed, never asserted
    print(main())  # noqa: T201
