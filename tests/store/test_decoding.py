"""Plain values to plants: what is refused, what is reported, what is kept aside."""

import copy
import json
from typing import Any

import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from onelinefault.errors import PlantFileError
from onelinefault.model.fields import Basis
from onelinefault.model.findings import Severity
from onelinefault.store.decoding import Remarks, plant_from
from onelinefault.store.file_format import plant_text

GOOD: dict[str, Any] = {
    "format": "onelinefault plant",
    "version": 1,
    "document": {"name": "Mill", "frequency": "60 Hz"},
    "sheets": [{"id": "s1", "title": "Main", "paper": "A3", "upright": False}],
    "parts": [
        {"id": "p1", "kind": "supply", "name": "Grid", "sheet": "s1", "x": 10, "y": 4,
         "ratings": {"nominal_voltage": "33 kV", "fault_level_max": "900 MVA"}, "basis": {"fault_level_max": "letter"}},
        {"id": "p2", "kind": "bus", "name": "Intake", "sheet": "s1", "x": 4, "y": 12, "length": 20},
    ],
    "wires": [{"id": "w3", "a": ["p1", "out"], "b": ["p2", "bar", 6]}],
    "arrangements": [{"id": "a4", "name": "Night", "closed": {}, "in_service": {"p1": False}}],
    "tags": {"p1": [3, -2]},
    "next_number": 5,
}  # fmt: skip


def with_entry(path: list[Any], value: Any) -> dict[str, Any]:
    """The good file with one entry changed."""
    record = copy.deepcopy(GOOD)
    spot: Any = record
    for step in path[:-1]:
        spot = spot[step]
    spot[path[-1]] = value
    return record


def test_the_good_file_opens_without_a_remark() -> None:
    remarks = Remarks()
    plant = plant_from(GOOD, remarks)
    assert remarks.findings == [] and remarks.aside == {}
    assert plant.parts["p1"].basis == {"fault_level_max": Basis.LETTER}
    assert plant.document.frequency_hz == 60
    assert plant.wires["w3"].b.at == 6 and plant.tags == {"p1": (3, -2)} and plant.next_number == 5


REFUSED: list[tuple[list[Any], Any, str]] = [
    (["sheets"], [], "at least one sheet"),
    (["sheets"], {}, "sheets: expected a list"),
    (["sheets", 0, "paper"], "B7", 'sheet s1, paper: "B7" is not known; use A4'),
    (["sheets", 0, "upright"], 1, "sheet s1, upright: expected true or false"),
    (["sheets", 0, "title"], None, "sheet s1, title: expected a text"),
    (["parts"], "none", "parts: expected a list"),
    (["parts", 0], 7, "part 1 of the list: expected an object"),
    (["parts", 0, "id"], 1, "part 1 of the list, id: expected a text"),
    (["parts", 0, "id"], "one", "is no id; an id is letters and a number"),
    (["parts", 0, "id"], "p" * 50 + "1", "is no id"),
    (["parts", 1, "id"], "p1", "the id p1 is used twice"),
    (["parts", 1, "id"], "w3", "the id w3 is used twice"),
    (["parts", 1, "id"], "s1", "the id s1 is used twice"),
    (["parts", 0, "kind"], "flux_gate", r"part Grid \(p1\): there is no kind of part called 'flux_gate'"),
    (["parts", 0, "kind"], ["bus"], r"part Grid \(p1\), kind: expected a text"),
    (["parts", 0, "name"], 5, r"\(p1\), name: expected a text"),
    (["parts", 0, "name"], "x" * 20_000, "too long"),
    (["parts", 0, "sheet"], "s9", r'supply Grid \(p1\), sheet: "s9" is no sheet of this plant'),
    (["parts", 0, "x"], float("nan"), r"part Grid \(p1\), x: expected a whole number, found NaN"),
    (["parts", 0, "x"], 1.5, "x: expected a whole number, found 1.5"),
    (["parts", 0, "x"], True, "x: expected a whole number, found true"),
    (["parts", 0, "y"], 100_001, "must lie between -100000 and 100000"),
    (["parts", 0, "y"], -(10**30), "must lie between"),
    (["parts", 0, "mirrored"], "yes", "mirrored: expected true or false"),
    (["parts", 1, "length"], -1, r"part Intake \(p2\), length: -1 is out of range"),
    (["parts", 0, "ratings"], ["33 kV"], r"part Grid \(p1\), ratings: expected an object"),
    (["parts", 0, "ratings", "nominal_voltage"], 33, "nominal_voltage: expected a text in quotes, found 33"),
    (["parts", 0, "name"], "half \ud800 letter", "holds a letter that no text may hold"),
    (["parts", 0, "basis"], "letter", "basis: expected an object"),
    (["wires"], {"w3": 1}, "wires: expected a list"),
    (["wires", 0, "a"], "p1", "wire w3, end a: expected a list"),
    (["wires", 0, "a"], ["p1"], r"wire w3, end a: expected \[part, terminal\]"),
    (["wires", 0, "b"], ["p2", "bar", 1, 2], "too many"),
    (["wires", 0, "b"], ["p2", "bar", "6"], "wire w3, end b, place: expected a whole number"),
    (["wires", 0, "corners"], [[1]], "wire w3, corners: expected two whole numbers"),
    (["wires", 0, "corners"], [[1, 10**9]], "out of range"),
    (["arrangements", 0, "name"], None, "name: expected a text"),
    (["arrangements", 0, "in_service"], {"p1": "off"}, "in_service, p1: expected true or false"),
    (["tags"], [1], "tags: expected an object"),
    (["tags", "p1"], [1, 2, 3], 'tag "p1"'),
    (["document"], [], "document: expected an object"),
    (["document", "name"], 4, "document, name: expected a text"),
    (["next_number"], 0, "next_number: 0 is out of range"),
    (["next_number"], "5", "next_number: expected a whole number"),
    (["parts"], [{}] * 50_001, "50001 entries are too many"),
]


