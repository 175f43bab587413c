"""The output folder: someone else's is refused, and a run's result is there whole or not at all."""

from __future__ import annotations

import errno
import json
import os
import shutil
import stat
import subprocess
import sys
import tempfile
import threading
from collections.abc import Callable, Iterator
from pathlib import Path

import pytest

from meshlure.errors import InputError
from meshlure.files import exchange
from meshlure.files.folder import check_folder, foreign, staged, write_folder

Content = dict[str, bytes | Callable[[Path], None]]


def result(mark: str, *names: str) -> Content:
    """A run's files, every one of them holding the run's mark."""
    listing = {"tool": {"name": "meshlure"}, "run": mark, "files": ["report.html", *names]}
    return {
        "results.json": json.dumps(listing).encode(),
        "report.html": mark.encode(),
        **dict.fromkeys(names, mark.encode()),
    }


def marks(out: Path) -> set[str]:
    """Marks of the runs whose files lie in a folder; one, where the result is whole."""
    texts = {p.read_text() for p in out.rglob("*") if p.is_file() and p.name != "results.json"}
    return texts | {json.loads((out / "results.json").read_text())["run"]}


def names(folder: Path) -> list[str]:
    return sorted(path.relative_to(folder).as_posix() for path in folder.rglob("*"))


@pytest.fixture
def out(tmp_path: Path) -> Path:
    """Folder that an earlier run wrote, alone in its parent."""
    write_folder(tmp_path / "out", result("first", "variant/body.stl"))
    return tmp_path / "out"


@pytest.fixture(params=["one step", "two renames"])
def way(request: pytest.FixtureRequest, monkeypatch: pytest.MonkeyPatch) -> str:
    if request.param == "two renames":
        monkeypatch.setattr(exchange, "swap", lambda one, other: False)
    return str(request.param)


def test_absent_with_its_parents(tmp_path: Path) -> None:
    write_folder(tmp_path / "a" / "b" / "out", result("first"))
    assert names(tmp_path / "a" / "b") == ["out", "out/report.html", "out/results.json"]


def test_empty(tmp_path: Path) -> None:
    (tmp_path / "out").mkdir()
    write_folder(tmp_path / "out", result("first"))
    assert marks(tmp_path / "out") == {"first"}


def test_an_earlier_result_is_replaced_whole(out: Path, way: str) -> None:
    out.chmod(0o750)
    write_folder(out, result("second", "body.stl"))
    assert names(out.parent) == ["out", "out/body.stl", "out/report.html", "out/results.json"], way
    assert marks(out) == {"second"}
    assert stat.S_IMODE(out.stat().st_mode) == 0o750


def test_a_file_can_be_written_by_a_callable(tmp_path: Path) -> None:
    write_folder(tmp_path / "out", result("first") | {"report.html": lambda path: path.write_text("first") and None})
    assert marks(tmp_path / "out") == {"first"}


@pytest.mark.parametrize("strange", ["notes.txt", "variant/notes.txt", "photos/", "variant/link", "\x1b[31m.txt"])
def test_someone_elses_files_are_named_and_kept(out: Path, strange: str) -> None:
    if strange.endswith("/"):
        (out / strange).mkdir()
    elif strange.endswith("link"):
        (out / strange).symlink_to(out / "report.html")
    else:
        (out / strange).write_text("mine")
    before = names(out)
    for refuse in (check_folder, lambda path: write_folder(path, result("second"))):
        with pytest.raises(InputError, match="holds what meshlure did not write") as caught:
            refuse(out)
        assert strange.replace("\x1b", "\\x1b") in caught.value.faults[0].found
    assert names(out) == before
    assert names(out.parent) == ["out", *(f"out/{name}" for name in before)]


@pytest.mark.parametrize(
    "results",
    [
        b"",
        b"{",
        b"[1]",
        b'{"files": ["report.html"]}',
        b'{"tool": {"name": "other"}, "files": ["report.html"]}',
        b'{"tool": {"name": "meshlure"}, "files": "report.html"}',
        b'{"tool": {"name": "meshlure"}, "files": [1]}',
        b"[" * 100_000,
    ],
)
def test_results_that_are_not_ours_own_nothing(out: Path, results: bytes) -> None:
    (out / "results.json").write_bytes(results)
    assert set(foreign(out)) >= {"report.html", "results.json"}


