"""What the inspector shows, as values."""

from dataclasses import replace

import pytest

from onelinefault.desktop.inspector_state import (
    DOCUMENT,
    SHEET,
    RowState,
    common_fields,
    document_rows,
    heading,
    part_rows,
    row_edit,
    sheet_rows,
    voltages,
)
from onelinefault.errors import OneLineFaultError
from onelinefault.model.edits import apply
from onelinefault.model.fields import Basis, fields_of
from onelinefault.model.part import Part
from onelinefault.model.parts import PART_CLASSES
from onelinefault.model.plant import Plant
from onelinefault.model.switching import Breaker
from onelinefault.model.transforming import Transformer
from tests.drawing.plants import pump_house


def rows_of(*parts: Part) -> dict[str, RowState]:
    return {row.key: row for row in part_rows(parts)}


@pytest.mark.parametrize("part_class", PART_CLASSES, ids=lambda c: c.kind)
def test_every_kind_shows_all_its_described_fields(part_class: type[Part]) -> None:
    part = part_class(id="p1", name="X")
    rows = rows_of(part)
    assert set(fields_of(part_class)) <= set(rows)
    for name, field in fields_of(part_class).items():
        assert rows[name].label == field.label
        assert rows[name].missing == (field.required and field.default is None)


def test_a_row_shows_the_text_as_typed_and_how_it_is_known() -> None:
    part = Transformer(id="p1").with_text("rated_power", "20 MVA").with_text("impedance", "10 %", Basis.LETTER)
    rows = rows_of(part)
    assert (rows["rated_power"].text, rows["rated_power"].basis) == ("20 MVA", Basis.NAMEPLATE)
    assert (rows["impedance"].text, rows["impedance"].basis) == ("10 %", Basis.LETTER)
    assert rows["impedance"].typed


def test_what_counts_instead_stands_in_grey_with_the_typical_mark() -> None:
    rows = rows_of(Transformer(id="p1"))
    assert (rows["vector_group"].text, rows["vector_group"].placeholder) == ("", "Dyn11")
    assert rows["vector_group"].basis is Basis.TYPICAL
    assert not rows["vector_group"].typed
    assert rows["rated_power"].placeholder == "required"
    assert rows["rated_power"].basis is None


def test_completed_values_are_shown_where_nothing_is_typed() -> None:
    part = Transformer(id="p1")
    full = part.with_text("x_over_r", "22", Basis.TYPICAL)
    row = {r.key: r for r in part_rows([part], [full])}["x_over_r"]
    assert (row.text, row.placeholder, row.basis) == ("", "22", Basis.TYPICAL)


def test_another_form_of_the_same_rating_is_named() -> None:
    rows = rows_of(Transformer(id="p1").with_text("load_loss", "92 kW"))
    assert rows["x_over_r"].placeholder == "from Load loss"
    assert rows["x_over_r"].basis is None
    assert "Load loss" in rows["x_over_r"].help


def test_several_parts_share_rows_and_differ_as_mixed() -> None:
    a = Transformer(id="p1", name="T1").with_text("rated_power", "20 MVA").with_text("tap", "-2.5 %")
    b = Transformer(id="p2", name="T2", in_service=False).with_text("rated_power", "20 MVA")
    rows = rows_of(a, b)
    assert "name" not in rows
    assert (rows["rated_power"].text, rows["rated_power"].mixed) == ("20 MVA", False)
    assert (rows["tap"].text, rows["tap"].placeholder, rows["tap"].mixed) == ("", "mixed", True)
    assert rows["in_service"].mixed


def test_different_kinds_share_only_what_means_the_same() -> None:
    shared = common_fields([Transformer, Breaker])
    assert "rated_power" not in shared
    for name, field in shared.items():
        assert fields_of(Transformer)[name].label == fields_of(Breaker)[name].label == field.label
    assert set(common_fields([Breaker])) == set(fields_of(Breaker))


def test_headings() -> None:
    t1 = Transformer(id="p1", name="T1").with_text("high_voltage", "33 kV").with_text("low_voltage", "11.5 kV")
    assert heading([t1]) == ("Transformer T1", "33 / 11.5 kV")
    assert voltages(t1.with_text("low_voltage", "420 V")) == "33 kV / 420 V"
    assert heading([t1, replace(t1, id="p2", name="T2")]) == ("2 transformers", "T1, T2")
    assert heading([t1, Breaker(id="p3", name="Q1")])[0] == "2 parts"
    plant, ids = pump_house()
    assert heading([plant.parts[ids["board"]]]) == ("Bus Board A", "11 kV")


def edited(plant: Plant, ids: tuple[str, ...], row: RowState, text: str) -> Plant:
    return apply(plant, row_edit(plant, ids, plant.sheets[0].id, row, text))


def test_rows_become_edits() -> None:
    plant, ids = pump_house()
    t1, board = ids["t1"], ids["board"]
    rows = rows_of(plant.parts[t1])
    assert edited(plant, (t1,), rows["name"], "T9").parts[t1].name == "T9"
    assert edited(plant, (t1,), rows["in_service"], "no").parts[t1].in_service is False
    assert edited(plant, (t1,), rows["impedance"], "0,12 pu").parts[t1].text("impedance") == "0,12 pu"
    longer = edited(plant, (board,), rows_of(plant.parts[board])["length"], "50")
    assert longer.parts[board].length == 50  # type: ignore[attr-defined]


def test_document_and_sheet_rows_become_edits() -> None:
    plant, _ = pump_house()
    document = {row.key: row for row in document_rows(plant)}
    assert document["frequency"].placeholder == "50 Hz"
    assert all(row.scope == DOCUMENT for row in document.values())
    assert edited(plant, (), document["frequency"], "60 Hz").document.frequency_hz == 60
    sheet = {row.key: row for row in sheet_rows(plant.sheets[0])}
    assert all(row.scope == SHEET for row in sheet.values())
    assert edited(plant, (), sheet["paper"], "ansi d").sheets[0].paper == "ANSI D"
    assert edited(plant, (), sheet["upright"], "yes").sheets[0].upright
    assert edited(plant, (), sheet["title"], "Pumps").sheets[0].title == "Pumps"


@pytest.mark.parametrize(
    ("name", "key", "text"),
    [
        ("t1", "impedance", "ten"),
        ("t1", "impedance", "10 kV"),
        ("t1", "impedance", "400 %"),
        ("board", "length", "long"),
    ],
)
def test_what_cannot_be_taken_is_refused_in_words(name: str, key: str, text: str) -> None:
    plant, ids = pump_house()
    row = rows_of(plant.parts[ids[name]])[key]
    with pytest.raises(OneLineFaultError) as refused:
        row_edit(plant, (ids[name],), "s1", row, text)
    assert row.label in str(refused.value)


def test_typing_anew_keeps_the_mark_unless_it_was_typical() -> None:
    plant, ids = pump_house()
    t1 = ids["t1"]
    row = rows_of(plant.parts[t1])["impedance"]
    for before, after in (
        (Basis.LETTER, Basis.LETTER),
        (Basis.GUESSED, Basis.GUESSED),
        (Basis.TYPICAL, Basis.NAMEPLATE),
    ):
        marked = plant.parts[t1].with_text("impedance", "9 %", before)
        with_mark = replace(plant, parts={**plant.parts, t1: marked})
        assert edited(with_mark, (t1,), row, "11 %").parts[t1].basis_of("impedance") is after
