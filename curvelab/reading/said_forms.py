"""Published forms that are one line under two names: the sheet's words tell which is meant."""

from collections.abc import Iterable, Sequence
from dataclasses import replace

from curvelab.fit.forms import under_name
from curvelab.records.form import PublishedForm
from curvelab.records.reading import ReadCurve
from curvelab.records.worksheet import DeviceEntry


def with_said_forms(curves: Iterable[ReadCurve], devices: Sequence[DeviceEntry]) -> tuple[ReadCurve, ...]:
    """The curves, each form under the name that a device of its curve has as its characteristic."""
    said = {device.nameplate.key: device.nameplate.characteristic for device in devices}
    return tuple(_told(read, {said.get(key) for key in read.devices}) for read in curves)


def _told(read: ReadCurve, words: set[str | None]) -> ReadCurve:
    if read.fit is None:
        return read
    return replace(read, fit=replace(read.fit, forms=tuple(_named(form, words) for form in read.fit.forms)))


def _named(form: PublishedForm, words: set[str | None]) -> PublishedForm:
    meant = next((name for name in form.also if name in words), None)
    return form if meant is None else under_name(form, meant)
