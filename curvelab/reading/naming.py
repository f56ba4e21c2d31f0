"""The station that names lines: edge, meaning, element, settings and device of each, from the words of the sheet."""

from collections.abc import Sequence
from dataclasses import dataclass, replace

from curvelab.reading.name_devices import conditions_of, given_for, kind_of, meaning_of, proposed, twins
from curvelab.reading.name_edges import edges_of
from curvelab.reading.name_identity import EDGES, Identity, LineSaid, identities, said_of_lines
from curvelab.reading.name_order import Order
from curvelab.reading.name_places import legend_rows
from curvelab.reading.name_sheet import SheetSaid, inside, sheet_said
from curvelab.reading.phrases import Phrase
from curvelab.reading.said import Said, without
from curvelab.records.axes import Axes
from curvelab.records.curve import Edge
from curvelab.records.warning import ReadingWarning
from curvelab.records.worksheet import CurveEntry, DeviceEntry
from curvelab.trace.found import FoundLine, FoundLines

ELEMENT_OF_BASE = {"xIsd": "delayed", "xIi": "instantaneous", "xIg": "earth", "xIdn": "residual"}
"""Elements whose own setting the current axis counts in."""


@dataclass(frozen=True, kw_only=True, slots=True)
class Naming:
    """Every line as a worksheet would say it, what is printed on it, the devices, and what stays open."""

    entries: tuple[CurveEntry, ...]
    labels: tuple[str, ...]
    devices: tuple[DeviceEntry, ...]
    title: str
    warnings: tuple[ReadingWarning, ...]


def name_lines(found: FoundLines, phrases: Sequence[Phrase], axes: Axes, given: tuple[DeviceEntry, ...]) -> Naming:
    """Name every line that was found.

    What is not printed, or may be read in two ways, stays open and is warned of.

    Parameters
    ----------
    found : FoundLines
    phrases : sequence of Phrase
        The sheet's lines of text.
    axes : Axes
    given : tuple of DeviceEntry
        The devices a worksheet names; those of the sheet are proposed where it names none.
    """
    return _Namer(found, phrases, axes, given).naming()


