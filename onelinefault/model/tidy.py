"""Positions for parts that nobody has placed: rows by distance from the supplies, columns by feeder.

A plant built by a script gets a presentable drawing this way. Every part has a column of its own wherever it could
meet another: a bus spans the columns of its feeders, a feeder runs straight down in one column, a tie hangs between the
ends of its two buses. Rows: modules downwards; columns: modules to the right.
"""

from collections import deque
from collections.abc import Iterable, Mapping, Sequence
from dataclasses import dataclass, field
from typing import Final

from onelinefault.model.part import Part
from onelinefault.model.plant import Wire
from onelinefault.model.quantity import Quantity

COLUMN: Final = 16  # modules; room for a symbol and the words beside it
_HALF: Final = COLUMN // 2
_ROW_GAP: Final = 4
_LEAST_BAR: Final = 12
_BAR_LEFT: Final = 10  # modules of bar left of its first feeder: its name stands there
_BAR_RIGHT: Final = 4
_TIE_DROP: Final = 4  # modules that a tie hangs below its buses
_TIE_REACH: Final = 5  # modules from a tie's middle to the ends of the bars it joins


@dataclass(frozen=True, slots=True)
class Spot:
    """Where a part may stand: origin and quarter turns as in Part; length of a bar, None for other parts."""

    x: int
    y: int
    turn: int = 0
    length: int | None = None


@dataclass(eq=False)
class _Node:
    """A part in the tree of columns. left: of its block, relative to its parent's block; column: within its block."""

    part: Part
    row: int
    parent: str | None = None
    children: list[str] = field(default_factory=list)
    tie: bool = False
    highest: int = 0
    lowest: int = 0
    width: int = COLUMN
    column: int = _HALF
    left: int = 0

    @property
    def is_bar(self) -> bool:
        """A bus: the only part whose wires end anywhere along it."""
        return self.part.kind == "bus"


def tidy(parts: Mapping[str, Part], wires: Iterable[Wire]) -> dict[str, Spot]:
    """A spot for every part, each connected group beside the other, notes and loose parts last."""
    beside: dict[str, dict[str, None]] = {key: {} for key in parts}
    ends: dict[str, list[tuple[str, str]]] = {key: [] for key in parts}
    for wire in wires:
        for here, there in ((wire.a, wire.b), (wire.b, wire.a)):
            ends[here.part].append((here.terminal, there.part))
            if here.part != there.part:
                beside[here.part][there.part] = None
    groups = _groups(beside)
    spots: dict[str, Spot] = {}
    left = 0
    for group in groups:
        if len(group) > 1:
            nodes = _tree(parts, beside, group)
            for key in reversed(nodes):
                _measure(nodes, nodes[key])
            spots |= _placed(nodes, ends, left)
            left += max(node.width for node in nodes.values() if node.parent is None) + _ROW_GAP
    below = max((spot.y for spot in spots.values()), default=-2 * _ROW_GAP) + 2 * _ROW_GAP
    left = 0
    for key in (group[0] for group in groups if len(group) == 1):
        spots[key] = Spot(left, below, 0, _LEAST_BAR if parts[key].kind == "bus" else None)
        left += max(COLUMN, int(getattr(parts[key], "width", 0)) + _ROW_GAP)
    return spots


def _groups(beside: Mapping[str, Iterable[str]]) -> list[list[str]]:
    """Connected groups, each in the order its parts were added."""
    seen: set[str] = set()
    groups = []
    for key in beside:
        if key not in seen:
            reached = set(_reached([key], beside))
            seen |= reached
            groups.append([k for k in beside if k in reached])
    return groups


def _reached(roots: Sequence[str], beside: Mapping[str, Iterable[str]]) -> dict[str, int]:
    """Steps to every part that can be reached, breadth first."""
    steps = dict.fromkeys(roots, 0)
    queue = deque(roots)
    while queue:
        key = queue.popleft()
        for other in beside[key]:
            if other not in steps:
                steps[other] = steps[key] + 1
                queue.append(other)
    return steps


def _voltage_kv(part: Part) -> float:
    values = [value for value in vars(part).values() if isinstance(value, Quantity) and value.dimension == "voltage"]
    return max((value.to("kV") for value in values), default=0.0)


