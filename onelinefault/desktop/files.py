"""Commands of the File menu that have to do with plant files: new, open, save, and the question about unsaved work.

Dialogs never stop the program: they are opened, and their answers come as signals.
"""

from __future__ import annotations

from collections.abc import Callable
from pathlib import Path
from typing import TYPE_CHECKING, Final

from PySide6.QtCore import QObject, Qt, QTimer
from PySide6.QtGui import QAction
from PySide6.QtWidgets import QFileDialog, QMessageBox, QWidget

from onelinefault.desktop.keeper import Keeper, LeftOver, left_over
from onelinefault.desktop.new_plant import new_plant
from onelinefault.errors import FileChangedError, FileInUseError, PlantFileError
from onelinefault.store.plant_file import SUFFIX, read_plant

if TYPE_CHECKING:
    from onelinefault.desktop.notice_bar import NoticeBar
    from onelinefault.desktop.session import Session
    from onelinefault.desktop.settings import Settings

_SYNC_MS: Final = 5000
_RESTORE, _DISCARD, _LATER = "restore", "discard", "later"


class Files(QObject):
    """Does the commands of their names for one window.

    take_pending: takes what is typed somewhere and not yet entered, so that it is saved too.
    """

    def __init__(
        self,
        session: Session,
        settings: Settings,
        window: QWidget,
        notice: NoticeBar,
        state_folder: Path,
        take_pending: Callable[[], None],
    ) -> None:
        super().__init__(window)
        self._take_pending = take_pending
        self._session, self._settings, self._window = session, settings, window
        self._notice, self._state_folder = notice, state_folder
        self._keeper = Keeper(state_folder)
        self._then: Callable[[], None] | None = None
        self._wanted: Path | None = None
        self._left_over: LeftOver | None = None
        self._letting_go = False
        self.dialog: QFileDialog | QMessageBox | None = None
        self._sync = QTimer(self)
        self._sync.setInterval(_SYNC_MS)
        self._sync.timeout.connect(self._keeper.sync)
        session.plant_changed.connect(self._follow)
        notice.answered.connect(self._answer_notice)

    # commands

    def new_plant(self) -> None:
        """Start a new plant."""
        self._after_asking(self._new)

    def open_plant(self) -> None:
        """Choose a file to open."""
        self._after_asking(self._choose_file)

    def open_recent(self, action: QAction) -> None:
        """Open the file that an action of the submenu names."""
        self.open_path(Path(str(action.data())))

    def open_path(self, path: Path) -> None:
        """Open a file."""
        self._wanted = path
        self._after_asking(self._open_wanted)

    def save(self) -> None:
        """Save to the plant's file, or ask for a name."""
        self._take_pending()
        if self._session.path is None:
            self.save_as()
        else:
            self._save_to(self._session.path, same=True)

    def save_as(self) -> None:
        """Ask for a name and save."""
        self._take_pending()
        dialog = self._file_dialog(self.tr("Save the plant"), QFileDialog.AcceptMode.AcceptSave)
        dialog.selectFile(self._suggested_name())
        dialog.fileSelected.connect(self._save_chosen)
        dialog.rejected.connect(self._forget_then)
        dialog.open()

    # closing

    def may_close(self) -> bool:
        """Whether the window may close now; if not, the person is asked, and it is closed after the answer."""
        self._take_pending()
        if self._letting_go or not self._session.edited:
            return True
        self._ask_unsaved(self._close_window)
        return False

    def release(self) -> None:
        """The window is gone: no lock and no journal are left."""
        self._sync.stop()
        self._keeper.release()

    def _close_window(self) -> None:
        self._letting_go = True
        self._window.close()

    # after a crash

    def offer_left_over(self) -> None:
        """Offer the work of a program that has ended without closing its plant, if there is any."""
        self._left_over = next(left_over(self._state_folder), None)
        if self._left_over is not None:
            count = len(self._left_over.found.edits)
            steps = self.tr("1 step") if count == 1 else self.tr("{0} steps").format(count)
            words = self.tr("Unsaved work was found: {0}, {1}. The program had ended before it was saved.")
            answers = [(_RESTORE, self.tr("Restore")), (_DISCARD, self.tr("Discard")), (_LATER, self.tr("Later"))]
            self._notice.ask(words.format(self._left_over.name, steps), answers)

    def _answer_notice(self, key: str) -> None:
        if self._left_over is None:
            return
        if key == _RESTORE:
            self._after_asking(self._restore)
        elif key == _DISCARD:
            self._left_over.discard()
            self._left_over = None

    def _restore(self) -> None:
        assert self._left_over is not None
        left, self._left_over = self._left_over, None
        file = left.found.file
        if file is None:
            self._new()
        elif not self._open_for(left, file):
            return
        edit, said = left.edit_onto(self._session.plant)
        if self._session.apply(edit):
            left.discard()
            self._session.said.emit(said or self.tr("The unsaved work is restored; save it now."))

    def _open_for(self, left: LeftOver, file: Path) -> bool:
        try:
            opened = self._keeper.open(file)
        except PlantFileError as error:
            self._tell(str(error))
            return False
        self._session.open(opened.plant, file)
        if opened.fingerprint != left.found.fingerprint:
            words = self.tr(
                "{0} was changed after the unsaved work was done, so that work no longer fits. It is kept in {1}."
            )
            self._tell(words.format(file.name, left.journal))
            return False
        return True

    # what the commands are made of

    def _new(self) -> None:
        self._keeper.start_new()
        self._session.open(new_plant(self._settings.units), None)

    def _choose_file(self) -> None:
        dialog = self._file_dialog(self.tr("Open a plant"), QFileDialog.AcceptMode.AcceptOpen)
        dialog.setFileMode(QFileDialog.FileMode.ExistingFile)
        dialog.fileSelected.connect(self._open_chosen)
        dialog.open()

    def _open_chosen(self, name: str) -> None:
        self._wanted = Path(name)
        self._open_wanted()

    def _open_wanted(self) -> None:
        path = self._wanted
        assert path is not None
        try:
            opened = self._keeper.open(path)
        except FileInUseError as error:
            self._offer_copy(str(error))
            return
        except PlantFileError as error:
            if not path.exists():
                self._settings.forget_recent(path)
            self._tell(str(error))
            return
        self._session.open(opened.plant, path)
        self._remember(path)
        troubles = [finding.message for finding in opened.findings]
        if troubles:
            self._tell("\n".join([self.tr("Not everything in the file could be read:"), *troubles[:12]]))
        else:
            self._session.said.emit(self.tr("Opened {0}").format(path.name))

    def _offer_copy(self, words: str) -> None:
        box = self._message(words)
        box.addButton(self.tr("Open a copy"), QMessageBox.ButtonRole.AcceptRole)
        box.addButton(QMessageBox.StandardButton.Cancel)
        box.accepted.connect(self._open_copy)
        box.open()

    def _open_copy(self) -> None:
        assert self._wanted is not None
        try:
            plant = read_plant(self._wanted).plant
        except PlantFileError as error:
            self._tell(str(error))
            return
        self._keeper.start_new()
        self._session.open(plant, None)
        self._session.said.emit(self.tr("Opened a copy without a file name; the file itself stays as it is."))

    def _save_chosen(self, name: str) -> None:
        path = Path(name)
        if not path.name.endswith(".json"):
            path = path.with_name(path.name + SUFFIX)
        same = self._session.path is not None and path.resolve() == self._session.path.resolve()
        self._save_to(path, same=same, force=not same)  # the dialog has asked whether to replace

    def _save_to(self, path: Path, *, same: bool, force: bool = False) -> None:
        try:
            self._keeper.save(self._session.plant, path, same=same, force=force)
        except FileChangedError as error:
            self._wanted = path
            self._ask_replace(str(error))
            return
        except PlantFileError as error:
            self._forget_then()
            self._tell(str(error))
            return
        self._session.mark_saved(path)
        self._remember(path)
        self._session.said.emit(self.tr("Saved {0}").format(path.name))
        self._go_on()

    def _ask_replace(self, words: str) -> None:
        box = self._message(words)
        replace = box.addButton(self.tr("Replace it"), QMessageBox.ButtonRole.DestructiveRole)
        other = box.addButton(self.tr("Save under another name…"), QMessageBox.ButtonRole.ActionRole)
        box.addButton(QMessageBox.StandardButton.Cancel)
        replace.clicked.connect(self._replace)
        other.clicked.connect(self.save_as)
        box.rejected.connect(self._forget_then)
        box.open()

    def _replace(self) -> None:
        assert self._wanted is not None
        self._save_to(self._wanted, same=self._wanted == self._session.path, force=True)

    # the question about unsaved work

    def _after_asking(self, then: Callable[[], None]) -> None:
        self._take_pending()
        if self._session.edited:
            self._ask_unsaved(then)
        else:
            then()

    def _ask_unsaved(self, then: Callable[[], None]) -> None:
        self._then = then
        name = self._session.plant.document.name or self.tr("New plant")
        box = self._message(self.tr("{0} has unsaved changes.").format(name))
        buttons = QMessageBox.StandardButton
        box.setStandardButtons(buttons.Save | buttons.Discard | buttons.Cancel)
        box.setDefaultButton(buttons.Save)
        box.finished.connect(self._answered)
        box.open()

    def _answered(self, button: int) -> None:
        if button == QMessageBox.StandardButton.Save:
            self.save()  # goes on when it is saved
        elif button == QMessageBox.StandardButton.Discard:
            self._go_on()
        else:
            self._forget_then()

    def _go_on(self) -> None:
        then, self._then = self._then, None
        if then is not None:
            then()

    def _forget_then(self) -> None:
        self._then = None

    # small things

    def _follow(self, before: object, after: object) -> None:
        try:
            self._keeper.follow(before, after, self._session.history)  # type: ignore[arg-type]
        except PlantFileError as error:
            self._session.said.emit(str(error))
        if not self._sync.isActive():
            self._sync.start()

    def _remember(self, path: Path) -> None:
        self._settings.add_recent(path)
        self._settings.remember_folder(path)

    def _suggested_name(self) -> str:
        if self._session.path is not None:
            return self._session.path.name
        name = self._session.plant.document.name or "plant"
        return "".join(letter if letter.isalnum() or letter in " -_" else "_" for letter in name).strip() + SUFFIX

    def _file_dialog(self, title: str, mode: QFileDialog.AcceptMode) -> QFileDialog:
        folder = str(self._session.path.parent) if self._session.path else self._settings.folder
        words = self.tr("Plants (*{0});;All files (*)").format(SUFFIX)
        dialog = QFileDialog(self._window, title, folder, words)
        dialog.setAcceptMode(mode)
        dialog.setFileMode(QFileDialog.FileMode.AnyFile)
        dialog.setDefaultSuffix(SUFFIX.removeprefix("."))
        dialog.finished.connect(dialog.deleteLater)
        self.dialog = dialog
        return dialog

    def _message(self, words: str) -> QMessageBox:
        box = QMessageBox(self._window)
        box.setWindowTitle(self.tr("OneLineFault"))
        box.setTextFormat(Qt.TextFormat.PlainText)
        box.setText(words)
        box.finished.connect(box.deleteLater)
        self.dialog = box
        return box

    def _tell(self, words: str) -> None:
        box = self._message(words)
        box.setStandardButtons(QMessageBox.StandardButton.Ok)
        box.open()
