"""The text of a plant file: readable, in a stable order, different only where the plant is."""

import difflib
import inspect
import json
from dataclasses import replace

import pytest
from hypothesis import HealthCheck, given, settings
from hypothesis import strategies as st

from onelinefault.errors import PlantFileError
from onelinefault.model.consumers import Bus
from onelinefault.model.fields import Basis, fields_of
from onelinefault.model.parts import PART_CLASSES
from onelinefault.model.plant import Document, End, Plant, Wire
from onelinefault.model.sources import Supply
from onelinefault.model.transforming import Transformer
from onelinefault.store.file_format import id_order, part_record, plain_fields, plant_text
from onelinefault.store.plant_file import plant_from_bytes


def small_plant() -> Plant:
    grid = Supply(id="p2", name="Grid", x=10, y=4).with_text("nominal_voltage", "33 kV")
    grid = grid.with_text("fault_level_max", "900 MVA", Basis.LETTER)
    bus = Bus(id="p10", name="Intake", x=4, y=12)
    return Plant(
        Document(name="Pump house"),
        {"p10": bus, "p2": grid},
        {"w11": Wire("w11", End("p2", "out"), End("p10", "bar", 6), ((10, 9),))},
        next_number=12,
    )


def test_the_text_reads_like_this() -> None:
    assert plant_text(small_plant()) == (
        "{\n"
        '  "format": "onelinefault plant",\n'
        '  "version": 1,\n'
        '  "document": {\n'
        '    "name": "Pump house"\n'
        "  },\n"
        '  "sheets": [\n'
        '    {"id": "s1", "title": "Sheet", "paper": "A4", "upright": false}\n'
        "  ],\n"
        '  "parts": [\n'
        "    {\n"
        '      "id": "p2", "kind": "supply", "name": "Grid", "sheet": "s1", "x": 10, "y": 4,\n'
        '      "ratings": {\n'
        '        "nominal_voltage": "33 kV",\n'
        '        "fault_level_max": "900 MVA"\n'
        "      },\n"
        '      "basis": {\n'
        '        "fault_level_max": "letter"\n'
        "      }\n"
        "    },\n"
        "    {\n"
        '      "id": "p10", "kind": "bus", "name": "Intake", "sheet": "s1", "x": 4, "y": 12\n'
        "    }\n"
        "  ],\n"
        '  "wires": [\n'
        '    {"id": "w11", "a": ["p2", "out"], "b": ["p10", "bar", 6], "corners": [[10, 9]]}\n'
        "  ],\n"
        '  "arrangements": [],\n'
        '  "tags": {},\n'
        '  "next_number": 12\n'
        "}\n"
    )


@settings(max_examples=40, deadline=None, suppress_health_check=[HealthCheck.too_slow, HealthCheck.data_too_large])
@given(data=st.data())
def test_a_plant_comes_back_as_it_was(plants: st.SearchStrategy[Plant], data: st.DataObject) -> None:
    plant = data.draw(plants)
    text = plant_text(plant)
    again, remarks = plant_from_bytes(text.encode("utf-8"))
    assert again == plant
    assert remarks.findings == []
    assert plant_text(again) == text


@settings(max_examples=15, deadline=None, suppress_health_check=[HealthCheck.too_slow, HealthCheck.data_too_large])
@given(data=st.data())
def test_the_order_of_placing_does_not_show(plants: st.SearchStrategy[Plant], data: st.DataObject) -> None:
    plant = data.draw(plants)
    backwards = replace(
        plant,
        parts=dict(reversed(plant.parts.items())),
        wires=dict(reversed(plant.wires.items())),
        tags=dict(reversed(plant.tags.items())),
    )
    assert plant_text(backwards) == plant_text(plant)


def changed_rows(before: Plant, after: Plant) -> int:
    rows = difflib.unified_diff(plant_text(before).splitlines(), plant_text(after).splitlines(), n=0, lineterm="")
    return sum(row.startswith("+") and not row.startswith("+++") for row in rows)


def test_a_small_change_is_a_small_difference() -> None:
    plant = small_plant()
    moved = replace(plant, parts={**plant.parts, "p2": replace(plant.parts["p2"], x=11)})
    typed = replace(plant, parts={**plant.parts, "p2": plant.parts["p2"].with_text("nominal_voltage", "30 kV")})
    wired = replace(plant, wires={**plant.wires, "w12": Wire("w12", End("p2", "out"), End("p10", "bar", 2))})
    assert changed_rows(plant, moved) == 1
    assert changed_rows(plant, typed) == 1
    assert changed_rows(plant, wired) == 2  # the row before gets its comma


@pytest.mark.parametrize("made", PART_CLASSES, ids=lambda c: c.kind)
def test_every_field_of_every_kind_has_its_place_in_the_file(made: type) -> None:
    # the constructor is the authority: nothing it takes may be left out
    stored = {item.name for item in plain_fields(made)} | set(fields_of(made)) | {"basis"}
    assert stored == set(inspect.signature(made).parameters)


def test_text_is_stored_as_typed() -> None:
    part = Transformer(id="p1").with_text("rated_power", "1600 kVA").with_text("impedance", "0,06 pu")
    part = part.with_text("neutral_low", "resistor 400 A 10 s").with_text("tap", "-2.5")
    ratings = part_record(part)["ratings"]
    assert ratings == {
        "rated_power": "1600 kVA",
        "impedance": "0,06 pu",
        "tap": "-2.5 %",
        "neutral_low": "resistor 400 A 10 s",
    }


def test_unreadable_texts_go_back_only_where_no_value_stands() -> None:
    part = Transformer(id="p1").with_text("tap", "2.5 %")
    aside = {("p1", "tap"): "two", ("p1", "impedance"): "six", ("p1", "colour"): "red", ("p2", "core"): "x"}
    assert part_record(part, aside)["ratings"] == {"impedance": "six", "tap": "2.5 %", "colour": "red"}


def test_ids_sort_by_number() -> None:
    assert sorted(["p10", "p9", "w2", "p2", "x"], key=id_order) == ["x", "p2", "w2", "p9", "p10"]


def test_a_broken_plant_is_not_written() -> None:
    bus = Bus(id="p1")
    with pytest.raises(PlantFileError, match="p2 is filed under another id"):
        plant_text(Plant(parts={"p2": bus}))
    with pytest.raises(PlantFileError, match="w1 is used more than once"):
        plant_text(Plant(parts={"w1": Bus(id="w1")}, wires={"w1": Wire("w1", End("w1", "bar"), End("w1", "bar"))}))


def test_the_file_is_strict_json() -> None:
    record = json.loads(plant_text(small_plant()))
    assert list(record) == [
        "format", "version", "document", "sheets", "parts", "wires", "arrangements", "tags", "next_number",
    ]  # fmt: skip
