"""Points from elsewhere: which axes, unit and side they have, concluded only where one reading fits.

A table's axes are found by what the names say: front pivots lie ahead of rear pivots, upper joints above lower ones, ball joints
outboard of their pivots, a corner is some hundred millimetres large, and the wheel centre is one radius above the road. Where more than
one reading is left, or the only one would mirror the car, nothing is guessed.
"""

from __future__ import annotations

from collections.abc import Mapping, Sequence
from dataclasses import dataclass
from typing import Literal

import numpy as np

from toewright.core.types import FloatArray
from toewright.model.axis_maps import ALL_AXIS_MAPS, AxisMap
from toewright.model.axle import AxleEnd, Corner, Kind, Side
from toewright.model.errors import InputError
from toewright.model.frames import MM_PER
from toewright.model.geometry_checks import LARGEST_SPREAD, SMALLEST_SPREAD
from toewright.model.import_names import match_names
from toewright.model.pointtable import PointTable, refuse_other_units

SMALLEST, LARGEST = 150.0, 2500.0
"""Extent of a corner (mm) where the unit is to be found: they differ by less than 25.4, so at most one unit fits."""

CLEAR = 1.5
"""Where the axes are to be found, the coordinate that a name speaks of must be this many times as large as the other two."""

ROAD_TOLERANCE = 0.2
"""The wheel centre's height may differ from the loaded radius by this share of it."""

UNDER_WHEEL: Literal["under-wheel"] = "under-wheel"
"""Origin by word: x = 0 at the wheel centre, z = 0 one loaded radius below it, y = 0 as in the table."""

Origin = FloatArray | Literal["under-wheel"] | None


@dataclass(frozen=True)
class Reading:
    """What was concluded of one corner's points.

    Attributes:
        corner: the points in ISO 8855 axes, mm.
        axes: the axis map.
        unit: "mm", "m" or "in".
        origin: (3,) the car's origin in the table's columns and unit.
        sources: our point name to the table's name and (3,) numbers.
        unused: names in the table that were not taken.
        axle: the axle that the names state; None where they state none.
        concluded: what was not given but found, in words.
    """

    corner: Corner
    axes: AxisMap
    unit: str
    origin: FloatArray
    sources: Mapping[str, tuple[str, FloatArray]]
    unused: tuple[str, ...]
    concluded: tuple[str, ...]
    axle: AxleEnd | None = None


@dataclass(frozen=True)
class _Known:
    """What was given; None is to be found."""

    kind: Kind
    sides: tuple[Side, ...] | None
    axes: AxisMap | None
    unit: str | None
    origin: Origin
    loaded_radius: float


@dataclass(frozen=True)
class _Candidate:
    """One possible reading; its sides belong to the groups of points in turn."""

    axes: AxisMap
    unit: str
    sides: tuple[Side, ...]

    @property
    def options(self) -> str:
        """Ready to be pasted."""
        side = f" --side {self.sides[0]}" if len(self.sides) == 1 else ""
        return f"--axes={self.axes.text} --unit {self.unit}{side}"


Points = Mapping[str, FloatArray]


def conclude(
    table: PointTable,
    file: str,
    *,
    loaded_radius: float,
    unit: str | None = None,
    axes: AxisMap | None = None,
    origin: Origin = None,
    side: Side | None = None,
    names: Mapping[str, str] | None = None,
    kind: str | None = None,
) -> tuple[Reading, ...]:
    """Read one corner, or both where the names state both sides; find what was not given, or refuse.

    Args:
        table: the rows.
        file: name for messages.
        loaded_radius: mm, to check the height of the wheel centre.
        unit, axes, side, kind: as given; None to be found.
        origin: (3,) the car's origin (road, centre plane) in the table's columns and unit, or "under-wheel"; None for zero.
        names: theirs to ours.

    Returns:
        One reading; two, left and right, where both are in the table and ``side`` is None.

    Raises:
        InputError: where no reading fits, more than one does, or the only one would mirror the car.
    """
    _check_unit_words(table, unit, file)
    matched = match_names(table.names, names or {}, kind, side, file)
    groups = [{name: table.values[row] for name, row in rows.items()} for rows in matched.rows.values()]
    stated = tuple(which for which in matched.rows if which is not None)
    known = _Known(matched.kind, stated or None, axes, unit or table.unit, origin, loaded_radius)
    survivors = _survivors(groups, known)
    if not survivors:
        raise InputError(_nothing_fits(file, groups, known))
    if len(survivors) > 1:
        shown = " | ".join(candidate.options for candidate in survivors[:6])
        more = f" | and {len(survivors) - 6} more" if len(survivors) > 6 else ""
        raise InputError(f"{file}: more than one reading fits; give the one that is true: {shown}{more}")
    found = survivors[0]
    if found.axes.mirrors and axes is None:
        raise InputError(_mirror_sentence(file, found))
    said = _conclusions(found, known, from_header=unit is None and table.unit is not None, side=side, kind=kind)
    readings = []
    for chosen, points, rows in zip(found.sides, groups, matched.rows.values(), strict=True):
        shift = _origin(points, found, known)
        corner = Corner(chosen, matched.kind, _car(points, found, shift))
        height = float(corner.points["wheel_centre"][2])
        if origin is None and abs(height - loaded_radius) > ROAD_TOLERANCE * loaded_radius:
            raise InputError(_road_sentence(file, height, found, known))
        readings.append(
            Reading(
                corner=corner,
                axes=found.axes,
                unit=found.unit,
                origin=shift,
                sources={name: (table.names[row], table.values[row]) for name, row in rows.items()},
                unused=tuple(table.names[row] for row in matched.unused),
                concluded=said,
                axle=matched.axle,
            )
        )
    return tuple(readings)


