"""Hardpoint files: read with tomllib, checked, turned into an Axle; edited with tomlkit so that comments stay."""

from __future__ import annotations

import difflib
import hashlib
import tomllib
from collections.abc import Mapping
from dataclasses import replace
from pathlib import Path
from typing import Any

import numpy as np
from pydantic import BaseModel, ValidationError

from toewright.core.types import FloatArray
from toewright.model import schema
from toewright.model.axle import POINT_NAMES, Axle, Corner, Rack, Setup, Side, Vehicle, Wheel
from toewright.model.errors import InputError
from toewright.model.frames import AXIS_SIGNS, MM_PER, from_iso, to_iso
from toewright.model.geometry_checks import check_corner, check_size, find_remarks

MEMORY = "<text>"
"""File name in messages about text that is not from a file."""

LARGEST_FILE = 4_000_000
"""Bytes; a hardpoint file has a few thousand."""


def load(path: str | Path) -> Axle:
    """Read a hardpoint file.

    Raises:
        InputError: if it can't be read or is not a valid hardpoint file; the message names file, key, value and remedy.
    """
    place = Path(path)
    return _build(read_text(place), str(place), place)


def loads(text: str) -> Axle:
    """Read a hardpoint file from text; a relative ``other_axle`` counts from the current folder.

    Raises:
        InputError: as ``load``.
    """
    return _build(text, MEMORY, None)


def read_text(path: Path) -> str:
    """The text of a UTF-8 file, without a byte-order mark.

    Raises:
        InputError: if it can't be read, is too large, or is no UTF-8 text.
    """
    try:
        if path.stat().st_size > LARGEST_FILE:
            raise InputError(
                f"{path}: is {path.stat().st_size} bytes; a file of points has a few thousand: is it the right file?"
            )
        raw = path.read_bytes()
    except IsADirectoryError as error:
        raise InputError(f"{path}: is a folder; give a file") from error
    except OSError as error:
        raise InputError(f"{path}: can't be read ({error.strerror}); check the name") from error
    try:
        return raw.decode("utf-8-sig")
    except UnicodeDecodeError as error:
        raise InputError(f"{path}: byte {error.start} is no UTF-8 text; save the file as UTF-8") from error


def parse(text: str, file: str) -> schema.HardpointFile:
    """TOML text to the checked schema model, in the file's own axes and units.

    Raises:
        InputError: as ``load``.
    """
    try:
        data = tomllib.loads(text)
    except tomllib.TOMLDecodeError as error:
        raise InputError(_syntax_sentence(text, file, str(error))) from error
    except RecursionError as error:
        raise InputError(f"{file}: is nested too deeply to be a hardpoint file; remove the nesting") from error
    try:
        return schema.HardpointFile.model_validate(data)
    except ValidationError as error:
        raise InputError(_schema_sentence(error, file)) from error


def _syntax_sentence(text: str, file: str, reason: str) -> str:
    what, _, where = reason.partition(" (at ")
    lines = text.splitlines()
    if where.startswith("line "):
        number = int(where.removeprefix("line ").split(",")[0])
        shown = lines[number - 1].strip()[:80] if 0 < number <= len(lines) else ""
        return f"{file}: line {number} is not TOML ({what}): {shown!r}; mend that line"
    return f"{file}: is not TOML ({what}, at its end); mend the last line"


def _schema_sentence(error: ValidationError, file: str) -> str:
    problems = error.errors(include_url=False)
    first = min(problems, key=lambda p: 0 if p["type"] == "extra_forbidden" else 1)
    where = [str(part) for part in first["loc"] if part not in ("double-wishbone", "strut")]
    key = ".".join(where)
    more = f" (and {len(problems) - 1} more)" if len(problems) > 1 else ""
    value = first.get("input")
    shown = f" = {value!r}" if isinstance(value, str | int | float | bool) else ""
    if len(shown) > 60:
        shown = shown[:57] + "..."
    kind = first["type"]
    if kind == "extra_forbidden":
        known = _known_keys(where[:-1], first["loc"])
        close = difflib.get_close_matches(where[-1], known, n=1, cutoff=0.5)
        hint = f"did you mean {close[0]!r}?" if close else f"allowed here are {', '.join(known)}"
        return f"{file}: {key}: unknown key; {hint}{more}"
    if kind == "missing":
        return f"{file}: {key}: is missing; add it{more}"
    if kind == "union_tag_not_found":
        return f'{file}: {key}.type: is missing; write type = "double-wishbone" or "strut"{more}'
    if kind == "union_tag_invalid":
        tag = value.get("type") if isinstance(value, dict) else value
        return f'{file}: {key}.type = {tag!r}: no such corner; write "double-wishbone" or "strut"{more}'
    if kind == "finite_number":
        return f"{file}: {key}{shown}: is not a finite number; write a number{more}"
    if kind in ("too_short", "too_long"):
        return (
            f"{file}: {key}: has {len(value) if isinstance(value, list) else '?'} numbers; write three, [x, y, z]{more}"
        )
    message = first["msg"]
    return f"{file}: {key}{shown}: {message[0].lower()}{message[1:]}; correct it{more}"


