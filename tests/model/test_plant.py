"""The plant as a value."""

import pytest

from onelinefault.model.consumers import Bus
from onelinefault.model.fields import fields_of
from onelinefault.model.plant import PAPER_MM, Arrangement, Document, End, Plant, Sheet, Wire
from onelinefault.model.sources import Supply
from onelinefault.model.switching import Breaker


def small_plant() -> Plant:
    return Plant(
        parts={
            "p1": Bus(id="p1", name="Board A"),
            "p2": Breaker(id="p2", name="Q1"),
            "p3": Supply(id="p3", name="Q2", sheet="s2"),
        },
        wires={"w4": Wire("w4", End("p1", "bar", 3), End("p2", "a"))},
        sheets=(Sheet("s1"), Sheet("s2", upright=True)),
        arrangements=(Arrangement("a5", "Tie open", closed={"p2": False, "p1": True}, in_service={"p3": False}),),
        next_number=6,
    )


def test_look_up() -> None:
    plant = small_plant()
    assert [p.id for p in plant.on_sheet("s2")] == ["p3"]
    assert plant.wires_of("p2") == plant.wires_of("p1") == [plant.wires["w4"]] and plant.wires_of("p3") == []
    assert [p.id for p in plant.named(" board a ")] == ["p1"] and plant.named("B") == []
    assert plant.sheet("s2") is plant.sheets[1] and plant.sheet("s9") is None


def test_an_arrangement_changes_positions_only_where_it_says_so() -> None:
    plant = small_plant()
    arranged = plant.arranged("a5")
    assert arranged.parts["p2"].value("closed") is False and not arranged.parts["p3"].in_service
    assert arranged.parts["p1"] is plant.parts["p1"]  # a bus has no position
    assert plant.parts["p2"].value("closed") is True
    assert plant.arranged(None) is plant and plant.arranged("a9") is plant


@pytest.mark.parametrize(("paper", "ratio"), [(p, 2**0.5) for p in ("A4", "A3", "A2", "A1", "A0")])
def test_iso_papers_have_the_ratio_of_the_standard(paper: str, ratio: float) -> None:
    width, height = PAPER_MM[paper]  # ISO 216: sides 1 : √2, rounded to whole millimetres
    assert width / height == pytest.approx(ratio, rel=4e-3)


def test_sheets_turn() -> None:
    assert Sheet("s1", paper="A4", upright=True).size_mm == (210, 297)
    assert Sheet("s1", paper="A4").size == (297 / 2.5, 84)
    assert Sheet("s1", paper="ANSI A").size_mm == pytest.approx((11 * 25.4, 8.5 * 25.4))  # ANSI/ASME Y14.1


def test_the_document_has_defaults() -> None:
    document = Document()
    assert (document.frequency_hz, document.base_mva, document.prefault_pu) == (50, 100, 1)
    typed = Document(
        frequency=fields_of(Document)["frequency"].value_from("60"),  # type: ignore[arg-type]
        base_power=fields_of(Document)["base_power"].value_from("10 MVA"),  # type: ignore[arg-type]
        prefault_voltage=fields_of(Document)["prefault_voltage"].value_from("105 %"),  # type: ignore[arg-type]
    )
    assert (typed.frequency_hz, typed.base_mva, typed.prefault_pu) == (60, 10, 1.05)
