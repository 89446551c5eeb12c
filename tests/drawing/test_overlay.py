"""The overlay's shapes: ribbons run the way of the current, tags keep clear, gauges stand by their bus."""

from dataclasses import replace

import pytest

from onelinefault.drawing.overlay import Flow, OverlayData, Tag
from onelinefault.drawing.overlay_picture import greyed, overlay_picture, tag_size
from onelinefault.drawing.overlay_ribbons import middle_of, pin_offset, pin_place, ribbon_shapes
from onelinefault.drawing.page import title_block_box
from onelinefault.drawing.shapes import Polygon, Polyline, Text, bounds
from onelinefault.drawing.sheet import sheet_picture
from onelinefault.model.consumers import Bus
from onelinefault.model.edits import Edit, apply
from onelinefault.model.fault import Place
from tests.drawing.plants import pump_house

PLANT, IDS = pump_house()
PICTURE = sheet_picture(PLANT, "s1", {})
DATA = OverlayData(
    kind="three-phase",
    phases="abc",
    place=Place(IDS["board"], at=20),
    flows={key: Flow(8.0 if key == IDS["below"] else 2.0, True) for key in PLANT.wires},
    ends={(IDS["g1"], "line"): Flow(2.0, False)},
    voltage_left={IDS["board"]: 0.0, IDS["intake"]: 61.0},
    tags=(
        Tag("fault", "12.9 kA", ("peak 33.1 kA  X/R 21",), filled=True),
        Tag(f"{IDS['g1']} line", "2.90 kA", ("∠ −86° G1",)),
        Tag(f"{IDS['t1']} low", "8.41 kA", ("∠ −87° T1",)),
    ),
    largest_ka=10.0,
)


def test_more_current_makes_a_wider_ribbon() -> None:
    strong = OverlayData(DATA.kind, DATA.phases, DATA.place, flows={IDS["below"]: Flow(8.0, True)}, largest_ka=8.0)
    weak = replace(strong, flows={IDS["below"]: Flow(1.0, True)})
    wide, narrow = (
        bounds(tuple(s for s in ribbon_shapes(PLANT, PICTURE, d) if isinstance(s, Polygon))) for d in (strong, weak)
    )
    assert wide.width > narrow.width > 0


@pytest.mark.parametrize("forward", [True, False])
def test_chevrons_point_the_way_of_the_current(forward: bool) -> None:
    data = replace(DATA, flows={IDS["below"]: Flow(8.0, forward)}, ends={}, place=Place(IDS["intake"]))
    marks = [s for s in ribbon_shapes(PLANT, PICTURE, data) if isinstance(s, Polyline)]
    assert marks
    for wing, tip, _ in (m.points for m in marks if m.points[0][0] != m.points[1][0]):
        down = tip[1] > wing[1]
        if abs(tip[1] - wing[1]) > 0.1 and abs(tip[0] - 300) < 1:
            assert down is forward


def test_tags_keep_clear_of_symbols_each_other_and_the_title_block() -> None:
    boxes = list(overlay_picture(PLANT, PICTURE, DATA).boxes.values())
    assert len(boxes) == 3
    for i, box in enumerate(boxes):
        assert not box.overlaps(title_block_box(PICTURE.sheet))
        assert not any(box.overlaps(other) for other in boxes[i + 1 :])
        assert not any(box.overlaps(part.body) for part in PICTURE.parts.values())


def test_a_tag_moved_by_hand_stays_where_it_was_put() -> None:
    moved = apply(PLANT, Edit("Move a tag", tags={f"{IDS['g1']} line": (10, -6)}))
    overlay = overlay_picture(moved, PICTURE, DATA)
    x, y = overlay.anchors[f"{IDS['g1']} line"]
    assert ((box := overlay.boxes[f"{IDS['g1']} line"]).left, box.top) == (x + 100, y - 60)


def test_the_pin_stands_where_it_was_put() -> None:
    board = PLANT.parts[IDS["board"]]
    assert isinstance(board, Bus)
    assert pin_offset(board, DATA) == 20
    assert pin_place(PLANT, DATA) == ((board.x + 20) * 10, board.y * 10)
    along = replace(DATA, place=Place(IDS["w1"], "a", fraction=0.25))
    assert pin_place(PLANT, along) == (400, (42 - 3 + 6 * 0.25) * 10)


def test_stale_figures_are_grey() -> None:
    overlay = overlay_picture(PLANT, PICTURE, replace(DATA, stale=True))
    for shape in (*overlay.above(), *overlay.under):
        stroke = getattr(shape, "stroke", None)
        roles = {getattr(shape, "role", None), getattr(shape, "fill", None), stroke.role if stroke else None}
        assert roles <= {None, "stale", "paper", "on-fault", "muted"}
    assert greyed(()) == ()


def test_gauges_show_the_voltage_left() -> None:
    texts = [s.text for s in overlay_picture(PLANT, PICTURE, DATA).over if isinstance(s, Text)]
    assert sorted(texts) == ["0 %", "61 %"]


def test_a_tag_is_as_large_as_its_words() -> None:
    small, large = tag_size(Tag("k", "1 kA")), tag_size(Tag("k", "1 kA", ("a much longer second line", "third")))
    assert large[0] > small[0] and large[1] > small[1]


def test_the_middle_of_a_path_is_half_its_length_from_both_ends() -> None:
    assert middle_of([(0, 0), (0, 10), (30, 10)]) == (10, 10)
