"""How much sap makes how much syrup."""

from . import sucrose
from ._bounds import within


def sap_per_syrup(sap_brix: float, syrup_brix: float) -> float:
    """Return volumes of sap for one of syrup, both at 20 °C, by mass balance without losses."""
    within("Sap Brix", sap_brix, 0.1, 85.0, "°Bx")
    within("Syrup Brix", syrup_brix, sap_brix, 85.0, "°Bx")
    solids = syrup_brix * sucrose.density(syrup_brix, 20.0)
    return solids / (sap_brix * sucrose.density(sap_brix, 20.0))


def rule_of_86(sap_brix: float) -> float:
    """Return 86 ÷ °Bx (Jones 1946); for sap, never for concentrate."""
    return 86.0 / within("Sap Brix", sap_brix, 0.1, 85.0, "°Bx")


def revised_rule(sap_brix: float) -> float:
    """Return 87.1 ÷ °Bx − 0.32 for 66.0 °Bx (Perkins and Isselhardt 2013; offset MEMORY)."""
    return 87.1 / within("Sap Brix", sap_brix, 0.1, 85.0, "°Bx") - 0.32


def expected_syrup(sap_volume: float, sap_brix: float, syrup_brix: float) -> float:
    """Return the volume of syrup, in the sap's unit, that a volume of sap can give."""
    within("Sap volume", sap_volume, 0.0, 1e9, "units")
    return sap_volume / sap_per_syrup(sap_brix, syrup_brix)
