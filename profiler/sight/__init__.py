"""The sight line over a path profile: margins, verdict, what would flip it."""

from profiler.sight.judge import judge

__all__ = ["judge"]
