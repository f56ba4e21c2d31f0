"""Doubts where a curve follows a published form that is not the one, or not at the setting, the worksheet says."""

from collections.abc import Iterable, Iterator, Sequence

from curvelab.fit.forms import published_forms
from curvelab.records.form import PublishedForm
from curvelab.records.reading import ReadCurve
from curvelab.records.warning import ReadingWarning
from curvelab.records.worksheet import DeviceEntry

FAR = 0.02
"""Relative difference of a setting from which on a curve is another than the worksheet says."""


def form_doubts(curves: Iterable[ReadCurve], devices: Sequence[DeviceEntry]) -> tuple[ReadingWarning, ...]:
    """Warnings of curves whose form, claimed beyond doubt, contradicts what is said of their device or setting."""
    said = {device.nameplate.key: device.nameplate.characteristic for device in devices}
    known = {form.name for form in published_forms()}
    return tuple(doubt for read in curves for doubt in _doubts(read, {said.get(key) for key in read.devices} & known))


def _doubts(read: ReadCurve, characteristics: set[str | None]) -> Iterator[ReadingWarning]:
    for form in read.fit.forms if read.fit else ():
        names = {form.name, *form.also}
        curved = any(each.name == "pick_up" for each in form.parameters)
        if not form.is_claimed or not curved:
            continue
        if characteristics and not names & characteristics:
            yield _doubt(read, "form-characteristic", f"'{form.name}', not {_listed(characteristics)}")
            continue
        if read.curve.edge == "mean":  # the edges of a band lie a tolerance beside the setting
            yield from _setting_doubts(read, form)


def _setting_doubts(read: ReadCurve, form: PublishedForm) -> Iterator[ReadingWarning]:
    for each in form.parameters:
        stated = read.curve.at.get(each.name)
        if stated and abs(each.value / stated - 1.0) > max(FAR, 5.0 * each.sd):
            told = f"'{form.name}' at {each.name} = {each.value:.4g}, not {stated:g}"
            yield _doubt(read, "form-setting", told)


def _doubt(read: ReadCurve, code: str, told: str) -> ReadingWarning:
    at = (float(read.trace.places[0, 0]), float(read.trace.places[0, 1])) if read.trace else None
    text = (
        f"The {read.curve.edge} edge of {', '.join(read.devices) or 'the sheet'} follows {told} as the worksheet says"
    )
    return ReadingWarning(code=code, text=text, at=at)


def _listed(names: set[str | None]) -> str:
    return " or ".join(f"'{name}'" for name in sorted(str(name) for name in names))
