"""Plant files on disk: opened with clear words for every defect, written so that nothing is ever lost.

Writing goes beside the file, is flushed to the disk and then takes the file's place in one step; the file that stood
there before stays as a copy with "~" at its end. A file that has changed since it was read is not overwritten.
"""

import hashlib
import json
import os
import secrets
import stat
from contextlib import suppress
from dataclasses import dataclass, field
from pathlib import Path
from typing import Any, Final

from onelinefault.errors import FileChangedError, PlantFileError
from onelinefault.model.findings import Finding
from onelinefault.model.plant import Plant
from onelinefault.store import plain
from onelinefault.store.decoding import Remarks, plant_from
from onelinefault.store.file_format import FORMAT_WORD, Aside, plant_text
from onelinefault.store.migrate import migrated

SUFFIX: Final = ".plant.json"
LARGEST_BYTES: Final = 50_000_000


@dataclass(frozen=True)
class OpenedPlant:
    """What a file held.

    findings: what could not be taken as it stood. fingerprint: of the bytes read, for ``write_plant``. aside: texts
    that could not be read; hand them to ``write_plant`` and they stay in the file until the value is typed anew.
    """

    plant: Plant
    fingerprint: str
    findings: tuple[Finding, ...] = ()
    aside: Aside = field(default_factory=dict)


def fingerprint_of(data: bytes) -> str:
    """The SHA-256 of a file's bytes, in hexadecimal digits."""
    return hashlib.sha256(data).hexdigest()


def previous_path(path: Path) -> Path:
    """Where the file that stood here before the last save is kept: "mill.plant.json~"."""
    return path.with_name(path.name + "~")


def read_plant(path: str | Path) -> OpenedPlant:
    """Open a plant file.

    Raises PlantFileError, in one line that names the file, the part, the reason and the remedy, when it is no plant
    file or damaged. Values that cannot be read do not stop the rest: they are findings.
    """
    path = Path(path)
    data = _bytes_of(path)
    try:
        plant, remarks = plant_from_bytes(data)
    except PlantFileError as error:
        raise PlantFileError(f"{path.name}: {error}{_way_out(path)}") from None
    return OpenedPlant(plant, fingerprint_of(data), tuple(remarks.findings), remarks.aside)


def plant_from_bytes(data: bytes) -> tuple[Plant, Remarks]:
    """The plant in the bytes of a file, and what was noticed. Raises PlantFileError without the file's name."""
    record = plain.mapping(_parsed(data), "the file")
    if record.get("format") != FORMAT_WORD:
        raise PlantFileError(f'it is no plant file: "format" must be "{FORMAT_WORD}"')
    remarks = Remarks()
    return plant_from(migrated(record), remarks), remarks


def _bytes_of(path: Path) -> bytes:
    try:
        about = path.stat()
        if stat.S_ISDIR(about.st_mode):
            raise PlantFileError(f"{path} is a folder, not a plant file; name a file in it")
        if not stat.S_ISREG(about.st_mode):
            raise PlantFileError(f"{path} is no ordinary file; name a plant file")
        if about.st_size > LARGEST_BYTES:
            raise PlantFileError(
                f"{path.name} has {about.st_size / 1e6:.0f} MB; a plant file has at most {LARGEST_BYTES / 1e6:.0f} MB"
            )
        return path.read_bytes()
    except FileNotFoundError:
        raise PlantFileError(f"there is no file {path}; check the name and the folder") from None
    except (OSError, ValueError) as error:
        raise PlantFileError(f"{path} cannot be opened: {reason(error)}") from None


def _parsed(data: bytes) -> Any:
    try:
        text = data.decode("utf-8-sig")
    except UnicodeDecodeError as error:
        raise PlantFileError(f"it is not UTF-8 text (byte {error.start}); it is damaged or no plant file") from None
    if not text.strip():
        raise PlantFileError("it is empty")
    try:
        return json.loads(text, object_pairs_hook=_object, parse_constant=_refuse_constant)
    except json.JSONDecodeError as error:
        cut = error.pos >= len(text.rstrip()) or error.msg.startswith("Unterminated string")
        what = "it is cut off" if cut else f"it is damaged or no plant file ({error.msg})"
        raise PlantFileError(f"{what} at line {error.lineno}, letter {error.colno}") from None
    except RecursionError:
        raise PlantFileError("its brackets are nested too deeply; it is damaged or no plant file") from None
    except ValueError:
        raise PlantFileError("a number in it has too many digits; it is damaged or no plant file") from None


