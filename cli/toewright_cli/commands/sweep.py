"""``toewright sweep``: one wheel at a time, over rack travel and wheel travel together."""

from __future__ import annotations

from typing import TYPE_CHECKING, Any

from toewright_cli.console import out, print_definitions, print_json, print_remarks, table
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
)
from toewright_cli.outputs import cells, check_out, save_results
from toewright_cli.progress import notice_compilation
from toewright_cli.toe import ToeDiameterOption, ToeScale, ToeTotalOption, ToeUnit, ToeUnitOption, toe_scale

if TYPE_CHECKING:
    from collections.abc import Iterator

    from toewright.kinematics.maps import CornerMaps
    from toewright.kinematics.summary import Place, SideSummary
    from toewright.model.axle import Axle


def sweep(
    file: HardpointFile,
    rack: RackList = None,
    travel: TravelList = None,
    travel_at: TravelAtOption = TravelAt.WHEEL_CENTRE,
    side: SideOption = SideChoice.BOTH,
    toe_unit: ToeUnitOption = ToeUnit.DEG,
    toe_diameter: ToeDiameterOption = None,
    toe_total: ToeTotalOption = False,
    out_file: Out = None,
    force: Force = False,
    as_json: AsJson = False,
    explain: Explain = False,
) -> None:
    """Map every corner quantity over rack travel and wheel travel; print bump steer at a glance.

    Example: toewright sweep hardpoints/marten_front.toml --travel=-25:25:11 --toe-unit mm --out map.csv
    """
    check_out(out_file, force)
    at_rack, at_travel = parse_list(rack, "--rack"), parse_list(travel, "--travel")
    from toewright.kinematics.summary import summarise
    from toewright.kinematics.sweep import sweep as solve
    from toewright.model.errors import InputError
    from toewright.model.files import load

    axle = load(file)
    if at_rack is not None and axle.rack is None and any(at_rack):
        raise InputError(f"{file}: has no [rack], so --rack can only be 0; leave --rack out, or add a [rack] table")
    scale = toe_scale(axle, toe_unit, toe_diameter, toe_total)
    if toe_total and len(side.sides) == 1:
        raise InputError(f"--toe-total: needs both wheels, but --side is {side.value}; leave one of them out")
    notice_compilation()
    maps = solve(axle, at_rack, at_travel, travel_at=travel_at.value, sides=side.sides)
    if not (maps.status == 0).any():
        why = maps.stops[0].sentence if maps.stops else "the linkage is at its toggle in the design position"
        raise InputError(f"{file}: no pose of the request can be reached: {why}; ask for less")
    if out_file is not None:
        save_results(out_file, force, lambda: long_table(maps), lambda: document(maps), maps.to_xarray)
    if as_json:
        print_json(summary_document(axle, maps, summarise(maps), scale))
        return
    print_remarks(axle.remarks)
    print_summary(axle, maps, summarise(maps), scale)
    if out_file is not None:
        out().print(f"All results: {out_file}", markup=False, soft_wrap=True)
    if explain:
        from toewright.kinematics.summary import RANGED

        print_definitions(["rack_travel", "wheel_travel", "toe_in", "bump_steer", *RANGED])


def long_table(maps: CornerMaps) -> tuple[list[str], Iterator[list[str]]]:
    """Header and rows of the long table: one row per pose."""
    from toewright.kinematics.maps import SWEEP_COLUMNS

    def rows() -> Iterator[list[str]]:
        names = maps.status_names
        stack = [maps[name] for name in SWEEP_COLUMNS]
        for s, side in enumerate(maps.sides):
            for i, at_rack in enumerate(maps.rack_travel):
                for j, at_travel in enumerate(maps.wheel_travel):
                    values = [column[s, i, j] for column in stack]
                    yield [side, repr(float(at_rack)), repr(float(at_travel)), str(names[s, i, j]), *cells(values)]

    return ["side", "rack_travel", "wheel_travel", "status", *SWEEP_COLUMNS], rows()


