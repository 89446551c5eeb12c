"""File, lock and crash journal of the open plant."""

import os
from pathlib import Path

import pytest

from onelinefault.desktop.keeper import Keeper, LeftOver, left_over, step_between
from onelinefault.errors import FileChangedError, FileInUseError, PlantFileError
from onelinefault.model.editing import move, rename
from onelinefault.model.history import History
from onelinefault.model.plant import Plant
from onelinefault.store.locks import lock_path
from onelinefault.store.plant_file import read_plant, write_plant
from tests.drawing.plants import pump_house

NOBODY = "4000001"  # above the largest process number of Linux by default (2**22)


@pytest.fixture
def file(tmp_path: Path) -> Path:
    path = tmp_path / "pumps.plant.json"
    write_plant(pump_house()[0], path)
    return path


def crash(folder: Path) -> None:
    """Leave what this process has written as if it belonged to one that has ended."""
    (folder / str(os.getpid())).rename(folder / NOBODY)


def test_an_open_file_is_locked_until_it_is_released(tmp_path: Path, file: Path) -> None:
    keeper = Keeper(tmp_path / "journals")
    assert keeper.open(file).plant == pump_house()[0]
    assert lock_path(file).exists()
    with pytest.raises(FileInUseError):
        Keeper(tmp_path / "other").open(file)
    keeper.release()
    assert not lock_path(file).exists()
    assert not (tmp_path / "journals" / str(os.getpid())).exists()


def test_a_file_that_cannot_be_read_leaves_the_open_one_alone(tmp_path: Path, file: Path) -> None:
    keeper = Keeper(tmp_path / "journals")
    keeper.open(file)
    (tmp_path / "bad.plant.json").write_text("{", encoding="utf-8")
    with pytest.raises(PlantFileError):
        keeper.open(tmp_path / "bad.plant.json")
    assert lock_path(file).exists()
    keeper.release()


def test_saving_again_and_saving_elsewhere(tmp_path: Path, file: Path) -> None:
    keeper = Keeper(tmp_path / "journals")
    plant = keeper.open(file).plant
    key = next(iter(plant.parts))
    history = History(plant)
    changed = history.apply(rename(plant, key, "Infeed"))
    keeper.save(changed, file, same=True)
    assert read_plant(file).plant == changed
    elsewhere = tmp_path / "copy.plant.json"
    keeper.save(changed, elsewhere, same=False)
    assert lock_path(elsewhere).exists() and not lock_path(file).exists()
    keeper.save(history.apply(rename(changed, key, "Grid")), elsewhere, same=True)
    keeper.release()


def test_somebody_elses_change_is_not_overwritten(tmp_path: Path, file: Path) -> None:
    keeper = Keeper(tmp_path / "journals")
    plant = keeper.open(file).plant
    file.write_text(file.read_text(encoding="utf-8").replace("Pumps", "Fans"), encoding="utf-8")
    with pytest.raises(FileChangedError):
        keeper.save(plant, file, same=True)
    assert "Fans" in file.read_text(encoding="utf-8")
    keeper.save(plant, file, same=True, force=True)
    assert "Pumps" in file.read_text(encoding="utf-8")
    keeper.release()


def test_steps_are_told_forward_and_backward() -> None:
    plant, ids = pump_house()
    history = History(plant)
    edit = move(plant, [ids["t1"]], 1, 0)
    after = history.apply(edit)
    assert step_between(plant, after, history) is edit
    history.undo()
    back = step_between(after, plant, history)
    assert back is not None and back.parts == {ids["t1"]: plant.parts[ids["t1"]]}
    history.redo()
    assert step_between(plant, after, history) is edit
    assert step_between(Plant(), plant, history) is None  # another plant was opened


def test_after_a_crash_every_step_is_there_again(tmp_path: Path, file: Path) -> None:
    folder = tmp_path / "journals"
    keeper = Keeper(folder)
    plant = keeper.open(file).plant
    history, (first, second, *_) = History(plant), plant.parts
    for edit in (rename(plant, first, "Infeed"), None, rename(plant, second, "Main")):
        before = history.plant
        if edit is None:
            history.undo()
        else:
            history.apply(edit)
        keeper.follow(before, history.plant, history)
    crash(folder)
    (found,) = left_over(folder)
    assert isinstance(found, LeftOver) and found.found.file == file and found.name == file.name
    edit, said = found.edit_onto(read_plant(file).plant)
    again = History(read_plant(file).plant)
    assert again.apply(edit) == history.plant
    assert said == ""
    found.discard()
    assert list(left_over(folder)) == [] and not (folder / NOBODY).exists()
    keeper.release()


def test_a_saved_or_released_plant_leaves_nothing_over(tmp_path: Path, file: Path) -> None:
    folder = tmp_path / "journals"
    keeper = Keeper(folder)
    plant = keeper.open(file).plant
    history = History(plant)
    history.apply(rename(plant, next(iter(plant.parts)), "Infeed"))
    keeper.follow(plant, history.plant, history)
    assert list(folder.rglob("*.journal"))
    keeper.save(history.plant, file, same=True)
    assert list(folder.rglob("*.journal")) == []
    keeper.release()


def test_a_running_programs_journal_is_not_offered(tmp_path: Path) -> None:
    folder = tmp_path / "journals"
    keeper = Keeper(folder)
    plant, ids = pump_house()
    history = History(plant)
    history.apply(rename(plant, ids["t1"], "T7"))
    keeper.follow(plant, history.plant, history)
    assert list(left_over(folder)) == []
    crash(folder)
    (found,) = left_over(folder)
    assert found.found.file is None and "never saved" in found.name
    keeper.release()


def test_damaged_journals_are_swept_away(tmp_path: Path) -> None:
    dead = tmp_path / NOBODY
    dead.mkdir()
    (dead / "x.journal").write_text("rubbish", encoding="utf-8")
    assert list(left_over(tmp_path)) == []
    assert not dead.exists()
    assert list(left_over(tmp_path / "not there")) == []
