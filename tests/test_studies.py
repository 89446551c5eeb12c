"""From the plant as drawn to its study: arrangements, completion, findings."""

import pytest

from onelinefault.engine.case import Case
from onelinefault.errors import NoSuchPlaceError, StudyError
from onelinefault.model.building import PlantBuilder
from onelinefault.model.fault import Place
from onelinefault.model.fields import Basis
from onelinefault.model.findings import Finding, Severity
from onelinefault.model.plant import Arrangement, Plant
from onelinefault.studies import (
    Asked,
    all_findings,
    arrangement_named,
    fault_rows,
    in_order,
    place_at,
    place_words,
    prepare,
    study_of,
)


def two_supplies() -> Plant:
    b = PlantBuilder("Two supplies")
    for side in "AB":
        b.add("supply", f"Grid {side}", nominal_voltage="11 kV", fault_level_max="200 MVA", x_over_r="10")
        b.add("bus", f"Board {side}", nominal_voltage="11 kV")
        b.join(f"Grid {side}", f"Board {side}")
    b.add("breaker", "Tie", closed=False)
    b.chain("Board A", "Tie", "Board B")
    b.add("cable", "W1", length="50 m", size="95 mm²")
    nameless = b.add("bus", "", nominal_voltage="11 kV", length=6)
    b.chain("Board A", "W1", nameless)
    plant = b.plant()
    return Plant(**{**plant.__dict__, "arrangements": (Arrangement("a90", "Tie closed", {"p7": True}),)})


def test_an_arrangement_by_name_or_id() -> None:
    plant = two_supplies()
    assert arrangement_named(plant, None) is None
    assert arrangement_named(plant, " tie CLOSED ") == arrangement_named(plant, "a90") == "a90"
    with pytest.raises(StudyError, match="no running arrangement called 'Night'; the plant has Tie closed"):
        arrangement_named(plant, "Night")


def test_a_closed_tie_adds_the_second_supply() -> None:
    plant = two_supplies()
    asked = Asked(at=("Board A",))
    (apart, *_), (together, *_) = (fault_rows(study_of(plant, Case(), a), asked) for a in (None, "a90"))
    assert apart.fault_level_mva == pytest.approx(200)
    assert together.fault_level_mva == pytest.approx(400)  # two equal supplies side by side


def test_what_is_missing_is_completed_and_said() -> None:
    plant = two_supplies()
    completed, findings = prepare(plant)
    assert completed.parts["p10"].given("r_per_length") is not None
    assert completed.parts["p10"].basis_of("r_per_length") is Basis.TYPICAL
    assert plant.parts["p10"].given("r_per_length") is None
    assert any("p10" in finding.parts for finding in findings)


def test_findings_come_once_and_errors_first() -> None:
    hint = Finding(Severity.HINT, "x", "a hint", "none")
    warning = Finding(Severity.WARNING, "y", "a warning", "none")
    error = Finding(Severity.ERROR, "z", "an error", "none")
    assert in_order([hint, warning, hint, error, warning]) == [error, warning, hint]
    plant = two_supplies()
    found = all_findings(plant, Case())
    assert len(found) == len(set(found))
    assert all_findings(plant, Case(), study=study_of(plant, Case())) == found


@pytest.mark.parametrize(
    ("name", "fraction", "place", "words"),
    [
        ("board a", None, Place("p2", "bar"), "Board A"),
        ("p11", None, Place("p11", "bar"), "p11"),
        ("Tie.b", None, Place("p7", "b"), "Tie b"),
        ("Tie a", None, Place("p7", "a"), "Tie a"),
        ("W1", 0.25, Place("p10", "a", None, 0.25), "W1 at 25 %"),
    ],
)
def test_places_by_name(name: str, fraction: float | None, place: Place, words: str) -> None:
    plant = two_supplies()
    assert place_at(plant, name, fraction) == place
    assert place_words(plant, place) == words


@pytest.mark.parametrize("name", ["Bord C", "Tie.middle", "", "."])
def test_a_place_that_is_not_there_is_refused(name: str) -> None:
    with pytest.raises(NoSuchPlaceError, match="There is nothing called"):
        place_at(two_supplies(), name)
