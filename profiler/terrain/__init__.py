"""The elevation model: open, inspect, sample along a path."""
