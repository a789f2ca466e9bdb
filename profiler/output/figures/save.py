"""A figure to a file: never half of one, the same bytes for the same answer."""

import threading
from pathlib import Path
from typing import Any, BinaryIO, Final

import matplotlib as mpl
import numpy as np
from matplotlib.backends.backend_agg import FigureCanvasAgg
from matplotlib.figure import Figure

from profiler.errors import InputError
from profiler.output.figures.page import PNG_DPI
from profiler.output.figures.png import png_bytes
from profiler.output.files import FIGURE_SUFFIXES, write_whole

#: What keeps the ids in an SVG the same from run to run.
SALT: Final = "overbrow"

#: What each kind of file says of itself: nothing that changes from run to run.
_METADATA: Final[dict[str, dict[str, Any]]] = {
    ".png": {},
    ".svg": {"Date": None, "Creator": None},
    ".pdf": {"CreationDate": None, "Creator": None, "Producer": None},
}
#: How a PDF carries letters and how hard it is packed (the library's numbers).
EMBEDDED_TRUETYPE: Final = 42
ZIP_LEVEL: Final = 6
#: Settings that decide the bytes, whatever the machine's own settings are.
_SETTINGS: Final[dict[Any, Any]] = {
    "svg.hashsalt": SALT,
    "svg.fonttype": "path",
    "svg.image_inline": True,
    "pdf.fonttype": EMBEDDED_TRUETYPE,
    "pdf.compression": ZIP_LEVEL,
    "savefig.bbox": None,
    "savefig.facecolor": "auto",
    "savefig.transparent": False,
}
#: The library's settings are shared by all threads: one save at a time.
_ONE_AT_A_TIME: Final = threading.Lock()


def save_figure(figure: Figure, path: str | Path, *, dpi: float = PNG_DPI) -> None:
    """Write a figure as PNG, SVG or PDF, by the name's ending.

    Parameters
    ----------
    figure : Figure
        What `draw_figure` gave.
    path : str or Path
        The file; an existing one is replaced once the new one is complete.
    dpi : float [1/in]
        Pixels an inch of a PNG, and of the map inside an SVG or PDF.

    Raises
    ------
    InputError
        If the ending is another one, the folder does not exist or cannot be written
        to, or the name is a folder.
    """
    target = Path(path)
    suffix = target.suffix.lower()
    if suffix not in FIGURE_SUFFIXES:
        msg = f'"{target.name}" is no figure file. End the name in .png, .svg or .pdf.'
        raise InputError(msg)
    write_whole(target, lambda beside: _write(figure, beside, suffix, dpi))


def _write(figure: Figure, path: Path, suffix: str, dpi: float) -> None:
    with _ONE_AT_A_TIME, mpl.rc_context(_SETTINGS), path.open("wb") as out:
        if suffix == ".png":
            _write_png(figure, out, dpi)
            return
        options: dict[str, Any] = {"metadata": _METADATA[suffix], "pad_inches": 0.0}
        figure.savefig(out, format=suffix[1:], dpi=dpi, **options)


def _write_png(figure: Figure, out: BinaryIO, dpi: float) -> None:
    """Pixels and nothing else but their number an inch."""
    canvas, before = figure.canvas, figure.dpi
    if not isinstance(canvas, FigureCanvasAgg):
        canvas = FigureCanvasAgg(figure)  # the page's own has measured its text
    try:
        figure.set_dpi(dpi)
        # the plotting library states no types for these two calls
        canvas.draw()  # type: ignore[no-untyped-call]
        pixels = np.asarray(canvas.buffer_rgba())  # type: ignore[no-untyped-call]
        out.write(png_bytes(pixels[:, :, :3], dpi))
    finally:
        figure.set_dpi(before)
