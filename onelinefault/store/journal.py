"""The crash journal: every edit since the last save, one line each, so that a crash costs nothing.

The first line says which file the edits belong to and what it looked like (its fingerprint). A line is written at
once and handed to the operating system, so it survives the end of the program; ``sync`` makes it survive a power cut
too. A last line that was cut off is left out on recovery, and so is everything after a damaged line.
"""

import hashlib
import json
import os
from collections.abc import Mapping
from contextlib import suppress
from dataclasses import dataclass
from pathlib import Path
from typing import Any, Final, TextIO

from onelinefault.errors import EditError, PlantFileError
from onelinefault.model.edits import Edit, apply
from onelinefault.model.plant import Plant
from onelinefault.store import plain
from onelinefault.store.decoding import (
    Remarks,
    arrangements_from,
    document_from,
    id_from,
    part_from,
    point_from,
    sheets_from,
    wire_from,
)
from onelinefault.store.file_format import (
    arrangement_record,
    document_record,
    part_record,
    sheet_record,
    wire_record,
)

FORMAT_WORD: Final = "onelinefault journal"
VERSION: Final = 1
SUFFIX: Final = ".journal"


def edit_record(edit: Edit) -> dict[str, Any]:
    """An edit as plain values; what it leaves alone is left out."""
    record: dict[str, Any] = {"sentence": edit.sentence}
    if edit.parts:
        record["parts"] = {key: part and part_record(part) for key, part in edit.parts.items()}
    if edit.wires:
        record["wires"] = {key: wire and wire_record(wire) for key, wire in edit.wires.items()}
    if edit.tags:
        record["tags"] = {key: point and list(point) for key, point in edit.tags.items()}
    if edit.document is not None:
        record["document"] = document_record(edit.document)
    if edit.sheets is not None:
        record["sheets"] = [sheet_record(sheet) for sheet in edit.sheets]
    if edit.arrangements is not None:
        record["arrangements"] = [arrangement_record(one) for one in edit.arrangements]
    if edit.next_number is not None:
        record["next_number"] = edit.next_number
    return record


def edit_from(value: object) -> Edit:
    """The edit in plain values. Raises PlantFileError when they are damaged."""
    record = plain.mapping(value, "edit")
    remarks = Remarks()
    edit = Edit(
        sentence=plain.text(plain.need(record, "sentence", "edit"), "edit, sentence"),
        parts={
            id_from(key, "edit"): None if part is None else part_from(part, "edit", remarks)
            for key, part in _entries(record, "parts").items()
        },
        wires={
            id_from(key, "edit"): None if wire is None else wire_from(wire, "edit")
            for key, wire in _entries(record, "wires").items()
        },
        tags={
            key: None if point is None else point_from(point, "edit, tags")
            for key, point in _entries(record, "tags").items()
        },
        document=document_from(record["document"], remarks) if "document" in record else None,
        sheets=tuple(sheets_from(record["sheets"])) if "sheets" in record else None,
        arrangements=tuple(arrangements_from(record["arrangements"])) if "arrangements" in record else None,
        next_number=plain.whole(record["next_number"], "edit", 1, 10**9) if "next_number" in record else None,
    )
    if remarks.findings:
        raise PlantFileError(remarks.findings[0].message)
    return edit


def _entries(record: Mapping[str, Any], key: str) -> Mapping[str, Any]:
    return plain.mapping(record.get(key, {}), f"edit, {key}")


def journal_path(folder: Path, plant_path: Path | None, window: str = "") -> Path:
    """Where the journal of a plant stands in the user's state folder.

    window: any word that is this window's own, for a plant that has no file yet.
    """
    subject = f"{os.path.realpath(plant_path)}" if plant_path else f"untitled {window}"
    name = plant_path.name.split(".")[0][:40] if plant_path else "untitled"
    return folder / f"{name}-{hashlib.sha256(subject.encode('utf-8', 'replace')).hexdigest()[:16]}{SUFFIX}"


class Journal:
    """The journal of one open plant. Nothing is on disk until the first edit."""

    def __init__(self, path: Path, plant_path: Path | None = None, fingerprint: str = "") -> None:
        self.path = path
        self._head = _head(plant_path, fingerprint)
        self._file: TextIO | None = None

    def append(self, edit: Edit) -> None:
        """Write one edit. Raises PlantFileError when the disk refuses; the plant itself is not touched."""
        try:
            if self._file is None:
                self.path.parent.mkdir(parents=True, exist_ok=True)
                self._file = open(self.path, "w", encoding="utf-8", newline="\n")  # noqa: SIM115
                self._file.write(self._head)
            self._file.write(_line(edit_record(edit)))
            self._file.flush()
        except (OSError, UnicodeError) as error:
            raise PlantFileError(f"the recovery journal cannot be written: {error}; save the plant now") from None

    def sync(self) -> None:
        """Make what was written survive a power cut; for a quiet moment."""
        if self._file is not None:
            with suppress(OSError):
                os.fsync(self._file.fileno())

    def restart(self, plant_path: Path | None, fingerprint: str) -> None:
        """After a save: the edits so far are in the file; begin anew."""
        self.discard()
        self._head = _head(plant_path, fingerprint)

    def discard(self) -> None:
        """Close the journal and remove it: nothing is left to recover."""
        self.close()
        with suppress(OSError):
            self.path.unlink()

    def close(self) -> None:
        """Close the journal and leave it on disk."""
        if self._file is not None:
            with suppress(OSError):
                self._file.close()
            self._file = None


def _head(plant_path: Path | None, fingerprint: str) -> str:
    file = os.path.realpath(plant_path) if plant_path else None
    return _line({"format": FORMAT_WORD, "version": VERSION, "file": file, "fingerprint": fingerprint})


def _line(record: Mapping[str, Any]) -> str:
    return json.dumps(record, ensure_ascii=True, separators=(",", ":")) + "\n"


@dataclass(frozen=True)
class Recovered:
    """What a journal holds.

    file: the plant file it belongs to, None for a plant never saved; fingerprint: of that file. edits: in order.
    damaged: whether lines at its end could not be read.
    """

    file: Path | None
    fingerprint: str
    edits: tuple[Edit, ...]
    damaged: bool = False

    def onto(self, plant: Plant) -> tuple[Plant, int]:
        """The plant with the edits done again, and how many of them could be; stops at one that the plant refuses."""
        for done, edit in enumerate(self.edits):
            try:
                plant = apply(plant, edit)
            except EditError:
                return plant, done
        return plant, len(self.edits)


def recover(path: Path) -> Recovered:
    """Read a journal that a crash has left. Raises PlantFileError when it is none of ours or cannot be read."""
    try:
        lines = path.read_bytes().decode("utf-8", "replace").split("\n")
    except OSError as error:
        raise PlantFileError(f"the recovery journal {path.name} cannot be read: {error}") from None
    head = _parsed(lines[0])
    if not isinstance(head, dict) or head.get("format") != FORMAT_WORD or head.get("version") != VERSION:
        raise PlantFileError(f"{path.name} is no recovery journal of this program")
    file, fingerprint = head.get("file"), head.get("fingerprint")
    edits: list[Edit] = []
    complete = lines[1:-1]  # what follows the last line end was cut off while it was written
    for line in complete:
        try:
            edits.append(edit_from(_parsed(line)))
        except PlantFileError:
            break
    damaged = len(edits) < len(complete) or bool(lines[-1])
    return Recovered(Path(file) if isinstance(file, str) else None, str(fingerprint), tuple(edits), damaged)


def _parsed(line: str) -> Any:
    try:
        return json.loads(line)
    except (ValueError, RecursionError):
        return None
