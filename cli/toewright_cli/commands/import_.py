"""``toewright import``: points from CAD, spreadsheets and measuring arms."""

from __future__ import annotations

import math
from enum import StrEnum
from pathlib import Path
from typing import TYPE_CHECKING, Annotated

import typer

from toewright_cli.commands.new import Starter
from toewright_cli.console import print_remarks, print_table, say
from toewright_cli.options import Force, OneSide

if TYPE_CHECKING:
    from collections.abc import Mapping, Sequence

    from toewright.core.types import FloatArray
    from toewright.model.axle import AxleEnd
    from toewright.model.importing import Origin, Reading


class Unit(StrEnum):
    """Length units of tables."""

    MM = "mm"
    M = "m"
    IN = "in"


class AxleChoice(StrEnum):
    """Which axle."""

    FRONT = "front"
    REAR = "rear"


def import_points(
    points: Annotated[
        Path,
        typer.Argument(
            metavar="POINTS.csv",
            help="Table of points: name, x, y, z; cells parted by comma, semicolon, tab or spaces, decimal point or comma, with or "
            "without a header.",
            show_default=False,
        ),
    ],
    out_file: Annotated[
        Path, typer.Option("--out", "-o", metavar="FILE", help="Hardpoint file to write (.toml).", show_default=False)
    ],
    loaded_radius: Annotated[
        float,
        typer.Option("--loaded-radius", metavar="MM", help="Wheel centre to road at rest, mm.", show_default=False),
    ],
    unit: Annotated[
        Unit | None, typer.Option("--unit", help="Unit of the table. Found from header or size when left out.")
    ] = None,
    axes: Annotated[
        str | None,
        typer.Option(
            "--axes",
            metavar="MAP",
            help="How the car's x (forward), y (left), z (up) come from the table's columns: --axes=-y,x,z means car x = minus "
            "column y, car y = column x, car z = column z; sae-j670 means x,-y,-z. Found from the point names when left out.",
        ),
    ] = None,
    origin: Annotated[
        str | None,
        typer.Option(
            "--origin",
            metavar="X,Y,Z",
            help="Where the car's origin (road, centre plane) is, in the table's own columns and unit: subtracted before the axes "
            "are turned. Or under-wheel: x = 0 at the wheel centre, z = 0 one radius below it. Default 0,0,0.",
        ),
    ] = None,
    side: Annotated[
        OneSide | None, typer.Option("--side", help="Which corner to read. Both when the names say left and right.")
    ] = None,
    right: Annotated[
        Path | None,
        typer.Option(
            "--right",
            metavar="POINTS.csv",
            help="A second table, of the right corner; POINTS.csv is then the left one.",
        ),
    ] = None,
    names: Annotated[
        list[str] | None,
        typer.Option(
            "--names",
            metavar="THEIRS=OURS",
            help="Point name in the table = our name; repeat it, or give a .csv or .toml file of such pairs.",
        ),
    ] = None,
    kind: Annotated[
        Starter | None, typer.Option("--type", help="Corner type. Found from the names when left out.")
    ] = None,
    axle: Annotated[
        AxleChoice | None, typer.Option("--axle", help="Which axle. As the names say (FL, RR, ...), else front.")
    ] = None,
    title: Annotated[str, typer.Option("--title", help="Title of the file. The table's name when left out.")] = "",
    wheelbase: Annotated[
        float | None, typer.Option("--wheelbase", metavar="MM", help="Distance to the other axle, mm.")
    ] = None,
    stroke: Annotated[
        float | None,
        typer.Option("--stroke", metavar="MM", help="Rack stroke each way, mm. Toe links, no rack, when left out."),
    ] = None,
    toe_in: Annotated[
        float, typer.Option("--toe-in", metavar="DEG", help="Static toe of each wheel, deg, toe-in +.")
    ] = 0.0,
    camber: Annotated[float, typer.Option("--camber", metavar="DEG", help="Static camber, deg, top outboard +.")] = 0.0,
    force: Force = False,
) -> None:
    """Turn a table of points with any axes, unit, origin and names into a hardpoint file; ask rather than guess.

    What is not given is concluded only where exactly one right-handed reading fits the names; otherwise the readings that fit are
    listed as options to choose from, and nothing is written.

    Example: toewright import arm.csv -o car.toml --loaded-radius 228 --side left --stroke 30
    """
    from toewright.model.axis_maps import parse_axes
    from toewright.model.axle import Axle, Rack, Setup, Vehicle, Wheel
    from toewright.model.editing import dumps
    from toewright.model.errors import InputError
    from toewright.model.files import loads, read_text
    from toewright.model.import_names import parse_names
    from toewright.model.importing import UNDER_WHEEL, conclude
    from toewright.model.pointtable import read_point_table
    from toewright.model.writing import write_text
    from toewright_cli.outputs import check_out

    check_out(out_file, force, (".toml",))
    for option, value in (("--loaded-radius", loaded_radius), ("--wheelbase", wheelbase), ("--stroke", stroke)):
        if value is not None and not (math.isfinite(value) and value > 0.0):
            raise InputError(f"{option} {value:g}: must be a length above 0 mm")
    if right is not None and side is OneSide.RIGHT:
        raise InputError(
            "--side right: POINTS.csv is the left corner when --right names a second table; leave --side out"
        )
    theirs = parse_names(names or [])
    mapped = parse_axes(axes) if axes is not None else None
    start = _origin(origin)

    def read(path: Path, which: OneSide | None) -> tuple[Reading, ...]:
        table = read_point_table(read_text(path), str(path))
        return conclude(
            table,
            str(path),
            loaded_radius=loaded_radius,
            unit=unit.value if unit else None,
            axes=mapped,
            origin=start,
            side=which.value if which else None,
            names=theirs,
            kind=kind.value if kind else None,
        )

    readings = read(points, OneSide.LEFT if right is not None else side)
    if right is not None:
        readings += read(right, OneSide.RIGHT)
    end = _axle_end(readings, axle, points)
    first = readings[0].corner
    left = first if first.side == "left" else first.mirrored()
    source = " and ".join(path.name for path in (points, right) if path is not None)
    text = dumps(
        Axle(
            title=title or points.stem,
            vehicle=Vehicle(axle=end, wheelbase=wheelbase),
            wheel=Wheel(loaded_radius),
            setup=Setup(toe_in, camber),
            rack=Rack(_to_the_left(), stroke) if stroke is not None else None,
            left=left,
            right=readings[1].corner if len(readings) > 1 else left.mirrored(),
            symmetric=len(readings) == 1,
        ),
        heading=(
            f"Imported by toewright from {source}: check the points against the drawing before you rely on them.",
            "x forward, y left, z up.",
        ),
        hints=True,
    )
    checked = loads(text, file=str(points))
    write_text(out_file, text, force=force)
    _show(readings, theirs, loaded_radius)
    if len(readings) == 1 and first.side == "right":
        say("The right corner was read; the file holds its mirror image as [left], and no [right].")
    if axle is None and readings[0].axle is not None:
        say(f"Concluded: {end} axle (from the names).")
    if isinstance(start, str):
        say(
            f"Heights by --origin {UNDER_WHEEL}: the road was put {loaded_radius:g} mm below the wheel centre, so the points are "
            "taken to be at ride height; if they were taken at full droop, every figure of this file is wrong."
        )
    if stroke is None:
        say("No --stroke given, so the file has no [rack]: the tie rod is a toe link.")
    print_remarks(checked.remarks)
    say(f"Written: {out_file}. Compare the points with the drawing, then: toewright check {out_file}")


