"""The one grammar of options that all commands share."""

from __future__ import annotations

import math
from enum import StrEnum
from itertools import pairwise
from pathlib import Path
from typing import TYPE_CHECKING, Annotated

import typer

if TYPE_CHECKING:
    from collections.abc import Sequence

    from toewright.model.axle import Axle

LIST_HELP = "lo:hi:n (n values from lo to hi) or values separated by commas, ascending"
"""The grammar of a LIST, for messages."""

LARGEST_COUNT = 100_001
"""Values in one LIST."""

LARGEST_VALUE = 2000.0
"""No car has a travel (mm) or an angle (deg) beyond this."""

HardpointFile = Annotated[Path, typer.Argument(metavar="FILE", help="Hardpoint file (.toml).", show_default=False)]
RackList = Annotated[
    str | None,
    typer.Option(
        "--rack",
        metavar="LIST",
        help="Rack travel in mm, + to the left: lo:hi:n, or a,b,c. Default: 21 over the stroke.",
    ),
]
TravelList = Annotated[
    str | None,
    typer.Option(
        "--travel",
        metavar="LIST",
        help="Wheel travel in mm, bump +: lo:hi:n, or a,b,c. Default: 21 over a range that suits the wheel's size.",
    ),
]
Out = Annotated[
    Path | None,
    typer.Option("--out", "-o", metavar="FILE", help="Write all results: .csv (long table), .json or .nc (NetCDF)."),
]
Force = Annotated[bool, typer.Option("--force", help="Replace an output file that exists.")]
AsJson = Annotated[bool, typer.Option("--json", help="Print the summary as JSON.")]
Explain = Annotated[bool, typer.Option("--explain", help="Print the definitions of the figures shown as well.")]


class TravelAt(StrEnum):
    """What the wheel travel is the height of."""

    WHEEL_CENTRE = "wheel-centre"
    CONTACT_POINT = "contact-point"


class SideChoice(StrEnum):
    """Which corners."""

    LEFT = "left"
    RIGHT = "right"
    BOTH = "both"

    @property
    def sides(self) -> tuple[str, ...]:
        """Names of the corners."""
        return ("left", "right") if self is SideChoice.BOTH else (self.value,)


class OneSide(StrEnum):
    """One corner."""

    LEFT = "left"
    RIGHT = "right"


TravelAtOption = Annotated[TravelAt, typer.Option("--travel-at", help="What the wheel travel is the height of.")]
SideOption = Annotated[SideChoice, typer.Option("--side", help="Which corners.")]


def _number(text: str, option: str, whole: str, grammar: str = LIST_HELP) -> float:
    from toewright.model.errors import InputError

    try:
        value = float(text)
    except ValueError:
        value = math.nan
    if not math.isfinite(value):
        raise InputError(f"{option} {whole}: {text.strip()!r} is not a number; write {grammar}")
    if abs(value) > LARGEST_VALUE:
        raise InputError(f"{option} {whole}: {value:g} is more than any car has; the limit is {LARGEST_VALUE:g}")
    return value


def _evenly(text: str, option: str) -> list[float]:
    """The values of ``lo:hi:n``."""
    from toewright.model.errors import InputError

    parts = text.split(":")
    if len(parts) != 3:
        raise InputError(f"{option} {text}: has {len(parts)} parts; write lo:hi:n, such as -25:25:11")
    low, high = _number(parts[0], option, text), _number(parts[1], option, text)
    written = parts[2].strip()
    if not written.isdecimal() or len(written) > 6 or not 1 <= int(written) <= LARGEST_COUNT:
        raise InputError(f"{option} {text}: n is {written!r}; write a whole number from 1 to {LARGEST_COUNT}")
    count = int(written)
    if count == 1 and low == high:
        return [low]
    if count == 1:
        raise InputError(f"{option} {text}: one value can't span {low:g} to {high:g}; write n = 2 or more")
    if low >= high:
        raise InputError(f"{option} {text}: {low:g} to {high:g} does not ascend; write the lower value first")
    values = [low + (high - low) * i / (count - 1) for i in range(count - 1)] + [high]
    return [0.0 if abs(v) < 1e-12 * (high - low) else v for v in values]


def parse_list(text: str | None, option: str) -> list[float] | None:
    """Positions from a LIST: ``lo:hi:n`` or values separated by commas; None stays None.

    Raises:
        InputError: if it is empty, has something that is no number or is out of all proportion, does not ascend, or n is no
            whole number from 1 up.
    """
    from toewright.model.errors import InputError

    if text is None:
        return None
    if not text.strip():
        raise InputError(f"{option}: the list is empty; write {LIST_HELP}")
    values = _evenly(text, option) if ":" in text else [_number(part, option, text) for part in text.split(",")]
    for before, after in pairwise(values):
        if after <= before:
            raise InputError(
                f"{option} {text}: {after:g} after {before:g} does not ascend; write the values in rising order"
            )
    return values


def parse_number(value: float | None, option: str) -> float | None:
    """A single number of an option; None stays None.

    Raises:
        InputError: if it is not finite or out of all proportion.
    """
    return None if value is None else _number(repr(value), option, f"{value:g}", "one finite number")


STEEPEST_ROLL = 45.0
"""Roll angles (deg) of this size and more are refused."""


def check_roll(values: Sequence[float], text: str) -> None:
    """Refuse a ``--roll`` that no car has on its wheels.

    Raises:
        InputError: if an angle is that steep.
    """
    from toewright.model.errors import InputError

    if max(map(abs, values)) >= STEEPEST_ROLL:
        raise InputError(
            f"--roll {text}: angles of {STEEPEST_ROLL:g} deg and more are no roll of a car on its wheels; ask for less"
        )


def parse_rack(text: str | None, axle: Axle) -> list[float] | None:
    """The LIST of ``--rack`` for an axle; an axle without a rack takes 0 only.

    Raises:
        InputError: as ``parse_list``, and for rack travel on an axle that has no rack.
    """
    from toewright.model.errors import InputError

    values = parse_list(text, "--rack")
    if values is not None and axle.rack is None and any(values):
        raise InputError(
            f"{axle.path}: has no [rack], so --rack {text} means nothing; leave --rack out, or add a [rack] table"
        )
    return values


POSE_HELP = "rack=20,travel=-10 (mm; what is left out is 0)"
"""The grammar of a POSE, for messages."""


def parse_pose(text: str, axle: Axle, option: str = "--pose") -> tuple[float, float]:
    """Rack travel and wheel travel, mm, from a POSE such as ``rack=20,travel=-10``; what is left out is 0.

    Raises:
        InputError: for another key, a key twice, what is no number, or rack travel on an axle that has no rack.
    """
    from toewright.model.errors import InputError

    found: dict[str, float] = {}
    for part in text.split(","):
        key, equals, value = (piece.strip() for piece in part.partition("="))
        if not equals or key not in ("rack", "travel"):
            raise InputError(f"{option} {text}: {part.strip()!r} is no rack=... or travel=...; write {POSE_HELP}")
        if key in found:
            raise InputError(f"{option} {text}: {key} is given twice; write {POSE_HELP}")
        found[key] = _number(value, option, text, POSE_HELP)
    if axle.rack is None and found.get("rack"):
        raise InputError(
            f"{axle.path}: has no [rack], so {option} {text} means nothing; leave rack= out, or add a [rack] table"
        )
    return found.get("rack", 0.0), found.get("travel", 0.0)
