"""The page of a figure: its size, its areas by hand, its colours and its letters."""

from functools import lru_cache
from pathlib import Path
from typing import Any, Final, Literal, NamedTuple

import matplotlib as mpl
from matplotlib.axes import Axes
from matplotlib.backends.backend_agg import FigureCanvasAgg, RendererAgg
from matplotlib.figure import Figure
from matplotlib.font_manager import FontProperties, get_font
from matplotlib.lines import Line2D
from matplotlib.text import Text

#: A4 lying [in]; ISO 216.
PAGE_IN: Final = (11.69, 8.27)
#: Pixels an inch of a PNG [1/in]: A4 lying is 1753 pixels wide. Text is measured at
#: the same, so that each is measured once.
PNG_DPI: Final = 150.0
#: Points in an inch [pt].
PT_PER_IN: Final = 72.0

#: Okabe and Ito, Color Universal Design (2008): blue, orange, reddish purple, sky
#: blue, bluish green.
SIGHT: Final = "#0072B2"
GRAZING: Final = "#E69F00"
DISC: Final = "#CC79A7"
ZONE: Final = "#56B4E9"
COVER: Final = "#009E73"
#: Greys: ground, its edge, hatching, lines of equal height, quiet letters.
GROUND: Final = "#DADADA"
EDGE: Final = "#000000"
HATCHING: Final = "#8A8A8A"
LEVEL: Final = "#C4C4C4"
QUIET: Final = "#444444"
PAPER: Final = "#FFFFFF"

#: Sizes of letters [pt]: small enough for A4, large enough at 900 pixels.
SIZE: Final = 8.5
SMALL: Final = 8.0
HEAD: Final = 15.0
SUBHEAD: Final = 11.5
#: Letters of the footer: seven pixels at 900 [pt].
FINE: Final = 7.0
#: The headline shrinks to this before it is cut [pt].
HEAD_LEAST: Final = 11.0
#: Distance between lines of text over their size [1].
LINE_SPACING: Final = 1.24

#: Widths of lines: frames, thin and thick ground, rays [pt].
FRAME_WIDTH: Final = 0.6
THIN: Final = 0.7
THICK: Final = 2.4
RAY_WIDTH: Final = 1.7
#: Dash-dot of the grazing ray and dashes of the sea [pt].
DASH_DOT: Final = (0, (6.0, 2.0, 1.2, 2.0))
SEA_DASHES: Final = (0, (9.0, 3.0))
#: Dots of the Fresnel zone and dashes of the rule's line [pt].
ZONE_DOTS: Final = (0, (1.0, 1.3))
RULE_DASHES: Final = (0, (4.0, 1.8))
#: Widths of the zone's outline and of the rule's line [pt].
ZONE_WIDTH: Final = 1.6
#: Dots inside cover, and the width of its edge [pt].
STIPPLE: Final = "......"
COVER_WIDTH: Final = 0.9
RULE_WIDTH: Final = 1.3
#: Size of a dot on the ground [pt].
DOT: Final = 5.0
#: Size of ring A and square B, ticks and their distance to numbers [pt].
MARKER: Final = 8.5
TICK: Final = 3.0
TICK_PAD: Final = 2.5

#: Layers: what is drawn over what.
Z_LEVEL: Final = 1
Z_GROUND: Final = 2
Z_EDGE: Final = 4
Z_RAY: Final = 5
Z_MARK: Final = 7

#: Distance between two lines of small letters [in].
SMALL_LINE_IN: Final = 0.15
#: Middle of small letters above their baseline [1 of their size].
LETTER_MIDDLE: Final = 0.36
#: Height of a sample of an area in a key [in].
PATCH_IN: Final = 0.1
#: Lowest baseline of a text above the bottom of its area [in].
BASELINE_IN: Final = 0.05

ELLIPSIS: Final = "…"
#: Drawn in place of a character that the font has not.
MISSING: Final = "?"

_FONTS: Final = Path(mpl.get_data_path()) / "fonts" / "ttf"


class Area(NamedTuple):
    """A rectangle on the page [in], from the lower left corner."""

    left: float
    bottom: float
    width: float
    height: float

    @property
    def right(self) -> float:
        """Right edge [in]."""
        return self.left + self.width

    @property
    def top(self) -> float:
        """Upper edge [in]."""
        return self.bottom + self.height


#: The areas of the page [in]; chosen by eye.
HEAD_AREA: Final = Area(0.3, 7.47, 11.09, 0.66)
ENDS_AREA: Final = Area(0.9, 7.0, 8.0, 0.34)
KEY_AREA: Final = Area(0.9, 6.62, 8.0, 0.34)
PROFILE_AREA: Final = Area(0.9, 3.86, 8.0, 2.72)
LANE_AREA: Final = Area(0.9, 3.54, 8.0, 0.32)
STRIP_AREA: Final = Area(0.9, 2.76, 8.0, 0.78)
TABLE_AREA: Final = Area(0.3, 0.86, 5.5, 1.5)
NEEDED_AREA: Final = Area(6.0, 0.86, 2.9, 1.5)
SIDE_AREA: Final = Area(9.2, 3.86, 2.19, 3.48)
TARGET_AREA: Final = Area(9.72, 4.72, 1.67, 2.2)
TARGET_TEXT_AREA: Final = Area(9.2, 3.86, 2.19, 0.78)
VIEW_AREA: Final = Area(9.62, 4.1, 1.77, 1.6)
MAP_AREA: Final = Area(9.2, 1.19, 2.19, 2.42)
MAP_FOOT_AREA: Final = Area(9.2, 0.92, 2.19, 0.24)
FOOT_AREA: Final = Area(0.3, 0.13, 11.09, 0.72)


