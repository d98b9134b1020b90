"""Entry point: one group of commands, exit codes that mean something, no traceback for a user's mistake."""

from __future__ import annotations

import signal
import sys
import threading
import traceback
from collections.abc import Iterator, Sequence
from contextlib import contextmanager, suppress

import click

from throughfault import __version__
from throughfault.cli.catalogue import assemble, cells, new, schema
from throughfault.cli.record import reproduce, sign, verify
from throughfault.cli.review import check, review
from throughfault.errors import EXIT_KIT_FAULT, InputError, KitError

__all__ = ["main"]

EXIT_INTERRUPTED = 130

EPILOGUE = """\b
Exit codes: 0 done; 1 a negative answer; 2 bad input or refused;
3 intact but signers not identified; 70 a fault of the kit; 130 interrupted.

Duties and verdicts are for withstand only. They replace neither the standards in force,
nor local codes, nor licensed practice, and are no permission to energise."""


@click.group(epilog=EPILOGUE, context_settings={"help_option_names": ["-h", "--help"], "max_content_width": 100})
@click.version_option(__version__, prog_name="throughfault")
def commands() -> None:
    """Design-review records for the short-circuit withstand of power transformers."""


for _command in (new, check, schema, review, assemble, sign, verify, reproduce, cells):
    commands.add_command(_command)


def main(arguments: Sequence[str] | None = None) -> None:
    """Run the command line and leave with its exit code."""
    sys.exit(run(arguments))


def run(arguments: Sequence[str] | None = None) -> int:
    """Run the command line and return its exit code; a polite end of the process is treated like Ctrl-C."""
    with _ended_as_interrupted():
        return _run(arguments)


@contextmanager
def _ended_as_interrupted() -> Iterator[None]:
    """Let SIGTERM and SIGHUP unwind what is being done; a signal that the caller ignores stays ignored."""
    if threading.current_thread() is not threading.main_thread():
        yield
        return
    names = [name for name in ("SIGTERM", "SIGHUP") if hasattr(signal, name)]
    taken = [s for s in (signal.Signals[name] for name in names) if signal.getsignal(s) == signal.SIG_DFL]

    came: list[int] = []

    def interrupt(number: int, _: object) -> None:
        came.append(number)
        if len(came) == 1:  # a second one must not cut the clearing away short
            raise KeyboardInterrupt

    for one in taken:
        signal.signal(one, interrupt)
    try:
        yield
    finally:
        for one in taken:
            signal.signal(one, signal.SIG_DFL)


def _run(arguments: Sequence[str] | None) -> int:
    try:
        answer = commands.main(args=list(arguments) if arguments is not None else None, standalone_mode=False)
    except click.exceptions.Abort:
        return _interrupted()
    except click.ClickException as fault:
        fault.show()
        return fault.exit_code
    except KeyboardInterrupt:
        return _interrupted()
    except KitError as fault:
        for sentence in fault.faults if isinstance(fault, InputError) else (str(fault),):
            click.echo(f"throughfault: {sentence}", err=True)
        return fault.exit_code
    except Exception:  # noqa: BLE001 - whatever else it is, it is a fault of the kit, to be reported whole
        traceback.print_exc()
        click.echo("throughfault: this is a fault of the kit; nothing was written.", err=True)
        return EXIT_KIT_FAULT
    return answer if isinstance(answer, int) else 0


def _interrupted() -> int:
    with suppress(OSError):  # the terminal may be gone
        click.echo("throughfault: interrupted; nothing was written.", err=True)
    return EXIT_INTERRUPTED
