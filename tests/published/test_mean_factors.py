"""Loop impedances from mean instantaneous tripping currents, through the answers of a typed mean line.

AS/NZS 3000:2018 Table 8.1 takes 4, 7.5 and 12.5 In for types B, C and D at 230 V: factors stated by two independent
public sources, one of which says that all its entries follow when rounded to 0.1 ohm. Rows worked by hand from them.
"""

from decimal import ROUND_HALF_UP, Decimal

import pytest

from tests.devices.made import device, line

FACTORS = {"B": 4.0, "C": 7.5, "D": 12.5}
RATED_A = (6, 10, 16, 20, 25, 32, 40, 50, 63, 80, 100)
PRINTED_OHM = {
    "B": ("9.6", "5.8", "3.6", "2.9", "2.3", "1.8", "1.4", "1.2", "0.9", "0.7", "0.6"),
    "C": ("5.1", "3.1", "1.9", "1.5", "1.2", "1.0", "0.8", "0.6", "0.5", "0.4", "0.3"),
    "D": ("3.1", "1.8", "1.2", "0.9", "0.7", "0.6", "0.5", "0.4", "0.3", "0.2", "0.2"),
}


@pytest.mark.parametrize("characteristic", FACTORS)
def test_each_impedance_follows_from_the_mean_tripping_current(characteristic):
    step = FACTORS[characteristic]
    for rated_a, printed in zip(RATED_A, PRINTED_OHM[characteristic], strict=True):
        mean = line("mean", [(2.0, 30.0), (step, 3.0), (step, 0.02), (50.0, 0.01)])
        current_a = device(mean, rated_current_a=float(rated_a)).trip_current(0.4).mean.value
        exact = Decimal(repr(round(230.0 / current_a, 9)))
        assert exact.quantize(Decimal("0.1"), rounding=ROUND_HALF_UP) == Decimal(printed)
