"""Work that is the same for the same input, such as a page's axes: a face may keep its results between readings."""

from collections.abc import Callable, Hashable
from typing import Protocol, TypeVar

Result = TypeVar("Result")


class Remember(Protocol):
    """Gives the result of a station for what was given to it: one made before, or made now.

    What is given is immutable and says all that the result depends on; records with arrays count as the same only where
    they are the very same object.
    """

    def __call__(self, station: str, given: tuple[Hashable, ...], make: Callable[[], Result]) -> Result:
        """The result of ``make``, or an earlier one of the same station for the same input."""
        ...


def anew(station: str, given: tuple[Hashable, ...], make: Callable[[], Result]) -> Result:  # noqa: ARG001
    """Nothing is kept."""
    return make()
