"""Lining parts up and spacing them out, each as one step."""

from collections.abc import Iterable

from onelinefault.errors import EditError
from onelinefault.model.consumers import Bus, Note
from onelinefault.model.editing_draft import Draft, listed
from onelinefault.model.editing_placing import anchor, shift
from onelinefault.model.edits import Edit
from onelinefault.model.part import Part, place_of
from onelinefault.model.plant import Plant

EDGES = ("left", "right", "top", "bottom", "centre", "middle")
DIRECTIONS = ("across", "down")


def align(plant: Plant, ids: Iterable[str], edge: str) -> Edit:
    """Line parts up.

    edge: "left", "right", "top" or "bottom" of their terminals and bars; "centre" puts their origins (of a bus its
    middle) under one another, "middle" beside one another. Raises EditError for an unknown edge or part.
    """
    if edge not in EDGES:
        raise EditError(f"{edge}: parts are lined up by {', '.join(EDGES)}")
    draft = Draft(plant)
    parts = draft.chosen_parts(ids)
    if parts:
        axis = 0 if edge in ("left", "right", "centre") else 1
        marks = {part.id: _mark(part, edge, axis) for part in parts}
        low, high = min(marks.values()), max(marks.values())
        line = low if edge in ("left", "top") else high if edge in ("right", "bottom") else (low + high) // 2
        shift(draft, {key: _along_axis(axis, line - mark) for key, mark in marks.items() if mark != line})
    return draft.edit(f"Align {listed(parts)}")


def distribute(plant: Plant, ids: Iterable[str], direction: str) -> Edit:
    """Space the origins of parts (of a bus its middle) evenly between the outermost two, on whole modules.

    direction: "across" or "down". Raises EditError for an unknown direction or part.
    """
    if direction not in DIRECTIONS:
        raise EditError(f"{direction}: parts are spaced out {' or '.join(DIRECTIONS)}")
    draft = Draft(plant)
    parts = draft.chosen_parts(ids)
    if len(parts) > 2:
        axis = DIRECTIONS.index(direction)
        marks = sorted((anchor(part)[axis], part.id) for part in parts)
        low, high, gaps = marks[0][0], marks[-1][0], len(marks) - 1
        wanted = {key: low + (2 * i * (high - low) + gaps) // (2 * gaps) for i, (_, key) in enumerate(marks)}
        shift(draft, {key: _along_axis(axis, wanted[key] - mark) for mark, key in marks if mark != wanted[key]})
    return draft.edit(f"Distribute {listed(parts)}")


def extent(part: Part) -> tuple[int, int, int, int]:
    """Left, top, right and bottom of a part's origin, terminals and bar, in modules."""
    length = part.length if isinstance(part, Bus) else part.width if isinstance(part, Note) else 0
    points = [(part.x, part.y), place_of(part, length, 0), *(place_of(part, t.dx, t.dy) for t in part.terminals)]
    xs, ys = [int(x) for x, _ in points], [int(y) for _, y in points]
    return min(xs), min(ys), max(xs), max(ys)


def _mark(part: Part, edge: str, axis: int) -> int:
    if edge in ("centre", "middle"):
        return anchor(part)[axis]
    return extent(part)[axis if edge in ("left", "top") else axis + 2]


def _along_axis(axis: int, by: int) -> tuple[int, int]:
    return (by, 0) if axis == 0 else (0, by)
