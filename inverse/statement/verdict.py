"""The rules that a statement must pass, each with its number and limit."""

from __future__ import annotations

from dataclasses import dataclass

from pullback.inverse.predictive import Check
from pullback.inverse.sampling.diagnose import Diagnosis
from pullback.inverse.statement.priors_carry import PriorMove

RHAT, ESS, CHAIN = 1.01, 400.0, 500
P_LOW, P_HIGH = 0.005, 0.995
UNSTABLE = 0.001
BEYOND = 1.1
MOVED = 0.05


@dataclass(frozen=True)
class Rule:
    """One rule: whether it passed, what was found in words, the number, its limit, and what to do where it failed."""

    rule: str
    passed: bool
    text: str
    number: float | None
    limit: float | None
    remedy: str


def asked(strength: bool, demands: int) -> Rule:
    """There is something to state: a strength and a demand."""
    missing = "the study asks for no demand" if strength else "the study gives no strength"
    if strength and demands:
        return Rule("asked", True, "the study gives a strength and a demand", None, None, "")
    return Rule("asked", False, missing, None, None, "add [strength] with coupons, and a [[demand]]")


def sampled(diagnosis: Diagnosis | None, margins: Diagnosis | None) -> Rule:
    """Converged chains with enough effective draws, for every unknown and each margin."""
    remedy = "run again without --quick; if it stays, raise max_minutes or simplify the study"
    if diagnosis is None:
        text = "the posterior was not sampled but approximated at the best fit"
        return Rule("sampled", False, text, None, None, remedy)
    each = [diagnosis] if margins is None else [diagnosis, margins]
    rhat, least = max(d.rhat_max for d in each), min(d.least for d in each)
    worst = min(each, key=lambda d: d.least).worst()
    passed = rhat <= RHAT and least >= ESS and diagnosis.draws >= CHAIN
    text = f"largest R-hat {rhat:.4f}, least effective draws {least:.0f} ({worst}), {diagnosis.draws} draws a chain"
    return Rule("sampled", passed, text, rhat if rhat > RHAT else least, RHAT if rhat > RHAT else ESS, remedy)


def fits(checks: list[Check]) -> Rule:
    """Every kind of reading is as scattered about its prediction as its gauge says."""
    worst = min(checks, key=lambda c: min(c.p, 1.0 - c.p))
    passed = P_LOW <= worst.p <= P_HIGH
    of = f" of {worst.piece}" if worst.piece else ""
    off = "more" if worst.p < P_LOW else "less"
    how = "agree with their gauges" if passed else f"scatter {off} than their gauges say"
    chi2 = f"chi-square {worst.chi2_per_reading:.2f} a reading, p = {worst.p:.3f}"
    text = f"readings {how}; furthest off: {worst.kind}{of}, {chi2}"
    remedy = f"look at the {worst.kind} readings{of} and their gauge's error; try another law"
    return Rule("fits", passed, text, worst.p, P_LOW if worst.p < 0.5 else P_HIGH, remedy)


def stable(share: float) -> Rule:
    """Hardly any draw of the law reaches a maximum of stress before capacity."""
    text = f"{100 * share:.2g} % of draws reach a falling stress before capacity"
    remedy = "give readings at larger stretches, a narrower prior, or another law"
    return Rule("stable", share < UNSTABLE, text, share, UNSTABLE, remedy)


def informed(at_capacity: float, read: float) -> Rule:
    """The law is not extrapolated: a force or stress was read near the stretch at capacity."""
    ratio = at_capacity / read
    text = f"median stretch at capacity {at_capacity:.2f}; largest at which a force or stress was read {read:.2f}"
    remedy = "pull further, or give the coupons' nominal stress at break beside their elongation"
    return Rule("informed", ratio <= BEYOND, text + f" (ratio {ratio:.2f})", ratio, BEYOND, remedy)


def not_carried(moves: list[PriorMove]) -> Rule:
    """Halving and doubling each prior's scale leaves the guaranteed loads where they are."""
    remedy = "measure more of what that prior stands for, or state it more narrowly with its source"
    if not moves:
        return Rule("prior", True, "no prior to vary", None, MOVED, remedy)
    worst = max(moves, key=lambda m: abs(m.change) - 2.0 * m.error)
    beyond = abs(worst.change) - 2.0 * worst.error
    rough = f"; Pareto shape {worst.tail:.2f}: a rough figure" if worst.tail > 0.7 else ""
    text = (
        f"prior of {worst.prior} times {worst.factor:g} moves the load at {100 * worst.reliability:g} % by "
        f"{100 * worst.change:+.1f} % (Monte Carlo error {100 * worst.error:.1f} %){rough}"
    )
    return Rule("prior", beyond <= MOVED, text, abs(worst.change), MOVED, remedy)
