"""The command line.

One module for each concern, named for its commands in `registry`, registers them.
Exit codes: 0 all is as claimed and accepted; 2 bad input or usage; 3 a claim is
contradicted, or evidence rejected; 4 something is left open.
"""

from __future__ import annotations

import signal
import sys
import threading

import click

from certify.commands.registry import commands
from certify.errors import CertifyError, InputError

__all__ = ["commands", "main"]


def main() -> None:
    """Run the command line, and turn our own errors into a message and an exit code.

    Ctrl-C and SIGTERM end a run in good order: workers first, then the lock on the
    folder; what was found until then is stored.
    """
    if threading.current_thread() is threading.main_thread():
        signal.signal(signal.SIGTERM, _end)
    try:
        code = commands(standalone_mode=False)
    except CertifyError as error:
        click.echo(f"certify: {error}", err=True)
        code = error.exit_code
    except click.ClickException as error:
        error.show()
        code = error.exit_code
    except OSError as error:
        where = f"{error.filename}: " if error.filename else ""
        problem = error.strerror or str(error)
        click.echo(f"certify: {where}cannot be read or written: {problem}", err=True)
        code = InputError.exit_code
    except (click.Abort, KeyboardInterrupt):
        click.echo("certify: interrupted; the same command goes on from here", err=True)
        code = 128 + signal.SIGINT
    sys.exit(code if isinstance(code, int) else 0)


def _end(*_: object) -> None:
    sys.exit(128 + signal.SIGTERM)
