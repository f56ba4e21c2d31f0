"""What a person says about a whole sheet: which page and plot is meant, which doubts are accepted."""

from dataclasses import dataclass
from typing import ClassVar

from curvelab.errors import InputError
from curvelab.reading.tables import Tables, edited, entries_of
from curvelab.records.trace import Place
from curvelab.records.worksheet import Worksheet


@dataclass(frozen=True, kw_only=True, slots=True)
class Accept:
    """A doubt was looked at and is accepted, by whom and why."""

    kind: ClassVar[str] = "accept"
    code: str
    reason: str
    name: str
    at: Place | None = None

    def made(self, worksheet: Worksheet) -> Worksheet:
        """The worksheet with the acceptance."""
        if not self.reason.strip() or not self.name.strip():
            raise InputError("To accept a doubt needs a reason and a name", "", "Say why, and who says so")
        entry: Tables = {"code": self.code, "reason": self.reason, "name": self.name}
        if self.at is not None:
            entry["place"] = list(self.at)
        return edited(worksheet, lambda tables: entries_of(tables, "accepted").append(entry))

    @property
    def words(self) -> str:
        """What the step is called."""
        return f"Accepted: {self.reason}"


@dataclass(frozen=True, kw_only=True, slots=True)
class ChoosePlot:
    """Another plot of the page is read; what was said about the first does not hold there."""

    kind: ClassVar[str] = "plot"
    plot: int

    def made(self, worksheet: Worksheet) -> Worksheet:
        """The worksheet of that plot."""

        def edit(tables: Tables) -> None:
            _sheet_table(tables)["plot"] = self.plot
            for name in ("axes", "curves", "accepted"):
                tables.pop(name, None)

        return edited(worksheet, edit)

    @property
    def words(self) -> str:
        """What the step is called."""
        return f"Plot {self.plot}"


@dataclass(frozen=True, kw_only=True, slots=True)
class ChoosePage:
    """Another page of the file is read; what was said about the first does not hold there."""

    kind: ClassVar[str] = "page"
    page: int

    def made(self, worksheet: Worksheet) -> Worksheet:
        """The worksheet of that page."""

        def edit(tables: Tables) -> None:
            _sheet_table(tables)["page"] = self.page
            for name in ("axes", "curves", "accepted"):
                tables.pop(name, None)
            tables["sheet"].pop("plot", None)

        return edited(worksheet, edit)

    @property
    def words(self) -> str:
        """What the step is called."""
        return f"Page {self.page}"


def _sheet_table(tables: Tables) -> Tables:
    if "sheet" not in tables:
        raise InputError("The worksheet has no sheet: its points are typed")
    table: Tables = tables["sheet"]
    return table
