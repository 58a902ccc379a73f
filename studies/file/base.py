"""A section of the study file: closed keys, some of them reserved, defaults with their reasons."""

from __future__ import annotations

from dataclasses import replace
from typing import Any, ClassVar, TypeVar

from pydantic import BaseModel, ConfigDict, ValidationError

from pullback.studies.faults import BadInput, Fault, not_yet, shown, unknown
from pullback.studies.file.toml import Path, spelled


class Section(BaseModel):
    """Base of all sections.

    A field's `description` says what is expected there, for faults. `later` names the reserved keys; `reasons` gives,
    for a key that may be omitted, the sentence that is listed where it is.
    """

    model_config = ConfigDict(extra="forbid", frozen=True, strict=True, arbitrary_types_allowed=True)
    later: ClassVar[tuple[str, ...]] = ()
    reasons: ClassVar[dict[str, str]] = {}

    def assumed(self) -> list[str]:
        """A sentence for each default taken in this section."""
        return [reason for key, reason in self.reasons.items() if key not in self.model_fields_set]


S = TypeVar("S", bound=Section)


def validated(model: type[S], data: object, at: Path = ()) -> S:
    """The section read from TOML data; raises BadInput with all its faults, keys spelled from `at`."""
    try:
        return model.model_validate(data)
    except ValidationError as error:
        raise BadInput([f for e in error.errors() for f in _faults(model, e, at)]) from None


def _faults(model: type[Section], error: Any, at: Path) -> list[Fault]:
    """One pydantic error as faults of ours."""
    loc: Path = error["loc"]
    key = spelled((*at, *loc))
    inner = error.get("ctx", {}).get("error")
    if isinstance(inner, BadInput):
        return [f.at(key=key) if not f.key else _under(f, (*at, *loc)) for f in inner.faults]
    owner, field = _owner(model, loc)
    if error["type"] == "extra_forbidden":
        return [_extra(owner, str(loc[-1])).at(key=key)]
    read = "nothing" if error["type"] == "missing" else shown(error["input"])
    return [Fault(key=key, read=read, expected=_expected(owner, field, error))]


def _under(fault: Fault, path: Path) -> Fault:
    """A fault whose key counts from the section at `path`."""
    dot = "" if fault.key.startswith("[") or not path else "."
    return replace(fault, key=spelled(path) + dot + fault.key)


def _extra(owner: type[Section], key: str) -> Fault:
    if key in owner.later:
        return not_yet(key)
    return unknown(key, [k for k in owner.model_fields if k not in owner.later])


def _expected(owner: type[Section], field: str, error: Any) -> str:
    info = owner.model_fields.get(field)
    return (info and info.description) or str(error["msg"])


def _owner(model: type[Section], loc: Path) -> tuple[type[Section], str]:
    """The section that a location lies in, and the last field on the way."""
    owner, field = model, ""
    for part in loc:
        if isinstance(part, int):
            continue
        inner = _section_of(owner.model_fields[field].annotation) if field in owner.model_fields else None
        owner = inner or owner
        field = str(part) if str(part) in owner.model_fields else field
    return owner, field


def _section_of(annotation: Any) -> type[Section] | None:
    if isinstance(annotation, type) and issubclass(annotation, Section):
        return annotation
    return next((s for a in getattr(annotation, "__args__", ()) if (s := _section_of(a))), None)
