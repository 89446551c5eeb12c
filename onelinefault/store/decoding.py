"""Plain values of a plant file or of a journal, turned into parts, wires, sheets and the whole plant.

What cannot be kept in a plant is refused with a PlantFileError that names the part and the entry. A rating whose text
cannot be read does not stop the rest: it is left out, reported, and its text handed back to be saved again.
"""

import re
from collections.abc import Iterator, Mapping
from dataclasses import dataclass, field, replace
from typing import Any, Final

from onelinefault.errors import EditError, EntryError, PlantFileError
from onelinefault.model.edits import check_end
from onelinefault.model.fields import Basis, Field, Value, fields_of
from onelinefault.model.findings import Finding, Severity
from onelinefault.model.part import Part
from onelinefault.model.parts import part_class
from onelinefault.model.plant import PAPER_MM, Arrangement, Document, End, Plant, Point, Sheet, Wire
from onelinefault.store import plain
from onelinefault.store.file_format import DOCUMENT, ID_PATTERN, PlainField, id_order, plain_fields

MOST_PARTS: Final = 50_000
MOST_WIRES: Final = 200_000
MOST_SHEETS: Final = 1_000
MOST_CORNERS: Final = 1_000
LONGEST_RATING: Final = 500  # letters; what people type on one line, with room for a line's geometry
_LARGEST_NUMBER: Final = 10**9
_LEAST: Final = {"length": 0, "width": 1}  # sizes; everything else may be negative
_TOP_ENTRIES: Final = frozenset(
    ("format", "version", "document", "sheets", "parts", "wires", "arrangements", "tags", "next_number")
)
_TYPE_AGAIN: Final = "Type it anew; until then its text is kept in the file, and the calculation goes without it."


@dataclass
class Remarks:
    """What is noticed on the way: findings, and texts that could not be read, by part id and field name."""

    findings: list[Finding] = field(default_factory=list)
    aside: dict[tuple[str, str], str] = field(default_factory=dict)

    def add(self, severity: Severity, code: str, message: str, remedy: str, part: str = "", name: str = "") -> None:
        """Note one finding."""
        parts = (part,) if part else ()
        self.findings.append(Finding(severity, code, plain.one_line(message), remedy, parts, name))


def plant_from(record: Mapping[str, Any], remarks: Remarks) -> Plant:
    """The plant of a file's plain values, in today's version.

    Raises PlantFileError for everything that a plant cannot hold.
    """
    _note_strangers(record, _TOP_ENTRIES, "the file", remarks)
    document = document_from(record.get("document", {}), remarks)
    sheets = tuple(sheets_from(plain.need(record, "sheets", "the file")))
    rows = plain.sequence(plain.need(record, "parts", "the file"), "parts", MOST_PARTS)
    parts = [part_from(row, f"part {i} of the list", remarks) for i, row in enumerate(rows, start=1)]
    known_sheets = {sheet.id for sheet in sheets}
    for part in parts:
        if part.sheet not in known_sheets:
            where = f"{plain.one_line(part.title)} ({part.id}), sheet"
            raise PlantFileError(f"{where}: {plain.shown(part.sheet)} is no sheet of this plant")
    rows = plain.sequence(record.get("wires", []), "wires", MOST_WIRES)
    wires = [wire_from(row, f"wire {i} of the list") for i, row in enumerate(rows, start=1)]
    arrangements = tuple(arrangements_from(record.get("arrangements", [])))
    ids = [*(s.id for s in sheets), *(p.id for p in parts), *(w.id for w in wires), *(a.id for a in arrangements)]
    _check_unique(ids)
    plant = Plant(
        document,
        {part.id: part for part in parts},
        {},
        sheets,
        arrangements,
        tags_from(record.get("tags", {})),
        _next_number(record, [*(p.id for p in parts), *(w.id for w in wires), *(a.id for a in arrangements)]),
    )
    return replace(plant, wires={wire.id: wire for wire in _attached(plant, wires, remarks)})


def _attached(plant: Plant, wires: list[Wire], remarks: Remarks) -> Iterator[Wire]:
    for wire in wires:
        try:
            check_end(plant, wire.a)
            check_end(plant, wire.b)
            yield wire
        except EditError as error:
            ends = " and ".join(f"{end.part} {end.terminal}" for end in wire.ends)
            message = f"Wire {wire.id} between {ends} is left out: {error}."
            remaining = tuple(end.part for end in wire.ends if end.part in plant.parts)
            remedy = "Draw it anew where it belongs; the file before the next save is kept beside it."
            finding = Finding(Severity.ERROR, "wire-to-nowhere", plain.one_line(message), remedy, remaining)
            remarks.findings.append(finding)


