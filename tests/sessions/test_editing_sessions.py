"""Random editing sessions: whatever is drawn, undone, pasted, saved and opened again, the plant stays whole."""

from collections import Counter
from collections.abc import Callable

from hypothesis import Phase, settings
from hypothesis import strategies as st
from hypothesis.stateful import RuleBasedStateMachine, initialize, invariant, precondition, rule

from onelinefault.errors import EditError
from onelinefault.model import editing
from onelinefault.model.consumers import Bus
from onelinefault.model.edits import Edit, apply, inverse
from onelinefault.model.fields import Basis
from onelinefault.model.history import History
from onelinefault.model.parts import terminal_place
from onelinefault.model.plant import End, Plant, Wire
from onelinefault.store.file_format import plant_text
from onelinefault.store.journal import edit_from, edit_record
from onelinefault.store.plant_file import plant_from_bytes

KINDS = ("bus", "supply", "transformer", "transformer3", "cable", "breaker", "induction_motor", "load", "note")
SERIES = ("cable", "breaker", "transformer", "bus")
STEPS = st.integers(-6, 6)
SPOTS = st.integers(0, 30)


def numbers(ids: list[str]) -> list[int]:
    return [int(key[1:]) for key in ids]


class EditingSession(RuleBasedStateMachine):
    """One person at the sheet."""

    @initialize()
    def open_a_small_plant(self) -> None:
        """Two boards, a tie, a feeder with a joint, a second sheet, an arrangement."""
        self.history = History(Plant())
        bus_1, tie, bus_2, cable, load, motor = (f"p{i}" for i in range(1, 7))
        for kind, x, y, turn in (("bus", 0, 10, 0), ("breaker", 15, 10, 3), ("bus", 20, 10, 0)):
            self.do(lambda p, k=kind, x=x, y=y, t=turn: editing.place(p, k, "s1", x, y, t))
        for kind, x, y in (("cable", 5, 16), ("load", 5, 30), ("induction_motor", 9, 30)):
            self.do(lambda p, k=kind, x=x, y=y: editing.place(p, k, "s1", x, y))
        for a, b in (
            (End(bus_1, "bar", 12), End(tie, "a")),
            (End(tie, "b"), End(bus_2, "bar", 0)),
            (End(bus_1, "bar", 5), End(cable, "a")),
            (End(cable, "b"), End(load, "line")),
        ):
            self.do(lambda p, a=a, b=b: editing.connect(p, a, b))
        feeder = self.plant.wires_of(load)[0].id
        self.do(lambda p: editing.connect(p, editing.WirePoint(feeder, 5, 24), End(motor, "line"), [(9, 24)]))
        self.do(editing.add_sheet)
        self.do(lambda p: editing.add_arrangement(p, "Night"))
        self.fragment = editing.copy(self.plant, (tie, bus_2))

    @property
    def plant(self) -> Plant:
        return self.history.plant

    def do(self, build: Callable[[Plant], Edit]) -> Edit | None:
        """Build and apply an edit; None when the plant refuses. Checks undo by value, and the journal's spelling."""
        before = self.plant
        try:
            edit = build(before)
        except EditError as error:
            assert str(error)
            return None
        after = self.history.apply(edit)  # what a builder has built can always be applied
        assert edit.sentence
        assert apply(after, inverse(before, edit)) == before
        assert apply(before, edit_from(edit_record(edit))) == after
        return edit

    def some_parts(self, data: st.DataObject, most: int = 4) -> list[str]:
        return data.draw(st.lists(st.sampled_from(sorted(self.plant.parts)), min_size=1, max_size=most, unique=True))

    def some_end(self, data: st.DataObject) -> End:
        part = self.plant.parts[data.draw(st.sampled_from([k for k, p in self.plant.parts.items() if p.terminals]))]
        terminal = data.draw(st.sampled_from([t.name for t in part.terminals]))
        return End(part.id, terminal, data.draw(st.integers(0, part.length)) if isinstance(part, Bus) else None)

    def some_target(self, data: st.DataObject) -> End | editing.WirePoint:
        if self.plant.wires and data.draw(st.booleans()):
            wire = self.some_wire(data)
            places = [terminal_place(self.plant.parts[e.part], e.terminal, e.at) for e in wire.ends]
            middle = [(a + b) // 2 for a, b in zip(*places, strict=True)]
            return editing.WirePoint(wire.id, *middle)
        return self.some_end(data)

    def some_wire(self, data: st.DataObject) -> Wire:
        return self.plant.wires[data.draw(st.sampled_from(sorted(self.plant.wires)))]

    @rule(data=st.data(), kind=st.sampled_from(KINDS), x=SPOTS, y=SPOTS, turn=st.integers(0, 3))
    def place(self, data: st.DataObject, kind: str, x: int, y: int, turn: int) -> None:
        taken = {p.name.casefold() for p in self.plant.parts.values()}
        sheet = data.draw(st.sampled_from([s.id for s in self.plant.sheets]))
        edit = self.do(lambda p: editing.place(p, kind, sheet, x, y, turn))
        assert edit is not None
        (part,) = edit.parts.values()
        assert part is not None and (not part.name or part.name.casefold() not in taken)

    @precondition(lambda self: any(p.terminals for p in self.plant.parts.values()))
    @rule(data=st.data(), corners=st.lists(st.tuples(SPOTS, SPOTS), max_size=3))
    def connect(self, data: st.DataObject, corners: list[tuple[int, int]]) -> None:
        a, b = self.some_target(data), self.some_target(data)
        self.do(lambda p: editing.connect(p, a, b, corners))

    @precondition(lambda self: self.plant.wires)
    @rule(data=st.data(), kind=st.sampled_from(SERIES))
    def insert(self, data: st.DataObject, kind: str) -> None:
        wire = self.some_wire(data)
        place = terminal_place(self.plant.parts[wire.a.part], wire.a.terminal, wire.a.at)
        before = self.plant
        edit = self.do(lambda p: editing.insert_into_wire(p, wire.id, kind, *place))
        assert edit is not None
        (new,) = editing.added_parts(before, edit)
        assert len(self.plant.wires_of(new)) == 2 and len(self.plant.wires) == len(before.wires) + 1

    @precondition(lambda self: self.plant.parts)
    @rule(data=st.data(), dx=STEPS, dy=STEPS, how=st.integers(0, 4))
    def shift(self, data: st.DataObject, dx: int, dy: int, how: int) -> None:
        ids = self.some_parts(data)
        before = {key: wire.ends for key, wire in self.plant.wires.items()}
        self.do(
            lambda p: (
                editing.move(p, ids, dx, dy),
                editing.turn(p, ids),
                editing.mirror(p, ids),
                editing.align(p, ids, editing.EDGES[abs(dx) % 6]),
                editing.distribute(p, ids, editing.DIRECTIONS[dx % 2]),
            )[how]
        )
        assert {key: wire.ends for key, wire in self.plant.wires.items()} == before  # every joint is kept

    @precondition(lambda self: any(isinstance(p, Bus) and p.name for p in self.plant.parts.values()))
    @rule(data=st.data(), end=st.sampled_from(["start", "far"]), to=st.integers(-20, 40))
    def stretch(self, data: st.DataObject, end: str, to: int) -> None:
        bus = data.draw(st.sampled_from([p.id for p in self.plant.parts.values() if isinstance(p, Bus) and p.name]))
        places = self.wire_places()
        self.do(lambda p: editing.stretch_bus(p, bus, end, to))
        assert self.wire_places() == places

    def wire_places(self) -> dict[str, list[tuple[int, int]]]:
        parts = self.plant.parts
        return {
            key: [terminal_place(parts[e.part], e.terminal, e.at) for e in wire.ends]
            for key, wire in self.plant.wires.items()
        }

    @precondition(lambda self: self.plant.parts)
    @rule(data=st.data(), with_wires=st.booleans())
    def remove(self, data: st.DataObject, with_wires: bool) -> None:
        ids = self.some_parts(data)
        wires = [self.some_wire(data).id] if with_wires and self.plant.wires else []
        self.do(lambda p: editing.remove(p, ids, wires))
        assert not set(ids) & set(self.plant.parts)

    @precondition(lambda self: self.plant.parts)
    @rule(data=st.data(), cut=st.booleans())
    def copy(self, data: st.DataObject, cut: bool) -> None:
        ids = self.some_parts(data, 6)
        if cut:
            self.fragment, edit = editing.cut(self.plant, ids)
            self.do(lambda _: edit)
        else:
            self.fragment = editing.copy(self.plant, ids)

    @rule(dx=SPOTS, dy=SPOTS)
    def paste(self, dx: int, dy: int) -> None:
        names = Counter(p.name.casefold() for p in self.plant.parts.values() if p.name)
        edit = self.do(lambda p: editing.paste(p, self.fragment, "s1", dx, dy))
        if edit is not None:
            added = [part.name.casefold() for part in edit.parts.values() if part is not None and part.name]
            assert len(set(added)) == len(added) and not set(added) & set(names)

    @precondition(lambda self: self.plant.parts)
    @rule(
        data=st.data(), name=st.sampled_from(["Tie", "tie ", "M1", "Q 2"]), text=st.sampled_from(["6 %", "0.1 pu", ""])
    )
    def annotate(self, data: st.DataObject, name: str, text: str) -> None:
        (part,) = self.some_parts(data, 1)
        steps: list[Callable[[Plant], Edit]] = [
            lambda p: editing.rename(p, part, name),
            lambda p: editing.set_in_service(p, [part], not p.parts[part].in_service),
            lambda p: editing.set_tag(p, part, (1, 2)),
            lambda p: editing.move_label(p, part, 1, 1),
        ]
        if self.plant.arrangements:
            arrangement = self.plant.arrangements[-1].id
            steps.append(lambda p: editing.set_arrangement_service(p, arrangement, part, False))
        if self.plant.parts[part].kind == "breaker":
            steps.append(lambda p: editing.toggle_closed(p, part))
        if self.plant.parts[part].kind == "transformer":
            steps.append(lambda p: editing.set_text(p, [part], "impedance", text, Basis.LETTER))
            steps.append(lambda p: editing.set_text(p, [part], "high_voltage", "33 kV"))
            steps.append(lambda p: editing.set_text(p, [part], "low_voltage", "11 kV" if text else "33 kV"))
        self.do(lambda p: editing.in_turn(p, steps, f"Label {name}"))

    @precondition(lambda self: self.plant.parts)
    @rule(data=st.data(), remove=st.booleans())
    def use_sheets(self, data: st.DataObject, remove: bool) -> None:
        sheet = self.plant.sheets[-1].id
        if sheet == "s1":
            self.do(editing.add_sheet)
        elif remove:
            self.do(lambda p: editing.remove_sheet(p, sheet, with_parts=True))
        else:
            ids = self.some_parts(data)
            self.do(lambda p: editing.move_to_sheet(p, ids, sheet, 1, 0))

    @rule(times=st.integers(1, 4), again=st.integers(0, 4))
    def undo_and_redo(self, times: int, again: int) -> None:
        walked = []
        for _ in range(times):
            before = self.plant
            step = self.history.done[-1] if self.history.done else None
            if self.history.undo() is None:
                break
            assert step is not None and self.plant is step.before
            walked.append(before)
        for after in walked[::-1][:again]:
            assert self.history.redo() is not None and self.plant is after

    @rule()
    def save_and_open_again(self) -> None:
        opened, _ = plant_from_bytes(plant_text(self.plant).encode())
        assert opened == self.plant
        assert plant_text(opened) == plant_text(self.plant)
        self.history = History(opened)

    @invariant()
    def every_wire_ends_at_terminals(self) -> None:
        for wire in self.plant.wires.values():
            for end in wire.ends:
                part = self.plant.parts[end.part]
                assert end.terminal in {t.name for t in part.terminals}
                assert (0 <= (end.at or 0) <= part.length) if isinstance(part, Bus) else end.at is None
            assert wire.a.part != wire.b.part

    @invariant()
    def no_two_wires_join_the_same_terminals(self) -> None:
        pairs = Counter(frozenset((e.part, e.terminal) for e in w.ends) for w in self.plant.wires.values())
        assert not pairs or max(pairs.values()) == 1

    @invariant()
    def ids_are_unique_and_never_issued_again(self) -> None:
        plant = self.plant
        ids = [*plant.parts, *plant.wires, *(s.id for s in plant.sheets), *(a.id for a in plant.arrangements)]
        assert len(set(ids)) == len(ids)
        assert all(key == thing.id for things in (plant.parts, plant.wires) for key, thing in things.items())
        assert not set(editing.new_ids(plant, "p", 3)) & set(ids)
        assert max(numbers([*plant.parts, *plant.wires]), default=0) < plant.next_number

    @invariant()
    def parts_stand_on_sheets_and_joints_join(self) -> None:
        sheets = {s.id for s in self.plant.sheets}
        for part in self.plant.parts.values():
            assert part.sheet in sheets
            if editing.is_joint(part):
                assert len(self.plant.wires_of(part.id)) >= 3

    @invariant()
    def nothing_mentions_what_is_gone(self) -> None:
        parts = self.plant.parts
        assert set(self.plant.tags) <= set(parts)
        for arrangement in self.plant.arrangements:
            assert set(arrangement.closed) | set(arrangement.in_service) <= set(parts)


# no shrinking: it takes minutes here, and the printed steps can be read as they are
EditingSession.TestCase.settings = settings(
    max_examples=60, stateful_step_count=30, deadline=None, phases=[Phase.explicit, Phase.generate]
)
TestEditingSession = EditingSession.TestCase
