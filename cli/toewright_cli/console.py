"""Where text goes, and the one style of tables: results to stdout, progress and warnings to stderr; NO_COLOR is respected (by rich)."""

from __future__ import annotations

import json
import math
import os
import sys
from collections.abc import Mapping, Sequence
from typing import Any, TextIO

from rich import box
from rich.cells import cell_len
from rich.console import Console
from rich.measure import Measurement
from rich.table import Table
from rich.text import Text

WIDEST = 1000
"""Columns that no table takes."""

PIPED_WIDTH = 100
"""Columns when the output is no terminal and COLUMNS is not set."""

Cell = str | Text


def _console(stream: TextIO, stderr: bool) -> Console:
    known = stream.isatty() or "COLUMNS" in os.environ
    return Console(stderr=stderr, highlight=False, markup=False, width=None if known else PIPED_WIDTH)


def out() -> Console:
    """Console for results."""
    return _console(sys.stdout, False)


def err() -> Console:
    """Console for progress and warnings."""
    return _console(sys.stderr, True)


def say(text: str, *, style: str = "") -> None:
    """A sentence on stdout: wrapped between words on a terminal, one line when piped."""
    console = out()
    console.print(Text(text, style=style), soft_wrap=not console.is_terminal)


def warn(text: str) -> None:
    """A remark or a notice on stderr."""
    console = err()
    console.print(Text(text), soft_wrap=not console.is_terminal)


def complain(sentence: str) -> None:
    """Say on stderr, in one line, what was wrong."""
    sys.stderr.write(f"toewright: {' '.join(sentence.split())}\n")


def table(columns: Sequence[str], rows: Sequence[Sequence[Cell]], *, right: Sequence[int] = ()) -> Table:
    """A table in the one style of the tool.

    Args:
        columns: headings.
        rows: cells; an empty row draws a line.
        right: numbers of the columns that are flush right; the others are flush left.
    """
    made = Table(box=box.SIMPLE_HEAD, header_style="bold", padding=(0, 1, 0, 0))
    for number, name in enumerate(columns):
        numeric = number in right
        made.add_column(
            Text(name),
            justify="right" if numeric else "left",
            vertical="top",
            no_wrap=numeric,
            min_width=_width([name, *(row[number] for row in rows if row)]) if numeric else None,
        )
    for row in rows:
        if row:
            made.add_row(*row)
        else:
            made.add_section()
    return made


def _width(cells: Sequence[Cell]) -> int:
    """Columns that the longest line of some cells takes."""
    return max(cell_len(line) for cell in cells for line in str(cell).split("\n"))


def _least(console: Console, made: Table) -> int:
    """Columns that a table takes at least."""
    return Measurement.get(console, console.options.update(max_width=WIDEST), made).minimum


def print_table(
    columns: Sequence[str], rows: Sequence[Sequence[Cell]], *, right: Sequence[int] = (), spare: Sequence[int] = ()
) -> None:
    """Print ``table`` to stdout without spaces at the ends of lines; a number is never cut short.

    Where the table is too wide, columns of ``spare`` are left out, the first one first, and a line says which; where it still is, its
    lines are longer than the terminal is wide.
    """
    console = out()
    made = table(columns, rows, right=right)
    kept, dropped = list(range(len(columns))), list[str]()
    for number in spare:
        if _least(console, made) <= console.width:
            break
        kept.remove(number)
        dropped.append(" ".join(columns[number].split()))
        made = table(
            [columns[k] for k in kept],
            [[row[k] for k in kept] if row else [] for row in rows],
            right=[place for place, k in enumerate(kept) if k in right],
        )
    console.width = max(console.width, _least(console, made))
    with console.capture() as captured:
        console.print(made)
    lines = [line.rstrip() for line in captured.get().splitlines()]
    while lines and not lines[0]:
        lines.pop(0)
    while lines and not lines[-1]:
        lines.pop()
    sys.stdout.write("\n".join(lines) + "\n")
    if dropped:
        say(f"Left out to fit the width: {', '.join(dropped)}; a wider terminal or --out shows all.")


def print_json(value: Any) -> None:
    """One JSON document on stdout; numbers that are not finite become null."""
    sys.stdout.write(json.dumps(finite(value), indent=2, allow_nan=False) + "\n")


def finite(value: Any) -> Any:
    """Plain lists and numbers for JSON, null for what is not finite; arrays may be numpy's."""
    if hasattr(value, "tolist"):
        value = value.tolist()
    if isinstance(value, Mapping):
        return {str(k): finite(v) for k, v in value.items()}
    if isinstance(value, list | tuple):
        return [finite(v) for v in value]
    if isinstance(value, float) and not math.isfinite(value):
        return None
    return value


def print_definitions(names: Sequence[str]) -> None:
    """What ``--explain`` adds: definitions of the figures shown, from the glossary."""
    from toewright.model.glossary import explain

    say("\nDefinitions", style="bold")
    say(
        "Axes ISO 8855: x forward, y left, z up. s = +1 on the left, -1 on the right; a wheel spin axis, k steering axis, "
        "c contact point, g steering axis at ground, h wheel heading, l its left normal."
    )
    rows = [
        (label, f"{definition}{f'; {sign}' if sign else ''} [{unit}]" if unit != "-" else definition)
        for label, unit, sign, definition in explain(names)
    ]
    print_table(["figure", "definition; sign [unit]"], rows)


def print_remarks(remarks: Sequence[str]) -> None:
    """Remarks on the input, to stderr."""
    for remark in remarks:
        warn(f"remark: {remark}")
