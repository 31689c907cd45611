"""``toewright compare``: two or more files side by side."""

from __future__ import annotations

from pathlib import Path
from typing import Annotated

import typer

from toewright_cli.console import print_definitions, print_json, print_remarks
from toewright_cli.options import AsJson, Explain, Force, Out, RackList, TravelList, parse_list, parse_rack
from toewright_cli.outputs import check_out, save_results
from toewright_cli.pictures import Plot, check_plot, draw
from toewright_cli.progress import notice_compilation, working


def compare(
    files: Annotated[
        list[Path],
        typer.Argument(
            metavar="A B [C...]",
            help="Hardpoint files (.toml); the first is the one compared with.",
            show_default=False,
        ),
    ],
    rack: RackList = None,
    travel: TravelList = None,
    out_file: Out = None,
    plot: Plot = None,
    force: Force = False,
    as_json: AsJson = False,
    explain: Explain = False,
) -> None:
    """Compare files with the first: hardpoints that moved, settings, design figures, bump-steer maps, roll and turning.

    Positions are shared: over the smallest stroke and the smallest usual wheel travel of all, unless --rack and --travel say so.

    Example: toewright compare old.toml new.toml --plot change.png --out change.csv
    """
    check_out(out_file, force)
    check_plot(plot, None, force)
    from toewright.kinematics.maps import SWEEP_COLUMNS
    from toewright.model.errors import InputError
    from toewright.model.files import load
    from toewright.studies.comparison import AT_LOCK, AT_REST, check_comparable
    from toewright.studies.comparison import compare as solve
    from toewright.views.style import SERIES
    from toewright_cli.show.comparison import comparison_document, print_comparison

    at_travel = parse_list(travel, "--travel")
    axles = [load(file) for file in files]
    check_comparable(axles, len(SERIES))
    racks = [parse_rack(rack, axle) for axle in axles]
    notice_compilation()
    with working(f"comparing {len(axles)} files"):
        compared = solve(axles, racks[0], at_travel)
    for file, maps in zip(files, compared.maps, strict=True):
        if not (maps.status == 0).any():
            raise InputError(f"{file}: none of the positions asked for can be reached; ask for less")
    if out_file is not None:
        with working(f"writing {out_file}"):

            def table() -> tuple[list[str], list[list[object]]]:
                frame = compared.to_dataframe()
                return list(frame.columns), frame.to_numpy(dtype=object).tolist()

            save_results(out_file, force, table, lambda: comparison_document(compared, full=True), compared.to_xarray)
    if plot is not None:
        from toewright.views.plots_comparison import comparison_figure

        draw(plot, force, lambda: comparison_figure(compared))
    if as_json:
        print_json(comparison_document(compared, full=False))
        return
    for axle in axles:
        print_remarks([f"{axle.path}: {remark}" for remark in axle.remarks])
    print_comparison(compared)
    if explain:
        shown = [name for name in SWEEP_COLUMNS if not name.startswith(("wheel_centre_", "contact_"))]
        print_definitions([*shown, *AT_REST, *AT_LOCK])
