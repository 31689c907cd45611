"""Points from elsewhere: which axes, unit, side and names they have, concluded only where one reading fits.

A table's axes are found by what the names say: front pivots lie ahead of rear pivots, upper joints above lower ones, ball joints
outboard of pivots, and a corner is some hundred millimetres large. Where more than one reading is left, or the only one would mirror the
car, nothing is guessed.
"""

from __future__ import annotations

import re
from collections.abc import Mapping, Sequence
from dataclasses import dataclass
from itertools import permutations, product

import numpy as np

from toewright.core.types import FloatArray
from toewright.model.axle import POINT_NAMES, Corner, Kind, Side
from toewright.model.errors import InputError
from toewright.model.frames import MM_PER
from toewright.model.pointtable import PointTable

SMALLEST, LARGEST = 150.0, 2500.0
"""Extent of a corner (mm) when the unit is to be found: a span below 25.4, so that one unit fits at most."""

_AXES = tuple(
    tuple((sign, letter) for sign, letter in zip(signs, order, strict=True))
    for order in permutations("xyz")
    for signs in product((1, -1), repeat=3)
)


@dataclass(frozen=True)
class AxisMap:
    """How the car's x, y, z (forward, left, up) come from the table's columns: ``-y,x,z`` means x = -(column y), y = column x."""

    parts: tuple[tuple[int, str], ...]

    @property
    def text(self) -> str:
        """As the option is written."""
        return ",".join(("-" if sign < 0 else "") + letter for sign, letter in self.parts)

    @property
    def matrix(self) -> FloatArray:
        """(3, 3): car = matrix @ table."""
        made = np.zeros((3, 3))
        for row, (sign, letter) in enumerate(self.parts):
            made[row, "xyz".index(letter)] = sign
        return made

    @property
    def mirrors(self) -> bool:
        """True for a left-handed map: right only if the table's own axes are left-handed."""
        return bool(np.linalg.det(self.matrix) < 0.0)


def parse_axes(text: str) -> AxisMap:
    """An axis map from ``-y,x,z``.

    Raises:
        InputError: if it is not three different letters with optional signs.
    """
    parts = [part.strip().lower() for part in text.split(",")]
    if (
        len(parts) != 3
        or not all(re.fullmatch(r"[+-]?[xyz]", part) for part in parts)
        or len({p[-1] for p in parts}) != 3
    ):
        raise InputError(
            f"--axes {text}: is no axis map; write which column gives the car's x, y and z, such as --axes=-y,x,z"
        )
    return AxisMap(tuple((-1 if part[0] == "-" else 1, part[-1]) for part in parts))


def parse_names(pairs: Sequence[str]) -> dict[str, str]:
    """A name map from ``theirs=ours`` entries.

    Raises:
        InputError: if an entry is no pair, or ours is no point name.
    """
    known = {name for names in POINT_NAMES.values() for name in names}
    found: dict[str, str] = {}
    for pair in pairs:
        theirs, separator, ours = (part.strip() for part in pair.partition("="))
        if not separator or not theirs or ours not in known:
            raise InputError(f"--names {pair}: write theirs=ours with ours one of {', '.join(sorted(known))}")
        found[theirs] = ours
    return found


@dataclass(frozen=True)
class Reading:
    """What was concluded of one table.

    Attributes:
        corner: the points in ISO 8855 axes, mm.
        axes: the axis map.
        unit: "mm", "m" or "in".
        origin: (3,) the car's origin in the table's columns and unit.
        sources: our point name to the table's name and (3,) numbers.
        unused: names in the table that were not taken.
        concluded: what was not given but found, in words.
    """

    corner: Corner
    axes: AxisMap
    unit: str
    origin: FloatArray
    sources: Mapping[str, tuple[str, FloatArray]]
    unused: tuple[str, ...]
    concluded: tuple[str, ...]


def _normal(name: str) -> str:
    return re.sub(r"[\s\-.]+", "_", name.strip().lower()).replace("center", "centre")


def _plain(name: str) -> tuple[str, str | None]:
    """A name without a leading or trailing left/right, and that side."""
    text = _normal(name)
    for side in ("left", "right"):
        for pattern in (rf"^{side}_", rf"_{side}$"):
            if re.search(pattern, text):
                return re.sub(pattern, "", text), side
    return text, None


