"""Tables of points as they come: any delimiter, decimal commas, headers, quotes, comments."""

from __future__ import annotations

import csv
import re
from collections.abc import Sequence
from dataclasses import dataclass
from statistics import median

import numpy as np

from toewright.core.types import FloatArray
from toewright.model.errors import InputError

_NUMBER = {
    "point": re.compile(r"[+-]?(\d+(\.\d*)?|\.\d+)([eE][+-]?\d+)?$"),
    "comma": re.compile(r"[+-]?(\d+(,\d+)?|,\d+)([eE][+-]?\d+)?$"),
}
_MAYBE_THOUSANDS = re.compile(r"[+-]?[1-9]\d{0,2},\d{3}$")
_DELIMITERS = (("tab", "\t"), ("semicolon", ";"), ("comma", ","), ("spaces", None))
_TOKEN = re.compile(r"\"([^\"]*)\"|'([^']*)'|(\S+)")
_HEADING = re.compile(
    r"(?:(?:position|pos|coordinate|coord)[\s_.-]*)?([xyz])(?:[\s_.-]*(?:position|pos|coordinate|coord))?"
    r"(?:\s*[\[(/_, ]\s*([^\s\])]+)\s*[\])]?)?"
)
_NAME_HEADINGS = ("point", "name", "hardpoint", "joint", "label", "description", "id")
_UNITS = {
    "mm": "mm", "millimetre": "mm", "millimetres": "mm", "millimeter": "mm", "millimeters": "mm",
    "m": "m", "metre": "m", "metres": "m", "meter": "m", "meters": "m",
    "in": "in", "inch": "in", "inches": "in", '"': "in",
}  # fmt: skip
_OTHER_UNITS = ("cm", "dm", "km", "ft", "feet", "foot", "yd", "thou", "mil", "um")
_COMMENTS = ("#", "//", "%")

LARGEST = 1e6
"""No coordinate of a car is larger, in any unit."""


@dataclass(frozen=True)
class PointTable:
    """What was read.

    Attributes:
        names: as written; where there is a column ``side``, its word in front.
        values: (n, 3) numbers as written, in the columns x, y, z.
        delimiter: "tab", "semicolon", "comma" or "spaces".
        decimal: "point" or "comma".
        header: the header's cells; empty where there is none.
        unit: the unit that the header states, "mm", "m" or "in"; None where it states none.
        unit_words: words that stand where a unit would, and are none of those three.
    """

    names: tuple[str, ...]
    values: FloatArray
    delimiter: str
    decimal: str
    header: tuple[str, ...]
    unit: str | None
    unit_words: tuple[str, ...] = ()


class _UnreadableError(InputError):
    """One way of reading a table failed; the way that came farthest is the one to complain about."""

    def __init__(self, sentence: str, line: int) -> None:
        super().__init__(sentence)
        self.line = line


@dataclass(frozen=True)
class _Columns:
    name: int
    xyz: tuple[int, int, int]
    side: int | None
    width: int | None
    units: tuple[str, ...] = ()

    @property
    def last(self) -> int:
        return max(self.name, *self.xyz, -1 if self.side is None else self.side)


_PLAIN = _Columns(0, (1, 2, 3), None, None)


