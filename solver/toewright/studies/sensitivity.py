"""Which point is to blame: the change of chosen figures for each mm of each hardpoint coordinate.

Two ways to move a point. As designed (the default): the file's point moves, links become as long as the points say, static toe and
camber are set to their declared values, as a workshop would set them. As built: the parts keep their dimensions, the point moves on the
body or on the upright, the upright settles, and nothing is set again (toewright.studies.as_built).

One-wheel figures as designed have exact slopes (implicit function theorem). Figures of the whole axle, and all as built, are five-point
differences of exact solves with a step of 0.001 mm, whose error is far below one part in a million.
"""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass
from typing import TYPE_CHECKING

import numpy as np

from toewright.core import layout
from toewright.core.types import FloatArray
from toewright.kinematics.batch import solve_batch
from toewright.kinematics.design import COORDINATES, coordinate_names, design_vector
from toewright.kinematics.sweep import default_travel
from toewright.model.axle import Axle
from toewright.model.errors import InputError
from toewright.model.glossary import quantity
from toewright.studies.as_built import MOVABLE, rebuild
from toewright.studies.goals import Goal, parse_goal
from toewright.studies.residuals import STEP, Free, axle_slopes, corner_slopes, moved_axle
from toewright.studies.verdicts import measure, rack_positions, travel_positions

if TYPE_CHECKING:
    import xarray as xr

STEERED = 0.7
"""Share of the stroke at which steered figures are taken by default."""

CURVED = 0.2
"""The linear figure misleads where a re-solve over the range differs from it by more than this share."""

NEGLIGIBLE = 1e-3
"""Slopes below this share of a figure's largest are not checked for curvature."""


@dataclass(frozen=True)
class Sensitivity:
    """Slopes of F figures by C coordinates.

    Attributes:
        figures: what was measured, each at one place.
        coordinates: ``point.x`` ... of the left corner; on a symmetric axle the right one moves as its mirror image.
        present: (F,) values now, in the glossary's units.
        slopes: (F, C) per mm.
        exact: (F,) True where the slopes are closed, False where they are differences of exact solves.
        range: mm, of the second-order check.
        lower, upper: (F, C) values with the coordinate moved by -range and +range, solved again; NaN where the linkage does not get there.
        curved: (F, C) True where the linear figure misleads over the range.
        as_built: how points were moved.
    """

    axle: Axle
    figures: tuple[Goal, ...]
    coordinates: tuple[str, ...]
    present: FloatArray
    slopes: FloatArray
    exact: tuple[bool, ...]
    range: float
    lower: FloatArray
    upper: FloatArray
    curved: np.ndarray[tuple[int, ...], np.dtype[np.bool_]]
    as_built: bool

    def ranked(self, figure: int) -> list[int]:
        """Coordinates of a figure, the largest slope first."""
        return [int(c) for c in np.argsort(-np.abs(self.slopes[figure]), kind="stable")]

    def to_xarray(self) -> xr.Dataset:
        """The matrix as an xarray Dataset."""
        import xarray as xr

        dims = ("figure", "coordinate")
        data = {
            "slope": (dims, self.slopes, {"long_name": "change of the figure for 1 mm of the coordinate"}),
            "present": ("figure", self.present),
            "lower": (dims, self.lower, {"long_name": f"figure with the coordinate at -{self.range:g} mm"}),
            "upper": (dims, self.upper, {"long_name": f"figure with the coordinate at +{self.range:g} mm"}),
            "curved": (dims, self.curved.astype(np.int8)),
            "unit": ("figure", [quantity(goal.name).unit for goal in self.figures]),
        }
        coords = {"figure": [figure_words(goal) for goal in self.figures], "coordinate": list(self.coordinates)}
        return xr.Dataset(data, coords=coords, attrs={"as_built": int(self.as_built), "range_mm": self.range})


def figure_words(goal: Goal) -> str:
    """A figure and where it is taken: ``bump steer at wheel travel +25 mm``."""
    place = goal.place_words.replace(", left wheel", "").replace("left wheel", "")
    return f"{quantity(goal.name).label} {place or 'at design'}".replace(" both ways", "").strip()


def parse_figure(text: str, axle: Axle) -> Goal:
    """A figure from text such as ``bump_steer travel 25 rack 20``: a goal without its limit, at one place.

    Raises:
        InputError: where it is not understood, or names a range or several places.
    """
    goal = parse_goal(f"{text} >= -1e300", axle)
    several = [name for name in ("at_travel", "at_rack", "at_roll") if len(getattr(goal, name)) > 1]
    if goal.over_travel or goal.over_roll or several:
        raise InputError(f"figure {text!r}: names several places; a figure has one, such as 'bump_steer travel 25'")
    return goal


def default_figures(axle: Axle) -> tuple[Goal, ...]:
    """Figures that are shown when none are asked for."""
    low, high = (float(default_travel(axle)[k]) for k in (0, -1))
    texts = [f"bump_steer travel {high}", f"bump_steer travel {low}"]
    if axle.rack is not None:
        at = STEERED * axle.rack.stroke
        texts += [f"bump_steer travel {high} rack {at}", f"bump_steer travel {high} rack {-at}"]
    texts += ["bump_steer_rate", "camber_gain", "scrub_radius", "mechanical_trail", "caster", "kingpin_inclination"]
    if axle.rack is not None:
        texts.append("steer_rate")
        if axle.vehicle.wheelbase is not None:
            steer = abs(
                float(measure(axle, parse_figure(f"steer_angle rack {STEERED * axle.rack.stroke}", axle)).values.mean())
            )
            texts.append(f"ackermann_percent steer {np.floor(steer):g}")
    texts.append("roll_centre_z")
    return tuple(parse_figure(text, axle) for text in texts)


