"""Plant files on disk: every defect gets one clear line, and nothing is ever lost."""

import errno
import os
import stat
from collections.abc import Callable
from dataclasses import replace
from pathlib import Path

import pytest
from hypothesis import HealthCheck, given, settings
from hypothesis import strategies as st

from onelinefault.errors import FileChangedError, PlantFileError
from onelinefault.model.consumers import Bus
from onelinefault.model.plant import Document, Plant
from onelinefault.store import plant_file
from onelinefault.store.file_format import plant_text
from onelinefault.store.plant_file import fingerprint_of, previous_path, read_plant, write_plant

ONE = Plant(Document(name="One"), {"p1": Bus(id="p1", name="Bus „A“").with_text("nominal_voltage", "11 kV")})
TWO = replace(ONE, document=Document(name="Two"))
THREE = replace(ONE, document=Document(name="Three"))


@pytest.fixture
def path(tmp_path: Path) -> Path:
    return tmp_path / "mill.plant.json"


def left_over(folder: Path) -> list[str]:
    return sorted(p.name for p in folder.iterdir())


def test_written_and_read_again(path: Path) -> None:
    fingerprint = write_plant(ONE, path)
    opened = read_plant(path)
    assert opened.plant == ONE and opened.findings == () and opened.aside == {}
    assert opened.fingerprint == fingerprint == fingerprint_of(path.read_bytes())
    assert path.read_bytes().endswith(b"}\n") and b"\r" not in path.read_bytes()
    assert left_over(path.parent) == ["mill.plant.json"]


@settings(
    max_examples=10,
    deadline=None,
    suppress_health_check=[HealthCheck.too_slow, HealthCheck.data_too_large, HealthCheck.function_scoped_fixture],
)
@given(data=st.data())
def test_any_plant_comes_back(path: Path, plants: st.SearchStrategy[Plant], data: st.DataObject) -> None:
    plant = data.draw(plants)
    write_plant(plant, path, force=True)
    assert read_plant(path).plant == plant


def test_the_file_before_is_kept(path: Path) -> None:
    first = write_plant(ONE, path)
    second = write_plant(TWO, path, known=first)
    assert read_plant(previous_path(path)).plant == ONE
    write_plant(THREE, path, known=second)
    assert read_plant(previous_path(path)).plant == TWO
    assert read_plant(path).plant == THREE
    assert left_over(path.parent) == ["mill.plant.json", "mill.plant.json~"]


def test_saving_the_same_again_keeps_the_file_before(path: Path) -> None:
    known = write_plant(TWO, path, known=write_plant(ONE, path))
    assert write_plant(TWO, path, known=known) == known
    assert read_plant(previous_path(path)).plant == ONE


def test_somebody_elses_work_is_not_overwritten(path: Path) -> None:
    known = write_plant(ONE, path)
    write_plant(TWO, path, known=known)
    with pytest.raises(FileChangedError, match=r"mill\.plant\.json was changed by somebody else.*another name"):
        write_plant(THREE, path, known=known)
    with pytest.raises(FileChangedError, match="exists already"):
        write_plant(THREE, path)
    assert read_plant(path).plant == TWO
    write_plant(THREE, path, known=known, force=True)
    assert read_plant(path).plant == THREE and read_plant(previous_path(path)).plant == TWO


def test_a_file_that_was_removed_is_written_again(path: Path) -> None:
    known = write_plant(ONE, path)
    path.unlink()
    write_plant(TWO, path, known=known)
    assert read_plant(path).plant == TWO


def full_disk(*_: object) -> None:
    raise OSError(errno.ENOSPC, "No space left on device")


@pytest.mark.parametrize("call", ["replace", "fsync"])
def test_a_failing_disk_loses_nothing(path: Path, monkeypatch: pytest.MonkeyPatch, call: str) -> None:
    known = write_plant(ONE, path)
    before = path.read_bytes()
    monkeypatch.setattr(os, call, full_disk)
    with pytest.raises(PlantFileError, match=r"cannot be written: No space left on device; .*untouched"):
        write_plant(TWO, path, known=known)
    assert path.read_bytes() == before
    assert left_over(path.parent) == ["mill.plant.json"]


