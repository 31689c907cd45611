"""Where text goes: results to stdout, progress and warnings to stderr. NO_COLOR is respected (rich does)."""

from __future__ import annotations

import json
import sys
from collections.abc import Sequence
from typing import Any

from rich import box
from rich.console import Console
from rich.table import Table

PIPED_WIDTH = 100
"""Columns when the output is no terminal."""


def out() -> Console:
    """Console for results."""
    return Console(highlight=False, width=None if sys.stdout.isatty() else PIPED_WIDTH)


def err() -> Console:
    """Console for progress and warnings."""
    return Console(stderr=True, highlight=False, width=None if sys.stderr.isatty() else PIPED_WIDTH)


def table(columns: Sequence[str], rows: Sequence[Sequence[str]], *, title: str = "", left: int = 1) -> Table:
    """A table in the one style of the tool: the first ``left`` columns flush left, numbers flush right."""
    made = Table(
        box=box.SIMPLE_HEAD, title=title or None, title_justify="left", title_style="bold", header_style="bold"
    )
    for number, name in enumerate(columns):
        made.add_column(name, justify="left" if number < left else "right", overflow="fold")
    for row in rows:
        made.add_row(*row)
    return made


def print_json(value: Any) -> None:
    """One JSON document on stdout; numbers that are not finite become null."""
    sys.stdout.write(json.dumps(finite(value), indent=2, allow_nan=False) + "\n")


def finite(value: Any) -> Any:
    """Plain lists and numbers for JSON, null for what is not finite."""
    if hasattr(value, "tolist"):
        value = value.tolist()
    if isinstance(value, dict):
        return {str(k): finite(v) for k, v in value.items()}
    if isinstance(value, list | tuple):
        return [finite(v) for v in value]
    if isinstance(value, float) and not (value == value and abs(value) != float("inf")):
        return None
    return value


def print_definitions(names: Sequence[str]) -> None:
    """The ``--explain`` table: definitions of the figures shown, from the glossary."""
    from toewright.model.glossary import explain

    made = Table(
        box=box.SIMPLE_HEAD, title="Definitions", title_justify="left", title_style="bold", header_style="bold"
    )
    for name in ("figure", "unit", "sign", "definition"):
        made.add_column(name, overflow="fold")
    for row in explain(names):
        made.add_row(*row)
    out().print(made)


def print_remarks(remarks: Sequence[str]) -> None:
    """Remarks on the input, to stderr."""
    for remark in remarks:
        err().print(f"remark: {remark}", markup=False, soft_wrap=True)