def read_point_table(text: str, file: str) -> PointTable:
    """Rows of name, x, y, z from text; empty lines and lines that start with #, // or % do not count.

    Columns come from a header that names x, y and z (with or without units); without a header they are name, x, y, z.

    Args:
        text: the table.
        file: name for messages.

    Raises:
        InputError: if no delimiter gives every row a name and three numbers, or more than one reading is possible.
    """
    lines = [
        (number, line.replace("\u2212", "-").strip(" "))
        for number, line in enumerate(text.removeprefix("\ufeff").splitlines(), start=1)
        if line.strip() and not line.lstrip().startswith(_COMMENTS)
    ]
    if len(lines) < 2:
        raise InputError(f"{file}: has no rows of name, x, y, z; give a table with one point a line")
    readings: list[PointTable] = []
    complaints: list[tuple[int, int, str]] = []
    for word, delimiter in _DELIMITERS:
        rows = [(number, _split(line, delimiter)) for number, line in lines]
        for decimal in ("point", "comma"):
            try:
                reading = _read(rows, word, decimal, file)
            except _UnreadableError as error:
                complaints.append((min(4, int(median(len(cells) for _, cells in rows))), error.line, str(error)))
                continue
            if not any(_same(reading, other) for other in readings):
                readings.append(reading)
    if not readings:
        cells, _, sentence = max(complaints, key=lambda complaint: complaint[:2])
        if cells < 3:
            sentence = (
                f"{file}: line {lines[0][0]} is not a name and three numbers; "
                "separate the cells by comma, semicolon, tab or spaces, and remove title lines above the header"
            )
        raise InputError(sentence)
    if len(readings) > 1:
        first, second = readings[:2]
        raise InputError(
            f"{file}: can be read with {first.delimiter} between cells and decimal {first.decimal}, or with {second.delimiter} "
            f"and decimal {second.decimal}; save it with semicolons between the cells"
        )
    return readings[0]


def _split(line: str, delimiter: str | None) -> list[str]:
    if delimiter is None:
        return [next(part for part in match.groups() if part is not None).strip() for match in _TOKEN.finditer(line)]
    try:
        cells = next(csv.reader([line], delimiter=delimiter, skipinitialspace=True))
    except csv.Error:
        return []
    cells = [cell.strip().strip("'").strip() for cell in cells]
    while cells and not cells[-1]:
        cells.pop()
    return cells


def _same(one: PointTable, other: PointTable) -> bool:
    return one.names == other.names and np.array_equal(one.values, other.values)


def _is_number(cell: str, decimal: str) -> bool:
    return bool(_NUMBER[decimal].match(cell))


def _header_columns(header: Sequence[str], file: str, line: int) -> _Columns | None:
    """Columns of a header that names x, y and z; None where the line is no such header."""
    found: dict[str, int] = {}
    units: list[str] = []
    for index, cell in enumerate(header):
        match = _HEADING.fullmatch(cell.lower())
        if match is None:
            continue
        letter, unit = match.groups()
        if letter in found:
            raise _UnreadableError(
                f"{file}: line {line}: the header has two columns {letter}; leave one set of x, y, z in the table", line
            )
        found[letter] = index
        if unit:
            units.append(unit)
    if len(found) != 3:
        return None
    words = [cell.strip().lower() for cell in header]
    side = words.index("side") if "side" in words else None
    others = [i for i in range(len(header)) if i not in found.values() and i != side]
    named = [words.index(word) for word in _NAME_HEADINGS if word in words]
    if not others or (len(others) > 1 and not named):
        raise _UnreadableError(
            f"{file}: line {line}: the header does not say which column holds the names; call it 'point'", line
        )
    return _Columns(
        name=named[0] if named else others[0],
        xyz=(found["x"], found["y"], found["z"]),
        side=side,
        width=len(header),
        units=tuple(units),
    )


def _units_row(cells: Sequence[str], columns: _Columns) -> tuple[str, ...] | None:
    """Units in a line of their own under the header."""
    if len(cells) <= max(columns.xyz):
        return None
    words = [cells[i].strip("[]() ").lower() for i in columns.xyz]
    return tuple(words) if all(word in _UNITS or word in _OTHER_UNITS for word in words) else None


