"""Targets of a file: kept or missed, with the worst place."""

from __future__ import annotations

from typing import TYPE_CHECKING, Any

from rich.text import Text

from toewright_cli.console import out, say

if TYPE_CHECKING:
    from collections.abc import Sequence

    from toewright.studies.verdicts import Verdict


def print_verdicts(verdicts: Sequence[Verdict]) -> None:
    """One line for each target; what is missed stands out."""
    if not verdicts:
        return
    kept = sum(v.passed for v in verdicts)
    say(f"Targets of the file: {kept} of {len(verdicts)} kept", style="bold")
    console = out()
    for verdict in verdicts:
        mark = Text("kept  " if verdict.passed else "MISSED", style="" if verdict.passed else "bold red")
        sentence = verdict.sentence.replace(": kept, worst", "; worst").replace(": MISSED, worst", "; worst")
        console.print(Text("- ").append_text(mark).append(f" {sentence}"), soft_wrap=not console.is_terminal)


def verdicts_document(verdicts: Sequence[Verdict]) -> list[dict[str, Any]]:
    """The targets for ``--json``."""
    return [
        {
            "figure": v.goal.name,
            "words": v.goal.words,
            "low": v.goal.low,
            "high": v.goal.high,
            "kept": v.passed,
            "worst": v.value,
            "worst_place": v.worst_place,
            "missed_by": max(v.miss, 0.0),
        }
        for v in verdicts
    ]
