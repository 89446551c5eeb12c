"""Every command of the window: its words, keys and plain sentence. Menus, help and context menus are built from here.

A command's key is also the name of the method that does it, in one of the objects given to ``make_actions``. The words
stand here in English; translators find them under the context "Commands".
"""

from __future__ import annotations

from collections.abc import Callable, Iterable, Mapping
from dataclasses import dataclass
from typing import Any, Final

from PySide6.QtCore import QCoreApplication, QObject
from PySide6.QtGui import QAction, QActionGroup, QKeySequence
from PySide6.QtWidgets import QMenu, QMenuBar

_CONTEXT: Final = "Commands"


@dataclass(frozen=True, slots=True)
class Command:
    """One command.

    keys: shortcuts, the first one is shown. short: words for a narrow button. among: commands of which one is chosen.
    shown_key: a key that does the same but is handled where it is pressed, so that entries can have it for themselves.
    """

    key: str
    words: str
    tip: str
    keys: tuple[str, ...] = ()
    short: str = ""
    among: str = ""
    ticked: bool = False
    shown_key: str = ""

    @property
    def shown(self) -> str:
        """The words in the language of the window."""
        return QCoreApplication.translate(_CONTEXT, self.words)

    @property
    def sentence(self) -> str:
        """The plain sentence for the status line."""
        return QCoreApplication.translate(_CONTEXT, self.tip)


def _c(key: str, words: str, tip: str, *keys: str, **more: Any) -> Command:
    return Command(key, words, tip, keys, **more)


