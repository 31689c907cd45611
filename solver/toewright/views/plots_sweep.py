"""Plots of a sweep: the bump-steer map, toe change over travel at several rack positions, camber over bump."""

from __future__ import annotations

from collections.abc import Sequence
from typing import TYPE_CHECKING, Any

import numpy as np

from toewright.core.types import FloatArray
from toewright.kinematics.maps import CornerMaps
from toewright.kinematics.summary import one_side_tells_all
from toewright.model.axle import Axle
from toewright.model.errors import InputError
from toewright.model.glossary import axis_label
from toewright.views.style import (
    FAMILY,
    MAP_INK,
    MARKERS,
    QUIET,
    ROW,
    SERIES,
    label_y,
    results_figure,
    styled,
    toe_colours,
    zero_lines,
)
from toewright.views.words import case_labels, number, trace_words

if TYPE_CHECKING:
    from matplotlib.axes import Axes
    from matplotlib.figure import Figure, SubFigure

FLAT = 1e-7
"""Deg; a map with less everywhere is drawn as level."""

TOE_CHANGE = axis_label("bump_steer", "deg per wheel")


def shown_sides(axles: Sequence[Axle], maps: Sequence[CornerMaps]) -> tuple[str, ...]:
    """Sides that need a panel: one where the other is its mirror image in every file."""
    common = tuple(side for side in maps[0].sides if all(side in m.sides for m in maps))
    if all(one_side_tells_all(axle, m) for axle, m in zip(axles, maps, strict=True)):
        return common[:1]
    return common


def has_map(maps: CornerMaps) -> bool:
    """True where rack and wheel travel both take several values, so that there is a map to draw."""
    return maps.rack_travel.size > 1 and maps.wheel_travel.size > 1


def symmetric_levels(fields: Sequence[FloatArray]) -> FloatArray:
    """Contour levels (L,) about zero that suit all fields together."""
    from matplotlib.ticker import MaxNLocator

    finite = [np.abs(field[np.isfinite(field)]).max(initial=0.0) for field in fields]
    most = max(float(max(finite, default=0.0)), FLAT)
    levels = np.asarray(MaxNLocator(nbins=12, steps=[1, 2, 2.5, 5, 10], symmetric=True).tick_values(-most, most))
    return levels


def draw_map(axes: Axes, rack: FloatArray, travel: FloatArray, field: FloatArray, levels: FloatArray) -> Any:
    """A signed toe map (R, T) as filled contours with labelled lines and a bold zero line; what is NaN is hatched.

    Returns:
        The filled contours, for a colour bar.
    """
    shown = np.ma.masked_invalid(field.T)
    if np.ma.is_masked(shown):
        axes.patch.set(hatch="////", edgecolor=QUIET, linewidth=0.0)
    filled = axes.contourf(rack, travel, shown, levels=levels, cmap=toe_colours(), extend="neither")
    axes.grid(False)
    sizes = np.abs(field[np.isfinite(field)])
    if sizes.size and float(sizes.max()) > FLAT:
        step = float(levels[1] - levels[0])
        places = max(0, min(4, 1 - int(np.floor(np.log10(step) + 1e-9))))
        lines = axes.contour(
            rack, travel, shown, levels=[v for v in levels if abs(v) > 0.01 * step], colors=MAP_INK, linewidths=0.6
        )
        lines.set_linestyle("solid")
        axes.clabel(lines, fmt=lambda v: number(v, places), fontsize=7.5, colors=MAP_INK, inline_spacing=3)
        _draw_zero(axes, rack, travel, field)
    elif sizes.size:
        axes.text(0.5, 0.5, "no toe change", transform=axes.transAxes, ha="center", va="center", color=MAP_INK)
    axes.set(xlim=(rack[0], rack[-1]), ylim=(travel[0], travel[-1]))
    axes.set_xlabel(axis_label("rack_travel"))
    label_y(axes, axis_label("wheel_travel"))
    return filled