def _value(axle: Axle, goal: Goal) -> float:
    """The figure: of the left wheel, or of the axle; of two steer directions, the one to the left."""
    values = measure(axle, goal).values
    return float(values[_pick(goal, values.size)])


def _pick(goal: Goal, size: int) -> int:
    """Number of the sample that stands for a figure."""
    per_side = size // 2 if goal.kind == "corner" and goal.side == "both" else size
    return per_side - 1 if goal.at_steer is not None else 0


def sensitivity(
    axle: Axle,
    figures: Sequence[Goal] | None = None,
    *,
    reach: float = 1.0,
    as_built: bool = False,
    coordinates: Sequence[str] | None = None,
) -> Sensitivity:
    """Slopes of figures by hardpoint coordinates, with a check of how straight they are.

    Args:
        axle: the axle.
        figures: from ``parse_figure``; ``default_figures`` when not given.
        reach: range of the second-order check, mm.
        as_built: move parts, not the drawing; one-wheel figures only.
        coordinates: which, of the left corner; all that can move when not given.

    Raises:
        InputError: for a bad reach or coordinate, a figure of the whole axle as built, or one that the linkage does not get to.
    """
    if not (np.isfinite(reach) and reach > 0.0):
        raise InputError(f"range {reach:g}: must be above 0 mm")
    goals = tuple(default_figures(axle) if figures is None else figures)
    if as_built:
        if figures is None:
            goals = tuple(goal for goal in goals if goal.kind == "corner")
        wrong = next((goal for goal in goals if goal.kind != "corner" or goal.at_steer is not None), None)
        if wrong is not None:
            raise InputError(
                f"--as-built: {figure_words(wrong)} is no figure of one wheel at a rack travel; leave it or --as-built out"
            )
    names = tuple(coordinates or coordinate_names(axle.left.kind))
    if as_built and coordinates is None:
        names = tuple(name for name in names if name.rpartition(".")[0] in MOVABLE[axle.left.kind])
    free = [_free(axle, name, as_built) for name in names]
    present = np.array([_value(axle, goal) for goal in goals])
    for goal, value in zip(goals, present.tolist(), strict=True):
        if not np.isfinite(value):
            where = f"{axle.path or axle.title}: {figure_words(goal)}"
            raise InputError(
                f"{where} has no value: the linkage does not get there, or the file lacks what it needs; ask for less"
            )
    slopes = np.empty((len(goals), len(free)))
    lower, upper = np.empty_like(slopes), np.empty_like(slopes)
    exact = []
    for f, goal in enumerate(goals):
        if as_built:
            slopes[f], lower[f], upper[f] = _built(axle, goal, free, reach)
            exact.append(False)
            continue
        found = corner_slopes(axle, goal, free) if goal.kind == "corner" else axle_slopes(axle, goal, free)
        slopes[f] = found[_pick(goal, len(found))]
        exact.append(goal.kind == "corner")
        for c in range(len(free)):
            for way, into in ((-1.0, lower), (1.0, upper)):
                moves = np.zeros(len(free))
                moves[c] = way * reach
                into[f, c] = _moved_value(axle, free, moves, goal)
    largest = np.max(np.abs(slopes), axis=1, keepdims=True)
    straight = np.abs(slopes) * reach
    error = np.maximum(
        np.abs(upper - present[:, np.newaxis] - slopes * reach), np.abs(lower - present[:, np.newaxis] + slopes * reach)
    )
    matters = np.maximum(straight, error) > NEGLIGIBLE * largest * reach
    curved = matters & ~(error <= CURVED * np.maximum(straight, NEGLIGIBLE * largest * reach))
    return Sensitivity(axle, goals, names, present, slopes, tuple(exact), reach, lower, upper, curved, as_built)


def _moved_value(axle: Axle, free: Sequence[Free], moves: FloatArray, goal: Goal) -> float:
    try:
        return _value(moved_axle(axle, free, moves), goal)
    except InputError:  # a steer angle that is not reached there
        return float("nan")


def _free(axle: Axle, name: str, as_built: bool) -> Free:
    point, _, letter = name.rpartition(".")
    if name not in coordinate_names(axle.left.kind):
        raise InputError(f"coordinate {name}: a {axle.left.kind} corner has no such; write point.x, .y or .z")
    if as_built and point not in MOVABLE[axle.left.kind]:
        raise InputError(
            f"--as-built: {point} can't be moved on the finished car; there are {', '.join(MOVABLE[axle.left.kind])}"
        )
    return Free(point, letter, -np.inf, np.inf)


def _built(axle: Axle, goal: Goal, free: Sequence[Free], reach: float) -> tuple[FloatArray, FloatArray, FloatArray]:
    """Slopes, and values at -reach and +reach, (C,), of a one-wheel figure as built."""
    side = "right" if goal.side == "right" else "left"
    design = design_vector(axle, side)
    steps = (STEP, -STEP, 2.0 * STEP, -2.0 * STEP, -reach, reach)
    designs, lost = [], []
    for one in free:
        for step in steps:
            shift = np.zeros(3)
            shift[COORDINATES.index(one.letter)] = step * (design[layout.SIDE] if one.letter == "y" else 1.0)
            try:
                designs.append(rebuild(design, {one.point: shift}))
                lost.append(False)
            except InputError:
                designs.append(design)
                lost.append(True)
    batch = solve_batch(np.array(designs), rack_positions(axle, goal), travel_positions(goal), columns=(goal.name,))
    values = np.where(lost, np.nan, batch.values[:, 0, 0, 0]).reshape(len(free), len(steps))
    slopes = (8.0 * (values[:, 0] - values[:, 1]) - (values[:, 2] - values[:, 3])) / (12.0 * STEP)
    return slopes, values[:, 4], values[:, 5]
