"""Hardpoint files: read with tomllib, checked, and turned into an Axle."""

from __future__ import annotations

import hashlib
import tomllib
from dataclasses import replace
from pathlib import Path

import numpy as np
from pydantic import ValidationError

from toewright.model import schema
from toewright.model.axle import POINT_NAMES, Axle, Corner, Rack, Setup, Side, Vehicle, Wheel
from toewright.model.errors import InputError
from toewright.model.frames import AXIS_SIGNS, MM_PER, to_iso
from toewright.model.geometry_checks import FileFrame, check_corner, check_size
from toewright.model.remarks import find_remarks
from toewright.model.schema_sentences import schema_sentence, syntax_sentence

MEMORY = "<text>"
"""File name in messages about text that is not from a file."""

EXTRA_TABLES = ("targets", "tolerance", "adjusters")
"""Tables that are kept as they are for those who read them."""

SHORTEST_AXIS = 1e-6
"""Length below which a written axis has no direction."""

LARGEST_FILE = 4_000_000
"""Bytes; a hardpoint file has a few thousand."""


def load(path: str | Path) -> Axle:
    """Read a hardpoint file.

    Raises:
        InputError: if it can't be read or is not a valid hardpoint file; the message names file, key, value and remedy.
    """
    place = Path(path)
    raw = _read_bytes(place)
    axle = _build(_decode(raw, place), str(place), place.parent)
    return replace(axle, title=axle.title or place.stem, path=place, sha256=hashlib.sha256(raw).hexdigest())


def loads(text: str, file: str = MEMORY, folder: Path | None = None) -> Axle:
    """Read a hardpoint file from text.

    Args:
        text: TOML.
        file: name for messages.
        folder: from where ``other_axle`` counts; None for the current folder.

    Raises:
        InputError: as ``load``.
    """
    axle = _build(text, file, folder or Path())
    return replace(axle, title=axle.title or "untitled axle")


def read_text(path: Path) -> str:
    """The text of a UTF-8 file, without a byte-order mark; line ends stay as they are.

    Raises:
        InputError: if it can't be read, is too large, or is no UTF-8 text.
    """
    return _decode(_read_bytes(path), path)


def _read_bytes(path: Path) -> bytes:
    try:
        with path.open("rb") as stream:
            raw = stream.read(LARGEST_FILE + 1)
    except IsADirectoryError as error:
        raise InputError(f"{path}: is a folder; give a file") from error
    except FileNotFoundError as error:
        raise InputError(f"{path}: there is no such file; check the name and the folder") from error
    except OSError as error:
        raise InputError(f"{path}: can't be read ({error.strerror}); check its rights") from error
    if len(raw) > LARGEST_FILE:
        raise InputError(
            f"{path}: is larger than {LARGEST_FILE} bytes; a file of points has a few thousand: is it the right file?"
        )
    return raw


def _decode(raw: bytes, path: Path) -> str:
    try:
        return raw.decode("utf-8-sig")
    except UnicodeDecodeError as error:
        line = raw[: error.start].count(b"\n") + 1
        raise InputError(f"{path}: line {line} is no UTF-8 text; save the file as UTF-8") from error


def parse(text: str, file: str) -> schema.HardpointFile:
    """TOML text to the checked schema model, in the file's own axes and units.

    Raises:
        InputError: as ``load``.
    """
    try:
        data = tomllib.loads(text)
    except ValueError as error:
        raise InputError(syntax_sentence(text, file, str(error))) from error
    except RecursionError as error:
        raise InputError(f"{file}: is nested too deeply to be a hardpoint file; remove the nesting") from error
    try:
        return schema.HardpointFile.model_validate(data)
    except ValidationError as error:
        raise InputError(schema_sentence(error, file)) from error


def _build(text: str, file: str, folder: Path) -> Axle:
    written = parse(text, file)
    scale = MM_PER[written.length_unit]

    def mm(value: float | None) -> float | None:
        return None if value is None else value * scale

    vehicle = written.vehicle
    left = _corner(written, written.left, "left")
    right = left.mirrored() if written.right is None else _corner(written, written.right, "right")
    wheel = written.wheel
    axle = Axle(
        title=written.title,
        vehicle=Vehicle(
            axle=vehicle.axle,
            wheelbase=mm(vehicle.wheelbase),
            other_axle=None if vehicle.other_axle is None else folder / vehicle.other_axle,
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
        extra={key: table for key in EXTRA_TABLES if (table := getattr(written, key)) is not None},
        axes=written.axes,
        length_unit=written.length_unit,
    )
    frame = FileFrame(file, written.axes, written.length_unit)
    check_size(axle, frame)
    for corner in (left,) if axle.symmetric else (left, right):
        check_corner(corner, frame)
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
        if size < SHORTEST_AXIS:
            raise InputError(f"{file}: rack.axis = {rack.axis}: has no direction; write one such as [0.0, 1.0, 0.0]")
        axis = axis / size
    return Rack(axis, rack.stroke * scale, None if rack.travel_per_turn is None else rack.travel_per_turn * scale)
