"""Writing files so that nothing is half-written and nothing is lost."""

from __future__ import annotations

import os
import tempfile
from collections.abc import Callable
from pathlib import Path

from toewright.model.errors import InputError


def check_target(path: Path, force: bool) -> None:
    """Refuse an output path before any work is done.

    Raises:
        InputError: if the file exists and ``force`` is not set, or its folder does not exist or is no folder.
    """
    if path.is_dir():
        raise InputError(f"{path}: is a folder; give a file name")
    if path.exists() and not force:
        raise InputError(f"{path}: exists already; give another name, or --force to replace it")
    folder = path.parent
    if not folder.is_dir():
        raise InputError(f"{path}: the folder {folder} does not exist; make it first or give another name")
    if not os.access(folder, os.W_OK):
        raise InputError(f"{path}: the folder {folder} can't be written to; give another name")


def write_safely(path: Path, write: Callable[[Path], None], *, force: bool = False) -> None:
    """Write through a temporary file of the same folder and suffix, which takes the name only when it is whole.

    Raises:
        InputError: if the target is refused (see ``check_target``) or can't be written.
    """
    check_target(path, force)
    try:
        handle, name = tempfile.mkstemp(prefix=".toewright-", suffix=path.suffix, dir=path.parent)
    except OSError as error:
        raise InputError(f"{path}: can't be written ({error.strerror}); give another name") from error
    os.close(handle)
    temporary = Path(name)
    try:
        write(temporary)
        mask = os.umask(0)
        os.umask(mask)
        temporary.chmod(0o666 & ~mask)
        temporary.replace(path)
    except OSError as error:
        raise InputError(f"{path}: can't be written ({error.strerror}); free space or give another name") from error
    finally:
        temporary.unlink(missing_ok=True)


def write_text(path: Path, text: str, *, force: bool = False) -> None:
    """Write text as UTF-8 with ``write_safely``."""

    def write(place: Path) -> None:
        place.write_text(text, encoding="utf-8", newline="")

    write_safely(path, write, force=force)
