"""From an axle to the design vectors that the kernels take."""

from __future__ import annotations

from collections.abc import Sequence

import numpy as np

from toewright.core import layout
from toewright.core.types import FloatArray
from toewright.model.axle import Axle

SIDES = ("left", "right")
"""The corners of an axle, in the order of every result."""

COORDINATES = ("x", "y", "z")


def design_vector(axle: Axle, side: str) -> FloatArray:
    """Design vector (35,) of one corner: mm, deg, ISO 8855 axes; see toewright.core.layout for its entries."""
    corner = axle.corner(side)
    vector = np.zeros(layout.DESIGN_SIZE)
    for slot, name in enumerate(layout.SLOTS[corner.kind]):
        if name:
            vector[3 * slot : 3 * slot + 3] = corner.points[name]
    vector[layout.TOE_IN] = axle.setup.toe_in
    vector[layout.CAMBER] = axle.setup.camber
    vector[layout.RADIUS] = axle.wheel.loaded_radius
    if axle.rack is not None:
        vector[layout.RACK_AXIS : layout.RACK_AXIS + 3] = axle.rack.axis
    vector[layout.SIDE] = corner.sign
    vector[layout.KIND] = layout.KINDS.index(corner.kind)
    return vector


def design_vectors(axle: Axle, sides: Sequence[str] = SIDES) -> FloatArray:
    """Design vectors (S, 35) of several corners of one axle."""
    return np.array([design_vector(axle, side) for side in sides])


def coordinate_index(kind: str, coordinate: str) -> int:
    """Entry of the design vector that holds a coordinate such as ``tie_rod_outer.z``.

    Raises:
        ValueError: if the corner kind has no such point, or the letter is not x, y or z.
    """
    point, _, letter = coordinate.rpartition(".")
    slots = layout.SLOTS[kind]
    if not point or point not in slots or letter not in COORDINATES:
        names = ", ".join(name for name in slots if name)
        raise ValueError(f"{coordinate!r} is not a coordinate of a {kind} corner; write point.x, .y or .z with {names}")
    return 3 * slots.index(point) + COORDINATES.index(letter)


def coordinate_names(kind: str) -> tuple[str, ...]:
    """All hardpoint coordinates of a corner kind, ``point.x`` ..., in the order of the design vector."""
    return tuple(f"{name}.{letter}" for name in layout.SLOTS[kind] if name for letter in COORDINATES)
