"""Lining up and spacing out."""

from itertools import pairwise

import pytest

from onelinefault.errors import EditError
from onelinefault.model import editing
from onelinefault.model.consumers import Bus, Load
from onelinefault.model.edits import apply
from onelinefault.model.part import Part
from onelinefault.model.plant import Plant
from onelinefault.model.transforming import Transformer


def some_parts() -> Plant:
    parts: list[Part] = [
        Load(id="p1", x=3, y=10),
        Load(id="p2", x=8, y=20),
        Bus(id="p3", x=20, y=31, length=10),
        Transformer(id="p4", x=40, y=12, turn=1),
    ]
    return Plant(parts={p.id: p for p in parts}, next_number=5)


IDS = ("p1", "p2", "p3", "p4")


@pytest.mark.parametrize(
    ("edge", "index", "line"), [("left", 0, 3), ("top", 1, 8), ("right", 2, 44), ("bottom", 3, 31)]
)
def test_edges_of_terminals_and_bars_line_up(edge: str, index: int, line: int) -> None:
    plant = some_parts()
    after = apply(plant, editing.align(plant, IDS, edge))
    assert {editing.extent(p)[index] for p in after.parts.values()} == {line}
    assert editing.align(after, IDS, edge).empty  # once is enough
    across = 1 - index % 2
    assert [editing.anchor(p)[across] for p in after.parts.values()] == [
        editing.anchor(p)[across] for p in plant.parts.values()
    ]


@pytest.mark.parametrize(("edge", "axis"), [("centre", 0), ("middle", 1)])
def test_origins_line_up(edge: str, axis: int) -> None:
    plant = some_parts()
    after = apply(plant, editing.align(plant, IDS, edge))
    assert len({editing.anchor(p)[axis] for p in after.parts.values()}) == 1
    assert editing.align(after, IDS, edge).empty


def test_a_bus_lines_up_by_its_middle() -> None:
    plant = some_parts()
    after = apply(plant, editing.align(plant, ["p1", "p3"], "centre"))
    assert after.parts["p1"].x == after.parts["p3"].x + 5


@pytest.mark.parametrize(("direction", "axis"), [("across", 0), ("down", 1)])
def test_parts_are_spaced_evenly_between_the_outer_two(direction: str, axis: int) -> None:
    plant = some_parts()
    after = apply(plant, editing.distribute(plant, IDS, direction))
    before = sorted(editing.anchor(p)[axis] for p in plant.parts.values())
    marks = sorted(editing.anchor(p)[axis] for p in after.parts.values())
    assert (marks[0], marks[-1]) == (before[0], before[-1])
    gaps = [b - a for a, b in pairwise(marks)]
    assert max(gaps) - min(gaps) <= 1  # whole modules
    assert editing.distribute(after, IDS, direction).empty


def test_two_parts_are_spaced_already_and_other_words_are_refused() -> None:
    plant = some_parts()
    assert editing.distribute(plant, ["p1", "p2"], "across").empty and editing.align(plant, [], "left").empty
    with pytest.raises(EditError, match="left, right, top"):
        editing.align(plant, IDS, "slanted")
    with pytest.raises(EditError, match="across or down"):
        editing.distribute(plant, IDS, "round")
