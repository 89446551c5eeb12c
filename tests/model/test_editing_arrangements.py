"""Running arrangements as edits."""

import pytest

from onelinefault.errors import EditError
from onelinefault.model import editing
from onelinefault.model.edits import apply
from onelinefault.model.plant import Plant


@pytest.fixture
def arranged(plant: Plant) -> Plant:
    plant = apply(plant, editing.add_arrangement(plant, " Night "))
    return apply(plant, editing.set_arrangement_position(plant, "a20", "p2", False))


def test_an_arrangement_says_how_devices_stand(plant: Plant, arranged: Plant) -> None:
    (night,) = arranged.arrangements
    assert (night.id, night.name, night.closed) == ("a20", "Night", {"p2": False})
    assert arranged.arranged("a20").parts["p2"].value("closed") is False
    out = apply(arranged, editing.set_arrangement_service(arranged, "a20", "p7", False))
    assert not out.arranged("a20").parts["p7"].in_service and out.parts["p7"].in_service
    as_drawn = apply(arranged, editing.set_arrangement_position(arranged, "a20", "p2", None))
    assert as_drawn.arrangements[0].closed == {}
    assert editing.set_arrangement_position(arranged, "a20", "p2", False).empty
    assert plant.arrangements == ()


def test_sentences_say_it_too(arranged: Plant) -> None:
    assert editing.set_arrangement_position(arranged, "a20", "p2", True).sentence == "Q1 closed in Night"
    assert editing.set_arrangement_service(arranged, "a20", "p7", None).sentence == "M1 as drawn in Night"


def test_copies_names_and_removal(arranged: Plant) -> None:
    two = apply(arranged, editing.add_arrangement(arranged, "Day", like="a20"))
    assert two.arrangements[1].closed == {"p2": False}
    changed = apply(two, editing.set_arrangement_position(two, "a21", "p2", True))
    assert changed.arrangements[0].closed == {"p2": False}
    assert apply(two, editing.rename_arrangement(two, "a21", "NIGHT shift")).arrangements[1].name == "NIGHT shift"
    assert [a.id for a in apply(two, editing.remove_arrangement(two, "a20")).arrangements] == ["a21"]


def test_refusals(arranged: Plant) -> None:
    for refuse in (
        lambda: editing.add_arrangement(arranged, "night"),
        lambda: editing.add_arrangement(arranged, " "),
        lambda: editing.add_arrangement(arranged, "Day", like="a99"),
        lambda: editing.remove_arrangement(arranged, "a99"),
        lambda: editing.set_arrangement_position(arranged, "a20", "p3", True),
        lambda: editing.set_arrangement_service(arranged, "a20", "p99", True),
    ):
        with pytest.raises(EditError):
            refuse()
