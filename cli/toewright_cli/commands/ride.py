"""``toewright ride``: the whole axle over bumps and in roll."""

from __future__ import annotations

from enum import StrEnum
from typing import Annotated

import typer

from toewright.views.toe import ToeUnit
from toewright_cli.console import print_definitions, print_json, print_remarks
from toewright_cli.options import (
    AsJson,
    Explain,
    Force,
    HardpointFile,
    OneSide,
    Out,
    TravelList,
    check_roll,
    parse_list,
    parse_number,
)
from toewright_cli.outputs import check_out, save_results
from toewright_cli.pictures import FINE, Overlay, Plot, check_plot, draw
from toewright_cli.progress import notice_compilation, working
from toewright_cli.toe import ToeDiameterOption, ToeUnitOption, toe_scale


class MotionChoice(StrEnum):
    """What the axle does."""

    BUMP = "bump"
    ROLL = "roll"
    SINGLE = "single"


def ride(
    file: HardpointFile,
    motion: Annotated[
        MotionChoice | None, typer.Option("--motion", help="One motion; all three when left out.")
    ] = None,
    travel: TravelList = None,
    roll: Annotated[
        str | None,
        typer.Option(
            "--roll",
            metavar="LIST",
            help="Roll angles in deg, right side down +: lo:hi:n, or a,b,c. Default: 21 over +-3.",
        ),
    ] = None,
    rack: Annotated[float, typer.Option("--rack", metavar="MM", help="Rack travel in mm, + to the left.")] = 0.0,
    side: Annotated[OneSide, typer.Option("--side", help="The wheel that moves alone.")] = OneSide.LEFT,
    toe_unit: ToeUnitOption = None,
    toe_diameter: ToeDiameterOption = None,
    out_file: Out = None,
    plot: Plot = None,
    overlay: Overlay = None,
    force: Force = False,
    as_json: AsJson = False,
    explain: Explain = False,
) -> None:
    """Ride the axle: both wheels in bump, the body in roll, one wheel alone; toe, camber, track, roll centre, anti figures.

    Example: toewright ride hardpoints/marten_front.toml --motion roll --roll=-2:2:9
    """
    check_out(out_file, force)
    overlaid = check_plot(plot, overlay, force)
    from toewright.kinematics.riding import MOTIONS
    from toewright.kinematics.riding import ride as solve
    from toewright.kinematics.status import state_words
    from toewright.model.errors import InputError
    from toewright.model.files import load
    from toewright.views.words import number
    from toewright_cli.show.riding import EXPLAINED, print_ride, ride_document
    from toewright_cli.show.tables import long_table, table_document

    at_travel, at_roll = parse_list(travel, "--travel"), parse_list(roll, "--roll")
    if at_roll is not None:
        check_roll(at_roll, str(roll))
    axle = load(file)
    at_rack = parse_number(rack, "--rack") or 0.0
    for of in (axle, *overlaid):
        if at_rack and of.rack is None:
            raise InputError(
                f"{of.path}: has no [rack], so --rack {at_rack:g} means nothing; leave --rack out, or add a [rack] table"
            )
    scale = toe_scale(axle, toe_unit or ToeUnit.DEG, toe_diameter, False)
    notice_compilation()
    with working("riding"):
        ridden = solve(
            axle,
            MOTIONS if motion is None else [motion.value],
            travel=at_travel,
            roll=at_roll,
            rack=at_rack,
            side=side.value,
        )
    for name in dict.fromkeys(ridden.motion.tolist()):
        part = ridden.part(name)
        if not (ridden.status[part] == 0).any():
            why, place = state_words(ridden.status_names[part][0]), number(at_rack, 1)
            raise InputError(
                f"{file}: none of the {name} positions can be reached at rack {place} mm: {why}; ask for less"
            )
    if out_file is not None:
        save_results(
            out_file, force, lambda: long_table(ridden), lambda: table_document(axle, ridden), ridden.to_xarray
        )
    if plot is not None:
        from toewright.kinematics.riding import default_roll
        from toewright.kinematics.sweep import default_travel
        from toewright.views.plots_ride import ride_figure

        motions = MOTIONS if motion is None else [motion.value]
        fine = default_travel(axle, FINE) if at_travel is None else at_travel
        tilt = default_roll(FINE) if at_roll is None else at_roll
        shown = [axle, *overlaid]
        draw(
            plot,
            force,
            lambda: ride_figure(
                shown, [solve(of, motions, travel=fine, roll=tilt, rack=at_rack, side=side.value) for of in shown]
            ),
        )
    if as_json:
        print_json(ride_document(axle, ridden, scale))
        return
    print_remarks(axle.remarks)
    print_ride(axle, ridden, scale)
    if explain:
        print_definitions(EXPLAINED)
