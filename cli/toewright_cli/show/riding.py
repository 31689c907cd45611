"""A ride on the terminal and as JSON."""

from __future__ import annotations

from typing import TYPE_CHECKING, Any

import numpy as np

from toewright.views.sentences import ride_sentences
from toewright.views.words import axle_words, number, spread_indices
from toewright_cli.console import print_table, say
from toewright_cli.outputs import meanings, source_of

if TYPE_CHECKING:
    from toewright.kinematics.riding import RideMaps
    from toewright.model.axle import Axle
    from toewright.views.toe import ToeScale

ROWS = 11
"""Rows of each compact table, about."""

EXPLAINED = (
    "bump",
    "roll_angle",
    "bump_steer",
    "axle_steer",
    "roll_steer",
    "camber",
    "camber_road_left",
    "track_change",
    "recession_left",
    "roll_centre_y",
    "roll_centre_z",
    "swing_arm_left",
    "bump_steer_rate",
    "anti_dive_left",
    "anti_lift_left",
    "anti_squat_left",
)
"""What ``--explain`` defines."""

_TITLES = {
    "bump": "Bump: both wheels together",
    "roll": "Roll: the body rolls on a flat road",
    "single": "One wheel",
}

_SPARE = ("wheel_travel_right", "recession_left", "recession_right", "roll_centre_y", "track_change")
"""Columns that a narrow terminal leaves out, the first one first."""

_SIGNS = {
    "bump": "bump +, rebound -",
    "roll_angle": "roll: right side down +",
    "axle_steer": "steer to the left +",
    "camber": "camber top outboard +",
    "camber_road": "camber top outboard +",
    "wheel_travel": "wheel travel: bump +",
    "track_change": "track change wider +",
    "recession": "recession rearward +",
    "roll_centre_z": "roll centre (roll c.): height above the road +",
    "roll_centre_y": "its lateral place left +",
    "swing_arm": "swing arm: instant centre inboard +",
    "anti_dive": "anti-dive: braking lifts the nose +",
    "anti_lift": "anti-lift: brakes tail down +, drive nose down +",
    "anti_squat": "anti-squat: driving lifts the tail +",
}
"""Signs of the columns, less their sides."""


def print_ride(axle: Axle, ridden: RideMaps, scale: ToeScale) -> None:
    """The compact table of each motion with its worst place, then the notes."""
    say(axle.title, style="bold")
    rack = "" if axle.rack is None else f"; rack at {number(ridden.rack_travel, 1)} mm"
    say(f"{axle.path}: {axle_words(axle)}{rack}")
    shown, anti = set[str](), False
    for motion in dict.fromkeys(ridden.motion.tolist()):
        rows = np.flatnonzero(ridden.part(motion))
        say("")
        what = _TITLES[motion] if motion != "single" else f"The {ridden.moving_side} wheel alone, the other one stays"
        say(f"{what}; toe change (toe ch.) from zero travel in {scale.words}", style="bold")
        names = _print_motion(axle, ridden, motion, rows, scale)
        shown |= {name.removesuffix("_left").removesuffix("_right") for name in names}
        anti = anti or motion == "bump"
    say(f"Signs: {'; '.join(dict.fromkeys(words for name, words in _SIGNS.items() if name in shown))}.")
    if anti:
        for note in ridden.notes:
            say(note)


