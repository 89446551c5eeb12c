"""What lies under the pointer: a tag, the pin, a terminal, a bus end, a part, a wire, or nothing."""

from dataclasses import dataclass
from math import hypot

from onelinefault.desktop.scene import SheetScene
from onelinefault.drawing.routing import nearest_on_bar, segment_at
from onelinefault.drawing.shapes import MODULE_DU
from onelinefault.model.consumers import Bus
from onelinefault.model.part import place_of
from onelinefault.model.parts import terminal_place
from onelinefault.model.plant import End

_TERMINAL_DU = 6.5
_WIRE_DU = 5.0
_BAR_DU = 6.0


@dataclass(frozen=True, slots=True)
class Hit:
    """kind: "tag", "terminal", "bar-end", "part", "wire", "words" or "nothing"; key: its id; end: the terminal."""

    kind: str
    key: str = ""
    end: End | None = None
    segment: int = -1


NOTHING = Hit("nothing")


def hit_at(scene: SheetScene, x: float, y: float, reach: float = 1.0) -> Hit:
    """What lies at a point of the scene (du). reach: widens the catch when zoomed out."""
    for key, item in scene.tag_items.items():
        if item.box.holds(x, y):
            return Hit("tag", key)
    near = _terminal_near(scene, x, y, _TERMINAL_DU * reach)
    if near is not None:
        return near
    part = _part_at(scene, x, y, reach)
    if part is not None:
        return part
    wire = _wire_at(scene, x, y, _WIRE_DU * reach)
    return wire or _words_at(scene, x, y) or NOTHING


def end_at(scene: SheetScene, x: float, y: float, reach: float = 1.6) -> End | None:
    """The terminal, or place on a bar, that a wire may end at here."""
    hit = _terminal_near(scene, x, y, _TERMINAL_DU * reach)
    if hit is not None and hit.end is not None:
        return hit.end
    for key in scene.picture.parts:
        part = scene.plant.parts.get(key)
        if isinstance(part, Bus) and _on_bar(part, x, y, _BAR_DU * reach):
            return End(key, "bar", bar_offset(part, x, y))
    return None


def bar_offset(bus: Bus, x: float, y: float) -> int:
    """The place along a bar nearest to a point (du), in modules."""
    start, far = place_of(bus, 0, 0), place_of(bus, bus.length, 0)
    ends = (int(start[0]), int(start[1])), (int(far[0]), int(far[1]))
    return nearest_on_bar(*ends, (x / MODULE_DU, y / MODULE_DU))


def _terminal_near(scene: SheetScene, x: float, y: float, reach: float) -> Hit | None:
    best, least = None, reach
    for key, picture in scene.picture.parts.items():
        if not picture.box.grown(reach).holds(x, y):
            continue
        part = scene.plant.parts[key]
        if isinstance(part, Bus):
            for offset, name in ((0, "start"), (part.length, "far")):
                tx, ty = place_of(part, offset, 0)
                away = hypot(tx * MODULE_DU - x, ty * MODULE_DU - y)
                if part.length and away < min(least, _TERMINAL_DU):
                    best, least = Hit("bar-end", key, End(key, name)), away
            continue
        for terminal in part.terminals:
            tx, ty = terminal_place(part, terminal.name)
            away = hypot(tx * MODULE_DU - x, ty * MODULE_DU - y)
            if away < least:
                best, least = Hit("terminal", key, End(key, terminal.name)), away
    return best


def _part_at(scene: SheetScene, x: float, y: float, reach: float) -> Hit | None:
    smallest, area = None, float("inf")
    for key, picture in scene.picture.parts.items():
        part = scene.plant.parts[key]
        body = picture.body.grown(1.5 * reach)
        inside = _on_bar(part, x, y, _BAR_DU * reach) if isinstance(part, Bus) else body.holds(x, y)
        if inside and body.width * body.height < area:
            smallest, area = Hit("part", key), body.width * body.height
    return smallest


def _on_bar(bus: Bus, x: float, y: float, reach: float) -> bool:
    sx, sy = place_of(bus, 0, 0)
    fx, fy = place_of(bus, bus.length, 0)
    left, right = sorted((sx * MODULE_DU, fx * MODULE_DU))
    top, bottom = sorted((sy * MODULE_DU, fy * MODULE_DU))
    return left - reach <= x <= right + reach and top - reach <= y <= bottom + reach


def _wire_at(scene: SheetScene, x: float, y: float, reach: float) -> Hit | None:
    for key, picture in scene.picture.wires.items():
        if picture.link is not None and picture.link.holds(x, y):
            return Hit("wire", key, segment=0)
        if picture.box.grown(reach).holds(x, y):
            segment = segment_at(picture.path, x / MODULE_DU, y / MODULE_DU, reach / MODULE_DU)
            if segment is not None:
                return Hit("wire", key, segment=segment)
    return None


def _words_at(scene: SheetScene, x: float, y: float) -> Hit | None:
    for key, picture in scene.picture.parts.items():
        if picture.box.holds(x, y) and any(word.box().holds(x, y) for word in picture.words):
            return Hit("words", key)
    return None
