"""Hardpoint files written: points moved in a file whose comments and order stay, and whole files from an axle in memory."""

from __future__ import annotations

import json
import math
import os
from collections.abc import Mapping, Sequence
from pathlib import Path

import numpy as np
import tomlkit
from numpy.typing import ArrayLike
from tomlkit.exceptions import TOMLKitError
from tomlkit.items import Array

from toewright.model.axle import POINT_NAMES, Axle, Corner
from toewright.model.errors import InputError
from toewright.model.files import MEMORY, loads, parse, read_text
from toewright.model.frames import AXIS_SIGNS, MM_PER, from_iso
from toewright.model.writing import write_text

DECIMALS = 9
"""Decimals of a written coordinate in mm; in a larger unit as many more as keep that accuracy."""


def set_points(source: str | Path, moved: Mapping[tuple[str, str], ArrayLike], file: str = MEMORY) -> str:
    """The file's text with points moved; everything but the numbers that change stays byte for byte.

    Args:
        source: a file, or its text.
        moved: {(side, point): (3,) mm in ISO 8855 axes}; written in the file's own axes and unit.
        file: name for messages where ``source`` is text.

    Raises:
        InputError: if the file is not valid, has no such point, leaves that side out, or a coordinate is not finite.
    """
    text, file = (read_text(source), str(source)) if isinstance(source, Path) else (source, file)
    written = parse(text, file)
    try:
        document = tomlkit.parse(text)
    except TOMLKitError as error:
        raise InputError(f"{file}: can't be edited ({error}); simplify the line") from error
    decimals = _decimals(written.length_unit)
    for (side, name), point in moved.items():
        place = np.asarray(point, dtype=float)
        if place.shape != (3,) or not np.all(np.isfinite(place)):
            raise InputError(
                f"{file}: {side}.points.{name}: can't be moved to {place.tolist()}; give three finite numbers"
            )
        values = from_iso(place, written.axes, written.length_unit)
        array = _array(document, side, name, file)
        for i, value in enumerate(values):
            number = round(float(value), decimals) + 0.0
            if float(array[i]) != number:
                array[i] = number
    return tomlkit.dumps(document)


def _array(document: tomlkit.TOMLDocument, side: str, name: str, file: str) -> Array:
    corner = document.get(side)
    if corner is None and side == "right":
        raise InputError(
            f"{file}: right.points.{name}: the right side is left out because it mirrors the left; move the left point, or write [right]"
        )
    found = corner["points"].get(name) if isinstance(corner, Mapping) else None
    if not isinstance(found, Array):
        raise InputError(f"{file}: {side}.points.{name}: there is no such point; check side and name")
    return found


def save_points(path: Path, moved: Mapping[tuple[str, str], ArrayLike], out: Path, *, force: bool = False) -> Axle:
    """Write a copy of a hardpoint file with points moved, checked before it is written; ``out`` may be ``path`` with ``force``.

    Args:
        path: the file.
        moved: as in ``set_points``.
        out: where to write.
        force: replace ``out`` if it exists.

    Returns:
        The axle as it now is.

    Raises:
        InputError: as ``set_points``; if the moved points make no valid axle; if ``out`` is refused or can't be written.
    """
    text = set_points(path, moved)
    axle = loads(text, file=f"{path} with the points moved", folder=out.parent)
    write_text(out, text, force=force)
    return axle


def save(axle: Axle, path: Path, *, force: bool = False) -> None:
    """Write an axle as a new hardpoint file, in the axes and the length unit it was read in.

    Raises:
        InputError: if the file is refused or can't be written.
    """
    write_text(path, dumps(axle, folder=path.parent), force=force)


def dumps(axle: Axle, *, heading: Sequence[str] = (), hints: bool = False, folder: Path | None = None) -> str:
    """An axle as the text of a hardpoint file, in the axes and the length unit it was read in, coordinates to 1e-9 mm.

    Args:
        axle: what to write.
        heading: lines of a comment at the top.
        hints: add comments with optional keys that are not there.
        folder: where the file will be; ``other_axle`` is written relative to it.
    """
    lines = [f"# {line}" for line in heading]
    lines += ["schema = 1", f"title = {_text(axle.title)}"]
    lines += [f'axes = "{axle.axes}"', f'length_unit = "{axle.length_unit}"', ""]
    lines += [*_vehicle(axle, hints, folder), "", *_wheel(axle, hints), ""]
    lines += ["[setup]                        # static angles of each wheel"]
    lines += [
        _line("toe_in", axle.setup.toe_in, "deg, toe-in +"),
        _line("camber", axle.setup.camber, "deg, top outboard +"),
    ]
    lines += ["", *_rack(axle, hints)]
    for corner in (axle.left,) if axle.symmetric else (axle.left, axle.right):
        lines += _corner(axle, corner)
    if hints and axle.symmetric:
        lines += ["# [right] left out: the mirror image of the left", ""]
    text = "\n".join(lines).rstrip() + "\n"
    return text + (f"\n{tomlkit.dumps(dict(axle.extra))}" if axle.extra else "")


