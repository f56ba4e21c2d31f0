import numpy as np
import pytest

from curvelab.plots.residuals import residual_figure
from tests.reading.example import reading, typed_reading


def test_panels_span_the_plot_and_count_what_they_show():
    made = reading()
    figure = residual_figure(made)
    figure.draw_without_rendering()
    current, value, curves = figure.axes
    assert current.get_xlim() == pytest.approx((1, 100))
    assert value.get_xlim() == pytest.approx((0.01, 100))
    assert curves.get_xlim() == pytest.approx((1, 100))
    assert any("1 of them" in text.get_text() for text in current.texts)
    # Made exactly on its axes and its curve: no more than rounding.
    assert max(np.abs(line.get_ydata()).max(initial=0) for line in curves.lines) < 1e-6


def test_a_scale_is_never_so_fine_that_nothing_looks_like_something():
    assert residual_figure(reading()).axes[0].get_ylim() == pytest.approx((-0.05, 0.05))


def test_typed_points_have_none():
    with pytest.raises(ValueError, match="no residuals"):
        residual_figure(typed_reading())
