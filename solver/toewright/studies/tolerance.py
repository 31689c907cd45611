"""What build scatter costs: bands of the bump-steer curve, yield of every target, and which tolerance makes the spread."""

from __future__ import annotations

import os
from collections import deque
from collections.abc import Callable, Sequence
from concurrent.futures import Future, ThreadPoolExecutor
from dataclasses import dataclass, field, replace

import numpy as np

from toewright.core import layout
from toewright.core.types import FloatArray
from toewright.kinematics.batch import solve_batch
from toewright.kinematics.design import SIDES, design_vector
from toewright.kinematics.sweep import check_positions, default_travel
from toewright.model.axle import Axle
from toewright.model.errors import InputError
from toewright.studies.goals import Goal, read_targets
from toewright.studies.scatter import Variable, built_designs, displacement, read_scatter
from toewright.studies.shares import Share, shares
from toewright.studies.verdicts import SLACK, goal_sides, judge, measure, travel_positions

PERCENTILES = (5.0, 50.0, 95.0)

CHUNK = 16_384
"""Builds that are worked on at once."""

WHOLE_AXLE_BUILDS = 200
"""Builds on which targets of the whole axle (turning, riding, a steer angle) are judged: each is a solve of its own."""

MOST_BUILDS = 2_000_000
CONFIDENCE = 0.95


@dataclass(frozen=True)
class Yield:
    """How many builds keep a target.

    Attributes:
        goal: the target.
        kept, builds: counts; builds that the linkage does not let get there are not kept.
        low, high: limits of the yield (0 to 1) with CONFIDENCE, exact binomial (C. J. Clopper, E. S. Pearson, Biometrika 26
            (1934) 404-413).
        nominal: the car as drawn keeps it.
        band: (3,) the figure at each build's worst place, at PERCENTILES of the builds that get there; NaN where none does.
    """

    goal: Goal
    kept: int
    builds: int
    low: float
    high: float
    nominal: bool
    band: FloatArray


@dataclass(frozen=True)
class Tolerance:
    """Result of a Monte Carlo over builds.

    Attributes:
        asked, builds: how many were asked for and how many were done; fewer when it was stopped.
        lost: builds in which some pose was not reached; they are left out of the bands.
        seed: of the samples.
        rack: mm.
        travel: (T,) mm.
        nominal: (2, T) deg bump steer as drawn, left and right.
        bands: (2, T, 3) deg at PERCENTILES.
        difference: (T, 3) deg, left minus right bump steer, at PERCENTILES.
        worst: (2, 3) deg, largest |bump steer| over the travel, at PERCENTILES.
        deviation: (2, T) deg, standard deviation.
        yields: of each target.
        shares: what makes the spread of the left wheel's bump steer at the highest travel; the largest total first.
    """

    axle: Axle
    variables: tuple[Variable, ...]
    asked: int
    builds: int
    lost: int
    seed: int
    rack: float
    travel: FloatArray
    nominal: FloatArray
    bands: FloatArray
    difference: FloatArray
    worst: FloatArray
    deviation: FloatArray
    yields: tuple[Yield, ...]
    shares: tuple[Share, ...]

    @property
    def stopped(self) -> bool:
        """It was stopped before all builds were done."""
        return self.builds < self.asked


@dataclass
class _Store:
    """What is kept of each build: bump steer (2, T, N), and the worst value for each corner target (N, G), in single precision."""

    bump: np.ndarray[tuple[int, ...], np.dtype[np.float32]]
    worst: np.ndarray[tuple[int, ...], np.dtype[np.float32]]
    kept: np.ndarray[tuple[int, ...], np.dtype[np.bool_]]
    done: int = 0
    ranges: list[tuple[int, int]] = field(default_factory=list)


_Done = tuple[FloatArray, FloatArray, np.ndarray[tuple[int, ...], np.dtype[np.bool_]]]


def _batched(goal: Goal) -> bool:
    """Targets that are judged on every build: one wheel's figures at given racks."""
    return goal.kind == "corner" and goal.at_steer is None


def _work(
    nominal: dict[str, FloatArray],
    variables: tuple[Variable, ...],
    uniform: FloatArray,
    rack: float,
    travel: FloatArray,
    goals: Sequence[Goal],
) -> _Done:
    """Bump steer (2, T, N), worst values and kept targets (N, G) of one chunk of builds."""
    moves = np.empty(uniform.shape)
    for v, variable in enumerate(variables):
        moves[:, v] = displacement(variable, uniform[:, v])
    built = built_designs(nominal, variables, moves)
    at = np.array([rack])
    bump = np.stack(
        [
            solve_batch(built[side], at, travel, columns=("bump_steer",), threads=1).values[:, 0, :, 0].T
            for side in SIDES
        ]
    )
    worst = np.empty((uniform.shape[0], len(goals)))
    kept = np.empty(worst.shape, dtype=bool)
    for g, goal in enumerate(goals):
        racks = np.array(goal.at_rack or (0.0,))
        values = np.concatenate(
            [
                solve_batch(built[side], racks, travel_positions(goal), columns=(goal.name,), threads=1).values.reshape(
                    uniform.shape[0], -1
                )
                for side in goal_sides(goal)
            ],
            axis=1,
        )
        worst[:, g], kept[:, g] = _worst(goal, values)
    return bump, worst, kept


