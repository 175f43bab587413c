"""The command line's entry: runs a command, and ends with its exit code whatever stops it."""

from __future__ import annotations

import contextlib
import sys
from typing import NoReturn

from meshlure.cli.codes import INTERRUPTED, SIGNALLED
from meshlure.cli.stopping import Stopped, stoppable


def main() -> NoReturn:
    """Run the command line.

    Notes
    -----
    Exit codes: 0 done, 1 done but the answer is no, 2 bad input or usage, 3 our own fault, 130 stopped by Ctrl-C, 143
    and 129 by the signals that end a process and close a terminal.
    """
    stopped = True
    try:
        with stoppable():
            # Imported here so that Ctrl-C is answered while the libraries are loaded, too.
            from meshlure.cli.app import run

            code = run()
            stopped = code == INTERRUPTED
    except KeyboardInterrupt:
        code = INTERRUPTED
    except Stopped as error:
        code = SIGNALLED + error.number
    if stopped:
        with contextlib.suppress(OSError, ValueError):  # the terminal may be what was closed
            print("stopped; nothing half-written was left behind", file=sys.stderr)
    sys.exit(code)
