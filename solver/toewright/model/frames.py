"""Axes and length units of files, to and from ISO 8855 and mm."""

from __future__ import annotations

from collections.abc import Mapping

import numpy as np

from toewright.core.types import FloatArray

MM_PER: Mapping[str, float] = {"mm": 1.0, "m": 1000.0, "in": 25.4}
"""Millimetres in one of each length unit."""

AXIS_SIGNS: Mapping[str, FloatArray] = {
    "iso-8855": np.array([1.0, 1.0, 1.0]),
    "sae-j670": np.array([1.0, -1.0, -1.0]),
}
"""Signs that turn a file's x, y, z into ISO 8855. SAE J670 (2008) also admits z up; here it means the z-down form."""


def to_iso(values: FloatArray, axes: str, unit: str) -> FloatArray:
    """Points (..., 3) of a file in ISO 8855 axes and mm."""
    return np.asarray(values, dtype=float) * AXIS_SIGNS[axes] * MM_PER[unit]


def from_iso(values: FloatArray, axes: str, unit: str) -> FloatArray:
    """Points (..., 3) mm of ISO 8855 in a file's axes and unit."""
    return np.asarray(values, dtype=float) * AXIS_SIGNS[axes] / MM_PER[unit]
