"""ISO 6709 point strings, such as +481233.1-0213012.4/."""

import re
from typing import Final

from profiler.cli.angles import from_sexagesimal
from profiler.cli.characters import echo
from profiler.errors import InputError

_STRING: Final = re.compile(
    r"([+-])([0-9]+)(\.[0-9]+)?([+-])([0-9]+)(\.[0-9]+)?"
    r"(?P<height>[+-][0-9]+(?:\.[0-9]+)?)?(?:CRS(?P<crs>[^/]*))?(?P<end>/?)",
    re.IGNORECASE,
)
#: Digits of the degrees of a latitude, ±DD; ISO 6709, from memory.
LATITUDE_DIGITS: Final = 2
#: Digits of the degrees of a longitude, ±DDD; ISO 6709, from memory.
LONGITUDE_DIGITS: Final = 3
#: Minutes and seconds have two digits each and follow the degrees without a mark.
_PAIR: Final = 2
#: At most so many digits follow the degrees before the decimal point: MMSS.
_MOST_AFTER: Final = 4


def lat_lon_from_iso_6709(plain: str) -> tuple[float, float] | None:
    """Latitude and longitude of an ISO 6709 string.

    Parameters
    ----------
    plain : str
        Text from `one_alphabet`, which may be anything; read are ±DD.DD±DDD.DD/,
        ±DDMM.MM±DDDMM.MM/ and ±DDMMSS.SS±DDDMMSS.SS/. The stroke at the end may be
        missing, ``CRSWGS_84`` may stand before it.

    Returns
    -------
    tuple of float [deg], or None
        Latitude, longitude; north and east positive; ranges not checked. None if
        the text has not the shape of a sign, digits, a sign, digits.

    Raises
    ------
    InputError
        If digits are missing, minutes or seconds reach 60, a height is given or a
        CRS other than WGS_84.

    References
    ----------
    ISO 6709:2008 annex H, its three numeric forms; from memory, unverified.
    """
    found = _STRING.fullmatch(plain)
    if found is None:
        return None
    if found["height"]:
        msg = (
            f"{echo(plain)} holds a height, {found['height']}; give the point alone "
            "and the height by its own option."
        )
        raise InputError(msg)
    if found["crs"] is not None and found["crs"].upper() != "WGS_84":
        msg = f"{echo(plain)} names the CRS {echo(found['crs'])}; only WGS_84 is read."
        raise InputError(msg)
    lat_sign, lat, lat_part, lon_sign, lon, lon_part = found.groups(default="")[:6]
    lat_deg = _degrees(lat, lat_part, digits=LATITUDE_DIGITS, plain=plain)
    lon_deg = _degrees(lon, lon_part, digits=LONGITUDE_DIGITS, plain=plain)
    return (
        -lat_deg if lat_sign == "-" else lat_deg,
        -lon_deg if lon_sign == "-" else lon_deg,
    )


def _degrees(whole: str, part: str, *, digits: int, plain: str) -> float:
    after = whole[digits:]
    if len(whole) < digits or len(after) % _PAIR or len(after) > _MOST_AFTER:
        msg = (
            f"{echo(plain)} is neither a pair nor ISO 6709: put a comma between "
            "latitude and longitude, 57.1,-4.2, or write all digits, +57.1-004.2/."
        )
        raise InputError(msg)
    numbers = [whole[:digits], *(after[i : i + _PAIR] for i in range(0, len(after), 2))]
    numbers[-1] += part
    return from_sexagesimal(numbers, text=echo(plain))
