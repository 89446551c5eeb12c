"""One description of a field serves entry, limits, defaults and texts."""

import dataclasses

import pytest

from onelinefault.errors import EntryError
from onelinefault.model.fields import Field, fields_of, text_of
from onelinefault.model.parts import PART_CLASSES
from onelinefault.model.plant import Document
from onelinefault.model.sources import InductionMotor, SynchronousGenerator
from onelinefault.model.switching import Breaker
from onelinefault.model.transforming import Transformer

ALL_FIELDS = [(owner, field) for owner in (*PART_CLASSES, Document) for field in fields_of(owner).values()]


@pytest.mark.parametrize(("owner", "field"), ALL_FIELDS, ids=lambda v: getattr(v, "name", getattr(v, "__name__", "")))
def test_every_field_is_described_well(owner: type, field: Field) -> None:
    assert field.label and field.name in {f.name for f in dataclasses.fields(owner)}
    assert set(field.alternatives) <= set(fields_of(owner))
    if field.default is not None:  # the default can be typed, and then is the same value
        assert field.value_from(text_of(field.default)) == field.default
    if field.unit_kind is not None:
        assert field.unit in field.unit_kind.units()
    if field.minimum is not None and field.maximum is not None:
        assert field.minimum < field.maximum


@pytest.mark.parametrize("owner", PART_CLASSES)
def test_the_order_is_that_of_the_declaration(owner: type) -> None:
    declared = [f.name for f in dataclasses.fields(owner) if "field" in f.metadata]
    assert list(fields_of(owner)) == declared


@pytest.mark.parametrize(
    ("owner", "name", "text", "says"),
    [
        (Transformer, "impedance", "120 %", "Impedance: 120 %: must be at most 100 %"),
        (Transformer, "impedance", "0", "must be above zero"),
        (Transformer, "tap", "-31", "must be at least -30 %"),
        (Transformer, "tap_side", "left", "choose one of high, low"),
        (InductionMotor, "count", "0", "must be at least 1"),
        (InductionMotor, "count", "2.5", "whole number"),
        (InductionMotor, "count", "²", "whole number"),
        (InductionMotor, "count", "++3", "whole number"),
        (InductionMotor, "power_factor", "1.2", "at most 1"),
        (Breaker, "closed", "maybe", "yes or no"),
    ],
)
def test_what_cannot_be_is_refused_with_the_field_named(owner: type, name: str, text: str, says: str) -> None:
    field = fields_of(owner)[name]
    with pytest.raises(EntryError, match=says) as caught:
        field.value_from(text)
    assert str(caught.value).startswith(field.label)


def test_limits_are_compared_in_the_field_s_unit() -> None:
    impedance = fields_of(Transformer)["impedance"]
    assert impedance.value_from("0.99 pu") is not None
    with pytest.raises(EntryError):
        impedance.value_from("1.01 pu")
    reactance = fields_of(SynchronousGenerator)["subtransient_reactance"]
    assert reactance.value_from("600 ohm") is not None  # the limit is one in per cent


@pytest.mark.parametrize(("text", "value"), [("yes", True), ("No", False), ("TRUE", True)])
def test_yes_and_no(text: str, value: bool) -> None:
    assert fields_of(Breaker)["closed"].value_from(text) is value


@pytest.mark.parametrize("text", ["", "  ", "\t"])
def test_an_empty_text_means_not_given(text: str) -> None:
    assert fields_of(Transformer)["impedance"].value_from(text) is None


@pytest.mark.parametrize(("value", "text"), [(None, ""), (True, "yes"), (False, "no"), (3, "3"), ("star", "star")])
def test_texts_of_values(value: object, text: str) -> None:
    assert text_of(value) == text  # type: ignore[arg-type]