def test_a_disk_that_fails_between_copy_and_file_loses_nothing(path: Path, monkeypatch: pytest.MonkeyPatch) -> None:
    known = write_plant(TWO, path, known=write_plant(ONE, path))
    real, calls = os.replace, []

    def second_fails(source: str, target: str) -> None:
        calls.append(target)
        full_disk() if len(calls) == 2 else real(source, target)

    monkeypatch.setattr(os, "replace", second_fails)
    with pytest.raises(PlantFileError):
        write_plant(THREE, path, known=known)
    monkeypatch.undo()
    assert read_plant(path).plant == TWO
    assert left_over(path.parent) == ["mill.plant.json", "mill.plant.json~"]


def test_a_break_off_leaves_no_crumbs(path: Path, monkeypatch: pytest.MonkeyPatch) -> None:
    known = write_plant(ONE, path)

    def break_off(*_: object) -> None:
        raise KeyboardInterrupt

    monkeypatch.setattr(os, "fsync", break_off)
    with pytest.raises(KeyboardInterrupt):
        write_plant(TWO, path, known=known)
    assert left_over(path.parent) == ["mill.plant.json"]


def test_a_folder_that_does_not_exist_or_takes_nothing(tmp_path: Path, monkeypatch: pytest.MonkeyPatch) -> None:
    with pytest.raises(PlantFileError, match="cannot be written: No such file or directory"):
        write_plant(ONE, tmp_path / "nowhere" / "mill.plant.json")

    def refuse(*_: object, **__: object) -> None:
        raise PermissionError(errno.EACCES, "Permission denied")

    monkeypatch.setattr(plant_file, "_put", refuse)
    with pytest.raises(PlantFileError, match=r"cannot be written: Permission denied; .*save it in another folder"):
        write_plant(ONE, tmp_path / "mill.plant.json")


def test_what_could_not_be_opened_again_is_not_written(path: Path) -> None:
    write_plant(ONE, path)
    far = replace(ONE, parts={"p1": replace(ONE.parts["p1"], x=200_000)})
    with pytest.raises(PlantFileError, match=r"mill\.plant\.json is not written.*Bus „A“ \(p1\), x: 200000 is out of"):
        write_plant(far, path, force=True)
    odd = replace(ONE, document=Document(name="half \ud800"))
    with pytest.raises(PlantFileError, match="in a text cannot be stored"):
        write_plant(odd, path, force=True)
    assert read_plant(path).plant == ONE


def test_permissions_and_links_stay(tmp_path: Path, path: Path) -> None:
    known = write_plant(ONE, path)
    path.chmod(0o640)
    link = tmp_path / "link.plant.json"
    link.symlink_to(path)
    write_plant(TWO, link, known=known)
    assert link.is_symlink() and read_plant(path).plant == TWO
    assert stat.S_IMODE(path.stat().st_mode) == 0o640


def test_unreadable_texts_survive_a_save(path: Path) -> None:
    text = plant_text(ONE).replace("11 kV", "11 kilo")
    path.write_text(text, encoding="utf-8")
    opened = read_plant(path)
    assert [f.code for f in opened.findings] == ["unreadable-value"]
    write_plant(
        replace(opened.plant, document=Document(name="Two")), path, known=opened.fingerprint, aside=opened.aside
    )
    assert '"nominal_voltage": "11 kilo"' in path.read_text(encoding="utf-8")


