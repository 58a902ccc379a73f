"""The tolerance factors of the data set against the non-central t distribution they are defined by.

Natrella, Experimental Statistics, NBS Handbook 91 (1963), Table A-7: 3.407, 2.355, 1.926 for 90/95 and 5.741, 3.981,
3.295 for 99/95 at n = 5, 10, 20.
"""

import numpy as np
import pytest
from scipy import stats

from pullback.datasets import load

TABLE = load("tolerance_factors").data


@pytest.mark.parametrize("column, share", [("k 90/95", 0.90), ("k 99/95", 0.99)])
def test_definition(column, share):
    n = TABLE["n"]
    k = stats.nct.ppf(0.95, n - 1, stats.norm.ppf(share) * np.sqrt(n)) / np.sqrt(n)
    assert TABLE[column] == pytest.approx(k, abs=6e-7)


@pytest.mark.parametrize("n, b, a", [(5, 3.407, 5.741), (10, 2.355, 3.981), (20, 1.926, 3.295)])
def test_handbook(n, b, a):
    row = TABLE["n"] == n
    assert (TABLE["k 90/95"][row][0], TABLE["k 99/95"][row][0]) == pytest.approx((b, a), abs=6e-4)