def match_names(
    table: PointTable, names: Mapping[str, str], kind: str | None, side: str | None, file: str
) -> tuple[Kind, dict[str, int], str | None]:
    """Corner kind, our point name to row, and the side that the names state.

    Raises:
        InputError: for missing points, doubled points, or an unknown kind.
    """
    rows: dict[str, int] = {}
    stated: set[str] = set()
    known = {name for group in POINT_NAMES.values() for name in group}
    missing_theirs = [theirs for theirs in names if theirs not in table.names]
    if missing_theirs:
        raise InputError(
            f"{file}: --names {missing_theirs[0]}=...: there is no such point; the table has {', '.join(table.names)}"
        )
    for row, label in enumerate(table.names):
        plain, its_side = _plain(label)
        ours = names.get(label) or (plain if plain in known else None)
        if ours is None or (its_side is not None and side is not None and its_side != side and label not in names):
            continue
        if ours in rows:
            raise InputError(
                f"{file}: {ours} comes from both {table.names[rows[ours]]!r} and {label!r}; say which side is wanted with --side, or use --names"
            )
        if its_side is not None:
            stated.add(its_side)
        rows[ours] = row
    if kind is None:
        kind = "strut" if "strut_top_mount" in rows or "strut_axis_point" in rows else "double-wishbone"
    if kind not in POINT_NAMES:
        raise InputError(f"--type {kind}: no such corner; write double-wishbone or strut")
    missing = [name for name in POINT_NAMES[kind] if name not in rows]
    if missing:
        left = [label for row, label in enumerate(table.names) if row not in rows.values()]
        has = f"; not understood: {', '.join(left)}" if left else ""
        raise InputError(
            f"{file}: {', '.join(missing)} not found for a {kind} corner{has}; name them with --names theirs=ours"
        )
    chosen: Kind = "strut" if kind == "strut" else "double-wishbone"
    return chosen, {name: rows[name] for name in POINT_NAMES[chosen]}, stated.pop() if len(stated) == 1 else None


def _fits(points: Mapping[str, FloatArray], kind: str, sign: float) -> bool:
    """Do the names' words hold for these car coordinates (mm)?"""
    stack = np.array(list(points.values()))
    if not SMALLEST <= float(np.max(np.ptp(stack, axis=0))) <= LARGEST:
        return False
    if any(point[1] * sign <= 0.0 for name, point in points.items() if name != "tie_rod_inner"):
        return False
    directed: list[tuple[FloatArray, int]] = []
    for arm in ("upper", "lower"):
        if f"{arm}_ball_joint" not in points:
            continue
        front, rear = points[f"{arm}_pivot_front"], points[f"{arm}_pivot_rear"]
        directed.append((front - rear, 0))
        directed.append(((points[f"{arm}_ball_joint"] - 0.5 * (front + rear)) * sign, 1))
    top = points["upper_ball_joint" if kind == "double-wishbone" else "strut_top_mount"]
    directed.append((top - points["lower_ball_joint"], 2))
    return all(vector[axis] > 0.0 and int(np.argmax(np.abs(vector))) == axis for vector, axis in directed)


