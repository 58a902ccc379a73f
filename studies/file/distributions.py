"""Quantities that may be exact, not known, or varying: a bare quantity or a table with the distribution's name."""

from __future__ import annotations

from collections.abc import Callable
from typing import Any

from pullback.inverse.priors import HalfNormal, LogNormal, Normal, Proper, Quantity, Uniform, Varies
from pullback.studies.faults import BadInput, Fault, not_yet, shown, unknown
from pullback.studies.file.values import number
from pullback.studies.units import DIMENSIONS, quantity

Bounded = ("lognormal", "uniform", "halfnormal")


def uncertain(
    dimension: str, forms: tuple[str, ...] = ("normal", *Bounded), zero: bool = False, varies: bool = False
) -> Callable[[object], Any]:
    """Reader of a positive quantity, bare or a distribution of one of `forms`.

    `zero`: a bare zero is read too. `varies`: `{ varies = … }` is read. `dimension` may be "number".
    """

    def read(value: object) -> Quantity | Varies:
        if not isinstance(value, dict):
            return _positive(one(value, dimension), value, or_zero=zero)
        if set(value) == {"varies"}:
            if not varies:
                raise BadInput(Fault(read="varies", expected="one value, or a distribution of what is not known of it"))
            return Varies(distribution(value["varies"], dimension, forms))
        return distribution(value, dimension, forms)

    return read


def one(value: object, dimension: str) -> float:
    """A quantity of the dimension, or a pure number where that is "number"."""
    return number(value) if dimension == "number" else quantity(value, dimension)


def distribution(value: object, dimension: str, forms: tuple[str, ...], mirrored: bool = False) -> Proper:
    """A distribution of one of `forms`; `mirrored`: of a value that may be negative."""
    if not isinstance(value, dict) or len(value) != 1:
        raise BadInput(Fault(read=shown(value), expected=f"one distribution, as in {_example('normal', dimension)}"))
    [(form, given)] = value.items()
    if form == "infer":
        raise BadInput(not_yet("infer"))
    if form not in forms:
        raise BadInput(unknown(form, forms, "form"))
    wanted = _READERS[form][0]
    if not isinstance(given, list) or len(given) != wanted:
        count = f"a list of {wanted} value{'s' * (wanted > 1)}"
        raise BadInput(Fault(read=f"{form} = {shown(given)}", expected=f"{count}, as in {_example(form, dimension)}"))
    return _READERS[form][1](given, dimension, mirrored)


def _normal(given: list[Any], dimension: str, mirrored: bool) -> Proper:
    mean, sd = one(given[0], dimension), one(given[1], dimension)
    if not mirrored:
        _positive(mean, given[0])
    return Normal(mean, _positive(sd, given[1], "a standard deviation above zero"))


def _lognormal(given: list[Any], dimension: str, mirrored: bool) -> Proper:
    median, gsd = one(given[0], dimension), number(given[1])
    if not mirrored or median == 0.0:
        _positive(median, given[0], "a median above zero")
    if not gsd > 1.0:
        raise BadInput(Fault(read=shown(given[1]), expected="a geometric standard deviation above 1, as in 1.5"))
    return LogNormal(median, gsd)


def _uniform(given: list[Any], dimension: str, mirrored: bool) -> Proper:
    low, high = one(given[0], dimension), one(given[1], dimension)
    if not mirrored:
        _positive(low, given[0], or_zero=True)
    if not low < high:
        raise BadInput(
            Fault(read=f"{shown(given[0])} to {shown(given[1])}", expected="a lower end below the upper one")
        )
    return Uniform(low, high)


def _halfnormal(given: list[Any], dimension: str, mirrored: bool) -> Proper:
    return HalfNormal(_positive(one(given[0], dimension), given[0], "a scale above zero"))


_READERS: dict[str, tuple[int, Callable[[list[Any], str, bool], Proper]]] = {
    "normal": (2, _normal),
    "lognormal": (2, _lognormal),
    "uniform": (2, _uniform),
    "halfnormal": (1, _halfnormal),
}


def _positive(value: float, text: object, wanted: str = "a value above zero", or_zero: bool = False) -> float:
    if value > 0.0 or (or_zero and value == 0.0):
        return value
    raise BadInput(Fault(read=shown(text), expected="zero or a value above it" if or_zero else wanted))


def _example(form: str, dimension: str) -> str:
    text = "2.0" if dimension == "number" else f'"{DIMENSIONS[dimension][2]}"'
    second = {"normal": f", {text}", "lognormal": ", 1.5", "uniform": f", {text}", "halfnormal": ""}[form]
    return f"{{ {form} = [{text}{second}] }}"
