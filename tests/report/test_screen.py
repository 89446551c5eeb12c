"""Where no window can be opened, and which packages are missing."""

import ctypes
import sys
from collections.abc import Callable

import pytest

from onelinefault.report import screen


@pytest.fixture
def linux(monkeypatch: pytest.MonkeyPatch) -> None:
    monkeypatch.setattr(sys, "platform", "linux")


def without(*missing: str) -> Callable[[str], object]:
    """A loader of libraries that does not find some of them."""

    def load(name: str) -> object:
        if name in missing:
            raise OSError(f"{name}: cannot open shared object file: No such file or directory")
        return object()

    return load


@pytest.mark.usefixtures("linux")
def test_no_display_means_no_window() -> None:
    assert screen.window_trouble({}) == "no window: there is no display here"
    assert screen.window_trouble({"DISPLAY": ""}) == "no window: there is no display here"
    assert "QT_QPA_PLATFORM is offscreen" in screen.window_trouble({"DISPLAY": ":0", "QT_QPA_PLATFORM": "offscreen"})
    assert "minimal" in screen.window_trouble({"QT_QPA_PLATFORM": "minimal:enable_fonts"})
    assert screen.window_trouble({"WAYLAND_DISPLAY": "wayland-0"}) == ""


def test_other_systems_have_a_display(monkeypatch: pytest.MonkeyPatch) -> None:
    for system in ("win32", "darwin"):
        monkeypatch.setattr(sys, "platform", system)
        assert screen.window_trouble({}) == ""


@pytest.mark.usefixtures("linux")
def test_a_display_that_does_not_answer_means_no_window(monkeypatch: pytest.MonkeyPatch) -> None:
    monkeypatch.setattr(screen, "missing_packages", lambda _: [])
    assert screen.window_trouble({"DISPLAY": ":7654"}) == "no window: the display :7654 does not answer"


@pytest.mark.usefixtures("linux")
def test_libraries_that_a_window_needs_are_named(monkeypatch: pytest.MonkeyPatch) -> None:
    monkeypatch.setattr(ctypes, "CDLL", without("libxcb-icccm.so.4", "libxcb-cursor.so.0"))
    assert screen.window_trouble({"DISPLAY": ":0"}).endswith(
        "install them with: sudo apt-get install --no-install-recommends libxcb-cursor0 libxcb-icccm4"
    )


@pytest.mark.usefixtures("linux")
def test_libraries_that_drawing_needs_are_named(monkeypatch: pytest.MonkeyPatch) -> None:
    monkeypatch.setattr(ctypes, "CDLL", without("libGL.so.1", "libglib-2.0.so.0", "libgthread-2.0.so.0"))
    error = ImportError("libGL.so.1: cannot open shared object file: No such file or directory")
    message = screen.qt_trouble(error)
    assert "\n" not in message and "libGL.so.1" in message
    assert "sudo apt-get install --no-install-recommends libgl1 libglib2.0-0 (libglib2.0-0t64" in message


@pytest.mark.usefixtures("linux")
def test_a_library_named_by_the_loader_alone_is_enough(monkeypatch: pytest.MonkeyPatch) -> None:
    monkeypatch.setattr(ctypes, "CDLL", without())
    message = screen.qt_trouble(ImportError("libEGL.so.1: cannot open\nshared object file"))
    assert message.endswith("libegl1") and "\n" not in message


def test_qt_itself_may_be_missing() -> None:
    error = ModuleNotFoundError("No module named 'PySide6'", name="PySide6")
    assert screen.qt_trouble(error).endswith("pip install PySide6-Essentials")


def test_unknown_libraries_are_shown_as_they_are(monkeypatch: pytest.MonkeyPatch) -> None:
    monkeypatch.setattr(ctypes, "CDLL", without())
    message = screen.qt_trouble(ImportError("libodd.so.3: cannot open shared object file"))
    assert "libodd.so.3" in message and "install the system library that it names" in message
