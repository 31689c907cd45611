"""The options that say how toe is measured."""

from __future__ import annotations

import math
from typing import TYPE_CHECKING, Annotated

import typer

from toewright.views.toe import ToeScale, ToeUnit

if TYPE_CHECKING:
    from toewright.model.axle import Axle

ToeUnitOption = Annotated[
    ToeUnit | None,
    typer.Option(
        "--toe-unit",
        help="Toe in deg, in min of arc, or in mm or inch across a diameter: the rim's, or --toe-diameter.",
    ),
]
ToeDiameterOption = Annotated[
    float | None,
    typer.Option(
        "--toe-diameter",
        metavar="MM",
        help="Diameter across which toe in mm or inch is measured; default: rim_diameter.",
    ),
]
ToeTotalOption = Annotated[bool, typer.Option("--toe-total", help="Toe as the sum of both wheels, not per wheel.")]


def toe_scale(axle: Axle, unit: ToeUnit, diameter: float | None, total: bool) -> ToeScale:
    """The scale asked for; the diameter from the file unless given.

    Raises:
        InputError: for mm or inch when neither the file nor the option gives a diameter, or one that is not positive.
    """
    from toewright.model.errors import InputError

    if diameter is not None and not (math.isfinite(diameter) and diameter > 0.0):
        raise InputError(f"--toe-diameter {diameter:g}: must be a length above 0 mm")
    across = axle.wheel.rim_diameter if diameter is None else diameter
    if unit in (ToeUnit.MM, ToeUnit.IN) and across is None:
        raise InputError(
            f"{axle.path}: wheel.rim_diameter is missing, so --toe-unit {unit.value} has no diameter to be measured across; "
            "add it, or give --toe-diameter MM"
        )
    return ToeScale(unit, across, diameter is None, total)


def workshop_scale(axle: Axle, unit: ToeUnit | None, diameter: float | None, total: bool) -> ToeScale:
    """The scale of a workshop's figures: what was asked for, else mm across the diameter that is known, else minutes of arc.

    Raises:
        InputError: as ``toe_scale``.
    """
    if unit is None:
        unit = ToeUnit.MIN if diameter is None and axle.wheel.rim_diameter is None else ToeUnit.MM
    return toe_scale(axle, unit, diameter, total)
