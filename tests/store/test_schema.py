"""The published schema is the one that follows from the model, and the files we write and ship keep to it."""

import json
from pathlib import Path

import jsonschema
import pytest
from hypothesis import HealthCheck, given, settings
from hypothesis import strategies as st

from onelinefault.model.plant import Plant
from onelinefault.store.file_format import plant_text
from onelinefault.store.schema import plant_schema, schema_text

ROOT = Path(__file__).parents[2]
FILES = sorted([*ROOT.glob("demo_projects/**/*.plant.json"), *ROOT.glob("tests/generations/*.plant.json")])
VALIDATOR = jsonschema.Draft202012Validator(plant_schema())


def test_the_published_schema_is_current() -> None:
    published = (ROOT / "resources" / "schema" / "plant.schema.json").read_text(encoding="utf-8")
    assert published == schema_text(), "python -m onelinefault.store.schema > resources/schema/plant.schema.json"


def test_the_schema_is_a_schema() -> None:
    jsonschema.Draft202012Validator.check_schema(plant_schema())


@pytest.mark.parametrize("path", FILES, ids=lambda p: p.name)
def test_the_files_in_the_repository_keep_to_it(path: Path) -> None:
    VALIDATOR.validate(json.loads(path.read_text(encoding="utf-8")))


@settings(max_examples=10, deadline=None, suppress_health_check=[HealthCheck.too_slow, HealthCheck.data_too_large])
@given(data=st.data())
def test_what_is_written_keeps_to_it(plants: st.SearchStrategy[Plant], data: st.DataObject) -> None:
    VALIDATOR.validate(json.loads(plant_text(data.draw(plants))))


@pytest.mark.parametrize(
    "wrong",
    [
        {"parts": [{"id": "p1", "kind": "flux_gate"}]},
        {"parts": [{"id": "p1", "kind": "bus", "x": 1.5}]},
        {"parts": [{"id": "p1", "kind": "bus", "colour": "red"}]},
        {"parts": [{"id": "p1", "kind": "bus", "ratings": {"nominal_voltage": 33}}]},
        {"parts": [{"id": "p1", "kind": "bus", "ratings": {"impedance": "6 %"}}]},
        {"parts": [{"id": "p1", "kind": "bus", "basis": {"nominal_voltage": "hearsay"}}]},
        {"parts": [{"id": "1", "kind": "bus"}]},
        {"wires": [{"id": "w1", "a": ["p1"], "b": ["p2", "bar"]}]},
        {"sheets": []},
        {"version": 2},
    ],
)
def test_it_refuses_what_the_reader_refuses(wrong: dict[str, object]) -> None:
    good = {"format": "onelinefault plant", "version": 1, "sheets": [{"id": "s1"}], "parts": []}
    assert VALIDATOR.is_valid(good)
    assert not VALIDATOR.is_valid({**good, **wrong})
