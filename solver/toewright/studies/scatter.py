"""How parts scatter: the file's table [tolerance].

::

    [tolerance]
    default = 0.3                        # every coordinate of every point: +- this (length unit of the file)
    distribution = "normal"              # limit = 3 standard deviations; "truncated": the same, cut at the limit; "uniform"

    [tolerance.points]
    tie_rod_inner = 0.5                  # another limit, all three axes
    lower_ball_joint = {x = 0.2, z = 0.1, distribution = "uniform"}   # y keeps the default

    [tolerance.shared]                   # the same displacement on both sides, on top
    rack_height = {points = ["tie_rod_inner"], axis = "z", limit = 0.8}

Left and right scatter independently, but for what is shared. A point's scatter is where it is on the finished car: the links are as long
as the points say, and static toe and camber are set to their declared values, as they are on a car that leaves the workshop.
"""

from __future__ import annotations

import difflib
import math
from collections.abc import Mapping
from dataclasses import dataclass
from typing import Any

import numpy as np

from toewright.core.types import FloatArray
from toewright.kinematics.design import COORDINATES, SIDES, coordinate_index
from toewright.model.axle import POINT_NAMES, Axle
from toewright.model.errors import InputError
from toewright.model.frames import MM_PER

DISTRIBUTIONS = ("normal", "truncated", "uniform")
SIGMAS = 3.0
"""Standard deviations in a limit, for normal and truncated."""


@dataclass(frozen=True)
class Variable:
    """One independent scatter.

    Attributes:
        name: ``left tie_rod_inner.z``, or ``shared rack_height``.
        group: the point or the shared name, for sums over its axes and sides.
        places: (side, entry of the design vector) that it moves.
        limit: mm.
        distribution: one of DISTRIBUTIONS.
    """

    name: str
    group: str
    places: tuple[tuple[str, int], ...]
    limit: float
    distribution: str

    @property
    def deviation(self) -> float:
        """Standard deviation, mm."""
        if self.distribution == "uniform":
            return self.limit / math.sqrt(3.0)
        if self.distribution == "normal":
            return self.limit / SIGMAS
        from scipy.stats import truncnorm

        return float(truncnorm(-SIGMAS, SIGMAS).std() * self.limit / SIGMAS)


def displacement(variable: Variable, uniform: FloatArray) -> FloatArray:
    """Displacements (N,) mm of a variable from numbers (N,) in (0, 1), by its inverse distribution."""
    from scipy.special import ndtri

    if variable.distribution == "uniform":
        return variable.limit * (2.0 * uniform - 1.0)
    if variable.distribution == "truncated":
        from scipy.special import ndtr

        low = float(ndtr(-SIGMAS))
        uniform = low + uniform * (1.0 - 2.0 * low)
    spread: FloatArray = ndtri(uniform) * (variable.limit / SIGMAS)
    return spread


def frozen(variable: Variable) -> Any:
    """The variable's distribution as scipy knows it."""
    from scipy.stats import norm, truncnorm, uniform

    if variable.distribution == "uniform":
        return uniform(-variable.limit, 2.0 * variable.limit)
    if variable.distribution == "truncated":
        return truncnorm(-SIGMAS, SIGMAS, scale=variable.limit / SIGMAS)
    return norm(scale=variable.limit / SIGMAS)


