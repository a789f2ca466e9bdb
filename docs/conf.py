"""Settings of the documentation: ``sphinx-build -W docs FOLDER``."""

import re
from typing import TYPE_CHECKING

if TYPE_CHECKING:  # pytest imports this file where Sphinx is not installed
    from sphinx.application import Sphinx

project = "overbrow"
author = "the overbrow authors"
project_copyright = "2026, the overbrow authors"
extensions = ["myst_parser"]
exclude_patterns = ["_build"]
myst_heading_anchors = 3
html_theme = "furo"
html_title = "overbrow, terrain line-of-sight profiler"
html_show_sourcelink = False
html_copy_source = False
html_static_path = ["_static"]
html_css_files = ["pages.css"]


def without_last_blank_line(app: "Sphinx", docname: str, source: list[str]) -> None:
    """Drop the blank line that ends a doctest block, which only doctest needs."""
    del app, docname
    source[0] = re.sub(r"\n\n```$", "\n```", source[0], flags=re.M)


def setup(app: "Sphinx") -> None:
    """Connect the one change that pages see on their way."""
    app.connect("source-read", without_last_blank_line)
