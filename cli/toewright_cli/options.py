"""The one grammar of options that all commands share."""

from __future__ import annotations

import math
from enum import StrEnum
from pathlib import Path
from typing import Annotated

import typer

LIST_HELP = "lo:hi:n (n values from lo to hi) or values separated by commas, ascending, mm"

HardpointFile = Annotated[Path, typer.Argument(metavar="FILE", help="Hardpoint file (.toml).", show_default=False)]
RackList = Annotated[
    str | None,
    typer.Option(
        "--rack", metavar="LIST", help=f"Rack travel, + to the left: {LIST_HELP}. Default: 21 over the stroke."
    ),
]
TravelList = Annotated[
    str | None, typer.Option("--travel", metavar="LIST", help=f"Wheel travel, bump +: {LIST_HELP}. Default: 21 values.")
]
Out = Annotated[
    Path | None,
    typer.Option("--out", "-o", metavar="FILE", help="Write all results; .csv (long table), .json or .nc (NetCDF)."),
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


TravelAtOption = Annotated[TravelAt, typer.Option("--travel-at", help="What the wheel travel is the height of.")]
SideOption = Annotated[SideChoice, typer.Option("--side", help="Which corners.")]

LARGEST_COUNT = 100_001


def _number(text: str, option: str, whole: str) -> float:
    from toewright.model.errors import InputError

    try:
        value = float(text)
    except ValueError:
        value = math.nan
    if not math.isfinite(value):
        raise InputError(f"{option} {whole}: {text.strip()!r} is not a number; write {LIST_HELP}")
    return value


def parse_list(text: str | None, option: str) -> list[float] | None:
    """Positions from a LIST: ``lo:hi:n`` or values separated by commas.

    Raises:
        InputError: if it is empty, not numbers, does not ascend, or n is no whole number from 1 up.
    """
    from toewright.model.errors import InputError

    if text is None:
        return None
    if not text.strip():
        raise InputError(f"{option}: the list is empty; write {LIST_HELP}")
    if ":" in text:
        parts = text.split(":")
        if len(parts) != 3:
            raise InputError(f"{option} {text}: has {len(parts)} parts; write lo:hi:n, such as -25:25:11")
        low, high = _number(parts[0], option, text), _number(parts[1], option, text)
        if not parts[2].strip().isdigit() or not 1 <= int(parts[2]) <= LARGEST_COUNT:
            raise InputError(
                f"{option} {text}: n is {parts[2].strip()!r}; write a whole number from 1 to {LARGEST_COUNT}"
            )
        count = int(parts[2])
        if count == 1 and low != high:
            raise InputError(f"{option} {text}: one value can't span {low:g} to {high:g}; write n = 2 or more")
        if count > 1 and low >= high:
            raise InputError(f"{option} {text}: {low:g} to {high:g} does not ascend; write the lower value first")
        values = [low + (high - low) * i / (count - 1) for i in range(count)] if count > 1 else [low]
        return [0.0 if abs(v) < 1e-12 * max(abs(low), abs(high)) else v for v in values]
    values = [_number(part, option, text) for part in text.split(",")]
    for before, after in zip(values, values[1:], strict=False):
        if after <= before:
            raise InputError(
                f"{option} {text}: {after:g} after {before:g} does not ascend; write the values in rising order"
            )
    return values
