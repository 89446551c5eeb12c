"""The inspector on a plant: what is typed becomes a step, what cannot be read is told, nothing is lost."""

from collections.abc import Iterator
from dataclasses import dataclass

import pytest
from PySide6.QtCore import Qt
from PySide6.QtTest import QTest
from pytestqt.qtbot import QtBot

from onelinefault.desktop.inspector import Inspector
from onelinefault.desktop.inspector_rows import EntryLine, FlagRow, LineRow
from onelinefault.desktop.session import Session
from onelinefault.drawing.painter import load_fonts
from onelinefault.model.editing import place
from onelinefault.model.fields import Basis
from tests.desktop.windows import pump_session


@dataclass
class Bench:
    session: Session
    ids: dict[str, str]
    inspector: Inspector
    titles: list[tuple[str, str]]

    def select(self, *names: str) -> None:
        self.session.select(frozenset(self.ids[name] for name in names))
        self.inspector.refresh()

    def line(self, key: str) -> LineRow:
        row = self.inspector.row(key)
        assert isinstance(row, LineRow)
        return row

    def type(self, key: str, text: str, *, enter: bool = True) -> LineRow:
        row = self.line(key)
        row.line.selectAll()
        QTest.keyClicks(row.line, text)
        if enter:
            QTest.keyClick(row.line, Qt.Key.Key_Return)
        return row

    def text(self, name: str, field: str) -> str:
        return self.session.plant.parts[self.ids[name]].text(field)


@pytest.fixture
def bench(qtbot: QtBot) -> Iterator[Bench]:
    load_fonts()
    session, ids = pump_session()
    inspector = Inspector(session)
    qtbot.addWidget(inspector)
    titles: list[tuple[str, str]] = []
    inspector.titled.connect(lambda heading, aside: titles.append((heading, aside)))
    inspector.resize(330, 700)
    inspector.show()
    inspector.refresh()
    qtbot.waitExposed(inspector)
    yield Bench(session, ids, inspector, titles)


def test_nothing_selected_shows_the_title_block(bench: Bench) -> None:
    assert bench.titles[-1][0] == "Plant"
    bench.type("name", "Brackwater pumps")
    assert bench.session.plant.document.name == "Brackwater pumps"
    bench.type("base_power", "20 MVA")
    assert bench.session.plant.document.base_mva == 20


def test_a_typed_rating_is_one_step_that_undoes(bench: Bench) -> None:
    bench.select("t1")
    assert bench.titles[-1] == ("Transformer T1", "33 / 11.5 kV")
    before = bench.session.plant
    row = bench.type("impedance", "12,5")
    assert bench.text("t1", "impedance") == "12,5 %"
    assert "T1" in bench.session.history.sentences[-1]
    bench.inspector.refresh()
    assert row.line.text() == "12,5 %"
    bench.session.undo()
    bench.inspector.refresh()
    assert bench.session.plant is before
    assert row.line.text() == "10 %"


def test_what_cannot_be_read_keeps_the_old_value_and_says_why(bench: Bench) -> None:
    bench.select("t1")
    before = bench.session.plant
    row = bench.type("rated_power", "20 mva")
    assert bench.session.plant is before
    assert "Rated power" in row.trouble.text() and "MVA" in row.trouble.text()
    assert row.line.text() == "20 mva"  # it can be corrected while the cursor is there
    row.take_pending()
    assert row.line.text() == "20 MVA"
    assert "Kept: 20 MVA" in row.trouble.text()
    bench.type("rated_power", "25 MVA")
    assert row.trouble.text() == ""
    assert bench.text("t1", "rated_power") == "25 MVA"


def test_clearing_a_required_rating_marks_it(bench: Bench) -> None:
    bench.select("t1")
    row = bench.line("rated_power")
    row.line.clear()
    QTest.keyClick(row.line, Qt.Key.Key_Return)
    bench.inspector.refresh()
    assert bench.session.plant.parts[bench.ids["t1"]].given("rated_power") is None
    assert row.line.placeholderText() == "required"
    assert row.editor.accessibleName().endswith("required")


def test_one_entry_changes_all_selected_parts_in_one_step(bench: Bench) -> None:
    edit = place(bench.session.plant, "transformer", "s1", 70, 22, name="T2", rated_power="10 MVA")
    bench.session.apply(edit)
    bench.ids["t2"] = next(iter(edit.parts))
    bench.select("t1", "t2")
    assert bench.titles[-1] == ("2 transformers", "T1, T2")
    assert bench.line("rated_power").line.placeholderText() == "mixed"
    steps = len(bench.session.history.done)
    bench.type("rated_power", "16 MVA")
    assert bench.text("t1", "rated_power") == bench.text("t2", "rated_power") == "16 MVA"
    assert len(bench.session.history.done) == steps + 1


