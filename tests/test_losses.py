"""Loss by ground of a path: the figure to use, the others and when they apply."""

from pathlib import Path

import numpy as np
import pytest

from profiler.errors import InputError
from profiler.model import SightLine
from profiler.radio.bullington import bullington_loss
from profiler.radio.knife_edge import knife_edge_loss_db, knife_edge_loss_exact_db
from profiler.radio.loss_methods import MethodLoss
from profiler.radio.losses import PathLosses, path_losses
from profiler.radio.sheet import raw_profile, ray_length_m
from profiler.radio.spherical import spherical_loss_db
from profiler.radio.two_edges import dominant_edge_loss, similar_edges_loss
from profiler.radio.waves import wavelength_m
from tests import terrain
from tests.looking import from_centre, opened, seen
from tests.terrain import CENTRE, CENTRED_CRS, Terrain, offsets, place

GHZ = 6e9


def walls(heights: dict[float, float], *, reach_m: float = 8000.0) -> Terrain:
    """Flat ground with rows of raised posts due east at whole multiples of 50 m."""
    cell = 50.0
    east, _, transform = offsets(cell, reach_m, 10 * cell, 10 * cell)
    posts = np.zeros(east.shape)
    for away, height in heights.items():
        posts[np.abs(east - away) < cell / 2] = height
    return Terrain(posts, transform, CENTRED_CRS, {})


def over(
    folder: Path, made: Terrain, *, reach_m: float = 8000.0, agl_m: float = 20.0
) -> SightLine:
    """The line due east over a made terrain at ke 4/3, both ends at one height."""
    ground = opened(folder, made)
    return from_centre(ground, 90.0, reach_m, eye=agl_m, top=agl_m, ke=4 / 3)


def method(losses: PathLosses, name: str) -> MethodLoss:
    (found,) = (m for m in losses.methods if m.name == name)
    return found


def one_wall(folder: Path, height_m: float = 60.0) -> SightLine:
    return over(folder, walls({4000.0: height_m}))


def round_hill(folder: Path) -> SightLine:
    made = terrain.cap(radius_m=500.0, top_m=80.0, away_m=2000.0, cell_m=5.0)
    return over(folder, made, reach_m=4000.0, agl_m=30.0)


def test_delta_bullington_is_the_headline_and_the_first_method(tmp_path: Path) -> None:
    losses = path_losses(one_wall(tmp_path), frequency_hz=GHZ)
    assert losses.headline is not None
    first = losses.methods[0]
    assert first.name == "delta-Bullington"
    assert first.applies
    assert first.loss_db == losses.headline.total_db
    parts = first.parts
    spare = max(parts["spherical_db"] - parts["smooth_bullington_db"], 0.0)
    assert first.loss_db == pytest.approx(parts["bullington_db"] + spare)


def test_one_wall_is_the_knife_edge_of_its_height_over_the_line(tmp_path: Path) -> None:
    line = one_wall(tmp_path)
    losses = path_losses(line, frequency_hz=GHZ)
    edge = method(losses, "single knife edge")
    assert edge.applies
    assert line.margin_m is not None
    # wall 60 m, antennas 20 m: in the middle of 8 km the bulge adds 0.94 m at ke 4/3
    assert edge.parts["above_line_m"] == pytest.approx(40.94, abs=0.02)
    wave = wavelength_m(GHZ)
    f1 = np.sqrt(wave * 4000.0 * 4000.0 / 8000.0)
    nu = np.sqrt(2.0) * edge.parts["above_line_m"] / f1
    assert edge.loss_db == pytest.approx(float(knife_edge_loss_db(nu)), abs=1e-4)
    exact_db = float(knife_edge_loss_exact_db(nu))
    assert edge.parts["exact_db"] == pytest.approx(exact_db, abs=1e-4)
    assert edge.parts["at_m"] == pytest.approx(4000.0, abs=0.01)


def test_a_sharp_wall_has_no_radius_to_be_told(tmp_path: Path) -> None:
    losses = path_losses(one_wall(tmp_path), frequency_hz=GHZ)
    top = method(losses, "single rounded obstacle")
    assert (top.loss_db, top.applies) == (None, False)
    assert "does not tell its radius" in top.because
    assert losses.suggested is not None
    assert losses.suggested.name == "single knife edge"


