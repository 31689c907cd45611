"""Build scatter on the terminal, as a table and as JSON."""

from __future__ import annotations

from typing import TYPE_CHECKING, Any

from toewright.model.glossary import quantity
from toewright.views.words import axle_words, number, span_words, spread_indices
from toewright_cli.console import print_table, say
from toewright_cli.outputs import source_of

if TYPE_CHECKING:
    from toewright.model.axle import Axle
    from toewright.studies.tolerance import Tolerance
    from toewright.views.toe import ToeScale
    from toewright_cli.outputs import Table

ROWS = 11
SHARES = 10
"""Scatters that are shown, the largest first."""

SIDES = ("left", "right")


def tolerance_table(found: Tolerance) -> Table:
    """Long table: one row for each wheel and travel, and for their difference; deg."""

    def rows() -> Any:
        for s, side in enumerate(SIDES):
            for t, travel in enumerate(found.travel.tolist()):
                yield [
                    side,
                    travel,
                    float(found.nominal[s, t]),
                    *found.bands[s, t].tolist(),
                    float(found.deviation[s, t]),
                ]
        for t, travel in enumerate(found.travel.tolist()):
            drawn = float(found.nominal[0, t] - found.nominal[1, t])
            yield ["left minus right", travel, drawn, *found.difference[t].tolist(), float("nan")]

    return ["wheel", "wheel_travel", "drawn", "percent_5", "percent_50", "percent_95", "standard_deviation"], rows()


def tolerance_document(axle: Axle, found: Tolerance) -> dict[str, Any]:
    """Everything for JSON."""
    return {
        **source_of(axle),
        "builds_asked": found.asked,
        "builds": found.builds,
        "stopped": found.stopped,
        "builds_not_reaching_all": found.lost,
        "seed": found.seed,
        "rack_travel": found.rack,
        "units": {"wheel_travel": "mm", "bump_steer": "deg per wheel, toe-in +"},
        "wheel_travel": found.travel,
        "bump_steer_drawn": dict(zip(SIDES, found.nominal, strict=True)),
        "bump_steer_percent_5_50_95": dict(zip(SIDES, found.bands, strict=True)),
        "left_minus_right_percent_5_50_95": found.difference,
        "largest_bump_steer_percent_5_50_95": dict(zip(SIDES, found.worst, strict=True)),
        "targets": [
            {
                "words": y.goal.words,
                "kept": y.kept,
                "builds": y.builds,
                "yield": y.kept / y.builds,
                "yield_95_percent_interval": [y.low, y.high],
                "drawn_keeps_it": y.nominal,
                "worst_value_percent_5_50_95": y.band,
            }
            for y in found.yields
        ],
        "shares_of_bump_steer_at_full_bump": [
            {
                "scatter": s.name,
                "deg_per_mm": s.slope,
                "linear": s.linear,
                "sobol_first": s.first,
                "sobol_total": s.total,
            }
            for s in found.shares
        ],
    }


def print_tolerance(axle: Axle, found: Tolerance, scale: ToeScale) -> None:
    """Bands of bump steer, left/right difference, yields, and what makes the spread."""
    say(axle.title, style="bold")
    say(f"{axle.path}: {axle_words(axle)}")
    stopped = f", stopped after {found.builds:,}" if found.stopped else ""
    say(
        f"{found.asked:,} builds asked for{stopped}; {len(found.variables)} independent scatters, seed {found.seed}; "
        f"rack {number(found.rack, 1)} mm, wheel travel {span_words(found.travel.tolist())}"
    )
    if found.lost:
        say(f"{found.lost:,} builds do not reach all of the travel; they are left out of the bands.")
    say("")
    say(f"Bump steer, left wheel, and left minus right, in {scale.words}; 5, 50 and 95 % of the builds", style="bold")
    rows = []
    zero = int(abs(found.travel).argmin())
    for t in reversed(spread_indices(found.travel.size, ROWS, zero)):
        cells = [scale.cell(float(v)) for v in (found.nominal[0, t], *found.bands[0, t], *found.difference[t])]
        rows.append([number(float(found.travel[t]), 1), *cells])
    headings = [
        "travel\nmm",
        "as\ndrawn",
        "left\n5 %",
        "left\n50 %",
        "left\n95 %",
        "L-R\n5 %",
        "L-R\n50 %",
        "L-R\n95 %",
    ]
    print_table(headings, rows, right=range(8))
    for s, side in enumerate(SIDES):
        middle, high = (abs(scale.value(float(found.worst[s, k]))) for k in (1, 2))
        say(
            f"Largest bump steer over the travel, {side} wheel: {middle:.3g} in half of the builds, below {high:.3g} in 95 % of them "
            f"({scale.words}, either way)."
        )
    if found.yields:
        say("")
        say("Yield of the file's targets, with its 95 % interval", style="bold")
        for y in found.yields:
            drawn = "" if y.nominal else "; MISSED AS DRAWN"
            share = f"{100 * y.kept / y.builds:.2f} % ({100 * y.low:.2f} to {100 * y.high:.2f} %)"
            say(f"- {share} of {y.builds:,} builds: {y.goal.words}{drawn}")
            unit = quantity(y.goal.name).unit.replace("-", "")
            five, half, most = (f"{value:+.4g}" for value in y.band)
            say(f"    at the worst place of each build: {five} at 5 %, {half} at 50 %, {most} {unit} at 95 %".rstrip())
    else:
        say("The file has no [targets], so there is no yield.")
    if found.shares:
        say("")
        top = number(float(found.travel[-1]), 1)
        say(f"What makes the spread of the left wheel's bump steer at {top} mm of travel", style="bold")
        table = [
            [
                share.name,
                number(1000.0 * share.slope, 1),
                f"{100 * share.linear:.1f}",
                f"{100 * share.first:.1f}",
                f"{100 * share.total:.1f}",
            ]
            for share in found.shares[:SHARES]
        ]
        print_table(
            ["scatter", "slope\n0.001 deg/mm", "linear\n%", "first order\n%", "total\n%"], table, right=range(1, 5)
        )
        say(
            "Slope: toe-in +, for 1 mm of the coordinate. Linear: by the exact slopes alone. First order, total: Sobol indices."
        )
    say(
        "Points scatter as they are on the finished car, with static toe and camber set to their declared values; no play, no flex."
    )
