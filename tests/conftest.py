"""Settings for all tests.

Small matrices are solved faster by one thread than by several that wait for each other. Without a display Qt paints
offscreen. The application with widgets is made before any test can make one without.
"""

import os

import pytest

os.environ.setdefault("OPENBLAS_NUM_THREADS", "1")
if not (os.environ.get("DISPLAY") or os.environ.get("WAYLAND_DISPLAY")):
    os.environ.setdefault("QT_QPA_PLATFORM", "offscreen")


@pytest.fixture(scope="session", autouse=True)
def application(qapp: object) -> object:
    """The one application of this process."""
    return qapp
