"""Two or more files side by side: hardpoints that moved, settings, design figures, curves and maps as differences from the first."""

from __future__ import annotations

from collections.abc import Mapping, Sequence
from dataclasses import dataclass
from typing import TYPE_CHECKING, Any

import numpy as np
from numpy.typing import ArrayLike

from toewright.core.types import FloatArray
from toewright.kinematics.maps import SWEEP_COLUMNS, CornerMaps
from toewright.kinematics.riding import RideMaps, ride
from toewright.kinematics.sheet import SHEET_COLUMNS, CornerSheet, design_sheets
from toewright.kinematics.summary import SAME, mirror_images
from toewright.kinematics.sweep import check_positions, default_rack, default_travel, sweep
from toewright.kinematics.turning import TurnMaps, turn
from toewright.model.axle import POINT_NAMES, Axle
from toewright.model.errors import InputError

if TYPE_CHECKING:
    import pandas as pd
    import xarray as xr

AT_REST = (
    "roll_centre_z",
    "roll_steer",
    "swing_arm_left",
    "swing_arm_right",
    "anti_dive_left",
    "anti_dive_right",
    "anti_lift_left",
    "anti_lift_right",
    "anti_squat_left",
    "anti_squat_right",
)
"""Figures of the whole axle in its design position."""

AT_LOCK = ("mean_steer", "ackermann_error", "ackermann_percent", "turn_radius", "kerb_circle", "wall_circle")
"""Figures of the whole axle at the largest rack travel that is compared."""

SETTINGS: Mapping[str, Mapping[str, str]] = {
    "vehicle": {
        "axle": "",
        "wheelbase": "mm",
        "cg_height": "mm",
        "brake_share": "of 1",
        "brakes": "",
        "drive": "",
        "front_overhang": "mm",
        "body_width": "mm",
    },
    "wheel": {"loaded_radius": "mm", "tyre_width": "mm", "rim_diameter": "mm", "rim_width": "mm"},
    "setup": {"toe_in": "deg, each wheel, toe-in +", "camber": "deg, top outboard +"},
    "rack": {"stroke": "mm each way", "travel_per_turn": "mm"},
}
"""Settings of the file that are compared, by table and key, with unit and sign."""


@dataclass(frozen=True)
class MovedPoint:
    """A hardpoint that is elsewhere.

    Attributes:
        side, point: which.
        shift: (3,) mm, x forward, y left, z up: place in this file minus place in the first.
    """

    side: str
    point: str
    shift: FloatArray

    @property
    def distance(self) -> float:
        """How far, mm."""
        return float(np.linalg.norm(self.shift))


@dataclass(frozen=True)
class Row:
    """One thing in all files.

    Attributes:
        name: quantity of the glossary, or ``table.key`` of a setting.
        unit: with the sign in words, for settings; empty for quantities, whose unit the glossary knows.
        values: one for each file; None where a file does not say.
    """

    name: str
    unit: str
    values: tuple[Any, ...]


