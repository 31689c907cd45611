"""Toe numbers as people read them: never without unit, diameter, per wheel or total, and the word in or out."""

from __future__ import annotations

import math
from dataclasses import dataclass
from enum import StrEnum
from typing import TYPE_CHECKING, Annotated

import typer

if TYPE_CHECKING:
    from toewright.model.axle import Axle

MM_PER_INCH = 25.4


class ToeUnit(StrEnum):
    """How toe is measured."""

    DEG = "deg"
    MM = "mm"
    IN = "in"
    MIN = "min"


ToeUnitOption = Annotated[
    ToeUnit, typer.Option("--toe-unit", help="deg, min (of arc), or mm or in (inch) across the rim or --toe-diameter.")
]
ToeDiameterOption = Annotated[
    float | None,
    typer.Option(
        "--toe-diameter", metavar="MM", help="Diameter across which toe in mm or in is measured; default rim_diameter."
    ),
]
ToeTotalOption = Annotated[bool, typer.Option("--toe-total", help="Toe as the sum of both wheels, not per wheel.")]


@dataclass(frozen=True)
class ToeScale:
    """How to write a toe angle.

    Attributes:
        unit: the unit.
        diameter: mm, for mm and in.
        total: the numbers are the sum of both wheels.
    """

    unit: ToeUnit
    diameter: float | None
    total: bool

    @property
    def words(self) -> str:
        """Unit in words: ``mm across 330 mm, per wheel``."""
        of = "total of both wheels" if self.total else "per wheel"
        if self.unit is ToeUnit.DEG:
            return f"deg, {of}"
        if self.unit is ToeUnit.MIN:
            return f"minutes of arc, {of}"
        name = "mm" if self.unit is ToeUnit.MM else "inch"
        return f"{name} across {self.diameter:g} mm, {of}"

    @property
    def short(self) -> str:
        """Unit as it stands behind a number."""
        return {"deg": "deg", "min": "min", "mm": "mm", "in": "inch"}[self.unit.value]

    def value(self, degrees: float) -> float:
        """A toe angle in this scale, toe-in +."""
        if self.unit is ToeUnit.DEG:
            return degrees
        if self.unit is ToeUnit.MIN:
            return 60.0 * degrees
        across = (self.diameter or 0.0) * math.sin(math.radians(degrees))
        return across if self.unit is ToeUnit.MM else across / MM_PER_INCH

    def cell(self, degrees: float) -> str:
        """Number and the word in or out, for a table whose heading gives the unit."""
        if not math.isfinite(degrees):
            return "-"
        places = {ToeUnit.DEG: 3, ToeUnit.MM: 2, ToeUnit.IN: 4, ToeUnit.MIN: 1}[self.unit]
        number = f"{abs(self.value(degrees)):.{places}f}"
        if float(number) == 0.0:
            return f"{number}    "
        return f"{number} {'in ' if degrees > 0 else 'out'}"

    def text(self, degrees: float) -> str:
        """Number, unit and direction: ``0.12 deg toe-out per wheel``."""
        if not math.isfinite(degrees):
            return "unknown"
        cell = self.cell(degrees).split()
        word = {"in": "toe-in", "out": "toe-out"}[cell[1]] if len(cell) > 1 else "toe change"
        of = "total of both wheels" if self.total else "per wheel"
        across = f" across {self.diameter:g} mm" if self.unit in (ToeUnit.MM, ToeUnit.IN) else ""
        return f"{cell[0]} {self.short}{across} {word} {of}"


def toe_scale(axle: Axle, unit: ToeUnit, diameter: float | None, total: bool) -> ToeScale:
    """The scale asked for; the diameter from the file unless given.

    Raises:
        InputError: for mm or in when neither the file nor the option gives a diameter, or one that is not positive.
    """
    from toewright.model.errors import InputError

    if diameter is not None and not (math.isfinite(diameter) and diameter > 0.0):
        raise InputError(f"--toe-diameter {diameter:g}: must be a length above 0 mm")
    across = diameter if diameter is not None else axle.wheel.rim_diameter
    if unit in (ToeUnit.MM, ToeUnit.IN) and across is None:
        raise InputError(
            f"--toe-unit {unit.value}: across which diameter? {axle.path}: wheel.rim_diameter is missing; add it, or give --toe-diameter MM"
        )
    return ToeScale(unit, across, total)
