"""The fitted model of a curve in the reading's JSON: forms, spline pieces, kinks, and its uncertainty budget."""

from typing import Any, TypeAlias

import numpy as np

from curvelab.records.budget import UncertaintyBudget
from curvelab.records.fit import CurveFit, Piece
from curvelab.records.form import PublishedForm

Json: TypeAlias = dict[str, Any]


def fit_json(fit: CurveFit) -> Json:
    """The model; ``pieces`` are B-splines v(u) of log10 values turned by 45 degrees, see `curvelab.records.fit.Piece`.

    Of each piece's covariance the standard deviations of the coefficients are given; the library keeps all of it.
    """
    return {
        "forms": [_form(form) for form in fit.forms],
        "pieces": [_piece(piece) for piece in fit.pieces],
        "kinks": [
            {
                "current": 10.0**kink.log_current,
                "value": 10.0**kink.log_value,
                "sd_log_current": kink.sd_log_current,
                "sd_log_value": kink.sd_log_value,
                "turn": kink.turn,
            }
            for kink in fit.kinks
        ],
        "rising": fit.rising,
        "edf": fit.edf,
        "residual_rms": fit.residual_rms,
        "noise_scale": fit.noise_scale,
        "correlation": fit.correlation,
        "strays": list(fit.strays),
        "moved": fit.moved,
        "budget": budget_json(fit.budget),
    }


def budget_json(budget: UncertaintyBudget) -> Json:
    """Relative standard uncertainties along the normal by cause, which of them the sheet's curves share, and totals."""
    return {
        "contributions": [
            {"cause": each.cause, "text": each.text, "sd": each.sd, "share": each.share, "shared": each.is_shared}
            for each in budget.contributions
        ],
        "common": budget.common,
        "total": budget.total,
    }


def _form(form: PublishedForm) -> Json:
    return {
        "name": form.name,
        "standard": form.standard,
        "claimed": form.is_claimed,
        "parameters": [{"name": each.name, "value": each.value, "sd": each.sd} for each in form.parameters],
        "from_current": form.from_current,
        "to_current": form.to_current,
        "rms": form.rms,
        "excess": form.excess,
        "also": list(form.also),
        "rivals": list(form.rivals),
    }


def _piece(piece: Piece) -> Json:
    variance = piece.covariance if piece.covariance.ndim == 1 else np.diag(piece.covariance)
    return {
        "form": piece.form,
        "start": piece.start,
        "end": piece.end,
        "degree": piece.degree,
        "knots": piece.knots.tolist(),
        "coefficients": piece.coefficients.tolist(),
        "sd": np.sqrt(np.maximum(variance, 0.0)).tolist(),
    }
