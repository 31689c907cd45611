"""A comparison on the terminal and as JSON."""

from __future__ import annotations

from typing import TYPE_CHECKING, Any

import numpy as np

from toewright.views.comparison_rows import change_sentences, point_rows, row_cells, setting_rows, sheet_headings
from toewright.views.words import axle_words, case_labels, number, span_words, spread_indices
from toewright_cli.console import print_table, say
from toewright_cli.outputs import meanings, source_of

if TYPE_CHECKING:
    from collections.abc import Sequence

    from toewright.kinematics.tables import ResultTable
    from toewright.studies.comparison import Comparison, Row

ROWS = 11
"""Rows of the compact curves, about."""

MAP_ROWS, MAP_COLUMNS = 7, 7
"""Wheel and rack travels of a compact map, about."""


def print_comparison(compared: Comparison) -> None:
    """Points and settings that differ, design sheets, curves, and what the whole axle does; each with the change from A."""
    from toewright.studies.comparison import sheet_rows

    axles = compared.axles
    say(f"Comparison of {len(axles)} files; changes are from A", style="bold")
    for label, axle in zip(case_labels(axles), axles, strict=True):
        say(f"{label}\n   {axle.path}: {axle_words(axle)}")
    _print_moved(compared)
    if compared.settings:
        say("")
        say("Settings that differ", style="bold")
        headings = ["", *"ABCDEF"[: len(axles)], "unit, sign"]
        print_table(headings, setting_rows(compared.settings), right=range(1, len(axles) + 1))
    headings = sheet_headings(len(axles))
    for side in ("left",) if compared.mirrored else ("left", "right"):
        whose = "each side (mirror images)" if compared.mirrored else f"{side} side"
        _print_rows(f"Design position, {whose}", headings, sheet_rows(compared, side))
        _print_curve(compared, side)
        for k in range(1, len(axles)):
            _print_change(compared, k, side)
    _print_rows("Whole axle in the design position", headings, compared.rest)
    if compared.lock:
        _print_rows(f"Turning, at rack {number(compared.lock_rack, 1)} mm", headings, compared.lock)
        say(f"Ackermann percent by {compared.turns[0].definition}.")
    for sentence in (*change_sentences(compared), *compared.notes):
        say(sentence)


def _print_moved(compared: Comparison) -> None:
    for letter, moved in zip("BCDEF", compared.moved, strict=False):
        say("")
        if not moved:
            say(f"No hardpoint of {letter} differs from A's.", style="bold")
            continue
        mirrored = "; the right side is the mirror image" if compared.mirrored else ""
        say(f"Hardpoints that moved from A to {letter}, mm{mirrored}", style="bold")
        headings = ["side", "point", "forward\nx +", "left\ny +", "up\nz +", "distance"]
        print_table(headings, point_rows(moved), right=range(2, 6))
    for sentence in compared.kinds:
        say(sentence)


def _print_rows(title: str, headings: Sequence[str], rows: Sequence[Row]) -> None:
    if not rows:
        return
    say("")
    say(title, style="bold")
    print_table(headings, [row_cells(row) for row in rows], right=range(1, len(headings) - 1))


def _print_curve(compared: Comparison, side: str) -> None:
    """Toe change over travel, rack nearest to straight ahead, of all files."""
    first = compared.maps[0]
    if first.wheel_travel.size < 2:
        return
    s, zero = first.side_index(side), int(np.argmin(np.abs(first.rack_travel)))
    middle = int(np.argmin(np.abs(first.wheel_travel)))
    at = f", rack at {number(float(first.rack_travel[zero]), 1)} mm"
    say("")
    say(f"Bump steer, {side} wheel{at}: deg per wheel, toe-in +", style="bold")
    count = len(compared.axles)
    rows = []
    for j in reversed(spread_indices(first.wheel_travel.size, ROWS, middle)):
        values = [float(maps["bump_steer"][s, zero, j]) for maps in compared.maps]
        shown = values if count <= 3 else values[:1]
        rows.append(
            [
                number(float(first.wheel_travel[j]), 1),
                *(number(v, 3) for v in shown),
                *(number(v - values[0], 3) for v in values[1:]),
            ]
        )
    headings = ["wheel travel\nmm, bump +", *sheet_headings(count)[1:-1]]
    print_table(headings, rows, right=range(len(headings)))


