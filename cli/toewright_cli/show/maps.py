"""The summary of a sweep on the terminal and as JSON, and its full tables for files."""

from __future__ import annotations

from typing import TYPE_CHECKING, Any

from rich.text import Text

from toewright.views.words import axle_words, figure, lock_words, number, span_words, spread_indices, travel_words
from toewright_cli.console import print_table, say
from toewright_cli.outputs import Table, meanings, source_of

if TYPE_CHECKING:
    from collections.abc import Iterator, Sequence

    from toewright.kinematics.maps import CornerMaps, Stop
    from toewright.kinematics.summary import BumpSteer, Place, Range
    from toewright.model.axle import Axle
    from toewright.views.toe import ToeScale

ROWS = 11
"""Wheel-travel rows of the compact table, about."""


def long_table(maps: CornerMaps) -> Table:
    """Header and rows of the long table: one row per pose, numbers as floats, NaN where not ok."""
    from toewright.kinematics.maps import SWEEP_COLUMNS

    def rows() -> Iterator[list[Any]]:
        names = maps.status_names
        for s, side in enumerate(maps.sides):
            for i, at_rack in enumerate(maps.rack_travel.tolist()):
                columns = zip(*(maps[name][s, i].tolist() for name in SWEEP_COLUMNS), strict=True)
                states = names[s, i].tolist()
                for at_travel, status, values in zip(maps.wheel_travel.tolist(), states, columns, strict=True):
                    yield [side, at_rack, at_travel, status, *values]

    return ["side", "rack_travel", "wheel_travel", "status", *SWEEP_COLUMNS], rows()


def maps_document(axle: Axle, maps: CornerMaps) -> dict[str, Any]:
    """Everything, for a JSON file: axes, units, signs and each quantity as nested lists (side, rack_travel, wheel_travel)."""
    from toewright.kinematics.maps import SWEEP_COLUMNS

    return {
        **source_of(axle),
        "dims": ["side", "rack_travel", "wheel_travel"],
        "quantities": meanings(("rack_travel", "wheel_travel", *SWEEP_COLUMNS)),
        "travel_at": maps.travel_at,
        "side": list(maps.sides),
        "rack_travel": maps.rack_travel,
        "wheel_travel": maps.wheel_travel,
        "status": maps.status_names,
        **{name: maps[name] for name in SWEEP_COLUMNS},
        "stops": [_stop_document(stop) for stop in maps.stops],
    }


def summary_document(
    axle: Axle, maps: CornerMaps, tables: Sequence[BumpSteer], ranges: dict[str, dict[str, Range]], scale: ToeScale
) -> dict[str, Any]:
    """The summary for ``--json``: angles in deg, and bump steer in the toe scale beside it."""
    from toewright.kinematics.summary import RANGED, one_side_tells_all

    def bump(values: tuple[float, ...]) -> dict[str, float]:
        return {"deg": sum(values), "toe_scale": scale.value(*values)}

    def place(spot: Place | None) -> dict[str, Any] | None:
        if spot is None:
            return None
        return {"side": spot.side, "rack_travel": spot.rack_travel, "wheel_travel": spot.wheel_travel}

    def worst(spot: Place | None) -> dict[str, Any] | None:
        return None if spot is None else {**(place(spot) or {}), **bump(spot.values)}

    return {
        **source_of(axle),
        "quantities": meanings(("rack_travel", "wheel_travel", "bump_steer", *RANGED)),
        "toe_scale": f"{scale.words}, toe-in +",
        "travel_at": maps.travel_at,
        "rack_travel": maps.rack_travel,
        "wheel_travel": maps.wheel_travel,
        "poses": int(maps.status.size),
        "poses_ok": int((maps.status == 0).sum()),
        "mirror_images": one_side_tells_all(axle, maps),
        "bump_steer": [
            {
                "side": table.side,
                "columns": [
                    {
                        "rack_travel": float(rack),
                        "steer_angle": float(steer),
                        "status": table.status[c],
                        "deg": table.angles[:, c].sum(axis=0),
                        "toe_scale": [scale.value(*pair) for pair in table.angles[:, c].T.tolist()],
                    }
                    for c, (rack, steer) in enumerate(zip(table.racks, table.steer, strict=True))
                ],
                "worst": worst(table.worst),
                "worst_straight_ahead": worst(table.worst_straight),
            }
            for table in tables
        ],
        "ranges": {
            side: {
                name: {
                    "design": found.design,
                    "least": {**(place(found.least) or {}), "value": found.least.value},
                    "greatest": {**(place(found.greatest) or {}), "value": found.greatest.value},
                }
                for name, found in of_side.items()
            }
            for side, of_side in ranges.items()
        },
        "stops": [_stop_document(stop) for stop in maps.stops],
        "remarks": list(axle.remarks),
    }


def _stop_document(stop: Stop) -> dict[str, Any]:
    return {
        "side": stop.side,
        "status": stop.status,
        "along": stop.along,
        "rack_travel": stop.rack_travel,
        "wheel_travel": stop.wheel_travel,
        "sentence": stop.sentence,
    }


