"""``toewright shims``: what the workshop can turn and shim."""

from __future__ import annotations

from pathlib import Path
from tempfile import TemporaryDirectory
from typing import Annotated

import typer

from toewright_cli.console import print_json, print_remarks, say
from toewright_cli.options import AsJson, Force, HardpointFile, OneSide, Out, TravelList, parse_list, parse_number
from toewright_cli.outputs import check_out, save_results
from toewright_cli.progress import notice_compilation, working
from toewright_cli.toe import ToeDiameterOption, ToeUnitOption, workshop_scale

SHEETS = (".html", ".pdf")


def shims(
    file: HardpointFile,
    travel: TravelList = None,
    ride_height: Annotated[
        float,
        typer.Option(
            "--ride-height", metavar="MM", help="Wheel travel at which the car stands, against the drawing, bump +."
        ),
    ] = 0.0,
    side: Annotated[OneSide, typer.Option("--side", help="Which corner.")] = OneSide.LEFT,
    toe_unit: ToeUnitOption = None,
    toe_diameter: ToeDiameterOption = None,
    sheet: Annotated[
        Path | None,
        typer.Option("--sheet", metavar="FILE", help="One page for the workshop: .html, or .pdf (with Chromium)."),
    ] = None,
    out_file: Out = None,
    force: Force = False,
    as_json: AsJson = False,
) -> None:
    """Table of what every adjuster that the file declares does to bump steer, toe, camber and caster, step by step.

    Example: toewright shims hardpoints/marten_front.toml --ride-height -4 --toe-unit mm --sheet workshop.html
    """
    check_out(out_file, force)
    check_out(sheet, force, SHEETS, "--sheet")
    from toewright.model.files import load
    from toewright.model.writing import write_text
    from toewright.studies.shims import shims as solve
    from toewright_cli.show.shims import print_shims, shims_document
    from toewright_cli.show.tables import long_table

    axle = load(file)
    scale = workshop_scale(axle, toe_unit, toe_diameter, False)
    travels = parse_list(travel, "--travel")
    height = parse_number(ride_height, "--ride-height") or 0.0
    notice_compilation()
    with working("stepping through the adjusters"):
        found = solve(axle, side=side.value, travel=travels, ride_height=height)
    if out_file is not None:
        save_results(out_file, force, lambda: long_table(found), lambda: shims_document(axle, found), found.to_xarray)
    if sheet is not None:
        from toewright.views.browser import print_pdf
        from toewright.views.shim_sheet import shim_page

        page = shim_page(axle, found, scale)
        if sheet.suffix.lower() == ".html":
            write_text(sheet, page, force=force)
        else:
            with working(f"printing {sheet}"), TemporaryDirectory(prefix="toewright-") as folder:
                (Path(folder) / "sheet.html").write_text(page, encoding="utf-8")
                print_pdf(Path(folder) / "sheet.html", sheet, force=force)
    if as_json:
        print_json(shims_document(axle, found))
        return
    print_remarks(axle.remarks)
    print_shims(axle, found, scale)
    if sheet is not None:
        say(f"Sheet to print: {sheet}")