def test_a_file_laid_there_during_the_run_is_kept(out: Path, way: str) -> None:
    def while_others_work(path: Path) -> None:
        path.write_text("second")
        (out / "notes.txt").write_text("mine")

    with pytest.raises(InputError, match=r"notes\.txt"):
        write_folder(out, result("second") | {"report.html": while_others_work})
    assert (out / "notes.txt").read_text() == "mine", way
    (out / "notes.txt").unlink()
    assert marks(out) == {"first"}
    assert names(out.parent)[0] == "out"


def test_a_failure_leaves_the_earlier_result_and_nothing_else(out: Path, way: str) -> None:
    def broken(path: Path) -> None:
        path.write_text("half")
        raise ZeroDivisionError

    with pytest.raises(ZeroDivisionError):
        write_folder(out, result("second") | {"body.stl": broken})
    assert marks(out) == {"first"}, way
    assert names(out.parent)[:2] == ["out", "out/report.html"]


def test_a_failure_takes_the_parents_with_it_that_it_made(tmp_path: Path) -> None:
    with pytest.raises(ZeroDivisionError), staged(tmp_path / "a" / "b" / "out"):
        raise ZeroDivisionError
    assert names(tmp_path) == []


def test_a_file_that_is_not_listed_is_our_own_fault(out: Path) -> None:
    with pytest.raises(RuntimeError, match=r"forgotten\.stl"):
        write_folder(out, result("second") | {"forgotten.stl": b""})
    with pytest.raises(RuntimeError, match=r"results\.json"):
        write_folder(out, {})
    assert marks(out) == {"first"}


@pytest.mark.parametrize("name", ["../x", "/x", "a/../../x"])
def test_paths_out_of_the_folder(out: Path, name: str) -> None:
    with pytest.raises(ValueError, match="leads out"):
        write_folder(out, result("second") | {name: b""})
    assert marks(out) == {"first"}


def test_a_file_in_its_place(tmp_path: Path) -> None:
    (tmp_path / "out").write_text("mine")
    for place, said in (("out", "is a file"), ("out/sub", "path is a file"), ("out/sub/sub", "path is a file")):
        for refuse in (check_folder, lambda path: write_folder(path, result("first"))):
            with pytest.raises(InputError, match=said):
                refuse(tmp_path / place)
    assert (tmp_path / "out").read_text() == "mine"


def test_a_link_to_a_folder_is_followed_and_stays(out: Path) -> None:
    link = out.parent / "latest"
    link.symlink_to(out)
    write_folder(link, result("second"))
    assert link.is_symlink()
    assert marks(out) == {"second"}


def test_links_that_lead_nowhere(tmp_path: Path) -> None:
    (tmp_path / "out").symlink_to(tmp_path / "gone")
    (tmp_path / "round").symlink_to(tmp_path / "round")
    for name in ("out", "round"):
        with pytest.raises(InputError, match=r"leads nowhere|cannot be looked at"):
            check_folder(tmp_path / name)
    assert names(tmp_path) == ["out", "round"]


def test_the_folder_one_stands_in(out: Path, monkeypatch: pytest.MonkeyPatch) -> None:
    for place in (out, out / "variant"):
        monkeypatch.chdir(place)
        with pytest.raises(InputError, match="that you stand in"):
            write_folder(out, result("second"))
    assert marks(out) == {"first"}


@pytest.mark.skipif(not Path("/proc").is_mount(), reason="no mount point that every Linux has")
def test_a_mount_point() -> None:
    with pytest.raises(InputError, match="mount point"):
        check_folder(Path("/proc"))


def test_names_that_no_system_takes(tmp_path: Path) -> None:
    for name in ("out\0", "x" * 300):
        with pytest.raises(InputError, match="the output folder cannot be"):
            write_folder(tmp_path / name, result("first"))


def test_checking_makes_nothing(tmp_path: Path) -> None:
    check_folder(tmp_path / "a" / "out")
    assert names(tmp_path) == []


