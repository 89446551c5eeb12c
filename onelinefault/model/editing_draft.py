"""A plant in the making: collects changes, answers questions about the result so far, hands them over as one Edit."""

import re
from collections.abc import Iterable
from dataclasses import replace

from onelinefault.errors import EditError
from onelinefault.model.consumers import Bus
from onelinefault.model.edits import Edit
from onelinefault.model.part import Part
from onelinefault.model.parts import terminal_place
from onelinefault.model.plant import End, Plant, Point, Wire


class Draft:
    """Changes on top of a plant. Reading always gives the state with the changes made so far."""

    def __init__(self, plant: Plant) -> None:
        self.plant = plant
        self.parts = dict(plant.parts)
        self.wires = dict(plant.wires)
        self._touched_parts: dict[str, None] = {}
        self._touched_wires: dict[str, None] = {}
        self._next_number = plant.next_number
        self._wires_by_part: dict[str, dict[str, None]] | None = None
        self._names: set[str] | None = None
        self._counted: dict[tuple[str, int], int] = {}

    @property
    def next_number(self) -> int:
        """The number of the next id."""
        return self._next_number

    def part(self, part_id: str) -> Part:
        """A part by id. Raises EditError when it does not exist."""
        if part_id not in self.parts:
            raise EditError(f"there is no part {part_id} (any more)")
        return self.parts[part_id]

    def wire(self, wire_id: str) -> Wire:
        """A wire by id. Raises EditError when it does not exist."""
        if wire_id not in self.wires:
            raise EditError(f"there is no wire {wire_id} (any more)")
        return self.wires[wire_id]

    def chosen_parts(self, ids: Iterable[str]) -> list[Part]:
        """The parts among some ids, each once, in the order given; wires are passed over.

        Raises EditError for an id that is neither a part nor a wire.
        """
        return [self.part(key) for key in dict.fromkeys(ids) if key not in self.wires]

    def wires_of(self, part_id: str) -> list[Wire]:
        """The wires that end on a part, the oldest first."""
        if self._wires_by_part is None:
            self._wires_by_part = {}
            for wire in self.wires.values():
                self._enter(wire)
        return sorted((self.wires[key] for key in self._wires_by_part.get(part_id, ())), key=_age)

    def place_of_end(self, end: End) -> Point:
        """Where on its sheet an end of a wire is, in modules."""
        return terminal_place(self.part(end.part), end.terminal, end.at)

    def new_id(self, prefix: str) -> str:
        """The next unused id with a prefix: "p", "w", "s" or "a"."""
        taken = {s.id for s in self.plant.sheets} | {a.id for a in self.plant.arrangements}
        while True:
            key = f"{prefix}{self._next_number}"
            self._next_number += 1
            if key not in self.parts and key not in self.wires and key not in taken:
                return key

    def free_name(self, wanted: str) -> str:
        """A name that no part has yet: the wanted one, or with its trailing number counted up ("T1" → "T2")."""
        if self._names is None:
            self._names = {_folded(p.name) for p in self.parts.values()}
        match = re.fullmatch(r"(.*?)(\d*)", wanted.strip(), re.DOTALL)
        assert match is not None
        name, (stem, digits) = wanted.strip(), match.groups()
        series = _folded(stem), len(digits)
        number = max(int(digits or 1), self._counted.get(series, 0))
        while _folded(name) in self._names:
            number += 1
            name = f"{stem if digits else stem + ' '}{number:0{len(digits)}d}"
            self._counted[series] = number
        return name

    def put(self, part: Part) -> None:
        """Add a part or put it in the place of the one with its id."""
        self.parts[part.id] = part
        self._touched_parts[part.id] = None
        if self._names is not None:
            self._names.add(_folded(part.name))

    def put_wire(self, wire: Wire) -> None:
        """Add a wire or put it in the place of the one with its id."""
        if wire.id in self.wires:
            self._leave(self.wires[wire.id])
        self.wires[wire.id] = wire
        self._touched_wires[wire.id] = None
        if self._wires_by_part is not None:
            self._enter(wire)

    def drop(self, part_id: str) -> None:
        """Take a part away; its wires must be gone before the draft becomes an edit."""
        del self.parts[part_id]
        self._touched_parts[part_id] = None
        self._names = None

    def drop_wire(self, wire_id: str) -> None:
        """Take a wire away."""
        self._leave(self.wires.pop(wire_id))
        self._touched_wires[wire_id] = None

    def edit(self, sentence: str) -> Edit:
        """All changes as one edit; what ended up as it was is left out."""
        before = self.plant
        parts = {k: self.parts.get(k) for k in self._touched_parts if self.parts.get(k) != before.parts.get(k)}
        wires = {k: self.wires.get(k) for k in self._touched_wires if self.wires.get(k) != before.wires.get(k)}
        issued = self._next_number if self._next_number != before.next_number and (parts or wires) else None
        edit = Edit(sentence, parts, wires, next_number=issued)
        gone = {key for key, part in parts.items() if part is None}
        return _without_mentions(before, edit, gone) if gone else edit

    def _enter(self, wire: Wire) -> None:
        assert self._wires_by_part is not None
        for end in wire.ends:
            self._wires_by_part.setdefault(end.part, {})[wire.id] = None

    def _leave(self, wire: Wire) -> None:
        if self._wires_by_part is not None:
            for end in wire.ends:
                self._wires_by_part[end.part].pop(wire.id, None)


def is_joint(part: Part) -> bool:
    """Whether a part is a mere joint of wires: a bus without length and name, drawn as a dot."""
    return isinstance(part, Bus) and part.length == 0 and not part.name


def called(part: Part) -> str:
    """What a sentence calls a part: its name, else its kind."""
    return "a joint" if is_joint(part) else part.name or f"a {part.label.lower()}"


def listed(parts: Iterable[Part]) -> str:
    """What a sentence calls some parts: "T1", "T1 and Q2", "5 parts"."""
    names = [called(part) for part in parts]
    if len(names) > 3:
        return f"{len(names)} parts"
    return " and ".join(filter(None, (", ".join(names[:-1]), names[-1]))) if names else "nothing"


def counted(number: int, word: str) -> str:
    """A number with its noun: "1 wire", "3 wires"."""
    return f"{number} {word}{'' if number == 1 else 's'}"


def other_end(wire: Wire, part_id: str) -> End:
    """The end of a wire that is not on a part."""
    return wire.b if wire.a.part == part_id else wire.a


def reversed_wire(wire: Wire) -> Wire:
    """The same wire, told from its other end."""
    return Wire(wire.id, wire.b, wire.a, wire.corners[::-1])


def _without_mentions(before: Plant, edit: Edit, gone: set[str]) -> Edit:
    """The edit that also forgets dragged tags and arranged positions of parts that go."""
    stale = [key for key in before.tags if gone & set(re.split(r"[^A-Za-z0-9]+", key))]
    arrangements = tuple(
        replace(
            a,
            closed={k: v for k, v in a.closed.items() if k not in gone},
            in_service={k: v for k, v in a.in_service.items() if k not in gone},
        )
        for a in before.arrangements
    )
    changed = arrangements if arrangements != before.arrangements else None
    return replace(edit, tags=dict.fromkeys(stale), arrangements=changed)


def _age(wire: Wire) -> tuple[int, str]:
    digits = wire.id.lstrip("abcdefghijklmnopqrstuvwxyz")
    return (int(digits) if digits.isdecimal() else 0), wire.id


def _folded(name: str) -> str:
    return name.strip().casefold()
