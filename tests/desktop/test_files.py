"""New, open, save, close: nothing is lost without a question, and no question stops the program."""

import os
import shutil
from collections.abc import Iterator
from pathlib import Path

import pytest
from PySide6.QtWidgets import QFileDialog, QMessageBox
from pytestqt.qtbot import QtBot

from onelinefault.desktop.main_window import MainWindow
from onelinefault.model.editing import move, rename
from onelinefault.store.locks import lock_path
from onelinefault.store.plant_file import read_plant, write_plant
from tests.desktop.windows import open_window
from tests.drawing.plants import pump_house

BUTTON = QMessageBox.StandardButton


@pytest.fixture
def window(qtbot: QtBot, tmp_path: Path) -> Iterator[MainWindow]:
    with open_window(qtbot, tmp_path) as window:
        yield window


@pytest.fixture
def file(tmp_path: Path) -> Path:
    path = tmp_path / "pumps.plant.json"
    write_plant(pump_house()[0], path)
    return path


def edit(window: MainWindow) -> None:
    plant = window.session.plant
    window.session.apply(move(plant, [next(iter(plant.parts))], 1, 0))


def box(window: MainWindow) -> QMessageBox:
    assert isinstance(window.files.dialog, QMessageBox)
    return window.files.dialog


def press(window: MainWindow, button: QMessageBox.StandardButton) -> None:
    box(window).button(button).click()


def test_open_shows_the_file_and_remembers_it(window: MainWindow, file: Path) -> None:
    window.files.open_path(file)
    assert window.session.plant == pump_house()[0]
    assert window.session.path == file and not window.session.edited
    assert window.settings.recent == [file]
    assert "pumps.plant.json" in window.windowTitle()


def test_save_writes_and_the_star_goes(window: MainWindow, file: Path) -> None:
    window.files.open_path(file)
    edit(window)
    assert window.isWindowModified()
    window.files.save()
    assert read_plant(file).plant == window.session.plant
    assert not window.isWindowModified()


def test_what_is_typed_and_not_yet_entered_is_saved_too(window: MainWindow, file: Path) -> None:
    window.files.open_path(file)
    t1 = window.session.plant.named("T1")[0]
    window.session.select(frozenset({t1.id}))
    window.panels.inspector.refresh()
    line = window.panels.inspector.row("impedance").line  # type: ignore[attr-defined]
    line.setText("11 %")
    line.setModified(True)
    window.files.save()
    assert read_plant(file).plant.parts[t1.id].text("impedance") == "11 %"


def test_a_new_plant_asks_for_a_name_and_gets_the_right_ending(window: MainWindow, tmp_path: Path) -> None:
    window.files.new_plant()
    edit_name = window.session.plant
    assert edit_name.parts == {}
    window.files.save()
    dialog = window.files.dialog
    assert isinstance(dialog, QFileDialog)
    dialog.fileSelected.emit(str(tmp_path / "mill"))
    dialog.close()
    assert (tmp_path / "mill.plant.json").exists()
    assert window.session.path == tmp_path / "mill.plant.json"


@pytest.mark.parametrize("answer", [BUTTON.Save, BUTTON.Discard, BUTTON.Cancel])
def test_unsaved_work_is_asked_for_before_another_plant_comes(
    window: MainWindow, file: Path, tmp_path: Path, answer: BUTTON
) -> None:
    other = tmp_path / "other.plant.json"
    write_plant(read_plant(file).plant, other)
    window.files.open_path(file)
    edit(window)
    edited = window.session.plant
    window.files.open_path(other)
    assert window.session.path == file  # nothing happens before the answer
    press(window, answer)
    assert window.session.path == (file if answer == BUTTON.Cancel else other)
    assert (read_plant(file).plant == edited) == (answer == BUTTON.Save)


