"""Help: what the program is and what to be careful about; all keys and gestures on one page."""

from __future__ import annotations

from html import escape
from importlib.metadata import PackageNotFoundError, version
from typing import Final

from PySide6.QtCore import Qt
from PySide6.QtGui import QKeySequence
from PySide6.QtWidgets import QDialog, QDialogButtonBox, QLabel, QTextBrowser, QVBoxLayout, QWidget

from onelinefault.desktop.actions import BY_KEY, MENUS
from onelinefault.model.caution import CAUTION

LICENCE: Final = (
    "Copyright © 2026 The OneLineFault authors. Free software under the MIT licence: use, copy, change and pass it on "
    "freely, with the notice of copyright and licence. It comes without any warranty. "
    "The fonts are DejaVu Sans, under their own free licence."
)
GESTURES: Final = (
    ("Click a bus", "faults it; the figures appear on the sheet"),
    ("Drag from the shelf", "places a part; on a wire it is inserted"),
    ("Drag from a terminal", "draws a wire; it finds its way round parts"),
    ("Drag a part", "moves it; its wires stay joined. Alt keeps to one direction"),
    ("Drag a piece of a wire", "sets its corners; Re-route forgets them"),
    ("Drag an end of a selected bus", "stretches it"),
    ("Drag a figure or a name", "puts it elsewhere; it stays there"),
    ("Drag the pin", "slides the fault along the bus or the cable"),
    ("Drag over empty paper", "selects what lies inside; Shift or Ctrl adds"),
    ("Double-click a part", "renames it in place"),
    ("Right-click", "offers what fits the thing under the pointer"),
    ("Wheel", "zooms at the pointer; with Shift it scrolls sideways"),
    ("Middle button, or Space and drag", "pans"),
    ("Arrow keys", "nudge the selection by a module; with Shift by five"),
    ("Enter on the sheet", "goes to the ratings of the selected part; Escape comes back"),
    ("Escape", "leaves what is under way, then clears the fault, then the selection"),
    ("Ctrl+B in a field", "says how the value is known"),
)


def program_version() -> str:
    """The installed version, or a word for a source tree."""
    try:
        return version("onelinefault")
    except PackageNotFoundError:
        return "source tree"


class About(QDialog):
    """Name, version, caution, licence."""

    def __init__(self, parent: QWidget | None = None) -> None:
        super().__init__(parent)
        self.setWindowTitle(self.tr("About OneLineFault"))
        heading = QLabel(f"OneLineFault {program_version()}")
        heading.setProperty("part", "heading")
        what = QLabel(self.tr("Short-circuit studies on a plant's one-line diagram."))
        caution, licence = QLabel(CAUTION), QLabel(LICENCE)
        caution.setAccessibleName(self.tr("Caution"))
        column = QVBoxLayout(self)
        column.setContentsMargins(24, 20, 24, 16)
        column.setSpacing(12)
        for label in (heading, what, caution, licence):
            label.setWordWrap(True)
            label.setTextInteractionFlags(Qt.TextInteractionFlag.TextSelectableByMouse)
            column.addWidget(label)
        column.addWidget(_close(self))
        self.setFixedWidth(480)


class Keys(QDialog):
    """All keys and gestures, made from the commands themselves."""

    def __init__(self, parent: QWidget | None = None) -> None:
        super().__init__(parent)
        self.setWindowTitle(self.tr("Keys and gestures"))
        page = QTextBrowser()
        page.setHtml(keys_page())
        page.setAccessibleName(self.windowTitle())
        column = QVBoxLayout(self)
        column.addWidget(page)
        column.addWidget(_close(self))
        self.resize(680, 720)


def keys_page() -> str:
    """The page of keys and gestures as HTML."""
    rows = [_section("Gestures"), *(_row(what, does) for what, does in GESTURES)]
    for title, keys in MENUS:
        commands = [BY_KEY[key] for key in keys if key in BY_KEY and (BY_KEY[key].keys or BY_KEY[key].shown_key)]
        if commands:
            rows.append(_section(title.replace("&", "")))
        for command in commands:
            names = [QKeySequence(key).toString(QKeySequence.SequenceFormat.NativeText) for key in command.keys]
            rows.append(_row(", ".join(names) or command.shown_key, command.sentence))
    return f"<table cellspacing='0' cellpadding='3'>{''.join(rows)}</table>"


def _section(words: str) -> str:
    return f"<tr><td colspan='2'><br><b>{escape(words)}</b></td></tr>"


def _row(what: str, does: str) -> str:
    return f"<tr><td><b>{escape(what)}</b>&nbsp;&nbsp;</td><td>{escape(does)}</td></tr>"


def _close(dialog: QDialog) -> QDialogButtonBox:
    buttons = QDialogButtonBox(QDialogButtonBox.StandardButton.Close)
    buttons.rejected.connect(dialog.reject)
    return buttons
