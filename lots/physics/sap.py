"""How much sap makes how much syrup."""

from . import sucrose
from ._bounds import at_least_zero, within


def sap_per_syrup(sap_brix: float, syrup_brix: float) -> float:
    """Return volumes of sap or concentrate (0.1–85 °Bx) for one of syrup, both at 20 °C.

    The syrup must not be thinner than the sap. Raises ValueError out of range. Source: mass balance
    of solids without losses; ± 0.1 °Bx of sap at 2 °Bx is ± 5 % of the result.
    """
    within("Sap Brix", sap_brix, 0.1, 85.0, "°Bx")
    within("Syrup Brix", syrup_brix, sap_brix, 85.0, "°Bx")
    solids = syrup_brix * sucrose.density(syrup_brix, 20.0)
    return solids / (sap_brix * sucrose.density(sap_brix, 20.0))


def rule_of_86(sap_brix: float) -> float:
    """Return volumes of sap for one of syrup by the rule 86 ÷ °Bx, for sap of 0.1–8 °Bx.

    It means syrup of about 65.5 °Bx and overstates concentrate by 6 % at 15 °Bx, so stronger feed
    raises ValueError. Source: Jones (1946).
    """
    return 86.0 / within("Sap Brix", sap_brix, 0.1, 8.0, "°Bx")


def revised_rule(sap_brix: float) -> float:
    """Return volumes of sap or concentrate (0.1–66 °Bx) for one of syrup of 66.0 °Bx.

    87.1 ÷ °Bx − 0.32; within 0.03 of the mass balance from 8 °Bx. Raises ValueError out of range.
    Source: Perkins and Isselhardt (2013); the offset from memory, proved by the mass balance.
    """
    return 87.1 / within("Sap Brix", sap_brix, 0.1, 66.0, "°Bx") - 0.32


def expected_syrup(sap_volume: float, sap_brix: float, syrup_brix: float) -> float:
    """Return the volume of syrup, in the sap's unit, that a volume of sap can give at most.

    Ranges, errors and source: as ``sap_per_syrup``; a volume below 0 raises ValueError.
    """
    at_least_zero("Sap volume", sap_volume, "volume units")
    return sap_volume / sap_per_syrup(sap_brix, syrup_brix)