def _check_unit_words(table: PointTable, unit: str | None, file: str) -> None:
    refuse_other_units(table, file)
    if unit is not None and table.unit is not None and unit != table.unit:
        raise InputError(f"{file}: --unit {unit}: but the header says {table.unit}; correct one of them")
    if unit is None and table.unit is None and table.unit_words:
        raise InputError(
            f"{file}: the header says {table.unit_words[0]!r} where a unit would stand; give the true one: --unit mm, m or in"
        )


def _car(points: Points, candidate: _Candidate, origin: FloatArray) -> dict[str, FloatArray]:
    matrix = candidate.axes.matrix * MM_PER[candidate.unit]
    return {name: matrix @ (value - origin) + 0.0 for name, value in points.items()}


def _origin(points: Points, candidate: _Candidate, known: _Known) -> FloatArray:
    """(3,) the car's origin in the table's columns and unit."""
    if known.origin is None:
        return np.zeros(3)
    if not isinstance(known.origin, str):
        return np.asarray(known.origin, dtype=float)
    place = np.zeros(3)
    centre = points["wheel_centre"]
    (_, forward), _, (sign, up) = candidate.axes.parts
    place["xyz".index(forward)] = centre["xyz".index(forward)]
    place["xyz".index(up)] = centre["xyz".index(up)] - sign * known.loaded_radius / MM_PER[candidate.unit]
    return place


def _directions(points: Points, kind: Kind) -> tuple[FloatArray, FloatArray, FloatArray]:
    """Vectors (n, 3) in the table's columns that point forward, outboard and up by what the names say."""
    forward, outboard = [], []
    for arm in ("upper", "lower"):
        if f"{arm}_ball_joint" in points:
            front, rear = points[f"{arm}_pivot_front"], points[f"{arm}_pivot_rear"]
            forward.append(front - rear)
            outboard.append(points[f"{arm}_ball_joint"] - 0.5 * (front + rear))
    top = points["upper_ball_joint" if kind == "double-wishbone" else "strut_top_mount"]
    return np.array(forward), np.array(outboard), np.array([top - points["lower_ball_joint"]])


def _survivors(groups: Sequence[Points], known: _Known) -> list[_Candidate]:
    """Every reading for which all that the names say of all corners holds."""
    directions = [_directions(points, known.kind) for points in groups]
    sides: list[tuple[Side, ...]] = [known.sides] if known.sides is not None else [("left",), ("right",)]
    candidates = [
        _Candidate(axes, unit, which)
        for axes in ([known.axes] if known.axes is not None else ALL_AXIS_MAPS)
        for which in sides
        if all(
            _speaks_true(vectors, axes, side, clearly=known.axes is None) and _rod_outboard(points, axes, side)
            for vectors, points, side in zip(directions, groups, which, strict=True)
        )
        for unit in ([known.unit] if known.unit is not None else MM_PER)
    ]
    return [
        candidate
        for candidate in candidates
        if all(
            _right_place(points, candidate, side, known) for points, side in zip(groups, candidate.sides, strict=True)
        )
    ]


def _speaks_true(
    directions: tuple[FloatArray, FloatArray, FloatArray], axes: AxisMap, side: Side, *, clearly: bool
) -> bool:
    """Are forward, outboard and up what the names say, and clearly so where the axes are to be found?"""
    outward = 1.0 if side == "left" else -1.0
    for axis, (vectors, sense) in enumerate(zip(directions, (1.0, outward, 1.0), strict=True)):
        turned = vectors @ axes.matrix.T
        along = turned[:, axis] * sense
        if not np.all(along > 0.0):
            return False
        across = np.max(np.abs(np.delete(turned, axis, axis=1)), axis=1)
        if clearly and not np.all(along >= CLEAR * across):
            return False
    return True


