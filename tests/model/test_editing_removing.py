"""Removing: what stays joined, what goes. Expected results follow from the drawing of the small plant."""

import pytest

from onelinefault.errors import EditError
from onelinefault.model import editing
from onelinefault.model.edits import apply
from onelinefault.model.plant import Arrangement, End, Plant, Wire


def joins(plant: Plant) -> set[frozenset[str]]:
    return {frozenset((w.a.part, w.b.part)) for w in plant.wires.values()}


def removed(plant: Plant, *ids: str) -> Plant:
    return apply(plant, editing.remove(plant, ids))


def test_a_series_part_heals_into_one_wire(plant: Plant) -> None:
    after = removed(plant, "p2")
    assert after.wires["w11"] == Wire("w11", End("p1", "bar", 5), End("p3", "a"))
    assert "w12" not in after.wires and len(after.wires) == 5
    chain = removed(plant, "p2", "p3")
    assert chain.wires["w11"] == Wire("w11", End("p1", "bar", 5), End("p4", "bar", 5))


def test_corners_of_both_wires_live_on(plant: Plant) -> None:
    shaped = apply(plant, editing.set_corners(plant, "w11", [(5, 1), (8, 1), (8, 2)]))
    shaped = apply(shaped, editing.set_corners(shaped, "w12", [(3, 6), (3, 8)]))
    assert removed(shaped, "p2").wires["w11"].corners == ((5, 1), (8, 1), (8, 2), (3, 6), (3, 8))


def test_a_wire_told_backwards_heals_too(plant: Plant) -> None:
    turned = {**plant.wires, "w12": Wire("w12", End("p3", "a"), End("p2", "b"), ((4, 7),))}
    backwards = Plant(parts=plant.parts, wires=turned, next_number=20)
    assert removed(backwards, "p2").wires["w11"] == Wire("w11", End("p1", "bar", 5), End("p3", "a"), ((4, 7),))


def test_the_wires_of_other_parts_go(plant: Plant) -> None:
    after = removed(plant, "p4")
    # board, its wire to W1, and the joint with one wire less: LD1 and M1 keep the joint's two wires as one
    assert joins(after) == {frozenset(pair) for pair in (("p1", "p2"), ("p2", "p3"), ("p5", "p7"))}
    assert "p6" not in after.parts


def test_a_joint_with_two_wires_dissolves(plant: Plant) -> None:
    after = removed(plant, "p5")
    assert "p6" not in after.parts
    assert after.wires["w14"] == Wire("w14", End("p4", "bar", 9), End("p7", "line"), ((14, 20),))


def test_a_joint_with_less_goes(plant: Plant) -> None:
    after = removed(plant, "p5", "p7")
    assert set(after.parts) == {"p1", "p2", "p3", "p4"} and set(after.wires) == {"w11", "w12", "w13"}
    assert set(removed(plant, "w14", "w15").parts) == {"p1", "p2", "p3", "p4", "p5", "p7"}


def test_taking_a_joint_away_parts_what_it_joined(plant: Plant) -> None:
    after = removed(plant, "p6")
    assert set(after.wires) == {"w11", "w12", "w13"} and "p5" in after.parts


def test_a_named_bus_of_no_length_is_no_mere_joint(plant: Plant) -> None:
    named = apply(plant, editing.rename(plant, "p6", "Clamp"))
    assert "p6" in removed(named, "p5", "p7").parts


def test_wires_alone(plant: Plant) -> None:
    after = removed(plant, "w12")
    assert after.parts == plant.parts and set(after.wires) == set(plant.wires) - {"w12"}
    assert editing.remove(plant, [], ["w12"]).sentence == "Delete a wire"
    assert editing.remove(plant, ["p2"], ["w13"]).sentence == "Delete Q1 and a wire"


def test_a_part_chosen_with_its_wires_does_not_heal(plant: Plant) -> None:
    after = removed(plant, "p2", "w11", "w12")
    assert joins(after) == joins(plant) - {frozenset(("p1", "p2")), frozenset(("p2", "p3"))}


def test_no_wire_comes_where_things_were_apart(plant: Plant) -> None:
    for change in (editing.set_closed(plant, ["p2"], False), editing.set_in_service(plant, ["p2"], False)):
        after = removed(apply(plant, change), "p2")
        assert frozenset(("p1", "p3")) not in joins(after)


@pytest.mark.parametrize(
    ("high", "low", "heals"),
    [("33 kV", "11 kV", False), ("", "", True), ("11 kV", "10.5 kV", True), ("33 kV", "", True)],
)
def test_no_wire_comes_between_two_voltages(plant: Plant, high: str, low: str, heals: bool) -> None:
    edit = editing.insert_into_wire(plant, "w12", "transformer", 5, 7, high_voltage=high, low_voltage=low)
    with_transformer = apply(plant, edit)
    after = removed(with_transformer, *editing.added_parts(plant, edit))
    assert (frozenset(("p2", "p3")) in joins(after)) == heals


def test_no_wire_is_doubled(plant: Plant) -> None:
    # a second way from the board to M1, and the joint's other wires gone: dissolving must not double that way
    twice = apply(plant, editing.connect(plant, End("p4", "bar", 12), End("p7", "line")))
    after = removed(twice, "p5")
    assert sorted(map(sorted, joins(after))) == [["p1", "p2"], ["p2", "p3"], ["p3", "p4"], ["p4", "p7"]]


def test_a_ring_on_one_bus_does_not_end_on_itself(plant: Plant) -> None:
    ring = apply(plant, editing.place(plant, "breaker", "s1", 3, 4))
    ring = apply(ring, editing.connect(ring, End("p20", "a"), End("p1", "bar", 2)))
    ring = apply(ring, editing.connect(ring, End("p20", "b"), End("p1", "bar", 4)))
    assert removed(ring, "p20").wires == plant.wires


def test_what_mentions_a_part_goes_with_it(plant: Plant) -> None:
    arranged = Plant(
        parts=plant.parts,
        wires=plant.wires,
        tags={"p2": (1, 1), "p2:a": (2, 2), "p21": (3, 3)},
        arrangements=(Arrangement("a18", "Night", {"p2": False}, {"p2": True, "p7": False}),),
        next_number=20,
    )
    after = removed(arranged, "p2")
    assert after.tags == {"p21": (3, 3)}
    assert after.arrangements == (Arrangement("a18", "Night", {}, {"p7": False}),)


def test_everything_at_once(plant: Plant) -> None:
    after = removed(plant, *plant.parts, *plant.wires)
    assert not after.parts and not after.wires
    with pytest.raises(EditError, match="no part p99"):
        editing.remove(plant, ["p99"])
