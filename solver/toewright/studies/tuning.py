"""Move chosen coordinates within bounds until goals are met as well as they can be; say how sure the answer is.

Bounded nonlinear least squares (scipy's trust-region reflective method, M. A. Branch, T. F. Coleman, Y. Li, SIAM J. Sci. Comput. 21
(1999) 1-23) on the residuals of toewright.studies.residuals. What is good is for the goals to say; the tool has no opinion of its own.
"""

from __future__ import annotations

from collections.abc import Callable, Sequence
from dataclasses import dataclass, replace

import numpy as np

from toewright.core.types import FloatArray
from toewright.kinematics.design import COORDINATES
from toewright.model.axle import Axle
from toewright.model.errors import InputError
from toewright.studies.goals import Goal
from toewright.studies.residuals import LOST, Free, jacobian, moved_axle, residuals
from toewright.studies.verdicts import Verdict, evaluate

BINDING = 1e-6
"""A bound nearer than this (mm) binds."""

DISTINCT = 0.1
"""Answers that differ by more than this (mm) in a coordinate are distinct."""

HARDLY = 0.05
"""A direction in which 1 mm changes the residuals by less than this hardly matters."""

DETERMINED = 1e-7
"""Ratio of the smallest to the largest singular value below which the answer is not determined."""

TOLERANCE = 1e-15


@dataclass(frozen=True)
class Direction:
    """A direction of the free coordinates: components (F,) of a unit vector, and the change of the residuals for 1 mm along it."""

    components: FloatArray
    effect: float


@dataclass(frozen=True)
class Answer:
    """One local optimum.

    Attributes:
        moves: (F,) mm from the present place.
        cost: sum of the squared residuals.
        binding: names of the bounds that bind, such as ``tie_rod_inner.z at -10 mm``.
        directions: from the one that matters most to the one that matters least.
        determined: False where some direction changes nothing at all, so that other answers are as good.
    """

    moves: FloatArray
    cost: float
    binding: tuple[str, ...]
    directions: tuple[Direction, ...]
    determined: bool


@dataclass(frozen=True)
class Tuning:
    """Result of a tuning.

    Attributes:
        axle: before.
        tuned: with the best answer.
        free, goals: as asked for.
        answers: distinct local optima, the best first.
        before, after: verdicts on the goals.
        cost_before: sum of the squared residuals where the points are.
        grid: rounding of the written coordinates, mm; None without.
    """

    axle: Axle
    tuned: Axle
    free: tuple[Free, ...]
    goals: tuple[Goal, ...]
    answers: tuple[Answer, ...]
    before: tuple[Verdict, ...]
    after: tuple[Verdict, ...]
    cost_before: float
    grid: float | None


@dataclass(frozen=True)
class Trade:
    """Trade-off between two goals: weights (W,) of the second against the first, rms residual (W, 2) of each, moves (W, F) mm."""

    weights: FloatArray
    rms: FloatArray
    moves: FloatArray


def _solve(
    axle: Axle, free: Sequence[Free], goals: Sequence[Goal], start: FloatArray
) -> tuple[FloatArray, float, FloatArray]:
    """Moves, cost and Jacobian of one local solution."""
    from scipy.optimize import least_squares

    def fun(moves: FloatArray) -> FloatArray:
        try:
            return np.concatenate(residuals(moved_axle(axle, free, moves), goals))
        except InputError:  # a steer angle that those points do not reach
            return np.full(size, LOST)

    def jac(moves: FloatArray) -> FloatArray:
        try:
            return jacobian(moved_axle(axle, free, moves), goals, free)
        except InputError:
            return np.zeros((size, len(free)))

    size = sum(r.size for r in residuals(axle, goals))
    low, high = np.array([f.low for f in free]), np.array([f.high for f in free])
    inside = np.clip(start, low + 1e-9 * (high - low), high - 1e-9 * (high - low))
    found = least_squares(
        fun, inside, jac, bounds=(low, high), xtol=TOLERANCE, ftol=TOLERANCE, gtol=TOLERANCE, max_nfev=200
    )
    moves = np.asarray(found.x, dtype=float)
    return moves, float(np.sum(fun(moves) ** 2)), jac(moves)


def _answer(free: Sequence[Free], moves: FloatArray, cost: float, slopes: FloatArray) -> Answer:
    binding = tuple(
        f"{one.name} at {bound:+g} mm"
        for one, move in zip(free, moves, strict=True)
        for bound in (one.low, one.high)
        if abs(move - bound) < BINDING + 1e-6 * (one.high - one.low)
    )
    _, sizes, rows = np.linalg.svd(slopes, full_matrices=True)
    effects = np.zeros(len(free))
    effects[: sizes.size] = sizes
    directions = tuple(Direction(rows[k], float(effects[k])) for k in range(len(free)))
    determined = bool(effects[0] > 0.0 and effects[-1] > DETERMINED * effects[0])
    return Answer(moves, cost, binding, directions, determined)


def check_request(axle: Axle, free: Sequence[Free], goals: Sequence[Goal]) -> None:
    """Refuse what can't be tuned.

    Raises:
        InputError: without free coordinates or goals, for a coordinate named twice, or a start where the linkage does not get there.
    """
    if not free:
        raise InputError("nothing is free to move; add --free POINT.z=-10:10")
    if not goals:
        raise InputError("there is no goal; add --toward 'bump_steer over -25:25 = 0'")
    names = [one.name for one in free]
    for name in names:
        if names.count(name) > 1:
            raise InputError(f"--free {name}: is given twice; leave one out")
    for verdict in evaluate(axle, goals):
        if not np.isfinite(verdict.value):
            raise InputError(
                f"{axle.path or axle.title}: as drawn, the linkage does not get to {verdict.worst_place}, which the goal "
                f"{verdict.goal.words!r} needs; ask for less, or mend the points first"
            )


