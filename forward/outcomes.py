"""The closed list of what a solve can come to, with a remedy for each."""

from enum import Enum


class Outcome(Enum):
    """What became of one load step."""

    CONVERGED = "converged"
    NOT_CONVERGED = "not converged"
    UNSTABLE = "unstable law"
    NOT_FINITE = "not finite"

    @property
    def remedy(self) -> str:
        """What to do about it."""
        return _REMEDY[self]


_REMEDY = {
    Outcome.CONVERGED: "nothing to do",
    Outcome.NOT_CONVERGED: "take smaller load steps from the unloaded part, or check that the load can be carried",
    Outcome.UNSTABLE: "nominal stress falls with stretch there: change the law's parameters or load less",
    Outcome.NOT_FINITE: "a section, parameter or load is not finite, or a stretch left the range of the law",
}
