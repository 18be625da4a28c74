"""Array types, and the checks that every array of the public classes passes."""

from __future__ import annotations

import numpy as np
from numpy.typing import ArrayLike, NDArray

from strutbook.errors import InvalidTruss

FloatArray = NDArray[np.float64]
IntArray = NDArray[np.intp]
BoolArray = NDArray[np.bool_]


def read_only_floats(values: ArrayLike, name: str, dimensions: int) -> FloatArray:
    """Copy of `values` as finite, read-only floats with that many array dimensions.

    Raises
    ------
    InvalidTruss
        When there are fewer or more array dimensions, or a value is not a finite number.
    """
    array = np.array(values, dtype=np.float64)
    if array.ndim != dimensions:
        raise InvalidTruss(f"{name} has {array.ndim} array dimensions; expected {dimensions}.")
    if not np.isfinite(array).all():
        place = tuple(int(index) for index in np.argwhere(~np.isfinite(array))[0])
        raise InvalidTruss(f"{name} holds {array[place]} at index {place}; expected finite numbers.")
    array.flags.writeable = False
    return array


def read_only_indices(values: ArrayLike, name: str, dimensions: int) -> IntArray:
    """Copy of `values` as read-only indices with that many array dimensions.

    Raises
    ------
    InvalidTruss
        When there are fewer or more array dimensions, or a value is not a whole number.
    """
    given = np.asarray(values)
    array = np.array(given, dtype=np.intp)
    if array.ndim != dimensions:
        raise InvalidTruss(f"{name} has {array.ndim} array dimensions; expected {dimensions}.")
    if given.size and given.dtype.kind not in "iu":
        raise InvalidTruss(f"{name} holds {given.dtype} values; expected indices (whole numbers).")
    array.flags.writeable = False
    return array


def check_indices(indices: IntArray, count: int, name: str, of: str) -> None:
    """Refuse indices outside `0 <= index < count`.

    Raises
    ------
    InvalidTruss
        Naming the first index that is outside.
    """
    if indices.size and (indices.min() < 0 or indices.max() >= count):
        place = np.argwhere((indices < 0) | (indices >= count))[0]
        raise InvalidTruss(
            f"{name} {int(place[0])} names {of} {int(indices[tuple(place)])}, but there are {count}, counted from 0."
        )
