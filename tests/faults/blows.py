"""Blows that a run is dealt, each at a moment drawn by lot, and the look at what is left afterwards."""

from __future__ import annotations

import os
import random
import resource
import shutil
import signal
import subprocess
import time
from collections.abc import Callable, Iterator
from contextlib import contextmanager
from dataclasses import dataclass, field
from pathlib import Path
from typing import Final

from faults.jobs import AGES, Contents, Job, begun, contents, put_back, ready, strays, whole

PATIENCE: Final = 300.0
"""s. No run of these takes as long."""
OLD, NEW = AGES


@dataclass
class Ground:
    """A folder in which a job is dealt blows.

    Attributes
    ----------
    folder : Path
    job : Job
    old, new : dict of bytes
        Results of the older and the newer bait, from runs that nobody disturbed; old is None where the job writes only
        what is not there yet.
    span : float, s
        Of such a run.
    writing : float, s
        Of it, from the moment when something of its own lies beside the result.
    """

    folder: Path
    job: Job
    old: Contents | None = None
    new: Contents = field(default_factory=dict)
    span: float = 0.0
    writing: float = 0.0

    def lay(self) -> None:
        """Have the older result lie there."""
        put_back(self.folder, self.job, self.old)

    def look(self) -> str:
        """What lies there: "old", "new", or what is wrong with it."""
        found = contents(self.folder, self.job)
        if found == self.old:
            return "old"
        if found is None:
            return "nothing is left"
        return whole(found, self.new) or "new"

    def next_run(self) -> str:
        """What is wrong after the next run, with a right to expect the newer result and nothing beside it."""
        if self.job.file and not self.job.over:
            put_back(self.folder, self.job, None)  # it writes over nothing, and would refuse
        code, told = finished(begun(self.job, NEW, self.folder))
        if code not in self.job.codes:
            return f"the next run ended with {code}: {told}"
        if self.look() != "new":
            return f"after the next run: {self.look()}"
        left = strays(self.folder)
        return f"the next run left {left}" if left else ""


def ground(folder: Path, job: Job) -> Ground:
    """A folder with both results known, and how long a run takes."""
    ready(folder, job)
    made = Ground(folder, job)
    if not job.file or job.over:
        undisturbed(made, OLD)
        made.old = contents(folder, job)
    made.lay()
    made.span, made.writing = undisturbed(made, NEW)
    found = contents(folder, job)
    assert found is not None
    made.new = found
    return made


def undisturbed(made: Ground, age: str) -> tuple[float, float]:
    """Seconds that a run takes, and those from when something of its own lies beside the result."""
    start = time.perf_counter()
    run = begun(made.job, age, made.folder)
    seen = start
    if until(lambda: bool(strays(made.folder)), run):
        seen = time.perf_counter()
    code, told = finished(run)
    end = time.perf_counter()
    assert code in made.job.codes, (made.job.name, code, told)
    return end - start, end - max(seen, start)


def finished(run: subprocess.Popen[str]) -> tuple[int, str]:
    """Exit code of a process and what it said on stderr."""
    try:
        _, told = run.communicate(timeout=PATIENCE)
    finally:
        run.kill()
    return run.returncode, told


def until(so: Callable[[], bool], run: subprocess.Popen[str]) -> bool:
    """Wait until something is so, or a process has ended; True for the first."""
    end = time.perf_counter() + PATIENCE
    while time.perf_counter() < end:
        if so():
            return True
        if run.poll() is not None:
            return False
        time.sleep(0.0005)
    return False


def moment(made: Ground, run: subprocess.Popen[str], lot: random.Random, aim: str) -> None:
    """Wait for a moment of a run: any, one while it writes, or one about the renaming at its end."""
    if aim == "any":
        _wait(run, lot.uniform(0.0, 1.05 * made.span))
        return
    if not until(lambda: bool(strays(made.folder)), run):
        return
    if aim == "writing" or made.job.file:
        _wait(run, lot.uniform(0.0, 1.05 * made.writing))
        return
    # results.json is the last file of all.
    until(lambda: any(made.folder.glob(".*/results.json")), run)
    _wait(run, lot.uniform(0.0, 0.03))


def _wait(run: subprocess.Popen[str], seconds: float) -> None:
    try:
        run.wait(seconds)
    except subprocess.TimeoutExpired:
        return


@dataclass(frozen=True)
class Outcome:
    """What came of a blow: "old" or "new" is left, or what was wrong; and what the next run cleared away."""

    left: str
    wrong: str = ""
    cleared: bool = False


def _judged(made: Ground, wrong: str = "", *, clean: bool, again: bool = True) -> Outcome:
    left = made.look()
    beside = strays(made.folder)
    if left not in ("old", "new"):
        wrong = wrong or left
    if clean and beside:
        wrong = wrong or f"left {beside}"
    if again:
        wrong = wrong or made.next_run()
    return Outcome(left, wrong, bool(beside))


def killed(made: Ground, lot: random.Random, aim: str, again: bool = True) -> Outcome:
    """SIGKILL: nothing of the run's own is done any more."""
    made.lay()
    run = begun(made.job, NEW, made.folder)
    moment(made, run, lot, aim)
    run.kill()
    finished(run)
    return _judged(made, clean=False, again=again)


