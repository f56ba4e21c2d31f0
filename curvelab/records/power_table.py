"""Straight lines in log-log as a table of power laws: several chains looked up at once, with one search."""

from collections.abc import Sequence
from dataclasses import dataclass, replace

import numpy as np

from curvelab.records.arrays import Floats, distinct

NUDGE = 1e-12
"""Relative distance within which an asked number counts as a tabulated one: turning currents between bases rounds."""

_VERTICAL = 1e-9
"""Two points this close in ln of what is given are one step: a nudge is small beside it."""

_BLOCK = 65_536
"""Numbers worked at a time, so that what is in between stays in the processor's cache."""

_SLICING_PAYS_FROM = 64
"""Asked numbers a row from which sorted ones are cheaper worked slice by slice than gathered."""


@dataclass(frozen=True, kw_only=True, slots=True, eq=False)
class PowerTable:
    """Rows between breaks; in row i the answer of chain k is ``value * (asked / anchor) ** slope``.

    Parameters
    ----------
    breaks : array, shape (m,)
        Rising; row i lies between breaks i - 1 and i.
    log_anchor, value, slope : array, shape (k, m + 1)
        NaN value where the row is not covered. At an anchor the answer is exactly the tabulated value.
    enclosing : bool
        Chains 1 and 2 are the bounds of chain 0: no rounding leaves it outside them.
    """

    breaks: Floats
    log_anchor: Floats
    value: Floats
    slope: Floats
    enclosing: bool = False

    def __call__(self, asked: Floats) -> Floats:
        """Answers of the k chains, shape (k, n), at the n positive numbers asked."""
        answers = np.empty((self.value.shape[0], asked.size))
        for start in range(0, asked.size, _BLOCK):
            here = slice(start, start + _BLOCK)
            self._answer(asked[here], answers[:, here])
            if self.enclosing:
                value, lower, upper = answers[:, here]
                np.minimum(lower, value, out=lower)
                np.maximum(upper, value, out=upper)
        return answers

    def _answer(self, asked: Floats, answers: Floats) -> None:
        """Answers to one block, written into ``answers``."""
        with np.errstate(divide="ignore", invalid="ignore"):
            log_asked = np.log(asked)
        if asked.size >= _SLICING_PAYS_FROM and bool((asked[1:] >= asked[:-1]).all()):
            first, last = self.breaks.searchsorted(asked[[0, -1]])
            if asked.size >= _SLICING_PAYS_FROM * (last - first + 1):
                ends = asked.searchsorted(self.breaks[first:last], side="right").tolist()
                rows_asked = zip(range(first, last + 1), [0, *ends], [*ends, asked.size], strict=True)
                self._fill([one for one in rows_asked if one[1] < one[2]], log_asked, answers)
                return
        rows = self.breaks.searchsorted(asked)
        for chain, answer in enumerate(answers):
            np.subtract(log_asked, self.log_anchor[chain].take(rows), out=answer)
            np.multiply(answer, self.slope[chain].take(rows), out=answer)
            np.exp(answer, out=answer)
            np.multiply(answer, self.value[chain].take(rows), out=answer)

    def _fill(self, rows: list[tuple[int, int, int]], log_asked: Floats, answers: Floats) -> None:
        """Answers of sorted numbers: those from ``start`` to ``stop`` lie in a row, for all chains at once."""
        for row, start, stop in rows:
            here = answers[:, start:stop]
            np.subtract(log_asked[start:stop], self.log_anchor[:, row : row + 1], out=here)
            np.multiply(here, self.slope[:, row : row + 1], out=here)
        np.exp(answers, out=answers)
        for row, start, stop in rows:
            here = answers[:, start:stop]
            np.multiply(here, self.value[:, row : row + 1], out=here)


def chain_table(given: Floats, answer: Floats, *, first: bool, clamped: bool = False) -> PowerTable:
    """The table of one chain of points joined by straight lines in log-log.

    Parameters
    ----------
    given, answer : array, shape (n,)
        Positive; ``given`` never falls.
    first : bool
        At a repeated given number answer the first of its points, else the last.
    clamped : bool
        Outside its ends the chain answers its end values, else NaN.
    """
    before, after = given * (1 - NUDGE), given * (1 + NUDGE)
    breaks = np.concatenate((before[:1], after) if first else (before, after[-1:]))
    log_given = np.log(given)
    run, rise = np.diff(log_given), np.diff(np.log(answer))
    slope = np.divide(rise, run, out=np.zeros_like(run), where=run > _VERTICAL)
    # Each row is anchored where it is closed, so that a tabulated number gives its tabulated answer to the last digit;
    # the one end that no row closes has a row of its own.
    level = np.zeros(1)
    slopes = (level, level, slope, level) if first else (level, slope, level, level)
    ends = answer[[0, -1]] if clamped else np.full(2, np.nan)
    return PowerTable(
        breaks=breaks,
        log_anchor=np.concatenate((log_given[:1], log_given, log_given[-1:]))[None],
        value=np.concatenate((ends[:1], answer, ends[1:]))[None],
        slope=np.concatenate(slopes)[None],
    )


def with_bounds(value: PowerTable, bounds: PowerTable) -> PowerTable:
    """A value with its lower and upper bound: none of them where there is no value."""
    table = side_by_side([value, bounds])
    covered = ~np.isnan(table.value[0])
    return replace(table, value=np.where(covered, table.value, np.nan), enclosing=True)


def side_by_side(tables: Sequence[PowerTable]) -> PowerTable:
    """One table that answers all chains of several on their common breaks."""
    breaks = distinct(np.concatenate([table.breaks for table in tables]))
    rows = [np.append(table.breaks.searchsorted(breaks), table.breaks.size) for table in tables]

    def gathered(name: str) -> Floats:
        chains = [getattr(table, name)[:, row] for table, row in zip(tables, rows, strict=True)]
        return np.concatenate(chains)

    return PowerTable(
        breaks=breaks, log_anchor=gathered("log_anchor"), value=gathered("value"), slope=gathered("slope")
    )


def end_to_end(tables: Sequence[PowerTable], *, first: bool) -> PowerTable:
    """One table of parts that follow one another, not covered between them; ``first`` as in `chain_table`."""

    def joined(name: str) -> Floats:
        pieces = [getattr(table, name)[:, :-1] for table in tables[:-1]]
        return np.concatenate([*pieces, getattr(tables[-1], name)], axis=1)

    breaks = np.concatenate([table.breaks for table in tables])
    return PowerTable(
        # Where two parts share a number, the one that answers there keeps the break.
        breaks=np.maximum.accumulate(breaks) if first else np.minimum.accumulate(breaks[::-1])[::-1],
        log_anchor=joined("log_anchor"),
        value=joined("value"),
        slope=joined("slope"),
    )
