"""What a new plant starts with, by the person's units."""

from dataclasses import replace

from onelinefault.desktop.settings import US
from onelinefault.model.fields import fields_of
from onelinefault.model.plant import Document, Plant, Sheet


def new_plant(units: str) -> Plant:
    """An empty plant on one landscape sheet: A4 and 50 Hz, or ANSI A and 60 Hz."""
    if units != US:
        return Plant(sheets=(Sheet("s1", "Sheet 1", "A4"),))
    frequency = fields_of(Document)["frequency"].value_from("60 Hz")
    document = replace(Document(), frequency=frequency)  # type: ignore[arg-type]
    return Plant(document=document, sheets=(Sheet("s1", "Sheet 1", "ANSI A"),))
