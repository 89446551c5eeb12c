"""What a plant file looks like: readable text in a stable order, so that two saves differ only where the plant does.

History of the format
    1   the first: document, sheets, parts, wires, arrangements, tags, next_number.

A part's ratings stand under their field names as the text that was typed; ``basis`` holds only what was marked. All
of it is derived from the dataclasses and their field descriptions: a new kind of part needs nothing here.
"""

import dataclasses
import json
import re
from collections.abc import Iterable, Mapping
from functools import lru_cache
from typing import Any, Final, get_type_hints

from onelinefault.errors import PlantFileError
from onelinefault.model.fields import fields_of, text_of
from onelinefault.model.part import Part
from onelinefault.model.plant import Arrangement, Document, End, Plant, Sheet, Wire
from onelinefault.store.migrate import CURRENT_VERSION

FORMAT_WORD: Final = "onelinefault plant"
ID_PATTERN: Final = r"[A-Za-z]{1,20}[0-9]{1,9}"
DOCUMENT: Final = ""  # stands for the document where a part's id is expected

# texts that could not be read, by part id (or DOCUMENT) and field name: kept so that saving does not lose them
Aside = Mapping[tuple[str, str], str]
Record = dict[str, Any]


@dataclasses.dataclass(frozen=True, slots=True)
class PlainField:
    """A field of a part that is no rating: its place, turn, name, length of a bar. type: str, int or bool."""

    name: str
    type: type
    default: Any
    required: bool


def plain_fields(part_class: type) -> tuple[PlainField, ...]:
    """The fields of a kind of part that are stored as plain JSON values, in the order of declaration."""
    return _plain_fields(part_class)


@lru_cache(maxsize=64)
def _plain_fields(part_class: type) -> tuple[PlainField, ...]:
    hints = get_type_hints(part_class)
    return tuple(
        PlainField(item.name, hints[item.name], item.default, item.default is dataclasses.MISSING)
        for item in dataclasses.fields(part_class)
        if "field" not in item.metadata and item.name != "basis"
    )


# these stand in the file even at their default: a reader looks for them
_ALWAYS: Final = ("id", "name", "sheet", "x", "y")


def id_order(an_id: str) -> tuple[int, str]:
    """Sorts ids by their number: "p2" before "p10"."""
    digits = re.search(r"\d+$", an_id)
    return int(digits.group()) if digits else 0, an_id


def part_record(part: Part, aside: Aside | None = None) -> Record:
    """A part as plain values. aside: unreadable texts, put back where the rating has no value."""
    record: Record = {"id": part.id, "kind": part.kind}
    for item in plain_fields(type(part)):
        value = getattr(part, item.name)
        if item.name != "id" and (item.name in _ALWAYS or value != item.default):
            record[item.name] = value
    ratings = _ratings(part, part.id, aside or {})
    if ratings:
        record["ratings"] = ratings
    if part.basis:
        order = [*fields_of(type(part)), *sorted(part.basis)]
        record["basis"] = {name: str(part.basis[name]) for name in dict.fromkeys(order) if name in part.basis}
    return record


def document_record(document: Document, aside: Aside | None = None) -> Record:
    """The title block and the settings of the calculation as plain values."""
    return _ratings(document, DOCUMENT, aside or {})


def _ratings(owner: Part | Document, owner_id: str, aside: Aside) -> Record:
    typed = {name: text_of(getattr(owner, name)) for name in fields_of(type(owner)) if getattr(owner, name) is not None}
    kept = {name: text for (part, name), text in sorted(aside.items()) if part == owner_id}
    order = dict.fromkeys([*fields_of(type(owner)), *kept])
    return {name: typed.get(name, kept.get(name)) for name in order if name in typed or name in kept}


def wire_record(wire: Wire) -> Record:
    """A wire as plain values: each end is [part, terminal] or [bus, "bar", place along the bar]."""
    record: Record = {"id": wire.id, "a": _end(wire.a), "b": _end(wire.b)}
    if wire.corners:
        record["corners"] = [list(corner) for corner in wire.corners]
    return record


def _end(end: End) -> list[str | int]:
    return [end.part, end.terminal] if end.at is None else [end.part, end.terminal, end.at]


def sheet_record(sheet: Sheet) -> Record:
    """A sheet as plain values."""
    return {"id": sheet.id, "title": sheet.title, "paper": sheet.paper, "upright": sheet.upright}


def arrangement_record(arrangement: Arrangement) -> Record:
    """A running arrangement as plain values."""
    return {
        "id": arrangement.id,
        "name": arrangement.name,
        "closed": {key: arrangement.closed[key] for key in sorted(arrangement.closed, key=id_order)},
        "in_service": {key: arrangement.in_service[key] for key in sorted(arrangement.in_service, key=id_order)},
    }


def plant_text(plant: Plant, aside: Aside | None = None) -> str:
    """The plant as the text of its file. aside: unreadable texts of the file it came from (``OpenedPlant.aside``).

    Raises PlantFileError when an id is used twice over or a key is not its part's id: the plant itself is broken.
    """
    _check_ids(plant)
    parts = [plant.parts[key] for key in sorted(plant.parts, key=id_order)]
    wires = [plant.wires[key] for key in sorted(plant.wires, key=id_order)]
    blocks = (
        f'"format": {_flat(FORMAT_WORD)}',
        f'"version": {CURRENT_VERSION}',
        f'"document": {_open(document_record(plant.document, aside), "  ")}',
        f'"sheets": {_rows(_flat(sheet_record(s)) for s in plant.sheets)}',
        f'"parts": {_rows(_part_block(part_record(part, aside)) for part in parts)}',
        f'"wires": {_rows(_flat(wire_record(w)) for w in wires)}',
        f'"arrangements": {_rows(_flat(arrangement_record(a)) for a in plant.arrangements)}',
        f'"tags": {_open({key: list(plant.tags[key]) for key in sorted(plant.tags)}, "  ")}',
        f'"next_number": {plant.next_number}',
    )
    return "{\n  " + ",\n  ".join(blocks) + "\n}\n"


def _check_ids(plant: Plant) -> None:
    for key, own in ((k, thing.id) for things in (plant.parts, plant.wires) for k, thing in things.items()):
        if key != own:
            raise PlantFileError(f"{key} is filed under another id than its own ({own})")
    ids = [*plant.parts, *plant.wires, *(s.id for s in plant.sheets), *(a.id for a in plant.arrangements)]
    if len(set(ids)) < len(ids):
        twice = next(one for one in ids if ids.count(one) > 1)
        raise PlantFileError(f"the id {twice} is used more than once in this plant")


def _flat(value: object) -> str:
    return json.dumps(value, ensure_ascii=False)


def _rows(rows: Iterable[str]) -> str:
    """A list, one entry a row (or a block)."""
    body = ",\n    ".join(rows)
    return f"[\n    {body}\n  ]" if body else "[]"


def _open(record: Mapping[str, Any], indent: str) -> str:
    """An object, one entry a row."""
    body = f",\n{indent}  ".join(f"{_flat(key)}: {_flat(value)}" for key, value in record.items())
    return f"{{\n{indent}  {body}\n{indent}}}" if body else "{}"


def _part_block(record: Record) -> str:
    """A part as a block: what moves with the mouse in one row, then each rating in a row of its own."""
    head = ", ".join(f"{_flat(k)}: {_flat(v)}" for k, v in record.items() if k not in ("ratings", "basis"))
    inner = [f"{_flat(k)}: {_open(record[k], '      ')}" for k in ("ratings", "basis") if k in record]
    return "{\n      " + ",\n      ".join([head, *inner]) + "\n    }"
