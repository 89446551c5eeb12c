"""How the surroundings of the sheet look, light or dark as the system wants; the paper itself stays light."""

from __future__ import annotations

import sys
from collections.abc import Mapping
from dataclasses import dataclass
from typing import Final

from PySide6.QtCore import QObject, Qt
from PySide6.QtGui import QColor, QFont, QGuiApplication, QPalette
from PySide6.QtWidgets import QApplication, QWidget

from onelinefault.drawing.painter import load_fonts
from onelinefault.drawing.palette import SHEET

_TEXT_PT: Final = 9.0
_USUAL_SYSTEM_PT: Final = 13.0 if sys.platform == "darwin" else 10.0


@dataclass(frozen=True, slots=True)
class Surroundings:
    """The colours of everything round the paper."""

    panel: str
    line: str
    field: str
    tile: str
    ink: str
    muted: str
    chosen: str
    on_chosen: str
    accent: str
    accent_tint: str
    focus: str
    hover: str
    trouble: str
    stale: str
    status: str
    on_status: str
    on_status_muted: str


LIGHT: Final = Surroundings(
    panel="#F5F3EE", line="#D5D0C4", field="#FFFFFF", tile="#FBFAF6", ink="#22303C", muted="#5F6A74",
    chosen="#22303C", on_chosen="#FFFFFF", accent="#C8501E", accent_tint="#FBE9DF", focus="#0F6FD1", hover="#EBE7DD",
    trouble="#8A0F32", stale="#8D959B", status="#22303C", on_status="#F2F0EA", on_status_muted="#C9D0D6",
)  # fmt: skip
DARK: Final = Surroundings(
    panel="#242B31", line="#414A52", field="#2E363D", tile="#2E363D", ink="#ECE9E1", muted="#A9B3BB",
    chosen="#ECE9E1", on_chosen="#1E252B", accent="#EE8A5C", accent_tint="#4A342A", focus="#7DB7F5", hover="#333C44",
    trouble="#FF9DB4", stale="#7F8890", status="#171C20", on_status="#ECE9E1", on_status_muted="#A9B3BB",
)  # fmt: skip


def text_scale(system_pt: float) -> float:
    """How much larger than designed text is set for a person whose system font has this size in points.

    System fonts of up to 10 pt (13 pt on a Mac) are what the window is designed for; larger ones enlarge it in
    proportion, at most two and a half times.
    """
    return min(max(system_pt / _USUAL_SYSTEM_PT, 1.0), 2.5)


def widget_scale(widget: QWidget) -> float:
    """How much larger a widget's text is than designed, at most 1.6 times: sizes in pixels follow it."""
    return min(max(widget.font().pointSizeF() / _TEXT_PT, 1.0), 1.6)


def symbol_palette(palette: QPalette) -> Mapping[str, str]:
    """Colours for symbols that stand on a tile instead of on paper."""
    ink, tile = palette.color(QPalette.ColorRole.WindowText), palette.color(QPalette.ColorRole.AlternateBase)
    return {**SHEET, "ink": ink.name(), "paper": tile.name(), "muted": palette.placeholderText().color().name()}


def qt_palette(colours: Surroundings) -> QPalette:
    """The same colours for what Qt and the self-painted widgets draw.

    Window: panel; Base: entry fields; AlternateBase: tiles; Mid: thin lines; Highlight: focus; PlaceholderText: muted;
    BrightText: accent.
    """
    role = QPalette.ColorRole
    palette = QPalette(QColor(colours.panel))
    chosen = {
        role.Window: colours.panel, role.WindowText: colours.ink, role.Base: colours.field,
        role.AlternateBase: colours.tile, role.Text: colours.ink, role.Button: colours.field,
        role.ButtonText: colours.ink, role.PlaceholderText: colours.muted, role.Mid: colours.line,
        role.Highlight: colours.focus, role.HighlightedText: "#FFFFFF" if colours is LIGHT else "#10161B",
        role.ToolTipBase: colours.status, role.ToolTipText: colours.on_status, role.BrightText: colours.accent,
        role.Link: colours.focus, role.Midlight: colours.hover,
    }  # fmt: skip
    for key, colour in chosen.items():
        palette.setColor(key, QColor(colour))
    for key in (role.WindowText, role.Text, role.ButtonText):
        palette.setColor(QPalette.ColorGroup.Disabled, key, QColor(colours.stale))
    return palette


