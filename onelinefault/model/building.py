"""A plant written down part by part, with quantities as text: for scripts, demos and tests."""

from collections.abc import Iterable, Mapping
from dataclasses import fields, replace
from difflib import get_close_matches
from itertools import pairwise
from typing import Any, Final

from onelinefault.errors import EntryError
from onelinefault.model.fields import Basis, fields_of, text_of
from onelinefault.model.part import Part, place_of
from onelinefault.model.parts import part_class, terminal_of, terminal_place
from onelinefault.model.plant import PAPER_MM, Document, End, Plant, Point, Sheet, Wire
from onelinefault.model.tidy import tidy

_FRAME: Final = (10, 9, 10, 16)  # modules kept free on a sheet: left, top, right, bottom with its title block
_PAPERS: Final = ("A4", "A3", "A2", "A1", "A0")


class PlantBuilder:
    """Collects parts and joints by name; ``plant()`` gives the plant.

    Parts without ``at`` are placed by themselves (see ``tidy``), and a sheet without ``paper`` is as large as it needs.

    >>> b = PlantBuilder("Pump house", frequency="50 Hz")
    >>> grid = b.add("supply", "Grid", nominal_voltage="33 kV", fault_level_max="900 MVA")
    >>> intake = b.add("bus", "Intake", nominal_voltage="33 kV")
    >>> wire = b.join("Grid", "Intake")
    >>> b.plant().parts[grid].text("fault_level_max")
    '900 MVA'
    """

    def __init__(self, name: str = "New plant", paper: str | None = None, **document: str) -> None:
        """document: the fields of the title block and the calculation, as text: frequency="60 Hz", customer="..."."""
        self._document = _typed(Document(), "the plant", {"name": name, **document})
        self._parts: dict[str, Part] = {}
        self._wires: dict[str, Wire] = {}
        self._ids: dict[str, str] = {}  # by name, folded
        self._taken: dict[str, set[str]] = {}  # terminals in use, by part
        self._sheets = [Sheet("s1", "One-line diagram", paper or "A4")]
        self._paper_open = paper is None
        self._unplaced: set[str] = set()
        self._unsized: set[str] = set()
        self._number = 1
        _check_paper(paper)

    def sheet(self, title: str, paper: str = "A4", *, upright: bool = False) -> str:
        """Add a sheet and return its id; the first sheet is there from the beginning."""
        _check_paper(paper)
        self._sheets.append(Sheet(self._issued("s"), title, paper, upright))
        return self._sheets[-1].id

    def add(
        self,
        kind: str,
        name: str,
        *,
        at: Point | None = None,
        turn: int | None = None,
        mirrored: bool = False,
        in_service: bool = True,
        sheet: str = "s1",
        basis: Mapping[str, str] | str | None = None,
        **ratings: str | float | bool,
    ) -> str:
        """Add a part and return its id.

        at: origin in modules; turn: quarter turns clockwise; sheet: an id; basis: how the ratings are known, one word
        for all of them or by rating. ratings: as on the nameplate; a bus also takes ``length``, a note ``width``, both
        in modules.
        Raises EntryError that names the part and the rating when a text cannot be read.
        """
        made = part_class(kind)
        title = f"{made.label.lower()} {name}"
        if name.strip() and name.strip().casefold() in self._ids:
            raise EntryError(f"{title}: there is already a part called {name!r}; give it another name")
        if all(sheet != one.id for one in self._sheets):
            raise EntryError(f"{title}: there is no sheet {sheet!r}; add it with sheet()")
        plain: dict[str, Any] = {key: value for key, value in ratings.items() if key in _sizes(made)}
        place: dict[str, Any] = {"x": at[0], "y": at[1]} if at else {}
        state: dict[str, Any] = {"turn": turn or 0, "mirrored": mirrored, "in_service": in_service}
        part = made(id=self._issued("p"), name=name, sheet=sheet, **place, **state, **plain)
        texts = {key: _text(value) for key, value in ratings.items() if key not in plain}
        self._parts[part.id] = _typed(part, title, texts, _marks(title, texts, basis))
        if name.strip():
            self._ids[name.strip().casefold()] = part.id
        if at is None:
            self._unplaced.add(part.id)
        if "length" not in plain:
            self._unsized.add(part.id)
        return part.id

    def join(self, a: str, b: str, corners: Iterable[Point] = ()) -> str:
        """Draw a wire between two parts and return its id.

        A part is named by its name or id, with a terminal where it could be several: "T1.high". Without one, cables,
        devices and other parts with ends a and b take the first that is free. Raises EntryError with what there is.
        """
        wire = Wire(self._issued("w"), self._end(a), self._end(b), tuple(corners))
        self._wires[wire.id] = wire
        for end in wire.ends:
            self._taken.setdefault(end.part, set()).add(end.terminal)
        return wire.id

    def chain(self, *names: str) -> None:
        """Join parts one after the other: ``chain("Grid", "Q1", "Intake")``."""
        for a, b in pairwise(names):
            self.join(a, b)

    def plant(self) -> Plant:
        """The plant with everything added so far."""
        parts, sheets = dict(self._parts), list(self._sheets)
        for number, sheet in enumerate(sheets):
            sheets[number] = self._tidied(sheet, parts)
        wires = self._attached(parts)
        return Plant(self._document, parts, wires, tuple(sheets), (), {}, self._number)

    def _issued(self, prefix: str) -> str:
        taken = {sheet.id for sheet in self._sheets}
        while True:
            key = f"{prefix}{self._number}"
            self._number += 1
            if key not in taken:
                return key

    def _end(self, text: str) -> End:
        part, terminal = self._named(text), ""
        if part is None:
            head, _, terminal = text.rpartition(".")
            part = self._named(head) if head else None
        if part is None:
            names = {one.name.casefold(): one.name for one in self._parts.values()}
            near = [names[key] for key in get_close_matches(text.casefold(), names, n=3, cutoff=0.4)]
            raise EntryError(f"there is no part called {text!r}; near it: {', '.join(near) or 'nothing'}")
        return End(part.id, terminal_of(part, terminal).name if terminal else self._free_terminal(part))

    def _named(self, text: str) -> Part | None:
        key = self._ids.get(text.strip().casefold(), text.strip())
        return self._parts.get(key)

    def _free_terminal(self, part: Part) -> str:
        names = [terminal.name for terminal in part.terminals]
        if len(names) == 1:
            return names[0]
        free = [name for name in names if name not in self._taken.get(part.id, ())]
        if free and (len(free) == 1 or names == ["a", "b"]):
            return free[0]
        known = ", ".join(f"{part.name}.{name}" for name in names) or "none"
        raise EntryError(f"say which terminal of {part.title}: {known}")

    def _tidied(self, sheet: Sheet, parts: dict[str, Part]) -> Sheet:
        """Place what is not placed yet on a sheet, beside what is; the sheet, on larger paper where it may be."""
        mine = {key: part for key, part in parts.items() if part.sheet == sheet.id}
        wires = [wire for wire in self._wires.values() if all(end.part in mine for end in wire.ends)]
        spots = {key: spot for key, spot in tidy(mine, wires).items() if key in self._unplaced}
        if not spots:
            return sheet
        fixed = [part.x + int(getattr(part, "length", 0) or 0) if part.kind == "bus" else part.x
                 for key, part in mine.items() if key not in spots]  # fmt: skip
        widest = {key: spot.length or getattr(mine[key], "width", 0) for key, spot in spots.items()}
        left = min(spot.x for spot in spots.values()) - 6
        right = max(spot.x + widest[key] for key, spot in spots.items()) + 10
        bottom = max(spot.y for spot in spots.values()) + 6
        if self._paper_open and sheet.id == "s1" and not fixed:
            sheet = _large_enough(sheet, right - left, bottom)
        dx = max(fixed) + 10 - left if fixed else max(_FRAME[0], round((sheet.size[0] - right + left) / 2)) - left
        dy = max(_FRAME[1], round((sheet.size[1] - _FRAME[3] - bottom) / 3))
        for key, spot in spots.items():
            turn = spot.turn if not mine[key].turn else mine[key].turn
            placed = replace(mine[key], x=spot.x + dx, y=spot.y + dy, turn=turn)
            if spot.length is not None and key in self._unsized:
                placed = replace(placed, length=spot.length)  # type: ignore[call-arg]
            parts[key] = placed
        return sheet

    def _attached(self, parts: Mapping[str, Part]) -> dict[str, Wire]:
        """The wires with their places along the bars: opposite the other end, each at a place of its own."""
        taken: dict[str, set[tuple[int, bool]]] = {}
        wires = {}
        for key, wire in self._wires.items():
            a, b = wire.ends
            wires[key] = replace(wire, a=_along_bar(parts, a, b, taken), b=_along_bar(parts, b, a, taken))
        return wires


