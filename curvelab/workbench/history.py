"""The steps of a draft as an immutable list: undo and redo move a position, a new step strikes out what was undone."""

from dataclasses import dataclass, replace

from curvelab.errors import InputError
from curvelab.records.worksheet import Worksheet


@dataclass(frozen=True, kw_only=True, slots=True)
class Step:
    """A worksheet and what was done to get there, in plain words; ``version`` numbers all steps ever made."""

    version: int
    words: str
    worksheet: Worksheet


@dataclass(frozen=True, kw_only=True, slots=True)
class History:
    """All steps that can be returned to, and the one that holds.

    ``version`` counts every change, undo and redo too: what a change builds on.
    """

    version: int
    position: int
    steps: tuple[Step, ...]

    @classmethod
    def begun(cls, worksheet: Worksheet, words: str) -> "History":
        """A history of one step."""
        return cls(version=1, position=0, steps=(Step(version=1, words=words, worksheet=worksheet),))

    @property
    def worksheet(self) -> Worksheet:
        """What holds."""
        return self.steps[self.position].worksheet

    def with_step(self, worksheet: Worksheet, words: str) -> "History":
        """One step further."""
        step = Step(version=self.version + 1, words=words, worksheet=worksheet)
        steps = (*self.steps[: self.position + 1], step)
        return History(version=step.version, position=len(steps) - 1, steps=steps)

    @property
    def can_undo(self) -> bool:
        """Whether there is a step before."""
        return self.position > 0

    @property
    def can_redo(self) -> bool:
        """Whether a step was undone."""
        return self.position < len(self.steps) - 1

    def undone(self) -> "History":
        """One step back.

        Raises
        ------
        InputError
            There is none.
        """
        if not self.can_undo:
            raise InputError("There is nothing to undo")
        return replace(self, version=self.version + 1, position=self.position - 1)

    def redone(self) -> "History":
        """The step that was undone last.

        Raises
        ------
        InputError
            There is none.
        """
        if not self.can_redo:
            raise InputError("There is nothing to redo")
        return replace(self, version=self.version + 1, position=self.position + 1)
