"""The command tree, and the one place where errors become exit codes.

To add a command: write ``commands/<name>.py`` with one function whose parameters are typer annotations (the shared ones are in
``toewright_cli.options`` and ``toewright_cli.toe``) and add one line to ``COMMANDS``. Its docstring is its help. A command's module is
imported when it is used, and all of them for ``toewright --help``: so import the library inside the function, not at the top.
"""

from __future__ import annotations

import difflib
import signal
import sys
from importlib import import_module
from typing import TYPE_CHECKING, Annotated, Any

import typer
from typer.core import TyperGroup

from toewright_cli.commands import COMMANDS
from toewright_cli.console import complain

if TYPE_CHECKING:
    from collections.abc import Sequence

BAD_INPUT = 2
INTERRUPTED = 130

_HELP_OPTIONS = {"help_option_names": ["-h", "--help"]}


class LazyGroup(TyperGroup):
    """A group of commands whose modules are imported when they are asked for."""

    def list_commands(self, ctx: Any) -> list[str]:
        """Names of all commands, in the order of COMMANDS."""
        return list(COMMANDS)

    def get_command(self, ctx: Any, cmd_name: str) -> Any:
        """The command of that name, or None."""
        if cmd_name not in COMMANDS:
            return None
        module, function = COMMANDS[cmd_name]
        single = typer.Typer(add_completion=False)
        callback = getattr(import_module(f"toewright_cli.commands.{module}"), function)
        single.command(cmd_name, context_settings=_HELP_OPTIONS)(callback)
        return typer.main.get_command(single)

    def resolve_command(self, ctx: Any, args: list[str]) -> Any:
        """Find the command that the arguments name; a wrong name gets the nearest right one as a hint."""
        if args[0] not in COMMANDS and not args[0].startswith("-"):
            close = difflib.get_close_matches(args[0], COMMANDS, n=1)
            hint = f"did you mean {close[0]!r}?" if close else f"there are {', '.join(COMMANDS)}"
            raise typer.TyperException(f"{args[0]!r} is no command; {hint}")
        return super().resolve_command(ctx, args)


app = typer.Typer(
    cls=LazyGroup,
    invoke_without_command=True,
    pretty_exceptions_enable=False,
    context_settings=_HELP_OPTIONS,
)


def _version(wanted: bool) -> None:
    if wanted:
        from toewright import __version__

        sys.stdout.write(f"toewright {__version__}\n")
        raise typer.Exit


@app.callback()
def _root(
    context: typer.Context,
    version: Annotated[
        bool, typer.Option("--version", callback=_version, is_eager=True, help="Print the version and end.")
    ] = False,
) -> None:
    """Steering and suspension geometry from hardpoints: what the wheels do over rack and wheel travel, and why."""
    if context.invoked_subcommand is None:
        sys.stdout.write(context.get_help().rstrip() + "\n")


def _usage_sentence(error: typer.TyperException) -> str:
    """What was wrong with the command line: option, value, what is allowed, and where the help is."""
    message = " ".join(error.format_message().split()).rstrip(".").replace("Value error, ", "")
    details = getattr(error.__cause__, "errors", None)
    given = details()[0].get("input") if details else None
    if isinstance(given, str) and given not in message:
        message = f"{message}: got {given!r}"
    context = getattr(error, "ctx", None)
    if context is None:
        return message
    command = context.command_path.removeprefix("toewright").strip()
    message = message[0].lower() + message[1:]
    return f"{f'{command}: ' if command else ''}{message}; see `{context.command_path} --help`"


def run(arguments: Sequence[str] | None = None) -> int:
    """Run the command line and return its exit code: 0 done, 1 a check failed, 2 bad input, 130 interrupted."""
    from toewright.model.errors import InputError

    try:
        command = typer.main.get_command(app)
        code = command.main(
            args=None if arguments is None else list(arguments), prog_name="toewright", standalone_mode=False
        )
        sys.stdout.flush()
    except typer.TyperException as error:
        complain(_usage_sentence(error))
        return BAD_INPUT
    except InputError as error:
        complain(str(error))
        return BAD_INPUT
    except OSError as error:
        complain(
            f"{error.filename or 'output'}: {error.strerror or error}; check the name, the rights and the free space"
        )
        return BAD_INPUT
    except (KeyboardInterrupt, typer.Abort):
        code = INTERRUPTED
    if code == INTERRUPTED:
        complain("stopped; nothing half-written is left behind")
    return int(code or 0)


def main() -> None:
    """Entry point of the ``toewright`` command; a reader that goes away (``| head``) ends it as it ends any filter."""
    if hasattr(signal, "SIGPIPE"):
        signal.signal(signal.SIGPIPE, signal.SIG_DFL)
    sys.exit(run())
