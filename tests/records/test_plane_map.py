"""The plane map: round trips, and its derivatives against finite differences."""

import numpy as np
import pytest

from curvelab.errors import AxesError
from curvelab.records.axes import PlaneMap

RNG = np.random.default_rng(11)


def plane(powers: tuple[tuple[int, int], ...], *, perspective: bool) -> PlaneMap:
    h = np.array([1.2, 1.5, 0.05, 0.3, -0.04, -2.1, 0.04, -0.03])
    if not perspective:
        h[6:] = 0.0
    warp = 0.01 * np.random.default_rng(5).standard_normal((2, len(powers)))
    size = 8 + 2 * len(powers)
    root = np.random.default_rng(6).standard_normal((size, size)) * 1e-4
    return PlaneMap(
        centre=np.array([700.0, 900.0]), reach=800.0, projective=h, powers=powers, warp=warp, covariance=root @ root.T
    )


MAPS = [
    plane((), perspective=False),
    plane((), perspective=True),
    plane(((2, 0), (1, 1), (0, 2)), perspective=True),
    plane(((2, 0), (1, 1), (0, 2), (3, 0), (2, 1), (1, 2), (0, 3)), perspective=False),
]
PLACES = np.array([700.0, 900.0]) + RNG.uniform(-700, 700, (40, 2))


@pytest.mark.parametrize("mapped", MAPS)
def test_places_come_back(mapped: PlaneMap) -> None:
    assert mapped.places(mapped.scaled(PLACES)) == pytest.approx(PLACES, abs=1e-7)


@pytest.mark.parametrize("mapped", MAPS)
def test_jacobian_is_the_difference_quotient(mapped: PlaneMap) -> None:
    jacobian = mapped.jacobian(PLACES)
    for j in (0, 1):
        step = np.zeros(2)
        step[j] = 1e-3
        quotient = (mapped.scaled(PLACES + step) - mapped.scaled(PLACES - step)) / 2e-3
        assert jacobian[:, :, j] == pytest.approx(quotient, abs=1e-9)


@pytest.mark.parametrize("mapped", MAPS)
def test_sensitivity_is_the_difference_quotient(mapped: PlaneMap) -> None:
    sensitivity = mapped.sensitivity(PLACES)
    vector = np.concatenate([mapped.projective, mapped.warp.ravel()])
    for k in range(len(vector)):
        step = np.zeros(len(vector))
        step[k] = 1e-6
        quotient = (moved(mapped, vector + step).scaled(PLACES) - moved(mapped, vector - step).scaled(PLACES)) / 2e-6
        assert sensitivity[:, :, k] == pytest.approx(quotient, abs=1e-8)


def moved(mapped: PlaneMap, vector: np.ndarray) -> PlaneMap:
    return PlaneMap(
        centre=mapped.centre,
        reach=mapped.reach,
        projective=vector[:8],
        powers=mapped.powers,
        warp=vector[8:],
        covariance=mapped.covariance,
    )


def test_stated_covariance_is_that_of_a_sample_of_maps() -> None:
    mapped = MAPS[1]
    vectors = RNG.multivariate_normal(mapped.projective, mapped.covariance, 4000)
    sample = np.array([moved(mapped, vector).scaled(PLACES[:3]) for vector in vectors])
    for k in range(3):
        expected = mapped.covariance_at(PLACES[:3])[k]
        assert np.cov(sample[:, k].T) == pytest.approx(expected, rel=0.15, abs=2e-9)


def test_what_cannot_be_inverted_is_refused() -> None:
    flat = PlaneMap(
        centre=np.zeros(2),
        reach=1.0,
        projective=np.array([0.0, 1, 0, 0, 1, 0, 0, 0]),
        powers=(),
        warp=np.zeros((2, 0)),
        covariance=np.zeros((8, 8)),
    )
    with pytest.raises(AxesError):
        flat.places([[1.0, 5.0]])
