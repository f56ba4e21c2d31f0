"""A page that is little more than its plot, as plotting libraries save it: titles are as far away as on large pages."""

from pathlib import Path

import matplotlib
import numpy as np
import pytest
from matplotlib.figure import Figure

import curvelab


@pytest.mark.parametrize("size_in", [(2.6, 3.0), (6.4, 4.8)])
def test_a_bare_vector_plot_is_read_with_its_line(size_in: tuple[float, float], tmp_path: Path) -> None:
    current = np.geomspace(130, 3000, 200)
    with matplotlib.rc_context({"font.size": 8}):
        figure = Figure(figsize=size_in)
        axes = figure.subplots()
        axes.loglog(current, 40.0 / ((current / 120.0) ** 2 - 1.0), "k")
        axes.set(xlim=(100, 10000), ylim=(0.01, 1000), xlabel="Current [A]", ylabel="Time [s]")
        axes.grid(visible=True, which="both", linewidth=0.4)
        figure.tight_layout()
        figure.savefig(tmp_path / "plot.pdf")
    reading = curvelab.digitise(tmp_path / "plot.pdf")
    assert reading.axes is not None
    assert (reading.axes.current.unit, reading.axes.value.unit) == ("A", "s")
    (read,) = reading.curves
    (part,) = read.curve.parts
    truth = 40.0 / ((part.current / 120.0) ** 2 - 1.0)
    # chords of 200 printed points and coordinates of six digits
    np.testing.assert_allclose(np.log10(part.value / truth), 0.0, atol=1e-3)
