"""`meshlure balance` on the command line: exit codes, what is written, and what is refused.

The bait is a box that sinks, which takes less time than finding the postures of a bait that floats.
"""

from __future__ import annotations

import json
import re
from collections.abc import Mapping
from typing import Any

import pytest
from command_bench import BAIT, Bench, Ran, fault
from jsonschema import Draft202012Validator

from meshlure.balancing import delivery
from meshlure.results import schema

TARGET = '[target]\nbehaviour = "sinks"\nreserve = "-3 g"\nnose_up = "-4 deg"\n'
LEAD = '[ballast]\nmaterials = ["lead"]\nshapes = ["rod"]\n'


def run(bench: Bench, sections: str, *words: str, bait: str = BAIT) -> Ran:
    bench.put("minnow.toml", bait + sections)
    return bench.run("balance", "minnow.toml", "--out", bench.out, "--no-page", *words)


def results(bench: Bench) -> dict[str, Any]:
    tree: dict[str, Any] = json.loads((bench.out / "results.json").read_text(encoding="utf-8"))
    assert not [error.message[:200] for error in Draft202012Validator(schema()).iter_errors(tree)]
    return tree


def refused(bench: Bench, sections: str, *said: str, words: tuple[str, ...] = (), bait: str = BAIT) -> None:
    """One fault that says this, and nothing written."""
    told = fault(run(bench, sections, *words, bait=bait))
    assert re.search(".*".join(said), told, re.DOTALL), told
    assert not bench.out.exists()


def options(tree: Mapping[str, Any]) -> list[dict[str, Any]]:
    return list(tree["balance"]["options"])


def test_a_target_that_is_met(bench: Bench) -> None:
    ran = run(bench, TARGET + LEAD)
    assert ran.code == 0, ran
    tree = results(bench)
    assert tree["balance"]["reachable"]
    assert tree["balance"]["taken"] == 1
    assert tree["buoyancy"]["reserve_g"] == pytest.approx(-3, abs=0.02)
    assert sorted(tree["files"]) == ["balanced.3mf", "balanced.toml", "ballast-1.stl", "body.stl"]
    for words in ("target", "reserve -3.00 g", "order", "reached  yes", "1>", "lead pure rod", "Lead is poisonous"):
        assert words in ran.out
    assert not re.search(r"-0\.0+\b", ran.out), ran.out


def test_the_report_of_what_was_written_says_the_same(bench: Bench) -> None:
    run(bench, TARGET + LEAD)
    row = options(results(bench))[0]
    ran = bench.run("report", bench.out / "balanced.toml", "--no-page", "--out", bench.folder / "again")
    assert ran.code == 0, ran
    tree = json.loads((bench.folder / "again" / "results.json").read_text(encoding="utf-8"))
    assert tree["buoyancy"]["reserve_g"] == pytest.approx(row["reserve_g"], abs=0.02)
    assert "balance" not in tree


def test_a_run_again_into_the_same_folder(bench: Bench) -> None:
    assert run(bench, TARGET + LEAD).code == 0
    assert run(bench, TARGET + LEAD, "--take", "2").code == 0
    assert results(bench)["balance"]["taken"] == 2


def test_json_alone_writes_nothing(bench: Bench) -> None:
    bench.put("minnow.toml", BAIT + TARGET + LEAD)
    before = bench.contents()
    ran = bench.run("balance", "minnow.toml", "--json")
    assert ran.code == 0, ran
    assert options(json.loads(ran.out))[0]["material"] == "lead pure"
    assert bench.contents() == before


def test_a_target_out_of_reach_of_any_mass(bench: Bench) -> None:
    # 40 x 10 x 16 mm of 1.2 g/cm3 weigh 7.68 g and displace 6.39: 1.29 g too heavy to float by anything.
    ran = run(bench, TARGET.replace("sinks", "floats").replace("-3 g", "1 g") + LEAD)
    assert ran.code == 1, ran
    account = results(bench)["balance"]
    assert not account["reachable"]
    assert account["options"] == []
    lost = 1.2 * 6.4 - (6.4 * results(bench)["buoyancy"]["water"]["density_kg_m3"] / 1e3 - 1)
    assert f"the bait must lose {lost:.2f} g" in account["in_the_way"][0]
    # That much less over 6.4 cm3.
    assert f"a body of {1.2 - lost / 6.4:.3f} g/cm3 instead of 1.200" in account["in_the_way"][0]


