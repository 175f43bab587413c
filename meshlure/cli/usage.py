"""How the command line is taken: commands by job, and what is said where a word of it is not understood."""

from __future__ import annotations

import functools
import inspect
from collections.abc import Callable, Iterable, Sequence
from pathlib import Path
from typing import Annotated, Any, Final

import typer
from typer.core import TyperGroup

from meshlure.cli.commands import JOBS, NAMES, Built, module
from meshlure.cli.terminal import hush
from meshlure.errors import Fault, InputError
from meshlure.files.nearness import nearest

UsageError: Final[type[Exception]] = typer.BadParameter.__bases__[0]
"""What the parser raises where it does not understand: it has no public name of its own."""

_STEM: Final = 5
"""Letters by which a word that is no command is looked for in what the commands say they do."""


class Commands(TyperGroup):
    """The commands, listed by job; a word that is none of them is answered with the one that was meant."""

    def __init__(self, **settings: Any) -> None:
        super().__init__(**settings)
        self.commands: Any = Built()

    def format_options(self, ctx: Any, formatter: Any) -> None:
        """Write the commands by job, then the options."""
        wide = max(map(len, NAMES))
        for job, names in JOBS.items():
            with formatter.section(job):
                formatter.write_dl([(name.ljust(wide), module(name).SHORT) for name in names])
        super().format_options(ctx, formatter)

    def format_commands(self, ctx: Any, formatter: Any) -> None:
        """Write nothing: the commands stand above the options already."""

    def resolve_command(self, ctx: Any, args: list[str]) -> Any:
        """Return the command that the first word names.

        Raises
        ------
        InputError
            Where it names none, with those that it may have meant.
        """
        if args and not args[0].startswith("-") and args[0] not in self.commands:
            raise InputError(self._unknown(args[0]))
        return super().resolve_command(ctx, args)

    def _unknown(self, word: str) -> Fault:
        if Path(word).suffix.casefold() in module("report").SUFFIXES:
            step = f"write meshlure report {word} ..."
            return Fault("a command comes first", "meshlure", word, ", ".join(self.commands), step)
        near = nearest(word, self.commands)
        stem = word.casefold()[:_STEM]
        does = [name for name in NAMES if stem in module(name).SHORT.casefold()]
        step = "meshlure --help says what each does"
        if near:
            step = f"did you mean {_either(f'meshlure {name}' for name in near)}?"
            return Fault("there is no such command", "meshlure", word, next_step=step)
        if does and len(stem) >= 4:
            step = f"see {_either(f'meshlure {name} --help' for name in does)}"
        return Fault("there is no such command", "meshlure", word, ", ".join(self.commands), step)


def shared(command: Callable[..., None]) -> Callable[..., None]:
    """Return a command with the options that all commands have."""
    signature = inspect.signature(command, eval_str=True)
    quiet = inspect.Parameter(
        "quiet",
        inspect.Parameter.KEYWORD_ONLY,
        default=False,
        annotation=Annotated[bool, typer.Option("--quiet", "-q", help="Print only errors, and what --json asks for.")],
    )

    @functools.wraps(command)
    def run(*words: Any, quiet: bool = False, **options: Any) -> None:
        hush(quiet)
        command(*words, **options)

    run.__signature__ = signature.replace(  # type: ignore[attr-defined]
        parameters=[*signature.parameters.values(), quiet]
    )
    run.__annotations__ = dict(command.__annotations__)
    return run


def misread(error: Any, words: Sequence[str]) -> Fault:
    """Return what is said of a command line that the parser did not understand.

    Parameters
    ----------
    error : UsageError
        As the parser raised it, with its context.
    words : sequence of str
        The command line's, without the program's name.
    """
    context = error.ctx
    path = context.command_path if context is not None else " ".join(["meshlure", *words[:1]])
    said = error.format_message().strip().rstrip(".")
    kind = type(error).__name__
    if kind == "NoSuchOption":
        return _no_option(context, path, error.option_name)
    if kind == "BadOptionUsage" and "requires" in said:
        return Fault("a value is missing behind it", error.option_name, next_step=f"{path} --help says which it takes")
    if kind == "MissingParameter":
        name = str(error.param.metavar or error.param.name)
        return Fault(
            f"{name} is missing",
            path,
            "",
            (error.param.help or "").rstrip("."),
            f"write {path} {name}; {_examples(path)}",
        )
    if "extra argument" in said:
        extra = said.partition("(")[2].rpartition(")")[0] or said
        step = f"put names that hold blanks in quotes; {_examples(path)}"
        return Fault("there is a word too many", path, extra.rpartition("(")[2], next_step=step)
    if "valid integer" in said or "valid number" in said:
        whole = "whole " if "integer" in said else ""
        return Fault(f"a {whole}number is wanted", error.param.opts[0], next_step=_examples(path))
    return Fault(said[:1].lower() + said[1:], path, next_step=_examples(path))


def _examples(path: str) -> str:
    return f"{path} --help has examples"


def _no_option(context: Any, path: str, name: str) -> Fault:
    own = _options(context.command)
    near = [one for one in own if one.replace("-", "") == name.replace("-", "").replace("_", "")] or nearest(name, own)
    if near:
        return Fault("there is no such option", path, name, next_step=f"did you mean {_either(near)}?")
    others = [
        f"meshlure {other}"
        for other, command in getattr(context.find_root().command, "commands", {}).items()
        if name in _options(command)
    ]
    step = _examples(path)
    if others and path == "meshlure":
        step = f"options stand behind the command: {_either(f'{other} ... {name}' for other in others[:2])}"
    elif others:
        step = f"{name} belongs to {_either(others)}"
    return Fault("there is no such option", path, name, ", ".join(own), step)


def _options(command: Any) -> list[str]:
    named = (name for one in command.params if one.param_type_name == "option" for name in (*one.opts,))
    return [name for name in (*named, "--help") if name.startswith("--")]


def _either(words: Iterable[str]) -> str:
    some: Sequence[str] = list(words)
    return " or ".join(some) if len(some) < 3 else f"{', '.join(some[:-1])} or {some[-1]}"
