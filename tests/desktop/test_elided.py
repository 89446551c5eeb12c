"""Words are cut short only where there is no room, and are whole in the tooltip."""

from pytestqt.qtbot import QtBot

from onelinefault.desktop.elided import ElidedLabel


def test_it_takes_what_the_words_need_up_to_its_room(qtbot: QtBot) -> None:
    label = ElidedLabel()
    qtbot.addWidget(label)
    label.setText("short")
    short = label.sizeHint().width()
    label.setText("a much longer text than there is room for")
    assert label.sizeHint().width() > short
    label.set_room(120)
    assert label.sizeHint().width() == 120
    assert label.minimumSizeHint().width() <= 40
    assert label.toolTip() == label.text()


def test_what_is_cut_looks_different_from_what_is_not(qtbot: QtBot) -> None:
    label = ElidedLabel("Brackwater pumping station")
    qtbot.addWidget(label)
    label.resize(300, 20)
    whole = label.grab().toImage()
    other = ElidedLabel("Brackwater pumping")
    qtbot.addWidget(other)
    other.resize(300, 20)
    assert whole != other.grab().toImage()
    label.resize(60, 20)
    other.resize(60, 20)
    assert label.grab().toImage() == other.grab().toImage()  # both are cut to the same beginning
