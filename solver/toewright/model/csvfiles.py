"""Plain tables of points: columns point, x, y, z."""

from __future__ import annotations

import csv
import io
from pathlib import Path

import numpy as np

from toewright.core.types import FloatArray
from toewright.model.axle import POINT_NAMES, Axle
from toewright.model.errors import InputError
from toewright.model.files import read_text


def points_to_csv(axle: Axle, side: str = "left") -> str:
    """One corner's points as CSV text: point, x, y, z in mm, ISO 8855 axes, full precision."""
    corner = axle.corner(side)
    stream = io.StringIO()
    writer = csv.writer(stream, lineterminator="\n")
    writer.writerow(["point", "x", "y", "z"])
    for name in POINT_NAMES[corner.kind]:
        writer.writerow([name, *(repr(float(v)) for v in corner.points[name])])
    return stream.getvalue()


def points_from_csv(path: str | Path) -> dict[str, FloatArray]:
    """Points of a table as ``points_to_csv`` writes it: name to (3,) mm.

    Raises:
        InputError: if the file can't be read, or a row is not a name and three finite numbers, or a name comes twice.
    """
    place = Path(path)
    rows = list(csv.reader(io.StringIO(read_text(place))))
    if not rows or [cell.strip().lower() for cell in rows[0]] != ["point", "x", "y", "z"]:
        raise InputError(f"{place}: line 1 must be 'point,x,y,z'; for a table of another shape use `toewright import`")
    points: dict[str, FloatArray] = {}
    for number, row in enumerate(rows[1:], start=2):
        if not any(cell.strip() for cell in row):
            continue
        try:
            name, values = row[0].strip(), np.array([float(cell) for cell in row[1:]])
        except ValueError:
            values = np.empty(0)
            name = row[0].strip()
        if values.shape != (3,) or not np.all(np.isfinite(values)) or not name:
            raise InputError(
                f"{place}: line {number} is not a name and three numbers: {','.join(row)[:60]!r}; correct it"
            )
        if name in points:
            raise InputError(f"{place}: line {number}: {name} comes a second time; remove one")
        points[name] = values
    return points
