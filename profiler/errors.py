"""The exception tree: what went wrong, in a planner's words."""


class ProfilerError(Exception):
    """Base of every error this package raises on purpose."""


class InputError(ProfilerError, ValueError):
    """A value, file or option that cannot be used, with its remedy."""


class DemError(ProfilerError):
    """An elevation file that cannot be used as it is."""


class OutsideDemError(DemError):
    """A point that lies outside the elevation model, or where it has no ground."""
