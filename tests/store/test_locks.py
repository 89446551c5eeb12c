"""One person edits a plant at a time; a lock left by a crash is in nobody's way."""

import json
import os
import platform
import subprocess
import sys
from pathlib import Path

import pytest

from onelinefault.errors import FileInUseError
from onelinefault.store.locks import Holder, holder_of, lock_path, lock_plant, process_runs


@pytest.fixture
def plant(tmp_path: Path) -> Path:
    path = tmp_path / "mill.plant.json"
    path.write_text("{}", encoding="utf-8")
    return path


def write_lock(plant: Path, host: str, pid: int) -> None:
    lock_path(plant).write_text(json.dumps({"host": host, "pid": pid, "token": "t"}), encoding="utf-8")


def ended_process() -> int:
    """The id of a process that has just ended."""
    child = subprocess.Popen([sys.executable, "-c", ""])
    child.wait()
    return child.pid


def test_a_lock_stands_beside_the_file_until_it_is_released(plant: Path) -> None:
    with lock_plant(plant) as lock:
        assert lock.held and lock.path.name == ".mill.plant.json.lock"
        holder = holder_of(lock.path)
        assert holder == lock.holder and holder.pid == os.getpid() and holder.alive
    assert not lock.path.exists() and not lock.held
    lock.release()  # once more does no harm


def test_a_running_holder_is_named(plant: Path) -> None:
    with lock_plant(plant), pytest.raises(FileInUseError) as caught:
        lock_plant(plant)
    assert f"{platform.node()} (process {os.getpid()})" in str(caught.value)
    assert "mill.plant.json is open" in str(caught.value) and ".mill.plant.json.lock" in str(caught.value)


def test_the_lock_of_a_process_that_has_ended_is_taken_over(plant: Path) -> None:
    write_lock(plant, platform.node(), ended_process())
    with lock_plant(plant) as lock:
        assert holder_of(lock.path) == lock.holder


def test_the_lock_of_another_machine_is_believed(plant: Path) -> None:
    write_lock(plant, "some-other-desk", 1)
    with pytest.raises(FileInUseError, match="some-other-desk"):
        lock_plant(plant)
    with lock_plant(plant, force=True) as lock:
        assert lock.held


@pytest.mark.parametrize(
    "content", [b"", b"[]", b"{", b'{"host": 1}', b"\xff\xfe", b'{"host": "x", "pid": "y"}', b"[" * 9999]
)
def test_a_lock_that_says_nothing_is_taken_over(plant: Path, content: bytes) -> None:
    lock_path(plant).write_bytes(content)
    with lock_plant(plant) as lock:
        assert lock.held


def test_a_lock_taken_by_somebody_else_is_not_removed(plant: Path) -> None:
    lock = lock_plant(plant)
    write_lock(plant, "some-other-desk", 1)
    lock.release()
    assert holder_of(lock.path) == Holder("some-other-desk", 1, "t")


def test_a_folder_that_takes_no_lock_still_opens(tmp_path: Path) -> None:
    lock = lock_plant(tmp_path / "no-such-folder" / "mill.plant.json")
    assert not lock.held
    lock.release()


def test_one_file_has_one_lock(plant: Path, tmp_path: Path) -> None:
    assert lock_path(plant) == lock_path(tmp_path / "." / "mill.plant.json")


def test_which_processes_run() -> None:
    assert process_runs(os.getpid())
    assert not process_runs(ended_process())
    assert not process_runs(0) and not process_runs(-1) and not process_runs(10**30)
