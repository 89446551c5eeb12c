"""Symbolic analysis: in which order to eliminate the nodes, and where every number of the solver will stand.

Eliminating a node from a network is the star-mesh transformation: the node and its branches go, and every two of its
neighbours become coupled. Whether that is cheap depends only on the topology, so it is worked out once for each
topology and then serves any values, all sequences and all scenarios (see ``solver``).

**Order.** The nodes go in rounds. Each round removes every node that has fewer branches than each of its neighbours
(ties are broken by a fixed shuffle), as long as that is at most ``LOW_DEGREE`` or twice the least degree left. No two
nodes of a round are neighbours, so they do not see each other and the solver removes them all in the same array
operations. A network of a plant, nearly a tree, is gone after about log n rounds::

    o   o   o              round 0: the six outer ends
    └─┬─┘   │
      o──o──o──o           round 1: their parents that are cheapest among what is left
      │     │              ...
      o     o──o           the last few nodes: the dense top

This is minimum degree ordering with independent sets (Liu, "Modification of the minimum-degree algorithm by multiple
elimination", 1985; the independent sets by local minima: Luby, 1986).

**Dense top.** Once a node to be removed is joined to a quarter of what is left, sparse bookkeeping costs more than it
saves: the rest is kept as one dense block. That is the core of a heavily meshed network, a dozen nodes of a plant.

**Places.** Nodes are renumbered by their place in the order. The couplings (those given and the fill that the
elimination makes) are numbered in the order in which they are eliminated: these numbers are called slots. A pivot's
slots are consecutive, a level's pivots are consecutive, and all that a level changes lies behind its own places. So
each step of the solver is a product with a fixed sparse 0/1 matrix that sums contributions.
"""

import math
from collections.abc import Iterator
from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray
from scipy.sparse import csr_array

IntArray = NDArray[np.int64]
BoolArray = NDArray[np.bool_]
FloatArray = NDArray[np.float64]
ComplexArray = NDArray[np.complex128]

LOW_DEGREE = 4
"""Nodes with so few branches may go at once: their star-mesh transformation hardly makes more than it takes."""

DENSE_SHARE = 0.25
"""Share of the nodes left that a pivot may be joined to before the rest is treated as dense (0.5 was slower)."""


@dataclass(frozen=True, slots=True)
class SummingMatrix:
    """A sparse matrix of zeros and ones that sums rows of complex arrays: result row r = Σ of the rows that r lists."""

    ones: csr_array

    @classmethod
    def of(cls, n_rows: int, target: IntArray) -> "SummingMatrix":
        """The matrix with ``n_rows`` rows that adds row e of its operand to row ``target[e]``, for every e."""
        start = np.concatenate(([0], np.cumsum(np.bincount(target, minlength=n_rows))))
        listed = np.argsort(target, kind="stable")
        return cls(csr_array((np.ones(len(target)), listed, start), shape=(n_rows, len(target))))

    def __matmul__(self, operand: ComplexArray) -> ComplexArray:
        """Sum: operand (e, ...) gives (n_rows, ...). Real and imaginary parts are summed as neighbouring columns."""
        width = math.prod(operand.shape[1:])
        flat = np.ascontiguousarray(operand).reshape(len(operand), width).view(np.float64)
        summed: ComplexArray = (self.ones @ flat).view(np.complex128)
        return summed.reshape(-1, *operand.shape[1:])


@dataclass(frozen=True, slots=True)
class Level:
    """Nodes that are eliminated together: p pivots and the e couplings to their neighbours.

    pivots: their places. slots: of the e couplings. owner (e,): which pivot of the level, 0..p−1. neighbour (e,):
    place of the other end. onto_pivots: (p × e) sums couplings onto their pivots. onto_neighbours: (places behind the
    level × e) sums them onto their other ends.

    Pairs are two different couplings of the same pivot. pair_a, pair_b (q,): each pair once, as numbers 0..e−1.
    onto_pair_slots: (slots behind the level × q) sums pairs onto the coupling between their two neighbours. partner
    (2q,), partner_slot (2q,): each pair from both sides, first b for all a, then a for all b; and the slot between the
    two neighbours. onto_partnered: (e × 2q) sums what the partners give.
    """

    pivots: slice
    slots: slice
    owner: IntArray
    neighbour: IntArray
    onto_pivots: SummingMatrix
    onto_neighbours: SummingMatrix
    pair_a: IntArray
    pair_b: IntArray
    onto_pair_slots: SummingMatrix
    partner: IntArray
    partner_slot: IntArray
    onto_partnered: SummingMatrix


