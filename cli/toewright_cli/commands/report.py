"""``toewright report``: one page that holds the whole design review."""

from __future__ import annotations

from pathlib import Path
from typing import Annotated

import typer

from toewright_cli.console import print_remarks, warn
from toewright_cli.options import Force, HardpointFile
from toewright_cli.outputs import check_out
from toewright_cli.progress import notice_compilation, working


def report(
    file: HardpointFile,
    against: Annotated[
        Path | None,
        typer.Option("--against", metavar="FILE", help="Hardpoint file to compare with: what changed from it to FILE."),
    ] = None,
    out_file: Annotated[
        Path | None,
        typer.Option(
            "--out", "-o", metavar="FILE", help="The page, .html. Default: the file's name with _report.html, here."
        ),
    ] = None,
    pdf: Annotated[
        bool, typer.Option("--pdf", help="Print the page to a .pdf beside it as well, with a Chromium of this machine.")
    ] = False,
    force: Force = False,
) -> None:
    """Write the design review as one HTML page: data, pictures, design sheet, maps, ride, turn, limits, targets, cautions.

    The page needs no network, follows light and dark, and prints on A4.

    Example: toewright report hardpoints/marten_front.toml --against old.toml -o review.html --pdf
    """
    from toewright.model.errors import InputError
    from toewright.model.files import load
    from toewright.views.browser import MISSING, find_browser, print_pdf
    from toewright.views.report import save_report, section_count, write_report

    page = out_file or Path(f"{file.stem}_report.html")
    printed = page.with_suffix(".pdf")
    check_out(page, force, (".html", ".htm"))
    if pdf:
        if find_browser() is None:
            raise InputError(MISSING)
        check_out(printed, force, (".pdf",), "--pdf")
    axle = load(file)
    other = None if against is None else load(against)
    notice_compilation()
    with working("writing the report", section_count(other)) as step:
        text = write_report(axle, against=other, step=step)
    save_report(text, page, force=force)
    warn(f"wrote {page}")
    if pdf:
        with working(f"printing {printed}"):
            print_pdf(page, printed, force=force)
        warn(f"wrote {printed}")
    print_remarks(axle.remarks)
