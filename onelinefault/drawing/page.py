"""What stands on every sheet besides the plant: border with zones, title block, legend, caution."""

from dataclasses import dataclass
from typing import Final

from onelinefault.drawing.metrics import text_width, wrapped
from onelinefault.drawing.palette import bar_weight_du
from onelinefault.drawing.shapes import MODULE_DU, Box, Line, Rect, Shape, Shapes, Stroke, Text
from onelinefault.drawing.wire_picture import ZONE_MODULES
from onelinefault.model.caution import CAUTION
from onelinefault.model.plant import Document, Plant, Sheet
from onelinefault.model.quantity import quantity

MARGIN_DU: Final = 20.0  # 5 mm to the trimmed edge
_FRAME = Stroke("frame", 2.4)
_RULE = Stroke("frame", 1.2)
_BLOCK_W, _BLOCK_H = 330.0, 66.0
_SPLIT = 205.0
_RIBBON_WORDS = "fault current at the fault's voltage, wider = more"
_LEVELS = (("level-hv", "above 36 kV"), ("level-mv", "1 to 36 kV"), ("level-lv", "up to 1 kV"), ("dead", "dead"))


@dataclass(frozen=True, slots=True)
class Stamp:
    """What the title block says of the calculation shown: method, fault, arrangement; empty without figures."""

    method: str = ""
    fault: str = ""
    arrangement: str = "as drawn"


def page_box(sheet: Sheet) -> Box:
    """The paper, in du."""
    width, height = sheet.size
    return Box(0, 0, width * MODULE_DU, height * MODULE_DU)


def frame_box(sheet: Sheet) -> Box:
    """The border, in du."""
    return page_box(sheet).grown(-MARGIN_DU)


def title_block_box(sheet: Sheet) -> Box:
    """Where the title block stands, in du."""
    frame = frame_box(sheet)
    return Box(frame.right - _BLOCK_W, frame.bottom - _BLOCK_H, frame.right, frame.bottom)


def page_shapes(plant: Plant, sheet: Sheet, stamp: Stamp, *, legend: bool = True) -> Shapes:
    """Border, title block, legend and caution of a sheet. legend: also explain tints and overlay."""
    shapes: list[Shape] = [*_border(sheet), *_title_block(plant, sheet, stamp), *_caution(sheet)]
    if legend:
        shapes += _legend(sheet, with_overlay=bool(stamp.fault))
    return tuple(shapes)


def _border(sheet: Sheet) -> list[Shape]:
    frame = frame_box(sheet)
    page = page_box(sheet)
    shapes: list[Shape] = [Rect(frame.left, frame.top, frame.width, frame.height, 0, _FRAME)]
    step = ZONE_MODULES * MODULE_DU
    tick = Stroke("frame", 1.0)
    for i in range(int(page.right / step) + 1):
        x = i * step
        if frame.left < x < frame.right:
            shapes += [Line(x, frame.top - 9, x, frame.top, tick), Line(x, frame.bottom, x, frame.bottom + 9, tick)]
        middle = (max(x, frame.left) + min(x + step, frame.right)) / 2
        if middle < frame.right - 8:
            shapes.append(Text(middle, frame.top - 6, str(i + 1), 7.5, anchor="middle", role="muted"))
    for i in range(int(page.bottom / step) + 1):
        y = i * step
        if frame.top < y < frame.bottom:
            shapes += [Line(frame.left - 9, y, frame.left, y, tick), Line(frame.right, y, frame.right + 9, y, tick)]
        middle = (max(y, frame.top) + min(y + step, frame.bottom)) / 2
        if middle < frame.bottom - 8:
            letter = chr(ord("A") + i)
            shapes.append(Text(frame.left - 10, middle, letter, 7.5, "regular", "middle", "middle", "muted"))
    return shapes


