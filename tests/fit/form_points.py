"""Published forms drawn as points: what the tests of hypotheses and their benchmark are made of."""

import numpy as np

from tests.fit.drawn_points import Truth, autoregressive, correlated, fuse, truth_of

RELAYS = {
    # IEC 60255-151 and IEEE C37.112: t = setting (k / (M^alpha - 1) + c)
    "IEC inverse": (0.14, 0.02, 0.0),
    "IEC very inverse": (13.5, 1.0, 0.0),
    "IEC extremely inverse": (80.0, 2.0, 0.0),
    "IEC short-time inverse": (0.05, 0.04, 0.0),
    "IEEE moderately inverse": (0.0515, 0.02, 0.114),
    "IEEE very inverse": (19.61, 2.0, 0.491),
    "IEEE extremely inverse": (28.2, 2.0, 0.1217),
}
NOISES = {
    "clean": {"sd_px": 0.05, "noise": lambda rng, n: correlated(rng, n, 1.2)},
    "scan": {"sd_px": 0.15, "strays": 0.005, "noise": lambda rng, n: autoregressive(rng, n, 0.7)},
}


def multiples(low, high, n=20001):
    return 1.0 + np.geomspace(low - 1.0, high - 1.0, n)


def relay(constants, *, pick_up=1.0, setting=0.5, low=1.08, high=20.0) -> Truth:
    k, alpha, c = constants
    m = multiples(low, high)
    return truth_of((np.log10(pick_up * m), np.log10(setting * (k / np.expm1(alpha * np.log(m)) + c))))


def replica(*, pick_up=1.05, tau_s=300.0, preload=0.0, low=1.02, high=10.0) -> Truth:
    """IEC 60255-149: t = tau ln((M^2 - p^2) / (M^2 - 1)), M over the pick-up, p the load before."""
    m = multiples(low, high)
    return truth_of((np.log10(pick_up * m), np.log10(tau_s * np.log((m**2 - preload**2) / (m**2 - 1.0)))))


def random_form(rng):
    """(name, truth, parameters): a relay, a thermal replica or a straight form, over a random range."""
    names = [*RELAYS, "thermal replica, cold", "thermal replica, hot", "adiabatic", "definite time"]
    name = str(rng.choice(names))
    pick_up, low, high = 10.0 ** rng.uniform(0.0, 3.0), rng.uniform(1.05, 1.6), rng.uniform(8.0, 30.0)
    setting = 10.0 ** rng.uniform(-1.0, 1.0)
    if name in RELAYS:
        truth = relay(RELAYS[name], pick_up=pick_up, setting=setting, low=low, high=high)
        return name, truth, {"pick_up": pick_up, "tms" if name.startswith("IEC") else "td": setting}
    if name.startswith("thermal"):
        preload = rng.uniform(0.3, 0.8) if name.endswith("hot") else 0.0
        truth = replica(pick_up=pick_up, tau_s=600.0 * setting, preload=preload, low=rng.uniform(1.02, 1.2), high=high)
        return name, truth, {"pick_up": pick_up, "tau_s": 600.0 * setting}
    x = np.log10(pick_up) + np.linspace(0.0, rng.uniform(0.5, 1.5), 2001)
    if name == "adiabatic":
        return name, truth_of((x, np.log10(setting * 1e6) - 2.0 * x)), {"i2t": setting * 1e6}
    return name, truth_of((x, np.full_like(x, np.log10(setting)))), {"time_s": setting}


def random_other(rng):
    """A line of no published form: other exponents and constants, a fuse, straight lines of other slopes."""
    kind = rng.integers(4)
    low, high = rng.uniform(1.05, 1.6), rng.uniform(8.0, 30.0)
    if kind == 0:
        return relay((80.0, rng.choice([0.5, 1.3, 1.5, 1.8, 1.9, 2.2, 2.5]), 0.0), low=low, high=high)
    if kind == 1:
        return relay((19.61, 2.0, rng.choice([0.05, 0.25, 1.0, 2.0])), low=low, high=high)
    if kind == 2:
        least = rng.uniform(1.0, 100.0)
        return fuse(low=least, high=high * least)
    x = np.linspace(0.0, rng.uniform(0.5, 1.5), 2001)
    return truth_of((x, -rng.choice([0.3, 0.8, 1.0, 1.5, 1.8, 2.2, 3.0]) * x))