def _print_change(compared: Comparison, k: int, side: str) -> None:
    """Change of bump steer of file k from the first over rack and wheel travel."""
    maps = compared.maps[k]
    if maps.rack_travel.size < 2 or maps.wheel_travel.size < 2:
        return
    change = compared.change(k, "bump_steer")[maps.side_index(side)]
    columns, lines = (
        spread_indices(axis.size, count, int(np.argmin(np.abs(axis))))
        for axis, count in ((maps.rack_travel, MAP_COLUMNS), (maps.wheel_travel, MAP_ROWS))
    )
    say("")
    say(f"Change of bump steer from A to {'ABCDEF'[k]}, {side} wheel: deg per wheel, toe-in +", style="bold")
    headings = ["wheel travel\nmm, bump +", *(f"rack mm\n{number(float(maps.rack_travel[i]), 1)}" for i in columns)]
    rows = [
        [number(float(maps.wheel_travel[j]), 1), *(number(float(change[i, j]), 3) for i in columns)]
        for j in reversed(lines)
    ]
    print_table(headings, rows, right=range(len(headings)))
    if not np.all(np.isfinite(change)):
        say("A dash: not reached in one of the two files.")


def comparison_document(compared: Comparison, *, full: bool) -> dict[str, Any]:
    """The comparison for JSON; ``full`` with every quantity over the whole map, its change, and the rides and turns."""
    from toewright.kinematics.maps import SWEEP_COLUMNS
    from toewright.studies.comparison import largest_change, sheet_rows

    first = compared.maps[0]

    def rows(of: Sequence[Row]) -> dict[str, Any]:
        return {row.name: list(row.values) for row in of}

    def largest(k: int) -> dict[str, Any] | None:
        found = largest_change(compared, k)
        keys = ("side", "rack_travel", "wheel_travel", "deg_per_wheel_toe_in")
        return None if found is None else dict(zip(keys, found, strict=True))

    def tables(of: Sequence[ResultTable]) -> list[dict[str, Any]]:
        return [{name: table.column(name) for name in table.names} for table in of]

    names = ("rack_travel", "wheel_travel", *SWEEP_COLUMNS)
    document: dict[str, Any] = {
        "files": [source_of(axle) for axle in compared.axles],
        "compared_with": "the first file",
        "rack": span_words(first.rack_travel.tolist()),
        "travel": span_words(first.wheel_travel.tolist()),
        "quantities": meanings(dict.fromkeys([*names, *(row.name for row in (*compared.rest, *compared.lock))])),
        "moved_points": [
            [{"side": m.side, "point": m.point, "shift_mm": m.shift, "distance_mm": m.distance} for m in moved]
            for moved in compared.moved
        ],
        "mirror_images": compared.mirrored,
        "settings": [{"setting": row.name, "unit": row.unit, "values": list(row.values)} for row in compared.settings],
        "design_position": {side: rows(sheet_rows(compared, side)) for side in ("left", "right")},
        "axle_in_design_position": rows(compared.rest),
        "turning": {"rack_travel": compared.lock_rack, **rows(compared.lock)} if compared.lock else None,
        "largest_change_of_bump_steer": [largest(k) for k in range(1, len(compared.axles))],
        "notes": [*compared.kinds, *compared.notes],
    }
    if full:
        document |= {
            "dims": ["file", "side", "rack_travel", "wheel_travel"],
            "side": list(first.sides),
            "rack_travel": first.rack_travel,
            "wheel_travel": first.wheel_travel,
            "status": [maps.status_names for maps in compared.maps],
            "maps": {name: [maps[name] for maps in compared.maps] for name in SWEEP_COLUMNS},
            "changes": {name: [compared.change(k, name) for k in range(len(compared.axles))] for name in SWEEP_COLUMNS},
            "rides": tables(compared.rides),
            "turns": tables(compared.turns),
        }
    return document