def stopped(made: Ground, lot: random.Random, aim: str) -> Outcome:
    """SIGTERM or Ctrl-C: the run clears away what it began, and says so in a line."""
    made.lay()
    number = lot.choice((signal.SIGTERM, signal.SIGINT))
    run = begun(made.job, NEW, made.folder)
    time.sleep(0.1)  # before the interpreter itself is up, a signal ends it in its own way
    moment(made, run, lot, aim)
    run.send_signal(number)
    code, told = finished(run)
    wrong = "" if code in (*made.job.codes, 128 + number, -number) else f"ended with {code}: {told}"
    if "Traceback" in told:
        wrong = wrong or told
    return _judged(made, wrong, clean=True)


def full(made: Ground, lot: random.Random, aim: str) -> Outcome:
    """A limit on the size of any one file, drawn between nothing and the largest that the run writes."""
    del aim
    made.lay()
    largest = max(map(len, made.new.values()))
    limit = lot.randrange(0, largest)

    def limited() -> None:
        resource.setrlimit(resource.RLIMIT_FSIZE, (limit, limit))

    code, told = finished(begun(made.job, NEW, made.folder, preexec_fn=limited))
    return _judged(made, _refused(made, code, told), clean=True, again=False)


def narrow(made: Ground, lot: random.Random, aim: str) -> Outcome:
    """A disk with less room than the run takes beside the older result: a file system in memory, so for root only."""
    del aim
    needed = sum(map(len, made.new.values()))
    with disk(made.folder / "disk", needed * 8 + (1 << 20)) as place:
        ready(place, made.job)
        small = Ground(place, made.job, made.old, made.new)
        small.lay()
        room = shutil.disk_usage(place).free - lot.randrange(0, needed)
        (place / "ballast").write_bytes(b"\0" * max(room, 0))
        code, told = finished(begun(made.job, NEW, place))
        wrong = _refused(made, code, told)
        (place / "ballast").unlink()
        return _judged(small, wrong, clean=True, again=False)


@contextmanager
def disk(place: Path, size: int) -> Iterator[Path]:
    """A file system of so many bytes in memory."""
    place.mkdir()
    assert _mount("-t", "tmpfs", "-o", f"size={size}", "tmpfs", str(place))
    try:
        yield place
    finally:
        subprocess.run(["umount", str(place)], check=True)
        place.rmdir()


def vanished(made: Ground, lot: random.Random, aim: str) -> Outcome:
    """What the run builds beside the result is taken away by somebody who clears up."""
    made.lay()
    run = begun(made.job, NEW, made.folder)
    moment(made, run, lot, "writing" if aim == "any" else aim)
    for entry in made.folder.glob(".*"):
        shutil.rmtree(entry, ignore_errors=True)
        entry.unlink(missing_ok=True)
    code, told = finished(run)
    return _judged(made, _refused(made, code, told), clean=True)


def locked_out(made: Ground, lot: random.Random, aim: str) -> Outcome:
    """The folder may not be written any more from some moment on."""
    if os.geteuid() == 0:  # whom the rights of folders do not bind
        with disk(made.folder / "disk", sum(map(len, made.new.values())) * 8 + (1 << 20)) as place:
            ready(place, made.job)
            small = Ground(place, made.job, made.old, made.new, made.span, made.writing)
            return _locked_out(small, lot, aim, lambda way: _mount("-o", f"remount,{way}", str(place)))

    def mounted(way: str) -> bool:
        made.folder.chmod({"ro": 0o555, "rw": 0o755}[way])
        return True

    return _locked_out(made, lot, aim, mounted)


def _locked_out(made: Ground, lot: random.Random, aim: str, mounted: Callable[[str], bool]) -> Outcome:
    made.lay()
    run = begun(made.job, NEW, made.folder)
    moment(made, run, lot, aim)
    until(lambda: mounted("ro"), run)  # not while a file is open for writing
    code, told = finished(run)
    assert mounted("rw")
    # What lies beside could not be taken away either: the next run does.
    return _judged(made, _refused(made, code, told), clean=False)


def _mount(*words: str) -> bool:
    return subprocess.run(["mount", *words], capture_output=True, check=False).returncode == 0


def two_at_once(made: Ground, lot: random.Random, aim: str) -> Outcome:
    """Two runs into one folder, of which one is killed in half of the cases."""
    made.lay()
    first = begun(made.job, NEW, made.folder)
    time.sleep(lot.uniform(0.0, 0.3) * made.span)
    second = begun(made.job, NEW, made.folder)
    wrong = ""
    if lot.random() < 0.5:
        victim = lot.choice((first, second))
        moment(made, victim, lot, aim)
        victim.kill()
    for run in (first, second):
        code, told = finished(run)
        # A single file that is there by then is not written over.
        good = code in (*made.job.codes, -signal.SIGKILL) or (made.job.file and code == 2)
        if not good or "Traceback" in told:
            wrong = wrong or f"ended with {code}: {told}"
    if made.look() != "new":
        wrong = wrong or f"{made.look()} is left"
    return _judged(made, wrong, clean=False)


def _refused(made: Ground, code: int, told: str) -> str:
    """What is wrong with how a run ended that may have been refused; empty where it was refused in words, or done."""
    good = code in made.job.codes or (code == 2 and told.startswith("meshlure cannot go on:"))
    return "" if good and "Traceback" not in told else f"ended with {code}: {told}"


BLOWS: Final = {
    "killed": killed,
    "stopped": stopped,
    "file too large": full,
    "disk full": narrow,
    "vanished": vanished,
    "read-only": locked_out,
    "two at once": two_at_once,
}
AIMS: Final = ("any", "writing", "renaming")
