"""Plain tables of points: columns point, x, y, z; mm, ISO 8855 axes. ``toewright import`` reads them, and tables of any other shape."""

from __future__ import annotations

import csv
import io
from pathlib import Path

from toewright.core.types import FloatArray
from toewright.model.axle import POINT_NAMES, Axle, Side
from toewright.model.errors import InputError
from toewright.model.files import read_text
from toewright.model.import_names import match_names
from toewright.model.pointtable import read_point_table, refuse_other_units

HEADER = ("point", "x", "y", "z")


def points_to_csv(axle: Axle, side: str = "both") -> str:
    """An axle's points as CSV text, full precision.

    Args:
        axle: the axle.
        side: "left" or "right" for the points of one corner; "both" for those of both, named ``left wheel_centre`` and so on.

    Raises:
        ValueError: if ``side`` is none of these.
    """
    stream = io.StringIO()
    writer = csv.writer(stream, lineterminator="\n")
    writer.writerow(HEADER)
    for which in ("left", "right") if side == "both" else (side,):
        corner = axle.corner(which)
        for name in POINT_NAMES[corner.kind]:
            label = f"{which} {name}" if side == "both" else name
            writer.writerow([label, *(repr(float(v)) for v in corner.points[name])])
    return stream.getvalue()


def points_from_csv(path: str | Path, side: Side | None = None) -> dict[tuple[str, str], FloatArray]:
    """Points of a table as ``points_to_csv`` writes it, ready for ``Axle.with_points`` and ``set_points``.

    Args:
        path: CSV file.
        side: the corner whose points these are; None where the names say it.

    Returns:
        {(side, point): (3,) mm}.

    Raises:
        InputError: if the file can't be read or is no table of one whole corner or two, in mm, whose sides are known.
    """
    place = Path(path)
    table = read_point_table(read_text(place), str(place))
    refuse_other_units(table, str(place))
    if table.unit not in (None, "mm"):
        raise InputError(f"{place}: the header says {table.unit} where mm are wanted; use `toewright import` for it")
    matched = match_names(table.names, {}, None, side, str(place))
    if matched.unused:
        raise InputError(
            f"{place}: {table.names[matched.unused[0]]!r} is none of the points of a {matched.kind} corner; correct or remove the row"
        )
    found: dict[tuple[str, str], FloatArray] = {}
    for which, rows in matched.rows.items():
        if which is None:
            raise InputError(
                f"{place}: does not say which side its points are on; give the side, or write it in the names"
            )
        found.update({(which, name): table.values[row].copy() for name, row in rows.items()})
    return found
