"""Cautions: order, completeness, and that they defer to those who know."""

import pytest

from meshlure.stock.cautions import all_cautions, cautions
from meshlure.stock.hardware import hardware
from meshlure.stock.materials import materials


def test_each_caution_comes_once_and_always_in_the_same_order() -> None:
    asked = ["hooks", "lead", "sanding", "lead", "molten metal"]
    found = [caution.trigger for caution in cautions(asked)]
    assert found == ["lead", "molten metal", "sanding", "hooks"]
    assert found == [caution.trigger for caution in cautions(reversed(asked))]
    assert cautions([]) == ()


def test_every_trigger_of_the_stock_has_its_caution() -> None:
    used = {kind for m in materials() for kind in m.kinds} | {kind for piece in hardware() for kind in piece.kinds}
    assert {caution.trigger for caution in cautions(used)} == used
    # What no material brings is brought by the job: balls, a pressure pot.
    assert {caution.trigger for caution in all_cautions()} - used == {"pressure", "small parts"}


def test_an_unknown_trigger_is_a_fault_of_the_program() -> None:
    with pytest.raises(ValueError, match="no caution is kept for plutonium"):
        cautions(["lead", "plutonium"])


def test_the_texts_defer() -> None:
    text = {caution.trigger: caution.text for caution in all_cautions()}
    assert len(text) == len(all_cautions())
    assert "does not say what is allowed" in text["lead"]
    for trigger in ("polyurethane", "epoxy", "polyester"):
        assert "safety sheet" in text[trigger]
    assert all(len(words) < 500 and words.endswith(".") for words in text.values())
