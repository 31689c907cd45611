"""Axis maps: how the car's x, y, z come from the columns of a table."""

from __future__ import annotations

import re
from dataclasses import dataclass
from itertools import permutations, product

import numpy as np

from toewright.core.types import FloatArray
from toewright.model.errors import InputError
from toewright.model.frames import AXIS_SIGNS


@dataclass(frozen=True)
class AxisMap:
    """One of the 48 ways to put signs and columns to the car's x, y, z.

    Attributes:
        parts: for the car's x (forward), y (left) and z (up) in turn: sign, and the letter of the table's column. ``-y,x,z`` is
            x = -(column y), y = column x, z = column z.
    """

    parts: tuple[tuple[int, str], ...]

    @property
    def text(self) -> str:
        """As the option is written."""
        return ",".join(("-" if sign < 0 else "") + letter for sign, letter in self.parts)

    @property
    def matrix(self) -> FloatArray:
        """(3, 3): car = matrix @ table."""
        made = np.zeros((3, 3))
        for row, (sign, letter) in enumerate(self.parts):
            made[row, "xyz".index(letter)] = sign
        return made

    @property
    def mirrors(self) -> bool:
        """True for a left-handed map: right only if the table's own axes are left-handed."""
        return bool(np.linalg.det(self.matrix) < 0.0)


ALL_AXIS_MAPS: tuple[AxisMap, ...] = tuple(
    AxisMap(tuple(zip(signs, letters, strict=True)))
    for letters in permutations("xyz")
    for signs in product((1, -1), repeat=3)
)
"""All 48, 24 of them right-handed."""


def parse_axes(text: str) -> AxisMap:
    """An axis map from ``-y,x,z``, or from the name of a system of axes that hardpoint files know.

    Raises:
        InputError: if it is neither a known name nor three different letters with optional signs.
    """
    wanted = text.strip().lower()
    if wanted in AXIS_SIGNS:
        return AxisMap(tuple((int(sign), letter) for sign, letter in zip(AXIS_SIGNS[wanted], "xyz", strict=True)))
    parts = [part.strip() for part in wanted.split(",")]
    letters = {part[-1:] for part in parts}
    if len(parts) != 3 or len(letters) != 3 or not all(re.fullmatch(r"[+-]?[xyz]", part) for part in parts):
        raise InputError(
            f"--axes {text}: is no axis map; write which columns give the car's x (forward), y (left) and z (up), such as "
            f"--axes=-y,x,z, or one of {', '.join(AXIS_SIGNS)}"
        )
    return AxisMap(tuple((-1 if part[0] == "-" else 1, part[-1]) for part in parts))
