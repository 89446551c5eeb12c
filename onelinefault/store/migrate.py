"""Old plant files, brought up one version at a time.

``MIGRATIONS[i]`` takes the plain values of a file of version i + 1 to version i + 2. A step is a pure function on plain
JSON values and knows nothing of today's classes, so it stays right when they change. For each version ever released
one file is kept under tests/generations.
"""

from collections.abc import Callable, Mapping, Sequence
from typing import Any, Final

from onelinefault.errors import PlantFileError
from onelinefault.store.plain import shown

Step = Callable[[dict[str, Any]], dict[str, Any]]

MIGRATIONS: Final[tuple[Step, ...]] = ()  # version 1 is the first
CURRENT_VERSION: Final = len(MIGRATIONS) + 1


def migrated(record: Mapping[str, Any], steps: Sequence[Step] = MIGRATIONS) -> dict[str, Any]:
    """The plain values of a plant file in today's version; the values given are left as they are.

    Raises PlantFileError when the file says no version, or one that this program does not know.
    """
    version, newest = record.get("version"), len(steps) + 1
    if isinstance(version, bool) or not isinstance(version, int) or version < 1:
        raise PlantFileError(f'"version" must be a whole number from 1 to {newest}, found {shown(version)}')
    if version > newest:
        raise PlantFileError(
            f"it was written by a newer program (file version {shown(version)}; this one knows up to {newest}): "
            "install the newer version to open it"
        )
    current = dict(record)
    for number, step in enumerate(steps[version - 1 :], start=version + 1):
        current = {**step(current), "version": number}
    return current
