"""What the inspector shows for a selection, as values: one state a row, made from the model's field descriptions."""

from __future__ import annotations

from collections.abc import Mapping, Sequence
from dataclasses import dataclass
from typing import Final

from onelinefault.errors import EntryError
from onelinefault.model.consumers import Bus, Note
from onelinefault.model.editing import (
    rename,
    rename_sheet,
    set_attribute,
    set_document,
    set_in_service,
    set_paper,
    set_text,
)
from onelinefault.model.edits import Edit
from onelinefault.model.fields import Basis, Field, fields_of, text_of
from onelinefault.model.part import Part
from onelinefault.model.plant import PAPER_MM, Document, Plant, Sheet
from onelinefault.model.quantity import VOLTAGE, Quantity

PART, RATING, DRAWN, DOCUMENT, SHEET = "part", "rating", "drawn", "document", "sheet"
YES, NO = "yes", "no"
_MOST_NAMES: Final = 20
_NEUTRALS: Final = ("isolated", "solid", "resistor 400 A 10 s", "reactor 5 ohm")
_GROUPS: Final = ("Dyn11", "Dyn1", "Dyn5", "YNd1", "YNd11", "YNyn0", "Yyn0", "Dd0", "Yzn5", "YNyn0d11", "YNa0d11")
SUGGESTIONS: Final[Mapping[str, tuple[str, ...]]] = {"neutral": _NEUTRALS, "vector group": _GROUPS}


@dataclass(frozen=True, slots=True)
class RowState:
    """One row.

    scope: what it belongs to; key: field or attribute. text: as typed, empty when nothing is typed or the parts differ
    (mixed). placeholder: what counts instead. basis: how the value in use is known. typed: whether it is typed, so
    that its basis can be marked. missing: required, and nothing is there.
    """

    scope: str
    key: str
    label: str
    kind: str = "text"
    text: str = ""
    placeholder: str = ""
    mixed: bool = False
    basis: Basis | None = None
    typed: bool = False
    missing: bool = False
    choices: tuple[str, ...] = ()
    help: str = ""
    group: str = ""

    @property
    def identity(self) -> tuple[str, str, str, tuple[str, ...]]:
        """What a row's widgets depend on; the rest is only shown in them."""
        return self.scope, self.key, self.label, self.choices


def part_rows(parts: Sequence[Part], completed: Sequence[Part] = ()) -> list[RowState]:
    """The rows of one or more parts: name, service, drawn size, and the ratings that all of them have.

    completed: the same parts with typical values filled in, to show what counts where nothing is typed.
    """
    rows: list[RowState] = []
    if len(parts) == 1:
        rows.append(RowState(PART, "name", "Name", text=parts[0].name, placeholder="no name"))
    if not all(isinstance(part, Note) for part in parts):
        rows.append(_service_row(parts))
    if len(parts) == 1:
        rows += _drawn_rows(parts[0])
    for name, field in common_fields([type(part) for part in parts]).items():
        rows.append(_rating_row(name, field, parts, completed))
    return rows


def common_fields(classes: Sequence[type[Part]]) -> dict[str, Field]:
    """The fields that all classes have under the same name, label and kind, in the order of the first."""
    first, *others = dict.fromkeys(classes)
    return {
        name: field
        for name, field in fields_of(first).items()
        if all(_same(field, fields_of(other).get(name)) for other in others)
    }


def _same(a: Field, b: Field | None) -> bool:
    return b is not None and (a.label, a.kind, a.unit, a.choices) == (b.label, b.kind, b.unit, b.choices)


def _service_row(parts: Sequence[Part]) -> RowState:
    states = {part.in_service for part in parts}
    text = "" if len(states) > 1 else YES if parts[0].in_service else NO
    return RowState(
        PART, "in_service", "In service", "flag", text, mixed=len(states) > 1,
        help="A part out of service is drawn dashed and left out of the calculation.",
    )  # fmt: skip


def _drawn_rows(part: Part) -> list[RowState]:
    if isinstance(part, Bus):
        help_words = "Length of the bar in modules of 2.5 mm; 0 draws a joint. Never shorter than its wires."
        return [RowState(DRAWN, "length", "Bar length", "count", str(part.length), help=help_words)]
    if isinstance(part, Note):
        help_words = "Width in modules of 2.5 mm."
        return [RowState(DRAWN, "width", "Width", "count", str(part.width), help=help_words)]
    return []


def _rating_row(name: str, field: Field, parts: Sequence[Part], completed: Sequence[Part]) -> RowState:
    texts = {part.text(name) for part in parts}
    bases = {part.basis_of(name) for part in parts}
    mixed = len(texts) > 1
    text = "" if mixed else next(iter(texts))
    basis = next(iter(bases)) if len(bases) == 1 else None
    placeholder, typical = _stands_in(name, field, parts, completed)
    if not text and not mixed and typical:
        basis = Basis.TYPICAL
    if field.kind == "flag" and not text and not mixed:
        text = text_of(field.default)
    return RowState(
        RATING,
        name,
        field.label,
        field.kind,
        text,
        "mixed" if mixed else placeholder,
        mixed,
        basis if text or typical else None,
        any(part.given(name) is not None for part in parts),
        _missing(name, field, parts),
        field.choices,
        _help(field, parts[0]),
        field.group,
    )


