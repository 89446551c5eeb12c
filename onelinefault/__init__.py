"""Draw a plant, click a bus, see the fault.

The names below are the package's face for scripts; each is loaded when it is first used, so that
``import onelinefault`` costs nothing.
"""

from importlib import import_module
from typing import TYPE_CHECKING, Any

if TYPE_CHECKING:
    from onelinefault.errors import OneLineFaultError
    from onelinefault.model.building import PlantBuilder
    from onelinefault.scripting import check, fault, faults, open_plant, save_plant

__version__ = "0.1.0"
__all__ = ["OneLineFaultError", "PlantBuilder", "check", "fault", "faults", "open_plant", "save_plant"]

_HOMES = {
    "OneLineFaultError": "onelinefault.errors",
    "PlantBuilder": "onelinefault.model.building",
    "check": "onelinefault.scripting",
    "fault": "onelinefault.scripting",
    "faults": "onelinefault.scripting",
    "open_plant": "onelinefault.scripting",
    "save_plant": "onelinefault.scripting",
}


def __getattr__(name: str) -> Any:
    if name not in _HOMES:
        raise AttributeError(f"module {__name__!r} has no attribute {name!r}")
    value = getattr(import_module(_HOMES[name]), name)
    globals()[name] = value
    return value


def __dir__() -> list[str]:
    return sorted([*globals(), *_HOMES])
