"""Every command has words, a sentence, a place in a menu and somebody who does it; keys are not given twice."""

from collections import Counter
from types import SimpleNamespace

import pytest
from PySide6.QtCore import QObject
from PySide6.QtGui import QKeySequence
from PySide6.QtWidgets import QMenuBar
from pytestqt.qtbot import QtBot

from onelinefault.desktop.actions import BY_KEY, COMMANDS, MENUS, SUBMENUS, fill_menus, make_actions, tooltip


def all_done() -> tuple[SimpleNamespace, list[str]]:
    done: list[str] = []

    def doer(key: str) -> object:
        return lambda: done.append(key)

    return SimpleNamespace(**{command.key: doer(command.key) for command in COMMANDS}), done


def test_every_command_has_words_and_a_plain_sentence() -> None:
    assert len(BY_KEY) == len(COMMANDS)
    for command in COMMANDS:
        assert command.shown and len(command.sentence.split()) >= 1
        assert command.sentence[0].isupper()


def test_every_command_is_in_a_menu() -> None:
    listed = [key for _, keys in MENUS for key in keys if key != "-" and key not in SUBMENUS]
    assert set(listed) == set(BY_KEY)
    repeated = {key for key, times in Counter(listed).items() if times > 1}
    assert repeated == {"page_setup"}  # belongs to the file and to its sheet


def test_no_key_is_given_twice_and_every_key_can_be_read() -> None:
    keys = [QKeySequence(key).toString() for command in COMMANDS for key in command.keys]
    assert "" not in keys
    assert [key for key, times in Counter(keys).items() if times > 1] == []


def test_letters_in_a_menu_are_not_given_twice() -> None:
    for title, keys in MENUS:
        words = [BY_KEY[key].words if key in BY_KEY else SUBMENUS[key] for key in keys if key != "-"]
        letters = [word[word.index("&") + 1].casefold() for word in words if "&" in word]
        twice = [letter for letter, times in Counter(letters).items() if times > 1]
        assert twice == [], title
    tops = [title[title.index("&") + 1] for title, _ in MENUS]
    assert len(set(tops)) == len(tops)


def test_triggering_an_action_does_its_command(qtbot: QtBot) -> None:
    doer, done = all_done()
    owner = QObject()
    actions = make_actions(owner, [doer])
    for key in ("undo", "rotate", "save", "line_to_earth"):
        actions[key].trigger()
    assert done == ["undo", "rotate", "save", "line_to_earth"]
    assert actions["three_phase"].actionGroup() is not None
    actions["three_phase"].setChecked(True)
    assert not actions["line_to_earth"].isChecked()


def test_a_command_that_nobody_does_is_found_at_once(qtbot: QtBot) -> None:
    doer, _ = all_done()
    del doer.reroute
    with pytest.raises(LookupError, match="reroute"):
        make_actions(QObject(), [doer])


def test_the_menu_bar_is_built_from_the_table(qtbot: QtBot) -> None:
    doer, _ = all_done()
    owner, bar = QObject(), QMenuBar()
    qtbot.addWidget(bar)
    actions = make_actions(owner, [doer])
    left_open = fill_menus(bar, actions)
    assert set(left_open) == set(SUBMENUS)
    assert [action.text() for action in bar.actions()] == [title for title, _ in MENUS]


def test_tooltips_name_the_key() -> None:
    assert tooltip(BY_KEY["save"]).endswith("(Ctrl+S)")
    assert tooltip(BY_KEY["clear_fault"]).endswith("(Esc)")
    assert "(" not in tooltip(BY_KEY["align_left"])
