"""Random terrains on which masts are planned, for the package and for the oracle."""

import numpy as np

from profiler.radio.bench import Bench, bench_for
from profiler.radio.criteria import Criterion
from tests.looking import pieces
from tests.oracle_masts import Ask, Scene

RADIUS_M = 6.371e6
#: metres of a wave at one hertz
LIGHT = 299_792_458.0
ASKS: list[Ask] = [(4 / 3, 1.0, 0.0), (2 / 3, 0.3, 0.0), (1.0, 0.6, 3.0)]


def scene(seed: int) -> Scene:
    """Rolling or rough ground of 8 to 45 km, 0.2 to 20 GHz."""
    rng = np.random.default_rng(seed)
    count = int(rng.integers(30, 90))
    dist = np.linspace(0.0, rng.uniform(8e3, 45e3), count + 1)
    turn = dist / dist[-1] * 2 * np.pi
    ground = 300 + sum(
        rng.uniform(5, 60) / k * np.sin(k * turn + rng.uniform(0, 6))
        for k in (0.5, 1, 2, 4, 9)
    )
    ground = ground + rng.normal(0, rng.choice([0.0, 1.0, 8.0]), dist.size)
    wave = LIGHT / 10 ** rng.uniform(np.log10(0.2e9), np.log10(20e9))
    return Scene(dist, ground, wave, RADIUS_M)


def bench_of(made: Scene, asks: list[Ask] = ASKS) -> Bench:
    """The package's bench for the same ground."""
    return bench_for(
        pieces(made.dist_m, made.height_m),
        length_m=made.length_m,
        from_ground_m=float(made.height_m[0]),
        to_ground_m=float(made.height_m[-1]),
        criteria=tuple(
            Criterion(ke=ke, f1_fraction=share, extra_m=extra)
            for ke, share, extra in asks
        ),
        wavelength_m=made.wavelength_m,
        radius_m=made.radius_m,
    )