def _print_motion(axle: Axle, ridden: RideMaps, motion: str, rows: np.ndarray[Any, Any], scale: ToeScale) -> list[str]:
    """Print a motion's table and its sentences; returns the names of its columns."""
    at = ridden["roll_angle" if motion == "roll" else "bump"][rows]
    zero = int(np.argmin(np.abs(at)))
    picked = [int(rows[k]) for k in reversed(spread_indices(rows.size, ROWS, zero))]
    alike = motion == "bump" and axle.symmetric and abs(ridden.rack_travel) < 1e-9
    columns = _columns(ridden, motion, alike)
    headings = ["roll\n\ndeg" if motion == "roll" else "bump\n\nmm", *(heading for heading, _, _ in columns)]
    table = []
    for i in picked:
        position = float(ridden["roll_angle" if motion == "roll" else "bump"][i])
        state = str(ridden.status_names[i])
        if state != "ok":
            table.append([number(position, 1), state, *[""] * (len(columns) - 1)])
            continue
        cells = []
        for _, name, places in columns:
            value = float(ridden[name][i])
            cells.append(scale.cell(value).rstrip() if places < 0 else number(value, places))
        table.append([number(position, 1), *cells])
    names = ["roll_angle" if motion == "roll" else "bump", *(name for _, name, _ in columns)]
    spare = [names.index(name) for name in _SPARE if name in names]
    print_table(headings, table, right=range(len(headings)), spare=spare)
    for sentence in ride_sentences(ridden, motion, rows, scale, alike):
        say(sentence)
    return names


def _columns(ridden: RideMaps, motion: str, alike: bool) -> list[tuple[str, str, int]]:
    """Heading, column and decimals (negative: a toe number) of a motion's table."""
    sides = ("left",) if alike else ("left", "right")
    which = {"left": "each" if alike else "left", "right": "right"}
    side = ridden.moving_side
    if motion == "roll":
        return [
            *((f"toe ch.\n{s}\n", f"bump_steer_{s}", -1) for s in ("left", "right")),
            ("axle\nsteer\ndeg", "axle_steer", 3),
            *((f"camber\nroad {s[0].upper()}\ndeg", f"camber_road_{s}", 2) for s in ("left", "right")),
            ("travel\nright\nmm", "wheel_travel_right", 1),
            ("roll c.\nheight\nmm", "roll_centre_z", 1),
            ("roll c.\nlateral\nmm", "roll_centre_y", 1),
        ]
    if motion == "single":
        return [
            (f"toe ch.\n{side}\n", f"bump_steer_{side}", -1),
            ("axle\nsteer\ndeg", "axle_steer", 3),
            (f"camber\n{side}\ndeg", f"camber_{side}", 2),
            ("track\n\nmm", "track_change", 2),
            ("reces-\nsion\nmm", f"recession_{side}", 2),
            ("roll c.\nheight\nmm", "roll_centre_z", 1),
            ("roll c.\nlateral\nmm", "roll_centre_y", 1),
        ]
    found = [
        *((f"toe ch.\n{which[s]}\n", f"bump_steer_{s}", -1) for s in sides),
        *((f"camber\n{which[s]}\ndeg", f"camber_{s}", 2) for s in sides),
        ("track\n\nmm", "track_change", 2),
        ("roll c.\nheight\nmm", "roll_centre_z", 1),
    ]
    if alike:
        found += [("reces-\nsion\nmm", "recession_left", 2), ("swing\narm\nmm", "swing_arm_left", 0)]
    for kind, label in (
        ("anti_dive", "anti-\ndive\n%"),
        ("anti_lift", "anti-\nlift\n%"),
        ("anti_squat", "anti-\nsquat\n%"),
    ):
        if np.isfinite(ridden[f"{kind}_left"]).any():
            found.append((label, f"{kind}_left", 0))
    return found


def ride_document(axle: Axle, ridden: RideMaps, scale: ToeScale) -> dict[str, Any]:
    """The summary for ``--json``: all columns and the worst places in words."""
    sentences = {}
    for motion in dict.fromkeys(ridden.motion.tolist()):
        rows = np.flatnonzero(ridden.part(motion))
        alike = motion == "bump" and axle.symmetric and abs(ridden.rack_travel) < 1e-9
        sentences[motion] = ride_sentences(ridden, motion, rows, scale, alike)
    return {
        **source_of(axle),
        "rack_travel": ridden.rack_travel,
        "moving_side": ridden.moving_side,
        "quantities": meanings(name for name in ridden.names if name != "motion"),
        "columns": {name: ridden.column(name) for name in ridden.names},
        "sentences": sentences,
        "notes": list(ridden.notes),
        "remarks": list(axle.remarks),
    }