def document(maps: CornerMaps) -> dict[str, Any]:
    """Everything, for JSON: axes, units and each quantity as nested lists (side, rack_travel, wheel_travel)."""
    from toewright.kinematics.maps import SWEEP_COLUMNS
    from toewright.model.glossary import quantity

    return {
        "dims": ["side", "rack_travel", "wheel_travel"],
        "side": list(maps.sides),
        "rack_travel": maps.rack_travel,
        "wheel_travel": maps.wheel_travel,
        "travel_at": maps.travel_at,
        "units": {name: quantity(name).unit for name in ("rack_travel", "wheel_travel", *SWEEP_COLUMNS)},
        "signs": {name: quantity(name).sign for name in ("rack_travel", "wheel_travel", *SWEEP_COLUMNS)},
        "status": maps.status_names,
        **{name: maps[name] for name in SWEEP_COLUMNS},
        "stops": [stop.sentence for stop in maps.stops],
    }


def place_words(place: Place) -> str:
    """Where a pose is, in words."""
    motion = " bump" if place.wheel_travel > 0 else " rebound" if place.wheel_travel < 0 else ""
    return f"{place.side} wheel, rack {place.rack_travel:+.1f} mm, wheel travel {place.wheel_travel:+.1f} mm{motion}"


def steer_words(degrees: float) -> str:
    """A steer angle as people say it."""
    if degrees != degrees:
        return "no pose"
    return f"{abs(degrees):.1f} deg {'left' if degrees > 0 else 'right' if degrees < 0 else ''}".strip()


def summary_document(
    axle: Axle, maps: CornerMaps, summaries: tuple[SideSummary, ...], scale: ToeScale
) -> dict[str, Any]:
    """The summary for ``--json``: angles in deg whatever --toe-unit says, with the toe scale's words beside it."""

    def place(spot: Place | None) -> dict[str, Any] | None:
        if spot is None:
            return None
        return {
            "side": spot.side,
            "rack_travel": spot.rack_travel,
            "wheel_travel": spot.wheel_travel,
            "value": spot.value,
        }

    return {
        "title": axle.title,
        "sha256": axle.sha256,
        "travel_at": maps.travel_at,
        "poses": int(maps.status.size),
        "poses_ok": int((maps.status == 0).sum()),
        "units": {
            "rack_travel": "mm",
            "wheel_travel": "mm",
            "bump_steer": "deg per wheel, toe-in +",
            "steer_angle": "deg, left +",
        },
        "toe_scale": scale.words,
        "sides": [
            {
                "side": s.side,
                "rack_travel": s.racks,
                "steer_angle": s.steer,
                "wheel_travel": s.travels,
                "bump_steer": s.bump_steer.T,
                "bump_steer_in_toe_scale": None
                if scale.total
                else [[scale.value(v) for v in row] for row in s.bump_steer.T],
                "worst_bump_steer": place(s.worst),
                "ranges": {
                    name: {"least": place(low), "greatest": place(high)} for name, (low, high) in s.ranges.items()
                },
            }
            for s in summaries
        ],
        "stops": [stop.sentence for stop in maps.stops],
        "remarks": list(axle.remarks),
    }


def print_summary(axle: Axle, maps: CornerMaps, summaries: tuple[SideSummary, ...], scale: ToeScale) -> None:
    """The compact tables of a sweep."""
    from toewright.kinematics.summary import mirror_images

    console = out()
    console.print(f"[bold]{axle.title}[/bold]" if "[" not in axle.title else axle.title, markup="[" not in axle.title)
    solved, asked = int((maps.status == 0).sum()), int(maps.status.size)
    reached = "all reached" if solved == asked else f"{solved} reached"
    console.print(
        f"rack {_span(maps.rack_travel)}, wheel travel {_span(maps.wheel_travel)} at the {maps.travel_at.replace('-', ' ')}; "
        f"{asked} poses, {reached}",
        markup=False,
        soft_wrap=True,
    )
    mirrored = mirror_images(maps, axle.symmetric)
    if scale.total:
        _print_total(maps, scale)
    else:
        for summary in summaries[:1] if mirrored else summaries:
            _print_side(summary, scale)
    if mirrored and not scale.total:
        console.print("The right wheel mirrors the left with the rack the other way.", markup=False)
    worst = [s.worst for s in (summaries[:1] if mirrored else summaries) if s.worst is not None]
    if worst and not scale.total:
        place = max(worst, key=lambda p: abs(p.value))
        console.print(
            f"Worst bump steer: {scale.text(place.value)}, at {place_words(place)}.", markup=False, soft_wrap=True
        )
    _print_ranges(summaries[:1] if mirrored else summaries)
    if maps.stops:
        console.print("The linkage stops inside the request:", markup=False)
        for stop in maps.stops:
            console.print(f"  {stop.sentence}", markup=False, soft_wrap=True)
    else:
        console.print("The linkage does not stop anywhere in this range.", markup=False)


