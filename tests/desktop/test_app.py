"""The start: the window stands before the engine, plots or print machinery are loaded."""

import json
import subprocess
import sys
from pathlib import Path

from PySide6.QtWidgets import QApplication

from onelinefault.desktop.app import make_application, make_window, state_folder
from tests.desktop.windows import settings_in

ROOT = Path(__file__).parents[2]
START = """
import json, sys
from pathlib import Path
from PySide6.QtCore import QSettings
from onelinefault.desktop.app import make_application, make_window
from onelinefault.desktop.settings import Settings
from onelinefault.desktop.style import Style
folder = Path(sys.argv[1])
app = make_application()
window = make_window(Settings(QSettings(str(folder / "s.ini"), QSettings.Format.IniFormat)), folder)
window.show()
app.processEvents()
loaded = sorted(sys.modules)
dressed = bool(app.styleSheet()) and app.findChild(Style) is not None
visible = window.isVisible()
window.close()
left = [p.name for p in folder.iterdir()]
print(json.dumps({"loaded": loaded, "dressed": dressed, "visible": visible, "left": left}))
"""
HEAVY = ("numpy", "scipy", "matplotlib", "networkx", "PySide6.QtPrintSupport", "PySide6.QtSvg", "asyncio", "unittest")


def test_the_first_paint_loads_nothing_heavy(tmp_path: Path) -> None:
    done = subprocess.run(
        [sys.executable, "-c", START, str(tmp_path)],
        capture_output=True, text=True, cwd=ROOT, timeout=60, check=False,
        env={"QT_QPA_PLATFORM": "offscreen", "PATH": "", "HOME": str(tmp_path)},
    )  # fmt: skip
    assert done.returncode == 0, done.stderr
    told = json.loads(done.stdout.strip().splitlines()[-1])
    assert told["visible"] and told["dressed"]
    assert [name for name in told["loaded"] if name in HEAVY] == []
    assert "s.ini" in told["left"]


def test_a_running_application_is_used(qapp: QApplication) -> None:
    assert make_application() is qapp


def test_a_window_starts_with_an_empty_plant(qapp: QApplication, tmp_path: Path) -> None:
    window = make_window(settings_in(tmp_path), tmp_path)
    assert window.session.plant.parts == {} and not window.session.edited
    assert window.close()


def test_journals_stand_in_a_folder_of_the_users_own(qapp: QApplication) -> None:
    assert state_folder().name == "journals"
    assert state_folder().is_absolute()