def tune(
    axle: Axle,
    free: Sequence[Free],
    goals: Sequence[Goal],
    *,
    starts: int = 6,
    seed: int = 1,
    grid: float | None = None,
    progress: Callable[[int], None] | None = None,
) -> Tuning:
    """Move the free coordinates toward the goals.

    Args:
        axle: the axle; a symmetric one stays symmetric, on another both sides move as mirror images.
        free: coordinates of the left corner and how far each may move.
        goals: what is wanted.
        starts: the present place and this many less one spread over the bounds (Sobol points), to find several optima.
        seed: of the spread.
        grid: round the coordinates to multiples of this (mm), one after the other, solving again for those left.
        progress: is called with 1 for every start that is done.

    Raises:
        InputError: as ``check_request``, and for a grid that is not positive or that leaves the bounds.
    """
    from scipy.stats import qmc

    check_request(axle, free, goals)
    if grid is not None and not (np.isfinite(grid) and grid > 0.0):
        raise InputError(f"--grid {grid:g}: must be above 0 mm")
    low, high = np.array([f.low for f in free]), np.array([f.high for f in free])
    begin = [np.zeros(len(free))]
    if starts > 1:
        spread = qmc.Sobol(len(free), seed=seed).random_base2(max(1, int(np.ceil(np.log2(starts)))))[: starts - 1]
        begin += list(low + spread * (high - low))
    answers: list[Answer] = []
    for start in begin:
        moves, cost, slopes = _solve(axle, free, goals, start)
        if not any(np.max(np.abs(moves - other.moves)) < DISTINCT for other in answers):
            answers.append(_answer(free, moves, cost, slopes))
        else:
            k = next(i for i, other in enumerate(answers) if np.max(np.abs(moves - other.moves)) < DISTINCT)
            if cost < answers[k].cost:
                answers[k] = _answer(free, moves, cost, slopes)
        if progress is not None:
            progress(1)
    answers.sort(key=lambda answer: answer.cost)
    if grid is not None:
        moves = _on_grid(axle, free, goals, answers[0].moves, grid)
        cost = float(sum(np.sum(r**2) for r in residuals(moved_axle(axle, free, moves), goals)))
        answers.insert(0, _answer(free, moves, cost, jacobian(moved_axle(axle, free, moves), goals, free)))
    tuned = moved_axle(axle, free, answers[0].moves)
    return Tuning(
        axle=axle,
        tuned=tuned,
        free=tuple(free),
        goals=tuple(goals),
        answers=tuple(answers),
        before=evaluate(axle, goals),
        after=evaluate(tuned, goals),
        cost_before=float(sum(np.sum(r**2) for r in residuals(axle, goals))),
        grid=grid,
    )


def _on_grid(axle: Axle, free: Sequence[Free], goals: Sequence[Goal], moves: FloatArray, grid: float) -> FloatArray:
    """Moves that put every coordinate on the grid: the one nearest to it first, the others solved again each time."""
    present = np.array([axle.left.points[f.point][COORDINATES.index(f.letter)] for f in free])
    moves, left = moves.copy(), list(range(len(free)))
    while left:
        places = present[left] + moves[left]
        k = left[int(np.argmin(np.abs(places - grid * np.round(places / grid))))]
        options = grid * (np.floor((present[k] + moves[k]) / grid) + np.array([0.0, 1.0])) - present[k]
        options = options[(options >= free[k].low - 1e-9) & (options <= free[k].high + 1e-9)]
        if options.size == 0:
            raise InputError(
                f"--grid {grid:g}: {free[k].name} has no multiple of it between its bounds; widen them or take a finer grid"
            )
        left.remove(k)
        trials = []
        for option in options:
            trial = moves.copy()
            trial[k] = option
            if left:
                fixed = moved_axle(
                    axle,
                    [free[i] for i in range(len(free)) if i not in left],
                    trial[[i for i in range(len(free)) if i not in left]],
                )
                rest, cost, _ = _solve(fixed, [free[i] for i in left], goals, trial[left])
                trial[left] = rest
            else:
                cost = float(sum(np.sum(r**2) for r in residuals(moved_axle(axle, free, trial), goals)))
            trials.append((cost, trial))
        moves = min(trials, key=lambda pair: pair[0])[1]
    return moves


def trade_off(axle: Axle, free: Sequence[Free], goals: Sequence[Goal], *, steps: int = 9) -> Trade:
    """Trade-off curve between the first goal and the second: the second's weight goes from 1/100 to 100 times its own.

    Raises:
        InputError: for fewer than two goals, and as ``check_request``.
    """
    if len(goals) < 2:
        raise InputError("--trade: needs two goals to weigh against each other; add another --toward")
    check_request(axle, free, goals)
    weights = np.logspace(-2.0, 2.0, steps)
    rms, moves, start = [], [], np.zeros(len(free))
    for weight in weights:
        weighed = [goals[0], replace(goals[1], weight=goals[1].weight * float(weight)), *goals[2:]]
        start, _, _ = _solve(axle, free, weighed, start)
        parts = residuals(moved_axle(axle, free, start), goals)
        rms.append([float(np.sqrt(np.sum(part**2))) for part in parts[:2]])
        moves.append(start)
    return Trade(weights, np.array(rms), np.array(moves))
