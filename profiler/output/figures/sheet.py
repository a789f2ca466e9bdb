"""Beside a radio path's profile: pointing, loss, and clearance by the air."""

import textwrap
from typing import TYPE_CHECKING, Any, Final

from matplotlib.figure import Figure

from profiler.output.figures import page
from profiler.output.figures.scale import Scale
from profiler.output.numbers import ratio, rounded_text

if TYPE_CHECKING:  # a walker's figure need not load the radio room
    from profiler.radio.answer import RadioAnswer

#: Characters of a line [1]; the column holds about 33.
LINE_MOST: Final = 32
#: Distance between two lines and before a head [in].
LINE_IN: Final = 0.146
HEAD_GAP_IN: Final = 0.06
#: Left edges of the air's columns, and where its numbers end [in].
KE_END_IN: Final = 0.4
CLEAR_END_IN: Final = 1.35
SHARE_END_IN: Final = 2.0
#: Decimals of a share of F1 [1].
SHARE_DECIMALS: Final = 2

Json = dict[str, Any]


def pointing_lines(radio: Json, scale: Scale) -> list[str]:
    """Bearings and tilts of both antennas and the length of the ray."""
    aim = radio["pointing"]
    lines = []
    for letter, bearing, tilt in (
        ("A", aim["azimuth_deg"], aim["from_tilt_deg"]),
        ("B", aim["back_azimuth_deg"], aim["to_tilt_deg"]),
    ):
        way = "up" if tilt >= 0.0 else "down"
        lines.append(f"{letter} to {bearing:.2f}°, tilt {way} {abs(tilt):.2f}°")
    return [*lines, f"ray {scale.show.length(aim['ray_m'])}"]


def loss_lines(radio: Json) -> list[str]:
    """Free space and diffraction."""
    loss = radio["loss"]
    free = f"free space {loss['free_space_db']:.1f} dB"
    if loss["diffraction_db"] is None:
        return [free, *textwrap.wrap(f"no diffraction: {loss['method']}", LINE_MOST)]
    told = f"diffraction {loss['diffraction_db']:.1f} dB"
    return [free, told, *textwrap.wrap(loss["method"], LINE_MOST)]


def beside_lines(radio: Json, scale: Scale) -> list[str]:
    """Ground beside the path inside the zone, and where smooth ground would mirror."""
    lines, side, mirror, show = [], radio["side"], radio["reflection"], scale.show
    if side is not None:
        lines += [
            f"beside the path at {show.distance(side['distance_m'])},",
            f"{show.height(side['offset_m'])} {side['side']}: "
            f"{ratio(side['f1_share'], SHARE_DECIMALS)} of F1",
        ]
    if mirror is not None:
        lines += [
            f"smooth ground would mirror at {show.distance(mirror['distance_m'])}",
        ]
    return [part for text in lines for part in textwrap.wrap(text, LINE_MOST)]


def draw_sheet(figure: Figure, radio: "RadioAnswer", scale: Scale) -> None:
    """Pointing, loss and clearance in the column beside the profile.

    Parameters
    ----------
    figure : Figure
    radio : RadioAnswer
        What the radio room says of the path.
    scale : Scale
        Units.
    """
    from profiler.output.radio_record import radio_record  # only for a radio path
    from profiler.output.radio_words import frequency_text

    values = radio_record(radio)
    area = page.SIDE_AREA
    y = area.top - page.SIZE / page.PT_PER_IN
    title = f"radio path at {frequency_text(values['frequency_hz'])}"
    page.write(figure, area.left, y, title, bold=True)
    y = _block(figure, y, "antennas", pointing_lines(values, scale))
    y = _block(figure, y, "loss", loss_lines(values))
    y = _airs(figure, y, values, scale)
    lines = beside_lines(values, scale)
    if lines:
        _block(figure, y, "and beware", lines)


def _block(figure: Figure, y: float, head: str, lines: list[str]) -> float:
    """A head and its lines below ``y``; the last baseline [in]."""
    area = page.SIDE_AREA
    y -= HEAD_GAP_IN
    for text, color in ((head, page.QUIET), *((t, page.EDGE) for t in lines)):
        y -= LINE_IN
        artist = page.write(figure, area.left, y, text, size=page.SMALL, color=color)
        page.fit(figure, artist, area.width, least_pt=page.FINE)
    return y


def _airs(figure: Figure, y: float, radio: Json, scale: Scale) -> float:
    """Lowest clearance of the bare line in several airs, as metres and share of F1."""
    from profiler.output.radio_words import ke_words  # only for a radio path

    left = page.SIDE_AREA.left
    y -= HEAD_GAP_IN + LINE_IN
    rows = [("ke", f"clear by, {scale.height_unit}", "of F1", page.QUIET)]
    for air in radio["by_ke"]:
        clear = scale.show.bare_height(air["clearance_m"])
        share = rounded_text(air["f1_share"], SHARE_DECIMALS)
        rows.append((ke_words(air["ke"]), clear, share, page.EDGE))
    for ke, clear, share, color in rows:
        for text, end in (
            (ke, KE_END_IN),
            (clear, CLEAR_END_IN),
            (share, SHARE_END_IN),
        ):
            shown = text.replace("-", "−")
            look: dict[str, Any] = {"size": page.SMALL, "ha": "right", "color": color}
            page.write(figure, left + end, y, shown, **look)
        y -= LINE_IN
    return y + LINE_IN
