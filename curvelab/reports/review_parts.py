"""Sections of a review: summary, findings with their arithmetic, warnings, history and cautions."""

from collections.abc import Iterator

from curvelab.calculators.cautions import cautions_of
from curvelab.devices.bases import amperes
from curvelab.errors import DeviceError
from curvelab.records.finding import Finding
from curvelab.records.warning import ReadingWarning
from curvelab.reports.case import Case
from curvelab.reports.document import Block, Column, Facts, Look, Paragraph, Row, Section, Signatures, Table
from curvelab.standards.scope import unchecked
from curvelab.units import interval_figures, written, written_between, written_current, written_percent

STATE_WORDS = {
    "draft": "Draft: read and stored, checked by nobody yet.",
    "checked": "Checked by a second person, not released.",
    "released": "Released.",
    "withdrawn": "Withdrawn: not to be used.",
}
OUTCOMES = ("meets", "at limit", "undecided", "fails", "not covered")
REASONS = {
    "meets": "the whole interval lies on the permitted side",
    "at limit": "the best value lies within 0.5 % of the limit and the narrow interval straddles it",
    "undecided": "the interval straddles the limit",
    "fails": "the whole interval lies on the forbidden side",
}


def summary_section(case: Case) -> Section:
    """State, who stored it and why, and the counts of what was found."""
    evidence, state = case.evidence, case.evidence.state
    current = next((row["revision"] for row in case.history if row["is_current"]), None)
    pairs = [
        ("Revision", f"{evidence.revision}, stored {_day(evidence.at)}"),
        ("Review state", state),
        ("Stored by", evidence.author or "nobody named"),
        ("Reason", evidence.reason or "none given"),
        ("Checks", _counts([each for each in case.findings if not each.advisory]) or "none applies"),
        ("Advisory", _counts([each for each in case.findings if each.advisory]) or "none"),
        ("Warnings", _warning_counts(case)),
        ("Program", f"curvelab {evidence.program_version}"),
    ]
    blocks: list[Block] = [Facts(pairs=tuple(pairs))]
    look: Look = "plain" if state == "released" else "open"
    words = STATE_WORDS.get(state, state)
    if current is not None and current != evidence.revision:
        words += f" Revision {current} is the current one."
        look = "open"
    blocks.append(Paragraph(words=words, look=look))
    asked = [f"{each.requirement} ({each.outcome})" for each in case.findings if _is_open(each)]
    if asked:
        blocks.append(Paragraph(words="To be looked at: " + "; ".join(asked) + ".", look="open"))
    return Section(heading="Summary", blocks=tuple(blocks))


def _is_open(finding: Finding) -> bool:
    return not finding.advisory and finding.outcome in {"fails", "undecided", "at limit"}


def _day(at: str) -> str:
    return at[:16].replace("T", " ") + " UTC"


def _counts(findings: list[Finding]) -> str:
    counts = {outcome: sum(each.outcome == outcome for each in findings) for outcome in OUTCOMES}
    return ", ".join(f"{outcome}: {count}" for outcome, count in counts.items() if count)


def _warnings(case: Case) -> list[tuple[int, ReadingWarning]]:
    return [(number, each) for number, reading in enumerate(case.readings, start=1) for each in reading.warnings]


def _warning_counts(case: Case) -> str:
    accepted = [each.accepted is not None for _, each in _warnings(case)]
    if not accepted:
        return "none"
    return f"{len(accepted) - sum(accepted)} open, {sum(accepted)} accepted"


def findings_section(case: Case) -> Section:
    """Each requirement, what was read, the margin, the outcome, and beneath it how the one follows from the other."""
    if not case.findings:
        return Section(heading="Findings", blocks=(Paragraph(words=unchecked(case.record.nameplate), look="open"),))
    columns = (
        Column("Clause", 2.1),
        Column("Requirement", 3.9),
        Column("Read (95 %)", 4.2),
        Column("Margin", 1.3, "right"),
        Column("Outcome", 1.7),
    )
    standards = ", ".join(dict.fromkeys(each.standard for each in case.findings))
    words = (
        f"Against {standards}. A margin is counted from the limit to the permitted side. What is advisory is shown and "
        "decides nothing: a rule that was not seen published, or a matter of plausibility."
    )
    rows = tuple(_finding_row(case, each) for each in case.findings)
    return Section(heading="Findings", blocks=(Paragraph(words=words, look="quiet"), Table(columns=columns, rows=rows)))


