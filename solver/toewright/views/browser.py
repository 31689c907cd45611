"""Printing a page to PDF with a Chromium of this machine."""

from __future__ import annotations

import os
import shutil
import subprocess
import tempfile
from pathlib import Path

from toewright.model.errors import InputError

NAMES = ("chromium", "chromium-browser", "google-chrome-stable", "google-chrome")
"""Programs that print a page, the first one found is taken."""

QUIET_FLAGS = (
    "--headless",
    "--disable-gpu",
    "--disable-quic",
    "--no-first-run",
    "--disable-background-networking",
    "--disable-component-update",
    "--disable-sync",
    "--disable-extensions",
)
"""No window, and nothing fetched."""

PATIENCE = 90.0
"""Seconds after which printing is given up."""

MISSING = "printing needs Chromium, and none is installed here; on Debian `apt install chromium`, or print the HTML page yourself"


def find_browser() -> str | None:
    """Path of a Chromium; None where there is none."""
    return next((path for name in NAMES if (path := shutil.which(name))), None)


def browser_command(browser: str, profile: str) -> list[str]:
    """Command line of a browser without window and network services, with a profile of its own.

    As root Chromium refuses to run in its sandbox, so there it goes without: the page is our own and holds no script.
    """
    command = [browser, *QUIET_FLAGS, f"--user-data-dir={profile}"]
    return command if os.geteuid() else [*command, "--no-sandbox"]


def print_pdf(page: Path, path: Path, *, force: bool = False) -> None:
    """Print an HTML file to PDF.

    Raises:
        InputError: if there is no Chromium, it fails, or the target is refused.
    """
    from toewright.model.writing import write_safely

    browser = find_browser()
    if browser is None:
        raise InputError(MISSING)

    def write(place: Path) -> None:
        place.unlink()
        with tempfile.TemporaryDirectory(prefix="toewright-", ignore_cleanup_errors=True) as profile:
            command = browser_command(browser, profile)
            command += ["--no-pdf-header-footer", f"--print-to-pdf={place.resolve()}", page.resolve().as_uri()]
            try:
                done = subprocess.run(command, capture_output=True, check=False, timeout=PATIENCE)
            except subprocess.TimeoutExpired as error:
                raise InputError(
                    f"{path}: {browser} did not finish within {PATIENCE:.0f} s; print the HTML page yourself"
                ) from error
        if done.returncode != 0 or not place.is_file():
            raise InputError(
                f"{path}: {browser} could not print the page (code {done.returncode}); print the HTML page yourself"
            )

    write_safely(path, write, force=force)