def new_page() -> Figure:
    """An empty A4 page with a canvas that can measure text; no pyplot."""
    figure = Figure(figsize=PAGE_IN, dpi=PNG_DPI, facecolor=PAPER)
    FigureCanvasAgg(figure)
    return figure


def letters(size: float = SIZE, *, bold: bool = False) -> FontProperties:
    """The bundled DejaVu Sans by its file, whatever fonts the machine has."""
    name = "DejaVuSans-Bold.ttf" if bold else "DejaVuSans.ttf"
    return FontProperties(fname=str(_FONTS / name), size=size)


def plain(text: str) -> str:
    """A text on one line in characters that the font can draw."""
    known = _known_characters()
    joined = " ".join(text.split())
    return "".join(c if ord(c) in known else MISSING for c in joined)


@lru_cache(maxsize=1)
def _known_characters() -> frozenset[int]:
    """Code points that the font can draw."""
    return frozenset(get_font(str(_FONTS / "DejaVuSans.ttf")).get_charmap())


def area_axes(figure: Figure, area: Area, label: str) -> Axes:
    """Axes that fill an area of the page."""
    width, height = PAGE_IN
    axes: Axes = figure.add_axes(
        (
            area.left / width,
            area.bottom / height,
            area.width / width,
            area.height / height,
        ),
        label=label,
    )
    return axes


def write(
    figure: Figure,
    x_in: float,
    y_in: float,
    text: str,
    *,
    size: float = SIZE,
    bold: bool = False,
    color: str = EDGE,
    **kwargs: Any,
) -> Text:
    """A text at a place of the page [in]; dollar signs are only dollar signs."""
    kwargs.setdefault("va", "baseline")
    artist: Text = figure.text(
        x_in / PAGE_IN[0],
        y_in / PAGE_IN[1],
        plain(text),
        fontproperties=letters(size, bold=bold),
        color=color,
        parse_math=False,
        **kwargs,
    )
    return artist


def renderer_of(figure: Figure) -> Any:
    """The renderer that measures text on a page; the library types it loosely."""
    canvas = figure.canvas
    if not isinstance(canvas, FigureCanvasAgg):
        canvas = FigureCanvasAgg(figure)
    # the plotting library states no types for this call, nor for the ruler below
    return canvas.get_renderer()  # type: ignore[no-untyped-call]


def width_in(figure: Figure, artist: Text) -> float:
    """Width of a text on the page [in]."""
    box = artist.get_window_extent(renderer_of(figure))
    return float(box.width) / float(figure.dpi)


def widths_in(texts: list[Text], dpi: float) -> list[float]:
    """Widths of texts on the page [in] when hinted for so many pixels an inch."""
    ruler = RendererAgg(1, 1, dpi)  # type: ignore[no-untyped-call]
    return [float(t.get_window_extent(ruler, dpi=dpi).width) / dpi for t in texts]


def fit(
    figure: Figure, artist: Text, most_in: float, *, least_pt: float, cut: bool = True
) -> Text:
    """The text made smaller, then cut with an ellipsis, until it is narrow enough."""
    wide = width_in(figure, artist)
    if wide > most_in:
        size = float(artist.get_fontsize())
        artist.set_fontsize(max(least_pt, size * most_in / wide))
    text = artist.get_text()
    while cut and width_in(figure, artist) > most_in and len(text) > 1:
        keep = int(len(text) * most_in / width_in(figure, artist))
        text = text[: max(1, min(keep, len(text) - 1))].rstrip()
        artist.set_text(text + ELLIPSIS)
    return artist


def spot(
    ax: Axes, at: tuple[float, float], shape: str, *, label: str, **look: Any
) -> Line2D:
    """One open mark on axes; ``look`` overrides size, face and width."""
    settings: dict[str, Any] = {
        "ms": MARKER,
        "mfc": "none",
        "mec": EDGE,
        "mew": RAY_WIDTH,
        "zorder": Z_MARK,
    }
    settings.update(look)
    return ax.plot(*at, ls="none", marker=shape, label=label, **settings)[0]


def letter_beside(
    ax: Axes,
    letter: str,
    at: tuple[float, float],
    off_pt: tuple[float, float],
    *,
    ha: Literal["left", "center", "right"] = "center",
    bbox: dict[str, Any] | None = None,
) -> Text:
    """A bold letter so far from a place on axes [pt]."""
    return ax.annotate(
        letter,
        at,
        xytext=off_pt,
        textcoords="offset points",
        ha=ha,
        va="center",
        fontproperties=letters(SIZE, bold=True),
        zorder=Z_MARK,
        bbox=bbox,
    )


def style_ticks(axes: Axes) -> None:
    """Tick labels in the page's own letters."""
    for label in (*axes.get_xticklabels(), *axes.get_yticklabels()):
        label.set_fontproperties(letters(SMALL))
        label.set_parse_math(False)
    axes.tick_params(
        length=TICK, width=FRAME_WIDTH, pad=TICK_PAD, labelsize=SMALL, colors=EDGE
    )
    for spine in axes.spines.values():
        spine.set_linewidth(FRAME_WIDTH)
