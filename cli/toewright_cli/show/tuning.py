"""A tuning on the terminal and as JSON."""

from __future__ import annotations

from typing import TYPE_CHECKING, Any

from toewright.kinematics.design import COORDINATES
from toewright.model.glossary import quantity
from toewright.views.words import axle_words, number
from toewright_cli.console import print_table, say
from toewright_cli.outputs import source_of
from toewright_cli.show.verdicts import verdicts_document

if TYPE_CHECKING:
    from toewright.model.axle import Axle
    from toewright.studies.residuals import Free
    from toewright.studies.tuning import Answer, Trade, Tuning
    from toewright.studies.verdicts import Verdict

CAUTIONS = (
    "A suggestion of geometry, good for the goals given and nothing else: look at the whole map (sweep, turn, ride) of the new file.",
    "Check clearance, joint tilt, stops and strength; verify on the vehicle, tighten and measure again after every change.",
    "The rules you build to and a qualified engineer have the last word.",
)


def _worst(verdict: Verdict) -> str:
    unit = quantity(verdict.goal.name).unit.replace("-", "")
    return f"{number(verdict.value, 4)} {unit}".strip()


def _present(axle: Axle, one: Free) -> float:
    return float(axle.left.points[one.point][COORDINATES.index(one.letter)])


def direction_words(free: tuple[Free, ...], answer: Answer, k: int) -> str:
    """A direction in words: the coordinates that take part in it."""
    parts = sorted(zip(answer.directions[k].components.tolist(), free, strict=True), key=lambda pair: -abs(pair[0]))
    return ", ".join(f"{value:+.2f} {one.name}" for value, one in parts if abs(value) > 0.05)


def print_tuning(found: Tuning) -> None:
    """Goals before and after, the moves, what binds, how sure the answer is, other answers, cautions."""
    from toewright.studies.tuning import HARDLY

    axle, best = found.axle, found.answers[0]
    say(axle.title, style="bold")
    say(f"{axle.path}: {axle_words(axle)}")
    say("")
    say("Goals; the worst place before and after", style="bold")
    for before, after in zip(found.before, found.after, strict=True):
        say(f"- {before.goal.words}")
        say(f"    before {_worst(before)} at {before.worst_place}")
        say(f"    after  {_worst(after)} at {after.worst_place}")
    say(
        f"Sum of squared residuals: {found.cost_before:.6g} before, {best.cost:.6g} after (one goal's unit of miss is 1)."
    )
    say("")
    grid = f" on a grid of {found.grid:g} mm" if found.grid else ""
    sides = "both sides as mirror images" if axle.symmetric else "each side from its own place, as mirror images"
    say(f"Moves{grid}, mm; {sides}", style="bold")
    rows = []
    for one, move in zip(found.free, best.moves.tolist(), strict=True):
        bound = next((text for text in best.binding if text.startswith(f"{one.name} ")), "")
        rows.append(
            [
                one.name,
                f"{_present(axle, one):.3f}",
                number(move, 3),
                f"{_present(found.tuned, one):.3f}",
                f"{one.low:+g} to {one.high:+g}",
                "BINDS" if bound else "",
            ]
        )
    print_table(["coordinate (left)", "before", "move", "after", "may move", ""], rows, right=(1, 2, 3, 4))
    if best.binding:
        say(f"Bounds that bind: {', '.join(best.binding)}; beyond them the goals could be met better.")
    else:
        say("No bound binds.")
    say("")
    say("How sure: what 1 mm along each direction changes (in units of miss)", style="bold")
    for k, direction in enumerate(best.directions):
        note = "; hardly matters: choose it freely" if direction.effect < HARDLY else ""
        say(f"- {direction.effect:.3g}: {direction_words(found.free, best, k)}{note}")
    if not best.determined:
        say(
            "The goals do not determine the answer: along the last direction others are as good; add a goal or free fewer coordinates."
        )
    others = found.answers[1:]
    if others:
        say(f"Other optima found ({len(others)}):")
        for other in others:
            moves = ", ".join(
                f"{one.name} {number(move, 2)}" for one, move in zip(found.free, other.moves.tolist(), strict=True)
            )
            say(f"- cost {other.cost:.6g}: {moves} mm")
    else:
        say("All starts led to this one answer.")
    for caution in CAUTIONS:
        say(caution)


def print_trade(found: Tuning, trade: Trade) -> None:
    """The trade-off curve between the first two goals."""
    say("")
    say("Trade-off; root mean square miss of each goal, in units of miss", style="bold")
    say(f"A: {found.goals[0].words}")
    say(f"B: {found.goals[1].words}")
    rows = [
        [f"{weight:g}", f"{a:.4f}", f"{b:.4f}", *(number(m, 2) for m in moves)]
        for weight, (a, b), moves in zip(trade.weights.tolist(), trade.rms.tolist(), trade.moves.tolist(), strict=True)
    ]
    headings = ["weight of B\nagainst A", "A", "B", *(f"{one.point}\n.{one.letter} mm" for one in found.free)]
    print_table(headings, rows, right=range(len(headings)))


def tuning_document(found: Tuning, trade: Trade | None) -> dict[str, Any]:
    """Everything for JSON."""

    def answer(one: Answer) -> dict[str, Any]:
        return {
            "moves_mm": {f.name: m for f, m in zip(found.free, one.moves.tolist(), strict=True)},
            "cost": one.cost,
            "binding": list(one.binding),
            "determined": one.determined,
            "directions": [{"effect_per_mm": d.effect, "components": d.components} for d in one.directions],
        }

    document: dict[str, Any] = {
        **source_of(found.axle),
        "free": [
            {"name": f.name, "low": f.low, "high": f.high, "present": _present(found.axle, f)} for f in found.free
        ],
        "before": verdicts_document(found.before),
        "after": verdicts_document(found.after),
        "cost_before": found.cost_before,
        "answers": [answer(one) for one in found.answers],
        "grid": found.grid,
        "cautions": list(CAUTIONS),
    }
    if trade is not None:
        document["trade"] = {"weights": trade.weights, "rms": trade.rms, "moves_mm": trade.moves}
    return document
