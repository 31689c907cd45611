"""Goals: limits on figures of the glossary, from the file's [targets] or from a line of text. The numbers are the user's own.

In the file::

    [targets]
    bump_steer = {over_travel = [-25, 25], within = 0.05}                 # deg per wheel, straight ahead
    camber = {at_steer = 20, between = [-3.0, 0.0]}                       # both ways, both wheels
    ackermann_percent = {at_steer = 20, between = [40, 80]}
    scrub_radius = [{between = [10, 30]}, {over_travel = [-25, 25], between = [5, 35], side = "left"}]
    roll_centre_z = {at_roll = 2, at_least = 20}

As text: ``bump_steer over -25:25 rack -20,0,20 = 0``, ``ackermann_percent steer 20 in 40:80``, ``scrub_radius <= 30``.

Where: ``over_travel`` (range, mm), ``at_travel`` (one or more, mm), ``at_rack`` (one or more, mm), ``at_steer`` (deg of mean steer, taken
both ways), ``over_roll`` (range, deg), ``at_roll`` (one or more, deg), ``side``. Limit: ``within`` (either way of zero), ``between``,
``at_least``, ``at_most``; ``equals`` (text: ``=``) is for tuning. Units are the glossary's: mm, deg, deg/mm, %.
"""

from __future__ import annotations

import difflib
import math
from collections.abc import Mapping, Sequence
from dataclasses import dataclass, replace
from typing import Any

from toewright.kinematics.maps import SWEEP_COLUMNS
from toewright.kinematics.riding import RIDE_COLUMNS
from toewright.kinematics.turning import TURN_COLUMNS
from toewright.model.axle import Axle
from toewright.model.errors import InputError
from toewright.model.glossary import quantity

CORNER_FIGURES = tuple(SWEEP_COLUMNS)
_WORDS = {
    "motion",
    "status",
    "bump",
    "roll_angle",
    "rack_travel",
    "hand_wheel_angle",
    "wheel_travel_left",
    "wheel_travel_right",
}
TURN_FIGURES = (*(name for name in TURN_COLUMNS if name not in _WORDS), "wall_circle")
RIDE_FIGURES = (
    *(name for name in RIDE_COLUMNS if name not in _WORDS),
    "axle_steer_rate",
    "roll_steer",
    "camber_gain_left",
    "camber_gain_right",
)

PLACES = ("over_travel", "at_travel", "at_rack", "at_steer", "over_roll", "at_roll", "side")
LIMITS = ("within", "between", "at_least", "at_most", "equals")
KEYS = (*PLACES, *LIMITS, "weight")

ALLOWED: Mapping[str, tuple[str, ...]] = {
    "corner": ("over_travel", "at_travel", "at_rack", "at_steer", "side"),
    "turn": ("at_travel", "at_rack", "at_steer"),
    "ride": ("over_travel", "at_travel", "at_rack", "over_roll", "at_roll"),
}
"""Places that each kind of figure takes."""


@dataclass(frozen=True)
class Goal:
    """One limit.

    Attributes:
        name: figure, a name of the glossary.
        kind: "corner" (one wheel), "turn" or "ride" (the axle).
        low, high: limits in the glossary's unit, -inf and inf where there is none.
        over_travel, over_roll: ranges (lo, hi) or None.
        at_travel, at_rack, at_roll: positions; empty for the default, zero.
        at_steer: deg of mean steer, taken both ways; None where it is not asked for.
        side: "left", "right" or "both".
        weight: how much it counts in tuning.
        key: what it is called in messages.
    """

    name: str
    kind: str
    low: float
    high: float
    over_travel: tuple[float, float] | None = None
    over_roll: tuple[float, float] | None = None
    at_travel: tuple[float, ...] = ()
    at_rack: tuple[float, ...] = ()
    at_roll: tuple[float, ...] = ()
    at_steer: float | None = None
    side: str = "both"
    weight: float = 1.0
    key: str = ""

    @property
    def limit_words(self) -> str:
        """The limit in words with its unit: ``within 0.05 deg``."""
        unit = quantity(self.name).unit.replace("-", "")
        tail = f" {unit}" if unit else ""
        if self.low == self.high:
            return f"{self.low:g}{tail}"
        if self.low == -self.high:
            return f"within {self.high:g}{tail} either way"
        if math.isinf(self.high):
            return f"at least {self.low:g}{tail}"
        if math.isinf(self.low):
            return f"at most {self.high:g}{tail}"
        return f"{self.low:g} to {self.high:g}{tail}"

    @property
    def place_words(self) -> str:
        """Where it holds, in words with units."""
        parts = []
        if self.over_travel is not None:
            parts.append(f"over wheel travel {self.over_travel[0]:+g} to {self.over_travel[1]:+g} mm")
        if self.at_travel:
            parts.append(f"at wheel travel {_joined(self.at_travel)} mm")
        if self.at_rack:
            parts.append(f"at rack {_joined(self.at_rack)} mm")
        if self.at_steer is not None:
            parts.append(f"at {self.at_steer:g} deg of mean steer both ways")
        if self.over_roll is not None:
            parts.append(f"over roll {self.over_roll[0]:+g} to {self.over_roll[1]:+g} deg")
        if self.at_roll:
            parts.append(f"at roll {_joined(self.at_roll)} deg")
        if self.side != "both":
            parts.append(f"{self.side} wheel")
        return ", ".join(parts) or "at design"

    @property
    def words(self) -> str:
        """The whole goal in words: ``bump steer (toe-in +) over wheel travel -25 to +25 mm: within 0.05 deg either way``."""
        entry = quantity(self.name)
        sign = f" ({entry.sign})" if entry.sign else ""
        return f"{entry.label}{sign} {self.place_words}: {self.limit_words}"


