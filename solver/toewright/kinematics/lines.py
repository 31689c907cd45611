"""Lines of a grid: the requested positions, the design position among them, and the strides on the way."""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np

from toewright.core.layout import END_MARK, STRIDE_MARK
from toewright.core.types import FloatArray, IntArray

SNAP = 1e-9
"""Positions nearer to zero than this (mm) are the design position: 21 evenly spaced values often miss it by rounding."""


@dataclass(frozen=True)
class Line:
    """One axis of a grid.

    Attributes:
        values: (n,) positions in mm, ascending, with 0 among them.
        wanted: (m,) index into ``values`` of each requested position.
        way: (2, k) positions from 0 outward, up then down, with strides put in.
        keep: (2, k) index into ``values``, or a mark.
    """

    values: FloatArray
    wanted: IntArray
    way: FloatArray
    keep: IntArray

    @property
    def zero(self) -> int:
        """Index of the design position."""
        return int(np.flatnonzero(self.values == 0.0)[0])


def grid_line(positions: FloatArray, stride: float) -> Line:
    """Prepare positions (m,) mm, in any order, for a walk with strides of at most ``stride`` mm.

    Raises:
        ValueError: if there is no position, or one is not a finite number.
    """
    wanted = np.atleast_1d(np.asarray(positions, dtype=float)).copy()
    if wanted.ndim != 1 or wanted.size == 0 or not np.all(np.isfinite(wanted)):
        raise ValueError("positions must be a list of at least one finite number (mm)")
    wanted[np.abs(wanted) < SNAP] = 0.0
    values = np.unique(np.append(wanted, 0.0))
    ways: list[list[tuple[float, int]]] = []
    for sign in (1.0, -1.0):
        order = [i for i in np.argsort(np.abs(values)) if values[i] * sign > 0.0]
        way: list[tuple[float, int]] = []
        before = 0.0
        for index in order:
            count = max(1, int(np.ceil(abs(values[index] - before) / stride - 1e-9)))
            way += [(before + (values[index] - before) * j / count, STRIDE_MARK) for j in range(1, count)]
            way.append((float(values[index]), int(index)))
            before = float(values[index])
        ways.append(way)
    size = max(1, *(len(way) for way in ways))
    line, keep = np.zeros((2, size)), np.full((2, size), END_MARK, dtype=np.int64)
    for row, way in enumerate(ways):
        for column, (position, index) in enumerate(way):
            line[row, column], keep[row, column] = position, index
    return Line(values, np.searchsorted(values, wanted).astype(np.int64), line, keep)
