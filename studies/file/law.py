"""[law]: the compound's law, its scatter between parts, and priors of its parameters."""

from __future__ import annotations

from typing import Annotated, Any, ClassVar

from pydantic import Field, PlainValidator, model_validator

from pullback.inverse.priors import HalfNormal, Proper, Quantity
from pullback.studies.faults import BadInput, Fault, Faults, not_yet, shown, unknown
from pullback.studies.file.base import Section
from pullback.studies.file.distributions import Bounded, distribution, uncertain

_LATER = ("mooney-rivlin", "gent", "arruda-boyce", "lopez-pamies-1", "lopez-pamies-2")
_DIMENSION = {"MPa": "stress", "": "number"}
_FORMS = ("normal", *Bounded)


def known_laws() -> dict[str, dict[str, str]]:
    """Law name -> the names of its parameters with their units."""
    from pullback.forward.laws import registry

    return {name: {p.name: p.unit for p in law.parameters} for name, law in registry.items()}


def read_names(value: object) -> list[str]:
    """A list of one law's name."""
    if not isinstance(value, list) or not value or not all(isinstance(v, str) for v in value):
        raise BadInput(Fault(read=shown(value), expected='a list of one law, as in ["yeoh"]'))
    known, faults = known_laws(), Faults()
    for name in value:
        if name not in known:
            later = [n for n in _LATER if n not in known]
            faults.append(not_yet(name, "Take another.") if name in later else unknown(name, [*known, *later], "law"))
    faults.settle()
    if len(value) > 1:
        raise BadInput(Fault(read=shown(value), expected="one law; several to compare are not yet read"))
    return value


def _prior(given: object, unit: str) -> Proper:
    if not isinstance(given, dict):
        expected = 'a distribution, as in { lognormal = ["0.3 MPa", 2.0] }; an exact parameter is not yet read'
        raise BadInput(Fault(read=shown(given), expected=expected))
    return distribution(given, _DIMENSION[unit], _FORMS, mirrored=True)


class LawSection(Section):
    """One law, and what is known of its parameters beforehand."""

    reasons: ClassVar[dict[str, str]] = {
        "part_to_part": "law.part_to_part = half-normal 3 %: the usual scatter of stiffness within a lot",
    }
    names: Annotated[list[str], PlainValidator(read_names)] = Field(description='a list of one law, as in ["yeoh"]')
    part_to_part: Annotated[Quantity, PlainValidator(uncertain("relative", Bounded, zero=True))] = Field(
        default=HalfNormal(0.03), description='a relative scatter, as in "3 %"'
    )
    prior: dict[str, dict[str, Any]] = Field(default={}, description="tables of distributions, prior.<law>.<parameter>")

    @property
    def name(self) -> str:
        """The one law's name."""
        return self.names[0]

    def priors(self) -> dict[str, Proper]:
        """The priors given, by parameter; raises BadInput where one cannot be read."""
        parameters, read, faults = known_laws()[self.name], {}, Faults()
        for law in self.prior:
            if law != self.name:
                faults.append(unknown(law, [self.name], "law").at(key=f"prior.{law}"))
        for key, given in self.prior.get(self.name, {}).items():
            place = f"prior.{self.name}.{key}"
            try:
                if key not in parameters:
                    raise BadInput(unknown(key, parameters, "parameter"))
                read[key] = _prior(given, parameters[key])
            except BadInput as bad:
                faults.extend(f.at(key=place) for f in bad.faults)
        faults.settle()
        return read

    @model_validator(mode="after")
    def _priors_are_read(self) -> LawSection:
        self.priors()
        return self
