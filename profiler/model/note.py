"""One sentence that accompanies an answer."""

from dataclasses import dataclass


@dataclass(frozen=True, slots=True, kw_only=True)
class Note:
    """A warning or caution: a stable code for scripts, a sentence for people."""

    code: str
    text: str