def _roots(parts: Mapping[str, Part], group: Sequence[str]) -> list[str]:
    """Where the rows begin: the sources of the highest voltage that stand above what they feed; else any source."""
    sources = [key for key in group if parts[key].is_source]
    standing = [key for key in sources if parts[key].terminals[0].dy > 0]
    found = standing or sources[:1] or [key for key in group if parts[key].terminals][:1] or list(group[:1])
    highest = max(_voltage_kv(parts[key]) for key in found)
    return [key for key in found if _voltage_kv(parts[key]) == highest]


def _tree(
    parts: Mapping[str, Part], beside: Mapping[str, Mapping[str, None]], group: Sequence[str]
) -> dict[str, _Node]:
    """The tree of columns from the first root, in breadth-first order; every part of the group is in it once."""
    roots = _roots(parts, group)
    rows = _reached(roots, beside)
    _raise_further_sources(parts, beside, rows)
    nodes = {roots[0]: _Node(parts[roots[0]], rows[roots[0]])}
    for key in (queue := [roots[0]]):
        node = nodes[key]
        for other in beside[key]:
            if other not in nodes:
                nodes[other] = _Node(parts[other], rows[other], parent=key)
                node.children.append(other)
                queue.append(other)
    for node in nodes.values():
        node.tie = _is_tie(node, nodes)
    for node in nodes.values():
        node.children.sort(key=lambda child: nodes[child].tie)
    return nodes


def _raise_further_sources(
    parts: Mapping[str, Part], beside: Mapping[str, Mapping[str, None]], rows: dict[str, int]
) -> None:
    """A supply at a lower voltage, and what lies between it and its bus, goes above that bus."""
    for key, part in parts.items():
        if key not in rows or rows[key] == 0 or not part.is_source or part.terminals[0].dy <= 0:
            continue
        chain = [key]
        while parts[chain[-1]].kind != "bus":
            onward = [other for other in beside[chain[-1]] if other not in chain]
            if len(onward) != 1:
                break
            chain.append(onward[0])
        if parts[chain[-1]].kind == "bus":
            for above, one in enumerate(reversed(chain)):
                rows[one] = rows[chain[-1]] - above


def _is_tie(node: _Node, nodes: Mapping[str, _Node]) -> bool:
    """Whether a part lies between two buses of one row, and can be hung between their ends."""
    if node.parent is None or len(node.children) != 1 or len(node.part.terminals) != 2:
        return False
    above, below = nodes[node.parent], nodes[node.children[0]]
    return above.is_bar and below.is_bar and above.row == below.row


def _measure(nodes: Mapping[str, _Node], node: _Node) -> None:
    """Width of the block and columns within it, from the blocks of the children."""
    children = [nodes[key] for key in node.children]
    node.highest = min([node.row, *(child.highest for child in children)])
    node.lowest = max([node.row, *(child.lowest for child in children)])
    parent = nodes[node.parent] if node.parent else None
    if node.is_bar:
        _measure_bar(node, children, parent)
    elif node.tie:
        node.width = COLUMN + _in_a_row(children, COLUMN)
    elif children:
        _measure_feeder(node, children, parent)


def _in_a_row(blocks: Sequence[_Node], left: int) -> int:
    """Put blocks side by side from a place on; their width together."""
    width = 0
    for block in blocks:
        block.left = left + width
        width += block.width
    return width


def _measure_feeder(node: _Node, children: Sequence[_Node], parent: _Node | None) -> None:
    straight = [child for child in children if _runs_on(node, child, parent)]
    turning = [child for child in children if child not in straight]
    width = _in_a_row(straight, 0) if straight else COLUMN
    if straight:
        node.column = sum(child.left + child.column for child in straight) // len(straight)
    node.width = width + _in_a_row(turning, width)


def _runs_on(node: _Node, child: _Node, parent: _Node | None) -> bool:
    """Whether the way from the parent over the node to the child keeps going down, or keeps going up."""
    onward = child.row - node.row
    return onward != 0 and (parent is None or onward * (node.row - parent.row) > 0)