COMMANDS: Final[tuple[Command, ...]] = (
    # File
    _c("new_plant", "&New", "Start a new plant on an empty sheet", "Ctrl+N"),
    _c("open_plant", "&Open…", "Open a plant file", "Ctrl+O"),
    _c("save", "&Save", "Save the plant to its file", "Ctrl+S"),
    _c("save_as", "Save &as…", "Save under another name", "Ctrl+Shift+S"),
    _c("page_setup", "Pa&ge setup…", "Paper of the sheet, paper of the printer, true scale or fitted", "Ctrl+Shift+P"),
    _c("print_preview", "Print pre&view…", "See the sheets as the printer will show them"),
    _c("print_sheets", "&Print…", "Print the sheets with the figures shown", "Ctrl+P", short="Print"),
    _c("export_drawing", "Export &drawing…", "Write the annotated sheets as PDF, SVG or PNG", "Ctrl+Shift+E"),
    _c("export_table", "Export &bus table…", "Write the fault currents of all buses as a table"),
    _c("close_window", "&Quit", "Close the window; asks about unsaved work", "Ctrl+Q"),
    # Edit
    _c("undo", "&Undo", "Take the last step back", "Ctrl+Z", short="Undo"),
    _c("redo", "&Redo", "Do the step again that was taken back", "Ctrl+Shift+Z", "Ctrl+Y", short="Redo"),
    _c("cut", "Cu&t", "Take the selected parts away and keep a copy", "Ctrl+X"),
    _c("copy", "&Copy", "Copy the selected parts and the wires among them", "Ctrl+C"),
    _c("paste", "&Paste", "Put copied parts at the pointer", "Ctrl+V"),
    _c("duplicate", "Dup&licate", "Put a copy of the selected parts beside them", "Ctrl+D"),
    _c("delete", "&Delete", "Take the selection away; a part in series heals into its wire", "Del", "Backspace"),
    _c("select_all", "Select &all", "Select everything on this sheet", "Ctrl+A"),
    _c("find_part", "&Find by name…", "Find a part by its name on any sheet", "Ctrl+F"),
    _c("rename", "Re&name", "Rename the selected part in place", "F2"),
    # Part
    _c("place_part", "&Place a part…", "Type a few letters of a part's kind at the pointer, Enter places it", "A", "/"),
    _c("draw_wire", "Draw a &wire", "Draw a wire click by click", "W"),
    _c("rotate", "&Rotate", "Turn the selection by a quarter, clockwise", "R"),
    _c("mirror", "&Mirror", "Mirror the selection left to right", "M"),
    _c("open_close", "&Open or close", "Open or close the selected devices", "O"),
    _c("in_out_of_service", "&In or out of service", "Take the selected parts out of service, or back into it", "I"),
    _c("align_left", "Align &left", "Line the selection up on the left"),
    _c("align_centre", "Align &centres", "Put the selected parts under one another"),
    _c("align_right", "Align ri&ght", "Line the selection up on the right"),
    _c("align_top", "Align &top", "Line the selection up at the top"),
    _c("align_middle", "Align mi&ddles", "Put the selected parts beside one another"),
    _c("align_bottom", "Align &bottom", "Line the selection up at the bottom"),
    _c("distribute_across", "Distribute &across", "Space the selected parts evenly from left to right"),
    _c("distribute_down", "Distribute dow&n", "Space the selected parts evenly from top to bottom"),
    _c("reroute", "Re-ro&ute", "Forget the corners set by hand in the selected wires and parts' wires", "Ctrl+R"),
    # View
    _c("zoom_in", "Zoom &in", "Nearer", "Ctrl++", "Ctrl+=", "+"),
    _c("zoom_out", "Zoom &out", "Farther", "Ctrl+-", "-"),
    _c("fit", "&Fit sheet", "Show the whole sheet", "Ctrl+0"),
    _c("fit_selection", "Fit &selection", "Show what is selected", "Ctrl+9"),
    _c("detail_1", "Detail &1: ribbons and gauges", "Show where the current flows and what voltage is left",
       "Ctrl+1", among="detail"),
    _c("detail_2", "Detail &2: plus main figures", "Show the main figures too", "Ctrl+2", among="detail"),
    _c("detail_3", "Detail &3: plus phases and sequences", "Show phases, angles and sequence values too", "Ctrl+3",
       among="detail"),
    _c("toggle_drawer", "Open or close the &drawer", "Show or hide the tables", "F9"),
    _c("next_panel", "Go to the &next panel", "Move the keyboard to the next panel", "F6"),
    _c("restore_panels", "&Restore panels", "Put all panels back where they were at first"),
    _c("units_metric", "New plants: &metric, 50 Hz, ISO paper", "What a new plant starts with", among="units"),
    _c("units_us", "New plants: &US, 60 Hz, ANSI paper", "What a new plant starts with", among="units"),
    # Fault
    _c("fault_here", "&Fault here",
       "Fault the bus or cable under the pointer, or the selected one, or the next one clicked", "F"),
    _c("three_phase", "&Three-phase", "All three phases", "1", among="kind"),
    _c("line_to_line", "Two &phases", "Two phases, clear of earth", "2", among="kind"),
    _c("two_lines_to_earth", "Two phases to &earth", "Two phases and earth", "3", among="kind"),
    _c("line_to_earth", "&One phase to earth", "One phase and earth", "4", among="kind"),
    _c("next_phases", "&Next phases", "Let the fault join other phases", "P"),
    _c("largest", "&Largest current", "Strongest supply, cold conductors", among="level"),
    _c("smallest", "&Smallest current", "Weakest supply, hot conductors", among="level"),
    _c("clear_fault", "&Clear the fault", "Take the pin and its figures away; Escape does the same", shown_key="Esc"),
    # Sheets
    _c("add_sheet", "&Add a sheet", "Add a sheet at the end", "Ctrl+Shift+N"),
    _c("rename_sheet", "&Rename this sheet", "Give this sheet another title"),
    _c("remove_sheet", "Re&move this sheet", "Remove this sheet with everything on it; undo brings it back"),
    _c("sheet_earlier", "Move &forward", "Put this sheet before the one before"),
    _c("sheet_later", "Move &back", "Put this sheet after the next one"),
    _c("next_sheet", "&Next sheet", "Turn to the next sheet", "Ctrl+PgDown"),
    _c("previous_sheet", "&Previous sheet", "Turn to the sheet before", "Ctrl+PgUp"),
    # Help
    _c("show_keys", "&Keys and gestures", "All keys and gestures on one page", "F1"),
    _c("show_about", "&About OneLineFault", "Version, licence, and what to be careful about"),
)  # fmt: skip
BY_KEY: Final[Mapping[str, Command]] = {command.key: command for command in COMMANDS}

