"""Work that is the same for the same input, such as a page's axes: a face may keep its results between readings."""

from collections.abc import Callable, Hashable
from typing import Any, Protocol, TypeVar

Result = TypeVar("Result")


class Remember(Protocol):
    """Gives the result of a station for what was given to it: one made before, or made now.

    What is given is immutable and says all that the result depends on; records with arrays count as the same only where
    they are the very same object.
    """

    def __call__(self, station: str, given: tuple[Hashable, ...], make: Callable[[], Result]) -> Result:
        """The result of ``make``, or an earlier one of the same station for the same input."""
        ...


def within_reading(remember: Remember) -> Remember:
    """The same for the length of one reading: what two stations ask for is made once."""
    made: dict[tuple[str, tuple[Hashable, ...]], Any] = {}

    def once(station: str, given: tuple[Hashable, ...], make: Callable[[], Result]) -> Result:
        if (station, given) not in made:
            made[station, given] = remember(station, given, make)
        result: Result = made[station, given]
        return result

    return once


def anew(station: str, given: tuple[Hashable, ...], make: Callable[[], Result]) -> Result:  # noqa: ARG001
    """Nothing is kept."""
    return make()
