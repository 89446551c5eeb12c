"""Parts on the sheet: terminals agree with the model, words stand beside the body."""

import pytest

from onelinefault.drawing.part_picture import look_of, part_picture
from onelinefault.drawing.shapes import MODULE_DU, Text
from onelinefault.drawing.symbols import TERMINALS, placed_symbol
from onelinefault.model.parts import PART_CLASSES, terminal_place


@pytest.mark.parametrize("part_class", PART_CLASSES, ids=lambda c: c.kind)
def test_symbol_and_model_agree_on_terminals(part_class: type) -> None:
    assert [(t.name, t.dx, t.dy) for t in part_class.terminals] == list(TERMINALS[part_class.kind])


@pytest.mark.parametrize("turn", range(4))
@pytest.mark.parametrize("mirrored", [False, True])
@pytest.mark.parametrize("part_class", PART_CLASSES, ids=lambda c: c.kind)
def test_placed_terminals_are_where_wires_end(part_class: type, turn: int, mirrored: bool) -> None:
    part = part_class(id="p1", x=7, y=-3, turn=turn, mirrored=mirrored)
    symbol = placed_symbol(part.kind, look_of(part, {}), turn, mirrored)
    for name, dx, dy in symbol.terminals:
        assert (part.x + dx, part.y + dy) == terminal_place(part, name)


@pytest.mark.parametrize("part_class", PART_CLASSES, ids=lambda c: c.kind)
def test_words_do_not_lie_on_the_body(part_class: type) -> None:
    part = part_class(id="p1", name="Name 1", x=40, y=40)
    picture = part_picture(part, {})
    for word in picture.words:
        assert isinstance(word, Text)
        assert not word.box().grown(-1).overlaps(picture.body), part.kind


def test_a_moved_label_moves_by_whole_modules() -> None:
    plain = PART_CLASSES[1](id="p1", name="Grid")
    moved = PART_CLASSES[1](id="p1", name="Grid", label_dx=3, label_dy=-2)
    a, b = part_picture(plain, {}).words[0], part_picture(moved, {}).words[0]
    assert isinstance(a, Text) and isinstance(b, Text)
    assert (b.x - a.x, b.y - a.y) == (3 * MODULE_DU, -2 * MODULE_DU)


def test_each_winding_takes_its_own_level() -> None:
    transformer = next(c for c in PART_CLASSES if c.kind == "transformer")(id="t")
    look = look_of(transformer, {("t", "high"): "level-hv", ("t", "low"): "level-lv"})
    assert (look.role("high"), look.role("low")) == ("level-hv", "level-lv")
