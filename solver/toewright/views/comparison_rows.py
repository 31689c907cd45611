"""A comparison in words and cells, the same on the terminal and in reports."""

from __future__ import annotations

import math
from collections.abc import Sequence
from typing import Any

from toewright.model.glossary import quantity
from toewright.studies.comparison import Comparison, MovedPoint, Row, largest_change
from toewright.views.words import figure, number

SIDE_BY_SIDE = 3
"""Files whose values all have a column; of more only the first has, and the changes of the others."""


def sheet_headings(count: int) -> list[str]:
    """Headings of rows of figures: the figure, values, changes from A, unit and sign."""
    letters = "ABCDEF"[:count]
    shown = letters if count <= SIDE_BY_SIDE else letters[:1]
    return ["", *shown, *(f"{letter} - A" for letter in letters[1:]), "unit, sign"]


def row_cells(row: Row) -> list[str]:
    """Cells of a figure under ``sheet_headings``."""
    entry = quantity(row.name)
    values = [math.nan if value is None else float(value) for value in row.values]
    shown = values if len(values) <= SIDE_BY_SIDE else values[:1]
    _, unit, sign = figure(row.name, values[0])
    per = " per wheel" if row.name in ("toe_in", "bump_steer_rate") else ""
    changes = [_change(row.name, value - values[0]) for value in values[1:]]
    words = ", ".join(part for part in ("" if unit == "-" else f"{unit}{per}", sign) if part)
    return [entry.label, *(figure(row.name, value)[0] for value in shown), *changes, words]


def _change(name: str, value: float) -> str:
    """A change as people read it: with its sign even where the quantity itself has none."""
    text = figure(name, value)[0]
    return text if value <= 0.0 or text.startswith(("+", "-")) or float(text) == 0.0 else f"+{text}"


def point_rows(moved: Sequence[MovedPoint]) -> list[list[str]]:
    """Cells of moved hardpoints: side, point, shift forward, left and up, distance; mm."""
    return [
        [m.side, m.point, *(number(float(v), 2) for v in m.shift), number(m.distance, 2, sign=False)] for m in moved
    ]


def setting_rows(settings: Sequence[Row]) -> list[list[str]]:
    """Cells of settings: name, a value for each file, unit and sign."""
    return [[row.name, *(_setting(value) for value in row.values), row.unit] for row in settings]


def _setting(value: Any) -> str:
    if value is None:
        return "-"
    return f"{value:g}" if isinstance(value, int | float) else str(value)


def change_sentences(compared: Comparison) -> list[str]:
    """Where bump steer changes most, of each file after the first."""
    found = []
    for k in range(1, len(compared.axles)):
        change = largest_change(compared, k)
        letter = "ABCDEF"[k]
        if change is None:
            found.append(f"Bump steer of {letter} can't be compared: no position is reached in both files.")
            continue
        side, rack, travel, amount = change
        if abs(amount) < 5e-7:
            found.append(f"Bump steer of {letter} is A's over the whole map.")
            continue
        direction = "in" if amount > 0.0 else "out"
        found.append(
            f"Largest change of bump steer from A to {letter}: {abs(amount):.3f} deg per wheel towards toe-{direction}, {side} wheel at "
            f"rack {number(rack, 1)} mm, wheel travel {number(travel, 1)} mm."
        )
    return found
