"""``toewright new``: a commented starter file."""

from __future__ import annotations

from enum import StrEnum
from pathlib import Path
from typing import Annotated

import typer

from toewright_cli.console import say
from toewright_cli.options import Force


class Starter(StrEnum):
    """Corner kinds that have a starter file."""

    DOUBLE_WISHBONE = "double-wishbone"
    STRUT = "strut"


def new(
    kind: Annotated[Starter, typer.Argument(help="Corner type.", show_default=False)],
    out_file: Annotated[
        Path, typer.Option("--out", "-o", metavar="FILE", help="File to write (.toml).", show_default=False)
    ],
    force: Force = False,
) -> None:
    """Write a commented starter file: a plausible corner whose points you replace with yours."""
    from toewright.model.starters import starter_text
    from toewright.model.writing import write_text
    from toewright_cli.outputs import check_out

    check_out(out_file, force, (".toml",))
    write_text(out_file, starter_text(kind.value), force=force)
    say(f"{out_file}: a {kind.value} starter. Replace its points with yours, then: toewright check {out_file}")
