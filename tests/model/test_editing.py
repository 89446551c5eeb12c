"""The one place to import builders of edits from."""

import inspect

from onelinefault.model import editing
from onelinefault.model.plant import Plant, Sheet


def test_everything_offered_is_there_and_described() -> None:
    assert len(set(editing.__all__)) == len(editing.__all__)
    for name in editing.__all__:
        offered = getattr(editing, name)
        assert isinstance(offered, tuple) or inspect.getdoc(offered), name


def test_new_ids_are_those_that_the_next_edit_issues() -> None:
    plant = Plant(sheets=(Sheet("s1"), Sheet("s3")), next_number=2)
    assert editing.new_ids(plant, "p", 2) == ("p2", "p3")
    assert editing.new_ids(plant, "s", 2) == ("s2", "s4")
    assert list(editing.place(plant, "load", "s1", 0, 0).parts) == ["p2"]
