"""The workshop table on the terminal and as JSON."""

from __future__ import annotations

from typing import TYPE_CHECKING, Any

from toewright.views.words import axle_words, number, span_words
from toewright_cli.console import print_table, say
from toewright_cli.show.tables import table_document

if TYPE_CHECKING:
    from toewright.model.axle import Axle
    from toewright.studies.shims import ShimTable
    from toewright.views.toe import ToeScale


def print_shims(axle: Axle, found: ShimTable, scale: ToeScale) -> None:
    """One table for each adjuster: what it costs in toe and what it does to bump steer; then side effects and cautions."""
    from toewright.views.shim_sheet import CAUTIONS, best_step

    say(axle.title, style="bold")
    say(f"{axle.path}: {axle_words(axle)}")
    say(
        f"{found.side} wheel, wheel travel {span_words(found.travel.tolist())} from the ride height; bump steer and toe in {scale.words}"
    )
    low, high = (number(float(found.travel[k]), 0) for k in (0, -1))
    for adjuster in found.adjusters:
        rows = []
        for i in found.rows_of(adjuster.name).tolist():
            if found.status[i] != 0:
                rows.append([number(float(found["adjustment"][i]), 2), str(found.status_names[i]), *[""] * 7])
                continue
            turns = float(found["rod_turns"][i])
            rows.append(
                [
                    number(float(found["adjustment"][i]), 2),
                    scale.cell(float(found["toe_before"][i])),
                    number(turns, 2) if turns == turns else number(float(found["rod_longer"][i]), 2),
                    scale.cell(float(found["bump_steer_low"][i])),
                    scale.cell(float(found["bump_steer_high"][i])),
                    number(1000.0 * float(found["bump_steer_rate"][i]), 2),
                    number(float(found["camber"][i]), 2),
                    number(float(found["caster"][i]), 2),
                    number(float(found["scrub_radius"][i]), 1),
                ]
            )
        say("")
        say(f"{adjuster.name}: {adjuster.words}", style="bold")
        rod = "rod\nturns" if (found["rod_turns"] == found["rod_turns"]).any() else "rod\nmm"
        headings = [
            f"step\n{adjuster.unit}", "toe\nbefore", rod, f"bump st.\nat {low}", f"bump st.\nat {high}",
            "rate\ndeg/m", "camber\ndeg", "caster\ndeg", "scrub\nmm",
        ]  # fmt: skip
        print_table(headings, rows, right=range(9))
        best = best_step(found, adjuster.name)
        if best is not None:
            amount = number(float(found["adjustment"][best]), 2)
            say(
                f"Least bump steer in this table: {scale.text(float(found['bump_steer_most'][best]))} at {amount} {adjuster.unit}.".replace(
                    "toe-in ", ""
                )
            )
    say("")
    say(
        "Signs: toe and bump steer in or out; toe before: with the tie rod untouched; rod: longer +, sets the declared toe again; "
        "rate: toe-in with bump +; camber top outboard +; caster top rearward +; scrub radius: steering axis inboard +."
    )
    for note in found.notes:
        say(note)
    say("Cautions:", style="bold")
    for caution in CAUTIONS:
        say(f"- {caution}")


def shims_document(axle: Axle, found: ShimTable) -> dict[str, Any]:
    """Everything for JSON."""
    from toewright.views.shim_sheet import CAUTIONS

    return {
        **table_document(axle, found),
        "side": found.side,
        "wheel_travel": found.travel,
        "ride_height": found.ride_height,
        "adjusters": [{"name": a.name, "unit": a.unit, "words": a.words} for a in found.adjusters],
        "cautions": list(CAUTIONS),
    }