def _rod_outboard(points: Points, axes: AxisMap, side: Side) -> bool:
    """Is the tie rod's outer joint outboard of its inner one? A rod may lie across, so it does not tell the axes."""
    rod = axes.matrix @ (points["tie_rod_outer"] - points["tie_rod_inner"])
    return bool(rod[1] > 0.0) if side == "left" else bool(rod[1] < 0.0)


def _right_place(points: Points, candidate: _Candidate, side: Side, known: _Known) -> bool:
    """Is the corner as large as one, on its side, and over the road where axes or unit are to be found?"""
    if known.unit is None and isinstance(known.origin, str):
        return False
    car = _car(points, candidate, _origin(points, candidate, known))
    spread = float(np.max(np.ptp(np.array(list(car.values())), axis=0)))
    low, high = (SMALLEST, LARGEST) if known.unit is None else (SMALLEST_SPREAD, LARGEST_SPREAD)
    if not low <= spread <= high:
        return False
    outward = 1.0 if side == "left" else -1.0
    if any(point[1] * outward <= 0.0 for name, point in car.items() if name != "tie_rod_inner"):
        return False
    if known.origin is None or (known.axes is not None and known.unit is not None):
        return True
    return abs(float(car["wheel_centre"][2]) - known.loaded_radius) <= ROAD_TOLERANCE * known.loaded_radius


def _conclusions(
    found: _Candidate, known: _Known, *, from_header: bool, side: str | None, kind: str | None
) -> tuple[str, ...]:
    """What was not given but found, in words."""
    said = []
    if known.axes is None:
        said.append(f"axes {found.axes.text} (from what the point names say)")
    if known.unit is None:
        said.append(f"unit {found.unit} (from the size of the corner and the wheel's radius)")
    elif from_header:
        said.append(f"unit {found.unit} (from the header)")
    if side is None:
        said.append(f"side {' and '.join(found.sides)} (from the {'names' if known.sides else 'axes'})")
    if kind is None:
        said.append(f"type {known.kind} (from the names)")
    return tuple(said)


def _mirror_sentence(file: str, found: _Candidate) -> str:
    if len(found.sides) > 1:
        which, remedy = "with the sides as named", "exchange left and right in the names if they are exchanged"
    else:
        other = "right" if found.sides[0] == "left" else "left"
        which, remedy = f"as the {found.sides[0]} corner", f"--side {other} if these are the {other} corner's points"
    return (
        f"{file}: read {which}, its axes would be left-handed, a mirror image: give --axes={found.axes.text} if the table's axes are "
        f"left-handed, or {remedy}, or correct the names if upper and lower or front and rear are exchanged"
    )


def _road_sentence(file: str, height: float, found: _Candidate, known: _Known) -> str:
    unit = f" (or --unit, if it is not {found.unit})" if known.unit is None else ""
    return (
        f"{file}: wheel_centre would be {height:.1f} mm above z = 0 but the loaded radius is {known.loaded_radius:.1f} mm, so z = 0 is "
        "not the road: give --origin X,Y,Z, the place of the road on the car's centre line in the table's own columns and unit, or "
        f"--origin {UNDER_WHEEL}{unit}"
    )


_ORDER = (
    "front pivots ahead of rear ones, upper above lower, ball joints outboard of their pivots, the tie rod's outer joint outboard of its "
    "inner one, all on their side"
)


def _nothing_fits(file: str, groups: Sequence[Points], known: _Known) -> str:
    given = [f"--axes={known.axes.text}"] if known.axes else []
    given += [f"--unit {known.unit}"] if known.unit else []
    given += [f"--side {known.sides[0]}"] if known.sides and len(known.sides) == 1 else []
    stated = f" with {' '.join(given)}" if given else ""
    if known.unit is None and isinstance(known.origin, str):
        return f"{file}: --origin {known.origin} leaves the unit open; give --unit mm, m or in"
    if known.axes is not None and known.unit is not None:
        candidate = _Candidate(known.axes, known.unit, ("left",))
        car = _car(groups[0], candidate, _origin(groups[0], candidate, known))
        spans = np.ptp(np.array(list(car.values())), axis=0)
        return (
            f"{file}:{stated} the corner spans {spans[0]:.4g} x {spans[1]:.4g} x {spans[2]:.4g} mm, and its points are not where their "
            f"names say ({_ORDER}); correct the option that is wrong, --origin, or the names"
        )
    return (
        f"{file}: no reading of axes and unit{stated} puts the points clearly where their names say ({_ORDER}, the wheel centre near its "
        "radius above the road); give --axes, --unit and --side, and check --origin and the names"
    )
