"""[gauges]: the errors of the readings; none has a default where its reading is present."""

from __future__ import annotations

from dataclasses import fields, replace
from typing import Annotated

from pydantic import Field, PlainValidator

from pullback.studies.faults import BadInput, Fault, not_yet, shown
from pullback.studies.file.base import Section
from pullback.studies.file.gauge import gauge
from pullback.studies.study import Gauge, Gauges


def read_outliers(value: object) -> bool:
    """False; true is reserved."""
    if value is True:
        raise BadInput(not_yet("outliers = true"))
    if value is not False:
        raise BadInput(Fault(read=shown(value), expected="false"))
    return False


_Positive = Annotated[Gauge, PlainValidator(gauge("length", relative=False))]
_Travel = Annotated[Gauge, PlainValidator(gauge("length"))]
_Place = Annotated[Gauge, PlainValidator(gauge("length", relative=False, zero=True))]
_Scale = Annotated[Gauge, PlainValidator(gauge("relative", zero=True))]


class GaugesSection(Section):
    """Standard uncertainties; zeros and scales, placement and the coupons' may be zero, a reading's own may not."""

    mark_reading: _Positive | None = None
    mark_placement: _Place | None = None
    grip_position: _Place | None = None
    position_scale: _Scale | None = None
    travel_reading: _Travel | None = None
    travel_zero: _Place | None = None
    force_reading: Annotated[Gauge, PlainValidator(gauge("force"))] | None = None
    force_zero: Annotated[Gauge, PlainValidator(gauge("force", relative=False, zero=True))] | None = None
    force_scale: _Scale | None = None
    section_reading: Annotated[Gauge, PlainValidator(gauge("area"))] | None = None
    width_reading: _Travel | None = None
    thickness_reading: _Travel | None = None
    mass_reading: Annotated[Gauge, PlainValidator(gauge("mass"))] | None = None
    density: Annotated[Gauge, PlainValidator(gauge("density", zero=True))] | None = None
    coupon_elongation: _Scale | None = None
    coupon_stress: _Scale | None = None
    coupon_scale: _Scale | None = None
    outliers: Annotated[bool, PlainValidator(read_outliers)] = Field(default=False)

    def gauges(self) -> Gauges:
        """As the study holds them; None where not given."""
        return Gauges(**{f.name: getattr(self, f.name) for f in fields(Gauges)})

    def over(self, common: Gauges) -> Gauges:
        """The common gauges with those of this section put over them."""
        own = {f.name: value for f in fields(Gauges) if (value := getattr(self, f.name)) is not None}
        return replace(common, **own)
