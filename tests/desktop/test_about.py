"""Help: caution and licence; every key on one page."""

from PySide6.QtWidgets import QLabel
from pytestqt.qtbot import QtBot

from onelinefault.desktop.about import GESTURES, About, Keys, keys_page
from onelinefault.desktop.actions import COMMANDS
from onelinefault.model.caution import CAUTION


def test_about_says_what_to_be_careful_about_and_the_licence(qtbot: QtBot) -> None:
    about = About()
    qtbot.addWidget(about)
    said = [label.text() for label in about.findChildren(QLabel)]
    assert CAUTION in said
    assert any("MIT licence" in text and "without any warranty" in text for text in said)
    assert any(text.startswith("OneLineFault ") for text in said)


def test_every_key_and_gesture_is_on_the_page(qtbot: QtBot) -> None:
    page = keys_page()
    for command in COMMANDS:
        if command.keys:
            assert command.sentence.replace("'", "&#x27;") in page
    assert all(what in page for what, _ in GESTURES)
    keys = Keys()
    qtbot.addWidget(keys)
    assert "Ctrl+S" in page
