"""The crash journal: what was done is done again, whatever happened to the last line."""

import os
from dataclasses import replace
from pathlib import Path

import pytest
from hypothesis import HealthCheck, given, settings
from hypothesis import strategies as st

from onelinefault.errors import PlantFileError
from onelinefault.model.consumers import Bus
from onelinefault.model.edits import Edit, apply, inverse
from onelinefault.model.plant import Arrangement, Document, End, Plant, Sheet, Wire
from onelinefault.store.journal import Journal, edit_from, edit_record, journal_path, recover

EDITS = (
    Edit("Place bus A", parts={"p1": Bus(id="p1", name="Süd ″")}, next_number=2),
    Edit("Place bus B", parts={"p2": Bus(id="p2").with_text("nominal_voltage", "11 kV")}, next_number=3),
    Edit("Wire", wires={"w3": Wire("w3", End("p1", "bar", 1), End("p2", "bar", 2), ((4, 5),))}, next_number=4),
    Edit("Name the plant", document=Document(name="Mill")),
    Edit("Drag a tag", tags={"fault": (3, 4), "p1": None}),
    Edit("Add a sheet", sheets=(Sheet("s1"), Sheet("s4", "Two", "A3", True))),
    Edit("Name an arrangement", arrangements=(Arrangement("a5", "Night", {}, {"p1": False}),)),
    Edit("Delete", parts={"p2": None}, wires={"w3": None}),
)


@pytest.fixture
def path(tmp_path: Path) -> Path:
    return tmp_path / "state" / "mill.journal"


def written(path: Path, edits: tuple[Edit, ...] = EDITS) -> Path:
    journal = Journal(path, Path("mill.plant.json"), "abc")
    for edit in edits:
        journal.append(edit)
    journal.sync()
    journal.close()
    return path


def test_every_kind_of_edit_comes_back(path: Path) -> None:
    found = recover(written(path))
    assert found.edits == EDITS and not found.damaged
    assert found.fingerprint == "abc" and found.file == Path(os.path.realpath("mill.plant.json"))
    plant = Plant()
    for edit in EDITS:
        plant = apply(plant, edit)
    assert found.onto(Plant()) == (plant, len(EDITS))


@settings(max_examples=15, deadline=None, suppress_health_check=[HealthCheck.too_slow, HealthCheck.data_too_large])
@given(data=st.data())
def test_any_edit_and_its_inverse_come_back(plants: st.SearchStrategy[Plant], data: st.DataObject) -> None:
    plant = data.draw(plants)
    edit = Edit(
        data.draw(st.text(st.characters(exclude_categories=["Cs"], exclude_characters="\0"), max_size=20)),
        plant.parts, plant.wires, plant.tags, plant.document, plant.sheets, plant.arrangements, plant.next_number,
    )  # fmt: skip
    assert edit_from(edit_record(edit)) == edit
    assert apply(Plant(), edit_from(edit_record(edit))) == plant
    back = inverse(Plant(), edit)
    assert edit_from(edit_record(back)) == back


def test_a_torn_last_line_costs_only_that_edit(path: Path) -> None:
    whole = written(path).read_bytes()
    last = whole.rstrip(b"\n").rindex(b"\n") + 1
    for length in range(last, len(whole)):
        path.write_bytes(whole[:length])
        found = recover(path)
        assert found.edits == EDITS[:-1]
        assert found.damaged == (length > last)


def test_nothing_after_a_damaged_line_is_trusted(path: Path) -> None:
    lines = written(path).read_bytes().split(b"\n")
    for broken in (b"\0\0\0", b"[]", b"{}", lines[3][:-3], b'{"sentence": "x", "parts": {"p1": 5}}', b"[" * 9999):
        path.write_bytes(b"\n".join([*lines[:3], broken, *lines[4:]]))
        found = recover(path)
        assert found.edits == EDITS[:2] and found.damaged


def test_an_edit_that_the_plant_refuses_ends_the_recovery(path: Path) -> None:
    plant, done = recover(written(path, (EDITS[0], EDITS[2], EDITS[3]))).onto(Plant())
    assert done == 1 and set(plant.parts) == {"p1"}


@pytest.mark.parametrize("content", [b"", b"\n", b"words\n", b"[]\n", b'{"format": "other"}\n', b"\xff\xff\n"])
def test_what_is_no_journal_is_refused(tmp_path: Path, content: bytes) -> None:
    path = tmp_path / "x.journal"
    path.write_bytes(content)
    with pytest.raises(PlantFileError, match=r"x\.journal is no recovery journal"):
        recover(path)


def test_a_missing_journal_is_refused(tmp_path: Path) -> None:
    with pytest.raises(PlantFileError, match="cannot be read"):
        recover(tmp_path / "none.journal")


def test_the_journal_begins_anew_after_a_save(path: Path) -> None:
    journal = Journal(path)
    assert not path.exists()  # nothing done, nothing to recover
    journal.append(EDITS[0])
    journal.restart(Path("other.plant.json"), "def")
    assert not path.exists()
    journal.append(EDITS[1])
    found = recover(path)
    assert found.edits == EDITS[1:2] and found.fingerprint == "def"
    journal.discard()
    assert not path.exists()


def test_a_plant_never_saved_has_a_journal_without_a_file(path: Path) -> None:
    journal = Journal(path)
    journal.append(EDITS[0])
    journal.close()
    assert recover(path).file is None


def test_a_full_disk_is_said(path: Path, monkeypatch: pytest.MonkeyPatch) -> None:
    path.parent.write_text("a file stands where the folder should be", encoding="utf-8")
    with pytest.raises(PlantFileError, match="save the plant now"):
        Journal(path).append(EDITS[0])


def test_journals_of_two_plants_do_not_meet(tmp_path: Path) -> None:
    one, two = tmp_path / "a" / "mill.plant.json", tmp_path / "b" / "mill.plant.json"
    names = {journal_path(tmp_path, p, w) for p, w in ((one, ""), (two, ""), (None, "x"), (None, "y"))}
    assert len(names) == 4
    assert journal_path(tmp_path, one).name.startswith("mill-")


def test_a_value_that_cannot_be_read_makes_the_line_a_damaged_one() -> None:
    record = edit_record(Edit("Type", parts={"p1": replace(EDITS[1].parts["p2"], id="p1")}))  # type: ignore[type-var]
    record["parts"]["p1"]["ratings"]["nominal_voltage"] = "11 kilo"
    with pytest.raises(PlantFileError, match="11 kilo"):
        edit_from(record)
