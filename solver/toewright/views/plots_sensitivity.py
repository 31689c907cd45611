"""Bars of sensitivity: for each figure, the coordinates that matter most."""

from __future__ import annotations

from typing import TYPE_CHECKING

from toewright.model.glossary import quantity
from toewright.views.style import INK, SERIES, new_figure, styled, zero_lines

if TYPE_CHECKING:
    from matplotlib.figure import Figure

    from toewright.studies.sensitivity import Sensitivity

BARS = 8
"""Coordinates of each figure."""

COLUMNS = 3


def sensitivity_figure(title: str, found: Sensitivity) -> Figure:
    """One panel for each figure: slopes for 1 mm of the BARS coordinates with the largest, hollow where the linear figure misleads."""
    from matplotlib.ticker import MaxNLocator

    from toewright.studies.sensitivity import figure_words

    count = len(found.figures)
    rows = -(-count // COLUMNS)
    how = "as built, nothing set again" if found.as_built else "toe and camber set again"
    with styled():
        foot = f"Hollow: over +-{found.range:g} mm a re-solve differs from the linear figure by more than a fifth."
        figure = new_figure(
            4.6 * min(count, COLUMNS) + 0.6, 2.7 * rows + 0.8, f"{title}: change for 1 mm ({how})", foot
        )
        panels = figure.subplots(rows, min(count, COLUMNS), squeeze=False)
        for f, axes in enumerate(panels.flat[:count]):
            goal = found.figures[f]
            entry = quantity(goal.name)
            top = list(reversed(found.ranked(f)[:BARS]))
            values = [float(found.slopes[f, c]) for c in top]
            faces = [
                "none" if found.curved[f, c] else SERIES[0] if v >= 0 else SERIES[1]
                for c, v in zip(top, values, strict=True)
            ]
            edges = [SERIES[0] if v >= 0 else SERIES[1] for v in values]
            axes.barh(range(len(top)), values, color=faces, edgecolor=edges, height=0.64)
            axes.set_yticks(range(len(top)), [found.coordinates[c] for c in top], fontsize=7.5)
            axes.tick_params(axis="y", length=0, labelcolor=INK)
            axes.grid(axis="y", visible=False)
            zero_lines(axes, x=True, y=False)
            axes.xaxis.set_major_locator(MaxNLocator(5))
            unit = "" if entry.unit == "-" else entry.unit
            axes.set_xlabel(f"{unit} per mm ({entry.sign})", fontsize=8.0)
            axes.set_title(figure_words(goal), fontsize=8.5)
        for axes in panels.flat[count:]:
            axes.set_axis_off()
    return figure