@pytest.fixture
def unprivileged() -> Iterator[Path]:
    """Folder in which root is not root: its rights would bind nobody."""
    place = Path(tempfile.mkdtemp())
    place.chmod(0o755)
    was_root = os.geteuid() == 0
    if was_root:
        os.chown(place, 65534, 65534)
        os.seteuid(65534)
    yield place
    if was_root:
        os.seteuid(0)
    for folder in [place, *place.rglob("*")]:
        folder.chmod(0o755)
    shutil.rmtree(place)


def test_not_allowed_to_write(unprivileged: Path) -> None:
    unprivileged.chmod(0o555)
    for out in (unprivileged / "out", unprivileged / "a" / "out"):
        for refuse in (check_folder, lambda path: write_folder(path, result("first"))):
            with pytest.raises(InputError, match=r"(?s)may not be written.*the right to write"):
                refuse(out)
    assert names(unprivileged) == []


def test_not_allowed_to_look_into_it(unprivileged: Path) -> None:
    """A folder that cannot be listed looks empty to a careless reader, and would be thrown away."""
    out = unprivileged / "out"
    (out / "inner").mkdir(parents=True)
    (out / "inner" / "mine.txt").write_text("mine")
    out.chmod(0)
    with pytest.raises(InputError, match="may not be written"):
        write_folder(out, result("first"))
    out.chmod(0o755)
    assert names(out) == ["inner", "inner/mine.txt"]


def test_not_allowed_to_look_into_a_part_of_it(unprivileged: Path) -> None:
    out = unprivileged / "out"
    write_folder(out, result("first", "inner/body.stl"))
    (out / "inner" / "mine.txt").write_text("mine")
    (out / "inner").chmod(0)
    for refuse in (check_folder, lambda path: write_folder(path, result("second"))):
        with pytest.raises(InputError, match="may not be written"):
            refuse(out)
    (out / "inner").chmod(0o755)
    assert (out / "inner" / "mine.txt").read_text() == "mine"
    assert (out / "results.json").exists()


@pytest.mark.skipif(
    not Path("/dev/full").exists(), reason="/dev/full is where the kernel itself says that a disk is full"
)
def test_a_full_disk(out: Path) -> None:
    def onto_a_full_disk(path: Path) -> None:
        path.symlink_to("/dev/full")
        path.write_bytes(b"x" * 100_000)

    with pytest.raises(InputError, match=r"(?s)the disk is full.*MB free.*before is untouched"):
        write_folder(out, result("second") | {"body.stl": onto_a_full_disk})
    assert marks(out) == {"first"}
    assert names(out.parent)[:2] == ["out", "out/report.html"]


def test_a_full_disk_of_64_kilobytes(tmp_path: Path) -> None:
    small = tmp_path / "small"
    small.mkdir()
    mount = ["mount", "-t", "tmpfs", "-o", "size=64k", "tmpfs", str(small)]
    if os.geteuid() != 0 or shutil.which("mount") is None or subprocess.run(mount, capture_output=True).returncode:
        pytest.skip("a file system can be mounted by root only")
    try:
        write_folder(small / "out", result("first"))
        with pytest.raises(InputError, match="the disk is full"):
            write_folder(small / "out", result("second", "body.stl") | {"body.stl": b"x" * 100_000})
        assert marks(small / "out") == {"first"}
        assert sorted(path.name for path in small.iterdir()) == ["out"]
    finally:
        subprocess.run(["umount", str(small)], check=True)


def test_other_errors_of_the_block_are_not_the_folders(out: Path) -> None:
    with pytest.raises(FileNotFoundError), staged(out):
        (out.parent / "gone.stl").read_bytes()
    assert marks(out) == {"first"}


