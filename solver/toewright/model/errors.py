"""The one kind of error that means: the input is at fault, and here is what to do."""

from __future__ import annotations


class InputError(ValueError):
    """Bad input. The message is one clear sentence that names file, key, value and remedy."""
