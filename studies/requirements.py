"""What one part of a study needs of another: densities, gauges, enough coupons, readings that are positive."""

from __future__ import annotations

from collections.abc import Iterator

import numpy as np
from numpy.typing import NDArray

from pullback.studies.faults import Fault, listed
from pullback.studies.outline_geometry import volume
from pullback.studies.study import (
    CouponsTable,
    Gauge,
    Gauges,
    MarksTable,
    PartSpec,
    Pull,
    ReadingsTable,
    Rows,
    Strength,
)
from pullback.studies.tables.coupons import distinct_failures

Array = NDArray[np.float64]
FEWEST_FAILURES = 3
_SIGMAS, _SHARE = 5.0, 0.01  # below zero by more than this, and that share of the largest, is no error of a gauge
_WEIGHT = 9.80665e-3  # N per g


def missing_density(part: PartSpec, pull: Pull) -> Iterator[Fault]:
    """A mass, or a part that hangs, needs the density."""
    why = [f'axis = "{pull.axis}"'] if pull.axis != "horizontal" else []
    why += ["mass"] if pull.mass is not None else []
    if part.density is None and why:
        expected = f"a density, which {' and '.join(why)} in [[pull]] need{'s' * (len(why) == 1)}"
        yield Fault(key="part.density", read="nothing", expected=expected)


def missing_gauges(pull: Pull, strength: Strength | None, gauges: Gauges) -> Iterator[Fault]:
    """The gauge of every reading that is present; those of sections are asked for where they are read."""
    needed: list[tuple[str, str]] = []
    if pull.marks is not None:
        needed += [("mark_reading", "marks"), ("mark_placement", "marks")]
    if np.isfinite(pull.readings.travel).any():
        needed.append(("travel_reading", "travel"))
    if np.isfinite(pull.readings.force).any():
        needed += [("force_reading", "force"), ("force_scale", "force")]
    if pull.mass is not None:
        needed.append(("mass_reading", "mass"))
    if strength is not None and has_pairs(strength.coupons):
        needed.append(("coupon_stress", "stress and elongation at break, which are a reading of the law,"))
    for name, reading in needed:
        if getattr(gauges, name) is None:
            yield Fault(
                key=f"gauges.{name}",
                read="nothing",
                expected=f"the gauge of a reading that is present, here of {reading.rstrip(',')}",
            )


def vanishing_errors(pull: Pull, gauges: Gauges) -> Iterator[Fault]:
    """An error in % is none where the reading is zero."""
    for name, unit in (("travel", "mm"), ("force", "N")):
        gauge, values = getattr(gauges, f"{name}_reading"), getattr(pull.readings, name)
        if gauge is not None and gauge.relative and np.any(values == 0.0):
            expected = f"an error in {unit}, as one reading of {pull.readings.rows.file} is zero"
            yield Fault(key=f"gauges.{name}_reading", read=f"{100.0 * gauge.value:g} %", expected=expected)


def exact_pairs(strength: Strength, gauges: Gauges) -> Iterator[Fault]:
    """Pairs of stress and elongation need an error in one of them, for no law goes through all."""
    errors = (gauges.coupon_stress, gauges.coupon_elongation)
    if has_pairs(strength.coupons) and gauges.coupon_stress and not any(g and g.value > 0.0 for g in errors):
        expected = "an error above zero in coupon_stress or coupon_elongation, where coupons have both readings"
        yield Fault(key="gauges.coupon_stress", read="0 %", expected=expected)


def has_pairs(coupons: CouponsTable) -> bool:
    """Whether any coupon has both stress and elongation at break."""
    return bool(np.any(np.isfinite(coupons.stress) & np.isfinite(coupons.elongation)))


def too_few_failures(strength: Strength) -> Iterator[Fault]:
    """A modulus needs three distinct failures, or a prior."""
    count = distinct_failures(strength.coupons, strength.criterion)
    if count < FEWEST_FAILURES and strength.modulus_prior is None:
        yield Fault(
            file=strength.coupons.rows.file,
            read=f"{count} distinct failure{'s' * (count != 1)}",
            expected=f"at least {FEWEST_FAILURES}, or a prior on the modulus",
            remedy="Break more coupons, or give prior = { modulus = … } in [strength]."
            if strength.scatter == "weibull"
            else "Break more coupons.",
        )


def negative_readings(part: PartSpec, pull: Pull, gauges: Gauges) -> Iterator[Fault]:
    """Travel, force and position are positive, but for their gauges' errors and the part's weight."""
    weight = 0.0 if pull.axis == "horizontal" else _WEIGHT * (part.density or 0.0) * volume(part.outline)
    force, travel = (gauges.force_reading, gauges.force_zero), (gauges.travel_reading, gauges.travel_zero)
    yield from _below("force", "N", pull.readings, pull.readings.force, _slack(force) + weight)
    yield from _below("travel", "mm", pull.readings, pull.readings.travel, _slack(travel))
    if pull.marks is not None:
        errors = (gauges.mark_reading, gauges.mark_placement, gauges.grip_position)
        yield from _below("position", "mm", pull.marks, pull.marks.position, _slack(errors))


def without_partner(marks: MarksTable | None, readings: ReadingsTable) -> Iterator[str]:
    """Steps that only one of the two tables has."""
    if marks is None:
        return
    only_marks = [s for s in dict.fromkeys(marks.step) if s not in readings.step]
    only_readings = [s for s in readings.step if s not in marks.step]
    if only_marks:
        yield f"{marks.rows.file}: step {listed(only_marks)} without a row in {readings.rows.file}"
    if only_readings:
        yield f"{readings.rows.file}: step {listed(only_readings)} without marks in {marks.rows.file}"


def _slack(errors: tuple[Gauge | None, ...]) -> float:
    absolute = [g.value for g in errors if g is not None and not g.relative]
    return _SIGMAS * float(np.sqrt(np.sum(np.square(absolute))))


def _below(column: str, unit: str, table: MarksTable | ReadingsTable, values: Array, slack: float) -> Iterator[Fault]:
    rows: Rows = table.rows
    largest = float(np.max(np.abs(values), initial=0.0, where=np.isfinite(values)))
    for k in np.flatnonzero(values < -slack - _SHARE * largest):
        expected = "a value of zero or above: tension and travel are positive, positions run from the held grip"
        place = f"column {column}"
        yield Fault(expected, f"{values[k]:g} {unit}", "", rows.file, int(rows.line[k]), place)
