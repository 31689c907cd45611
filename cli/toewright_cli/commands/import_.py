"""``toewright import``: points from CAD, spreadsheets and measuring arms."""

from __future__ import annotations

import math
from enum import StrEnum
from pathlib import Path
from typing import TYPE_CHECKING, Annotated

import typer

from toewright_cli.commands.new import Starter
from toewright_cli.console import print_table, say
from toewright_cli.options import Force
from toewright_cli.outputs import check_out

if TYPE_CHECKING:
    from toewright.core.types import FloatArray
    from toewright.model.importing import Reading


class Unit(StrEnum):
    """Length units of tables."""

    MM = "mm"
    M = "m"
    IN = "in"


class OneSide(StrEnum):
    """One corner."""

    LEFT = "left"
    RIGHT = "right"


class AxleChoice(StrEnum):
    """Which axle."""

    FRONT = "front"
    REAR = "rear"


def import_points(
    points: Annotated[
        Path, typer.Argument(metavar="POINTS.csv", help="Table of points: name, x, y, z.", show_default=False)
    ],
    out_file: Annotated[
        Path, typer.Option("--out", "-o", metavar="FILE", help="Hardpoint file to write (.toml).", show_default=False)
    ],
    loaded_radius: Annotated[
        float, typer.Option("--loaded-radius", metavar="MM", help="Wheel centre to road, mm.", show_default=False)
    ],
    unit: Annotated[Unit | None, typer.Option("--unit", help="Unit of the table; found when left out.")] = None,
    axes: Annotated[
        str | None,
        typer.Option(
            "--axes",
            metavar="MAP",
            help="Which column gives the car's x (forward), y (left) and z (up): --axes=-y,x,z means x = minus column y, "
            "y = column x, z = column z. Found from the names when left out.",
        ),
    ] = None,
    origin: Annotated[
        str | None,
        typer.Option(
            "--origin",
            metavar="X,Y,Z",
            help="Place of the car's origin (road, centre plane) in the table's own columns and unit. Default 0,0,0.",
        ),
    ] = None,
    side: Annotated[OneSide | None, typer.Option("--side", help="Which corner the table is.")] = None,
    right: Annotated[
        Path | None,
        typer.Option(
            "--right", metavar="POINTS.csv", help="A second table, of the right corner; the first is the left."
        ),
    ] = None,
    names: Annotated[
        list[str] | None,
        typer.Option("--names", metavar="THEIRS=OURS", help="Point name in the table = our point name; repeat it."),
    ] = None,
    kind: Annotated[
        Starter | None, typer.Option("--type", help="Corner type; found from the names when left out.")
    ] = None,
    axle: Annotated[AxleChoice, typer.Option("--axle", help="Which axle.")] = AxleChoice.FRONT,
    title: Annotated[str, typer.Option("--title", help="Title of the file.")] = "",
    wheelbase: Annotated[
        float | None, typer.Option("--wheelbase", metavar="MM", help="Distance to the other axle, mm.")
    ] = None,
    stroke: Annotated[
        float | None, typer.Option("--stroke", metavar="MM", help="Rack stroke each way, mm; no rack when left out.")
    ] = None,
    force: Force = False,
) -> None:
    """Turn a table of points with any axes, unit, origin and names into a hardpoint file; ask rather than guess.

    Example: toewright import arm.csv -o car.toml --loaded-radius 228 --side left --stroke 30
    """
    from toewright.model.errors import InputError
    from toewright.model.files import loads, read_text
    from toewright.model.import_report import hardpoint_text
    from toewright.model.importing import conclude, parse_axes, parse_names
    from toewright.model.pointtable import read_point_table
    from toewright.model.writing import write_text

    check_out(out_file, force, (".toml",))
    for option, value in (("--loaded-radius", loaded_radius), ("--wheelbase", wheelbase), ("--stroke", stroke)):
        if value is not None and not (math.isfinite(value) and value > 0.0):
            raise InputError(f"{option} {value:g}: must be a length above 0 mm")
    if right is not None and side is OneSide.RIGHT:
        raise InputError("--right: names a second table, so the first is the left corner; leave --side right out")
    mapped = parse_axes(axes) if axes is not None else None
    start = _triple(origin) if origin is not None else None
    theirs = parse_names(names or [])

    def read(path: Path, which: OneSide | None) -> Reading:
        return conclude(
            read_point_table(read_text(path), str(path)),
            str(path),
            loaded_radius=loaded_radius,
            unit=unit.value if unit else None,
            axes=mapped,
            origin=start,
            side=which.value if which else None,
            names=theirs,
            kind=kind.value if kind else None,
        )

    first = read(points, OneSide.LEFT if right is not None else side)
    readings = [first] if right is None else [first, read(right, OneSide.RIGHT)]
    left = first.corner if first.corner.side == "left" else first.corner.mirrored()
    text = hardpoint_text(
        left,
        readings[1].corner if right is not None else None,
        title=title or points.stem,
        source=" and ".join(p.name for p in (points, right) if p is not None),
        loaded_radius=loaded_radius,
        axle=axle.value,
        wheelbase=wheelbase,
        stroke=stroke,
    )
    checked = loads(text)
    write_text(out_file, text, force=force)
    for reading in readings:
        _show(reading, loaded_radius)
    if right is None and first.corner.side == "right":
        say("The right corner was read; the file holds its mirror image as [left] and no [right].")
    for remark in checked.remarks:
        say(f"remark: {remark}")
    say(f"Written: {out_file}. Compare the points with the drawing, then: toewright check {out_file}")


def _triple(text: str) -> FloatArray:
    import numpy as np

    from toewright.model.errors import InputError

    try:
        values = np.array([float(part) for part in text.split(",")])
    except ValueError:
        values = np.empty(0)
    if values.shape != (3,) or not np.all(np.isfinite(values)):
        raise InputError(
            f"--origin {text}: is not three numbers; write X,Y,Z in the table's unit, such as --origin=0,0,-310"
        )
    return values


def _show(reading: Reading, loaded_radius: float) -> None:
    from toewright.model.import_report import sanity_list

    given = "; ".join(reading.concluded)
    say(
        f"{reading.corner.side} corner, {reading.corner.kind}: axes {reading.axes.text}, unit {reading.unit}, "
        f"origin {', '.join(f'{v:g}' for v in reading.origin)} in the table."
    )
    say(f"Concluded: {given}." if given else "Nothing had to be concluded.")
    rows = [
        [name, theirs, *(f"{v:g}" for v in raw), *(f"{v:+.2f}" for v in reading.corner.points[name])]
        for name, (theirs, raw) in reading.sources.items()
    ]
    headings = [
        "point",
        "in the table",
        *(f"{c} ({reading.unit})" for c in "xyz"),
        "x forward (mm)",
        "y left (mm)",
        "z up (mm)",
    ]
    print_table(headings, rows, right=range(2, 8))
    if reading.unused:
        say(f"Not taken from the table: {', '.join(reading.unused)}.")
    checks = sanity_list(reading, loaded_radius)
    print_table(["sanity list", "found", ""], [[c.what, c.found, "usual" if c.usual else "ODD: check"] for c in checks])
