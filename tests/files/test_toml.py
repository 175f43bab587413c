"""Files that are no TOML: the line is named, whatever is wrong with it."""

from __future__ import annotations

import re
from pathlib import Path

import pytest

from meshlure.errors import InputError
from meshlure.files.baitfile import read_baitfile
from meshlure.files.toml import read_toml


@pytest.mark.parametrize(
    ("data", "said"),
    [
        (b"", "the bait file is empty"),
        (b'format = 1\n[bait\nname = "x"\n', r"line 2: .*no TOML.*found: \[bait"),
        (b"format = 1\nname = minnow\n", "line 2: .*no TOML.*found: name = minnow"),
        (b"format = 1\nformat = 2\n", "line 2: .*no TOML"),
        (b'format = 1\nname = "min', "line 2: .*no TOML"),
        (b'format = 1\nmesh = "C:\\Users\\body.stl"\n', r"line 2: .*no TOML.*write / for \\"),
        (b'format = 1\n\nname = "\xff"\n', "line 3: .*no UTF-8 text"),
        (b"x = " + b"[" * 20_000, "nested too deeply|no TOML"),
        (b"# " + b"x" * 1_000_001, "too large for a bait file.*1,000,003 bytes"),
        (b'name = "\x1b[31m"', "line 1: .*no TOML"),
    ],
)
def test_refused(tmp_path: Path, data: bytes, said: str) -> None:
    path = tmp_path / "minnow.toml"
    path.write_bytes(data)
    with pytest.raises(InputError) as caught:
        read_toml(path)
    (fault,) = caught.value.faults
    assert fault.where.startswith(str(path))
    assert fault.next_step
    assert re.search(said, str(fault), re.DOTALL), str(fault)
    assert "\x1b" not in str(fault)


def test_a_mark_at_the_beginning_is_no_fault(tmp_path: Path) -> None:
    (tmp_path / "minnow.toml").write_text("\ufeffformat = 1\n", encoding="utf-8")
    assert read_toml(tmp_path / "minnow.toml") == {"format": 1}


def test_a_bait_file_that_is_not_there(tmp_path: Path) -> None:
    (tmp_path / "minnow.toml").write_text("format = 1\n")
    with pytest.raises(InputError, match=r"(?s)the bait file is not there.*did you mean 'minnow\.toml'"):
        read_baitfile(tmp_path / "minow.toml")