@dataclass(frozen=True)
class Comparison:
    """Files side by side; the first is what the others are compared with.

    Attributes:
        axles: the files.
        moved: for each file after the first, the hardpoints that are elsewhere; of mirror images the left ones only.
        kinds: what can't be compared point by point, one sentence each.
        settings: settings that are not the same in all files.
        sheets: design-position sheets, left and right, of each file.
        maps: sweeps over the same positions.
        rides: bump and roll over the same positions, rack at 0.
        turns: turns over the same rack positions; empty where a file can't be turned.
        rest, lock: figures of the whole axle in the design position and at ``lock_rack``.
        lock_rack: mm; 0 without turns.
        notes: what was left out and why.
    """

    axles: tuple[Axle, ...]
    moved: tuple[tuple[MovedPoint, ...], ...]
    kinds: tuple[str, ...]
    settings: tuple[Row, ...]
    sheets: tuple[tuple[CornerSheet, CornerSheet], ...]
    maps: tuple[CornerMaps, ...]
    rides: tuple[RideMaps, ...]
    turns: tuple[TurnMaps, ...]
    rest: tuple[Row, ...]
    lock: tuple[Row, ...]
    lock_rack: float
    notes: tuple[str, ...]

    @property
    def mirrored(self) -> bool:
        """True where one side tells all in every file."""
        rack = self.maps[0].rack_travel
        return all(mirror_images(axle) for axle in self.axles) and bool(np.allclose(rack, -rack[::-1], atol=SAME))

    def change(self, k: int, name: str) -> FloatArray:
        """A quantity of file k less that of the first, (S, R, T)."""
        found: FloatArray = self.maps[k][name] - self.maps[0][name]
        return found

    def to_dataframe(self) -> pd.DataFrame:
        """The long table: the tables of all sweeps below each other, ``file`` first, then each quantity's change from the first."""
        import pandas as pd

        first = self.maps[0].to_dataframe()
        parts = []
        for axle, maps in zip(self.axles, self.maps, strict=True):
            table = maps.to_dataframe()
            changes = {f"{name}_change": table[name] - first[name] for name in SWEEP_COLUMNS}
            parts.append(
                pd.concat([table.assign(**changes)], keys=[str(axle.path)], names=["file"]).reset_index(level=0)
            )
        return pd.concat(parts, ignore_index=True)

    def to_xarray(self) -> xr.Dataset:
        """All scalar quantities over (file, side, rack_travel, wheel_travel), and ``<name>_change`` from the first file."""
        import xarray as xr

        sets = [maps.to_xarray()[["status", *SWEEP_COLUMNS]] for maps in self.maps]
        both = xr.concat(sets, dim="file").assign_coords(file=[str(axle.path) for axle in self.axles])
        for name in SWEEP_COLUMNS:
            attributes = dict(both[name].attrs)
            both[f"{name}_change"] = both[name] - both[name].isel(file=0, drop=True)
            both[f"{name}_change"].attrs = {
                **attributes,
                "long_name": f"{attributes['long_name']}, less the first file's",
            }
        return both


def moved_points(first: Axle, other: Axle, tolerance: float = 1e-6) -> tuple[MovedPoint, ...]:
    """Hardpoints of ``other`` that are farther than ``tolerance`` mm from those of ``first``, in the order of the file.

    Of two axles whose sides are mirror images only the left points are told.
    """
    sides = ("left",) if mirror_images(first) and mirror_images(other) else ("left", "right")
    found = []
    for side in sides:
        a, b = first.corner(side).points, other.corner(side).points
        for point in POINT_NAMES[other.corner(side).kind]:
            if point in a:
                shift: FloatArray = b[point] - a[point]
                if np.linalg.norm(shift) > tolerance:
                    found.append(MovedPoint(side, point, shift))
    return tuple(found)


def changed_settings(axles: Sequence[Axle]) -> tuple[Row, ...]:
    """Settings that are not the same in all files."""
    found = []
    for table, keys in SETTINGS.items():
        for key, unit in keys.items():
            values = tuple(getattr(getattr(axle, table), key, None) for axle in axles)
            if any(value != values[0] for value in values):
                found.append(Row(f"{table}.{key}", unit, values))
    racks = [axle.rack for axle in axles]
    if any((rack is None) != (racks[0] is None) for rack in racks):
        found.append(Row("rack", "", tuple("none" if rack is None else "there" for rack in racks)))
    axes = [None if rack is None else tuple(float(v) for v in rack.axis) for rack in racks]
    known = [axis for axis in axes if axis is not None]
    if any(not np.allclose(axis, known[0], atol=SAME) for axis in known):
        words = tuple(None if axis is None else "({:.4f}, {:.4f}, {:.4f})".format(*axis) for axis in axes)
        found.append(Row("rack.axis", "x, y, z", words))
    return tuple(found)


def _kinds(axles: Sequence[Axle]) -> tuple[str, ...]:
    found = []
    for letter, axle in zip("BCDEF", axles[1:], strict=False):
        pairs = {side: (axles[0].corner(side).kind, axle.corner(side).kind) for side in ("left", "right")}
        for first, other in dict.fromkeys(pair for pair in pairs.values() if pair[0] != pair[1]):
            sides = " and ".join(side for side, pair in pairs.items() if pair == (first, other))
            found.append(
                f"A and {letter}, {sides}: {first} against {other}; only points that both have are compared one by one."
            )
    return tuple(found)


def _turns(axles: Sequence[Axle], rack: FloatArray) -> tuple[tuple[TurnMaps, ...], tuple[str, ...]]:
    for axle in axles:
        if axle.rack is None:
            return (), (f"turning is not compared: {axle.title} has no rack",)
    if rack.size < 2:
        return (), ("turning is not compared: there is one rack position only",)
    try:
        return tuple(turn(axle, rack) for axle in axles), ()
    except InputError as error:
        return (), (f"turning is not compared: {error}",)


