"""What each unknown is, in plain words."""

from __future__ import annotations

from pullback.forward.laws import Law

_RATIO = "log ratio, 0.01 is 1 %"
_FIXED = {
    "lot": f"departure of the lot's sections from the outline ({_RATIO})",
    "stiffness_scatter": f"standard deviation of stiffness between parts ({_RATIO})",
    "spread": f"standard deviation of the section along a part ({_RATIO})",
    "correlation_length": "distance along the part over which the section departs together",
    "force_scale": "scale error of the load cell, relative",
    "force_zero": "zero error of the load cell",
    "travel_zero": "zero error of the travel: slack and preload",
    "position_scale": "scale error of the mark positions, relative",
    "grip_position": "error of the grip's station, common to all stations of the piece",
    "density_error": "error of the stated density, relative",
    "coupon_scale": "scale error of the coupons' stress, relative, common to all coupons",
    "strength_modulus": "Weibull modulus of strength: the greater, the less coupons scatter",
    "strength_log_sd": f"standard deviation of strength between coupons ({_RATIO})",
}
_OF_A_PIECE = {
    "section": f"departure of this piece's whole section from the lot's ({_RATIO})",
    "stiffness": "departure of this piece's stiffness from the lot's, in standard deviations between parts",
}
_OF_STRENGTH = {
    "strength_scale": "{} at which 63 % of coupons of the reference volume have broken",
    "strength_median": "{} at which half the coupons have broken",
}


def meaning(name: str, law: Law, criterion: str = "") -> str:
    """What the unknown `name` is; empty where nothing is known of it."""
    for parameter in law.parameters:
        if parameter.name == name:
            return f"law: {parameter.meaning}"
    if name in _OF_STRENGTH:
        measure = "elongation (1 is 100 %)" if criterion == "elongation" else criterion
        return _OF_STRENGTH[name].format(measure)
    return _FIXED.get(name) or _OF_A_PIECE.get(name.rpartition(" ")[2], "")