def _measure_bar(node: _Node, children: Sequence[_Node], parent: _Node | None) -> None:
    above = [child for child in children if child.lowest < node.row]
    below = [child for child in children if child.highest > node.row and not child.tie]
    rest = [child for child in children if child not in above and child not in below]
    aside = sorted(rest, key=lambda child: not child.tie)  # nothing may stand between a bar and its first tie
    fed_from_above = parent is not None and not parent.tie and parent.row < node.row
    fed_from_below = parent is not None and not parent.tie and not fed_from_above
    start = COLUMN if fed_from_below else 0
    upper = (COLUMN if fed_from_above else 0) + sum(child.width for child in above)
    lower = sum(child.width for child in below)
    core = max(upper, lower, COLUMN)
    first = start + (core - upper) // 2
    _in_a_row(above, first + (COLUMN if fed_from_above else 0))
    _in_a_row(below, start + (core - lower) // 2)
    node.column = _HALF if fed_from_below else first + _HALF
    if not above and below and not fed_from_below:
        node.column = (below[0].left + below[0].column + below[-1].left + below[-1].column) // 2
    node.width = start + core + _in_a_row(aside, start + core)


def _placed(nodes: Mapping[str, _Node], ends: Mapping[str, list[tuple[str, str]]], left: int) -> dict[str, Spot]:
    lefts: dict[str, int] = {}
    for key, node in nodes.items():  # parents come first
        lefts[key] = left if node.parent is None else lefts[node.parent] + node.left
    columns = {key: lefts[key] + node.column for key, node in nodes.items()}
    rows = _row_places(nodes)
    spots = {}
    for key, node in nodes.items():
        if node.is_bar:
            spots[key] = _bar(node, columns, nodes, rows[node.row])
        elif node.tie and node.parent is not None:
            a_first = any(t == node.part.terminals[0].name and other == node.parent for t, other in ends[key])
            spots[key] = Spot(columns[key], rows[nodes[node.parent].row] + _TIE_DROP, 3 if a_first else 1)
        else:
            spots[key] = Spot(columns[key], rows[node.row], 2 if _upside_down(node, nodes, ends[key]) else 0)
    return spots


def _row_places(nodes: Mapping[str, _Node]) -> dict[int, int]:
    """How far down each row lies: room for the tallest part of every row and a gap between rows."""
    up: dict[int, int] = {}
    down: dict[int, int] = {}
    for node in nodes.values():
        reach = max((abs(t.dy) for t in node.part.terminals), default=0) if not node.tie else 0
        up[node.row] = down[node.row] = max(up.get(node.row, 0), reach)
    places = {}
    at = 0
    for row in sorted(up):
        at += up[row]
        places[row] = at
        at += down[row] + _ROW_GAP
    return places


def _bar(node: _Node, columns: Mapping[str, int], nodes: Mapping[str, _Node], y: int) -> Spot:
    """The bar over the columns of its feeders, drawn out to the ties that stand next to it."""
    reach = [columns[key] for key in node.children if _under_or_over(nodes[key], node)]
    if not reach or (node.parent is not None and not nodes[node.parent].tie):
        reach.append(columns[node.part.id])  # where it is fed
    left, right = min(reach) - _BAR_LEFT, max(reach) + _BAR_RIGHT
    if node.parent is not None and nodes[node.parent].tie:
        left = columns[node.parent] + _TIE_REACH
    ties = [key for key in node.children if nodes[key].tie]
    if ties:
        right = columns[ties[0]] - _TIE_REACH
    return Spot(left, y, 0, right - left)


def _under_or_over(child: _Node, bar: _Node) -> bool:
    """Whether a bar's feeder stands in the columns that the bar spans, not beyond its end."""
    return not child.tie and not child.highest <= bar.row <= child.lowest


def _upside_down(node: _Node, nodes: Mapping[str, _Node], ends: Iterable[tuple[str, str]]) -> bool:
    """Whether most of a part's wires would leave it on the wrong side."""
    sides = {terminal.name: terminal.dy for terminal in node.part.terminals}
    score = 0
    for terminal, other in ends:
        down = nodes[other].row - node.row
        score += (sides[terminal] > 0) - (sides[terminal] < 0) if down > 0 else 0
        score -= (sides[terminal] > 0) - (sides[terminal] < 0) if down < 0 else 0
    return score < 0