def conclude(
    table: PointTable,
    file: str,
    *,
    loaded_radius: float,
    unit: str | None = None,
    axes: AxisMap | None = None,
    origin: FloatArray | None = None,
    side: Side | None = None,
    names: Mapping[str, str] | None = None,
    kind: str | None = None,
) -> Reading:
    """Find what was not given, or refuse.

    Args:
        table: the rows.
        file: name for messages.
        loaded_radius: mm, to check the height of the wheel centre.
        unit, axes, side, kind: as given; None to be found.
        origin: (3,) the car's origin (road, centre plane) in the table's columns and unit; None for zero.
        names: theirs to ours.

    Raises:
        InputError: where no reading fits, more than one does, or the only one would mirror the car.
    """
    found_kind, rows, stated = match_names(table, names or {}, kind, side, file)
    if unit is not None and table.unit is not None and unit != table.unit:
        raise InputError(f"{file}: the header says {table.unit} but --unit says {unit}; correct one of them")
    if side is not None and stated is not None and side != stated:
        raise InputError(f"{file}: the names say {stated} but --side says {side}; correct one of them")
    concluded = []
    given_unit, given_side = unit or table.unit, side or stated
    raw = {name: table.values[row] for name, row in rows.items()}
    shift = np.zeros(3) if origin is None else np.asarray(origin, dtype=float)
    survivors = [
        (reading, of, which)
        for reading in ([axes] if axes is not None else [AxisMap(parts) for parts in _AXES])
        for of in ([given_unit] if given_unit is not None else list(MM_PER))
        for which in ([given_side] if given_side is not None else ["left", "right"])
        if _fits(_car(raw, reading, of, shift), found_kind, 1.0 if which == "left" else -1.0)
    ]
    everything_given = axes is not None and given_unit is not None and given_side is not None
    if not survivors:
        raise InputError(_nothing_fits(file, everything_given, raw, axes, given_unit, given_side, shift))
    if len(survivors) > 1:
        shown = " | ".join(f"--axes={a.text} --unit {u} --side {s}" for a, u, s in survivors[:4])
        more = f" | and {len(survivors) - 4} more" if len(survivors) > 4 else ""
        raise InputError(f"{file}: more than one reading fits; give the one that is true: {shown}{more}")
    reading, of, which = survivors[0]
    if reading.mirrors and axes is None:
        other = "right" if which == "left" else "left"
        raise InputError(
            f"{file}: read as the {which} corner its axes would be left-handed ({reading.text}), a mirror image: give --axes={reading.text} if "
            f"they are, or --side {other} if these are the {other} corner's points"
        )
    if axes is None:
        concluded.append(f"axes {reading.text} (from what the point names say)")
    if given_unit is None:
        concluded.append(f"unit {of} (a corner is some hundred millimetres large)")
    elif unit is None:
        concluded.append(f"unit {of} (from the header)")
    if side is None:
        concluded.append(f"side {which}" + (" (from the names)" if stated else ""))
    if kind is None:
        concluded.append(f"type {found_kind}")
    points = _car(raw, reading, of, shift)
    height = float(points["wheel_centre"][2])
    if origin is None and abs(height - loaded_radius) > 0.2 * loaded_radius:
        raise InputError(
            f"{file}: wheel_centre would be {height:.1f} mm above z = 0 but the loaded radius is {loaded_radius:.1f} mm, so z = 0 is not the road: "
            "give --origin X,Y,Z, the place of the road under the car's centre line in the table's own columns and unit"
        )
    chosen: Side = "left" if which == "left" else "right"
    used = set(rows.values())
    return Reading(
        corner=Corner(chosen, found_kind, points),
        axes=reading,
        unit=of,
        origin=shift,
        sources={name: (table.names[row], table.values[row]) for name, row in rows.items()},
        unused=tuple(label for row, label in enumerate(table.names) if row not in used),
        concluded=tuple(concluded),
    )


def _car(raw: Mapping[str, FloatArray], axes: AxisMap, unit: str, origin: FloatArray) -> dict[str, FloatArray]:
    matrix = axes.matrix * MM_PER[unit]
    return {name: matrix @ (value - origin) + 0.0 for name, value in raw.items()}


def _nothing_fits(
    file: str,
    everything_given: bool,
    raw: Mapping[str, FloatArray],
    axes: AxisMap | None,
    unit: str | None,
    side: str | None,
    origin: FloatArray,
) -> str:
    if everything_given and axes is not None and unit is not None:
        points = _car(raw, axes, unit, origin)
        spans = np.ptp(np.array(list(points.values())), axis=0)
        return (
            f"{file}: with --axes={axes.text} --unit {unit} --side {side} the corner spans {spans[0]:.4g} x {spans[1]:.4g} x {spans[2]:.4g} mm and its "
            "points are not where their names say (front ahead of rear, upper above lower, ball joints outboard, on their side); "
            "correct the option that is wrong, or the names"
        )
    given = " ".join(
        text
        for text in (
            f"--axes={axes.text}" if axes else "",
            f"--unit {unit}" if unit else "",
            f"--side {side}" if side else "",
        )
        if text
    )
    return (
        f"{file}: no reading of the axes and units{f' with {given}' if given else ''} puts the points where their names say (front ahead of rear, upper above "
        "lower, ball joints outboard); check the names (--names theirs=ours), --side and --origin"
    )