def _joined(values: Sequence[float]) -> str:
    return ", ".join(f"{v:+g}" if v else "0" for v in values)


def kind_of(name: str, where: str) -> str:
    """Kind of a figure by its name.

    Raises:
        InputError: if there is no such figure, with the nearest name.
    """
    for kind, names in (("corner", CORNER_FIGURES), ("turn", TURN_FIGURES), ("ride", RIDE_FIGURES)):
        if name in names:
            return kind
    everything = [*CORNER_FIGURES, *TURN_FIGURES, *RIDE_FIGURES]
    close = difflib.get_close_matches(name, everything, n=1, cutoff=0.5)
    hint = (
        f"did you mean {close[0]!r}?"
        if close
        else "see `toewright sweep --explain`, `turn --explain` and `ride --explain`"
    )
    raise InputError(f"{where}: {name!r} is no figure that can have a goal; {hint}")


def read_targets(axle: Axle) -> tuple[Goal, ...]:
    """The goals of a file's [targets]; none where there is no such table.

    Raises:
        InputError: for anything that is not understood; with file, key, value and remedy.
    """
    file = str(axle.path or axle.title)
    found: list[Goal] = []
    for name, entry in axle.extra.get("targets", {}).items():
        entries = entry if isinstance(entry, list) else [entry]
        for number, one in enumerate(entries):
            key = f"targets.{name}" + (f"[{number}]" if isinstance(entry, list) else "")
            if not isinstance(one, Mapping):
                raise InputError(f"{file}: {key} = {one!r}: write limits such as {name} = {{between = [0, 1]}}")
            found.append(make_goal(axle, name, one, f"{file}: {key}"))
    return tuple(found)


def make_goal(axle: Axle | None, name: str, entry: Mapping[str, Any], where: str) -> Goal:
    """A goal from a table of places and limits; ``where`` begins every message.

    Raises:
        InputError: for unknown keys, wrong values, places that the figure does not have, no limit or more than one.
    """
    kind = kind_of(name, where)
    for key in entry:
        if key not in KEYS:
            close = difflib.get_close_matches(key, KEYS, n=1, cutoff=0.5)
            raise InputError(
                f"{where}.{key}: is not known; {f'did you mean {close[0]!r}?' if close else 'known are ' + ', '.join(KEYS)}"
            )
        if key in PLACES and key not in ALLOWED[kind]:
            raise InputError(f"{where}.{key}: has no meaning for {name}; use {', '.join(ALLOWED[kind])}")
    for one, two in (("over_travel", "at_travel"), ("at_rack", "at_steer"), ("over_roll", "at_roll")):
        if one in entry and two in entry:
            raise InputError(f"{where}: gives both {one} and {two}; leave one of them out")
    rolling = "over_roll" in entry or "at_roll" in entry
    if rolling and ("over_travel" in entry or "at_travel" in entry):
        raise InputError(f"{where}: gives both roll and travel; leave one of them out")
    low, high = _limits(entry, where)
    side = entry.get("side", "both")
    if side not in ("left", "right", "both"):
        raise InputError(f'{where}.side = {side!r}: write "left", "right" or "both"')
    if axle is not None and axle.rack is None and (any(_several(entry, "at_rack", where)) or "at_steer" in entry):
        raise InputError(f"{where}: asks for rack travel or steer, but the axle has no [rack]; leave that out")
    steer = entry.get("at_steer")
    weight = entry.get("weight", 1.0)
    return Goal(
        name=name,
        kind=kind,
        low=low,
        high=high,
        over_travel=_range(entry, "over_travel", where),
        over_roll=_range(entry, "over_roll", where),
        at_travel=_several(entry, "at_travel", where),
        at_rack=_several(entry, "at_rack", where),
        at_roll=_several(entry, "at_roll", where),
        at_steer=None if steer is None else abs(_number(steer, f"{where}.at_steer")),
        side=side,
        weight=_positive(weight, f"{where}.weight"),
        key=where,
    )


