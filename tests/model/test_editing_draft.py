"""Names, ids and wording of edits in the making."""

import pytest

from onelinefault.errors import EditError
from onelinefault.model.consumers import Bus, Load
from onelinefault.model.editing_draft import Draft, called, is_joint, listed
from onelinefault.model.plant import Arrangement, Plant, Sheet


def plant_with(*names: str) -> Plant:
    return Plant(parts={f"p{i}": Load(id=f"p{i}", name=n) for i, n in enumerate(names, 1)}, next_number=len(names) + 1)


@pytest.mark.parametrize(
    ("names", "wanted", "found"),
    [
        ((), "T1", "T1"),
        (("T1",), "T1", "T2"),
        (("T1", "T3", "T2"), "T1", "T4"),
        (("t1 ",), "T1", "T2"),
        (("M09",), "M09", "M10"),
        (("M007",), "M007", "M008"),
        (("Board A",), "Board A", "Board A 2"),
        (("Board A", "Board A 2"), "Board A", "Board A 3"),
        (("5",), "5", "6"),
    ],
)
def test_names_count_up_to_the_next_free_one(names: tuple[str, ...], wanted: str, found: str) -> None:
    assert Draft(plant_with(*names)).free_name(wanted) == found


def test_many_names_are_all_different() -> None:
    draft = Draft(plant_with(*(f"M{i}" for i in range(1, 40))))
    taken = []
    for i in range(1, 40):
        taken.append(draft.free_name(f"M{i}"))
        draft.put(Load(id=draft.new_id("p"), name=taken[-1]))
    assert sorted(taken, key=lambda n: int(n[1:])) == [f"M{i}" for i in range(40, 79)]


def test_ids_are_never_issued_twice() -> None:
    plant = Plant(sheets=(Sheet("s1"), Sheet("s2")), arrangements=(Arrangement("a3", "x"),), next_number=1)
    draft = Draft(plant)
    assert [draft.new_id("s"), draft.new_id("a"), draft.new_id("p")] == ["s3", "a4", "p5"]
    assert draft.next_number == 6


def test_what_ends_as_it_was_is_no_change() -> None:
    plant = plant_with("LD1")
    draft = Draft(plant)
    draft.put(Load(id="p1", name="LD7"))
    draft.put(Load(id="p1", name="LD1"))
    part = Load(id=draft.new_id("p"))
    draft.put(part)
    draft.drop(part.id)
    assert draft.edit("nothing").empty


def test_what_is_not_there_is_refused() -> None:
    draft = Draft(plant_with("LD1"))
    for ask in (draft.part, draft.wire, lambda key: draft.chosen_parts((key,))):
        with pytest.raises(EditError, match="there is no"):
            ask("p99")


def test_wording() -> None:
    parts = [Load(id=f"p{i}", name=f"LD{i}") for i in range(5)]
    assert [listed(parts[:n]) for n in range(5)] == [
        "nothing",
        "LD0",
        "LD0 and LD1",
        "LD0, LD1 and LD2",
        "4 parts",
    ]
    assert called(Load(id="p1")) == "a load" and called(Bus(id="p1", length=0)) == "a joint"
    assert is_joint(Bus(id="p1", length=0)) and not is_joint(Bus(id="p1", length=0, name="X"))
    assert not is_joint(Bus(id="p1", length=3)) and not is_joint(Load(id="p1"))