def test_no_room_for_enough_lead(bench: Bench) -> None:
    # 10 mm of width less twice 2.7 leave 4.6, so that a rod of 4 mm has room and one of 5 mm has none; 5 mm of length.
    stretch = LEAD + 'cover = "2.7 mm"\nbetween = ["13 mm", "18 mm"]\n'
    ran = run(bench, TARGET.replace("-3 g", "-4 g") + stretch)
    assert ran.code == 1, ran
    account = results(bench)["balance"]
    (words,) = [words for words in account["in_the_way"] if "leaves room for" in words]
    held, needed = (float(number) for number in re.findall(r"([\d.]+) g (?:of|needed)", words))
    # A rod of 4 mm and 5 mm long is 0.713 g of lead; the bait lacks 2.7 g, more as lead.
    assert held == pytest.approx(0.713, abs=0.06)
    assert needed == pytest.approx((4 - 1.29) / (1 - 1.2 / 11.34), abs=0.06)
    assert "between 13 and 18 mm from the nose" in words
    assert options(results(bench))[0]["mass_g"] == pytest.approx(0.713, abs=0.02)


def test_a_denser_metal_would_fit(bench: Bench) -> None:
    # In 20 mm along the nose, 3 mm of cover on either side: 4 mm of lead rod weigh 2.85 g at most, of tungsten more.
    stretch = LEAD + 'cover = "3 mm"\nbetween = ["10 mm", "30 mm"]\n'
    ran = run(bench, TARGET.replace("-3 g", "-4.2 g").replace("-4 deg", "0 deg") + stretch)
    assert ran.code == 1, ran
    assert "tungsten heavy alloy 90% W would fit" in ran.out


def test_ballast_as_stated(bench: Bench) -> None:
    ran = run(bench, "", "--ballast", "lead rod 4 mm x 10 mm at 20,5,6")
    assert ran.code == 0, ran
    (row,) = options(results(bench))
    assert row["mass_g"] == pytest.approx(3.14159 / 4 * 16 * 10 * 11.34e-3, rel=1e-4)
    assert row["at_mm"] == pytest.approx([20, 5, 6])
    assert row["cover_mm"] == pytest.approx(3, abs=0.003)


def test_ballast_as_stated_too_near_the_skin(bench: Bench) -> None:
    ran = run(bench, "", "--ballast", "lead rod 4 mm x 10 mm at 20,5,3")
    assert ran.code == 0, ran
    assert results(bench)["balance"]["in_the_way"] == ["1.00 mm of cover are left, 1.50 mm are asked for"]


def test_a_broken_promise_leaves_nothing(bench: Bench, monkeypatch: pytest.MonkeyPatch) -> None:
    monkeypatch.setattr(delivery.Balance, "_inserts", lambda *_: ())
    told = fault_lines(run(bench, TARGET + LEAD))
    assert "does not keep its reserve" in told
    assert not bench.out.exists()
    assert sorted(bench.contents()) == ["body.stl", "minnow.toml", "weight.stl"]


def fault_lines(ran: Ran) -> str:
    assert ran.code == 2, ran
    assert ran.out == ""
    assert "Traceback" not in ran.err
    return ran.err


def test_stopped_by_ctrl_c_leaves_nothing(bench: Bench, monkeypatch: pytest.MonkeyPatch) -> None:
    def stopped(*_: object) -> None:
        raise KeyboardInterrupt

    monkeypatch.setattr(delivery.Balance, "_check", stopped)
    ran = run(bench, TARGET + LEAD)
    assert ran.code == 130, ran
    assert sorted(bench.contents()) == ["body.stl", "minnow.toml", "weight.stl"]


def test_the_bodys_density(bench: Bench) -> None:
    sections = TARGET.replace("-3 g", "-0.5 g").replace('nose_up = "-4 deg"\n', "") + 'vary = "body density"\n'
    ran = run(bench, sections)
    assert ran.code == 0, ran
    dense = results(bench)["balance"]["body_density"]
    # 6.4 cm3 of water and half a gram.
    water = results(bench)["buoyancy"]["water"]["density_kg_m3"] / 1e3
    assert dense["needed_g_cm3"] == pytest.approx((6.4 * water + 0.5) / 6.4, rel=1e-6)
    assert any("polyester" in row["words"] for row in dense["mixes"])
    assert all(row["low_g_cm3"] <= dense["needed_g_cm3"] <= row["high_g_cm3"] for row in dense["stock"])
    for row in dense["mixes"]:
        # The rule of mixtures, with balloons of 0.15 g/cm3.
        resin = {"polyurethane casting resin unfilled": 1.06, "epoxy casting unfilled": 1.14}
        whole = resin.get(row["resin"], 1.2)
        assert row["share"] * 0.15 + (1 - row["share"]) * whole == pytest.approx(dense["needed_g_cm3"], rel=1e-9)
        assert row["share"] <= 0.5


