"""A peak behind a ridge: how far it rises above it, as a walker sees it.

Worked out for this project, not printed anywhere: from an eye at 401.7 m over a ridge
of 620 m at 8 km a peak of 1000 m at 15 km rises 181.8 m above the ray over the ridge,
with kr 0.13 and a radius of 6380 km.
"""

import numpy as np
import pytest

from profiler.kernels.circle import ray_height
from profiler.sight.view import front_crest_index, is_seen, rays
from tests.looking import pieces

EYE_M, CREST_M, CREST_AT_M, TOP_M, TOP_AT_M = 401.7, 620.0, 8000.0, 1000.0, 15_000.0
KAPPA = (1.0 - 0.13) / 6_380_000.0
ABOVE_M = 181.8
HALF_DIGIT_M = 0.05  # it was written down with one decimal

#: Distance and height of the ground: a valley on either side of the ridge.
GROUND = (
    np.array([0.0, 3000.0, CREST_AT_M, 11_000.0, TOP_AT_M]),
    np.array([400.0, 300.0, CREST_M, 350.0, TOP_M]),
)


def above_crest_m(step_m: float) -> float:
    """The peak above the ray over the front crest, with samples so far apart."""
    dist = np.unique(np.concatenate([np.arange(0.0, TOP_AT_M, step_m), GROUND[0]]))
    seen = rays(pieces(dist, np.interp(dist, *GROUND)), EYE_M, KAPPA)
    crest = front_crest_index(seen, EYE_M, KAPPA)
    assert crest is not None
    assert seen.dist_m[crest] == CREST_AT_M
    tangent = float(seen.tangent[crest])
    return TOP_M - float(ray_height(TOP_AT_M, tangent, EYE_M, KAPPA))


def test_the_peak_rises_181_8_m_above_the_ridge() -> None:
    assert above_crest_m(5000.0) == pytest.approx(ABOVE_M, abs=HALF_DIGIT_M)


def test_similar_triangles_and_the_parabola_say_the_same() -> None:
    # over 15 km the parabola is right within a millimetre
    drop = KAPPA / 2.0 * np.array([CREST_AT_M, TOP_AT_M]) ** 2
    slope = (CREST_M - drop[0] - EYE_M) / CREST_AT_M
    lowest = EYE_M + slope * TOP_AT_M + drop[1]
    assert TOP_M - lowest == pytest.approx(ABOVE_M, abs=HALF_DIGIT_M)
    assert above_crest_m(5000.0) == pytest.approx(TOP_M - lowest, abs=0.02)


@pytest.mark.parametrize("step_m", [2500.0, 700.0, 90.0, 30.0, 7.0])
def test_extra_samples_do_not_move_it(step_m: float) -> None:
    assert above_crest_m(step_m) == pytest.approx(above_crest_m(5000.0), abs=1e-9)


def test_the_target_s_own_face_is_not_its_crest() -> None:
    dist = np.arange(0.0, TOP_AT_M + 1.0, 25.0)
    ground = np.interp(dist, *GROUND)
    # a shoulder on the face, 5 m deep behind its edge, hides a little of the peak
    ground += np.where((dist > 14_500) & (dist <= 14_600), 8.0, 0.0)
    seen = rays(pieces(dist, ground), EYE_M, KAPPA)
    assert not np.all(is_seen(seen)[seen.dist_m > 14_000.0])
    crest = front_crest_index(seen, EYE_M, KAPPA)
    assert crest is not None
    assert seen.dist_m[crest] == CREST_AT_M
