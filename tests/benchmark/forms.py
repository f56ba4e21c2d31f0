"""``python -m tests.benchmark.forms [SEEDS]``: published forms named, and none claimed where none holds.

``relay settings`` is the largest relative error of a relay's pick-up or time multiplier.
"""

import sys

import numpy as np

from curvelab.fit.curve import fit_curve
from tests.fit.drawn_points import drawn
from tests.fit.form_points import NOISES, RELAYS, random_form, random_other

FIRST_SEED = 61_000
HEADING = (
    f"{'noise':8}{'forms':>8}{'named':>9}{'wrong':>8}{'unsure':>8}{'relay settings':>15}{'others':>9}{'claimed':>9}"
)


def claimed(points):
    """The forms claimed of a curve."""
    return [form for form in fit_curve(points).forms if form.is_claimed]


def row(noise, seeds):
    """Rates over seeds: half of them drawn from a form, half from none."""
    right, wrong, largest, false = 0, 0, 0.0, 0
    for seed in seeds:
        rng = np.random.default_rng(seed)
        name, truth, parameters = random_form(rng)
        found = claimed(drawn(truth, rng, **NOISES[noise]))
        if [form.name for form in found] == [name]:
            right += 1
            values = {each.name: each.value for each in found[0].parameters}
            if name in RELAYS:
                largest = max(largest, *(abs(values[key] / value - 1.0) for key, value in parameters.items()))
        elif found:
            wrong += 1
        false += bool(claimed(drawn(random_other(rng), rng, **NOISES[noise])))
    count = len(seeds)
    return (
        f"{noise:8}{count:8d}{right / count:9.1%}{wrong:8d}{count - right - wrong:8d}{largest:15.3%}"
        f"{count:9d}{false:9d}"
    )


def main(seeds):
    """Print one row a noise."""
    print(HEADING)
    for noise in NOISES:
        print(row(noise, range(FIRST_SEED, FIRST_SEED + seeds)), flush=True)


if __name__ == "__main__":
    main(int(sys.argv[1]) if len(sys.argv) > 1 else 200)