class _Namer:
    """What is known while the lines of one plot are named."""

    def __init__(
        self, found: FoundLines, phrases: Sequence[Phrase], axes: Axes, given: tuple[DeviceEntry, ...]
    ) -> None:
        self.lines, self.axes, self.given = found.lines, axes, given
        within = [one for one in phrases if inside(one, axes.frame)]
        rows = legend_rows(within, found.lines, found.short_lines)
        legend = {id(row.phrase) for row in rows}
        labels = [one for one in within if id(one) not in legend]
        self.sheet: SheetSaid = sheet_said([one for one in phrases if id(one) not in legend], axes.frame)
        self.order = Order([line.trace for line in found.lines], axes)
        self.said: list[LineSaid] = said_of_lines(found, labels, rows, axes, self.order)
        self.whose = identities(found.lines, self.said, self.order, self.sheet.said.characteristics)
        self.devices: list[DeviceEntry] = []
        self.warnings: list[ReadingWarning] = []

    def naming(self) -> Naming:
        """Every line named as far as the sheet tells."""
        edges = self._edges()
        keys = self._keys()
        entries = [self._entry(number, line, edges[number], keys[number]) for number, line in enumerate(self.lines)]
        for number in twins(entries):
            entries[number] = replace(entries[number], edge=None)
        entries = [replace(entry, devices=()) if entry.edge is None else entry for entry in entries]
        self._warn(entries)
        used = {key for entry in entries for key in entry.devices}
        devices = self.given or tuple(entry for entry in self.devices if entry.nameplate.key in used)
        return Naming(
            entries=tuple(entries),
            labels=tuple(one.label for one in self.said),
            devices=devices,
            title=self.sheet.title,
            warnings=tuple(self.warnings),
        )

    def _warn(self, entries: Sequence[CurveEntry]) -> None:
        """What stays open, and words that may be misread."""
        for line, said, entry in zip(self.lines, self.said, entries, strict=True):
            at = (float(line.trace.places[0, 0]), float(line.trace.places[0, 1]))
            for phrase in said.doubtful:
                self.warnings.append(
                    ReadingWarning(
                        code="label-doubtful",
                        text=f"The words on this line were read as '{phrase.text}': check them on the sheet",
                        at=at,
                    )
                )
            if entry.edge is not None and not entry.devices:
                self.warnings.append(
                    ReadingWarning(
                        code="device-unknown",
                        text="Whose line this is cannot be read from the sheet: give [[devices]] with kind and key",
                        at=at,
                    )
                )
        for phrase in self.sheet.doubtful if not self.given else ():
            self.warnings.append(
                ReadingWarning(
                    code="label-doubtful",
                    text=f"Words that name the device were read as '{phrase.text}': check them on the sheet",
                    at=phrase.middle,
                )
            )
        for device in self.devices if not self.given else ():
            plate = device.nameplate
            if plate.characteristic is None and plate.kind in ("fuse", "mcb", "relay"):
                self.warnings.append(
                    ReadingWarning(
                        code="characteristic-unknown",
                        text=f"'{plate.key}' has no characteristic that could be read on the sheet: set characteristic",
                    )
                )
            if plate.rated_current_a is None and plate.kind not in ("relay", "rcd"):
                self.warnings.append(
                    ReadingWarning(
                        code="rating-unknown",
                        text=f"'{plate.key}' has no rated current on the sheet: set rated_current_a or ratings",
                    )
                )

    def _said(self, number: int) -> Said:
        """What line and sheet say together; of a sheet with several devices each line says which is its own."""
        return self.said[number].said.over(self._of_identity(number)).over(self.sheet.said)

    def _of_pair(self, number: int, said: Said) -> Said:
        """What is said of a line; what the sheet says ends may be true of one line of a pair alone."""
        own = self.said[number].said.meaning
        pair = sum(whose == self.whose[number] for whose in self.whose) == EDGES
        return without(said, "meaning") if pair and own is None and said.meaning == "pre_arcing" else said

    def _of_identity(self, number: int) -> Said:
        """What is known of a line from those it belongs to."""
        whose = self.whose[number]
        if whose is None:
            return Said()
        characteristic, rating, rating_range, settings, start = whose
        return Said(
            characteristic=characteristic,
            characteristics=(characteristic,) if characteristic else (),
            ratings=(rating,) if rating is not None else (),
            rating_range=rating_range,
            settings=dict(settings),
            start=start,  # type: ignore[arg-type]
        )

    def _edges(self) -> list[Edge | None]:
        """The edge of every line, band by band."""
        bands: dict[tuple[Identity | None, str | None], list[int]] = {}
        for number, whose in enumerate(self.whose):
            bands.setdefault((whose, self.said[number].said.element), []).append(number)
        mean = self.sheet.said.edge == "mean"
        single = mean or (len(bands) > 1 and all(len(members) == 1 for members in bands.values()))
        result: list[Edge | None] = [None] * len(self.lines)
        for (whose, _), members in bands.items():
            if whose is None and len(bands) > 1:
                continue
            said = [one.said for one in self.said]
            kind = kind_of(self._said(members[0]))
            for number, edge in edges_of(members, said, self.order, kind, single_lines=single).items():
                result[number] = edge
        return result

    def _keys(self) -> list[str | None]:
        """The device of every line; None where it cannot be told."""
        if self.given:
            return [given_for(self._device_said(number), self.given) for number in range(len(self.lines))]
        keys: dict[tuple[object, ...], str | None] = {}
        result = []
        for number in range(len(self.lines)):
            said = self._device_said(number)
            device = (said.characteristic, said.rating)
            if device not in keys:
                keys[device] = self._propose(said, device)
            result.append(keys[device])
        return result

    def _device_said(self, number: int) -> Said:
        """What is said of a line's device: with several on the sheet, a line without words has none of them."""
        several = len({one[:3] for one in self.whose if one is not None}) > 1
        if several and self.whose[number] is None:
            return without(self.sheet.said, "characteristic", "characteristics", "ratings", "kind")
        return self._said(number)

    def _propose(self, said: Said, device: tuple[object, ...]) -> str | None:
        if kind_of(said) is None or (said.characteristic is None and len(said.characteristics) > 1):
            return None
        values: dict[str, set[float]] = {}
        for number in range(len(self.lines)):
            own = self._device_said(number)
            if (own.characteristic, own.rating) == device:
                for name, value in own.settings.items():
                    values.setdefault(name, set()).add(value)
        settings = {name: tuple(sorted(steps)) for name, steps in values.items()}
        taken = [entry.nameplate.key for entry in self.devices]
        entry = proposed(self.sheet.title, said, settings, taken)
        self.devices.append(entry)
        return entry.nameplate.key

    def _entry(self, number: int, line: FoundLine, edge: Edge | None, key: str | None) -> CurveEntry:
        said = self._said(number)
        kind = kind_of(said) or next((one.nameplate.kind for one in self.given if one.nameplate.key == key), None)
        element = said.element or ELEMENT_OF_BASE.get(self.axes.current.base) or _usual_element(kind)
        return CurveEntry(
            edge=edge,
            meaning=meaning_of(self._of_pair(number, said), kind),
            element=element,
            devices=(key,) if key else (),
            through=line.guide.through,
            at=dict(said.settings),
            conditions=conditions_of(said),
        )


def _usual_element(kind: str | None) -> str:
    """Residual where the device knows no other; else the sheet shows its elements as one."""
    return "residual" if kind == "rcd" else "whole"