@pytest.mark.parametrize(
    ("sections", "said"),
    [
        (LEAD, ("nothing says how the bait is to rest", r"\[target\]")),
        (TARGET.replace("sinks", "floats") + LEAD, ("what floats has a reserve above 0",)),
        ('[target]\nbehaviour = "suspends"\nreserve = "1 g"\n' + LEAD, ("with that reserve the bait floats", "within")),
        ('[target]\nreserve = "9 g"\n' + LEAD, ("more than the whole bait displaces", "9 g")),
        ('[target]\nnose_up = "3 deg"\n' + LEAD, ("nothing says what the ballast may weigh", "free = true")),
        (TARGET + LEAD + 'cover = "6 mm"\n', ("the cover leaves nothing of the body", "less than 5 mm")),
        (TARGET + LEAD + 'between = ["60 mm", "70 mm"]\n', ("begins behind the tail", "0 to 40 mm")),
        (TARGET + '[ballast]\nmaterials = ["zinc"]\n', ("zinc is not sold as rod or balls", "lead pure", "--ballast")),
        (TARGET + '[ballast]\nmaterials = ["tungsten putty"]\n', ("not sold as rod or balls",)),
        (TARGET + '[ballast]\nmaterials = ["kryptonite"]\n', (r"ballast.materials\[1\]", "kryptonite")),
        (TARGET + LEAD + 'pocket = "none"\nfit = "0.2 mm"\n', ("without a pocket there is no gap",)),
        (TARGET + LEAD + 'fit = "0.2 mm"\nglue = "honey"\n', ("ballast.glue", "honey")),
    ],
)  # fmt: skip
def test_what_cannot_be_asked(bench: Bench, sections: str, said: tuple[str, ...]) -> None:
    refused(bench, sections, *said)


@pytest.mark.parametrize(
    ("words", "said"),
    [
        (("--take", "99"), ("no such way to take", "99", "1 to")),
        (("--take", "0"), ("no such way to take", "0", "1 to")),
        (("--take", "2", "--ballast", "lead rod 4 mm x 10 mm at 20,5,6"), ("--take chooses among ways found",)),
        (("--ballast", "a lot of lead"), ("the ballast cannot be read", "lead rod 5 mm x 18 mm")),
        (("--ballast", "lead rod 4 mm at 20,5,6"), ("a rod has a diameter and a length",)),
        (("--ballast", "lead rod 4 mm x 10 mm at 20,5"), ("the place is no point",)),
        (("--ballast", "lead rod 4 mm x 10 mm at nan,5,6"), ("the place is no point",)),
        (("--ballast", "honey rod 4 mm x 10 mm at 20,5,6"), ("--ballast", "honey")),
        (("--ballast", "lead ball 60 mm at 20,5,8"), ("does not lie in the body", "mm3 are outside")),
        (("--ballast", "lead rod 4 mm x 10 mm at 200,5,6"), ("does not lie in the body",)),
        (("--ballast", "lead rod 4 mm x 0 mm at 20,5,6"), ("--ballast", "0 mm")),
    ],
)  # fmt: skip
def test_what_cannot_be_said_on_the_line(bench: Bench, words: tuple[str, ...], said: tuple[str, ...]) -> None:
    refused(bench, TARGET + LEAD, *said, words=words)


def test_an_insert_in_the_way_of_what_is_stated(bench: Bench) -> None:
    row = '[[insert]]\nname = "weight"\nmesh = "weight.stl"\nmaterial = "lead"\n'
    words = ("--ballast", "lead rod 4 mm x 10 mm at 14,5,5")
    refused(bench, row, "the ballast and 'weight' share room", "free = true", words=words)


def test_an_open_body(bench: Bench) -> None:
    data = (bench.folder / "body.stl").read_bytes()
    bench.put("body.stl", data[:80] + (11).to_bytes(4, "little") + data[84:-50])
    refused(bench, TARGET + LEAD, "body.stl")


def test_several_things_wrong_are_told_at_once(bench: Bench) -> None:
    ran = run(bench, TARGET + '[ballast]\nmaterials = ["zinc", "honey"]\ncover = "9 mm"\n')
    assert ran.code == 2
    assert ran.err.count("\n- ") == 3, ran.err


def test_nowhere_to_write(bench: Bench) -> None:
    bench.put("minnow.toml", BAIT + TARGET)
    assert "nowhere to write" in fault(bench.run("balance", "minnow.toml"))
    assert "needs a folder" in fault(bench.run("balance", "minnow.toml", "--json", "--halves"))