def print_summary(
    axle: Axle, maps: CornerMaps, tables: Sequence[BumpSteer], ranges: dict[str, dict[str, Range]], scale: ToeScale
) -> None:
    """The compact tables of a sweep: bump steer, the worst place, ranges, and where the linkage stops."""
    from toewright.kinematics.summary import one_side_tells_all

    one = one_side_tells_all(axle, maps)
    say(axle.title, style="bold")
    say(f"{axle.path}: {axle_words(axle)}")
    rack = "" if axle.rack is None else f"rack {span_words(maps.rack_travel.tolist())}, "
    solved, asked = int((maps.status == 0).sum()), int(maps.status.size)
    reached = "all reached" if solved == asked else f"{solved} reached, {asked - solved} not"
    at = maps.travel_at.replace("-", " ")
    say(f"{rack}wheel travel {span_words(maps.wheel_travel.tolist())}, taken at the {at}: {asked} poses, {reached}")
    shown = tables[:1] if one and not scale.total else tables
    for table in shown:
        say("")
        whose = "both wheels together" if table.side == "both" else f"{table.side} wheel"
        say(f"Bump steer, {whose}: change of toe from zero wheel travel, in {scale.words}", style="bold")
        _print_bump_steer(axle, table, scale)
    if one and not scale.total:
        say(_mirror_words(axle))
    _print_worst(axle, shown, scale, one)
    _print_ranges(axle, {side: ranges[side] for side in maps.sides[: 1 if one else 2]})
    _print_stops([stop for stop in maps.stops if not one or stop.side == "left"], one)


def _mirror_words(axle: Axle) -> str:
    if axle.rack is None:
        return "The right wheel does the same: the sides are mirror images."
    return "The right wheel does the same with the rack the other way: the sides are mirror images."


def _print_bump_steer(axle: Axle, table: BumpSteer, scale: ToeScale) -> None:
    headings = ["wheel travel\nmm, bump +"]
    for rack, steer in zip(table.racks.tolist(), table.steer.tolist(), strict=True):
        if axle.rack is None:
            headings.append("toe change")
            continue
        angle = f"steer {number(abs(steer), 1, sign=False)} deg" if steer == steer else ""
        headings.append(f"rack {number(rack, 1)} mm\n{lock_words(steer, rack, axle)}\n{angle}")
    zero = int(abs(table.travels).argmin())
    rows: list[list[str | Text]] = []
    for j in reversed(spread_indices(table.travels.size, ROWS, zero)):
        at_travel = float(table.travels[j])
        cells: list[str | Text] = [number(at_travel, 1)]
        for c, rack in enumerate(table.racks.tolist()):
            state = str(table.status[c, j])
            text = scale.cell(*table.angles[:, c, j].tolist()) if state == "ok" else f"{state} "
            spot = table.worst
            here = spot is not None and (spot.rack_travel, spot.wheel_travel) == (rack, at_travel)
            cells.append(Text(text, style="bold" if here else ""))
        rows.append(cells)
    print_table(headings, rows, right=range(len(headings)))


def _place_words(axle: Axle, place: Place) -> str:
    wheel = "both wheels" if place.side == "both" else f"{place.side} wheel"
    rack = "" if axle.rack is None else f"rack {number(place.rack_travel, 1)} mm, "
    return f"{wheel} at {rack}wheel travel {travel_words(place.wheel_travel)}"


def _print_worst(axle: Axle, tables: Sequence[BumpSteer], scale: ToeScale, one: bool) -> None:
    worst = [table.worst for table in tables if table.worst is not None]
    if not worst:
        return
    place = max(worst, key=lambda spot: abs(spot.value))
    mirrored = ""
    if one and place.side != "both" and place.rack_travel:
        mirrored = f", and the right wheel at rack {number(-place.rack_travel, 1)} mm"
    say(f"Worst place: {scale.text(*place.values)}: {_place_words(axle, place)}{mirrored}.")
    straight = [table.worst_straight for table in tables if table.worst_straight is not None]
    if straight and axle.rack is not None:
        ahead = max(straight, key=lambda spot: abs(spot.value))
        say(f"Worst straight ahead: {scale.text(*ahead.values)}: {_place_words(axle, ahead)}.")


def _print_ranges(axle: Axle, ranges: dict[str, dict[str, Range]]) -> None:
    from toewright.model.glossary import quantity

    signs: dict[str, str] = {}
    at, where = ("rack/travel", "rack / wheel travel") if axle.rack is not None else ("travel", "wheel travel")
    for side, of_side in ranges.items():
        if not of_side:
            continue
        rows = []
        for name, found in of_side.items():
            entry = quantity(name)
            signs[entry.label] = entry.sign
            row = [f"{entry.label}, {entry.unit}", "-" if found.design is None else figure(name, found.design)[0]]
            for place in (found.least, found.greatest):
                rack = f"{place.rack_travel:+g}/" if axle.rack is not None else ""
                row += [figure(name, place.value)[0], f"{rack}{place.wheel_travel:+g}"]
            rows.append(row)
        say("")
        say(f"Over the whole map, {side} wheel; places are {where} in mm", style="bold")
        print_table(["", "design", "least", at, "greatest", at], rows, right=range(1, 6))
    if signs:
        say("Signs: " + "; ".join(f"{label}: {sign}" for label, sign in signs.items()) + ".")


def _print_stops(stops: Sequence[Stop], one: bool) -> None:
    if not stops:
        say("The linkage does not stop anywhere in this range.")
        return
    say(f"The linkage stops inside this range{', and on the right in the mirror image' if one else ''}:")
    for stop in stops:
        say(f"- {stop.sentence}")