def test_passing_through_a_mixed_row_changes_nothing(bench: Bench) -> None:
    edit = place(bench.session.plant, "transformer", "s1", 70, 22, rated_power="10 MVA")
    bench.session.apply(edit)
    bench.ids["t2"] = next(iter(edit.parts))
    bench.select("t1", "t2")
    before = bench.session.plant
    row = bench.line("rated_power")
    QTest.keyClick(row.line, Qt.Key.Key_Return)
    row.line.left.emit(row.line.text())
    assert bench.session.plant is before


def test_what_was_typed_goes_to_the_part_it_was_typed_for(bench: Bench) -> None:
    bench.select("t1")
    bench.type("impedance", "11 %", enter=False)
    bench.session.select(frozenset({bench.ids["g1"]}))
    assert bench.text("t1", "impedance") == "11 %"
    bench.inspector.refresh()
    assert bench.titles[-1][0] == "Generator G1"


def test_positions_and_service_are_ticks(bench: Bench) -> None:
    bench.select("q1")
    for key, part_value in (("closed", "closed"), ("in_service", "in_service")):
        row = bench.inspector.row(key)
        assert isinstance(row, FlagRow) and row.tick.isChecked()
        row.tick.click()
        breaker = bench.session.plant.parts[bench.ids["q1"]]
        assert getattr(breaker, part_value) is False


def test_basis_is_a_step_of_its_own(bench: Bench) -> None:
    bench.select("t1")
    row = bench.line("impedance")
    row.marked.emit(row, "guessed")
    assert bench.session.plant.parts[bench.ids["t1"]].basis_of("impedance") is Basis.GUESSED
    bench.inspector.refresh()
    assert row.dot.basis is Basis.GUESSED
    bench.session.undo()
    assert bench.session.plant.parts[bench.ids["t1"]].basis_of("impedance") is Basis.NAMEPLATE


def test_names_and_bar_lengths(bench: Bench) -> None:
    bench.select("board")
    bench.type("name", "Board 1")
    bench.type("length", "44")
    assert bench.session.plant.parts[bench.ids["board"]].name == "Board 1"
    row = bench.type("length", "4x")
    assert "whole number" in row.trouble.text()
    assert bench.session.plant.parts[bench.ids["board"]].length == 44  # type: ignore[attr-defined]


def test_typical_values_are_shown_and_filled_in_as_one_step(bench: Bench) -> None:
    edit = place(
        bench.session.plant, "transformer", "s1", 70, 22,
        name="T2", rated_power="1.6 MVA", high_voltage="11 kV", low_voltage="420 V",
    )  # fmt: skip
    bench.session.apply(edit)
    bench.ids["t2"] = next(iter(edit.parts))
    bench.select("t2")
    shown = bench.line("impedance").line.placeholderText()
    assert shown.endswith("%")
    assert bench.inspector.fill.isVisible()
    steps = len(bench.session.history.done)
    bench.inspector.fill.click()
    assert bench.text("t2", "impedance") == shown
    assert bench.session.plant.parts[bench.ids["t2"]].basis_of("impedance") is Basis.TYPICAL
    assert len(bench.session.history.done) == steps + 1
    bench.inspector.refresh()
    assert not bench.inspector.fill.isVisible()


def test_a_wire_is_told_by_its_ends(bench: Bench) -> None:
    bench.session.select(frozenset({bench.ids["to_pumps"]}))
    bench.inspector.refresh()
    assert bench.titles[-1] == ("Wire", "W1 – Pumps")
    assert bench.inspector.page is None


def test_the_keyboard_goes_to_the_first_thing_missing(bench: Bench, monkeypatch: pytest.MonkeyPatch) -> None:
    taken: list[str] = []
    monkeypatch.setattr(EntryLine, "setFocus", lambda self, reason: taken.append(self.accessibleName()))
    bench.select("t1")
    assert bench.inspector.take_keyboard()
    row = bench.line("low_voltage")
    row.line.clear()
    QTest.keyClick(row.line, Qt.Key.Key_Return)
    assert bench.inspector.take_keyboard()
    assert taken == ["Rated power", "Rated voltage, low, required"]
    bench.session.select(frozenset({bench.ids["to_pumps"]}))
    assert not bench.inspector.take_keyboard()


def test_names_that_look_like_markup_stay_plain_words(bench: Bench) -> None:
    bench.select("t1")
    row = bench.type("rated_power", "<b>20</b>")
    assert "<b>20</b>" in row.trouble.text()
    assert row.trouble.textFormat() == Qt.TextFormat.PlainText


def test_switching_back_and_forth_uses_the_same_rows(bench: Bench) -> None:
    bench.select("t1")
    first = bench.line("impedance")
    bench.select("g1")
    bench.select("t1")
    assert bench.line("impedance") is first


def test_the_selection_is_followed_without_being_asked(bench: Bench, qtbot: QtBot) -> None:
    bench.session.select(frozenset({bench.ids["m1"]}))
    qtbot.waitUntil(lambda: bench.titles[-1][0] == "Motor Pumps", timeout=2000)