def _title_block(plant: Plant, sheet: Sheet, stamp: Stamp) -> list[Shape]:
    box = title_block_box(sheet)
    row = _BLOCK_H / 3
    split = box.left + _SPLIT
    shapes: list[Shape] = [
        Rect(box.left, box.top, box.width, box.height, 0, _RULE, "paper"),
        Line(split, box.top, split, box.bottom, _RULE),
        Line(box.left, box.top + row, box.right, box.top + row, Stroke("frame", 0.8)),
        Line(box.left, box.top + 2 * row, box.right, box.top + 2 * row, Stroke("frame", 0.8)),
    ]
    for column, (x, width) in enumerate(((box.left, _SPLIT), (split, _BLOCK_W - _SPLIT))):
        for i, text in enumerate(_block_texts(plant, sheet, stamp)[column]):
            bold = column == 0 and i == 0
            size = _fitting(text, width - 14, 10.5 if bold else 9.0, bold)
            role = "ink" if column == 0 else "muted"
            y = box.top + (i + 0.5) * row
            weight = "bold" if bold else "regular"
            shapes.append(Text(x + 7, y, text, size, weight, "start", "middle", role))  # type: ignore[arg-type]
    return shapes


def _block_texts(plant: Plant, sheet: Sheet, stamp: Stamp) -> tuple[tuple[str, ...], tuple[str, ...]]:
    document = plant.document
    number = plant.sheets.index(sheet) + 1
    name = document.name or "New plant"
    base = (document.base_power or quantity(document.base_mva, "MVA")).text
    frequency = (document.frequency or quantity(document.frequency_hz, "Hz")).text
    study = ", ".join(t for t in (stamp.method, stamp.fault) if t) or "one-line diagram"
    left = (
        f"{name} · {sheet.title}" if sheet.title else name,
        study,
        f"{stamp.arrangement} · base {base} · {frequency}",
    )
    right = (
        f"sheet {number} of {len(plant.sheets)} · {sheet.paper}",
        _joined(document, ("revision", "rev "), ("date", "")),
        _joined(document, ("drawn_by", "drawn "), ("checked_by", "checked ")),
    )
    return left, right


def _joined(document: Document, *pieces: tuple[str, str]) -> str:
    return " · ".join(f"{word}{getattr(document, name) or '—'}" for name, word in pieces)


def _fitting(text: str, width_du: float, size_du: float, bold: bool) -> float:
    """The size at which a text fits its box, at least 6 du."""
    width = text_width(text, size_du, bold)
    return size_du if width <= width_du else max(6.0, size_du * width_du / width)


def _caution(sheet: Sheet) -> list[Shape]:
    frame = frame_box(sheet)
    room = frame.width - _BLOCK_W - 30
    lines = wrapped(CAUTION, room, 7.5)
    first = frame.bottom - 8 - (len(lines) - 1) * 10
    return [Text(frame.left + 10, first + i * 10, line, 7.5, role="muted") for i, line in enumerate(lines)]


def _legend(sheet: Sheet, *, with_overlay: bool) -> list[Shape]:
    """One line of samples above the caution: voltage levels, then what the overlay means."""
    frame = frame_box(sheet)
    lines = len(wrapped(CAUTION, frame.width - _BLOCK_W - 30, 7.5))
    y = frame.bottom - 8 - lines * 10 - 12
    x = frame.left + 10
    shapes: list[Shape] = []
    for role, words in _LEVELS:
        shapes += [Line(x, y, x + 22, y, Stroke(role, bar_weight_du(role))), _word(x + 29, y, words)]
        x += 29 + text_width(words, 8.5) + 16
    if with_overlay:
        shapes.append(Rect(x, y - 4, 26, 8, 0, None, "ribbon"))
        shapes.append(_word(x + 32, y, _RIBBON_WORDS))
        x += 32 + text_width(_RIBBON_WORDS, 8.5) + 16
        shapes.append(Rect(x, y - 7, 6, 14, 3, Stroke("gauge", 1.2), "paper"))
        shapes.append(Rect(x + 1.6, y - 1, 2.8, 6.4, 1.4, None, "gauge"))
        shapes.append(_word(x + 13, y, "voltage left"))
    return shapes


def _word(x: float, y: float, words: str) -> Text:
    return Text(x, y, words, 8.5, "regular", "start", "middle", "muted")
