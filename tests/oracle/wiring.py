"""Which terminals are one electrical node, which parts hang together, and what voltage is nominal where."""

from collections.abc import Iterable

from onelinefault.model.conductors import Busway, Cable, OverheadLine, Reactor
from onelinefault.model.consumers import Bus, Capacitor, Load, Note
from onelinefault.model.part import Part
from onelinefault.model.plant import Plant
from onelinefault.model.quantity import Quantity
from onelinefault.model.switching import Breaker, Fuse, Switch

TerminalKey = tuple[str, str]
Length = Cable | OverheadLine | Busway
DEVICES = (Breaker, Switch, Fuse)
PASSIVE = (Bus, Load, Capacitor, Note)


class Wiring:
    """Which terminals are one node (wires and closed devices), and which parts hang on the faulted network."""

    def __init__(self, plant: Plant) -> None:
        self.plant = plant
        self._root: dict[TerminalKey, TerminalKey] = {
            (part.id, terminal.name): (part.id, terminal.name)
            for part in plant.parts.values()
            for terminal in part.terminals
        }
        for wire in plant.wires.values():
            self._join((wire.a.part, wire.a.terminal), (wire.b.part, wire.b.terminal))
        for part in plant.parts.values():
            if isinstance(part, DEVICES) and part.value("closed") and part.in_service:
                self._join((part.id, "a"), (part.id, "b"))

    def node(self, key: TerminalKey) -> TerminalKey:
        """The terminal that stands for the node."""
        while self._root[key] != key:
            key = self._root[key]
        return key

    def _join(self, a: TerminalKey, b: TerminalKey) -> None:
        self._root[self.node(a)] = self.node(b)

    def reached_from(self, start: TerminalKey) -> list[Part]:
        """Parts that the node feeds or is fed by, through branches, in the plant's order."""
        nodes, grown = {self.node(start)}, True
        while grown:
            grown = False
            for part in self.branches():
                ends = {self.node((part.id, t.name)) for t in part.terminals}
                if ends & nodes and not ends <= nodes:
                    nodes |= ends
                    grown = True
        return [p for p in self.branches() if self.node((p.id, p.terminals[0].name)) in nodes]

    def branches(self) -> Iterable[Part]:
        """Parts with an impedance that are in service."""
        return (p for p in self.plant.parts.values() if p.in_service and not isinstance(p, (*DEVICES, *PASSIVE)))

    def terminals_of(self, nodes: set[TerminalKey]) -> list[TerminalKey]:
        """All terminals on these nodes."""
        return [key for key in self._root if self.node(key) in nodes]

    def nominal_kv(self, key: TerminalKey) -> float:
        """Nominal voltage of the node: its bus's, else carried through lines and reactors from one that has a bus."""
        seen, border = {self.node(key)}, [self.node(key)]
        while border:
            here = border.pop(0)
            for part in self.plant.parts.values():
                value = part.value("nominal_voltage") if isinstance(part, Bus) else None
                if isinstance(value, Quantity) and self.node((part.id, "bar")) == here:
                    return value.to("kV")
            for part in self.branches():
                if isinstance(part, Length | Reactor):
                    ends = [self.node((part.id, "a")), self.node((part.id, "b"))]
                    if here in ends:
                        more = [end for end in ends if end not in seen]
                        seen.update(more)
                        border += more
        raise AssertionError(f"no bus gives the voltage at {key}")