@dataclass(frozen=True)
class Pattern:
    """The symbolic analysis of one topology: reusable for any values. Made by ``analyse``.

    from_node, to_node (c,): the couplings as given. order (n,): node at each place. place (n,): place of each node.
    n_slots: distinct couplings, fill included. coupling_slot (c,): where each given coupling stands: n + its slot, or
    the place of its node for a coupling of a node with itself. stamp: ((n + n_slots) × (n + c)) sums the nodes'
    diagonal and the couplings' entries there. top: place of the first node of the dense top. top_slots: the slots of
    the top, between the places top + top_row and top + top_column.
    """

    n_nodes: int
    from_node: IntArray
    to_node: IntArray
    order: IntArray
    place: IntArray
    n_slots: int
    coupling_slot: IntArray
    stamp: SummingMatrix
    levels: tuple[Level, ...]
    top: int
    top_slots: slice
    top_row: IntArray
    top_column: IntArray

    @property
    def n_couplings(self) -> int:
        """Number of couplings given to ``analyse``, duplicates counted."""
        return len(self.from_node)


def analyse(n_nodes: int, rows: IntArray, cols: IntArray) -> Pattern:
    """Order the nodes and place all numbers for the network with these couplings.

    rows, cols (c,): end nodes of each coupling (branch), 0..n_nodes−1, in any order and direction. Parallel couplings
    are allowed and are summed. A coupling of a node with itself counts twice on the diagonal, as in the quadratic
    form.

    Raises ValueError if the arrays differ in length or name a node that is not there (a mistake of the program, not of
    the user). Source: see the module's text.
    """
    from_node, to_node = np.asarray(rows, np.int64).ravel(), np.asarray(cols, np.int64).ravel()
    _check_ends(n_nodes, from_node, to_node)
    rounds, top_nodes, top_keys = _eliminate(n_nodes, _distinct_keys(n_nodes, from_node, to_node))

    order = np.concatenate([*(r.pivots for r in rounds), top_nodes]).astype(np.int64)
    place = np.empty(n_nodes, np.int64)
    place[order] = np.arange(n_nodes)
    index = _SlotIndex.of(np.concatenate([*(r.keys for r in rounds), top_keys]).astype(np.int64))
    coupling_slot = np.where(
        from_node == to_node, place[from_node], n_nodes + index.find(_keys(n_nodes, from_node, to_node))
    )
    n_slots, top = index.n_slots, n_nodes - len(top_nodes)
    low, high = np.divmod(top_keys, max(n_nodes, 1))
    return Pattern(
        n_nodes=n_nodes,
        from_node=from_node,
        to_node=to_node,
        order=order,
        place=place,
        n_slots=n_slots,
        coupling_slot=coupling_slot,
        stamp=_stamp(place, coupling_slot, from_node == to_node, n_slots),
        levels=tuple(_levels(rounds, place, index)),
        top=top,
        top_slots=slice(n_slots - len(top_keys), n_slots),
        top_row=place[low] - top,
        top_column=place[high] - top,
    )


# Couplings as numbers ------------------------------------------------------------------------------------------------


def _keys(n_nodes: int, one: IntArray, other: IntArray) -> IntArray:
    """One number for each unordered pair of nodes. int64, as n² passes 2³¹ at 46,341 nodes."""
    keys: IntArray = np.minimum(one, other) * np.int64(n_nodes) + np.maximum(one, other)
    return keys


def _distinct_keys(n_nodes: int, from_node: IntArray, to_node: IntArray) -> IntArray:
    apart = from_node != to_node
    return np.unique(_keys(n_nodes, from_node[apart], to_node[apart]))


@dataclass(frozen=True, slots=True)
class _SlotIndex:
    """Finds the slot of a coupling by its key."""

    sorted_keys: IntArray
    slot: IntArray

    @classmethod
    def of(cls, keys_by_slot: IntArray) -> "_SlotIndex":
        slot = np.argsort(keys_by_slot)
        return cls(keys_by_slot[slot], slot)

    @property
    def n_slots(self) -> int:
        return len(self.slot)

    def find(self, keys: IntArray) -> IntArray:
        """Slots of the keys; a key that is not there (a node with itself) gives any slot."""
        if not self.n_slots:
            return np.zeros(len(keys), np.int64)
        found: IntArray = self.slot[np.minimum(np.searchsorted(self.sorted_keys, keys), self.n_slots - 1)]
        return found


# Rounds of elimination ----------------------------------------------------------------------------------------------


@dataclass(frozen=True, slots=True)
class _Round:
    """The nodes of one round and, sorted by pivot, their couplings and the pairs of these."""

    pivots: IntArray
    keys: IntArray
    owner: IntArray
    neighbour: IntArray
    pair_a: IntArray
    pair_b: IntArray
    pair_keys: IntArray


