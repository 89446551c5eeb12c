"""Plants from code: built with quantities as text, saved, solved and read out, without a window."""

from collections.abc import Iterable, Sequence
from pathlib import Path
from typing import TYPE_CHECKING

from onelinefault.errors import EntryError
from onelinefault.model.building import PlantBuilder
from onelinefault.model.fault import Fault, FaultKind
from onelinefault.model.findings import Finding
from onelinefault.model.plant import Plant
from onelinefault.store.locks import lock_plant
from onelinefault.store.plant_file import read_plant, write_plant

if TYPE_CHECKING:
    from onelinefault.engine.results import BusRow, FaultResult

__all__ = ["PlantBuilder", "check", "fault", "faults", "open_plant", "save_plant"]


def open_plant(path: str | Path) -> Plant:
    """The plant in a file. Raises PlantFileError when it is damaged; values that cannot be read are left out."""
    return read_plant(path).plant


def save_plant(plant: Plant, path: str | Path) -> Path:
    """Write a plant file; the one that stood there before is kept beside it with "~" at its end.

    Raises FileInUseError while somebody edits that file, PlantFileError when the disk refuses.
    """
    with lock_plant(path):
        write_plant(plant, path, force=True)
    return Path(path)


def faults(
    plant: Plant,
    kinds: Iterable[str] | str | None = None,
    at: Iterable[str] | str | None = None,
    *,
    level: str = "max",
    arrangement: str | None = None,
    zf_ohm: complex = 0,
    zg_ohm: complex = 0,
) -> "list[BusRow]":
    """The bus table: a row for each bus and kind of fault. Currents in kA, impedances in ohm.

    kinds: "three-phase", "line-to-line", "two-lines-to-earth", "line-to-earth" (all when not given). at: names of buses
    or terminals ("T1.low"). level: "max" or "min" supply. Raises StudyError or NoSuchPlaceError.
    """
    from onelinefault.engine.case import Case  # noqa: PLC0415 - numpy and scipy are loaded when first needed
    from onelinefault.studies import Asked, arrangement_named, fault_rows, study_of  # noqa: PLC0415

    wanted = tuple(FaultKind) if kinds is None else tuple(kind_named(kind) for kind in _several(kinds))
    study = study_of(plant, Case(level=_level(level)), arrangement_named(plant, arrangement))
    return fault_rows(study, Asked(wanted, tuple(_several(at or ())), complex(zf_ohm), complex(zg_ohm)))


def fault(
    plant: Plant,
    at: str,
    kind: str = "three-phase",
    *,
    phases: str = "",
    zf_ohm: complex = 0,
    zg_ohm: complex = 0,
    fraction: float | None = None,
    level: str = "max",
    arrangement: str | None = None,
) -> "FaultResult":
    """One fault with all currents and voltages. at: a bus, "T1.low", or with fraction (0 to 1) a cable, line or busway.

    Raises StudyError or NoSuchPlaceError.
    """
    from onelinefault.engine.case import Case  # noqa: PLC0415
    from onelinefault.studies import arrangement_named, place_at, study_of  # noqa: PLC0415

    study = study_of(plant, Case(level=_level(level)), arrangement_named(plant, arrangement))
    place = place_at(study.plant, at, fraction)
    return study.fault(Fault(place, kind_named(kind), phases, complex(zf_ohm), complex(zg_ohm)))


def check(plant: Plant, *, level: str = "max", arrangement: str | None = None) -> list[Finding]:
    """What there is to say about the plant's data, errors first. Raises StudyError for an unknown arrangement."""
    from onelinefault.engine.case import Case  # noqa: PLC0415
    from onelinefault.studies import all_findings, arrangement_named  # noqa: PLC0415

    return all_findings(plant, Case(level=_level(level)), arrangement_named(plant, arrangement))


def kind_named(name: str) -> FaultKind:
    """A kind of fault by its name. Raises EntryError with the names."""
    try:
        return FaultKind(name)
    except ValueError:
        raise EntryError(f"{name!r} is no kind of fault; use {', '.join(FaultKind)}") from None


def _level(level: str) -> str:
    if level not in ("max", "min"):
        raise EntryError(f"{level!r} is no supply level; use max or min")
    return level


def _several(names: Iterable[str] | str) -> Sequence[str]:
    return [names] if isinstance(names, str) else list(names)
