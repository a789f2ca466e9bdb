"""Finding a site by its name."""

import pytest

from profiler.errors import InputError
from profiler.model import Point
from profiler.shapes import Site, find_site


def site(name: str, lat_deg: float = 48.2, lon_deg: float = -21.5) -> Site:
    return Site(name=name, point=Point(lat_deg=lat_deg, lon_deg=lon_deg))


SITES = (
    site("Skarvel"),
    site("Skarn", 48.3),
    site("Élan-Søder", 48.4),
    site("Straße Øst", 48.5),
    site("skarvel", 48.6),
    site("Quillet", 48.7),
    site("QUILLET", 48.8),
)


def refusal(text: str, sites: tuple[Site, ...] = SITES) -> str:
    with pytest.raises(InputError) as caught:
        find_site(sites, text)
    return str(caught.value)


def test_an_exact_name_wins_over_one_that_differs_in_case() -> None:
    assert find_site(SITES, "Skarvel").point.lat_deg == 48.2
    assert find_site(SITES, "skarvel").point.lat_deg == 48.6


@pytest.mark.parametrize("text", ["SKARN", " skarn ", "Skärn", "skarn\u0301"])
def test_case_accents_and_blanks_do_not_matter(text: str) -> None:
    assert find_site(SITES, text).name == "Skarn"


@pytest.mark.parametrize(
    ("text", "name"),
    [
        ("elan-soder", "Élan-Søder"),
        ("E\u0301LAN-SØDER", "Élan-Søder"),
        ("STRASSE  OST", "Straße Øst"),
    ],
)
def test_letters_beyond_ascii_are_found_by_their_plain_ones(
    text: str, name: str
) -> None:
    assert find_site(SITES, text).name == name


def test_different_places_of_one_name_are_listed_with_their_places() -> None:
    said = refusal("quillet")
    assert said.startswith('2 sites are called "quillet":')
    assert "Quillet at 48.70000,-21.50000; QUILLET at 48.80000,-21.50000" in said
    many = tuple(site("Skarn", 40.0 + i) for i in range(8))
    assert "; 3 more" in refusal("Skarn", many)


def test_the_same_place_twice_is_one_site() -> None:
    assert find_site((site("Skarn"), site("Skarn")), "Skarn") == site("Skarn")


def test_an_unknown_name_offers_the_nearest() -> None:
    two = (site("Skarvel"), site("Skarn"), site("Quillet Mast"))
    assert refusal("Skarvle", two) == 'No site "Skarvle". Nearest: Skarvel, Skarn.'


def test_a_name_like_none_lists_some_that_exist() -> None:
    said = refusal("zzz")
    assert said == (
        'No site "zzz" and none like it. Known: Skarvel, Skarn, Élan-Søder, '
        "Straße Øst, skarvel, …."
    )
    assert refusal("zzz", ()) == 'No site "zzz" and none like it.'


def test_a_very_long_name_is_repeated_in_short() -> None:
    assert len(refusal("z" * 5000)) < 250
