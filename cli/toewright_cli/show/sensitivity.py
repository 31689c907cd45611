"""Sensitivities on the terminal, as a table and as JSON."""

from __future__ import annotations

from typing import TYPE_CHECKING, Any

from toewright.model.glossary import quantity
from toewright.studies.sensitivity import figure_words
from toewright.views.words import axle_words
from toewright_cli.console import print_table, say
from toewright_cli.outputs import source_of

if TYPE_CHECKING:
    from toewright.model.axle import Axle
    from toewright.studies.sensitivity import Sensitivity
    from toewright_cli.outputs import Table


def _unit(name: str) -> str:
    unit = quantity(name).unit
    return "" if unit == "-" else unit


def sensitivity_table(found: Sensitivity) -> Table:
    """Long table: one row for each figure and coordinate."""

    def rows() -> Any:
        for f, goal in enumerate(found.figures):
            for c, name in enumerate(found.coordinates):
                yield [
                    figure_words(goal), _unit(goal.name), float(found.present[f]), name, float(found.slopes[f, c]),
                    float(found.lower[f, c]), float(found.upper[f, c]), "curved" if found.curved[f, c] else "straight",
                ]  # fmt: skip

    return [
        "figure",
        "unit",
        "present",
        "coordinate",
        "slope_per_mm",
        "at_minus_range",
        "at_plus_range",
        "check",
    ], rows()


def sensitivity_document(axle: Axle, found: Sensitivity) -> dict[str, Any]:
    """Everything for JSON."""
    return {
        **source_of(axle),
        "as_built": found.as_built,
        "range_mm": found.range,
        "coordinates": list(found.coordinates),
        "figures": [
            {
                "figure": figure_words(goal),
                "name": goal.name,
                "unit": _unit(goal.name),
                "sign": quantity(goal.name).sign,
                "present": float(found.present[f]),
                "closed_slopes": found.exact[f],
                "slope_per_mm": found.slopes[f],
                "at_minus_range": found.lower[f],
                "at_plus_range": found.upper[f],
                "curved": found.curved[f].tolist(),
                "ranked": [found.coordinates[c] for c in found.ranked(f)],
            }
            for f, goal in enumerate(found.figures)
        ],
    }


def print_sensitivity(axle: Axle, found: Sensitivity, top: int) -> None:
    """For each figure the coordinates that matter most, ranked, with what a re-solve over the range gives."""
    say(axle.title, style="bold")
    say(f"{axle.path}: {axle_words(axle)}")
    how = (
        "as built: parts keep their dimensions, nothing is set again"
        if found.as_built
        else "as drawn: links follow the points, static toe and camber are set again"
    )
    both = "; the right corner moves as the mirror image" if axle.symmetric else ""
    say(f"Change of each figure for 1 mm of a coordinate of the left corner{both}; {how}.")
    for f, goal in enumerate(found.figures):
        entry = quantity(goal.name)
        unit = _unit(goal.name)
        say("")
        say(f"{figure_words(goal)}: {found.present[f]:+.4g} {unit} ({entry.sign})", style="bold")
        rows = []
        for c in found.ranked(f)[:top]:
            slope = float(found.slopes[f, c])
            moved = [float(v) - float(found.present[f]) for v in (found.lower[f, c], found.upper[f, c])]
            rows.append(
                [
                    found.coordinates[c],
                    f"{slope:+.4g}",
                    *(f"{v:+.4g}" if v == v else "not reached" for v in moved),
                    "LINEAR MISLEADS" if found.curved[f, c] else "",
                ]
            )
        r = f"{found.range:g}"
        print_table(
            ["coordinate", f"{unit} per mm", f"change at\n-{r} mm", f"change at\n+{r} mm", ""], rows, right=(1, 2, 3)
        )
    say("")
    if not all(found.exact):
        say(
            "Slopes of figures of the whole axle, and all as built, are five-point differences of exact solves; the others are closed."
        )
    say(
        "A suggestion where to look, not what to do: move a point on the drawing, solve again, check clearance, verify on the vehicle."
    )
