"""``toewright tolerance``: what build scatter costs."""

from __future__ import annotations

from typing import TYPE_CHECKING, Annotated

import typer

from toewright.views.toe import ToeUnit
from toewright_cli.console import print_json, print_remarks, warn
from toewright_cli.options import AsJson, Force, HardpointFile, Out, TravelList, parse_list, parse_number
from toewright_cli.outputs import check_out, save_results
from toewright_cli.pictures import Plot, check_plot, draw
from toewright_cli.progress import notice_compilation, working
from toewright_cli.toe import ToeDiameterOption, ToeUnitOption, toe_scale

if TYPE_CHECKING:
    import xarray as xr

INTERRUPTED = 130


def tolerance(
    file: HardpointFile,
    builds: Annotated[int, typer.Option("--builds", metavar="N", help="How many cars are built.")] = 100_000,
    seed: Annotated[int, typer.Option("--seed", metavar="N", help="The same seed gives the same builds.")] = 1,
    rack: Annotated[float, typer.Option("--rack", metavar="MM", help="Rack travel in mm, + to the left.")] = 0.0,
    travel: TravelList = None,
    toe_unit: ToeUnitOption = None,
    toe_diameter: ToeDiameterOption = None,
    plot: Plot = None,
    out_file: Out = None,
    force: Force = False,
    as_json: AsJson = False,
) -> None:
    """Build the axle many times with the scatter that its file declares: bands of bump steer, yield of targets, who is to blame.

    Ctrl-C ends it early and shows what is done.

    Example: toewright tolerance hardpoints/marten_front.toml --builds 1000000 --plot bands.png
    """
    check_out(out_file, force)
    check_plot(plot, None, force)
    from toewright.model.errors import InputError
    from toewright.model.files import load
    from toewright.studies.tolerance import tolerance as solve
    from toewright_cli.show.tolerance import print_tolerance, tolerance_document, tolerance_table

    axle = load(file)
    scale = toe_scale(axle, toe_unit or ToeUnit.DEG, toe_diameter, False)
    travels = parse_list(travel, "--travel")
    at_rack = parse_number(rack, "--rack") or 0.0
    if at_rack and axle.rack is None:
        raise InputError(
            f"{file}: has no [rack], so --rack {at_rack:g} means nothing; leave --rack out, or add a [rack] table"
        )
    if seed < 0:
        raise InputError(f"--seed {seed}: write 0 or more")
    notice_compilation()
    with working(f"building {builds:,} cars", builds) as advance:
        found = solve(axle, builds, seed=seed, rack=at_rack, travel=travels, progress=advance)
    if found.stopped:
        warn(f"stopped: the results are of the first {found.builds:,} builds")

    def dataset() -> xr.Dataset:
        import xarray as xr

        deg = {"units": "deg", "long_name": "bump steer per wheel", "sign": "toe-in +"}
        data = {
            "drawn": (("side", "wheel_travel"), found.nominal, deg),
            "bands": (("side", "wheel_travel", "percent"), found.bands, deg),
            "difference": (("wheel_travel", "percent"), found.difference, deg),
            "deviation": (("side", "wheel_travel"), found.deviation, deg),
        }
        coords = {
            "side": ["left", "right"],
            "wheel_travel": ("wheel_travel", found.travel, {"units": "mm"}),
            "percent": [5.0, 50.0, 95.0],
        }
        return xr.Dataset(data, coords=coords, attrs={"builds": found.builds, "seed": found.seed})

    if out_file is not None:
        save_results(out_file, force, lambda: tolerance_table(found), lambda: tolerance_document(axle, found), dataset)
    if plot is not None:
        from toewright.views.plots_tolerance import tolerance_figure

        draw(plot, force, lambda: tolerance_figure(axle.title, found))
    if as_json:
        print_json(tolerance_document(axle, found))
    else:
        print_remarks(axle.remarks)
        print_tolerance(axle, found, scale)
    if found.stopped:
        raise typer.Exit(INTERRUPTED)
