"""The published JSON schema of plant files, made from the same descriptions as everything else.

``python -m onelinefault.store.schema > resources/schema/plant.schema.json`` writes it anew; a test says when it is old.
"""

import json
import sys
from typing import Any, Final

from onelinefault.model.fields import Basis, Field, fields_of, text_of
from onelinefault.model.part import Part
from onelinefault.model.parts import PART_CLASSES
from onelinefault.model.plant import PAPER_MM, Document
from onelinefault.model.quantity import show_unit
from onelinefault.store.decoding import MOST_PARTS, MOST_SHEETS, MOST_WIRES
from onelinefault.store.file_format import FORMAT_WORD, ID_PATTERN, PlainField, plain_fields
from onelinefault.store.migrate import CURRENT_VERSION
from onelinefault.store.plain import LARGEST_COORDINATE

Schema = dict[str, Any]
_INTEGER: Final[Schema] = {"type": "integer", "minimum": -LARGEST_COORDINATE, "maximum": LARGEST_COORDINATE}
_ID: Final[Schema] = {"type": "string", "pattern": f"^{ID_PATTERN}$"}


def plant_schema() -> Schema:
    """The schema (JSON Schema, draft 2020-12) of a plant file in today's version."""
    return {
        "$schema": "https://json-schema.org/draft/2020-12/schema",
        "title": "Plant file of onelinefault",
        "description": "Ratings are texts as typed, numbers with units. Positions are in modules (2.5 mm on paper).",
        "type": "object",
        "required": ["format", "version", "sheets", "parts"],
        "additionalProperties": False,
        "properties": {
            "format": {"const": FORMAT_WORD},
            "version": {"const": CURRENT_VERSION},
            "document": _texts(Document),
            "sheets": {"type": "array", "minItems": 1, "maxItems": MOST_SHEETS, "items": _sheet()},
            "parts": {
                "type": "array",
                "maxItems": MOST_PARTS,
                "items": {"oneOf": [{"$ref": f"#/$defs/{part_class.kind}"} for part_class in PART_CLASSES]},
            },
            "wires": {"type": "array", "maxItems": MOST_WIRES, "items": {"$ref": "#/$defs/wire"}},
            "arrangements": {"type": "array", "maxItems": MOST_SHEETS, "items": _arrangement()},
            "tags": {"type": "object", "additionalProperties": {"$ref": "#/$defs/point"}},
            "next_number": {"type": "integer", "minimum": 1},
        },
        "$defs": {
            "id": _ID,
            "point": {"type": "array", "prefixItems": [_INTEGER, _INTEGER], "minItems": 2, "maxItems": 2},
            "end": _end(),
            "wire": _wire(),
            **{part_class.kind: _part(part_class) for part_class in PART_CLASSES},
        },
    }


def schema_text() -> str:
    """The schema as the text of its file."""
    return json.dumps(plant_schema(), indent=2, ensure_ascii=False) + "\n"


def _part(part_class: type[Part]) -> Schema:
    places = {item.name: _plain(item) for item in plain_fields(part_class) if item.name != "id"}
    names = list(fields_of(part_class))
    basis = {"type": "object", "propertyNames": {"enum": names}, "additionalProperties": {"enum": list(Basis)}}
    return {
        "title": part_class.label,
        "description": " ".join((part_class.__doc__ or "").split()),
        "type": "object",
        "required": ["id", "kind"],
        "additionalProperties": False,
        "properties": {
            "id": {"$ref": "#/$defs/id"},
            "kind": {"const": part_class.kind},
            **places,
            "ratings": _texts(part_class),
            "basis": basis,
        },
    }


def _plain(item: PlainField) -> Schema:
    about: Schema = {"type": "boolean"} if item.type is bool else {"type": "string"}
    if item.type is int:
        about = dict(_INTEGER)
    return about if item.required else {**about, "default": item.default}


def _texts(owner: type) -> Schema:
    return {
        "type": "object",
        "additionalProperties": False,
        "properties": {name: _text(description) for name, description in fields_of(owner).items()},
    }


def _text(description: Field) -> Schema:
    about: Schema = {"type": "string", "title": description.label}
    if description.choices:
        about["enum"] = list(description.choices)
    if words := _words(description):
        about["description"] = words
    if description.default is not None:
        about["default"] = text_of(description.default)
    return about


def _words(description: Field) -> str:
    sentences = [description.help] if description.help else []
    if description.unit_kind and (units := [show_unit(u) for u in description.unit_kind.units() if u]):
        sentences.append(f"Units: {', '.join(units)}.")
    limits = [(description.minimum, "at least"), (description.maximum, "at most")]
    given = [f"{word} {limit:g} {show_unit(description.unit)}".rstrip() for limit, word in limits if limit is not None]
    if description.above_zero:
        given.insert(0, "above zero")
    if given:
        sentences.append(f"Range: {', '.join(given)}.")
    return " ".join(sentences)


def _sheet() -> Schema:
    return {
        "type": "object",
        "required": ["id"],
        "additionalProperties": False,
        "properties": {
            "id": {"$ref": "#/$defs/id"},
            "title": {"type": "string"},
            "paper": {"enum": list(PAPER_MM)},
            "upright": {"type": "boolean"},
        },
    }


def _end() -> Schema:
    return {
        "description": '[part, terminal], or [bus, "bar", place along the bar in modules].',
        "type": "array",
        "prefixItems": [{"$ref": "#/$defs/id"}, {"type": "string"}, {"type": ["integer", "null"]}],
        "minItems": 2,
        "maxItems": 3,
    }


def _wire() -> Schema:
    return {
        "type": "object",
        "required": ["id", "a", "b"],
        "additionalProperties": False,
        "properties": {
            "id": {"$ref": "#/$defs/id"},
            "a": {"$ref": "#/$defs/end"},
            "b": {"$ref": "#/$defs/end"},
            "corners": {"type": "array", "items": {"$ref": "#/$defs/point"}},
        },
    }


def _arrangement() -> Schema:
    marks = {"type": "object", "propertyNames": {"$ref": "#/$defs/id"}, "additionalProperties": {"type": "boolean"}}
    return {
        "type": "object",
        "required": ["id", "name"],
        "additionalProperties": False,
        "properties": {
            "id": {"$ref": "#/$defs/id"},
            "name": {"type": "string"},
            "closed": marks,
            "in_service": marks,
        },
    }


if __name__ == "__main__":
    sys.stdout.reconfigure(encoding="utf-8", newline="\n")  # type: ignore[union-attr]
    sys.stdout.write(schema_text())
