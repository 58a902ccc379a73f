"""What coupons and the strength bring to a study's posterior: unknowns and terms."""

from __future__ import annotations

import numpy as np
from numpy.typing import NDArray

from pullback.forward.criteria import Criterion, criteria
from pullback.forward.laws import Law
from pullback.inverse.layout import Block, Scalar
from pullback.inverse.piece import Piece
from pullback.inverse.priors import Prior
from pullback.inverse.readings.base import Term
from pullback.inverse.readings.curve import CouponStress
from pullback.inverse.readings.strengths import CouponStrength, Survival
from pullback.inverse.scatter import Scatter
from pullback.studies.study import Gauge, Pull, Study

Array = NDArray[np.float64]


def reference_volume(study: Study) -> float:
    """Volume that the strength's scale refers to: the coupons' median."""
    assert study.strength is not None
    volume = study.strength.coupons.volume
    return float(np.median(volume)) if np.all(np.isfinite(volume)) else 1.0


def strength_unknowns(study: Study, strength: Scatter) -> list[Block]:
    """The family's two parameters, under the study's priors or the default ones."""
    assert study.strength is not None
    s = study.strength
    measure = coupon_measure(study)
    defaults = list(strength.default_priors(measure, s.coupons.broke))
    priors: list[Prior] = [s.scale_prior or defaults[0], s.modulus_prior or defaults[1]]
    unit = criteria[s.criterion].unit
    return [Scalar(n, u, p) for n, u, p in zip(strength.parameter_names, (unit, ""), priors, strict=True)]


def coupon_measure(study: Study) -> Array:
    """The criterion's measure of each coupon."""
    assert study.strength is not None
    coupons = study.strength.coupons
    return coupons.elongation if study.strength.criterion == "elongation" else coupons.stress


def coupon_pairs(study: Study) -> NDArray[np.bool_] | None:
    """Coupons that report both columns, where their errors are given; or None."""
    if study.strength is None or (study.gauges.coupon_stress is None and study.gauges.coupon_elongation is None):
        return None
    both = np.isfinite(study.strength.coupons.elongation) & np.isfinite(study.strength.coupons.stress)
    return both if np.any(both) else None


def strength_terms(
    study: Study, pull: Pull, piece: Piece, criterion: Criterion, strength: Scatter
) -> list[Term]:
    """Coupons by their strength and by their stress, and the piece that stood its last step."""
    assert study.strength is not None
    coupons, terms = study.strength.coupons, list[Term]()
    terms.append(CouponStrength(strength, coupon_measure(study), coupons.volume, coupons.broke))
    both = coupon_pairs(study)
    if both is not None:
        terms.append(coupon_stress_term(study, piece.law, both, np.ones(int(both.sum()))))
    terms.append(Survival(pull.piece, criterion, strength, _last_step(pull, piece)))
    return terms


def coupon_stress_term(study: Study, law: Law, both: NDArray[np.bool_], slope: Array) -> CouponStress:
    """`slope`: d log stress / d log stretch at each coupon's break, through which the elongation's error counts."""
    assert study.strength is not None
    coupons, g = study.strength.coupons, study.gauges
    stress = coupons.stress[both]
    own = g.coupon_stress.sigma(stress) / stress if g.coupon_stress else np.zeros(stress.size)
    elongation, along = expected_elongation(coupons.elongation[both], g.coupon_elongation)
    stretch = 1.0 + elongation
    return CouponStress(law, stretch, np.log(stress), np.hypot(own, slope * along / stretch))


def expected_elongation(read: Array, gauge: Gauge | None) -> tuple[Array, Array]:
    """Expected true elongation of each coupon given its reading, and its standard uncertainty.

    Coupons break within a narrow band: part of what their readings differ by is the reading error, so that a reading is
    drawn in towards their mean by the share of the scatter that is true (errors in variables; Fuller, Measurement Error
    Models, 1987, eq. 1.1.13). Taken as read, the law's slope at break would come out too small.
    """
    if gauge is None or gauge.value <= 0.0:
        return read, np.zeros(read.size)
    log, error = np.log(read), gauge.sigma(read) / read
    if read.size < 3:
        return read, read * error
    true = float(np.clip(1.0 - np.mean(error**2) / max(float(np.var(log, ddof=1)), 1e-12), 1.0 / read.size, 1.0))
    expected = np.exp(log.mean() + true * (log - log.mean()))
    return expected, expected * error * np.sqrt(true)


def _last_step(pull: Pull, piece: Piece) -> int:
    """The step of the largest force, or of the largest travel where no force was read."""
    r = pull.readings
    read = r.force if np.any(np.isfinite(r.force)) else r.travel
    return piece.steps.index(r.step[int(np.nanargmax(read))])
