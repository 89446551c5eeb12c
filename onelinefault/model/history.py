"""What was done, what was taken back: undo keeps the earlier plants themselves, so it returns exactly what was."""

from dataclasses import dataclass

from onelinefault.model.edits import Edit, apply
from onelinefault.model.plant import Plant


@dataclass(frozen=True, slots=True)
class Step:
    """One step of the history: the edit, and the plant before and after it. Untouched parts are shared by all."""

    edit: Edit
    before: Plant
    after: Plant


class History:
    """The plant as it stands and the steps that led there.

    limit: how many steps are kept; the oldest are forgotten first.
    """

    def __init__(self, plant: Plant, limit: int = 500) -> None:
        self._plant = plant
        self._limit = limit
        self._done: list[Step] = []
        self._undone: list[Step] = []

    @property
    def plant(self) -> Plant:
        """The plant as it stands."""
        return self._plant

    def apply(self, edit: Edit) -> Plant:
        """Do an edit and give the new plant; what was taken back before can then not be done again.

        An edit that names no change is no step. Raises EditError, with plant and history unchanged, when the plant
        refuses the edit.
        """
        if edit.empty:
            return self._plant
        after = apply(self._plant, edit)
        self._done.append(Step(edit, self._plant, after))
        del self._done[: -self._limit]
        self._undone.clear()
        self._plant = after
        return after

    def undo(self) -> str | None:
        """Take the last step back and give its sentence; None when there is none."""
        if not self._done:
            return None
        step = self._done.pop()
        self._undone.append(step)
        self._plant = step.before
        return step.edit.sentence

    def redo(self) -> str | None:
        """Do the step again that was taken back last and give its sentence; None when there is none."""
        if not self._undone:
            return None
        step = self._undone.pop()
        self._done.append(step)
        self._plant = step.after
        return step.edit.sentence

    @property
    def done(self) -> tuple[Step, ...]:
        """The steps done, the oldest first."""
        return tuple(self._done)

    @property
    def undone(self) -> tuple[Step, ...]:
        """The steps taken back, the one that redo takes first at the front."""
        return tuple(reversed(self._undone))

    @property
    def sentences(self) -> tuple[str, ...]:
        """What was done, for people, the oldest first."""
        return tuple(step.edit.sentence for step in self._done)

    @property
    def next_undo(self) -> str | None:
        """The sentence of the step that undo would take back."""
        return self._done[-1].edit.sentence if self._done else None

    @property
    def next_redo(self) -> str | None:
        """The sentence of the step that redo would do again."""
        return self._undone[-1].edit.sentence if self._undone else None
