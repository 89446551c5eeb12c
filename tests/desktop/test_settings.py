"""What is remembered is there again when the program is started anew."""

from pathlib import Path

from PySide6.QtCore import QByteArray

from onelinefault.desktop.settings import FITTED, METRIC, OWN_PAPER, TRUE_SCALE, US, Settings
from tests.desktop.windows import settings_in


def again(folder: Path, settings: Settings) -> Settings:
    settings.keep_layout(QByteArray(b"g"), QByteArray(b"s"))  # writes to disk
    return settings_in(folder)


def test_a_fresh_start_has_sensible_values(tmp_path: Path) -> None:
    settings = settings_in(tmp_path)
    assert (settings.recent, settings.units, settings.print_paper, settings.print_scale) == (
        [], METRIC, OWN_PAPER, FITTED,
    )  # fmt: skip
    assert not settings.drawer_open
    assert all(part.isEmpty() for part in settings.layout())


def test_recent_files_newest_first_each_once_and_not_too_many(tmp_path: Path) -> None:
    settings = settings_in(tmp_path)
    files = [tmp_path / f"plant{i}.plant.json" for i in range(12)]
    for file in files:
        settings.add_recent(file)
    settings.add_recent(files[5])
    recent = again(tmp_path, settings).recent
    assert recent[:2] == [files[5], files[11]]
    assert len(recent) == len(set(recent)) == 10
    settings.forget_recent(files[5])
    assert files[5] not in settings.recent


def test_one_recent_file_comes_back_as_a_list(tmp_path: Path) -> None:
    settings = settings_in(tmp_path)
    settings.add_recent(tmp_path / "only.plant.json")
    assert again(tmp_path, settings).recent == [tmp_path / "only.plant.json"]


def test_choices_survive(tmp_path: Path) -> None:
    settings = settings_in(tmp_path)
    settings.units, settings.print_paper, settings.print_scale, settings.drawer_open = US, "A4", TRUE_SCALE, True
    settings.remember_folder(tmp_path / "x.plant.json")
    kept = again(tmp_path, settings)
    assert (kept.units, kept.print_paper, kept.print_scale, kept.drawer_open) == (US, "A4", TRUE_SCALE, True)
    assert kept.folder == str(tmp_path)
    assert [bytes(part.data()) for part in kept.layout()] == [b"g", b"s"]


def test_damaged_values_do_no_harm(tmp_path: Path) -> None:
    (tmp_path / "settings.ini").write_text(
        "units=martian\n[print]\nscale=huge\n[window]\ngeometry=7\ndrawer=perhaps\n[files]\nrecent=\n", encoding="utf-8"
    )
    settings = settings_in(tmp_path)
    assert (settings.units, settings.print_scale, settings.drawer_open, settings.recent) == (METRIC, FITTED, False, [])
    assert settings.layout()[0].isEmpty()
