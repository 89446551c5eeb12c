"""The overlay as shapes: ribbons below the drawing; gauges, tags and the pin above it, each tag by its key."""

from collections.abc import Mapping
from dataclasses import dataclass, replace
from typing import Final

from onelinefault.drawing.metrics import text_width
from onelinefault.drawing.overlay import OverlayData, Tag
from onelinefault.drawing.overlay_ribbons import middle_of, pin_place, ribbon_shapes
from onelinefault.drawing.page import frame_box, title_block_box
from onelinefault.drawing.placing import TagPlace, TagRequest, place_tags
from onelinefault.drawing.shapes import MODULE_DU, Box, Point, Polyline, Rect, Shape, Shapes, Stroke, Text, transform
from onelinefault.drawing.sheet import SheetPicture
from onelinefault.drawing.symbols_marks import GAUGE_HEIGHT_DU, GAUGE_WIDTH_DU, fault_pin, gauge
from onelinefault.drawing.wire_picture import segments
from onelinefault.model.consumers import Bus
from onelinefault.model.part import place_of
from onelinefault.model.parts import terminal_place
from onelinefault.model.plant import Plant

_MAIN_DU: Final = 12.5
_LINE_DU: Final = 9.5
_LINE_STEP: Final = 12.0
_PAD: Final = 8.0
_PIN_HEAD_DU: Final = 26.0
_PIN_CLEARANCE: Final = 19.0
_RIBBON_CLEARANCE: Final = 10.0


@dataclass(frozen=True)
class OverlayPicture:
    """under: ribbons; over: gauges; pin: the marker; tags: shapes by key, with the anchor each speaks of."""

    under: Shapes
    over: Shapes
    pin: Shapes
    tags: Mapping[str, Shapes]
    anchors: Mapping[str, Point]
    boxes: Mapping[str, Box]

    def above(self) -> Shapes:
        """All that lies above the drawing, in painting order."""
        return (*self.over, *(shape for shapes in self.tags.values() for shape in shapes), *self.pin)


def overlay_picture(plant: Plant, picture: SheetPicture, data: OverlayData) -> OverlayPicture:
    """The overlay of one sheet. plant: the value whose picture the sheet shows."""
    under = ribbon_shapes(plant, picture, data)
    taken = _taken(picture)
    gauges: list[Shape] = []
    for bus_id, percent in data.voltage_left.items():
        if bus_id in picture.parts:
            shapes, box = _gauge(plant, bus_id, percent, taken, picture)
            gauges += shapes
            taken.append(box)
    pin: Shapes = ()
    if data.place.part in picture.parts:
        x, y = pin_place(plant, data)
        pin = transform(fault_pin(data.kind, data.phases), dx=x, dy=y)
        taken.append(Box(x - 17, y - 43, x + 17, y))
    over: Shapes = tuple(gauges)
    if data.stale:
        over, pin = greyed(over), greyed(pin)
    tags, anchors, boxes = _tags(plant, picture, data, taken)
    return OverlayPicture(under, over, pin, tags, anchors, boxes)


def _taken(picture: SheetPicture) -> list[Box]:
    """What tags and gauges keep clear of: symbols, words, title block."""
    boxes = [p.body for p in picture.parts.values()]
    boxes += [shape.box() for p in picture.parts.values() for shape in p.words]
    boxes += [w.link for w in picture.wires.values() if w.link is not None]
    return [*boxes, title_block_box(picture.sheet)]


def _gauge(plant: Plant, bus_id: str, percent: float, taken: list[Box], picture: SheetPicture) -> tuple[Shapes, Box]:
    """A bus's gauge at the end of its bar where there is room, the far end first."""
    bus = plant.parts[bus_id]
    length = bus.length if isinstance(bus, Bus) else 0
    label = text_width(f"{percent:.0f} %", 11, True)
    places = []
    for offset in (length, 0):
        x, y = place_of(bus, offset, 0)
        x, y = x * MODULE_DU, y * MODULE_DU
        right = offset > 0 or length == 0
        if bus.turn % 2 == 1:
            centre = (x, y + (GAUGE_HEIGHT_DU * 0.8 if y > bus.y * MODULE_DU else -GAUGE_HEIGHT_DU * 0.8))
            places.append((centre, True))
        else:
            outward = 18.0 if (right != (bus.turn % 4 == 2)) else -18.0
            places.append(((x + outward, y), outward > 0))
    frame = frame_box(picture.sheet)
    for centre, right in places:
        box = _gauge_box(centre, right, label)
        inside = frame.left <= box.left and box.right <= frame.right
        if inside and not any(box.overlaps(other) for other in taken) and not _crossed(box, picture):
            break
    else:
        centre, right = places[0]
        box = _gauge_box(centre, right, label)
    shapes = gauge(percent)
    if not right:
        half = GAUGE_WIDTH_DU / 2
        text = Text(-half - 5, 0, f"{percent:.0f} %", 11, "bold", "end", "middle", "gauge")
        shapes = (*(s for s in shapes if not isinstance(s, Text)), text)
    return transform(shapes, dx=centre[0], dy=centre[1]), box