def _worst(goal: Goal, values: FloatArray) -> tuple[FloatArray, np.ndarray[tuple[int, ...], np.dtype[np.bool_]]]:
    """The value (N,) farthest beyond, or nearest to, a goal's limit among values (N, K), and whether all keep it; NaN is a miss."""
    miss = np.maximum(goal.low - values, values - goal.high)
    lost = np.isnan(values).any(axis=1)
    pick = np.argmax(np.where(np.isnan(miss), -np.inf, miss), axis=1)
    rows = np.arange(len(values))
    slack = SLACK * max(1.0, *(abs(x) for x in (goal.low, goal.high) if np.isfinite(x)))
    return np.where(lost, np.nan, values[rows, pick]), ~lost & (miss[rows, pick] <= slack)


def tolerance(
    axle: Axle,
    builds: int,
    *,
    seed: int = 1,
    rack: float = 0.0,
    travel: Sequence[float] | FloatArray | None = None,
    progress: Callable[[int], None] | None = None,
) -> Tolerance:
    """Build an axle many times with scattered points.

    Low-discrepancy samples (scrambled Sobol points, scipy.stats.qmc). Interrupting it (KeyboardInterrupt) ends it early with what is done.

    Args:
        axle: the axle, with [tolerance].
        builds: how many.
        seed: the same seed gives the same builds.
        rack: rack travel at which bump steer is taken, mm.
        travel: (T,) mm, ascending; 21 over a usual range when not given.
        progress: is called with the number of builds just done.

    Raises:
        InputError: without tolerances or for bad ones, bad targets, or a bad number of builds.
        KeyboardInterrupt: when it is interrupted before any build is done.
    """
    from scipy.stats import qmc

    if not 16 <= builds <= MOST_BUILDS:
        raise InputError(f"builds {builds}: write a whole number from 16 to {MOST_BUILDS:,}")
    variables = read_scatter(axle)
    targets = read_targets(axle)
    at = check_positions(travel, default_travel(axle), "travel")
    goals = [goal for goal in targets if _batched(goal)]
    nominal = {side: design_vector(axle, side) for side in SIDES}
    store = _Store(
        np.empty((2, at.size, builds), dtype=np.float32),
        np.empty((builds, len(goals)), dtype=np.float32),
        np.empty((builds, len(goals)), dtype=bool),
    )
    sampler = qmc.Sobol(len(variables), seed=seed)
    workers = os.cpu_count() or 1
    waiting: deque[tuple[int, int, Future[_Done]]] = deque()
    pool = ThreadPoolExecutor(workers)

    def collect() -> None:
        first, last, future = waiting[0]
        store.bump[:, :, first:last], store.worst[first:last], store.kept[first:last] = future.result()
        waiting.popleft()
        store.done = last
        if progress is not None:
            progress(last - first)

    try:
        for first in range(0, builds, CHUNK):
            last = min(first + CHUNK, builds)
            uniform = np.clip(_draw(sampler, last - first), 1e-12, 1.0 - 1e-12)
            waiting.append((first, last, pool.submit(_work, nominal, variables, uniform, rack, at, goals)))
            if len(waiting) > 2 * workers:
                collect()
        while waiting:
            collect()
    except KeyboardInterrupt:
        if store.done == 0:
            raise
    finally:
        pool.shutdown(wait=False, cancel_futures=True)
    return _summarise(axle, variables, targets, goals, store, builds, seed, rack, at)


def _draw(sampler: object, count: int) -> FloatArray:
    """The next samples; counts that are no power of two are meant."""
    import warnings

    with warnings.catch_warnings():
        warnings.simplefilter("ignore", UserWarning)
        drawn: FloatArray = sampler.random(count)  # type: ignore[attr-defined]
    return drawn


def _spread(values: np.ndarray[tuple[int, ...], np.dtype[np.float32]]) -> FloatArray:
    """PERCENTILES and the standard deviation, (4,), of values (N,)."""
    return np.append(np.percentile(values, PERCENTILES), values.std(dtype=float)).astype(float)


