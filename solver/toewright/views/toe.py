"""Toe numbers as people read them: never without unit, diameter, per wheel or total, and the word in or out."""

from __future__ import annotations

import math
from dataclasses import dataclass
from enum import StrEnum

MM_PER_INCH = 25.4


class ToeUnit(StrEnum):
    """How toe is measured."""

    DEG = "deg"
    MM = "mm"
    IN = "in"
    MIN = "min"


_DECIMALS = {ToeUnit.DEG: 3, ToeUnit.MM: 2, ToeUnit.IN: 4, ToeUnit.MIN: 1}
_NAMES = {ToeUnit.DEG: "deg", ToeUnit.MM: "mm", ToeUnit.IN: "inch", ToeUnit.MIN: "min of arc"}


@dataclass(frozen=True)
class ToeScale:
    """How to write a toe angle.

    A length is the difference of the distances to the centre plane at the rear and at the front end of the diameter, which is
    diameter sin(toe) for one wheel.

    Attributes:
        unit: the unit.
        diameter: mm, for mm and inch.
        rim: the diameter is the rim's, from the file.
        total: numbers are the sum of both wheels; then every method wants both wheels' angles.
    """

    unit: ToeUnit
    diameter: float | None = None
    rim: bool = False
    total: bool = False

    @property
    def across(self) -> str:
        """``across the 254 mm rim``; empty for an angle."""
        if self.unit not in (ToeUnit.MM, ToeUnit.IN) or self.diameter is None:
            return ""
        return f"across the {self.diameter:g} mm rim" if self.rim else f"across {self.diameter:g} mm"

    @property
    def whose(self) -> str:
        """``per wheel`` or ``total of both wheels``."""
        return "total of both wheels" if self.total else "per wheel"

    @property
    def words(self) -> str:
        """Unit in words: ``mm per wheel across the 254 mm rim``."""
        return f"{_NAMES[self.unit]} {self.whose}{f' {self.across}' if self.across else ''}"

    def value(self, *degrees: float) -> float:
        """Toe in this scale, toe-in +: of one wheel, or the sum of the wheels given."""
        if self.unit is ToeUnit.DEG:
            return sum(degrees)
        if self.unit is ToeUnit.MIN:
            return 60.0 * sum(degrees)
        length = (self.diameter or math.nan) * sum(math.sin(math.radians(angle)) for angle in degrees)
        return length if self.unit is ToeUnit.MM else length / MM_PER_INCH

    def _parts(self, degrees: tuple[float, ...]) -> tuple[str, str]:
        value = self.value(*degrees)
        number = f"{abs(value):.{_DECIMALS[self.unit]}f}"
        if float(number) == 0.0:
            return number, ""
        return number, "in" if value > 0 else "out"

    def cell(self, *degrees: float) -> str:
        """Number and direction for a table whose heading gives the unit: ``0.123 in``; ``-`` where there is none.

        In inches the direction is written ``toe-in`` and ``toe-out``, since "in" would read as the unit.
        """
        if not math.isfinite(self.value(*degrees)):
            return "-"
        number, word = self._parts(degrees)
        prefix = "toe-" if self.unit is ToeUnit.IN else ""
        width = len(prefix) + len("out")
        return f"{number} {f'{prefix}{word}' if word else '':<{width}}"

    def text(self, *degrees: float) -> str:
        """Number, direction and unit in full: ``0.12 mm toe-out per wheel across the 254 mm rim``."""
        if not math.isfinite(self.value(*degrees)):
            return "unknown"
        number, word = self._parts(degrees)
        pieces = [number, _NAMES[self.unit], f"toe-{word}" if word else "toe", self.whose, self.across]
        return " ".join(piece for piece in pieces if piece)
