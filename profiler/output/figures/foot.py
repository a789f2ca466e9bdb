"""The footer: ground, air, drawing, warnings and cautions."""

import textwrap
from typing import Final

from matplotlib.figure import Figure

from profiler.constants import VERSION
from profiler.model import DemKind, Note, SightLine, SourceFile
from profiler.output.figures import page
from profiler.output.figures.course import Course
from profiler.output.figures.ends import Limits
from profiler.output.figures.scale import Scale, times_text
from profiler.output.figures.tables import short
from profiler.output.numbers import posts_text, ratio
from profiler.output.told import radio_of

#: Characters of a file's name before it is cut, and of its hash [1].
FILE_MOST: Final = 48
HASH_SHOWN: Final = 8
#: Characters of a line of the footer [1]; the page holds about 190.
LINE_MOST: Final = 175
#: What the heights show, as stated.
KIND_WORDS: Final = {
    DemKind.BARE: "bare ground",
    DemKind.SURFACE: "surface model",
    DemKind.UNKNOWN: "bare or surface not stated",
}
WHO: Final = f"overbrow {VERSION}, terrain line-of-sight profiler."


def ground_text(files: tuple[SourceFile, ...]) -> str:
    """The first file with its hash and posts, and how many more."""
    if not files:
        return "no file gives ground"
    file = files[0]
    more = f" and {len(files) - 1} more" if len(files) > 1 else ""
    digest = f" {file.sha256[:HASH_SHOWN]}" if file.sha256 else ""
    posts = posts_text([f.cell_m for f in files])
    return f"{short(file.name, FILE_MOST)}{digest}{more}, {posts}"


def left_out_text(line: SightLine) -> str:
    """What of the ground was left out on request; empty when nothing was."""
    text = ""
    if line.ignore_near_m > 0.0:
        text += f", ground within {ratio(line.ignore_near_m, 1)} m of the ends left out"
    if line.profile.sea_level_m is not None:
        text += f", voids taken as water at {ratio(line.profile.sea_level_m, 1)} m"
    return text


def warning_text(warnings: tuple[Note, ...]) -> str:
    """How many warnings there are, and the first one."""
    if len(warnings) == 1:
        return f"Warning: {warnings[0].text}"
    return f"{len(warnings)} warnings, the first: {warnings[0].text}"


def caution_lines(line: SightLine) -> list[str]:
    """What the figure does not tell; a radio path's own caution too."""
    notes = [line.cautions[0]]
    if radio_of(line) is not None:
        notes += [n for n in line.cautions[1:] if n.code.startswith("radio")]
    return [part for n in notes for part in textwrap.wrap(n.text, LINE_MOST)]


def footer_lines(course: Course, limits: Limits, scale: Scale) -> list[str]:
    """Ground and air, drawing, and warnings."""
    line = course.line
    profile, earth = line.profile, line.earth
    both = f"kr {ratio(earth.kr)} = " + (
        "flat earth" if earth.ke is None else f"ke {ratio(earth.ke)}"
    )
    how = "default" if earth.is_default else f"given as {earth.stated}"
    sea = "curved sea, straight line" if course.curved else "level sea, bent line"
    if not limits.has_sea:
        sea += " (the sea itself lies off the drawing)"
    times = times_text(scale.exaggeration(limits.low_m, limits.high_m))
    both = both.replace("-", "−")
    lines = [
        f"Ground: {ground_text(profile.files)}, {profile.interpolation.value}, "
        f"{KIND_WORDS[profile.dem_kind]}{left_out_text(line)}.  Air: {both} ({how}).",
        f"Drawn: {sea}, heights drawn {times} times.  {WHO}",
    ]
    if line.warnings:
        lines.append(warning_text(line.warnings))
    return lines


def draw_foot(figure: Figure, quiet: list[str], cautions: list[str]) -> None:
    """The footer of a page, its last line at the page's foot.

    Parameters
    ----------
    figure : Figure
    quiet : list of str
        What was drawn from what, in quiet letters.
    cautions : list of str
        In black below them.
    """
    area = page.FOOT_AREA
    step = page.FINE * page.LINE_SPACING / page.PT_PER_IN
    y = area.bottom + page.BASELINE_IN + step * (len(quiet) + len(cautions) - 1)
    for texts, color in ((quiet, page.QUIET), (cautions, page.EDGE)):
        for text in texts:
            artist = page.write(figure, area.left, y, text, size=page.FINE, color=color)
            page.fit(figure, artist, area.width, least_pt=page.FINE)
            y -= step
