"""Tables of points as they come: any delimiter, decimal commas, headers, comments."""

from __future__ import annotations

import re
from dataclasses import dataclass

import numpy as np

from toewright.core.types import FloatArray
from toewright.model.errors import InputError

_NUMBER = re.compile(r"[+-]?(\d+([.,]\d*)?|[.,]\d+)([eE][+-]?\d+)?$")
_DELIMITERS = (("tab", "\t"), ("semicolon", ";"), ("comma", ","), ("spaces", None))
_UNITS = {"mm": "mm", "m": "m", "in": "in", "inch": "in", "inches": "in", '"': "in", "millimetres": "mm", "metres": "m"}


@dataclass(frozen=True)
class PointTable:
    """What was read.

    Attributes:
        names: as written.
        values: (n, 3) numbers as written, in the columns x, y, z.
        delimiter: "tab", "semicolon", "comma" or "spaces".
        decimal: "point" or "comma".
        header: the header's cells; empty where there is none.
        unit: the unit that the header states, or None.
    """

    names: tuple[str, ...]
    values: FloatArray
    delimiter: str
    decimal: str
    header: tuple[str, ...]
    unit: str | None


def _split(line: str, delimiter: str | None) -> list[str]:
    return [cell.strip().strip('"').strip("'").strip() for cell in line.split(delimiter)]


def _is_number(cell: str, decimal: str) -> bool:
    wrong = "." if decimal == "comma" else ","
    return bool(_NUMBER.match(cell)) and wrong not in cell


def _to_float(cell: str) -> float:
    return float(cell.replace(",", "."))


def _header_columns(header: list[str]) -> tuple[int, list[int], str | None] | None:
    """Name column, x y z columns and unit of a header that names x, y and z."""
    found: dict[str, int] = {}
    units: set[str] = set()
    for index, cell in enumerate(header):
        match = re.match(r"^([xyz])\s*[\[(/]?\s*([a-z\"]*)\s*[\])]?$", cell.strip().lower())
        if match and match.group(1) not in found:
            found[match.group(1)] = index
            if match.group(2):
                units.add(match.group(2))
    if len(found) != 3:
        return None
    columns = [found[letter] for letter in "xyz"]
    others = [i for i in range(len(header)) if i not in columns]
    if not others:
        return None
    name = next(
        (i for i in others if header[i].strip().lower() in ("point", "name", "hardpoint", "joint", "label", "id")),
        others[0],
    )
    known = {_UNITS.get(unit) for unit in units}
    return name, columns, known.pop() if len(known) == 1 else None


def read_point_table(text: str, file: str) -> PointTable:
    """Rows of name, x, y, z from text; lines that start with # or // and empty lines do not count.

    Raises:
        InputError: if no delimiter gives every row a name and three numbers, or more than one reading is possible.
    """
    lines = [line.rstrip() for line in text.splitlines()]
    numbered = [
        (i, line) for i, line in enumerate(lines, start=1) if line.strip() and not line.lstrip().startswith(("#", "//"))
    ]
    if len(numbered) < 2:
        raise InputError(f"{file}: has no rows of name, x, y, z; give a table with one point a line")
    readings = []
    complaint = ""
    for word, delimiter in _DELIMITERS:
        for decimal in ("point", "comma"):
            if word == "comma" and decimal == "comma":
                continue
            try:
                readings.append(_read(numbered, word, delimiter, decimal, file))
            except InputError as error:
                cells = len(_split(numbered[-1][1], delimiter))
                if cells >= 4 and not complaint:
                    complaint = str(error)
    distinct = [r for i, r in enumerate(readings) if not any(_same(r, other) for other in readings[:i])]
    if not distinct:
        raise InputError(
            complaint
            or f"{file}: line {numbered[0][0]} is not a name and three numbers; separate the cells by comma, semicolon, tab or spaces"
        )
    if len(distinct) > 1:
        raise InputError(
            f"{file}: can be read with {distinct[0].delimiter} or {distinct[1].delimiter} between cells; use one kind only"
        )
    return distinct[0]


def _same(one: PointTable, other: PointTable) -> bool:
    return one.names == other.names and np.array_equal(one.values, other.values)


def _read(numbered: list[tuple[int, str]], word: str, delimiter: str | None, decimal: str, file: str) -> PointTable:
    rows = [(number, _split(line, delimiter)) for number, line in numbered]
    name, columns, unit = 0, [1, 2, 3], None
    header: list[str] = []
    first = rows[0][1]
    described = _header_columns(first)
    if described is not None:
        name, columns, unit = described
        header, rows = first, rows[1:]
    elif len(first) >= 4 and not any(_is_number(cell, decimal) for cell in first[1:4]):
        raise InputError(
            f"{file}: line {rows[0][0]}: the header names no columns x, y and z; name them, or leave the header out"
        )
    names: list[str] = []
    values: list[list[float]] = []
    where: dict[str, int] = {}
    for number, cells in rows:
        while cells and not cells[-1]:
            cells.pop()
        if len(cells) <= max(name, *columns) or (described is None and len(cells) > 4):
            raise InputError(
                f"{file}: line {number} has {len(cells)} cells ({word} between them) where name, x, y, z are wanted; correct it"
            )
        numbers = [cells[i] for i in columns]
        bad = next((cell for cell in numbers if not _is_number(cell, decimal)), None)
        if bad is not None or _is_number(cells[name], decimal):
            raise InputError(
                f"{file}: line {number}: {bad if bad is not None else cells[name]!r} is out of place; write name, x, y, z"
            )
        label = cells[name]
        if label in where:
            raise InputError(
                f"{file}: line {number}: {label} comes a second time (first in line {where[label]}); remove one"
            )
        where[label] = number
        names.append(label)
        values.append([_to_float(cell) for cell in numbers])
    if not names:
        raise InputError(f"{file}: has a header and no points; add rows of name, x, y, z")
    return PointTable(tuple(names), np.array(values), word, decimal, tuple(header), unit)
