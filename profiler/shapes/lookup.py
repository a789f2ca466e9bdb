"""Finding a site by its name as people type it."""

import difflib
import unicodedata
from collections.abc import Sequence
from typing import Final

from profiler.errors import InputError
from profiler.shapes.site import Site

#: How many near names and places a message lists [1]; our choice.
NAMES_SHOWN: Final = 5
#: How alike a name must be to be offered [1], difflib's ratio; our choice: its 0.6
#: leaves out names of four letters with two exchanged.
ALIKE: Final = 0.5
#: How much of the asked name a message repeats [characters]; our choice.
SHOWN_CHARACTERS: Final = 60
#: Letters that Unicode does not split into a plain letter and an accent.
_PLAIN_LETTERS: Final = str.maketrans(
    {
        "ø": "o",
        "ł": "l",
        "đ": "d",
        "ð": "d",
        "ħ": "h",
        "ı": "i",
        "æ": "ae",
        "œ": "oe",
        "þ": "th",
    }
)


def find_site(sites: Sequence[Site], text: str) -> Site:
    """Site that a name means: the exact name wins, else case and accents are ignored.

    Parameters
    ----------
    sites : sequence of Site
        All that may be meant.
    text : str
        The name as typed.

    Returns
    -------
    Site
        The only one that fits, or the first of several that are the same place.

    Raises
    ------
    InputError
        If several different places fit (they are listed), or none does (the nearest
        names are offered).
    """
    wanted = text.strip()
    exact = [site for site in sites if site.name == wanted]
    if exact:
        return _the_only(exact, wanted)
    alike = [site for site in sites if plain_name(site.name) == plain_name(wanted)]
    if alike:
        return _the_only(alike, wanted)
    raise InputError(_unknown(sites, wanted))


def plain_name(name: str) -> str:
    """Name in small letters without accents and with single blanks."""
    split = unicodedata.normalize("NFKD", name.casefold())
    bare = "".join(sign for sign in split if not unicodedata.combining(sign))
    return " ".join(bare.casefold().translate(_PLAIN_LETTERS).split())


def _the_only(found: Sequence[Site], wanted: str) -> Site:
    first = found[0]
    same = [(site.point, site.surveyed_ground_m) for site in found]
    if all(place == same[0] for place in same):
        return first
    listed = "; ".join(
        f"{site.name} at {site.point.lat_deg:.5f},{site.point.lon_deg:.5f}"
        for site in found[:NAMES_SHOWN]
    )
    if len(found) > NAMES_SHOWN:
        listed += f"; {len(found) - NAMES_SHOWN} more"
    msg = (
        f'{len(found)} sites are called "{_short(wanted)}": {listed}. Give the place '
        "itself, or rename them."
    )
    raise InputError(msg)


def _unknown(sites: Sequence[Site], wanted: str) -> str:
    names = {plain_name(site.name): site.name for site in reversed(sites)}
    near = difflib.get_close_matches(
        plain_name(wanted), names, n=NAMES_SHOWN, cutoff=ALIKE
    )
    if near:
        return (
            f'No site "{_short(wanted)}". Nearest: {", ".join(names[n] for n in near)}.'
        )
    some = ", ".join([site.name for site in sites][:NAMES_SHOWN])
    more = ", …" if len(sites) > NAMES_SHOWN else ""
    known = f" Known: {some}{more}." if some else ""
    return f'No site "{_short(wanted)}" and none like it.{known}'


def _short(text: str) -> str:
    shown = "".join(sign if sign.isprintable() else " " for sign in text)
    if len(shown) <= SHOWN_CHARACTERS:
        return shown
    return shown[:SHOWN_CHARACTERS] + "…"