# what stands in which menu: command keys, "-" for a line, ">name" for a submenu that the window fills
MENUS: Final[tuple[tuple[str, tuple[str, ...]], ...]] = (
    ("&File", (
        "new_plant", "open_plant", ">recent", "-", "save", "save_as", "-", "page_setup", "print_preview",
        "print_sheets", "export_drawing", "export_table", "-", "close_window")),
    ("&Edit", (
        "undo", "redo", "-", "cut", "copy", "paste", "duplicate", "delete", "-", "select_all", "find_part", "rename")),
    ("&Part", (
        "place_part", "draw_wire", "-", "rotate", "mirror", "open_close", "in_out_of_service", "-", "align_left",
        "align_centre", "align_right", "align_top", "align_middle", "align_bottom", "distribute_across",
        "distribute_down", "-", "reroute", ">to_sheet")),
    ("&View", (
        "zoom_in", "zoom_out", "fit", "fit_selection", "-", "detail_1", "detail_2", "detail_3", "-", ">panels",
        "toggle_drawer", "next_panel", "restore_panels", "-", "units_metric", "units_us")),
    ("F&ault", (
        "fault_here", "clear_fault", "-", "three_phase", "line_to_line", "two_lines_to_earth", "line_to_earth",
        "next_phases", "-", "largest", "smallest")),
    ("&Sheets", (
        "add_sheet", "rename_sheet", "page_setup", "remove_sheet", "-", "sheet_earlier", "sheet_later", "-",
        "next_sheet", "previous_sheet")),
    ("&Help", ("show_keys", "show_about")),
)  # fmt: skip
SUBMENUS: Final = {
    ">recent": "Open re&cent",
    ">to_sheet": "To another &sheet",
    ">panels": "&Panels",
}


def make_actions(owner: QObject, doers: Iterable[object]) -> dict[str, QAction]:
    """One action a command, joined to the method of that name. Raises LookupError when nobody does a command."""
    groups: dict[str, QActionGroup] = {}
    known = tuple(doers)
    actions = {}
    for command in COMMANDS:
        action = QAction(command.shown, owner)
        action.setObjectName(command.key)
        action.setShortcuts([QKeySequence(key) for key in command.keys])
        action.setStatusTip(command.sentence)
        action.setToolTip(tooltip(command))
        if command.short:
            action.setIconText(QCoreApplication.translate(_CONTEXT, command.short))
        if command.shown_key:
            action.setText(f"{command.shown}\t{command.shown_key}")
        if command.among:
            action.setCheckable(True)
            if command.among not in groups:
                groups[command.among] = QActionGroup(owner)
            groups[command.among].addAction(action)
        action.triggered.connect(_doer(known, command.key))
        actions[command.key] = action
    return actions


def _doer(doers: tuple[object, ...], key: str) -> Callable[[], None]:
    for doer in doers:
        method = getattr(doer, key, None)
        if callable(method):
            done: Callable[[], None] = method
            return done
    raise LookupError(f"nobody does the command {key}")


def tooltip(command: Command) -> str:
    """The sentence with the first key."""
    keys = command.keys or ((command.shown_key,) if command.shown_key else ())
    native = QKeySequence(keys[0]).toString(QKeySequence.SequenceFormat.NativeText) if keys else ""
    return f"{command.sentence} ({native})" if native else command.sentence


def fill_menus(bar: QMenuBar, actions: Mapping[str, QAction]) -> dict[str, QMenu]:
    """The menu bar; gives the submenus that the window fills, by name."""
    left_open: dict[str, QMenu] = {}
    for title, keys in MENUS:
        menu = bar.addMenu(QCoreApplication.translate(_CONTEXT, title))
        for key in keys:
            if key == "-":
                menu.addSeparator()
            elif key in SUBMENUS:
                left_open[key] = menu.addMenu(QCoreApplication.translate(_CONTEXT, SUBMENUS[key]))
            else:
                menu.addAction(actions[key])
    return left_open
