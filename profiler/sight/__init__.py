"""The sight line over a path profile: margins, verdict, what would flip it."""
