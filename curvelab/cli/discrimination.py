"""``curvelab discrimination``: up to which current only the downstream one of two devices acts."""

from typing import Any

import click

import curvelab
from curvelab.calculators.as_json import discrimination_json
from curvelab.calculators.discrimination import Case, Discrimination, discrimination
from curvelab.calculators.in_series import State
from curvelab.calculators.transformer import transformer_between
from curvelab.cli.answer import closing_lines, exit_status, heading
from curvelab.cli.compare import settings_by_key
from curvelab.cli.many import ManySettings, Settings
from curvelab.cli.output import json_option, library_option, table, write_json
from curvelab.devices.device import Device
from curvelab.library.key import split_key
from curvelab.units import written_current

_WORDS = {
    State.HOLDS_BY_TIME: "holds by time",
    State.HOLDS_BY_ENERGY: "holds by energy",
    State.HOLDS_BY_CURRENT: "holds by current: the upstream device never acts",
    State.FAILS_BY_TIME: "does not hold: the bands meet",
    State.FAILS_BY_ENERGY: "does not hold by energy",
    State.UNDETERMINED: "undetermined: only energy data could tell",
    State.NOT_COVERED: "not covered by the sheets",
    State.DOWNSTREAM_NEVER: "the downstream device never acts",
}


@click.command(cls=ManySettings)
@click.argument("upstream_key", metavar="UPSTREAM")
@click.argument("downstream_key", metavar="DOWNSTREAM")
@click.option("--up-to", "up_to_a", type=float, metavar="A", help="Prospective current downstream it is wanted up to.")
@click.option("--ratio", type=float, metavar="N", help="Of a transformer between them: primary over secondary voltage.")
@click.option("--connection", metavar="NAME", help="Of the transformer, such as Dyn or Dyn11.")
@click.option(
    "--set", "settings", type=Settings(), multiple=True, metavar="KEY.NAME=VALUE...", help="Settings of a device."
)
@library_option
@json_option
def command(
    upstream_key: str,
    downstream_key: str,
    up_to_a: float | None,
    settings: tuple[tuple[str, float | str], ...],
    library_file: str | None,
    json_file: str | None,
    **between: Any,
) -> int:
    """Up to which current only DOWNSTREAM acts and UPSTREAM does not; currents are counted at DOWNSTREAM."""
    keys = (upstream_key, downstream_key)
    given = settings_by_key(keys, settings)
    transformer = transformer_between(**between)
    with curvelab.open_library(library_file, create=False) as library:
        upstream, downstream = (library.device(*split_key(key)).at(**given[key]) for key in keys)
    answer = discrimination(upstream, downstream, up_to_a, transformer)
    if json_file:
        write_json(discrimination_json(answer), json_file)
    if json_file != "-":
        click.echo(discrimination_text(upstream, downstream, answer))
    held = bool(answer.cases) and all(case.holding.up_to.is_known for case in answer.cases)
    return exit_status(answer.findings, ()) if held else 1


def discrimination_text(upstream: Device, downstream: Device, answer: Discrimination) -> str:
    """Both devices, and fault by fault up to which current it holds, with every span."""
    lines = [f"upstream    {heading(upstream)}", f"downstream  {heading(downstream)}"]
    if answer.transformer is not None:
        lines.append(f"between     transformer {answer.transformer.connection}, ratio {answer.transformer.ratio:g}")
    for case in answer.cases:
        lines += [_sentence(case), _spans_table(case)]
    return "\n".join(lines + closing_lines(answer.findings, answer.notes, answer.cautions))


def _sentence(case: Case) -> str:
    holding = case.holding
    fault = case.fault.name
    if case.fault.share != 1.0:
        fault += f" (upstream {case.fault.share:.4g} A for 1 A)"
    if holding.from_a is None:
        return f"{fault}: {holding.up_to.reason}"
    return f"{fault}: holds from {written_current(holding.from_a, 'A')} up to {holding.up_to.written()}"


def _spans_table(case: Case) -> str:
    rows = [
        [f"{written_current(span.from_a, 'A')} to {written_current(span.to_a, 'A')}", _WORDS[State(span.code)]]
        for span in case.spans
    ]
    return table(["current", "discrimination"], rows)