def _along_bar(parts: Mapping[str, Part], end: End, other: End, taken: dict[str, set[tuple[int, bool]]]) -> End:
    bar = parts[end.part]
    if bar.kind != "bus":
        return end
    length: int = getattr(bar, "length", 0)
    there = terminal_place(parts[other.part], other.terminal)
    dx, dy = (round(value) for value in place_of(replace(bar, x=0, y=0), 1, 0))
    wish = (there[0] - bar.x) * dx + (there[1] - bar.y) * dy
    side = (there[1] - bar.y) * dx - (there[0] - bar.x) * dy > 0
    used = taken.setdefault(bar.id, set())
    places = sorted(range(length + 1), key=lambda place: abs(place - wish))
    free = next((place for place in places if (place, side) not in used), places[0])
    used.add((free, side))
    return replace(end, at=free)


def _large_enough(sheet: Sheet, width: int, height: int) -> Sheet:
    left, top, right, bottom = _FRAME
    for paper in _PAPERS:
        sheet = replace(sheet, paper=paper)
        if sheet.size[0] >= left + width + right and sheet.size[1] >= top + height + bottom:
            break
    return sheet


def _sizes(made: type[Part]) -> set[str]:
    """Fields of a kind that are sizes on the sheet, not ratings: the length of a bar, the width of a note."""
    return {item.name for item in fields(made)} - {item.name for item in fields(Part)} - set(fields_of(made))


