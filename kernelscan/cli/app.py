"""The program: its commands, and the one place where an error becomes a line and an exit code."""

import os
import sys
from collections.abc import Sequence
from io import TextIOWrapper
from typing import Annotated

import typer
from typer.exceptions import TyperException

from kernelscan.cli.devices import devices
from kernelscan.cli.rooms import rooms
from kernelscan.cli.zones import zones
from kernelscan.errors import CertificateError, InputError, KernelscanError

__all__ = ["app", "main", "run"]

DONE, WRONG_INPUT, PROGRAM_FAULT, INTERRUPTED = 0, 2, 70, 130

app = typer.Typer(
    name="kernelscan",
    help="Where does one camera or line-of-sight sensor see every wall of a room?",
    epilog="The answer is a plan view. Local codes, the device's listing and the authority govern.",
    add_completion=False,
    pretty_exceptions_enable=False,
    rich_markup_mode=None,
)


def _print_version(wanted: bool) -> None:
    if wanted:
        from importlib.metadata import version

        typer.echo(f"kernelscan {version('kernelscan')}")
        raise typer.Exit


@app.callback()
def _program(
    version: Annotated[
        bool, typer.Option("--version", callback=_print_version, is_eager=True, help="Print the version.")
    ] = False,
) -> None:
    pass


app.command()(rooms)
app.command()(zones)
app.command()(devices)


def run(arguments: Sequence[str]) -> int:
    """Run one command line and return its exit code; errors are printed, never raised."""
    command = typer.main.get_command(app)
    try:
        with command.make_context("kernelscan", list(arguments) or ["--help"]) as context:
            command.invoke(context)
    except typer.Exit as end:
        return end.exit_code
    except TyperException as error:
        return _complain(f"{error.format_message()} See kernelscan --help.", code=WRONG_INPUT)
    except CertificateError as error:
        return _complain(
            f"a fault of the program, please report it: {error}; nothing was written", code=PROGRAM_FAULT
        )
    except InputError as error:
        return _complain(*error.args, code=WRONG_INPUT)
    except KernelscanError as error:
        return _complain(str(error), code=WRONG_INPUT)
    except (KeyboardInterrupt, EOFError):
        return _complain("stopped", code=INTERRUPTED)
    except BrokenPipeError:
        # The reader of standard output has left; whatever is still buffered has nowhere to go.
        os.dup2(os.open(os.devnull, os.O_WRONLY), sys.stdout.fileno())
        return DONE
    except Exception as error:
        if "KERNELSCAN_DEBUG" in os.environ:
            raise
        return _complain(f"a fault of the program, please report it: {_brief(error)}", code=PROGRAM_FAULT)
    return DONE


def main() -> None:
    """Run the command line of this process; signs that the terminal cannot show are replaced, not fatal."""
    for stream in (sys.stdout, sys.stderr):
        if isinstance(stream, TextIOWrapper):
            stream.reconfigure(errors="replace")
    sys.exit(run(sys.argv[1:]))


def _complain(*messages: str, code: int) -> int:
    """Print each message as one line, whatever stands in it."""
    for message in messages:
        print("kernelscan: " + " ".join(message.split()), file=sys.stderr)
    return code


def _brief(error: Exception) -> str:
    trace = error.__traceback__
    while trace is not None and trace.tb_next is not None:
        trace = trace.tb_next
    place = "" if trace is None else f" in {trace.tb_frame.f_code.co_name}, line {trace.tb_lineno}"
    return f"{type(error).__name__}: {error}{place}; KERNELSCAN_DEBUG=1 shows all"
