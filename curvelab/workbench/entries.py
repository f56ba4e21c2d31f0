"""Which entry of its worksheet each curve of a reading comes from."""

from curvelab.records.reading import Reading


def entries_of(reading: Reading) -> list[int | None]:
    """The index among the worksheet's curves of each curve; traced entries come first, typed ones after them."""
    curves = reading.worksheet.curves
    traced = [index for index, entry in enumerate(curves) if entry.through]
    typed = [index for index, entry in enumerate(curves) if entry.points]
    order: list[int | None] = [*traced, *typed]
    return order if len(order) == len(reading.curves) else [None] * len(reading.curves)