def test_a_round_hill_is_measured_by_its_own_radius(tmp_path: Path) -> None:
    line = round_hill(tmp_path)
    top = method(path_losses(line, frequency_hz=GHZ), "single rounded obstacle")
    assert top.applies
    # between its posts the hill is made of chords, which near the top look sharper
    posts = np.arange(-90.0, 91.0, 5.0)
    away = np.arange(-90.0, 91.0, 2.5)
    drop = np.interp(away, posts, 500.0 - np.sqrt(500.0**2 - posts**2))
    f1 = np.sqrt(wavelength_m(GHZ) * 1000.0)
    near = (drop > 0.0) & (drop <= f1)
    radius_m = np.mean(away[near] ** 2 / (2.0 * drop[near]))
    assert 480.0 < radius_m < 500.0
    assert top.parts["top_radius_m"] == pytest.approx(radius_m, abs=0.5)
    assert top.parts["vertex_at_m"] == pytest.approx(2000.0, abs=1.0)
    assert top.parts["rounding_db"] > 5.0
    suggested = path_losses(line, frequency_hz=GHZ).suggested
    assert suggested is not None
    assert suggested.name == "single rounded obstacle"


def test_two_walls_are_two_edges_and_no_single_one(tmp_path: Path) -> None:
    line = over(tmp_path, walls({2500.0: 60.0, 5500.0: 90.0}))
    losses = path_losses(line, frequency_hz=GHZ)
    assert len(losses.obstacles) == 2
    assert not method(losses, "single knife edge").applies
    near, far = sorted(losses.obstacles, key=lambda o: o.place.distance_m)
    tops = -near.place.margin_m, -far.place.margin_m
    sides = {
        "a_m": near.place.distance_m,
        "b_m": far.place.distance_m - near.place.distance_m,
        "c_m": line.path.length_m - far.place.distance_m,
        "wavelength_m": wavelength_m(GHZ),
    }
    for name, made_by in (
        ("two similar edges", similar_edges_loss),
        ("two edges, one dominant", dominant_edge_loss),
    ):
        ours, direct = method(losses, name), made_by(*tops, **sides)
        assert ours.loss_db == pytest.approx(direct.total_db)
        assert ours.applies == direct.correction_holds
    suggested = losses.suggested
    assert suggested is not None
    assert suggested.name == "two isolated edges"


def test_an_edge_too_low_for_a_correction_says_so(tmp_path: Path) -> None:
    line = over(tmp_path, walls({2500.0: 15.0, 5500.0: 90.0}))
    losses = path_losses(line, frequency_hz=GHZ)
    assert len(losses.obstacles) == 2
    for name in ("two similar edges", "two edges, one dominant"):
        assert not method(losses, name).applies
        assert "too low" in method(losses, name).because


@pytest.mark.parametrize("count", [0, 1, 3])
def test_other_counts_of_obstacles_have_no_two_edges(
    count: int, tmp_path: Path
) -> None:
    places = (2000.0, 4000.0, 6000.0)[:count]
    line = over(tmp_path, walls(dict.fromkeys(places, 60.0)))
    losses = path_losses(line, frequency_hz=GHZ)
    assert len(losses.obstacles) == count
    for name in ("two similar edges", "two edges, one dominant"):
        assert method(losses, name).loss_db is None
        assert "not two" in method(losses, name).because


def test_a_clear_path_loses_nothing_and_has_no_obstacle(tmp_path: Path) -> None:
    line = over(tmp_path, walls({}), agl_m=60.0)
    losses = path_losses(line, frequency_hz=GHZ)
    assert losses.obstacles == ()
    applying = {m.name for m in losses.methods if m.applies}
    assert applying == {"delta-Bullington", "smooth earth"}
    assert {m.loss_db for m in losses.methods if m.applies} == {0.0}
    assert method(losses, "single rounded obstacle").loss_db is None


def test_flat_ground_is_a_smooth_earth_and_a_wall_is_not(tmp_path: Path) -> None:
    flat = path_losses(over(tmp_path, walls({}), agl_m=2.0), frequency_hz=GHZ)
    smooth = method(flat, "smooth earth")
    assert smooth.applies
    direct = spherical_loss_db(
        8000.0,
        from_height_m=2.0,
        to_height_m=2.0,
        effective_radius_m=over(tmp_path, walls({})).earth.effective_radius_m or 0.0,
        wavelength_m=wavelength_m(GHZ),
    )
    assert smooth.loss_db == pytest.approx(direct, abs=1e-3)
    assert not method(
        path_losses(one_wall(tmp_path), frequency_hz=GHZ), "smooth earth"
    ).applies


