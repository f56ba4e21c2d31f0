"""The published forms that a device's lines follow, as far as the points rule out others."""

from collections.abc import Iterator

from curvelab.records.form import PublishedForm
from curvelab.records.reading import ReadCurve
from curvelab.reports.case import Case
from curvelab.reports.device_parts import curve_words
from curvelab.reports.document import Row, Section, Table, columns_of
from curvelab.units import written_current

COLUMNS = columns_of({"Line": 2, "Form": 3, "Standard": 2, "Parameters (standard uncertainty)": 4, "Between": 2.4})


def forms_section(case: Case) -> Section | None:
    """A row for each form a line follows; none where none does."""
    rows = tuple(row for reading in case.readings for read in reading.curves for row in _rows(read))
    return Section(heading="Published forms", blocks=(Table(columns=COLUMNS, rows=rows),)) if rows else None


def _rows(read: ReadCurve) -> Iterator[Row]:
    for form in read.fit.forms if read.fit else ():
        ends = (written_current(current, read.curve.base) for current in (form.from_current, form.to_current))
        cells = curve_words(read.curve), form.name, form.standard or "-", _parameters(form), " to ".join(ends)
        rivals = f"Not ruled out here: {', '.join(form.rivals)}." if form.rivals else ""
        same = f"The same line with other parameters: {', '.join(form.also)}." if form.also else ""
        yield Row(cells=cells, look="plain" if form.is_claimed else "quiet", beneath=f"{rivals} {same}".strip())


def _parameters(form: PublishedForm) -> str:
    return ", ".join(f"{each.name} = {each.value:.5g} (±{100 * each.sd:.2g} %)" for each in form.parameters)