def _summarise(
    axle: Axle,
    variables: tuple[Variable, ...],
    targets: tuple[Goal, ...],
    goals: Sequence[Goal],
    store: _Store,
    asked: int,
    seed: int,
    rack: float,
    travel: FloatArray,
) -> Tolerance:
    bump = store.bump[:, :, : store.done]
    good = ~np.isnan(bump).any(axis=(0, 1))
    if not good.all():
        bump = bump[:, :, good]
    if bump.size == 0:
        raise InputError(
            f"{axle.path or axle.title}: no build reaches all of the travel; ask for less, or tighten the tolerances"
        )
    designs = np.array([design_vector(axle, side) for side in SIDES])
    drawn = solve_batch(designs, np.array([rack]), travel, columns=("bump_steer",)).values[:, 0, :, 0]
    with ThreadPoolExecutor(os.cpu_count() or 1) as pool:
        jobs = [bump[s, t] for s in range(2) for t in range(travel.size)]
        found = np.array(list(pool.map(_spread, jobs)))
        between = np.array(list(pool.map(lambda t: _spread(bump[0, t] - bump[1, t]), range(travel.size))))
        worst = np.array(list(pool.map(lambda s: _spread(np.abs(bump[s]).max(axis=0)), range(2))))
    size = travel.size
    yields = [
        _yield(axle, goal, store.kept[: store.done, g], store.worst[: store.done, g]) for g, goal in enumerate(goals)
    ]
    others = [goal for goal in targets if not _batched(goal)]
    yields += _whole_axle_yields(axle, variables, others, seed)
    return Tolerance(
        axle=axle,
        variables=variables,
        asked=asked,
        builds=store.done,
        lost=int((~good).sum()),
        seed=seed,
        rack=rack,
        travel=travel,
        nominal=drawn,
        bands=found[:, :3].reshape(2, size, 3),
        difference=between[:, :3],
        worst=worst[:, :3],
        deviation=found[:, 3].reshape(2, size),
        yields=tuple(yields),
        shares=shares(axle, variables, float(travel[-1]), rack, seed),
    )


def binomial_interval(kept: int, builds: int) -> tuple[float, float]:
    """Limits of a proportion with CONFIDENCE, exact (Clopper and Pearson)."""
    from scipy.stats import binomtest

    found = binomtest(kept, builds).proportion_ci(CONFIDENCE, method="exact")
    return float(found.low), float(found.high)


def _yield(
    axle: Axle,
    goal: Goal,
    kept: np.ndarray[tuple[int, ...], np.dtype[np.bool_]],
    worst: np.ndarray[tuple[int, ...], np.dtype[np.float32]],
) -> Yield:
    """Yield of a goal from kept and worst values, (N,) each."""
    count = int(kept.sum())
    low, high = binomial_interval(count, kept.size)
    there = worst[~np.isnan(worst)]
    band = np.percentile(there, PERCENTILES).astype(float) if there.size else np.full(3, np.nan)
    return Yield(goal, count, kept.size, low, high, judge(goal, measure(axle, goal)).passed, band)


def _whole_axle_yields(axle: Axle, variables: tuple[Variable, ...], goals: Sequence[Goal], seed: int) -> list[Yield]:
    """Yields of targets that need a solve of the whole axle for each build, on WHOLE_AXLE_BUILDS of them."""
    if not goals:
        return []
    from scipy.stats import qmc

    uniform = np.clip(_draw(qmc.Sobol(len(variables), seed=seed), WHOLE_AXLE_BUILDS), 1e-12, 1.0 - 1e-12)
    moves = np.stack([displacement(variable, uniform[:, v]) for v, variable in enumerate(variables)], axis=1)
    nominal = {side: design_vector(axle, side) for side in SIDES}
    built = built_designs(nominal, variables, moves)
    kept = np.zeros((WHOLE_AXLE_BUILDS, len(goals)), dtype=bool)
    worst = np.full(kept.shape, np.nan, dtype=np.float32)
    for n in range(WHOLE_AXLE_BUILDS):
        corners = []
        for side in SIDES:
            corner = axle.corner(side)
            slots = layout.SLOTS[corner.kind]
            points = {name: built[side][n, 3 * k : 3 * k + 3] for k, name in enumerate(slots) if name}
            corners.append(corner.replace_points(points))
        car = replace(axle, left=corners[0], right=corners[1], symmetric=False)
        for g, goal in enumerate(goals):
            try:
                verdict = judge(goal, measure(car, goal))
                kept[n, g], worst[n, g] = verdict.passed, verdict.value
            except InputError:
                continue  # a build that does not steer so far does not keep the target
    return [_yield(axle, goal, kept[:, g], worst[:, g]) for g, goal in enumerate(goals)]