def test_nobody_ever_finds_the_folder_missing_or_mixed(out: Path) -> None:
    if not _can_swap(out.parent):
        pytest.skip("this file system has no exchange in one step")
    seen: set[str] = set()
    faults: list[str] = []
    done = threading.Event()

    def look() -> None:
        while not done.is_set():
            try:
                handle = os.open(out, os.O_RDONLY)
            except OSError as error:
                faults.append(str(error))
                continue
            try:
                # Both files by the same open folder: what is read belongs to one result, or the folder is gone by then.
                texts = {_read_at(handle, "report.html"), json.loads(_read_at(handle, "results.json"))["run"]}
                seen.update(texts)
                if len(texts) > 1:
                    faults.append(f"mixed: {texts}")
            except FileNotFoundError:
                pass
            finally:
                os.close(handle)

    reader = threading.Thread(target=look)
    reader.start()
    try:
        for number in range(60):
            write_folder(out, result(str(number)))
    finally:
        done.set()
        reader.join()
    assert not faults
    assert len(seen) > 3


def _read_at(folder: int, name: str) -> str:
    with os.fdopen(os.open(name, os.O_RDONLY, dir_fd=folder)) as file:
        return file.read()


def _can_swap(folder: Path) -> bool:
    (folder / "one").mkdir()
    (folder / "two").mkdir()
    return exchange.swap(folder / "one", folder / "two")


KILLED_AT_RENAME = """
import os, sys
from pathlib import Path
from meshlure.files import exchange
from meshlure.files.folder import write_folder

exchange.swap = lambda one, other: False
left = int(sys.argv[2])
rename = Path.rename

def counted(self, target):
    global left
    if left == 0:
        os._exit(9)
    left -= 1
    return rename(self, target)

Path.rename = counted
write_folder(Path(sys.argv[1]), {
    "results.json": b'{"tool": {"name": "meshlure"}, "run": "second", "files": ["report.html"]}',
    "report.html": b"second",
})
"""


@pytest.mark.parametrize(("renames", "left"), [(0, {"first"}), (1, {"first"}), (2, {"second"})])
def test_a_run_killed_before_a_rename_is_finished_by_the_next(out: Path, renames: int, left: set[str]) -> None:
    """Killed for good, by leaving the process at that point; the next run fails, so that what it found stays."""
    killed = subprocess.run([sys.executable, "-c", KILLED_AT_RENAME, str(out), str(renames)], check=False)
    assert killed.returncode == 9
    assert out.exists() == (renames < 2)
    with pytest.raises(ZeroDivisionError), staged(out):
        raise ZeroDivisionError
    assert marks(out) == left
    assert sorted(path.name for path in out.parent.iterdir()) == ["out"]


def test_leftovers_that_hold_someone_elses_files_stay(out: Path) -> None:
    old = exchange.old_name(out)
    old.mkdir()
    (old / "mine.txt").write_text("mine")
    write_folder(out, result("second"))
    assert (old / "mine.txt").read_text() == "mine"


def test_a_folder_that_another_run_is_building_stays(out: Path) -> None:
    busy = exchange.new_name(out, "busy")
    busy.mkdir()
    idle = exchange.new_name(out, "idle")
    idle.mkdir()
    with exchange.locked(busy, wait=False) as held:
        assert held
        write_folder(out, result("second"))
        assert busy.exists()
    assert not idle.exists()
    write_folder(out, result("third"))
    assert not busy.exists()


def test_two_runs_at_once_leave_one_whole_result(out: Path, way: str) -> None:
    faults: list[BaseException] = []

    def run(mark: str) -> None:
        try:
            for _ in range(10):
                write_folder(out, result(mark))
        except BaseException as error:
            faults.append(error)

    runs = [threading.Thread(target=run, args=(mark,)) for mark in ("left", "right")]
    for each in runs:
        each.start()
    for each in runs:
        each.join()
    assert not faults, way
    assert marks(out) in ({"left"}, {"right"})
    assert names(out.parent) == ["out", "out/report.html", "out/results.json"]


def test_an_exchange_that_fails_is_told(out: Path, monkeypatch: pytest.MonkeyPatch) -> None:
    def busy(one: Path, other: Path) -> bool:
        raise OSError(errno.EBUSY, os.strerror(errno.EBUSY), str(one), None, str(other))

    monkeypatch.setattr(exchange, "swap", busy)
    with pytest.raises(InputError, match=r"(?s)cannot be written.*busy"):
        write_folder(out, result("second"))
    assert marks(out) == {"first"}
    assert sorted(path.name for path in out.parent.iterdir()) == ["out"]