def _draw_zero(axes: Axes, rack: FloatArray, travel: FloatArray, field: FloatArray) -> None:
    """Where a field that vanishes at zero travel is zero: that line, and where the field over travel is zero."""
    if travel[0] <= 0.0 <= travel[-1]:
        axes.axhline(0.0, color=MAP_INK, linewidth=2.2)
    moved = np.abs(travel) > FLAT
    if np.count_nonzero(moved) < 2:
        return
    share = np.ma.masked_invalid(field[:, moved].T / travel[moved, np.newaxis])
    if not share.count() or share.min() >= 0.0 or share.max() <= 0.0:
        return
    zero = axes.contour(rack, travel[moved], share, levels=[0.0], colors=MAP_INK, linewidths=2.2)
    axes.clabel(zero, fmt="0", fontsize=8.5, colors=MAP_INK, inline_spacing=3)


def panel_maps(
    figure: Figure | SubFigure, titles: Sequence[str], maps: Sequence[CornerMaps], fields: Sequence[FloatArray]
) -> None:
    """Map panels, two in a row, with one colour bar."""
    levels = symmetric_levels(fields)
    columns = min(2, len(fields))
    rows = -(-len(fields) // columns)
    grid = figure.subplots(rows, columns, squeeze=False)
    filled: Any = None
    for axes, title, of, field in zip(grid.flat, titles, maps, fields, strict=False):
        filled = draw_map(axes, of.rack_travel, of.wheel_travel, field, levels)
        hatched = "" if np.all(np.isfinite(field)) else "; hatched: out of reach or locked"
        axes.set_title(f"{title}{hatched}", fontsize=8.5 if hatched else None)
    for axes in grid.flat[len(fields) :]:
        axes.set_axis_off()
    bar = figure.colorbar(filled, ax=grid, shrink=0.9, aspect=28, pad=0.02)
    bar.set_label(TOE_CHANGE)
    bar.outline.set_linewidth(0.0)


def _racks(maps: CornerMaps, count: int) -> list[int]:
    """About ``count`` rack positions with both ends and the one nearest to straight ahead."""
    last, zero = maps.rack_travel.size - 1, int(np.argmin(np.abs(maps.rack_travel)))
    chosen = {0, zero, last}
    if count > 3:
        chosen |= {zero // 2, (zero + last) // 2}
    return sorted(chosen)


def _draw_curves(
    axes: Axes, axles: Sequence[Axle], maps: Sequence[CornerMaps], name: str, side: str, labels: Sequence[str]
) -> None:
    """One quantity over wheel travel: of one file at several rack positions, of several files straight ahead and at the ends."""
    single = len(maps) == 1
    for k, of in enumerate(maps):
        values = of[name][of.side_index(side)]
        chosen = _racks(of, 5 if single else 3)
        zero = int(np.argmin(np.abs(of.rack_travel)))
        tones = [FAMILY[round(4 * c / (len(chosen) - 1))] if len(chosen) > 1 else SERIES[0] for c in range(len(chosen))]
        for c, i in enumerate(chosen):
            at_rack = number(float(of.rack_travel[i]), 1)
            style = "-" if i == zero else "--" if of.rack_travel[i] > 0 else ":"
            if single:
                axes.plot(of.wheel_travel, values[i], color=tones[c], linestyle=style, label=f"rack {at_rack} mm")
                continue
            axes.plot(
                of.wheel_travel,
                values[i],
                color=SERIES[k],
                linestyle=style,
                linewidth=2.0 if i == zero else 1.1,
                marker=MARKERS[k] if i == zero else "",
                markevery=max(1, of.wheel_travel.size // 6),
                label=labels[k] if i == zero else f"_rack {k} {i}",
            )
    zero_lines(axes, x=True, y=name != "camber")
    axes.set_xlabel(axis_label("wheel_travel"))
    label_y(axes, TOE_CHANGE if name == "bump_steer" else axis_label(name))


def panel_curves(figure: Figure | SubFigure, axles: Sequence[Axle], maps: Sequence[CornerMaps], side: str) -> None:
    """Toe change and camber over wheel travel beside each other, with one legend."""
    left, right = figure.subplots(1, 2)
    labels = case_labels(axles)
    _draw_curves(left, axles, maps, "bump_steer", side, labels)
    _draw_curves(right, axles, maps, "camber", side, labels)
    left.set_title(f"Toe change, {side} wheel")
    right.set_title(f"Camber, {side} wheel")
    handles, names = left.get_legend_handles_labels()
    if len(names) < 2:
        return
    figure.legend(handles, names, loc="outside lower left", ncols=min(len(names), 5 if len(maps) == 1 else 2))
    if len(maps) > 1 and any(m.rack_travel.size > 1 for m in maps):
        left.text(
            0.02,
            0.02,
            "thin: at the ends of the rack travel (dashed +, dotted -)",
            transform=left.transAxes,
            fontsize=7.0,
            color=QUIET,
        )


def panel_over_rack(figure: Figure | SubFigure, axles: Sequence[Axle], maps: Sequence[CornerMaps], side: str) -> None:
    """Steer angle and camber over rack travel, for a sweep at one wheel travel."""
    for axes, name in zip(figure.subplots(1, 2), ("steer_angle", "camber"), strict=True):
        for k, (of, label) in enumerate(zip(maps, case_labels(axles), strict=True)):
            axes.plot(
                of.rack_travel,
                of[name][of.side_index(side), :, 0],
                color=SERIES[k],
                marker=MARKERS[k],
                markevery=max(1, of.rack_travel.size // 6),
                label=label,
            )
        zero_lines(axes, x=True, y=name == "steer_angle")
        axes.set_xlabel(axis_label("rack_travel"))
        label_y(axes, axis_label(name))
        axes.set_title(f"{side} wheel")
        if len(maps) > 1:
            axes.legend(loc="best")


def footer_of(axles: Sequence[Axle]) -> str:
    """Where the numbers of a figure come from, one line for each file."""
    labels = [f"{'ABCDEF'[k]}: " if len(axles) > 1 else "" for k in range(len(axles))]
    return "\n".join(label + trace_words(axle) for label, axle in zip(labels, axles, strict=True))


def sweep_figure(axles: Sequence[Axle], maps: Sequence[CornerMaps], *, plain: bool = False) -> Figure:
    """Bump-steer maps, and toe change and camber over wheel travel, of one or several files.

    Args:
        axles: one to six.
        maps: the sweep of each, over the same positions.
        plain: without title and foot.

    Raises:
        InputError: if there is only one pose, so that there is nothing to draw.
    """
    check_cases(axles, maps)
    sides = shown_sides(axles, maps)
    alone = len(sides) == 1 and len(maps[0].sides) == 2
    over_travel = maps[0].wheel_travel.size > 1
    if not over_travel and maps[0].rack_travel.size < 2:
        raise InputError(
            "--plot: one rack position and one wheel travel make no curve; ask for several, such as -25:25:11"
        )
    panels = [(k, side) for side in sides for k in range(len(maps)) if has_map(maps[k])]
    map_rows = -(-len(panels) // 2)
    heights = [ROW * 1.12 * map_rows] if panels else []
    heights += [ROW] * len(sides)
    labels = case_labels(axles)
    with styled():
        title = labels[0] if len(axles) == 1 else f"Bump steer and camber of {len(axles)} files"
        figure = results_figure(sum(heights), title, footer_of(axles), plain=plain)
        parts = np.atleast_1d(np.asarray(figure.subfigures(len(heights), 1, height_ratios=heights)))
        if panels:
            mirrored = " (right: mirror image, rack the other way)" if alone and len(panels) == 1 else ""
            names = [labels[k] if len(axles) > 1 else "Bump steer" for k, _ in panels]
            titles = [f"{name}, {side} wheel{mirrored}" for name, (_, side) in zip(names, panels, strict=True)]
            fields = [maps[k]["bump_steer"][maps[k].side_index(side)] for k, side in panels]
            panel_maps(parts[0], titles, [maps[k] for k, _ in panels], fields)
        for part, side in zip(parts[len(heights) - len(sides) :], sides, strict=True):
            if over_travel:
                panel_curves(part, axles, maps, side)
            else:
                panel_over_rack(part, axles, maps, side)
        return figure


def check_cases(axles: Sequence[Axle], results: Sequence[object]) -> None:
    """Refuse more files than there are colours.

    Raises:
        InputError: for more than six files.
        ValueError: if there is not one result for each axle.
    """
    if len(axles) != len(results) or not axles:
        raise ValueError("give one result for each axle")
    if len(axles) > len(SERIES):
        raise InputError(f"{len(axles)} files in one picture: at most {len(SERIES)} can be told apart; leave some out")
