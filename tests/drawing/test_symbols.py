"""The family of symbols: leads reach the terminals, looks show, silhouettes differ."""

from __future__ import annotations

from collections.abc import Iterable, Iterator
from itertools import combinations, pairwise

import pytest

from onelinefault.drawing.palette import SHEET
from onelinefault.drawing.shapes import Circle, Line, Path, Point, Polyline, Rect, Shape, Shapes, Text, bounds
from onelinefault.drawing.symbols import KINDS, TERMINALS, Look, levels, placed_symbol, symbol

BLADE_AND_PLATES = 2.6
SWITCHES = ("breaker", "switch")


def segments(shapes: Iterable[Shape]) -> Iterator[tuple[Point, Point]]:
    """All straight pieces of the open and closed outlines."""
    for shape in shapes:
        if isinstance(shape, Line):
            yield (shape.x1, shape.y1), (shape.x2, shape.y2)
        elif isinstance(shape, Polyline):
            yield from pairwise(shape.points)
        elif isinstance(shape, Path):
            points = [c.points[-1] for c in shape.commands if c.points]
            yield from pairwise(points)


def roles(shapes: Shapes) -> set[str]:
    found = set()
    for shape in shapes:
        if isinstance(shape, Text):
            found.add(shape.role)
            continue
        fill = getattr(shape, "fill", None)
        found |= {fill} if fill else set()
        found |= {shape.stroke.role} if shape.stroke else set()
    return found


def texts(shapes: Shapes) -> list[str]:
    return [shape.text for shape in shapes if isinstance(shape, Text)]


LOOKS = {
    **{kind: Look() for kind in KINDS},
    "transformer": Look(connections=("YN", "ZN"), neutrals=("solid", "reactor")),
    "transformer3": Look(connections=("YN", "YN", "D"), neutrals=("resistor", "solid", "")),
    "autotransformer": Look(neutrals=("resistor",)),
}


@pytest.mark.parametrize("kind", [k for k in KINDS if k not in ("bus", "note")])
@pytest.mark.parametrize("turn", range(4))
@pytest.mark.parametrize("mirrored", [False, True])
def test_a_lead_ends_on_every_terminal(kind: str, turn: int, mirrored: bool) -> None:
    drawn = placed_symbol(kind, LOOKS[kind], turn, mirrored)
    ends = {(round(x, 6), round(y, 6)) for pair in segments(drawn.shapes) for x, y in pair}
    assert [name for name, _, _ in drawn.terminals] == [name for name, _, _ in TERMINALS[kind]]
    for _, dx, dy in drawn.terminals:
        assert (10 * dx, 10 * dy) in ends


@pytest.mark.parametrize("kind", [k for k in KINDS if k not in ("bus", "note")])
def test_terminals_are_the_outermost_points_on_their_side(kind: str) -> None:
    drawn = symbol(kind)
    for _, dx, dy in drawn.terminals:
        x, y = 10 * dx, 10 * dy
        sides = (x - drawn.box.left, drawn.box.right - x, y - drawn.box.top, drawn.box.bottom - y)
        assert min(sides) == pytest.approx(1.0)  # half the lead's width beyond the terminal, nothing more


@pytest.mark.parametrize("kind", KINDS)
def test_symbol_is_compact_and_round_its_origin(kind: str) -> None:
    drawn = symbol(kind, Look(length=6) if kind == "bus" else Look())
    if kind != "bus":
        assert drawn.box.holds(0, 0)
        assert max(drawn.box.width, drawn.box.height) <= 82
        assert drawn.box.grown(1e-9).holds(drawn.body.left, drawn.body.top)
    assert drawn.box == bounds(drawn.shapes)


@pytest.mark.parametrize("kind", KINDS)
def test_every_role_has_a_colour_and_the_weights_are_those_of_the_family(kind: str) -> None:
    shapes = symbol(kind, LOOKS[kind]).shapes
    assert roles(shapes) <= set(SHEET)
    widths = {s.stroke.width_du for s in shapes if not isinstance(s, Text) and s.stroke}
    assert all(1.0 <= width <= BLADE_AND_PLATES for width in widths) or kind == "bus"


@pytest.mark.parametrize("kind", KINDS)
def test_equal_looks_share_their_shapes(kind: str) -> None:
    one = symbol(kind, Look(level=levels({"a": "level-mv"})))
    assert one is symbol(kind, Look(level=levels({"a": "level-mv"})))
    assert placed_symbol(kind, Look(), 0, False) is symbol(kind, Look())


def test_bus_has_its_length_and_the_weight_of_its_level() -> None:
    for role, weight in (("level-hv", 7), ("level-mv", 6), ("level-lv", 5), ("ink", 6)):
        (bar,) = symbol("bus", Look(level=levels({"bar": role}), length=12)).shapes
        assert isinstance(bar, Line)
        assert (bar.x1, bar.y1, bar.x2, bar.y2, bar.stroke.width_du) == (0, 0, 120, 0, weight)
    (dot,) = symbol("bus", Look(length=0)).shapes
    assert isinstance(dot, Circle)


def test_each_winding_takes_its_own_level() -> None:
    tints = levels({"high": "level-hv", "medium": "level-mv", "low": "level-lv", "tertiary": "level-lv"})
    assert roles(symbol("transformer", Look(level=tints)).shapes) == {"paper", "level-hv", "level-lv"}
    assert roles(symbol("transformer3", Look(level=tints)).shapes) == {"paper", "level-hv", "level-mv", "level-lv"}
    assert roles(symbol("autotransformer", Look(level=tints)).shapes) == {"paper", "level-hv", "level-lv"}