def document_from(value: object, remarks: Remarks) -> Document:
    """The title block and the settings. Raises PlantFileError when it is no object of texts."""
    record = plain.mapping(value, "document")
    return Document(**_ratings_from(record, fields_of(Document), DOCUMENT, "document", remarks))


def part_from(value: object, where: str, remarks: Remarks) -> Part:
    """One part. where: a phrase for messages while its name is not known.

    Raises PlantFileError for an unknown kind, a missing id, a value of a wrong type or beyond its limits.
    """
    record = plain.mapping(value, where)
    an_id = id_from(plain.need(record, "id", where), where)
    name = plain.text(record.get("name", ""), f"{where} ({an_id}), name")
    where = f"part {plain.one_line(name)} ({an_id})" if name.strip() else f"part {an_id}"
    kind = plain.text(plain.need(record, "kind", where), f"{where}, kind")
    try:
        its_class = part_class(kind)
    except EntryError as error:
        raise PlantFileError(f"{where}: {error}; correct it, or open the file with a newer program") from None
    values: dict[str, Any] = {}
    for item in plain_fields(its_class):
        if item.required or item.name in record:
            values[item.name] = _plain_value(plain.need(record, item.name, where), item, where)
    known = frozenset(("kind", "ratings", "basis", *(item.name for item in plain_fields(its_class))))
    _note_strangers(record, known, where, remarks, an_id)
    described = fields_of(its_class)
    ratings = plain.mapping(record.get("ratings", {}), f"{where}, ratings")
    values |= _ratings_from(ratings, described, an_id, where, remarks)
    values["basis"] = _basis_from(record.get("basis", {}), described, an_id, where, remarks)
    return its_class(**values)


def _plain_value(value: object, item: PlainField, where: str) -> str | int | bool:
    where = f"{where}, {item.name}"
    if item.type is bool:
        return plain.flag(value, where)
    if item.type is int:
        return plain.whole(value, where, least=_LEAST.get(item.name, -plain.LARGEST_COORDINATE))
    return plain.text(value, where)


def _ratings_from(
    record: Mapping[str, Any], described: Mapping[str, Field], owner: str, where: str, remarks: Remarks
) -> dict[str, Any]:
    values: dict[str, Any] = {}
    for name, typed in record.items():
        text = plain.text(typed, f"{where}, {plain.one_line(name)}")
        if name not in described:
            remarks.aside[owner, name] = text
            message = f"{where}: there is no rating {plain.shown(name)}; its text {plain.shown(text)} is kept aside."
            remedy = "Correct its name in the file, or remove it there."
            remarks.add(Severity.WARNING, "unknown-rating", message, remedy, owner, name)
            continue
        try:
            values[name] = _read(described[name], text)
        except EntryError as error:
            remarks.aside[owner, name] = text
            message = f"{where}: unreadable value kept aside: {' '.join(str(error).split())}"
            remarks.add(Severity.ERROR, "unreadable-value", message, _TYPE_AGAIN, owner, name)
    return values


def _read(description: Field, text: str) -> Value | None:
    """The value of a stored text. Raises EntryError when it cannot be read or no line of an inspector is so long."""
    if description.kind != "text" and len(text) > LONGEST_RATING:
        raise EntryError(f"{description.label}: {len(text)} letters are too many for one value")
    return description.value_from(text)


def _basis_from(
    value: object, described: Mapping[str, Field], owner: str, where: str, remarks: Remarks
) -> dict[str, Basis]:
    """Marks by field name; a word that is none of ours counts as guessed, the least sure of all."""
    marks: dict[str, Basis] = {}
    for name, word in plain.mapping(value, f"{where}, basis").items():
        text = plain.text(word, f"{where}, basis of {plain.one_line(name)}")
        if name not in described:
            message = f"{where}: a basis is marked for {plain.shown(name)}, which is no rating; it is left out."
            remarks.add(Severity.WARNING, "unknown-rating", message, "Correct its name in the file.", owner, name)
        elif text in list(Basis):
            marks[name] = Basis(text)
        else:
            marks[name] = Basis.GUESSED
            message = f"{where}: {plain.shown(text)} is no basis of {described[name].label}; taken as guessed."
            remedy = f"Mark it as one of {', '.join(Basis)}."
            remarks.add(Severity.WARNING, "unknown-basis", message, remedy, owner, name)
    return marks


def wire_from(value: object, where: str) -> Wire:
    """One wire; whether its ends exist is not asked here. Raises PlantFileError for wrong types."""
    record = plain.mapping(value, where)
    an_id = id_from(plain.need(record, "id", where), where)
    where = f"wire {an_id}"
    corners = plain.sequence(record.get("corners", []), f"{where}, corners", MOST_CORNERS)
    return Wire(
        an_id,
        _end_from(plain.need(record, "a", where), f"{where}, end a"),
        _end_from(plain.need(record, "b", where), f"{where}, end b"),
        tuple(point_from(corner, f"{where}, corners") for corner in corners),
    )


