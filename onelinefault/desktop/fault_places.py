"""Where a click puts the fault pin."""

from PySide6.QtCore import QPointF

from onelinefault.desktop.hit import bar_offset, hit_at
from onelinefault.desktop.scene import SheetScene
from onelinefault.drawing.shapes import MODULE_DU
from onelinefault.model.conductors import Busway, Cable, OverheadLine
from onelinefault.model.consumers import Bus
from onelinefault.model.fault import Place
from onelinefault.model.part import place_of
from onelinefault.model.plant import Plant

_WITH_FRACTION = (Cable, OverheadLine, Busway)
_STEPS = 20  # the pin stands at twentieths of a conductor's length


def fault_place_under(scene: SheetScene, point: QPointF) -> Place | None:
    """The place to fault at a point of the scene (du), or None where nothing can be faulted."""
    hit = hit_at(scene, point.x(), point.y())
    if hit.kind == "terminal" and hit.end is not None:
        return Place(hit.end.part, hit.end.terminal)
    if hit.kind in ("part", "bar-end", "words"):
        return fault_place(scene.plant, hit.key, point)
    return None


def fault_place(plant: Plant, key: str, point: QPointF | None) -> Place | None:
    """The place on a part nearest to a point; without a point its first terminal. None for a part without terminals."""
    part = plant.parts.get(key)
    if part is None or not part.terminals:
        return None
    if point is not None and isinstance(part, Bus):
        return Place(key, "bar", at=bar_offset(part, point.x(), point.y()))
    if point is not None and isinstance(part, _WITH_FRACTION):
        return Place(key, "a", fraction=_fraction(part, point))
    return Place(key, part.terminals[0].name)


def _fraction(part: Cable | OverheadLine | Busway, point: QPointF) -> float:
    (ax, ay), (bx, by) = (place_of(part, t.dx, t.dy) for t in part.terminals)
    px, py = point.x() / MODULE_DU - ax, point.y() / MODULE_DU - ay
    along = (px * (bx - ax) + py * (by - ay)) / ((bx - ax) ** 2 + (by - ay) ** 2)
    return round(min(max(along, 0.0), 1.0) * _STEPS) / _STEPS
