"""The shelf offers every kind of part; letters find it."""

import pytest

from onelinefault.desktop.catalogue import GROUPS, OFFERS, Offer, found, group_name
from onelinefault.model.editing import place
from onelinefault.model.edits import apply
from onelinefault.model.parts import PART_CLASSES
from onelinefault.model.plant import Plant


def test_every_kind_of_part_is_on_the_shelf_in_a_known_group() -> None:
    assert {offer.kind for offer in OFFERS} == {part_class.kind for part_class in PART_CLASSES}
    assert {offer.group for offer in OFFERS} == set(GROUPS)
    assert all(group_name(group) for group in GROUPS)


def test_names_differ_and_are_short() -> None:
    names = [offer.shown for offer in OFFERS]
    assert len(set(names)) == len(names)
    assert max(map(len, names)) <= 13


@pytest.mark.parametrize("offer", OFFERS, ids=lambda offer: offer.name)
def test_every_offer_can_be_placed(offer: Offer) -> None:
    edit = place(Plant(), offer.kind, "s1", 10, 10, **dict(offer.presets))
    part = next(iter(apply(Plant(), edit).parts.values()))
    assert part.kind == offer.kind
    for field, text in offer.presets.items():
        assert part.text(field) == text


@pytest.mark.parametrize(
    ("typed", "kind"),
    [("tr", "transformer"), ("BUS", "bus"), ("motor", "induction_motor"), ("zig", "earthing_transformer"),
     ("grid", "supply"), ("pv", "converter_source"), ("disc", "switch"), ("text", "note"), ("board", "bus")],
)  # fmt: skip
def test_letters_find_the_part(typed: str, kind: str) -> None:
    assert found(typed)[0].kind == kind


def test_nothing_typed_offers_all_and_nonsense_none() -> None:
    assert found("  ") == list(OFFERS)
    assert found("qqq") == []
