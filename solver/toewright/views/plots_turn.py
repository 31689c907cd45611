"""Plots of a turn: steer of both wheels with the ideal, Ackermann error and percent, turning circles, slip."""

from __future__ import annotations

from collections.abc import Sequence
from typing import TYPE_CHECKING, Any

import numpy as np

from toewright.core.types import FloatArray
from toewright.kinematics.summary import mirror_images
from toewright.kinematics.turning import TurnMaps
from toewright.model.axle import Axle
from toewright.model.errors import InputError
from toewright.model.glossary import axis_label
from toewright.views.plots_sweep import check_cases, footer_of
from toewright.views.sentences import SHOWN_FROM, ackermann_shown, largest_slip
from toewright.views.style import MARKERS, QUIET, ROW, SERIES, label_y, results_figure, styled, zero_lines
from toewright.views.words import case_labels

if TYPE_CHECKING:
    from matplotlib.axes import Axes
    from matplotlib.figure import Figure

CIRCLE_SHARE = 3.0
"""Turning circles are drawn up to this multiple of the smallest."""

STEER_SIZE = f"size of the mean steer angle (deg), from {SHOWN_FROM:g} deg on"
"""Axis of the Ackermann figures; below, static toe dominates them."""


def _marks(turned: TurnMaps, k: int, count: int) -> dict[str, Any]:
    """Colour, and a marker where there are several files."""
    marker = MARKERS[k] if count > 1 else ""
    return {"color": SERIES[k], "marker": marker, "markevery": max(1, len(turned) // 8)}


def _draw_steer(axes: Axes, turns: Sequence[TurnMaps], labels: Sequence[str]) -> None:
    single = len(turns) == 1
    for k, turned in enumerate(turns):
        rack = turned.rack_travel
        left, right, ideal = (SERIES[0], SERIES[1], SERIES[2]) if single else (SERIES[k],) * 3
        marks = {**_marks(turned, k, len(turns)), "color": left}
        axes.plot(rack, turned["steer_left"], **marks, label="left wheel" if single else f"{labels[k]}, left wheel")
        axes.plot(
            rack, turned["steer_right"], color=right, linestyle="--", label="right wheel" if single else "_right wheel"
        )
        shown = np.where(ackermann_shown(turned["mean_steer"]), turned["ideal_inner_steer"], np.nan)
        shown[1:][np.abs(np.diff(shown)) > 90.0] = (
            np.nan
        )  # beyond 90 deg the inner wheel would have to point the other way
        axes.plot(
            rack,
            shown,
            color=ideal,
            linestyle=":",
            linewidth=1.5,
            label=f"ideal inner wheel, from {SHOWN_FROM:g} deg on" if single else "_ideal inner",
        )
    zero_lines(axes, x=True)
    axes.set_xlabel(axis_label("rack_travel"))
    label_y(axes, axis_label("steer_angle"))
    axes.set_title(
        "Steer angles" if single else "Steer angles: left wheel; dashed right wheel; dotted ideal inner wheel"
    )
    axes.legend(loc="best")


def _branches(axle: Axle, turned: TurnMaps) -> list[tuple[str, str, np.ndarray[Any, Any]]]:
    """Words, line style and mask (N,) of the turns to draw: one way where the other is its mirror image."""
    mean = turned["mean_steer"]
    shown = ackermann_shown(mean)
    ways = [("left turns", "-", shown & (mean > 0.0)), ("right turns", "--", shown & (mean < 0.0))]
    rack = turned.rack_travel
    if mirror_images(axle) and np.allclose(rack, -rack[::-1]) and np.allclose(mean, -mean[::-1], equal_nan=True):
        return [("either way", "-", ways[0][2])]
    return [way for way in ways if way[2].any()]


def _draw_over_steer(
    axes: Axes, axles: Sequence[Axle], turns: Sequence[TurnMaps], values: Sequence[FloatArray], words: str = ""
) -> None:
    """One value over the size of the mean steer; the way is named in the legend where both are drawn."""
    for k, (axle, turned, of) in enumerate(zip(axles, turns, values, strict=True)):
        branches = _branches(axle, turned)
        for way, line, among in branches:
            label = ", ".join(part for part in (words, way if len(branches) > 1 else "") if part)
            place = np.flatnonzero(among)
            place = place[np.argsort(np.abs(turned["mean_steer"][place]))]
            marks = _marks(turned, k, len(turns))
            label = label if k == 0 and label else "_"
            axes.plot(np.abs(turned["mean_steer"][place]), of[place], linestyle=line, **marks, label=label)
    axes.set_xlabel(STEER_SIZE)


def _draw_circles(axes: Axes, axles: Sequence[Axle], turns: Sequence[TurnMaps]) -> None:
    smallest = np.inf
    for k, (axle, turned) in enumerate(zip(axles, turns, strict=True)):
        marks = _marks(turned, k, len(turns))
        for name, words, line in (("kerb_circle", "kerb to kerb", "-"), ("wall_circle", "wall to wall", ":")):
            if name not in turned.columns or not np.isfinite(turned[name]).any():
                continue
            for _, _, among in _branches(axle, turned)[:1]:
                place = np.flatnonzero(among)
                metres = turned[name][place] / 1000.0
                if np.isfinite(metres).any():
                    smallest = min(smallest, float(np.nanmin(metres)))
                label = words if k == 0 else "_"
                axes.plot(np.abs(turned["mean_steer"][place]), metres, linestyle=line, **marks, label=label)
    if np.isfinite(smallest):
        axes.set_ylim(0.0, CIRCLE_SHARE * smallest)
        axes.legend(loc="lower left")
    axes.set_xlabel(STEER_SIZE)
    label_y(axes, "turning circle, diameter (m, never negative)")
    axes.set_title("Turning circle")


def draw_error(axes: Axes, axles: Sequence[Axle], turns: Sequence[TurnMaps]) -> None:
    """Ackermann error over mean steer."""
    _draw_over_steer(axes, axles, turns, [t["ackermann_error"] for t in turns])
    zero_lines(axes)
    label_y(axes, axis_label("ackermann_error"))
    axes.set_title("Ackermann error")


def turn_figure(axles: Sequence[Axle], turns: Sequence[TurnMaps], *, plain: bool = False) -> Figure:
    """Steer angles with the ideal, Ackermann error and percent, turning circles and slip, of one or several files.

    Args:
        axles: one to six.
        turns: the turn of each, over the same rack positions and by the same definition of Ackermann percent.
        plain: without title and foot.

    Raises:
        InputError: for an axle without a rack, or if no position reaches SHOWN_FROM deg of mean steer.
    """
    check_cases(axles, turns)
    for axle, turned in zip(axles, turns, strict=True):
        if axle.rack is None:
            raise InputError(f"{axle.path or axle.title}: has no [rack], so it has no turn to draw; leave it out")
        if not np.any(ackermann_shown(turned["mean_steer"])):
            raise InputError(
                f"{axle.path or axle.title}: no rack position reaches {SHOWN_FROM:g} deg of mean steer, where the plots of a turn "
                "begin; give --rack a wider LIST"
            )
    labels = case_labels(axles)
    with styled():
        title = labels[0] if len(axles) == 1 else f"Turning: {len(axles)} files"
        figure = results_figure(3.1 * ROW, title, footer_of(axles), plain=plain)
        panels = figure.subplot_mosaic([["steer", "steer"], ["error", "percent"], ["circle", "slip"]])
        _draw_steer(panels["steer"], turns, labels)
        error, percent, slip = panels["error"], panels["percent"], panels["slip"]
        draw_error(error, axles, turns)
        _draw_over_steer(percent, axles, turns, [t["ackermann_percent"] for t in turns])
        low, high = percent.get_ylim()
        percent.set_ylim(min(low, -8.0), max(high, 108.0))
        for value, words in ((100.0, "true Ackermann"), (0.0, "parallel steer")):
            percent.axhline(value, color=QUIET, linewidth=0.9)
            percent.text(
                1.0,
                value,
                words,
                transform=percent.get_yaxis_transform(),
                ha="right",
                va="bottom",
                fontsize=7.5,
                color=QUIET,
            )
        label_y(percent, "Ackermann percent (%, - reverse)")
        percent.set_title(f"Ackermann percent, by {turns[0].definition}")
        _draw_circles(panels["circle"], axles, turns)
        _draw_over_steer(slip, axles, turns, [largest_slip(t) for t in turns])
        label_y(slip, "largest slip angle of the wheels (deg, size)")
        slip.set_title("Tyre drag at walking pace")
        slip.set_ylim(bottom=0.0)
        for axes in (error, percent, slip):
            if any(not label.startswith("_") for label in axes.get_legend_handles_labels()[1]):
                axes.legend(loc="best")
        return figure
