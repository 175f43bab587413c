"""Densities in stock against public tables, a standard, and the rules that they are said to follow."""

import pytest

from meshlure.errors import InputError
from meshlure.stock.cautions import all_cautions
from meshlure.stock.materials import Material, material, materials


def row(name: str) -> Material:
    return material(name, "the.key")


@pytest.mark.parametrize(
    ("name", "low", "high"),
    [
        # ASTM B777-15, Table 1, g/cm3, as read in a public copy.
        ("tungsten heavy alloy 90% W", 16.85, 17.30),
        ("tungsten heavy alloy 92.5% W", 17.15, 17.85),
        ("tungsten heavy alloy 95% W", 17.75, 18.35),
        ("tungsten heavy alloy 97% W", 18.25, 18.85),
    ],
)
def test_heavy_alloys_have_the_range_of_their_class(name: str, low: float, high: float) -> None:
    alloy = row(name)
    assert (alloy.low, alloy.high) == pytest.approx((1e3 * low, 1e3 * high), rel=1e-12)
    assert alloy.density == pytest.approx(500.0 * (low + high), rel=1e-3)
    assert not alloy.assumed


@pytest.mark.parametrize(
    ("name", "published"),
    [
        # Particle Data Group, Atomic and Nuclear Properties of Materials (2019), g/cm3, as read in a public copy.
        ("lead pure", 11.35),
        ("tungsten pure", 19.30),
        ("tin", 7.31),
        ("bismuth", 9.747),
        ("zinc", 7.133),
        ("copper", 8.96),
        ("titanium", 4.54),
        ("aluminium", 2.699),
        ("polycarbonate", 1.20),
        ("acrylic PMMA", 1.19),
        ("polypropylene", 0.905),
        ("borosilicate glass", 2.23),
    ],
)
def test_elements_and_plain_plastics_agree_with_the_particle_data_group(name: str, published: float) -> None:
    # Titanium's 4.54 is an old value: wrought metal is handled at 4.50 to 4.51.
    assert row(name).density == pytest.approx(1e3 * published, rel=0.01 if name == "titanium" else 0.005)
    assert not row(name).assumed


def test_what_is_said_to_be_checked_is_in_the_list_above() -> None:
    checked = {m.name for m in materials() if "Particle Data Group" in m.source}
    marks = test_elements_and_plain_plastics_agree_with_the_particle_data_group.pytestmark  # type: ignore[attr-defined]
    assert checked == {name for name, _ in marks[0].args[1]}


@pytest.mark.parametrize(
    ("name", "gravity"),
    [
        # Forest Products Laboratory, Wood Handbook, specific gravity at 12% moisture; the last six from memory.
        # The handbook's formula for the density in kg/m3: 1000 G (1 + moisture/100).
        ("northern white cedar", 0.31),
        ("western red cedar", 0.32),
        ("eastern white pine", 0.35),
        ("basswood", 0.37),
        ("atlantic white cedar", 0.32),
        ("sitka spruce", 0.40),
        ("red alder", 0.41),
        ("yellow-poplar", 0.42),
        ("hard maple", 0.63),
    ],
)
def test_woods_follow_the_wood_handbooks_formula(name: str, gravity: float) -> None:
    assert row(name).density == pytest.approx(1000.0 * gravity * 1.12, rel=0.01)


def test_redwood_lies_between_young_and_old_growth() -> None:
    # Same source: 0.35 and 0.40.
    assert 1120 * 0.35 < row("redwood").density < 1120 * 0.40


def mixed(*parts: tuple[float, float]) -> float:
    """Density of a mixture without voids, from the mass share and the density of each part."""
    return 1.0 / sum(share / density for share, density in parts)


def test_alloys_follow_the_rule_of_mixtures() -> None:
    # Antimony 6.691 g/cm3: Particle Data Group (2019), as above.
    lead, bismuth, tin = row("lead").density, row("bismuth").density, row("tin").density
    assert row("hard lead").density == pytest.approx(mixed((0.96, lead), (0.04, 6691.0)), rel=1e-3)
    assert row("bismuth-tin").density == pytest.approx(mixed((0.58, bismuth), (0.42, tin)), rel=1e-3)


