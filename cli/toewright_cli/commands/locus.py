"""``toewright locus``: where the inner tie rod joint may be."""

from __future__ import annotations

from enum import StrEnum
from typing import Annotated

import typer

from toewright_cli.console import print_json, print_remarks
from toewright_cli.options import (
    AsJson,
    Force,
    HardpointFile,
    OneSide,
    Out,
    TravelList,
    parse_list,
    parse_number,
    parse_rack,
)
from toewright_cli.outputs import check_out, save_results
from toewright_cli.pictures import Plot, check_plot, draw
from toewright_cli.progress import notice_compilation, working


class PlaneChoice(StrEnum):
    """Planes of places."""

    FRONT = "front"
    TOP = "top"


def locus(
    file: HardpointFile,
    rack: Annotated[
        str,
        typer.Option(
            "--rack", metavar="LIST", help="Rack positions in mm at which bump steer is taken: a,b,c or lo:hi:n."
        ),
    ] = "0",
    travel: TravelList = None,
    side: Annotated[OneSide, typer.Option("--side", help="Which corner.")] = OneSide.LEFT,
    plane: Annotated[
        PlaneChoice, typer.Option("--plane", help="front: y and z at the present x; top: y and x at the present z.")
    ] = PlaneChoice.FRONT,
    limit: Annotated[
        float, typer.Option("--limit", metavar="DEG", help="Bump steer still accepted, deg per wheel.")
    ] = 0.05,
    reach: Annotated[
        float, typer.Option("--reach", metavar="MM", help="How far about the joint places are tried.")
    ] = 40.0,
    plot: Plot = None,
    out_file: Out = None,
    force: Force = False,
    as_json: AsJson = False,
) -> None:
    """Map bump steer over places of the inner tie rod joint: the line of best places and the patch within a limit.

    Example: toewright locus hardpoints/marten_front.toml --rack 0,20 --limit 0.03 --plot places.png
    """
    check_out(out_file, force)
    check_plot(plot, None, force)
    from toewright.model.files import load
    from toewright.studies.locus import locus as solve
    from toewright_cli.show.locus import locus_document, locus_table, print_locus

    axle = load(file)
    racks = parse_rack(rack, axle) or [0.0]
    travels = parse_list(travel, "--travel")
    accepted, far = parse_number(limit, "--limit"), parse_number(reach, "--reach")
    notice_compilation()
    with working("solving places"):
        found = solve(
            axle,
            side=side.value,
            plane=plane.value,
            rack=racks,
            travel=travels,
            limit=accepted or 0.0,
            reach=far or 0.0,
        )
    if out_file is not None:
        save_results(out_file, force, lambda: locus_table(found), lambda: locus_document(axle, found), found.to_xarray)
    if plot is not None:
        from toewright.views.plots_locus import locus_figure

        draw(plot, force, lambda: locus_figure(f"{axle.title}: places of the inner tie rod joint", found))
    if as_json:
        print_json(locus_document(axle, found))
        return
    print_remarks(axle.remarks)
    print_locus(axle, found)
