"""Completion as the shells do it: each runs the script that the command hands out."""

from __future__ import annotations

import os
import shutil
import subprocess
import sys
from pathlib import Path

import pytest

from meshlure.cli.completion import balls_begun, hardware_begun, inserts_begun, materials_begun, rods_begun
from meshlure.stock.hardware import hardware, item
from meshlure.stock.materials import material, materials

BASH = """
eval "$(meshlure --show-completion)"
offer() { COMP_WORDS=("$@"); COMP_CWORD=$(($# - 1)); _meshlure_completion meshlure; echo "${COMPREPLY[*]}"; }
offer meshlure bal
offer meshlure report x.stl --mat
offer meshlure report x.stl --material bearing
offer meshlure hardware treble-5
"""

ZSH = """
compdef() { true; }
_arguments() { print -r -- "$@"; }
_describe() { print -r -- ${(P)2}; }
eval "$(meshlure --show-completion)"
offer() { words=("$@"); CURRENT=$#; _meshlure_completion; }
offer meshlure report x.stl --material bearing
"""


def said(shell: str, script: str) -> str:
    path = shutil.which(shell)
    if path is None:
        pytest.skip(f"{shell} is not installed")
    folders = f"{Path(sys.executable).parent}{os.pathsep}{os.environ['PATH']}"
    # A file, not -c: which shell asks is known by the process that the command runs under.
    done = subprocess.run(
        [path, "-s"], input=script, env=os.environ | {"PATH": folders}, capture_output=True, text=True, timeout=60
    )
    assert done.stderr == ""
    return done.stdout


def test_in_bash() -> None:
    assert said("bash", BASH).splitlines() == ["balance balls", "--material", "bearing-steel-52100", "treble-5/0"]


def test_in_zsh() -> None:
    assert "bearing-steel-52100" in said("zsh", ZSH)


def test_every_word_offered_is_one_that_the_stock_knows() -> None:
    offered = [word for word, _ in materials_begun("")]
    assert len(offered) >= 0.95 * len(materials())
    assert {material(word, "").name for word in offered} <= {row.name for row in materials()}
    things = [word for word, _ in hardware_begun("")]
    assert [item(word, "").name for word in things if "eyes" not in word] == [
        row.name for row in hardware() if "eyes" not in row.name
    ]
    assert not any(set(word) & set(" '\"$&()<>;|*?`\\") for word in [*offered, *things])


def test_only_what_is_sold_is_offered() -> None:
    assert [word for word, _ in balls_begun("b")] == [
        "borosilicate-glass",
        "bearing-steel-52100",
        *(word for word, _ in materials_begun("brass")),
    ]
    assert "tin" in [word for word, _ in rods_begun("t")]
    assert inserts_begun("belly.stl=fl") == [("belly.stl=flooded", "hollow")]
    assert inserts_begun("bel") == []
