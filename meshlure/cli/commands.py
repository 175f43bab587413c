"""The commands, by the job that they do; a command's module has its name, its help and a function of its name."""

from __future__ import annotations

import functools
from collections.abc import Iterator, Mapping
from importlib import import_module
from types import ModuleType
from typing import Any, Final

JOBS: Final[dict[str, tuple[str, ...]]] = {
    "Begin": ("new",),
    "Study a bait": ("report", "compare", "inspect"),
    "Change its design": ("balance", "chamber"),
    "Make it": ("mould", "pour", "sheet"),
    "Look up stock": ("materials", "waters", "hardware", "balls", "rods"),
}
"""In the order in which a maker comes to them."""

NAMES: Final = tuple(name for names in JOBS.values() for name in names)


def module(name: str) -> ModuleType:
    """Return a command's module."""
    return import_module(f"meshlure.cli.{name}")


class Built(Mapping[str, Any]):
    """The commands as the parser needs them, each built when it is asked for: all of them take longer than the help."""

    def __getitem__(self, name: str) -> Any:
        if name not in NAMES:
            raise KeyError(name)
        return _built(name)

    def __iter__(self) -> Iterator[str]:
        return iter(NAMES)

    def __len__(self) -> int:
        return len(NAMES)


@functools.cache
def _built(name: str) -> Any:
    import typer

    from meshlure.cli.usage import shared

    of = module(name)
    app = typer.Typer(add_completion=False, rich_markup_mode=None, pretty_exceptions_enable=False)
    app.command(name, help=of.HELP, short_help=of.SHORT)(shared(getattr(of, name)))
    return typer.main.get_command(app)
