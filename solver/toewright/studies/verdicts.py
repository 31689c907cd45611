"""Does an axle keep its goals? Each is measured where it holds, and the worst place is named."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass

import numpy as np

from toewright.core import layout
from toewright.core.types import FloatArray
from toewright.kinematics.batch import solve_batch, solve_poses
from toewright.kinematics.design import SIDES, design_vectors
from toewright.kinematics.riding import ride
from toewright.kinematics.turning import turn
from toewright.model.axle import Axle
from toewright.model.errors import InputError
from toewright.model.glossary import quantity
from toewright.studies.goals import Goal, read_targets

POSITIONS = 21
"""Positions along a range."""

SLACK = 1e-9
"""A value this much beyond its limit still keeps it: rounding of a limit that is met exactly."""


@dataclass(frozen=True)
class Samples:
    """A figure at the places of a goal: values (K,), NaN where the linkage does not get there, and each place in words."""

    values: FloatArray
    places: tuple[str, ...]


@dataclass(frozen=True)
class Verdict:
    """A goal and how the axle keeps it.

    Attributes:
        passed: every place keeps the limit.
        value: the figure at the worst place; NaN where the linkage does not get there.
        worst_place: in words with units.
        miss: by how much the limit is missed there, in the figure's unit; negative inside it, inf where no value is.
    """

    goal: Goal
    passed: bool
    value: float
    worst_place: str
    miss: float

    @property
    def sentence(self) -> str:
        """What was found, in one sentence with units."""
        unit = quantity(self.goal.name).unit.replace("-", "")
        tail = f" {unit}" if unit else ""
        if not np.isfinite(self.value):
            return f"{self.goal.words}: NOT REACHED at {self.worst_place}"
        found = f"{self.value:+.4g}{tail} at {self.worst_place}"
        return f"{self.goal.words}: {'kept' if self.passed else 'MISSED'}, worst {found}"


def rack_for_steer(axle: Axle, steer: float, travel: float = 0.0) -> float:
    """Rack travel (mm) at which the mean steer angle is ``steer`` (deg, left +), by Newton on the exact steer rates.

    Raises:
        InputError: where the linkage does not steer so far.
    """
    designs = design_vectors(axle)
    rack = 0.0
    for _ in range(40):
        poses = solve_poses(designs, np.array([rack]), np.array([travel]), columns=("steer_angle", "steer_rate"))
        if np.any(poses.status != layout.OK):
            break
        gap = steer - float(poses["steer_angle"].mean())
        if abs(gap) < 1e-11:
            return rack
        rate = float(poses["steer_rate"].mean())
        if rate == 0.0:
            break
        limit = 0.25 * float(np.linalg.norm(axle.left.points["tie_rod_outer"] - axle.left.points["wheel_centre"]))
        rack += float(np.clip(gap / rate, -limit, limit))
    raise InputError(
        f"{axle.path or axle.title}: the axle does not steer to {steer:+g} deg of mean steer; ask for less"
    )


def rack_positions(axle: Axle, goal: Goal) -> FloatArray:
    """Rack travels (R,) mm of a goal."""
    if goal.at_steer is not None:
        travel = goal.at_travel[0] if goal.at_travel else 0.0
        return np.array([rack_for_steer(axle, way * goal.at_steer, travel) for way in (-1.0, 1.0)])
    return np.array(goal.at_rack or (0.0,))


def travel_positions(goal: Goal) -> FloatArray:
    """Wheel travels (T,) mm of a goal."""
    if goal.over_travel is not None:
        return np.linspace(*goal.over_travel, POSITIONS)
    return np.array(goal.at_travel or (0.0,))


def measure(axle: Axle, goal: Goal) -> Samples:
    """The figure of a goal at all its places.

    Raises:
        InputError: where the axle's file lacks what the figure needs, or the steer can't be reached.
    """
    if goal.kind == "corner":
        return _corner(axle, goal)
    return _turning(axle, goal) if goal.kind == "turn" else _riding(axle, goal)


def goal_sides(goal: Goal) -> tuple[str, ...]:
    """Wheels of a goal."""
    return SIDES if goal.side == "both" else (goal.side,)


def _corner(axle: Axle, goal: Goal) -> Samples:
    sides, rack, travel = goal_sides(goal), rack_positions(axle, goal), travel_positions(goal)
    batch = solve_batch(design_vectors(axle, sides), rack, travel, columns=(goal.name,))
    places = [
        f"{side} wheel, rack {r:+.1f} mm, wheel travel {t:+.1f} mm".replace("+0.0 ", "0 ")
        for side in sides
        for r in rack
        for t in travel
    ]
    values = np.where(batch.status == layout.OK, batch.values[..., 0], np.nan)
    return Samples(values.ravel(), tuple(places))


def _turning(axle: Axle, goal: Goal) -> Samples:
    values: list[float] = []
    places: list[str] = []
    for travel in travel_positions(goal).tolist():
        rack = np.unique(rack_positions(axle, goal))
        turned = turn(axle, rack, travel=travel)
        values += turned[goal.name].tolist()
        places += [
            f"rack {r:+.1f} mm (mean steer {m:+.1f} deg, left +), wheel travel {travel:+.1f} mm".replace("+0.0 ", "0 ")
            for r, m in zip(rack.tolist(), turned["mean_steer"].tolist(), strict=True)
        ]
    return Samples(np.array(values), tuple(places))


def _riding(axle: Axle, goal: Goal) -> Samples:
    values: list[float] = []
    places: list[str] = []
    for rack in rack_positions(axle, goal).tolist():
        if goal.over_roll is not None or goal.at_roll:
            roll = np.linspace(*goal.over_roll, POSITIONS) if goal.over_roll else np.array(sorted(set(goal.at_roll)))
            ridden = ride(axle, ["roll"], roll=roll, rack=rack)
            at = [f"roll {value:+.2f} deg" for value in roll.tolist()]
        else:
            travel = np.unique(travel_positions(goal))
            ridden = ride(axle, ["roll" if goal.name == "roll_steer" else "bump"], travel=travel, roll=[0.0], rack=rack)
            at = ["roll 0 deg"] if goal.name == "roll_steer" else [f"bump {value:+.1f} mm" for value in travel.tolist()]
        values += ridden[goal.name].tolist()
        places += [f"{place}, rack {rack:+.1f} mm".replace("+0.0 ", "0 ") for place in at]
    return Samples(np.array(values), tuple(places))


def judge(goal: Goal, samples: Samples) -> Verdict:
    """The verdict on a goal from its samples."""
    values = samples.values
    lost = np.isnan(values)
    if lost.any():
        k = int(np.argmax(lost))
        return Verdict(goal, False, float("nan"), samples.places[k], float("inf"))
    miss = np.maximum(goal.low - values, values - goal.high)
    k = int(np.argmax(miss))
    scale = max(1.0, *(abs(limit) for limit in (goal.low, goal.high) if np.isfinite(limit)))
    return Verdict(goal, bool(miss[k] <= SLACK * scale), float(values[k]), samples.places[k], float(miss[k]))


def evaluate(axle: Axle, goals: Sequence[Goal]) -> tuple[Verdict, ...]:
    """Verdicts on goals.

    Raises:
        InputError: as ``measure``.
    """
    return tuple(judge(goal, measure(axle, goal)) for goal in goals)


def check_targets(axle: Axle) -> tuple[Verdict, ...]:
    """Verdicts on the file's own [targets]; none where there are none.

    Raises:
        InputError: for a target that is not understood or can't be measured.
    """
    return evaluate(axle, read_targets(axle))
