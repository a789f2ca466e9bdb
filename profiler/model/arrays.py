"""Array types of the house and the one way to freeze an array."""

import numpy as np
from numpy.typing import NDArray

FloatArray = NDArray[np.float64]
IntArray = NDArray[np.int64]
BoolArray = NDArray[np.bool_]


def frozen(values: FloatArray) -> FloatArray:
    """Read-only contiguous float64 copy of an array of any shape and unit."""
    copy = np.array(values, dtype=np.float64, order="C")
    copy.setflags(write=False)
    return copy


def frozen_int(values: IntArray) -> IntArray:
    """Read-only contiguous int64 copy of an array of any shape."""
    copy = np.array(values, dtype=np.int64, order="C")
    copy.setflags(write=False)
    return copy