def _text(value: str | float | bool) -> str:
    return value if isinstance(value, str) else text_of(value) if isinstance(value, int) else f"{value:.12g}"


def _marks(title: str, texts: Mapping[str, str], basis: Mapping[str, str] | str | None) -> dict[str, Basis]:
    named = dict.fromkeys(texts, basis) if isinstance(basis, str) else dict(basis or {})
    marks = {}
    for name, word in named.items():
        if word not in list(Basis):
            raise EntryError(f"{title}: {word!r} is no basis; use {', '.join(Basis)}")
        marks[name] = Basis(word)
    return marks


def _typed(owner: Any, title: str, texts: Mapping[str, str], marks: Mapping[str, Basis] | None = None) -> Any:
    """A part or document with ratings typed. Raises EntryError that names the owner and what it knows."""
    described = fields_of(type(owner))
    values: dict[str, Any] = {}
    for name, text in texts.items():
        if name not in described:
            near = get_close_matches(name, described, n=3, cutoff=0.4) or list(described)
            raise EntryError(f"{title} has no rating {name!r}; near it: {', '.join(near)}")
        try:
            values[name] = described[name].value_from(text)
        except EntryError as error:
            raise EntryError(f"{title}: {error}") from None
    return replace(owner, **values, **({"basis": dict(marks)} if marks else {}))


def _check_paper(paper: str | None) -> None:
    if paper is not None and paper not in PAPER_MM:
        raise EntryError(f"{paper!r} is no paper; use {', '.join(PAPER_MM)}")
