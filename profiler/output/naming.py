"""What the two ends of a path are called in every telling."""

from typing import Any


def names_of(values: dict[str, Any]) -> tuple[str, str]:
    """Names of the eye and the target on one printable line.

    Parameters
    ----------
    values : dict
        The record.
    """
    return (
        printable(values["from"]["name"]) or "the eye",
        printable(values["to"]["name"]) or "the target",
    )


def printable(text: str) -> str:
    """Text on one line, without what a terminal would obey."""
    return " ".join("".join(s if s.isprintable() else " " for s in text).split())


def storable(text: str) -> str:
    """Text that UTF-8 can hold; a name on disk may be bytes in no encoding."""
    return text.encode("utf-8", errors="replace").decode("utf-8")


def capital(text: str) -> str:
    """Text that begins a sentence."""
    return text[:1].upper() + text[1:]