def _missing(name: str, field: Field, parts: Sequence[Part]) -> bool:
    return field.required and any(part.value(name) is None for part in parts)


def _stands_in(name: str, field: Field, parts: Sequence[Part], completed: Sequence[Part]) -> tuple[str, bool]:
    """What counts where nothing is typed, in words, and whether that is a typical value."""
    for other in field.alternatives:
        if all(part.given(other) is not None for part in parts):
            return f"from {fields_of(type(parts[0]))[other].label}", False
    if _missing(name, field, parts):
        return "required", False
    filled = {part.text(name) for part in completed}
    if len(filled) == 1 and "" not in filled:
        return next(iter(filled)), True
    if field.default is not None:
        return text_of(field.default), True
    return "—", False


def _help(field: Field, part: Part) -> str:
    labels = [fields_of(type(part))[other].label for other in field.alternatives if other in fields_of(type(part))]
    instead = f"Can be given as {' or '.join(labels)} instead." if labels else ""
    return " ".join(filter(None, (field.help, instead)))


def document_rows(plant: Plant) -> list[RowState]:
    """The rows of the title block and of the calculation's basis."""
    rows = []
    for name, field in fields_of(Document).items():
        text = text_of(getattr(plant.document, name))
        placeholder = text_of(field.default) or "—"
        rows.append(
            RowState(DOCUMENT, name, field.label, field.kind, text, placeholder, help=field.help, group=field.group)
        )
    return rows


def sheet_rows(sheet: Sheet) -> list[RowState]:
    """The rows of a sheet."""
    return [
        RowState(SHEET, "title", "Title", text=sheet.title, group="This sheet"),
        RowState(SHEET, "paper", "Paper", "choice", sheet.paper, choices=tuple(PAPER_MM), group="This sheet"),
        RowState(SHEET, "upright", "Upright", "flag", YES if sheet.upright else NO, group="This sheet"),
    ]


def heading(parts: Sequence[Part]) -> tuple[str, str]:
    """The inspector's title for some parts, and the muted words beside it."""
    if len(parts) == 1:
        part = parts[0]
        name = part.name if not part.name.startswith(part.label) else part.name.removeprefix(part.label).strip()
        return f"{part.label} {name}".strip(), voltages(part)
    labels = {part.label for part in parts}
    word = f"{next(iter(labels)).lower()}s" if len(labels) == 1 else "parts"
    return f"{len(parts)} {word}", ", ".join(part.name for part in parts[:_MOST_NAMES] if part.name)


def voltages(part: Part) -> str:
    """The typed voltages of a part: "33 / 11.5 kV"; empty when none is typed."""
    fields = fields_of(type(part))
    values = [part.given(name) for name, field in fields.items() if field.unit_kind is VOLTAGE]
    typed = [value for value in values if isinstance(value, Quantity)]
    units = {value.unit for value in typed}
    if len(units) == 1:
        unit = next(iter(units))
        return f"{' / '.join(f'{value.value:g}' for value in typed)} {unit}"
    return " / ".join(value.text for value in typed)


def row_edit(plant: Plant, ids: Sequence[str], sheet_id: str, row: RowState, text: str) -> Edit:
    """The edit that a typed text of a row means.

    Raises EntryError or EditError, with the reason in words, when it cannot be taken.
    """
    if row.scope == DOCUMENT:
        return set_document(plant, row.key, text)
    if row.scope == SHEET:
        return _sheet_edit(plant, sheet_id, row.key, text)
    if row.scope == RATING:
        return set_text(plant, ids, row.key, text, kept_basis(plant, ids, row.key))
    if row.key == "in_service":
        return set_in_service(plant, ids, text == YES)
    if row.key == "name":
        return rename(plant, ids[0], text)
    return set_attribute(plant, ids[0], row.key, _whole(row.label, text))


def kept_basis(plant: Plant, ids: Sequence[str], field: str) -> Basis | None:
    """The mark that stays on a rating when it is typed anew: all but "typical", which a typed value no longer is."""
    marks = {plant.parts[key].basis.get(field) for key in ids}
    mark = next(iter(marks)) if len(marks) == 1 else None
    return None if mark is Basis.TYPICAL else mark


def _sheet_edit(plant: Plant, sheet_id: str, key: str, text: str) -> Edit:
    if key == "title":
        return rename_sheet(plant, sheet_id, text)
    sheet = plant.sheet(sheet_id)
    assert sheet is not None
    if key == "upright":
        return set_paper(plant, sheet_id, sheet.paper, text == YES)
    known = {paper.casefold(): paper for paper in PAPER_MM}
    return set_paper(plant, sheet_id, known.get(" ".join(text.split()).casefold(), text))


def _whole(label: str, text: str) -> int:
    if not text.strip().isdecimal() or len(text.strip()) > 4:
        raise EntryError(f"{label}: {text.strip() or 'nothing'}: expected a whole number of modules")
    return int(text)
