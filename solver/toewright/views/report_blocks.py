"""Building blocks of a report: tables, pictures and sections, as plain text; the template makes the markup and escapes everything."""

from __future__ import annotations

import base64
import io
from collections.abc import Sequence
from dataclasses import dataclass
from typing import TYPE_CHECKING

import numpy as np

from toewright.kinematics.tables import ResultTable
from toewright.model.glossary import quantity
from toewright.views.style import styled, svg_for_page
from toewright.views.words import READ_AS, number

if TYPE_CHECKING:
    from matplotlib.figure import Figure

ROWS = 11
"""Rows of a table along a list of positions, about."""


@dataclass(frozen=True)
class Table:
    """A table: caption, headings, rows whose first cell is a heading.

    Attributes:
        words: numbers of the columns that hold words, flush left; all others hold numbers.
    """

    caption: str
    headings: Sequence[str]
    rows: Sequence[Sequence[str]]
    words: Sequence[int] = ()


@dataclass(frozen=True)
class Picture:
    """A picture: data URI, what it shows in words, caption."""

    uri: str
    alt: str
    caption: str


@dataclass(frozen=True)
class Section:
    """A section of the report, in this order: sentences, points of a list, pictures, tables.

    Attributes:
        headlines: what of it is said at the head of the report.
    """

    key: str
    title: str
    sentences: Sequence[str] = ()
    pictures: Sequence[Picture] = ()
    tables: Sequence[Table] = ()
    points: Sequence[str] = ()
    headlines: Sequence[str] = ()


def clean(text: str) -> str:
    """Text on one line without characters that can't be seen, which could turn the reading direction or hide something."""
    return " ".join("".join(c if c.isprintable() else " " for c in text).split())


def svg_picture(figure: Figure, alt: str, caption: str) -> Picture:
    """A figure as SVG within the page; it follows light and dark."""
    encoded = base64.b64encode(svg_for_page(figure).encode("utf-8")).decode("ascii")
    return Picture(f"data:image/svg+xml;base64,{encoded}", alt, caption)


def png_picture(figure: Figure, alt: str, caption: str) -> Picture:
    """A figure as pixels within the page, on white paper; for drawings whose colours mean something."""
    stream = io.BytesIO()
    with styled():
        figure.savefig(stream, format="png")
    encoded = base64.b64encode(stream.getvalue()).decode("ascii")
    return Picture(f"data:image/png;base64,{encoded}", alt, caption)


def heading(name: str) -> str:
    """Heading of a column: label, unit and sign in words."""
    entry = quantity(name)
    unit = READ_AS.get(name, (entry.unit, 1.0, 2))[0]
    per = "deg per wheel" if name.startswith(("toe_in", "bump_steer_left", "bump_steer_right")) else unit
    details = ", ".join(part for part in ("" if per == "-" else per, entry.sign) if part)
    return f"{entry.label} ({details})" if details else entry.label


def value_cell(name: str, value: float, decimals: int | None = None) -> str:
    """A value as people read it; toe and steer of an axle with three decimals."""
    entry = quantity(name)
    _, factor, usual = READ_AS.get(name, (entry.unit, 1.0, 3 if "steer" in name and entry.unit == "deg" else 2))
    signed = not entry.sign.startswith(("never negative", "90 best"))
    return number(value * factor, usual if decimals is None else decimals, sign=signed)


def result_table(
    caption: str, result: ResultTable, columns: Sequence[tuple[str, int | None]], where: np.ndarray
) -> Table:
    """Columns of a result (name, decimals) at the positions ``where``; a position that was not reached has its status."""
    rows = []
    for i in where.tolist():
        first, *others = columns
        cells = [value_cell(first[0], float(result[first[0]][i]), first[1])]
        if result.status[i] != 0:
            cells += [str(result.status_names[i]), *[""] * (len(others) - 1)]
        else:
            cells += [value_cell(name, float(result[name][i]), decimals) for name, decimals in others]
        rows.append(cells)
    return Table(caption, [heading(name) for name, _ in columns], rows)
