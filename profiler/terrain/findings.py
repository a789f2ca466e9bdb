"""What an inspection finds: what looks wrong in a file, what must be declared."""

import re
from collections.abc import Iterator
from typing import Final, NamedTuple

import numpy as np
import rasterio

from profiler.constants import LOWEST_GROUND_M, VOID_BELOW_M
from profiler.earth.projection import Projector
from profiler.model.note import Note
from profiler.model.terrain import DemKind
from profiler.terrain.scan import Tally

#: A decoded block above this makes every look-up slow [bytes]; our choice.
HUGE_BLOCK_BYTES: Final = 16 * 2**20
#: Decoding a striped file above this for one north-south path is slow [bytes]; ours.
HUGE_STRIPED_BYTES: Final = 500 * 2**20

#: Words in a description or tag that say what surface a file shows (common practice).
_KIND_WORDS: Final = {
    DemKind.SURFACE: re.compile(r"\bdsm\b|surface model", re.I),
    DemKind.BARE: re.compile(r"\bdtm\b|bare.?earth|bare.?ground|terrain model", re.I),
}
#: Tags in which makers say what a file is (common practice).
_KIND_TAGS: Final = ("TIFFTAG_IMAGEDESCRIPTION", "TIFFTAG_DOCUMENTNAME")


#: What a file without a sure way to WGS84 is told to be.
NO_DATUM_SHIFT: Final = (
    "no exact shift from WGS84 to the file's datum is at hand; places may be off by up "
    "to hundreds of metres"
)
#: Bytes in the unit in which sizes of blocks are told [bytes].
MIB: Final = 2**20


class Declare(NamedTuple):
    """An option that a person must give, and why."""

    option: str
    why: str


def kind_of(dataset: "rasterio.DatasetReader") -> DemKind:
    """Surface or bare ground, when description or tags say one of them."""
    tags = dataset.tags()
    texts = [dataset.descriptions[0] or "", *(tags.get(t, "") for t in _KIND_TAGS)]
    said = {
        kind
        for kind, word in _KIND_WORDS.items()
        if any(word.search(text) for text in texts)
    }
    return said.pop() if len(said) == 1 else DemKind.UNKNOWN


def post_notes(tally: Tally) -> Iterator[Note]:
    """What looks wrong with the posts."""
    if tally.voids == tally.posts:
        yield Note(code="all-void", text="no post has ground")
    for value, found in tally.fillers.items():
        text = (
            f"{found.total} posts hold {value:.6g}, which the file does not declare as "
            f"nodata (first at row {found.first.row}, column {found.first.col}); they "
            "are taken as void"
        )
        yield Note(code="untagged-void", text=text)
    if tally.zeros:
        share = 100.0 * tally.zeros / tally.posts
        text = (
            f"{tally.zeros} posts ({share:.2g} %) are exactly 0: the sea, or voids "
            "filled with 0"
        )
        yield Note(code="zeros", text=text)
    if tally.outside is not None:
        first = tally.outside.first
        text = (
            f"{tally.outside.total} heights lie outside {LOWEST_GROUND_M:.0f} to "
            f"{VOID_BELOW_M:.0f} m (first {first.value:.1f} m at row {first.row}, "
            f"column {first.col}); check the unit and the scale"
        )
        yield Note(code="implausible-height", text=text)


def file_notes(
    dataset: "rasterio.DatasetReader", crs: Projector | None
) -> Iterator[Note]:
    """What is odd about the file, or makes it slow."""
    if crs is not None and crs.ballpark:
        yield Note(code="datum-shift", text=NO_DATUM_SHIFT)
    post = np.dtype(dataset.dtypes[0]).itemsize
    rows, cols = dataset.block_shapes[0]
    block = rows * cols * post
    whole = dataset.height * dataset.width * post
    if block > HUGE_BLOCK_BYTES:
        text = (
            f"one block decodes to {block / MIB:.0f} MB, so every look-up is slow; "
            "write the file again in tiles of 256 x 256"
        )
        yield Note(code="huge-blocks", text=text)
    elif cols == dataset.width and whole > HUGE_STRIPED_BYTES:
        text = (
            f"rows are stored whole, so a north-south path decodes up to "
            f"{whole / MIB:.0f} MB; write the file again in tiles of 256 x 256"
        )
        yield Note(code="huge-blocks", text=text)
    if dataset.driver == "VRT":
        text = "the hash is of the list of files, not of the heights in them"
        yield Note(code="hash-of-list", text=text)


def declarations(
    crs: Projector | None,
    problem: str | None,
    unit_text: str | None,
    stated: str | None,
    kind: DemKind,
) -> Iterator[Declare]:
    """What a person must say before the file can be used fully.

    Parameters
    ----------
    crs : Projector or None
        None when places cannot be computed.
    problem : str or None
        Why they cannot.
    unit_text, stated : str or None
        Unit of heights in the file's own words, and as m, ft or us-ft.
    kind : DemKind
        What surface the file says it shows.
    """
    if crs is None:
        yield Declare("--dem-crs EPSG:n", problem or "")
    if stated is None:
        why = "the unit of heights is not stated; metres are taken"
        if unit_text:
            why = f'heights are stated in "{unit_text}", which is not read'
        elif crs is not None and crs.unit_name not in ("degree", "metre"):
            why = f"the unit of heights is not stated, and the map's is {crs.unit_name}"
        yield Declare("--dem-unit m, ft or us-ft", why)
    if kind is DemKind.UNKNOWN:
        why = "the file does not say whether trees and buildings are in it"
        yield Declare("--dem-kind bare or surface", why)