HOSTILE: list[tuple[str, bytes, str]] = [
    ("empty", b"", "it is empty"),
    ("blank", b" \n\t ", "it is empty"),
    ("binary", bytes(range(256)), "not UTF-8"),
    ("picture", b"\x89PNG\r\n\x1a\n" + b"\0" * 90, "not UTF-8"),
    ("words", b"Dear plant", "damaged or no plant file"),
    ("list", b"[]", "expected an object"),
    ("number", b"7", "expected an object"),
    ("other json", b'{"a": 1}', 'no plant file: "format" must be "onelinefault plant"'),
    ("other format", b'{"format": "drawing", "version": 1}', "no plant file"),
    ("deep lists", b"[" * 200_000, "nested too deeply"),
    ("deep objects", b'{"a":' * 200_000, "nested too deeply"),
    ("nan", b'{"format": "onelinefault plant", "version": 1, "next_number": NaN}', "NaN is no number"),
    ("infinity", b'{"format": "onelinefault plant", "version": -Infinity}', "-Infinity is no number"),
    ("long number", b'{"format": "onelinefault plant", "version": ' + b"9" * 5000 + b"}", "too many digits"),
    ("big number", b'{"format": "onelinefault plant", "version": 1e400}', "must be a whole number"),
    ("twice", b'{"format": "onelinefault plant", "version": 1, "version": 1}', '"version" stands twice'),
    ("newer", b'{"format": "onelinefault plant", "version": 2}', "newer program"),
    ("no version", b'{"format": "onelinefault plant"}', '"version" must be'),
    ("nothing else", b'{"format": "onelinefault plant", "version": 1}', '"sheets" is missing'),
    ("two documents", plant_text(ONE).encode() * 2, "damaged or no plant file"),
    ("utf-16", plant_text(ONE).encode("utf-16"), "not UTF-8"),
]


@pytest.mark.parametrize(("data", "message"), [h[1:] for h in HOSTILE], ids=[h[0] for h in HOSTILE])
def test_hostile_files_get_one_clear_line(path: Path, data: bytes, message: str) -> None:
    path.write_bytes(data)
    with pytest.raises(PlantFileError) as caught:
        read_plant(path)
    text = str(caught.value)
    assert message in text and text.startswith("mill.plant.json: ") and "\n" not in text and len(text) < 300
    assert path.read_bytes() == data


def test_a_file_cut_anywhere_is_refused(path: Path) -> None:
    whole = plant_text(ONE).encode("utf-8")
    for length in range(0, len(whole.rstrip()), 3):
        path.write_bytes(whole[:length])
        with pytest.raises(PlantFileError) as caught:
            read_plant(path)
        assert str(caught.value).startswith("mill.plant.json: it is ")
    path.write_bytes(whole[:300])
    with pytest.raises(PlantFileError, match="cut off at line"):
        read_plant(path)


def test_the_copy_before_is_offered(path: Path) -> None:
    known = write_plant(ONE, path)
    write_plant(TWO, path, known=known)
    path.write_bytes(path.read_bytes()[:-20])
    with pytest.raises(PlantFileError, match=r"kept as mill\.plant\.json~"):
        read_plant(path)


def test_no_file_a_folder_and_too_large(tmp_path: Path, monkeypatch: pytest.MonkeyPatch) -> None:
    with pytest.raises(PlantFileError, match=r"there is no file .*none\.plant\.json"):
        read_plant(tmp_path / "none.plant.json")
    with pytest.raises(PlantFileError, match="is a folder"):
        read_plant(tmp_path)
    with pytest.raises(PlantFileError, match="cannot be opened"):
        read_plant("a\0b")
    large = tmp_path / "large.plant.json"
    with open(large, "wb") as file:
        file.truncate(plant_file.LARGEST_BYTES + 1)
    with pytest.raises(PlantFileError, match=r"large\.plant\.json has 50 MB; a plant file has at most 50 MB"):
        read_plant(large)


def test_a_pipe_is_not_waited_for(tmp_path: Path) -> None:
    os.mkfifo(tmp_path / "pipe.plant.json")
    with pytest.raises(PlantFileError, match="no ordinary file"):
        read_plant(tmp_path / "pipe.plant.json")


@pytest.mark.parametrize("change", [lambda b: b"\xef\xbb\xbf" + b, lambda b: b.replace(b"\n", b"\r\n")])
def test_other_editors_marks_and_line_ends_are_accepted(path: Path, change: Callable[[bytes], bytes]) -> None:
    path.write_bytes(change(plant_text(ONE).encode("utf-8")))
    assert read_plant(path).plant == ONE