def read_scatter(axle: Axle) -> tuple[Variable, ...]:
    """The independent scatters that an axle's file declares, left first, then right, then shared.

    Raises:
        InputError: without the table, or for anything in it that is not understood; with file, key, value and remedy.
    """
    file = str(axle.path or axle.title)
    table = axle.extra.get("tolerance")
    if not table:
        raise InputError(
            f"{file}: has no [tolerance]; add one, such as [tolerance] with default = 0.3 (mm, every coordinate)"
        )
    _known(file, "tolerance", table, ("default", "distribution", "points", "shared"))
    scale = MM_PER[axle.length_unit]
    default = _limit(file, "tolerance.default", table.get("default", 0.0))
    kind = _distribution(file, "tolerance.distribution", table.get("distribution", "normal"))
    points, shared = table.get("points", {}), table.get("shared", {})
    for name, value in (("points", points), ("shared", shared)):
        if not isinstance(value, Mapping):
            raise InputError(f"{file}: tolerance.{name} = {value!r}: is no table; write [tolerance.{name}]")
    names = sorted({*POINT_NAMES[axle.left.kind], *POINT_NAMES[axle.right.kind]})
    for name in points:
        if name not in names:
            raise InputError(f"{file}: tolerance.points.{name}: there is no such point; {_nearest(name, names)}")
    found: list[Variable] = []
    for side in SIDES:
        corner = axle.corner(side)
        for name in POINT_NAMES[corner.kind]:
            key = f"tolerance.points.{name}"
            entry = points.get(name, {})
            own = kind
            if isinstance(entry, Mapping):
                _known(file, key, entry, (*COORDINATES, "distribution"))
                limits = [
                    _limit(file, f"{key}.{axis}", entry[axis]) if axis in entry else default for axis in COORDINATES
                ]
                own = _distribution(file, f"{key}.distribution", entry.get("distribution", kind))
            else:
                limits = [_limit(file, key, entry)] * 3
            for axis, limit in zip(COORDINATES, limits, strict=True):
                if limit > 0.0:
                    index = coordinate_index(corner.kind, f"{name}.{axis}")
                    found.append(Variable(f"{side} {name}.{axis}", name, ((side, index),), limit * scale, own))
    for name, entry in shared.items():
        found.append(_shared(axle, file, name, entry, kind, scale))
    if not found:
        raise InputError(f"{file}: tolerance: all limits are 0, so nothing scatters; write a default above 0")
    return tuple(found)


def _shared(axle: Axle, file: str, name: str, entry: Any, kind: str, scale: float) -> Variable:
    key = f"tolerance.shared.{name}"
    if not isinstance(entry, Mapping):
        raise InputError(f'{file}: {key} = {entry!r}: write {{points = ["tie_rod_inner"], axis = "z", limit = 0.8}}')
    _known(file, key, entry, ("points", "axis", "limit", "distribution"))
    axis = entry.get("axis")
    if axis not in COORDINATES:
        raise InputError(f'{file}: {key}.axis = {axis!r}: write "x", "y" or "z"')
    which = entry.get("points")
    if not isinstance(which, list) or not which:
        raise InputError(f"{file}: {key}.points = {which!r}: write a list of points")
    places = []
    for side in SIDES:
        corner = axle.corner(side)
        for point in which:
            if point not in corner.points:
                raise InputError(
                    f"{file}: {key}.points: {point!r} is no point of the {side} corner; {_nearest(str(point), list(corner.points))}"
                )
            places.append((side, coordinate_index(corner.kind, f"{point}.{axis}")))
    limit = _limit(file, f"{key}.limit", entry.get("limit")) * scale
    if limit == 0.0:
        raise InputError(f"{file}: {key}.limit = 0: write a length above 0, or leave the entry out")
    own = _distribution(file, f"{key}.distribution", entry.get("distribution", kind))
    return Variable(f"shared {name}", name, tuple(places), limit, own)


def _known(file: str, key: str, table: Mapping[str, Any], known: tuple[str, ...]) -> None:
    for word in table:
        if word not in known:
            raise InputError(f"{file}: {key}.{word}: is not known; {_nearest(word, list(known))}")


def _nearest(word: str, known: list[str]) -> str:
    close = difflib.get_close_matches(word, known, n=1)
    return f"did you mean {close[0]!r}?" if close else f"there are {', '.join(known)}"


def _limit(file: str, key: str, value: object) -> float:
    if not isinstance(value, int | float) or isinstance(value, bool) or not math.isfinite(value) or value < 0:
        raise InputError(
            f"{file}: {key} = {value!r}: write a length of 0 or more; points scatter by plus and minus this"
        )
    return float(value)


def _distribution(file: str, key: str, value: object) -> str:
    if value not in DISTRIBUTIONS:
        raise InputError(f"{file}: {key} = {value!r}: write {', '.join(DISTRIBUTIONS)}")
    return str(value)


def built_designs(
    nominal: Mapping[str, FloatArray], variables: tuple[Variable, ...], moves: FloatArray
) -> dict[str, FloatArray]:
    """Design vectors of built corners: nominal side to (35,), moves (N, V) mm, to side to (N, 35)."""
    built = {side: np.repeat(design[np.newaxis], moves.shape[0], axis=0) for side, design in nominal.items()}
    for v, variable in enumerate(variables):
        for side, index in variable.places:
            if side in built:
                built[side][:, index] += moves[:, v]
    return built