def test_balloon_mixes_have_the_shares_that_their_notes_say() -> None:
    assert row("polyurethane + glass microballoons").density == pytest.approx(0.33 * 150 + 0.67 * 1050, rel=0.01)
    assert row("epoxy + glass microballoons").density == pytest.approx(0.39 * 150 + 0.61 * 1140, rel=0.01)


def test_pour_foams_are_what_their_name_says() -> None:
    # International pound over cubic foot, exact by definition.
    per_cubic_foot = 0.45359237 / 0.3048**3
    for pounds in (8, 16):
        foam = row(f"polyurethane pour foam {pounds} lb/ft3")
        assert foam.density == pytest.approx(pounds * per_cubic_foot, rel=2e-3)


def test_every_row_is_whole() -> None:
    triggers = {caution.trigger for caution in all_cautions()}
    for m in materials():
        assert 0.0 < m.low <= m.density <= m.high < 2e4, m.name
        assert len(m.source) > 10, m.name
        assert set(m.kinds) <= triggers, m.name
        if "from memory" in m.source or "assumed" in m.source:
            assert m.assumed, m.name


def test_no_name_means_two_things() -> None:
    names = [name.casefold() for m in materials() for name in (m.name, *m.aliases)]
    assert len(names) == len(set(names))


def test_names_and_aliases_are_found_whatever_their_case() -> None:
    for m in materials():
        for name in (m.name, *m.aliases):
            assert row(name) is m
            assert row(f" {name.upper()}  ") is m


@pytest.mark.parametrize(
    ("alias", "name"),
    [
        ("Lead", "lead pure"),
        ("hard lead", "lead hard 2-6% Sb"),
        ("brass", "brass 60/40 and free-cutting"),
        ("steel", "carbon steel"),
        ("Stainless", "stainless 304/302"),
        ("bearing steel", "bearing steel 52100"),
        ("epoxy clear coat", "epoxy clear coat cured"),
        ("tin bismuth", "bismuth-tin 58/42"),
        ("glass", "soda-lime glass"),
    ],
)
def test_the_trades_short_names(alias: str, name: str) -> None:
    assert row(alias).name == name


@pytest.mark.parametrize(
    ("name", "choice"),
    [
        ("tungsten", "tungsten heavy alloy 95% W (18.05 g/cm3)"),
        ("Epoxy", "epoxy casting unfilled (1.14 g/cm3)"),
        ("cedar", "western red cedar (0.36 g/cm3)"),
        ("resin", "polyester casting resin (1.2 g/cm3)"),
    ],
)
def test_a_name_of_several_materials_is_refused_with_the_choice(name: str, choice: str) -> None:
    with pytest.raises(InputError) as caught:
        row(name)
    (fault,) = caught.value.faults
    assert choice in fault.allowed
    assert fault.found == name
    assert "density" in fault.next_step


@pytest.mark.parametrize(
    ("name", "near"), [("leed", "lead pure"), ("baswood", "basswood"), ("tungstn", "tungsten"), ("maple", "hard maple")]
)
def test_an_unknown_material_is_refused_with_near_ones(name: str, near: str) -> None:
    with pytest.raises(InputError) as caught:
        row(name)
    (fault,) = caught.value.faults
    assert near in fault.allowed
    assert (fault.where, fault.found) == ("the.key", name)


def test_a_name_near_nothing_is_told_where_the_names_are() -> None:
    with pytest.raises(InputError, match=r"one of the names in meshlure/stock/materials\.toml"):
        row("qqqq")


def test_air_and_water_are_voids() -> None:
    with pytest.raises(InputError, match='void = "sealed"'):
        row("air")
    with pytest.raises(InputError, match='void = "flooded"'):
        row("Water")


def test_dangerous_materials_set_off_their_cautions() -> None:
    for name, trigger in (
        ("lead", "lead"),
        ("hard lead", "molten metal"),
        ("bismuth-tin", "tin and bismuth"),
        ("polyurethane casting resin", "polyurethane"),
        ("polyurethane pour foam 8 lb/ft3", "polyurethane"),
        ("epoxy clear coat", "epoxy"),
        ("UV coat", "epoxy"),
        ("photopolymer cured", "photopolymer"),
        ("glass microballoons true", "fine dust"),
        ("balsa", "sanding"),
        ("western red cedar", "cedar dust"),
        ("tungsten putty", "metal putty"),
    ):
        assert trigger in row(name).kinds, name
    assert row("brass").kinds == ()