def test_cylinders_apply_over_close_posts_and_not_over_wide_ones(
    tmp_path: Path,
) -> None:
    close = path_losses(one_wall(tmp_path), frequency_hz=GHZ)
    cylinders = method(close, "cascaded cylinders")
    assert cylinders.applies
    assert cylinders.parts["cylinders"] == 1.0
    assert cylinders.checked == "no published check"
    made = terrain.ridge("column", height_m=100.0, cells_away=6, cell_m=800.0)
    wide = path_losses(
        over(tmp_path, made, reach_m=made.facts["reach_m"]), frequency_hz=GHZ
    )
    wide_cylinders = method(wide, "cascaded cylinders")
    assert not wide_cylinders.applies
    assert "over 250 m" in wide_cylinders.because


def test_an_extended_obstruction_is_no_single_edge(tmp_path: Path) -> None:
    # a tableland 3 km wide: one obstacle, most of it within 0.6 F1 of a grazing line
    line = over(tmp_path, walls({float(x): 60.0 for x in range(2500, 5501, 50)}))
    losses = path_losses(line, frequency_hz=GHZ)
    assert losses.obstruction is not None
    assert not losses.obstruction.is_isolated
    assert not method(losses, "single knife edge").applies


def test_free_space_is_that_of_the_ray_between_the_antennas(tmp_path: Path) -> None:
    line = one_wall(tmp_path)
    losses = path_losses(line, frequency_hz=GHZ)
    wave = wavelength_m(GHZ)
    friis_db = 20.0 * np.log10(4.0 * np.pi * ray_length_m(line) / wave)
    assert losses.free_space_db == pytest.approx(friis_db, abs=1e-9)


def test_the_vertex_of_a_rounded_top_is_bullingtons(tmp_path: Path) -> None:
    line = round_hill(tmp_path)
    raw = raw_profile(line)
    assert raw is not None
    edge = bullington_loss(
        *raw,
        from_amsl_m=line.from_.amsl_m,
        to_amsl_m=line.to.amsl_m,
        wavelength_m=wavelength_m(GHZ),
        effective_radius_m=line.earth.effective_radius_m or 0.0,
    )
    top = method(path_losses(line, frequency_hz=GHZ), "single rounded obstacle")
    assert top.parts["knife_edge_db"] == pytest.approx(edge.edge_db, abs=1e-6)


def test_a_duct_and_a_void_have_no_loss_and_say_why(tmp_path: Path) -> None:
    ground = opened(tmp_path, walls({4000.0: 60.0}))
    duct = from_centre(ground, 90.0, 8000.0, eye=20.0, top=20.0, kr=1.2)
    losses = path_losses(duct, frequency_hz=GHZ)
    assert (losses.headline, losses.suggested, losses.methods) == (None, None, ())
    assert "bends rays" in losses.reason
    void = opened(tmp_path, terrain.one_void())
    line = from_centre(void, 90.0, 2000.0, eye=20.0, top=20.0, ke=4 / 3)
    losses = path_losses(line, frequency_hz=GHZ)
    assert losses.headline is None
    assert "no known ground" in losses.reason


def test_shares_frequencies_and_polarizations_that_are_none_are_refused(
    tmp_path: Path,
) -> None:
    ground = opened(tmp_path, walls({4000.0: 60.0}))
    duct = from_centre(ground, 90.0, 8000.0, eye=20.0, top=20.0, kr=1.2)
    with pytest.raises(InputError, match="share of the path over sea"):
        path_losses(duct, frequency_hz=GHZ, sea_fraction=1.2)
    with pytest.raises(InputError, match="olarization"):
        path_losses(duct, frequency_hz=GHZ, polarization="slant")  # type: ignore[arg-type]
    with pytest.raises(InputError, match="outside 10 MHz to 300 GHz"):
        path_losses(duct, frequency_hz=1.0)


def test_swapping_the_ends_changes_no_loss(tmp_path: Path) -> None:
    ground = opened(tmp_path, walls({2500.0: 60.0, 5500.0: 90.0}))
    there = from_centre(ground, 90.0, 8000.0, eye=20.0, top=35.0, ke=4 / 3)

    back = seen(ground, place(90.0, 8000.0), CENTRE, eye=35.0, top=20.0, ke=4 / 3)
    one, other = (path_losses(line, frequency_hz=GHZ) for line in (there, back))
    for ours, theirs in zip(one.methods, other.methods, strict=True):
        assert ours.name == theirs.name
        if ours.loss_db is None:
            assert theirs.loss_db is None
        else:
            assert ours.loss_db == pytest.approx(theirs.loss_db, abs=1e-3)
