"""Numbers and places in words, the same on the terminal, in pictures and in reports."""

from __future__ import annotations

import math
from string import ascii_uppercase
from typing import TYPE_CHECKING

if TYPE_CHECKING:
    from collections.abc import Sequence

    from toewright.model.axle import Axle

READ_AS = {
    "bump_steer_rate": ("deg/m", 1000.0, 2),
    "camber_gain": ("deg/m", 1000.0, 2),
    "steer_rate": ("deg/mm", 1.0, 4),
    "roll_steer": ("deg/deg", 1.0, 4),
    "swing_arm_left": ("mm", 1.0, 0),
    "swing_arm_right": ("mm", 1.0, 0),
    "turn_radius": ("m", 0.001, 2),
    "kerb_circle": ("m", 0.001, 2),
    "wall_circle": ("m", 0.001, 2),
}
"""Unit, factor from the glossary's unit, and decimals in which people read a quantity; all others as they are, with two."""

_UNSIGNED = ("never negative", "90 best")


def number(value: float, decimals: int, *, sign: bool = True) -> str:
    """A number with its sign; zero has none, and what is not finite is a dash."""
    if not math.isfinite(value):
        return "-"
    text = f"{value:+.{decimals}f}" if sign else f"{value:.{decimals}f}"
    return text if float(text) != 0.0 else text.lstrip("+-")


def figure(name: str, value: float) -> tuple[str, str, str]:
    """Number, unit and sign in words of a glossary quantity, as people read it."""
    from toewright.model.glossary import quantity

    entry = quantity(name)
    unit, factor, decimals = READ_AS.get(name, (entry.unit, 1.0, 2))
    return number(value * factor, decimals, sign=not entry.sign.startswith(_UNSIGNED)), unit, entry.sign


def travel_words(travel: float) -> str:
    """A wheel travel in words: ``+25 mm (bump)``."""
    word = " (bump)" if travel > 0 else " (rebound)" if travel < 0 else ""
    return f"{travel:+g} mm{word}" if travel else "0 mm"


def span_words(values: Sequence[float]) -> str:
    """Positions in words: ``-25 to +25 mm in 21 positions``."""
    if len(values) == 1:
        return f"{values[0]:+g} mm" if values[0] else "0 mm"
    return f"{values[0]:+g} to {values[-1]:+g} mm in {len(values)} positions"


def lock_words(steer: float, rack: float, axle: Axle) -> str:
    """Where the steering stands: ``straight ahead``, ``left lock`` at the end of the stroke, or ``to the left``."""
    if rack == 0.0 or axle.rack is None:
        return "straight ahead"
    if not math.isfinite(steer):
        return "no pose"
    side = "left" if steer > 0.0 else "right"
    at_end = math.isclose(abs(rack), axle.rack.stroke, rel_tol=1e-9)
    return f"{side} lock" if at_end else f"to the {side}"


def axle_words(axle: Axle) -> str:
    """What an axle is: ``front axle, double-wishbone, rack with 30 mm of stroke each way, wheelbase 1550 mm``."""
    kinds = " (left) and ".join(dict.fromkeys((axle.left.kind, axle.right.kind)))
    parts = [f"{axle.vehicle.axle} axle", kinds + (" (right)" if axle.left.kind != axle.right.kind else "")]
    parts.append(
        "no rack (toe links)" if axle.rack is None else f"rack with {axle.rack.stroke:g} mm of stroke each way"
    )
    if axle.vehicle.wheelbase is not None:
        parts.append(f"wheelbase {axle.vehicle.wheelbase:g} mm")
    return ", ".join(parts)


def case_labels(axles: Sequence[Axle], longest: int = 48) -> list[str]:
    """Short names of files for legends: the title, with a letter in front where there are several; never longer than asked.

    Files of one title are told apart by their names.
    """
    alike = len({axle.title for axle in axles}) < len(axles)
    found = []
    for letter, axle in zip(ascii_uppercase, axles, strict=False):
        name = axle.path.name if alike and axle.path is not None else axle.title
        name = " ".join(name.split())
        name = name if len(name) <= longest else name[: longest - 3].rstrip() + "..."
        found.append(f"{letter}: {name}" if len(axles) > 1 else name)
    return found


def trace_words(axle: Axle) -> str:
    """Where numbers come from: file name and the beginning of its hash, with the version of the tool."""
    from toewright import __version__

    file = "in memory" if axle.path is None else axle.path.name
    return f"{file}{f' (sha256 {axle.sha256[:12]})' if axle.sha256 else ''}, toewright {__version__}"


def spread_indices(size: int, count: int, keep: int) -> list[int]:
    """About ``count`` indices of 0..size-1 in even steps from index ``keep`` outward, with both ends among them."""
    step = max(1, -(-(size - 1) // (count - 1)))
    return sorted({*range(keep, size, step), *range(keep, -1, -step), 0, size - 1})
