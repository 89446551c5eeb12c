"""Whether a window can be opened here, and which system packages are missing for it or for drawing at all.

Package names are those of Debian and Ubuntu; found by running in a bare system.
"""

import ctypes
import os
import sys
from collections.abc import Mapping
from typing import Final

DRAWING_LIBRARIES: Final = {
    "libGL.so.1": "libgl1",
    "libEGL.so.1": "libegl1",
    "libxkbcommon.so.0": "libxkbcommon0",
    "libglib-2.0.so.0": "libglib2.0-0",
    "libgthread-2.0.so.0": "libglib2.0-0",
    "libfreetype.so.6": "libfreetype6",
    "libfontconfig.so.1": "libfontconfig1",
    "libdbus-1.so.3": "libdbus-1-3",
}
WINDOW_LIBRARIES: Final = {
    "libxcb.so.1": "libxcb1",
    "libxcb-cursor.so.0": "libxcb-cursor0",
    "libxcb-icccm.so.4": "libxcb-icccm4",
    "libxcb-keysyms.so.1": "libxcb-keysyms1",
    "libxcb-shape.so.0": "libxcb-shape0",
    "libxcb-xkb.so.1": "libxcb-xkb1",
    "libxkbcommon-x11.so.0": "libxkbcommon-x11-0",
}
_WITHOUT_SCREEN: Final = ("offscreen", "minimal")


def window_trouble(environment: Mapping[str, str]) -> str:
    """Why no window can be opened, in a sentence; empty where one can.

    On Linux Qt would end the whole program when it finds no display, so this is asked before.
    """
    if environment.get("QT_QPA_PLATFORM", "").split(":")[0] in _WITHOUT_SCREEN:
        return f"no window: QT_QPA_PLATFORM is {environment['QT_QPA_PLATFORM']}"
    if not sys.platform.startswith("linux"):
        return ""
    if environment.get("WAYLAND_DISPLAY"):
        return ""
    display = environment.get("DISPLAY")
    if not display:
        return "no window: there is no display here"
    missing = missing_packages(WINDOW_LIBRARIES)
    if missing:
        return f"no window: Qt misses system libraries; install them with: {install_command(missing)}"
    return "" if _display_answers(display) else f"no window: the display {display} does not answer"


def missing_packages(libraries: Mapping[str, str]) -> list[str]:
    """The packages of those libraries that cannot be loaded here, each once."""
    return list(dict.fromkeys(package for library, package in libraries.items() if not _loads(library)))


def _loads(library: str) -> bool:
    try:
        ctypes.CDLL(library)
    except OSError:
        return False
    return True


def _display_answers(display: str) -> bool:
    """Ask the X server itself, with the rights that Qt will have."""
    try:
        xcb = ctypes.CDLL("libxcb.so.1")
    except OSError:
        return False
    xcb.xcb_connect.restype = ctypes.c_void_p
    connection = ctypes.c_void_p(xcb.xcb_connect(display.encode(), None))
    broken = bool(xcb.xcb_connection_has_error(connection))
    xcb.xcb_disconnect(connection)
    return not broken


def install_command(packages: list[str]) -> str:
    """The command that installs packages on Debian and Ubuntu."""
    return f"sudo apt-get install --no-install-recommends {' '.join(packages)}"


def qt_trouble(error: ImportError) -> str:
    """What to do when Qt cannot be loaded, in one line: the packages that are missing, or Qt itself."""
    said = " ".join(str(error).split())
    if isinstance(error, ModuleNotFoundError) and (error.name or "").startswith("PySide6"):
        return (
            "nothing can be drawn: PySide6-Essentials is not installed; install it with: pip install PySide6-Essentials"
        )
    named = [package for library, package in (DRAWING_LIBRARIES | WINDOW_LIBRARIES).items() if library in said]
    packages = list(dict.fromkeys([*named, *missing_packages(DRAWING_LIBRARIES)]))
    if packages and sys.platform.startswith("linux"):
        remedy = f"install what it misses with: {install_command(packages)}"
        remedy += " (libglib2.0-0t64 on newer Ubuntu)" if "libglib2.0-0" in packages else ""
    else:
        remedy = "install the system library that it names"
    return f"nothing can be drawn: Qt cannot be loaded ({said}); {remedy}"


def draw_without_screen() -> None:
    """Tell Qt, before it is loaded, that files are drawn and no window is wanted."""
    if sys.platform.startswith("linux"):
        os.environ["QT_QPA_PLATFORM"] = "offscreen"
