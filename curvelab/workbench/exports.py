"""A device's points as a table for spreadsheets."""

import csv
import io

from curvelab.library.point_table import COLUMNS, point_rows
from curvelab.records.device import DeviceRecord
from curvelab.workbench.route import Content


def table_of(record: DeviceRecord) -> Content:
    """The rows of the exported table (CSV), cells that a spreadsheet would take for formulas defused."""
    text = io.StringIO(newline="")
    writer = csv.writer(text, lineterminator="\n")
    writer.writerow(COLUMNS)
    writer.writerows(point_rows(record))
    name = f"{record.nameplate.key}@{record.revision}.csv"
    return Content(data=text.getvalue().encode(), media="text/csv", name=name)