def test_open_switch_shows_the_dead_side() -> None:
    tints = levels({"a": "level-mv", "b": "dead"})
    for kind in SWITCHES:
        shapes = symbol(kind, Look(level=tints, closed=False)).shapes
        below = [s for s in shapes if s.box().centre[1] > 2]
        assert roles(tuple(below)) == {"dead"}
        assert "level-mv" in roles(shapes)


def covered(kind: str, look: Look) -> bool:
    """Whether lines on the axis reach without a gap from terminal a to terminal b."""
    reach = -20.0
    pieces = sorted(sorted((a[1], b[1])) for a, b in segments(symbol(kind, look).shapes) if a[0] == b[0] == 0)
    for start, end in pieces:
        if start > reach + 1e-9:
            return False
        reach = max(reach, end)
    return reach >= 20


@pytest.mark.parametrize("kind", [*SWITCHES, "fuse"])
def test_closed_conducts_and_open_does_not(kind: str) -> None:
    assert covered(kind, Look())
    assert not covered(kind, Look(closed=False))


def test_blown_fuse_looks_as_taken_out() -> None:
    assert not covered("fuse", Look(intact=False))


@pytest.mark.parametrize(("parallel", "capsules", "words"), [(1, 1, []), (2, 2, []), (3, 3, []), (5, 3, ["×5"])])
def test_cables_side_by_side(parallel: int, capsules: int, words: list[str]) -> None:
    shapes = symbol("cable", Look(parallel=parallel)).shapes
    assert sum(isinstance(shape, Rect) for shape in shapes) == capsules
    assert texts(shapes) == words


def test_motor_group_shows_its_number() -> None:
    assert texts(symbol("induction_motor", Look(count=4)).shapes) == ["M", "×4"]
    assert texts(symbol("induction_motor").shapes) == ["M"]
    assert texts(symbol("synchronous_generator").shapes) == ["G"]


@pytest.mark.parametrize("treatment", ["solid", "resistor", "reactor"])
def test_earthed_neutral_hangs_an_earth_sign_beside_its_winding(treatment: str) -> None:
    plain = symbol("transformer", Look(connections=("D", "Y")))
    earthed = symbol("transformer", Look(connections=("D", "YN"), neutrals=("", treatment)))
    added = [s for s in earthed.shapes if isinstance(s, Line) and s.y1 == s.y2 and s.x1 > 18]
    assert [round(abs(s.x2 - s.x1)) for s in added] == [16, 10, 4]  # three bars, growing shorter
    assert earthed.box.right > plain.box.right
    assert earthed.box.left == plain.box.left
    assert earthed.box.bottom <= 42  # nothing hangs below the terminal's row of wires


def test_neutral_of_the_high_side_is_on_the_left() -> None:
    drawn = symbol("transformer", Look(connections=("YN", "D"), neutrals=("solid", "")))
    assert drawn.box.left < -30
    assert drawn.box.right == pytest.approx(19)


def test_isolated_neutral_shows_only_when_brought_out() -> None:
    hidden = symbol("transformer", Look(connections=("D", "Y"), neutrals=("isolated", "isolated")))
    shown = symbol("transformer", Look(connections=("D", "YN"), neutrals=("isolated", "isolated")))
    assert hidden.shapes == symbol("transformer", Look(connections=("D", "Y"))).shapes
    assert shown.box.right > hidden.box.right
    assert shown.box.left == hidden.box.left


def test_machines_hang_their_star_point_below() -> None:
    plain, earthed = symbol("synchronous_generator"), symbol("synchronous_generator", Look(neutrals=("resistor",)))
    assert earthed.box.bottom > plain.box.bottom + 20
    assert earthed.box.top == plain.box.top


def test_autotransformer_without_tertiary_has_no_such_terminal() -> None:
    drawn = symbol("autotransformer", Look(connections=("YN", "YN")))
    assert [name for name, _, _ in drawn.terminals] == ["high", "low"]
    assert drawn.box.left > -20


@pytest.mark.parametrize("kind", [k for k in KINDS if k != "note"])
def test_out_of_service_is_dashed_and_grey(kind: str) -> None:
    look = Look(level=levels({name: "level-mv" for name, _, _ in TERMINALS[kind]}), in_service=False)
    shapes = symbol(kind, look).shapes
    assert roles(shapes) <= {"dead", "paper"}
    outlines = [s.stroke for s in shapes if not isinstance(s, Text) and s.stroke and s.stroke.width_du >= 2]
    assert outlines
    assert all(stroke.dash for stroke in outlines)


def test_note_holds_its_text() -> None:
    drawn = symbol("note", Look(text="Spare way, see relay sheet four", length=8))
    lines = [s for s in drawn.shapes if isinstance(s, Text)]
    assert " ".join(line.text for line in lines) == "Spare way, see relay sheet four"
    frame = drawn.shapes[0].box()
    assert frame.width == pytest.approx(80 + 1.6)
    assert all(frame.holds(line.box().left, line.box().top) for line in lines)
    assert all(frame.holds(line.box().right, line.box().bottom) for line in lines)


@pytest.mark.parametrize(
    ("kind", "look"),
    [
        ("teapot", Look()),
        ("transformer", Look(connections=("Q", "Y"))),
        ("transformer", Look(connections=("YN", "D"), neutrals=("earthed somehow", ""))),
    ],
)
def test_nonsense_is_refused(kind: str, look: Look) -> None:
    with pytest.raises(ValueError, match=r"no symbol|no winding|no neutral"):
        symbol(kind, look)


def test_no_two_pictures_are_alike() -> None:
    looks = [
        *((kind, Look()) for kind in KINDS),
        *((kind, Look(closed=False)) for kind in (*SWITCHES, "fuse")),
        ("induction_motor", Look(count=2)),
        ("cable", Look(parallel=2)),
    ]
    for one, other in combinations(looks, 2):
        assert symbol(*one).shapes != symbol(*other).shapes