_TABLES: Mapping[str, type[BaseModel]] = {
    "vehicle": schema.VehicleTable,
    "wheel": schema.WheelTable,
    "setup": schema.SetupTable,
    "rack": schema.RackTable,
}


def _known_keys(path: list[str], location: tuple[Any, ...]) -> list[str]:
    if not path:
        return [f.alias or n for n, f in schema.HardpointFile.model_fields.items()]
    if path[0] in ("left", "right"):
        if path[1:] == ["points"]:
            return list(POINT_NAMES["strut" if "strut" in location else "double-wishbone"])
        return ["type", "points"]
    return list(_TABLES[path[0]].model_fields)


def _build(text: str, file: str, path: Path | None) -> Axle:
    written = parse(text, file)
    scale = MM_PER[written.length_unit]

    def mm(value: float | None) -> float | None:
        return None if value is None else value * scale

    vehicle = written.vehicle
    other = None
    if vehicle.other_axle is not None:
        other = (path.parent if path is not None else Path()) / vehicle.other_axle
    left = _corner(written, written.left, "left")
    right = left.mirrored() if written.right is None else _corner(written, written.right, "right")
    wheel = written.wheel
    axle = Axle(
        title=written.title or (path.stem if path is not None else "untitled axle"),
        vehicle=Vehicle(
            axle=vehicle.axle,
            wheelbase=mm(vehicle.wheelbase),
            other_axle=other,
            cg_height=mm(vehicle.cg_height),
            brake_share=vehicle.brake_share,
            brakes=vehicle.brakes,
            drive=vehicle.drive,
            front_overhang=mm(vehicle.front_overhang),
            body_width=mm(vehicle.body_width),
        ),
        wheel=Wheel(wheel.loaded_radius * scale, mm(wheel.tyre_width), mm(wheel.rim_diameter), mm(wheel.rim_width)),
        setup=Setup(written.setup.toe_in, written.setup.camber),
        rack=_rack(written, file),
        left=left,
        right=right,
        symmetric=written.right is None,
        path=path,
        sha256=hashlib.sha256(text.encode()).hexdigest(),
        extra={
            name: table
            for name in ("targets", "tolerance", "adjusters")
            if (table := getattr(written, name)) is not None
        },
    )
    check_size(axle, file, written.length_unit)
    check_corner(left, file, "left")
    if not axle.symmetric:
        check_corner(right, file, "right")
    return replace(axle, remarks=find_remarks(axle))


def _corner(
    written: schema.HardpointFile, corner: schema.DoubleWishboneCorner | schema.StrutCorner, side: Side
) -> Corner:
    points = {
        name: to_iso(np.array(getattr(corner.points, name)), written.axes, written.length_unit)
        for name in POINT_NAMES[corner.type]
    }
    return Corner(side=side, kind=corner.type, points=points)


def _rack(written: schema.HardpointFile, file: str) -> Rack | None:
    rack = written.rack
    if rack is None:
        return None
    scale = MM_PER[written.length_unit]
    axis = np.array([0.0, 1.0, 0.0])
    if rack.axis is not None:
        axis = np.array(rack.axis, dtype=float) * AXIS_SIGNS[written.axes]
        size = float(np.linalg.norm(axis))
        if not 0.0 < size < np.inf:
            raise InputError(f"{file}: rack.axis = {rack.axis}: has no direction; write one such as [0.0, 1.0, 0.0]")
        axis = axis / size
    return Rack(axis, rack.stroke * scale, None if rack.travel_per_turn is None else rack.travel_per_turn * scale)


def set_points(text: str, moved: Mapping[tuple[str, str], FloatArray], file: str = MEMORY) -> str:
    """The file's text with points moved; everything else, comments and order included, stays as it is.

    Args:
        text: the hardpoint file.
        moved: {(side, point): (3,) mm in ISO 8855 axes}; written in the file's own axes and unit.
        file: name for messages.

    Raises:
        InputError: if the file is not valid, has no such point, or leaves that side out.
    """
    import tomlkit

    written = parse(text, file)
    document = tomlkit.parse(text)
    for (side, name), point in moved.items():
        corner = document.get(side)
        if corner is None:
            raise InputError(
                f"{file}: {side}: is left out (it mirrors the left), so {name} can't be moved there; move the left one"
            )
        if name not in corner["points"]:
            raise InputError(f"{file}: {side}.points.{name}: there is no such point in this corner")
        values = from_iso(point, written.axes, written.length_unit)
        array = corner["points"][name]
        for i in range(3):
            number = round(float(values[i]), 9)
            array[i] = number + 0.0
    return tomlkit.dumps(document)
