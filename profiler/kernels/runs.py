"""Runs in arrays of truth values."""

import numpy as np

from profiler.model.arrays import BoolArray, IntArray


def runs_of_true(mask: BoolArray) -> tuple[IntArray, IntArray]:
    """Where runs of true values start and end.

    Parameters
    ----------
    mask : (n,) bool

    Returns
    -------
    first, end : (m,) int64
        Index of each run's first value and of the one after its last, rising.
    """
    padded = np.concatenate([[False], mask, [False]])
    edges = np.flatnonzero(np.diff(padded.astype(np.int8)))
    return edges[::2], edges[1::2]