def _crossed(box: Box, picture: SheetPicture) -> bool:
    """Whether a wire runs through a box."""
    for wire in picture.wires.values():
        if wire.box.overlaps(box):
            for (ax, ay), (bx, by) in segments(wire.path):
                piece = Box(min(ax, bx), min(ay, by), max(ax, bx), max(ay, by))
                if Box(*(v * MODULE_DU for v in piece)).grown(1).overlaps(box):
                    return True
    return False


def _gauge_box(centre: Point, right: bool, label: float) -> Box:
    half = GAUGE_WIDTH_DU / 2
    left_room, right_room = (half, half + 5 + label) if right else (half + 5 + label, half)
    top = centre[1] - GAUGE_HEIGHT_DU / 2
    return Box(centre[0] - left_room, top, centre[0] + right_room, top + GAUGE_HEIGHT_DU)


def _tags(
    plant: Plant, picture: SheetPicture, data: OverlayData, taken: list[Box]
) -> tuple[dict[str, Shapes], dict[str, Point], dict[str, Box]]:
    wanted: dict[str, Tag] = {}
    requests = []
    anchors: dict[str, Point] = {}
    for tag in data.tags:
        anchor = _anchor(plant, picture, data, tag.key)
        if anchor is None:
            continue
        width, height = tag_size(tag)
        moved = plant.tags.get(tag.key)
        pinned = (anchor[0] + moved[0] * MODULE_DU, anchor[1] + moved[1] * MODULE_DU) if moved else None
        requests.append(
            TagRequest(
                key=tag.key,
                anchor=anchor,
                width=width,
                height=height,
                priority=10 if tag.filled else 1,
                pinned=pinned,
                clearance=_PIN_CLEARANCE if tag.filled else _RIBBON_CLEARANCE,
            )
        )
        wanted[tag.key], anchors[tag.key] = tag, anchor
    lines = [
        tuple((x * MODULE_DU, y * MODULE_DU) for x, y in piece)
        for wire in picture.wires.values()
        for piece in segments(wire.path)
    ]
    placed = place_tags(requests, taken, lines, frame_box(picture.sheet))  # type: ignore[arg-type]
    shapes = {p.key: _tag_shapes(wanted[p.key], p, data.stale) for p in placed}
    return shapes, anchors, {p.key: Box(*p.box) for p in placed}


def _anchor(plant: Plant, picture: SheetPicture, data: OverlayData, key: str) -> Point | None:
    if key == "fault":
        if data.place.part not in picture.parts:
            return None
        x, y = pin_place(plant, data)
        return x, y - _PIN_HEAD_DU
    if key in picture.wires:
        return middle_of([(x * MODULE_DU, y * MODULE_DU) for x, y in picture.wires[key].path])
    part_id, _, terminal = key.partition(" ")
    if part_id in picture.parts and terminal:
        x, y = terminal_place(plant.parts[part_id], terminal)
        return x * MODULE_DU, y * MODULE_DU
    return None


def tag_size(tag: Tag) -> tuple[float, float]:
    """Width and height of a tag's box in du."""
    widths = [text_width(tag.main, _MAIN_DU, True), *(text_width(line, _LINE_DU) for line in tag.lines)]
    return max(widths) + 2 * _PAD, 20.0 + _LINE_STEP * len(tag.lines) + (2 if tag.lines else 0)


def _tag_shapes(tag: Tag, place: TagPlace, stale: bool) -> Shapes:
    box = Box(*place.box)
    line = "stale" if stale else "fault"
    main, small = ("on-fault", "on-fault") if tag.filled else (line, "muted")
    shapes: list[Shape] = []
    if place.leader:
        shapes.append(Polyline(tuple(place.leader), Stroke(line, 1.1)))
    fill = line if tag.filled else "paper"
    shapes.append(Rect(box.left, box.top, box.width, box.height, 5, Stroke(line, 1.3), fill))
    shapes.append(Text(box.left + _PAD, box.top + 15, tag.main, _MAIN_DU, "bold", role=main))
    for i, text in enumerate(tag.lines):
        shapes.append(Text(box.left + _PAD, box.top + 15 + (i + 1) * _LINE_STEP, text, _LINE_DU, role=small))
    return tuple(shapes)


def greyed(shapes: Shapes) -> Shapes:
    """The same shapes in the colour of figures that no longer hold."""
    return tuple(_grey(shape) for shape in shapes)


def _grey(shape: Shape) -> Shape:
    if isinstance(shape, Text):
        return replace(shape, role="stale")
    changes: dict[str, object] = {}
    stroke = getattr(shape, "stroke", None)
    if stroke is not None and stroke.role not in ("paper", "on-fault"):
        changes["stroke"] = replace(stroke, role="stale")
    if getattr(shape, "fill", None) not in (None, "paper", "on-fault"):
        changes["fill"] = "stale"
    return replace(shape, **changes)  # type: ignore[arg-type]