def _read(rows: Sequence[tuple[int, list[str]]], word: str, decimal: str, file: str) -> PointTable:
    number, first = rows[0]
    header: Sequence[str] = ()
    columns = _header_columns(first, file, number)
    if columns is not None:
        header, rows = first, rows[1:]
    elif len(first) >= 4 and not any(_is_number(cell, decimal) for cell in first[1:]):
        raise _UnreadableError(
            f"{file}: line {number}: the header names no columns x, y and z; name them, or leave the header out", number
        )
    else:
        columns = _PLAIN
    units = columns.units
    if rows and header and (stated := _units_row(rows[0][1], columns)) is not None:
        units, rows = units + stated, rows[1:]
    names: list[str] = []
    values: list[list[float]] = []
    written: list[str] = []
    where: dict[str, int] = {}
    for number, cells in rows:
        label, numbers = _row(cells, columns, word, decimal, file, number)
        if label in where:
            raise _UnreadableError(
                f"{file}: line {number}: {label!r} comes a second time (first in line {where[label]}); remove one, "
                "or write the side in the names",
                number,
            )
        where[label] = number
        names.append(label)
        written += numbers
        values.append([float(cell.replace(",", ".")) for cell in numbers])
        if not max(abs(v) for v in values[-1]) <= LARGEST:
            raise _UnreadableError(
                f"{file}: line {number}: a coordinate of {label!r} is larger than any car's; correct it", number
            )
    if not names:
        raise _UnreadableError(f"{file}: has a header and no points; add rows of name, x, y, z", number)
    with_comma = [cell for cell in written if "," in cell]
    if with_comma and len(with_comma) < len(written) and all(_MAYBE_THOUSANDS.match(cell) for cell in with_comma):
        raise _UnreadableError(
            f"{file}: {with_comma[0]!r} may have a decimal comma or be thousands; write every number in the same way",
            number,
        )
    known = {_UNITS[unit] for unit in units if unit in _UNITS}
    if len(known) > 1:
        raise _UnreadableError(
            f"{file}: the header states more than one unit ({', '.join(sorted(known))}); convert all columns to one",
            number,
        )
    return PointTable(
        names=tuple(names),
        values=np.array(values),
        delimiter=word,
        decimal=decimal,
        header=tuple(header),
        unit=known.pop() if known else None,
        unit_words=tuple(dict.fromkeys(unit for unit in units if unit not in _UNITS)),
    )


def _row(cells: list[str], columns: _Columns, word: str, decimal: str, file: str, line: int) -> tuple[str, list[str]]:
    """Name and the three numbers as written."""
    place = f"{file}: line {line}"
    most = 4 if columns.width is None else columns.width
    if word == "spaces" and len(cells) > most == 4 and columns.name == 0 and columns.xyz == (1, 2, 3):
        if any(_is_number(cell, decimal) for cell in cells[1:-3]):
            raise _UnreadableError(
                f"{place} has more than three numbers; write name, x, y, z, the name in quotes", line
            )
        cells = [" ".join(cells[:-3]), *cells[-3:]]
    if len(cells) <= columns.last or len(cells) > most:
        wanted = "name, x, y, z are wanted" if columns.width is None else f"the header has {most}"
        titles = ", and remove title lines above the header" if columns.width is None else ""
        raise _UnreadableError(
            f"{place} has {len(cells)} cells ({word} between them) where {wanted}; correct it{titles}", line
        )
    label, numbers = cells[columns.name], [cells[i] for i in columns.xyz]
    bad = next((cell for cell in numbers if not _is_number(cell, decimal)), None)
    if bad is not None:
        raise _UnreadableError(f"{place}: {bad[:40]!r} is not a number; write name, x, y, z", line)
    if not label or _is_number(label, decimal):
        raise _UnreadableError(f"{place}: {label!r} is no name; write name, x, y, z", line)
    return (f"{cells[columns.side]} {label}" if columns.side is not None else label), numbers


def refuse_other_units(table: PointTable, file: str) -> None:
    """Refuse a header that states a unit which is none of ours.

    Raises:
        InputError: for such a unit.
    """
    for word in table.unit_words:
        if word in _OTHER_UNITS:
            raise InputError(f"{file}: the header says {word}; only mm, m and in are read: convert the numbers")
