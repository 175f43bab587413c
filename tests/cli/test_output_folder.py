"""An output folder that cannot be written, or is someone else's: told before or after, and nothing changed."""

from __future__ import annotations

import errno
import os
import re
import sys
from collections.abc import Callable
from pathlib import Path
from typing import Any

import pytest
from command_bench import QUICK, Bench, fault


def refused(bench: Bench, out: str | Path, *said: str) -> None:
    """The run is refused by one fault that says this, and every file is as it was."""
    before = bench.contents()
    told = fault(bench.run("report", "body.stl", *QUICK, "--out", out))
    assert re.search(".*".join(said), told, re.DOTALL), told
    assert bench.contents() == before


def test_someone_elses_files(bench: Bench) -> None:
    bench.put("out/notes.txt", "bench notes")
    refused(
        bench, "out", "- out: the output folder holds what meshlure did not write", "found: notes.txt",
        "allowed: .*absent, empty, or .*earlier run", "next: name another folder with --out, or move these out of it",
    )  # fmt: skip


def test_someone_elses_files_among_ours(bench: Bench) -> None:
    assert bench.report("body.stl").code == 0
    bench.put("out/notes.txt", "bench notes")
    refused(bench, "out", "- out: .*did not write", "found: notes.txt")


def test_a_file_in_the_folders_place(bench: Bench) -> None:
    bench.put("out", "a file")
    refused(bench, "out", "- out: the output folder is a file", "allowed: a folder", "next: name another folder")


def test_a_folder_under_a_file(bench: Bench) -> None:
    refused(bench, "body.stl/out", "- body.stl/out: ", "found: .*body.stl", "allowed: a folder", "next: name another")


def test_the_folder_that_one_stands_in(bench: Bench) -> None:
    refused(bench, ".", r"- \.: the output folder is the one that you stand in", "next: name a folder inside it")


@pytest.mark.skipif(not sys.platform.startswith("linux"), reason="/proc is Linux's")
def test_a_folder_where_nothing_can_be_made(bench: Bench) -> None:
    refused(bench, "/proc/meshlure/out", "- /proc/meshlure/out: ", "found: ", "next: name another folder")


def test_no_right_to_write(bench: Bench, monkeypatch: pytest.MonkeyPatch) -> None:
    # The tests may run as one who may write anywhere, so the system's answer is put in its place.
    asked = os.access

    def access(path: Any, mode: int, **more: Any) -> bool:
        return not (mode & os.W_OK and Path(path) == bench.folder) and asked(path, mode, **more)

    monkeypatch.setattr(os, "access", access)
    monkeypatch.setattr(os, "supports_effective_ids", {access})
    refused(
        bench, "out", "- out: the output folder may not be written", "found: Permission denied", "next: .*the right"
    )


def _refuse_results(monkeypatch: pytest.MonkeyPatch, code: int) -> None:
    """Let the system refuse to write results.json, after all else was written."""
    write: Callable[..., int] = Path.write_text

    def refusing(path: Path, *words: Any, **more: Any) -> int:
        if path.name == "results.json":
            path.write_bytes(b"{")  # half of it fits
            raise OSError(code, os.strerror(code))  # as for an open file, whose name the system does not tell
        return write(path, *words, **more)

    monkeypatch.setattr(Path, "write_text", refusing)


@pytest.mark.parametrize("earlier", [False, True], ids=["no folder yet", "over an earlier run"])
def test_a_full_disk(bench: Bench, monkeypatch: pytest.MonkeyPatch, earlier: bool) -> None:
    if earlier:
        assert bench.report("body.stl").code == 0
    _refuse_results(monkeypatch, errno.ENOSPC)
    refused(bench, "out", "- out: the disk is full", "found: .* MB free", "next: free some space .*nothing was written")


def test_a_disk_that_fails(bench: Bench, monkeypatch: pytest.MonkeyPatch) -> None:
    _refuse_results(monkeypatch, errno.EIO)
    refused(
        bench, "out", "- out: the output folder cannot be written", "found: Input/output error", "next: name another"
    )


@pytest.mark.skipif(sys.platform == "win32", reason="limits a process as POSIX systems can")
def test_a_file_that_may_not_grow_so_large(bench: Bench) -> None:
    import resource

    def limited() -> None:
        resource.setrlimit(resource.RLIMIT_FSIZE, (2000, 2000))

    before = bench.contents()
    # A process of its own, which the system itself refuses.
    ran = bench.launch("report", "body.stl", *QUICK, "--no-page", "--out", "out", preexec_fn=limited)
    told = fault(ran)
    assert re.search("- out: the output folder cannot be written.*found: File too large", told, re.DOTALL), told
    assert bench.contents() == before
