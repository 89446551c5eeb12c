"""Ribbons of fault current along wires, through parts and along bars; they lie under everything else."""

from collections.abc import Iterator
from itertools import pairwise
from typing import Final, NamedTuple

from onelinefault.drawing.overlay import OverlayData
from onelinefault.drawing.palette import DEFAULT_BAR_WEIGHT_DU
from onelinefault.drawing.ribbons import bar_flow, chevrons, ribbon, width_of
from onelinefault.drawing.shapes import MODULE_DU, Point, Polygon, Polyline, Shape, Shapes, Stroke
from onelinefault.drawing.sheet import SheetPicture
from onelinefault.model.consumers import Bus
from onelinefault.model.part import Part, Terminal, place_of
from onelinefault.model.plant import Plant

_LEAST_TAPER: Final = 0.5  # along a bar the ribbon grows towards the fault, from at least this share of its width
_BAR_DU: Final = DEFAULT_BAR_WEIGHT_DU
_CHEVRON_DU: Final = 8.0
_CHEVRON_STEP_DU: Final = 46.0


def ribbon_shapes(plant: Plant, picture: SheetPicture, data: OverlayData) -> Shapes:
    """All ribbons of a sheet."""
    role = "stale" if data.stale else "ribbon"
    shapes: list[Shape] = []
    marks: list[Shape] = []
    for stream in _streams(plant, picture, data):
        width = width_of(stream.ka, data.largest_ka)
        if width <= 0 or len(stream.path) < 2:
            continue
        start = width if stream.arriving_ka is None else width_of(stream.arriving_ka, data.largest_ka)
        start = max(start, width * _LEAST_TAPER) + stream.bar
        shapes += [Polygon(tuple(p), None, role) for p in ribbon(stream.path, start, width + stream.bar)]
        if stream.marked and width > 3:
            pen = Stroke("paper" if data.stale else "fault", 1.4)
            size = min(_CHEVRON_DU, width * 0.62)
            marks += [Polyline(tuple(c), pen) for c in chevrons(stream.path, size, _CHEVRON_STEP_DU)]
    return (*shapes, *marks)


class _Stream(NamedTuple):
    """A piece that carries current: its path in the direction of flow (du), kA, whether chevrons mark the direction.

    bar: weight of the bus bar that covers the middle of the ribbon, du. arriving_ka: what flows along the bar before
    this piece begins, so that the ribbon grows from there; None keeps one width.
    """

    path: list[Point]
    ka: float
    marked: bool
    bar: float = 0.0
    arriving_ka: float | None = None


def _streams(plant: Plant, picture: SheetPicture, data: OverlayData) -> Iterator[_Stream]:
    for key, wire in picture.wires.items():
        flow = data.flows.get(key)
        if flow is not None:
            path = [(x * MODULE_DU, y * MODULE_DU) for x, y in wire.path]
            a_here = plant.parts[plant.wires[key].a.part].sheet == picture.sheet.id
            yield _Stream(path if flow.forward == a_here else path[::-1], flow.ka, True)
    for part_id in picture.parts:
        part = plant.parts[part_id]
        if isinstance(part, Bus):
            yield from _along_bar(plant, part, data)
        else:
            yield from _through(part, data)


def _through(part: Part, data: OverlayData) -> Iterator[_Stream]:
    for terminal in part.terminals:
        flow = data.ends.get((part.id, terminal.name))
        if flow is not None:
            path = _from_terminal(part, terminal)
            yield _Stream(path if flow.forward else path[::-1], flow.ka, False)


def _from_terminal(part: Part, terminal: Terminal) -> list[Point]:
    """From a terminal to the middle of the symbol."""
    inner = (terminal.dx, 0) if abs(terminal.dy) >= abs(terminal.dx) else (0, terminal.dy)
    places = (place_of(part, terminal.dx, terminal.dy), place_of(part, *inner))
    return [(x * MODULE_DU, y * MODULE_DU) for x, y in places]


def _along_bar(plant: Plant, bus: Bus, data: OverlayData) -> Iterator[_Stream]:
    taps = []
    for wire in plant.wires_of(bus.id):
        flow = data.flows.get(wire.id)
        if flow is None:
            continue
        for end, into in ((wire.a, not flow.forward), (wire.b, flow.forward)):
            if end.part == bus.id:
                taps.append((float(end.at or 0), flow.ka if into else -flow.ka))
    fault_at = pin_offset(bus, data) if data.place.part == bus.id else None
    pieces = bar_flow(taps, fault_at)
    currents = [0.0, *(current for _, _, current in pieces), 0.0]
    for i, (start, stop, current) in enumerate(pieces, 1):
        if abs(current) > 0:
            ends = (start, stop) if current > 0 else (stop, start)
            before = currents[i - 1] if current > 0 else -currents[i + 1]
            yield _Stream([_on_bar(bus, o) for o in ends], abs(current), False, _BAR_DU, max(before, 0.0))


def pin_offset(bus: Bus, data: OverlayData) -> float:
    """Where along a bar the pin stands, in modules: where it was put, else in the middle."""
    at = data.place.at
    return float(min(max(at, 0), bus.length)) if at is not None else bus.length / 2


def _on_bar(bus: Bus, offset: float) -> Point:
    x, y = place_of(bus, offset, 0)
    return x * MODULE_DU, y * MODULE_DU


def pin_place(plant: Plant, data: OverlayData) -> Point:
    """The point (du) that the pin's tip touches."""
    part = plant.parts[data.place.part]
    if isinstance(part, Bus):
        return _on_bar(part, pin_offset(part, data))
    named = {t.name: t for t in part.terminals}
    if data.place.fraction is not None and {"a", "b"} <= named.keys():
        (ax, ay), (bx, by) = ((named[n].dx, named[n].dy) for n in ("a", "b"))
        x, y = place_of(part, ax + (bx - ax) * data.place.fraction, ay + (by - ay) * data.place.fraction)
    else:
        terminal = named.get(data.place.terminal) or part.terminals[0]
        x, y = place_of(part, terminal.dx, terminal.dy)
    return x * MODULE_DU, y * MODULE_DU


def middle_of(path: list[Point]) -> Point:
    """The point half-way along a path."""
    total = sum(abs(bx - ax) + abs(by - ay) for (ax, ay), (bx, by) in pairwise(path))
    left = total / 2
    for (ax, ay), (bx, by) in pairwise(path):
        length = abs(bx - ax) + abs(by - ay)
        if length >= left and length > 0:
            return ax + (bx - ax) * left / length, ay + (by - ay) * left / length
        left -= length
    return path[-1]