def _finding_row(case: Case, finding: Finding) -> Row:
    read = "-" if finding.value is None else written_between(finding.value, finding.interval, finding.unit)
    margin = "-" if finding.margin is None else written_percent(finding.margin)
    outcome = finding.outcome + (" (advisory)" if finding.advisory else "")
    look: Look = "open" if _is_open(finding) else "quiet" if finding.advisory else "plain"
    cells = (finding.clause, finding.requirement, read, margin, outcome)
    return Row(cells=cells, look=look, beneath=" ".join(_arithmetic(case, finding)))


def _arithmetic(case: Case, finding: Finding) -> Iterator[str]:
    if finding.current is not None and finding.base not in (None, "A"):
        yield from _in_amperes(case, finding.current, str(finding.base))
    if finding.outcome == "not covered":
        yield "The curve does not reach there, so nothing is met."
    if finding.value is not None and finding.margin is not None:
        side = str(finding.permitted).replace("_", " ")
        figures = interval_figures(finding.value, *finding.interval) if finding.interval else 4
        read, limit = (written(each, finding.unit, figures) for each in (finding.value, finding.limit))
        yield f"Permitted: {side} {limit}."
        ratio = f"{read} / {limit} − 1" if finding.permitted == "at_least" else f"1 − {read} / {limit}"
        reason = f" ({REASONS[finding.outcome]})" if finding.interval and finding.outcome in REASONS else ""
        yield f"Margin {ratio} = {written_percent(finding.margin)}{reason}."
    if finding.note:
        yield finding.note
    yield f"Source: {finding.source}."


def _in_amperes(case: Case, current: float, base: str) -> Iterator[str]:
    plate = case.record.nameplate
    try:
        unit_a = amperes(plate, case.device.settings, base)
    except DeviceError:
        return
    figures = 4
    yield f"{current:g} × {written_current(unit_a, 'A')} = {written_current(current * unit_a, 'A', figures)}."


def warnings_section(case: Case) -> Section:
    """Every doubt of the readings, and who accepted it for which reason."""
    found = _warnings(case)
    if not found:
        return Section(heading="Warnings", blocks=(Paragraph(words="The readings gave no warning."),))
    columns = (Column("Document", 1.4), Column("Warning", 6.5), Column("Place", 2, "right"), Column("Accepted", 3.5))
    rows = []
    for number, each in found:
        place = "-" if each.at is None else f"{each.at[0]:.0f}, {each.at[1]:.0f}"
        look: Look = "open" if each.accepted is None else "plain"
        rows.append(Row(cells=(str(number), f"{each.code}: {each.text}", place, _accepted(each)), look=look))
    return Section(heading="Warnings", blocks=(Table(columns=columns, rows=tuple(rows)),))


def _accepted(warning: ReadingWarning) -> str:
    if warning.accepted is None:
        return "open"
    name, reason = warning.accepted.name or "nobody named", warning.accepted.reason or "no reason given"
    return f"{name}: {reason}"


def history_section(case: Case) -> Section:
    """What happened to the device, and the lines its reviewers sign on."""
    columns = (
        Column("When (UTC)", 2.6),
        Column("Revision", 1.3, "right"),
        Column("What", 1.8),
        Column("State then", 1.8),
        Column("Who", 2.6),
        Column("Why", 4.2),
    )
    rows = tuple(
        Row(
            cells=(
                _day(each.at)[:16],
                str(each.revision),
                each.action,
                each.state,
                each.name or "-",
                each.reason or "-",
            )
        )
        for each in case.log
    )
    roles = Signatures(roles=("Read", "Checked", "Released"))
    return Section(heading="History and review", blocks=(Table(columns=columns, rows=rows), roles))


def cautions_section(case: Case) -> Section:
    """What to keep in mind."""
    words = tuple(Paragraph(words=caution.text) for caution in cautions_of(case.device))
    more = Paragraph(
        words="The interval is that of the reading: calibration, trace and fit. How well the sheet describes the "
        "device is the maker's to say. Nothing is extrapolated beyond what the sheet shows."
    )
    return Section(heading="Cautions", blocks=(*words, more))
