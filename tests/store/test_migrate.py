"""Old versions are brought up step by step; unknown ones are refused in clear words."""

from typing import Any

import pytest

from onelinefault.errors import PlantFileError
from onelinefault.store.migrate import CURRENT_VERSION, MIGRATIONS, migrated


def renamed(record: dict[str, Any]) -> dict[str, Any]:
    return {("pieces" if key == "parts" else key): value for key, value in record.items()}


def counted(record: dict[str, Any]) -> dict[str, Any]:
    return {**record, "count": len(record["pieces"])}


def test_each_step_runs_once_and_in_order() -> None:
    old = {"version": 1, "parts": [1, 2]}
    assert migrated(old, (renamed, counted)) == {"version": 3, "pieces": [1, 2], "count": 2}
    assert migrated({"version": 2, "pieces": []}, (renamed, counted)) == {"version": 3, "pieces": [], "count": 0}
    assert migrated({"version": 3, "x": 1}, (renamed, counted)) == {"version": 3, "x": 1}
    assert old == {"version": 1, "parts": [1, 2]}


def test_a_newer_version_asks_for_a_newer_program() -> None:
    with pytest.raises(PlantFileError, match=r"newer program \(file version 9; this one knows up to 1\): install"):
        migrated({"version": 9}, ())


@pytest.mark.parametrize("version", [0, -1, "1", 1.0, None, True, [1]])
def test_no_version_is_refused(version: object) -> None:
    with pytest.raises(PlantFileError, match="must be a whole number from 1 to 1"):
        migrated({"version": version}, ())


def test_there_is_one_step_between_any_two_versions() -> None:
    assert len(MIGRATIONS) + 1 == CURRENT_VERSION
