"""Published loop impedance tables recomputed by the disconnection calculator, to the printed digit.

BS 7671:2018 tables 41.2 to 41.4 with Cmin 0.95, seen in two copies that agree; AS/NZS 3000:2018 table 8.1, rounded to
0.1 ohm, from the mean factors two public sources state.
"""

import pytest

from curvelab.calculators.circumstances import Circumstances
from curvelab.calculators.disconnection import disconnection
from curvelab.calculators.practices import practice_named
from tests.devices.made import device
from tests.published.test_fuses import TABLE as FUSES
from tests.published.test_fuses import fuse, named
from tests.published.test_loop_impedance import TABLE as BREAKERS
from tests.published.test_loop_impedance import breaker
from tests.published.test_mean_factors import PRINTED_OHM, RATED_A


@pytest.mark.parametrize("row", BREAKERS["rows"], ids=lambda row: f"{row['characteristic']}{row['rated_a']}")
def test_breakers_of_bs_7671_table_41_3(row):
    made = breaker(row["characteristic"], row["rated_a"], row["multiple"])
    answer = disconnection(made, Circumstances(voltage_v=230.0, practice="bs7671"))
    assert answer.required.time_s == BREAKERS["time_s"]
    assert practice_named("bs7671").printed(answer.greatest_loop.value) == float(row["zs_ohm"])


@pytest.mark.parametrize("row", FUSES["rows"], ids=named)
def test_fuses_of_bs_7671_tables_41_2_and_41_4(row):
    made = fuse(row["standard"], float(row["rated_a"]), row["current_a"], row["time_s"])
    answer = disconnection(made, Circumstances(voltage_v=230.0, practice="bs7671", required_s=row["time_s"]))
    printed = row["zs_ohm"]
    places = len(printed.partition(".")[2])
    assert f"{answer.greatest_loop.value + 1e-12:.{places}f}" == printed


@pytest.mark.parametrize("characteristic", PRINTED_OHM)
def test_breakers_of_as_nzs_3000_table_8_1(characteristic):
    for rated_a, printed in zip(RATED_A, PRINTED_OHM[characteristic], strict=True):
        made = device(characteristic=characteristic, rated_current_a=float(rated_a))
        answer = disconnection(made, Circumstances(voltage_v=230.0, practice="asnzs3000"))
        assert f"{practice_named('asnzs3000').printed(round(answer.greatest_loop.value, 9)):.1f}" == printed