@pytest.mark.parametrize(("path", "value", "message"), REFUSED)
def test_what_no_plant_can_hold_is_refused(path: list[Any], value: Any, message: str) -> None:
    with pytest.raises(PlantFileError, match=message) as caught:
        plant_from(with_entry(path, value), Remarks())
    assert "\n" not in str(caught.value)
    assert len(str(caught.value)) < 500


@pytest.mark.parametrize("key", ["sheets", "parts"])
def test_a_missing_section_is_named(key: str) -> None:
    record = {name: value for name, value in GOOD.items() if name != key}
    with pytest.raises(PlantFileError, match=f'"{key}" is missing'):
        plant_from(record, Remarks())


def test_a_missing_id_or_kind_is_named() -> None:
    for key, where in (("id", "part 1 of the list"), ("kind", "part Grid")):
        record = copy.deepcopy(GOOD)
        del record["parts"][0][key]
        with pytest.raises(PlantFileError, match=f'{where}.*"{key}" is missing'):
            plant_from(record, Remarks())


def test_an_unreadable_rating_is_reported_and_the_rest_opens() -> None:
    remarks = Remarks()
    plant = plant_from(with_entry(["parts", 0, "ratings", "fault_level_max"], "900 MV A"), remarks)
    assert plant.parts["p1"].given("fault_level_max") is None
    assert plant.parts["p1"].text("nominal_voltage") == "33 kV"
    (finding,) = remarks.findings
    assert (finding.severity, finding.code) == (Severity.ERROR, "unreadable-value")
    assert finding.parts == ("p1",) and finding.field == "fault_level_max"
    assert "Grid" in finding.message and "900 MV A" in finding.message and "MVA" in finding.message
    assert remarks.aside == {("p1", "fault_level_max"): "900 MV A"}
    # saved again, the text is still there
    assert json.loads(plant_text(plant, remarks.aside))["parts"][0]["ratings"]["fault_level_max"] == "900 MV A"


@pytest.mark.parametrize("text", ["0 MVA", "-5 kA", "9" * 600, "1,200 MVA", "1e999 MVA", "nan", "∞ kA"])
def test_impossible_ratings_are_reported(text: str) -> None:
    remarks = Remarks()
    plant_from(with_entry(["parts", 0, "ratings", "fault_level_max"], text), remarks)
    assert [f.code for f in remarks.findings] == ["unreadable-value"]
    assert "\n" not in remarks.findings[0].message


def test_an_unreadable_setting_of_the_document_is_kept_too() -> None:
    remarks = Remarks()
    plant = plant_from(with_entry(["document", "frequency"], "fifty"), remarks)
    assert plant.document.frequency is None
    assert json.loads(plant_text(plant, remarks.aside))["document"]["frequency"] == "fifty"