def stylesheet(c: Surroundings, scale: float = 1.0) -> str:
    """The style sheet of the whole program; sizes of text follow ``scale``."""
    points = {name: f"{size * scale:.2f}pt" for name, size in _SIZES.items()}
    colours = {field: getattr(c, field) for field in Surroundings.__dataclass_fields__}
    names = {**colours, **points, "height_status": f"{22 * scale:.0f}px"}
    text = _SHEET_TEXT
    for name in sorted(names, key=len, reverse=True):
        text = text.replace(f"@{name}", names[name])
    return text


_SIZES: Final = {"size_heading": 11.25, "size_text": 9.0, "size_small": 8.25, "size_row": 8.6, "size_caps": 7.5}

_SHEET_TEXT: Final = """
QMainWindow::separator { background: @line; width: 1px; height: 1px; }
QMainWindow::separator:hover { background: @focus; }
QMenuBar { background: @panel; color: @ink; border-bottom: 1px solid @line; }
QMenuBar::item { padding: 3px 9px; background: transparent; border-radius: 4px; }
QMenuBar::item:selected, QMenuBar::item:pressed { background: @chosen; color: @on_chosen; }
QMenu { background: @field; color: @ink; border: 1px solid @line; padding: 4px; }
QMenu::item { padding: 4px 26px 4px 22px; border-radius: 4px; }
QMenu::item:selected { background: @chosen; color: @on_chosen; }
QMenu::item:disabled { color: @stale; background: transparent; }
QMenu::separator { height: 1px; background: @line; margin: 4px 8px; }
QToolTip { background: @status; color: @on_status; border: none; padding: 4px 7px; }
QStatusBar { background: @status; color: @on_status; min-height: @height_status; }
QStatusBar QLabel { color: @on_status; font-size: @size_small; padding: 0 10px; }
QStatusBar::item { border: none; }
QToolBar { background: @panel; border: none; border-bottom: 1px solid @line; padding: 0; spacing: 0; }
QLabel[part="heading"] { font-size: @size_heading; font-weight: bold; color: @ink; }
QLabel[part="muted"] { color: @muted; font-size: @size_text; }
QLabel[part="label"] { color: @muted; font-size: @size_row; }
QLabel[part="caption"] { color: @muted; font-size: @size_small; }
QLabel[part="caps"] { color: @muted; font-size: @size_caps; font-weight: bold; letter-spacing: 1px; }
QLabel[part="value"] { color: @ink; font-size: @size_row; }
QLabel[part="trouble"] { color: @trouble; font-size: @size_small; }
QLabel[part="label"]:disabled, QLabel[part="value"]:disabled, QLabel[part="caps"]:disabled { color: @stale; }
QLineEdit, QComboBox, QSpinBox { background: @field; color: @ink; border: 1px solid @line; border-radius: 5px;
    padding: 2px 7px; min-height: 17px; font-size: @size_row; selection-background-color: @focus; }
QLineEdit:focus, QComboBox:focus, QSpinBox:focus { border: 2px solid @focus; padding: 1px 6px; }
QLineEdit[fault="true"], QComboBox[fault="true"] { border: 2px solid @trouble; padding: 1px 6px; }
QComboBox { padding-right: 18px; }
QComboBox QLineEdit, QComboBox QLineEdit:focus { border: none; padding: 0; background: transparent; min-height: 0; }
QComboBox::drop-down { border: none; width: 18px; }
QComboBox::down-arrow { image: none; width: 0; height: 0; }
QComboBox QAbstractItemView { background: @field; color: @ink; border: 1px solid @line;
    selection-background-color: @chosen; selection-color: @on_chosen; outline: none; }
QPushButton, QToolButton[part="segment"], QToolButton[part="plain"] { background: @field; color: @ink;
    border: 1px solid @line; border-radius: 6px; padding: 3px 9px; min-height: 17px; font-size: @size_text; }
QPushButton:hover, QToolButton[part="segment"]:hover, QToolButton[part="plain"]:hover { background: @hover; }
QPushButton:pressed, QToolButton[part="plain"]:pressed { background: @line; }
QPushButton:disabled, QToolButton[part="plain"]:disabled { color: @stale; }
QPushButton:default { border-color: @ink; }
QToolButton[part="segment"]:checked { background: @chosen; color: @on_chosen; border-color: @chosen; }
QPushButton:focus, QToolButton[part="segment"]:focus, QToolButton[part="plain"]:focus {
    border: 2px solid @focus; padding: 2px 8px; }
QToolButton[tight="true"] { padding: 3px 5px; }
QToolButton[tight="true"]:focus { padding: 2px 4px; }
QToolButton[part="quiet"] { background: transparent; color: @muted; font-size: @size_heading; padding: 0 3px;
    border: 2px solid transparent; border-radius: 4px; }
QToolButton[part="quiet"]:hover { background: @hover; color: @ink; }
QToolButton[part="quiet"]:focus { border-color: @focus; }
QCheckBox { color: @ink; font-size: @size_row; spacing: 7px; }
QCheckBox:focus, QRadioButton:focus { color: @focus; }
QScrollArea { background: transparent; border: none; }
QScrollBar:vertical { background: transparent; width: 10px; margin: 0; }
QScrollBar:horizontal { background: transparent; height: 10px; margin: 0; }
QScrollBar::handle { background: @line; border-radius: 4px; min-height: 24px; min-width: 24px; margin: 1px; }
QScrollBar::handle:hover { background: @stale; }
QScrollBar::add-line, QScrollBar::sub-line, QScrollBar::add-page, QScrollBar::sub-page { background: none; border: none;
    width: 0; height: 0; }
QTabBar { background: transparent; }
QTabBar::tab { background: transparent; color: @muted; border: none; border-bottom: 3px solid transparent;
    padding: 5px 4px 3px 4px; margin: 0 8px; font-size: @size_text; }
QTabBar::tab:selected { color: @ink; border-bottom-color: @accent; font-weight: bold; }
QTabBar::tab:hover { color: @ink; }
QTabBar::tab:focus { color: @focus; }
QTableView { background: @panel; color: @ink; border: none; gridline-color: transparent; font-size: @size_text;
    selection-background-color: @accent_tint; selection-color: @ink; outline: none; }
QTableView::item { padding: 0 3px; border: none; }
QTableView:focus { border: 1px solid @focus; }
QHeaderView { background: @panel; }
QHeaderView::section { background: @panel; color: @muted; border: none; padding: 3px 6px; font-size: @size_small;
    font-weight: bold; }
QTableCornerButton::section { background: @panel; border: none; }
QDialogButtonBox { dialogbuttonbox-buttons-have-icons: 0; }
QFrame[part="notice"] { background: @accent_tint; border: none; border-bottom: 1px solid @line; }
QFrame[part="popup"] { background: @panel; border: 1px solid @focus; border-radius: 7px; }
QListWidget { background: @field; color: @ink; border: 1px solid @line; border-radius: 5px; font-size: @size_row;
    outline: none; }
QListWidget::item { padding: 3px 6px; }
QListWidget::item:selected { background: @chosen; color: @on_chosen; }
"""


class Style(QObject):
    """Dresses the application and changes with the system between light and dark."""

    def __init__(self, app: QApplication) -> None:
        super().__init__(app)
        self._app = app
        self._scale = text_scale(app.font().pointSizeF())
        app.setStyle("Fusion")
        font = QFont(load_fonts())
        font.setPointSizeF(_TEXT_PT * self._scale)
        app.setFont(font)
        self.colours = LIGHT
        hints = QGuiApplication.styleHints()
        hints.colorSchemeChanged.connect(self._follow)
        self.dress(hints.colorScheme() == Qt.ColorScheme.Dark)

    def dress(self, dark: bool) -> None:
        """Put on the light or the dark surroundings."""
        self.colours = DARK if dark else LIGHT
        self._app.setPalette(qt_palette(self.colours))
        self._app.setStyleSheet(stylesheet(self.colours, self._scale))

    def _follow(self, scheme: Qt.ColorScheme) -> None:
        self.dress(scheme == Qt.ColorScheme.Dark)
