"""What the program remembers between sessions: layout, recent files, units, how to print."""

from __future__ import annotations

from pathlib import Path
from typing import Final

from PySide6.QtCore import QByteArray, QSettings

LAYOUT_VERSION: Final = 1
METRIC, US = "metric", "us"
TRUE_SCALE, FITTED = "true", "fit"
OWN_PAPER: Final = ""
_MOST_RECENT: Final = 10


class Settings:
    """A thin face on QSettings, so that keys and kinds of values are in one place."""

    def __init__(self, store: QSettings | None = None) -> None:
        self._store = store or QSettings(
            QSettings.Format.IniFormat, QSettings.Scope.UserScope, "OneLineFault", "OneLineFault"
        )

    @property
    def recent(self) -> list[Path]:
        """Files opened or saved last, the newest first."""
        kept = self._store.value("files/recent", [])
        texts = [kept] if isinstance(kept, str) else kept if isinstance(kept, list) else []
        return [Path(str(text)) for text in texts if text]

    def add_recent(self, path: Path) -> None:
        """A file was opened or saved."""
        paths = [path.resolve(), *(known for known in self.recent if known != path.resolve())]
        self._store.setValue("files/recent", [str(known) for known in paths[:_MOST_RECENT]])

    def forget_recent(self, path: Path) -> None:
        """A file is not there any more."""
        self._store.setValue("files/recent", [str(known) for known in self.recent if known != path])

    @property
    def folder(self) -> str:
        """The folder used last."""
        return str(self._store.value("files/folder", "") or "")

    def remember_folder(self, path: Path) -> None:
        """A file in this folder was opened or written."""
        self._store.setValue("files/folder", str(path.resolve().parent))

    @property
    def units(self) -> str:
        """What new plants start with: METRIC or US."""
        return US if self._store.value("units", METRIC) == US else METRIC

    @units.setter
    def units(self, units: str) -> None:
        self._store.setValue("units", units)

    @property
    def print_paper(self) -> str:
        """The printer's paper, a key of PAPER_MM; OWN_PAPER: each sheet's own."""
        return str(self._store.value("print/paper", OWN_PAPER) or OWN_PAPER)

    @print_paper.setter
    def print_paper(self, paper: str) -> None:
        self._store.setValue("print/paper", paper)

    @property
    def print_scale(self) -> str:
        """FITTED to the printer's paper, or TRUE_SCALE over as many pages as it takes."""
        return TRUE_SCALE if self._store.value("print/scale", FITTED) == TRUE_SCALE else FITTED

    @print_scale.setter
    def print_scale(self, scale: str) -> None:
        self._store.setValue("print/scale", scale)

    def layout(self) -> tuple[QByteArray, QByteArray]:
        """The window's geometry and the state of its panels; empty at first."""
        return _bytes(self._store.value("window/geometry")), _bytes(self._store.value("window/state"))

    def keep_layout(self, geometry: QByteArray, state: QByteArray) -> None:
        """Remember geometry and panels."""
        self._store.setValue("window/geometry", geometry)
        self._store.setValue("window/state", state)
        self._store.sync()

    @property
    def drawer_open(self) -> bool:
        """Whether the drawer was open."""
        return str(self._store.value("window/drawer", "false")).lower() == "true"

    @drawer_open.setter
    def drawer_open(self, is_open: bool) -> None:
        self._store.setValue("window/drawer", is_open)


def _bytes(value: object) -> QByteArray:
    return value if isinstance(value, QByteArray) else QByteArray()