def test_an_unknown_rating_and_an_unknown_entry_are_reported() -> None:
    remarks = Remarks()
    plant = plant_from(with_entry(["parts", 0, "ratings", "colour"], "red"), remarks)
    plant_from(with_entry(["parts", 0, "colour"], "red"), remarks)
    plant_from(with_entry(["secret"], 1), remarks)
    assert [f.code for f in remarks.findings] == ["unknown-rating", "unknown-entry", "unknown-entry"]
    assert json.loads(plant_text(plant, remarks.aside))["parts"][0]["ratings"]["colour"] == "red"


def test_an_unknown_basis_counts_as_guessed() -> None:
    remarks = Remarks()
    plant = plant_from(with_entry(["parts", 0, "basis", "fault_level_max"], "hearsay"), remarks)
    assert plant.parts["p1"].basis_of("fault_level_max") is Basis.GUESSED
    assert [f.code for f in remarks.findings] == ["unknown-basis"]


@pytest.mark.parametrize("end", [["p9", "out"], ["p1", "nose"], ["w3", "out"]])
def test_a_wire_to_nowhere_is_left_out_and_named(end: list[str]) -> None:
    remarks = Remarks()
    plant = plant_from(with_entry(["wires", 0, "a"], end), remarks)
    assert plant.wires == {}
    (finding,) = remarks.findings
    assert finding.severity is Severity.ERROR and finding.code == "wire-to-nowhere"
    assert "w3" in finding.message and finding.remedy and "p2" in finding.parts


def test_the_next_number_is_found_where_the_file_does_not_say_it() -> None:
    record = {key: value for key, value in GOOD.items() if key != "next_number"}
    assert plant_from(record, Remarks()).next_number == 5


JSON_VALUES = st.recursive(
    st.none() | st.booleans() | st.integers() | st.floats() | st.text(max_size=8),
    lambda inner: st.lists(inner, max_size=3) | st.dictionaries(st.text(max_size=5), inner, max_size=3),
    max_leaves=6,
)
SPOTS: list[list[Any]] = [
    ["document"], ["document", "base_power"], ["sheets"], ["sheets", 0], ["parts"], ["parts", 0], ["parts", 0, "id"],
    ["parts", 0, "kind"], ["parts", 0, "turn"], ["parts", 0, "ratings"], ["parts", 0, "ratings", "x_over_r"],
    ["parts", 0, "basis"], ["parts", 1, "length"], ["wires"], ["wires", 0], ["wires", 0, "a"], ["wires", 0, "b", 2],
    ["arrangements", 0], ["arrangements", 0, "closed"], ["tags"], ["tags", "p1"], ["next_number"],
]  # fmt: skip


@settings(max_examples=150, deadline=None)
@given(spot=st.sampled_from(SPOTS), value=JSON_VALUES)
def test_anything_anywhere_opens_or_is_refused_in_one_line(spot: list[Any], value: Any) -> None:
    remarks = Remarks()
    try:
        plant = plant_from(with_entry(spot, value), remarks)
    except PlantFileError as error:
        assert len(str(error).splitlines()) == 1
    else:
        again = json.loads(plant_text(plant, remarks.aside))
        assert plant_from(again, Remarks()) == plant


FIELDS_TO_TYPE_AT = [
    ("supply", "fault_level_max"), ("transformer", "vector_group"), ("transformer", "neutral_high"),
    ("cable", "size"), ("overhead_line", "geometry"), ("induction_motor", "poles"), ("breaker", "closed"),
    ("transformer", "core"), ("note", "note"),
]  # fmt: skip


@settings(max_examples=200, deadline=None)
@given(
    where=st.sampled_from(FIELDS_TO_TYPE_AT),
    text=st.text(max_size=20) | st.text("0123456789²½٣.,+-−eE x/AWGckmMVyndDaz;", max_size=12),
)
def test_no_text_breaks_a_field(where: tuple[str, str], text: str) -> None:
    kind, name = where
    record = {**GOOD, "parts": [{"id": "p1", "kind": kind, "ratings": {name: text}}], "wires": []}
    remarks = Remarks()
    try:
        plant = plant_from(record, remarks)
    except PlantFileError as error:
        assert "letter that no text may hold" in str(error)
        return
    # read, kept aside, or empty: nothing else happens to a text; and it comes back
    taken = plant.parts["p1"].given(name) is not None
    assert taken + len(remarks.aside) + (not text.strip()) == 1
    again = Remarks()
    assert plant_from(json.loads(plant_text(plant, remarks.aside)), again) == plant
    assert again.aside == remarks.aside