def _axle_end(readings: Sequence[Reading], given: AxleChoice | None, file: Path) -> AxleEnd:
    """Which axle: as given, else as the names say, else front.

    Raises:
        InputError: where the names say another one than was given.
    """
    from toewright.model.errors import InputError

    stated = {reading.axle for reading in readings} - {None}
    if len(stated) > 1 or (given is not None and stated and given.value not in stated):
        words = " and ".join(sorted(str(word) for word in stated))
        asked = f"--axle {given.value}: but the" if given is not None else "the"
        raise InputError(f"{file}: {asked} names say {words}; correct one of them")
    if given is not None:
        return "front" if given is AxleChoice.FRONT else "rear"
    return next((word for word in stated if word is not None), "front")


def _to_the_left() -> FloatArray:
    import numpy as np

    return np.array([0.0, 1.0, 0.0])


def _origin(text: str | None) -> Origin:
    import numpy as np

    from toewright.model.errors import InputError
    from toewright.model.importing import UNDER_WHEEL

    if text is None:
        return None
    if text.strip().lower() == UNDER_WHEEL:
        return UNDER_WHEEL
    try:
        values = np.array([float(part) for part in text.split(",")])
    except ValueError:
        values = np.empty(0)
    if values.shape != (3,) or not np.all(np.isfinite(values)):
        raise InputError(
            f"--origin {text}: is not three numbers; write X,Y,Z in the table's own columns and unit, such as --origin=0,0,-310, "
            f"or {UNDER_WHEEL}"
        )
    return values


def _show(readings: Sequence[Reading], names: Mapping[str, str], loaded_radius: float) -> None:
    from toewright.model.import_names import alike
    from toewright.model.import_report import sanity_list
    from toewright.views.words import number

    for place, reading in enumerate(readings):
        if place == 0 or reading.axes != readings[0].axes or reading.concluded != readings[0].concluded:
            start = ", ".join(f"{value:g}" for value in reading.origin)
            say(f"Axes {reading.axes.text}, unit {reading.unit}, the car's origin at {start} in the table.")
            found = "; ".join(reading.concluded)
            say(f"Concluded: {found}." if found else "Nothing had to be concluded: all was given.")
        say(f"\n{reading.corner.side} corner, {reading.corner.kind}", style="bold")
        rows = [
            [name, *(f"{value:g}" for value in raw), *(number(value, 2) for value in reading.corner.points[name])]
            for name, (_, raw) in reading.sources.items()
        ]
        columns = [f"{letter} ({reading.unit})" for letter in "xyz"]
        print_table(["point", *columns, "forward (mm)", "left (mm)", "up (mm)"], rows, right=range(1, 7))
        renamed = [
            f"{label!r} is {name}"
            for name, (label, _) in reading.sources.items()
            if any(alike(label, theirs) for theirs in names)
        ]
        if renamed:
            say(f"By --names: {', '.join(renamed)}.")
    if readings[0].unused:
        say(f"Not taken from the table: {', '.join(readings[0].unused)}.")
    checks = sanity_list(readings, loaded_radius)
    say("")
    print_table(["sanity list", "found", ""], [[c.what, c.found, "usual" if c.usual else "ODD: check"] for c in checks])
