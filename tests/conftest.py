"""Settings for all tests.

Small matrices are solved faster by one thread than by several that wait for each other. Without a display Qt paints
offscreen. The application with widgets is made before any test can make one without. Where CI is set, property tests
take the same examples each time, so that what has passed once passes again; elsewhere they look at new ones.
"""

import os

import pytest
from hypothesis import settings

os.environ.setdefault("OPENBLAS_NUM_THREADS", "1")
if not (os.environ.get("DISPLAY") or os.environ.get("WAYLAND_DISPLAY")):
    os.environ.setdefault("QT_QPA_PLATFORM", "offscreen")
settings.register_profile("same examples", derandomize=True, database=None, deadline=None)
if os.environ.get("CI"):
    settings.load_profile("same examples")


@pytest.fixture(scope="session", autouse=True)
def application(qapp: object) -> object:
    """The one application of this process."""
    return qapp