def _span(values: Any) -> str:
    if len(values) == 1:
        return f"{values[0]:+g} mm"
    return f"{values[0]:+g} to {values[-1]:+g} mm in {len(values)}"


def _print_side(summary: SideSummary, scale: ToeScale) -> None:
    headings = ["wheel travel (mm)"]
    for at_rack, angle in zip(summary.racks, summary.steer, strict=True):
        headings.append(f"rack {at_rack:+.1f} mm\nwheel {steer_words(float(angle))}")
    rows = []
    for at_travel, values in reversed(list(zip(summary.travels, summary.bump_steer, strict=True))):
        word = " bump" if at_travel > 0 else " rebound" if at_travel < 0 else ""
        rows.append([f"{at_travel:+7.1f}{word}", *(scale.cell(float(v)) for v in values)])
    out().print(
        f"\nBump steer, {summary.side} wheel: toe change from zero wheel travel at the same rack ({scale.words})",
        markup=False,
        soft_wrap=True,
    )
    out().print(table(headings, rows))


def _print_total(maps: CornerMaps, scale: ToeScale) -> None:
    import numpy as np

    from toewright.kinematics.summary import ROWS, spread_indices

    total = maps["bump_steer"].sum(axis=0)
    rack_zero, travel_zero = (int(np.argmin(np.abs(axis))) for axis in (maps.rack_travel, maps.wheel_travel))
    columns = sorted({0, rack_zero, maps.rack_travel.size - 1})
    lines = spread_indices(maps.wheel_travel.size, ROWS, travel_zero)
    headings = ["wheel travel, both (mm)", *(f"rack {maps.rack_travel[i]:+.1f} mm" for i in columns)]
    rows = [
        [f"{maps.wheel_travel[j]:+7.1f}", *(scale.cell(float(total[i, j])) for i in columns)] for j in reversed(lines)
    ]
    out().print(
        f"\nBump steer, both wheels together: toe change from zero wheel travel at the same rack ({scale.words})",
        markup=False,
        soft_wrap=True,
    )
    out().print(table(headings, rows))
    if np.isfinite(total).any():
        i, j = np.unravel_index(int(np.nanargmax(np.abs(total))), total.shape)
        out().print(
            f"Worst bump steer: {scale.text(float(total[i, j]))}, at rack {maps.rack_travel[i]:+.1f} mm, "
            f"wheel travel {maps.wheel_travel[j]:+.1f} mm.",
            markup=False,
            soft_wrap=True,
        )


def _print_ranges(summaries: tuple[SideSummary, ...]) -> None:
    from toewright.model.glossary import quantity

    for summary in summaries:
        rows = []
        for name, (low, high) in summary.ranges.items():
            entry = quantity(name)
            ends = (
                f"{place.value:+.2f} at {place.rack_travel:+.0f} / {place.wheel_travel:+.0f}" for place in (low, high)
            )
            rows.append([f"{entry.label} ({entry.sign})", entry.unit, *ends])
        out().print(
            f"\nOver the whole map, {summary.side} wheel, at rack / wheel travel in mm", markup=False, soft_wrap=True
        )
        headings = ["figure", "unit", "least", "greatest"]
        out().print(table(headings, rows, left=2))
