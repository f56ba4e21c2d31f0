"""Reads the stored model of a line back."""

import json
import math
import sqlite3
from collections.abc import Mapping
from typing import Any

import numpy as np

from curvelab.records.budget import UncertaintyBudget
from curvelab.records.fit import CurveFit, FitGap, Kink, Piece
from curvelab.records.form import FormParameter, PublishedForm


def read_fits(connection: sqlite3.Connection, reading_id: int) -> dict[int, CurveFit]:
    """Number of a line of the reading -> its model, without the tabulated form."""
    forms = _forms(connection, reading_id)
    rows = connection.execute("SELECT curve_seq, fit FROM read_fit WHERE reading_id = ?", (reading_id,))
    return {number: fit_from_json(text, tuple(forms.get(number, ()))) for number, text in rows}


def fit_from_json(text: str, forms: tuple[PublishedForm, ...]) -> CurveFit:
    """The model of its stored form, with the published forms that are stored apart."""
    said = json.loads(text)
    said["pieces"] = tuple(_piece(piece) for piece in said["pieces"])
    said["kinks"] = tuple(Kink(**kink) for kink in said["kinks"])
    said["gaps"] = tuple(
        FitGap(start=tuple(gap["start"]), end=tuple(gap["end"]), bridged=gap["bridged"]) for gap in said["gaps"]
    )
    # An infinite penalty, that of a straight piece, is null in JSON.
    said["smoothing"] = tuple(math.inf if value is None else value for value in said["smoothing"])
    said["strays"] = tuple(said["strays"])
    said["budget"] = UncertaintyBudget(**said["budget"])
    return CurveFit(**said, parts=(), forms=forms)


def _piece(said: Mapping[str, Any]) -> Piece:
    arrays = {name: np.array(said[name], dtype=np.float64) for name in ("knots", "coefficients", "covariance")}
    size = len(arrays["coefficients"])
    if len(arrays["covariance"]) != size:
        lower = np.zeros((size, size))
        lower[np.tril_indices(size)] = arrays["covariance"]
        arrays["covariance"] = lower + np.tril(lower, -1).T
    return Piece(**{**said, **arrays})


def _forms(connection: sqlite3.Connection, reading_id: int) -> dict[int, list[PublishedForm]]:
    parameters: dict[tuple[int, int], list[FormParameter]] = {}
    for number, form, name, value, sd in connection.execute(
        "SELECT curve_seq, form_seq, name, value, sd FROM read_form_parameter WHERE reading_id = ? ORDER BY 1, 2, seq",
        (reading_id,),
    ):
        parameters.setdefault((number, form), []).append(FormParameter(name=name, value=value, sd=sd))
    found: dict[int, list[PublishedForm]] = {}
    for number, seq, name, standard, from_current, to_current, rms, excess, also, rivals in connection.execute(
        "SELECT curve_seq, seq, name, standard, from_current, to_current, rms, excess, also, rivals"
        " FROM read_form WHERE reading_id = ? ORDER BY 1, 2",
        (reading_id,),
    ):
        form = PublishedForm(
            name=name,
            standard=standard,
            parameters=tuple(parameters.get((number, seq), ())),
            from_current=from_current,
            to_current=to_current,
            rms=rms,
            excess=excess,
            also=tuple(json.loads(also)),
            rivals=tuple(json.loads(rivals)),
        )
        found.setdefault(number, []).append(form)
    return found
