"""The kinds of parts and where their terminals are."""

import pytest

from onelinefault.errors import EntryError
from onelinefault.model.consumers import Bus
from onelinefault.model.part import Part
from onelinefault.model.parts import PART_CLASSES, part_class, terminal_of, terminal_place
from onelinefault.model.transforming import Transformer


def test_every_kind_of_part_is_listed_once() -> None:
    def below(kind: type[Part]) -> set[type[Part]]:
        return {kind, *(c for sub in kind.__subclasses__() for c in below(sub))}

    assert below(Part) - {Part} == set(PART_CLASSES)
    assert len({c.kind for c in PART_CLASSES}) == len(PART_CLASSES)
    assert len({c.label for c in PART_CLASSES}) == len(PART_CLASSES)


@pytest.mark.parametrize("kind", PART_CLASSES)
def test_a_kind_is_found_by_its_name(kind: type[Part]) -> None:
    assert part_class(kind.kind) is kind
    assert len({t.name for t in kind.terminals}) == len(kind.terminals)
    assert len({(t.dx, t.dy) for t in kind.terminals}) == len(kind.terminals)


def test_an_unknown_kind_or_terminal_is_refused() -> None:
    with pytest.raises(EntryError, match="known kinds: bus"):
        part_class("piano")
    with pytest.raises(EntryError, match="transformer T1 has no terminal 'left'; it has high, low"):
        terminal_of(Transformer(id="p1", name="T1"), "left")


def test_terminals_are_where_the_symbol_is_turned_to() -> None:
    # by hand: high is 4 modules above the origin; a quarter clockwise it points right
    assert terminal_place(Transformer(id="p1", x=10, y=20), "high") == (10, 16)
    assert terminal_place(Transformer(id="p1", x=10, y=20, turn=1), "high") == (14, 20)
    assert terminal_place(Bus(id="p2", x=3, y=5, length=9), "bar", 7) == (10, 5)
    assert terminal_place(Bus(id="p2", x=3, y=5, length=9, turn=1), "bar", 7) == (3, 12)
