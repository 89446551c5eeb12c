"""The open plant's file: lock, fingerprint, crash journal. No widgets; ``files`` asks the questions."""

from __future__ import annotations

import os
from collections.abc import Iterator
from contextlib import suppress
from dataclasses import dataclass
from pathlib import Path
from typing import TYPE_CHECKING

from onelinefault.errors import PlantFileError
from onelinefault.model.editing import combine
from onelinefault.model.edits import Edit, inverse
from onelinefault.store.journal import SUFFIX as JOURNAL_SUFFIX
from onelinefault.store.journal import Journal, Recovered, journal_path, recover
from onelinefault.store.locks import PlantLock, lock_plant, process_runs
from onelinefault.store.plant_file import OpenedPlant, read_plant, write_plant

if TYPE_CHECKING:
    from onelinefault.model.findings import Finding
    from onelinefault.model.history import History
    from onelinefault.model.plant import Plant
    from onelinefault.store.file_format import Aside


class Keeper:
    """Keeps one open plant safe.

    folder: where journals stand; each running program has a folder of its own in it, named by its process, so that
    what an ended program has left can be told from what a running one is writing.
    """

    def __init__(self, folder: Path) -> None:
        self._folder = folder
        self._own = folder / str(os.getpid())
        self._lock: PlantLock | None = None
        self._fingerprint: str | None = None
        self._aside: Aside = {}
        self._journal = Journal(journal_path(self._own, None, "window"))
        self.noticed: tuple[Finding, ...] = ()

    def open(self, path: Path) -> OpenedPlant:
        """Read a file and lock it. Raises PlantFileError; what was kept before is then kept on."""
        opened = read_plant(path)
        lock = lock_plant(path)
        self.release()
        self._lock, self._fingerprint, self._aside = lock, opened.fingerprint, opened.aside
        self.noticed = opened.findings
        self._journal = Journal(journal_path(self._own, path), path, opened.fingerprint)
        return opened

    def start_new(self) -> None:
        """Keep a plant that has no file yet."""
        self.release()
        self._journal = Journal(journal_path(self._own, None, "window"))

    def save(self, plant: Plant, path: Path, *, same: bool, force: bool = False) -> None:
        """Write the plant. same: to the file it came from; force: whatever stands there now.

        Raises FileChangedError when somebody else has changed the file, FileInUseError, PlantFileError.
        """
        lock = self._lock
        if not same or lock is None:
            lock = lock_plant(path)
        known = self._fingerprint if same else None
        try:
            self._fingerprint = write_plant(plant, path, known=known, force=force, aside=self._aside)
        except PlantFileError:
            if lock is not self._lock:
                lock.release()
            raise
        if lock is not self._lock and self._lock is not None:
            self._lock.release()
        self._lock = lock
        if same:
            self._journal.restart(path, self._fingerprint)
        else:
            self._journal.discard()
            self._journal = Journal(journal_path(self._own, path), path, self._fingerprint)

    def follow(self, before: Plant, after: Plant, history: History) -> None:
        """Write the step from one plant to the other into the journal. Raises PlantFileError when the disk refuses."""
        edit = step_between(before, after, history)
        if edit is not None:
            self._journal.append(edit)

    def sync(self) -> None:
        """Make the journal survive a power cut."""
        self._journal.sync()

    def release(self) -> None:
        """The plant is closed or another one comes: nothing is left to recover."""
        self._journal.discard()
        with suppress(OSError):
            self._own.rmdir()
        if self._lock is not None:
            self._lock.release()
        self._lock, self._fingerprint, self._aside, self.noticed = None, None, {}, ()


def step_between(before: Plant, after: Plant, history: History) -> Edit | None:
    """The edit that led from one plant to the next: the last one done, or the inverse of the one taken back."""
    done, undone = history.done, history.undone
    if done and done[-1].before is before and done[-1].after is after:
        return done[-1].edit
    if undone and undone[0].before is after and undone[0].after is before:
        return inverse(undone[0].before, undone[0].edit)
    return None


@dataclass(frozen=True)
class LeftOver:
    """The journal of a program that has ended without closing its plant."""

    journal: Path
    found: Recovered

    @property
    def name(self) -> str:
        """What the plant is called for people."""
        return self.found.file.name if self.found.file is not None else "a plant that was never saved"

    def edit_onto(self, start: Plant) -> tuple[Edit, str]:
        """Its steps as one edit of the plant they began with, and a sentence when some could not be done again."""
        _, done = self.found.onto(start)
        missing = len(self.found.edits) - done
        said = f"{missing} of {len(self.found.edits)} steps could not be done again." if missing else ""
        return combine(self.found.edits[:done], "Restore unsaved work"), said

    def discard(self) -> None:
        """Forget it."""
        with suppress(OSError):
            self.journal.unlink()
            self.journal.parent.rmdir()


def left_over(folder: Path) -> Iterator[LeftOver]:
    """Journals of programs that have ended, the newest first; damaged and empty ones are removed."""
    journals = [path for path in folder.glob(f"*/*{JOURNAL_SUFFIX}") if _ended(path.parent.name)]
    for path in sorted(journals, key=_age):
        try:
            found = recover(path)
        except PlantFileError:
            found = None
        if found is None or not found.edits:
            LeftOver(path, Recovered(None, "", ())).discard()
        else:
            yield LeftOver(path, found)


def _ended(process: str) -> bool:
    return process.isdecimal() and int(process) != os.getpid() and not process_runs(int(process))


def _age(path: Path) -> float:
    try:
        return -path.stat().st_mtime
    except OSError:
        return 0.0
