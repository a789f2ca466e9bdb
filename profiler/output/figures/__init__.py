"""Parts of the figure: page and text, profile, margin strip, target, map, tables."""