def _eliminate(n_nodes: int, keys: IntArray) -> tuple[list[_Round], IntArray, IntArray]:
    """Remove nodes in rounds until the rest is dense. Gives the rounds, the nodes left and the couplings left."""
    shuffle = np.random.default_rng(0).permutation(n_nodes)
    left = np.ones(n_nodes, np.bool_)
    n_left = n_nodes
    rounds: list[_Round] = []
    while n_left:
        low, high = np.divmod(keys, n_nodes)
        degree = np.bincount(low, minlength=n_nodes) + np.bincount(high, minlength=n_nodes)
        limit = max(LOW_DEGREE, 2 * int(degree.min(where=left, initial=n_nodes)))
        if limit >= DENSE_SHARE * n_left and len(keys):
            break
        rank = degree * n_nodes + shuffle
        chosen = left & (degree <= limit)
        chosen[np.where(rank[low] < rank[high], high, low)] = False
        going = chosen[low] | chosen[high]
        this = _round(n_nodes, chosen, degree, keys[going])
        rounds.append(this)
        keys = keys[~going]
        if len(this.pair_keys):
            keys = np.unique(np.concatenate((keys, this.pair_keys)))
        left &= ~chosen
        n_left -= len(this.pivots)
    return rounds, np.flatnonzero(left), keys


def _round(n_nodes: int, chosen: BoolArray, degree: IntArray, keys: IntArray) -> _Round:
    """The round that removes the chosen nodes, whose couplings have these keys."""
    low, high = np.divmod(keys, n_nodes)
    low_goes = chosen[low]
    pivot = np.where(low_goes, low, high)
    by_pivot = np.argsort(pivot, kind="stable")
    neighbour = np.where(low_goes, high, low)[by_pivot]

    pivots = np.flatnonzero(chosen)
    count = degree[pivots]
    pair_a, pair_b = _pairs(count)
    return _Round(
        pivots=pivots,
        keys=keys[by_pivot],
        owner=np.repeat(np.arange(len(count)), count),
        neighbour=neighbour,
        pair_a=pair_a,
        pair_b=pair_b,
        pair_keys=_keys(n_nodes, neighbour[pair_a], neighbour[pair_b]),
    )


def _pairs(count: IntArray) -> tuple[IntArray, IntArray]:
    """All pairs a < b within consecutive groups of the given sizes: counts [2, 3] give 01, 23, 24, 34."""
    end_of_group = np.repeat(np.cumsum(count), count)
    item = np.arange(len(end_of_group))
    after = end_of_group - item - 1  # partners of each item: the rest of its group
    pair_a = np.repeat(item, after)
    pair_b = np.arange(len(pair_a)) - np.repeat(np.cumsum(after) - after, after) + pair_a + 1
    return pair_a, pair_b


# From rounds to levels ----------------------------------------------------------------------------------------------


def _levels(rounds: list[_Round], place: IntArray, index: _SlotIndex) -> Iterator[Level]:
    """The rounds as levels, in places and slots."""
    n_nodes, n_slots = len(place), index.n_slots
    place_end = slot_end = 0
    for this in rounds:
        first_pivot, first_slot = place_end, slot_end
        place_end += len(this.pivots)
        slot_end += len(this.keys)
        neighbour, pair_slot = place[this.neighbour], index.find(this.pair_keys)
        yield Level(
            pivots=slice(first_pivot, place_end),
            slots=slice(first_slot, slot_end),
            owner=this.owner,
            neighbour=neighbour,
            onto_pivots=SummingMatrix.of(place_end - first_pivot, this.owner),
            onto_neighbours=SummingMatrix.of(n_nodes - place_end, neighbour - place_end),
            pair_a=this.pair_a,
            pair_b=this.pair_b,
            onto_pair_slots=SummingMatrix.of(n_slots - slot_end, pair_slot - slot_end),
            partner=np.concatenate((this.pair_b, this.pair_a)),
            partner_slot=np.concatenate((pair_slot, pair_slot)),
            onto_partnered=SummingMatrix.of(len(neighbour), np.concatenate((this.pair_a, this.pair_b))),
        )


def _stamp(place: IntArray, coupling_slot: IntArray, own: BoolArray, n_slots: int) -> SummingMatrix:
    """Sums diagonals and couplings into places and slots; couplings of a node with itself count twice."""
    n_rows = len(place) + n_slots
    once = SummingMatrix.of(n_rows, np.concatenate((place, coupling_slot)))
    if own.any():
        weight = np.concatenate((np.ones(len(place)), np.where(own, 2.0, 1.0)))
        once.ones.data[:] = weight[once.ones.indices]
    return once


def _check_ends(n_nodes: int, from_node: IntArray, to_node: IntArray) -> None:
    if n_nodes < 0 or len(from_node) != len(to_node):
        raise ValueError("every coupling needs two end nodes and the number of nodes must not be negative")
    ends = np.concatenate((from_node, to_node))
    if len(ends) and not 0 <= ends.min() <= ends.max() < n_nodes:
        raise ValueError(f"a coupling ends at a node outside 0..{n_nodes - 1}")
