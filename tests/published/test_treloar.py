"""Published and least-squares parameters against Treloar's rubber in simple tension.

Data: Treloar, Trans. Faraday Soc. 40 (1944) 59, data set treloar_uniaxial. Ogden's parameters: Proc. R. Soc. A 326
(1972) 565, in kgf/cm2. The root-mean-square residuals were computed apart from this package from the table and the
published parameters, and are known to the digits given.
"""

import numpy as np
import pytest

from pullback.datasets import load
from pullback.forward import law
from pullback.forward.laws.base import modulus_at_rest
from pullback.forward.laws.registry import registry

KGF_PER_CM2 = 0.0980665
TABLE = load("treloar_uniaxial").data
STRETCH, STRESS = TABLE["stretch"], TABLE["nominal stress"]


def ogden_1972():
    source = load("ogden_1972").source["parameters"]
    pairs = zip(source["mu_kgf_per_cm2"], source["alpha"], strict=True)
    values = {k: v for i, (mu, a) in enumerate(pairs, 1) for k, v in ((f"mu{i}", mu * KGF_PER_CM2), (f"alpha{i}", a))}
    return law("ogden-3", **values)


def rms(rubber, up_to=np.inf):
    kept = np.less_equal(STRETCH, up_to)
    return float(np.sqrt(np.mean((rubber.stress(STRETCH[kept]) - STRESS[kept]) ** 2)))


@pytest.mark.parametrize("up_to, wanted", [(7.0, 0.0357), (7.2, 0.0752), (np.inf, 0.3305)])
def test_ogden_1972_against_treloar(up_to, wanted):
    assert rms(ogden_1972(), up_to) == pytest.approx(wanted, abs=6e-5)


def test_ogden_1972_falls_short_at_the_last_point():
    assert float(ogden_1972().stress(STRETCH[-1:])[0] - STRESS[-1]) == pytest.approx(-1.23, abs=0.006)


def test_ogden_1972_evaluated():
    """Data set ogden_1972: 13 digits; initial shear modulus half the sum of mu alpha, 4.225 kgf/cm2."""
    table, rubber = load("ogden_1972").data, ogden_1972()
    assert 1e6 * rubber.stress(table["stretch"]) == pytest.approx(table["stress"], rel=1e-12)
    assert 1e6 * rubber.energy(table["stretch"]) == pytest.approx(table["energy"], rel=1e-12)
    at_rest = modulus_at_rest(rubber.law, rubber.theta[:, None])[0]
    assert at_rest == pytest.approx(4.225 * KGF_PER_CM2, rel=1e-12)
    assert at_rest == pytest.approx(0.414331, abs=5e-7)


@pytest.mark.parametrize("up_to, wanted", [(np.inf, 1.200), (1.5, 0.0134)])
def test_treloar_own_modulus(up_to, wanted):
    """G = 4.0 kgf/cm2: Treloar (1944); The Physics of Rubber Elasticity, 3rd ed. (1975)."""
    assert rms(law("neo-hookean", mu=4.0 * KGF_PER_CM2), up_to) == pytest.approx(wanted, rel=4e-3)


@pytest.mark.parametrize(
    "name, optimum, standard_error, residual",
    [
        ("yeoh", [0.175534747, -1.87850635e-3, 4.63221903e-5], [0.011882, 3.780e-4, 3.718e-6], 0.104917),
        ("neo-hookean", [0.56715827], None, 0.803),
    ],
)
def test_least_squares_optimum(name, optimum, standard_error, residual):
    """Unweighted optimum on the 24 points; both laws are linear in their parameters.

    The neo-Hookean one agrees with 0.5673 of Steinmann, Hossain & Possart, Arch. Appl. Mech. 82 (2012) 1183.
    """
    unit = law(name, **{p.name: 1.0 for p in registry[name].parameters})
    by = unit.law.stress_by_parameter(STRETCH, unit.theta[:, None]).T
    theta, squares, *_ = np.linalg.lstsq(by, STRESS, rcond=None)
    assert theta == pytest.approx(optimum, rel=2e-8)
    fitted = law(name, **dict(zip([p.name for p in unit.law.parameters], theta, strict=True)))
    assert rms(fitted) == pytest.approx(residual, rel=1e-3)
    if standard_error:
        variance = squares[0] / (STRETCH.size - theta.size)
        assert np.sqrt(variance * np.diag(np.linalg.inv(by.T @ by))) == pytest.approx(standard_error, rel=1e-4)
