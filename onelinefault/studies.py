"""From a plant as drawn to a study: arranged, completed with typical data, ready to be asked; and all findings.

Command line, scripts and the window all come this way, so they cannot give different figures.
"""

import math
from collections.abc import Iterable, Sequence
from dataclasses import dataclass

from onelinefault.engine.case import Case
from onelinefault.engine.places import place_named
from onelinefault.engine.results import BusRow, FaultResult
from onelinefault.engine.study import Study
from onelinefault.errors import NoSuchPlaceError, StudyError
from onelinefault.model.completion import completed_plant
from onelinefault.model.fault import Fault, FaultKind, Place
from onelinefault.model.findings import Finding, Severity
from onelinefault.model.part_checks import check_part, check_plant
from onelinefault.model.plant import Plant
from onelinefault.store.tables import load_tables

_SEVERITIES = tuple(Severity)


def prepare(plant: Plant, arrangement: str | None = None) -> tuple[Plant, tuple[Finding, ...]]:
    """The plant with missing ratings completed, and findings about what was completed.

    arrangement: the id of a running arrangement; None: as drawn.
    """
    completed, findings = completed_plant(plant.arranged(arrangement), load_tables())
    return completed, tuple(findings)


def study_of(plant: Plant, case: Case, arrangement: str | None = None) -> Study:
    """A study of a plant as drawn, in a case and a running arrangement (its id; None: as drawn)."""
    return Study(prepare(plant, arrangement)[0], case)


def all_findings(plant: Plant, case: Case, arrangement: str | None = None, study: Study | None = None) -> list[Finding]:
    """Everything there is to say about a plant, errors first, each once.

    study: one that ``study_of`` has made of the same plant, case and arrangement, to save the work.
    """
    completed, assumed = prepare(plant, arrangement)
    network = (study or Study(completed, case)).findings
    arranged = plant.arranged(arrangement)
    own = [finding for part in arranged.parts.values() for finding in check_part(part)]
    return in_order([*check_plant(arranged), *own, *network, *assumed])


def in_order(findings: Iterable[Finding]) -> list[Finding]:
    """Findings once each, errors before warnings before hints, otherwise in the order given.

    The same remark about a field (code, parts and field) from two places is given once, in the words that came first.
    """
    first: dict[object, Finding] = {}
    for finding in findings:
        key = (finding.code, finding.parts, finding.field) if finding.field else finding
        first.setdefault(key, finding)
    return sorted(first.values(), key=lambda finding: _SEVERITIES.index(finding.severity))


def arrangement_named(plant: Plant, name: str | None) -> str | None:
    """The id of a running arrangement by its name or id; None stays None.

    Raises StudyError with the arrangements that the plant has.
    """
    if name is None:
        return None
    for arrangement in plant.arrangements:
        if name.strip().casefold() in (arrangement.name.strip().casefold(), arrangement.id):
            return arrangement.id
    known = ", ".join(a.name for a in plant.arrangements) or "none"
    raise StudyError(f"there is no running arrangement called {name!r}; the plant has {known}")


def place_at(plant: Plant, name: str, fraction: float | None = None) -> Place:
    """The place that a name means: "Board A", "T1.low" or "T1 low", or a fraction along a cable, line or busway.

    Raises NoSuchPlaceError with names that come near.
    """
    try:
        place = place_named(plant, name)
    except NoSuchPlaceError:
        head, _, terminal = name.rpartition(".")
        if not head:
            raise
        place = place_named(plant, f"{head} {terminal}")
    return Place(place.part, place.terminal, None, fraction)


@dataclass(frozen=True)
class Asked:
    """What a bus table is asked for. at: names of places (none: every bus); impedances of the fault in ohm."""

    kinds: tuple[FaultKind, ...] = tuple(FaultKind)
    at: tuple[str, ...] = ()
    zf_ohm: complex = 0j
    zg_ohm: complex = 0j


def fault_rows(study: Study, asked: Asked) -> list[BusRow]:
    """The bus table, or that part of it that was asked for, in the order asked.

    Raises NoSuchPlaceError for a name that is nowhere, StudyError for an impossible fault.
    """
    places = [place_at(study.plant, name) for name in asked.at]
    bolted = asked.zf_ohm == 0 and asked.zg_ohm == 0
    if bolted and not places:
        return study.all_buses(asked.kinds)
    table = {(row.part, row.kind): row for row in study.all_buses(asked.kinds)}
    if not places:
        places = [Place(part) for part in dict.fromkeys(part for part, _ in table)]
    rows = []
    for place in places:
        for kind in asked.kinds:
            row = table.get((place.part, kind.value)) if bolted else None
            rows.append(row or row_of(study, study.fault(Fault(place, kind, "", asked.zf_ohm, asked.zg_ohm))))
    return rows


def row_of(study: Study, result: FaultResult) -> BusRow:
    """The row of a bus table for one fault, which may also stand elsewhere than on a bus."""
    z1, z2, z0 = (None if z is None else (z.real, z.imag) for z in result.z_ohm)
    return BusRow(
        bus=place_words(study.plant, result.fault.place),
        part=result.fault.place.part,
        nominal_kv=result.nominal_kv,
        kind=result.fault.kind.value,
        ik_ka=result.ik_ka,
        phases_ka=_triple(abs(result.phases_ka).tolist()),
        phases_deg=_triple([math.degrees(math.atan2(ka.imag, ka.real)) for ka in result.phases_ka.tolist()]),
        residual_ka=abs(result.residual_ka),
        x_over_r=None if math.isnan(result.x_over_r) else result.x_over_r,
        fault_level_mva=result.fault_level_mva,
        peak_ka=result.peak_ka,
        z1_ohm=z1,
        z2_ohm=z2,
        z0_ohm=z0,
        assumed=study.assumed.get(int(study.network.island[result.node]), ()),
        figures=result.figures,
    )


def _triple(values: Sequence[float]) -> tuple[float, float, float]:
    a, b, c = values
    return a, b, c


def place_words(plant: Plant, place: Place) -> str:
    """A place in words: "Board A", "T1 low", "W3 at 40 %"."""
    part = plant.parts.get(place.part)
    name = (part.name or part.id) if part else place.part
    if place.fraction is not None:
        return f"{name} at {place.fraction * 100:.3g} %"
    return name if part is None or len(part.terminals) == 1 else f"{name} {place.terminal}"