def _limits(entry: Mapping[str, Any], where: str) -> tuple[float, float]:
    given = [key for key in LIMITS if key in entry]
    if not given:
        raise InputError(f"{where}: has no limit; add within, between, at_least or at_most")
    if len(given) > 1 and set(given) != {"at_least", "at_most"}:
        raise InputError(f"{where}: gives {' and '.join(given)}; leave all but one out")
    if given[0] == "within":
        size = _positive(entry["within"], f"{where}.within")
        return -size, size
    if given[0] == "between":
        found = _range(entry, "between", where)
        assert found is not None
        return found
    if given[0] == "equals":
        value = _number(entry["equals"], f"{where}.equals")
        return value, value
    low = _number(entry["at_least"], f"{where}.at_least") if "at_least" in entry else -math.inf
    high = _number(entry["at_most"], f"{where}.at_most") if "at_most" in entry else math.inf
    if low > high:
        raise InputError(f"{where}: at_least {low:g} lies above at_most {high:g}; exchange them")
    return low, high


def _number(value: object, where: str) -> float:
    if not isinstance(value, int | float) or isinstance(value, bool) or not math.isfinite(value):
        raise InputError(f"{where} = {value!r}: is not a number; write one")
    return float(value)


def _positive(value: object, where: str) -> float:
    number = _number(value, where)
    if number <= 0.0:
        raise InputError(f"{where} = {number:g}: must be above 0")
    return number


def _range(entry: Mapping[str, Any], key: str, where: str) -> tuple[float, float] | None:
    if key not in entry:
        return None
    value = entry[key]
    if not isinstance(value, list | tuple) or len(value) != 2:
        raise InputError(f"{where}.{key} = {value!r}: write [lower, upper]")
    low, high = (_number(part, f"{where}.{key}") for part in value)
    if low >= high:
        raise InputError(f"{where}.{key} = {list(value)}: does not ascend; write the lower value first")
    return low, high


def _several(entry: Mapping[str, Any], key: str, where: str) -> tuple[float, ...]:
    if key not in entry:
        return ()
    value = entry[key]
    parts = value if isinstance(value, list | tuple) else [value]
    if not parts:
        raise InputError(f"{where}.{key}: is empty; write one or more numbers")
    return tuple(_number(part, f"{where}.{key}") for part in parts)


_TEXT_PLACES = {
    "rack": "at_rack",
    "travel": "at_travel",
    "steer": "at_steer",
    "roll": "at_roll",
    "side": "side",
    "weight": "weight",
}


def parse_goal(text: str, axle: Axle | None = None) -> Goal:
    """A goal from text: ``NAME [over LO:HI | travel A,B] [rack A,B | steer A] [roll A] [side S] LIMIT [weight W]``.

    LIMIT is ``= V``, ``in LO:HI``, ``<= V`` or ``>= V``.

    Raises:
        InputError: where the text is not understood; it shows the grammar.
    """
    where = f"goal {text!r}"
    words = text.replace("<=", " <= ").replace(">=", " >= ").split()
    spaced: list[str] = []
    for word in words:
        spaced += [word] if word in ("<=", ">=") else [part for part in word.replace("=", " = ").split(" ") if part]
    if not spaced:
        raise InputError(f"{where}: is empty; write a goal such as 'bump_steer over -25:25 = 0'")
    entry: dict[str, Any] = {}
    name, i = spaced[0], 1
    kind = kind_of(name, where)
    while i < len(spaced):
        word = spaced[i]
        if i + 1 >= len(spaced):
            raise InputError(f"{where}: nothing follows {word!r}; write a goal such as 'bump_steer over -25:25 = 0'")
        value = spaced[i + 1]
        if word == "over":
            entry["over_travel"] = _text_range(value, where)
        elif word in ("=", "<=", ">="):
            entry[{"=": "equals", "<=": "at_most", ">=": "at_least"}[word]] = _text_number(value, where)
        elif word == "in":
            entry["between"] = _text_range(value, where)
        elif word in _TEXT_PLACES:
            key = _TEXT_PLACES[word]
            if key == "side":
                entry[key] = value
            elif key == "at_roll" and ":" in value:
                entry["over_roll"] = _text_range(value, where)
            elif key in ("at_steer", "weight"):
                entry[key] = _text_number(value, where)
            else:
                entry[key] = [_text_number(part, where) for part in value.split(",")]
        else:
            close = difflib.get_close_matches(word, ("over", "in", *_TEXT_PLACES), n=1)
            hint = (
                f"did you mean {close[0]!r}?"
                if close
                else "write a goal such as 'bump_steer over -25:25 rack 0,20 = 0'"
            )
            raise InputError(f"{where}: {word!r} is not understood; {hint}")
        i += 2
    made = make_goal(axle, name, entry, where)
    return replace(made, kind=kind)


def _text_number(text: str, where: str) -> float:
    try:
        return _number(float(text), where)
    except ValueError as error:
        if isinstance(error, InputError):
            raise
        raise InputError(f"{where}: {text!r} is not a number; write one") from error


def _text_range(text: str, where: str) -> list[float]:
    parts = text.split(":")
    if len(parts) != 2:
        raise InputError(f"{where}: {text!r} is no range; write LO:HI, such as -25:25")
    return [_text_number(part, where) for part in parts]
