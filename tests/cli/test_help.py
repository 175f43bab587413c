"""Help: every option is described, and every example in it is understood."""

from __future__ import annotations

import re
import shlex
import subprocess
import sys
from pathlib import Path
from typing import Any

import pytest
import typer
from command_bench import Bench

from meshlure.cli.app import app
from meshlure.cli.commands import JOBS

SAMPLES = Path(__file__).parents[2] / "samples"
COMMAND: Any = typer.main.get_command(app)


def options() -> list[tuple[str, Any]]:
    named = [("", COMMAND), *COMMAND.commands.items()]
    return [(name, parameter) for name, command in named for parameter in command.params]


@pytest.mark.parametrize(("command", "parameter"), options(), ids=lambda it: getattr(it, "name", it))
def test_every_option_is_described(bench: Bench, command: str, parameter: Any) -> None:
    assert len(parameter.help) >= 10
    shown = " ".join(bench.run(*command.split(), "--help").out.split())
    assert " ".join(parameter.help.split()) in shown
    for name in parameter.opts if parameter.param_type_name == "option" else []:
        assert re.search(rf"{name}[ ,]", shown)


def test_every_command_is_listed_with_what_it_does(bench: Bench) -> None:
    ran = bench.run("--help")
    assert (ran.code, ran.err) == (0, "")
    listed = re.findall(r"^  (\w+)  (.*\w.*)$", ran.out.partition("Options:")[0], re.MULTILINE)
    assert [name for name, _ in listed] == list(COMMAND.commands)
    jobs = re.findall(r"^(\w.*):$", ran.out.partition("Options:")[0], re.MULTILINE)
    assert jobs == list(JOBS)
    assert not any(words.endswith("...") for _, words in listed)


def test_no_words_show_the_help_and_fail(bench: Bench) -> None:
    ran = bench.run()
    assert (ran.code, ran.out) == (2, "")
    assert ran.err == bench.run("--help").out


def examples(help_text: str) -> list[list[str]]:
    joined = re.sub(r"\\\n\s+", "", help_text)
    return [shlex.split(line) for line in re.findall(r"^ +(meshlure .*)$", joined, re.MULTILINE)]


@pytest.mark.parametrize("command", COMMAND.commands)
def test_every_example_is_understood_and_the_light_ones_run(bench: Bench, command: str) -> None:
    given = examples(bench.run(command, "--help").out)
    assert len(given) >= 2
    bench.put("belly.stl", (bench.folder / "weight.stl").read_bytes())
    for words in given:
        assert words[:2] == ["meshlure", command]
        # The parser takes it all: no option is unknown, none lacks its value.
        COMMAND.commands[command].make_context(command, words[2:]).close()
        named = [SAMPLES.parent / word for word in words if word.startswith("samples/")]
        assert all(path.exists() for path in named)
        if named or "".join(words[2:3]).endswith(".toml") or (command == "new" and "--yes" not in words):
            continue  # takes long, needs a bait file of one's own, or asks: the commands' own tests run these
        ran = bench.run(*words[1:])
        assert (ran.code, ran.err) == (0, ""), words
        if "--out" in words:
            assert bench.contents()


def test_help_loads_nothing_heavy() -> None:
    script = (
        "import sys\nfrom meshlure.cli.main import main\nsys.argv = ['meshlure', 'report', '--help']\n"
        "try:\n    main()\nexcept SystemExit:\n    print(*sys.modules, sep='\\n')\n"
    )
    done = subprocess.run([sys.executable, "-c", script], capture_output=True, text=True, check=True, timeout=60)
    loaded = set(done.stdout.partition("Show this message and exit.")[2].split())
    assert {"meshlure", "typer"} <= loaded
    heavy = {"numpy", "scipy", "pint", "gsw", "fluids", "trimesh", "manifold3d", "stl", "rtree", "networkx", "shapely"}
    assert not loaded & (heavy | {"matplotlib", "jinja2", "meshlure.bait", "meshlure.physics", "meshlure.report"})
