"""``toewright sweep``: one wheel at a time, over rack travel and wheel travel together."""

from __future__ import annotations

from typing import TYPE_CHECKING

from toewright.views.toe import ToeUnit
from toewright_cli.console import print_definitions, print_json, print_remarks, warn
from toewright_cli.options import (
    AsJson,
    Explain,
    Force,
    HardpointFile,
    Out,
    RackList,
    SideChoice,
    SideOption,
    TravelAt,
    TravelAtOption,
    TravelList,
    parse_list,
    parse_rack,
)
from toewright_cli.outputs import check_out, save_results
from toewright_cli.pictures import FINE, Overlay, Plot, check_plot, draw
from toewright_cli.progress import notice_compilation, working
from toewright_cli.toe import ToeDiameterOption, ToeTotalOption, ToeUnitOption, toe_scale

if TYPE_CHECKING:
    from toewright.kinematics.maps import CornerMaps
    from toewright.model.axle import Axle

MOST_POSES = 1_000_000
"""Poses of one sweep; each takes about a kilobyte while it is worked on."""


def sweep(
    file: HardpointFile,
    rack: RackList = None,
    travel: TravelList = None,
    travel_at: TravelAtOption = TravelAt.WHEEL_CENTRE,
    side: SideOption = SideChoice.BOTH,
    toe_unit: ToeUnitOption = None,
    toe_diameter: ToeDiameterOption = None,
    toe_total: ToeTotalOption = False,
    out_file: Out = None,
    plot: Plot = None,
    overlay: Overlay = None,
    force: Force = False,
    as_json: AsJson = False,
    explain: Explain = False,
) -> None:
    """Map every corner quantity over rack travel and wheel travel; print bump steer and ranges at a glance.

    Example: toewright sweep hardpoints/marten_front.toml --travel -25:25:11 --toe-unit mm --out map.csv
    """
    check_out(out_file, force)
    overlaid = check_plot(plot, overlay, force)
    from toewright.kinematics.summary import RANGED, bump_steer, ranges
    from toewright.kinematics.sweep import default_rack, default_travel
    from toewright.kinematics.sweep import sweep as solve
    from toewright.model.errors import InputError
    from toewright.model.files import load
    from toewright_cli.show.maps import long_table, maps_document, print_summary, summary_document

    at_travel = parse_list(travel, "--travel")
    axle = load(file)
    at_rack = parse_rack(rack, axle)
    scale = toe_scale(axle, toe_unit or ToeUnit.DEG, toe_diameter, toe_total)
    if toe_total and side is not SideChoice.BOTH:
        raise InputError(f"--toe-total: is the sum of both wheels, but --side is {side.value}; leave one of them out")
    racks = default_rack(axle) if at_rack is None else at_rack
    travels = default_travel(axle) if at_travel is None else at_travel
    poses = len(racks) * len(travels) * len(side.sides)
    if poses > MOST_POSES:
        raise InputError(
            f"--rack and --travel: {len(racks)} by {len(travels)} positions on {len(side.sides)} side(s) are {poses:,} poses, "
            f"more than {MOST_POSES:,}; ask for fewer"
        )
    if axle.rack is not None and max(abs(racks[0]), abs(racks[-1])) > axle.rack.stroke * (1.0 + 1e-9):
        warn(f"remark: --rack goes beyond the rack's stroke of {axle.rack.stroke:g} mm each way")
    notice_compilation()
    with working(f"solving {poses:,} poses"):
        maps = solve(axle, racks, travels, travel_at=travel_at.value, sides=side.sides)
    if not (maps.status == 0).any():
        why = maps.stops[0].sentence if maps.stops else "the linkage is locked in the design position"
        raise InputError(f"{file}: none of the positions asked for can be reached: {why}; ask for less travel")
    if out_file is not None:
        with working(f"writing {out_file}"):
            save_results(out_file, force, lambda: long_table(maps), lambda: maps_document(axle, maps), maps.to_xarray)
    if plot is not None:
        from toewright.views.plots_sweep import sweep_figure

        fine = default_travel(axle, FINE) if at_travel is None else at_travel

        def picture(of: Axle) -> CornerMaps:
            at = default_rack(of, FINE) if at_rack is None or of.rack is None else at_rack
            return solve(of, at, fine, travel_at=travel_at.value, sides=side.sides)

        shown = [axle, *overlaid]
        draw(plot, force, lambda: sweep_figure(shown, [picture(of) for of in shown]))
    tables = bump_steer(maps, total=toe_total)
    of_sides = {name: ranges(maps, name) for name in maps.sides}
    if as_json:
        print_json(summary_document(axle, maps, tables, of_sides, scale))
        return
    print_remarks(axle.remarks)
    print_summary(axle, maps, tables, of_sides, scale)
    if explain:
        print_definitions(["rack_travel", "wheel_travel", "toe_in", "bump_steer", *RANGED])