def _object(pairs: list[tuple[str, Any]]) -> dict[str, Any]:
    found = dict(pairs)
    if len(found) < len(pairs):
        names = [name for name, _ in pairs]
        twice = next(name for name in names if names.count(name) > 1)
        raise PlantFileError(f"the entry {plain.shown(twice)} stands twice in one place; remove one of the two")
    return found


def _refuse_constant(word: str) -> Any:
    raise PlantFileError(f"{word} is no number that a plant can hold; correct it in the file")


def _way_out(path: Path) -> str:
    previous = previous_path(path)
    if previous.is_file():
        return f" (nothing was changed; the file before the last save is kept as {previous.name})"
    return " (nothing was changed)"


def reason(error: Exception) -> str:
    """What the operating system says about a failure, in one line."""
    text = error.strerror if isinstance(error, OSError) and error.strerror else str(error)
    return " ".join(text.split()) or type(error).__name__


def write_plant(
    plant: Plant, path: str | Path, *, known: str | None = None, force: bool = False, aside: Aside | None = None
) -> str:
    """Write a plant file in one step and return its fingerprint.

    known: the fingerprint of the file as it was read or last written; None when it is to be a new file. force: replace
    whatever stands there. aside: unreadable texts of the file the plant came from.
    Raises FileChangedError when another file stands there than the one known, PlantFileError when the disk refuses or
    the plant could not be opened again; the old file is then untouched.
    """
    path = Path(os.path.realpath(path))
    data = _checked_bytes(plant, aside or {}, path)
    standing = _standing(path)
    if standing == data:
        return fingerprint_of(data)
    if standing is not None and not force:
        _check_unchanged(path, standing, known)
    try:
        if standing is not None:
            _put(previous_path(path), standing)
        _put(path, data)
    except OSError as error:
        raise PlantFileError(
            f"{path.name} cannot be written: {reason(error)}; the file that stood there is untouched and the plant is "
            "still open: save it in another folder"
        ) from None
    return fingerprint_of(data)


def _checked_bytes(plant: Plant, aside: Aside, path: Path) -> bytes:
    """The bytes to write, after reading them back: what could not be opened again is not written."""
    try:
        data = plant_text(plant, aside).encode("utf-8")
        plant_from_bytes(data)
    except UnicodeEncodeError as error:
        letter = plain.shown(error.object[error.start : error.end])
        raise PlantFileError(f"{path.name} is not written: {letter} in a text cannot be stored; remove it") from None
    except PlantFileError as error:
        raise PlantFileError(f"{path.name} is not written, it could not be opened again: {error}") from None
    return data


def _standing(path: Path) -> bytes | None:
    try:
        return path.read_bytes()
    except FileNotFoundError:
        return None
    except OSError as error:
        raise PlantFileError(f"{path} cannot be written: {reason(error)}; choose another name or folder") from None


def _check_unchanged(path: Path, standing: bytes, known: str | None) -> None:
    if known is None:
        raise FileChangedError(f"{path.name} exists already; choose another name, or replace it on purpose")
    if known != fingerprint_of(standing):
        raise FileChangedError(
            f"{path.name} was changed by somebody else since it was opened; save under another name and compare the "
            "two, or replace it on purpose (the other version is then kept beside it)"
        )


def _put(path: Path, data: bytes) -> None:
    """Write beside, flush to the disk, take the place in one step. Raises OSError; then nothing has changed."""
    beside = path.with_name(f".{path.name[:100]}.{secrets.token_hex(6)}.new")
    try:
        with open(beside, "xb") as file:
            file.write(data)
            file.flush()
            os.fsync(file.fileno())
        with suppress(OSError):
            os.chmod(beside, stat.S_IMODE(path.stat().st_mode))
        os.replace(beside, path)
    except BaseException:
        with suppress(OSError):
            beside.unlink()
        raise
    _flush_folder(path.parent)


def _flush_folder(folder: Path) -> None:
    """Make the new name itself survive a power cut, where the system allows it (not on Windows)."""
    with suppress(OSError, AttributeError):
        handle = os.open(folder, os.O_RDONLY)
        try:
            os.fsync(handle)
        finally:
            os.close(handle)
