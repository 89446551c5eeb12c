"""A small file beside an open plant that tells other windows and other people: this plant is being edited.

``.NAME.plant.json.lock`` holds host and process as JSON. It is advisory: it keeps nobody from reading. A lock whose
process is gone is taken over; one of another machine is believed, because nobody can look there.
"""

import ctypes
import json
import os
import platform
import secrets
import sys
from contextlib import suppress
from dataclasses import dataclass
from pathlib import Path
from typing import Final, Self

from onelinefault.errors import FileInUseError

_LARGEST_BYTES: Final = 4096
_WINDOWS_QUERY: Final = 0x1000  # PROCESS_QUERY_LIMITED_INFORMATION
_WINDOWS_RUNNING: Final = 259  # STILL_ACTIVE


@dataclass(frozen=True)
class Holder:
    """Who holds a lock. token: unlike any other lock's, so that the holder knows its own."""

    host: str
    pid: int
    token: str

    @property
    def alive(self) -> bool:
        """Whether the holder is still running; True where it cannot be known (another machine)."""
        return self.host != platform.node() or process_runs(self.pid)


class PlantLock:
    """The lock of one plant file; a context manager. held is False where the folder takes no lock (read-only)."""

    def __init__(self, path: Path, holder: Holder, held: bool) -> None:
        self.path = path
        self.holder = holder
        self.held = held

    def release(self) -> None:
        """Take the lock away, if it is still ours. Never raises."""
        if self.held and holder_of(self.path) == self.holder:
            with suppress(OSError):
                self.path.unlink()
        self.held = False

    def __enter__(self) -> Self:
        return self

    def __exit__(self, *_: object) -> None:
        self.release()


def lock_path(plant_path: Path) -> Path:
    """Where the lock of a plant file stands; links are followed, so that one file has one lock."""
    real = Path(os.path.realpath(plant_path))
    return real.with_name(f".{real.name}.lock")


def lock_plant(plant_path: str | Path, *, force: bool = False) -> PlantLock:
    """Lock a plant file for editing. force: take the lock from whoever holds it.

    Raises FileInUseError, naming machine and process, when a running program holds it.
    """
    path = lock_path(Path(plant_path))
    holder = Holder(platform.node(), os.getpid(), secrets.token_hex(8))
    for _ in range(3):
        try:
            with open(path, "x", encoding="utf-8") as file:
                json.dump({"host": holder.host, "pid": holder.pid, "token": holder.token}, file)
        except FileExistsError:
            _make_room(path, Path(plant_path).name, force)
            continue
        except OSError:
            return PlantLock(path, holder, held=False)
        return PlantLock(path, holder, held=True)
    raise FileInUseError(f"{Path(plant_path).name} is being opened elsewhere at this moment; try again")


def _make_room(path: Path, name: str, force: bool) -> None:
    """Remove a lock that nobody needs any more. Raises FileInUseError when somebody does."""
    other = holder_of(path)
    if other is not None and other.alive and not force:
        raise FileInUseError(
            f"{name} is open for editing on {other.host} (process {other.pid}); close it there, or open it for reading "
            f"only. If that program has ended, delete {path.name}"
        )
    with suppress(OSError):
        path.unlink()


def holder_of(path: Path) -> Holder | None:
    """Who holds the lock at this path; None when there is none or it says nothing sensible."""
    try:
        with open(path, encoding="utf-8") as file:
            record = json.loads(file.read(_LARGEST_BYTES))
        return Holder(str(record["host"]), int(record["pid"]), str(record["token"]))
    except (OSError, ValueError, KeyError, TypeError, RecursionError):
        return None


def process_runs(pid: int) -> bool:
    """Whether a process of this machine is running."""
    if pid <= 0:
        return False
    if sys.platform == "win32":  # os.kill would end the process there
        return _runs_on_windows(pid)
    try:
        os.kill(pid, 0)
    except ProcessLookupError:
        return False
    except (OSError, OverflowError) as error:
        return isinstance(error, PermissionError)
    return True


def _runs_on_windows(pid: int) -> bool:
    kernel = ctypes.windll.kernel32  # type: ignore[attr-defined,unused-ignore]
    handle = kernel.OpenProcess(_WINDOWS_QUERY, False, pid)
    if not handle:
        return False
    code = ctypes.c_ulong()
    kernel.GetExitCodeProcess(handle, ctypes.byref(code))
    kernel.CloseHandle(handle)
    return code.value == _WINDOWS_RUNNING
