"""Random plants over every kind of part and every rating, for the tests of this folder."""

from dataclasses import replace

import pytest
from hypothesis import strategies as st

from onelinefault.errors import EntryError
from onelinefault.model.consumers import Bus, Note
from onelinefault.model.fields import Basis, Field, fields_of
from onelinefault.model.part import Part
from onelinefault.model.parts import PART_CLASSES
from onelinefault.model.plant import PAPER_MM, Arrangement, Document, End, Plant, Sheet, Wire
from onelinefault.model.quantity import show_unit

NAMES = ["", "T1", "Board A / 2", "Kälte-Pumpe „Süd“", "泵站", "x" * 80, 'say "so"', "back\\slash", "a\nb", "tab\there"]
OTHER_TEXTS = {
    "neutral": ["isolated", "solid", "resistor 400 A 10 s", "reactor 5 ohm", "resistor 12,7 Ω"],
    "vector group": ["Dyn11", "YNd1", "YNyn0d11", "YNa0d5", "Yzn5", "Dd0"],
    "conductor size": ["240 mm²", "2x240", "3c 95 mm²", "4/0 AWG", "500 kcmil", "2 × 3c 120 mm²", "14 AWG"],
    "line geometry": ["a 0 29; b 2.5 29; c 7 29; n 4 25; ft", "a 0 9;b 1 9;c 2 9"],
    "text": ["words", "two\nlines", " spaced ", "Ω ∠ ″ ₁", '{"json": [1]}', "42"],
    "flag": ["yes", "no"],
    "count": ["1", "2", "4", "12"],
}
NUMBERS = ["1", "0.5", "0,25", "12.5", "95", "1 250", "3e2", "0"]


def texts_for(field: Field) -> list[str]:
    """Texts that a person could type for a field: every unit, several ways to write a number, every choice."""
    if field.choices and field.kind != "flag":
        return list(field.choices)
    if field.unit_kind is None:
        tried = OTHER_TEXTS[field.kind]
    else:
        tried = [f"{n} {show_unit(unit)}".strip() for unit in field.unit_kind.units() for n in NUMBERS] + NUMBERS
    return [text for text in tried if _taken(field, text)]


def _taken(field: Field, text: str) -> bool:
    try:
        return field.value_from(text) is not None
    except EntryError:
        return False


TEXTS = {c: {name: texts_for(f) for name, f in fields_of(c).items()} for c in (*PART_CLASSES, Document)}


@st.composite
def _parts(draw: st.DrawFn, number: int, sheets: tuple[Sheet, ...]) -> Part:
    made = draw(st.sampled_from(PART_CLASSES))
    place = st.integers(-500, 500)
    part = made(
        id=f"p{number}",
        name=draw(st.sampled_from(NAMES)),
        sheet=draw(st.sampled_from(sheets)).id,
        x=draw(place),
        y=draw(place),
        turn=draw(st.integers(0, 3)),
        mirrored=draw(st.booleans()),
        in_service=draw(st.booleans()),
        label_dx=draw(st.integers(-9, 9)),
        label_dy=draw(st.sampled_from([0, 0, 7])),
    )
    for name, texts in TEXTS[made].items():
        if draw(st.integers(0, 2)) == 0:
            part = part.with_text(name, draw(st.sampled_from(texts)), draw(st.sampled_from([None, *Basis])))
    if isinstance(part, Bus):
        part = replace(part, length=draw(st.integers(0, 60)))
    return replace(part, width=draw(st.integers(1, 60))) if isinstance(part, Note) else part


@st.composite
def _plants(draw: st.DrawFn) -> Plant:
    sheets = tuple(
        Sheet(f"s{i}", draw(st.sampled_from(NAMES)), draw(st.sampled_from(list(PAPER_MM))), draw(st.booleans()))
        for i in range(1, draw(st.integers(1, 3)) + 1)
    )
    numbers = draw(st.lists(st.integers(1, 40), unique=True, max_size=8))
    parts = {f"p{n}": draw(_parts(n, sheets)) for n in numbers}
    ends = [End(p.id, t.name, 3 if p.kind == "bus" else None) for p in parts.values() for t in p.terminals]
    wires = {}
    for n in draw(st.lists(st.integers(50, 90), unique=True, max_size=6)) if ends else []:
        corners = draw(st.lists(st.tuples(st.integers(-99, 99), st.integers(-99, 99)), max_size=3))
        wires[f"w{n}"] = Wire(f"w{n}", *(draw(st.sampled_from(ends)) for _ in "ab"), tuple(corners))
    marks = st.dictionaries(st.sampled_from(sorted(parts) or ["p1"]), st.booleans(), max_size=3)
    arrangements = tuple(
        Arrangement(f"a{n}", draw(st.sampled_from(NAMES)), draw(marks), draw(marks))
        for n in range(100, 100 + draw(st.integers(0, 2)))
    )
    chosen = {name: draw(st.sampled_from(texts)) for name, texts in TEXTS[Document].items() if draw(st.booleans())}
    document = Document(**{name: fields_of(Document)[name].value_from(text) for name, text in chosen.items()})
    tags = {f"p{n}": (n, -n) for n in numbers[:2]}
    return Plant(document, parts, wires, sheets, arrangements, tags, draw(st.integers(91, 999)))


@pytest.fixture(scope="session")
def plants() -> st.SearchStrategy[Plant]:
    """A strategy for plants of up to eight parts of any kind."""
    return _plants()