def _decimals(unit: str) -> int:
    return DECIMALS + math.ceil(math.log10(MM_PER[unit]))


def _text(text: str) -> str:
    """A string in quotes, as TOML and JSON have them in common."""
    return json.dumps(text, ensure_ascii=False).replace("\x7f", "\\u007f")


def _number(value: float, unit: str = "mm") -> str:
    """A number in its unit with the decimals of that unit."""
    return repr(round(float(value), _decimals(unit)) + 0.0)


def _line(key: str, value: float, comment: str = "") -> str:
    made = f"{key} = {_number(value)}"
    return f"{made:<30} # {comment}" if comment else made


def _length(key: str, mm: float, axle: Axle, comment: str = "") -> str:
    made = f"{key} = {_number(mm / MM_PER[axle.length_unit], axle.length_unit)}"
    return f"{made:<30} # {comment}" if comment else made


def _hint(key: str, mm: float, axle: Axle, comment: str) -> str:
    return f"# {_length(key, mm, axle, comment).replace('   #', ' #', 1)}"


def _vehicle(axle: Axle, hints: bool, folder: Path | None) -> list[str]:
    vehicle = axle.vehicle
    lines = ["[vehicle]", f'axle = "{vehicle.axle}"']
    if vehicle.wheelbase is not None:
        lines.append(_length("wheelbase", vehicle.wheelbase, axle))
    elif hints:
        lines.append(_hint("wheelbase", 1550.0, axle, "to the other axle; for Ackermann and the turning circle"))
    if vehicle.other_axle is not None:
        place = vehicle.other_axle if folder is None else Path(os.path.relpath(vehicle.other_axle, folder))
        lines.append(f"other_axle = {_text(place.as_posix())}")
    for key in ("cg_height", "front_overhang", "body_width"):
        if (value := getattr(vehicle, key)) is not None:
            lines.append(_length(key, value, axle))
    if vehicle.brake_share is not None:
        lines.append(_line("brake_share", vehicle.brake_share))
    for key in ("brakes", "drive"):
        if (word := getattr(vehicle, key)) is not None:
            lines.append(f'{key} = "{word}"')
    return lines


def _wheel(axle: Axle, hints: bool) -> list[str]:
    lines = ["[wheel]", _length("loaded_radius", axle.wheel.loaded_radius, axle, "wheel centre to road")]
    for key in ("tyre_width", "rim_diameter", "rim_width"):
        if (value := getattr(axle.wheel, key)) is not None:
            lines.append(_length(key, value, axle))
    if hints and axle.wheel.rim_diameter is None:
        lines.append(_hint("rim_diameter", 254.0, axle, "toe in mm is measured across it"))
    return lines


def _rack(axle: Axle, hints: bool) -> list[str]:
    rack = axle.rack
    if rack is None:
        if not hints:
            return []
        return ["# No [rack]: tie_rod_inner is fixed to the body (a toe link).", ""]
    direction = rack.axis * AXIS_SIGNS[axle.axes] + 0.0
    lines = ["[rack]", f"axis = [{', '.join(repr(float(v)) for v in direction)}]"]
    lines.append(_length("stroke", rack.stroke, axle, "each way"))
    if rack.travel_per_turn is not None:
        lines.append(_length("travel_per_turn", rack.travel_per_turn, axle, "one turn of the hand wheel"))
    elif hints:
        lines.append(_hint("travel_per_turn", 50.0, axle, "rack travel for one turn of the hand wheel"))
    return [*lines, ""]


def _corner(axle: Axle, corner: Corner) -> list[str]:
    points = {name: corner.points[name] for name in POINT_NAMES[corner.kind]}
    width = max(len(name) for name in points)
    rows = []
    for name, point in points.items():
        numbers = from_iso(point, axle.axes, axle.length_unit)
        rows.append(f"{name:<{width}} = [{', '.join(_number(v, axle.length_unit) for v in numbers)}]")
    return [f"[{corner.side}]", f'type = "{corner.kind}"', f"[{corner.side}.points]", *rows, ""]
