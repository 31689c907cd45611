"""What the workshop can turn and shim: the file's table [adjusters].

::

    [adjusters.toe]                      # any name
    moves = "tie-rod"                    # the tie rod's length, by its thread
    thread_pitch = 1.25                  # length of rod for one turn (length unit; both ends together)
    step = 0.25                          # turns
    range = [-1.0, 1.0]                  # turns, longer +

    [adjusters.rack_height]
    moves = ["tie_rod_inner"]            # points that move together
    direction = [0.0, 0.0, 1.0]          # in the file's axes, for the left corner; the right one mirrors it
    step = 1.0                           # length unit: one shim
    range = [-3.0, 3.0]                  # length unit
"""

from __future__ import annotations

import difflib
import math
from collections.abc import Mapping
from dataclasses import dataclass
from typing import Any

import numpy as np

from toewright.core.types import FloatArray
from toewright.model.axle import MIRROR, Axle
from toewright.model.errors import InputError
from toewright.model.frames import AXIS_SIGNS, MM_PER
from toewright.studies.as_built import MOVABLE

TIE_ROD = "tie-rod"

KEYS = ("moves", "direction", "step", "range", "thread_pitch")

MOST_STEPS = 101
"""Steps of one adjuster."""


@dataclass(frozen=True)
class Adjuster:
    """One adjuster, ISO 8855 and mm.

    Attributes:
        name: as the file says.
        points: what it moves together; empty for the tie rod's thread.
        direction: (3,) unit vector for the left corner; zero for the thread.
        amounts: (K,) mm, or turns of the thread; ascending with 0 among them.
        thread_pitch: mm of rod for one turn; None where there is no thread.
    """

    name: str
    points: tuple[str, ...]
    direction: FloatArray
    amounts: FloatArray
    thread_pitch: float | None

    @property
    def unit(self) -> str:
        """Unit of the amounts."""
        return "mm" if self.thread_pitch is None else "turns"

    @property
    def words(self) -> str:
        """What it does, in words."""
        if self.thread_pitch is not None:
            return f"tie rod's thread, {self.thread_pitch:g} mm for one turn, longer +"
        parts = [
            f"{value:+.3g} {axis}"
            for value, axis in zip(self.direction, ("forward", "left", "up"), strict=True)
            if value
        ]
        return f"moves {', '.join(self.points)} along ({', '.join(parts)}), left corner; the right one mirrors it"

    def shift(self, amount: float, sign: float) -> dict[str, FloatArray]:
        """Displacement (3,) mm of each point for an amount, on the left (sign +1) or the right (sign -1)."""
        along = amount * self.direction * (1.0 if sign > 0 else MIRROR)
        return dict.fromkeys(self.points, along)

    def longer(self, amount: float) -> float:
        """Change of the tie rod's length, mm."""
        return 0.0 if self.thread_pitch is None else amount * self.thread_pitch


def read_adjusters(axle: Axle) -> tuple[Adjuster, ...]:
    """The adjusters that an axle's file declares.

    Raises:
        InputError: without any, and for anything in the table that is not understood; with file, key, value and remedy.
    """
    file = str(axle.path or axle.title)
    table = axle.extra.get("adjusters")
    if not table:
        raise InputError(
            f'{file}: has no [adjusters]; add one, such as [adjusters.rack_height] with moves = ["tie_rod_inner"], '
            "direction = [0.0, 0.0, 1.0], step = 1.0 and range = [-3.0, 3.0]"
        )
    return tuple(_read(axle, file, name, entry) for name, entry in table.items())


def _read(axle: Axle, file: str, name: str, entry: Any) -> Adjuster:
    key = f"adjusters.{name}"
    if not isinstance(entry, Mapping):
        raise InputError(f"{file}: {key} is no table; write [{key}] with moves, step and range")
    for word in entry:
        if word not in KEYS:
            close = difflib.get_close_matches(word, KEYS, n=1)
            raise InputError(
                f"{file}: {key}.{word}: is not known; {f'did you mean {close[0]!r}?' if close else 'known are ' + ', '.join(KEYS)}"
            )
    moves = entry.get("moves")
    thread = moves == TIE_ROD
    scale = MM_PER[axle.length_unit]
    step = _number(file, f"{key}.step", entry.get("step"), above_zero=True)
    low, high = _pair(file, f"{key}.range", entry.get("range"))
    if round((high - low) / step) + 1 > MOST_STEPS:
        raise InputError(
            f"{file}: {key}.step = {step:g}: makes more than {MOST_STEPS} steps over the range; make it larger"
        )
    below, above = math.ceil(low / step - 1e-9), math.floor(high / step + 1e-9)
    amounts = step * np.arange(below, above + 1, dtype=float)
    if thread:
        if "direction" in entry:
            raise InputError(f"{file}: {key}.direction: a thread has none; leave it out")
        pitch = _number(file, f"{key}.thread_pitch", entry.get("thread_pitch"), above_zero=True) * scale
        return Adjuster(name, (), np.zeros(3), amounts, pitch)
    if "thread_pitch" in entry:
        raise InputError(f'{file}: {key}.thread_pitch: belongs to moves = "tie-rod" only; leave it out')
    allowed = MOVABLE[axle.left.kind]
    if not isinstance(moves, list) or not moves:
        raise InputError(
            f'{file}: {key}.moves = {moves!r}: write "tie-rod" or a list of points from {", ".join(allowed)}'
        )
    for point in moves:
        if point not in allowed:
            close = difflib.get_close_matches(str(point), allowed, n=1)
            hint = f"did you mean {close[0]!r}?" if close else f"there are {', '.join(allowed)}"
            raise InputError(f"{file}: {key}.moves: {point!r} can't be moved by a workshop; {hint}")
    raw = entry.get("direction")
    if not isinstance(raw, list) or len(raw) != 3 or not all(_is_number(v) for v in raw) or not any(raw):
        raise InputError(f"{file}: {key}.direction = {raw!r}: write three numbers, such as [0.0, 0.0, 1.0] for upward")
    along = np.array(raw, dtype=float) * AXIS_SIGNS[axle.axes]
    return Adjuster(name, tuple(moves), along / np.linalg.norm(along), amounts * scale, None)


def _is_number(value: object) -> bool:
    return isinstance(value, int | float) and not isinstance(value, bool) and math.isfinite(value)


def _number(file: str, key: str, value: object, *, above_zero: bool) -> float:
    if not isinstance(value, int | float) or not _is_number(value) or (above_zero and value <= 0):
        raise InputError(f"{file}: {key} = {value!r}: write a number above 0")
    return float(value)


def _pair(file: str, key: str, value: object) -> tuple[float, float]:
    if (
        not isinstance(value, list)
        or len(value) != 2
        or not all(_is_number(v) for v in value)
        or not value[0] <= 0 <= value[1]
    ):
        raise InputError(f"{file}: {key} = {value!r}: write [lowest, highest] with 0 between them")
    return float(value[0]), float(value[1])