def test_closing_asks_and_waits_for_the_answer(window: MainWindow, file: Path) -> None:
    window.files.open_path(file)
    edit(window)
    window.close()
    assert window.isVisible()
    press(window, BUTTON.Cancel)
    assert window.isVisible()
    window.close()
    press(window, BUTTON.Discard)
    assert not window.isVisible()
    assert not lock_path(file).exists()


def test_a_failed_save_closes_nothing(window: MainWindow, file: Path) -> None:
    window.files.open_path(file)
    edit(window)
    file.unlink()
    file.mkdir()  # nothing can be written there
    window.close()
    press(window, BUTTON.Save)
    assert window.isVisible() and window.session.edited
    assert "cannot be written" in box(window).text()
    press(window, BUTTON.Ok)
    file.rmdir()
    window.files.save()  # saved now, but nobody asks to close any more
    assert window.isVisible()


def test_a_file_changed_by_somebody_else_is_replaced_only_on_purpose(window: MainWindow, file: Path) -> None:
    window.files.open_path(file)
    edit(window)
    file.write_text(file.read_text(encoding="utf-8").replace("Pumps", "Fans"), encoding="utf-8")
    window.files.save()
    assert window.session.edited and "changed by somebody else" in box(window).text()
    next(b for b in box(window).buttons() if "Replace" in b.text()).click()
    assert not window.session.edited
    assert read_plant(file).plant == window.session.plant


def test_damaged_and_missing_files_are_told(window: MainWindow, tmp_path: Path) -> None:
    before = window.session.plant
    bad = tmp_path / "bad.plant.json"
    bad.write_text("{", encoding="utf-8")
    window.files.open_path(bad)
    assert "bad.plant.json" in box(window).text()
    press(window, BUTTON.Ok)
    window.settings.add_recent(tmp_path / "gone.plant.json")
    window.files.open_path(tmp_path / "gone.plant.json")
    assert "no file" in box(window).text()
    assert window.settings.recent == []
    assert window.session.plant is before


def test_a_file_in_use_can_be_opened_as_a_copy(window: MainWindow, file: Path) -> None:
    lock_path(file).write_text(f'{{"host": "elsewhere", "pid": {os.getpid()}, "token": "x"}}', encoding="utf-8")
    window.files.open_path(file)
    assert "elsewhere" in box(window).text()
    next(b for b in box(window).buttons() if "copy" in b.text()).click()
    assert window.session.path is None
    assert window.session.plant == pump_house()[0]


def test_work_of_a_crashed_program_is_offered_and_restored(window: MainWindow, file: Path, tmp_path: Path) -> None:
    window.files.open_path(file)
    t1 = window.session.plant.named("T1")[0].id
    window.session.apply(rename(window.session.plant, t1, "T7"))
    folder = tmp_path / "journals"
    shutil.copytree(folder / str(os.getpid()), folder / "4000001")  # what a crash now would leave
    window.session.undo()
    window.files.new_plant()
    assert window.session.plant.parts == {}

    window.files.offer_left_over()
    assert window.notice.isVisible() and "pumps.plant.json, 1 step. " in window.notice.words.text()
    window.notice.buttons["restore"].click()
    assert window.session.path == file
    assert window.session.plant.parts[t1].name == "T7" and window.session.edited
    window.session.undo()
    assert window.session.plant.parts[t1].name == "T1"
    window.files.offer_left_over()
    assert not window.notice.isVisible()


def test_left_over_work_can_wait_or_go(window: MainWindow, file: Path, tmp_path: Path) -> None:
    window.files.open_path(file)
    edit(window)
    folder = tmp_path / "journals"
    shutil.copytree(folder / str(os.getpid()), folder / "4000001")  # what a crash now would leave
    window.session.undo()
    window.files.offer_left_over()
    window.notice.buttons["later"].click()
    window.files.offer_left_over()
    assert window.notice.isVisible()
    window.notice.buttons["discard"].click()
    window.files.offer_left_over()
    assert not window.notice.isVisible()