def common_rack(axles: Sequence[Axle]) -> FloatArray:
    """Rack positions (R,) mm over the smallest stroke of all; the single position 0 where one has no rack."""
    return min((default_rack(axle) for axle in axles), key=lambda rack: float(rack[-1]))


def common_travel(axles: Sequence[Axle]) -> FloatArray:
    """Wheel travel (T,) mm over the smallest usual range of all."""
    return min((default_travel(axle) for axle in axles), key=lambda travel: float(travel[-1]))


def compare(axles: Sequence[Axle], rack: ArrayLike | None = None, travel: ArrayLike | None = None) -> Comparison:
    """Compare files with the first one, all over the same positions.

    Args:
        axles: two or more.
        rack: (R,) rack travel in mm, ascending; 21 positions over the smallest stroke when not given.
        travel: (T,) wheel travel in mm, ascending; 21 positions over the smallest usual range when not given.

    Raises:
        ValueError: for fewer than two files, or positions that do not ascend.
        InputError: if a linkage is locked in its design position.
    """
    if len(axles) < 2:
        raise ValueError("a comparison needs two axles or more")
    at_rack = check_positions(rack, common_rack(axles), "rack")
    at_travel = check_positions(travel, common_travel(axles), "travel")
    sheets = tuple(design_sheets(axle) for axle in axles)
    turns, notes = _turns(axles, at_rack)
    rest = [ride(axle, ("bump", "roll"), travel=[0.0], roll=[0.0]) for axle in axles]
    if len({axle.vehicle.axle for axle in axles}) > 1:
        notes = (
            *notes,
            "front and rear axles are compared with each other: steer and anti figures mean different things there",
        )
    end = int(np.argmax(at_rack))
    return Comparison(
        axles=tuple(axles),
        moved=tuple(moved_points(axles[0], other) for other in axles[1:]),
        kinds=_kinds(axles),
        settings=changed_settings(axles),
        sheets=sheets,
        maps=tuple(sweep(axle, at_rack, at_travel) for axle in axles),
        rides=tuple(ride(axle, ("bump", "roll"), travel=at_travel) for axle in axles),
        turns=turns,
        rest=tuple(_figures(AT_REST, [{n: float(r[n][1 if n == "roll_steer" else 0]) for n in AT_REST} for r in rest])),
        lock=tuple(_figures(AT_LOCK, [{n: float(t[n][end]) for n in AT_LOCK if n in t.columns} for t in turns])),
        lock_rack=float(at_rack[end]) if turns else 0.0,
        notes=notes,
    )


def _figures(names: Sequence[str], of: Sequence[Mapping[str, float]]) -> list[Row]:
    rows = [Row(name, "", tuple(values.get(name, np.nan) for values in of)) for name in names]
    return [row for row in rows if np.any(np.isfinite(row.values))]


def sheet_rows(compared: Comparison, side: str) -> list[Row]:
    """The design-position sheets of one side as rows; a figure that only some files have is NaN in the others."""
    which = 0 if side == "left" else 1
    figures = [sheets[which].figures for sheets in compared.sheets]
    names = [name for name in SHEET_COLUMNS if any(name in of for of in figures)]
    return [Row(name, "", tuple(of.get(name, np.nan) for of in figures)) for name in names]


def largest_change(compared: Comparison, k: int, name: str = "bump_steer") -> tuple[str, float, float, float] | None:
    """Side, rack travel, wheel travel (mm) and amount of the largest change of a quantity of file k; None where there is none."""
    change = compared.change(k, name)
    if not np.any(np.isfinite(change)):
        return None
    s, i, j = np.unravel_index(int(np.nanargmax(np.abs(change))), change.shape)
    maps = compared.maps[k]
    return maps.sides[s], float(maps.rack_travel[i]), float(maps.wheel_travel[j]), float(change[s, i, j])


def check_comparable(axles: Sequence[Axle], most: int) -> None:
    """Refuse a number of files that can't be shown side by side.

    Raises:
        InputError: for fewer than two or more than ``most``.
    """
    if not 2 <= len(axles) <= most:
        raise InputError(f"compare: got {len(axles)} file{'s' * (len(axles) != 1)}; give 2 to {most}")
