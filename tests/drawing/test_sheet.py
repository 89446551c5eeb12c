"""The sheet's picture follows the plant: renewed bit by bit it is the same as drawn from nothing."""

from hypothesis import given, settings
from hypothesis import strategies as st

from onelinefault.drawing.sheet import SheetDrawing, sheet_picture
from onelinefault.model.editing import mirror, move, move_to_sheet, remove, stretch_bus, turn
from onelinefault.model.edits import apply
from onelinefault.model.plant import Plant, Sheet
from tests.drawing.plants import pump_house

PLANT, IDS = pump_house()
STEPS = st.tuples(
    st.sampled_from(["move", "turn", "mirror", "remove", "stretch"]),
    st.sampled_from(["grid", "t1", "q1", "g1", "w1", "m1", "board", "intake"]),
    st.integers(-6, 6),
    st.integers(-6, 6),
)


def stepped(plant: Plant, step: tuple[str, str, int, int]) -> Plant:
    what, name, dx, dy = step
    key = IDS[name]
    if key not in plant.parts:
        return plant
    match what:
        case "move":
            edit = move(plant, [key], dx, dy)
        case "turn":
            edit = turn(plant, [key])
        case "mirror":
            edit = mirror(plant, [key])
        case "stretch" if name in ("board", "intake"):
            edit = stretch_bus(plant, key, "far", 30 + dx)
        case "remove":
            edit = remove(plant, [key], [])
        case _:
            return plant
    return apply(plant, edit)


@settings(max_examples=40, deadline=None)
@given(st.lists(STEPS, max_size=8))
def test_renewed_bit_by_bit_is_as_drawn_from_nothing(steps: list[tuple[str, str, int, int]]) -> None:
    plant = PLANT
    drawing = SheetDrawing(plant, "s1", {})
    for step in steps:
        plant = stepped(plant, step)
        drawing.show(plant)
    fresh = sheet_picture(plant, "s1", {})
    assert dict(drawing.picture.parts) == dict(fresh.parts)
    assert dict(drawing.picture.wires) == dict(fresh.wires)


def test_an_untouched_part_is_not_drawn_anew() -> None:
    drawing = SheetDrawing(PLANT, "s1", {})
    changed = drawing.show(apply(PLANT, move(PLANT, [IDS["g1"]], 1, 0)))
    assert IDS["g1"] in changed
    assert not changed & {IDS["grid"], IDS["intake"], IDS["t1"]}


def test_wires_touch_their_terminals_and_stay_on_the_module() -> None:
    for wire in sheet_picture(PLANT, "s1", {}).wires.values():
        for (ax, ay), (bx, by) in zip(wire.path, wire.path[1:], strict=False):
            assert ax == bx or ay == by
            assert all(isinstance(v, int) for v in (ax, ay, bx, by))


def test_a_wire_to_another_sheet_is_shown_on_both_with_a_link() -> None:
    plant = Plant(
        PLANT.document,
        PLANT.parts,
        PLANT.wires,
        (Sheet("s1", "One"), Sheet("s2", "Two")),
        next_number=PLANT.next_number,
    )
    plant = apply(plant, move_to_sheet(plant, [IDS["m1"]], "s2"))
    for sheet in ("s1", "s2"):
        shapes = sheet_picture(plant, sheet, {}).wires[IDS["to_pumps"]].shapes
        texts = [s.text for s in shapes if hasattr(s, "text")]
        assert len(texts) == 1 and texts[0].startswith("2·" if sheet == "s1" else "1·")