def _end_from(value: object, where: str) -> End:
    entries = plain.sequence(value, where, 3)
    if len(entries) < 2:
        raise PlantFileError(
            f"{where}: expected [part, terminal] or [bus, terminal, place], found {plain.shown(value)}"
        )
    at = plain.whole(entries[2], f"{where}, place") if len(entries) == 3 and entries[2] is not None else None
    return End(id_from(entries[0], where), plain.text(entries[1], f"{where}, terminal", 40), at)


def point_from(value: object, where: str) -> Point:
    """A point in modules. Raises PlantFileError unless it is two whole numbers."""
    entries = plain.sequence(value, where, 2)
    if len(entries) != 2:
        raise PlantFileError(f"{where}: expected two whole numbers, found {plain.shown(value)}")
    return plain.whole(entries[0], where), plain.whole(entries[1], where)


def id_from(value: object, where: str) -> str:
    """An id: letters and a number. Raises PlantFileError when it is something else."""
    an_id = plain.text(value, f"{where}, id")
    if not re.fullmatch(ID_PATTERN, an_id):
        raise PlantFileError(f'{where}, id: {plain.shown(an_id)} is no id; an id is letters and a number, like "p12"')
    return an_id


def sheets_from(value: object) -> Iterator[Sheet]:
    """The sheets. Raises PlantFileError for wrong types, an unknown paper, or when there is none."""
    rows = plain.sequence(value, "sheets", MOST_SHEETS)
    if not rows:
        raise PlantFileError("sheets: a plant has at least one sheet")
    for i, row in enumerate(rows, start=1):
        record = plain.mapping(row, f"sheet {i} of the list")
        an_id = id_from(plain.need(record, "id", f"sheet {i} of the list"), f"sheet {i} of the list")
        where = f"sheet {an_id}"
        paper = plain.text(record.get("paper", "A4"), f"{where}, paper")
        if paper not in PAPER_MM:
            raise PlantFileError(f"{where}, paper: {plain.shown(paper)} is not known; use {', '.join(PAPER_MM)}")
        title = plain.text(record.get("title", "Sheet"), f"{where}, title")
        yield Sheet(an_id, title, paper, plain.flag(record.get("upright", False), f"{where}, upright"))


def arrangements_from(value: object) -> Iterator[Arrangement]:
    """The running arrangements. Raises PlantFileError for wrong types."""
    for i, row in enumerate(plain.sequence(value, "arrangements", MOST_SHEETS), start=1):
        where = f"arrangement {i} of the list"
        record = plain.mapping(row, where)
        yield Arrangement(
            id_from(plain.need(record, "id", where), where),
            plain.text(plain.need(record, "name", where), f"{where}, name"),
            _marks_from(record.get("closed", {}), f"{where}, closed"),
            _marks_from(record.get("in_service", {}), f"{where}, in_service"),
        )


def _marks_from(value: object, where: str) -> dict[str, bool]:
    return {
        id_from(key, where): plain.flag(mark, f"{where}, {key}") for key, mark in plain.mapping(value, where).items()
    }


def tags_from(value: object) -> dict[str, Point]:
    """Where callouts were dragged to. Raises PlantFileError for wrong types."""
    found = plain.mapping(value, "tags")
    if len(found) > MOST_WIRES:
        raise PlantFileError(f"tags: {len(found)} entries are too many; at most {MOST_WIRES} can be opened")
    return {plain.text(key, "tags", 200): point_from(point, f"tag {plain.shown(key)}") for key, point in found.items()}


def _next_number(record: Mapping[str, Any], ids: list[str]) -> int:
    """The next id's number; where the file does not say it, above all that are taken."""
    if "next_number" not in record:
        return max([1, *(id_order(an_id)[0] + 1 for an_id in ids)])
    return plain.whole(record["next_number"], "next_number", least=1, most=_LARGEST_NUMBER)


def _check_unique(ids: list[str]) -> None:
    seen: set[str] = set()
    for an_id in ids:
        if an_id in seen:
            raise PlantFileError(f"the id {an_id} is used twice; give one of the two another number")
        seen.add(an_id)


def _note_strangers(
    record: Mapping[str, Any], known: frozenset[str], where: str, remarks: Remarks, part: str = ""
) -> None:
    for name in record:
        if name not in known:
            message = f"{where}: the entry {plain.shown(name)} is not known and is left out."
            remedy = "Correct its name in the file, or remove it there."
            remarks.add(Severity.WARNING, "unknown-entry", message, remedy, part)
