"""``toewright tune``: move points toward goals."""

from __future__ import annotations

from dataclasses import replace
from pathlib import Path
from typing import TYPE_CHECKING, Annotated

import typer

from toewright_cli.console import print_json, print_remarks, say
from toewright_cli.options import AsJson, Force, HardpointFile
from toewright_cli.outputs import check_out
from toewright_cli.progress import notice_compilation, working

if TYPE_CHECKING:
    from toewright.core.types import FloatArray
    from toewright.model.axle import Axle
    from toewright.studies.goals import Goal
    from toewright.studies.tuning import Tuning

KEEP_WEIGHT = 10.0
"""Weight of a figure that is to be kept, unless it says its own."""

MOST_STARTS = 64


def tune(
    file: HardpointFile,
    free: Annotated[
        list[str] | None,
        typer.Option(
            "--free",
            metavar="POINT.z=LO:HI",
            help="A coordinate and how far it may move from where it is, mm; repeat it.",
        ),
    ] = None,
    toward: Annotated[
        list[str] | None,
        typer.Option(
            "--toward",
            metavar="GOAL",
            help="What is wanted, such as 'bump_steer over -25:25 rack -20,0,20 = 0'; repeat it.",
        ),
    ] = None,
    keep: Annotated[
        list[str] | None,
        typer.Option(
            "--keep",
            metavar="FIGURE|GOAL",
            help="A figure that stays as it is (scrub_radius), or a goal to hold; repeat it.",
        ),
    ] = None,
    out_file: Annotated[
        Path | None,
        typer.Option("--out", "-o", metavar="NEW.toml", help="New hardpoint file; comments and order stay."),
    ] = None,
    starts: Annotated[int, typer.Option("--starts", metavar="N", help="Starting points, to find several optima.")] = 6,
    seed: Annotated[int, typer.Option("--seed", metavar="N", help="Of the starting points.")] = 1,
    grid: Annotated[
        float | None,
        typer.Option("--grid", metavar="MM", help="Round the coordinates to this, solving again for the rest."),
    ] = None,
    trade: Annotated[
        bool, typer.Option("--trade", help="Trade-off curve between the first two goals as well.")
    ] = False,
    force: Force = False,
    as_json: AsJson = False,
) -> None:
    """Move coordinates within bounds toward goals; before and after, what binds, how sure, other optima; write a new file.

    Example: toewright tune hardpoints/marten_front.toml --free tie_rod_inner.z=-10:10 --toward "bump_steer over -25:25 = 0" -o new.toml
    """
    from toewright.model.errors import InputError
    from toewright.model.files import load
    from toewright.studies.goals import parse_goal
    from toewright.studies.residuals import parse_free
    from toewright.studies.tuning import trade_off
    from toewright.studies.tuning import tune as solve
    from toewright_cli.show.tuning import print_trade, print_tuning, tuning_document

    check_out(out_file, force, (".toml",))
    axle = load(file)
    moving = [parse_free(text, axle) for text in free or []]
    goals = [parse_goal(text, axle) for text in toward or []]
    if not 1 <= starts <= MOST_STARTS:
        raise InputError(f"--starts {starts}: write a whole number from 1 to {MOST_STARTS}")
    notice_compilation()
    kept = [_keep(axle, text) for text in keep or []] if goals else []
    with working(f"tuning from {starts} starts", starts) as advance:
        found = solve(axle, moving, [*goals, *kept], starts=starts, seed=seed, grid=grid, progress=advance)
    curve = None
    if trade:
        with working("trading off"):
            curve = trade_off(axle, moving, goals)
    if out_file is not None:
        _write(axle, found, out_file, force)
    if as_json:
        print_json(tuning_document(found, curve))
        return
    print_remarks(axle.remarks)
    print_tuning(found)
    if curve is not None:
        print_trade(found, curve)
    if out_file is not None:
        say(f"Written: {out_file}. Look at it: toewright compare {file} {out_file}")
    else:
        say("Nothing is written; add -o NEW.toml for a file with these points.")


def _keep(axle: Axle, text: str) -> Goal:
    """A goal to hold: one that is written out, or a figure's present value."""
    from toewright.studies.goals import make_goal, parse_goal
    from toewright.studies.verdicts import evaluate

    if len(text.split()) > 1 or any(sign in text for sign in "=<>"):
        goal = parse_goal(text, axle)
        return goal if "weight" in text else replace(goal, weight=KEEP_WEIGHT)
    value = evaluate(
        axle,
        [
            make_goal(
                axle,
                text,
                {"at_least": -1e300, "side": "left"} if _one_wheel(text) else {"at_least": -1e300},
                f"--keep {text}",
            )
        ],
    )[0].value
    entry = {"equals": value, "weight": KEEP_WEIGHT}
    return make_goal(axle, text, entry, f"--keep {text}")


def _one_wheel(name: str) -> bool:
    from toewright.studies.goals import CORNER_FIGURES

    return name in CORNER_FIGURES


def _write(axle: Axle, found: Tuning, out_file: Path, force: bool) -> None:
    from toewright.model.editing import save_points

    moved: dict[tuple[str, str], FloatArray] = {}
    for side in ("left",) if axle.symmetric else ("left", "right"):
        for one in found.free:
            moved[(side, one.point)] = found.tuned.corner(side).points[one.point]
    assert axle.path is not None
    save_points(axle.path, moved, out_file, force=force)
