"""``toewright turn``: the whole axle in a turn."""

from __future__ import annotations

from enum import StrEnum
from typing import TYPE_CHECKING, Annotated

import typer

from toewright_cli.console import print_definitions, print_json, print_remarks
from toewright_cli.options import (
    AsJson,
    Explain,
    Force,
    HardpointFile,
    Out,
    RackList,
    check_roll,
    parse_number,
    parse_rack,
)
from toewright_cli.outputs import check_out, save_results
from toewright_cli.pictures import FINE, Overlay, Plot, check_plot, draw
from toewright_cli.progress import notice_compilation, working

if TYPE_CHECKING:
    from toewright.kinematics.turning import TurnMaps
    from toewright.model.axle import Axle


class AckermannChoice(StrEnum):
    """Definitions of Ackermann percent."""

    IDEAL_INNER = "ideal-inner"
    IDEAL_OUTER = "ideal-outer"
    SINGLE_TRACK = "single-track"


def turn(
    file: HardpointFile,
    rack: RackList = None,
    travel: Annotated[
        float | None,
        typer.Option("--travel", metavar="MM", help="Wheel travel of all wheels in mm, bump +. Default 0."),
    ] = None,
    roll: Annotated[
        float | None,
        typer.Option("--roll", metavar="DEG", help="Roll angle in deg, right side down +; in place of --travel."),
    ] = None,
    ackermann: Annotated[
        AckermannChoice, typer.Option("--ackermann", help="Definition of Ackermann percent.")
    ] = AckermannChoice.IDEAL_INNER,
    other_rack: Annotated[
        float,
        typer.Option(
            "--other-rack",
            metavar="RATIO",
            help="Rack travel of the other axle per mm of this one's (four-wheel steering).",
        ),
    ] = 0.0,
    out_file: Out = None,
    plot: Plot = None,
    overlay: Overlay = None,
    force: Force = False,
    as_json: AsJson = False,
    explain: Explain = False,
) -> None:
    """Turn the axle: both wheels on one rack, Ackermann quality, turn centre, slip at walking pace, turning circles, limits.

    Example: toewright turn hardpoints/marten_front.toml --rack -30:30:13 --ackermann single-track
    """
    check_out(out_file, force)
    overlaid = check_plot(plot, overlay, force)
    from toewright.kinematics.limits import limits
    from toewright.kinematics.status import state_words
    from toewright.kinematics.turning import turn as solve
    from toewright.model.errors import InputError
    from toewright.model.files import load
    from toewright_cli.show.tables import long_table, table_document
    from toewright_cli.show.turning import EXPLAINED, print_turn, turn_document

    axle = load(file)
    at_rack = parse_rack(rack, axle)
    height = parse_number(travel, "--travel")
    angle = parse_number(roll, "--roll")
    if angle is not None:
        check_roll([angle], f"{angle:g}")
    ratio = parse_number(other_rack, "--other-rack")
    if height is not None and angle is not None:
        raise InputError("--travel and --roll: a roll angle sets the wheel travels; leave one of them out")
    notice_compilation()
    with working("turning"):
        turned = solve(
            axle, at_rack, travel=height or 0.0, roll=angle, ackermann=ackermann.value, other_rack=ratio or 0.0
        )
        bounds = limits(axle)
    held = (
        f"roll {angle:+g} deg (right side down +)"
        if angle is not None
        else f"wheel travel {height or 0.0:+g} mm".replace("+0 ", "0 ")
    )
    if not (turned.status == 0).any():
        why = state_words(turned.status_names[0])
        raise InputError(f"{file}: no rack position can be reached at {held}: {why}; ask for less")
    if out_file is not None:
        save_results(
            out_file, force, lambda: long_table(turned), lambda: table_document(axle, turned), turned.to_xarray
        )
    if plot is not None:
        from toewright.kinematics.sweep import default_rack
        from toewright.views.plots_turn import turn_figure

        def picture(of: Axle) -> TurnMaps:
            at = default_rack(of, FINE) if at_rack is None else parse_rack(rack, of)
            return solve(of, at, travel=height or 0.0, roll=angle, ackermann=ackermann.value, other_rack=ratio or 0.0)

        shown = [axle, *overlaid]
        draw(plot, force, lambda: turn_figure(shown, [picture(of) for of in shown]))
    if as_json:
        print_json(turn_document(axle, turned, bounds, held))
        return
    print_remarks(axle.remarks)
    print_turn(axle, turned, bounds, held)
    if explain:
        print_definitions(EXPLAINED)
