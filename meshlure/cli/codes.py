"""The exit codes."""

from __future__ import annotations

from typing import Final

DONE: Final = 0
ANSWER_IS_NO: Final = 1
BAD_INPUT: Final = 2
OUR_FAULT: Final = 3
INTERRUPTED: Final = 130
"""As shells count a program that Ctrl-C ended."""
SIGNALLED: Final = 128
"""With the number of the signal that ended it, as shells count."""
