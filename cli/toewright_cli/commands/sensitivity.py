"""``toewright sensitivity``: which point is to blame."""

from __future__ import annotations

from typing import Annotated

import typer

from toewright_cli.console import print_json, print_remarks
from toewright_cli.options import AsJson, Force, HardpointFile, Out, parse_number
from toewright_cli.outputs import check_out, save_results
from toewright_cli.pictures import Plot, check_plot, draw
from toewright_cli.progress import notice_compilation, working


def sensitivity(
    file: HardpointFile,
    figure: Annotated[
        list[str] | None,
        typer.Option(
            "--figure", metavar="FIGURE", help="What to look at, such as 'bump_steer travel 25 rack 20'; repeat it."
        ),
    ] = None,
    reach: Annotated[
        float,
        typer.Option(
            "--range", metavar="MM", help="Each coordinate is also moved this far either way and solved again."
        ),
    ] = 1.0,
    as_built: Annotated[
        bool, typer.Option("--as-built", help="Parts keep their dimensions; toe and camber are not set again.")
    ] = False,
    top: Annotated[int, typer.Option("--top", metavar="N", help="Coordinates shown for each figure.")] = 6,
    plot: Plot = None,
    out_file: Out = None,
    force: Force = False,
    as_json: AsJson = False,
) -> None:
    """Rank the hardpoint coordinates by what 1 mm of each does to bump steer, camber, scrub, Ackermann and more.

    Example: toewright sensitivity hardpoints/marten_front.toml --figure "bump_steer travel 25" --plot bars.png
    """
    check_out(out_file, force)
    check_plot(plot, None, force)
    from toewright.model.errors import InputError
    from toewright.model.files import load
    from toewright.studies.sensitivity import parse_figure
    from toewright.studies.sensitivity import sensitivity as solve
    from toewright_cli.show.sensitivity import print_sensitivity, sensitivity_document, sensitivity_table

    if top < 1:
        raise InputError(f"--top {top}: write 1 or more")
    axle = load(file)
    figures = [parse_figure(text, axle) for text in figure] if figure else None
    far = parse_number(reach, "--range") or 0.0
    notice_compilation()
    with working("moving every coordinate"):
        found = solve(axle, figures, reach=far, as_built=as_built)
    if out_file is not None:
        save_results(
            out_file,
            force,
            lambda: sensitivity_table(found),
            lambda: sensitivity_document(axle, found),
            found.to_xarray,
        )
    if plot is not None:
        from toewright.views.plots_sensitivity import sensitivity_figure

        draw(plot, force, lambda: sensitivity_figure(axle.title, found))
    if as_json:
        print_json(sensitivity_document(axle, found))
        return
    print_remarks(axle.remarks)
    print_sensitivity(axle, found, top)
